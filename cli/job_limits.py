"""Limits of a job: its own numbers, and those of a published limit that it names."""

from __future__ import annotations

from typing import Any

from fishbelly.cli.faults import as_written
from fishbelly.cli.job_models import LimitTable
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_tables import list_of_tables, read_table
from fishbelly.cli.job_types import Path
from fishbelly.member.description import Limit


def read_limits(report: Report) -> list[Limit | None]:
    """Read the limits, None where one cannot be had.

    With `like`, a published limit gives what the table leaves out, its name too. An own `absolute` or `slope`
    takes the place of all its numbers, an own `span_over` or `cantilever_over` that of the same number.
    """
    result: list[Limit | None] = []
    for i, raw in enumerate(list_of_tables("limit", report)):
        path: Path = ("limit", i)
        published: dict[str, Any] | None = {}
        if isinstance(raw, dict) and isinstance(raw.get("like"), str) and raw["like"].strip():
            published = _published(raw["like"], path, report)
            name = raw["like"] if published is None else published["name"]
            raw = {"name": name} | raw
        table = read_table(LimitTable, raw, path, report)
        result.append(None if table is None or published is None else _limit(table, published))
    return result


def _published(name: str, path: Path, report: Report) -> dict[str, Any] | None:
    """Fields that a published limit gives, None where there is no such limit."""
    from fishbelly.catalog.limits import UnknownLimit, find_limit

    try:
        found = find_limit(name)
    except UnknownLimit as error:
        near = ", ".join(f'"{n}"' for n in error.nearest)
        hint = f"nearest are {near}" if near else "`fishbelly catalog limits` lists them"
        report.add((*path, "like"), "the name of a published limit", as_written(name), hint)
        return None
    beside = found.span_over is not None or found.cantilever_over is not None
    about = "; ".join(text for text in (found.loads, found.note) if text)
    return {
        "name": found.name,
        "span_over": found.span_over,
        "absolute": None if beside else found.absolute,
        "cap": found.absolute if beside else None,
        "cantilever_over": found.cantilever_over,
        "of": found.of,
        "net": found.net,
        "source": f"{found.source} ({about})",
    }


def _limit(table: LimitTable, published: dict[str, Any]) -> Limit:
    own = {
        "name": table.name,
        "span_over": table.span_over,
        "absolute": table.absolute,
        "slope": table.slope,
        "cantilever_over": table.cantilever_over,
    }
    given = {key: value for key, value in own.items() if value is not None}
    if "absolute" in given or "slope" in given:
        numbers = ("span_over", "absolute", "cap", "cantilever_over")
        published = {key: value for key, value in published.items() if key not in numbers}
    elif "span_over" in given:
        published = published | {"absolute": None}
    for key in ("of", "net"):
        if key in table.model_fields_set or key not in published:
            given[key] = getattr(table, key)
    return Limit(
        **(published | given),
        at=table.at,
        combination=table.combination,
        start=table.from_,
        end=table.to,
        spans=table.span,
        after=table.after,
        stage=table.stage,
    )
