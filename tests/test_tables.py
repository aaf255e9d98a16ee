"""Tables for people: what they say, that they line up, and that they fit."""

import re
import subprocess
import sys

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from fishbelly.cli import cautions
from fishbelly.cli.deflect_grids import noise_of, ratio_words, verdict
from fishbelly.cli.grid import TEXT, Column, Grid
from fishbelly.cli.job_file import read_job
from fishbelly.cli.station_choice import breaks, chosen, sides, without_repeats
from fishbelly.cli.tables import deflect_table, section_table, stiffness_table
from fishbelly.cli.text_table import clean, paragraph, render, shown_width, wrap
from fishbelly.member.results import deflect
from fishbelly.member.section_results import section_at, stiffness

WIDTH = 80
LONG = "upper cover plate of the northern approach span, west girder"

STEEL = '[material.steel]\nE = "210 GPa"\nG = "81 GPa"\ndensity = "7850 kg/m3"\n'
BEAM = (
    STEEL
    + '[[part]]\nname = "beam"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "100 mm"\ndepth = "200 mm"\n'
    + '[[support]]\nat = "0 m"\nkind = "pin"\nname = "A"\n[[support]]\nat = "6 m"\nkind = "roller"\nname = "B"\n'
)
UNIFORM = '[[load]]\nkind = "uniform"\nvalue = "10 kN/m"\n'
FOUND = 5 * 1e4 * 6.0**4 / (384 * 210e9 * 0.1 * 0.2**3 / 12) + 1e4 * 6.0**2 / (8 * 81e9 * 0.02 * 5 / 6)
"""Bending and shear deflection of the beam in closed form [m]: 12.09 mm."""


def solved(text, at=None):
    job = read_job("-", text)
    data = deflect(job.member, at)
    data["notes"] = [str(n) for n in data["notes"]]
    return job, data


def simple(extra="", head=""):
    return f'title = "Beam"\nlength = "6 m"\n{head}' + BEAM + UNIFORM + extra


def limit(allowed):
    return f'[[limit]]\nname = "given"\nabsolute = "{allowed} m"\n'


def block(text, heading):
    """Lines of a table, from its heads on."""
    lines = text.splitlines()
    start = next(k for k, line in enumerate(lines) if line.startswith(heading))
    start = next(k for k in range(start, len(lines)) if lines[k].startswith("  "))
    stop = next(k for k in range(start, len(lines)) if not lines[k])
    return lines[start:stop]


def station_rows(text):
    """Split the lines that begin with a place, numbers without blanks between thousands."""
    lines = [line for line in text.splitlines() if re.match(r" +\d\.\d{3} ", line)]
    return [re.sub(r"(?<=\d) (?=\d{3})", "", line).split() for line in lines]


def widest(text):
    return max(map(shown_width, text.splitlines()))


def many_spans(units):
    text = f'title = "{LONG * 2}"\nlength = "72 m"\nunits = "{units}"\n{STEEL}'
    text += f'[[part]]\nname = "{LONG} 0"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "100 mm"\ndepth = "0.3 m"\n'
    for k in range(1, 30):
        text += f'[[part]]\nname = "{LONG} {k}"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "50 mm"\n'
        text += f'depth = "{5 + k} mm"\nunder = "{LONG} 0"\n'
        text += f'from = "{2.4 * k - 1.234:.3f} m"\nto = "{2.4 * k + 0.3:.3f} m"\n'
    for k in range(13):
        kind = "pin" if k == 0 else "roller"
        text += (
            f'[[support]]\nat = "{6 * k} m"\nkind = "{kind}"\nname = "pier number {k} with a name that is long too"\n'
        )
    text += UNIFORM + '[[load]]\nkind = "uniform"\nvalue = "1 kN/m"\ndirection = "across"\n'
    text += '[[load]]\nkind = "axial"\nvalue = "30 kN"\nat = "15 m"\n'
    return (
        text + f'[[limit]]\nname = "{LONG}, deflection"\nspan_over = 300\n[[station]]\nat = "33.3 m"\nname = "seal"\n'
    )


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


def test_the_answer_comes_first_and_is_right():
    _, data = solved(simple(limit(0.02)))
    text = deflect_table(data, "metric")
    answer = text.index("Largest deflection")
    assert answer < text.index("Limits of deflection") < text.index("Supports") < text.index("Stations")
    down = next(line for line in text.splitlines() if line.startswith("  down"))
    assert down.startswith(f"  down    {FOUND * 1e3:.2f} mm at x = 3.000 m, L/{6.0 / FOUND:.0f} of span 1")
    assert "shear share 0.0333 mm (0.3%)" in " ".join(text.split())
    assert text.count("Deflection down positive") == 1
    assert " ".join(text.split()).count("about the horizontal axis y–y") == 1
    assert text.rstrip().endswith(cautions.LINE)


def test_supports_extremes_ends_and_stress():
    text = deflect_table(solved(simple())[1], "metric")
    assert block(text, "Supports")[2].split() == ["A", "0.000", "30.00"]
    extremes = block(text, "Moment and shear")
    assert extremes[0].split() == ["M", "sagging", "45.00", "kNm", "at", "x", "=", "3.000", "m"]
    assert extremes[1].split() == ["M", "hogging", "none"]
    assert extremes[3].split()[2:4] == ["-30.00", "kN"]
    assert block(text, "Stress")[2].split()[:7] == ["beam", "67.50", "3.000", "-200.0", "-67.50", "3.000", "0.0"]
    assert block(text, "Ends")[3].split() == ["right", "0.00", "-6.451", "-6.429"]


def test_columns_stand_on_their_decimal_points():
    text = deflect_table(solved(simple())[1], "metric")
    rows = block(text, "Stations")[2:]
    assert len(rows) >= 11
    points = {tuple(m.start() for m in re.finditer(r"\.", row.partition("  A")[0])) for row in rows}
    assert len(points) == 1


def test_no_noise_and_no_minus_zero():
    _, data = solved(simple())
    data["notes"] = []
    data["combinations"][0]["cross_check"] = None  # it speaks of tiny differences on purpose
    text = deflect_table(data, "metric")
    assert not re.search(r"-0\.?0*(?![\d.])", text)
    assert not re.search(r"\de-\d", text)


def test_nothing_happens_without_load():
    _, data = solved(simple().replace("10 kN/m", "0 kN/m"))
    data["notes"] = []
    text = deflect_table(data, "metric")
    assert "  down    none" in text
    assert not re.search(r"\de-\d", text)


@pytest.mark.parametrize(
    ("used", "said"),
    [
        (0.5, "OK"),
        (0.89999, "OK"),
        (0.9, "OK, judgement"),
        (1.0, "OK, judgement"),
        (1.1, "NOT OK, judgement"),
        (1.2, "NOT OK"),
    ],
)
def test_verdicts(used, said):
    assert verdict({"used": used, "ok": used <= 1.0}) == said


@pytest.mark.parametrize(
    ("share", "words"),
    [(0.5, "200.0  NOT OK"), (1.05, "95.2  OK, judgement"), (2.0, "50.0  OK"), (0.99999, ">100.0  NOT OK, judgement")],
)
def test_checks_in_the_table(share, words):
    text = deflect_table(solved(simple(limit(FOUND * share)))[1], "metric")
    assert block(text, "Limits of deflection")[2].endswith(words)
    assert ("NOT OK: given" in text) == (share < 1.0)


def test_limits_of_other_kinds_have_their_own_units():
    strong = simple('[[limit]]\nname = "turn"\nslope = "5 mrad"\n').replace(
        "[material.steel]\n", '[material.steel]\nstrength = "160 MPa"\n'
    )
    text = deflect_table(solved(strong)[1], "metric")
    assert block(text, "Limits of slope")[2].split()[-5:] == ["5.000", "6.429", "128.6", "NOT", "OK"]
    assert block(text, "Strength")[2].split() == ["beam", "tension", "3.000", "160.0", "67.50", "42.2", "OK"]


def test_band_stands_in_one_line_beside_the_answer():
    banded = simple().replace('E = "210 GPa"', 'E = "210 GPa"\nband = ["190 GPa", "230 GPa"]')
    lines = deflect_table(solved(banded)[1], "metric").splitlines()
    k = next(k for k, line in enumerate(lines) if "low / nominal / high" in line)
    low, nominal, high = map(float, re.search(r": (\S+) / (\S+) / (\S+) mm$", lines[k]).groups())
    assert low > nominal > high
    assert nominal == pytest.approx(FOUND * 1e3, abs=0.005)
    assert lines[k - 1].startswith("  down") or lines[k - 2].startswith("  down")


def test_several_combinations_are_summed_up_first():
    extra = '[[combination]]\nname = "half"\nfactors = { load = 0.5 }\n'
    extra += '[[combination]]\nname = "full"\nfactors = { load = 1 }\n' + limit(FOUND * 0.8)
    text = deflect_table(solved(simple(extra))[1], "metric")
    rows = block(text, "Combinations")
    assert rows[2].split() == ["half", "6.04", "3.000", "L/993", "given", "62.5", "OK"]
    assert rows[3].split() == ["full", "12.09", "3.000", "L/496", "given", "125.0", "1", "NOT", "OK"]
    assert text.index("Combinations") < text.index("Combination half") < text.index("Combination full")
    assert "Combinations" not in deflect_table(solved(simple())[1], "metric")


def test_us_units_and_places():
    text = deflect_table(
        solved(simple('[[station]]\nat = "2 ft 6-1/2 in"\nname = "seal"\n', 'units = "us"\n'))[1], "us"
    )
    seal = next(line for line in block(text, "Stations") if line.endswith("seal"))
    assert seal.lstrip().startswith("2'-6 1/2\"")
    assert "kip-ft" in text and " in at x = 9.843 ft" in text and "kN" not in text


def test_a_cantilever_and_values_that_go_up_and_across():
    text = simple('[[load]]\nkind = "point"\nvalue = "30 kN"\nat = "8 m"\n').replace('"6 m"\n', '"8 m"\n', 1)
    text += '[[load]]\nkind = "point"\nvalue = "1 kN"\nat = "3 m"\ndirection = "across"\n'
    said = deflect_table(solved(text)[1], "metric")
    assert "of the right overhang" in said
    assert re.search(r"^  across  \d", said, re.M)
    assert "overhang right" in block(said, "Spans")[-1]


def test_jumps_show_both_sides_and_names():
    text = simple('[[load]]\nkind = "point"\nvalue = "8 kN"\nat = "2 m"\n[[station]]\nat = "2.5 m"\nname = "door"\n')
    rows = [line.split() for line in block(deflect_table(solved(text)[1], "metric"), "Stations")]
    jump = [r for r in rows if r[0] == "2.000"]
    assert [r[-1] for r in jump] == ["left", "right"]
    assert float(jump[0][2]) - float(jump[1][2]) == pytest.approx(8.0, abs=0.02)
    assert [r[0] for r in rows if r[-1] == "door"] == ["2.500"]


def test_few_stations_for_people_and_all_that_are_asked_for():
    _, data = solved(simple())
    assert len(data["combinations"][0]["stations"]) == 101
    text = deflect_table(data, "metric")
    assert 11 <= len(block(text, "Stations")) - 2 <= 20
    places = [0.01 * k for k in range(0, 600, 13)]
    _, data = solved(simple(), places)
    rows = block(deflect_table(data, "metric", True), "Stations")[2:]
    assert [float(r.split()[0]) for r in rows] == pytest.approx(places, abs=5e-4)


def test_a_slope_that_does_not_exist_is_a_dash():
    _, data = solved(simple())
    data["combinations"][0]["stations"][0]["slope"] = None
    data["combinations"][0]["ends"]["left"]["slope"] = None
    text = deflect_table(data, "metric")
    assert block(text, "Stations")[2].split()[3] == "–"
    assert "–" in block(text, "Ends")[2]


def test_envelope_of_patterns():
    _, data = solved(simple())
    c = data["combinations"][0]
    keys = ("M", "V", "deflection")
    c["envelope"] = {
        "stations": [{"x": s["x"]} | {k: {"min": 0.5 * s[k], "max": 2.0 * s[k]} for k in keys} for s in c["stations"]],
        "supports": [{"name": s["name"], "vertical": {"min": 1e3, "max": 4e4}} for s in c["supports"]],
    }
    text = deflect_table(data, "metric")
    middle = next(r for r in block(text, "Envelope") if r.split()[0] == "3.000")
    assert middle.split()[1:3] == ["22.50", "90.00"]
    assert block(text, "Supports")[2].split() == ["A", "0.000", "30.00", "1.00", "40.00"]


def test_second_method_and_notes():
    _, data = solved(simple())
    data["notes"] = ["a note " * 30]
    data["combinations"][0]["cross_check"] = {
        "method": "unit load", "at": 3.0, "value": FOUND, "difference": 2e-13, "equilibrium": 1e-15,
    }  # fmt: skip
    text = deflect_table(data, "metric")
    assert f"Second method (unit load): {FOUND * 1e3:.2f} mm at x = 3.000 m, difference 2.0e-13" in text
    assert text.index("Stations") < text.index("Notes\n  - a note")
    assert widest(text) <= WIDTH


def test_section():
    job, _ = solved(simple())
    text = section_table(section_at(job.member, 2.4), "metric")
    values = {line.split()[0]: line for line in text.splitlines() if re.match(r"  \w+ +[a-z]", line)}
    assert values["EI_y"].endswith("14 000 kNm2")
    assert "section modulus, elastic, top" in values["W_top"]
    assert values["W_top"].split()[-2:] == ["666.7", "cm3"]
    assert values["z_c"].split()[-2:] == ["-100.0", "mm"]
    assert values["mass"].split()[-2:] == ["157.0", "kg/m"]
    # M/W of 1 kNm: 1000 / 666.7e-6 = 1.5 MPa
    assert block(text, "Stress coefficients")[2].split() == ["beam", "-1.500", "1.500", "0.05000"]
    assert "horizontal axis y–y" in " ".join(text.split())


def test_section_says_n_and_dashes():
    text = simple().replace('density = "7850 kg/m3"\n', "")
    text += '[material.oak]\nE = "10.5 GPa"\n[[part]]\nname = "sole"\nmaterial = "oak"\nshape = "rectangle"\n'
    text += 'width = "100 mm"\ndepth = "20 mm"\nunder = "beam"\n'
    job = read_job("-", "shear = false\n" + text)
    said = section_table(section_at(job.member, 1.0), "metric")
    assert [r.split() for r in block(said, "Materials")[1:]] == [["steel", "1.000"], ["oak", "0.05000"]]
    assert next(line for line in said.splitlines() if line.startswith("  mass")).endswith("–")
    assert next(line for line in said.splitlines() if line.startswith("  GA_z")).endswith("–")


def test_a_round_section_has_no_principal_direction():
    text = simple().replace(
        'shape = "rectangle"\nwidth = "100 mm"\ndepth = "200 mm"', 'shape = "tube"\ndiameter = "200 mm"\nwall = "8 mm"'
    )
    said = section_table(section_at(read_job("-", text).member, 1.0), "metric")
    assert next(line for line in said.splitlines() if line.startswith("  angle")).endswith("–")


PLATED = simple(
    '[[part]]\nname = "plate"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "100 mm"\ndepth = "10 mm"\n'
    'under = "beam"\nfrom = "1.234 m"\nto = "4.5 m"\n'
)


def test_stiffness_shows_every_break_and_no_repeats():
    job, _ = solved(PLATED)
    text = stiffness_table(stiffness(job.member), "metric")
    rows = station_rows(text)
    assert [r[0] for r in rows] == ["0.000", "1.234", "1.234", "4.500", "4.500", "6.000"]
    assert [r[-1] for r in rows[1:5]] == ["left", "right", "left", "right"]
    # (b d^3/12 of 210 mm) / (of 200 mm)
    assert rows[2][-6] == f"{1.05**3:.3f}"
    assert "6 of" in text


def test_stiffness_lists_what_is_asked_for():
    job, _ = solved(PLATED)
    text = stiffness_table(stiffness(job.member, [0.5, 1.0, 1.5]), "metric", True)
    rows = [r[0] for r in station_rows(text)]
    assert rows == ["0.500", "1.000", "1.500"]


def test_a_taper_shows_even_places():
    tapered = simple().replace('depth = "200 mm"', 'depth = [["0 m", "200 mm"], ["6 m", "400 mm"]]')
    job, _ = solved(tapered)
    text = stiffness_table(stiffness(job.member), "metric")
    rows = station_rows(text)
    assert len(rows) == 21
    assert rows[-1][2] == "8.000"


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


@pytest.mark.parametrize(
    ("ratio", "words"), [(507.46, "507"), (99.94, "99.9"), (25199.0, "25200"), (1.2e13, "1.2e13"), (2.5, "2.5")]
)
def test_ratios(ratio, words):
    assert ratio_words(ratio) == words


def test_noise_is_below_what_is_shown():
    _, data = solved(simple())
    noise = noise_of(data["combinations"][0], 6.0)
    assert noise.force == pytest.approx(3e4 * 1e-10, rel=1e-6)
    assert noise.deflection == pytest.approx(FOUND * 1e-10, rel=1e-6)


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
