"""A member's deflection once more, by a method that shares nothing with the first but the description.

Own breaks, own strip integration of the placed outlines at Gauss points, own statics from the raw loads. What it
says is compared with the first method in every run; see `second_method`.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fishbelly.member.description import Member
from fishbelly.member.second_grid import POINTS, RULE
from fishbelly.member.second_loads import Ground, LoadShare, Pushes, pushes
from fishbelly.member.second_sections import Flexibility, Sampled, Slide, flexibility, sample
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

__all__ = ["LoadShare", "SecondResult", "second_method"]

Array = NDArray[np.float64]

_UNCOUPLED = 1e-12
"""Below this share of the section's size, or of the loads, the two planes have nothing to do with each other."""
_ROUND_OFF = 1e-14
_SAFETY = 5.0
"""The last coefficients understate what is missing where a section has a kink; from trials with such members."""


@dataclass(frozen=True, eq=False)
class SecondResult:
    """What the second method found.

    Parameters
    ----------
    deflection : ndarray, shape (2, X)
        Down and across (towards +y) at the places asked for [m].
    reactions : ndarray, shape (supports, 5)
        Force of each support on the member: down, along, couple clockwise, across, couple sideways.
    error : float
        Its own estimate of its error over the largest deflection.
    largest : float
        Largest deflection of either plane at the Gauss points and the places asked for [m].
    work_check : mapping or None
        Work of the loads ½ΣPδ, and its values with the softest and the stiffest section throughout, between
        which it must lie [J]: "work", "softest", "stiffest". None with several shares, free strain,
        settlement or axial force.
    """

    deflection: Array
    reactions: Array
    error: float
    largest: float
    work_check: Mapping[str, float] | None


@dataclass(frozen=True, eq=False)
class _Solved:
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
class _Shape:
    """Rotation and deflection at the left end of each interval (2, K) and at its points (2, K, n)."""

    rotation: Array
    start: Array
    deflection: Array
    slope: Array


def second_method(
    member: Member,
    x: ArrayLike,
    shares: Sequence[LoadShare],
    shear_flexibility: Slide | None = None,
    lifted: frozenset[str] = frozenset(),
    *,
    short_E: ArrayLike,
) -> SecondResult:
    """Deflections and reactions of an elastic member under a sum of load shares.

    Parameters
    ----------
    member : Member
        The checked description.
    x : array_like, shape (X,)
        Places at which deflections are wanted [m].
    shares : sequence of LoadShare
        Loads with their moduli; what they do is added.
    shear_flexibility : callable, optional
        1/GA for shares that bring none of their own; without either, shear is left out.
    lifted : frozenset of str
        Names of bearings that have lifted off.
    short_E : array_like, shape (P,)
        Short-term moduli, about whose centroid loads and supports "at the centroid" act [Pa].

    Returns
    -------
    SecondResult

    Raises
    ------
    NoStiffness
        Where nothing stands.
    Mechanism
        When the member can move freely.
    """
    places = np.atleast_1d(np.asarray(x, dtype=float))
    short = np.asarray(short_E, dtype=float)
    slides = [s.shear_flexibility or shear_flexibility for s in shares]
    sampled = _sampled(member, [short, *(np.asarray(s.E, dtype=float) for s in shares)], slides)
    ground = Ground.of(member, sampled.intervals, sampled.sections, short)
    solved = [_solve(ground, share, slide, lifted) for share, slide in zip(shares, slides, strict=True)]
    total = np.zeros((2, places.size))
    reactions = np.zeros((len(member.supports), 5))
    everywhere = np.zeros((2, *sampled.intervals.x.shape))
    error = 0.0
    for share, found in zip(shares, solved, strict=True):
        shape = _shape(found)
        total += _at(found, shape, places)
        reactions += _reactions(found, share)
        everywhere += shape.deflection
        error += _error(found, sampled, float(np.abs(shape.deflection).max()))
    largest = max(float(np.abs(everywhere).max()), float(np.abs(total).max(initial=0.0)))
    error = _ROUND_OFF + error / largest if largest > 0.0 else 0.0
    work = _work_check(solved[0]) if len(solved) == 1 else None
    return SecondResult(total, reactions, error, largest, work)


def _sampled(member: Member, moduli: Sequence[Array], slides: Sequence[Slide | None]) -> Sampled:
    """Sections resolved for every different set of moduli and every different 1/GA."""
    sets = {E.tobytes(): E for E in moduli}
    different = {id(s): s for s in slides if s is not None}
    return sample(member, list(sets.values()), list(different.values()))


def _solve(ground: Ground, share: LoadShare, slide: Slide | None, lifted: frozenset[str]) -> _Solved:
    loads = pushes(ground, share)
    law = flexibility(ground.sections, np.asarray(share.E, dtype=float))
    planes = 2 if _coupled(ground, law, loads) else 1
    i = ground.intervals
    if slide is not None:
        slides = [np.asarray(slide(i.x.ravel(), p)).reshape(-1, POINTS) for p in range(planes)]
        law = Flexibility(law.EA, law.c, law.bend, np.stack([*slides, *[np.zeros(i.x.shape)] * (2 - planes)]))
    f = frame(ground, lifted, planes)
    down = sinks(ground, f, share)
    return _with_law(ground, f, loads, law, down)


def _with_law(ground: Ground, f: Frame, loads: Pushes, law: Flexibility, down: Array, refine: bool = True) -> _Solved:
    own, over = load_fields(f.cut, loads)
    free = Fields(own.N + loads.free[0], own.V, own.M + loads.free[1:])
    units = unit_fields(f.cut)
    left, right = end_movements(f.cut, strains(law, ground.line, units))
    by_loads = sum(end_movements(f.cut, strains(law, ground.line, free)))
    bend = float(np.median(law.bend[0, 0]))
    found = solve_parameters(System(f, loads.jumps, down), over, left, right, np.asarray(by_loads), bend, refine)
    ends = np.where(f.cut.from_left[:, None], found.left[f.cut.segment], found.right[f.cut.segment])
    N = own.N + ends[:, :1]
    V = own.V + ends[:, 1:3].T[:, :, None]
    M = own.M + ends[:, 3:].T[:, :, None] + ends[:, 1:3].T[:, :, None] * f.cut.lever
    strained = Fields(N + loads.free[0], V, M + loads.free[1:])
    strain = strains(law, ground.line, strained)
    return _Solved(ground, f, loads, law, Fields(N, V, M), strain, found, bool(np.any(down)))


def _coupled(ground: Ground, law: Flexibility, loads: Pushes) -> bool:
    """Whether anything may move the member sideways."""
    bend = law.bend
    if np.any(bend[0, 1] ** 2 > _UNCOUPLED**2 * bend[0, 0] * bend[1, 1]):
        return True
    size = np.sqrt(1.0 / (bend[1, 1] * law.EA))
    aside = np.abs(law.c[1] - ground.line[1]), np.abs(ground.centroid[1])
    if any(np.any(v > _UNCOUPLED * size) for v in aside):
        return True
    force = np.abs(loads.jumps[0]).max() + np.abs(loads.n).max() * ground.member.length + np.abs(loads.free[0]).max()
    turn = max(float(np.abs(v).max()) for v in (loads.jumps[4], loads.m[1], loads.free[2]))
    return bool(np.any(loads.q[1]) or np.any(loads.jumps[2]) or turn > 10.0 * _UNCOUPLED * force * size.max())


def _shape(s: _Solved) -> _Shape:
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
    return _Shape(rotation, start, deflection, slope)


def _at(s: _Solved, shape: _Shape, places: Array) -> Array:
    """Deflections at places, shape (2, X)."""
    i = s.frame.cut.intervals
    k = np.clip(np.searchsorted(i.a, places, side="right") - 1, 0, i.a.size - 1)
    weights = RULE.up_to(i.local(k, places))
    rate = (shape.slope + s.strain.angle) * i.stretch
    if s.frame.planes == 1:
        rate[1] = 0.0
    return np.asarray(shape.start[:, k] + (rate[:, k] * weights).sum(axis=-1))


def _reactions(s: _Solved, share: LoadShare) -> Array:
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
                sunk = share.factor(support) * support.sinks if support.sinks and hold.way == 0 else 0.0
                part = float(force) if len(hold.supports) == 1 else stiffness * (sunk - moved)
                found[i, hold.way] += part
                rest -= part
        for i in rigid:
            found[i, hold.way] += rest / len(rigid)
    return found


def _error(s: _Solved, sampled: Sampled, size: float) -> float:
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


def _work_check(s: _Solved) -> Mapping[str, float] | None:
    """Work of the loads against the work with one section throughout."""
    forces = s.fields
    push = np.abs(forces.V).max()
    if s.settles or np.any(s.loads.free) or np.abs(forces.N).max() > 1e-9 * push or push == 0.0:
        return None
    bend, slide = s.law.bend, s.law.slide
    if np.any(bend[0, 1]):
        cross = np.abs(bend[0, 1]).max() > _UNCOUPLED * np.sqrt(bend[0, 0] * bend[1, 1]).min()
        if cross:
            return None
    found = {"work": _work(s, _shape(s))}
    edge: Callable[[Array], Array]
    for name, edge in (("softest", np.max), ("stiffest", np.min)):
        both = np.zeros_like(bend)
        moved = np.zeros_like(slide)
        for p in range(2):
            both[p, p] = edge(bend[p, p])
            moved[p] = edge(slide[p])
        if not np.all(both < 1e9 * np.median(bend[0, 0])):
            return None
        still = np.broadcast_to(s.ground.line[:, None, None], s.law.c.shape)
        law = Flexibility(s.law.EA, still, both, moved)
        down = np.zeros((len(s.frame.holds), 2))
        solved = _with_law(s.ground, s.frame, s.loads, law, down, refine=False)
        found[name] = _work(solved, _shape(solved))
    return found


def _work(s: _Solved, shape: _Shape) -> float:
    """½ΣPδ of the loads across the member and of couples."""
    i = s.frame.cut.intervals
    weight = i.stretch * RULE.weights
    total = float((s.loads.q * shape.deflection * weight).sum())
    ends = shape.start[:, -1:] + ((shape.slope + s.strain.angle)[:, -1:] * i.stretch[-1:]) @ RULE.weights
    moved = np.concatenate((shape.start, ends), axis=1)
    total -= float((s.loads.jumps[1:3] * moved)[: s.frame.planes].sum())
    # a couple at a hinge turns what lies to its left
    bent = (s.strain.curvature * i.stretch) @ RULE.weights
    turned = np.concatenate((shape.rotation[:, :1], shape.rotation - bent), axis=1)
    return 0.5 * (total + float((s.loads.jumps[3:] * turned)[: s.frame.planes].sum()))
