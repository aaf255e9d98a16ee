"""Largest deflections, moments and shear forces, and the places where they are, against closed forms."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import math

import numpy as np
import pytest
from common import CLOSED, INF, STEEL, cantilever, check_close, fixed, part, pin, roller, run, simple, uniform

from fishbelly.member.analysis import Analysis
from fishbelly.member.description import Hinge, Member
from fishbelly.member.extremes import largest, values_at
from fishbelly.member.laws import straight
from fishbelly.member.loads import Couple, Distributed, Point

L, Q, P = 6.0, 1.0e4, 2.0e4
EI, GA = 210e9 * 0.1 * 0.2**3 / 12, 81e9 * 0.02 * 5 / 6
PLACE = 1e-7
"""Of the length. At a smooth extreme a place is known to the square root of the round-off of the value."""


def beam(*loads: object, supports: tuple = (), length: float = L, **more: object) -> Member:
    piece = part("b", "rectangle", length, width=0.1, depth=0.2)
    return Member(
        length, (piece,), (STEEL,), supports=supports or simple(length), loads=loads, **({"shear": False} | more)
    )


def peak(found: dict, value: float, at: float, smooth: bool = True) -> None:
    check_close(found["value"], value, CLOSED)
    assert found["at"] == pytest.approx(at, abs=(PLACE if smooth else 1e-12) * L)


@pytest.mark.parametrize("shear", [False, True])
def test_simple_beam(shear: bool) -> None:
    found = run(beam(uniform(Q, L), shear=shear))
    slid = Q * L**2 / (8 * GA)
    peak(found["deflection"]["down"], 5 * Q * L**4 / (384 * EI) + shear * slid, 3.0)
    assert found["deflection"]["down"]["shear_part"] == pytest.approx(shear * slid, rel=1e-9, abs=1e-18)
    assert found["deflection"]["up"] is None and found["deflection"]["across"] is None
    peak(found["moment"]["sagging"], Q * L**2 / 8, 3.0)
    assert found["moment"]["hogging"] is None
    peak(found["shear"]["max"], Q * L / 2, 0.0, False)
    peak(found["shear"]["min"], -Q * L / 2, L, False)
    assert found["spans"][0]["ratio"] == pytest.approx(L / found["deflection"]["down"]["value"], rel=1e-12)


def test_point_load_off_the_middle() -> None:
    a = 2.0
    found = run(beam(Point(a, P)))
    b = L - a
    x = L - math.sqrt((L**2 - a**2) / 3)
    peak(found["deflection"]["down"], P * a * (L**2 - a**2) ** 1.5 / (9 * math.sqrt(3) * EI * L), x)
    peak(found["moment"]["sagging"], P * a * b / L, a, False)


def test_triangular_load() -> None:
    found = run(beam(Distributed(((0, 0), (L, Q)))))
    peak(found["moment"]["sagging"], Q * L**2 / (9 * math.sqrt(3)), L / math.sqrt(3))
    x = L * math.sqrt(1 - math.sqrt(8 / 15))
    peak(found["deflection"]["down"], Q * x * (7 * L**4 - 10 * L**2 * x**2 + 3 * x**4) / (360 * EI * L), x)


def test_propped_cantilever() -> None:
    found = run(beam(uniform(Q, L), supports=(fixed("A", 0.0, along=INF), roller("B", L))))
    peak(found["moment"]["sagging"], 9 * Q * L**2 / 128, 0.625 * L)
    peak(found["moment"]["hogging"], -Q * L**2 / 8, 0.0, False)
    # from the prop: w = q s (L³ - 3 L s² + 2 s³) / 48, largest at s = L (1 + sqrt 33) / 16
    s = L * (1 + math.sqrt(33)) / 16
    peak(found["deflection"]["down"], Q * s * (L**3 - 3 * L * s**2 + 2 * s**3) / (48 * EI), L - s)


def test_cantilever_and_overhang_ends() -> None:
    found = run(beam(uniform(Q, L), supports=cantilever()))
    peak(found["deflection"]["down"], Q * L**4 / (8 * EI), L, False)
    peak(found["moment"]["hogging"], -Q * L**2 / 2, 0.0, False)
    found = run(beam(uniform(Q, 4.0), supports=(pin("A", 0.0), roller("B", 4.0))))
    peak(found["deflection"]["up"], Q * 4.0**3 / (24 * EI) * 2.0, L, False)


def test_couple_at_the_end_goes_up_and_down() -> None:
    """A couple in midspan lifts one half as much as it presses the other: the leftmost one first."""
    found = run(beam(Couple(3.0, P)))
    w = P * L**2 / (72 * math.sqrt(3) * EI) * 1.5 / 1.5
    x = L / (2 * math.sqrt(3))
    peak(found["deflection"]["up"], w, x)
    peak(found["deflection"]["down"], w, L - x)
    peak(found["moment"]["sagging"], P / 2, 3.0, False)
    peak(found["moment"]["hogging"], -P / 2, 3.0, False)


def test_equal_spans_report_the_leftmost() -> None:
    supports = (pin("A", 0.0), roller("C", L), roller("B", 2 * L))
    found = run(beam(uniform(Q, 2 * L), supports=supports, length=2 * L))
    s = L * (1 + math.sqrt(33)) / 16
    w = Q * s * (L**3 - 3 * L * s**2 + 2 * s**3) / (48 * EI)
    peak(found["deflection"]["down"], w, s)
    for row, at in zip(found["spans"], (s, 2 * L - s), strict=True):
        check_close(row["deflection"], w, CLOSED)
        assert row["at"] == pytest.approx(at, abs=PLACE * L)


def test_kink_at_a_hinge_is_the_largest() -> None:
    found = run(beam(Point(3.0, P), supports=(fixed("A", 0.0, along=INF), roller("B", L)), hinges=(Hinge(3.0),)))
    peak(found["deflection"]["down"], P * 3.0**3 / (3 * EI), 3.0, False)


def test_shear_between_two_extremes_inside_a_span() -> None:
    """A load that turns from down to up: V is largest where the load passes zero."""
    found = run(beam(Distributed(((0, Q), (L, -Q)))))
    # R_A = Q L / 6; V = R - Q x + Q x² / L, least at midspan
    peak(found["shear"]["max"], Q * L / 6, 0.0, False)
    peak(found["shear"]["min"], Q * L / 6 - Q * L / 4, 3.0)
    x = L * (1 - 1 / math.sqrt(3)) / 2
    M = lambda x: Q * L * x / 6 - Q * x**2 / 2 + Q * x**3 / (3 * L)
    peak(found["moment"]["sagging"], M(x), x)
    peak(found["moment"]["hogging"], M(L - x), L - x)


def test_extremes_against_a_dense_table() -> None:
    """A tapered two-span beam with patches: no value of a table of 20,001 places is larger."""
    piece = part("b", "rectangle", 9.0, width=0.1, depth=straight([0, 3, 5, 9], [0.3, 0.15, 0.2, 0.1]))
    supports = (pin("A", 0.0), roller("C", 4.2), roller("B", 9.0))
    loads = (uniform(Q, 3.3, 1.1), Point(7.0, P), Distributed(((5, -Q), (6.5, 2 * Q))), Couple(2.0, P))
    member = Member(9.0, (piece,), (STEEL,), supports=supports, loads=loads)
    found = run(member)
    analysis = Analysis.of(member)
    total = analysis.combine(member.combinations[0]).total
    panels = analysis.profile.panels
    x = np.linspace(0.0, 9.0, 20_001)
    for sign, name in ((1.0, "down"), (-1.0, "up")):
        w = sign * values_at(panels, total.deflection[0], x)
        best = found["deflection"][name]["value"]
        assert w.max() <= best * (1 + 1e-12)
        # half a step off a parabola's top
        assert w.max() >= best * (1 - 1e-6)
        one = largest(panels, sign * total.deflection[0])
        assert one.value == best and float(
            values_at(panels, sign * total.deflection[0], np.array([one.at]))[0]
        ) == pytest.approx(best, rel=1e-12)


def test_nothing_moves() -> None:
    found = run(beam(uniform(0.0, L)))
    assert found["deflection"]["down"] is None and found["deflection"]["up"] is None
    assert found["moment"]["sagging"] is None and found["spans"][0]["ratio"] is None


def test_stations_jump_where_forces_do() -> None:
    """Two rows at supports, point loads and hinges, the left one first; one at the ends."""
    supports = (pin("A", 1.0), roller("B", L))
    rows = run(beam(Point(3.0, P), uniform(Q, L), supports=supports))["stations"]
    by_place = {x: [r for r in rows if abs(r["x"] - x) < 1e-9] for x in (0.0, 1.0, 3.0, L, 0.6)}
    assert [len(by_place[x]) for x in (0.0, 1.0, 3.0, L, 0.6)] == [1, 2, 2, 1, 1]
    left, right = by_place[3.0]
    check_close(left["V"] - right["V"], P, CLOSED)
    xs = [r["x"] for r in rows]
    assert xs == sorted(xs) and len(rows) >= 101


@pytest.mark.parametrize("x", [0.3, math.nextafter(0.3, 1.0), math.nextafter(0.3, 0.0)])
def test_a_place_one_bit_off_a_jump_shows_both_sides_of_it(x: float) -> None:
    """A place typed in another unit than the load's differs by round-off from it and means the same place."""
    rows = run(beam(Point(0.3, 1000.0)), x)["stations"]
    assert [r["V"] for r in rows] == pytest.approx([950.0, -50.0])
