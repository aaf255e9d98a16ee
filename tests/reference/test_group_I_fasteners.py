"""Group I: slip moduli of fasteners, EN 1995-1-1, Table 7.1."""

import json

import pytest
from printed import half_a_digit, rows

from fishbelly.catalog.fasteners import slip_modulus
from fishbelly.cli.main import run

ROWS = rows("I")


def test_I5(capsys: pytest.CaptureFixture[str]) -> None:
    """A bolt of 12 mm in timber of 420 kg/m3, by the function and by the command: C24 has that density."""
    row = ROWS["I5"]
    assert run(["catalog", "bolt", "--json"]) == 0
    (entry,) = json.loads(capsys.readouterr().out)["entries"]
    for found in (slip_modulus("bolt", 0.012, 420.0), entry["values"]["K_ser_C24"]):
        half_a_digit(found / 1e3, row["value"]["Kser_bolt"], row, "Kser_bolt")
        assert found / 1e3 == pytest.approx(row["computed"]["Kser_bolt"], rel=1e-7)
    # the row's title; the nail form is that of row I1
    rho, d = 420.0, 12.0
    forms = {
        "dowel": rho**1.5 * d / 23,
        "screw": rho**1.5 * d / 23,
        "predrilled nail": rho**1.5 * d / 23,
        "nail": rho**1.5 * d**0.8 / 30,
        "staple": rho**1.5 * d**0.8 / 80,
        "split ring": rho * d / 2,
        "shear plate": rho * d / 2,
        "toothed plate C1 to C9": 1.5 * rho * d / 4,
        "toothed plate C10, C11": rho * d / 2,
    }
    for name, form in forms.items():
        assert slip_modulus(name, 0.012, rho) / 1e3 == pytest.approx(form, rel=1e-12), name


def test_I1() -> None:
    """The nail of the lattice: 2.5 mm, 350 kg/m3."""
    row = ROWS["I1"]
    found = slip_modulus("nail", 0.0025, 350.0) / 1e3
    half_a_digit(found, row["value"]["Kser"], row, "Kser")
    assert found == pytest.approx(row["computed"]["Kser"], rel=1e-7)
