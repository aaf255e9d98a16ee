"""Paper of a cross-section: its scale, and the bands beside it for numbers and dimensions."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Any

import numpy as np

SCALES = (1.0, 1.25, 1.5, 2.0, 2.5, 3.0, 4.0, 5.0, 6.0, 7.5, 8.0)
_SLENDER = 9.0
"""A section more slender than this is drawn with two scales."""
_LEAST = 13.0
"""Short side of a section drawn with two scales [mm]."""


@dataclass(frozen=True)
class Sheet:
    """Scales of a cross-section drawn in axes of which both directions are millimetres of paper.

    Parameters
    ----------
    width, height : float
        Size of the axes [mm].
    y0, z0 : float
        Point of the cross-section [m] that is drawn at (at_y, at_z) [mm].
    at_y, at_z : float
        Where that is.
    by_y, by_z : float
        Millimetres of paper per metre, in both directions.
    box : tuple of float
        Left, bottom, right and top of the cross-section [m].
    """

    width: float
    height: float
    y0: float
    z0: float
    at_y: float
    at_z: float
    by_y: float
    by_z: float
    box: tuple[float, float, float, float]

    def across(self, y: Any) -> Any:
        """Place of y on paper [mm]."""
        return self.at_y + (np.asarray(y) - self.y0) * self.by_y

    def up(self, z: Any) -> Any:
        """Place of z on paper [mm]."""
        return self.at_z + (np.asarray(z) - self.z0) * self.by_z

    def level(self, mm: float) -> float:
        """Level that is drawn at a height [m]."""
        return self.z0 + (mm - self.at_z) / self.by_z

    @property
    def words(self) -> str:
        """Say how width and depth compare where they are not alike; a picture is pasted at any width, so no scale."""
        if abs(self.by_y - self.by_z) < 1e-9 * self.by_y:
            return ""
        if self.by_y > self.by_z:
            return f", width drawn {self.by_y / self.by_z:.3g} times as large as depth"
        return f", depth drawn {self.by_z / self.by_y:.3g} times as large as width"


def round_scale(most: float) -> float:
    """Return the largest round scale [mm per m] that is no larger than `most`."""
    n = 1000.0 / most
    power = 10.0 ** math.floor(math.log10(n) + 1e-9)
    if n >= 1.0:
        return 1000.0 / next(s * power for s in (*SCALES, 10.0) if s * power >= n * (1.0 - 1e-9))
    times = most / 1000.0
    power = 10.0 ** math.floor(math.log10(times) + 1e-9)
    return 1000.0 * max(s * power for s in SCALES if s * power <= times * (1.0 + 1e-9))


def scales(box: tuple[float, float, float, float], wide: float, high: float) -> tuple[float, float]:
    """Choose scales [mm per m] for a box in a room [mm]; two alike unless the box is very slender."""
    dy, dz = box[2] - box[0], box[3] - box[1]
    if max(dy, dz) / min(dy, dz) <= _SLENDER:
        both = round_scale(min(wide / dy, high / dz))
        return both, both
    if dy > dz:
        return round_scale(wide / dy), round_scale(_LEAST / dz)
    return round_scale(_LEAST / dy), round_scale(high / dz)
