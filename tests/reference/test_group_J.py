"""Group J: creep factors k_def of timber products through the catalogue, modular ratios of bridge girders."""

import json

import pytest
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
