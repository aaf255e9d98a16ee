"""Figures of jobs that are hard to draw: letters apart and whole, units, formats, the same bytes twice."""

from __future__ import annotations

import functools
import itertools
import math
import os
import subprocess
import sys
from pathlib import Path
from typing import Any

import matplotlib
import numpy as np
import pytest
from figure_boxes import faults, written
from figure_jobs import JOBS

from fishbelly.cli.figures import (
    cross_section,
    elevation,
    key,
    pages,
    response_lines,
    share_areas,
    stiffness_lines,
    stress_depth,
)
from fishbelly.cli.figures.curves import Curves
from fishbelly.cli.figures.governing import governing_combination, governing_place, stress_bars
from fishbelly.cli.figures.letters import Spots, apart, lines_of, shortened
from fishbelly.cli.figures.paper import text_width
from fishbelly.cli.figures.scene import exaggeration
from fishbelly.cli.figures.side_view import side_view
from fishbelly.cli.figures.ticks import place as place_words
from fishbelly.cli.figures.ticks import places, step_for, ticks
from fishbelly.cli.figures.worth_drawing import quantities
from fishbelly.cli.figures.write import figure_bytes, write_figure
from fishbelly.cli.job_file import Job, read_job
from fishbelly.member.analysis import Analysis
from fishbelly.member.results import deflect
from fishbelly.member.section_results import section_at, stiffness
from fishbelly.member.shares import bending_shares
from fishbelly.member.stress_depth import stress_over_depth

ROUND_OFF = 1e-9
"""Relative; identities between two roads to the same number."""

# where nothing of the cross-section is left its stiffness has no value; that is not what is tested here
POINTED = ("pointed",)


@functools.cache
def job(name: str) -> Job:
    return read_job("-", JOBS[name])


@functools.cache
def results(name: str) -> dict[str, Any]:
    return deflect(job(name).member)


def middle(name: str) -> dict[str, Any]:
    return section_at(job(name).member, 0.45 * job(name).member.length)


def checked(figure: Any) -> None:
    figure.set_dpi(100)
    assert faults(figure) == []


def test_the_checker_finds_letters_that_overlap_and_that_are_cut() -> None:
    ax = elevation.plot(job("plated"))
    assert faults(ax.figure) == []
    ax.text(3.0, 12.0, "two words")
    ax.text(3.1, 12.0, "over each other")
    ax.text(6.2, 8.0, "beyond the edge of the page")
    found = faults(ax.figure)
    assert any(f.startswith("cut") for f in found)
    assert any("two words" in f and "over each other" in f for f in found)


@pytest.mark.parametrize("name", JOBS)
def test_letters_of_cross_sections_stand_apart(name: str) -> None:
    checked(pages.section_page(job(name), middle(name)))


@pytest.mark.parametrize("name", [n for n in JOBS if n not in POINTED])
def test_letters_of_stiffness_lines_stand_apart(name: str) -> None:
    checked(pages.stiffness_page(job(name), {}))


@pytest.mark.parametrize("name", JOBS)
def test_letters_of_deflections_stand_apart(name: str) -> None:
    curves = Curves(job(name).member)
    for combination in results(name)["combinations"]:
        checked(pages.deflect_page(job(name), curves, combination, True))


def test_every_quantity_is_marked_with_its_unit() -> None:
    for name, moment, place, stress in (("plated", "[kNm]", "[m]", "[MPa]"), ("us arm", "[kip-ft]", "[ft]", "[ksi]")):
        combination = results(name)["combinations"][0]
        ax = response_lines.plot(job(name), combination, "moment")
        assert moment in ax.get_ylabel()
        assert "tension side" in ax.get_ylabel()
        assert place in ax.get_xlabel()
        for quantity in ("shear", "slope", "deflection"):
            assert "[" in response_lines.plot(job(name), combination, quantity).get_ylabel()
        _, bars = stress_bars(Analysis.of(job(name).member), combination, governing_place(combination)[0])
        assert stress in stress_depth.plot(job(name), bars, "stress").get_xlabel()
        data = stiffness(job(name).member)
        for quantity in stiffness_lines.QUANTITIES:
            assert "[" in stiffness_lines.plot(job(name), data, quantity).get_ylabel()
        assert "%" in share_areas.plot(job(name), data).get_ylabel()


def test_moment_and_deflection_are_drawn_downwards() -> None:
    combination = results("plated")["combinations"][0]
    for quantity, down in (("moment", True), ("deflection", True), ("shear", False), ("slope", False)):
        low, high = response_lines.plot(job("plated"), combination, quantity).get_ylim()
        assert bool(low > high) is down


def test_extremes_are_written_with_value_and_place() -> None:
    combination = results("plated")["combinations"][0]
    words = [t.get_text() for t in response_lines.plot(job("plated"), combination, "moment").texts]
    assert any(w.startswith("83.7 kNm at 2.381 m") for w in words)
    assert combination["moment"]["sagging"]["value"] == pytest.approx(83.7e3, abs=50.0)


def test_plots_draw_on_the_axes_they_are_given() -> None:
    figure = pages.page(80.0)
    ax = pages.panel(figure, 19.0, 8.0, 136.0, 60.0)
    assert elevation.plot(job("plated"), ax=ax) is ax
    other = pages.panel(figure, 19.0, 8.0, 136.0, 60.0)
    assert cross_section.plot(job("plated"), middle("plated"), ax=other) is other


def _settings() -> dict[str, Any]:
    # asking for the backend would choose one
    return {k: matplotlib.rcParams[k] for k in matplotlib.rcParams if not k.startswith("backend")}


def test_settings_of_the_plotting_library_stay_as_they_were() -> None:
    before = _settings()
    for suffix in (".png", ".svg", ".pdf"):
        figure_bytes(suffix, "section", middle("plated"), job("plated"))
    assert _settings() == before


@pytest.mark.parametrize("suffix", [".png", ".svg", ".pdf"])
def test_every_command_writes_every_format_and_the_same_bytes_twice(suffix: str, tmp_path: Path) -> None:
    one = job("plated")
    starts = {".png": b"\x89PNG", ".svg": b"<?xml", ".pdf": b"%PDF"}
    for command, data in (
        ("section", middle("plated")),
        ("stiffness", stiffness(one.member)),
        ("deflect", results("plated")),
    ):
        path = tmp_path / f"{command}{suffix.upper()}"
        write_figure(str(path), command, data, one)
        content = path.read_bytes()
        assert content.startswith(starts[suffix])
        assert figure_bytes(suffix, command, data, one) == content
        for word in (b"CreationDate", b"<dc:date>", b"Matplotlib v"):
            assert word not in content


def test_another_process_writes_the_same_bytes(tmp_path: Path) -> None:
    script = (
        "import sys, hashlib; sys.path.insert(0, sys.argv[1])\n"
        "from figure_jobs import JOBS\n"
        "from fishbelly.cli.figures.write import figure_bytes\n"
        "from fishbelly.cli.job_file import read_job\n"
        "from fishbelly.member.section_results import section_at\n"
        "job = read_job('-', JOBS['haunched'])\n"
        "data = section_at(job.member, 14.0)\n"
        "print([hashlib.sha256(figure_bytes(s, 'section', data, job)).hexdigest() for s in ('.svg', '.pdf')])\n"
        "assert 'matplotlib.pyplot' not in sys.modules\n"
    )
    runs = {
        subprocess.run(
            [sys.executable, "-c", script, str(Path(__file__).parent)],
            env={**os.environ, "PYTHONHASHSEED": seed},
            capture_output=True,
            text=True,
            check=True,
        ).stdout
        for seed in ("1", "2")
    }
    assert len(runs) == 1


def test_a_pdf_has_a_page_for_every_combination() -> None:
    content = figure_bytes(".pdf", "deflect", results("plated"), job("plated"))
    assert content.count(b"/Type /Page\n") + content.count(b"/Type /Page ") == 2


def test_a_picture_shows_the_combination_whose_checks_are_used_most() -> None:
    combinations = [
        {"checks": [{"used": 0.4}], "deflection": {}},
        {"checks": [{"used": 0.9}, {"used": 0.1}], "deflection": {}},
        {"checks": [], "deflection": {"down": {"value": 9.0}}},
    ]
    assert governing_combination(combinations) == 1
    assert governing_combination([c | {"checks": []} for c in combinations[:1]] + combinations[2:]) == 1


@pytest.mark.parametrize(("suffix", "command"), [(".bmp", "section"), (".png", "buckle")])
def test_unknown_formats_and_commands_are_refused(suffix: str, command: str) -> None:
    with pytest.raises(ValueError, match=r"not '\.bmp'|'buckle'"):
        figure_bytes(suffix, command, {}, job("plated"))


def test_the_depth_is_drawn_with_the_factor_that_is_stated() -> None:
    for name in ("plated", "stub", "foil"):
        ax = elevation.plot(job(name))
        words = next(t.get_text() for t in ax.texts if t.get_text().startswith("Elevation"))
        stated = float(words.split("drawn ")[1].split(" times")[0])
        low, high = side_view(job(name).member).levels
        outline = max((p for p in ax.patches if hasattr(p, "get_xy")), key=lambda p: np.ptp(np.array(p.get_xy())[:, 0]))
        heights = [np.array(p.get_xy())[:, 1] for p in ax.patches if p.get_zorder() < 5.0 and hasattr(p, "get_xy")]
        drawn = max(h.max() for h in heights) - min(h.min() for h in heights)
        inches = ax.figure.get_size_inches()[0] * ax.get_position().width
        per_mm = np.ptp(ax.get_xlim()) / (inches * 25.4)
        assert drawn * per_mm == pytest.approx((high - low) * stated, rel=1e-6), outline


def test_the_side_view_follows_haunches_notches_and_steps() -> None:
    view = side_view(job("haunched").member)
    assert view.edges_at(15.0)[0] == pytest.approx(-0.9 - 0.7 - 0.03 * math.hypot(1.0, 0.35), abs=1e-6)
    assert view.edges_at(5.0) == pytest.approx((-0.9, 0.2), abs=1e-9)
    holed = side_view(job("holed").member)
    assert holed.edges_at(0.2)[1] == pytest.approx(-0.06, abs=1e-9)
    assert holed.edges_at(5.0)[0] == pytest.approx(-0.31, abs=1e-6)
    assert {h.key for h in holed.holes} == {"opening 0", "opening 1"}
    assert [s.hidden for s in holed.stretches if s.part == 1] == [True] * len(
        [s for s in holed.stretches if s.part == 1]
    )
    shaft = side_view(job("shaft").member)
    assert shaft.edges_at(0.3) == pytest.approx((-0.021, 0.021), abs=1e-9)


@pytest.mark.parametrize("name", ["plated", "flitch", "haunched", "wordy"])
def test_stress_over_the_depth_agrees_with_the_stress_of_the_results(name: str) -> None:
    member = job(name).member
    analysis = Analysis.of(member)
    combination = results(name)["combinations"][-1]
    for row in combination["stress"]:
        peak = row["max"]
        if peak is None or combination.get("envelope"):
            continue
        found = [
            (v, side)
            for side in ("left", "right")
            for v in stress_over_depth(analysis, combination["name"], peak["at"], side)
            if member.parts[v.part].name == row["part"]
        ]
        size = max(abs(s["max"]["value"]) for s in combination["stress"] if s["max"] is not None)
        best = max(float(np.max(v.stress)) for v, _ in found)
        assert best == pytest.approx(peak["value"], rel=ROUND_OFF, abs=ROUND_OFF * size)


def test_shares_of_parts_add_up_and_follow_from_hand() -> None:
    one = job("flitch").member
    x = np.array([0.1, 2.4])
    shares = bending_shares(one, x, ["right", "right"])
    assert shares.sum(axis=0) == pytest.approx(1.0, rel=ROUND_OFF)
    steel = one.material("S275").E * 0.010 * 0.200**3 / 12.0
    timber = one.material("softwood").E * 2 * 0.075 * 0.225**3 / 12.0
    assert shares[:, 0] == pytest.approx([0.0, 1.0])
    assert shares[0, 1] == pytest.approx(steel / (steel + timber), rel=ROUND_OFF)


def test_labels_move_apart_as_little_as_they_must() -> None:
    moved = apart([10.0, 11.0, 30.0], [4.0, 4.0, 4.0], 0.0, 40.0, gap=1.0)
    assert moved == pytest.approx([8.0, 13.0, 30.0])
    assert apart([1.0, 1.0], [4.0, 4.0], 0.0, 9.0, gap=1.0) == pytest.approx([2.0, 7.0])
    assert apart([1.0, 1.0], [4.0, 5.0], 0.0, 9.0, gap=1.0) is None


def test_names_are_cut_in_their_middle() -> None:
    long = "north-east gable girder, re-used, with the 1962 repair plates A"
    cut = shortened(long, 40.0)
    assert text_width(cut) <= 40.0
    assert cut.startswith("north") and cut.endswith("A") and "…" in cut
    assert shortened("short", 40.0) == "short"
    assert shortened("a\nb\x07c", 40.0) == "a bc"
    lines = lines_of("word " * 60, 50.0, 2)
    assert len(lines) == 2 and all(text_width(line) <= 50.0 for line in lines)


def test_ticks_have_round_steps_and_few_digits() -> None:
    assert [step_for(reach, 5) for reach in (1.0, 7.3, 12.0, 0.03)] == pytest.approx([0.2, 2.0, 5.0, 0.01])
    found = ticks(-3.1e4, 8.37e4, "moment", "metric")
    assert found.labels == ["0", "50"] and found.unit == "kNm"
    assert ticks(0.0, 4e12, "bending stiffness", "metric").unit == "10⁹ kNm²"
    assert ticks(0.0, 2e-7, "deflection", "metric").unit == "10⁻⁶ mm"
    assert places(6.0, "metric", 8).unit == "m"
    assert places(0.42, "metric", 8).labels[:2] == ["0", "100"]
    assert places(4 * 0.3048, "us", 8).labels[1] == "0'-6\""
    assert places(0.5, "us", 8).unit == "in"


def test_the_depth_is_drawn_larger_by_round_factors() -> None:
    assert exaggeration(0.3, 6.0, 136.0, 19.0) == 3.0
    assert math.isclose(exaggeration(1.5, 0.5, 136.0, 19.0), 0.05)


SIDEWAYS = """
length = "4 m"
material.steel = { E = "210 GPa", poisson = 0.3 }
[[part]]
name = "arm"
material = "steel"
shape = "tube"
diameter = "200 mm"
wall = "8 mm"
[[support]]
at = "0 m"
kind = "fixed"
[[load]]
kind = "point"
value = "2 kN"
at = "3 m"
direction = "across"
"""


def test_round_off_is_not_drawn_and_a_sentence_says_what_is_zero() -> None:
    arm = read_job("-", SIDEWAYS)
    curves, combination = Curves(arm.member), deflect(arm.member)["combinations"][0]
    drawn, words = quantities(curves, combination)
    assert drawn == ["moment across", "across"]
    assert "M, V, slope and deflection" in words
    figure = pages.deflect_page(arm, curves, combination, False)
    assert any(t.text == words for t in written(figure))
    checked(figure)
    # 2 kN at 3 m from the wall pushes to +y and pulls at the other side
    moment = curves.along(combination, "moment across")[1]
    assert moment[0] == pytest.approx(-6e3, rel=ROUND_OFF)
    upright = results("plated")["combinations"][0]
    assert quantities(Curves(job("plated").member), upright) == (["moment", "shear", "slope", "deflection"], "")


def test_a_part_has_one_fill_in_all_drawings_of_a_page() -> None:
    def fills(ax: Any) -> set[tuple[Any, Any]]:
        return {(p.get_facecolor(), p.get_hatch()) for p in ax.patches if p.get_hatch()}

    section = cross_section.plot(job("flitch"), section_at(job("flitch").member, 2.4))
    assert fills(section)
    assert fills(section) <= fills(key.plot(job("flitch")))
    assert fills(section) <= fills(elevation.plot(job("flitch")))


def test_lengths_between_breaks_are_written_where_they_have_room() -> None:
    words = [t.get_text() for t in elevation.plot(job("plated")).texts]
    ends = side_view(job("plated").member).breaks
    assert len(ends) > 2
    assert {f"{b - a:.3f}" for a, b in itertools.pairwise(ends)} <= set(words)


def test_labels_stand_by_their_own_dot_and_off_the_line_of_zero() -> None:
    free = np.empty(0)
    spots = Spots(100.0, 30.0, free, free, zero=15.0, dots=[(50.0, 14.0), (55.0, 6.0)])
    x, y = spots.find("some words", 50.0, 14.0) or (0.0, 0.0)
    assert not y - 1.5 < 15.0 < y + 1.5
    assert math.hypot(x - 50.0, y - 14.0) < math.hypot(x - 55.0, y - 6.0)


def test_the_left_end_is_written_in_feet_and_inches() -> None:
    assert place_words(0.0, 12.5 * 0.3048, "us") == "0'-0\""
    assert place_words(0.0, 0.5, "us") == "0 in"
    assert place_words(0.0, 4.0, "metric") == "0 m"
