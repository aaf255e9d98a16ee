"""The elevation's paper: x along the member, millimetres upwards, and the band in which the member's depth is drawn."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.cli.figures.side_view import SideView

Array = NDArray[np.float64]

MARGIN = 6.0
"""Room beside the member's ends, for supports and labels [mm]."""
_STEPS = (1.0, 1.25, 1.5, 2.0, 2.5, 3.0, 4.0, 5.0, 6.0, 8.0)


@dataclass(frozen=True, eq=False)
class Scene:
    """Where things stand in the axes of an elevation.

    Parameters
    ----------
    ax : Axes
        The axes: x in m, vertical in mm of paper from the bottom.
    view : SideView
        The member.
    style : str
        Units to show.
    left, right : float
        Ends of the horizontal axis [m].
    per_mm : float
        Length along the member that a millimetre of paper stands for [m].
    bottom : float
        Height of the member's lowest edge on paper [mm].
    factor : float
        How many times the depth is drawn too large against the length.
    """

    ax: Any
    view: SideView
    style: str
    left: float
    right: float
    per_mm: float
    bottom: float
    factor: float

    @property
    def length(self) -> float:
        """Length of the member [m]."""
        return self.view.member.length

    @property
    def width(self) -> float:
        """Width of the axes [mm]."""
        return (self.right - self.left) / self.per_mm

    def mm(self, x: float) -> float:
        """Distance of a place from the left edge of the axes [mm]."""
        return (x - self.left) / self.per_mm

    def x(self, mm: Array | float) -> Any:
        """Place at a distance from the left edge of the axes [m]."""
        return self.left + np.asarray(mm) * self.per_mm

    def up(self, z: Array | float) -> Any:
        """Height of a level on paper [mm]."""
        return self.bottom + (np.asarray(z) - self.view.levels[0]) / self.per_mm * self.factor

    @property
    def top(self) -> float:
        """Height of the member's highest edge on paper [mm]."""
        return float(self.up(self.view.levels[1]))

    def edges(self, x: float) -> tuple[float, float]:
        """Lower and upper edge of the member at x on paper [mm]."""
        low, high = self.view.edges_at(x)
        return float(self.up(low)), float(self.up(high))

    def write(self, mm: float, height: float, text: str, **more: Any) -> Any:
        """Write a text with its middle at a place of the paper [mm]."""
        options = {"ha": "center", "va": "center", "zorder": 9} | more
        return self.ax.text(self.x(mm), height, text, **options)


def limits(length: float, width: float) -> tuple[float, float]:
    """Ends of a horizontal axis that shows a member with room beside it; `width` of the axes [mm]."""
    beside = MARGIN / (width - 2.0 * MARGIN) * length
    return -beside, length + beside


def exaggeration(depth: float, length: float, width: float, room: float) -> float:
    """Choose the round factor by which the depth is drawn too large, so that it fills a room [mm]."""
    natural = depth / length * (width - 2.0 * MARGIN)
    best = room / natural
    power = 10.0 ** np.floor(np.log10(best) + 1e-7)
    return float(max(s * power for s in _STEPS if s * power <= best * (1.0 + 1e-6)))


def scene(ax: Any, view: SideView, style: str, width: float, below: float, room: float) -> Scene:
    """Choose scales for an elevation.

    Parameters
    ----------
    ax : Axes or None
        Bare axes; None to look at places only.
    view : SideView
        The member.
    style : {"metric", "us"}
        Units to show.
    width : float
        Width of the axes [mm].
    below : float
        Height that is needed under the member [mm].
    room : float
        Height that the member may take [mm].
    """
    left, right = limits(view.member.length, width)
    low, high = view.levels
    factor = exaggeration(high - low, view.member.length, width, room)
    per_mm = (right - left) / width
    drawn = (high - low) / per_mm * factor
    return Scene(ax, view, style, left, right, per_mm, below + 0.5 * (room - drawn), factor)


def scale_words(factor: float) -> str:
    """Say how depth and length compare."""
    if abs(factor - 1.0) < 1e-9:
        return "depth and length to one scale"
    return f"depth drawn {factor:g} times as large as length"
