"""The slip law where sections and joints vary along x, against own boundary value problems and direct sums."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

import mpmath as mp
import numpy as np
import pytest
from common import INF, fixed, pin, roller, uniform
from slip_bvp import SCALE, TURN, G, M, S, Stretch, V, W, continuous, solved
from slip_exact import Layered
from slip_members import Run, composite, over, piece

from fishbelly.member.actions import Frame
from fishbelly.member.description import Hinge, Joined, Member, Notch, Opening, Placing, Stage
from fishbelly.member.extremes import values_at
from fishbelly.member.forces import Forces
from fishbelly.member.laws import constant as const
from fishbelly.member.laws import straight
from fishbelly.member.loads import Point
from fishbelly.member.sampling import build_profile, build_profiles
from fishbelly.member.section_law import ElasticLaw
from fishbelly.member.slip_law import SlipLaw
from fishbelly.member.slip_layers import joint_stiffness, layers_of
from fishbelly.member.stage_view import stage_views

AGREES = 1e-8
"""Relative, of the largest value: what the adaptive reference itself reaches at its tolerance of 1e-10."""
EXACT = 1e-10
"""Relative, of the largest value, against direct sums."""
Q = 1000.0


def constant(value: float) -> Callable[[np.ndarray], np.ndarray]:
    return lambda x: np.full_like(x, value)


def tapered(a: float, b: float, L: float, k: float, **more: object) -> Stretch:
    """A joist 150 deep at the left and 100 at the right under a slab 60 to 40 deep, levels from the joist's top."""

    def joist(x: np.ndarray) -> np.ndarray:
        return 0.15 - 0.05 * x / L

    def slab(x: np.ndarray) -> np.ndarray:
        return 0.06 - 0.02 * x / L

    return Stretch(
        a,
        b,
        (lambda x: 8e9 * 0.05 * joist(x), lambda x: 12e9 * 0.3 * slab(x)),
        (lambda x: -0.5 * joist(x), lambda x: 0.5 * slab(x)),
        lambda x: 8e9 * 0.05 * joist(x) ** 3 / 12 + 12e9 * 0.3 * slab(x) ** 3 / 12,
        constant(k),
        Q,
        **more,
    )


def tapered_parts(L: float, k: float, start: float = 0.0, end: float | None = None) -> tuple[object, ...]:
    joist = piece("joist", "joist", 0.05, straight([0.0, L], [0.15, 0.1]), 0.0, L)
    slab = piece("slab", "slab", 0.3, straight([0.0, L], [0.06, 0.04]), start, end or L, **over("joist", k))
    return joist, slab


def compare(run: Run, state: Callable[[float], np.ndarray], places: list[float], joined: tuple[float, float]) -> None:
    r, s = run.respond()
    fields = {W: r.deflection[0], TURN: r.rotation[0], M: r.M[0], G: s.joint_force[0], S: s.slip[0]}
    for which, field in fields.items():
        inside = [x for x in places if which in (W, TURN, M) or joined[0] < x < joined[1]]
        size = max(abs(state(x)[which]) for x in inside)
        for x in inside:
            assert float(run.value(field, x)) == pytest.approx(state(x)[which], abs=AGREES * size), (which, x)


@pytest.mark.parametrize("k", [2e6, 1e8])
def test_two_spans_tapered(k: float) -> None:
    """Continuous over a support in the middle, slip going through it."""
    L, b = 6.0, 2.5
    supports = (pin("A", 0.0), roller("B", b), roller("C", L))
    run = Run(composite(L, k, parts=tapered_parts(L, k), supports=supports, loads=(uniform(Q, L),)))

    def conditions(left: np.ndarray, right: np.ndarray) -> list[float]:
        held = [left[0][W], right[0][W], left[1][W], right[1][W]]
        ends = [left[0][M], left[0][G], right[1][M], right[1][G]]
        return [
            *(v / SCALE[W] for v in held),
            *(v / 1e4 for v in ends),
            *continuous(left[1], right[0], (TURN, G, S, M)),
        ]

    state = solved([tapered(0.0, b, L, k), tapered(b, L, L, k)], conditions)
    compare(run, state, [0.1, 1.0, 2.4, 2.6, 4.0, 5.9], (0.0, L))


@pytest.mark.parametrize("free", [False, True])
def test_propped_and_tapered(free: bool) -> None:
    """Fixed at the left, slip held or free, on a roller at the right."""
    L, k = 4.0, 2e7
    supports = (fixed("A", 0.0, along=INF, slip_free=free), roller("B", L))
    run = Run(composite(L, k, parts=tapered_parts(L, k), supports=supports, loads=(uniform(Q, L),)))

    def conditions(left: np.ndarray, right: np.ndarray) -> list[float]:
        first = left[0][G] / 1e4 if free else left[0][S] / SCALE[S]
        return [
            left[0][W] / SCALE[W],
            left[0][TURN] / SCALE[TURN],
            first,
            right[0][W] / SCALE[W],
            right[0][M] / 1e4,
            right[0][G] / 1e4,
        ]

    compare(run, solved([tapered(0.0, L, L, k)], conditions), [0.05, 1.0, 2.0, 3.9], (0.0, L))


def test_part_that_ends_within_the_span() -> None:
    """The slab runs over the middle of the joist: it takes nothing at its ends."""
    L, k, a, b = 4.0, 3e7, 0.7, 3.1
    run = Run(composite(L, k, parts=tapered_parts(L, k, a, b), loads=(uniform(Q, L),)))
    alone = []
    for start, end in ((0.0, a), (b, L)):
        bare = tapered(start, end, L, k, joined=False)
        bare.EI = lambda x: 8e9 * 0.05 * (0.15 - 0.05 * x / L) ** 3 / 12
        alone.append(bare)

    def conditions(left: np.ndarray, right: np.ndarray) -> list[float]:
        nothing = [left[i][q] / SCALE[q] for i in (0, 2) for q in (G, S)]
        return [
            *nothing,
            left[0][W] / SCALE[W],
            left[0][M] / 1e4,
            right[2][W] / SCALE[W],
            right[2][M] / 1e4,
            left[1][G] / 1e4,
            right[1][G] / 1e4,
            *continuous(left[1], right[0], (W, TURN, M, V)),
            *continuous(left[2], right[1], (W, TURN, M, V)),
        ]

    state = solved([alone[0], tapered(a, b, L, k), alone[1]], conditions)
    compare(run, state, [0.3, 0.8, 1.5, 2.0, 3.0, 3.6], (a, b))
    _, s = run.respond()
    size = np.abs(s.joint_force).max()
    assert abs(run.value(s.joint_force, a)[0]) < EXACT * size
    assert abs(run.value(s.joint_force, b, "left")[0]) < EXACT * size


def test_joint_missing_over_a_stretch() -> None:
    """No fastener from 1.0 to 2.5 m: the force beyond the joint stays what it is there."""
    L, k, a, b = 4.0, 3e7, 1.0, 2.5
    member = composite(L, k, parts=tapered_parts(L, k), loads=(uniform(Q, a), uniform(Q, b, a), uniform(Q, L, b)))
    run = Run(member)
    middle = 0.5 * (run.panels.a + run.panels.b)
    there = np.where((middle > a) & (middle < b), 0.0, k)
    stiffness = np.broadcast_to(there[None, :, None], (1, *run.panels.x.shape))
    run.law = SlipLaw.of(run.frame, run.frame.short, stiffness, 2, False)

    def conditions(left: np.ndarray, right: np.ndarray) -> list[float]:
        every = (W, TURN, G, S, M, V)
        ends = [left[0][M], left[0][G], right[2][M], right[2][G]]
        return [
            left[0][W] / SCALE[W],
            right[2][W] / SCALE[W],
            *(v / 1e4 for v in ends),
            *continuous(left[1], right[0], every),
            *continuous(left[2], right[1], every),
        ]

    pieces = [tapered(0.0, a, L, k), tapered(a, b, L, 0.0), tapered(b, L, L, k)]
    compare(run, solved(pieces, conditions), [0.3, 0.9, 1.1, 2.0, 2.6, 3.8], (0.0, L))
    _, s = run.respond()
    assert float(run.value(s.joint_force, 1.0)[0]) == pytest.approx(float(run.value(s.joint_force, 2.4)[0]), rel=EXACT)
    assert np.abs(s.flow[0][there == 0.0]).max() == 0.0


def discrete_forces(k: float, pitch: float, L: float) -> tuple[np.ndarray, np.ndarray]:
    """Places of fasteners and the force of each, by the slip between neighbours summed by hand."""
    count = round(L / pitch)
    x = (np.arange(count) + 0.5) * pitch
    layered = Layered([60e6, 180e6], [-0.075, 0.025], [112500.0, 37500.0], [0], [k])
    C, arm, EI = float(layered.C[0, 0]), float(layered.arm[0]), float(layered.bending)

    def area(t: np.ndarray) -> np.ndarray:
        """Integral of the simple beam's moment from the left end."""
        return 0.5 * Q * (L * t**2 / 2 - t**3 / 3)

    # unknown: force of each fastener; between two of them G is the sum of those to the left
    sums = np.tril(np.ones((count, count)))
    A, right = np.zeros((count, count)), np.zeros(count)
    for i in range(count - 1):
        A[i] = C * (x[i + 1] - x[i]) * sums[i]
        A[i, i + 1] -= 1.0 / (k * pitch)
        A[i, i] += 1.0 / (k * pitch)
        right[i] = -arm / EI * (area(x[i + 1]) - area(x[i]))
    A[-1] = 1.0
    return x, np.linalg.solve(A, right)


@pytest.mark.parametrize("pitch", [0.5, 0.1])
def test_single_fasteners(pitch: float) -> None:
    """Every fastener's force against direct sums; between them the joint carries nothing."""
    L, k = 4.0, 5e7
    parts = (
        piece("joist", "joist", 0.05, 0.15, 0.0, L),
        piece(
            "slab",
            "slab",
            0.3,
            0.05,
            0.0,
            L,
            place=Placing("over", "joist"),
            joined=Joined(stiffness=0.5 * k * pitch, pitch=pitch, rows=2),
        ),
    )
    run = Run(composite(L, k, parts=parts), discrete=True)
    _, s = run.respond()
    x, forces = discrete_forces(k, pitch, L)
    found = [s.fasteners[0, run.panels.border(at)] for at in x]
    assert found == pytest.approx(forces.tolist(), abs=EXACT * np.abs(forces).max())
    assert np.abs(s.flow).max() == 0.0


def test_single_fasteners_tend_to_the_smeared_joint() -> None:
    """The difference in deflection falls as the square of the pitch."""
    L, k = 4.0, 5e7
    gaps = []
    smeared = Run(composite(L, k))
    w = float(smeared.value(smeared.respond()[0].deflection[0], 2.0))
    for pitch in (0.2, 0.1):
        joined = Joined(stiffness=k * pitch, pitch=pitch)
        parts = (
            piece("joist", "joist", 0.05, 0.15, 0.0, L),
            piece("slab", "slab", 0.3, 0.05, 0.0, L, place=Placing("over", "joist"), joined=joined),
        )
        run = Run(composite(L, k, parts=parts), discrete=True)
        gaps.append(abs(float(run.value(run.respond()[0].deflection[0], 2.0)) - w))
    assert np.log2(gaps[0] / gaps[1]) == pytest.approx(2.0, abs=0.05)
    assert gaps[0] < 0.01 * w


def test_hinge_cuts_all_layers() -> None:
    """Fixed, hinged and fixed under a load at the hinge: two cantilevers with half of it, free at their ends."""
    L, k, P = 4.0, 2e7, 2e3
    ends = (fixed("A", 0.0, along=INF), fixed("B", L))
    whole = Run(composite(L, k, supports=ends, hinges=(Hinge(2.0),), loads=(Point(2.0, P),)))
    half = Run(composite(2.0, k, supports=ends[:1], loads=(Point(2.0, 0.5 * P),)))
    r, s = whole.respond()
    r2, s2 = half.respond()
    assert float(whole.value(r.deflection[0], 2.0)) == pytest.approx(
        float(half.value(r2.deflection[0], 2.0)), rel=EXACT
    )
    size = np.abs(s2.joint_force).max()
    assert abs(float(whole.value(s.joint_force, 2.0)[0])) < EXACT * size
    assert float(whole.value(s.slip, 2.0, "left")[0]) == pytest.approx(float(half.value(s2.slip, 2.0)[0]), rel=EXACT)
    assert float(whole.value(s.slip, 2.0)[0]) == pytest.approx(-float(half.value(s2.slip, 2.0)[0]), rel=EXACT)


def test_cantilever() -> None:
    """Slip held at the root, no force at the tip."""
    L, k, P = 2.0, 2e7, 1e3
    run = Run(composite(L, k, supports=(fixed("A", 0.0, along=INF),), loads=(Point(L, P),)))
    r, s = run.respond()
    layered = Layered([60e6, 180e6], [-0.075, 0.025], [112500.0, 37500.0], [0], [k])
    force, slip, curvature = layered.solve([0.0, L], [(-P * L, P, 0.0)], (True, False))
    tip = -mp.quad(lambda x: curvature(x) * (L - x), [0, 0.5, 1, L])
    assert float(run.value(r.deflection[0], L)) == pytest.approx(float(tip), rel=EXACT)
    assert float(run.value(s.slip, L)[0]) == pytest.approx(float(slip(L)[0]), rel=EXACT)
    assert float(run.value(s.joint_force, 0.0)[0]) == pytest.approx(float(force(0.0)[0]), rel=EXACT)


def test_forces_balance() -> None:
    """Layers together carry N, and M with their own moments."""
    L, k = 6.0, 1e7
    supports = (pin("A", 0.0), roller("B", 2.5), roller("C", L))
    run = Run(composite(L, k, parts=tapered_parts(L, k), supports=supports))
    r, s = run.respond()
    assert np.abs(s.layer_force.sum(axis=0) - r.N).max() < EXACT * np.abs(s.layer_force).max()
    own = run.law.sections.EI[0].sum(axis=0) * s.curvature[0]
    carried = own - (run.law.sections.c[0] * s.layer_force).sum(axis=0)
    assert np.abs(carried - r.M[0]).max() < EXACT * np.abs(r.M).max()
    strains = run.law.strains(Forces(r.N, r.V, r.M))
    assert np.array_equal(strains.curvature, s.curvature)


def in_stages() -> Member:
    """The joist alone first; the slab comes in the second stage."""
    parts = tapered_parts(4.0, 2e7)
    return composite(
        4.0,
        1.0,
        parts=(parts[0], replace(parts[1], stage="later")),
        loads=(uniform(Q, 4.0, case="first"), uniform(Q, 4.0, case="second")),
        stages=(Stage("bare", ("first",)), Stage("later", ("second",))),
    )


def test_a_layer_that_comes_in_a_later_stage() -> None:
    """Before it comes the joist bends alone, by the same law; afterwards as if it had always been there."""
    member = in_stages()
    views = stage_views(member)
    line = np.array([-0.05, 0.0])
    profiles = build_profiles(member, tuple(np.linspace(0.0, 4.0, 9)))
    frames = [Frame.of(p, p.short, line, v) for p, v in zip(profiles, views, strict=True)]
    k = joint_stiffness(layers_of(member))
    laws = [SlipLaw.of(f, f.short, k, 1, False) for f in frames]
    x = frames[0].profile.panels.x
    M = np.stack((0.5 * Q * x * (4.0 - x), np.zeros_like(x)))
    forces = Forces(np.zeros_like(x), np.zeros_like(M), M)
    bare, both = (law.strains(forces) for law in laws)
    elastic = ElasticLaw.of(frames[0], frames[0].short, 1, False).strains(forces)
    assert np.abs(bare.curvature - elastic.curvature).max() < EXACT * np.abs(elastic.curvature).max()
    assert np.abs(bare.joint_force).max() == 0.0
    run = Run(composite(4.0, 1.0, parts=tapered_parts(4.0, 2e7)))
    _, always = run.respond()
    at = [0.3, 2.0, 3.5]
    panels = frames[1].profile.panels
    found = values_at(panels, both.joint_force[0], np.array(at))
    assert found == pytest.approx([float(run.value(always.joint_force[0], v)) for v in at], rel=1e-9)


def halved(run: Run) -> Run:
    """The same member on a grid with every panel cut in half once more."""
    other = Run(run.member)
    profile = build_profile(run.member, tuple(np.concatenate((run.panels.a, 0.5 * (run.panels.a + run.panels.b)))))
    other.frame = Frame.of(profile, profile.short)
    other.law = SlipLaw.of(other.frame, profile.short, run.k, 2, run.member.shear)
    return other


@pytest.mark.parametrize("case", ["opening", "notch and run-in", "narrow and stiff"])
def test_a_finer_grid_changes_nothing(case: str) -> None:
    """Round openings, whose outline begins like a root; stiffness that grows from nothing; very uneven panels."""
    L = 4.0
    joist, slab = tapered_parts(L, 3e7)
    more: dict[str, object] = {}
    if case == "opening":
        more["openings"] = (Opening(1.2, ("joist",), diameter=0.05),)
    elif case == "notch and run-in":
        more["notches"] = (Notch("joist", const(0.03), 2.0, 2.002),)
        slab = replace(slab, start=0.5, end=3.5, run_in=(0.2, 0.3))
    else:
        slab = replace(slab, joined=Joined(per_length=1e12), start=0.4)
        more["notches"] = (Notch("joist", const(0.03), 2.0, 2.0 + 1e-6),)
    run = Run(composite(L, 1.0, parts=(joist, slab), **more))
    fine = halved(run)
    (r, s), (r2, s2) = run.respond(), fine.respond()
    at = np.array([0.55, 1.19, 1.21, 2.5, 3.2])
    for a, b in ((r.deflection[0], r2.deflection[0]), (s.joint_force[0], s2.joint_force[0]), (s.slip[0], s2.slip[0])):
        one, two = values_at(run.panels, a, at), values_at(fine.panels, b, at)
        assert np.abs(one - two).max() < 1e-9 * np.abs(two).max()
