"""The slip law against closed forms of 30 digits: two and three layers, simple and fixed ends, loads of every kind."""

from __future__ import annotations

import mpmath as mp
import numpy as np
import pytest
from common import INF, check_close, fixed, pin, roller
from slip_exact import Layered, deflection
from slip_members import Run, composite, over, piece

from fishbelly.member.loads import Axial, Couple, Point

EXACT = 1e-10
"""Relative, of the largest value of its kind: promised for every deflection; flow and slip are held to it too."""
L = 4.0
JOINTS = [1e4, 5e5, 5e7, 5e9, 5e11]
"""From nearly loose to nearly rigid: omega L from 0.1 to 740."""


def slab_on_joist(k: float) -> Layered:
    """Levels from the joist's top."""
    return Layered([60e6, 180e6], [-0.075, 0.025], [112500.0, 37500.0], [0], [k])


def check_field(run: Run, field: np.ndarray, exact: object, places: list[float], size: float) -> None:
    for x in places:
        found = run.value(field, x)
        for j in range(field.shape[0]):
            check_close(float(found[j]), exact(x)[j], EXACT, size)


@pytest.mark.parametrize("k", JOINTS)
def test_uniform_load_on_a_simple_beam(k: float) -> None:
    """Deflection, force, slip and flow along the whole span."""
    run = Run(composite(L, k))
    r, s = run.respond()
    G, slip, curvature = slab_on_joist(k).solve([0.0, L], [(0.0, 2000.0, -500.0)], (False, False))
    for x in (0.3, 2.0):
        check_close(float(run.value(r.deflection[0], x)), deflection(curvature, x, L), EXACT)
    places = [0.001, 0.2, 1.0, 2.0, 3.7]
    check_field(run, s.joint_force, G, places, float(abs(G(2.0)[0])))
    check_field(run, s.slip, slip, [0.0, *places], float(abs(slip(0.0)[0])))
    check_field(run, s.flow, lambda x: slip(x) * k, [0.0, *places], float(abs(slip(0.0)[0]) * k))


@pytest.mark.parametrize("k", JOINTS)
def test_point_load_off_the_middle(k: float) -> None:
    a, P = 1.3, 5e3
    run = Run(composite(L, k, loads=(Point(a, P),)))
    r, s = run.respond()
    left, right = (0.0, P * (L - a) / L, 0.0), (P * a, -P * a / L, 0.0)
    G, slip, curvature = slab_on_joist(k).solve([0.0, a, L], [left, right], (False, False))
    check_close(float(run.value(r.deflection[0], 2.0)), deflection(curvature, 2.0, L, [a]), EXACT)
    check_field(run, s.joint_force, G, [0.2, a, 3.0], float(abs(G(a)[0])))
    check_field(run, s.slip, slip, [0.0, 0.2, a, 3.0], float(abs(slip(0.0)[0])))


@pytest.mark.parametrize("k", JOINTS)
@pytest.mark.parametrize("free", [True, False])
def test_fixed_ends(k: float, free: bool) -> None:
    """Rotation held at both ends; slip held as well, or free: the end moment closes the rotation."""
    q = 1000.0
    ends = (fixed("A", 0.0, along=INF, slip_free=free), fixed("B", L, slip_free=free))
    run = Run(composite(L, k, supports=ends))
    r, s = run.respond()
    layered, held = slab_on_joist(k), (not free, not free)
    bent = [
        mp.quad(layered.solve([0.0, L], [m], held)[2], [0, 0.05, 0.5 * L, L - 0.05, L])
        for m in ((0.0, 0.5 * q * L, -0.5 * q), (1.0, 0.0, 0.0))
    ]
    M0 = -bent[0] / bent[1]
    G, slip, curvature = layered.solve([0.0, L], [(float(M0), 0.5 * q * L, -0.5 * q)], held)
    check_close(float(run.value(r.M[0], 0.0)), M0, EXACT)
    check_close(float(run.value(r.deflection[0], 2.0)), deflection(curvature, 2.0, L, [0.05, L - 0.05]), EXACT)
    size = max(float(abs(G(x)[0])) for x in (0.0, 1.0, 2.0))
    check_field(run, s.joint_force, G, [0.0, 0.2, 1.0, 2.0], size)
    largest = max(float(abs(slip(x)[0])) for x in (0.0, 0.2, 0.5, 1.0))
    check_field(run, s.slip, slip, [0.2, 1.0, 1.7], largest)


@pytest.mark.parametrize("k", [(2e6, 3e7), (4e8, 1e6), (5e7, 5e7)])
@pytest.mark.parametrize("on", [(0, 1), (0, 0)])
def test_three_layers(k: tuple[float, float], on: tuple[int, int]) -> None:
    """A slab over a joist with a third layer over the slab, or under the joist."""
    third = over("slab", k[1]) if on[1] else over("joist", k[1])
    if not on[1]:
        third["place"] = type(third["place"])("under", "joist")
    parts = (
        piece("joist", "joist", 0.05, 0.15, 0.0, L),
        piece("slab", "slab", 0.3, 0.05, 0.0, L, **over("joist", k[0])),
        piece("third", "slab", 0.1, 0.04, 0.0, L, **third),
    )
    run = Run(composite(L, 1.0, parts=parts))
    r, s = run.respond()
    level = 0.07 if on[1] else -0.17
    own = 12e9 * 0.1 * 0.04**3 / 12
    layered = Layered([60e6, 180e6, 48e6], [-0.075, 0.025, level], [112500.0, 37500.0, own], on, k)
    G, slip, curvature = layered.solve([0.0, L], [(0.0, 2000.0, -500.0)], (False, False))
    check_close(float(run.value(r.deflection[0], 2.0)), deflection(curvature, 2.0, L), EXACT)
    check_field(run, s.joint_force, G, [0.1, 1.0, 2.0], max(float(abs(v)) for v in G(2.0)))
    check_field(run, s.slip, slip, [0.0, 0.1, 1.0], max(float(abs(v)) for v in slip(0.0)))


def test_axial_force_enters_the_layer_in_which_it_acts() -> None:
    """Pulled at one end in the slab and held at the other in the joist: the joint passes all of it on.

    A bar in two layers whose centroids bend the member: C and the moment about the joist's top carry it.
    """
    k, P = 5e6, 2e4
    supports = (pin("A", 0.0, level=-0.075), roller("B", L))
    run = Run(composite(L, k, supports=supports, loads=(Axial(L, P, level=0.025),)))
    r, s = run.respond()
    layered = slab_on_joist(k)
    # simple beam: the moment about the joist's top runs from that of the reaction to that of the load
    m0, m1 = -P * -0.075, -P * 0.025
    moment = (m0, (m1 - m0) / L, 0.0)
    # G = force in the slab, 0 at the left and P at the right; N = P enters at the joist: base strains by N in it
    omega = mp.sqrt(k * layered.C[0, 0])
    arm, EI = layered.arm[0], layered.bending

    def base(x: mp.mpf) -> mp.mpf:
        bent = (mp.mpf(moment[0]) + moment[1] * x + P * mp.mpf(-0.075)) / EI
        return -P / mp.mpf(60e6) + arm * bent

    g = (base(mp.mpf(0)), base(mp.mpf(1)) - base(mp.mpf(0)))
    p = (-g[0] / layered.C[0, 0], -g[1] / layered.C[0, 0])
    ends = mp.matrix([-p[0], P - p[0] - p[1] * L])
    A = mp.matrix([[1, mp.exp(-omega * L)], [mp.exp(-omega * L), 1]])
    w = mp.lu_solve(A, ends)

    def G(x: float) -> list[mp.mpf]:
        return [p[0] + p[1] * x + w[0] * mp.exp(-omega * x) + w[1] * mp.exp(-omega * (L - x))]

    check_field(run, s.joint_force, G, [0.0, 0.5, 2.0, 3.9, 4.0], P)
    check_close(float(run.value(s.layer_force[0], L)), 0.0, EXACT, P)
    # the analysis line may lie anywhere: the member's M about it against that about the joist's top
    found = float(run.value(r.M[0], 1.0)) - P * float(run.frame.line[0])
    check_close(found, moment[0] + moment[1], EXACT, abs(m0))


def test_couple_at_the_end() -> None:
    k = 5e7
    run = Run(composite(L, k, loads=(Couple(0.0, 1e3),)))
    r, _ = run.respond()
    _, _, curvature = slab_on_joist(k).solve([0.0, L], [(1e3, -1e3 / L, 0.0)], (False, False))
    check_close(float(run.value(r.deflection[0], 1.5)), deflection(curvature, 1.5, L), EXACT)


@pytest.mark.parametrize(("k", "EI"), [(0.0, 150e3), (1e18, 600e3)])
def test_both_limits(k: float, EI: float) -> None:
    """Apart and rigid; towards rigid the difference falls as 1/k."""
    run = Run(composite(L, k))
    r, _ = run.respond()
    expected = 5 * 1000.0 * L**4 / (384 * EI)
    assert float(run.value(r.deflection[0], 2.0)) == pytest.approx(expected, rel=1e-10)


def test_order_towards_the_limits() -> None:
    """Proportional to k from nothing on, to 1/k towards rigid."""

    def gap(k: float, EI: float) -> float:
        run = Run(composite(L, k))
        return abs(float(run.value(run.respond()[0].deflection[0], 2.0)) - 5 * 1000.0 * L**4 / (384 * EI))

    loose = np.log10(gap(1e4, 150e3) / gap(1e3, 150e3))
    stiff = np.log10(gap(1e11, 600e3) / gap(1e12, 600e3))
    assert loose == pytest.approx(1.0, abs=0.01)
    assert stiff == pytest.approx(1.0, abs=0.01)
