"""Results without some parts beside those with them, as tables in SI units."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from typing import Any

from fishbelly.cli.grid import TEXT, Column, Grid, column
from fishbelly.cli.station_choice import sides

Row = Mapping[str, Any]

_LINES = (
    ("EA", "axial stiffness"),
    ("EI_y", "bending stiffness"),
    ("EI_z", "bending stiffness"),
    ("GA_z", "shear stiffness"),
)


def _left_out(data: Row) -> str:
    return f"Without {', '.join(data['without']['parts'])}"


def section_beside(data: Row) -> list[Grid]:
    """Write the stiffness of a section with and without parts, one grid for each quantity; none where not asked."""
    if "without" not in data:
        return []
    bare = data["without"]
    grids: list[Grid] = []
    for what in dict.fromkeys(w for _, w in _LINES):
        rows = [{"quantity": key} for key, w in _LINES if w == what and data[key] is not None]
        if rows:
            grids.append(
                Grid(
                    f"{_left_out(data)}: {what}",
                    (
                        column(rows, "quantity", TEXT),
                        column(rows, "with", what, lambda r: data[r["quantity"]]),
                        column(rows, "without", what, lambda r: bare[r["quantity"]]),
                        column(rows, "gain", "factor", lambda r: bare["gain"][r["quantity"]]),
                    ),
                    "gain: with over without" if not grids else "",
                )
            )
    return grids


def stiffness_beside(data: Row) -> list[Grid]:
    """Write EI along the member with and without parts; nothing where that was not asked."""
    if "without" not in data:
        return []
    pairs = [{"whole": a, "bare": b} for a, b in zip(data["stations"], data["without"]["stations"], strict=True)]

    def of(which: str, key: str) -> Callable[[Row], Any]:
        return lambda row: row[which][key]

    return [
        Grid(
            f"{_left_out(data)}",
            (
                column(pairs, "x", "position", of("whole", "x")),
                column(pairs, "EI_y", "bending stiffness", of("whole", "EI_y")),
                column(pairs, "EI_y without", "bending stiffness", of("bare", "EI_y")),
                column(pairs, "gain", "factor", lambda r: r["bare"]["gain"]["EI_y"]),
                column(pairs, "z_c", "length", of("whole", "z_c")),
                column(pairs, "z_c without", "length", of("bare", "z_c")),
                Column("side", TEXT, tuple(sides(data["stations"])), optional=True),
            ),
            "gain: with over without",
        )
    ]


def deflect_beside(data: Row) -> list[Grid]:
    """Write the largest deflections and stresses with and without parts; nothing where that was not asked."""
    if "without" not in data:
        return []
    pairs = [
        {"name": a["name"], "whole": a, "bare": b}
        for a, b in zip(data["combinations"], data["without"]["combinations"], strict=True)
    ]
    moved = [p | {"way": way} for p in pairs for way in ("down", "up", "across") if _moves(p, way)]

    def value(which: str) -> Callable[[Row], Any]:
        return lambda r: (r[which]["deflection"][r["way"]] or {}).get("value")

    first = Grid(
        f"{_left_out(data)}: largest deflection",
        (
            column(moved, "combination", TEXT, "name"),
            column(moved, "way", TEXT),
            column(moved, "with", "deflection", value("whole")),
            column(moved, "without", "deflection", value("bare")),
            column(moved, "gain", "factor", lambda r: r["bare"]["gain"]["deflection"][r["way"]]),
            column(moved, "checks without", TEXT, lambda r: _checks(r["bare"]["checks"])),
        ),
        "gain: without over with",
    )
    return [first, _stresses(data, pairs)]


def _moves(pair: Row, way: str) -> bool:
    return any(pair[which]["deflection"][way] is not None for which in ("whole", "bare"))


def _checks(checks: Sequence[Row]) -> str:
    missed = [str(c["limit"]) for c in checks if not c["ok"]]
    return "" if not checks else ("OK" if not missed else f"{len(missed)} NOT OK")


def _stresses(data: Row, pairs: Sequence[Row]) -> Grid:
    rows = []
    for p in pairs:
        whole = {s["part"]: s for s in p["whole"]["stress"]}
        rows += [{"name": p["name"], "part": s["part"], "whole": whole[s["part"]], "bare": s, "gain":
                  p["bare"]["gain"]["stress"][s["part"]]} for s in p["bare"]["stress"]]  # fmt: skip

    def peak(which: str, key: str) -> Callable[[Row], Any]:
        return lambda r: (r[which][key] or {}).get("value")

    return Grid(
        f"{_left_out(data)}: stress",
        (
            column(rows, "combination", TEXT, "name"),
            column(rows, "part", TEXT),
            column(rows, "max with", "stress", peak("whole", "max"), own=True),
            column(rows, "max without", "stress", peak("bare", "max"), own=True),
            column(rows, "min with", "stress", peak("whole", "min"), own=True),
            column(rows, "min without", "stress", peak("bare", "min"), own=True),
            column(rows, "gain", "factor"),
        ),
        "tension positive; gain: the larger by size, without over with",
    )
