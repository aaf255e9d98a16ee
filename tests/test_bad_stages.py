"""Every fault of stages is told by one clear message, where it stands; what cannot be computed names the stage."""

# ruff: noqa: E501 (a job and its message stand side by side, unbroken, as they are written)

from __future__ import annotations

from pathlib import Path

import pytest
from bad_jobs import BASE, PINS, only_fault, plate
from commands import changed

from fishbelly.cli.main import DONE, WRONG, run

CANNOT = 3
"""Exit status where the numbers cannot be had."""

LOADS = '[[load]]\nkind = "uniform"\nvalue = "1 kN/m"\ncase = "old"\n[[load]]\nkind = "uniform"\nvalue = "1 kN/m"\ncase = "new"\n'
NOW = '[[stage]]\nname = "now"\ncases = ["old"]\n'
LATER = '[[stage]]\nname = "later"\ncases = ["new"]\n'
GOOD = BASE + plate('under = "beam"\nstage = "later"') + PINS + LOADS + NOW + LATER
LIMIT = '[[limit]]\nname = "a"\nspan_over = 300\n'


def good(*pairs: tuple[str, str]) -> str:
    """The sound job, spoilt."""
    return changed(GOOD, *pairs)


def since(more: str) -> tuple[str, str]:
    return ('stage = "later"', more)


BAD = {
    "a case in no stage": (
        good(('[[stage]]\nname = "later"\ncases = ["new"]\n', '[[stage]]\nname = "later"\n')),
        ':32: load 2 (uniform), case: expected a case that a stage has under `cases`, got "new", in no stage',
    ),
    "a settlement in no stage": (
        good(('kind = "roller"', 'kind = "roller"\nsinks = "1 mm"')),
        ':22: support 2, case: expected a case that a stage has under `cases`, got "settlement", in no stage',
    ),
    "a settlement before its support is there": (
        good(('kind = "roller"', 'kind = "roller"\nsinks = "1 mm"\ncase = "old"\nstage = "later"')),
        ':25: support 2, sinks: expected a support that is there when it settles, got "support 2", not there in stage "now"',
    ),
    "a settlement after its support has gone": (
        good(('kind = "roller"', 'kind = "roller"\nsinks = "1 mm"\ncase = "new"\nuntil = "later"')),
        ':25: support 2, sinks: expected a support that is there when it settles, got "support 2", not there in stage "later"',
    ),
    "a case in two stages": (
        good(('cases = ["new"]', 'cases = ["new", "old"]')),
        ':38: stage "later", cases, item 2: expected a case that no other stage has, got "old", which "now" has',
    ),
    "a case that no load has": (
        good(('cases = ["new"]', 'cases = ["new", "nwe"]')),
        ':38: stage "later", cases, item 2: expected the name of a load case, got "nwe"; did you mean "new"?',
    ),
    "a part's stage unknown": (
        good(since('stage = "latr"')),
        ':18: part "plate", stage: expected the name of a stage, got "latr"; did you mean "later"?',
    ),
    "a part's end unknown": (
        good(since('until = "latr"')),
        ':18: part "plate", until: expected the name of a stage, got "latr"; did you mean "later"?',
    ),
    "a limit's stages unknown": (
        GOOD + LIMIT + 'after = "latre"\n',
        ':42: limit "a", after: expected the name of a stage, got "latre"; did you mean "later"?',
    ),
    "a limit at the end of a stage before the one it counts from": (
        GOOD + LIMIT + 'stage = "now"\nafter = "later"\n',
        ':43: limit "a", after: expected a stage not later than "now", got "later"',
    ),
    "stages named, none given": (
        changed(GOOD, (NOW, ""), (LATER, "")),
        ':18: part "plate", stage: expected the name of a stage, got "later"',
    ),
    "a part goes before it comes": (
        good(since('stage = "later"\nuntil = "now"')),
        ':19: part "plate", until: expected a stage after "later", in which it begins, got "now"',
    ),
    "a part goes as it comes": (
        good(since('stage = "later"\nuntil = "later"')),
        ':19: part "plate", until: expected a stage after "later", in which it begins, got "later"',
    ),
    "a support goes in the first stage": (
        good(('kind = "roller"', 'kind = "roller"\nuntil = "now"')),
        ":25: support 2, until: expected a stage after the first, in which it begins",
    ),
    "a part leans on one that is gone": (
        good(('name = "beam"', 'name = "beam"\nuntil = "later"')),
        ':18: part "plate", under: expected a part that stays as long as this one, got "beam", which goes in "later"',
    ),
    "creep missing in a long-term stage": (
        good(('cases = ["old"]', 'cases = ["old"]\nlong_term = true')),
        ':2: material "steel", creep: expected a creep factor, because stage "now" is long-term, but it is missing',
    ),
    "expansion missing under temperature": (
        good(('cases = ["new"]', 'cases = ["new", "sun"]'))
        + '[[load]]\nkind = "temperature"\ntop = "10 K"\nbottom = "0 K"\ncase = "sun"\n',
        ':2: material "steel", expansion: expected a coefficient of expansion, because its temperature changes, but it is missing',
    ),
    "shrinkage of a part that is not there": (
        good(('cases = ["old"]', 'cases = ["old", "s"]'))
        + '[[load]]\nkind = "shrinkage"\npart = "plate"\nstrain = 1e-4\ncase = "s"\n',
        ':41: load 3 (shrinkage), part: expected a part that is there when it arrives, got "plate", not there in stage "now"',
    ),
    "prestress of a part that is not there": (
        good(('cases = ["old"]', 'cases = ["old", "s"]'))
        + '[[load]]\nkind = "prestress"\npart = "plate"\nstrain = 1e-4\ncase = "s"\n',
        ':41: load 3 (prestress), part: expected a part that is there when it arrives, got "plate", not there in stage "now"',
    ),
    "two stages of one name": (
        GOOD + NOW.replace('cases = ["old"]\n', ""),
        ':40: stage "now", name: expected a name that no other has, got "now" again',
    ),
    "a stage without a name": (
        GOOD + "[[stage]]\ncases = []\n",
        ":39: stage 3, name: expected a name, but it is missing",
    ),
    "cases as a word": (
        good(('cases = ["new"]', 'cases = "new"')),
        ':38: stage "later", cases: expected a list of load cases such as ["dead"], got "new"',
    ),
    "negative creep": (
        good(('cases = ["new"]', 'cases = ["new"]\ncreep = { steel = -1 }')),
        ':39: stage "later", creep.steel: expected a creep factor of at least 0, got -1',
    ),
    "creep of no material": (
        good(('cases = ["new"]', 'cases = ["new"]\ncreep = { stel = 1 }')),
        ':39: stage "later", creep.stel: expected the name of a material, got "stel"; did you mean "steel"?',
    ),
    "a modulus of nothing": (
        good(('cases = ["new"]', 'cases = ["new"]\nmoduli = { steel = 0 }')),
        ':39: stage "later", moduli.steel: expected a modulus such as "11 GPa", or a factor above 0, got 0',
    ),
    "a modulus that is a force": (
        good(('cases = ["new"]', 'cases = ["new"]\nmoduli = { steel = "3 kN" }')),
        ':39: stage "later", moduli.steel: expected a modulus such as "210 GPa", got "3 kN", which is a force',
    ),
    "ageing above 1": (
        good(('cases = ["new"]', 'cases = ["new"]\nageing = 1.2')),
        ':39: stage "later", ageing: expected an ageing coefficient of at least 0 and of at most 1, got 1.2',
    ),
    "a misspelt key": (
        good(('cases = ["new"]', 'cases = ["new"]\nlongterm = true')),
        ':39: stage "later": unknown key "longterm"; did you mean "long_term"?',
    ),
}


@pytest.mark.parametrize("name", BAD)
def test_one_message_for_one_fault(name: str) -> None:
    text, message = BAD[name]
    assert only_fault(text).startswith(message)


def said(text: str, tmp_path: Path, capsys: pytest.CaptureFixture[str], *words: str) -> tuple[int, str, str]:
    """Status, stdout and stderr of a command on a text."""
    job = tmp_path / "job.toml"
    job.write_text(text, encoding="utf-8")
    command, *options = words or ("deflect",)
    status = run([command, str(job), *options])
    found = capsys.readouterr()
    return status, found.out, found.err


def test_the_sound_job_is_sound(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert said(GOOD, tmp_path, capsys)[0] == DONE


@pytest.mark.parametrize(("key", "stage"), [("until", "later"), ("stage", "now")])
def test_a_support_struck_that_leaves_a_mechanism(
    key: str, stage: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    text = good(('kind = "roller"', f'kind = "roller"\n{key} = "later"'))
    status, out, err = said(text, tmp_path, capsys)
    assert (status, out) == (CANNOT, "")
    assert err == f"fishbelly: mechanism: the member can turn at x = 0 m, in stage {stage}\n"


def test_no_part_in_a_stage(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    status, out, err = said(good(('name = "beam"', 'name = "beam"\nstage = "later"')), tmp_path, capsys)
    assert (status, out) == (CANNOT, "")
    assert err == "fishbelly: no stiffness at x = 3 m: no part is there in stage now\n"


@pytest.mark.parametrize("command", [("deflect",), ("stiffness",), ("section", "--at", "3 m")])
def test_a_stage_asked_for_that_is_not_there(
    command: tuple[str, ...], tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    status, out, err = said(GOOD, tmp_path, capsys, *command, "--stage", "latr")
    assert (status, out) == (WRONG, "")
    assert 'the job has no stage "latr"; did you mean "later"?' in err


def test_a_job_without_stages_knows_all(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    plain = changed(GOOD, (NOW, ""), (LATER, ""), ('\nstage = "later"', ""))
    assert said(plain, tmp_path, capsys, "section", "--at", "3 m", "--stage", "all")[0] == DONE
    status, _, err = said(plain, tmp_path, capsys, "section", "--at", "3 m", "--stage", "later")
    assert status == WRONG and '--stage: the job has no stages, got "later"' in err
