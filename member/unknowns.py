"""The unknowns of a member: movements of its nodes and end forces of its segments, and what is left loose."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.equilibrium import turns_freely
from fishbelly.member.faults import Mechanism
from fishbelly.member.nodes import Layout

Array = NDArray[np.float64]

Dof = tuple[int, str]
"""A movement: node and "along", "down", "turn left", "turn right", "across" or "turn across"."""

HELD_BY = {
    "along": "along",
    "down": "down",
    "turn left": "rotation",
    "turn right": "rotation",
    "across": "across",
    "turn across": "rotation_across",
}
MOVES = {
    "along": "move along the member",
    "down": "move up and down",
    "turn left": "turn",
    "turn right": "turn",
    "across": "move sideways",
    "turn across": "turn sideways",
}
SUSPICIOUS = 300
"""Up to this many free movements a mechanism is looked for by singular values beforehand."""


@dataclass(frozen=True, eq=False)
class State:
    """A unit end force of a segment: its forces at the segment's points, and how its ends' movements strain it."""

    segment: int
    name: str
    movements: tuple[tuple[Dof, float], ...]


def movements(layout: Layout, planes: int) -> list[Dof]:
    """Every movement of the nodes that takes part: those of ends that turn freely are left out."""
    found: list[Dof] = []
    for k, node in enumerate(layout.nodes):
        if len(layout.holds_along) > 1:
            found.append((k, "along"))
        found.append((k, "down"))
        if not turns_freely(layout, k, 0):
            found.append((k, "turn left"))
            if node.hinge:
                found.append((k, "turn right"))
        if planes > 1:
            found.append((k, "across"))
            if not turns_freely(layout, k, 1):
                found.append((k, "turn across"))
    return found


def unit_states(layout: Layout, planes: int) -> list[State]:
    """Unknown end forces of the segments between nodes; moments that are known are left out."""
    states = []
    several = len(layout.holds_along) > 1
    for number, seg in enumerate(layout.segments):
        if seg.left is None or seg.right is None:
            continue
        i, j = seg.left, seg.right
        length = layout.nodes[j].at - layout.nodes[i].at
        if several:
            lean = (layout.nodes[j].level - layout.nodes[i].level) / length
            moves = [((j, "along"), 1.0), ((i, "along"), -1.0)]
            for p, way in enumerate(("down", "across")[:planes]):
                moves += [((j, way), -lean[p]), ((i, way), lean[p])]
            states.append(State(number, "N", tuple(moves)))
        for p, way in enumerate(("down", "across")[:planes]):
            turn_i = "turn across" if p else ("turn right" if layout.nodes[i].hinge else "turn left")
            turn_j = "turn across" if p else "turn left"
            chord = (((i, way), 1.0 / length), ((j, way), -1.0 / length))
            if not turns_freely(layout, i, p):
                states.append(State(number, f"left {p}", (((i, turn_i), 1.0), *chord)))
            if not turns_freely(layout, j, p):
                back = tuple((d, -v) for d, v in chord)
                states.append(State(number, f"right {p}", (((j, turn_j), -1.0), *back)))
    return states


def deformations(states: list[State], movable: list[Dof]) -> Array:
    """Deformation of each unit end force's segment by unit movements, shape (states, movements)."""
    columns = {d: k for k, d in enumerate(movable)}
    B = np.zeros((len(states), len(movable)))
    for row, state in enumerate(states):
        for dof, value in state.movements:
            B[row, columns[dof]] += value
    return B


def loose_movements(layout: Layout, free: list[Dof], B: Array, springs: Array) -> list[Dof]:
    """Movements that nothing resists and that may stay so (sideways, along); others are a mechanism."""
    if not free or len(free) > SUSPICIOUS:
        return []
    length = max(layout.nodes[-1].at - layout.nodes[0].at, 1e-3)
    scale = np.array([1.0 if d[1] in ("along", "down", "across") else 1.0 / length for d in free])
    # what the end forces and springs feel of each movement, made free of units
    strained = B * scale / np.maximum(np.abs(B * scale).max(axis=1, initial=0.0), 1e-300)[:, None]
    felt = np.vstack((strained, np.diag((springs > 0.0).astype(float))))
    vertical = np.array([d[1] in ("down", "turn left", "turn right") for d in free])
    loose: list[Dof] = []
    active = np.arange(len(free))
    while active.size:
        _, values, modes = np.linalg.svd(felt[:, active])
        full = np.concatenate((values, np.zeros(active.size - values.size)))
        if full[-1] > 1e-10 * max(full[0], 1e-300):
            break
        mode = np.abs(modes[-1])
        upright = np.where(vertical[active], mode, 0.0)
        if upright.max() > 1e-6:
            node, way = free[active[int(np.argmax(upright))]]
            raise Mechanism(f"the member can {MOVES[way]} at x = {layout.nodes[node].at:.6g} m")
        worst = active[int(np.argmax(mode))]
        loose.append(free[worst])
        active = active[active != worst]
    return loose
