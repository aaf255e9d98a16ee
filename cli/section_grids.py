"""Results of `fishbelly section` and `fishbelly stiffness` as tables in SI units."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from fishbelly.cli.grid import TEXT, Column, Grid, column
from fishbelly.cli.station_choice import sides
from fishbelly.cli.trade_lines import trade_lines

Row = Mapping[str, Any]
Line = tuple[str, str, str, float | None]
"""Symbol, meaning in words, quantity, value in SI units."""

NOISE = 1e-10
"""Stiffnesses below this share of the larger of EI_y and EI_z are noise."""
_FINITE = 1e-6
"""The same of the shear centre, which is found by finite elements, against the depth."""


def section_lines(data: Row) -> list[tuple[str, list[Line]]]:
    """List the single values of a cross-section by heading."""
    principal, to = data.get("principal") or {}, data["transformed"]
    top, bottom = to.get("top"), to.get("bottom")
    depth = None if top is None or bottom is None else top - bottom
    EI = max(abs(data[k] or 0.0) for k in ("EI_y", "EI_z"))
    coupled = data["EI_yz"]
    if coupled is not None and abs(coupled) <= NOISE * EI:
        coupled = 0.0
    big, small, angle = (principal.get(k) for k in ("EI_1", "EI_2", "angle"))
    if angle is not None and big is not None and small is not None:
        angle = None if big - small <= NOISE * big else (0.0 if abs(angle) < NOISE else angle)
    stiffness: list[Line] = [
        ("EA", "axial", "axial stiffness", data["EA"]),
        ("EI_y", "bending in the vertical plane", "bending stiffness", data["EI_y"]),
        ("EI_z", "bending sideways", "bending stiffness", data["EI_z"]),
        ("EI_yz", "coupling of the two", "bending stiffness", coupled),
        ("GA_z", "shear, vertical plane", "shear stiffness", data["GA_z"]),
        ("GA_y", "shear, sideways", "shear stiffness", data["GA_y"]),
        *_torsion(data.get("torsion")),
    ]
    axes: list[Line] = [
        ("EI_1", "largest", "bending stiffness", big),
        ("EI_2", "smallest", "bending stiffness", small),
        ("angle", "from y to the axis of EI_1, anticlockwise", "angle", angle),
    ]
    place: list[Line] = [
        ("z_c", "centroid, above the datum line positive", "length", _whole(data["z_c"], depth)),
        ("y_c", "centroid, to the right positive", "length", _whole(data["y_c"], depth)),
        ("z_top", "top of the section", "length", _whole(top, depth)),
        ("z_bottom", "bottom of the section", "length", _whole(bottom, depth)),
        ("depth", "overall", "length", depth),
        *_shear_centre(data.get("shear"), depth),
        ("mass", "per length", "mass per length", data["mass"]),
    ]
    transformed: list[Line] = [
        ("E", "modulus of elasticity that counts", "modulus", to["E"]),
        ("A", "area", "area", to["A"]),
        ("I_y", "second moment of area, vertical plane", "second moment", to["I_y"]),
        ("I_z", "second moment of area, sideways", "second moment", to["I_z"]),
        ("W_top", "section modulus, elastic, top", "section modulus", to["W_top"]),
        ("W_bottom", "section modulus, elastic, bottom", "section modulus", to["W_bottom"]),
    ]
    return [
        ("Stiffness", stiffness),
        ("Place and mass", place),
        (f"Transformed to {to['to']}", transformed),
        ("Principal axes of bending", axes),
        *trade_lines(data),
    ]


def _torsion(torsion: Row | None) -> list[Line]:
    """Torsional stiffness between its bounds; nothing where it cannot be had."""
    if not torsion or torsion["GJ"] is None:
        return []
    return [
        ("GJ", "torsion, St Venant", "bending stiffness", torsion["GJ"]),
        ("", "lower bound, stress function", "bending stiffness", torsion["lower"]),
        ("", "upper bound, warping", "bending stiffness", torsion["upper"]),
    ]


def _shear_centre(shear: Row | None, depth: float | None) -> list[Line]:
    if not shear:
        return []
    return [
        ("z_s", "shear centre, above the datum line positive", "length", _whole(shear["z_s"], depth, _FINITE)),
        ("y_s", "shear centre, to the right positive", "length", _whole(shear["y_s"], depth, _FINITE)),
    ]


def _whole(value: float | None, depth: float | None, noise: float = NOISE) -> float | None:
    """Set a level that is noise beside the depth to 0."""
    return 0.0 if value is not None and depth and abs(value) < noise * depth else value


def ratios(data: Row) -> Grid:
    """Write n = E / E of what is transformed to, of every material."""
    rows = [{"material": k, "n": v} for k, v in (data["transformed"].get("n") or {}).items()]
    return Grid(
        "Materials", (column(rows, "material", TEXT), column(rows, "n", "factor", own=True)), "n times the area counts"
    )


def section_parts(data: Row) -> Grid:
    """Write what every part at the section is."""
    rows = data["parts"]
    return Grid(
        "Parts",
        (
            column(rows, "part", TEXT, "name"),
            column(rows, "material", TEXT),
            column(rows, "area", "area", own=True),
            column(rows, "E", "modulus", own=True),
            column(rows, "I_y own", "second moment", "I_y", own=True),
            *_levels(rows),
        ),
        "net of cuts and of what displaces them; levels from the datum line",
    )


def _levels(rows: Sequence[Row]) -> list[Column]:
    keys = (("z", "z"), ("z top", "z_top"), ("z bottom", "z_bottom"))
    top = max((abs(r[k]) for r in rows for _, k in keys if r.get(k) is not None), default=0.0)
    return [column(rows, title, "length", key, scale=top) for title, key in keys]


def section_stresses(data: Row) -> Grid:
    """Write the stress in every part per unit moment and per unit axial force."""
    rows = data["parts"]

    def per_moment(edge: str) -> Any:
        return lambda row: (row.get("stress_per_moment") or {}).get(edge)

    def modulus(edge: str) -> Any:
        return lambda row: (row.get("W") or {}).get(edge)

    edges = [[per_moment(e)(r) for r in rows] for e in ("top", "bottom")]
    top = max((abs(v) for e in edges for v in e if v is not None), default=0.0)
    return Grid(
        "Stress coefficients",
        (
            column(rows, "part", TEXT, "name"),
            column(rows, "at its top", "stress per moment", per_moment("top"), own=True, scale=top),
            column(rows, "at its bottom", "stress per moment", per_moment("bottom"), own=True, scale=top),
            column(rows, "by axial force", "stress per force", "stress_per_force", own=True),
            *(column(rows, f"W {edge}", "section modulus", modulus(edge), own=True) for edge in ("top", "bottom")),
        ),
        "per unit of sagging moment, and of tension at the centroid; tension positive; W: moment over stress there",
    )


def stiffness_grid(data: Row, full: bool = False) -> Grid:
    """Write the stiffness along the member.

    Parameters
    ----------
    data : mapping
        Results of `fishbelly stiffness`.
    full : bool
        For files: stiffness and mass beside properties transformed to one material.
    """
    rows = data["stations"]
    first = next((r["EI_y"] for r in rows if r["EI_y"]), None)
    EI = max((abs(r[k]) for r in rows for k in ("EI_y", "EI_z") if r[k] is not None), default=0.0)
    levels = max((abs(r[k]) for r in rows for k in ("z_c", "y_c") if r[k] is not None), default=0.0)

    if "transformed" in data:
        return _transformed_grid(data, levels, full)

    def relative(row: Row) -> Any:
        return None if row["EI_y"] is None or first is None else row["EI_y"] / first

    return Grid(
        "Stiffness along the member",
        (
            column(rows, "x", "position"),
            column(rows, "EI_y", "bending stiffness"),
            column(rows, "EI_y/first", "factor", relative),
            column(rows, "z_c", "length", scale=levels),
            column(rows, "EA", "axial stiffness"),
            column(rows, "GA_z", "shear stiffness"),
            column(rows, "mass", "mass per length"),
            column(rows, "EI_z", "bending stiffness"),
            column(rows, "EI_yz", "bending stiffness", optional=True, noise=NOISE * EI),
            column(rows, "y_c", "length", optional=True, scale=levels),
            Column("side", TEXT, tuple(sides(rows)), optional=True),
        ),
    )


def _transformed_grid(data: Row, levels: float, full: bool) -> Grid:
    """Write the section of one material that stands for the member, as frame models want it."""
    rows, to = data["stations"], data["transformed"]

    def of(key: str) -> Any:
        return lambda row: row["transformed"][key]

    beside = (
        column(rows, "EI_y", "bending stiffness"),
        column(rows, "EI_z", "bending stiffness"),
        column(rows, "EA", "axial stiffness"),
        column(rows, "GA_z", "shear stiffness"),
        column(rows, "mass", "mass per length"),
    )
    return Grid(
        f"Stiffness along the member, transformed to {to['to']}",
        (
            column(rows, "x", "position"),
            column(rows, "A", "area", of("A")),
            column(rows, "I_y", "second moment", of("I_y")),
            column(rows, "W_top", "section modulus", of("W_top")),
            column(rows, "W_bottom", "section modulus", of("W_bottom")),
            column(rows, "axis z_c", "length", "z_c", scale=levels),
            column(rows, "I_z", "second moment", of("I_z")),
            *(beside if full else ()),
            Column("side", TEXT, tuple(sides(rows)), optional=True),
        ),
        "W: section modulus, elastic, of the top and of the bottom; z_c: level of the axis above the datum line",
    )
