"""Group J: creep factors k_def of timber products through the catalogue, modular ratios of bridge girders."""

import json

import pytest
from commands import deflect
from printed import rows

from fishbelly.catalog.concrete_rules import PERMANENT, aashto_modular_ratio
from fishbelly.catalog.k_def import UnknownProduct, k_def, k_def_by_class
from fishbelly.cli.main import run

ROWS = rows("J")
KSI = 1e3 * 0.45359237 * 9.80665 / 0.0254**2
PRODUCTS = {
    "J2-solid timber EN 14081-1": "solid timber",
    "J2-LVL EN 14374": "LVL",
    "J2-plywood EN 636-1": "plywood EN 636-1",
    "J2-plywood EN 636-3": "plywood EN 636-3",
    "J2-OSB/2": "OSB/2",
    "J2-particleboard P4": "particleboard P4",
    "J2-particleboard P5": "particleboard P5",
    "J2-particleboard P6": "particleboard P6",
    "J2-hardboard HB.LA": "hardboard HB.LA",
    "J2-MDF.LA": "MDF.LA",
}


def test_J1() -> None:
    found = {}
    for prefix, product in (("P", "LVL-P"), ("Cf", "LVL-C flatwise")):
        found |= {f"{prefix}{label}": value for label, value in k_def_by_class(product).items()}
    assert found == ROWS["J1"]["value"]
    # the row's title: edgewise both are alike
    assert k_def_by_class("LVL-C edgewise") == k_def_by_class("LVL-P")


@pytest.mark.parametrize("name", PRODUCTS)
def test_k_def(name: str, capsys: pytest.CaptureFixture[str]) -> None:
    """The value of every service class in which the product is allowed, none in the others; and by the command."""
    product, printed = PRODUCTS[name], ROWS[name]["value"]
    assert {f"SC{label}": value for label, value in k_def_by_class(product).items()} == printed
    for service_class in (1, 2, 3):
        if f"SC{service_class}" not in printed:
            with pytest.raises(UnknownProduct):
                k_def(product, service_class)
    assert run(["catalog", product, "--json"]) == 0
    entries = json.loads(capsys.readouterr().out)["entries"]
    (entry,) = [e for e in entries if e["group"] == "creep of timber" and e["name"] == product]
    assert entry["values"] == {f"k_def_{label[2:]}": value for label, value in printed.items()}


def test_J5() -> None:
    printed = ROWS["J5"]["value"]
    for key, least in (("n24", 2.4), ("n29", 2.9), ("n36", 3.6), ("n46", 4.6), ("n60", 6.0)):
        assert aashto_modular_ratio(least * KSI) == printed[key]
        assert aashto_modular_ratio((least + 0.4) * KSI) == printed[key]
    assert printed["longterm_multiplier"] == PERMANENT
    with pytest.raises(ValueError, match=r"at least 2\.4 ksi"):
        aashto_modular_ratio(2.3 * KSI)


JOIST = """
length = "4500 mm"
[material.lvl]
E = "13.8 GPa"
G = "600 MPa"
creep = 0.6
[[part]]
name = "joist"
shape = "rectangle"
material = "lvl"
width = "45 mm"
depth = "240 mm"
[[support]]
at = "0 mm"
kind = "pin"
[[support]]
at = "4500 mm"
kind = "roller"
[[load]]
kind = "uniform"
value = "0.9 kN/m2"
spacing = "400 mm"
case = "permanent"
[[load]]
kind = "uniform"
value = "2.0 kN/m2"
spacing = "400 mm"
case = "imposed"
[[combination]]
name = "at once"
factors = { permanent = 1, imposed = 1 }
[[combination]]
name = "final"
factors = { permanent = 1, imposed = 1 }
sustained = { permanent = 1, imposed = 0.3 }
"""


def test_J8() -> None:
    """Section 45 x 240, E 13.8 GPa and G 0.6 GPa: those of the series with which the row's two numbers come out."""
    found, printed = deflect(JOIST)["by_name"], ROWS["J8"]["value"]
    for name, key in (("at once", "winst"), ("final", "wfin")):
        assert found[name]["deflection"]["down"]["value"] * 1e3 == pytest.approx(printed[key], rel=1e-9)


def test_J3() -> None:
    """Final modulus E / (1 + k_def), told by the deflection under a load that is sustained in full; G alike."""
    text = JOIST.replace("13.8 GPa", "11 GPa").replace(
        "sustained = { permanent = 1, imposed = 0.3 }", "sustained = { permanent = 1, imposed = 1 }"
    )
    found = deflect(text)["by_name"]
    share = found["at once"]["deflection"]["down"]["value"] / found["final"]["deflection"]["down"]["value"]
    assert 11000.0 * share == pytest.approx(ROWS["J3"]["value"]["Efin"], rel=1e-12)
