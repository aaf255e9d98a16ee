"""Second method, one step: what loads do on one set of moduli and supports, its shape, reactions and own error."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.second_grid import POINTS, RULE, typical
from fishbelly.member.second_loads import Ground, LoadShare, Pushes, pushes
from fishbelly.member.second_sections import Flexibility, Sampled, Slide, flexibility
from fishbelly.member.second_segments import (
    Fields,
    Strain,
    end_movements,
    load_fields,
    strains,
    unit_fields,
)
from fishbelly.member.second_solve import solve_parameters
from fishbelly.member.second_statics import Frame, Parameters, System, frame, sinks

Array = NDArray[np.float64]

UNCOUPLED = 1e-12
"""Below this share of the section's size, or of the loads, the two planes have nothing to do with each other."""
_SAFETY = 5.0
"""The last coefficients understate what is missing where a section has a kink; from trials with such members."""


@dataclass(frozen=True, eq=False)
class Solved:
    """One share's solution."""

    ground: Ground
    frame: Frame
    loads: Pushes
    law: Flexibility
    fields: Fields
    strain: Strain
    parameters: Parameters
    settles: bool


@dataclass(frozen=True, eq=False)
class Shape:
    """Rotation and deflection at the left end of each interval (2, K) and at its points (2, K, n)."""

    rotation: Array
    start: Array
    deflection: Array
    slope: Array


def solve_share(ground: Ground, share: LoadShare, slide: Slide | None, lifted: frozenset[str]) -> Solved:
    """Solve for the loads of a share, bearings that have lifted off left out."""
    loads = pushes(ground, share)
    law = flexibility(ground.sections, np.asarray(share.E, dtype=float))
    planes = 2 if coupled(ground, law, loads) else 1
    f = frame(ground, lifted, planes)
    return solve_law(ground, f, loads, with_shear(ground, law, slide, planes), sinks(ground, f, share))


def with_shear(ground: Ground, law: Flexibility, slide: Slide | None, planes: int) -> Flexibility:
    """Add 1/GA to a flexibility; without any it is rigid in shear."""
    if slide is None:
        return law
    i = ground.intervals
    # the mixed flexibility goes with the second plane
    slides = [np.asarray(slide(i.x.ravel(), p)).reshape(-1, POINTS) for p in range(planes + planes // 2)]
    return Flexibility(law.EA, law.c, law.bend, np.stack([*slides, *[np.zeros(i.x.shape)] * (3 - len(slides))]))


def solve_law(
    ground: Ground,
    f: Frame,
    loads: Pushes,
    law: Flexibility,
    down: Array,
    refine: bool = True,
    opened: Mapping[int, float] | None = None,
) -> Solved:
    """Solve one frame with one flexibility.

    Parameters
    ----------
    ground, f, loads, law : Ground, Frame, Pushes, Flexibility
        What stands there, what holds it, what acts on it, how it gives.
    down : ndarray, shape (holds, 2)
        Settlements, as `sinks` gives them.
    refine : bool
        Refine the solution on residuals of higher precision.
    opened : mapping of int to float, optional
        Moment about the centroid just right of a hinge, by node, where it is not zero [N m].

    Raises
    ------
    Mechanism
        When something can move freely.
    """
    own, over = load_fields(f.cut, loads)
    free = Fields(own.N + loads.free[0], own.V, own.M + loads.free[1:])
    units = unit_fields(f.cut)
    left, right = end_movements(f.cut, strains(law, ground.line, units))
    by_loads = sum(end_movements(f.cut, _slid(strains(law, ground.line, free), loads)))
    bend = typical(law.bend[0, 0])
    system = System(f, loads.jumps, down, opened or {})
    found = solve_parameters(system, over, left, right, np.asarray(by_loads), bend, refine)
    ends = np.where(f.cut.from_left[:, None], found.left[f.cut.segment], found.right[f.cut.segment])
    N = own.N + ends[:, :1]
    V = own.V + ends[:, 1:3].T[:, :, None]
    M = own.M + ends[:, 3:].T[:, :, None] + ends[:, 1:3].T[:, :, None] * f.cut.lever
    strained = Fields(N + loads.free[0], V, M + loads.free[1:])
    strain = _slid(strains(law, ground.line, strained), loads)
    return Solved(ground, f, loads, law, Fields(N, V, M), strain, found, bool(np.any(down)))


def _slid(strain: Strain, loads: Pushes) -> Strain:
    """Add the shear angle that comes without a shear force."""
    return strain if loads.angle is None else Strain(strain.axial, strain.curvature, strain.angle + loads.angle)


def coupled(ground: Ground, law: Flexibility, loads: Pushes) -> bool:
    """Whether anything may move the member sideways."""
    bend = law.bend
    if loads.angle is not None and np.any(loads.angle[1]):
        return True
    if np.any(bend[0, 1] ** 2 > UNCOUPLED**2 * bend[0, 0] * bend[1, 1]):
        return True
    size = np.sqrt(1.0 / (bend[1, 1] * law.EA))
    aside = np.abs(law.c[1] - ground.line[1]), np.abs(ground.centroid[1])
    if any(np.any(v > UNCOUPLED * size) for v in aside):
        return True
    force = np.abs(loads.jumps[0]).max() + np.abs(loads.n).max() * ground.member.length + np.abs(loads.free[0]).max()
    force += (np.abs(loads.jumps[3]).max() + np.abs(loads.free[1]).max()) / size.max()
    turn = max(float(np.abs(v).max()) for v in (loads.jumps[4], loads.m[1], loads.free[2]))
    return bool(np.any(loads.q[1]) or np.any(loads.jumps[2]) or turn > 10.0 * UNCOUPLED * force * size.max())


def shape_of(s: Solved) -> Shape:
    """Integrate curvature twice and shear once, from node to node; a free left end from its root."""
    cut, strain = s.frame.cut, s.strain
    i = cut.intervals
    count = i.a.size
    h = i.b - i.a
    bent = strain.curvature * i.stretch
    whole = bent @ RULE.weights
    ahead = (bent * (i.b[:, None] - i.x)) @ RULE.weights
    back = (bent * (i.x - i.a[:, None])) @ RULE.weights
    sheared = (strain.angle * i.stretch) @ RULE.weights
    rotation, start = np.zeros((2, count)), np.zeros((2, count))
    for k, seg in enumerate(cut.stretches):
        part = slice(seg.first, seg.stop)
        if k == 0 and cut.free_left:
            turn, move = s.parameters.before[1, 3:], s.parameters.before[1, 1:3]
            gain = np.cumsum(whole[:, part][:, ::-1], axis=1)[:, ::-1]
            rotation[:, part] = turn[:, None] + gain
            end = rotation[:, part] - whole[:, part]
            steps = end * h[part] + back[:, part] + sheared[:, part]
            start[:, part] = move[:, None] - np.cumsum(steps[:, ::-1], axis=1)[:, ::-1]
        else:
            turn, move = s.parameters.after[k, 3:], s.parameters.after[k, 1:3]
            gain = np.cumsum(whole[:, part], axis=1)
            rotation[:, part] = turn[:, None] - np.concatenate((np.zeros((2, 1)), gain[:, :-1]), axis=1)
            steps = rotation[:, part] * h[part] - ahead[:, part] + sheared[:, part]
            gone = np.cumsum(steps, axis=1)
            start[:, part] = move[:, None] + np.concatenate((np.zeros((2, 1)), gone[:, :-1]), axis=1)
    slope = rotation[:, :, None] - bent @ RULE.running.T
    deflection = start[:, :, None] + ((slope + strain.angle) * i.stretch) @ RULE.running.T
    if s.frame.planes == 1:
        rotation[1] = start[1] = 0.0
        deflection[1] = slope[1] = 0.0
    return Shape(rotation, start, deflection, slope)


def deflections_at(s: Solved, shape: Shape, places: Array) -> Array:
    """Deflections at places, shape (2, X)."""
    i = s.frame.cut.intervals
    k = np.clip(np.searchsorted(i.a, places, side="right") - 1, 0, i.a.size - 1)
    weights = RULE.up_to(i.local(k, places))
    rate = (shape.slope + s.strain.angle) * i.stretch
    if s.frame.planes == 1:
        rate[1] = 0.0
    return np.asarray(shape.start[:, k] + (rate[:, k] * weights).sum(axis=-1))


def reactions_of(s: Solved, share: LoadShare | None = None) -> Array:
    """Force of each support on the member: springs by what they are pressed, rigid supports the rest."""
    member = s.ground.member
    found = np.zeros((len(member.supports), 5))
    for hold, force in zip(s.frame.holds, s.parameters.forces, strict=True):
        rest = float(force)
        rigid = [i for i, k in hold.supports if np.isinf(k)]
        moved = float(hold.movement[s.frame.active] @ s.parameters.before[hold.node, s.frame.active])
        for i, stiffness in hold.supports:
            if np.isfinite(stiffness):
                support = member.supports[i]
                settles = share is not None and support.sinks and hold.way == 0
                sunk = share.factor(support) * support.sinks if share is not None and settles else 0.0
                part = float(force) if len(hold.supports) == 1 else stiffness * (sunk - moved)
                found[i, hold.way] += part
                rest -= part
        for i in rigid:
            found[i, hold.way] += rest / len(rigid)
    return found


def error_of(s: Solved, sampled: Sampled, size: float) -> float:
    """Estimate of the error of the deflections [m]: what is not resolved, and round-off."""
    cut = s.frame.cut
    i = cut.intervals
    overhang = cut.free_left or cut.free_right
    span = np.full(i.a.size, s.ground.member.length) if overhang else (cut.end - cut.start)[cut.segment]
    reach = np.broadcast_to(span[:, None], i.x.shape).copy()
    # a kink in an overhang moves only what lies beyond it
    if cut.free_left:
        part = slice(0, cut.stretches[0].stop)
        reach[part] = i.x[part] - cut.start[0]
    if cut.free_right:
        part = slice(cut.stretches[-1].first, None)
        reach[part] = cut.end[-1] - i.x[part]
    weight = i.stretch * RULE.weights
    bent = (np.abs(s.strain.curvature[: s.frame.planes]) * weight * reach).sum(axis=(0, 2))
    slide = s.law.slide[: s.frame.planes]
    # towards a point in which the member ends 1/GA passes all bounds; there its tail says nothing
    with np.errstate(over="ignore", invalid="ignore"):
        loose = np.nan_to_num(RULE.tail(slide) / np.maximum(slide.max(axis=-1), 1e-300), posinf=1.0)
    sheared = (loose[:, :, None] * np.abs(s.strain.angle[: s.frame.planes]) * weight).sum()
    return _SAFETY * float((sampled.tail * bent).sum() + sheared) + s.parameters.correction * size
