"""Where parts stand at any x: placing, followers, pairs, turning, haunches, notches and openings."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from common import CLOSED, PROMISED, STEEL, TIMBER, close, part, run, simple, station, uniform

from fishbelly.member.description import Haunch, Member, Notch, Opening, Part, Placing, Shape
from fishbelly.member.geometry import Geometry
from fishbelly.member.laws import constant, parabola, steps, straight
from fishbelly.member.loads import SelfWeight
from fishbelly.member.section_results import section_at, stiffness

L = 8.0
NEAR = 1e-13
"""m; coordinates of a few tenths of a metre, a handful of additions."""

HOST = part("host", "rectangle", L, width=0.2, depth=0.4)


def plate(name: str = "plate", **more: object) -> Part:
    """A plate 100 mm by 20 mm, placed as told."""
    placing = {k: more.pop(k) for k in ("relation", "host", "flush", "gap", "shift", "anchor", "position") if k in more}
    law = lambda v: v if callable(v) else constant(v)
    for key in ("shift", "position"):
        if key in placing:
            placing[key] = tuple(map(law, placing[key]))
    if "gap" in placing:
        placing["gap"] = law(placing["gap"])
    if placing.get("relation") == "position":
        placing.setdefault("anchor", "middle")
    return replace(part(name, "rectangle", L, width=0.1, depth=0.02, place=Placing(**placing)), **more)


def member(*parts: Part, **more: object) -> Member:
    return Member(L, parts, (STEEL, TIMBER), **more)


def box(m: Member, name: str, x: float, side: str = "right") -> tuple[float, float, float, float]:
    """Left, bottom, right, top of a part at x [m]."""
    placed = Geometry(m).place(np.array([x]), side)
    names = [m.parts[i].name for i in placed.index]
    return tuple(float(v[0]) for v in placed.outlines[names.index(name)].bounds())


def at(found: tuple[float, ...], *expected: float) -> None:
    assert found == pytest.approx(expected, abs=NEAR)


# placing


@pytest.mark.parametrize("anchor, top", [("top", 0.0), ("middle", 0.2), ("bottom", 0.4)])
def test_the_first_part_hangs_on_the_datum(anchor: str, top: float) -> None:
    first = replace(HOST, place=Placing(anchor=anchor))
    at(box(member(first), "host", 1.0), -0.1, top - 0.4, 0.1, top)


@pytest.mark.parametrize(
    "relation, flush, expected",
    [
        ("under", "middle", (-0.05, -0.42, 0.05, -0.4)),
        ("under", "left", (-0.1, -0.42, 0.0, -0.4)),
        ("under", "right", (0.0, -0.42, 0.1, -0.4)),
        ("over", "middle", (-0.05, 0.0, 0.05, 0.02)),
        ("over", "right", (0.0, 0.0, 0.1, 0.02)),
        ("left_of", "middle", (-0.2, -0.21, -0.1, -0.19)),
        ("left_of", "top", (-0.2, -0.02, -0.1, 0.0)),
        ("right_of", "bottom", (0.1, -0.4, 0.2, -0.38)),
        ("centred_on", "middle", (-0.05, -0.21, 0.05, -0.19)),
        ("centred_on", "top", (-0.05, -0.02, 0.05, 0.0)),
        ("centred_on", "bottom", (-0.05, -0.4, 0.05, -0.38)),
    ],
)
def test_placing_against_a_part(relation: str, flush: str, expected: tuple[float, ...]) -> None:
    at(box(member(HOST, plate(relation=relation, host="host", flush=flush)), "plate", 1.0), *expected)


@pytest.mark.parametrize(
    "relation, expected",
    [
        ("under", (-0.05, -0.45, 0.05, -0.43)),
        ("over", (-0.05, 0.03, 0.05, 0.05)),
        ("left_of", (-0.23, -0.21, -0.13, -0.19)),
        ("right_of", (0.13, -0.21, 0.23, -0.19)),
    ],
)
def test_gap_is_clear_on_the_side_of_the_host(relation: str, expected: tuple[float, ...]) -> None:
    at(box(member(HOST, plate(relation=relation, host="host", gap=0.03)), "plate", 1.0), *expected)


def test_shift_comes_on_top() -> None:
    p = plate(relation="under", host="host", gap=0.01, shift=(0.03, -0.02))
    at(box(member(HOST, p), "plate", 1.0), -0.02, -0.45, 0.08, -0.43)


@pytest.mark.parametrize(
    "anchor, expected",
    [
        ("middle", (0.25, 0.49, 0.35, 0.51)),
        ("top", (0.25, 0.48, 0.35, 0.5)),
        ("bottom", (0.25, 0.5, 0.35, 0.52)),
        ("left", (0.3, 0.49, 0.4, 0.51)),
        ("right", (0.2, 0.49, 0.3, 0.51)),
        ("top left", (0.3, 0.48, 0.4, 0.5)),
        ("bottom right", (0.2, 0.5, 0.3, 0.52)),
    ],
)
def test_position_by_anchor(anchor: str, expected: tuple[float, ...]) -> None:
    p = plate(relation="position", position=(0.3, 0.5), anchor=anchor)
    at(box(member(HOST, p), "plate", 1.0), *expected)


def test_position_gap_and_shift_follow_laws_along_x() -> None:
    slope = straight([0.0, L], [0.0, 0.8])
    p = plate(relation="position", position=(0.0, slope), anchor="bottom")
    assert box(member(HOST, p), "plate", 2.0)[1] == pytest.approx(0.2)
    p = plate(relation="over", host="host", gap=slope)
    assert box(member(HOST, p), "plate", 6.0)[1] == pytest.approx(0.6)
    p = plate(relation="over", host="host", shift=(slope, 0.0))
    assert box(member(HOST, p), "plate", 4.0)[0] == pytest.approx(0.35)


def test_parts_follow_parts_that_follow_parts() -> None:
    one = plate("one", relation="under", host="host")
    two = plate("two", relation="under", host="one")
    three = plate("three", relation="right_of", host="two")
    m = member(replace(HOST, shape=_tapering()), one, two, three)
    at(box(m, "three", 4.0), 0.05, -0.34, 0.15, -0.32)


def _tapering() -> Shape:
    return Shape("rectangle", {"width": constant(0.2), "depth": straight([0.0, L], [0.4, 0.2])})


def test_follower_of_a_tapering_part_over_its_sides() -> None:
    m = member(replace(HOST, shape=_tapering()), plate(relation="left_of", host="host", flush="bottom"))
    at(box(m, "plate", 4.0), -0.2, -0.3, -0.1, -0.28)


# haunches


def haunched(*followers: Part, law: str = "straight", side: str = "bottom") -> Member:
    return member(HOST, *followers, haunches=(Haunch("host", 0.0, 0.3, (0.0, 2.0), law, side),))


@pytest.mark.parametrize("law, extra", [("straight", 0.15), ("parabola", 0.075)])
def test_haunch_moves_the_soffit_and_what_is_under_it(law: str, extra: float) -> None:
    m = haunched(plate(relation="under", host="host"), law=law)
    at(box(m, "host", 1.0), -0.1, -0.4 - extra, 0.1, 0.0)
    at(box(m, "plate", 1.0), -0.05, -0.42 - extra, 0.05, -0.4 - extra)
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
    assert box(m, "two", 1.0)[3] == pytest.approx(-0.57, abs=NEAR)


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
    close(station(one, 3.0)["deflection"], station(other, 3.0)["deflection"], CLOSED)


def test_i_shape_under_a_haunch_keeps_its_flanges() -> None:
    i = part("host", "I", L, depth=0.4, web=0.01, top_width=0.2, bottom_width=0.2, top_flange=0.02, bottom_flange=0.02)
    m = member(i, haunches=(Haunch("host", 0.0, 0.4, (0.0, 2.0)),))
    found = section_at(m, 1.0)
    h = 0.6
    iy = (0.2 * h**3 - 0.19 * (h - 0.04) ** 3) / 12
    close(found["EI_y"], 210e9 * iy, CLOSED)


# pairs, turning, mirroring


def test_pair_stands_left_and_right_of_its_host() -> None:
    m = member(HOST, replace(plate(relation="left_of", host="host", flush="top"), pair=True))
    found = section_at(m, 1.0)
    assert found["parts"][1]["area"] == pytest.approx(2 * 0.002)
    at(box(m, "plate", 1.0), -0.2, -0.02, 0.2, 0.0)
    assert found["y_c"] == pytest.approx(0.0, abs=1e-15)
    close(found["EI_z"], 210e9 * (0.4 * 0.2**3 / 12 + 2 * (0.02 * 0.1**3 / 12 + 0.002 * 0.15**2)), CLOSED)


def test_pair_placed_against_a_part_off_the_datum_is_mirrored_about_it() -> None:
    off = plate("off", relation="position", position=(0.5, 0.0))
    m = member(HOST, off, replace(plate("p", relation="right_of", host="off"), pair=True))
    at(box(m, "p", 1.0), 0.35, -0.01, 0.65, 0.01)


def test_pair_against_a_pair_is_mirrored_about_both_together() -> None:
    inner = replace(plate("inner", relation="left_of", host="host"), pair=True)
    outer = replace(plate("outer", relation="left_of", host="inner"), pair=True)
    m = member(HOST, inner, outer)
    at(box(m, "outer", 1.0), -0.3, -0.21, 0.3, -0.19)


def test_part_placed_against_a_pair_sees_both_copies() -> None:
    inner = replace(plate("inner", relation="left_of", host="host"), pair=True)
    m = member(HOST, inner, plate("right", relation="right_of", host="inner"))
    at(box(m, "right", 1.0), 0.2, -0.21, 0.3, -0.19)


def test_first_part_as_a_pair_is_mirrored_about_the_datum() -> None:
    legs = replace(plate("legs", relation="position", position=(0.2, 0.0)), pair=True)
    at(box(member(legs), "legs", 1.0), -0.25, -0.01, 0.25, 0.01)


def test_quarter_turn_and_mirror() -> None:
    turned = replace(plate(relation="over", host="host"), turn=math.pi / 2)
    at(box(member(HOST, turned), "plate", 1.0), -0.01, 0.0, 0.01, 0.1)
    channel = part("c", "channel", L, depth=0.2, width=0.08, web=0.01, flange=0.012)
    plain, flipped = (section_at(member(replace(channel, mirror=m)), 1.0) for m in (False, True))
    width = 0.08
    # the datum runs through the middle of the bounding box
    left, _, right, _ = box(member(channel), "c", 1.0)
    assert right - left == pytest.approx(width)
    assert flipped["y_c"] - 0.5 * (left + right) == pytest.approx(-(plain["y_c"] - 0.5 * (left + right)), abs=NEAR)
    half = section_at(member(replace(channel, turn=math.pi)), 1.0)
    assert half["EI_y"] == pytest.approx(plain["EI_y"], rel=CLOSED)
    assert half["y_c"] == pytest.approx(flipped["y_c"], abs=NEAR)


def test_turning_by_an_odd_angle_turns_the_stiffness() -> None:
    angle = math.radians(27.0)
    found = section_at(member(replace(HOST, turn=angle)), 1.0)
    iy, iz = 210e9 * 0.2 * 0.4**3 / 12, 210e9 * 0.4 * 0.2**3 / 12
    c, s = math.cos(angle), math.sin(angle)
    close(found["EI_y"], iy * c * c + iz * s * s, CLOSED)
    close(found["EI_z"], iy * s * s + iz * c * c, CLOSED)
    close(found["EI_yz"], (iz - iy) * s * c, CLOSED)


def test_mirror_comes_before_turning() -> None:
    angle = part("a", "angle", L, depth=0.1, width=0.06, web=0.01, flange=0.008)
    both = section_at(member(replace(angle, mirror=True, turn=math.pi / 2)), 1.0)
    # mirrored: heel at the bottom right; turned by a quarter anticlockwise: heel at the top right
    other = section_at(member(replace(angle, turn=math.pi)), 1.0)  # heel at the top right, the legs exchanged
    assert both["EI_yz"] < 0.0
    close(both["EI_y"], other["EI_z"], CLOSED)
    close(both["EI_z"], other["EI_y"], CLOSED)
    close(both["EI_yz"], other["EI_yz"], CLOSED)


# laws, breaks


def test_the_two_sides_of_a_step() -> None:
    shaft = part("s", "circle", 1.0, diameter=steps([0.4, 1.0], [0.06, 0.04]))
    m = Member(1.0, (shaft,), (STEEL,))
    left, right = (section_at(m, 0.4, side)["EI_y"] for side in ("left", "right"))
    close(left, 210e9 * math.pi * 0.06**4 / 64, CLOSED)
    close(right, 210e9 * math.pi * 0.04**4 / 64, CLOSED)
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
        close(found["EA"], 210e9 * (0.08 + share * 0.002), CLOSED)
        close(found["mass"], 7850 * (0.08 + 0.002), CLOSED)


# notches


def test_notch_cuts_from_each_side() -> None:
    for side, removed in (("bottom", (0.2, 0.05)), ("top", (0.2, 0.05)), ("left", (0.05, 0.4)), ("right", (0.05, 0.4))):
        m = member(HOST, notches=(Notch("host", constant(0.05), 3.0, 4.0, side),))
        found = section_at(m, 3.5)
        width, depth = (0.2, 0.35) if side in ("bottom", "top") else (0.15, 0.4)
        close(found["EI_y"], 210e9 * width * depth**3 / 12, CLOSED)
        close(found["mass"], 7850 * width * depth, CLOSED)
        assert removed[0] * removed[1] == pytest.approx(0.08 - width * depth)
        close(section_at(m, 2.9)["EI_y"], 210e9 * 0.2 * 0.4**3 / 12, CLOSED)


def test_notch_reach_takes_stiffness_and_leaves_mass() -> None:
    m = member(HOST, notches=(Notch("host", constant(0.05), 3.0, 4.0, reach=0.5),))
    for x, cut, light in (
        (2.4, False, False),
        (2.6, True, False),
        (3.5, True, True),
        (4.4, True, False),
        (4.6, False, False),
    ):
        found = section_at(m, x)
        close(found["EI_y"], 210e9 * 0.2 * (0.35 if cut else 0.4) ** 3 / 12, CLOSED)
        close(found["mass"], 7850 * 0.2 * (0.35 if light else 0.4), CLOSED)


def test_reach_stays_on_its_part() -> None:
    m = member(HOST, notches=(Notch("host", constant(0.05), 0.2, 0.6, reach=0.5),))
    close(section_at(m, 0.0)["EI_y"], 210e9 * 0.2 * 0.35**3 / 12, CLOSED)


def test_notch_that_deepens_along_a_law_and_its_reach() -> None:
    law = straight([3.0, 4.0], [0.02, 0.1])
    m = member(HOST, notches=(Notch("host", law, 3.0, 4.0, reach=0.4),))
    for x, cut in ((2.8, 0.02), (3.25, 0.04), (3.75, 0.08), (4.2, 0.1)):
        close(section_at(m, x)["EI_y"], 210e9 * 0.2 * (0.4 - cut) ** 3 / 12, CLOSED)


def test_weight_of_a_notched_beam_counts_the_notch_alone() -> None:
    m = member(
        HOST, notches=(Notch("host", constant(0.05), 3.0, 4.0, reach=0.5),), supports=simple(L), loads=(SelfWeight(),)
    )
    found = run(m)
    total = sum(s["vertical"] for s in found["supports"])
    close(total, 9.80665 * 7850 * 0.2 * (0.4 * L - 0.05 * 1.0), CLOSED)


def test_a_follower_ignores_the_notch() -> None:
    m = member(HOST, plate(relation="under", host="host"), notches=(Notch("host", constant(0.05), 3.0, 4.0),))
    at(box(m, "plate", 3.5), -0.05, -0.42, 0.05, -0.4)


def test_a_short_notch_is_not_missed() -> None:
    """A notch of 1 % of the length: hand integral of the extra curvature."""
    w = 0.08
    m = member(
        HOST,
        notches=(Notch("host", constant(0.2), 4.0 - w / 2, 4.0 + w / 2),),
        supports=simple(L),
        loads=(uniform(1e4, L),),
        shear=False,
    )
    plain = 210e9 * 0.2 * 0.4**3 / 12
    thin = plain / 8
    nodes, weights = np.polynomial.legendre.leggauss(6)
    x = 4.0 - w / 2 + w / 4 * (nodes + 1)
    extra = 2 * float((1e4 * x * (L - x) / 2 * x / 2 * weights).sum()) * w / 4 * (1 / thin - 1 / plain)
    close(station(run(m, 4.0), 4.0)["deflection"], 5e4 * L**4 / 384 / plain + extra, CLOSED)


# openings


@pytest.mark.parametrize("x, half", [(4.0, 0.1), (4.06, 0.08), (3.92, 0.06), (4.2, 0.0)])
def test_round_opening_follows_its_circle(x: float, half: float) -> None:
    m = member(HOST, openings=(Opening(4.0, ("host",), diameter=0.2),))
    found = section_at(m, x)
    close(found["EI_y"], 210e9 * 0.2 * (0.4**3 - (2 * half) ** 3) / 12, CLOSED)
    close(found["mass"], 7850 * 0.2 * (0.4 - 2 * half), CLOSED)


def test_opening_at_a_level_of_its_own() -> None:
    m = member(HOST, openings=(Opening(4.0, ("host",), diameter=0.1, level=-0.1),))
    found = section_at(m, 4.0)
    area, hole = 0.08, 0.02
    zc = (area * -0.2 - hole * -0.1) / (area - hole)
    close(found["z_c"], zc, CLOSED)
    iy = 0.2 * 0.4**3 / 12 + area * (0.2 + zc) ** 2 - 0.2 * 0.1**3 / 12 - hole * (0.1 + zc) ** 2
    close(found["EI_y"], 210e9 * iy, CLOSED)


def test_rectangular_opening_with_round_corners() -> None:
    m = member(HOST, openings=(Opening(4.0, ("host",), length=0.6, depth=0.2, radius=0.05),))
    for x, depth in ((4.0, 0.2), (4.24, 0.2), (4.28, 0.1 + 2 * 0.04), (3.72, 0.18), (4.31, 0.0)):
        close(section_at(m, x)["EI_y"], 210e9 * 0.2 * (0.4**3 - depth**3) / 12, CLOSED)


def test_opening_cuts_only_the_parts_named() -> None:
    m = member(HOST, plate(relation="centred_on", host="host"), openings=(Opening(4.0, ("host",), diameter=0.2),))
    found = section_at(m, 4.0)
    names = {p["name"]: p["area"] for p in found["parts"]}
    close(names["plate"], 0.002, CLOSED)
    # the plate displaces the host inside the hole, where nothing of the host is left anyway
    close(names["host"], 0.2 * 0.2, CLOSED)


def test_opening_of_a_tapering_beam_stands_at_the_middle_there() -> None:
    m = member(replace(HOST, shape=_tapering()), openings=(Opening(4.0, ("host",), length=0.4, depth=0.1),))
    found = section_at(m, 4.0)
    close(found["z_c"], -0.15, CLOSED)


def test_pieces_over_an_opening_share_the_shear_angle() -> None:
    m = member(HOST, openings=(Opening(4.0, ("host",), length=0.4, depth=0.2, level=-0.15),))
    found = section_at(m, 4.0)
    close(found["GA_z"], 5 / 6 * 81e9 * 0.2 * 0.2, CLOSED)


def test_deflection_over_a_round_opening() -> None:
    """Root-like ends of the hole: the extra curvature integrated over the circle by its own angle."""
    d, at_x = 0.24, 3.0
    m = member(
        HOST,
        openings=(Opening(at_x, ("host",), diameter=d),),
        supports=simple(L),
        loads=(uniform(1e4, L),),
        shear=False,
    )
    nodes, weights = np.polynomial.legendre.leggauss(80)
    angle = 0.5 * np.pi * nodes
    x, hole = at_x + d / 2 * np.sin(angle), d * np.cos(angle)
    EI = lambda depth: 210e9 * 0.2 * (0.4**3 - depth**3) / 12
    M, unit = 1e4 * x * (L - x) / 2, np.where(x < 4.0, x / 2, (L - x) / 2)
    extra = float((M * unit * (1 / EI(hole) - 1 / EI(0.0)) * weights * d / 2 * np.cos(angle)).sum()) * 0.5 * np.pi
    expected = 5e4 * L**4 / 384 / EI(0.0) + extra
    close(station(run(m, 4.0), 4.0)["deflection"], expected, PROMISED)


# cuts, displacing


def test_groove_takes_from_its_part_alone() -> None:
    groove = replace(
        part(
            "groove",
            "rectangle",
            L,
            material=None,
            width=0.05,
            depth=0.1,
            place=Placing("centred_on", "host", flush="bottom"),
        ),
        cuts=("host",),
        start=2.0,
        end=3.0,
    )
    found = section_at(member(HOST, groove), 2.5)
    close(found["EA"], 210e9 * (0.08 - 0.005), CLOSED)
    zc = (0.08 * -0.2 - 0.005 * -0.35) / 0.075
    close(found["z_c"], zc, CLOSED)
    close(section_at(member(HOST, groove), 1.5)["EA"], 210e9 * 0.08, CLOSED)


def test_later_part_displaces_the_earlier_one() -> None:
    bar = replace(plate(relation="centred_on", host="wood"))
    wood = replace(HOST, name="wood", material="timber")
    found = section_at(member(wood, bar), 1.0)
    close(found["EA"], 11e9 * (0.08 - 0.002) + 210e9 * 0.002, CLOSED)
    close(found["EI_y"], 11e9 * (0.2 * 0.4**3 - 0.1 * 0.02**3) / 12 + 210e9 * 0.1 * 0.02**3 / 12, CLOSED)


def test_parts_that_begin_to_overlap_along_the_member() -> None:
    """A plate that rises through the soffit: the place where it begins to displace is found.

    Host bottom at -0.4, plate top from -0.5 at x = 0 to -0.3 at x = 8: it enters at 4 and is inside from 4.8 on.
    """
    rising = straight([0.0, L], [-0.5, -0.3])
    p = plate(relation="position", position=(0.0, rising), anchor="top")
    m = member(replace(HOST, material="timber"), p, supports=simple(L), loads=(uniform(1e4, L),), shear=False)

    def EI(x: np.ndarray) -> np.ndarray:
        top = -0.5 + 0.2 * x / L
        over = np.clip(top + 0.4, 0.0, 0.02)
        pieces = (
            (11e9 * 0.2, -0.4, 0.0),
            (210e9 * 0.1, top - 0.02, top),
            (-11e9 * 0.1, -0.4 + np.maximum(top - 0.02 + 0.4, 0.0), -0.4 + np.maximum(top - 0.02 + 0.4, 0) + over),
        )
        ea = sum(e * (b - a) for e, a, b in pieces)
        es = sum(e * (b**2 - a**2) / 2 for e, a, b in pieces)
        return sum(e * (b**3 - a**3) / 3 for e, a, b in pieces) - es**2 / ea

    nodes, weights = np.polynomial.legendre.leggauss(60)
    w = 0.0
    for a, b in ((0.0, 4.0), (4.0, 4.8), (4.8, 8.0)):
        x = a + (b - a) / 2 * (nodes + 1)
        M, unit = 1e4 * x * (L - x) / 2, np.where(x < 4.0, x / 2, (L - x) / 2)
        w += float((M * unit / EI(x) * weights).sum()) * (b - a) / 2
    found = run(m, 4.0)
    close(station(found, 4.0)["deflection"], w, PROMISED)


def test_parabola_and_plate_follow_the_same_soffit() -> None:
    law = parabola([0.0, 4.0, L], [0.3, 0.6, 0.3], [4.0])
    belly = replace(HOST, shape=Shape("rectangle", {"width": constant(0.2), "depth": law}))
    m = member(belly, plate(relation="under", host="host"))
    for x in (0.5, 2.0, 4.0, 7.0):
        depth = 0.6 - 0.3 * ((x - 4) / 4) ** 2
        assert box(m, "plate", x)[3] == pytest.approx(-depth, abs=NEAR)


@pytest.mark.parametrize("far", [10.0, 1000.0])
@pytest.mark.parametrize("kind", ["rectangle", "circle", "I"])
def test_a_tapering_part_far_from_the_datum(kind: str, far: float) -> None:
    """1 km off, coordinates lose 1e-13 m: nothing moves by more than 1e-9, and the grid does not grow without end."""
    law = parabola([0.0, L / 2], [0.2, 0.16], [L / 2])
    sizes = {
        "rectangle": {"width": 0.1, "depth": law},
        "circle": {"diameter": law},
        "I": {
            "depth": law,
            "web": 0.01,
            "top_width": 0.1,
            "bottom_width": 0.1,
            "top_flange": 0.01,
            "bottom_flange": 0.01,
            "radius": 0.01,
        },
    }[kind]
    found = []
    for z in (0.0, -far):
        where = Placing("position", position=(constant(0.0), constant(z)), anchor="middle")
        piece = part("p", kind, L, place=where, **sizes)
        found.append(run(member(piece, supports=simple(L), loads=(uniform(1e3, L),)), 4.0))
    close(station(found[1], 4.0)["deflection"], station(found[0], 4.0)["deflection"], 1e-9)
