"""Surveys as jobs read them: csv of several habits, workbooks, and what is wrong in them; scenario S8 end to end."""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest

from fishbelly.cli.faults import JobFaults
from fishbelly.cli.job_file import read_job
from fishbelly.cli.main import run

JOB = """
length = "2.7 m"
shear = false
[material.steel]
E = "205 GPa"
[[part]]
name = "plate"
material = "steel"
shape = "rectangle"
width = "100 mm"
depth = { file = "FILE", x = "station", value = "depth left" }
[[support]]
at = "0 m"
kind = "pin"
[[support]]
at = "2.7 m"
kind = "roller"
[[load]]
kind = "uniform"
value = "1 kN/m"
"""


def _job(folder: Path, name: str) -> Path:
    path = folder / "job.toml"
    path.write_text(JOB.replace("FILE", name))
    return path


def _depths(folder: Path, name: str) -> list[float]:
    law = read_job(str(_job(folder, name))).member.parts[0].shape.dimensions["depth"]
    return [round(float(law(np.array(x))), 6) for x in (0.0, 1.35, 2.7)]


@pytest.mark.parametrize(
    "text",
    [
        "station [mm],depth left [mm]\n0,8.6\n1350,5.4\n2700,8.7\n",
        "station [mm];depth left [mm]\n0;8,6\n1350;5,4\n2700;8,7\n",
        "\ufeffstation (m);depth left (cm)\n\n# measured at low water\n0;0,86\n1,35;0,54\n2,7;0,87\n",
        "remark,depth left [mm],station [m]\nnew,8.6,0\n,5.4,1.35\n,8.7,2.7\n",
    ],
)
def test_csv_of_several_habits(text: str, tmp_path: Path) -> None:
    (tmp_path / "survey.csv").write_text(text, encoding="utf-8")
    assert _depths(tmp_path, "survey.csv") == [0.0086, 0.0054, 0.0087]


def _workbook(path: Path, rows: list[list[object]]) -> None:
    from openpyxl import Workbook

    book = Workbook()
    for row in rows:
        book.active.append(row)
    book.save(path)


HEAD: list[object] = ["station [mm]", "depth left [mm]"]


def test_a_workbook(tmp_path: Path) -> None:
    rows: list[list[object]] = [["# survey of the north side"], HEAD, [0, 8.6], [], [1350, 5.4], [2700, 8.7]]
    _workbook(tmp_path / "survey.xlsx", rows)
    assert _depths(tmp_path, "survey.xlsx") == [0.0086, 0.0054, 0.0087]


@pytest.mark.parametrize(
    ("rows", "words"),
    [
        ([HEAD, [0, 8], [1350, 6], [900, 7]], r"survey.xlsx:4: .*stations in order of x, got 0.9 m after 1.35 m"),
        ([HEAD, [0, 8], [1350, 6], [1350, 7]], r"survey.xlsx:4: .*each station once, got the station at 1.35 m again"),
        ([HEAD, [0, 8], [None, 6], [2700, 7]], r"survey.xlsx:3: .*a number, got an empty cell"),
        ([HEAD, [0, 8], [2800, 7]], r"survey.xlsx:3: .*a station on the member, 0 to 2.7 m, got 2.8 m"),
        ([HEAD, [0, "thin"], [2700, 7]], r'survey.xlsx:2: .*got "thin"'),
        ([["station", "depth left [mm]"], [0, 8], [2700, 7]], r'survey.xlsx:1: .*"station" without one'),
        ([["station [mm]", "depth [mm]"], [0, 8], [2700, 7]], r'no column "depth left" in survey.xlsx'),
    ],
)
def test_what_is_wrong_in_a_survey(rows: list[list[object]], words: str, tmp_path: Path) -> None:
    _workbook(tmp_path / "survey.xlsx", rows)
    with pytest.raises(JobFaults, match=words):
        read_job(str(_job(tmp_path, "survey.xlsx")))


def test_a_file_that_is_no_workbook(tmp_path: Path) -> None:
    (tmp_path / "survey.xlsx").write_text("station [mm],depth left [mm]\n0,8\n2700,7\n")
    with pytest.raises(JobFaults, match=r"survey\.xlsx"):
        read_job(str(_job(tmp_path, "survey.xlsx")))


# Scenario S8: a corroded lintel; the survey's loss is on the outer face of the bottom flange
STATION = np.arange(7) * 0.45
FLANGE = np.array([8.6, 7.9, 6.3, 5.4, 6.6, 8.0, 8.7]) * 1e-3
BREADTH = np.array([102, 100, 94, 90, 95, 100, 102]) * 1e-3
LOW_WEB = np.array([5.8, 5.3, 4.4, 3.9, 4.6, 5.4, 5.9]) * 1e-3
H, B, T, W, LOW, L, E = 0.178, 0.102, 0.009, 0.006, 0.045, 2.7, 205e9


def _scenario(folder: Path) -> Path:
    rows = ["station [mm];bottom flange [mm];breadth [mm];low web [mm]"]
    for x, t, b, w in zip(STATION, FLANGE, BREADTH, LOW_WEB, strict=True):
        rows.append(";".join(f"{1000 * v:.1f}".replace(".", ",") for v in (x, t, b, w)))
    (folder / "survey.csv").write_text("\n".join(rows) + "\n")

    def column(name: str) -> str:
        return f'{{ file = "survey.csv", x = "station", value = "{name}" }}'

    def part(name: str, width: str, depth: str, place: str) -> str:
        return (
            f'[[part]]\nname = "{name}"\nmaterial = "steel"\nshape = "rectangle"\n'
            f"width = {width}\ndepth = {depth}\n{place}\n"
        )

    text = 'length = "2.7 m"\nshear = false\n[material.steel]\nE = "205 GPa"\n'
    text += part("top flange", '"102 mm"', '"9 mm"', "")
    text += part("web", '"6 mm"', '"124 mm"', 'under = "top flange"')
    text += part("low web", column("low web"), '"36 mm"', 'under = "web"')
    text += part("bottom flange", column("breadth"), column("bottom flange"), 'under = "low web"')
    text += '[[support]]\nat = "0 m"\nkind = "pin"\n[[support]]\nat = "2.7 m"\nkind = "roller"\n'
    text += '[[load]]\nkind = "uniform"\nvalue = "9.5 kN/m"\n'
    text += '[[load]]\nkind = "varying"\nstations = [["0 m", "0 kN/m"], ["1.35 m", "5.81 kN/m"], ["2.7 m", "0 kN/m"]]\n'
    text += '[[limit]]\nname = "L/600"\nspan_over = 600\n[[limit]]\nname = "lintel"\nabsolute = "7.6 mm"\n'
    (folder / "lintel.toml").write_text(text)
    return folder / "lintel.toml"


def _EI(x: np.ndarray) -> np.ndarray:
    """By hand: four rectangles, the flange's inner face stays where it was built."""
    t, b, w = (np.interp(x, STATION, v) for v in (FLANGE, BREADTH, LOW_WEB))
    one = np.ones_like(x)
    pieces = [
        (B * one, T, -T / 2),
        (W * one, 0.124, -T - 0.062),
        (w, 0.036, -T - 0.124 - 0.018),
        (b, t, -0.169 - t / 2),
    ]
    A = [width * depth for width, depth, _ in pieces]
    z = sum(a * p[2] for a, p in zip(A, pieces, strict=True)) / sum(A)
    return E * sum(a * (p[1] ** 2 / 12 + (p[2] - z) ** 2) for a, p in zip(A, pieces, strict=True))


def test_corroded_lintel_end_to_end(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """S8 of the working scenarios; no expected figure is handed out, so the unit-load integral stands beside it."""
    status = run(["deflect", str(_scenario(tmp_path)), "--json", "-o", str(tmp_path / "lintel.xlsx")])
    data = json.loads(capsys.readouterr().out)
    found = data["combinations"][0]["deflection"]["down"]
    nodes, weights = np.polynomial.legendre.leggauss(40)
    at, total = found["at"], 0.0
    for a, b in zip(*(lambda e: (e[:-1], e[1:]))(np.unique([*STATION, 1.35, at])), strict=True):
        x = 0.5 * (a + b) + 0.5 * (b - a) * nodes
        q, top = 9.5e3, 5.81e3
        triangle = top * L / 4 * np.minimum(x, L - x) - top / 1.35 * np.minimum(x, L - x) ** 3 / 6
        moment = q * x * (L - x) / 2 + triangle
        unit = np.where(x < at, x * (L - at) / L, at * (L - x) / L)
        total += 0.5 * (b - a) * float(weights @ (moment * unit / _EI(x)))
    assert found["value"] == pytest.approx(total, rel=1e-10)
    checks = {c["limit"]: c for c in data["combinations"][0]["checks"]}
    assert checks["L/600"]["allowed"] == pytest.approx(0.0045)
    assert status == (0 if all(c["ok"] for c in checks.values()) else 1)
    assert (tmp_path / "lintel.xlsx").exists()


def test_a_survey_that_stops_short_is_said(tmp_path: Path) -> None:
    (tmp_path / "survey.csv").write_text("station [mm],depth left [mm]\n200,8.6\n1350,5.4\n")
    warnings = read_job(str(_job(tmp_path, "survey.csv"))).warnings
    assert warnings == (
        "survey.csv ends at x = 1.35 m: its last value is used up to 2.7 m",
        "survey.csv begins at x = 0.2 m: its first value is used from 0",
    )
