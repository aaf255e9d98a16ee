"""What a job asks: named stations, combinations, limits, camber."""

from __future__ import annotations

from fishbelly.cli.job_models import CombinationTable, JobTable, LimitTable, StationTable
from fishbelly.cli.job_parts import snapped
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_tables import list_of_tables, read_table
from fishbelly.member.description import Combination, Limit, Station
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
        result.append(
            None if table is None else Combination(table.name, table.factors, table.sustained, table.for_)
        )
    return result


def read_limits(report: Report) -> list[Limit | None]:
    """Read the limits, None where one cannot be had."""
    result: list[Limit | None] = []
    for i, raw in enumerate(list_of_tables("limit", report)):
        table = read_table(LimitTable, raw, ("limit", i), report)
        result.append(None if table is None else _limit(table))
    return result


def _limit(table: LimitTable) -> Limit:
    return Limit(
        name=table.name,
        span_over=table.span_over,
        absolute=table.absolute,
        slope=table.slope,
        at=table.at,
        of=table.of,
        net=table.net,
        combination=table.combination,
        start=table.from_,
        end=table.to,
        spans=table.span,
        cantilever_over=table.cantilever_over,
    )


def camber_of(top: JobTable) -> float | Law | None:
    """Return the camber: a height [m], a law of ordinates, or none."""
    if isinstance(top.camber, tuple):
        return straight(*top.camber)
    return None if top.camber is None else float(top.camber)
