"""Shear stiffness of sections as the member draws them, against closed forms."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import math
from dataclasses import replace

import mpmath as mp
import pytest
from common import CLOSED, CONCRETE, STEEL, TIMBER, check_close, part

from fishbelly.member.description import Joined, Material, Member, Opening, Placing
from fishbelly.member.laws import constant
from fishbelly.member.section_results import section_at

L = 6.0
G_STEEL, G_TIMBER = 81e9, 0.69e9
ELEMENTS = 1e-10
"""Relative; a closed form against elements that hold it but for round-off."""


def section(*parts: object, **more: object) -> dict:
    return section_at(Member(L, parts, (STEEL, TIMBER, CONCRETE), **more), 1.0)


@pytest.mark.parametrize("turn", [0.0, math.pi / 2])
def test_rectangle_has_five_sixths_both_ways(turn: float) -> None:
    found = section(replace(part("b", "rectangle", L, width=0.1, depth=0.3), turn=turn))
    for key in ("GA_y", "GA_z"):
        check_close(found[key], 5 / 6 * G_STEEL * 0.03, CLOSED)


def test_rectangle_cut_into_layers_is_the_same() -> None:
    layers = [part("l0", "rectangle", L, width=0.1, depth=0.05)]
    for k in range(1, 4):
        layers.append(part(f"l{k}", "rectangle", L, width=0.1, depth=0.05, place=Placing("under", f"l{k - 1}")))
    found = section(*layers)
    check_close(found["GA_z"], 5 / 6 * G_STEEL * 0.02, CLOSED)
    check_close(found["GA_y"], 5 / 6 * G_STEEL * 0.02, CLOSED)


def test_shear_modulus_from_poissons_ratio() -> None:
    found = section(part("b", "rectangle", L, material="concrete", width=0.3, depth=0.5))
    check_close(found["GA_z"], 5 / 6 * 33e9 / 2.4 * 0.15, CLOSED)


def sandwich(b: float, core: float, skin: float, E: tuple[float, float], G: tuple[float, float]) -> mp.mpf:
    """GA of two skins on a core: the exact integral of the shear flow squared over the depth."""
    b, core, skin = mp.mpf(b), mp.mpf(core), mp.mpf(skin)
    h = core + 2 * skin
    EI = b * (E[0] * (h**3 - core**3) + E[1] * core**3) / 12
    in_skin = lambda z: E[0] * b * (h**2 / 4 - z**2) / 2
    in_core = lambda z: E[0] * b * (h**2 - core**2) / 8 + E[1] * b * (core**2 / 4 - z**2) / 2
    energy = 2 * mp.quad(lambda z: in_core(z) ** 2 / (G[1] * b), [0, core / 2])
    energy += 2 * mp.quad(lambda z: in_skin(z) ** 2 / (G[0] * b), [core / 2, h / 2])
    return EI**2 / energy


def test_sandwich() -> None:
    core = part("core", "rectangle", L, material="timber", width=0.2, depth=0.1)
    top = part("top", "rectangle", L, width=0.2, depth=0.004, place=Placing("over", "core"))
    bottom = part("bottom", "rectangle", L, width=0.2, depth=0.004, place=Placing("under", "core"))
    check_close(
        section(core, top, bottom)["GA_z"], sandwich(0.2, 0.1, 0.004, (210e9, 11e9), (G_STEEL, G_TIMBER)), ELEMENTS
    )


def side_by_side(timber: Material, joined: Joined | None) -> dict:
    """Section of a steel plate between two timbers of its depth."""
    steel = part("steel", "rectangle", L, width=0.01, depth=0.2)
    place = Placing("left_of", "steel")
    one = part("timber", "rectangle", L, material=timber.name, width=0.05, depth=0.2, place=place)
    parts = (steel, replace(one, pair=True, joined=joined))
    return section_at(Member(L, parts, (STEEL, timber)), 1.0)


def test_timbers_with_steel_of_the_same_depth_between() -> None:
    """Side by side, equally deep and of one E/G: the same parabola over the depth, stiffnesses add."""
    soft = replace(TIMBER, G=TIMBER.E * G_STEEL / STEEL.E)
    found = side_by_side(soft, None)["GA_z"]
    check_close(found, 5 / 6 * 0.2 * (G_STEEL * 0.01 + soft.G * 0.1), ELEMENTS)


def test_timbers_fastened_to_steel_share_the_deflection_alone() -> None:
    """V splits as EI whatever E/G is, GA = (ΣEI)² / Σ(EI²/GA); glued together they are stiffer."""
    found = side_by_side(TIMBER, Joined(pitch=0.4, rows=2))
    ei = [210e9 * 0.01, 11e9 * 0.1]
    ga = [5 / 6 * 0.2 * g for g in (G_STEEL * 0.01, G_TIMBER * 0.1)]
    check_close(found["GA_z"], sum(ei) ** 2 / sum(e * e / g for e, g in zip(ei, ga, strict=True)), ELEMENTS)
    # three pieces: the pair is not one
    assert found["shear"]["pieces"] == 3
    assert side_by_side(TIMBER, None)["GA_z"] > 1.1 * found["GA_z"]


def test_circle_is_six_sevenths() -> None:
    """St Venant's flexure without lateral contraction; 1e-6 is what elements with arcs promise."""
    found = section(part("b", "circle", L, diameter=0.2))
    check_close(found["GA_z"], 6 / 7 * G_STEEL * math.pi * 0.01, 1e-6)
    check_close(found["GA_y"], 6 / 7 * G_STEEL * math.pi * 0.01, 1e-6)


def test_thin_tube_is_one_half() -> None:
    d, t = 1.0, 0.001
    found = section(part("b", "tube", L, diameter=d, wall=t))
    # the formula is that of a wall without thickness: (t/d)² and round-off of needles aside
    check_close(found["GA_z"], G_STEEL * math.pi * (d - t) * t / 2, 1e-5)


def test_thin_i_by_the_flow_along_its_walls() -> None:
    """Energy of the flow along the middle lines of flanges and web."""
    h, b, t = 0.3, 0.15, 0.0005
    sizes = {"web": t, "top_width": b, "bottom_width": b, "top_flange": t, "bottom_flange": t}
    found = section(part("b", "I", L, depth=h + t, **sizes))["GA_z"]
    inertia = 2 * b * t * (h / 2) ** 2 + t * h**3 / 12
    # flange, from its tip: q = t s h/2 / I; web, from the flange: q = (b t h/2 + t (h²/4 - z²)/2) / I
    flanges = 4 * mp.quad(lambda s: (t * s * h / 2) ** 2 / t, [0, b / 2])
    web = 2 * mp.quad(lambda z: (b * t * h / 2 + t * (h * h / 4 - z * z) / 2) ** 2 / t, [0, h / 2])
    # corners: some t of the walls' length, 1/300
    check_close(found, G_STEEL * inertia**2 / (flanges + web), 2e-3)


def test_pieces_apart_take_shear_as_their_bending_stiffness() -> None:
    """Fastened with a gap between: V splits as EI, GA = (ΣEI)² / Σ(EI²/GA)."""
    one = part("one", "rectangle", L, width=0.1, depth=0.3)
    two = part("two", "rectangle", L, width=0.1, depth=0.1, place=Placing("under", "one", gap=constant(0.05)))
    ei, ga = [0.3**3, 0.1**3], [5 / 6 * G_STEEL * 0.1 * h for h in (0.3, 0.1)]
    expected = sum(ei) ** 2 / sum(e * e / g for e, g in zip(ei, ga, strict=True))
    check_close(section(one, two)["GA_z"], expected, CLOSED)


def test_pieces_over_an_opening_share_the_shear_angle() -> None:
    beam = part("b", "rectangle", L, width=0.1, depth=0.4)
    found = section(beam, openings=(Opening(1.0, ("b",), length=0.4, depth=0.1, level=-0.1),))
    check_close(found["GA_z"], 5 / 6 * G_STEEL * 0.1 * 0.3, CLOSED)


def test_a_part_that_does_not_carry_along_adds_to_the_shear_stiffness() -> None:
    """A web with no E but full G: the flanges carry moment, constant flow between them."""
    soft = replace(STEEL, name="shear only", E=1e-3)
    t, b, h = 0.001, 0.1, 0.5
    web = part("web", "rectangle", L, material="shear only", width=t, depth=h)
    top = part("top", "rectangle", L, width=b, depth=t, place=Placing("over", "web"))
    bottom = part("bottom", "rectangle", L, width=b, depth=t, place=Placing("under", "web"))
    found = section_at(Member(L, (web, top, bottom), (STEEL, soft)), 1.0)
    # flow 1 / lever in the web; from nothing to half of it along each of four half flanges
    energy = (h / t + 4 * 0.25 * b / 2 / 3 / t) / (h + t) ** 2
    # corners: some t of the walls' length
    check_close(found["GA_z"], G_STEEL / energy, 2e-3)


def test_shear_stiffness_stays_where_the_member_is_written_differently() -> None:
    whole = part("whole", "tee", L, depth=0.3, width=0.2, web=0.02, flange=0.03)
    flange = part("flange", "rectangle", L, width=0.2, depth=0.03)
    web = part("web", "rectangle", L, width=0.02, depth=0.27, place=Placing("under", "flange"))
    one, two = section(whole), section(flange, web)
    check_close(one["GA_z"], two["GA_z"], ELEMENTS)
    check_close(one["GA_y"], two["GA_y"], ELEMENTS)
    moved = section(replace(whole, place=Placing("position", position=(constant(3.0), constant(-7.0)))))
    check_close(moved["GA_z"], one["GA_z"], 1e-11)


def test_no_shear_modulus_no_value() -> None:
    loose = replace(STEEL, name="loose", G=None)
    found = section_at(
        Member(L, (part("b", "rectangle", L, material="loose", width=0.1, depth=0.1),), (loose,), shear=False), 1.0
    )
    assert found["GA_z"] is None


def askew(turn: float) -> dict:
    """A beam into whose flange a plate runs at a small angle: slivers of both, and a gap that closes to a point."""
    flanges = {"top_width": 0.15, "bottom_width": 0.15, "top_flange": 0.015, "bottom_flange": 0.015}
    beam = part("beam", "I", L, depth=0.3, web=0.01, **flanges)
    place = Placing("position", position=(constant(0.0), constant(-0.325)))
    plate = part("plate", "rectangle", L, material="timber", width=0.2, depth=0.05, place=place)
    return section(beam, replace(plate, turn=turn))


def test_a_note_says_when_the_error_shows() -> None:
    found = askew(0.01)
    assert found["shear"]["error"] > 1e-4
    assert any("estimated error" in n and "shear stiffness" in n for n in found["notes"]), found["notes"]
    level = askew(0.0)
    assert level["shear"]["error"] < 1e-6 and "notes" not in level


def test_a_note_says_why_there_is_no_torsional_stiffness() -> None:
    place = Placing("position", position=(constant(0.1), constant(0.05)))
    one = part("one", "rectangle", L, width=0.1, depth=0.1)
    found = section(one, part("two", "rectangle", L, width=0.1, depth=0.1, place=place))
    assert found["torsion"]["GJ"] is None and len(found["shear"]["touching"]) == 1
    assert found["notes"] == ["no torsional stiffness: pieces of the cross-section touch at a point alone"]
