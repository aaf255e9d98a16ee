"""Second method, parts that slip: what is held, cut and tied at every border of the intervals."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.second_loads import Ground
from fishbelly.member.second_slip_borders import Border, Held
from fishbelly.member.second_slip_layers import Stack
from fishbelly.member.second_statics import MOVES, WAYS, Frame

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Grip:
    """One thing that holds, or cuts, at a border.

    Parameters
    ----------
    border : int
        Which border.
    what : {"hold", "slip", "hinge"}
        A movement held, the slip of all layers held, or a hinge.
    layer : int
        Layer that a force along x enters there.
    level : ndarray, shape (2,)
        Its level from the line [m].
    way : int
        Direction held, an index into `second_statics.WAYS`.
    stiffness, at : float
        Stiffness, and where it is at rest.
    number : int
        5 times the number of the support plus the way; -1 for a reference.
    """

    border: int
    what: str
    layer: int
    level: Array
    way: int = 0
    stiffness: float = np.inf
    at: float = 0.0
    number: int = -1


def grips_of(ground: Ground, stack: Stack, f: Frame, sunk: Sequence[float], layer_at: Sequence[int]) -> list[Grip]:
    """Everything that holds or cuts.

    Parameters
    ----------
    ground, stack, f : Ground, Stack, Frame
        What stands there; nodes and holds.
    sunk : sequence of float
        Settlement of each support of the member [m].
    layer_at : sequence of int
        Layer that a force along x enters, border by border.
    """
    found = []
    supports = ground.member.supports
    for h in f.holds:
        border = f.borders[h.node]
        given = (border, "hold", layer_at[border], h.level, h.way)
        if h.only_reference:
            found.append(Grip(*given))
        for i, stiffness in h.supports:
            down = sunk[i] if WAYS[h.way] == "down" else 0.0
            found.append(Grip(*given, stiffness, down, 5 * i + h.way))
            if WAYS[h.way] == "rotation" and np.isinf(stiffness) and not supports[i].slip_free:
                found.append(Grip(border, "slip", 0, h.level))
    for node, level in f.hinges.items():
        border = f.borders[node]
        found.append(Grip(border, "hinge", layer_at[border], np.array([level, 0.0])))
    return found


def borders_of(
    ground: Ground,
    stack: Stack,
    there: NDArray[np.bool_],
    grips: Sequence[Grip],
    planes: int,
    along: Array,
) -> list[Border]:
    """Borders of all intervals; what nothing holds along x is held once, for reference.

    Parameters
    ----------
    ground, stack : Ground, Stack
        What stands there.
    there : ndarray of bool, shape (L, K)
        Whether a layer stands in an interval.
    grips : sequence of Grip
        What holds and cuts.
    planes : int
        1: the vertical plane alone.
    along : ndarray, shape (L, K + 1)
        Forces along x at the borders [N].
    """
    L, K = there.shape
    d = L + 2 * planes
    found = []
    for k in range(K + 1):
        mine = [g for g in grips if g.border == k]
        hinged = any(g.what == "hinge" for g in mine)
        left = there[:, k - 1] if k else np.zeros(L, dtype=bool)
        right = there[:, k] if k < K else np.zeros(L, dtype=bool)
        split = np.zeros(d, dtype=bool)
        split[:L] = (left != right) | hinged
        split[L + planes] = hinged
        blank = tuple(at for at in range(L) if not right[at] and (split[at] or k == 0)) if k < K else ()
        held: list[Held] = []
        tied: list[tuple[Array, Array]] = []
        for g in mine:
            row = _row(g, L, planes)
            if g.what == "hinge":
                if 0 < k < K:
                    tied.append((row, row))
            elif g.what == "slip":
                held += _slips(stack, left, right, d)
            else:
                held.append(Held(row, g.stiffness, g.at, bool(k < K and not _on_left(g, left)), g.number))
        push = np.zeros((2, d))
        for at in range(L):
            push[0 if left[at] else 1, at] += along[at, k]
        found.append(Border(split, blank, tuple(held), tuple(tied), push))
    for at, k in _floating(ground, stack, there, grips):
        row = np.zeros(d)
        row[at] = 1.0
        b = found[k]
        found[k] = Border(b.split, b.blank, (*b.held, Held(row, np.inf, after=True)), b.tied, b.push)
    return found


def _on_left(g: Grip, left: NDArray[np.bool_]) -> bool:
    """Whether a hold takes hold of what lies left of it, where that is there."""
    return bool(left[g.layer] if WAYS[g.way] == "along" else left.any())


def _row(g: Grip, L: int, planes: int) -> Array:
    """Movement that a grip holds, by those of one side."""
    row = np.zeros(L + 2 * planes)
    move = 0 if g.what == "hinge" else MOVES[g.way]
    if move == 0:
        row[g.layer] = 1.0
        row[L + planes :] = g.level[:planes]
    else:
        # movements count (u, down, across, rotation, rotation across)
        row[L + (move - 1 if move < 3 else planes + move - 3)] = 1.0
    return row


def _slips(stack: Stack, left: NDArray[np.bool_], right: NDArray[np.bool_], d: int) -> list[Held]:
    found = []
    for side, after in ((left, False), (right, True)):
        for t in stack.joints:
            if side[t.upper] and side[t.lower]:
                row = np.zeros(d)
                row[t.upper], row[t.lower] = 1.0, -1.0
                found.append(Held(row, np.inf, after=after))
    return found


def _floating(ground: Ground, stack: Stack, there: NDArray[np.bool_], grips: Sequence[Grip]) -> list[tuple[int, int]]:
    """Layers, and the border left of them, of whatever nothing holds along x: one of each group that hangs together."""
    L, K = there.shape
    group = np.arange(L * K).reshape(L, K)

    def join(one: int, other: int) -> None:
        if one != other:
            group[group == max(one, other)] = min(one, other)

    hinged = {g.border for g in grips if g.what == "hinge"}
    for at in range(L):
        for k in range(1, K):
            if there[at, k - 1] and there[at, k] and k not in hinged:
                join(group[at, k - 1], group[at, k])
    for g in grips:
        if g.what == "hinge" and 0 < g.border < K and there[g.layer, g.border - 1] and there[g.layer, g.border]:
            join(group[g.layer, g.border - 1], group[g.layer, g.border])
    for t, (start, end) in ((t, (t.start, t.end)) for t in stack.joints):
        for k in _joined_panels(ground, stack, t.upper, start, end, grips, there):
            if there[t.upper, k] and there[t.lower, k]:
                join(group[t.upper, k], group[t.lower, k])
    held = set()
    for g in grips:
        if g.what == "hold" and WAYS[g.way] == "along":
            side = g.border - 1 if g.border and there[g.layer, g.border - 1] else min(g.border, K - 1)
            held.add(int(group[g.layer, side]))
    loose: dict[int, tuple[int, int]] = {}
    for at in range(L):
        for k in range(K):
            if there[at, k] and int(group[at, k]) not in held:
                loose.setdefault(int(group[at, k]), (at, k))
    return list(loose.values())


def _joined_panels(
    ground: Ground,
    stack: Stack,
    upper: int,
    start: float,
    end: float,
    grips: Sequence[Grip],
    there: NDArray[np.bool_],
) -> list[int]:
    """Intervals in which a joint ties its two layers: everywhere along it where it has a stiffness, else where held."""
    i = ground.intervals
    part = ground.member.parts[stack.joints[upper - 1].part]
    middle = 0.5 * (i.a + i.b)
    if part.joined is not None and not part.joined.apart:
        return np.flatnonzero((middle > start) & (middle < end)).tolist()
    sides = {s for g in grips if g.what == "slip" for s in (g.border - 1, g.border)}
    return [s for s in sides if 0 <= s < there.shape[1]]
