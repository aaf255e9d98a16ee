"""EI_y, EA or the level of the centroid along the member, jumps drawn as jumps."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np

from fishbelly.cli.figures import lines
from fishbelly.cli.figures.lines import Array, Mark
from fishbelly.cli.figures.paper import HEAVY, own_panel, pens

QUANTITIES: Mapping[str, tuple[str, str]] = {
    "EI_y": ("EI_y, bending in the vertical plane", "bending stiffness"),
    "EA": ("EA, axial", "axial stiffness"),
    "z_c": ("z_c, level of the E-weighted centroid above the datum line", "length"),
}
"""By the key of stations: what the axis says, the quantity of its unit."""
_EQUAL = 1e-9


def plot(job: Any, data: Mapping[str, Any], quantity: str, ax: Any = None, labelled: bool = True) -> Any:
    """Draw one quantity of the cross-sections along the member.

    Parameters
    ----------
    job : Job
        The job.
    data : mapping
        Results of `fishbelly stiffness` with stations all along the member.
    quantity : {"EI_y", "EA", "z_c"}
        Which.
    ax : Axes, optional
        Where to draw; default axes of a new figure.
    labelled : bool
        Whether the horizontal axis has labels.

    Returns
    -------
    Axes
        In SI units; ticks in those of the job.
    """
    words, what = QUANTITIES[quantity]
    with pens():
        if ax is None:
            ax = own_panel(24.0)
        stations = data["stations"]
        x = np.array([s["x"] for s in stations])
        y = np.array([np.nan if s[quantity] is None else s[quantity] for s in stations])
        level = quantity == "z_c"
        if level:
            y = _clean(y, job)
        lines.frame(ax, job.member, job.style, labelled)
        lines.upright(ax, y, words, what, job.style, from_zero=not level, least=0.005 * job.member.length)
        if not level:
            ax.fill_between(x, y, 0.0, facecolor="0.94", edgecolor="none", zorder=1.5)
        ax.plot(x, y, color="black", lw=HEAVY, zorder=4, solid_joinstyle="miter")
        lines.mark(ax, x, y, _marks(x, y), what, job.member, job.style, digits=4)
    return ax


def _clean(y: Array, job: Any) -> Array:
    """Set levels that are round-off beside the member's length to 0."""
    return np.where(np.abs(y) < 1e-12 * job.member.length, 0.0, y)


def _marks(x: Array, y: Array) -> list[Mark]:
    high, low = int(np.nanargmax(y)), int(np.nanargmin(y))
    size = float(np.nanmax(np.abs(y)))
    if y[high] - y[low] <= _EQUAL * size:
        # the same everywhere: once, in the middle
        return [(float(y[high]), float(x[np.argmin(np.abs(x - 0.5 * x[-1]))]))]
    # the first place of several that are alike, whichever of them round-off makes the largest
    high = int(np.flatnonzero(y >= y[high] - _EQUAL * size)[0])
    low = int(np.flatnonzero(y <= y[low] + _EQUAL * size)[0])
    return [(float(y[k]), _middle(x, y, k, _EQUAL * size)) for k in (high, low)]


def _middle(x: Array, y: Array, k: int, tiny: float) -> float:
    """Middle of the stretch from k on over which a value stays the same [m]."""
    end = k
    while end + 1 < y.size and abs(y[end + 1] - y[k]) <= tiny:
        end += 1
    return float(0.5 * (x[k] + x[end]))
