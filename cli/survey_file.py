"""Columns of a survey: stations and values from a csv file or a workbook beside the job.

Comma, semicolon or tab between columns; decimal commas where it is not the comma; a byte order mark, blank
lines and lines that begin with ``#`` are passed over. The first line left is the header, with units. Of a workbook
the sheet that was open when it was saved is read, with the values its formulas had.
"""

from __future__ import annotations

import csv
from itertools import pairwise
from pathlib import Path

from fishbelly.cli.faults import as_written, suggest
from fishbelly.cli.job_types import Ill, ValueFault
from fishbelly.cli.quantities import Kind, QuantityError, Sign, parse_quantity, split_header
from fishbelly.cli.units import unit_factor

Row = tuple[int, list[str]]


def read_columns(
    path: Path, x: str, value: str, kind: Kind, sign: Sign, length: float | None = None
) -> tuple[list[float], list[float]]:
    """Read stations and values.

    Parameters
    ----------
    path : Path
        The file.
    x, value : str
        Names of the two columns, without unit.
    kind : Kind
        What the values are.
    sign : str
        Which signs will do for them.
    length : float, optional
        Length of the member [m]; stations outside it are faults.

    Returns
    -------
    x, values : list of float
        In SI base units, x increasing.

    Raises
    ------
    ValueFault
        With every fault of the file.
    """
    rows, comma = read_rows(path)
    if not rows:
        raise ValueFault(Ill(("file",), "", f"{as_written(path.name)} is empty"))
    line, header = rows[0]
    ills: list[Ill] = []
    columns = [
        _column(path, line, header, name, key, quantity_kind, ills)
        for key, name, quantity_kind in (("x", x, Kind.LENGTH), ("value", value, kind))
    ]
    if ills:
        raise ValueFault(*ills)
    if len(rows) < 3:
        raise ValueFault(Ill(("file",), "at least two rows below the header", str(len(rows) - 1), file=path.name))
    signs: tuple[Sign, Sign] = ("any", sign)
    found: list[tuple[int, float | None, float | None]] = []
    for line, cells in rows[1:]:
        pair = []
        for (column, unit, of), one_sign in zip(columns, signs, strict=True):
            pair.append(_cell(path, line, cells, column, header[column], unit, of, one_sign, comma, ills))
        found.append((line, pair[0], pair[1]))
    ills += _order(path, found)
    if length is not None:
        ills += _outside(path, found, length)
    if ills:
        raise ValueFault(*ills)
    return [row[1] or 0.0 for row in found], [row[2] or 0.0 for row in found]


def read_rows(path: Path) -> tuple[list[Row], bool]:
    """Read the rows that hold something, with their line numbers, and whether commas are decimal.

    Raises
    ------
    ValueFault
        Where the file is not there or is no text.
    """
    if path.suffix.lower() in (".xls", ".ods"):
        raise ValueFault(Ill(("file",), "a .csv or .xlsx file", as_written(path.name), "save it as one of these"))
    try:
        if path.suffix.lower() in (".xlsx", ".xlsm"):
            return _sheet_rows(path), False
        text = path.read_text(encoding="utf-8-sig")
    except FileNotFoundError:
        near = suggest(path.name, sorted(p.name for p in path.parent.glob("*") if p.suffix in (".csv", ".xlsx")))
        raise ValueFault(Ill(("file",), "", f"{as_written(path.name)}: no such file beside the job", near)) from None
    except (OSError, UnicodeDecodeError, ValueError):
        raise ValueFault(Ill(("file",), "a text file with columns", as_written(path.name))) from None
    lines = text.splitlines()
    kept = [(k, line) for k, line in enumerate(lines, 1) if line.strip(" \t;,") and not line.lstrip().startswith("#")]
    head = kept[0][1] if kept else ""
    delimiter = next((d for d in (";", "\t") if d in head), ",")
    cells = csv.reader((line for _, line in kept), delimiter=delimiter, skipinitialspace=True)
    return [(k, row) for (k, _), row in zip(kept, cells, strict=False)], delimiter != ","


def _sheet_rows(path: Path) -> list[Row]:
    """Rows of the active sheet of a workbook, cells as text; numbers keep all their digits."""
    from zipfile import BadZipFile

    from openpyxl import load_workbook
    from openpyxl.utils.exceptions import InvalidFileException

    try:
        book = load_workbook(path, read_only=True, data_only=True)
    except (BadZipFile, InvalidFileException, KeyError) as error:
        raise ValueError(path.name) from error
    try:
        rows: list[Row] = []
        for line, row in enumerate(book.active.iter_rows(values_only=True), 1):
            cells = ["" if cell is None else str(cell).strip() for cell in row]
            if any(cells) and not cells[0].startswith("#"):
                rows.append((line, cells))
        return rows
    finally:
        book.close()


def _column(
    path: Path, line: int, header: list[str], name: str, key: str, kind: Kind, ills: list[Ill]
) -> tuple[int, str, Kind]:
    """Find a column by its name, and its unit."""
    parted = [split_header(cell) for cell in header]
    wanted = " ".join(name.split())
    hits = [k for k, (word, _) in enumerate(parted) if word == wanted or " ".join(header[k].split()) == wanted]
    if len(hits) != 1:
        what = "no column" if not hits else "more than one column"
        hint = suggest(name, [word for word, _ in parted if word]) if not hits else ""
        ills.append(Ill((key,), "", f"{what} {as_written(name)} in {path.name}", hint))
        return 0, "", kind
    unit = parted[hits[0]][1]
    try:
        unit_factor(unit, kind)
    except QuantityError as error:
        missing = f"{as_written(header[hits[0]])} without one" if not unit else error.found
        ills.append(Ill((key,), error.expected, missing, error.hint, file=path.name, line=line))
    return hits[0], unit, kind


def _cell(
    path: Path,
    line: int,
    cells: list[str],
    column: int,
    title: str,
    unit: str,
    kind: Kind,
    sign: Sign,
    comma: bool,
    ills: list[Ill],
) -> float | None:
    text = cells[column].strip() if column < len(cells) else ""
    number = text.replace(",", ".") if comma else text
    try:
        return parse_quantity(f"{number} {unit}", kind, sign=sign)
    except QuantityError:
        bound = {
            "any": "a number",
            "above zero": "a number above 0",
            "zero or more": "a number of 0 or more",
        }[sign]
        ills.append(Ill((), bound, as_written(text) if text else "an empty cell", file=path.name, line=line, key=title))
        return None


def _outside(path: Path, found: list[tuple[int, float | None, float | None]], length: float) -> list[Ill]:
    slack = 1e-9 * length
    return [
        Ill((), f"a station on the member, 0 to {length:.6g} m", f"{x:.6g} m", file=path.name, line=line)
        for line, x, _ in found
        if x is not None and not -slack <= x <= length + slack
    ]


def _order(path: Path, found: list[tuple[int, float | None, float | None]]) -> list[Ill]:
    ills = []
    known = [(line, x) for line, x, _ in found if x is not None]
    for (_, before), (line, x) in pairwise(known):
        if x == before:
            ills.append(Ill((), "each station once", f"the station at {x:.6g} m again", file=path.name, line=line))
        elif x < before:
            text = f"{x:.6g} m after {before:.6g} m"
            ills.append(Ill((), "stations in order of x", text, file=path.name, line=line))
    return ills
