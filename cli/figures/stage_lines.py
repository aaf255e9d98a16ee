"""Deflection along the member at the end of each stage, every line with its stage beside it."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

import numpy as np

from fishbelly.cli.figures import lines
from fishbelly.cli.figures.letters import Spots, shortened
from fishbelly.cli.figures.lines import Array
from fishbelly.cli.figures.paper import HEAVY, MEDIUM, own_panel, pens, size_of, text_width
from fishbelly.cli.figures.supports import white
from fishbelly.cli.figures.ticks import exact

WORDS = "deflection at the end of each stage, down positive, drawn downwards"
HEIGHT = 34.0
"""Height of the panel [mm]."""
_STYLES = ((0, ()), (0, (5, 2)), (0, (1, 1)), (0, (6, 2, 1, 2)))
_WIDEST = 44.0
"""Most width of a stage's name beside its line [mm]."""

Line = tuple[str, Array, Array]
"""Name of a stage, places [m] and deflections [m]."""


def plot(job: Any, stages: Sequence[Line], ax: Any = None, labelled: bool = True) -> Any:
    """Draw the deflection at the end of each stage.

    Parameters
    ----------
    job : Job
        The job.
    stages : sequence of (str, ndarray, ndarray)
        Name, places [m] and deflection [m] of each stage in order of time; the last is drawn heaviest.
    ax : Axes, optional
        Where to draw; default axes of a new figure.
    labelled : bool
        Whether the horizontal axis has labels.

    Returns
    -------
    Axes
        In SI units; ticks in those of the job.
    """
    with pens():
        if ax is None:
            ax = own_panel(HEIGHT)
        lines.frame(ax, job.member, job.style, labelled)
        lines.upright(ax, np.concatenate([y for _, _, y in stages]), WORDS, "deflection", job.style, True)
        lines.zero(ax, job.member)
        for k, (_, x, y) in enumerate(stages):
            last = k == len(stages) - 1
            style = _STYLES[0] if last else _STYLES[1 + k % 3]
            ax.plot(x, y, color="black" if last else "0.25", lw=HEAVY if last else MEDIUM, ls=style, zorder=4)
        _names(ax, job, stages)
    return ax


def _names(ax: Any, job: Any, stages: Sequence[Line]) -> None:
    """Write every stage beside its line where that is farthest from the others; crowded ones over the panel."""
    width, height = size_of(ax)
    (x0, x1), (y0, y1) = ax.get_xlim(), ax.get_ylim()
    paper = [((x - x0) / (x1 - x0) * width, (y - y0) / (y1 - y0) * height) for _, x, y in stages]
    dense = [lines.dense(*p) for p in paper]
    peaks = [int(np.argmax(np.abs(y))) for _, _, y in stages]
    dots = [(float(p[0][k]), float(p[1][k])) for p, k in zip(paper, peaks, strict=True)]
    every_x, every_y = (np.concatenate([d[i] for d in dense]) for i in (0, 1))
    nought = float(-y0 / (y1 - y0) * height)
    spots = Spots(width, height, every_x, every_y, nought if 0.0 < nought < height else None, dots)
    scale = max(float(np.abs(y).max()) for _, _, y in stages)
    crowded = []
    for k in (len(stages), *range(1, len(stages))):  # the last one first: it is what matters most
        (name, _, y), peak, dot = stages[k - 1], peaks[k - 1], dots[k - 1]
        value = exact(float(y[peak]), "deflection", job.style, scale)
        text = f"{k} {shortened(name, _WIDEST)}: {value}"
        found = spots.find(text, *dot)
        if found is None:
            crowded.append(f"{k}: {value}")
            continue
        place = (x0 + found[0] / width * (x1 - x0), y0 + found[1] / height * (y1 - y0))
        ax.plot([x0 + dot[0] / width * (x1 - x0)], [float(y[peak])], "o", ms=2.6, color="black", zorder=6)
        ax.text(*place, text, ha="center", va="center", zorder=7, bbox=white())
    if crowded:
        over = shortened("; ".join(crowded), width - text_width(f"{WORDS} [mm]") - 3.0)
        ax.text(x1, y1 + 0.7 / height * (y1 - y0), over, ha="right", va="bottom", clip_on=False)


def of_stages(curves: Any, combination: Mapping[str, Any], names: Sequence[str]) -> list[Line]:
    """Deflections of a combination at the end of each of some stages, from `Curves`."""
    return [(name, *curves.along(combination, "deflection", name)) for name in names]
