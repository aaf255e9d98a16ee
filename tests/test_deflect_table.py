"""The table of deflections for people: what it says and in which order."""

import re

import pytest
from table_jobs import FOUND, WIDTH, block, limit, simple, solved, widest

from fishbelly.cli import cautions
from fishbelly.cli.deflect_grids import noise_of, ratio_words, verdict
from fishbelly.cli.tables import deflect_table


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
