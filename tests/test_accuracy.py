"""Deflections, slopes and reactions against integrals of 30 digits and exact sums."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import math
from fractions import Fraction

import mpmath as mp
import numpy as np
import pytest
from common import (
    CLOSED,
    INF,
    PROMISED,
    STEEL,
    TAPER,
    TIMBER,
    Field,
    cantilever,
    close,
    fixed,
    integral,
    line,
    part,
    pin,
    reaction,
    roller,
    run,
    simple,
    simple_moment,
    station,
    uniform,
    unit_moment,
    unit_shear,
    work,
)

from fishbelly.member.description import Haunch, Member, Placing, Support
from fishbelly.member.faults import NoStiffness
from fishbelly.member.laws import parabola, steps, straight
from fishbelly.member.loads import Point, SelfWeight

E, G = mp.mpf(210e9), mp.mpf(81e9)
B, L = mp.mpf(0.1), 6.0
Q = 1.0e4


def rectangle_EI(depth: Field, width: float = 0.1, modulus: float = 210e9) -> Field:
    return lambda x: mp.mpf(modulus) * mp.mpf(width) * depth(x) ** 3 / 12


def rectangle_GA(depth: Field, width: float = 0.1, modulus: float = 81e9) -> Field:
    return lambda x: mp.mpf(modulus) * mp.mpf(width) * depth(x) * 5 / 6


def tapered(h0: float, h1: float, length: float = L) -> tuple:
    return (part("b", "rectangle", length, width=0.1, depth=straight([0.0, length], [h0, h1])),)


def graded(start: float, end: float, ratio: float) -> list:
    """Places that crowd towards `end`, for integrands that grow there."""
    return [mp.mpf(end) - (mp.mpf(end) - start) * mp.mpf(ratio) ** k for k in range(24)] + [mp.mpf(end)]


@pytest.mark.parametrize("thin", [0.2, 0.1])
def test_simple_taper(thin: float) -> None:
    depth = line(0, 0.4, L, thin)
    member = Member(L, tapered(0.4, thin), (STEEL,), supports=simple(L), loads=(uniform(Q, L),))
    places = (1.0, 3.0, 4.5)
    found = run(member, 0.0, *places, L)
    M, V = simple_moment(Q, L), lambda x: mp.mpf(Q) * (mp.mpf(L) / 2 - x)
    for x in places:
        bent = work(M, unit_moment(x, L), rectangle_EI(depth), (0, x, L))
        slid = work(V, unit_shear(x, L), rectangle_GA(depth), (0, x, L))
        close(station(found, x)["deflection"], bent + slid, TAPER)
    for end, turned in ((0.0, lambda x: 1 - x / mp.mpf(L)), (L, lambda x: -x / mp.mpf(L))):
        rotation = work(M, turned, rectangle_EI(depth), (0, L))
        lean = work(V, lambda x: mp.mpf(1), rectangle_GA(depth), (0, L)) / L  # the chord of the shear deflection
        close(station(found, end)["rotation"], rotation - lean, TAPER)
        close(station(found, end)["slope"], rotation - lean + V(mp.mpf(end)) / rectangle_GA(depth)(end), TAPER)
    peak = found["deflection"]["down"]
    x = peak["at"]
    bent = work(M, unit_moment(x, L), rectangle_EI(depth), (0, x, L))
    slid = work(V, unit_shear(x, L), rectangle_GA(depth), (0, x, L))
    close(peak["value"], bent + slid, TAPER)
    close(peak["shear_part"], _slid_part(M, V, depth, x), PROMISED)


def _slid_part(M: Field, V: Field, depth: Field, x: float) -> mp.mpf:
    return work(V, unit_shear(x, L), rectangle_GA(depth), (0, x, L))


@pytest.mark.parametrize("thin", [0.1, 0.4e-1])
def test_tapered_cantilever(thin: float) -> None:
    depth = line(0, 0.4, L, thin)
    member = Member(L, tapered(0.4, thin), (STEEL,), supports=cantilever(), loads=(Point(L, 2e3), uniform(Q, L)))
    M = lambda x: -(2000 * (L - x) + mp.mpf(Q) * (L - x) ** 2 / 2)
    V = lambda x: 2000 + mp.mpf(Q) * (L - x)
    tip = run(member, L)["ends"]["right"]
    w = work(M, lambda x: x - mp.mpf(L), rectangle_EI(depth), (0, L))
    slid = work(V, lambda x: 1, rectangle_GA(depth), (0, L))
    close(tip["deflection"], w + slid, TAPER)
    close(tip["rotation"], -work(M, lambda x: 1, rectangle_EI(depth), (0, L)), TAPER)


def test_taper_of_one_to_ten_thousand() -> None:
    depth = line(0, 0.5, L, 0.5e-4)
    member = Member(L, tapered(0.5, 0.5e-4), (STEEL,), supports=cantilever(), loads=(Point(L, 1.0),), shear=False)
    tip = run(member, L)["ends"]["right"]
    places = graded(0.0, L, 0.5)
    force = lambda x: mp.mpf(L) - x
    close(tip["deflection"], work(force, force, rectangle_EI(depth), places), PROMISED)
    close(tip["rotation"], work(force, lambda x: 1, rectangle_EI(depth), places), PROMISED)


def test_simple_taper_of_one_to_ten_thousand_with_shear() -> None:
    depth = line(0, 0.5e-4, L, 0.5)
    member = Member(L, tapered(0.5e-4, 0.5), (STEEL,), supports=simple(L), loads=(Point(3.0, 1.0),))
    found = run(member, 0.0, 0.5, 3.0)
    places = [mp.mpf(L) - p for p in graded(0.0, L, 0.5)] + [0.5, 3.0]
    M, V = unit_moment(3.0, L), unit_shear(3.0, L)
    for x in (0.5, 3.0):
        bent = work(M, unit_moment(x, L), rectangle_EI(depth), places)
        close(station(found, x)["deflection"], bent + work(V, unit_shear(x, L), rectangle_GA(depth), places), PROMISED)
    slid = work(V, lambda x: 1, rectangle_GA(depth), places) / L
    turned = work(M, lambda x: 1 - x / mp.mpf(L), rectangle_EI(depth), places)
    close(station(found, 0.0)["rotation"], turned - slid, PROMISED)


def test_steps() -> None:
    depths, ends = [0.045, 0.055, 0.034, 0.08], [0.06, 0.2, 0.42, 0.6]
    shaft = part("shaft", "circle", 0.6, diameter=steps(ends, depths))
    member = Member(0.6, (shaft,), (STEEL,), supports=simple(0.6), loads=(Point(0.15, 5e3),), shear=False)
    found = run(member, 0.0, 0.3)

    def EI(x: mp.mpf) -> mp.mpf:
        return E * mp.pi * mp.mpf(next(d for d, e in zip(depths, ends, strict=True) if x <= e)) ** 4 / 64

    M, places = unit_moment(0.15, 0.6), (0, *ends, 0.15, 0.3)
    close(station(found, 0.3)["deflection"], 5000 * work(M, unit_moment(0.3, 0.6), EI, places), TAPER)
    close(station(found, 0.0)["slope"], 5000 * work(M, lambda x: 1 - x / mp.mpf(0.6), EI, places), TAPER)


def fixed_fixed(M: Field, EI: Field, places: tuple, length: float) -> tuple:
    """End moments of a member fixed at both ends, from the moment M on a simple span."""
    t = lambda x: x / mp.mpf(length)
    s = lambda x: 1 - x / mp.mpf(length)
    a, b, c = (work(f, g, EI, places) for f, g in ((s, s), (s, t), (t, t)))
    p, q = -work(M, s, EI, places), -work(M, t, EI, places)
    det = a * c - b * b
    return (c * p - b * q) / det, (a * q - b * p) / det


@pytest.mark.parametrize("law", ["straight", "parabola"])
def test_haunched_between_fixed_ends(law: str) -> None:
    width, thin, extra, reach, length = 0.3, 0.45, 0.45, 1.8, 9.0
    beam = part("b", "rectangle", length, width=width, depth=thin)
    haunches = (Haunch("b", 0.0, extra, (0.0, reach), law), Haunch("b", length, extra, (reach, 0.0), law))
    supports = (fixed("A", 0.0, along=INF), fixed("B", length))
    member = Member(
        length, (beam,), (STEEL,), haunches=haunches, supports=supports, loads=(uniform(Q, length),), shear=False
    )
    power = 1 if law == "straight" else 2

    def depth(x: mp.mpf) -> mp.mpf:
        fade = max(0, 1 - min(x, length - x) / mp.mpf(reach))
        return mp.mpf(thin) + mp.mpf(extra) * fade**power

    EI, places = rectangle_EI(depth, width), (0, mp.mpf(reach), length / 2, length - mp.mpf(reach), length)
    M = simple_moment(Q, length)
    left, right = fixed_fixed(M, EI, places, length)
    found = run(member, 0.0, 2.5, 4.5)
    close(reaction(found, "A", "moment"), left, PROMISED)
    close(reaction(found, "B", "moment"), -right, PROMISED)
    close(found["moment"]["hogging"]["value"], left, PROMISED)
    whole = lambda x: M(x) + left
    for x in (2.5, 4.5):
        close(station(found, x)["deflection"], work(whole, unit_moment(x, length), EI, (*places, x)), PROMISED)


def test_thrust_of_a_haunched_beam_held_along_at_both_ends() -> None:
    """The centroid drops towards the ends, so that holding them along x brings thrust: three redundants."""
    width, thin, extra, reach, length = mp.mpf(0.3), mp.mpf(0.45), mp.mpf(0.45), mp.mpf(1.8), 9.0
    beam = part("b", "rectangle", length, width=0.3, depth=0.45)
    haunches = (Haunch("b", 0.0, 0.45, (0.0, 1.8), "parabola"), Haunch("b", length, 0.45, (1.8, 0.0), "parabola"))
    supports = (fixed("A", 0.0, along=INF), fixed("B", length, along=INF))
    member = Member(
        length, (beam,), (STEEL,), haunches=haunches, supports=supports, loads=(uniform(Q, length),), shear=False
    )
    places = (0, reach, length / 2, length - reach, length)
    depth = lambda x: thin + extra * max(0, 1 - min(x, length - x) / reach) ** 2
    EI, EA = rectangle_EI(depth, 0.3), lambda x: E * width * depth(x)
    # by symmetry one end moment m about the datum line (top edge) and the axial force n: M = M0 + m + n z_c
    z = lambda x: -depth(x) / 2
    one, M = (lambda x: mp.mpf(1)), simple_moment(Q, length)
    f = mp.matrix(2, 2)
    f[0, 0], f[0, 1] = work(one, one, EI, places), work(one, z, EI, places)
    f[1, 0], f[1, 1] = f[0, 1], work(z, z, EI, places) + work(one, one, EA, places)
    m, n = mp.lu_solve(f, -mp.matrix([work(M, one, EI, places), work(M, z, EI, places)]))
    found = run(member, 0.0, 2.5, 4.5)
    close(station(found, 2.5)["N"], n, PROMISED)
    close(reaction(found, "A", "along"), -n, PROMISED)
    close(station(found, 0.0)["M"], m + n * z(0), PROMISED)
    whole = lambda x: M(x) + m + n * z(x)
    close(station(found, 4.5)["deflection"], work(whole, unit_moment(4.5, length), EI, places), PROMISED)


def test_parabolic_soffit_of_two_materials() -> None:
    """A timber that deepens along a parabola with a steel plate under part of it."""
    length = 8.0
    depth_law = parabola([0.0, 3.0], [0.9, 0.45], [3.0])
    timber = part("timber", "rectangle", length, material="timber", width=0.2, depth=depth_law)
    plate = part("plate", "rectangle", 6.5, start=1.5, width=0.18, depth=0.012, place=Placing("under", "timber"))
    member = Member(
        length, (timber, plate), (STEEL, TIMBER), supports=simple(length), loads=(uniform(Q, length),), shear=False
    )

    def EI(x: mp.mpf) -> mp.mpf:
        h = mp.mpf(0.45) + mp.mpf(0.45) * (max(0, mp.mpf(3) - x) / 3) ** 2
        ea = mp.mpf(11e9) * mp.mpf(0.2) * h
        own = ea * h**2 / 12
        if not 1.5 < x < 6.5:
            return own
        t = mp.mpf(0.012)
        steel = E * mp.mpf(0.18) * t
        return own + steel * t**2 / 12 + ea * steel / (ea + steel) * ((h + t) / 2) ** 2

    found = run(member, 0.0, 2.0, 4.0)
    places = (0, 1.5, 2, 3, 4, 6.5, 8)
    M = simple_moment(Q, length)
    for x in (2.0, 4.0):
        close(station(found, x)["deflection"], work(M, unit_moment(x, length), EI, places), PROMISED)
    close(station(found, 0.0)["slope"], work(M, lambda x: 1 - x / mp.mpf(8), EI, places), PROMISED)


def test_pair_of_timbers_with_steel_between() -> None:
    length = 6.0
    depth = line(0, 0.30, length, 0.15)
    law = straight([0.0, length], [0.30, 0.15])
    steel = part("steel", "rectangle", 4.0, start=1.0, width=0.012, depth=0.14)
    core = part("packing", "rectangle", length, material="timber", width=0.012, depth=0.14)
    timber = part(
        "timber",
        "rectangle",
        length,
        material="timber",
        width=0.05,
        depth=law,
        place=Placing("left_of", "packing", flush="top"),
    )
    timber = type(timber)(**{f: getattr(timber, f) for f in timber.__dataclass_fields__} | {"pair": True})
    steel = type(steel)(
        **{f: getattr(steel, f) for f in steel.__dataclass_fields__} | {"place": Placing("centred_on", "packing")}
    )
    member = Member(
        length, (core, timber, steel), (STEEL, TIMBER), supports=simple(length), loads=(Point(2.0, 8e3),), shear=False
    )
    t = mp.mpf(0.14)

    def EI(x: mp.mpf) -> mp.mpf:
        h = depth(x)
        e1, a1 = (E if 1 < x < 4 else mp.mpf(11e9)), mp.mpf(0.012) * t
        e2, a2 = mp.mpf(11e9), 2 * mp.mpf(0.05) * h
        arm = (h - t) / 2
        one, two = e1 * a1, e2 * a2
        return one * t**2 / 12 + two * h**2 / 12 + one * two / (one + two) * arm**2

    found = run(member, 3.0)
    expected = 8000 * work(unit_moment(2.0, length), unit_moment(3.0, length), EI, (0, 1, 2, 3, 4, 6))
    close(station(found, 3.0)["deflection"], expected, PROMISED)


@pytest.mark.parametrize("shear", [True, False])
def test_propped_taper(shear: bool) -> None:
    depth = line(0, 0.4, L, 0.1)
    supports = (fixed("A", 0.0, along=INF), roller("B", L))
    member = Member(L, tapered(0.4, 0.1), (STEEL,), supports=supports, loads=(uniform(Q, L),), shear=shear)
    EI, GA = rectangle_EI(depth), rectangle_GA(depth)
    M0, m = (lambda x: -mp.mpf(Q) * (L - x) ** 2 / 2), (lambda x: mp.mpf(L) - x)
    V0, v = (lambda x: mp.mpf(Q) * (L - x)), (lambda x: mp.mpf(-1))
    share = 1 if shear else 0
    flexibility = work(m, m, EI, (0, L)) + share * work(v, v, GA, (0, L))
    gap = work(M0, m, EI, (0, L)) + share * work(V0, v, GA, (0, L))
    R = -gap / flexibility
    found = run(member, 0.0, 2.5, L)
    close(reaction(found, "B"), R, TAPER)
    close(reaction(found, "A"), mp.mpf(Q) * L - R, TAPER)
    close(reaction(found, "A", "moment"), M0(0) + R * L, TAPER)
    whole, shear_force = (lambda x: M0(x) + R * m(x)), (lambda x: V0(x) - R)
    unit = lambda x: -(mp.mpf(2.5) - x) if x < 2.5 else mp.mpf(0)
    w = work(whole, unit, EI, (0, 2.5)) + share * integral(lambda x: shear_force(x) / GA(x), (0, 2.5))
    close(station(found, 2.5)["deflection"], w, PROMISED)


def test_taper_between_fixed_ends() -> None:
    depth = line(0, 0.4, L, 0.1)
    supports = (fixed("A", 0.0, along=INF), fixed("B", L))
    member = Member(L, tapered(0.4, 0.1), (STEEL,), supports=supports, loads=(Point(2.0, 1e4),), shear=False)
    EI, M = rectangle_EI(depth), lambda x: 10000 * unit_moment(2.0, L)(x)
    left, right = fixed_fixed(M, EI, (0, 2, L), L)
    found = run(member, 3.0)
    close(reaction(found, "A", "moment"), left, TAPER)
    close(reaction(found, "B", "moment"), -right, TAPER)
    close(reaction(found, "A"), mp.mpf(1e4) * 4 / 6 + (right - left) / L, TAPER)
    whole = lambda x: M(x) + left + (right - left) * x / L
    close(station(found, 3.0)["deflection"], work(whole, unit_moment(3.0, L), EI, (0, 2, 3, L)), PROMISED)


def test_tapered_tube_mast() -> None:
    """A tapered tube with one wall all along, under its own weight lying down and a force at the tip."""
    height = 12.0
    outer, wall = line(0, 0.5, height, 0.15), mp.mpf(0.006)
    mast = part("mast", "tube", height, diameter=straight([0.0, height], [0.5, 0.15]), wall=0.006)
    member = Member(
        height, (mast,), (STEEL,), supports=cantilever(), loads=(SelfWeight(), Point(height, 3e3)), shear=False
    )
    EI = lambda x: E * mp.pi / 64 * (outer(x) ** 4 - (outer(x) - 2 * wall) ** 4)
    weight = lambda x: mp.mpf(9.80665) * 7850 * mp.pi * wall * (outer(x) - wall)
    # the weight is linear in x: moment from tip, exactly
    w0, w1 = weight(0), weight(mp.mpf(height))
    M = lambda x: -(3000 * (height - x) + _trapezoid(height - x, w1 + (w0 - w1) * (height - x) / height, w1))
    tip = run(member, height)["ends"]["right"]
    close(tip["deflection"], work(M, lambda x: x - mp.mpf(height), EI, (0, 6, height)), PROMISED)
    close(tip["slope"], -work(M, lambda x: 1, EI, (0, 6, height)), PROMISED)


def _trapezoid(s: mp.mpf, root: mp.mpf, tip: mp.mpf) -> mp.mpf:
    """Moment at distance s from the tip of a load that grows from `tip` there to `root` here."""
    return tip * s**2 / 2 + (root - tip) * s**2 / 6


def test_plan_that_runs_out_to_a_point_has_finite_slope() -> None:
    blade = part("b", "rectangle", L, width=straight([0.0, L], [0.2, 0.0]), depth=0.05)
    EI0 = 210e9 * 0.2 * 0.05**3 / 12
    tip = run(Member(L, (blade,), (STEEL,), supports=cantilever(), loads=(Point(L, 100.0),), shear=False), L)["ends"][
        "right"
    ]
    close(tip["deflection"], 100.0 * L**3 / (2 * EI0), PROMISED)
    close(tip["slope"], 100.0 * L**2 / EI0, PROMISED)
    spread = Member(L, (blade,), (STEEL,), supports=cantilever(), loads=(uniform(100.0, L),))
    tip = run(spread, L)["ends"]["right"]
    GA0 = 81e9 * 0.2 * 0.05 * 5 / 6
    close(tip["deflection"], 100.0 * L**4 / (6 * EI0) + 100.0 * L**2 / GA0, PROMISED)
    close(tip["slope"], 100.0 * L**3 / (4 * EI0) + 100.0 * L / GA0, PROMISED)


@pytest.mark.parametrize("shear", [True, False])
def test_wedge_to_a_point_has_a_deflection_and_no_slope(shear: bool) -> None:
    wedge = part("b", "rectangle", L, width=0.1, depth=straight([0.0, L], [0.3, 0.0]))
    EI0, GA0 = 210e9 * 0.1 * 0.3**3 / 12, 81e9 * 0.03 * 5 / 6
    found = run(Member(L, (wedge,), (STEEL,), supports=cantilever(), loads=(uniform(1e3, L),), shear=shear), 3.0, L)
    tip = found["ends"]["right"]
    assert tip["slope"] is None and tip["rotation"] is None
    assert station(found, L)["slope"] is None
    close(tip["deflection"], 1e3 * L**4 / (2 * EI0) + shear * 1e3 * L**2 / GA0, PROMISED)
    # slope at 3 m: curvature q L^3 / (2 EI0 s), s from the tip
    expected = 1e3 * L**3 / (2 * EI0) * math.log(2.0)
    close(station(found, 3.0)["rotation"], expected, PROMISED)


@pytest.mark.parametrize("shear", [True, False])
def test_wedge_with_a_force_at_its_point_has_no_stiffness(shear: bool) -> None:
    wedge = part("b", "rectangle", L, width=0.1, depth=straight([0.0, L], [0.3, 0.0]))
    member = Member(L, (wedge,), (STEEL,), supports=cantilever(), loads=(Point(L, 1.0),), shear=shear)
    with pytest.raises(NoStiffness) as fault:
        run(member)
    assert fault.value.at == pytest.approx(L)


def test_blade_with_a_force_at_its_point_slides_off_where_shear_counts() -> None:
    blade = part("b", "rectangle", L, width=straight([0.0, L], [0.2, 0.0]), depth=0.05)
    with pytest.raises(NoStiffness):
        run(Member(L, (blade,), (STEEL,), supports=cantilever(), loads=(Point(L, 1.0),)))


def test_beam_pointed_at_both_ends() -> None:
    """Depth runs out to a point over both supports of a simple beam: M and EI vanish as s and s^3."""
    half = L / 2
    beam = part("b", "rectangle", L, width=straight([0.0, half, L], [0.0, 0.2, 0.0]), depth=0.1)
    EI0 = mp.mpf(210e9) * mp.mpf(0.2) * mp.mpf(0.1) ** 3 / 12
    EI = lambda x: EI0 * min(x, L - x) / half
    found = run(Member(L, (beam,), (STEEL,), supports=simple(L), loads=(uniform(Q, L),), shear=False), 0.0, half)
    M = simple_moment(Q, L)
    close(station(found, half)["deflection"], 2 * integral(lambda x: M(x) * x / 2 / EI(x), (0, half)), PROMISED)
    close(station(found, 0.0)["slope"], integral(lambda x: M(x) / EI(x), (0, half)), PROMISED)


def test_ten_thousand_steps() -> None:
    count, length = 10_000, 50.0
    generator = np.random.default_rng(7)
    depths = 0.2 + 0.3 * generator.random(count)
    ends = np.linspace(0.0, length, count + 1)[1:]
    beam = part("b", "rectangle", length, width=0.1, depth=steps(ends, depths))
    member = Member(length, (beam,), (STEEL,), supports=cantilever(), loads=(Point(length, 1e3),), shear=False)
    tip = run(member, length)["ends"]["right"]
    EI = 210e9 * 0.1 * depths**3 / 12
    near = length - np.concatenate(([0.0], ends[:-1]))
    far = length - ends
    w = math.fsum(1e3 / (3 * EI) * (near - far) * (near**2 + near * far + far**2))
    close(tip["deflection"], w, PROMISED)
    close(tip["slope"], math.fsum(1e3 / (2 * EI) * (near - far) * (near + far)), PROMISED)


def test_ten_thousand_steps_propped() -> None:
    count, length = 10_000, 50.0
    generator = np.random.default_rng(8)
    depths = 0.2 + 0.3 * generator.random(count)
    ends = np.linspace(0.0, length, count + 1)[1:]
    beam = part("b", "rectangle", length, width=0.1, depth=steps(ends, depths))
    supports = (*cantilever(), roller("B", length))
    member = Member(length, (beam,), (STEEL,), supports=supports, loads=(uniform(1e3, length),), shear=False)
    EI = 210e9 * 0.1 * depths**3 / 12
    near, far = length - np.concatenate(([0.0], ends[:-1])), length - ends
    flexibility = math.fsum((near**3 - far**3) / (3 * EI))
    gap = math.fsum(1e3 * (near**4 - far**4) / (8 * EI))
    close(reaction(run(member, length), "B"), gap / flexibility, PROMISED)


def moments_of_equal_spans(count: int, loaded: set[int]) -> list[Fraction]:
    """Support moments over q l², three-moment equations in exact fractions (B. P. E. Clapeyron, 1857)."""
    right = [Fraction(-((k - 1 in loaded) + (k in loaded)), 4) for k in range(count + 1)]
    upper, value = [Fraction(0)], [Fraction(0)]
    for k in range(1, count):
        pivot = 4 - upper[-1]
        upper.append(1 / pivot)
        value.append((right[k] - value[-1]) / pivot)
    moments = [Fraction(0)] * (count + 1)
    for k in range(count - 1, 0, -1):
        moments[k] = value[k] - upper[k] * moments[k + 1]
    return moments


@pytest.mark.parametrize("loaded", [set(range(200)), {0}, {57, 58, 140}], ids=["all", "first", "some"])
def test_two_hundred_spans(loaded: set[int]) -> None:
    count, span = 200, 3.0
    length = count * span
    beam = part("b", "rectangle", length, width=0.1, depth=0.2)
    supports = tuple(roller(f"S{k}", k * span) if k else pin("S0", 0.0) for k in range(count + 1))
    loads = tuple(uniform(Q, (k + 1) * span, k * span) for k in sorted(loaded))
    found = run(
        Member(length, (beam,), (STEEL,), supports=supports, loads=loads, shear=False),
        *(k * span for k in range(count + 1)),
    )
    m = [float(v) for v in moments_of_equal_spans(count, loaded)]
    largest = max(abs(v) for v in m) * Q * span**2
    for k in range(count + 1):
        close(station(found, k * span)["M"], m[k] * Q * span**2, PROMISED, largest)
        force = sum(0.5 for j in (k - 1, k) if j in loaded)
        for j in (k - 1, k + 1):
            if 0 <= j <= count:
                force += m[j] - m[k]
        close(reaction(found, f"S{k}"), force * Q * span, PROMISED, Q * span)


def test_spans_of_very_unequal_length() -> None:
    """A short span beside a long one: three-moment equation, closed form."""
    a, b = 0.05, 20.0
    beam = part("b", "rectangle", a + b, width=0.1, depth=0.2)
    supports = (pin("A", 0.0), roller("B", a), roller("C", a + b))
    member = Member(a + b, (beam,), (STEEL,), supports=supports, loads=(uniform(Q, a + b),), shear=False)
    found = run(member, a)
    m = -Q * (a**3 + b**3) / (8 * (a + b))
    close(station(found, a)["M"], m, PROMISED)
    close(reaction(found, "A"), Q * a / 2 + m / a, PROMISED)
    close(reaction(found, "C"), Q * b / 2 + m / b, PROMISED)


def test_stiff_stretch_between_soft_ones() -> None:
    """A stretch ten million times as stiff as its neighbours turns as one piece."""
    law = steps([2.0, 4.0, 6.0], [0.01, 10.0, 0.01])
    beam = part("b", "rectangle", L, width=0.1, depth=law)
    member = Member(L, (beam,), (STEEL,), supports=simple(L), loads=(Point(3.0, 10.0),), shear=False)
    soft, stiff = 210e9 * 0.1 * 0.01**3 / 12, 210e9 * 0.1 * 10.0**3 / 12
    expected = 10.0 / 2 * (2.0**3 / 3 / soft + (3.0**3 - 2.0**3) / 3 / stiff)
    close(station(run(member, 3.0), 3.0)["deflection"], expected, CLOSED)


def test_support_kinds_of_a_taper_on_springs() -> None:
    """A tapered beam on two vertical springs and a rotational one: force method, one redundant."""
    depth = line(0, 0.4, L, 0.1)
    springs = (Support("A", 0.0, down=2e6, rotation=3e6, along=INF, across=INF), Support("B", L, down=5e5, across=INF))
    member = Member(L, tapered(0.4, 0.1), (STEEL,), supports=springs, loads=(uniform(Q, L),), shear=False)
    EI, M = rectangle_EI(depth), simple_moment(Q, L)
    # redundant: the moment m of the rotational spring on the left end, positive sagging in the member
    s = lambda x: 1 - x / mp.mpf(L)
    flexibility = work(s, s, EI, (0, L)) + 1 / mp.mpf(3e6) + (1 / mp.mpf(2e6) + 1 / mp.mpf(5e5)) / mp.mpf(L) ** 2
    half = mp.mpf(Q) * L / 2
    gap = work(M, s, EI, (0, L)) + (-half / mp.mpf(2e6) + half / mp.mpf(5e5)) / L
    m = -gap / flexibility
    found = run(member, 0.0, 3.0, L)
    close(reaction(found, "A", "moment"), m, PROMISED)
    close(reaction(found, "A"), half - m / L, PROMISED)
    close(reaction(found, "B"), half + m / L, PROMISED)
    close(station(found, L)["deflection"], (half + m / L) / mp.mpf(5e5), PROMISED)
    close(station(found, 0.0)["rotation"], -m / mp.mpf(3e6), PROMISED)
