"""Area moments of outlines, exact for straight and circular edges (Green's theorem along the outline).

Each edge is integrated by points: three Gauss points on a straight edge are exact for second moments, twenty-four
Chebyshev points on an arc of a quarter circle reach 1e-15. Moments are formed about a point beside the outline and
then about its own centroid, never about a far axis.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.chebyshev import rule
from fishbelly.sections.outlines import Outline, arcs

Array = NDArray[np.float64]

_LINE = (np.array([-np.sqrt(0.6), 0.0, np.sqrt(0.6)]), np.array([5.0, 8.0, 5.0]) / 9.0)
_ARC_POINTS = 24


@dataclass(frozen=True, eq=False)
class AreaMoments:
    """Area and moments, stacked: every field has the same shape, such as (S,) or (P, S).

    Parameters
    ----------
    area : ndarray
        Area [m2].
    y, z : ndarray
        Centroid [m]; where the area is zero, the point about which moments were formed.
    zz, yy, yz : ndarray
        ∫z² dA, ∫y² dA and ∫yz dA about that centroid [m4].
    """

    area: Array
    y: Array
    z: Array
    zz: Array
    yy: Array
    yz: Array

    def times(self, factor: Array | float) -> AreaMoments:
        """Return the moments weighted by a factor, such as E or density; the centroid stays."""
        return AreaMoments(self.area * factor, self.y, self.z, self.zz * factor, self.yy * factor, self.yz * factor)

    def at(self, index: object) -> AreaMoments:
        """Return the moments at an index of the stack."""
        return AreaMoments(*(getattr(self, f)[index] for f in ("area", "y", "z", "zz", "yy", "yz")))

    def total(self, axis: int = 0) -> AreaMoments:
        """Return the moments of all members of one axis of the stack together, about their common centroid."""
        area = self.area.sum(axis=axis)
        weight = np.where(area == 0.0, 1.0, area)
        # centroid relative to a near point keeps the digits of a section far from the datum
        y0, z0 = self.y.mean(axis=axis), self.z.mean(axis=axis)
        dy0, dz0 = self.y - np.expand_dims(y0, axis), self.z - np.expand_dims(z0, axis)
        y = y0 + (self.area * dy0).sum(axis=axis) / weight
        z = z0 + (self.area * dz0).sum(axis=axis) / weight
        dy, dz = self.y - np.expand_dims(y, axis), self.z - np.expand_dims(z, axis)
        return AreaMoments(
            area,
            y,
            z,
            (self.zz + self.area * dz**2).sum(axis=axis),
            (self.yy + self.area * dy**2).sum(axis=axis),
            (self.yz + self.area * dy * dz).sum(axis=axis),
        )


def area_moments(outline: Outline) -> AreaMoments:
    """Area moments of an outline at every station.

    Parameters
    ----------
    outline : Outline
        Loops at S stations.

    Returns
    -------
    AreaMoments
        Fields of shape (S,).
    """
    y0, z0 = outline.y.mean(axis=1), outline.z.mean(axis=1)
    local = outline.moved(-y0, -z0)
    total = _raw(local)
    area = total[0]
    safe = np.where(area == 0.0, 1.0, area)
    y, z = total[1] / safe, total[2] / safe
    return AreaMoments(area, y0 + y, z0 + z, total[3] - area * z * z, total[4] - area * y * y, total[5] - area * y * z)


def _raw(outline: Outline) -> Array:
    """Return A, ∫y, ∫z, ∫z², ∫y², ∫yz about the origin, shape (6, S)."""
    nxt_y, nxt_z = outline.ends
    lines = np.flatnonzero(outline.bulge == 0.0)
    curved = np.flatnonzero(outline.bulge)
    result = np.zeros((6, outline.y.shape[0]))
    if lines.size:
        t = 0.5 * (1.0 + _LINE[0])
        a, b = outline.y[:, lines, None], outline.z[:, lines, None]
        dy, dz = nxt_y[:, lines, None] - a, nxt_z[:, lines, None] - b
        result += _green(a + t * dy, b + t * dz, 0.5 * _LINE[1] * dz)
    if curved.size:
        y_c, z_c, r, start, turn = (v[..., None] for v in arcs(outline, curved))
        arc_rule = rule(_ARC_POINTS)
        angle = start + 0.5 * turn * (1.0 + arc_rule.points)
        cos, sin = np.cos(angle), np.sin(angle)
        result += _green(y_c + r * cos, z_c + r * sin, 0.5 * arc_rule.weights * turn * r * cos)
    return result


def _green(y: Array, z: Array, dz: Array) -> Array:
    """Sum ∮ F dz with ∂F/∂y the integrand, over edges and Gauss points; arrays of shape (S, E, g)."""
    half = 0.5 * y * y * dz
    terms = (y * dz, half, y * z * dz, y * z * z * dz, y * y * y / 3.0 * dz, half * z)
    return np.stack([np.einsum("seg->s", term) for term in terms])
