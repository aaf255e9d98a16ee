"""What all lines along the member share: places with jumps, marks of the largest and the smallest, faint uprights."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.cli.figures.letters import Spots
from fishbelly.cli.figures.paper import GREY, THIN, size_of
from fishbelly.cli.figures.scene import limits
from fishbelly.cli.figures.supports import white
from fishbelly.cli.figures.ticks import exact, place, set_places, set_values
from fishbelly.member.description import Member

Array = NDArray[np.float64]
Mark = tuple[float, float]
"""Value and place of an extreme, SI units."""

_ROOM, _LABEL = 0.2, 4.8
"""Room over and under a line for the values of its extremes: share of the reach at least, and [mm]."""


def frame(ax: Any, member: Member, style: str, labelled: bool) -> None:
    """Set up the horizontal axis, and leave only the edges that say something."""
    width, _ = size_of(ax)
    ax.set_xlim(*limits(member.length, width))
    set_places(ax, member.length, style, width, labelled)
    for side in ("top", "right"):
        ax.spines[side].set_visible(False)
    for at in sorted({s.at for s in member.supports}):
        ax.axvline(at, color=GREY, lw=THIN, ls=(0, (1, 2)), zorder=1)


def upright(
    ax: Any,
    values: Array,
    words: str,
    what: str,
    style: str,
    down: bool = False,
    from_zero: bool = True,
    least: float = 1.0,
) -> None:
    """Set up the vertical axis for values [SI]; `down`: positive downwards; `least`: reach where all are zero."""
    low, high = float(np.nanmin(values)), float(np.nanmax(values))
    if from_zero:
        low, high = min(low, 0.0), max(high, 0.0)
    size = max(abs(low), abs(high))
    low, high = (0.0 if abs(v) < 1e-9 * size else v for v in (low, high))
    if high - low <= 1e-9 * size:
        low, high = (low - 0.05 * size, high + 0.05 * size) if size else (-least, least)
    ends = 2 - (from_zero and low == 0.0) - (from_zero and high == 0.0)
    share = _LABEL / size_of(ax)[1]
    room = max(_ROOM, share / max(1.0 - ends * share - 0.03, 0.2)) * (high - low)
    low, high = low - (0.0 if from_zero and low == 0.0 else room), high + (0.0 if from_zero and high == 0.0 else room)
    pad = 0.03 * (high - low)
    low, high = low - (pad if low == 0.0 else 0.0), high + (pad if high == 0.0 else 0.0)
    ax.set_ylim((high, low) if down else (low, high))
    set_values(ax, words, what, style, size_of(ax)[1])


def mark(
    ax: Any, x: Array, y: Array, extremes: Sequence[Mark], what: str, member: Member, style: str, digits: int = 3
) -> None:
    """Mark extremes with a dot, their value and their place, off the line and off each other.

    Those without a free spot are written over the panel, at its right.
    """
    width, height = size_of(ax)
    (x0, x1), (y0, y1) = ax.get_xlim(), ax.get_ylim()
    fine_x, fine_y = dense((x - x0) / (x1 - x0) * width, (y - y0) / (y1 - y0) * height)
    paper = [(float((at - x0) / (x1 - x0) * width), float((v - y0) / (y1 - y0) * height)) for v, at in extremes]
    nought = float(-y0 / (y1 - y0) * height)
    spots = Spots(width, height, fine_x, fine_y, nought if 0.0 < nought < height else None, paper)
    scale = max((abs(v) for v, _ in extremes), default=0.0)
    crowded: list[str] = []
    for (number, at), dot in zip(extremes, paper, strict=True):
        text = f"{exact(number, what, style, scale, digits)} at {place(at, member.length, style)}"
        if len(extremes) > 1 and not text.partition(" at ")[0].strip("-−0. ")[:1].isdigit():
            # it would be written as zero
            continue
        ax.plot([at], [number], "o", ms=2.6, color="black", zorder=6, clip_on=False)
        found = spots.find(text, *dot)
        if found is None:
            crowded.append(text)
        else:
            ax.text(
                x0 + found[0] / width * (x1 - x0),
                y0 + found[1] / height * (y1 - y0),
                text,
                ha="center",
                va="center",
                zorder=7,
                bbox=white(),
            )
    if crowded:
        ax.text(x1, y1 + 0.7 / height * (y1 - y0), "; ".join(crowded), ha="right", va="bottom", clip_on=False)


def dense(x: Array, y: Array) -> tuple[Array, Array]:
    """Points of a line no farther apart than half a millimetre, up to a limit."""
    known = np.isfinite(x) & np.isfinite(y)
    x, y = x[known], y[known]
    if x.size < 2:
        return x, y
    steps = np.minimum(np.ceil(np.hypot(np.diff(x), np.diff(y)) / 0.5).astype(int), 200) + 1
    pieces_x = [np.linspace(a, b, n) for a, b, n in zip(x[:-1], x[1:], steps, strict=True)]
    pieces_y = [np.linspace(a, b, n) for a, b, n in zip(y[:-1], y[1:], steps, strict=True)]
    return np.concatenate(pieces_x), np.concatenate(pieces_y)


def zero(ax: Any, member: Member) -> None:
    """Draw the line of zero over the member's length."""
    ax.plot([0.0, member.length], [0.0, 0.0], color="black", lw=THIN, zorder=3)
