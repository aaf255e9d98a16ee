"""Properties that `fishbelly catalog` shows of sections, against the printed tables and a job's own."""

from __future__ import annotations

import csv
import json
from pathlib import Path

import pytest
from commands import command

from fishbelly.catalog.search import Entry, everything, search
from fishbelly.cli.catalog_properties import properties
from fishbelly.cli.main import DONE, run


def said(capsys: pytest.CaptureFixture[str], *words: str) -> str:
    assert run(["catalog", *words]) == DONE
    return capsys.readouterr().out


def of(name: str) -> dict[str, float]:
    entry: Entry = next(e for e in search(name) if e.name == name)
    return {symbol: value for symbol, value, _ in properties(entry)}


# printed: EN 10365, EN 10210-2, EN 10056-1 and AISC tables, from memory; shares are half a unit of the last digit
# printed, one for the angle
@pytest.mark.parametrize(
    ("name", "printed", "share"),
    [
        (
            "IPE 300",
            {"A": 53.8e-4, "I_y": 8356e-8, "I_z": 604e-8, "W_y": 557e-6, "W_z": 80.5e-6, "mass": 42.2},
            1.2e-3,
        ),
        # UPN tables are older than exact outlines
        ("UPN 200", {"A": 32.2e-4, "I_y": 1910e-8, "W_y": 191e-6, "W_z": 27.0e-6, "mass": 25.3, "y_c": 20.1e-3}, 5e-3),
        ("SHS 100x5", {"A": 18.7e-4, "I_y": 279e-8, "W_y": 55.9e-6, "mass": 14.7}, 2e-3),
        ("W16x31", {"A": 9.13 * 0.0254**2, "I_y": 375 * 0.0254**4, "W_y": 47.2 * 0.0254**3}, 5e-3),
        ("L 100x50x6", {"y_c": 10.4e-3, "z_c": 34.9e-3, "W_y": 13.8e-6, "W_z": 3.89e-6}, 7e-3),
    ],
)
def test_as_the_tables_print_them(name: str, printed: dict[str, float], share: float) -> None:
    found = of(name)
    for symbol, value in printed.items():
        assert found[symbol] == pytest.approx(value, rel=share), symbol


def test_lumber_has_no_mass_and_a_symmetric_section_no_centroid() -> None:
    assert set(of("2x10")) == {"A", "I_y", "I_z", "W_y", "W_z"}
    assert of("2x10")["W_y"] == pytest.approx(1.5 * 9.25**2 / 6 * 0.0254**3, rel=1e-12)
    assert {"y_c", "z_c", "I_yz"}.isdisjoint(of("IPE 300"))
    assert "y_c" in of("UPN 200") and "z_c" not in of("UPN 200")


def test_every_section_has_them() -> None:
    for entry in everything():
        found = {symbol: value for symbol, value, _ in properties(entry)}
        assert bool(found) == (entry.group == "rolled section"), entry.name
        assert all(value > 0.0 for symbol, value in found.items() if symbol != "I_yz"), entry.name


@pytest.mark.parametrize("name", ["HEA 200", "UPN 200", "L 100x50x6", "T 100", "RHS 60x40x3 cold", "CHS 168.3x6.3"])
def test_a_job_has_the_same(name: str) -> None:
    job = f'length = "2 m"\n[[part]]\nname = "p"\nsize = "{name}"\nmaterial = "S275"\n'
    to = command("section", job, "--at", "1 m", "--to", "S275")["transformed"]
    found = of(name)
    assert to["A"] == pytest.approx(found["A"], rel=1e-9)
    assert to["I_y"] == pytest.approx(found["I_y"], rel=1e-9)


def test_in_full_in_lists_and_as_data(capsys: pytest.CaptureFixture[str]) -> None:
    text = said(capsys, "IPE 300")
    assert "Computed from the dimensions\n    A     53.81 cm2" in text
    assert "42.24 kg/m" in text and "of steel at 7850 kg/m3" in text
    assert "47.3" in said(capsys, "W16x31", "--units", "us") and "lb/ft" in said(capsys, "W16x31", "--units", "us")
    assert "I_y   178.5 cm4" in said(capsys, "T 100")
    listed = said(capsys, "IPE")
    row = next(line for line in listed.splitlines() if line.startswith("    IPE 300"))
    assert "53.81" in row and "8356" in row and "are computed from the dimensions" in listed
    data = json.loads(said(capsys, "IPE 300", "--json"))["entries"][0]["computed"]
    assert data["W_y"] == pytest.approx(data["I_y"] / 0.15, rel=1e-12)
    assert data["from"] == "the dimensions" and data["steel_density"] == 7850.0


def test_in_files(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = tmp_path / "ipe.csv"
    said(capsys, "IPE 300", "-o", str(path))
    rows = [r for r in csv.DictReader(path.read_text(encoding="utf-8").splitlines()) if r["name"] == "IPE 300"]
    found = {row["quantity"].partition(",")[0]: (float(row["value"]), row["unit"]) for row in rows}
    assert found["W_y"] == (pytest.approx(557.07, abs=0.02), "cm3")


def test_labels_of_materials_are_keys_of_a_job(capsys: pytest.CaptureFixture[str]) -> None:
    text = said(capsys, "S275")
    assert "  yield      275 MPa" in text and "yield_strength" not in text
    assert json.loads(said(capsys, "S275", "--json"))["entries"][0]["values"]["yield"] == 275e6
