"""How two outlines lie to each other at all stations at once: apart, one inside the other, or mixed."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.outlines import Outline, edge_boxes
from fishbelly.sections.placing import Bounds

Array = NDArray[np.float64]


def boxes_apart(a: Bounds, b: Bounds) -> bool:
    """Whether two bounding boxes share no area at any station; boxes that touch are apart."""
    wide = np.minimum(a.right, b.right) - np.maximum(a.left, b.left)
    high = np.minimum(a.top, b.top) - np.maximum(a.bottom, b.bottom)
    size = np.maximum(a.right - a.left, b.right - b.left) + np.maximum(a.top - a.bottom, b.top - b.bottom)
    return bool(np.all((wide <= 1e-12 * size) | (high <= 1e-12 * size)))


def relation(outer: Outline, inner: Outline) -> str:
    """How `inner` lies to `outer`: "apart", "inside" or "mixed", the same at every station or "mixed".

    "apart" and "inside" are certain; "mixed" may also be said of a pair that only comes close.
    """
    box = Bounds.of(inner)
    if boxes_apart(Bounds.of(outer), box):
        return "apart"
    low_y, high_y, low_z, high_z = edge_boxes(outer, np.arange(outer.bulge.size))
    size = (box.right - box.left + box.top - box.bottom)[:, None] * 1e-12
    meets = (low_y < box.right[:, None] - size) & (high_y > box.left[:, None] + size)
    meets &= (low_z < box.top[:, None] - size) & (high_z > box.bottom[:, None] + size)
    if np.any(meets):
        return "mixed"
    inside = winding(outer, box.middle_y, box.middle_z)
    if np.all(inside):
        return "inside"
    return "apart" if not np.any(inside) else "mixed"


def winding(outline: Outline, y: Array, z: Array) -> NDArray[np.bool_]:
    """Whether points that lie on no edge are inside an outline, shape (S,); arcs count by their chords.

    The caller makes sure that no arc's bow lies between its chord and the point.
    """
    ends_y, ends_z = outline.ends
    a_y, a_z = outline.y - y[:, None], outline.z - z[:, None]
    b_y, b_z = ends_y - y[:, None], ends_z - z[:, None]
    up, down = (a_z <= 0.0) & (b_z > 0.0), (a_z > 0.0) & (b_z <= 0.0)
    rise = np.where(b_z == a_z, 1.0, b_z - a_z)
    right = a_y - a_z * (b_y - a_y) / rise > 0.0
    turns = (up & right).sum(axis=1) - (down & right).sum(axis=1)
    return np.asarray(turns > 0)
