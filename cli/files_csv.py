"""Results as CSV: units in the heads of columns, notes after the table."""

from __future__ import annotations

import csv
import io
from typing import Any

from fishbelly.cli.cautions import LINE
from fishbelly.cli.file_grids import OF_STATIONS, section_details, stages, stations
from fishbelly.cli.grid import Grid, unit_of
from fishbelly.cli.section_grids import ratios, section_lines, stiffness_grid

_DIGITS = 10
"""Significant figures of numbers."""


def csv_bytes(command: str, data: dict[str, Any], job: Any) -> bytes:
    """Write results as CSV.

    Parameters
    ----------
    command : {"deflect", "stiffness", "section"}
        Whose results they are.
    data : dict
        Results in SI units.
    job : Job
        The job, for its style of units.

    Returns
    -------
    bytes
        UTF-8, fields with commas, lines as RFC 4180 has them. The first line is the head: a title and, in
        brackets, the unit. Numbers have a point and ten figures; what does not exist is empty. A job with stages
        has their tables after that along x, each after an empty line. The notes stand at the end, after an empty
        line, one a line, each after the word "note".
    """
    style = job.style
    if command == "section":
        rows = _section(data, style)
    else:
        rows = _rows(stations(data) if command == "deflect" else stiffness_grid(data, full=True), style)
    for grid in stages(data) if command == "deflect" else ():
        rows += [[], *_rows(grid, style)]
    said = [OF_STATIONS] if command == "deflect" else []
    rows += [[], *(["note", _harmless(str(note))] for note in (*data.get("notes", ()), *said, LINE))]
    out = io.StringIO()
    csv.writer(out).writerows(rows)
    return out.getvalue().encode("utf-8")


def grid_csv(grid: Grid, style: str) -> bytes:
    """Write one table as CSV, as `csv_bytes` does, in the units of a style."""
    out = io.StringIO()
    csv.writer(out).writerows(_rows(grid, style))
    return out.getvalue().encode("utf-8")


def _rows(grid: Grid, style: str) -> list[list[str]]:
    heads = [head(c.title, c.unit(style)) for c in grid.columns]
    columns = [
        [_harmless(v or "") for v in c.values] if c.is_text else [_number(v) for v in c.numbers(style)]
        for c in grid.columns
    ]
    return [heads, *(list(row) for row in zip(*columns, strict=True))]


def head(title: str, unit: str) -> str:
    """Write the head of a column.

    Examples
    --------
    >>> head("M", "kNm"), head("combination", "")
    ('M [kNm]', 'combination')
    """
    return f"{title} [{unit}]" if unit else title


def _section(data: dict[str, Any], style: str) -> list[list[str]]:
    x, size = unit_of("position", style)
    rows = [
        ["quantity", "meaning", "value", "unit"],
        ["x", f"place, {data['side']} side", _number(data["x"] / size), x],
    ]
    for heading, lines in section_lines(data):
        for symbol, meaning, what, value in lines:
            unit, size = unit_of(what, style)
            said = f"{meaning}, {heading[0].lower()}{heading[1:]}" if heading.startswith("Transformed") else meaning
            rows.append([symbol, _harmless(said), _number(None if value is None else value / size), unit])
    for grid in (ratios(data), *section_details(data)):
        rows += [[], *_rows(grid, style)]
    return rows


def _number(value: float | None) -> str:
    return "" if value is None else f"{value:.{_DIGITS}g}"


def _harmless(text: str) -> str:
    """Keep a name from being taken for a formula by a spreadsheet."""
    plain = " ".join(text.split())
    return f"'{plain}" if plain[:1] in ("=", "+", "-", "@") else plain
