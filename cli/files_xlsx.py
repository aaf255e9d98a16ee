"""Results as a workbook: one sheet a question, units in the heads, the job file at the end."""

from __future__ import annotations

import io
import math
from collections.abc import Callable, Mapping
from dataclasses import replace
from datetime import datetime
from textwrap import wrap
from typing import Any

from fishbelly.cli import deflect_grids
from fishbelly.cli.cautions import FULL
from fishbelly.cli.cracked_grids import cracked_spans, cracked_stages, cracked_stretches, cracked_ways
from fishbelly.cli.file_grids import answers, checks, joined, per_combination, section_details, stages, stations, stress
from fishbelly.cli.files_csv import head
from fishbelly.cli.format_quantity import format_position
from fishbelly.cli.grid import PERCENT, TEXT, Column, Grid, unit_of
from fishbelly.cli.joint_grids import fastening, joint_flows, joints
from fishbelly.cli.section_grids import ratios, section_lines, stiffness_grid
from fishbelly.cli.slip_grids import slip_bounds, slip_gamma, slip_joints
from fishbelly.cli.stage_grids import staged
from fishbelly.cli.tables import SECTION_AXES, STIFFNESS_AXES
from fishbelly.cli.tables_deflect import AXES
from fishbelly.cli.without_grids import deflect_beside, section_beside, stiffness_beside

_CREATED = datetime(2000, 1, 1)
"""Date in the file's properties, always the same so that the same job gives the same file."""
_MOST_TEXT = 32767
"""Characters that a cell holds."""
_OWN_RANGE = 1e-3
"""With figures of its own, a number shows no finer than one of this share of the column's largest would."""
_LINE = 15
"""Height of a line of text [pt]."""
_TEXT_WIDTH = 100
"""Width of sheets of text [characters]."""
_A4, _LETTER = 9, 1
"""Numbers of paper sizes in the file format."""
_WIDEST = 60
_NARROWEST = 9
_AXES = {"deflect": AXES, "stiffness": STIFFNESS_AXES, "section": SECTION_AXES}


def xlsx_bytes(command: str, data: dict[str, Any], job: Any) -> bytes:
    """Write results as a workbook.

    Parameters
    ----------
    command : {"deflect", "stiffness", "section"}
        Whose results they are.
    data : dict
        Results in SI units.
    job : Job
        The job: its style of units, its text and, for the EI sheet of `deflect`, its member.

    Returns
    -------
    bytes
        The file; the same for the same job.
    """
    import xlsxwriter

    out = io.BytesIO()
    book = xlsxwriter.Workbook(out, {"in_memory": True})
    book.set_properties({"title": data.get("title") or "", "created": _CREATED})
    pen = _Pen(book, job.style)
    sheets = {"deflect": _deflect, "stiffness": _stiffness, "section": _section}[command](data, job)
    for grid in sheets:
        if grid.count:
            pen.grid(grid)
    pen.lines("Notes", _notes(command, data, job))
    pen.lines("Job file", job.text.splitlines(), plain=True)
    book.close()
    return out.getvalue()


def grid_xlsx(grid: Grid, style: str) -> bytes:
    """Write one table as a workbook, in the units of a style."""
    import xlsxwriter

    out = io.BytesIO()
    book = xlsxwriter.Workbook(out, {"in_memory": True})
    book.set_properties({"title": grid.title, "created": _CREATED})
    _Pen(book, style).grid(grid)
    book.close()
    return out.getvalue()


def _deflect(data: dict[str, Any], job: Any) -> list[Grid]:
    from fishbelly.member.section_results import stiffness

    places = [s["x"] for s in data["combinations"][0]["stations"]]
    table = stiffness(job.member, places, stage=data.get("stage"))
    return [
        answers(data),
        *checks(data),
        per_combination(data, "Supports", deflect_grids.supports),
        per_combination(data, "Spans", deflect_grids.spans),
        per_combination(data, "Ends", deflect_grids.ends),
        stress(data),
        *_cracked(data),
        *stages(data),
        *_beside(data),
        stations(data),
        replace(stiffness_grid(table), title="EI"),
    ]


def _beside(data: dict[str, Any]) -> list[Grid]:
    """Joints of parts where there are any, and what is without parts where that was asked."""
    if not any(c["joints"] for c in data["combinations"]):
        return _titled(deflect_beside(data))
    made = (("Joints and cut-offs", joints), ("Flow along joints", joint_flows))
    return [
        *(per_combination(data, title, make) for title, make in made),
        *_fastening(data),
        *_slips(data),
        *_titled(deflect_beside(data)),
    ]


def _cracked(data: dict[str, Any]) -> list[Grid]:
    """What is cracked, and ways of counting it, of those combinations that crack the member."""
    some = data | {"combinations": [c for c in data["combinations"] if "cracked" in c]}
    if not some["combinations"]:
        return []
    made: list[tuple[str, Callable[[Mapping[str, Any], deflect_grids.Noise], Grid]]]
    made = [("Cracked", cracked_stretches), ("Cracked and uncracked", cracked_ways)]
    if any("spans" in (c["cracked"].get("one_value") or {}) for c in some["combinations"]):
        made.append(("Critical sections", cracked_spans))
    found = [per_combination(some, title, make) for title, make in made]
    if staged(data):
        found.append(
            joined("Cracked by stage", [(c["name"], cracked_stages(data, c["name"])) for c in some["combinations"]])
        )
    return found


def _fastening(data: dict[str, Any]) -> list[Grid]:
    """Fasteners and theoretical cut-offs of those combinations that have any."""
    pairs = [(c["name"], fastening(c, deflect_grids.noise_of(c, data["length"]))) for c in data["combinations"]]
    there = [(name, grid) for name, grid in pairs if grid is not None]
    return [joined("Fastening", there)] if there else []


def _slips(data: dict[str, Any]) -> list[Grid]:
    """Joints that slip, both bounds and the gamma-method, where anything slips."""
    if not any(c.get("slip") for c in data["combinations"]):
        return []
    made = (("Joints that slip", slip_joints), ("Both bounds", slip_bounds), ("Gamma-method", slip_gamma))
    return [per_combination(data, title, make) for title, make in made]


def _titled(grids: list[Grid]) -> list[Grid]:
    """Give grids short titles for their sheets; what they are without is then told in the note."""
    several = len(grids) > 1
    return [
        replace(
            g, title=f"Without {k + 1}" if several else "Without", note="; ".join(t for t in (g.title, g.note) if t)
        )
        for k, g in enumerate(grids)
    ]


def _stiffness(data: dict[str, Any], _: Any) -> list[Grid]:
    return [replace(stiffness_grid(data, full=True), title="EI"), *_titled(stiffness_beside(data))]


def _section(data: dict[str, Any], job: Any) -> list[Grid]:
    rows = [line for _, lines in section_lines(data) for line in lines]
    headings = [heading for heading, lines in section_lines(data) for _ in lines]
    shown = [(what, None if v is None else v / unit_of(what, job.style)[1]) for _, _, what, v in rows]
    values = Column("value", "factor", tuple(v for _, v in shown), own=True)
    single = Grid(
        "Section",
        (
            Column("about", TEXT, tuple(headings)),
            Column("quantity", TEXT, tuple(r[0] for r in rows)),
            Column("meaning", TEXT, tuple(r[1] for r in rows)),
            values,
            Column("unit", TEXT, tuple(unit_of(what, job.style)[0] for what, _ in shown)),
        ),
    )
    return [single, ratios(data), *section_details(data), *_titled(section_beside(data))]


def _notes(command: str, data: dict[str, Any], job: Any) -> list[str]:
    lines = [data.get("title") or "", f"Job file: {job.name}"]
    if command == "section":
        lines.append(f"x = {format_position(data['x'], job.style)}, {data.get('side', 'right')} side")
    if "length" in data:
        lines.append(f"Length {format_position(data['length'], job.style)}")
    lines += [_AXES[command], ""]
    for c in data.get("combinations", ()):
        check = c.get("cross_check")
        if check is not None and check.get("difference") is not None:
            lines.append(f"Second method, {c['name']}: {check['method']}, difference {check['difference']:.1e}")
    lines += [str(note) for note in data.get("notes", ())]
    paragraphs = (" ".join(paragraph.split()) for paragraph in FULL.split("\n\n"))
    return [*lines, "", "\n\n".join(paragraphs)]


class _Pen:
    """Writes sheets of one workbook."""

    def __init__(self, book: Any, style: str) -> None:
        self.book, self.style = book, style
        self.bold = book.add_format({"bold": True, "bottom": 1, "text_wrap": True, "valign": "top"})
        self.words = book.add_format({"text_wrap": True, "valign": "top"})
        self.formats: dict[tuple[str, bool], Any] = {}

    def grid(self, grid: Grid) -> None:
        """Write a grid as a sheet: frozen bold heads, numbers, rows at a jump shaded, and its note below."""
        sheet = self.book.add_worksheet(grid.title[:31])
        jumps = next((c.values for c in grid.columns if c.title == "side"), ())
        columns = [c for c in grid.columns if not (c.optional and c.empty)]
        lines = 1
        for k, column in enumerate(columns):
            title = head(column.title, column.unit(self.style))
            sheet.write_string(0, k, title, self.bold)
            numbers = [] if column.is_text else column.numbers(self.style)
            texts = [str(v or "") for v in column.values] if column.is_text else []
            longest = max((len(t) for t in texts), default=0)
            width = min(max(max(map(len, title.split())) + 2, longest + 1, _NARROWEST), _WIDEST)
            lines = max(lines, len(wrap(title, width - 1)))
            sheet.set_column(k, k, width)
            patterns = [] if column.is_text else _patterns(column, numbers)
            for row in range(grid.count):
                look = self._format(patterns[row] if patterns else "General", bool(jumps and jumps[row]))
                if texts and texts[row]:
                    sheet.write_string(row + 1, k, texts[row][:_MOST_TEXT], look)
                elif numbers and numbers[row] is not None:
                    sheet.write_number(row + 1, k, numbers[row], look)
                else:
                    sheet.write_blank(row + 1, k, None, look)
        if grid.note:
            sheet.write_string(grid.count + 2, 0, f"Note: {grid.note}")
        sheet.set_row(0, _LINE * lines)
        sheet.freeze_panes(1, 0)
        sheet.repeat_rows(0)
        self._page(sheet)
        sheet.set_landscape()

    def lines(self, name: str, lines: list[str], plain: bool = False) -> None:
        """Write lines of text as a sheet of one column."""
        sheet = self.book.add_worksheet(name)
        sheet.set_column(0, 0, _TEXT_WIDTH)
        for row, line in enumerate(lines):
            sheet.write_string(row, 0, line[:_MOST_TEXT], None if plain else self.words)
            rows = sum(max(len(wrap(part, _TEXT_WIDTH)), 1) for part in line.split("\n"))
            if not plain and rows > 1:
                sheet.set_row(row, _LINE * rows)
        self._page(sheet)

    def _page(self, sheet: Any) -> None:
        """Fit a sheet to the width of a page: A4, or letter for US units."""
        sheet.set_paper(_LETTER if self.style == "us" else _A4)
        sheet.fit_to_pages(1, 0)

    def _format(self, pattern: str, shaded: bool) -> Any:
        key = (pattern, shaded)
        if key not in self.formats:
            look = {"num_format": pattern} | ({"bg_color": "#EDEDED"} if shaded else {})
            self.formats[key] = self.book.add_format(look)
        return self.formats[key]


def _patterns(column: Column, numbers: list[float | None]) -> list[str]:
    """Choose how a spreadsheet shows a column: about five figures of its largest number, or of each.

    Numbers of one column that are of several quantities, or bare, are shown as they are where they are short.
    """
    if column.what == PERCENT:
        return ["0.0"] * len(numbers)
    if column.what == "position":
        return ["0.000"] * len(numbers)
    top = max((abs(n) for n in numbers if n is not None), default=0.0)
    if not column.own:
        return [_pattern(top)] * len(numbers)
    bare = column.what == "factor"
    patterns = []
    for number in numbers:
        short = number is None or (bare and float(f"{number:.6g}") == number)
        patterns.append("General" if short else _pattern(max(abs(number or 0.0), 0.0 if bare else _OWN_RANGE * top)))
    return patterns


def _pattern(size: float) -> str:
    """Show about five figures of a number of that size."""
    if size == 0.0:
        return "0"
    exponent = math.floor(math.log10(size))
    if not -4 <= exponent < 9:
        return "0.0000E+00"
    decimals = max(4 - exponent, 0)
    return f"0.{'0' * decimals}" if decimals else "0"
