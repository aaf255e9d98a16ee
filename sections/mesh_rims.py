"""The rims of a meshed section: which sides of elements are free, which hang together, what area a hole has."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections import elements
from fishbelly.sections.mesh_cells import Mesh
from fishbelly.sections.section_mesh import mapped

Array = NDArray[np.float64]
Index = NDArray[np.intp]

ENDS = np.array([[0, 1], [2, 3], [0, 2], [1, 3]])
"""Corners at the ends of the sides of an element."""


@dataclass(frozen=True, eq=False)
class Rims:
    """Rims of a mesh at T stations.

    Parameters
    ----------
    of_point : ndarray of int
        For every point of the mesh the rim it lies on; -1 inside, -2 on the outer rim of a piece.
    of_side : ndarray of int
        The same for every side.
    area : ndarray, shape (H, T)
        Area of the holes, the rims from 0 on [m2].
    """

    of_point: Index
    of_side: Index
    area: Array


def rims(m: Mesh, degree: int) -> Rims:
    """Find the rims of a mesh; its pieces may touch themselves nowhere."""
    points, count = int(m.corners.max()) + 1, int(m.sides.max()) + 1
    used = np.bincount(m.sides[m.sides >= 0], minlength=count)
    element, side = np.nonzero((m.sides >= 0) & (used[np.where(m.sides >= 0, m.sides, 0)] == 1))
    ends = m.corners[element[:, None], ENDS[side]]
    rim = np.arange(points)
    while True:
        # the lowest number spreads along the free sides
        least = rim[ends].min(axis=1)
        new = rim.copy()
        np.minimum.at(new, ends.ravel(), np.repeat(least, 2))
        new = new[new]
        if np.array_equal(new, rim):
            break
        rim = new
    names, which = np.unique(rim[ends[:, 0]], return_inverse=True)
    swept = _swept(m, element, side, degree)
    area = np.zeros((len(names), swept.shape[1]))
    np.add.at(area, which, swept)
    # holes are run round clockwise
    hole = area.mean(axis=1) < 0.0
    number = np.where(hole, np.cumsum(hole) - 1, -2)
    of_point, of_side = np.full(points, -1), np.full(count, -1)
    of_point[ends.ravel()] = np.repeat(number[which], 2)
    of_side[m.sides[element, side]] = number[which]
    return Rims(of_point, of_side, -area[hole])


def _swept(m: Mesh, element: Index, side: Index, degree: int) -> Array:
    """½∫(y dz - z dy) along free sides with the element to the left, shape (F, T)."""
    n = degree + 2
    y, z, y_x, y_y, z_x, z_y = mapped(m, *elements.side_places(degree), slice(None))
    w = elements.basis(degree).weights
    along_x = 0.5 * (y * z_x - z * y_x)
    along_y = 0.5 * (y * z_y - z * y_y)
    turn = (y_x * z_y - y_y * z_x)[:, 0]
    found = []
    for e, s in zip(element.tolist(), side.tolist(), strict=True):
        here = slice(s * n, (s + 1) * n)
        along = along_x if s < 2 else along_y
        sense = (1.0, -1.0, -1.0, 1.0)[s] * np.sign(turn[e].sum())
        found.append(sense * (along[e][:, here] @ w))
    return np.stack(found)
