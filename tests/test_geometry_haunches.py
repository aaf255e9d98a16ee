"""Parts along the member: haunches, what follows them, steps and ends of parts."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from common import CLOSED, STEEL, check_close, part, run, simple, station, uniform
from placed_parts import HOST, NEAR, L, at, box, member, plate

from fishbelly.member.description import Haunch, Member, Part, Shape
from fishbelly.member.laws import constant, steps, straight
from fishbelly.member.section_results import section_at, stiffness

MOMENTS = (lambda z, d: 1.0, lambda z, d: z, lambda z, d: z * z + d * d / 12)
"""Area, first and second moment of a rectangle d deep with its middle at z, over its area."""


def haunched(*followers: Part, law: str = "straight", side: str = "bottom") -> Member:
    return member(HOST, *followers, haunches=(Haunch("host", 0.0, 0.3, (0.0, 2.0), law, side),))


@pytest.mark.parametrize("law, extra", [("straight", 0.15), ("parabola", 0.075)])
def test_haunch_moves_the_soffit_and_what_is_under_it(law: str, extra: float) -> None:
    """The plate's thickness is square to it: on the section it stands t / cos deep."""
    m = haunched(plate(relation="under", host="host"), law=law)
    at(box(m, "host", 1.0), -0.1, -0.4 - extra, 0.1, 0.0)
    at(box(m, "plate", 1.0), -0.05, -0.4 - extra - 0.02 * math.hypot(1.0, 0.15), 0.05, -0.4 - extra)
    cut = replace(m, inclined="cut")
    at(box(cut, "plate", 1.0), -0.05, -0.42 - extra, 0.05, -0.4 - extra)
    at(box(m, "plate", 3.0), -0.05, -0.42, 0.05, -0.4)


def test_haunch_leaves_what_does_not_follow_its_edge() -> None:
    over = plate("over", relation="over", host="host")
    beside = plate("beside", relation="left_of", host="host")
    flush = plate("flush", relation="right_of", host="host", flush="bottom")
    inside = plate("inside", relation="centred_on", host="host")
    m = haunched(over, beside, flush, inside)
    for name, bottom in (("over", 0.0), ("beside", -0.21), ("inside", -0.21), ("flush", -0.55)):
        assert box(m, name, 1.0)[1] == pytest.approx(bottom, abs=NEAR), name


def test_haunch_carries_a_chain_of_followers() -> None:
    one = plate("one", relation="under", host="host")
    two = plate("two", relation="under", host="one")
    m = haunched(one, two)
    assert box(m, "two", 1.0)[3] == pytest.approx(-0.55 - 0.02 * math.hypot(1.0, 0.15), abs=NEAR)


def test_haunch_on_top_raises_what_is_over_it() -> None:
    m = haunched(plate(relation="over", host="host"), side="top")
    at(box(m, "host", 1.0), -0.1, -0.4, 0.1, 0.15)
    assert box(m, "plate", 1.0)[1] == pytest.approx(0.15, abs=NEAR)


def test_where_two_haunches_meet_the_deeper_governs() -> None:
    m = member(HOST, haunches=(Haunch("host", 2.0, 0.3, (2.0, 2.0)), Haunch("host", 4.0, 0.2, (2.0, 2.0))))
    for x in (2.5, 3.0, 3.2, 3.5, 4.5):
        extra = max(0.3 * max(0.0, 1 - abs(x - 2) / 2), 0.2 * max(0.0, 1 - abs(x - 4) / 2))
        assert box(m, "host", x)[1] == pytest.approx(-0.4 - extra, abs=NEAR)


def test_a_haunch_counts_with_its_break_where_another_takes_over() -> None:
    """The crossing of two haunches is a break: the deflection is that of the same outline given as a law."""
    haunches = (Haunch("host", 2.0, 0.3, (2.0, 2.0)), Haunch("host", 4.0, 0.2, (2.0, 2.0)))
    x = 2.0 + (0.3 - 0.0) / (0.15 + 0.1)  # 0.3 - 0.15 (x - 2) = 0.1 (x - 2)
    law = straight([0.0, 2.0, x, 4.0, 6.0], [0.4, 0.7, 0.4 + 0.3 - 0.15 * (x - 2), 0.6, 0.4])
    by_law = replace(HOST, shape=Shape("rectangle", {"width": constant(0.2), "depth": law}))
    given = {"supports": simple(L), "loads": (uniform(1e4, L),)}
    one = run(member(HOST, haunches=haunches, **given), 3.0)
    other = run(member(by_law, **given), 3.0)
    check_close(station(one, 3.0)["deflection"], station(other, 3.0)["deflection"], CLOSED)


def test_i_shape_under_a_haunch_keeps_its_flanges() -> None:
    i = part("host", "I", L, depth=0.4, web=0.01, top_width=0.2, bottom_width=0.2, top_flange=0.02, bottom_flange=0.02)
    m = member(i, haunches=(Haunch("host", 0.0, 0.4, (0.0, 2.0)),))
    found = section_at(m, 1.0)
    h, cos = 0.6, math.cos(math.atan(0.2))
    v = 0.02 / cos
    pieces = ((0.2 * 0.02, -0.01, 0.02), (0.01 * (h - 0.02 - v), -(h + 0.02 - v) / 2, h - 0.02 - v))
    pieces += ((0.2 * v * cos**4, v / 2 - h, v),)
    area, first, second = (sum(a * f(z, d) for a, z, d in pieces) for f in MOMENTS)
    check_close(found["EI_y"], 210e9 * (second - first**2 / area), CLOSED)
    as_cut = section_at(replace(m, inclined="cut"), 1.0)
    check_close(as_cut["EI_y"], 210e9 * (0.2 * h**3 - 0.19 * (h - 0.04) ** 3) / 12, CLOSED)


# laws, breaks


def test_the_two_sides_of_a_step() -> None:
    shaft = part("s", "circle", 1.0, diameter=steps([0.4, 1.0], [0.06, 0.04]))
    m = Member(1.0, (shaft,), (STEEL,))
    left, right = (section_at(m, 0.4, side)["EI_y"] for side in ("left", "right"))
    check_close(left, 210e9 * math.pi * 0.06**4 / 64, CLOSED)
    check_close(right, 210e9 * math.pi * 0.04**4 / 64, CLOSED)
    rows = [r for r in stiffness(m)["stations"] if abs(r["x"] - 0.4) < 1e-12]
    assert [r["EI_y"] for r in rows] == [left, right]


def test_part_ends_show_in_the_stiffness_table() -> None:
    m = member(HOST, replace(plate(relation="under", host="host"), start=2.0, end=5.0))
    rows = stiffness(m)["stations"]
    for x in (2.0, 5.0):
        pair = [r["EI_y"] for r in rows if abs(r["x"] - x) < 1e-12]
        assert len(pair) == 2 and abs(pair[0] - pair[1]) > 0.01 * max(pair)
    assert len([r for r in rows if abs(r["x"] - 4.0) < 1e-12]) == 1


def test_run_in_grows_stiffness_and_not_mass() -> None:
    p = replace(plate(relation="under", host="host"), start=2.0, end=6.0, run_in=(1.0, 0.5))
    m = member(HOST, p)
    for x, share in ((2.25, 0.25), (2.9, 0.9), (4.0, 1.0), (5.75, 0.5)):
        found = section_at(m, x)
        assert found["parts"][1]["E"] == pytest.approx(210e9 * share)
        check_close(found["EA"], 210e9 * (0.08 + share * 0.002), CLOSED)
        check_close(found["mass"], 7850 * (0.08 + 0.002), CLOSED)
