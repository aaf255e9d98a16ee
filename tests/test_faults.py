"""Faults: their wording, their order, and what is suggested."""

import pickle

import pytest

from fishbelly.cli.faults import (
    Fault,
    JobFaults,
    as_written,
    join_words,
    nearest,
    suggest,
    unknown_key,
    unknown_word,
)


def test_fault_reads_file_line_place_expected_and_found():
    fault = Fault("roof.toml", 34, 'part "arm"', "depth", "a length above 0 mm", '"-120 mm"')
    assert str(fault) == 'roof.toml:34: part "arm", depth: expected a length above 0 mm, got "-120 mm"'


def test_hint_follows_a_semicolon():
    fault = Fault("a.toml", 1, "load 1", "value", 'a force such as "12 kN"', '"5 kg", which is a mass', "kgf?")
    assert str(fault) == (
        'a.toml:1: load 1, value: expected a force such as "12 kN", got "5 kg", which is a mass; kgf?'
    )


@pytest.mark.parametrize(
    ("fault", "text"),
    [
        (
            Fault("a.toml", None, "", "length", "a length", ""),
            "a.toml: length: expected a length, but it is missing",
        ),
        (Fault("a.toml", None, "", "", "", "the file is empty"), "a.toml: the file is empty"),
        (Fault("a.toml", 2, "", "", "", "odd", "so"), "a.toml:2: odd; so"),
        (Fault("a.toml", 2, 'part "b"', "", "", "odd"), 'a.toml:2: part "b": odd'),
    ],
)
def test_what_a_fault_lacks_leaves_no_gap(fault, text):
    assert str(fault) == text


def test_faults_are_listed_by_line_and_files_stay_in_order():
    late, early = Fault("z.toml", 9, "", "a", "x", "y"), Fault("z.toml", 2, "", "b", "x", "y")
    whole, other = Fault("z.toml", None, "", "c", "x", ""), Fault("a.csv", 1, "", "d", "x", "y")
    error = JobFaults([late, other, early, whole])
    assert error.faults == (whole, early, late, other)
    assert str(error).splitlines() == [str(whole), str(early), str(late), str(other)]


def test_job_faults_are_value_errors_that_survive_pickling():
    error = JobFaults([Fault("z.toml", 9, "", "a", "x", "y")])
    assert isinstance(error, ValueError)
    again = pickle.loads(pickle.dumps(error))
    assert again.faults == error.faults and str(again) == str(error)


def test_job_faults_need_a_fault():
    with pytest.raises(ValueError, match="at least one fault"):
        JobFaults([])


@pytest.mark.parametrize(
    ("word", "choices", "found"),
    [
        ("widht", ["depth", "width"], "width"),
        ("WIDTH", ["depth", "width"], "width"),
        ("top width", ["width", "top_width"], "top_width"),
        ("self_weight", ["self weight", "uniform"], "self weight"),
        ("ipe 300", ["IPE 300", "HEA 300"], "IPE 300"),
        ("zzz", ["depth", "width"], None),
        ("depth", [], None),
        ("", ["depth"], None),
    ],
)
def test_nearest(word, choices, found):
    assert nearest(word, choices) == found


def test_suggest_names_the_nearest_else_a_short_list_else_nothing():
    assert suggest("widht", ["width", "depth"]) == 'did you mean "width"?'
    assert suggest("zzz", ["width", "depth", "wall"]) == 'known are "width", "depth" and "wall"'
    assert suggest("zzz", ["width"]) == 'known is "width"'
    assert suggest("zzz", [f"name {k}" for k in range(9)]) == ""
    assert suggest("zzz", []) == ""


def test_unknown_key():
    fault = unknown_key("roof.toml", 3, 'part "arm"', "widht", ["width", "depth"])
    assert str(fault) == 'roof.toml:3: part "arm": unknown key "widht"; did you mean "width"?'


def test_unknown_word_lists_what_is_allowed():
    fault = unknown_word("roof.toml", 3, "", "datum", "midle", ["top", "middle", "bottom"])
    assert str(fault) == (
        'roof.toml:3: datum: expected "top", "middle" or "bottom", got "midle"; did you mean "middle"?'
    )
    assert str(unknown_word("roof.toml", 3, "", "datum", 5, ["top"])) == 'roof.toml:3: datum: expected "top", got 5'


def test_unknown_word_of_many_is_not_listed():
    names = [f"IPE {size}" for size in range(80, 600, 20)]
    fault = unknown_word("roof.toml", 3, 'part "arm"', "size", "IPE300", names)
    assert str(fault) == 'roof.toml:3: part "arm", size: "IPE300" is not known; did you mean "IPE 300"?'


def test_join_words():
    assert join_words(["a"]) == '"a"'
    assert join_words(["a", "b"]) == '"a" or "b"'


@pytest.mark.parametrize(
    ("value", "shown"),
    [
        ("12 mm", '"12 mm"'),
        ("7' 6\"", '"7\' 6""'),
        ('6"', "'6\"'"),
        ("a\nb\x1b[31m", '"a\\nb\\x1b[31m"'),
        (12, "12"),
        (1.5, "1.5"),
        (True, "true"),
        (None, "nothing"),
        ([], "[]"),
        (["1 m", [2, False]], '["1 m", [2, false]]'),
        ({}, "{}"),
        ({"pitch": "1 mm", "rows": 2}, '{ pitch = "1 mm", rows = 2 }'),
    ],
)
def test_values_are_shown_as_written(value, shown):
    assert as_written(value) == shown


def test_long_values_are_cut():
    assert as_written("x" * 500) == '"' + "x" * 59 + '…"'
    assert len(as_written(list(range(100_000)))) == 61
