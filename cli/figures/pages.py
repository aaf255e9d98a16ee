"""Whole figures: panels put together on a page 160 mm wide, as tall as they need."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from fishbelly.cli.cautions import LINE as CAUTION
from fishbelly.cli.figures import (
    cross_section,
    elevation,
    key,
    response_lines,
    section_key,
    share_areas,
    stage_lines,
    stage_stresses,
    stiffness_lines,
    stress_depth,
)
from fishbelly.cli.figures.curves import Curves, section_places
from fishbelly.cli.figures.governing import bends_sideways, governing_place, stress_bars
from fishbelly.cli.figures.letters import lines_of, one_line, shortened
from fishbelly.cli.figures.paper import LEFT, LINE, RIGHT, WIDTH, page, panel, pens
from fishbelly.cli.figures.section_shapes import part_shapes
from fishbelly.cli.figures.side_view import side_view
from fishbelly.cli.figures.stress_depth import Bar
from fishbelly.cli.figures.ticks import pretty
from fishbelly.cli.figures.worth_drawing import quantities
from fishbelly.cli.format_quantity import unit_label, unit_size
from fishbelly.member.section_results import section_at, stiffness

ACROSS = WIDTH - LEFT - RIGHT
_HEAD, _AXIS, _FOOT = 4.6, 8.5, 5.0
"""Heights of a panel's caption, of the labels of a horizontal axis, of the last line [mm]."""
_HEIGHTS = {
    **{"moment": 26.0, "moment across": 26.0, "shear": 23.0, "slope": 22.0},
    **{"deflection": 25.0, "across": 25.0},
}
"""Heights of the panels of responses [mm]."""
_STIFFNESS, _SHARES = 22.0, 30.0
_STRESS = 54.0
"""Width of stresses beside a cross-section [mm]."""
_SECTION_LEFT = cross_section.MARGIN_LEFT
_BOLD = 1.2
"""How much wider bold letters are, at most."""
_SMALL = 38.0
"""Most height of a cross-section under other panels [mm]."""


class _Column:
    """Panels below each other: heights are gathered first, then the figure is made."""

    def __init__(self, title: str, lines: list[str]) -> None:
        title = shortened(title, (WIDTH - 2.0 * _SECTION_LEFT) / _BOLD)
        self.titled = bool(title)
        self.lines = ([title] if title else []) + lines
        self.y = 2.5 + LINE * len(self.lines) + 0.5

    def room(self, height: float, head: float = _HEAD) -> float:
        """Give the top of a panel of a height, and go on below it."""
        top = self.y + head
        self.y = top + height
        return top

    def figure(self) -> Any:
        """Make the figure with its title lines and the caution at its foot."""
        figure = page(self.y + _FOOT)
        tall = self.y + _FOOT
        for k, line in enumerate(self.lines):
            weight = "bold" if k == 0 and self.titled else "normal"
            figure.text(
                _SECTION_LEFT / WIDTH,
                1.0 - (2.5 + (k + 0.5) * LINE) / tall,
                line,
                ha="left",
                va="center",
                weight=weight,
            )
        figure.text(1.0 - RIGHT / WIDTH, 2.4 / tall, CAUTION, ha="right", va="center")
        return figure


def section_page(job: Any, data: Mapping[str, Any]) -> Any:
    """Draw a cross-section with the stress that a unit moment gives beside it.

    Parameters
    ----------
    job : Job
        The job.
    data : mapping
        Results of `fishbelly section`.

    Returns
    -------
    Figure
    """
    with pens():
        column = _Column(job.member.title, [])
        row = _SectionRow(job, data, cross_section.TALLEST, column)
        wide = WIDTH - _SECTION_LEFT - RIGHT
        words = section_key.height(job, data, wide)
        top = column.room(words, 9.0)
        figure = column.figure()
        unit = unit_label("moment", job.style)
        bars = [
            Bar(
                next(k for k, p in enumerate(job.member.parts) if p.name == part["name"]),
                (part["z_bottom"], part["z_top"]),
                tuple(part["stress_per_moment"][e] * unit_size("moment", job.style) for e in ("bottom", "top")),
            )
            for part in data["parts"]
            if None not in (part["z_bottom"], part["z_top"], *part["stress_per_moment"].values())
        ]
        row.draw(figure, bars, f"Stress for M = 1 {pretty(unit)}, sagging")
        section_key.plot(job, data, panel(figure, _SECTION_LEFT, top, wide, words))
    return figure


class _SectionRow:
    """A cross-section and a stress diagram that shares its levels, side by side."""

    def __init__(self, job: Any, data: Mapping[str, Any], tallest: float, column: _Column) -> None:
        self.job, self.data = job, data
        shapes = part_shapes(job.member, data["x"], data["side"], data.get("stage"))
        self.wide = WIDTH - _SECTION_LEFT - RIGHT - _STRESS - 3.0
        self.sheet = cross_section.sheet(shapes, self.wide, tallest)
        self.top = column.room(self.sheet.height)

    def draw(self, figure: Any, bars: list[Bar], words: str) -> None:
        """Draw both."""
        height = self.sheet.height
        cross_section.plot(self.job, self.data, panel(figure, _SECTION_LEFT, self.top, self.wide, height))
        if bars:
            ax = panel(figure, WIDTH - RIGHT - _STRESS, self.top, _STRESS, height)
            words = shortened(words, _STRESS)
            stress_depth.plot(self.job, bars, words, (self.sheet.level(0.0), self.sheet.level(height)), ax)


def stiffness_page(job: Any, data: Mapping[str, Any]) -> Any:
    """Draw EI_y, EA, the centroid and the share of the parts under the elevation.

    Parameters
    ----------
    job : Job
        The job.
    data : mapping
        Results of `fishbelly stiffness`; the lines are drawn at places of their own.

    Returns
    -------
    Figure
    """
    fine = stiffness(job.member, section_places(job.member), stage=data.get("stage"))
    with pens():
        column = _Column(job.member.title, [])
        bands = elevation.layout(side_view(job.member), job.style, with_loads=False)
        tops = [column.room(bands.height)]
        tops += [column.room(_STIFFNESS, _HEAD + 1.0) for _ in stiffness_lines.QUANTITIES]
        tops += [column.room(_SHARES, _HEAD + 1.0)]
        words = key.height(job.member, job.style)
        tops.append(column.room(words, _AXIS + 1.0))
        figure = column.figure()
        elevation.plot(job, with_loads=False, ax=panel(figure, LEFT, tops[0], ACROSS, bands.height))
        for quantity, top in zip(stiffness_lines.QUANTITIES, tops[1:], strict=False):
            stiffness_lines.plot(job, fine, quantity, panel(figure, LEFT, top, ACROSS, _STIFFNESS), labelled=False)
        share_areas.plot(job, fine, panel(figure, LEFT, tops[-2], ACROSS, _SHARES))
        key.plot(job, panel(figure, LEFT, tops[-1], ACROSS, words))
    return figure


def deflect_page(
    job: Any,
    curves: Curves,
    combination: Mapping[str, Any],
    governs: bool,
    stages: Sequence[Mapping[str, Any]] = (),
) -> Any:
    """Draw one combination: elevation, moment, shear, slope, deflection, and stress where it governs.

    Parameters
    ----------
    job : Job
        The job.
    curves : Curves
        The solved member.
    combination : mapping
        One of the combinations of `fishbelly deflect`.
    governs : bool
        Whether it is the one whose checks are used most, of several.
    stages : sequence of mapping
        Stages of the results, where there are several: deflection and stress at the end of each are drawn too.

    Returns
    -------
    Figure
    """
    member, name = job.member, str(combination["name"])
    factors = next(c.factors for c in member.combinations if c.name == name)
    cases = [case for case, factor in factors.items() if factor]
    chosen, zeros = quantities(curves, combination)
    x, why = governing_place(combination)
    sideways = bends_sideways(combination)
    side, bars = stress_bars(curves.analysis, combination, x, curves.stage)
    section = section_at(member, x, side, stage=curves.stage)
    later = _Stages(job, curves, combination, stages)
    with pens():
        column = _Column(member.title, _said(combination, factors, governs) + [zeros] * bool(zeros))
        bands = elevation.layout(side_view(member), job.style, cases)
        top = column.room(bands.height)
        tops = {q: column.room(_HEIGHTS[q], _HEAD + 1.0) for q in chosen}
        words = key.height(member, job.style)
        key_top = column.room(words, _AXIS + 1.0)
        later.take(column)
        row = _SectionRow(job, section, _SMALL, column)
        wide = WIDTH - _SECTION_LEFT - RIGHT
        materials = section_key.materials_height(job, section, wide)
        materials_top = column.room(materials, _AXIS + 1.0)
        figure = column.figure()
        elevation.plot(job, cases, ax=panel(figure, LEFT, top, ACROSS, bands.height))
        for quantity, at in tops.items():
            ax = panel(figure, LEFT, at, ACROSS, _HEIGHTS[quantity])
            last = quantity == chosen[-1]
            aside = curves.along(combination, "across") if quantity == "deflection" and sideways else None
            response_lines.plot(job, combination, quantity, ax, last, curves.along(combination, quantity), aside)
        key.plot(job, panel(figure, LEFT, key_top, ACROSS, words))
        where = " at mid-width" if sideways else ""
        later.draw(figure)
        row.draw(figure, bars, f"Stress there{where} ({one_line(why)})")
        section_key.plot_materials(job, section, panel(figure, _SECTION_LEFT, materials_top, wide, materials))
    return figure


class _Stages:
    """Panels of what happened stage by stage; none for a job without stages."""

    def __init__(
        self, job: Any, curves: Curves, combination: Mapping[str, Any], stages: Sequence[Mapping[str, Any]]
    ) -> None:
        self.job, self.tops = job, (0.0, 0.0)
        several = len(stages) > 1
        self.lines = stage_lines.of_stages(curves, combination, [s["name"] for s in stages]) if several else []
        self.rows = stage_stresses.rows_of(job, stages, str(combination["name"])) if several else []

    def take(self, column: _Column) -> None:
        """Take the room that they need."""
        if self.lines:
            top = column.room(stage_lines.HEIGHT, _HEAD + 1.0)
            self.tops = (top, column.room(stage_stresses.height(self.rows), _AXIS + 4.0) if self.rows else 0.0)
            column.y += 2.0

    def draw(self, figure: Any) -> None:
        """Draw them."""
        if self.lines:
            stage_lines.plot(self.job, self.lines, panel(figure, LEFT, self.tops[0], ACROSS, stage_lines.HEIGHT))
        if self.rows:
            wide = WIDTH - _SECTION_LEFT - RIGHT
            ax = panel(figure, _SECTION_LEFT, self.tops[1], wide, stage_stresses.height(self.rows))
            stage_stresses.plot(self.job, self.rows, ax)


def _said(combination: Mapping[str, Any], factors: Mapping[str, float], governs: bool) -> list[str]:
    """Lines over the figure: which combination, its factors, what is drawn."""
    text = f"Combination {one_line(str(combination['name']))}"
    if governs:
        text += " (checks used most)" if combination["checks"] else " (largest deflection)"
    parts = [f"{one_line(case)} × {factor:g}" for case, factor in factors.items() if factor]
    if parts:
        text += ": " + ", ".join(parts)
    if combination.get("envelope"):
        text += "; lines and stress: all spans loaded, grey: every arrangement of pattern loads"
    return lines_of(text, WIDTH - 2.0 * _SECTION_LEFT, 2)
