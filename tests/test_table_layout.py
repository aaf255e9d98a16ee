"""Tables for people: they fit, line up, fold and choose their rows, whatever they show."""

import re
import subprocess
import sys

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from table_jobs import WIDTH, block, many_spans, simple, solved, widest

from fishbelly.cli import cautions
from fishbelly.cli.grid import TEXT, Column, Grid
from fishbelly.cli.station_choice import breaks, chosen, sides, without_repeats
from fishbelly.cli.tables import deflect_table, section_table, stiffness_table
from fishbelly.cli.text_table import clean, paragraph, render, shown_width, wrap
from fishbelly.member.section_results import section_at, stiffness


@pytest.fixture(scope="module")
def girders():
    return {units: solved(many_spans(units)) for units in ("metric", "us")}


@pytest.mark.parametrize("units", ["metric", "us"])
def test_everything_fits_into_80_columns(girders, units):
    job, data = girders[units]
    for listed in (False, True):
        assert widest(deflect_table(data, units, listed)) <= WIDTH
        assert widest(stiffness_table(stiffness(job.member), units, listed)) <= WIDTH
    assert widest(section_table(section_at(job.member, 2.4), units)) <= WIDTH


def test_long_names_keep_the_end_that_tells_them_apart(girders):
    stress = "\n".join(block(deflect_table(girders["metric"][1], "metric"), "Stress"))
    for k in range(30):
        assert re.search(rf"girder {k}\b", stress)


@settings(max_examples=60, deadline=None)
@given(
    st.lists(
        st.tuples(
            st.text(max_size=90),
            *(st.one_of(st.none(), st.floats(-1e30, 1e30), st.floats(-1e-20, 1e-20)) for _ in range(9)),
        ),
        min_size=1,
        max_size=5,
    ),
    st.sampled_from(["metric", "us"]),
)
def test_no_grid_is_wider_than_asked(rows, style):
    kinds = ["moment", "force", "stress", "deflection", "position", "percent", "bending stiffness", "slope", "factor"]
    columns = [Column("name of the thing", TEXT, tuple(r[0] for r in rows))]
    columns += [Column(f"number {k}", kind, tuple(r[k + 1] for r in rows)) for k, kind in enumerate(kinds)]
    lines = render(Grid("any", tuple(columns)), style)
    assert max(map(shown_width, lines)) <= WIDTH or any(
        shown_width(c) > 50 for col in columns for c in col.cells(style)
    )


def test_names_cannot_steer_the_terminal():
    _, data = solved(simple().replace('name = "A"', 'name = "A\\u001b[31m\\n\\tred"'))
    text = deflect_table(data, "metric")
    assert "\x1b" not in text and "\t" not in text
    assert "A [31m red" in text


@given(st.text(), st.integers(2, 40))
def test_wrapping_loses_nothing(text, width):
    lines = wrap(clean(text), width)
    assert "".join(lines).replace(" ", "") == clean(text).replace(" ", "")
    assert max(map(shown_width, lines)) <= width


@given(st.text(min_size=1, max_size=300), st.integers(12, 40), st.integers(1, 3))
def test_shortening_keeps_to_its_lines(text, width, most):
    lines = wrap(clean(text), width, most)
    assert len(lines) <= most
    assert max(map(shown_width, lines)) <= width


def test_wide_characters_take_two_columns():
    assert shown_width("梁 a") == 4
    assert wrap("梁梁梁", 4) == ["梁梁", "梁"]
    assert paragraph("one two", "- ", width=5) == ["- one", "  two"]


def test_a_table_that_is_too_wide_is_folded():
    columns = [Column("x", "position", (0.0, 1.0))]
    columns += [Column(f"moment {k}", "moment", (1e3 * k, 2e3)) for k in range(1, 13)]
    lines = render(Grid("wide", tuple(columns)), "metric")
    assert max(map(len, lines)) <= WIDTH
    assert "" in lines
    assert sum(line.split()[:1] == ["1.000"] for line in lines) == lines.count("") + 1
    assert all(f"moment {k}" in " ".join(lines) for k in range(1, 13))


def test_sides_breaks_and_choice():
    rows = [{"x": 0.01 * k} for k in range(101)]
    rows.insert(30, {"x": 0.3})
    rows.insert(71, {"x": 0.695, "name": None})
    assert sides(rows)[30:32] == ["left", "right"]
    assert breaks(rows) == [0.3, 0.695]
    kept = chosen(rows, [0.5001])
    assert {0, 30, 31, 71, len(rows) - 1} <= set(kept)
    assert any(abs(rows[k]["x"] - 0.5) < 1e-9 for k in kept)
    assert len(kept) <= 20


def test_repeats_go_only_between_equals():
    rows = [{"v": v} for v in (1.0, 1.0, 1.0, 2.0, 2.0, 3.0)]
    assert without_repeats(rows, ["v"], range(6)) == [0, 2, 3, 4, 5]


def test_tables_need_nothing_heavy():
    code = (
        "import sys, fishbelly.cli.tables, fishbelly.cli.files\n"
        "heavy = {m.partition('.')[0] for m in sys.modules}\n"
        "print(sorted(heavy & {'scipy', 'matplotlib', 'pandas', 'xlsxwriter', 'openpyxl', 'rich', 'pint', 'numpy'}))"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"


def test_cautions_fit_and_say_what_is_not_checked():
    assert widest(cautions.FULL) <= WIDTH
    for word in ("licensed", "buckling", "fatigue", "fire", "anchorage", "0.9 and 1.1", "Openings", "grades"):
        assert word in cautions.FULL
    assert "--cautions" in cautions.LINE
