"""Members that run out to a point, against integrals of 30 digits."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import math

import mpmath as mp
import pytest
from common import (
    PROMISED,
    STEEL,
    cantilever,
    check_close,
    integral,
    part,
    run,
    simple,
    simple_moment,
    station,
    uniform,
)
from taper_formulas import L, Q

from fishbelly.member.description import Member
from fishbelly.member.faults import NoStiffness
from fishbelly.member.laws import straight
from fishbelly.member.loads import Point


def test_plan_that_runs_out_to_a_point_has_finite_slope() -> None:
    blade = part("b", "rectangle", L, width=straight([0.0, L], [0.2, 0.0]), depth=0.05)
    EI0 = 210e9 * 0.2 * 0.05**3 / 12
    tip = run(Member(L, (blade,), (STEEL,), supports=cantilever(), loads=(Point(L, 100.0),), shear=False), L)["ends"][
        "right"
    ]
    check_close(tip["deflection"], 100.0 * L**3 / (2 * EI0), PROMISED)
    check_close(tip["slope"], 100.0 * L**2 / EI0, PROMISED)
    spread = Member(L, (blade,), (STEEL,), supports=cantilever(), loads=(uniform(100.0, L),))
    tip = run(spread, L)["ends"]["right"]
    GA0 = 81e9 * 0.2 * 0.05 * 5 / 6
    check_close(tip["deflection"], 100.0 * L**4 / (6 * EI0) + 100.0 * L**2 / GA0, PROMISED)
    check_close(tip["slope"], 100.0 * L**3 / (4 * EI0) + 100.0 * L / GA0, PROMISED)


@pytest.mark.parametrize("shear", [True, False])
def test_wedge_to_a_point_has_a_deflection_and_no_slope(shear: bool) -> None:
    wedge = part("b", "rectangle", L, width=0.1, depth=straight([0.0, L], [0.3, 0.0]))
    EI0, GA0 = 210e9 * 0.1 * 0.3**3 / 12, 81e9 * 0.03 * 5 / 6
    found = run(Member(L, (wedge,), (STEEL,), supports=cantilever(), loads=(uniform(1e3, L),), shear=shear), 3.0, L)
    tip = found["ends"]["right"]
    assert tip["slope"] is None and tip["rotation"] is None
    assert station(found, L)["slope"] is None
    check_close(tip["deflection"], 1e3 * L**4 / (2 * EI0) + shear * 1e3 * L**2 / GA0, PROMISED)
    # slope at 3 m: curvature q L^3 / (2 EI0 s), s from the tip
    expected = 1e3 * L**3 / (2 * EI0) * math.log(2.0)
    check_close(station(found, 3.0)["rotation"], expected, PROMISED)


@pytest.mark.parametrize("shear", [True, False])
def test_wedge_with_a_force_at_its_point_has_no_stiffness(shear: bool) -> None:
    wedge = part("b", "rectangle", L, width=0.1, depth=straight([0.0, L], [0.3, 0.0]))
    member = Member(L, (wedge,), (STEEL,), supports=cantilever(), loads=(Point(L, 1.0),), shear=shear)
    with pytest.raises(NoStiffness) as fault:
        run(member)
    assert fault.value.at == pytest.approx(L)


def test_blade_with_a_force_at_its_point_slides_off_where_shear_counts() -> None:
    blade = part("b", "rectangle", L, width=straight([0.0, L], [0.2, 0.0]), depth=0.05)
    with pytest.raises(NoStiffness):
        run(Member(L, (blade,), (STEEL,), supports=cantilever(), loads=(Point(L, 1.0),)))


def test_beam_pointed_at_both_ends() -> None:
    """Depth runs out to a point over both supports of a simple beam: M and EI vanish as s and s^3."""
    half = L / 2
    beam = part("b", "rectangle", L, width=straight([0.0, half, L], [0.0, 0.2, 0.0]), depth=0.1)
    EI0 = mp.mpf(210e9) * mp.mpf(0.2) * mp.mpf(0.1) ** 3 / 12
    EI = lambda x: EI0 * min(x, L - x) / half
    found = run(Member(L, (beam,), (STEEL,), supports=simple(L), loads=(uniform(Q, L),), shear=False), 0.0, half)
    M = simple_moment(Q, L)
    check_close(station(found, half)["deflection"], 2 * integral(lambda x: M(x) * x / 2 / EI(x), (0, half)), PROMISED)
    check_close(station(found, 0.0)["slope"], integral(lambda x: M(x) / EI(x), (0, half)), PROMISED)
