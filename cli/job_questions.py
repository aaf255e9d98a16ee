"""What a job asks: named stations, combinations, camber."""

from __future__ import annotations

from fishbelly.cli.job_models import CombinationTable, JobTable, StageTable, StationTable
from fishbelly.cli.job_parts import snapped
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_tables import list_of_tables, read_table
from fishbelly.member.description import Combination, Stage, Station
from fishbelly.member.laws import Law, straight


def read_stations_by_name(length: float | None, report: Report) -> list[Station | None]:
    """Read the named stations, None where one cannot be had; `length` of the member [m]."""
    result: list[Station | None] = []
    for i, raw in enumerate(list_of_tables("station", report)):
        table = read_table(StationTable, raw, ("station", i), report)
        known = table is not None and length is not None
        result.append(Station(table.name, snapped(table.at, length)) if known else None)  # type: ignore[union-attr, arg-type]
    return result


def read_combinations(report: Report) -> list[Combination | None]:
    """Read the combinations, None where one cannot be had."""
    result: list[Combination | None] = []
    for i, raw in enumerate(list_of_tables("combination", report)):
        table = read_table(CombinationTable, raw, ("combination", i), report)
        result.append(None if table is None else Combination(table.name, table.factors, table.sustained, table.for_))
    return result


def read_stages(report: Report) -> list[Stage | None]:
    """Read the stages in order of time, None where one cannot be had."""
    result: list[Stage | None] = []
    for i, raw in enumerate(list_of_tables("stage", report)):
        t = read_table(StageTable, raw, ("stage", i), report)
        if t is None:
            result.append(None)
            continue
        given = {kind: {n: v for n, (k, v) in t.moduli.items() if k == kind} for kind in ("modulus", "factor")}
        result.append(Stage(t.name, t.cases, t.long_term, given["modulus"], given["factor"], t.creep, t.ageing))
    return result


def camber_of(top: JobTable) -> float | Law | None:
    """Return the camber: a height [m], a law of ordinates, or none."""
    if isinstance(top.camber, tuple):
        return straight(*top.camber)
    return None if top.camber is None else float(top.camber)
