"""Joints between parts as tables in SI units: what enters a part at its ends, and the flow along it."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from fishbelly.cli.deflect_grids import Noise, Row
from fishbelly.cli.grid import PERCENT, TEXT, Grid, column


def joints(combination: Row, noise: Noise) -> Grid:
    """Write what enters every part at its two ends, and the flow there: a row for each end.

    Parameters
    ----------
    combination : mapping
        One combination of the results.
    noise : Noise
        What is noise in it.
    """
    rows = _ends(combination)
    forces = [column(rows, key, "force", noise=noise.force, own=True) for key in ("force", "shear")]
    return Grid(
        "Joints and cut-offs",
        (
            column(rows, "part", TEXT),
            column(rows, "to", TEXT),
            column(rows, "end", TEXT),
            column(rows, "at x", "position", "x"),
            column(rows, "M", "moment", noise=noise.moment),
            column(rows, "V", "force", noise=noise.force),
            *forces,
            column(rows, "couple", "moment", noise=noise.moment, own=True),
            column(rows, "flow", "shear flow", noise=noise.force),
        ),
        "M and V of the member; force, tension positive, shear and couple of the part just inside its end: what has to "
        "enter it there; flow: d(force)/dx",
    )


def fastening(combination: Row, noise: Noise) -> Grid | None:
    """Write fasteners and theoretical cut-offs at the ends of parts; None where there is nothing to say.

    Parameters
    ----------
    combination : mapping
        One combination of the results.
    noise : Noise
        What is noise in it.
    """
    rows = [r for r in _ends(combination) if r["per_fastener"] is not None or "zone" in r or "cut_off" in r]
    if not any(r["per_fastener"] or "zone" in r or "cut_off" in r for r in rows):
        return None
    return Grid(
        "Fastening at the ends",
        (
            column(rows, "part", TEXT),
            column(rows, "end", TEXT),
            column(rows, "at x", "position", "x"),
            column(rows, "fastener", "force", "per_fastener", optional=True, noise=noise.force, own=True),
            column(rows, "needed", TEXT, lambda r: str(r["needed"]) if "needed" in r else "", optional=True),
            column(rows, "zone", "length", optional=True),
            column(rows, "without it", PERCENT, "used_without", optional=True),
            column(rows, "cut-off", "position", "cut_off", optional=True),
            column(rows, "run to", "position", "run_to", optional=True),
        ),
        "fastener: its share of the flow; needed, zone: fasteners and length that bring the force in; without it: "
        "stress over strength of the section without the part there; cut-off: where it just meets its strength",
    )


def _ends(combination: Row) -> list[dict[str, Any]]:
    """Give the two ends of every joint, each with the names of the parts."""
    return [
        {"part": j["part"], "to": j["to"], "end": end} | dict(j[end])
        for j in combination.get("joints", ())
        for end in ("start", "end")
    ]


def joint_flows(combination: Row, noise: Noise) -> Grid:
    """Write the largest flow into every part along it, and what a fastener gets of it.

    Parameters
    ----------
    combination : mapping
        One combination of the results.
    noise : Noise
        What is noise in it.
    """
    rows = list(combination.get("joints", ()))

    def most(key: str) -> Callable[[Row], Any]:
        return lambda row: row["flow"]["max"].get(key)

    return Grid(
        "Largest flow along each joint",
        (
            column(rows, "part", TEXT),
            column(rows, "to", TEXT),
            column(rows, "flow", "shear flow", most("value"), noise=noise.force),
            column(rows, "at x", "position", most("at")),
            column(rows, "fastener", "force", most("per_fastener"), optional=True, noise=noise.force),
            column(rows, "largest pitch", "length", lambda r: r["flow"].get("largest_pitch"), optional=True),
        ),
    )
