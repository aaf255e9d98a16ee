"""Labels that fit: names cut to a width, places along a line moved apart, free spots beside a point."""

from __future__ import annotations

import math
import unicodedata
from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from fishbelly.cli.figures.paper import LINE, text_width

Array = NDArray[np.float64]

ELLIPSIS = "…"
_ON_ZERO, _BY_ANOTHER = 20.0, 15.0
"""What it costs to stand on the line of zero, or nearer to the dot of another label [mm]."""
_MOST_COVERED = 8
"""Points of a line, half a millimetre apart, that a label may hide."""


def one_line(text: str) -> str:
    """Write a text on one line: blanks for breaks, nothing that steers a printer."""
    shown = "".join(" " if c.isspace() else c for c in text if c.isspace() or unicodedata.category(c)[0] != "C")
    return " ".join(shown.split())


def shortened(text: str, width: float) -> str:
    """Cut a text in its middle until it is no wider than a width [mm]; empty where not even two letters fit."""
    text = one_line(text)
    if text_width(text) <= width:
        return text
    low, high = 0, len(text) - 1
    while low < high:
        keep = (low + high + 1) // 2
        if text_width(_without_middle(text, keep)) <= width:
            low = keep
        else:
            high = keep - 1
    return _without_middle(text, low) if low >= 2 else ""


def _without_middle(text: str, keep: int) -> str:
    tail = keep // 3
    return text[: keep - tail].rstrip() + ELLIPSIS + (text[-tail:].lstrip() if tail else "")


def lines_of(text: str, width: float, most: int) -> list[str]:
    """Break a text between words into lines of a width [mm]; what is too much is cut off the last."""
    words, lines = one_line(text).split(), [""]
    for k, word in enumerate(words):
        longer = f"{lines[-1]} {word}".strip()
        if text_width(longer) <= width:
            lines[-1] = longer
        elif len(lines) == most:
            lines[-1] = shortened(" ".join([lines[-1], *words[k:]]), width)
            break
        else:
            lines.append(shortened(word, width))
    return [line for line in lines if line]


def apart(wanted: Sequence[float], sizes: Sequence[float], low: float, high: float, gap: float = 0.8) -> Array | None:
    """Move labels along a line so that none overlaps another, each as near to its place as can be.

    Parameters
    ----------
    wanted : sequence of float
        Where their middles should be [mm], in any order.
    sizes : sequence of float
        Their lengths along the line [mm].
    low, high : float
        Ends of the line [mm].
    gap : float
        Least distance between two [mm].

    Returns
    -------
    ndarray or None
        Middles in the order given; None where they do not fit.
    """
    if not len(wanted):
        return np.empty(0)
    size = np.asarray(sizes, dtype=float) + gap
    if size.sum() - gap > high - low:
        return None
    order = np.argsort(np.asarray(wanted, dtype=float), kind="stable")
    # least squares under "no overlap": labels that touch move as one block
    offsets = np.concatenate(([0.0], np.cumsum(size[order])[:-1])) + 0.5 * size[order]
    free = np.asarray(wanted, dtype=float)[order] - offsets
    blocks: list[list[float]] = []
    for value in free:
        blocks.append([float(value), 1.0])
        while len(blocks) > 1 and blocks[-2][0] > blocks[-1][0]:
            mean, count = blocks.pop()
            first, more = blocks.pop()
            blocks.append([(first * more + mean * count) / (more + count), more + count])
    starts = np.concatenate([np.full(int(count), mean) for mean, count in blocks])
    starts = np.clip(starts, low - 0.5 * gap, high + 0.5 * gap - size.sum())
    middles = np.empty(size.size)
    middles[order] = starts + offsets
    return middles


@dataclass(frozen=True)
class Box:
    """A rectangle on paper [mm]."""

    left: float
    bottom: float
    right: float
    top: float

    def meets(self, other: Box, gap: float = 0.4) -> bool:
        """Whether two rectangles overlap or come nearer than a gap."""
        aside = self.left - gap >= other.right or other.left - gap >= self.right
        above = self.bottom - gap >= other.top or other.bottom - gap >= self.top
        return not (aside or above)

    def distance(self, x: float, y: float) -> float:
        """Distance of a point from the rectangle, 0 inside [mm]."""
        return math.hypot(max(self.left - x, x - self.right, 0.0), max(self.bottom - y, y - self.top, 0.0))


@dataclass
class Spots:
    """Finds a free spot for a label beside its point, in a panel [mm].

    Parameters
    ----------
    width, height : float
        Size of the panel.
    curve_x, curve_y : ndarray
        Points of the line drawn in it, which labels keep off where they can.
    zero : float, optional
        Height of the line of zero, which labels rather do not stand on.
    dots : sequence of (float, float)
        All points that labels belong to: a label stands nearest to its own.
    """

    width: float
    height: float
    curve_x: Array
    curve_y: Array
    zero: float | None = None
    dots: Sequence[tuple[float, float]] = ()
    taken: list[Box] = field(default_factory=list)

    def find(self, text: str, x: float, y: float) -> tuple[float, float] | None:
        """Middle of a free spot for a text near (x, y), or None; the spot is taken from then on."""
        wide, high = text_width(text), LINE - 0.4
        best: tuple[float, Box] | None = None
        for dy in (1.0, -1.0, 2.2, -2.2, 0.0, 3.4, -3.4):
            for dx in (0.0, 0.55, -0.55, 0.9, -0.9, 1.4, -1.4):
                if dx == 0.0 and dy == 0.0:
                    continue
                middle_x = min(max(x + dx * (wide + 2.0), 0.5 * wide), self.width - 0.5 * wide)
                middle_y = y + dy * (0.5 * high + 1.0)
                box = Box(middle_x - 0.5 * wide, middle_y - 0.5 * high, middle_x + 0.5 * wide, middle_y + 0.5 * high)
                cost = self._cost(box, x, y)
                if best is None or cost < best[0]:
                    best = (cost, box)
        if best is None or math.isinf(best[0]) or self._covered(best[1]) > _MOST_COVERED:
            return None
        box = best[1]
        self.taken.append(box)
        return 0.5 * (box.left + box.right), 0.5 * (box.bottom + box.top)

    def _cost(self, box: Box, x: float, y: float) -> float:
        if box.bottom < 0.3 or box.top > self.height - 0.3 or box.left < -0.01 or box.right > self.width + 0.01:
            return math.inf
        if any(box.meets(other) for other in self.taken):
            return math.inf
        far = math.hypot(0.5 * (box.left + box.right) - x, 0.5 * (box.bottom + box.top) - y)
        if self.zero is not None and box.bottom - 0.3 < self.zero < box.top + 0.3:
            far += _ON_ZERO
        own = box.distance(x, y)
        if any(box.distance(*dot) < own + 1.0 for dot in self.dots if dot != (x, y)):
            far += _BY_ANOTHER
        return far + 2.0 * own + 6.0 * min(self._covered(box), 10)

    def _covered(self, box: Box) -> int:
        """How many points of the line a box hides."""
        inside = (self.curve_x > box.left - 0.5) & (self.curve_x < box.right + 0.5)
        inside &= (self.curve_y > box.bottom - 0.4) & (self.curve_y < box.top + 0.4)
        return int(inside.sum())
