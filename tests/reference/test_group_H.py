"""Group H: cracked and effective sections of reinforced concrete, sources beside each row of ``group_H.json``.

Sections are computed in the row's own units. Bars stand as thin strips with the row's n times area, so that their own
second moment, which the printed values leave out, is nothing.
"""

from typing import Any

import numpy as np
import pytest
from common import simple, uniform
from cracked_beams import FOOT_LB, INCH, KSI, LBF, PSI, everything, thin_beam
from printed import half_a_digit, rows

from fishbelly.member.analysis import Analysis
from fishbelly.member.cracked_code import one_value
from fishbelly.member.description import Material
from fishbelly.sections.composition import Composition
from fishbelly.sections.effective_inertia import (
    bischoff,
    branson,
    compression_depth,
    cracked_inertia,
    distribution,
)
from fishbelly.sections.no_tension import FreePlanes, solve_section
from fishbelly.sections.outlines import rectangle

ROWS = rows("H")
THIN = 1e-6
"""Depth of a strip of bars [in]."""
STRIPS = 3e-7
"""A strip this thin displaces concrete of 1e-6 of the n times area it stands for; its thickness is good to 1e-8."""


def strip(area_n: float, depth: float, width: float) -> tuple[Any, float]:
    """A thin strip at a depth below the top, and the modulus with which it carries n times an area."""
    one = np.ones(1)
    return rectangle({"width": width * one, "depth": THIN * one}).moved(0.0, -depth), area_n / (width * THIN)


def cracked(
    b: float, h: float, bars: list[tuple[float, float]], M: float, tension: bool = False
) -> tuple[float, float]:
    """Strain at the top and curvature for E = 1 of concrete; bars as (n A, depth)."""
    one = np.ones(1)
    concrete = rectangle({"width": b * one, "depth": h * one}).moved(0.0, -0.5 * h)
    strips = [strip(nA, d, 0.9 * b) for nA, d in bars]
    section = Composition((concrete, *(s[0] for s in strips)))
    E = np.array([[1.0], *([s[1]] for s in strips)])
    which = np.array([not tension, *(False for _ in strips)])
    state = solve_section(section, E, which, FreePlanes.none(len(E), 1), np.array([[0.0], [M], [0.0]]))
    assert state.converged.all()
    return float(state.plane[0, 0]), float(state.plane[1, 0])


def test_H1() -> None:
    row, n, M = ROWS["H1"], 8.0, 60.0 * 12000.0
    top, k = cracked(14.0, 20.0, [(n * 1.76, 17.0)], M)
    found = {"x": -top / k, "I": M / k, "fc": -top, "fs": n * (top + k * 17.0)}
    for key, value in found.items():
        assert value == pytest.approx(row["computed"][key], rel=2e-7), key
        half_a_digit(value, row["value"][key], row, key)
    assert compression_depth(14.0, 17.0, n * 1.76) == pytest.approx(found["x"], rel=STRIPS)
    assert cracked_inertia(14.0, 17.0, n * 1.76) == pytest.approx(found["I"], rel=STRIPS)


def test_H2() -> None:
    """Bars displace concrete: a strip of n A in its place counts (n - 1) A where it is thin."""
    row, M = ROWS["H2"], 1.0
    top, k = cracked(10.0, 25.0, [(7.0 * 2.37, 23.0)], M, tension=True)
    found = {"ybar": -top / k, "I": M / k}
    for key, value in found.items():
        assert value == pytest.approx(row["computed"][key], rel=2e-7), key
        half_a_digit(value, row["value"][key], row, key)


@pytest.mark.parametrize("top_bars", [0.0, 1.2], ids=["H5", "H5-top-bars"])
def test_H5(top_bars: float) -> None:
    """The printed forms against the section solved by itself, with and without compression bars."""
    b, d, n, top_depth = 12.0, 21.5, 9.0, 2.5
    bars = [(n * 2.4, d)] + ([((n - 1.0) * top_bars, top_depth)] if top_bars else [])
    top, k = cracked(b, 24.0, bars, 1.0)
    more = ((n - 1.0) * top_bars, top_depth)
    # thin strips displace next to no concrete, and their thickness keeps nine digits
    assert -top / k == pytest.approx(compression_depth(b, d, n * 2.4, *more), rel=STRIPS)
    assert 1.0 / k == pytest.approx(cracked_inertia(b, d, n * 2.4, *more), rel=STRIPS)
    assert "kd=(sqrt(2dB+1)-1)/B" in ROWS["H5"]["title"]


def test_H6() -> None:
    """Both forms written out, their limits, and the row's forms at an uneven ratio."""
    I_g, I_cr, ratio = 20505.0, 2289.6, 0.585
    assert branson(I_g, I_cr, ratio) == pytest.approx(ratio**3 * I_g + (1 - ratio**3) * I_cr, rel=1e-14)
    assert bischoff(I_g, I_cr, ratio) == pytest.approx(I_cr / (1 - (1 - I_cr / I_g) * ratio**2), rel=1e-14)
    for form in (branson, bischoff):
        assert form(I_g, I_cr, [0.0, 1.0, 3.0]) == pytest.approx([I_cr, I_g, I_g], rel=1e-14)
    assert "Branson Ie=(Mcr/Ma)^3 Ig+[1-(Mcr/Ma)^3]Icr" in ROWS["H6"]["title"]


def test_H10() -> None:
    value = ROWS["H10"]["value"]
    assert float(distribution(0.5, 0.5)) == value["b05"]
    assert float(distribution(0.5, 1.0)) == value["b1"]


def test_H11() -> None:
    """A whole member: 14 in by 26 in, two No. 6 bars 23.5 in deep, 22 ft, by ACI 318-14."""
    row = ROWS["H11"]
    i = row["inputs"]
    root, length = i["fc"] ** 0.5, i["L_ft"] * 12.0 * INCH
    concrete = Material("concrete", 57000.0 * root * PSI, poisson=0.2, cracking=7.5 * root * PSI)
    bars = Material("bars", 29000.0 * KSI, poisson=0.3)
    load = uniform(i["w"] * 1000.0 * LBF / (12.0 * INCH), length)
    size = (i["b"] * INCH, i["h"] * INCH)
    member = thin_beam(
        length, size, i["As"] * INCH**2, i["d"] * INCH, concrete, bars, supports=simple(length), loads=(load,)
    )
    found = one_value(Analysis.of(member), everything(member), "ACI 318-14").spans[0]
    at = found.sections[0]
    assert at.gross / INCH**4 == pytest.approx(14 * 26**3 / 12, rel=1e-12)
    assert at.cracked / INCH**4 == pytest.approx(2289.6, abs=0.05)
    assert at.cracking / FOOT_LB / 1000.0 == pytest.approx(84.23, abs=0.005)
    assert at.moment / FOOT_LB / 1000.0 == pytest.approx(143.94, abs=0.005)
    half_a_digit(found.effective / INCH**4, row["value"]["Ie"], row, "Ie")


def test_every_row_is_run() -> None:
    assert sorted(ROWS) == ["H1", "H10", "H11", "H2", "H5", "H6", "H8"]  # H8 stands in test_group_H_rules
