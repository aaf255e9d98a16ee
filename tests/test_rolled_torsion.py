"""Torsion constants by the formulas of section tables, against the torsion of the outline itself."""

import numpy as np
import pytest
from commands import section

from fishbelly.catalog.rolled import find_rolled
from fishbelly.cli.catalog_properties import _full
from fishbelly.sections.composition import Composition
from fishbelly.sections.outlines import OUTLINES
from fishbelly.sections.rolled_torsion import table_torsion
from fishbelly.sections.torsion import torsion

# how far tables are off the outline: I sections up to 4 %, angles (whose toes are round) 2.5 %, boxes 2.6 %
OFF = {"I": 0.04, "channel": 0.005, "angle": 0.025, "box": 0.027, "tube": 1e-9}


@pytest.mark.parametrize(
    "name",
    ["IPE 80", "HEB 300", "HEM 300", "UB 457x191x67", "W14x90", "UPE 80", "UPE 400", "PFC 200x90x30", "L 100x100x10",
     "L 150x100x12", "SHS 100x5", "RHS 200x100x8", "RHS 40x20x3 cold", "CHS 168.3x8"],
)  # fmt: skip
def test_near_the_outline(name: str) -> None:
    rolled = find_rolled(name)
    dimensions = _full(rolled.kind, rolled.dimensions)
    found = table_torsion(rolled.kind, dimensions)
    assert found is not None
    outline = OUTLINES[rolled.kind]({key: np.array([value]) for key, value in dimensions.items()})
    exact = float(torsion(Composition((outline,)), np.ones((1, 1)), [0]).GJ[0])
    assert found.I_t == pytest.approx(exact, rel=OFF[rolled.kind])


def test_a_tee_with_parallel_faces() -> None:
    dimensions = {"depth": 0.2, "width": 0.2, "web": 0.01, "flange": 0.015, "radius": 0.012}
    found = table_torsion("tee", dimensions)
    outline = OUTLINES["tee"]({key: np.array([value]) for key, value in dimensions.items()})
    exact = float(torsion(Composition((outline,)), np.ones((1, 1)), [0]).GJ[0])
    assert found is not None
    assert found.I_t == pytest.approx(exact, rel=0.005)
    assert found.I_w is None


@pytest.mark.parametrize("name", ["UPN 200", "T 50", "C10x20"])
def test_sloping_flanges_have_no_formula(name: str) -> None:
    rolled = find_rolled(name)
    assert table_torsion(rolled.kind, _full(rolled.kind, rolled.dimensions)) is None


def job(part: str) -> str:
    return (
        'length = "2 m"\nshear = false\n[material.steel]\nE = "210 GPa"\n[[part]]\nname = "beam"\n'
        f'material = "steel"\n{part}\n[[support]]\nat = "0 m"\nkind = "fixed"\n'
    )


def test_only_a_whole_rolled_shape_alone() -> None:
    whole = job('size = "HEB 200"')
    found = section(whole, "1 m")["table"]
    assert found["part"] == "beam"
    assert found["I_t"] * 1e8 == pytest.approx(59.3, abs=0.05)
    # I_z (h - t)^2 / 4 with the flanges alone: 15 * 200^3 / 6 * 185^2 / 4
    assert found["I_w"] == pytest.approx(15 * 200**3 / 6 * 185**2 / 4 * 1e-18, rel=1e-12)
    notched = whole + '[[notch]]\nof = "beam"\ndepth = "20 mm"\nfrom = "0.5 m"\nto = "1.5 m"\n'
    assert section(notched, "1 m")["table"] is None
    assert section(notched, "1.8 m")["table"]["I_t"] == found["I_t"]
    plate = '[[part]]\nname = "plate"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "9 cm"\ndepth = "1 cm"\n'
    assert section(whole + plate + 'under = "beam"\n', "1 m")["table"] is None
    welded = 'shape = "I"\ndepth = "200 mm"\nwidth = "200 mm"\nflange = "15 mm"\nweb = "9 mm"'
    assert section(job(welded), "1 m")["table"] is None
