"""``fishbelly start`` and what else helps to begin: files, the job with every key, schemas, reference, completion."""

import contextlib
import io
import json
import os
import subprocess
import sys
import tomllib
from pathlib import Path
from typing import Any

import pytest
from click.shell_completion import BashComplete
from jsonschema import Draft202012Validator
from worked_run import answer

from fishbelly.catalog.worked_jobs import reference_text, worked_jobs
from fishbelly.cli.all_keys import all_keys, place_of
from fishbelly.cli.command_group import LATER
from fishbelly.cli.job_models import NOT_BUILT
from fishbelly.cli.job_schema import job_schema
from fishbelly.cli.job_tables import keys_of
from fishbelly.cli.key_words import KEYS, job_tables, key_words
from fishbelly.cli.main import DONE, WRONG, cli, run
from fishbelly.cli.reference import reference
from fishbelly.cli.result_schema import RESULTS, result_schema
from fishbelly.cli.start_command import SCHEMAS, SITUATIONS

TABLES = list(job_tables())
SCHEMA = job_schema()
VALID = Draft202012Validator(SCHEMA)
SMALL: dict[str, Any] = {
    "length": "4 m",
    "part": [{"name": "beam", "material": "C24", "shape": "rectangle", "width": "80 mm", "depth": "200 mm"}],
}


def said(*arguments: str) -> tuple[int, str, str]:
    out, err = io.StringIO(), io.StringIO()
    with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
        status = run(arguments)
    return status, out.getvalue(), err.getvalue()


# worked jobs


def test_every_worked_job_is_listed_under_one_situation() -> None:
    listed = [name for names in SITUATIONS.values() for name in names]
    assert sorted(listed) == [job.name for job in worked_jobs()]
    assert len(listed) >= 12
    _, out, _ = said("start")
    assert max(len(line) for line in out.splitlines()) <= 80
    assert all(out.count(f"  {name} ") == 1 for name in listed)


def test_a_job_goes_into_a_folder_with_its_data(tmp_path: Path) -> None:
    folder = tmp_path / "new" / "lintel"
    status, out, err = said("start", "corroded-lintel", "--into", str(folder))
    assert (status, out) == (DONE, "")
    assert sorted(p.name for p in folder.iterdir()) == ["corroded-lintel.csv", "corroded-lintel.toml"]
    assert all(str(p) in err for p in folder.iterdir())
    assert said("deflect", str(folder / "corroded-lintel.toml"))[0] == DONE


def test_files_that_are_there_stay_unless_forced(tmp_path: Path) -> None:
    mine = tmp_path / "corroded-lintel.csv"
    mine.write_text("mine", encoding="utf-8")
    status, _, err = said("start", "corroded-lintel", "--into", str(tmp_path))
    assert status == WRONG
    assert f'"{mine}" exists; --force overwrites' in err
    assert [p.name for p in tmp_path.iterdir()] == [mine.name] and mine.read_text(encoding="utf-8") == "mine"
    assert said("start", "corroded-lintel", "--into", str(tmp_path), "--force")[0] == DONE
    assert mine.read_text(encoding="utf-8").startswith("#")
    assert (tmp_path / "corroded-lintel.toml").exists()


def test_a_folder_that_cannot_be_is_said_in_words(tmp_path: Path) -> None:
    (tmp_path / "file").write_text("", encoding="utf-8")
    status, _, err = said("start", "flitch-beam", "--into", str(tmp_path / "file" / "below"))
    assert status == WRONG
    assert "cannot write into" in err and "did not expect" not in err


def test_printing_a_job_with_data_says_so() -> None:
    status, out, err = said("start", "corroded-lintel")
    assert status == DONE and out.startswith("# ")
    assert "corroded-lintel.csv" in err and "--into FOLDER" in err
    assert said("start", "flitch-beam")[2] == ""


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (("flich-beam",), 'no worked job "flich-beam"; did you mean "flitch-beam"?'),
        (("flitch-beam", "--all-keys"), "expected one of a name and --all-keys"),
        (("--reference", "--schema"), "expected one of --schema and --reference"),
        (("--into", "x"), "--into goes with"),
        (("--schema", "stories"), "stories"),
    ],
)
def test_asked_in_a_way_that_cannot_be(arguments: tuple[str, ...], words: str) -> None:
    status, out, err = said("start", *arguments)
    assert (status, out) == (WRONG, "")
    assert words in err


@pytest.mark.parametrize("arguments", [("deflect",), ("section",), ("stiffness",), ("deflect", "--json")])
def test_a_command_without_a_job_says_what_a_job_is(arguments: tuple[str, ...]) -> None:
    status, out, err = said(*arguments)
    assert (status, out) == (WRONG, "")
    assert "A job is one TOML file" in err and "fishbelly start" in err and f"fishbelly {arguments[0]} beam.toml" in err
    assert 4 <= len(err.splitlines()) <= 12


def test_without_a_command_help_comes_on_stderr() -> None:
    status, out, err = said()
    assert (status, out) == (WRONG, "")
    assert err.startswith("Usage: fishbelly") and "\\b" not in err


# every key


@pytest.fixture(scope="module")
def every_key(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("every")
    assert said("start", "--all-keys", "--into", str(folder))[0] == DONE
    return folder / "all-keys.toml"


def blocks_of(text: str) -> list[str]:
    return ["[" + block for block in ("\n" + text).split("\n[")][1:]


def test_every_key_of_every_table_stands_in_it(every_key: Path) -> None:
    text = every_key.read_text(encoding="utf-8")
    written = {("", "", key) for key in tomllib.loads(text)}
    for block in blocks_of(text):
        table, kind = place_of(block)
        written |= {(table, kind, key) for key in tomllib.loads(block.split("\n", 1)[1])}
    shared = {key for t in TABLES if t.kind == "size" for key in keys_of(t.model)}
    for t in TABLES:
        for key in keys_of(t.model):
            anywhere = t.table == "part" and key in shared
            assert any((table, key) == (t.table, k) and (anywhere or kind == t.kind) for table, kind, k in written), (
                f"{t.table} {t.kind}: {key} is missing from catalog/jobs/all-keys.toml"
            )


def test_every_meaning_is_said_beside_its_key_once(every_key: Path) -> None:
    comments = " ".join(
        line.rpartition("# ")[2].strip() for line in every_key.read_text(encoding="utf-8").splitlines() if "# " in line
    )
    for t in TABLES:
        for key in keys_of(t.model):
            assert key_words(t.table, key, t.kind) in comments, (t.table, t.kind, key)


def test_no_meaning_is_left_over() -> None:
    known = {(t.table, t.kind, key) for t in TABLES for key in keys_of(t.model)}
    for place, keys in KEYS.items():
        table, _, kind = place.partition(" ")
        table = "part" if table == "dimension" else table
        for key in keys:
            assert any(k == key and table == a and kind in ("", b) for a, b, k in known), (place, key)


def test_the_job_with_every_key_runs(every_key: Path) -> None:
    status, out, err = said("deflect", str(every_key), "--json")
    assert status == DONE, err
    data = json.loads(out)
    assert list(Draft202012Validator(result_schema("deflect")).iter_errors(data)) == []
    assert data["combinations"][0]["cross_check"]["difference"] < 1e-6


# schemas


def test_schemas_are_valid_schemas() -> None:
    for what in SCHEMAS:
        status, out, _ = said("start", "--schema", what)
        assert status == DONE
        schema = json.loads(out)
        assert schema["$schema"] == "https://json-schema.org/draft/2020-12/schema"
        Draft202012Validator.check_schema(schema)
    assert json.loads(said("start", "--schema")[1]) == SCHEMA == json.loads(json.dumps(SCHEMA))


@pytest.mark.parametrize("job", [*worked_jobs(), all_keys()], ids=lambda job: job.name)
def test_the_schema_takes_every_job_that_ships(job: Any) -> None:
    assert list(VALID.iter_errors(tomllib.loads(job.text))) == []


def test_the_schema_has_every_key_and_no_other() -> None:
    found: dict[str, list[str]] = {}
    for t in TABLES:
        here = SCHEMA if not t.table else SCHEMA["$defs"][f"{t.table}: {t.kind}" if t.kind else t.table]
        extra = {"catalog", "material", *(x.table for x in TABLES)} - {""} if not t.table else set()
        assert set(here["properties"]) == {*keys_of(t.model), *extra}
        assert here["additionalProperties"] is False
        assert all(v.get("description") for v in here["properties"].values())
        found.setdefault(t.table, []).extend(here["properties"])
    for table, keys in NOT_BUILT.items():
        assert not keys & set(found[table])


@pytest.mark.parametrize(
    "change",
    [
        {"length": 4},
        {"lenght": "4 m"},
        {"part": []},
        {"units": "imperial"},
        {"part": [SMALL["part"][0] | {"size": "IPE 300"}]},
        {"part": [SMALL["part"][0] | {"diameter": "20 mm"}]},
        {"part": [SMALL["part"][0] | {"name": ""}]},
        {"part": [SMALL["part"][0] | {"depth": [["0 m"]]}]},
        {"material": {"oak": {"E": "11 GPa", "poisson": 0.6}}},
        {"load": [{"kind": "point", "value": "4 kN"}]},
        {"load": [{"kind": "uniform", "value": "4 kN/m", "at": "1 m"}]},
        {"support": [{"at": "0 m", "kind": "pinned"}]},
        {"limit": [{"span_over": 300}]},
        {"combination": [{"name": "all", "factors": {"load": "1"}}]},
        {"travel": {"axles": []}},
    ],
    ids=str,
)
def test_the_schema_refuses_what_the_tool_refuses(change: dict[str, Any], tmp_path: Path) -> None:
    assert VALID.is_valid(SMALL)
    assert not VALID.is_valid(SMALL | change)
    job = tmp_path / "job.toml"
    job.write_text(_toml(SMALL | change), encoding="utf-8")
    assert said("stiffness", str(job))[0] == WRONG
    job.write_text(_toml(SMALL), encoding="utf-8")
    assert said("stiffness", str(job))[0] == DONE


def _toml(table: dict[str, Any]) -> str:
    """A job with every table in line."""

    def value(v: Any) -> str:
        if isinstance(v, dict):
            return "{ " + ", ".join(f"{k} = {value(x)}" for k, x in v.items()) + " }"
        return "[" + ", ".join(map(value, v)) + "]" if isinstance(v, list) else json.dumps(v)

    return "\n".join(f"{k} = {value(v)}" for k, v in table.items())


def test_quantities_are_described_with_their_kind_and_an_example() -> None:
    support = SCHEMA["$defs"]["support"]["properties"]
    assert support["vertical"]["type"] == "string"
    assert "a stiffness (force per length)" in support["vertical"]["description"]
    assert support["vertical"]["examples"] == ["3.2 kN/mm"]
    assert SCHEMA["properties"]["rises"]["default"] == "0 deg"
    assert SCHEMA["$defs"]["material"]["properties"]["expansion"]["type"] == ["string", "number"]
    assert SCHEMA["$defs"]["material"]["properties"]["poisson"]["maximum"] == 0.5


@pytest.mark.parametrize("job", worked_jobs(), ids=lambda job: job.name)
def test_results_are_as_their_schemas_say(job: Any, tmp_path: Path) -> None:
    result = answer(job.name)
    del result["by_name"]
    assert list(Draft202012Validator(result_schema("deflect")).iter_errors(result)) == []
    assert Draft202012Validator(result_schema()).is_valid(result)
    assert said("start", job.name, "--into", str(tmp_path))[0] == DONE
    file = str(tmp_path / f"{job.name}.toml")
    material = next(p["material"] for p in tomllib.loads(job.text)["part"] if "material" in p)
    for command in (
        ("section", file, "--at", "0.1 m"),
        ("stiffness", file, "--breaks"),
        ("stiffness", file, "--to", material),
    ):
        status, out, err = said(*command, "--json")
        assert status == DONE, err
        assert list(Draft202012Validator(result_schema(command[0])).iter_errors(json.loads(out))) == []


def test_catalogue_entries_are_as_their_schema_says() -> None:
    data = json.loads(said("catalog", "--json")[1])
    assert list(Draft202012Validator(result_schema("catalog")).iter_errors(data)) == []


def test_every_command_with_results_has_a_schema() -> None:
    import click

    context = click.Context(cli)
    printing = {
        name
        for name in cli.list_commands(context)
        if any(p.name == "as_json" for p in cli.get_command(context, name).params)  # type: ignore[union-attr]
    }
    assert printing == set(RESULTS)
    assert set(SCHEMAS) == {"job", "results", *RESULTS}
    assert {"start", "catalog"} <= set(LATER)


# reference


def test_the_reference_is_what_the_code_writes() -> None:
    """Where this fails: ``python -m fishbelly.cli.reference`` writes catalog/reference.md anew."""
    assert reference_text() == reference()


def test_the_reference_is_printed_and_names_everything() -> None:
    status, out, _ = said("start", "--reference")
    assert (status, out) == (DONE, reference_text())
    for t in TABLES:
        assert all(f"`{key}`" in out for key in keys_of(t.model))
    import click

    assert all(f"### `fishbelly {name}`" in out for name in cli.list_commands(click.Context(cli)))


# completion


def completed(*words: str) -> list[str]:
    *args, incomplete = words
    return [
        c.value for c in BashComplete(cli, {}, "fishbelly", "_FISHBELLY_COMPLETE").get_completions(args, incomplete)
    ]


def test_completion_knows_commands_jobs_and_options() -> None:
    assert completed("") == sorted(cli.list_commands(None))  # type: ignore[arg-type]
    assert completed("st") == ["start", "stiffness"]
    assert completed("start", "") == [job.name for job in worked_jobs()]
    assert completed("start", "pl") == ["plated-beam", "plated-under-load", "plated-w-shape"]
    assert completed("start", "--schema", "se") == ["section"]
    assert "--all-keys" in completed("start", "--a")
    assert completed("sheet", "") == completed("nonsense", "") == completed("")


def test_completion_leaves_files_to_the_shell() -> None:
    complete = BashComplete(cli, {}, "fishbelly", "_FISHBELLY_COMPLETE")
    for args in (["deflect"], ["section", "job.toml", "-o"]):
        assert [c.type for c in complete.get_completions(args, "")] == ["file"]


def test_completion_as_the_shell_asks_for_it() -> None:
    asked = os.environ | {"_FISHBELLY_COMPLETE": "bash_complete", "COMP_WORDS": "fishbelly start co", "COMP_CWORD": "2"}
    done = subprocess.run(
        [sys.executable, "-m", "fishbelly"], env=asked, capture_output=True, text=True, timeout=60, check=True
    )
    assert done.stdout.split() == ["plain,concrete-beam", "plain,continuous-beam", "plain,corroded-lintel"]
