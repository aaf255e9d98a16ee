"""Second method, parts that slip: what layers, supports and hinges do where two intervals meet.

Movements at a border are q = (u of each layer on the line, deflection, rotation), forces f = (N of each layer, V, -M):
their products are work. Movements on both sides follow from those of the border, of which some are held; forces on
both sides and from outside are in balance in every movement that is left.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.second_slip_chain import Between

Array = NDArray[np.float64]

_DEPENDENT = 1e-10
"""Below this singular value, of rows of length one, conditions say the same twice."""


@dataclass(frozen=True, eq=False)
class Held:
    """A movement that is held at a border: rigidly, where the stiffness is infinite, or by a spring.

    Parameters
    ----------
    row : ndarray, shape (d,)
        The movement by those of one side.
    stiffness : float
        Stiffness [N/m], [N m].
    at : float
        Where it is at rest.
    after : bool
        Movements of the right side count, else of the left.
    number : int
        Which hold it is of, -1 for none.
    """

    row: Array
    stiffness: float
    at: float = 0.0
    after: bool = False
    number: int = -1


@dataclass(frozen=True, eq=False)
class Border:
    """One border.

    Parameters
    ----------
    split : ndarray of bool, shape (d,)
        Movements that are not the same on both sides.
    blank : ndarray of int
        Movements on the right of layers that are not there: held.
    held : tuple of Held
        Movements that are held.
    tied : tuple of (ndarray, ndarray)
        Movements of the left and of the right side that are the same: at a hinge.
    push : ndarray, shape (2, d)
        Forces from outside on the left and on the right side.
    """

    split: NDArray[np.bool_]
    blank: tuple[int, ...]
    held: tuple[Held, ...]
    tied: tuple[tuple[Array, Array], ...]
    push: Array


@dataclass(frozen=True, eq=False)
class _Set:
    """A border's movements and conditions in scaled terms."""

    before: Array
    after: Array
    H: Array
    free: Array
    rest: Array
    spring: Array
    pressed: Array
    push: Array
    holds: tuple[Held, ...]


@dataclass(frozen=True, eq=False)
class Scale:
    """Units of movements and forces, shape (d,) each; a product of the two is always the same work."""

    q: Array
    f: Array

    @property
    def work(self) -> float:
        """Unit of work [N m]."""
        return float(self.q[0] * self.f[0])


def _set_of(border: Border, scale: Scale, ends: tuple[bool, bool]) -> _Set:
    """Number the movements of a border; `ends`: whether there is an interval on its left, and on its right."""
    d = border.split.size
    columns = np.arange(d)
    second = columns.copy()
    if all(ends):
        second[border.split] = d + np.arange(int(border.split.sum()))
    count = int(second.max()) + 1
    before, after = np.eye(count)[columns], np.eye(count)[second]
    rows: list[tuple[Array, float, Held | None]] = [(after[k], 0.0, None) for k in border.blank if ends[1]]
    rows += [(r @ before - s @ after, 0.0, None) for r, s in _scaled_pairs(border.tied, scale.q)]
    spring, pressed = np.zeros((count, count)), np.zeros(count)
    for h in border.held:
        row = (h.row * scale.q) @ (after if h.after and ends[1] else before)
        size = float(np.linalg.norm(row))
        if np.isinf(h.stiffness):
            rows.append((row / size, h.at / size, h))
        else:
            spring += h.stiffness * np.outer(row, row) / scale.work
            pressed += h.stiffness * h.at * row / scale.work
    H = np.array([r for r, _, _ in rows]).reshape(len(rows), count)
    _, singular, V = np.linalg.svd(H) if rows else (None, np.zeros(0), np.eye(count))
    rank = int((singular > _DEPENDENT).sum())
    rest = np.linalg.lstsq(H, np.array([s for _, s, _ in rows]), rcond=None)[0] if rows else np.zeros(count)
    push = (border.push[0] * scale.q) @ before + (border.push[1] * scale.q) @ after
    holds = tuple(h for _, _, h in rows if h is not None)
    return _Set(before, after, H, V[rank:].T, rest, spring, pressed, push / scale.work, holds)


def _scaled_pairs(pairs: Sequence[tuple[Array, Array]], q: Array) -> list[tuple[Array, Array]]:
    found = []
    for one, other in pairs:
        size = float(np.linalg.norm(np.concatenate((one * q, other * q))))
        found.append((one * q / size, other * q / size))
    return found


def conditions(borders: Sequence[Border], scale: Scale) -> Between:
    """Conditions on the states y = (q, f) in units of `scale`, forces counted as their work counts."""
    last = len(borders) - 1
    inner = [_rows(_set_of(b, scale, (True, True)), (True, True)) for b in borders[1:last]]
    first = _rows(_set_of(borders[0], scale, (False, True)), (False, True))
    end = _rows(_set_of(borders[last], scale, (True, False)), (True, False))
    m = 2 * borders[0].split.size
    C = np.array([r[0] for r in inner]).reshape(-1, m, m)
    D = np.array([r[1] for r in inner]).reshape(-1, m, m)
    right = np.array([r[2] for r in inner]).reshape(-1, m)
    return Between(C, D, right, (first[1], first[2]), (end[0], end[2]))


def _rows(s: _Set, ends: tuple[bool, bool]) -> tuple[Array, Array, Array]:
    """Conditions on the states left and right of a border: compatibility, then balance."""
    d = s.before.shape[0]
    G = np.concatenate([side for side, there in ((s.before, ends[0]), (s.after, ends[1])) if there])
    moves = G @ s.free
    U, singular, V = np.linalg.svd(moves)
    rank = singular.size
    closing = U[:, rank:].T
    by_moves = V.T @ (U[:, :rank] / singular).T if rank else np.zeros((0, G.shape[0]))
    # a = by_moves (q - G rest); balance: free' (after' f+ - before' f- + push + pressed - spring (free a + rest)) = 0
    springs = -s.free.T @ s.spring @ s.free @ by_moves
    known = s.free.T @ (s.push + s.pressed - s.spring @ s.rest) - springs @ (G @ s.rest)
    zero = np.zeros((closing.shape[0], d))
    left = right = np.zeros((closing.shape[0] + s.free.shape[1], 2 * d))
    if ends[0]:
        left = np.block([[closing[:, :d], zero], [springs[:, :d], -s.free.T @ s.before.T]])
    if ends[1]:
        half = slice(d, None) if ends[0] else slice(None, d)
        right = np.block([[closing[:, half], zero], [springs[:, half], s.free.T @ s.after.T]])
    return left, right, np.concatenate((closing @ (G @ s.rest), -known))


def reactions(
    borders: Sequence[Border], scale: Scale, before: Sequence[Array | None], after: Sequence[Array | None]
) -> Mapping[int, float]:
    """Force of every numbered hold on the member, by states (in units) left and right of each border."""
    found: dict[int, float] = {}
    for border, left, right in zip(borders, before, after, strict=True):
        if not any(h.number >= 0 for h in border.held):
            continue
        s = _set_of(border, scale, (left is not None, right is not None))
        d = border.split.size
        moved, balance = np.zeros(s.push.size), s.push.copy()
        for state, side, sign in ((left, s.before, -1.0), (right, s.after, 1.0)):
            if state is not None:
                moved = np.where(side.any(axis=0), side.T @ state[:d], moved)
                balance += sign * (side.T @ state[d:])
        balance += s.pressed - s.spring @ moved
        forces = np.linalg.lstsq(s.H.T, -balance, rcond=None)[0][s.H.shape[0] - len(s.holds) :]
        for h, force in zip(s.holds, forces, strict=True):
            if h.number < 0:
                continue
            size = float(np.linalg.norm((h.row * scale.q) @ (s.after if h.after and right is not None else s.before)))
            found[h.number] = found.get(h.number, 0.0) + float(force) * scale.work / size
        for h in border.held:
            if h.number >= 0 and np.isfinite(h.stiffness):
                row = (h.row * scale.q) @ (s.after if h.after and right is not None else s.before)
                found[h.number] = h.stiffness * (h.at - float(row @ moved))
    return found
