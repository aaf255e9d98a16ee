"""Stress at levels of a cross-section as a table in SI units."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from fishbelly.cli.grid import TEXT, Grid, column

Row = Mapping[str, Any]

_NOTE = (
    "tension positive; shear: mean over the width, positive as V, the taper counted; angle: of sigma_1 from the axis, "
    "positive where it rises along x"
)


def fibre_grids(data: Row) -> list[Grid]:
    """Write the stress at levels; nothing where that was not asked.

    Parameters
    ----------
    data : mapping
        Results of `fishbelly section`, SI units.
    """
    rows = data.get("fibres")
    if not rows:
        return []
    size = max(abs(v) for r in rows for v in r["principal"])
    aside = any(abs(v - r["normal"]) > 1e-9 * size for r in rows for v in r["ends"])

    def entry(key: str, k: int) -> Any:
        return lambda row: row[key][k]

    ends = tuple(
        column(rows, f"normal {way}", "stress", entry("ends", k), scale=size) for k, way in enumerate(("left", "right"))
    )
    return [
        Grid(
            f"Stress at levels, combination {rows[0]['combination']}",
            (
                column(rows, "z", "length"),
                column(rows, "part", TEXT),
                column(rows, "side", TEXT, lambda row: "" if row["side"] == "both" else row["side"]),
                column(rows, "normal", "stress", scale=size),
                column(rows, "shear", "stress", scale=size),
                column(rows, "sigma_1", "stress", entry("principal", 0), scale=size),
                column(rows, "sigma_2", "stress", entry("principal", 1), scale=size),
                column(rows, "tau_max", "stress", scale=size),
                column(rows, "angle", "angle", scale=1.0),
                *(ends if aside else ()),
            ),
            _NOTE,
        )
    ]
