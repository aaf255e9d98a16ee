"""Points of a part where its stress can be largest, whatever the strain plane."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.chebyshev import rule
from fishbelly.sections.composition import Composition
from fishbelly.sections.outlines import arcs

Array = NDArray[np.float64]


_EVERY = 4
"""Of the levels in a slab so many stand for a curved side of a part that is cut and bends both ways."""


def fibres(section: Composition, part: int, planar: bool) -> tuple[Array, Array]:
    """Corner points of one part; tangent points of its arcs come from `arc_data`.

    Parameters
    ----------
    section : Composition
        The cross-section at S stations.
    part : int
        Which part.
    planar : bool
        Bending in the vertical plane alone: the lowest and the highest level are enough.

    Returns
    -------
    y, z : ndarray, shape (C, S)
        Points [m]; NaN where nothing of the part is left.
    """
    if planar:
        low, high = section.extent[0][part], section.extent[1][part]
        middle = section.boxes[part].middle_y
        return np.stack((middle, middle)), np.stack((low, high))
    if not loses(section, part):
        outline = section.outlines[part]
        return outline.y.T, outline.z.T
    return _on_levels(section, part)


def loses(section: Composition, part: int) -> bool:
    """Whether anything is cut from a part or displaced by a later one."""
    return section.overlaps_itself or any(i == part for i, _ in section.relations)


def arc_data(section: Composition, part: int) -> Array:
    """Centre y, z, radius, start angle and angle turned through of the arcs that bow outwards, shape (5, E, S)."""
    outline = section.outlines[part]
    curved = np.flatnonzero(outline.bulge > 0.0)
    if not curved.size or loses(section, part):
        return np.empty((5, 0, outline.y.shape[0]))
    return np.stack([np.asarray(v).T for v in arcs(outline, curved)])


def _on_levels(section: Composition, part: int) -> tuple[Array, Array]:
    """Ends of the level cuts of a part, and their corners at the ends of each slab."""
    levels, r = section.levels, rule(section.levels.z.shape[-1])
    z_ends = np.stack((levels.edges[:, :-1], levels.edges[:, 1:]), axis=-1)
    y, z = [], []
    for side in (levels.widths.left[part], levels.widths.right[part]):
        # straight sides need their corners alone; some levels between stand for curved ones
        corners = np.stack((side @ r.left, side @ r.right), axis=-1)
        y += [side[..., ::_EVERY], corners]
        z += [levels.z[..., ::_EVERY], z_ends]
    points_y, points_z = np.concatenate(y, axis=-1), np.concatenate(z, axis=-1)
    points_z = np.where(np.isnan(points_y), np.nan, points_z)
    shape = (points_y.shape[0], -1)
    return points_y.reshape(shape).T, points_z.reshape(shape).T
