"""Supports and hinges of a job: kinds and words to the stiffness that they hold with."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any

from fishbelly.cli.job_models import HingeTable, SupportTable
from fishbelly.cli.job_parts import snapped
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_tables import list_of_tables, read_table
from fishbelly.cli.job_types import Path
from fishbelly.member.description import Hinge, Support

RIGID = math.inf


def read_supports(length: float | None, report: Report) -> list[Support | None]:
    """Read the supports.

    Parameters
    ----------
    length : float or None
        Length of the member [m], None where it is not known.
    report : Report
        The job; takes the faults.

    Returns
    -------
    list of Support or None
        In the order of the job; None where one cannot be had.
    """
    raw = list_of_tables("support", report)
    tables = [read_table(SupportTable, t, ("support", i), report) for i, t in enumerate(raw)]
    for i, table in enumerate(tables):
        if table is not None and not _consistent(table, ("support", i), report):
            tables[i] = None
    names = _names("support", tables)
    anchor = _holds_along(tables)
    result: list[Support | None] = []
    for i, table in enumerate(tables):
        usable = table is not None and length is not None
        result.append(_support(table, names[i], i == anchor, length) if usable else None)  # type: ignore[arg-type]
    return result


def read_hinges(length: float | None, report: Report) -> list[Hinge | None]:
    """Read the hinges, as `read_supports` does supports."""
    raw = list_of_tables("hinge", report)
    tables = [read_table(HingeTable, t, ("hinge", i), report) for i, t in enumerate(raw)]
    names = _names("hinge", tables)
    return [
        None if t is None or length is None else Hinge(snapped(t.at, length), name, t.stage, t.until)
        for t, name in zip(tables, names, strict=True)
    ]


def _names(word: str, tables: Sequence[Any]) -> list[str]:
    """Names as given, else numbered from the left."""
    order = sorted((t.at, i) for i, t in enumerate(tables) if t is not None)
    place = {i: k for k, (_, i) in enumerate(order, 1)}
    return ["" if t is None else t.name or f"{word} {place[i]}" for i, t in enumerate(tables)]


def _consistent(table: SupportTable, path: Path, report: Report) -> bool:
    """Note keys that contradict each other."""
    faults = len(report.faults)
    if table.kind is None and table.holds is None:
        report.add((*path, "kind"), '"pin", "roller", "fixed" or "spring", or a list `holds`', "")
    elif table.kind is not None and table.holds is not None:
        report.add((*path, "holds"), "either `kind` or `holds`", "both")
    elif table.kind == "spring" and table.vertical is None and table.rotation is None:
        report.add((*path, "vertical"), "a stiffness under `vertical` or `rotation`, for a spring", "")
    elif table.kind != "spring" and table.vertical is not None:
        report.about((*path, "vertical"), 'a stiffness under `vertical` needs kind = "spring"')
    elif table.holds is not None and table.rotation is not None and "rotation" in table.holds:
        report.about((*path, "rotation"), "rotation is held rigidly and with a stiffness", "leave one out")
    return len(report.faults) == faults


def _holds_along(tables: Sequence[SupportTable | None]) -> int | None:
    """Which support holds along x without saying so: the leftmost pin or fixed one that is not free."""
    able = [(t.at, i) for i, t in enumerate(tables) if t and t.kind in ("pin", "fixed") and t.along != "free"]
    return min(able)[1] if able else None


def _support(table: SupportTable, name: str, anchor: bool, length: float) -> Support:
    holds = table.holds or ()
    down = 0.0
    if table.kind in ("pin", "roller", "fixed") or "down" in holds:
        down = RIGID
    elif table.vertical is not None:
        down = table.vertical
    rotation = RIGID if table.kind == "fixed" or "rotation" in holds else 0.0
    if table.rotation is not None:
        rotation = table.rotation
    free = table.across == "free"
    return Support(
        name=name,
        at=snapped(table.at, length),
        down=down,
        rotation=rotation,
        along=_held(table.along, anchor or "along" in holds),
        across=_held(table.across, down > 0.0 or "across" in holds),
        rotation_across=RIGID if rotation > 0.0 and not free else 0.0,
        level=table.level,
        sinks=table.sinks or 0.0,
        case=table.case,
        only_up=table.only == "up",
        slip_free=table.slip == "free",
        stage=table.stage,
        until=table.until,
    )


def _held(word: str | float | None, otherwise: bool) -> float:
    """Stiffness that a word or a number stands for."""
    if word is None:
        return RIGID if otherwise else 0.0
    if isinstance(word, str):
        return RIGID if word == "held" else 0.0
    return word
