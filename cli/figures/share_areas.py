"""What every part adds to EI_y along the member, stacked to 100 per cent."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np

from fishbelly.cli.figures import lines
from fishbelly.cli.figures.lines import Array
from fishbelly.cli.figures.looks import number_of, part_look
from fishbelly.cli.figures.paper import LINE, MEDIUM, THIN, own_panel, pens, size_of, text_width
from fishbelly.member.shares import bending_shares


def plot(job: Any, data: Mapping[str, Any], ax: Any = None, labelled: bool = True) -> Any:
    """Draw the share of EI_y by part along the member.

    Parameters
    ----------
    job : Job
        The job.
    data : mapping
        Results of `fishbelly stiffness`; its stations are the places that are drawn.
    ax : Axes, optional
        Where to draw; default axes of a new figure.
    labelled : bool
        Whether the horizontal axis has labels.

    Returns
    -------
    Axes
        Horizontal in m, vertical from 0 to 1.
    """
    with pens():
        if ax is None:
            ax = own_panel(28.0)
        x = np.array([s["x"] for s in data["stations"]])
        sides = ["left" if k + 1 < x.size and x[k + 1] == x[k] else "right" for k in range(x.size)]
        sides[-1] = "left"
        upper = np.cumsum(bending_shares(job.member, x, sides, data.get("stage")), axis=0)
        lower = np.vstack((np.zeros(x.size), upper[:-1]))
        lines.frame(ax, job.member, job.style, labelled)
        ax.set_ylim(0.0, 1.0)
        ax.set_yticks([0.0, 0.25, 0.5, 0.75, 1.0], ["0", "25", "50", "75", "100"])
        height = size_of(ax)[1]
        ax.set_ylabel("share of EI_y by part [%]", rotation=0, ha="left", va="bottom")
        ax.yaxis.set_label_coords(0.0, 1.0 + 0.7 / height)
        for k in range(len(job.member.parts)):
            _area(ax, job, k, x, lower[k], upper[k])
    return ax


def _area(ax: Any, job: Any, k: int, x: Array, low: Array, high: Array) -> None:
    there = high - low > 1e-9
    if not there.any():
        return
    thin = float((high - low).max()) * size_of(ax)[1] < 0.5
    drawn = {"facecolor": ("0.3", "0.8")[k % 2]} if thin else part_look(k).drawn
    ring_x, ring_y = np.concatenate((x, x[::-1])), np.concatenate((low, high[::-1]))
    ax.fill(ring_x, ring_y, edgecolor="black", lw=THIN if thin else MEDIUM, zorder=3, **drawn)
    _number(ax, job, k, x, low, high)


def _number(ax: Any, job: Any, k: int, x: Array, low: Array, high: Array) -> None:
    """Write the part's number where its area is deepest, if it has room there."""
    width, height = size_of(ax)
    text = number_of(job.member, k)
    half = (0.5 * text_width(text) + 1.0) / width * (ax.get_xlim()[1] - ax.get_xlim()[0])
    best: tuple[float, float, float] | None = None
    for share in (
        0.5,
        0.45,
        0.55,
        0.4,
        0.6,
        0.35,
        0.65,
        0.3,
        0.7,
        0.25,
        0.75,
        0.2,
        0.8,
        0.15,
        0.85,
        0.1,
        0.9,
        0.06,
        0.94,
    ):
        at = share * job.member.length
        edges = np.array([at - half, at, at + half])
        window = (x >= edges[0]) & (x <= edges[2])
        bottom = max(float(np.interp(edges, x, low).max()), float(low[window].max(initial=0.0)))
        top = min(float(np.interp(edges, x, high).min()), float(high[window].min(initial=1.0)))
        if best is None or top - bottom > best[2] - best[1] + 0.02:
            best = (at, bottom, top)
    if best is not None and (best[2] - best[1]) * height > 1.25 * LINE:
        ground = {"boxstyle": "round,pad=0.15", "facecolor": "white", "edgecolor": "black", "lw": THIN}
        ax.text(best[0], 0.5 * (best[1] + best[2]), text, ha="center", va="center", zorder=5, bbox=ground)
