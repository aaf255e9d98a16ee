"""Forces on layers: free strain, slip left by creep, thrust held in several layers, both planes, reciprocity."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from common import INF, fixed, pin, roller, uniform
from slip_members import JOIST, SLAB, Run, composite, over, piece

from fishbelly.member.actions import actions, atoms, free_forces
from fishbelly.member.compatibility import redundants, solve
from fishbelly.member.description import Joined, Member, Placing
from fishbelly.member.extremes import values_at
from fishbelly.member.faults import CannotCompute, Mechanism
from fishbelly.member.forces import Forces
from fishbelly.member.laws import straight
from fishbelly.member.loads import Axial, Couple, Point, Prestress, Shrinkage, Temperature
from fishbelly.member.nodes import layout
from fishbelly.member.response import Response, free_of, respond
from fishbelly.member.section_law import ElasticLaw
from fishbelly.member.slip_forces import LayeredForces, layered_free_forces
from fishbelly.member.slip_law import LayerStrains, SlipLaw
from fishbelly.member.slip_results import bounds

EXACT = 1e-10
"""Relative, of the largest value of its kind."""
L = 4.0
C = 1 / 60e6 + 1 / 180e6 + 0.1**2 / 150e3
"""Strain difference of slab and joist by unit force in the joint [1/N]."""


def shrunk(strain: float) -> tuple[Shrinkage, ...]:
    return (Shrinkage("slab", strain, 0.0, L),)


@pytest.mark.parametrize("k", [1e5, 5e7, 1e11])
def test_shrinkage_of_one_layer(k: float) -> None:
    """G = -e / C (1 - cosh / cosh) with shortening e of the slab on a joint that gives way."""
    e = 3e-4
    run = Run(composite(L, k, loads=shrunk(e)))
    held = layered_free_forces(run.frame, run.layers, run.member.loads, run.frame.short)
    s = run.law.strains(held)
    omega = np.sqrt(k * C)
    x = run.panels.x
    near = np.exp(-omega * x) + np.exp(-omega * (L - x))
    G = e / C * (1.0 - near / (1.0 + np.exp(-omega * L)))
    assert np.abs(s.joint_force[0] - G).max() < EXACT * np.abs(G).max()
    assert np.abs(s.curvature[0] - 0.1 * G / 150e3).max() < EXACT * np.abs(G).max() * 0.1 / 150e3
    assert np.abs(s.layer_force.sum(axis=0)).max() < EXACT * np.abs(G).max()


def test_free_strain_of_both_limits() -> None:
    """Apart: each layer shortens by itself; towards rigid: the strains of the section as one away from the ends."""
    loads = (*shrunk(3e-4), Temperature(0.0, L, top=25.0, bottom=-5.0), Prestress("joist", force=3e4))
    for k in (0.0, 1e13):
        run = Run(composite(L, k, loads=loads))
        held = layered_free_forces(run.frame, run.layers, loads, run.frame.short)
        s = run.law.strains(held)
        if k == 0.0:
            assert np.abs(s.joint_force).max() == 0.0
            own = held.layers / run.law.sections.EA
            expected = own + run.law.sections.c[0] * s.curvature[0]
            assert np.abs(s.layer_axial - expected).max() < EXACT * np.abs(own).max()
        else:
            rigid = ElasticLaw.of(run.frame, run.frame.short, 1, False).strains(
                free_forces(run.frame, loads, run.frame.short)
            )
            found = float(run.value(s.curvature[0], 2.0))
            assert found == pytest.approx(float(run.value(rigid.curvature[0], 2.0)), rel=1e-7)


def test_layered_forces_are_those_of_the_whole() -> None:
    loads = (*shrunk(3e-4), Temperature(0.0, L, top=25.0, bottom=-5.0))
    run = Run(composite(L, 1e7, loads=loads))
    held = layered_free_forces(run.frame, run.layers, loads, run.frame.short)
    whole = free_forces(run.frame, loads, run.frame.short)
    assert np.abs(held.N - whole.N).max() < EXACT * np.abs(whole.N).max()
    assert np.abs(held.M - whole.M).max() < EXACT * np.abs(whole.M).max()
    assert np.abs(held.layers.sum(axis=0) - whole.N).max() < EXACT * np.abs(whole.N).max()
    both = Forces(whole.N, whole.V, whole.M)
    total, other = held.plus(both), both.plus(held)
    assert np.array_equal(total.N, other.N)
    assert np.array_equal(total.layers, held.layers)
    three = LayeredForces.stacked(
        [held, both, LayeredForces(total.N, total.V, total.M, total.layers, np.ones((1, *held.N.shape)))]
    )
    assert three.slips is not None
    assert np.array_equal(three.layers[:, 0], held.layers)
    assert np.array_equal(three.N[2], total.N)
    assert np.abs(three.layers[:, 1]).max() == 0.0
    assert three.slips[0, :, 0, 0].tolist() == [0.0, 0.0, 1.0]
    last = three.atom(2)
    assert last.slips is not None and last.slips.min() == 1.0
    assert np.array_equal(last.layers, total.layers)
    none = LayeredForces(*(0.0 * v for v in (held.N, held.V, held.M, held.layers)))
    assert not none.any
    pulled = replace(none, layers=np.stack((np.ones_like(held.N), -np.ones_like(held.N))))
    assert pulled.any and last.any


def test_slip_of_its_own() -> None:
    """A joint that of itself slips by a (x - L/2): G'' = k (C G - a), the layers strained towards the difference a."""
    a, k = 1e-4, 5e7
    run = Run(composite(L, k))
    none = Forces.none(run.panels.x.shape)
    slips = (a * (run.panels.x - 0.5 * L))[None]
    s = run.law.strains(LayeredForces(none.N, none.V, none.M, np.zeros((2, *none.N.shape)), slips))
    omega, x = np.sqrt(k * C), run.panels.x
    near = np.exp(-omega * x) + np.exp(-omega * (L - x))
    G = a / C * (1.0 - near / (1.0 + np.exp(-omega * L)))
    assert np.abs(s.joint_force[0] - G).max() < EXACT * np.abs(G).max()


def test_creep_by_parts_goes_to_their_layers() -> None:
    run = Run(composite(L, 1e7))
    shape = run.panels.x.shape
    one = Forces(np.full(shape, 3.0), np.zeros((2, *shape)), np.full((2, *shape), 2.0))
    held = LayeredForces.by_layer(run.layers, [(1, one), (0, one), (1, one)], shape)
    assert held.layers[:, 0, 0].tolist() == [3.0, 6.0]
    assert (held.N[0, 0], held.M[0, 0, 0]) == (9.0, 6.0)


def thrust(level_left: float, level_right: float, k: float = 1e7) -> Run:
    """A pin at either end, held along, each at a level of its own."""
    supports = (pin("A", 0.0, level=level_left), pin("B", L, level=level_right))
    return Run(composite(L, k, supports=supports))


@pytest.mark.parametrize("levels", [(-0.075, -0.075), (0.025, 0.025), (0.025, -0.075), (-0.15, 0.05)])
def test_thrust_closes_in_the_layers_held(levels: tuple[float, float]) -> None:
    """The layer held at either end moves neither there: strains summed along x, plus the slip on the way, are none."""
    run = thrust(*levels)
    r, s = run.respond()
    assert abs(r.N).max() > 1.0
    turned = [float(run.value(r.rotation[0], x)) for x in (0.0, L)]
    line = float(run.frame.line[0])
    # movement along x at a level z of a section: u(line) + rotation (clockwise) (z - line)
    moved = [t * (z - line) for t, z in zip(turned, levels, strict=True)]
    owner = [1 if z > 0.0 else 0 for z in levels]
    stretch = float(run.panels.integrate(s.layer_axial[0])[1].sum())
    slip = [float(run.value(s.slip[0], x)) if o else 0.0 for x, o in zip((0.0, L), owner, strict=True)]
    u_left = -moved[0] - slip[0]
    assert u_left + stretch + slip[1] + moved[1] == pytest.approx(0.0, abs=EXACT * abs(moved[1]))


def test_mirrored_thrust() -> None:
    """The same member seen from the other end."""
    one, other = thrust(0.025, -0.075), thrust(-0.075, 0.025)
    (r, s), (r2, s2) = one.respond(), other.respond()
    assert np.abs(r.N + 0.0 - r2.N[::-1, ::-1]).max() < EXACT * np.abs(r.N).max()
    for x in (0.3, 1.7, 3.5):
        assert float(one.value(s.joint_force[0], x)) == pytest.approx(
            float(other.value(s2.joint_force[0], L - x)), abs=EXACT * np.abs(s.joint_force).max()
        )
        assert float(one.value(r.deflection[0], x)) == pytest.approx(
            float(other.value(r2.deflection[0], L - x)), rel=EXACT
        )


def three_tapered(length: float) -> tuple[object, ...]:
    """A joist that tapers, a slab over it, a strap under part of it."""
    return (
        piece("joist", "joist", 0.05, straight([0.0, length], [0.2, 0.1]), 0.0, length),
        piece("slab", "slab", 0.3, 0.05, 0.0, length, **over("joist", 2e7)),
        piece("strap", "slab", 0.05, 0.01, 0.5, 4.0, place=Placing("under", "joist"), joined=Joined(per_length=5e6)),
    )


@pytest.mark.parametrize("slip_free", [False, True])
def test_reciprocity(slip_free: bool) -> None:
    """Deflection at one place by a load at another is the same the other way round, and so is that of a couple."""
    length, a, b = 6.0, 1.3, 4.6
    supports = (fixed("A", 0.0, along=INF, slip_free=slip_free), roller("B", 2.5), roller("C", length))
    loads = (Point(a, 1.0, case="a"), Point(b, 1.0, case="b"), Couple(length, 1.0, case="c"))
    run = Run(composite(length, 1.0, parts=three_tapered(length), supports=supports, loads=loads, shear=True))
    each = atoms(run.member)
    put = [actions(run.frame, v) for v in each]
    r = respond(run.frame, layout(run.frame), run.law, each, put, free_of(run.frame, put, run.frame.short), 2)
    at = {x: run.value(r.deflection[0], x) for x in (a, b)}
    assert at[b][0] == pytest.approx(at[a][1], rel=EXACT)
    assert float(run.value(r.rotation[0], length)[0]) == pytest.approx(float(at[a][2]), rel=EXACT)


def test_flexibility_of_spans_that_share_a_joint() -> None:
    """A moment at one support bends the spans on from it too; the flexibility is symmetric before it is made so."""
    length = 9.0
    supports = (pin("A", 0.0), roller("B", 3.0), roller("C", 6.0), roller("D", length))
    run = Run(composite(length, 2e7, supports=supports, loads=(uniform(1e3, length),)))
    r = redundants(run.frame, layout(run.frame), run.law, 1)
    F = r.flexibility
    first = [k for k, s in enumerate(r.states) if s.segment == 0]
    last = [k for k, s in enumerate(r.states) if s.segment == 2]
    assert np.abs(F[np.ix_(first, last)]).max() > 1e-6 * np.abs(F).max()
    assert np.abs(F - F.T).max() <= 1e-15 * np.abs(F).max()
    assert np.linalg.eigvalsh(F).min() > 0.0
    elastic = redundants(run.frame, layout(run.frame), ElasticLaw.of(run.frame, run.frame.short, 1, False), 1)
    assert np.abs(elastic.flexibility[np.ix_(first, last)]).max() == 0.0


def beside(length: float, k: float, **more: object) -> Member:
    """The slab on joist turned by a quarter: bent sideways it is the same member."""
    parts = (
        piece("joist", "joist", 0.15, 0.05, 0.0, length),
        piece("slab", "slab", 0.05, 0.3, 0.0, length, place=Placing("right_of", "joist"), joined=Joined(per_length=k)),
    )
    loads = (replace(uniform(1000.0, length), direction="across"),)
    return composite(length, k, parts=parts, loads=loads, **more)


def test_bending_sideways() -> None:
    one, turned = Run(composite(L, 5e7)), Run(beside(L, 5e7))
    (r, s), (r2, s2) = one.respond(), turned.respond()
    for x in (0.4, 2.0):
        assert float(turned.value(r2.deflection[1], x)) == pytest.approx(
            float(one.value(r.deflection[0], x)), rel=EXACT
        )
        assert abs(float(turned.value(s2.joint_force[0], x))) == pytest.approx(
            abs(float(one.value(s.joint_force[0], x))), rel=EXACT
        )
    assert np.abs(r2.deflection[0]).max() < EXACT * np.abs(r2.deflection[1]).max()


def skew(k: float) -> tuple[np.ndarray, np.ndarray]:
    """Deflection of both planes in the middle, slab and joist flush on one side: with joint stiffness k, and rigid."""
    parts = (
        piece("joist", "joist", 0.05, 0.15, 0.0, L),
        piece("slab", "slab", 0.3, 0.05, 0.0, L, **over("joist", k, flush="left")),
    )
    run = Run(composite(L, 1.0, parts=parts))
    slipping = run.value(run.respond()[0].deflection, 2.0)
    law = ElasticLaw.of(run.frame, run.frame.short, 2, False)
    each = atoms(run.member)
    put = [actions(run.frame, v) for v in each]
    free = free_of(run.frame, put, run.frame.short)
    rigid = respond(run.frame, layout(run.frame), law, each, put, free, 2).combined(np.ones(1))
    return slipping, run.value(rigid.deflection, 2.0)


def test_skew_layers_towards_rigid() -> None:
    """Layers that lie askew couple both planes; towards rigid both bend as one section has it, the gap as 1/k."""
    gaps = []
    for k in (1e11, 1e12):
        slipping, rigid = skew(k)
        assert np.abs(rigid).min() > 1e-3
        gaps.append(np.abs(slipping - rigid) / np.abs(rigid))
    assert gaps[0] / gaps[1] == pytest.approx(10.0, rel=0.02)
    assert gaps[1].max() < 1e-4


def test_both_bounds() -> None:
    run = Run(composite(L, 5e7))
    loose, rigid = bounds(run.frame, run.frame.short, 1, False)
    values = []
    for law in (loose, run.law, rigid):
        run.law = law
        each = atoms(run.member)
        put = [actions(run.frame, v) for v in each]
        free = free_of(run.frame, put, run.frame.short)
        r: Response = respond(run.frame, layout(run.frame), law, each, put, free, 1)
        values.append(float(run.value(r.deflection[0], 2.0)[0]))
    assert values[0] == pytest.approx(5 * 1000 * L**4 / (384 * 150e3), rel=EXACT)
    assert values[2] == pytest.approx(5 * 1000 * L**4 / (384 * 600e3), rel=EXACT)
    assert values[0] > values[1] > values[2]


def test_a_layer_that_nothing_holds() -> None:
    run = Run(composite(L, 0.0, loads=(Axial(L, 1e3, level=0.025),)))
    with pytest.raises(Mechanism, match="nothing holds a layer along x left of x = 4 m, and it is pushed"):
        run.respond()


def test_a_layer_between_two_forces_needs_no_joint() -> None:
    """Pulled at both ends and apart: the force runs through the slab."""
    loads = (Axial(L, 1e3, level=0.025), Axial(1.0, -1e3, level=0.025))
    _, s = Run(composite(L, 0.0, loads=loads)).respond()
    run = Run(composite(L, 0.0, loads=loads))
    assert float(run.value(s.joint_force[0], 2.0)) == pytest.approx(1e3, rel=EXACT)
    assert float(run.value(s.joint_force[0], 0.5)) == pytest.approx(0.0, abs=EXACT * 1e3)


def test_two_forces_into_two_layers_at_one_place() -> None:
    loads = (Axial(L, 1e3, level=0.025), Axial(L, 1e3, level=-0.075))
    with pytest.raises(CannotCompute, match="forces along x enter different layers at x = 4 m"):
        Run(composite(L, 1e7, loads=loads))


def test_a_taper_to_a_point_is_refused() -> None:
    parts = (
        piece("joist", "joist", 0.05, straight([0.0, L], [0.0, 0.2]), 0.0, L),
        piece("slab", "slab", 0.3, straight([0.0, L], [0.0, 0.1]), 0.0, L, **over("joist", 1e7)),
    )
    supports = (fixed("A", L, along=INF),)
    with pytest.raises(CannotCompute, match="runs out to a point"):
        Run(composite(L, 1e7, parts=parts, supports=supports))


def test_long_term_joint_under_the_same_law() -> None:
    """Everything softer by the same share deflects more by that share: E by 1 + phi and the joint by 1 + phi."""
    run = Run(composite(L, 5e7))
    short = run.frame.short
    soft = replace(short, E=short.E / 3.0, G=short.G / 3.0)
    law = SlipLaw.of(run.frame, soft, run.k / 3.0, 2, False)
    w = float(run.value(run.respond()[0].deflection[0], 2.0))
    run.law = law
    assert float(run.value(run.respond()[0].deflection[0], 2.0)) == pytest.approx(3.0 * w, rel=EXACT)
    assert (SLAB.creep, JOIST.creep) == (2.0, 0.6)


def test_shrinkage_between_fixed_ends() -> None:
    """Slip and rotation held at both ends: nothing moves but along x; slab and joist strain each other evenly."""
    e = 3e-4
    run = Run(composite(L, 5e7, supports=(fixed("A", 0.0, along=INF), fixed("B", L)), loads=shrunk(e)))
    held = layered_free_forces(run.frame, run.layers, run.member.loads, run.frame.short)
    (atom,) = atoms(run.member)
    put = [actions(run.frame, atom)]
    r = redundants(run.frame, layout(run.frame), run.law, 1)
    (found,) = solve(run.frame, r, run.law, put, [held], [{}], 1)
    G = e / (1 / 60e6 + 1 / 180e6)
    s = run.law.strains(held.plus(found.forces))
    assert np.abs(s.joint_force - G).max() < EXACT * G
    assert np.abs(found.forces.M[0] + 0.1 * G).max() < EXACT * G
    assert np.abs(s.curvature[0]).max() < EXACT * 0.1 * G / 150e3


def movement(run: Run, r: Response, s: LayerStrains, x: float, z: float, atom: int) -> float:
    """Movement along x of the slab at a level, held by the slab at the left end at the same level."""
    line = float(run.frame.line[0])
    at = np.array([0.0, x])
    turned, slip = (values_at(run.panels, v[0, atom], at) for v in (r.rotation, s.slip))
    _, whole = run.panels.integrate(s.layer_axial[0, atom])
    k = int(run.panels.find(np.array([x]))[0])
    stretched = float(whole[:k].sum())
    assert x == run.panels.a[k]
    start = -turned[0] * (z - line) - slip[0]
    return float(start + stretched + slip[1] + turned[1] * (z - line))


def test_reciprocity_of_a_force_along_the_slab() -> None:
    """Thrust held in the slab at the left and in the joist at the right; a load in the slab within the span."""
    at, a, z = 1.5, 2.6, 0.025
    supports = (pin("A", 0.0, level=z), roller("M", 2.0), pin("B", L, level=-0.075))
    loads = (Point(a, 1.0, case="a"), Axial(at, 1.0, level=z, case="b"))
    run = Run(composite(L, 2e7, supports=supports, loads=loads))
    each = atoms(run.member)
    put = [actions(run.frame, v) for v in each]
    r = respond(run.frame, layout(run.frame), run.law, each, put, free_of(run.frame, put, run.frame.short), 2)
    s = run.law.strains(Forces(r.N, r.V, r.M))
    down = float(run.value(r.deflection[0, 1], a))
    assert abs(down) > 1e-11
    assert movement(run, r, s, at, z, 0) == pytest.approx(down, rel=1e-9)
