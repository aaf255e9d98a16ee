"""Stages as people read them: `--stage`, the story, tables, files, notes."""

from __future__ import annotations

import csv
import io
import json
from pathlib import Path
from typing import Any

import pytest
from commands import KN, MM, changed, command, deflect, down
from figure_boxes import faults
from jsonschema import Draft202012Validator
from worked_run import JOBS

from fishbelly.cli.figures import pages
from fishbelly.cli.figures.curves import Curves
from fishbelly.cli.job_file import read_job
from fishbelly.cli.main import DONE, run
from fishbelly.cli.result_schema import result_schema
from fishbelly.cli.stage_grids import story
from fishbelly.member.analysis import Analysis
from fishbelly.member.results import deflect as solve
from fishbelly.member.stress_depth import stress_over_depth

SAME = 1e-12
"""Relative; one number by two roads of the same tool."""

PLATED, FLITCH, JACKED = (JOBS[n].text for n in ("plated-under-load", "flitch-in-two-stages", "jacked-and-plated"))
EI_WOOD, EI_STEEL = 11e9 * 0.15 * 0.225**3 / 12, 210e9 * 0.01 * 0.2**3 / 12


def printed(text: str, tmp_path: Path, capsys: pytest.CaptureFixture[str], *words: str) -> str:
    """What a command on a text prints."""
    job = tmp_path / "job.toml"
    job.write_text(text, encoding="utf-8")
    name, *options = words
    assert run([name, str(job), *options]) in (0, 1)
    return capsys.readouterr().out


@pytest.mark.parametrize("text", [PLATED, FLITCH, JACKED])
def test_results_are_as_the_schema_says(text: str) -> None:
    assert list(Draft202012Validator(result_schema("deflect")).iter_errors(command("deflect", text))) == []


def test_the_section_of_each_stage() -> None:
    """Without the plate, then with it; the last is what is shown where none is named."""
    bare, plated, last = (command("section", PLATED, "--at", "10 ft", *o) for o in (_of("as found"), _of("plated"), ()))
    assert [s["stage"] for s in (bare, plated, last)] == ["as found", "plated", "plated"]
    assert [p["name"] for p in bare["parts"]] == ["beam"]
    assert plated == last and plated["EI_y"] / bare["EI_y"] == pytest.approx(536.29 / 366.94, rel=1e-4)


def _of(stage: str) -> tuple[str, str]:
    return "--stage", stage


def test_a_long_term_stage_shows_the_moduli_its_loads_act_on() -> None:
    """E over 1 + creep, for the share of a part and the transformed section alike."""
    slow, quick = (command("section", FLITCH, "--at", "2 m", *_of(s)) for s in ("years", "a full house"))
    assert slow["EI_y"] == pytest.approx(EI_WOOD / 1.6 + EI_STEEL, rel=SAME)
    assert quick["EI_y"] == pytest.approx(EI_WOOD + EI_STEEL, rel=SAME)
    assert slow["parts"][0]["E"] == pytest.approx(11e9 / 1.6, rel=SAME)
    assert slow["transformed"]["n"]["steel"] == pytest.approx(210.0 / 11.0 * 1.6, rel=SAME)
    rows = command("stiffness", FLITCH, "--at", "2 m", *_of("years"))
    assert rows["stage"] == "years" and rows["stations"][0]["EI_y"] == slow["EI_y"]


def test_moduli_of_a_stage_in_its_section() -> None:
    text = changed(FLITCH, ("long_term = true", "moduli = { timber = 0.5 }"))
    found = command("section", text, "--at", "2 m", "--to", "timber", *_of("years"))
    assert found["EI_y"] == pytest.approx(EI_WOOD / 2 + EI_STEEL, rel=SAME)
    assert found["transformed"]["E"] == pytest.approx(5.5e9, rel=SAME)


def test_deflect_at_the_end_of_a_stage() -> None:
    """The same as the stage says within the whole; a limit since a later stage is not yet asked."""
    whole, early = deflect(PLATED), command("deflect", PLATED, *_of("as found"))
    total = next(c for c in early["combinations"] if c["name"] == "total")
    first = whole["stages"][0]["combinations"][1]
    assert early["stage"] == "as found" and [s["name"] for s in early["stages"]] == ["as found"]
    assert down(total) == pytest.approx(down(first), rel=SAME)
    assert total["stress"][0]["max"] == pytest.approx(first["stress"][0]["max"], rel=SAME)
    assert [k["limit"] for k in total["checks"]] == ["total load"]
    assert total["supports"][0]["vertical"] == pytest.approx(first["supports"][0]["vertical"], rel=SAME)
    last = command("deflect", PLATED, *_of("plated"))
    assert last["combinations"] == whole["combinations"]


def test_a_span_ends_at_a_prop_while_it_stands() -> None:
    spans = command("deflect", JACKED, *_of("plated"))["combinations"][0]["spans"]
    assert [(s["from"], s["to"]) for s in spans] == [(0.0, 2.0), (2.0, 4.0)]
    assert len(deflect(JACKED)["combinations"][0]["spans"]) == 1


def test_parts_carry_the_whole_moment() -> None:
    for text in (PLATED, FLITCH, JACKED):
        for stage in deflect(text)["stages"]:
            for c in stage["combinations"]:
                shares = [p["share"] for p in c["carried"]]
                if None not in shares:
                    assert sum(shares) == pytest.approx(1.0, rel=1e-9)
                assert sum(p["force"] for p in c["carried"]) == pytest.approx(0.0, abs=1e-6)


def test_what_stages_add_is_the_whole() -> None:
    """Both stages are largest in the middle."""
    for text in (PLATED, FLITCH):
        stages = deflect(text)["stages"]
        parts = [s["combinations"][-1] for s in stages]
        assert sum(p["own"]["deflection"] for p in parts) == pytest.approx(down(parts[-1]), rel=1e-12)


def test_nothing_crept_is_the_job_without_creep() -> None:
    whole = deflect(FLITCH)["stages"]
    quick = deflect(changed(FLITCH, ("creep = 0.60", "creep = 0")))["stages"]
    for a, b in zip(whole, quick, strict=True):
        one, other = a["combinations"][0], b["combinations"][0]
        assert down(one["instantaneous"]) == pytest.approx(down(other), rel=SAME)
        assert one["EI_y_short"] == pytest.approx(other["EI_y"], rel=SAME)
    assert "instantaneous" not in deflect(PLATED)["stages"][0]["combinations"][0]


def test_a_band_is_told_of_a_limit_since_a_stage() -> None:
    """With E low and high what happens since a stage moves as E does."""
    text = changed(PLATED, ('yield = "36 ksi"', 'band = ["14500 ksi", "29000 ksi"]'))
    found = next(k for k in deflect(text)["by_name"]["total"]["checks"] if k["limit"] == "since the plate")
    assert found["band"]["low"] == pytest.approx(2.0 * found["found"], rel=1e-9)
    assert found["band"]["high"] == pytest.approx(found["found"], rel=1e-9)


def test_stress_over_depth_is_what_the_stages_left() -> None:
    member = read_job("-", PLATED).member
    analysis = Analysis.of(member)
    told = {s["part"]: s for s in deflect(PLATED)["by_name"]["total"]["stress"]}
    beam, plate = stress_over_depth(analysis, "total", 0.5 * member.length)
    assert beam.stress == pytest.approx([told["beam"]["max"]["value"], told["beam"]["min"]["value"]], rel=1e-9)
    assert plate.stress[0] == pytest.approx(told["plate"]["max"]["value"], rel=1e-9)
    assert len(stress_over_depth(analysis, "total", 0.5 * member.length, stage="as found")) == 1


NONE: dict[str, list[str]] = {"parts": [], "supports": [], "hinges": []}


@pytest.mark.parametrize(
    ("stage", "number", "words"),
    [
        (
            {"comes": NONE | {"parts": ["a", "b"], "supports": ["A", "B", "C"], "hinges": ["h"]}, "cases": ["x"]},
            1,
            "1 s: a and b stand on A, B and C; hinge h is open; case x arrives.",
        ),
        (
            {"goes": NONE | {"supports": ["A", "B"], "hinges": ["h"]}, "cases": []},
            2,
            "2 s: A and B are taken away; h closes; no load arrives.",
        ),
        (
            {"creep": {"wood": 0.5, "concrete": 1.2}, "ageing": 0.8, "cases": ["x", "y"], "long_term": True},
            3,
            "3 s: creep runs off under the stress locked in (wood 0.5 and concrete 1.2, ageing coefficient 0.8); "
            "then cases x and y arrive, for long: E divided by 1 + creep.",
        ),
    ],
)
def test_the_story_of_a_stage(stage: dict[str, Any], number: int, words: str) -> None:
    plain = {"name": "s", "comes": NONE, "goes": NONE, "long_term": False, "creep": {}, "ageing": 1.0}
    assert story(plain | stage, number) == words


def test_the_table_tells_what_happened(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    out = printed(JACKED, tmp_path, capsys, "deflect")
    lines = out.splitlines()
    assert max(map(len, lines)) <= 80
    assert "  4 in use: jack is taken away; then case imposed arrives." in lines
    assert "  jack     in use  2.000  6.083   2.576  4.380" in lines
    assert "  jack        2.000      0.00    6.08    6.08    0.00" in lines
    assert "Stage by stage" not in printed(JOBS["plated-beam"].text, tmp_path, capsys, "deflect")


def test_long_term_beside_instantaneous_in_the_table(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    out = printed(FLITCH, tmp_path, capsys, "deflect")
    assert "  years          12.21  12.21      9.79  2.400  2 379       2 966  –" in out
    assert "  plate     58.9          54.2            47.2" in out


def test_a_table_at_the_end_of_a_stage_says_so(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    out = printed(JACKED, tmp_path, capsys, "deflect", "--stage", "jacked")
    assert "Deflection of a member of length 4.000 m, at the end of stage jacked" in out
    assert "in use" not in out.split("Notes")[0]


def test_files_have_the_stages(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    from openpyxl import load_workbook

    files = [tmp_path / f"out.{suffix}" for suffix in ("csv", "xlsx", "json")]
    printed(JACKED, tmp_path, capsys, "deflect", *(word for f in files for word in ("-o", str(f))))
    rows = list(csv.reader(io.StringIO(files[0].read_text(encoding="utf-8"))))
    head = next(k for k, row in enumerate(rows) if row[:3] == ["combination", "support", "stage"])
    assert rows[head - 1] == [] and rows[head + 1][1:3] == ["jack", "in use"]
    assert float(rows[head + 1][4]) == pytest.approx(48 * 11e9 * 0.16 * 0.24**3 / 12 * 0.004 / 64 / KN, rel=1e-9)
    book = load_workbook(files[1])
    assert {"Stage deflection", "Stage moment by part", "Stage stress", "Stage supports"} < set(book.sheetnames)
    told = json.loads(files[2].read_text(encoding="utf-8"))["stages"]
    column = [row[2] for row in book["Stage deflection"].iter_rows(min_row=1, values_only=True) if row[0] == "all"]
    assert column == pytest.approx([down(s["combinations"][0]) / MM for s in told], rel=1e-9)


def notes_of(text: str) -> list[str]:
    return list(deflect(text)["notes"])


def test_the_note_of_one_stage_says_what_the_job_without_stages_gives() -> None:
    note = next(n for n in notes_of(PLATED) if "everything in one stage" in n)
    assert "would have given 1.241 in in total; found here 1.465 in" in note
    assert not any("everything in one stage" in n for n in notes_of(JOBS["plated-beam"].text))


def test_notes_of_creep() -> None:
    crept = changed(FLITCH, ("long_term = true", "creep = { timber = 0.6 }"))
    assert any("creep runs off in one step, ageing coefficient 1" in n for n in notes_of(crept))
    assert not any("short-term modulus alone" in n for n in notes_of(crept) + notes_of(FLITCH))
    short = notes_of(changed(FLITCH, ("long_term = true\n", "")))
    assert any("timber creeps, and is used with its short-term modulus alone" in n for n in short)


def test_a_part_that_no_stage_uses() -> None:
    idle = changed(JACKED, ('stage = "plated"\n', 'stage = "plated"\nuntil = "in use"\n'))
    assert any("no stage uses plate: it is there in plated alone" in n for n in notes_of(idle))
    assert not any("no stage uses" in n for n in notes_of(JACKED))


def many_stages() -> str:
    """Nine stages with long names, thin parts, hogging and sagging."""
    names = [f"stage {k} in which something with a rather long name happens" for k in range(1, 10)]
    text = changed(PLATED, ('"as found"', f'"{names[0]}"'), ('"plated"', f'"{names[1]}"'))
    more = "".join(
        f'[[load]]\nkind = "point"\nvalue = "{(-1) ** k * 3} kip"\nat = "{k + 5} ft"\ncase = "c{k}"\n'
        f'[[stage]]\nname = "{name}"\ncases = ["c{k}"]\n'
        for k, name in enumerate(names[2:])
    )
    return text[: text.index("[[combination]]")] + more


@pytest.mark.parametrize("text", [PLATED, FLITCH, JACKED, many_stages()])
def test_letters_in_figures_of_stages_are_apart_and_whole(text: str) -> None:
    job = read_job("-", text)
    data = solve(job.member)
    curves = Curves(job.member)
    for c in data["combinations"]:
        figure = pages.deflect_page(job, curves, c, True, data["stages"])
        figure.set_dpi(100)
        assert faults(figure) == []


def test_figures_of_a_stage(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    for words in (("section", "--at", "10 ft"), ("stiffness",), ("deflect",)):
        pictures = [tmp_path / f"{words[0]}-{k}.svg" for k in (0, 1)]
        for picture, stage in zip(pictures, ("as found", "plated"), strict=True):
            printed(PLATED, tmp_path, capsys, *words, "--stage", stage, "-o", str(picture))
        assert pictures[0].read_bytes() != pictures[1].read_bytes()


def test_the_status_is_that_of_the_stage(tmp_path: Path) -> None:
    job = tmp_path / "job.toml"
    job.write_text(PLATED, encoding="utf-8")
    assert (run(["deflect", str(job)]), run(["deflect", str(job), *_of("as found")])) == (1, DONE)


HINGED = """
length = "6 m"
shear = false
[material.steel]
E = "210 GPa"
[[part]]
name = "beam"
material = "steel"
shape = "rectangle"
width = "100 mm"
depth = "200 mm"
[[support]]
at = "0 m"
kind = "pin"
[[support]]
at = "2 m"
kind = "roller"
across = "free"
[[support]]
at = "6 m"
kind = "roller"
[[hinge]]
at = "3 m"
stage = "hinged"
[[load]]
kind = "uniform"
value = "10 kN/m"
case = "down"
[[load]]
kind = "point"
value = "5 kN"
at = "4 m"
direction = "across"
case = "wind"
[[stage]]
name = "whole"
cases = ["down", "wind"]
[[stage]]
name = "hinged"
"""


def test_a_hinge_that_opens_moves_nothing_sideways() -> None:
    """P at a on a simple span, b = L - a: P b (L2 - b2)^1.5 / (9 sqrt(3) L EI), free of the vertical plane's hinge."""
    L, b, EI = 6.0, 2.0, 210e9 * 0.2 * 0.1**3 / 12
    expected = 5e3 * b * (L**2 - b**2) ** 1.5 / (9 * 3**0.5 * L * EI)
    for stage in deflect(HINGED)["stages"]:
        found = stage["combinations"][0]["deflection"]
        assert found["across"]["value"] == pytest.approx(expected, rel=1e-9)
    # right of the middle support a cantilever of 1 m that holds the 3 m beyond the hinge up
    down_at = deflect(HINGED, "3 m")["combinations"][0]["stations"]
    assert all(s["M"] == pytest.approx(0.0, abs=1e-6) for s in down_at)


def test_a_first_stage_in_which_nothing_arrives() -> None:
    text = changed(
        JACKED,
        ('cases = ["permanent"]', "cases = []"),
        ('cases = ["jacking"]', 'cases = ["jacking", "permanent"]'),
        ("span_over = 300", 'span_over = 300\nafter = "jacked"'),
    )
    result = deflect(text)
    first = result["stages"][0]["combinations"][0]
    assert first["deflection"] == {"down": None, "up": None, "across": None}
    assert first["own"]["deflection"] == 0.0 and first["carried"][0]["share"] is None
    assert result["stages"][0]["cases"] == [] and first["stress"][1]["max"] is None
    early = command("deflect", text, *_of("as found"))["combinations"][0]
    assert early["supports"][0]["vertical"] == 0.0 and early["checks"] == []
