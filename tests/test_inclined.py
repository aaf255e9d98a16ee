"""Flanges and plates that follow a sloping outline: E b t cos³ along the member, by hand and against closed forms."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from common import CLOSED, INF, ROUND_OFF, STEEL, TIMBER, check_close, part, simple, uniform
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, ModuliKey
from fishbelly.member.description import Haunch, Member, Opening, Part, Placing, Support
from fishbelly.member.free_strain import free_plane, resultants
from fishbelly.member.geometry import Geometry
from fishbelly.member.inclined import may_incline
from fishbelly.member.laws import constant, parabola, straight
from fishbelly.member.loads import Couple, Point, Temperature
from fishbelly.member.moduli import moduli
from fishbelly.member.profile import group_places
from fishbelly.member.results import deflect
from fishbelly.member.section_results import section_at, stiffness

L, E = 10.0, 210e9
FIXED = Support("wall", 0.0, down=INF, rotation=INF, along=INF, across=INF)
WEB = part("web", "rectangle", L, width=0.02, depth=straight([0.0, L], [1.0, 0.3]))
PLATE = part("plate", "rectangle", L, width=0.3, depth=0.02, place=Placing("under", "web"))
GIRDER = part(
    "girder",
    "I",
    L,
    depth=straight([0.0, L], [1.0, 0.3]),
    web=0.01,
    top_width=0.2,
    bottom_width=0.25,
    top_flange=0.02,
    bottom_flange=0.03,
    radius=0.012,
)


def but(p: Part, **dimensions: object) -> Part:
    """The same part with some dimensions changed."""
    return replace(p, shape=replace(p.shape, dimensions={**p.shape.dimensions, **dimensions}))


def member(*parts: Part, **more: object) -> Member:
    return Member(L, parts, (STEEL, TIMBER), **more)


def slab(width: float, low: float, high: float, share: float = 1.0) -> NDArray[np.float64]:
    """EA, E∫z and E∫z² of a rectangle."""
    ea = E * share * width * np.array([high - low, (high**2 - low**2) / 2, (high**3 - low**3) / 3])
    return np.asarray(ea)


def check_section(found: dict, pieces: NDArray[np.float64], tolerance: float = CLOSED) -> None:
    ea, first, second = pieces
    check_close(found["EA"], ea, tolerance)
    check_close(found["z_c"], first / ea, tolerance)
    check_close(found["EI_y"], second - first**2 / ea, tolerance)


# values


@pytest.mark.parametrize("degrees, over", [(7.8, 3.8), (15.0, 15.0)])
def test_plate_carries_cos_cubed_and_a_vertical_cut_overstates_it(degrees: float, over: float) -> None:
    """A vertical cut, t / cos deep, overstates by 1/cos⁴ - 1: 3.8 % at 7.8 degrees and 15 % at 15 degrees."""
    slope = math.tan(math.radians(degrees))
    web = but(WEB, depth=straight([0.0, 2.0], [1.0, 1.0 - 2 * slope]))
    m = member(replace(web, end=2.0), replace(PLATE, end=2.0))
    m = replace(m, parts=m.parts, length=2.0)
    cos = math.cos(math.radians(degrees))
    alone = section_at(replace(m, parts=m.parts[:1]), 1.0)["EA"]
    carried = section_at(m, 1.0)["EA"] - alone
    check_close(carried, E * 0.3 * 0.02 * cos**3, CLOSED)
    stands = section_at(m, 1.0)["parts"][1]["area"]
    check_close(stands, 0.3 * 0.02 / cos, CLOSED)
    check_close(section_at(m, 1.0)["mass"] - 7850 * 0.02 * (1 - slope), 7850 * 0.3 * 0.02 / cos, CLOSED)
    assert 100 * (E * stands / carried - 1.0) == pytest.approx(over, abs=0.15)
    assert section_at(m, 1.0)["parts"][1]["inclined"]["all"] == pytest.approx(math.radians(degrees), abs=1e-12)
    check_close(section_at(replace(m, inclined="cut"), 1.0)["EA"] - alone, E * 0.3 * 0.02, CLOSED)


@pytest.mark.parametrize("x", [0.0, 4.0, 9.0])
def test_tapered_i_shape_whose_lower_flange_slopes(x: float) -> None:
    h, cos = 1.0 - 0.07 * x, math.cos(math.atan(0.07))
    v = 0.03 / cos
    sharp = but(GIRDER, radius=0.0)
    pieces = slab(0.25, -h, v - h, cos**4) + slab(0.01, v - h, -0.02) + slab(0.2, -0.02, 0.0)
    check_section(section_at(member(sharp), x), pieces)
    as_cut = slab(0.25, -h, 0.03 - h) + slab(0.01, 0.03 - h, -0.02) + slab(0.2, -0.02, 0.0)
    check_section(section_at(member(sharp, inclined="cut"), x), as_cut)


def test_fillets_count_with_the_web() -> None:
    cos = math.cos(math.atan(0.07))
    along, cut = (section_at(member(GIRDER, inclined=w), 4.0) for w in ("along", "cut"))
    v = 0.03 / cos
    deeper = 0.01 * (0.03 - v)  # the web is shorter by what the flange stands deeper; its fillets move with it
    check_close(along["EA"] - cut["EA"], E * (0.25 * (v * cos**4 - 0.03) + deeper), ROUND_OFF)


def test_both_flanges_of_a_box_and_of_a_channel_about_the_middle() -> None:
    depth = straight([0.0, L], [1.0, 0.3])
    middle = Placing("datum", anchor="middle")
    cos = math.cos(math.atan(0.035))
    v, h = 0.02 / cos, 0.65
    flanges = slab(0.3, -h / 2, v - h / 2, cos**4) + slab(0.3, h / 2 - v, h / 2, cos**4)
    box = part("b", "box", L, depth=depth, width=0.3, web=0.01, flange=0.02, place=middle)
    check_close(section_at(member(box), 5.0)["EA"], flanges[0] + slab(0.02, v - h / 2, h / 2 - v)[0], CLOSED)
    check_close(section_at(member(box), 5.0)["EI_y"], flanges[2] + slab(0.02, v - h / 2, h / 2 - v)[2], CLOSED)
    channel = part("b", "channel", L, depth=depth, width=0.3, web=0.02, flange=0.02, place=middle)
    pieces = flanges + slab(0.02, v - h / 2, h / 2 - v)
    check_close(section_at(member(channel), 5.0)["EA"], pieces[0], CLOSED)
    check_close(section_at(member(channel), 5.0)["EI_y"], pieces[2], CLOSED)


def test_parabola_and_haunch_slope_as_their_derivatives() -> None:
    for haunches, web in (
        ((Haunch("web", 0.0, 0.4, (0.0, 4.0), "parabola"),), constant(0.6)),
        ((), parabola([0.0, 4.0], [1.0, 0.6], [4.0])),
    ):
        host = part("web", "rectangle", L, width=0.02, depth=web)
        m = member(host, PLATE, haunches=haunches)
        for x in (0.0, 1.0, 3.0):
            slope = 2 * 0.4 * (1 - x / 4.0) / 4.0
            cos, h = math.cos(math.atan(slope)), 0.6 + 0.4 * (1 - x / 4.0) ** 2
            v = 0.02 / cos
            check_section(section_at(m, x), slab(0.02, -h, 0.0) + slab(0.3, -h - v, -h, cos**4))
        assert "inclined" not in section_at(m, 5.0)["parts"][1]


def test_a_haunch_of_an_i_shape_leaves_its_other_flange_level() -> None:
    flat = but(GIRDER, depth=0.6)
    m = member(flat, haunches=(Haunch("girder", 0.0, 0.4, (0.0, 4.0)),))
    rows = {r["x"]: r.get("inclined") for r in stiffness(m, [1.0, 5.0])["stations"]}
    assert rows[1.0] == [{"part": "girder", "flange": "bottom", "angle": pytest.approx(math.atan(0.1))}]
    assert rows[5.0] is None


def test_plates_in_a_chain_stand_as_deep_as_they_are_cut() -> None:
    two = replace(PLATE, name="two", place=Placing("under", "plate"))
    placed = Geometry(member(WEB, PLATE, two)).place(np.array([5.0]))
    v = 0.02 * math.hypot(1.0, 0.07)
    soffits = [float(o.bounds()[1][0]) for o in placed.outlines]
    assert soffits == pytest.approx([-0.65, -0.65 - v, -0.65 - 2 * v], abs=1e-13)


def test_what_is_cut_and_what_displaces_a_flange_is_taken_off() -> None:
    """A rod in the sloping plate displaces steel with the plate's share and brings its own."""
    rod = part("rod", "circle", L, material="timber", diameter=0.01, place=Placing("centred_on", "plate"))
    bare, filled = (section_at(member(*p), 4.0)["EA"] for p in ((WEB, PLATE), (WEB, PLATE, rod)))
    cos = math.cos(math.atan(0.07))
    check_close(filled - bare, math.pi / 4 * 1e-4 * (11e9 - E * cos**4), 1e-8)
    hole = Opening(4.0, ("plate",), length=0.1, depth=0.01, level=-0.72 - 0.01 * math.hypot(1.0, 0.07))
    holed = section_at(member(WEB, PLATE, openings=(hole,)), 4.0)["EA"]
    check_close(bare - holed, E * 0.3 * 0.01 * cos**4, 1e-10)


# what does not count along a slope


@pytest.mark.parametrize(
    "parts",
    [
        (part("a", "rectangle", L, width=0.1, depth=straight([0.0, L], [1.0, 0.3])),),
        (part("a", "tube", L, diameter=straight([0.0, L], [1.0, 0.3]), wall=0.01),),
        (part("a", "I", L, depth=0.5, web=0.01, top_width=0.2, bottom_width=0.2, top_flange=0.02, bottom_flange=0.02),),
        (WEB, replace(PLATE, place=Placing("over", "web"))),
        (but(WEB, depth=0.5), replace(PLATE, place=Placing("under", "web", gap=straight([0.0, L], [0.1, 0.3])))),
        (WEB, but(PLATE, depth=straight([0.0, L], [0.1, 0.03]))),
    ],
    ids=["solid", "tube", "prismatic", "level edge", "gap", "solid in two pieces"],
)
def test_what_does_not_follow_a_sloping_outline_is_the_same_bit_for_bit(parts: tuple[Part, ...]) -> None:
    given = {"supports": simple(L), "loads": (uniform(1e4, L),)}
    along, cut = (member(*parts, inclined=w, **given) for w in ("along", "cut"))
    for x in (0.0, 3.7, 8.0):
        assert section_at(along, x) == section_at(cut, x)
        groups = group_places(Geometry(along), np.array([[x]]), np.array([x]), 0)
        assert all(g.moments is g.composition.moments for g in groups)
    assert stiffness(along)["stations"] == stiffness(cut)["stations"]


def test_nothing_is_looked_at_where_no_law_changes() -> None:
    assert not may_incline(member(but(WEB, depth=0.2), PLATE))
    assert not may_incline(member(WEB))
    assert not may_incline(member(WEB, PLATE, inclined="cut"))
    assert may_incline(member(WEB, PLATE))


# free strain, forces, stresses


@pytest.mark.parametrize("parts", [(GIRDER,), (WEB, PLATE)], ids=["flange", "plate"])
def test_uniform_heating_is_free_of_stress(parts: tuple[Part, ...]) -> None:
    load, heat = Point(L, 1e3), Temperature(0.0, L, top=30.0, bottom=30.0)
    cold, hot = (
        deflect(member(*parts, supports=(FIXED,), loads=loads, shear=False))["combinations"][0]
        for loads in ((load,), (load, heat))
    )
    full = E * 12e-6 * 30.0
    for one, other in zip(cold["stress"], hot["stress"], strict=True):
        for key in ("max", "min"):
            assert abs(one[key]["value"] - other[key]["value"]) < 1e-11 * full


def test_heating_the_plate_alone_pushes_with_its_own_share() -> None:
    """Held along at both ends and heated alone the plate pushes with E A cos⁴ of what is cut times its expansion."""
    cos, rise = math.cos(math.atan(0.07)), 30.0
    load = Temperature(0.0, L, parts={"plate": rise})
    group = group_places(Geometry(member(WEB, PLATE)), np.array([[4.0]]), np.array([4.0]), 0)[0]
    analysis = Analysis.of(member(WEB, PLATE, supports=simple(L), loads=(load,)))
    plane = free_plane(analysis.profile, load, group, np.array([4.0]), analysis.moduli(ModuliKey()))
    assert plane is not None
    force, _, _ = resultants(plane, group, np.array([[E], [E]]))
    check_close(float(force[0]), E * 12e-6 * rise * 0.3 * 0.02 * cos**3, CLOSED)


def test_a_mirrored_taper_bends_as_the_mirror_image() -> None:
    other = but(GIRDER, depth=straight([0.0, L], [0.3, 1.0]))
    results = [
        deflect(member(p, supports=simple(L), loads=(Point(at, 1e5),)), [at])["combinations"][0]
        for p, at in ((GIRDER, 3.0), (other, 7.0))
    ]
    left, right = (r["deflection"]["down"] for r in results)
    check_close(left["value"], right["value"], ROUND_OFF)
    check_close(left["at"], L - right["at"], 1e-8)


def test_upside_down_is_the_same_but_for_the_sign_of_stresses() -> None:
    standing = replace(GIRDER, place=Placing("datum", anchor="bottom"))
    turned = replace(GIRDER, turn=math.pi, place=Placing("datum", anchor="bottom"))
    hung = section_at(member(GIRDER), 4.0)
    check_close(section_at(member(turned), 4.0)["EI_y"], hung["EI_y"], CLOSED)
    # standing on its lower flange it is the upper one that slopes
    assert section_at(member(standing), 4.0)["parts"][0]["inclined"] == {"top": pytest.approx(math.atan(0.07))}


def test_stress_of_a_plate_is_along_it_and_the_forces_balance() -> None:
    """F = stress A cos² of what is cut: its couple with the web is the moment."""
    m = member(WEB, PLATE, supports=(FIXED,), loads=(Couple(L, -1e5),), shear=False)
    x = 4.0
    s = section_at(m, x)
    cos = math.cos(math.atan(0.07))
    plate = s["parts"][1]
    low = plate["z_bottom"] - s["z_c"]
    check_close(plate["stress_per_moment"]["bottom"], -E * cos**2 * low / s["EI_y"], CLOSED)
    peak = next(r for r in deflect(m)["combinations"][0]["stress"] if r["part"] == "plate")["max"]
    there = section_at(m, min(peak["at"], L * (1 - 1e-9)))
    check_close(peak["value"], 1e5 * there["parts"][1]["stress_per_moment"]["bottom"], 1e-8)


def test_shear_stress_of_the_web_is_by_what_flanges_leave_of_v() -> None:
    """Thin at the wall: there the sloping flange, pressed, adds to what the web carries, V - M tan/h of a taper."""
    web = but(WEB, depth=straight([0.0, L], [0.3, 1.0]))
    m = member(web, PLATE, supports=(FIXED,), loads=(Point(L, 1e5),))
    found, cut = (
        next(r for r in deflect(w)["combinations"][0]["stress"] if r["part"] == "web")["shear"]
        for w in (m, replace(m, inclined="cut"))
    )
    assert found["at"] == pytest.approx(0.0, abs=1e-9)
    group = group_places(Geometry(m), np.array([[0.0]]), np.array([0.0]), 0)[0]
    s, v = section_at(m, 0.0), 0.02 * math.hypot(1.0, 0.07)
    pressed = -E * 0.3 * v * math.cos(math.atan(0.07)) ** 4 * (-0.3 - v / 2 - s["z_c"]) / s["EI_y"] * -1e5 * L
    assert pressed < 0.0
    left = 1e5 + pressed * -0.07
    check_close(found["value"], left * float(group.shear_stress(moduli(m)).peak[0, 0]), ROUND_OFF)
    assert found["value"] > 2.0 * cut["value"]


# told


def test_notes_say_how_inclined_flanges_count() -> None:
    given = {"supports": simple(L), "loads": (uniform(1e4, L),)}
    texts = [[n.text for n in deflect(member(GIRDER, inclined=w, **given))["notes"]] for w in ("along", "cut")]
    along, cut = (next(t for t in several if "inclined" in t and "angle" in t) for several in texts)
    assert "counts along its slope" in along and "1.0 %" in along
    assert "as a vertical cut shows it, which overstates" in cut
