"""Boxes of all letters that a figure really draws: which overlap, which are cut at the edge of the page."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

LEAST = 7.0
"""Smallest letters that are legible [pt]."""


@dataclass(frozen=True)
class Written:
    """A text as drawn: its box in pixels and the size of its letters in points."""

    text: str
    left: float
    bottom: float
    right: float
    top: float
    size: float


def written(figure: Any) -> list[Written]:
    """Draw a figure and gather every text that came out."""
    from matplotlib.backends.backend_agg import FigureCanvasAgg, RendererAgg

    from fishbelly.cli.figures.paper import pens

    found: list[Written] = []

    class Recorder(RendererAgg):
        def draw_text(
            self, gc: Any, x: float, y: float, s: str, prop: Any, angle: float, *args: Any, **more: Any
        ) -> None:
            mtext = more.get("mtext") or (args[-1] if args else None)
            box = mtext.get_window_extent(self)
            found.append(Written(s, box.x0, box.y0, box.x1, box.y1, prop.get_size_in_points()))
            super().draw_text(gc, x, y, s, prop, angle, *args, **more)

    FigureCanvasAgg(figure)
    width, height = figure.bbox.size
    with pens():
        figure.draw(Recorder(width, height, figure.dpi))
    return found


def faults(figure: Any) -> list[str]:
    """Say what is wrong with the letters of a figure; empty where nothing is."""
    texts = written(figure)
    width, height = figure.bbox.size
    said = [f"cut: {t.text!r}" for t in texts if t.left < 0 or t.bottom < 0 or t.right > width or t.top > height]
    said += [f"small: {t.text!r} {t.size:g} pt" for t in texts if t.size < LEAST]
    for k, a in enumerate(texts):
        for b in texts[:k]:
            aside = a.left >= b.right or b.left >= a.right
            above = a.bottom >= b.top or b.bottom >= a.top
            if not (aside or above):
                said.append(f"overlap: {a.text!r} and {b.text!r}")
    return said
