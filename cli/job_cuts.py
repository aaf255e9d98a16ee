"""Notches, haunches and openings of a job."""

from __future__ import annotations

from fishbelly.cli.faults import as_written
from fishbelly.cli.job_models import HaunchTable, NotchTable, OpeningTable
from fishbelly.cli.job_outlines import finished
from fishbelly.cli.job_parts import cut_names, snapped
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_tables import list_of_tables, read_table
from fishbelly.cli.job_types import Path
from fishbelly.member.description import Haunch, Notch, Opening


def read_notches(length: float | None, report: Report) -> list[Notch | None]:
    """Read the notches, None where one cannot be had; `length` of the member [m]."""
    result: list[Notch | None] = []
    for i, raw in enumerate(list_of_tables("notch", report)):
        path: Path = ("notch", i)
        table = read_table(NotchTable, raw, path, report)
        notch = None
        if table is not None and length is not None:
            start, end = snapped(table.from_, length), snapped(table.to, length)
            depth = finished(table.depth, end, (*path, "depth"), report)
            if depth is not None:
                notch = Notch(table.of, depth, start, end, table.side, table.reach)
        result.append(notch)
    return result


def read_haunches(length: float | None, report: Report) -> list[Haunch | None]:
    """Read the haunches, None where one cannot be had; `length` of the member [m]."""
    result: list[Haunch | None] = []
    for i, raw in enumerate(list_of_tables("haunch", report)):
        path: Path = ("haunch", i)
        table = read_table(HaunchTable, raw, path, report)
        haunch = None
        if table is not None and len(table.reach) > 2:
            report.add((*path, "reach"), "a length, or a pair [left, right]", as_written(raw["reach"]))
        elif table is not None and length is not None:
            reach = (table.reach[0], table.reach[-1])
            haunch = Haunch(table.of, snapped(table.at, length), table.depth, reach, table.law, table.side)
        result.append(haunch)
    return result


def read_openings(report: Report) -> tuple[list[Opening | None], list[int]]:
    """Read the openings, rows hole by hole.

    Parameters
    ----------
    report : Report
        The job; takes the faults.

    Returns
    -------
    openings : list of Opening or None
        None where a table cannot be read.
    tables : list of int
        Number of the table that each opening comes from.
    """
    openings: list[Opening | None] = []
    tables: list[int] = []
    everything = tuple(cut_names(report)[0])
    for i, raw in enumerate(list_of_tables("opening", report)):
        table = read_table(OpeningTable, raw, ("opening", i), report)
        row: list[Opening | None] = [None] if table is None else _row(table, everything, ("opening", i), report)
        openings += row
        tables += [i] * len(row)
    return openings, tables


def _row(table: OpeningTable, everything: tuple[str, ...], path: Path, report: Report) -> list[Opening | None]:
    faults = len(report.faults)
    rectangle = [key for key in ("length", "depth", "radius") if getattr(table, key) is not None]
    if table.diameter is not None and rectangle:
        report.add((*path, rectangle[0]), "either `diameter`, or `length` and `depth`", "also `diameter`")
    elif table.diameter is None:
        for key in ("length", "depth"):
            if getattr(table, key) is None:
                words = "a length" if rectangle else "a length, or `diameter` of a round hole"
                report.add((*path, key), words, "")
    if table.spacing is None and table.count not in (None, 1):
        report.add((*path, "spacing"), "a length, because `count` is given", "")
    elif table.count is None and table.spacing is not None:
        report.add((*path, "count"), "a whole number, because `spacing` is given", "")
    if len(report.faults) > faults:
        return [None]
    level = None if isinstance(table.level, str) else table.level
    return [
        Opening(
            at=table.at + k * (table.spacing or 0.0),
            of=table.of or everything,
            diameter=table.diameter,
            length=table.length or 0.0,
            depth=table.depth or 0.0,
            radius=table.radius or 0.0,
            level=level,
        )
        for k in range(table.count or 1)
    ]
