"""The command line as a user meets it: statuses, words, pipes and files."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest
from commands import SIMPLE_BEAM

from fishbelly.cli import main as command_line
from fishbelly.cli.last_net import CANNOT, DONE, NOT_MET, WRONG
from fishbelly.cli.main import NOT_BUILT, cli, run

JOB = f"""
title = "Simple beam"{SIMPLE_BEAM}[[limit]]
name = "L/300"
span_over = 300
"""

EXACT = 5.0 * 10e3 * 6.0**4 / (384.0 * 210e9 * 0.1 * 0.2**3 / 12.0)
"""5 q L^4 / 384 EI, standard beam case (AISC Manual, Table 3-23, case 1)."""


@pytest.fixture
def job(tmp_path: Path) -> Path:
    path = tmp_path / "beam.toml"
    path.write_text(JOB)
    return path


def _shell(*arguments: str, text: str | None = None, **more: object) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-m", "fishbelly", *arguments]
    return subprocess.run(command, input=text, capture_output=True, text=True, timeout=60, **more)  # type: ignore[call-overload, no-any-return]


def test_json_is_one_object_and_nothing_else(job: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert run(["deflect", str(job), "--json"]) == DONE
    data = json.loads(capsys.readouterr().out)
    assert data["combinations"][0]["deflection"]["down"]["value"] == pytest.approx(EXACT, rel=1e-12)
    assert data["units"].startswith("SI")


def test_a_limit_that_is_not_met_gives_status_1(job: Path) -> None:
    job.write_text(JOB.replace("span_over = 300", "span_over = 600"))
    assert run(["deflect", str(job)]) == NOT_MET


@pytest.mark.parametrize("name", sorted(NOT_BUILT))
def test_a_command_that_is_not_built_is_refused_by_name(name: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert run([name, "beam.toml"]) == WRONG
    assert f'command "{name}"' in capsys.readouterr().err


@pytest.mark.parametrize("option", [("--second-order",)])
def test_an_option_that_is_not_built_is_refused_by_name(
    option: tuple[str, ...], job: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    assert run(["deflect", str(job), *option]) == WRONG
    assert f'option "{option[0]}" is not built yet' in capsys.readouterr().err


def test_an_unknown_command_suggests_the_nearest(capsys: pytest.CaptureFixture[str]) -> None:
    assert run(["deflct", "beam.toml"]) == WRONG
    assert 'unknown command "deflct"; did you mean "deflect"?' in capsys.readouterr().err


@pytest.mark.parametrize(
    ("place", "words"),
    [("1.2", "the unit is missing"), ("9 m", "expected a place on the member"), ("2 kN", "a force")],
)
def test_a_place_that_is_none(place: str, words: str, job: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert run(["section", str(job), "--at", place]) == WRONG
    assert words in capsys.readouterr().err


def test_standard_input() -> None:
    done = _shell("deflect", "-", "--json", text=JOB)
    assert done.returncode == DONE, done.stderr
    assert json.loads(done.stdout)["title"] == "Simple beam"


def test_faults_go_to_stderr_with_file_and_line_and_nothing_is_written(job: Path, tmp_path: Path) -> None:
    job.write_text(JOB.replace('depth = "200 mm"', 'depth = "200 kN"').replace('kind = "pin"', 'kind = "pim"'))
    out = tmp_path / "out.csv"
    done = _shell("deflect", str(job), "-o", str(out))
    assert done.returncode == WRONG
    assert done.stdout == ""
    assert len(done.stderr.strip().splitlines()) == 2
    assert f"{job}:12: " in done.stderr
    assert f"{job}:15: " in done.stderr
    assert not out.exists()


def test_a_mechanism_gives_status_3_with_the_place(job: Path, capsys: pytest.CaptureFixture[str]) -> None:
    job.write_text(JOB.replace('[[support]]\nat = "6 m"\nkind = "roller"\n', ""))
    assert run(["deflect", str(job)]) == CANNOT
    assert "can turn at x = 0 m" in capsys.readouterr().err


def test_the_last_net_says_what_to_report(
    job: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    def broken(*_: object) -> None:
        raise ZeroDivisionError("a fault of ours")

    monkeypatch.setattr("fishbelly.cli.job_file.read_job", broken)
    assert run(["deflect", str(job)]) == CANNOT
    said = capsys.readouterr().err
    assert "ZeroDivisionError: a fault of ours" in said
    assert "Please report this" in said
    assert "Traceback" not in said


def test_a_broken_pipe_is_silent(job: Path) -> None:
    command = f'{sys.executable} -m fishbelly deflect "{job}" --json | head -c 1'
    done = subprocess.run(["bash", "-c", command], capture_output=True, text=True, timeout=60)
    assert "Traceback" not in done.stderr
    assert "Broken" not in done.stderr


def test_an_existing_file_is_left_alone_unless_forced(job: Path, tmp_path: Path) -> None:
    out = tmp_path / "out.json"
    out.write_text("mine")
    assert run(["deflect", str(job), "-o", str(out)]) == WRONG
    assert out.read_text() == "mine"
    assert run(["deflect", str(job), "-o", str(out), "--force"]) == DONE
    assert json.loads(out.read_text())["length"] == 6.0


@pytest.mark.skipif(os.geteuid() == 0 and not Path("/proc/self").exists(), reason="needs a folder nobody can write to")
def test_a_folder_that_cannot_be_written_is_said_in_words(job: Path) -> None:
    done = _shell("deflect", str(job), "-o", "/proc/self/out.csv")
    assert done.returncode == WRONG
    assert "out.csv" in done.stderr
    assert "Traceback" not in done.stderr


@pytest.mark.parametrize("name", sorted(cli.commands))
def test_every_command_has_help_with_an_example(name: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert run([name, "--help"]) == DONE
    assert f"fishbelly {name}" in capsys.readouterr().out


def test_cautions_in_full(capsys: pytest.CaptureFixture[str]) -> None:
    assert run(["--cautions"]) == DONE
    assert "lateral-torsional" in capsys.readouterr().out


def test_main_leaves_with_the_status(job: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "argv", ["fishbelly", "deflect", str(job), "--stage", "x"])
    with pytest.raises(SystemExit) as left:
        command_line.main()
    assert left.value.code == WRONG


def test_notes_stand_on_stderr_and_in_the_object(job: Path) -> None:
    done = _shell("deflect", str(job), "--json")
    notes = json.loads(done.stdout)["notes"]
    assert notes
    assert all(f"note: {note}" in done.stderr for note in notes)


TWO = """
[[part]]
name = "plate"
material = "steel"
shape = "rectangle"
width = "100 mm"
depth = "20 mm"
under = "beam"
from = "2 m"
to = "4 m"
"""


def test_stiffness_in_the_form_frame_models_take(job: Path, capsys: pytest.CaptureFixture[str]) -> None:
    job.write_text(JOB + TWO)
    assert run(["stiffness", str(job), "--breaks", "--to", "steel", "--json"]) == DONE
    data = json.loads(capsys.readouterr().out)
    assert [s["x"] for s in data["stations"]] == [0.0, 2.0, 2.0, 4.0, 4.0, 6.0]
    left, right = data["stations"][1:3]
    # a rectangle 100 x 200, and one of 100 x 220 with the plate
    assert left["transformed"]["I_y"] == pytest.approx(0.1 * 0.2**3 / 12, rel=1e-12)
    assert right["transformed"]["I_y"] == pytest.approx(0.1 * 0.22**3 / 12, rel=1e-12)
    assert right["transformed"]["W_bottom"] == pytest.approx(0.1 * 0.22**2 / 6, rel=1e-12)
    assert right["z_c"] == pytest.approx(-0.11, rel=1e-12)


def test_stiffness_by_equal_steps(job: Path, capsys: pytest.CaptureFixture[str]) -> None:
    job.write_text(JOB + TWO)
    assert run(["stiffness", str(job), "--equal", "4", "--json"]) == DONE
    places = [s["x"] for s in json.loads(capsys.readouterr().out)["stations"]]
    assert places == [0.0, 1.5, 3.0, 4.5, 6.0]


@pytest.mark.parametrize(
    ("options", "words"),
    [
        (("--equal", "4", "--breaks"), "expected one of --at, --equal and --breaks"),
        (("--to", "stele"), 'no part is of material "stele"; did you mean "steel"?'),
        (("--equal", "0"), "0 is not in the range"),
    ],
)
def test_stiffness_asked_in_a_way_that_cannot_be(
    options: tuple[str, ...], words: str, job: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    assert run(["stiffness", str(job), *options]) == WRONG
    assert words in capsys.readouterr().err
