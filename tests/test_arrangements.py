"""Pattern loads on bearings that cannot pull: every arrangement has its own bearings."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest

from fishbelly.cli.main import run

JOB = """
length = "6 m"
shear = false
[material.s]
E = "10 GPa"
[[part]]
name = "a"
material = "s"
shape = "rectangle"
width = "100 mm"
depth = "200 mm"
[[support]]
name = "A"
at = "0 m"
kind = "pin"
[[support]]
name = "B"
at = "4 m"
kind = "roller"
[[support]]
name = "C"
at = "6 m"
kind = "roller"
only = "up"
[[load]]
kind = "uniform"
value = "1 kN/m"
pattern = true
[[limit]]
name = "sag"
absolute = "4.9 mm"
"""

EI = 10e9 * 0.1 * 0.2**3 / 12


def _deflect(folder: Path, text: str, capsys: pytest.CaptureFixture[str]) -> tuple[int, dict]:
    path = folder / "job.toml"
    path.write_text(text)
    status = run(["deflect", str(path), "--json"])
    return status, json.loads(capsys.readouterr().out)["combinations"][0]


def test_a_span_loaded_alone_lifts_the_far_bearing(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    status, found = _deflect(tmp_path, JOB, capsys)
    # span 1 alone on A and B: 5 w l^4 / 384 EI, and the free end turned up by w l^3 / 24 EI over 2 m
    assert found["deflection"]["down"]["value"] == pytest.approx(5 * 1e3 * 4.0**4 / (384 * EI), rel=1e-12)
    assert found["deflection"]["up"]["value"] == pytest.approx(1e3 * 4.0**3 / (24 * EI) * 2.0, rel=1e-12)
    bearing = next(s for s in found["envelope"]["supports"] if s["name"] == "C")
    assert bearing["vertical"]["min"] == 0.0
    # span 2 alone presses it: 7/16 of a two-span beam does not hold for 4 m and 2 m; three moments by hand
    hogging = 1e3 * 2.0**3 / (8 * (4.0 + 2.0))
    assert bearing["vertical"]["max"] == pytest.approx(1e3 * 2.0 / 2 - hogging / 2.0, rel=1e-12)
    assert status == 1 and found["checks"][0]["found"] == pytest.approx(0.005, rel=1e-9)


def test_a_load_upwards_presses_where_it_lifts_elsewhere(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    _, found = _deflect(tmp_path, JOB.replace("pattern = true", 'pattern = true\ndirection = "up"'), capsys)
    bearing = next(s for s in found["envelope"]["supports"] if s["name"] == "C")
    # span 1 alone pulled up: the moment over B is w l1^3 / 8 (l1 + l2), its force on C that over l2
    assert bearing["vertical"]["max"] == pytest.approx(1e3 * 4.0**3 / (8 * 6.0) / 2.0, rel=1e-12)
    assert bearing["vertical"]["min"] == 0.0


def test_too_many_arrangements_are_refused(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    supports = "".join(
        f'[[support]]\nname = "R{k}"\nat = "{k} m"\nkind = "roller"\nonly = "up"\n' for k in range(1, 13)
    )
    head, load = JOB.split("[[support]]", 1)[0], "[[load]]" + JOB.split("[[load]]", 1)[1]
    pin = '[[support]]\nname = "A"\nat = "0 m"\nkind = "pin"\n'
    path = tmp_path / "job.toml"
    path.write_text(head.replace("6 m", "12 m") + pin + supports + load)
    assert run(["deflect", str(path)]) == 3
    assert re.search("pattern loads with bearings that cannot pull: 12 loads", capsys.readouterr().err)
