"""Faults of a job are told by their cause alone, and in the job's own units."""

from __future__ import annotations

from pathlib import Path

import pytest
from commands import SIMPLE_BEAM, changed

from fishbelly.cli.main import DONE, WRONG, run

US = changed(SIMPLE_BEAM, ('length = "6 m"', 'length = "25 ft"\nunits = "us"'), ('at = "6 m"', 'at = "25 ft"'))
PLATE = (
    '[[part]]\nname = "plate"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "80 mm"\ndepth = "10 mm"\n'
    'under = "beam"\n'
)
I_SHAPE = ('shape = "rectangle"\nwidth = "100 mm"\ndepth = "200 mm"', 'shape = "I"\nwidth = "100 mm"\ndepth = "200 mm"')


def faults(text: str, tmp_path: Path, capsys: pytest.CaptureFixture[str], *options: str) -> list[str]:
    """Lines that a wrong job says, without the file's name."""
    job = tmp_path / "job.toml"
    job.write_text(text, encoding="utf-8")
    assert run(["deflect", str(job), *options]) == WRONG
    return [line.removeprefix(str(job)) for line in capsys.readouterr().err.splitlines()]


def test_limits_without_a_support_say_so_once(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    start, end = SIMPLE_BEAM.index("[[support]]"), SIMPLE_BEAM.index("[[load]]")
    held_nowhere = SIMPLE_BEAM[:start] + SIMPLE_BEAM[end:]
    limits = '[[limit]]\nname = "a"\nspan_over = 300\n[[limit]]\nname = "b"\nspan_over = 200\nspan = [1]\n'
    said = faults(held_nowhere + limits, tmp_path, capsys)
    assert said == [": no [[support]]: limits on spans need supports that hold down"]


def test_a_plate_that_is_too_long_is_one_fault(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    said = faults(SIMPLE_BEAM + PLATE + 'to = "7 m"\n', tmp_path, capsys)
    assert len(said) == 1
    assert 'part "plate", to: expected a place within the member, 0 to 6 m, got "7 m"' in said[0]


def test_a_plate_longer_than_its_host_is_still_a_fault(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    short = changed(SIMPLE_BEAM, ('name = "beam"', 'name = "beam"\nto = "5 m"'))
    said = faults(short + PLATE + 'to = "7 m"\n', tmp_path, capsys)
    assert len(said) == 2 and '"beam", absent from 5 m to 6 m' in said[1] + said[0]


@pytest.mark.parametrize(
    ("keys", "word"),
    [
        ('web = "6 mm"\nflnage = "10 mm"', 'unknown key "flnage"; did you mean "flange"?'),
        ('web = "6 mm"\ntop_flnage = "9 mm"\nbottom_flange = "9 mm"', 'did you mean "top_flange"?'),
        ('wbe = "6 mm"\nflange = "10 mm"', 'unknown key "wbe"; did you mean "web"?'),
    ],
)
def test_a_misspelt_key_is_not_missing_as_well(
    keys: str, word: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    said = faults(changed(SIMPLE_BEAM, (I_SHAPE[0], f"{I_SHAPE[1]}\n{keys}")), tmp_path, capsys)
    assert len(said) == 1 and word in said[0]


@pytest.mark.parametrize(
    ("key", "hint"),
    [
        ("below", 'did you mean "under"?'),
        ("above", 'did you mean "over"?'),
        ("beside", 'did you mean "left_of" or "right_of"?'),
        ("undr", 'did you mean "under"?'),
    ],
)
def test_other_words_for_a_placing(key: str, hint: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    said = faults(SIMPLE_BEAM + PLATE.replace("under =", f"{key} ="), tmp_path, capsys)
    assert len(said) == 1 and f'unknown key "{key}"; {hint}' in said[0]


def test_bounds_in_us_units(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    said = faults(changed(US, ('at = "25 ft"', 'at = "26 ft"')), tmp_path, capsys)
    assert said[0].endswith("""expected a place within the member, 0 to 25'-0", got "26 ft\"""")
    # what the job wrote in metres stays as it is
    said = faults(changed(US, ('at = "25 ft"', 'at = "9 m"')), tmp_path, capsys)
    assert said[0].endswith("""0 to 25'-0", got "9 m\"""")
    opening = '[[opening]]\nat = "1 in"\ndiameter = "4 in"\n'
    assert "got -1 in to 3 in" in faults(US + opening, tmp_path, capsys)[0]
    named = PLATE.replace('name = "plate"', 'name = "rib 2 m"') + 'from = "12 ft"\n'
    above = PLATE.replace("under", "over").replace('"beam"', '"rib 2 m"').replace('name = "plate"', 'name = "top"')
    said = faults(US + named + above, tmp_path, capsys)
    assert """from 0 ft to 25'-0", got "rib 2 m", absent from 0 ft to 12'-0\"""" in said[0]


def test_at_off_the_member(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert """a place on the member, 0 to 25'-0", got "30 ft\"""" in faults(US, tmp_path, capsys, "--at", "30 ft")[0]
    assert 'a place on the member, 0 to 6.000 m, got "7 m"' in faults(SIMPLE_BEAM, tmp_path, capsys, "--at", "7 m")[0]


def test_the_beams_of_these_tests_are_sound(tmp_path: Path) -> None:
    for k, text in enumerate((SIMPLE_BEAM, US, SIMPLE_BEAM + PLATE)):
        job = tmp_path / f"{k}.toml"
        job.write_text(text, encoding="utf-8")
        assert run(["deflect", str(job)]) == DONE
