"""Tapering members against integrals of 30 digits."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import mpmath as mp
import pytest
from common import (
    INF,
    PROMISED,
    STEEL,
    TAPER,
    Field,
    cantilever,
    check_close,
    fixed,
    integral,
    line,
    part,
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
from taper_formulas import E, L, Q, fixed_fixed, graded, rectangle_EI, rectangle_GA, tapered

from fishbelly.member.description import Member
from fishbelly.member.laws import straight
from fishbelly.member.loads import Point, SelfWeight


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
        check_close(station(found, x)["deflection"], bent + slid, TAPER)
    for end, turned in ((0.0, lambda x: 1 - x / mp.mpf(L)), (L, lambda x: -x / mp.mpf(L))):
        rotation = work(M, turned, rectangle_EI(depth), (0, L))
        lean = work(V, lambda x: mp.mpf(1), rectangle_GA(depth), (0, L)) / L  # the chord of the shear deflection
        check_close(station(found, end)["rotation"], rotation - lean, TAPER)
        check_close(station(found, end)["slope"], rotation - lean + V(mp.mpf(end)) / rectangle_GA(depth)(end), TAPER)
    peak = found["deflection"]["down"]
    x = peak["at"]
    bent = work(M, unit_moment(x, L), rectangle_EI(depth), (0, x, L))
    slid = work(V, unit_shear(x, L), rectangle_GA(depth), (0, x, L))
    check_close(peak["value"], bent + slid, TAPER)
    check_close(peak["shear_part"], _slid_part(M, V, depth, x), PROMISED)


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
    check_close(tip["deflection"], w + slid, TAPER)
    check_close(tip["rotation"], -work(M, lambda x: 1, rectangle_EI(depth), (0, L)), TAPER)


def test_taper_of_one_to_ten_thousand() -> None:
    depth = line(0, 0.5, L, 0.5e-4)
    member = Member(L, tapered(0.5, 0.5e-4), (STEEL,), supports=cantilever(), loads=(Point(L, 1.0),), shear=False)
    tip = run(member, L)["ends"]["right"]
    places = graded(0.0, L, 0.5)
    force = lambda x: mp.mpf(L) - x
    check_close(tip["deflection"], work(force, force, rectangle_EI(depth), places), PROMISED)
    check_close(tip["rotation"], work(force, lambda x: 1, rectangle_EI(depth), places), PROMISED)


def test_simple_taper_of_one_to_ten_thousand_with_shear() -> None:
    depth = line(0, 0.5e-4, L, 0.5)
    member = Member(L, tapered(0.5e-4, 0.5), (STEEL,), supports=simple(L), loads=(Point(3.0, 1.0),))
    found = run(member, 0.0, 0.5, 3.0)
    places = [mp.mpf(L) - p for p in graded(0.0, L, 0.5)] + [0.5, 3.0]
    M, V = unit_moment(3.0, L), unit_shear(3.0, L)
    for x in (0.5, 3.0):
        bent = work(M, unit_moment(x, L), rectangle_EI(depth), places)
        check_close(
            station(found, x)["deflection"], bent + work(V, unit_shear(x, L), rectangle_GA(depth), places), PROMISED
        )
    slid = work(V, lambda x: 1, rectangle_GA(depth), places) / L
    turned = work(M, lambda x: 1 - x / mp.mpf(L), rectangle_EI(depth), places)
    check_close(station(found, 0.0)["rotation"], turned - slid, PROMISED)


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
    check_close(reaction(found, "B"), R, TAPER)
    check_close(reaction(found, "A"), mp.mpf(Q) * L - R, TAPER)
    check_close(reaction(found, "A", "moment"), M0(0) + R * L, TAPER)
    whole, shear_force = (lambda x: M0(x) + R * m(x)), (lambda x: V0(x) - R)
    unit = lambda x: -(mp.mpf(2.5) - x) if x < 2.5 else mp.mpf(0)
    w = work(whole, unit, EI, (0, 2.5)) + share * integral(lambda x: shear_force(x) / GA(x), (0, 2.5))
    check_close(station(found, 2.5)["deflection"], w, PROMISED)


def test_taper_between_fixed_ends() -> None:
    depth = line(0, 0.4, L, 0.1)
    supports = (fixed("A", 0.0, along=INF), fixed("B", L))
    member = Member(L, tapered(0.4, 0.1), (STEEL,), supports=supports, loads=(Point(2.0, 1e4),), shear=False)
    EI, M = rectangle_EI(depth), lambda x: 10000 * unit_moment(2.0, L)(x)
    left, right = fixed_fixed(M, EI, (0, 2, L), L)
    found = run(member, 3.0)
    check_close(reaction(found, "A", "moment"), left, TAPER)
    check_close(reaction(found, "B", "moment"), -right, TAPER)
    check_close(reaction(found, "A"), mp.mpf(1e4) * 4 / 6 + (right - left) / L, TAPER)
    whole = lambda x: M(x) + left + (right - left) * x / L
    check_close(station(found, 3.0)["deflection"], work(whole, unit_moment(3.0, L), EI, (0, 2, 3, L)), PROMISED)


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
    check_close(tip["deflection"], work(M, lambda x: x - mp.mpf(height), EI, (0, 6, height)), PROMISED)
    check_close(tip["slope"], -work(M, lambda x: 1, EI, (0, 6, height)), PROMISED)


def _trapezoid(s: mp.mpf, root: mp.mpf, tip: mp.mpf) -> mp.mpf:
    """Moment at distance s from the tip of a load that grows from `tip` there to `root` here."""
    return tip * s**2 / 2 + (root - tip) * s**2 / 6
