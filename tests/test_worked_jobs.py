"""Worked jobs that ship: each runs, and gives what its comment says it gives."""

import json
import re
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from commands import KN, MM, changed, check_prints, deflect, down
from worked_answers import ANSWERS
from worked_run import answer

from fishbelly.catalog.worked_jobs import worked_jobs
from fishbelly.cli.main import run

JOBS = {job.name: job.text for job in worked_jobs()}
Values = list[tuple[float, str]]


def found(combination: Any, limit: str) -> dict[str, Any]:
    return next(c for c in combination["checks"] if c["limit"] == limit)


def notched_joist(text: str) -> Values:
    result = deflect(text)["by_name"]
    cuts = text[text.index("\n[[notch]]") : text.index("\n[[support]]")]
    whole = deflect(changed(text, (cuts, "")))["by_name"]
    return [
        (down(result["imposed"]) / MM, "6.36 mm"),
        (found(result["imposed"], "imposed load")["allowed"] / MM, "8.67 mm"),
        (down(result["all"]) / MM, "9.75 mm"),
        (found(result["all"], "all load")["allowed"] / MM, "14 mm"),
        (down(whole["imposed"]) / MM, "5.68 mm"),
        (down(whole["all"]) / MM, "8.71 mm"),
    ]


def haunched_rafter(text: str) -> Values:
    result = deflect(text)["by_name"]
    sliding = deflect(changed(text, ('along = "held"\n', "")))["by_name"]
    assert sliding["all"]["supports"][0]["along"] == pytest.approx(0.0, abs=1e-6)
    return [
        (down(result["snow"]) / MM, "9.44 mm"),
        (found(result["snow"], "snow")["allowed"] / MM, "30.56 mm"),
        (down(result["all"]) / MM, "14.65 mm"),
        (found(result["all"], "all load")["allowed"] / MM, "44.00 mm"),
        (result["snow"]["supports"][0]["along"] / KN, "30.1 kN"),
        (result["all"]["supports"][0]["along"] / KN, "46.7 kN"),
        (down(sliding["snow"]) / MM, "9.58 mm"),
        (down(sliding["all"]) / MM, "14.86 mm"),
    ]


EXPECTED: dict[str, Callable[[str], Values]] = {
    "haunched-rafter": haunched_rafter,
    "notched-joist": notched_joist,
    **ANSWERS,
}


def test_every_worked_job_is_tried() -> None:
    assert set(JOBS) == set(EXPECTED)


@pytest.mark.parametrize("name", EXPECTED)
def test_gives_what_its_comment_says(name: str) -> None:
    """Every number with a unit in the comment is computed, to half of its last digit, and none besides."""
    text = JOBS[name]
    head = text.split("\n\n", 1)[0]
    comment = " ".join(line.removeprefix("#").strip() for line in head.splitlines())
    answer = comment[comment.index("Expected:") :]
    values = EXPECTED[name](text)
    for value, said in values:
        check_prints(value, said.split()[0])
    stated = re.findall(r"\d[\d.]* (?:mm|in|N|kNm?|MPa|ksi|mrad|%)(?= |,|;|\.|$)", answer)
    assert stated == [said for _, said in in_order(answer, values)]


def in_order(answer: str, values: Values) -> Values:
    """Values by their place in the comment, each said once."""
    assert all(answer.count(said) >= 1 for _, said in values)
    return sorted(values, key=lambda value: re.search(rf"(?<![\d.]){re.escape(value[1])}", answer).start())  # type: ignore[union-attr]


FAILS = {"plated-under-load": ["total load"], "bonded-plate": ["total"]}
"""Show a limit that only the stages find missed."""


@pytest.mark.parametrize("name", FAILS)
def test_some_show_a_limit_that_is_missed(name: str) -> None:
    missed = [k["limit"] for c in answer(name)["combinations"] for k in c["checks"] if not k["ok"]]
    assert missed == FAILS[name]


@pytest.mark.parametrize("name", sorted(set(EXPECTED) - set(FAILS)))
def test_meets_its_limits(name: str) -> None:
    assert all(check["ok"] for c in answer(name)["combinations"] for check in c["checks"])


@pytest.mark.parametrize("name", EXPECTED)
def test_first_line_says_what_it_shows(name: str) -> None:
    first = JOBS[name].splitlines()[0]
    assert first.startswith("# ") and 20 < len(first) <= 110


def test_start_lists_and_prints(capsys: pytest.CaptureFixture[str]) -> None:
    assert run(["start"]) == 0
    listed = capsys.readouterr().out
    assert all(name in listed for name in EXPECTED)
    assert run(["start", "flitch-beam"]) == 0
    assert capsys.readouterr().out == JOBS["flitch-beam"]


def test_from_start_to_answer_as_typed(tmp_path: Path) -> None:
    """``start flitch-beam`` into a file, then ``deflect`` on it, each a process of its own."""
    fishbelly = [sys.executable, "-m", "fishbelly"]
    job = tmp_path / "my-beam.toml"
    with job.open("w", encoding="utf-8") as file:
        subprocess.run([*fishbelly, "start", "flitch-beam"], stdout=file, check=True, cwd=tmp_path)
    words = [*fishbelly, "deflect", job.name, "--json"]
    done = subprocess.run(words, capture_output=True, text=True, check=True, cwd=tmp_path)
    final = json.loads(done.stdout)["combinations"][1]
    check_prints(down(final) / MM, "14.72")
