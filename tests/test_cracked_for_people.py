"""Cracked members as people read them: the table, the workbook, the schema, the exit status."""

from __future__ import annotations

import io
from typing import Any

import pytest
from commands import changed, deflect
from jsonschema import Draft202012Validator
from openpyxl import load_workbook

from fishbelly.catalog.worked_jobs import worked_jobs
from fishbelly.cli.files_xlsx import xlsx_bytes
from fishbelly.cli.job_file import read_job
from fishbelly.cli.main import run
from fishbelly.cli.result_schema import result_schema
from fishbelly.cli.tables_deflect import deflect_table

JOBS = {job.name: job.text for job in worked_jobs()}
ACI = 'tension_stiffening = "ACI 318-19"'
EN = 'tension_stiffening = "EN 1992-1-1"'


def table(text: str) -> str:
    return deflect_table(deflect(text), "metric")


def test_table_tells_where_by_what_and_how_much() -> None:
    said = table(JOBS["cracked-beam"])
    final = said[said.index("Combination final") :]
    for words in (
        "Cracked; tension stiffening: EN 1992-1-1",
        "0.678  5.722   5 043  final",
        "uncracked throughout",
        "section by section along x (the result)",
        "cracked throughout, bars alone in tension",
        "One share of both: zeta = 0.9",
        "Cracks and forces agree after",
    ):
        assert words in final, words
    imposed = said[said.index("Combination imposed") : said.index("Combination final")]
    assert "other combinations for deflection have cracked more places, which count here" in imposed
    assert all(len(line) <= 80 for line in said.splitlines())


def test_table_tells_stage_by_stage() -> None:
    said = table(JOBS["bonded-plate"])
    stages = said[said.index("Cracked at the end of each stage") :]
    assert "present        0.884  5.616  all" in stages and "strengthened   0.364  6.136  all" in stages
    assert "everything in one stage, all loads at once on the section of strengthened" in said


def test_code_s_one_value_and_its_multiplier() -> None:
    said = table(changed(JOBS["cracked-beam"], (EN, ACI)))
    final = said[said.index("Combination final") :]
    for words in (
        "ACI 318-19, one I_e for each span (the result)",
        "ACI 318 multiplier for lasting load",
        "Critical sections of the code's one value",
        "lambda = 2 / (1 + 50 rho') = 1.",
    ):
        assert words in final, words
    assert "ACI 318 multiplier" not in said[: said.index("Combination final")]


def test_one_value_is_told_to_be_missing_where_there_are_stages() -> None:
    found = deflect(changed(JOBS["bonded-plate"], (EN, ACI)))
    cracked = found["by_name"]["all"]["cracked"]
    assert "one_value" not in cracked
    assert found["by_name"]["all"]["deflection"]["down"]["value"] == cracked["along"]["value"]
    assert any("one value of ACI 318-19 is not built for members with stages" in note for note in found["notes"])


@pytest.mark.parametrize("name", ["cracked-beam", "bonded-plate"])
def test_results_are_as_the_schema_says(name: str) -> None:
    result = deflect(JOBS[name])
    result.pop("by_name")
    Draft202012Validator(result_schema("deflect")).validate(result)


def test_workbook_has_its_sheets(tmp_path: Any) -> None:
    file = tmp_path / "job.toml"
    for text, wanted in (
        (JOBS["bonded-plate"], {"Cracked", "Cracked and uncracked", "Cracked by stage"}),
        (changed(JOBS["cracked-beam"], (EN, ACI)), {"Cracked", "Critical sections"}),
    ):
        file.write_text(text, encoding="utf-8")
        result = deflect(text)
        book = load_workbook(io.BytesIO(xlsx_bytes("deflect", result, read_job(str(file)))))
        assert wanted <= set(book.sheetnames)
        names = {c["name"] for c in result["combinations"]}
        assert any(v in names for row in book["Cracked"].values for v in row)


def test_stage_that_cannot_be_carried_is_status_3(tmp_path: Any, capsys: pytest.CaptureFixture[str]) -> None:
    """The place, the moment, what can be carried, and the stage."""
    placed = 'position = ["0 mm", "-370 mm"]'
    text = changed(JOBS["bonded-plate"], (placed, placed + '\nuntil = "strengthened"'))
    text = text[: text.index('[[part]]\nname = "top bars"')] + text[text.index("[[support]]") :]
    file = tmp_path / "job.toml"
    file.write_text(text, encoding="utf-8")
    assert run(["deflect", str(file)]) == 3
    said = capsys.readouterr().err
    assert "without tension the section cannot carry M = " in said
    assert "in stage strengthened" in said and "it can carry 0 N m" in said
