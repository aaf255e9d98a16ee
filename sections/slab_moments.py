"""Net area moments of parts that cross: each boundary piece integrated exactly between the events of the section.

Between two neighbouring events the order of the pieces along a level line does not change, so one level in the
middle tells who owns the stretch on either side of each piece. A piece then adds its integral to the owner on
its left and takes it from the owner on its right (Green's theorem, piece by piece).
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.area_moments import AreaMoments
from fishbelly.sections.chebyshev import rule
from fishbelly.sections.level_cuts import Pieces, owners

Array = NDArray[np.float64]

_LINE = (np.array([-np.sqrt(0.6), 0.0, np.sqrt(0.6)]), np.array([5.0, 8.0, 5.0]) / 9.0)
_ARC_POINTS = 32


def slab_moments(p: Pieces, edges: Array, parts: int, targets: Sequence[Sequence[int]]) -> AreaMoments:
    """Net moments of every part, shape (P, S).

    Parameters
    ----------
    p : Pieces
        Boundary pieces of parts, then cuts.
    edges : ndarray, shape (S, K + 1)
        Levels of the events [m].
    parts : int
        How many owners are parts.
    targets : sequence
        For each cut, the parts it is taken from.
    """
    z0, y0 = 0.5 * (edges[:, 0] + edges[:, -1]), p.y0.mean(axis=1)
    middle = 0.5 * (edges[:, 1:] + edges[:, :-1])
    order, last, met = owners(p, middle, parts, targets)
    raw = np.take_along_axis(_integrals(p, edges, y0, z0), order[None], axis=3)
    before = np.concatenate((np.full((*last.shape[:2], 1), -1), last[:, :, :-1]), axis=2)
    sums = np.zeros((6, parts, edges.shape[0]))
    for k in range(parts):
        sign = np.where(met, (before == k).astype(float) - (last == k), 0.0)
        sums[:, k] = np.where(sign == 0.0, 0.0, sign * raw).sum(axis=(2, 3))
    area, sy, sz, szz, syy, syz = sums
    safe = np.where(area == 0.0, 1.0, area)
    y, z = sy / safe, sz / safe
    return AreaMoments(area, y0 + y, z0 + z, szz - area * z * z, syy - area * y * y, syz - area * y * z)


def _integrals(p: Pieces, edges: Array, y0: Array, z0: Array) -> Array:
    """∫ y, y²/2, yz, yz², y³/3, y²z/2 dz of every piece over every slab, about (y0, z0), shape (6, S, K, E)."""
    shape = (6, edges.shape[0], edges.shape[1] - 1, p.owner.size)
    result = np.zeros(shape)
    low, high = edges[:, :-1, None], edges[:, 1:, None]
    lines, curved = np.flatnonzero(p.branch == 0.0), np.flatnonzero(p.branch)
    if lines.size:
        half = 0.5 * (high - low)[..., None]
        z = 0.5 * (high + low)[..., None] + half * _LINE[0]
        y = p.y0[:, None, lines, None] + p.slope[:, None, lines, None] * (z - p.z0[:, None, lines, None])
        z = np.broadcast_to(z, y.shape)
        result[..., lines] = _terms(y - y0[:, None, None, None], z - z0[:, None, None, None], half * _LINE[1])
    if curved.size:
        arc_rule = rule(_ARC_POINTS)
        radius, centre = p.radius[:, None, curved], p.z0[:, None, curved]
        ends = [np.arcsin(np.clip((v - centre) / radius, -1.0, 1.0)) for v in (low, high)]
        half = 0.5 * (ends[1] - ends[0])[..., None]
        angle = 0.5 * (ends[1] + ends[0])[..., None] + half * arc_rule.points
        cos, sin = radius[..., None] * np.cos(angle), radius[..., None] * np.sin(angle)
        y = p.y0[:, None, curved, None] + p.branch[curved][:, None] * cos
        z = centre[..., None] + sin
        weight = half * arc_rule.weights * cos
        result[..., curved] = _terms(y - y0[:, None, None, None], z - z0[:, None, None, None], weight)
    return result


def _terms(y: Array, z: Array, weight: Array) -> Array:
    half = 0.5 * y * y
    terms = (y, half, y * z, y * z * z, y * y * y / 3.0, half * z)
    return np.stack([(t * weight).sum(axis=-1) for t in terms])
