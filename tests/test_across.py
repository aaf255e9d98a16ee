"""Unsymmetric sections and loads across the member against closed forms."""

from __future__ import annotations

import numpy as np
import pytest
from common import (
    CLOSED,
    INF,
    PROMISED,
    STEEL,
    check_close,
    fixed,
    part,
    pin,
    reaction,
    roller,
    run,
    simple,
    station,
    uniform,
)
from held_beams import EI, GA, B, E, H, L, P, Q, beam

from fishbelly.member.description import Member, Placing, Support
from fishbelly.member.loads import Point

# unsymmetric sections and loads across


def z_section(*loads: object, supports: tuple[Support, ...]) -> Member:
    parts = (
        part("web", "rectangle", L, width=0.01, depth=0.2),
        part("top", "rectangle", L, width=0.08, depth=0.01, place=Placing("over", "web", flush="left")),
        part("bottom", "rectangle", L, width=0.08, depth=0.01, place=Placing("under", "web", flush="right")),
    )
    return Member(L, parts, (STEEL,), supports=supports, loads=loads, shear=False)


def z_compliance() -> np.ndarray:
    """Inverse of the bending stiffness: curvatures (k_y, k_z) under (M_y, M_z)."""
    y, f = 0.035, 0.08 * 0.01
    iy = 0.01 * 0.2**3 / 12 + 2 * (0.08 * 0.01**3 / 12 + f * 0.105**2)
    iz = 0.2 * 0.01**3 / 12 + 2 * (0.01 * 0.08**3 / 12 + f * y**2)
    # the top flange reaches to the right of the web when left edges are flush
    iyz = 2 * f * y * 0.105
    return np.linalg.inv(E * np.array([[iy, iyz], [iyz, iz]]))


def test_z_section_moves_aside_under_vertical_load() -> None:
    found = run(z_section(uniform(1e3, L), supports=simple(L)), 3.0)
    c = z_compliance()
    shape = 5 * 1e3 * L**4 / 384
    check_close(station(found, 3.0)["deflection"], shape * c[0, 0], CLOSED)
    # down'' = -k_y and across'' = +k_z: across carries the other sign
    check_close(station(found, 3.0)["across"], -shape * c[1, 0], CLOSED)
    check_close(found["deflection"]["across"]["value"], -shape * c[1, 0], CLOSED)


def test_z_section_held_sideways_in_midspan() -> None:
    supports = (*simple(L), Support("side", 3.0, across=INF))
    found = run(z_section(uniform(1e3, L), supports=supports), 3.0)
    c = z_compliance()
    load, point = 5 * 1e3 * L**4 / 384, L**3 / 48
    # force f towards +y at midspan: across = f point c_zz, down = -f point c_yz
    f = load * c[1, 0] / (point * c[1, 1])
    check_close(reaction(found, "side", "across"), f, CLOSED)
    check_close(station(found, 3.0)["deflection"], load * c[0, 0] - f * point * c[0, 1], CLOSED)
    assert abs(station(found, 3.0)["across"]) < 1e-15


def test_z_section_with_the_ends_free_sideways_at_one_place() -> None:
    """One end free sideways and the rest held: still determinate, nothing changes at the other support."""
    supports = (pin("A", 0.0), roller("B", L, across=0.0), Support("side", 4.0, across=INF))
    found = run(z_section(uniform(1e3, L), supports=supports), 3.0)
    free = run(z_section(uniform(1e3, L), supports=simple(L)), 3.0, 4.0)
    # no force sideways is needed: vertical bending is the same, across is turned about A
    check_close(station(found, 3.0)["deflection"], station(free, 3.0)["deflection"], CLOSED)
    shifted = station(free, 3.0)["across"] - station(free, 4.0)["across"] * 3.0 / 4.0
    check_close(station(found, 3.0)["across"], shifted, PROMISED)


def test_angle_principal_axes() -> None:
    """An equal angle under vertical load moves equally in the way its principal axes say."""
    piece = part("angle", "angle", L, depth=0.1, width=0.1, web=0.01, flange=0.01)
    found = run(Member(L, (piece,), (STEEL,), supports=simple(L), loads=(uniform(500.0, L),), shear=False), 3.0)
    legs = [(0.001, 0.005, 0.05, 0.01, 0.1), (0.0009, 0.055, 0.005, 0.09, 0.01)]
    area = sum(a for a, *_ in legs)
    yc = sum(a * y for a, y, *_ in legs) / area
    zc = sum(a * z for a, _, z, *_ in legs) / area
    iy = sum(w * d**3 / 12 + a * (z - zc) ** 2 for a, y, z, w, d in legs)
    iz = sum(d * w**3 / 12 + a * (y - yc) ** 2 for a, y, z, w, d in legs)
    iyz = sum(a * (y - yc) * (z - zc) for a, y, z, w, d in legs)
    c = np.linalg.inv(E * np.array([[iy, iyz], [iyz, iz]]))
    shape = 5 * 500.0 * L**4 / 384
    check_close(station(found, 3.0)["deflection"], shape * c[0, 0], CLOSED)
    check_close(station(found, 3.0)["across"], -shape * c[1, 0], CLOSED)


@pytest.mark.parametrize("shear", [False, True])
def test_load_across(shear: bool) -> None:
    found = run(beam(uniform(Q, L, direction="across"), shear=shear), 3.0)
    iz = E * H * B**3 / 12
    w = 5 * Q * L**4 / (384 * iz) + shear * Q * L**2 / (8 * GA)
    check_close(station(found, 3.0)["across"], w, CLOSED)
    check_close(reaction(found, "A", "across"), -Q * L / 2, CLOSED)
    assert station(found, 3.0)["deflection"] == 0.0
    assert found["deflection"]["down"] is None
    check_close(found["deflection"]["across"]["value"], w, CLOSED)


def test_load_across_between_fixed_ends_and_a_sideways_spring() -> None:
    iz = E * H * B**3 / 12
    supports = (fixed("A", 0.0, along=INF), fixed("B", L))
    found = run(beam(Point(3.0, P, direction="across"), supports=supports), 3.0)
    check_close(station(found, 3.0)["across"], P * L**3 / (192 * iz), CLOSED)
    k = 2e6
    found = run(beam(Point(3.0, P, direction="across"), supports=(*simple(L), Support("S", 3.0, across=k))), 3.0)
    f = L**3 / (48 * iz)
    check_close(station(found, 3.0)["across"], P * f / (1 + k * f), CLOSED)
    check_close(reaction(found, "S", "across"), -P * k * f / (1 + k * f), CLOSED)


def test_up_is_minus_down() -> None:
    up = run(beam(uniform(Q, L, direction="up")), 3.0)
    check_close(station(up, 3.0)["deflection"], -5 * Q * L**4 / (384 * EI), CLOSED)
    assert up["deflection"]["down"] is None
    check_close(up["deflection"]["up"]["value"], 5 * Q * L**4 / (384 * EI), CLOSED)
