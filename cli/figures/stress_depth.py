"""Stress over the depth of a cross-section, with its jumps between materials."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from fishbelly.cli.figures.letters import apart
from fishbelly.cli.figures.looks import part_look
from fishbelly.cli.figures.paper import GREY, HEAVY, LINE, MEDIUM, THIN, own_panel, pens, size_of, text_width
from fishbelly.cli.figures.ticks import ticks
from fishbelly.cli.format_quantity import format_number

_MOST_VALUES = 9
_AXIS = 5.0
"""Room for the tick labels of the stress under the depth [mm]."""


@dataclass(frozen=True)
class Bar:
    """Stress of a part at its lowest and highest level: part, levels [m], stresses [Pa]."""

    part: int
    z: tuple[float, float]
    stress: tuple[float, float]


def plot(job: Any, bars: Sequence[Bar], words: str, levels: tuple[float, float] | None = None, ax: Any = None) -> Any:
    """Draw stress over the depth.

    Parameters
    ----------
    job : Job
        The job.
    bars : sequence of Bar
        Stress by part.
    words : str
        What stresses these are, above the drawing.
    levels : tuple of float, optional
        Levels at the lower and upper edge of the axes [m]; default the section with room around it.
    ax : Axes, optional
        Where to draw; default axes of a new figure.

    Returns
    -------
    Axes
        Horizontal: stress [Pa], tension positive; vertical: z [m].
    """
    with pens():
        if ax is None:
            ax = own_panel(60.0, width=80.0)
        width, height = size_of(ax)
        low, high = min(b.z[0] for b in bars), max(b.z[1] for b in bars)
        if levels is None:
            room = 10.0 / max(height - 20.0, 10.0) * (high - low)
            levels = (low - room, high + room)
        ax.set_ylim(*levels)
        ax.set_yticks([])
        _stress_axis(ax, bars, job.style, width)
        for spine in ("top", "left", "right"):
            ax.spines[spine].set_visible(False)
        ax.patch.set_alpha(0.0)
        ax.plot([0.0, 0.0], [low, high], color="black", lw=MEDIUM, zorder=4)
        for bar in bars:
            look = part_look(bar.part)
            x, z = (0.0, *bar.stress, 0.0), (bar.z[0], *bar.z, bar.z[1])
            ax.fill(x, z, edgecolor="black", lw=THIN, zorder=3, **look.drawn)
            ax.plot(bar.stress, bar.z, color="black", lw=HEAVY, zorder=4, solid_capstyle="butt")
        _values(ax, bars, job.style)
        ax.text(0.0, height + 0.8, words, transform=_paper(ax), ha="left", va="bottom", clip_on=False)
    return ax


def _paper(ax: Any) -> Any:
    """Give the transform from mm, counted from the lower left corner of the axes."""
    from matplotlib.transforms import Affine2D

    width, height = size_of(ax)
    return Affine2D().scale(1.0 / width, 1.0 / height) + ax.transAxes


def _stress_axis(ax: Any, bars: Sequence[Bar], style: str, width: float) -> None:
    """Set up the horizontal axis so that values have room on both sides of the drawing."""
    every = [v for b in bars for v in b.stress]
    low, high = min(*every, 0.0), max(*every, 0.0)
    if high - low <= 0.0:
        low, high = -1.0, 1.0
    beside = 2.0 + max(text_width(_number(v, style, max(map(abs, every)))) for v in every)
    inner = max(width - 2.0 * beside, 10.0)
    per_mm = (high - low) / inner
    ax.set_xlim(low - beside * per_mm, high + beside * per_mm)
    for most in (6, 5, 4, 3, 2):
        chosen = ticks(low, high, "stress", style, most)
        widest = max(map(text_width, chosen.labels), default=0.0)
        if chosen.at.size < 2 or (chosen.at[1] - chosen.at[0]) / per_mm > widest + 1.5:
            break
    ax.set_xticks(chosen.at, chosen.labels)
    ax.spines["bottom"].set_bounds(low, high)
    ax.set_xlabel(f"stress [{chosen.unit}], tension positive")


def _number(value: float, style: str, scale: float) -> str:
    return format_number(value, "stress", style, 3, scale).replace("-", "−")  # type: ignore[arg-type]


def _values(ax: Any, bars: Sequence[Bar], style: str) -> None:
    """Write the stresses at the edges of parts: tension on the right, compression on the left, largest first."""
    width, height = size_of(ax)
    (x0, x1), (z0, z1) = ax.get_xlim(), ax.get_ylim()
    scale = max(abs(v) for b in bars for v in b.stress)
    for sign in (1.0, -1.0):
        points: dict[tuple[float, float], None] = {}
        for b in bars:
            for z, v in zip(b.z, b.stress, strict=True):
                if v * sign > 1e-9 * scale:
                    points[round((z - z0) / (z1 - z0) * height, 1), round((v - x0) / (x1 - x0) * width, 1)] = None
        exact = {
            (round((z - z0) / (z1 - z0) * height, 1), round((v - x0) / (x1 - x0) * width, 1)): v
            for b in bars
            for z, v in zip(b.z, b.stress, strict=True)
        }
        kept = sorted(points, key=lambda p: -abs(exact[p]))[: min(_MOST_VALUES, int((height - 2.0 * _AXIS) // LINE))]
        middles = apart([p[0] for p in kept], [LINE] * len(kept), 0.5, height, 0.0)
        if middles is None:
            continue
        edge = width if sign > 0.0 else 0.0
        for (z, x), middle in zip(kept, middles, strict=True):
            text = _number(exact[z, x], style, scale)
            near = edge - sign * (text_width(text) + 0.4)
            ax.plot([x, near], [z, float(middle)], color=GREY, lw=THIN, transform=_paper(ax), zorder=5)
            ax.text(edge, float(middle), text, transform=_paper(ax), ha="right" if sign > 0 else "left", va="center")
