"""Where a part stands in the cross-section: by an anchor, or against the bounding box of another part."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.outlines import Outline

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Bounds:
    """A bounding box at S stations: left, bottom, right, top [m], each shape (S,)."""

    left: Array
    bottom: Array
    right: Array
    top: Array

    @classmethod
    def of(cls, outline: Outline) -> Bounds:
        """Return the bounding box of an outline."""
        return cls(*outline.bounds())

    @property
    def middle_y(self) -> Array:
        """Level line half way between left and right [m]."""
        return 0.5 * (self.left + self.right)

    @property
    def middle_z(self) -> Array:
        """Height half way between bottom and top [m]."""
        return 0.5 * (self.bottom + self.top)

    def moved(self, dy: Array | float, dz: Array | float) -> Bounds:
        """Return the box shifted by (dy, dz) [m]."""
        return Bounds(self.left + dy, self.bottom + dz, self.right + dy, self.top + dz)

    def edge(self, name: str) -> Array:
        """Return the coordinate of an edge: "left", "right", "top", "bottom"."""
        return np.asarray(getattr(self, name))


def anchored(box: Bounds, anchor: str, y: Array | float, z: Array | float) -> tuple[Array, Array]:
    """Shift (dy, dz) that brings an anchor of a bounding box to a point.

    Parameters
    ----------
    box : Bounds
        Box of the part as drawn.
    anchor : str
        "middle", an edge such as "top", or a corner such as "top left".
    y, z : ndarray or float
        Where the anchor shall be [m].

    Returns
    -------
    dy, dz : ndarray, shape (S,)
        Shift [m].
    """
    words = anchor.split()
    side = next((w for w in words if w in ("left", "right")), None)
    level = next((w for w in words if w in ("top", "bottom")), None)
    at_y = box.edge(side) if side else box.middle_y
    at_z = box.edge(level) if level else box.middle_z
    return y - at_y, z - at_z


def against(box: Bounds, host: Bounds, relation: str, flush: str, gap: Array | float) -> tuple[Array, Array]:
    """Shift (dy, dz) that sets a bounding box against another.

    Parameters
    ----------
    box, host : Bounds
        Boxes of the part as drawn and of the part it is placed against.
    relation : {"under", "over", "left_of", "right_of", "centred_on"}
        Side of the host.
    flush : str
        Which edges are aligned: "left", "middle", "right" under and over, else "top", "middle", "bottom".
    gap : ndarray or float
        Clear gap [m].

    Returns
    -------
    dy, dz : ndarray, shape (S,)
        Shift [m].
    """
    if relation in ("under", "over"):
        dz = host.bottom - gap - box.top if relation == "under" else host.top + gap - box.bottom
        dy = host.middle_y - box.middle_y if flush == "middle" else host.edge(flush) - box.edge(flush)
        return dy, dz
    dz = host.middle_z - box.middle_z if flush == "middle" else host.edge(flush) - box.edge(flush)
    if relation == "left_of":
        return host.left - gap - box.right, dz
    if relation == "right_of":
        return host.right + gap - box.left, dz
    return host.middle_y - box.middle_y, dz
