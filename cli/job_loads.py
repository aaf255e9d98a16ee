"""Loads of a job, each kind to its description."""

from __future__ import annotations

from typing import Any

from fishbelly.cli.faults import as_written, nearest
from fishbelly.cli.job_load_models import (
    LOADS,
    AxialTable,
    CoupleTable,
    LoadTable,
    PointTable,
    PrestressTable,
    SelfWeightTable,
    ShrinkageTable,
    TemperatureTable,
    UniformTable,
    VaryingTable,
)
from fishbelly.cli.job_parts import snapped
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_tables import list_of_tables, read_table
from fishbelly.cli.job_types import Path
from fishbelly.cli.quantities import Kind
from fishbelly.member.description import Part
from fishbelly.member.loads import (
    Axial,
    Couple,
    Distributed,
    Load,
    Point,
    Prestress,
    SelfWeight,
    Shrinkage,
    Temperature,
)

_ANY = frozenset(("kind", "case"))


def read_loads(length: float | None, parts: list[Part | None], report: Report) -> list[Load | None]:
    """Read the loads.

    Parameters
    ----------
    length : float or None
        Length of the member [m], None where it is not known.
    parts : list of Part or None
        Parts that could be read, for the default extent of shrinkage.
    report : Report
        The job; takes the faults.

    Returns
    -------
    list of Load or None
        In the order of the job; None where one cannot be had.
    """
    extents = {p.name: (p.start, p.end) for p in parts if p is not None}
    result: list[Load | None] = []
    for i, raw in enumerate(list_of_tables("load", report)):
        table = _table(raw, ("load", i), report)
        faults = len(report.faults)
        load = None if table is None else _load(table, length, extents, ("load", i), report)
        result.append(load if len(report.faults) == faults else None)
    return result


def _table(raw: Any, path: Path, report: Report) -> LoadTable | None:
    kind = raw.get("kind") if isinstance(raw, dict) else None
    if isinstance(kind, str) and kind in LOADS:
        return read_table(LOADS[kind], raw, path, report)
    if isinstance(raw, dict):
        known = ", ".join(f'"{k}"' for k in LOADS)
        near = nearest(kind, LOADS) if isinstance(kind, str) else None
        found = as_written(kind) if "kind" in raw else ""
        report.add((*path, "kind"), f"one of {known}", found, f'did you mean "{near}"?' if near else "")
        return None
    return read_table(LoadTable, raw, path, report)


def _load(
    table: LoadTable,
    length: float | None,
    extents: dict[str, tuple[float, float]],
    path: Path,
    report: Report,
) -> Load | None:
    if isinstance(table, SelfWeightTable):
        return SelfWeight(table.case, table.factor, table.parts)
    if isinstance(table, PrestressTable):
        return Prestress(table.part, table.force, table.strain, table.case)
    if length is None:
        return None
    if isinstance(table, UniformTable | VaryingTable):
        return _distributed(table, length, path, report)
    if isinstance(table, PointTable):
        at = snapped(table.at, length)
        return Point(at, table.value, table.case, table.direction, table.per, table.pattern)
    if isinstance(table, CoupleTable):
        return Couple(snapped(table.at, length), table.value, table.case)
    if isinstance(table, AxialTable):
        return Axial(snapped(table.at, length), table.value, table.case, table.level)
    if isinstance(table, TemperatureTable):
        return _temperature(table, length, path, report)
    assert isinstance(table, ShrinkageTable)
    start, end = extents.get(table.part, (0.0, length))
    start = start if table.from_ is None else snapped(table.from_, length)
    end = end if table.to is None else snapped(table.to, length)
    return Shrinkage(table.part, table.strain, start, end, table.creep, table.case)


def _distributed(table: UniformTable | VaryingTable, length: float, path: Path, report: Report) -> Distributed | None:
    if isinstance(table, UniformTable):
        value, kind = table.value
        start = 0.0 if table.from_ is None else snapped(table.from_, length)
        end = length if table.to is None else snapped(table.to, length)
        xs, values, key = [start, end], [value, value], "value"
    else:
        xs, values, kind = table.stations
        xs, key = [snapped(x, length) for x in xs], "stations"
    if kind is Kind.FORCE_PER_AREA:
        if table.spacing is None:
            report.add((*path, "spacing"), f"a length, because {key} is a force per area", "")
            return None
        values = [value * table.spacing for value in values]
    elif table.spacing is not None:
        report.about((*path, "spacing"), f"`spacing` goes with a force per area; {key} is a force per length")
        return None
    stations = tuple(zip(xs, values, strict=True))
    return Distributed(stations, table.case, table.direction, table.per, table.pattern)


def _temperature(table: TemperatureTable, length: float, path: Path, report: Report) -> Temperature | None:
    if table.parts is None:
        for key, other in (("top", "bottom"), ("bottom", "top")):
            if getattr(table, key) is None and getattr(table, other) is not None:
                report.add((*path, key), f"a temperature rise, because `{other}` is given", "")
                return None
        if table.top is None:
            report.add(path, "`top` and `bottom`, or `parts`", "")
            return None
    elif table.top is not None or table.bottom is not None:
        report.add((*path, "parts"), "either `parts`, or `top` and `bottom`", "both")
        return None
    start = 0.0 if table.from_ is None else snapped(table.from_, length)
    end = length if table.to is None else snapped(table.to, length)
    return Temperature(start, end, table.top or 0.0, table.bottom or 0.0, table.parts, table.case)
