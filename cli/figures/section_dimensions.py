"""Dimensions of a cross-section: overall width and depth, and the chain of depths of its parts."""

from __future__ import annotations

import itertools
from collections.abc import Sequence
from typing import Any

import numpy as np

from fishbelly.cli.figures.letters import apart
from fishbelly.cli.figures.paper import GREY, LINE, MEDIUM, THIN, text_width
from fishbelly.cli.figures.sheet_of_section import Sheet
from fishbelly.cli.figures.ticks import trimmed
from fishbelly.cli.format_quantity import format_number

_BESIDE = 13.9
"""Distance of the chain from the section, so that names of axes stand between [mm]."""
_MOST = 14
"""Most links that a chain is drawn with."""


def size_words(size: float, style: str) -> str:
    """Write a size without its unit, to a tenth of a millimetre or a thousandth of an inch, or four figures."""
    digits = 5 if (size >= 1.0 if style != "us" else size >= 0.254) else 4
    return trimmed(format_number(size, "length", style, digits))  # type: ignore[arg-type]


def draw(ax: Any, paper: Sheet, shapes: Sequence[tuple[int, Any]], style: str) -> None:
    """Draw the dimensions around a cross-section; axes in mm of paper."""
    left, bottom, right, top = paper.box
    x0, x1 = float(paper.across(left)), float(paper.across(right))
    y0, y1 = float(paper.up(bottom)), float(paper.up(top))
    _line(ax, (x0, 2.2), (x1, 2.2))
    for x in (x0, x1):
        ax.plot([x, x], [1.4, y0 - 1.0], color=GREY, lw=THIN)
    ax.text(
        0.5 * (x0 + x1), 2.6 + 0.5 * LINE, size_words(right - left, style), ha="center", va="center", bbox=_ground()
    )
    _line(ax, (5.5, y0), (5.5, y1))
    for y in (y0, y1):
        ax.plot([4.7, x0 - 1.0], [y, y], color=GREY, lw=THIN, zorder=1)
    ax.text(5.0, 0.5 * (y0 + y1), size_words(top - bottom, style), ha="right", va="center", rotation=90)
    _chain(ax, paper, _levels(shapes), style)


def _ground() -> dict[str, Any]:
    return {"facecolor": "white", "edgecolor": "none", "pad": 0.2}


def _line(ax: Any, start: tuple[float, float], end: tuple[float, float]) -> None:
    ax.plot([start[0], end[0]], [start[1], end[1]], color="black", lw=THIN)
    for x, y in (start, end):
        ax.plot([x - 0.7, x + 0.7], [y - 0.7, y + 0.7], color="black", lw=MEDIUM)


def _levels(shapes: Sequence[tuple[int, Any]]) -> list[float]:
    """Levels of the lower and upper edges of the parts, from the bottom."""
    every = sorted({v for _, s in shapes for v in (s.bounds[1], s.bounds[3])})
    size = every[-1] - every[0]
    kept = [every[0]]
    for v in every[1:]:
        if v - kept[-1] > 1e-6 * size:
            kept.append(v)
    return kept


def _chain(ax: Any, paper: Sheet, levels: list[float], style: str) -> None:
    """Draw the chain on the right; where links are short their sizes move apart, with a line to each."""
    links = len(levels) - 1
    if not 1 < links <= _MOST:
        return
    heights = [float(paper.up(v)) for v in levels]
    texts = [size_words(b - a, style) for a, b in itertools.pairwise(levels)]
    widest = max(map(text_width, texts))
    edge = float(paper.across(paper.box[2]))
    # beside the names of the axes, with lines from the section's edge
    x = min(edge + _BESIDE, paper.width - widest - 3.6)
    middles = [0.5 * (a + b) for a, b in itertools.pairwise(heights)]
    placed = apart(middles, [LINE] * links, 0.0, paper.height, 0.0)
    if placed is None:
        return
    ax.plot([x, x], [heights[0], heights[-1]], color="black", lw=THIN)
    for y in heights:
        ax.plot([edge + 1.0, x + 0.7], [y, y], color=GREY, lw=THIN, zorder=1)
        ax.plot([x - 0.7, x + 0.7], [y - 0.7, y + 0.7], color="black", lw=MEDIUM)
    for text, middle, at in zip(texts, middles, placed, strict=True):
        if abs(float(at) - middle) > 0.3:
            ax.plot([x, x + 2.4], [middle, float(at)], color=GREY, lw=THIN)
        ax.text(x + 2.8, float(np.round(at, 6)), text, ha="left", va="center")
