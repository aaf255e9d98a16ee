import subprocess
import sys

import pytest

from fishbelly.catalog.search import everything, search


def test_the_name_itself_comes_first() -> None:
    assert search("ipe 300")[0].name == "IPE 300"
    assert search("C24")[0].name == "C24"


@pytest.mark.parametrize(
    ("word", "name"),
    [
        ("glulam", "GL28h"),
        ("stainless", "1.4301"),
        ("hardwood", "D30"),
        ("floor", "IBC floor live"),
        ("EN 1995 final", "EN 1995 final strict"),
        ("OSB", "OSB/3"),
        ("10056", "L 100x100x10"),
        ("channel 10365", "UPE 200"),
        ("lumber", "2x10"),
    ],
)
def test_any_word_finds_it(word: str, name: str) -> None:
    assert name in [entry.name for entry in search(word)]


def test_all_words_must_occur() -> None:
    found = search("stainless duplex")
    assert {entry.name for entry in found} == {"1.4362", "1.4462"}


def test_nothing_found() -> None:
    assert search("no such word") == []


def test_values_carry_their_si_units() -> None:
    values = {label: (number, unit) for label, number, unit in search("C30/37")[0].values}
    assert values["E"] == (33e9, "Pa")
    assert values["expansion"] == (1e-5, "1/K")
    dimensions = {label: (number, unit) for label, number, unit in search("UPN 200")[0].values}
    assert dimensions["depth"] == (0.2, "m")
    assert dimensions["slope"] == (0.08, "")


def test_everything_has_a_source_and_values() -> None:
    entries = everything()
    assert {entry.group for entry in entries} == {"material", "rolled section", "limit", "creep of timber", "fastener"}
    assert search("") == entries
    for entry in entries:
        assert entry.source
        assert entry.values


def test_lookups_pull_in_nothing_heavy_and_read_one_file() -> None:
    code = (
        "import sys; from fishbelly.catalog import rolled, materials, tables; rolled.find_rolled('IPE 300');"
        "heavy = [m for m in ('numpy', 'scipy', 'pandas') if m in sys.modules];"
        "print(tables.read_table.cache_info().currsize, heavy)"
    )
    run = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert run.stdout.split() == ["1", "[]"]
