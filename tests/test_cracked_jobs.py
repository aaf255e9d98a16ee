"""Jobs of concrete that cracks: keys, results beside one another, notes, the second method, faults."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from commands import deflect

from fishbelly.cli.figures.stage_stresses import rows_of
from fishbelly.cli.job_file import read_job
from fishbelly.cli.main import run
from fishbelly.member.analysis import Analysis
from fishbelly.member.stress_depth import stress_over_depth

JOB = """
length = "6.5 m"
{top}
[material.concrete]
E = "31 GPa"
poisson = 0.2
creep = 2
{concrete}
[[part]]
name = "beam"
material = "concrete"
shape = "rectangle"
width = "300 mm"
depth = "420 mm"
{bars}
[[support]]
at = "0 m"
kind = "pin"
[[support]]
at = "6.5 m"
kind = "roller"
[[load]]
kind = "uniform"
value = "14 kN/m"
case = "g"
[[load]]
kind = "uniform"
value = "13 kN/m"
case = "q"
[[combination]]
name = "rare"
factors = {{ g = 1, q = 1 }}
[[combination]]
name = "lasting"
factors = {{ g = 1, q = 0.3 }}
sustained = {{ g = 1, q = 1 }}
"""
BARS = """
[[part]]
name = "bottom bars"
material = "B500"
shape = "bars"
count = 4
diameter = "20 mm"
width = "220 mm"
position = ["0 mm", "-370 mm"]
"""
CRACKS = 'cracking = "2.6 MPa"'


def job(top: str = "", concrete: str = CRACKS, bars: str = BARS) -> str:
    return JOB.format(top=top, concrete=concrete, bars=bars)


def combinations(text: str) -> dict[str, Any]:
    return {c["name"]: c for c in deflect(text)["combinations"]}


def test_results_stand_beside_one_another() -> None:
    found = combinations(job('tension_stiffening = "EN 1992-1-1"'))
    for c in found.values():
        cracked = c["cracked"]
        assert cracked["rule"] == "EN 1992-1-1" and cracked["convergence"]["status"] == "closed"
        along = cracked["along"]["value"]
        assert c["deflection"]["down"]["value"] == along
        assert cracked["uncracked"]["value"] < along < cracked["everywhere"]["value"]
        assert along == pytest.approx(cracked["one_value"]["value"], rel=0.03)
        assert c["cross_check"]["difference"] < 1e-7
    assert not found["rare"]["cracked"]["from_history"] and found["lasting"]["cracked"]["from_history"]


@pytest.mark.parametrize("rule", ["ACI 318-14", "ACI 318-19"])
def test_the_code_s_one_value_is_the_result(rule: str) -> None:
    c = combinations(job(f'tension_stiffening = "{rule}"'))["rare"]
    one = c["cracked"]["one_value"]
    assert c["deflection"]["down"]["value"] == one["value"]
    assert one["spans"][0]["sections"][0]["M"] == pytest.approx(27e3 * 6.5**2 / 8, rel=1e-9)
    assert c["cracked"]["along"]["value"] == pytest.approx(one["value"], rel=0.05)


def test_no_tension_is_cracked_from_the_start() -> None:
    """The same beam that never carries tension deflects as one cracked throughout, and that is in proportion."""
    c = combinations(job(concrete="no_tension = true"))["rare"]
    plain = combinations(job())["rare"]
    assert c["deflection"]["down"]["value"] == pytest.approx(plain["cracked"]["everywhere"]["value"], rel=1e-9)
    # and EN's value between uncracked and cracked means nothing there
    assert (
        "one_value"
        not in combinations(job('tension_stiffening = "EN 1992-1-1"', "no_tension = true"))["rare"]["cracked"]
    )


def test_by_combination() -> None:
    light = job('cracks = "by combination"').replace("q = 0.3 }\nsus", "q = 0 }\nsus").replace("14 kN/m", "2 kN/m")
    assert "cracked" not in combinations(light)["lasting"]
    assert combinations(light.replace("by combination", "history"))["lasting"]["cracked"]["from_history"]


def test_notes_say_what_was_done() -> None:
    notes = " | ".join(deflect(job())["notes"])
    assert "rare: cracked from" in notes and "cracked throughout" in notes
    assert "no tension stiffening: where a section is cracked, parts that crack carry compression alone" in notes
    assert "counted as uncracked" not in notes


def test_catalogue_concrete_cracks_when_a_key_asks() -> None:
    """Without a word of cracks in the job a note alone says where the catalogue's cracking stress is passed."""
    text = job(concrete='like = "C25/30"')
    assert "cracked" not in combinations(text)["rare"]
    assert any("counted as uncracked" in note for note in deflect(text)["notes"])
    asked = job('tension_stiffening = "EN 1992-1-1"', 'like = "C25/30"')
    assert combinations(asked)["rare"]["cracked"]["stretches"]


def test_without_bars_it_cannot_be_carried(tmp_path: Any, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "plain.toml"
    file.write_text(job(bars=""), encoding="utf-8")
    assert run(["deflect", str(file)]) == 3
    assert "without tension the section cannot carry M = " in capsys.readouterr().err


def test_band_of_the_concrete() -> None:
    """Softer concrete deflects more, stiffer less, cracked or not."""
    text = job('tension_stiffening = "EN 1992-1-1"', CRACKS + '\nband = ["26 GPa", "35 GPa"]')
    for c in combinations(text).values():
        down = c["deflection"]["down"]
        assert down["band"]["low"] > down["value"] > down["band"]["high"]


PULL = '[[load]]\nkind = "axial"\nvalue = "250 kN"\nat = "6.5 m"\ncase = "g"\n'
TOP_BARS = BARS.replace("bottom bars", "top bars").replace("-370 mm", "-50 mm")


def test_second_method_under_tension_and_bending() -> None:
    """Where the edge comes into compression strains have a kink along x; the second method finds the same."""
    text = job('tension_stiffening = "EN 1992-1-1"', bars=BARS + TOP_BARS) + PULL
    for c in combinations(text).values():
        assert c["cross_check"]["difference"] < 1e-6


def test_second_method_where_nothing_deflects() -> None:
    """Pulled along its axis alone a cracked beam does not bend: two round-offs need not agree."""
    both = BARS.replace("-370 mm", "-310 mm") + TOP_BARS.replace("-50 mm", "-110 mm")
    text = job('tension_stiffening = "EN 1992-1-1"', bars=both) + PULL.replace("250 kN", "500 kN")
    c = combinations(text.replace("14 kN/m", "0 kN/m").replace("13 kN/m", "0 kN/m"))["rare"]
    assert c["cracked"]["stretches"] and abs(c["cracked"]["along"]["value"]) < 1e-10


def test_no_second_method_says_why() -> None:
    """A cantilever's tip lies in no span: the note names that."""
    text = (
        job().replace('kind = "pin"', 'kind = "fixed"', 1).replace('[[support]]\nat = "6.5 m"\nkind = "roller"\n', "")
    )
    text = text.replace("14 kN/m", "-4 kN/m").replace("13 kN/m", "-1 kN/m")
    assert any("does not reach rare: its largest deflection lies in no span" in n for n in deflect(text)["notes"])


def test_cannot_carry_names_the_worst_place(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Without axial force no place carries anything: the one with the largest moment is named."""
    path = tmp_path / "job.toml"
    path.write_text(job(concrete="no_tension = true", bars=""), encoding="utf-8")
    assert run(["deflect", str(path)]) == 3
    assert "x = 3.25 m: without tension the section cannot carry M = 142594 N m" in capsys.readouterr().err


def test_stress_over_the_depth_is_that_at_a_crack() -> None:
    """A figure's section shows what the table says: bars at a crack, of the concrete what is pressed."""
    text = job('tension_stiffening = "EN 1992-1-1"')
    analysis = Analysis.of(read_job("-", text).member)
    peaks = {s["part"]: s for s in combinations(text)["rare"]["stress"]}
    beam, bars = stress_over_depth(analysis, "rare", 3.25)
    assert bars.stress.max() == pytest.approx(peaks["bottom bars"]["max"]["value"], rel=1e-9)
    assert beam.stress.min() == pytest.approx(peaks["beam"]["min"]["value"], rel=1e-9)
    assert beam.stress.max() == 0.0 and -0.37 < beam.z[0] < beam.z[1] == 0.0
    alone = {"part": "bottom bars", "max": {"value": 2e8}, "min": None}
    told = [{"name": "now", "combinations": [{"name": "rare", "stress": [alone]}]}]
    assert rows_of(read_job("-", text), told, "rare") == [(1, "bottom bars", "now", 0.0, 2e8)]
