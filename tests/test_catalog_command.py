"""`fishbelly catalog` as a user meets it, and limits that a job takes from it."""

from __future__ import annotations

import csv
import json
import subprocess
import sys
import tomllib
from pathlib import Path

import pytest
from commands import SIMPLE_BEAM, changed, command, deflect

from fishbelly.catalog.limits import limits
from fishbelly.catalog.search import everything
from fishbelly.cli.catalog_snippets import snippet
from fishbelly.cli.main import DONE, WRONG, run

WHOLE = SIMPLE_BEAM
OVERHANG = changed(SIMPLE_BEAM, ('at = "6 m"', 'at = "4 m"'))


def said(capsys: pytest.CaptureFixture[str], *words: str, status: int = DONE) -> str:
    assert run(["catalog", *words]) == status
    got = capsys.readouterr()
    return got.out if status == DONE else got.err


def test_without_a_word_it_says_what_there_is(capsys: pytest.CaptureFixture[str]) -> None:
    out = said(capsys)
    for group in ("material", "rolled section", "limit", "creep of timber", "fastener"):
        assert str(sum(entry.group == group for entry in everything())) in out
    assert "fishbelly catalog limits" in out


@pytest.mark.parametrize("spelling", [("IPE", "300"), ("ipe300",), ("IPE 300",), ("ipe-300",)])
def test_a_section_in_any_spelling_is_shown_in_full(
    spelling: tuple[str, ...], capsys: pytest.CaptureFixture[str]
) -> None:
    out = said(capsys, *spelling)
    assert out.startswith("IPE 300\n")
    assert "10.7 mm" in out and "EN 10365:2017" in out and 'size = "IPE 300"' in out


def test_us_units(capsys: pytest.CaptureFixture[str]) -> None:
    out = said(capsys, "W14x30", "--units", "us")
    assert "13.8 in" in out and "mm" not in out
    assert "29000 ksi" in said(capsys, "A992", "--units", "us")


def test_timber_says_its_creep_by_service_class(capsys: pytest.CaptureFixture[str]) -> None:
    out = said(capsys, "C24")
    assert "0.6 in service class 1, 0.8 in service class 2, 2 in service class" in out
    assert "creep = 0.6     # k_def in service class 1; 0.8 in class 2; 2 in class 3" in out


def test_every_published_limit_is_listed_with_code_and_clause(capsys: pytest.CaptureFixture[str]) -> None:
    lines = said(capsys, "limits").splitlines()
    for limit in limits():
        assert any(limit.name in line and line.endswith(limit.clause) for line in lines), limit.name
        assert f"  {limit.code}" in lines


def test_a_long_list_is_cut_and_says_how_to_narrow_it(capsys: pytest.CaptureFixture[str]) -> None:
    out = said(capsys, "UB")
    assert out.count("UB ") < 45 and "… and 31 more" in out and "--all" in out
    whole = said(capsys, "UB", "--all")
    assert "more:" not in whole and "UB 914x419x388" in whole


@pytest.mark.parametrize(
    "words", [(), ("limits",), ("lumber", "--all"), ("hollow",), ("channel", "--units", "us"), ("k_def",), ("steel",)]
)
def test_lists_fit_into_eighty_columns(words: tuple[str, ...], capsys: pytest.CaptureFixture[str]) -> None:
    assert max(map(len, said(capsys, *words).splitlines())) <= 80


@pytest.mark.parametrize("group", ["material", "rolled section", "limit", "creep of timber", "fastener"])
def test_every_entry_in_full_fits_into_eighty_columns(group: str) -> None:
    from fishbelly.cli.catalog_tables import detail

    for entry in [entry for entry in everything() if entry.group == group][::7]:
        assert max(map(len, detail(entry, "metric").split("In a job:")[0].splitlines())) <= 80, entry.name


@pytest.mark.parametrize(
    ("words", "near"),
    [
        (("IPE", "310"), '"IPE 300", "IPE 330"'),
        (("HE", "210", "A"), '"HEA 220", "HEA 200"'),
        (("S276",), '"S275"'),
        (("IBC", "flor"), '"IBC floor live"'),
        (("glulm",), '"glulam"'),
    ],
)
def test_what_is_not_there_is_answered_with_the_nearest(
    words: tuple[str, ...], near: str, capsys: pytest.CaptureFixture[str]
) -> None:
    assert f"nearest: {near}" in said(capsys, *words, status=WRONG)


def test_json_is_one_object_in_si_units(capsys: pytest.CaptureFixture[str]) -> None:
    data = json.loads(said(capsys, "C24", "--json"))
    assert data["count"] == 1 and data["units"].startswith("SI")
    entry = data["entries"][0]
    assert entry["values"]["E"] == 11e9 and entry["values"]["k_def_2"] == 0.8
    assert "EN 338" in entry["source"]
    assert json.loads(said(capsys, "--json"))["count"] == len(everything())


def test_files(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    paths = [tmp_path / f"ipe{suffix}" for suffix in (".csv", ".json", ".xlsx")]
    options = [word for path in paths for word in ("-o", str(path))]
    said(capsys, "IPE 300", *options)
    rows = list(csv.DictReader(paths[0].read_text(encoding="utf-8").splitlines()))
    assert {row["quantity"]: (row["value"], row["unit"]) for row in rows if row["name"] == "IPE 300"}["flange"] == (
        "10.7",
        "mm",
    )
    assert json.loads(paths[1].read_text(encoding="utf-8"))["entries"][0]["name"] == "IPE 300"
    from openpyxl import load_workbook

    assert load_workbook(paths[2]).active["B2"].value == "IPE 300"
    assert "--force" in said(capsys, "IPE 300", *options, status=WRONG)
    said(capsys, "IPE 300", *options, "--force")


def test_every_snippet_is_toml() -> None:
    for entry in everything():
        data = tomllib.loads(snippet(entry))
        assert set(data) <= {"part", "material", "limit"} and data


def test_snippets_make_a_job(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    part = said(capsys, "IPE 300", "--snippet")
    limit = said(capsys, "IBC floor live", "--snippet")
    job = tmp_path / "job.toml"
    rest = WHOLE[WHOLE.index("[[support]]") :]
    job.write_text(f'length = "6 m"\n{part}{rest}\n{limit}', encoding="utf-8")
    assert run(["deflect", str(job)]) in (0, 1)
    assert "International Building Code 2018, Table 1604.3" in capsys.readouterr().out


def test_a_snippet_of_everything_is_refused(capsys: pytest.CaptureFixture[str]) -> None:
    assert "--snippet needs words" in said(capsys, "--snippet", status=WRONG)


def limit(text: str, keys: str) -> dict[str, object]:
    check: dict[str, object] = deflect(f"{text}\n[[limit]]\n{keys}")["combinations"][0]["checks"][0]
    return check


def test_a_published_limit_gives_name_number_and_source() -> None:
    check = limit(WHOLE, 'like = "ibc floor LIVE"')
    assert check["limit"] == "IBC floor live"
    assert check["allowed"] == pytest.approx(6.0 / 360, rel=1e-12)
    assert str(check["source"]).startswith("International Building Code 2018, Table 1604.3")


def test_a_limit_of_ones_own_has_no_source() -> None:
    assert "source" not in limit(WHOLE, 'name = "own"\nspan_over = 300')


@pytest.mark.parametrize(
    ("keys", "allowed"),
    [
        ('like = "IBC floor live"\nspan_over = 500', 6.0 / 500),
        ('like = "IBC floor live"\nabsolute = "10 mm"', 0.010),
        ('like = "EN 1993-6 runway vertical"', 6.0 / 600),
        ('like = "IBC glass edge"', 0.01905),
        ('like = "IBC glass edge"\nabsolute = "50 mm"', 0.050),
        ('like = "BS 5268 timber"', 0.003 * 6.0),
    ],
)
def test_own_keys_win_and_of_two_numbers_the_smaller_governs(keys: str, allowed: float) -> None:
    # 0.003 is printed, 333.3333 is what the catalogue holds
    assert limit(WHOLE, keys)["allowed"] == pytest.approx(allowed, rel=2e-7)


def test_a_sideways_limit_looks_at_the_deflection_across() -> None:
    assert limit(WHOLE, 'like = "EN 1993-6 runway horizontal"')["found"] == 0.0
    assert float(limit(WHOLE, 'like = "EN 1993-6 runway horizontal"\nof = "down"')["found"]) > 0.001  # type: ignore[arg-type]


def test_a_net_limit_deducts_the_camber() -> None:
    raised = 'camber = "5 mm"\n' + WHOLE
    whole = limit(raised, 'like = "EN 1995 net final strict"\nnet = false')
    net = limit(raised, 'like = "EN 1995 net final strict"')
    assert float(whole["found"]) - float(net["found"]) == pytest.approx(0.005, rel=1e-9)  # type: ignore[arg-type]


def test_a_limit_of_cantilevers_alone() -> None:
    check = limit(OVERHANG, 'like = "UK steel cantilever"')
    assert check["span"] == "right"
    assert check["allowed"] == pytest.approx(2.0 / 180, rel=1e-12)


@pytest.mark.parametrize(
    ("keys", "words"),
    [
        ('like = "IBC floor"', 'like: expected the name of a published limit, got "IBC floor"; nearest are "IBC floor'),
        ('like = "UK steel cantilever"', "expected an overhang, or `span_over` beside it"),
        ('name = "c"\ncantilever_over = 180', "expected an overhang, or `span_over` beside it"),
    ],
)
def test_limits_that_cannot_be(keys: str, words: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    job = tmp_path / "job.toml"
    job.write_text(f"{WHOLE}\n[[limit]]\n{keys}", encoding="utf-8")
    assert run(["deflect", str(job)]) == WRONG
    err = capsys.readouterr().err
    assert words in err and err.count("\n") == 1


def test_missing_creep_says_what_the_catalogue_has(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    job = tmp_path / "job.toml"
    text = WHOLE.replace('material = "steel"', 'material = "C24"')
    job.write_text(text + '[[combination]]\nname = "final"\nfactors = { load = 1 }\nsustained = { load = 1 }\n')
    assert run(["deflect", str(job)]) == WRONG
    err = capsys.readouterr().err
    assert 'because combination "final" has a sustained share' in err
    assert "k_def of C24 is 0.6 in service class 1, 0.8 in service class 2, 2 in service class 3" in err
    assert 'like = "C24" and creep' in err


def test_a_size_near_to_one_of_the_catalogue(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    text = WHOLE.replace('shape = "rectangle"\nwidth = "100 mm"\ndepth = "200 mm"', 'size = "IPE 310"')
    job = tmp_path / "job.toml"
    job.write_text(text)
    assert run(["deflect", str(job)]) == WRONG
    assert 'got "IPE 310"; nearest are "IPE 300", "IPE 330"' in capsys.readouterr().err


def test_help_does_not_import_the_catalogue() -> None:
    code = (
        "import sys; from fishbelly.cli.main import run; run(['--help']);"
        "sys.exit(any(m.startswith('fishbelly.catalog') or m == 'fishbelly.cli.catalog_command' for m in sys.modules))"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True)
    assert done.returncode == 0 and "catalog " in done.stdout


def test_the_command_does_not_load_what_computes() -> None:
    code = (
        "import sys; from fishbelly.cli.main import run; run(['catalog', 'IPE']);"
        "sys.exit(any(m in sys.modules for m in ('scipy', 'shapely', 'matplotlib', 'pint', 'pydantic')))"
    )
    assert subprocess.run([sys.executable, "-c", code], capture_output=True).returncode == 0


def test_a_job_with_a_published_limit_prints_its_source_as_data() -> None:
    checks = command("deflect", WHOLE + '[[limit]]\nlike = "EN 1992 appearance"\n')["combinations"][0]["checks"]
    assert "7.4.1 (4)" in checks[0]["source"]
