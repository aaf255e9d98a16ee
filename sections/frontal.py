"""Elimination of the unknowns of many elements, neighbours first, for several stations at once.

The elements are halved again and again along the longer side of their extent. Inside each half the unknowns that
no other half knows are eliminated; what is left, a small dense matrix, is merged with that of the other half. Only
products of the loads with the solution are needed for an energy, and they come out of the elimination by itself;
the solution is found on the way back when asked for.

Source: A. George, Nested dissection of a regular finite element mesh, SIAM J. Numer. Anal. 10 (1973) 345-363, from
memory.
"""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Index = NDArray[np.intp]

_LEAF = 6
"""Elements that are put together before anything is eliminated."""
_MANY = 100
"""Elements from which on it pays to count rows and columns of them rather than metres."""


@dataclass(eq=False)
class Front:
    """One step of the elimination.

    Parameters
    ----------
    known : ndarray of int
        Unknowns of its matrix, those to be eliminated first.
    gone : int
        How many are eliminated.
    elements : ndarray of int, shape (e,)
        Elements put in.
    places : ndarray of int, shape (e, m)
        Where their unknowns go; past the last for those that are held.
    merged : list of (Front, ndarray)
        Fronts put in and where their remaining unknowns go.
    """

    known: Index
    gone: int
    elements: Index
    places: Index
    merged: list[tuple[Front, Index]]
    solved: Array | None = field(default=None, repr=False)


def fronts(unknowns: Index, middles: Array) -> list[Front]:
    """Order of elimination.

    Parameters
    ----------
    unknowns : ndarray of int, shape (N, m)
        Unknowns of each element, none twice; -1 for those that are held.
    middles : ndarray, shape (N, 2)
        A point of each element [m].

    Returns
    -------
    list of Front
        Each after those merged into it; the last eliminates all that is left.
    """
    count = int(unknowns.max()) + 1
    order = _halved(np.arange(len(unknowns)), _ranks(middles) if len(middles) > _MANY else middles)
    place = np.empty(len(unknowns), dtype=np.intp)
    place[np.concatenate(order)] = np.arange(len(unknowns))
    held = unknowns < 0
    first, last = np.full(count, len(unknowns)), np.full(count, -1)
    safe = np.where(held, 0, unknowns)
    spread = np.broadcast_to(place[:, None], unknowns.shape)
    np.minimum.at(first, safe[~held], spread[~held])
    np.maximum.at(last, safe[~held], spread[~held])
    made: list[Front] = []
    _build(order, 0, len(order), unknowns, first, last, np.cumsum([0, *(len(o) for o in order)]), made)
    return made


def _ranks(middles: Array) -> Array:
    """Number of the row and of the column that each point stands in."""
    near = 1e-5 * np.ptp(middles, axis=0)
    rounded = np.round(middles / np.where(near > 0.0, near, 1.0))
    return np.stack([np.unique(c, return_inverse=True)[1] for c in rounded.T], axis=1).astype(float)


def _halved(elements: Index, middles: Array) -> list[Index]:
    if len(elements) <= _LEAF:
        return [elements]
    here = middles[elements]
    extent = np.ptp(here, axis=0)
    ordered = elements[np.argsort(here[:, int(extent.argmax())], kind="stable")]
    half = len(ordered) // 2
    return _halved(ordered[:half], middles) + _halved(ordered[half:], middles)


def _build(
    leaves: list[Index], a: int, b: int, unknowns: Index, first: Index, last: Index, starts: Index, made: list[Front]
) -> Front:
    merged: list[Front] = []
    if b - a == 1:
        rows = unknowns[leaves[a]]
        mine = _each_once(rows[rows >= 0], first.size)
    else:
        middle = (a + b) // 2
        merged = [_build(leaves, *ends, unknowns, first, last, starts, made) for ends in ((a, middle), (middle, b))]
        mine = _each_once(np.concatenate([f.known[f.gone :] for f in merged]), first.size)
    inside = (first[mine] >= starts[a]) & (last[mine] < starts[b])
    known = np.concatenate((mine[inside], mine[~inside]))
    # the last two places are those of -1 and -2
    where = np.full(first.size + 2, known.size)
    where[known] = np.arange(known.size)
    elements = leaves[a] if b - a == 1 else leaves[a][:0]
    merges = [(f, where[f.known[f.gone :]]) for f in merged]
    made.append(Front(known, int(inside.sum()), elements, where[unknowns[elements]], merges))
    return made[-1]


def _each_once(numbers: Index, count: int) -> Index:
    """Numbers below `count` that occur, in order; quicker here than sorting them."""
    there = np.zeros(count, dtype=bool)
    there[numbers] = True
    return np.flatnonzero(there)


def eliminate(order: list[Front], matrices: Array, loads: Array, keep: bool = False) -> Array:
    """Products of the loads with the solution.

    Parameters
    ----------
    order : list of Front
        From `fronts`.
    matrices : ndarray, shape (N, T, m, m)
        Symmetric stiffness of each element.
    loads : ndarray, shape (N, T, m, R)
        R load cases.
    keep : bool
        Whether `solution` will be asked for.

    Returns
    -------
    ndarray, shape (T, R, R)
        b_i · K⁻¹ b_j for all pairs of load cases.
    """
    stations, cases = loads.shape[1], loads.shape[3]
    total = np.zeros((stations, cases, cases))
    left: dict[int, Array] = {}
    rows = np.concatenate((matrices, loads), axis=3)
    for front in order:
        size, g = front.known.size, front.gone
        if front.elements.size:
            k = _put_together(front, rows)
        else:
            k = np.zeros((stations, size, size + cases))
        for other, at in front.merged:
            k[:, at[:, None], np.concatenate((at, np.arange(size, size + cases)))] += left.pop(id(other))
        if g:
            x = np.asarray(np.linalg.solve(k[:, :g, :g], k[:, :g, g:]), dtype=float)
            total += np.swapaxes(k[:, :g, size:], 1, 2) @ x[:, :, size - g :]
            rest = k[:, g:, g:] - np.swapaxes(k[:, :g, g:size], 1, 2) @ x
            front.solved = x if keep else None
        else:
            rest = k
        left[id(front)] = rest
    return total


def _put_together(front: Front, rows: Array) -> Array:
    """Matrix and loads of the elements of a front, shape (T, known, known + R); rows of shape (N, T, m, m + R)."""
    size, cases = front.known.size, rows.shape[3] - rows.shape[2]
    wide = size + cases + 1
    at = front.places
    columns = np.empty((at.shape[0], at.shape[1] + cases), dtype=np.intp)
    columns[:, : at.shape[1]] = np.where(at == size, size + cases, at)
    columns[:, at.shape[1] :] = np.arange(size, size + cases)
    place = (at[:, :, None] * wide + columns[:, None, :]).ravel()
    values = rows[front.elements]
    # what is held goes to a last row and a last column, which are left off
    summed = [np.bincount(place, values[:, t].ravel(), (size + 1) * wide) for t in range(values.shape[1])]
    together = np.asarray(np.stack(summed), dtype=float)
    return together.reshape(-1, size + 1, wide)[:, :size, :-1]


def solution(order: list[Front], count: int) -> Array:
    """Solution of the load cases after `eliminate` with `keep`, shape (T, count, R)."""
    last = next(f.solved for f in order if f.solved is not None)
    cases = last.shape[2] - next(f.known.size - f.gone for f in order if f.solved is not None)
    result = np.zeros((last.shape[0], count, cases))
    for front in reversed(order):
        if front.solved is None:
            continue
        g, rest = front.gone, front.known[front.gone :]
        result[:, front.known[:g]] = front.solved[:, :, rest.size :] - front.solved[:, :, : rest.size] @ result[:, rest]
        front.solved = None
    return result
