"""Group L: stiffness and density of materials as published standards print them.

Every row is one test named by its id. What the catalogue holds must be the printed value itself; the row's
computation (a relation of a standard, or Table 3.1's formula) holds to the difference stated in the row.
"""

import json
import math
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from fishbelly.catalog.materials import CatalogMaterial, find_material

ROWS = json.loads(Path(__file__).with_name("group_L.json").read_text(encoding="utf-8"))
BY_ID = {row["id"]: row for row in ROWS}
PSI = 0.45359237 * 9.80665 / 0.0254**2
SPECIAL = ("L-steel", "L-ss", "L-rebar", "L-LVL48P")
TIMBER = [row for row in ROWS if row["id"] not in SPECIAL and "E0mean" in row["value"]]
CONCRETE = [row for row in ROWS if row["id"].startswith("L-EC2-")]
LUMBER = [row for row in ROWS if row["id"].startswith("L-NDS-")]
GRADES = {
    "12": "12/15",
    "20": "20/25",
    "30": "30/37",
    "40": "40/50",
    "50": "50/60",
    "60": "60/75",
    "70": "70/85",
}
GRADES["90"] = "90/105"
FIELDS = {"E0mean": "E", "E005": "E_05", "Gmean": "G", "rhomean": "density"}


def ids(rows: list[dict[str, Any]]) -> list[str]:
    return [row["id"] for row in rows]


@pytest.mark.parametrize("row", TIMBER, ids=ids(TIMBER))
def test_timber(row: dict[str, Any]) -> None:
    material = find_material(row["id"].removeprefix("L-"))
    unit = 1e9 if row["unit"].startswith("GPa") else 1e6
    for symbol, field in FIELDS.items():
        if symbol in row["value"]:
            scale = 1 if symbol == "rhomean" else unit
            assert getattr(material, field) == pytest.approx(row["value"][symbol] * scale, rel=1e-12), symbol
    for symbol, computed in row["computed"].items():
        printed = row["value"].get(symbol)
        if printed is not None:
            assert computed / printed - 1 == pytest.approx(row["rel_diff"][symbol], abs=1e-5)


@pytest.mark.parametrize("row", CONCRETE, ids=ids(CONCRETE))
def test_concrete(row: dict[str, Any]) -> None:
    """Printed values of Table 3.1 and the formulas below it."""
    strength = row["id"].removeprefix("L-EC2-C")
    material = find_material(f"C{GRADES[strength]}")
    assert material.E == row["value"]["Ecm"] * 1e9
    assert material.cracking == pytest.approx(row["value"]["fctm"] * 1e6, rel=1e-12)
    f_ck = float(strength)
    f_cm = f_ck + 8
    assert f_cm == row["value"]["fcm"]
    f_ctm = 0.30 * f_ck ** (2 / 3) if f_ck <= 50 else 2.12 * math.log(1 + f_cm / 10)
    assert f_ctm == pytest.approx(row["computed"]["fctm"], rel=2e-7)
    assert 22 * (f_cm / 10) ** 0.3 == pytest.approx(row["computed"]["Ecm"], rel=2e-7)
    assert material.cracking / 1e6 == pytest.approx(f_ctm, abs=0.05)
    assert material.E / 1e9 == pytest.approx(22 * (f_cm / 10) ** 0.3, abs=0.5)


@pytest.mark.parametrize("row", LUMBER, ids=ids(LUMBER))
def test_us_lumber(row: dict[str, Any]) -> None:
    """E and E_min; NDS Appendix D gives E_min = E (1 - 1.645 · 0.25) 1.03 / 1.66, rounded to 10 000 psi."""
    material = find_material(row["id"].removeprefix("L-NDS-").removesuffix(" (2013)"))
    assert material.E == pytest.approx(row["value"]["E"] * PSI, rel=1e-12)
    assert material.E_05 == pytest.approx(row["value"]["Emin"] * PSI, rel=1e-12)
    relation = row["value"]["E"] * (1 - 1.645 * 0.25) * 1.03 / 1.66
    assert relation == pytest.approx(row["computed"]["Emin"], rel=2e-7)
    assert material.E_05 / PSI == pytest.approx(relation, abs=5000)


def steel() -> None:
    value = BY_ID["L-steel"]["value"]
    material = find_material("S355")
    assert (material.E, material.G) == (value["E"] * 1e9, value["G"] * 1e9)
    assert (material.poisson, material.expansion) == (value["nu"], 12e-6)
    assert material.E / (2 * (1 + value["nu"])) / 1e9 == pytest.approx(81, abs=0.5)


def stainless() -> None:
    value = BY_ID["L-ss"]["value"]
    for name in ("1.4301", "1.4404", "1.4462"):
        assert find_material(name).E == value["E"] * 1e9
    for name in ("1.4539", "1.4529", "1.4547"):
        assert find_material(name).E == value["E_special"] * 1e9
    assert find_material("1.4003").E == value["E_ferritic"] * 1e9


def reinforcement() -> None:
    value = BY_ID["L-rebar"]["value"]
    for name, symbol in (("B500B", "Es"), ("prestressing strand", "strand"), ("prestressing wire", "wire")):
        assert find_material(name).E == value[symbol] * 1e9


def lvl() -> None:
    """Joist 45 x 240: EI and GA (without a shear factor, as printed) from the catalogue's E and G."""
    row = BY_ID["L-LVL48P"]
    width, depth = row["inputs"]["b"], row["inputs"]["h"]
    material: CatalogMaterial = find_material("LVL 48 P")
    assert material.G is not None
    assert material.E / 1e6 * width * depth**3 / 12 == pytest.approx(row["value"]["EI"], abs=0.5e9)
    assert material.E / 1e6 * width * depth**3 / 12 == pytest.approx(row["computed"]["EI"], rel=2e-7)
    assert material.G / 1e6 * width * depth == pytest.approx(row["value"]["GA"], rel=1e-12)


@pytest.mark.parametrize(
    "check", [steel, stainless, reinforcement, lvl], ids=["L-steel", "L-ss", "L-rebar", "L-LVL48P"]
)
def test_other(check: Callable[[], None]) -> None:
    check()


def test_every_row_is_run() -> None:
    run = ids(TIMBER) + ids(CONCRETE) + ids(LUMBER) + list(SPECIAL)
    assert sorted(run) == sorted(BY_ID)
