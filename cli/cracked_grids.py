"""Combinations that crack the member: where, by which loads, and the ways of counting it side by side."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from typing import Any

from fishbelly.cli.deflect_grids import Noise, span_words
from fishbelly.cli.format_quantity import format_position, format_value
from fishbelly.cli.grid import TEXT, Grid, column
from fishbelly.cli.text_table import paragraph, render

Row = Mapping[str, Any]

_CODE = "EN 1992-1-1"
"""The rule whose one value lies between two deflections; the others have an effective second moment of each span."""


def cracked_ways(combination: Row, noise: Noise) -> Grid:
    """Write the largest deflection uncracked, along x, cracked throughout and by the code's one value.

    Parameters
    ----------
    combination : mapping
        One combination of the results.
    noise : Noise
        What is noise in it.
    """
    title = "Cracked and uncracked"
    cracked = combination.get("cracked")
    if cracked is None:
        return Grid(title, ())
    rows = [{"counted": name} | dict(cracked[key]) for name, key in _ways(cracked) if cracked.get(key)]
    long_term = cracked.get("long_term")
    if long_term is not None:
        rows.append({"counted": "ACI 318 multiplier for lasting load"} | dict(long_term))
    return Grid(
        title,
        (
            column(rows, "counted", TEXT),
            column(rows, "deflection", "deflection", "value", noise=noise.deflection),
            column(rows, "at x", "position", "at"),
        ),
        "largest deflection, down positive, of the same loads",
    )


def _ways(cracked: Row) -> tuple[tuple[str, str], ...]:
    """Ways of counting, in the order of their deflection, and their keys; the result's is marked."""
    spans = "spans" in (cracked.get("one_value") or {})
    along, one = ("", " (the result)") if spans else (" (the result)", "")
    by_code = "one I_e for each span" if spans else "one share of both for the member"
    return (
        ("uncracked throughout", "uncracked"),
        (f"section by section along x{along}", "along"),
        (f"{cracked['rule']}, {by_code}{one}", "one_value"),
        ("cracked throughout, bars alone in tension", "everywhere"),
    )


def cracked_stretches(combination: Row, _: Noise | None = None) -> Grid:
    """Write the stretches that are cracked, and the combination that cracks each."""
    rows = list((combination.get("cracked") or {}).get("stretches", ()))
    return Grid(
        "Where it is cracked",
        (
            column(rows, "from x", "position", "from"),
            column(rows, "to x", "position", "to"),
            column(rows, "length", "length", lambda r: r["to"] - r["from"]),
            column(rows, "by combination", TEXT, "by", optional=True),
        ),
        "ends found as places where tension passes the stress at which it cracks; by the combination that cracks most "
        "of it by itself",
    )


def cracked_spans(combination: Row, _: Noise | None = None) -> Grid:
    """Write the critical sections of the code's one effective second moment of each span."""
    spans = ((combination.get("cracked") or {}).get("one_value") or {}).get("spans", ())
    rows = [dict(s) | {"span": v["span"]} for v in spans for s in v["sections"]]
    return Grid(
        "Critical sections of the code's one value",
        (
            column(rows, "span", TEXT, lambda r: span_words(r["span"])),
            column(rows, "at x", "position", "at"),
            column(rows, "M", "moment"),
            column(rows, "M_cr", "moment", "M_cracking"),
            column(rows, "I_g", "second moment", "I_gross"),
            column(rows, "I_cr", "second moment", "I_cracked"),
            column(rows, "I_e", "second moment", "I_effective"),
        ),
        "second moments in terms of the concrete",
    )


def cracked_stages(data: Row, combination: str) -> Grid:
    """Write what of the member is cracked at the end of each stage."""
    rows = []
    for stage in data["stages"]:
        mine = next(c for c in stage["combinations"] if c["name"] == combination)
        found = mine.get("cracked", [])
        rows += [{"stage": stage["name"]} | dict(s) for s in found]
        if not found:
            rows.append({"stage": stage["name"], "from": None, "to": None, "by": "nothing"})
    if not any(r["from"] is not None for r in rows):
        rows = []
    return Grid(
        "Cracked at the end of each stage",
        (
            column(rows, "stage", TEXT),
            column(rows, "from x", "position", "from"),
            column(rows, "to x", "position", "to"),
            column(rows, "by combination", TEXT, "by", optional=True),
        ),
        "what one stage has cracked stays cracked",
    )


def cracked_lines(combination: Row, noise: Noise, style: str, explained: bool) -> list[str]:
    """Write everything about the cracks of a combination.

    Parameters
    ----------
    combination : mapping
        One combination of the results.
    noise : Noise
        What is noise in it.
    style : {"metric", "us"}
        Units to show.
    explained : bool
        Whether heads say what stands below them.

    Returns
    -------
    list of str
        Nothing where nothing is cracked.
    """
    cracked = combination.get("cracked")
    if cracked is None:
        return []
    rule = "none" if cracked["rule"] is None else cracked["rule"]
    lines = paragraph(f"Cracked; tension stiffening: {rule}")
    if cracked["from_history"]:
        lines += paragraph("other combinations for deflection have cracked more places, which count here too", "  ")
    lines.append("")
    for grid in (cracked_stretches(combination), cracked_ways(combination, noise), cracked_spans(combination)):
        if grid.count:
            shown = grid if explained else replace(grid, note="")
            heading = f"{shown.title} ({shown.note})" if shown.note else shown.title
            lines += [*paragraph(heading), *render(shown, style), ""]
    lines += _zeta(cracked, style) + _multiplied(cracked, style)
    return [*lines, *paragraph(_closed(cracked["convergence"], style)), ""]


def _zeta(cracked: Row, style: str) -> list[str]:
    one = cracked.get("one_value") or {}
    if cracked["rule"] != _CODE or "zeta" not in one:
        return []
    at = format_position(one["section"], style)  # type: ignore[arg-type]
    return paragraph(f"One share of both: zeta = {one['zeta']:.4f}, of the most cracked section at x = {at}.")


def _multiplied(cracked: Row, style: str) -> list[str]:
    found = cracked.get("long_term")
    if found is None:
        return []
    now, lasting = (format_value(found[k], "deflection", style) for k in ("immediate", "sustained"))  # type: ignore[arg-type]
    return paragraph(
        f"ACI 318 multiplier, five years and more: lambda = 2 / (1 + 50 rho') = {found['lambda']:.4g} with rho' = "
        f"{found['compression_steel']:.4g}; immediate {now}, of what lasts {lasting}. It stands beside the result, in "
        "which creep softens the concrete itself."
    )


def _closed(done: Row, style: str) -> str:
    held = "; cracks that opened on the way are kept" if done["status"] == "cracks held" else ""
    residual = "0" if done["residual"] == 0.0 else f"{done['residual']:.1e}"
    place = "" if done["residual"] == 0.0 else f", at x = {format_position(done['at'], style)}"  # type: ignore[arg-type]
    return (
        f"Cracks and forces agree after {done['rounds']} linear solutions{held}; the last changed forces by {residual} "
        f"of the largest{place}."
    )
