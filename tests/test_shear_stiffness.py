"""Shear stiffness by level cuts: closed forms where the cuts are exact, their own integral where they are not."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import math
from dataclasses import replace

import mpmath as mp
import pytest
from common import CLOSED, CONCRETE, STEEL, TIMBER, check_close, part

from fishbelly.member.description import Member, Opening, Placing
from fishbelly.member.laws import constant
from fishbelly.member.section_results import section_at

L = 6.0
G_STEEL, G_TIMBER = 81e9, 0.69e9


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
        section(core, top, bottom)["GA_z"], sandwich(0.2, 0.1, 0.004, (210e9, 11e9), (G_STEEL, G_TIMBER)), CLOSED
    )


def test_timbers_with_steel_of_the_same_depth_between() -> None:
    """Side by side and equally deep: the same parabola over the depth, stiffnesses add."""
    steel = part("steel", "rectangle", L, width=0.01, depth=0.2)
    timber = replace(
        part("timber", "rectangle", L, material="timber", width=0.05, depth=0.2, place=Placing("left_of", "steel")),
        pair=True,
    )
    check_close(section(steel, timber)["GA_z"], 5 / 6 * 0.2 * (G_STEEL * 0.01 + G_TIMBER * 0.1), CLOSED)


def by_levels(width: object, G: float, low: float, high: float, places: tuple = ()) -> mp.mpf:
    """GA of a homogeneous section from its width, one shear strain across each level: D. J. Jourawski's form."""
    cuts = sorted({mp.mpf(v) for v in (low, *places, high)})
    area = mp.quad(width, cuts)
    z_c = mp.quad(lambda z: z * width(z), cuts) / area
    second = mp.quad(lambda z: (z - z_c) ** 2 * width(z), cuts)

    def above(z: mp.mpf) -> mp.mpf:
        return mp.quad(lambda s: (s - z_c) * width(s), [z, *(c for c in cuts if c > z)])

    return G * second**2 / mp.quad(lambda z: above(z) ** 2 / width(z), cuts)


def test_i_shape_by_levels() -> None:
    """What level cuts give for an I: its own integral, not the exact flexure solution (which is some 5 % softer)."""
    h, w, b, f = 0.3, 0.01, 0.15, 0.015
    piece = part("b", "I", L, depth=h, web=w, top_width=b, bottom_width=b, top_flange=f, bottom_flange=f)
    width = lambda z: mp.mpf(b) if abs(z) > h / 2 - f else mp.mpf(w)
    expected = by_levels(width, G_STEEL, -h / 2, h / 2, (-h / 2 + f, h / 2 - f))
    check_close(section(piece)["GA_z"], expected, CLOSED)


def test_trapezoid_by_levels() -> None:
    t, b, h = 0.2, 0.1, 0.3
    piece = part("b", "trapezoid", L, top_width=t, bottom_width=b, depth=h)
    width = lambda z: mp.mpf(b) + (mp.mpf(t) - b) * (z / h + mp.mpf(1) / 2)
    # the flow squared over a width that varies is no polynomial: six levels a slab follow it to 2e-5
    check_close(section(piece)["GA_z"], by_levels(width, G_STEEL, -h / 2, h / 2), 5e-5)


def test_circle_by_levels_is_nine_tenths() -> None:
    """One shear strain across each level; the exact flexure solution without lateral contraction has 6/7."""
    found = section(part("b", "circle", L, diameter=0.2))
    # sixteen levels a slab follow an arc to about 1e-8
    check_close(found["GA_z"], 0.9 * G_STEEL * math.pi * 0.01, 1e-7)
    check_close(found["GA_y"], 0.9 * G_STEEL * math.pi * 0.01, 1e-7)


def test_thin_tube_by_levels_is_two_thirds() -> None:
    """Vertical shear alone counts on a level; along the wall, as the exact solution has it, it would be one half."""
    d, t = 1.0, 0.001
    found = section(part("b", "tube", L, diameter=d, wall=t))
    # the formula of a thin wall, and a peak of the flow at the wall's top that 16 levels follow to 1e-4
    check_close(found["GA_z"], 2 / 3 * G_STEEL * math.pi * (d - t) * t, 5e-3)


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
    web = part("web", "rectangle", L, material="shear only", width=0.01, depth=0.5)
    top = part("top", "rectangle", L, width=0.1, depth=0.001, place=Placing("over", "web"))
    bottom = part("bottom", "rectangle", L, width=0.1, depth=0.001, place=Placing("under", "web"))
    found = section_at(Member(L, (web, top, bottom), (STEEL, soft)), 1.0)
    # constant flow 1 / lever in the web, falling straight to nothing through each flange of 1 mm
    energy = (0.5 / 0.01 + 2 * (0.001 / 3) / 0.1) / 0.501**2
    # the flanges' own bending stiffness is left out: (t / lever)² / 3 of the whole
    check_close(found["GA_z"], G_STEEL / energy, 1e-5)


def test_shear_stiffness_stays_where_the_member_is_written_differently() -> None:
    whole = part("whole", "tee", L, depth=0.3, width=0.2, web=0.02, flange=0.03)
    flange = part("flange", "rectangle", L, width=0.2, depth=0.03)
    web = part("web", "rectangle", L, width=0.02, depth=0.27, place=Placing("under", "flange"))
    one, two = section(whole), section(flange, web)
    check_close(one["GA_z"], two["GA_z"], CLOSED)
    check_close(one["GA_y"], two["GA_y"], CLOSED)
    moved = section(replace(whole, place=Placing("position", position=(constant(3.0), constant(-7.0)))))
    check_close(moved["GA_z"], one["GA_z"], 1e-11)


def test_no_shear_modulus_no_value() -> None:
    loose = replace(STEEL, name="loose", G=None)
    found = section_at(
        Member(L, (part("b", "rectangle", L, material="loose", width=0.1, depth=0.1),), (loose,), shear=False), 1.0
    )
    assert found["GA_z"] is None
