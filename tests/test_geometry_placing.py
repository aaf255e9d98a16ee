"""Where parts stand: placing, followers, pairs, turning and mirroring."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from common import CLOSED, check_close, part
from placed_parts import HOST, NEAR, L, at, box, member, plate, tapering

from fishbelly.member.description import Placing
from fishbelly.member.laws import straight
from fishbelly.member.section_results import section_at


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
    m = member(replace(HOST, shape=tapering()), one, two, three)
    middle = -0.3 - 1.5 * 0.02 * math.hypot(1.0, 0.025)  # plates stand t / cos deep
    at(box(m, "three", 4.0), 0.05, middle - 0.01, 0.15, middle + 0.01)


def test_follower_of_a_tapering_part_over_its_sides() -> None:
    m = member(replace(HOST, shape=tapering()), plate(relation="left_of", host="host", flush="bottom"))
    at(box(m, "plate", 4.0), -0.2, -0.3, -0.1, -0.28)


# pairs, turning, mirroring


def test_pair_stands_left_and_right_of_its_host() -> None:
    m = member(HOST, replace(plate(relation="left_of", host="host", flush="top"), pair=True))
    found = section_at(m, 1.0)
    assert found["parts"][1]["area"] == pytest.approx(2 * 0.002)
    at(box(m, "plate", 1.0), -0.2, -0.02, 0.2, 0.0)
    assert found["y_c"] == pytest.approx(0.0, abs=1e-15)
    check_close(found["EI_z"], 210e9 * (0.4 * 0.2**3 / 12 + 2 * (0.02 * 0.1**3 / 12 + 0.002 * 0.15**2)), CLOSED)


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
    check_close(found["EI_y"], iy * c * c + iz * s * s, CLOSED)
    check_close(found["EI_z"], iy * s * s + iz * c * c, CLOSED)
    check_close(found["EI_yz"], (iz - iy) * s * c, CLOSED)


def test_mirror_comes_before_turning() -> None:
    angle = part("a", "angle", L, depth=0.1, width=0.06, web=0.01, flange=0.008)
    both = section_at(member(replace(angle, mirror=True, turn=math.pi / 2)), 1.0)
    # mirrored: heel at the bottom right; turned by a quarter anticlockwise: heel at the top right
    other = section_at(member(replace(angle, turn=math.pi)), 1.0)  # heel at the top right, the legs exchanged
    assert both["EI_yz"] < 0.0
    check_close(both["EI_y"], other["EI_z"], CLOSED)
    check_close(both["EI_z"], other["EI_y"], CLOSED)
    check_close(both["EI_yz"], other["EI_yz"], CLOSED)
