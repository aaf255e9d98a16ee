"""Results as tables for people: plain text of at most 80 columns that also reads well in a pipe."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from typing import Any

from fishbelly.cli.cautions import LINE
from fishbelly.cli.fibre_grids import fibre_grids
from fishbelly.cli.format_quantity import NOTHING, format_number, format_position
from fishbelly.cli.grid import Grid, unit_of
from fishbelly.cli.section_grids import (
    Line,
    ratios,
    section_lines,
    section_parts,
    section_stresses,
    stiffness_grid,
)
from fishbelly.cli.station_choice import breaks, without_repeats
from fishbelly.cli.tables_deflect import deflect_table
from fishbelly.cli.text_table import paragraph, render
from fishbelly.cli.without_grids import section_beside, stiffness_beside

__all__ = ["deflect_table", "section_table", "stiffness_table"]

SECTION_AXES = (
    "EI_y for bending in the vertical plane, about the horizontal axis y–y through the E-weighted centroid; "
    "y to the right, z upwards, seen from the far end looking back to x = 0."
)
STIFFNESS_AXES = (
    "x from the left end; EI_y for bending in the vertical plane, about the horizontal axis y–y through the "
    "E-weighted centroid; z_c is the centroid's level above the datum line."
)
_EVEN = 20
_MEANING = 43
"""Columns that the meaning of a symbol takes."""
_WHOLE_ANGLE = 10.0
"""Angles are shown with the decimals of one of 10 degrees."""
_STEADY = ("EA", "EI_y", "EI_z", "EI_yz", "GA_z", "z_c", "y_c", "mass")


def section_table(data: Mapping[str, Any], style: str) -> str:
    """Write the cross-section at one place.

    Parameters
    ----------
    data : mapping
        Results of `fishbelly section`, SI units.
    style : {"metric", "us"}
        Units to show.

    Returns
    -------
    str
        Lines of at most 80 columns.
    """
    place = format_position(data["x"], style)  # type: ignore[arg-type]
    side = f", as it is just to the {data.get('side', 'right')} of it" if data.get("break", True) else ""
    lines = [*_title(data, f"Cross-section at x = {place}{side}{_stage(data)}")]
    lines += [*paragraph(SECTION_AXES), ""]
    for heading, values in section_lines(data):
        if all(value is None for *_, value in values):
            continue
        lines += [*paragraph(heading), *_values(values, style), ""]
        if heading.startswith("Transformed") and len(data["transformed"].get("n") or {}) > 1:
            lines += [*_headed(ratios(data), style), ""]
    for grid in (section_parts(data), section_stresses(data), *fibre_grids(data), *section_beside(data)):
        lines += [*_headed(grid, style), ""]
    return "\n".join([*lines, *_closing(data)]) + "\n"


def _title(data: Mapping[str, Any], what: str) -> list[str]:
    title = paragraph(data["title"]) if data.get("title") else []
    return [*title, *paragraph(what), ""]


def _stage(data: Mapping[str, Any]) -> str:
    """Say which stage it is of, where the job has stages."""
    return f", in stage {data['stage']}" if data.get("stage", "all") != "all" else ""


def _headed(grid: Grid, style: str) -> list[str]:
    heading = f"{grid.title} ({grid.note})" if grid.note else grid.title
    return [*paragraph(heading), *render(grid, style)]


def _values(values: list[Line], style: str) -> list[str]:
    """Write symbols, meanings, numbers on their decimal point, and units below each other."""
    cells = []
    for _, _, what, value in values:
        label, size = unit_of(what, style)
        scale = _WHOLE_ANGLE if what == "angle" else None
        number = NOTHING
        if value is not None:
            number = format_number(value / size, "factor", style, scale=scale)  # type: ignore[arg-type]
        cells.append((number, "" if value is None else label))
    before = max(len(n.partition(".")[0]) for n, _ in cells)
    after = max(len(n) - len(n.partition(".")[0]) for n, _ in cells)
    lines = []
    for (symbol, meaning, _, _), (number, label) in zip(values, cells, strict=True):
        whole, point, rest = number.partition(".")
        lines.append(
            f"  {symbol:<9}{meaning:<{_MEANING}}{whole:>{max(before, 6)}}{point + rest:<{after}} {label}".rstrip()
        )
    return lines


def _closing(data: Mapping[str, Any]) -> list[str]:
    lines = []
    if data.get("notes"):
        lines = ["Notes"]
        for note in data["notes"]:
            lines += paragraph(str(note), "  - ")
        lines.append("")
    return [*lines, LINE]


def stiffness_table(data: Mapping[str, Any], style: str, listed: bool = False) -> str:
    """Write the stiffness along the member.

    Parameters
    ----------
    data : mapping
        Results of `fishbelly stiffness`, SI units.
    style : {"metric", "us"}
        Units to show.
    listed : bool
        Whether the places were asked for one by one, so that all are shown; else every break and 21 even
        places, without those between which nothing changes.

    Returns
    -------
    str
        Lines of at most 80 columns.
    """
    rows = data["stations"]
    grid = stiffness_grid(data)
    said = []
    if not listed and rows:
        kept = _kept(rows)
        grid = grid.picked(kept)
        grid = replace(grid, columns=tuple(c for c in grid.columns if c.title != "EI_z"))
        if len(kept) < len(rows):
            said = ["", *paragraph(_LEFT_OUT.format(kept=len(kept), all=len(rows)))]
    lines = [*_title(data, grid.title + _stage(data)), *paragraph(STIFFNESS_AXES), "", *render(grid, style), *said, ""]
    for beside in stiffness_beside(data):
        lines += [*_headed(beside if listed or not rows else beside.picked(kept), style), ""]
    return "\n".join([*lines, *_closing(data)]) + "\n"


_LEFT_OUT = (
    "{kept} of {all} stations: every break, and even ones where something changes; "
    "all of them with --json or -o FILE, others with --at."
)


def _kept(rows: list[Mapping[str, Any]]) -> list[int]:
    """Choose every break and even places, without repeats."""
    length = rows[-1]["x"]
    broken = set(breaks(rows)) if length else set()
    every = [
        k for k, row in enumerate(rows) if row["x"] in broken or _on_grid(row["x"], length) or k in (0, len(rows) - 1)
    ]
    return without_repeats(rows, _STEADY, every)


def _on_grid(x: float, length: float) -> bool:
    piece = x * _EVEN / length if length else 0.0
    return abs(piece - round(piece)) < 1e-7
