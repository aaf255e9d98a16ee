"""Moment, shear, slope or deflection along the member, extremes marked, with the side it is drawn on in words."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np

from fishbelly.cli.figures import lines
from fishbelly.cli.figures.lines import Array, Mark
from fishbelly.cli.figures.paper import HEAVY, MEDIUM, own_panel, pens

QUANTITIES: Mapping[str, tuple[str, str, bool]] = {
    "moment": ("M", "moment", True),
    "shear": ("V", "force", False),
    "slope": ("slope", "slope", False),
    "deflection": ("deflection", "deflection", True),
    "moment across": ("M across", "moment", True),
    "across": ("across", "deflection", True),
}
"""By name: the key of stations, the quantity of its unit, whether positive values are drawn downwards."""
WORDS: Mapping[str, str] = {
    "moment": "M, drawn on the tension side, sagging positive",
    "shear": "V, positive where the part on the left pushes up",
    "slope": "slope, clockwise positive",
    "deflection": "deflection, down positive, drawn downwards",
    "moment across": "M about the upright axis, positive with tension on the +y side, drawn downwards",
    "across": "deflection across, towards +y positive, drawn downwards",
}
NEGLIGIBLE = 5e-4
"""An extreme below this share of the other would be written as zero."""
_END = 0.1
"""Least share of the largest moment that a moment at an end is marked with."""


def plot(
    job: Any,
    combination: Mapping[str, Any],
    quantity: str,
    ax: Any = None,
    labelled: bool = True,
    fine: tuple[Array, Array] | None = None,
    across: tuple[Array, Array] | None = None,
) -> Any:
    """Draw one quantity of one combination.

    Parameters
    ----------
    job : Job
        The job.
    combination : mapping
        One of the combinations of `fishbelly deflect`, with stations all along the member.
    quantity : {"moment", "shear", "slope", "deflection", "moment across", "across"}
        Which; the moment across needs `fine`.
    ax : Axes, optional
        Where to draw; default axes of a new figure.
    labelled : bool
        Whether the horizontal axis has labels.
    fine : tuple of ndarray, optional
        Places [m] and values [SI] of the line, where it is known at more places than the stations.
    across : tuple of ndarray, optional
        Places [m] and deflection sideways [m], drawn dashed beside the deflection.

    Returns
    -------
    Axes
        In SI units; ticks in those of the job.
    """
    with pens():
        if ax is None:
            ax = own_panel(26.0)
        stations = combination["stations"]
        x = np.array([s["x"] for s in stations])
        key = QUANTITIES[quantity][0]
        y = np.array([np.nan if s.get(key) is None else s[key] for s in stations])
        lines.frame(ax, job.member, job.style, labelled)
        _draw(ax, job, combination, quantity, fine or (x, y), across)
    return ax


def _draw(
    ax: Any,
    job: Any,
    combination: Mapping[str, Any],
    quantity: str,
    line: tuple[Array, Array],
    across: tuple[Array, Array] | None,
) -> None:
    """Draw the line of a quantity with its band and its extremes."""
    key, what, down = QUANTITIES[quantity]
    (x, y), words = line, WORDS[quantity]
    band = _band(combination, key)
    marks = _marks(combination, quantity, x, y)
    if across is not None:
        words += "; dashed: across, towards +y positive"
        side = combination["deflection"]["across"]
        marks += [(float(side["value"]), float(side["at"]))]
    every = np.concatenate((y, *(band or ()), [v for v, _ in marks]))
    if not np.any(np.abs(np.nan_to_num(every)) > 0.0):
        every = y = np.zeros(y.size)
        marks = []
    lines.upright(ax, every, words, what, job.style, down)
    lines.zero(ax, job.member)
    if band is not None:
        places = np.array([s["x"] for s in combination["stations"]])
        ax.fill_between(places, *band, facecolor="0.88", edgecolor="0.4", lw=MEDIUM, ls="--", zorder=1.5)
    else:
        ax.fill_between(x, y, 0.0, facecolor="0.94", edgecolor="none", zorder=1.5)
    ends_x, ends_y = _closed(x, y)
    ax.plot(ends_x, ends_y, color="black", lw=HEAVY, zorder=4, solid_joinstyle="round")
    if across is not None:
        ax.plot(*across, color="black", lw=MEDIUM, ls=(0, (5, 2)), zorder=4)
        ends_x, ends_y = np.concatenate((ends_x, across[0])), np.concatenate((ends_y, across[1]))
    lines.mark(ax, ends_x, ends_y, marks, what, job.member, job.style)


def _band(combination: Mapping[str, Any], key: str) -> tuple[Array, Array] | None:
    """Smallest and largest value over arrangements of pattern loads."""
    rows = (combination.get("envelope") or {}).get("stations")
    if not rows or key not in rows[0] or len(rows) != len(combination["stations"]):
        return None
    return np.array([r[key]["min"] for r in rows]), np.array([r[key]["max"] for r in rows])


def _closed(x: Array, y: Array) -> tuple[Array, Array]:
    """Add the drops to zero at both ends."""
    return np.concatenate((x[:1], x, x[-1:])), np.concatenate(([0.0], y, [0.0]))


def _marks(combination: Mapping[str, Any], quantity: str, x: Array, y: Array) -> list[Mark]:
    """Largest and smallest value with their places; what is negligible beside the other is left out."""
    if quantity == "moment":
        found = [combination["moment"]["sagging"], combination["moment"]["hogging"]]
    elif quantity == "shear":
        found = [combination["shear"]["max"], combination["shear"]["min"]]
    elif quantity == "deflection":
        up = combination["deflection"]["up"]
        found = [combination["deflection"]["down"], up and {"value": -up["value"], "at": up["at"]}]
    elif quantity == "across":
        found = [combination["deflection"]["across"]]
    else:
        if not np.any(np.isfinite(y)):
            return []
        tiny = 1e-6 * float(np.nanmax(y) - np.nanmin(y))
        ends = [int(np.flatnonzero(y >= np.nanmax(y) - tiny)[0]), int(np.flatnonzero(y <= np.nanmin(y) + tiny)[0])]
        found = [{"value": float(y[k]), "at": float(x[k])} for k in ends]
    marks = [(float(f["value"]), float(f["at"])) for f in found if f is not None]
    top = max((abs(v) for v, _ in marks), default=0.0)
    if quantity in ("moment", "moment across"):
        # moments at held ends, which the largest does not tell
        marks += [(float(y[k]), float(x[k])) for k in (0, -1) if abs(y[k]) > _END * top]
    kept: list[Mark] = []
    near = 1e-6 * float(x[-1] - x[0])
    for m in marks:
        twice = any(abs(m[0] - k[0]) < 1e-6 * top and (quantity != "moment" or abs(m[1] - k[1]) < near) for k in kept)
        if abs(m[0]) > NEGLIGIBLE * top and not twice:
            kept.append(m)
    return kept
