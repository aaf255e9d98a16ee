"""The paper that figures stand on: millimetres, pens, letters. No colour: greys, hatches and line styles."""

from __future__ import annotations

import functools
import warnings
from collections.abc import Iterator
from contextlib import contextmanager
from typing import Any

WIDTH = 160.0
"""Width of every figure [mm]."""
LEFT, RIGHT = 19.0, 5.0
"""Margins beside the panels: room for tick labels [mm]."""
LETTERS = 7.0
"""Size of all letters [pt]; nothing is smaller."""
LINE = 3.3
"""Height that a line of letters takes [mm]."""
THIN, MEDIUM, HEAVY = 0.35, 0.6, 1.1
"""Widths of pens [pt]."""
GREY = "0.45"
"""Pen of auxiliary lines."""
DOTS = 300
"""Dots per inch of a PNG."""

_MM = 1.0 / 25.4
_PENS = {
    "font.family": ["sans-serif"],
    "font.sans-serif": ["DejaVu Sans"],
    "font.size": LETTERS,
    "text.parse_math": False,
    "text.color": "black",
    "axes.linewidth": MEDIUM,
    "axes.titlesize": LETTERS,
    "axes.labelsize": LETTERS,
    "axes.labelpad": 2.0,
    "axes.grid": False,
    "axes.axisbelow": True,
    "axes.unicode_minus": True,
    "axes.facecolor": "white",
    "figure.facecolor": "white",
    "savefig.facecolor": "white",
    "savefig.bbox": None,
    "lines.linewidth": HEAVY,
    "lines.scale_dashes": True,
    "patch.linewidth": MEDIUM,
    "hatch.linewidth": THIN,
    "hatch.color": "black",
    "xtick.labelsize": LETTERS,
    "ytick.labelsize": LETTERS,
    "xtick.direction": "out",
    "ytick.direction": "out",
    "xtick.major.size": 2.0,
    "ytick.major.size": 2.0,
    "xtick.major.width": MEDIUM,
    "ytick.major.width": MEDIUM,
    "xtick.major.pad": 1.5,
    "ytick.major.pad": 1.5,
    "svg.fonttype": "path",
    "svg.hashsalt": "fishbelly",
    "pdf.fonttype": 42,
    "pdf.compression": 6,
}
_GROUPS = (
    *("agg.", "axes.", "figure.", "font.", "hatch.", "image.", "lines.", "markers.", "mathtext."),
    *("patch.", "path.", "pdf.", "savefig.", "svg.", "text.", "xtick.", "ytick."),
)
"""Settings that a user's own choice must not change."""


@contextmanager
def pens() -> Iterator[None]:
    """Draw with the pens of this project inside; whatever was set before holds again afterwards."""
    import matplotlib

    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        own: Any = {k: v for k, v in matplotlib.rcParamsDefault.items() if k.startswith(_GROUPS)}
        context = matplotlib.rc_context(own | _PENS)
        context.__enter__()
    try:
        with warnings.catch_warnings():
            # a name may hold characters that the letters lack; a frame stands for them
            warnings.filterwarnings("ignore", message="Glyph")
            yield
    finally:
        with warnings.catch_warnings():
            warnings.simplefilter("ignore")
            context.__exit__(None, None, None)


def page(height: float, width: float = WIDTH) -> Any:
    """Make an empty figure [mm] that can be drawn, without any window system."""
    from matplotlib.backends.backend_agg import FigureCanvasAgg
    from matplotlib.figure import Figure

    figure = Figure(figsize=(width * _MM, height * _MM), dpi=DOTS)
    FigureCanvasAgg(figure)
    return figure


def panel(figure: Any, left: float, top: float, width: float, height: float, **more: Any) -> Any:
    """Add axes, placed from the figure's left and top edges [mm]."""
    w, h = figure.get_size_inches() / _MM
    return figure.add_axes((left / w, 1.0 - (top + height) / h, width / w, height / h), **more)


def own_panel(height: float, width: float = WIDTH, left: float = LEFT, right: float = RIGHT, foot: float = 10.0) -> Any:
    """Make a figure with a single panel of a height [mm]."""
    figure = page(height + foot + 6.0, width)
    return panel(figure, left, 6.0, width - left - right, height)


def size_of(ax: Any) -> tuple[float, float]:
    """Width and height of axes on paper [mm]."""
    w, h = ax.figure.get_size_inches() / _MM
    place = ax.get_position()
    return place.width * w, place.height * h


@functools.lru_cache(maxsize=4096)
def text_width(text: str) -> float:
    """Width of a line of letters on paper [mm], a little on the safe side."""
    from matplotlib.font_manager import FontProperties
    from matplotlib.textpath import text_to_path

    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        letters = FontProperties(family="DejaVu Sans", size=LETTERS)
        width, _, _ = text_to_path.get_text_width_height_descent(text, letters, ismath=False)
    return float(width) / 72.0 * 25.4 * 1.03 + 0.3


def bare(ax: Any) -> None:
    """Take frame, ticks and labels off axes."""
    ax.set_xticks([])
    ax.set_yticks([])
    ax.patch.set_alpha(0.0)
    for spine in ax.spines.values():
        spine.set_visible(False)


def in_millimetres(ax: Any) -> tuple[float, float]:
    """Make axes a bare sheet with both directions in mm of paper from the lower left; returns width and height."""
    bare(ax)
    width, height = size_of(ax)
    ax.set_xlim(0.0, width)
    ax.set_ylim(0.0, height)
    return width, height
