"""The redundants that close the gaps: end moments of segments, axial forces, and movements of the nodes.

For each segment: deformations = flexibility · end forces + deformations by the loads = what the movements of its
nodes ask for; for each movement that is free: equilibrium of the node. Both together are one symmetric system
whose unknowns live at supports and hinges only. Rigidly held movements are known and leave the system; moments
at ends that turn freely are known too, so that a member may taper to a point there.
"""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Actions, Frame
from fishbelly.member.equilibrium import Determinate, couple_at, determinate
from fishbelly.member.faults import Mechanism
from fishbelly.member.forces import Forces
from fishbelly.member.nodes import Layout, Segment
from fishbelly.member.section_law import ElasticLaw, Strains
from fishbelly.member.unknowns import (
    HELD_BY,
    MOVES,
    Dof,
    State,
    deformations,
    loose_movements,
    movements,
    unit_states,
)

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Redundants:
    """Matrices of one layout and one law, independent of the loads.

    Parameters
    ----------
    layout : Layout
        Nodes and segments.
    states : tuple of State
        Unknown end forces.
    free : tuple of Dof
        Unknown movements.
    known : tuple of Dof
        Movements that are rigidly held.
    loose : tuple of Dof
        Movements held for reference only; no force may come on them.
    flexibility : ndarray, shape (u, u)
        Deformation by unit end forces.
    B_free, B_known : ndarray, shapes (u, f), (u, h)
        Deformation by unit movements.
    springs : ndarray, shape (f, f)
        Stiffness of springs on the free movements.
    """

    layout: Layout
    states: tuple[State, ...]
    free: tuple[Dof, ...]
    known: tuple[Dof, ...]
    loose: tuple[Dof, ...]
    flexibility: Array
    B_free: Array
    B_known: Array
    springs: Array
    units: Forces = field(repr=False)


@dataclass(frozen=True, eq=False)
class Solution:
    """What closes the gaps under one atom.

    `forces`: in the member; `movements`: of the nodes [m], [rad]; `reactions`: force of all supports of a node on
    each movement (positive as the movement).
    """

    forces: Forces
    movements: dict[Dof, float]
    reactions: dict[Dof, float]


def redundants(frame: Frame, layout: Layout, law: ElasticLaw, planes: int) -> Redundants:
    """Set up the unknowns of a layout.

    Raises
    ------
    Mechanism
        When the member can move without straining.
    """
    if not layout.nodes:
        raise Mechanism("there is no support: the member is held nowhere")
    movable = movements(layout, planes)
    states = unit_states(layout, planes)
    rigid = {d for d in movable if layout.nodes[d[0]].held(HELD_BY[d[1]])[1]}
    free = [d for d in movable if d not in rigid]
    B_all = deformations(states, movable)
    springs = np.array([layout.nodes[d[0]].held(HELD_BY[d[1]])[0] for d in free])
    loose = loose_movements(layout, free, B_all[:, [movable.index(d) for d in free]] if free else B_all[:, :0], springs)
    free = [d for d in free if d not in loose]
    known = [d for d in movable if d in rigid or d in loose]
    units = _unit_forces(frame, layout, states)
    flexibility = _flexibility(frame, layout, law, states, units)
    columns = {d: k for k, d in enumerate(movable)}
    return Redundants(
        layout,
        tuple(states),
        tuple(free),
        tuple(known),
        tuple(loose),
        flexibility,
        B_all[:, [columns[d] for d in free]],
        B_all[:, [columns[d] for d in known]],
        np.diag([layout.nodes[d[0]].held(HELD_BY[d[1]])[0] for d in free]),
        units,
    )


def _unit_forces(frame: Frame, layout: Layout, states: list[State]) -> Forces:
    """Forces of the unit states: N (4, K, n) and so on, states of different segments sharing a slot.

    Slots: 0 the axial state, then left and right of plane 0, left and right of plane 1.
    """
    panels = frame.profile.panels
    shape = panels.x.shape
    N, V, M = np.zeros((5, *shape)), np.zeros((2, 5, *shape)), np.zeros((2, 5, *shape))
    for seg in layout.segments:
        if seg.left is None or seg.right is None:
            continue
        part = slice(seg.first, seg.stop)
        i, j = layout.nodes[seg.left], layout.nodes[seg.right]
        length = j.at - i.at
        t = (panels.x[part] - i.at) / length
        back = (j.at - panels.x[part]) / length
        N[0, part] = 1.0
        for p in range(2):
            M[p, 0, part] = -(i.level[p] * back + j.level[p] * t)
            V[p, 0, part] = -(j.level[p] - i.level[p]) / length
            M[p, 1 + 2 * p, part], V[p, 1 + 2 * p, part] = back, -1.0 / length
            M[p, 2 + 2 * p, part], V[p, 2 + 2 * p, part] = t, 1.0 / length
    return Forces(N, V, M)


SLOT = {"N": 0, "left 0": 1, "right 0": 2, "left 1": 3, "right 1": 4}


def virtual_work(frame: Frame, forces: Forces, strains: Strains) -> Array:
    """Work of forces on strains over each panel, leading axes broadcast, shape (..., K)."""
    density = forces.N * strains.axial
    for p in range(2):
        density = density + forces.M[p] * strains.curvature[p] + forces.V[p] * strains.shear[p]
    return np.asarray((density * frame.profile.panels.stretch) @ frame.profile.panels.rule.weights)


def _flexibility(frame: Frame, layout: Layout, law: ElasticLaw, states: list[State], units: Forces) -> Array:
    F = np.zeros((len(states), len(states)))
    if not states:
        return F
    if not getattr(law, "local", True):
        return _flexibility_together(frame, layout, law, states, units)
    used = sorted({SLOT[s.name] for s in states})
    chosen = Forces(units.N[used], units.V[:, used], units.M[:, used])
    strains = law.strains(chosen)
    work: dict[tuple[int, int], Array] = {}
    for a, i in enumerate(used):
        one = Forces(chosen.N[a], chosen.V[:, a], chosen.M[:, a])
        for b, j in enumerate(used):
            if j < i:
                continue
            other = Strains(strains.axial[b], strains.curvature[:, b], strains.shear[:, b])
            work[i, j] = work[j, i] = virtual_work(frame, one, other)
    by_segment: dict[int, list[int]] = {}
    for k, state in enumerate(states):
        by_segment.setdefault(state.segment, []).append(k)
    for number, rows in by_segment.items():
        seg = layout.segments[number]
        for i in rows:
            for j in rows:
                F[i, j] = work[SLOT[states[i].name], SLOT[states[j].name]][seg.first : seg.stop].sum()
    return F


AT_ONCE = 24
"""Unit states that a law which is not local is given at once."""


def _flexibility_together(frame: Frame, layout: Layout, law: ElasticLaw, states: list[State], units: Forces) -> Array:
    """Flexibility for a law that is not local: a unit state strains every segment, so each stands alone."""
    F = np.zeros((len(states), len(states)))
    shape = units.N.shape[1:]
    for start in range(0, len(states), AT_ONCE):
        some = states[start : start + AT_ONCE]
        alone = Forces(np.zeros((len(some), *shape)), *(np.zeros((2, len(some), *shape)) for _ in range(2)))
        for k, state in enumerate(some):
            seg, slot = layout.segments[state.segment], SLOT[state.name]
            part = slice(seg.first, seg.stop)
            alone.N[k, part] = units.N[slot, part]
            alone.V[:, k, part], alone.M[:, k, part] = units.V[:, slot, part], units.M[:, slot, part]
        strains = law.strains(alone)
        for slot in sorted({SLOT[s.name] for s in states}):
            one = Forces(units.N[slot], units.V[:, slot], units.M[:, slot])
            one = Forces(one.N, one.V[:, None], one.M[:, None])
            work = virtual_work(frame, one, strains)
            for i, state in enumerate(states):
                if SLOT[state.name] == slot:
                    seg = layout.segments[state.segment]
                    F[i, start : start + len(some)] = work[:, seg.first : seg.stop].sum(axis=1)
    return 0.5 * (F + F.T)


def solve(
    frame: Frame,
    r: Redundants,
    law: ElasticLaw,
    loads: list[Actions],
    free: list[Forces],
    sinks: list[dict[Dof, Array]],
    planes: int,
) -> list[Solution]:
    """Close the gaps under several atoms at once.

    Parameters
    ----------
    frame, r, law : Frame, Redundants, ElasticLaw
        Grid, unknowns and section law.
    loads : list of Actions
        One for each atom.
    free : list of Forces
        Forces that hold free strain back, for each atom.
    sinks : list of dict
        For each atom: movements of supports, as [spring stiffness times settlement, rigid settlement].
    planes : int
        1: the vertical plane alone.

    Returns
    -------
    list of Solution
    """
    released = [determinate(frame, r.layout, a, planes) for a in loads]
    gaps = np.array([_gaps(frame, r, law, d.forces, f) for d, f in zip(released, free, strict=True)])
    known = np.array([[s.get(d, np.zeros(2))[1] for d in r.known] for s in sinks]).reshape(len(loads), len(r.known))
    pushed = np.array(
        [[_out_of_balance(r.layout, d, a, dof) for dof in r.free] for d, a in zip(released, loads, strict=True)]
    )
    pushed = pushed.reshape(len(loads), len(r.free))
    springs = np.array([[s.get(d, np.zeros(2))[0] for d in r.free] for s in sinks]).reshape(pushed.shape)
    right = np.hstack((gaps - known @ r.B_known.T, pushed + springs)).T
    u = len(r.states)
    matrix = np.block([[-r.flexibility, r.B_free], [r.B_free.T, r.springs]])
    found = _solved(matrix, right) if matrix.size else right
    return [
        _solution(r, released[k], loads[k], found[:u, k], found[u:, k], known[k], sinks[k]) for k in range(len(loads))
    ]


def _gaps(frame: Frame, r: Redundants, law: ElasticLaw, forces: Forces, free: Forces) -> Array:
    """Deformation of each unknown end force under the loads on the released member."""
    if not r.states:
        return np.zeros(0)
    strains = law.strains(free.plus(forces))
    result = np.zeros(len(r.states))
    for slot in {SLOT[s.name] for s in r.states}:
        one = Forces(r.units.N[slot], r.units.V[:, slot], r.units.M[:, slot])
        work = virtual_work(frame, one, strains)
        for k, state in enumerate(r.states):
            if SLOT[state.name] == slot:
                seg = r.layout.segments[state.segment]
                result[k] = work[seg.first : seg.stop].sum()
    return result


def _out_of_balance(layout: Layout, d: Determinate, a: Actions, dof: Dof) -> float:
    """Load on a movement of a node that the released member does not carry."""
    node, way = dof
    n = layout.nodes[node]
    p = 1 if "across" in way else 0
    if way == "along":
        load = float(a.F[n.border])
    elif way in ("down", "across"):
        load = float(a.P[p, n.border])
    else:
        load = couple_at(layout, node, a, p)
        # a moment that goes as a hinge opens turns the two sides against each other, in the vertical plane
        kink = 0.0 if a.opened is None or p else float(a.opened[n.border])
        load = -kink if way == "turn right" else load + kink
    for number, seg in enumerate(layout.segments):
        for here, ends, sign in ((seg.left, d.left[number], -1.0), (seg.right, d.right[number], 1.0)):
            if here == node and ends is not None and _meets(way, n.hinge, sign):
                load -= _end_force(ends, way, p, sign)
    return load


def _meets(way: str, hinge: bool, sign: float) -> bool:
    """Whether a turn belongs to the segment on this side: at a hinge each side turns by itself."""
    if not hinge or way not in ("turn left", "turn right"):
        return True
    return (way == "turn left") == (sign > 0.0)


def _end_force(ends: object, way: str, p: int, sign: float) -> float:
    """Force that the node puts on the end of a segment, along a movement; `sign` -1 at its left end."""
    if way == "along":
        return sign * ends.N  # type: ignore[attr-defined]
    if way in ("down", "across"):
        return float(sign * ends.V[p])  # type: ignore[attr-defined]
    return float(-sign * ends.M[p])  # type: ignore[attr-defined]


def _solved(matrix: Array, right: Array) -> Array:
    """Solve a symmetric indefinite system, scaled, with one refinement on a residual of higher precision."""
    scale = np.ones(matrix.shape[0])
    for _ in range(4):
        size = np.abs(matrix * scale[:, None] * scale).max(axis=1)
        scale /= np.sqrt(np.where(size > 0.0, size, 1.0))
    scale = np.exp2(np.round(np.log2(scale)))
    scaled = matrix * scale[:, None] * scale
    try:
        x = np.linalg.solve(scaled, right * scale[:, None])
        wide, target = scaled.astype(np.longdouble), (right * scale[:, None]).astype(np.longdouble)
        if matrix.shape[0] <= 400:
            for _ in range(2):
                x = x + np.linalg.solve(scaled, (target - wide @ x.astype(np.longdouble)).astype(float))
    except np.linalg.LinAlgError:
        raise Mechanism("the member can move without straining") from None
    if not np.all(np.isfinite(x)) or np.abs(x).max(initial=0.0) > 1e14 * max(
        np.abs(right * scale[:, None]).max(), 1e-300
    ):
        raise Mechanism("the member can move without straining")
    return np.asarray(x * scale[:, None])


def _solution(
    r: Redundants, d: Determinate, a: Actions, s: Array, moved: Array, known: Array, sinks: dict[Dof, Array]
) -> Solution:
    forces = Forces(d.forces.N.copy(), d.forces.V.copy(), d.forces.M.copy())
    for value, state in zip(s, r.states, strict=True):
        seg: Segment = r.layout.segments[state.segment]
        part, slot = slice(seg.first, seg.stop), SLOT[state.name]
        forces.N[part] += value * r.units.N[slot, part]
        forces.V[:, part] += value * r.units.V[:, slot, part]
        forces.M[:, part] += value * r.units.M[:, slot, part]
    movements = dict(zip(r.free, moved.tolist(), strict=True)) | dict(zip(r.known, known.tolist(), strict=True))
    carried = dict(zip(r.free, (r.B_free.T @ s).tolist(), strict=True)) | dict(
        zip(r.known, (r.B_known.T @ s).tolist(), strict=True)
    )
    reactions = {dof: value - _out_of_balance(r.layout, d, a, dof) for dof, value in carried.items()}
    size = max((abs(v) for v in reactions.values()), default=0.0)
    for dof in r.loose:
        if abs(reactions[dof]) > 1e-7 * max(size, 1e-300) and abs(reactions[dof]) > 1e-9:
            node, way = dof
            raise Mechanism(f"the member can {MOVES[way]} at x = {r.layout.nodes[node].at:.6g} m, and a load pushes it")
    return Solution(forces, movements, reactions)
