"""What is taken from parts: notches, openings, grooves, and parts that overlap."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from common import CLOSED, PROMISED, check_close, part, run, simple, station, uniform
from placed_parts import HOST, NEAR, L, at, box, member, plate, tapering

from fishbelly.member.description import Notch, Opening, Placing, Shape
from fishbelly.member.laws import constant, parabola, straight
from fishbelly.member.loads import SelfWeight
from fishbelly.member.section_results import section_at

# notches


def test_notch_cuts_from_each_side() -> None:
    for side, removed in (("bottom", (0.2, 0.05)), ("top", (0.2, 0.05)), ("left", (0.05, 0.4)), ("right", (0.05, 0.4))):
        m = member(HOST, notches=(Notch("host", constant(0.05), 3.0, 4.0, side),))
        found = section_at(m, 3.5)
        width, depth = (0.2, 0.35) if side in ("bottom", "top") else (0.15, 0.4)
        check_close(found["EI_y"], 210e9 * width * depth**3 / 12, CLOSED)
        check_close(found["mass"], 7850 * width * depth, CLOSED)
        assert removed[0] * removed[1] == pytest.approx(0.08 - width * depth)
        check_close(section_at(m, 2.9)["EI_y"], 210e9 * 0.2 * 0.4**3 / 12, CLOSED)


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
        check_close(found["EI_y"], 210e9 * 0.2 * (0.35 if cut else 0.4) ** 3 / 12, CLOSED)
        check_close(found["mass"], 7850 * 0.2 * (0.35 if light else 0.4), CLOSED)


def test_reach_stays_on_its_part() -> None:
    m = member(HOST, notches=(Notch("host", constant(0.05), 0.2, 0.6, reach=0.5),))
    check_close(section_at(m, 0.0)["EI_y"], 210e9 * 0.2 * 0.35**3 / 12, CLOSED)


def test_notch_that_deepens_along_a_law_and_its_reach() -> None:
    law = straight([3.0, 4.0], [0.02, 0.1])
    m = member(HOST, notches=(Notch("host", law, 3.0, 4.0, reach=0.4),))
    for x, cut in ((2.8, 0.02), (3.25, 0.04), (3.75, 0.08), (4.2, 0.1)):
        check_close(section_at(m, x)["EI_y"], 210e9 * 0.2 * (0.4 - cut) ** 3 / 12, CLOSED)


def test_weight_of_a_notched_beam_counts_the_notch_alone() -> None:
    m = member(
        HOST, notches=(Notch("host", constant(0.05), 3.0, 4.0, reach=0.5),), supports=simple(L), loads=(SelfWeight(),)
    )
    found = run(m)
    total = sum(s["vertical"] for s in found["supports"])
    check_close(total, 9.80665 * 7850 * 0.2 * (0.4 * L - 0.05 * 1.0), CLOSED)


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
    check_close(station(run(m, 4.0), 4.0)["deflection"], 5e4 * L**4 / 384 / plain + extra, CLOSED)


# openings


@pytest.mark.parametrize("x, half", [(4.0, 0.1), (4.06, 0.08), (3.92, 0.06), (4.2, 0.0)])
def test_round_opening_follows_its_circle(x: float, half: float) -> None:
    m = member(HOST, openings=(Opening(4.0, ("host",), diameter=0.2),))
    found = section_at(m, x)
    check_close(found["EI_y"], 210e9 * 0.2 * (0.4**3 - (2 * half) ** 3) / 12, CLOSED)
    check_close(found["mass"], 7850 * 0.2 * (0.4 - 2 * half), CLOSED)


def test_opening_at_a_level_of_its_own() -> None:
    m = member(HOST, openings=(Opening(4.0, ("host",), diameter=0.1, level=-0.1),))
    found = section_at(m, 4.0)
    area, hole = 0.08, 0.02
    zc = (area * -0.2 - hole * -0.1) / (area - hole)
    check_close(found["z_c"], zc, CLOSED)
    iy = 0.2 * 0.4**3 / 12 + area * (0.2 + zc) ** 2 - 0.2 * 0.1**3 / 12 - hole * (0.1 + zc) ** 2
    check_close(found["EI_y"], 210e9 * iy, CLOSED)


def test_rectangular_opening_with_round_corners() -> None:
    m = member(HOST, openings=(Opening(4.0, ("host",), length=0.6, depth=0.2, radius=0.05),))
    for x, depth in ((4.0, 0.2), (4.24, 0.2), (4.28, 0.1 + 2 * 0.04), (3.72, 0.18), (4.31, 0.0)):
        check_close(section_at(m, x)["EI_y"], 210e9 * 0.2 * (0.4**3 - depth**3) / 12, CLOSED)


def test_opening_cuts_only_the_parts_named() -> None:
    m = member(HOST, plate(relation="centred_on", host="host"), openings=(Opening(4.0, ("host",), diameter=0.2),))
    found = section_at(m, 4.0)
    names = {p["name"]: p["area"] for p in found["parts"]}
    check_close(names["plate"], 0.002, CLOSED)
    # the plate displaces the host inside the hole, where nothing of the host is left anyway
    check_close(names["host"], 0.2 * 0.2, CLOSED)


def test_opening_of_a_tapering_beam_stands_at_the_middle_there() -> None:
    m = member(replace(HOST, shape=tapering()), openings=(Opening(4.0, ("host",), length=0.4, depth=0.1),))
    found = section_at(m, 4.0)
    check_close(found["z_c"], -0.15, CLOSED)


def test_pieces_over_an_opening_share_the_shear_angle() -> None:
    m = member(HOST, openings=(Opening(4.0, ("host",), length=0.4, depth=0.2, level=-0.15),))
    found = section_at(m, 4.0)
    check_close(found["GA_z"], 5 / 6 * 81e9 * 0.2 * 0.2, CLOSED)


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
    check_close(station(run(m, 4.0), 4.0)["deflection"], expected, PROMISED)


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
    check_close(found["EA"], 210e9 * (0.08 - 0.005), CLOSED)
    zc = (0.08 * -0.2 - 0.005 * -0.35) / 0.075
    check_close(found["z_c"], zc, CLOSED)
    check_close(section_at(member(HOST, groove), 1.5)["EA"], 210e9 * 0.08, CLOSED)


def test_later_part_displaces_the_earlier_one() -> None:
    bar = replace(plate(relation="centred_on", host="wood"))
    wood = replace(HOST, name="wood", material="timber")
    found = section_at(member(wood, bar), 1.0)
    check_close(found["EA"], 11e9 * (0.08 - 0.002) + 210e9 * 0.002, CLOSED)
    check_close(found["EI_y"], 11e9 * (0.2 * 0.4**3 - 0.1 * 0.02**3) / 12 + 210e9 * 0.1 * 0.02**3 / 12, CLOSED)


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
    check_close(station(found, 4.0)["deflection"], w, PROMISED)


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
    check_close(station(found[1], 4.0)["deflection"], station(found[0], 4.0)["deflection"], 1e-9)
