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
from fishbelly.member.second_grid import RULE, typical
from fishbelly.member.second_loads import Ground, LoadShare
from fishbelly.member.second_sections import Flexibility, Sampled, Slide, sample
from fishbelly.member.second_step import (
    UNCOUPLED,
    Shape,
    Solved,
    deflections_at,
    error_of,
    reactions_of,
    shape_of,
    solve_law,
    solve_share,
)

__all__ = ["LoadShare", "SecondResult", "second_method"]

Array = NDArray[np.float64]

ROUND_OFF = 1e-14


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
    solved = [solve_share(ground, share, slide, lifted) for share, slide in zip(shares, slides, strict=True)]
    total = np.zeros((2, places.size))
    reactions = np.zeros((len(member.supports), 5))
    everywhere = np.zeros((2, *sampled.intervals.x.shape))
    error = 0.0
    for share, found in zip(shares, solved, strict=True):
        shape = shape_of(found)
        total += deflections_at(found, shape, places)
        reactions += reactions_of(found, share)
        everywhere += shape.deflection
        error += error_of(found, sampled, float(np.abs(shape.deflection).max()))
    largest = max(float(np.abs(everywhere).max()), float(np.abs(total).max(initial=0.0)))
    error = ROUND_OFF + error / largest if largest > 0.0 else 0.0
    work = _work_check(solved[0]) if len(solved) == 1 else None
    return SecondResult(total, reactions, error, largest, work)


def _sampled(member: Member, moduli: Sequence[Array], slides: Sequence[Slide | None]) -> Sampled:
    """Sections resolved for every different set of moduli and every different 1/GA."""
    sets = {E.tobytes(): E for E in moduli}
    different = {id(s): s for s in slides if s is not None}
    return sample(member, list(sets.values()), list(different.values()))


def _work_check(s: Solved) -> Mapping[str, float] | None:
    """Work of the loads against the work with one section throughout."""
    forces = s.fields
    push = np.abs(forces.V).max()
    if s.settles or np.any(s.loads.free) or np.abs(forces.N).max() > 1e-9 * push or push == 0.0:
        return None
    bend, slide = s.law.bend, s.law.slide
    if np.any(bend[0, 1]):
        cross = np.abs(bend[0, 1]).max() > UNCOUPLED * np.sqrt(bend[0, 0] * bend[1, 1]).min()
        if cross:
            return None
    found = {"work": _work(s, shape_of(s))}
    edge: Callable[[Array], Array]
    for name, edge in (("softest", np.max), ("stiffest", np.min)):
        both = np.zeros_like(bend)
        moved = np.zeros_like(slide)
        for p in range(2):
            both[p, p] = edge(bend[p, p])
            moved[p] = edge(slide[p])
        if not np.all(both < 1e9 * typical(bend[0, 0])):
            return None
        still = np.broadcast_to(s.ground.line[:, None, None], s.law.c.shape)
        law = Flexibility(s.law.EA, still, both, moved)
        down = np.zeros((len(s.frame.holds), 2))
        solved = solve_law(s.ground, s.frame, s.loads, law, down, refine=False)
        found[name] = _work(solved, shape_of(solved))
    return found


def _work(s: Solved, shape: Shape) -> float:
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
