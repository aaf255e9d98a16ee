"""Places along a tapered stretch where outlines start or stop crossing each other.

There the section's moments are smooth on either side but not across. A crossing begins where a corner of one
outline comes to lie on an edge of the other: the root of a signed distance that is smooth along the stretch,
found on its Chebyshev interpolant without sampling the section again.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.geometry import Geometry
from fishbelly.member.panels import POINTS, Panels
from fishbelly.sections.chebyshev import rule
from fishbelly.sections.outlines import Outline, arcs
from fishbelly.sections.overlap import relation

Array = NDArray[np.float64]


def crossing_places(geometry: Geometry, grid: Panels) -> list[float]:
    """Places [m] inside panels where a corner of an outline passes an edge of another that it overlaps."""
    a, b = grid.a, grid.b
    member = geometry.member
    if len(member.parts) == 1 and not member.notches and not member.openings:
        return []
    places: list[float] = []
    for k in range(a.size):
        placed = geometry.place(grid.x[k], "right", geometry.present(float(0.5 * (a[k] + b[k]))))
        for first, second in _overlapping(placed.outlines, [(c.outline, c.targets) for c in placed.cuts]):
            for s in (*_roots(first, second), *_roots(second, first)):
                places.append(float(grid.place(np.array(k), np.array(s))))
    return places


def _overlapping(
    parts: tuple[Outline, ...], cuts: list[tuple[Outline, tuple[int, ...]]]
) -> list[tuple[Outline, Outline]]:
    pairs = [(p, q) for k, p in enumerate(parts) for q in parts[k + 1 :]]
    pairs += [(parts[t], outline) for outline, targets in cuts for t in targets]
    return [(p, q) for p, q in pairs if relation(p, q) == "mixed" and not (_still(p) and _still(q))]


def _still(outline: Outline) -> bool:
    return bool(np.ptp(outline.y, axis=0).max() == 0.0 and np.ptp(outline.z, axis=0).max() == 0.0)


def _roots(corners: Outline, edges: Outline) -> list[float]:
    """Local coordinates where a corner of one outline passes the line or circle of an edge of the other."""
    ends_y, ends_z = edges.ends
    py, pz = corners.y[:, :, None], corners.z[:, :, None]
    ey, ez = (ends_y - edges.y)[:, None, :], (ends_z - edges.z)[:, None, :]
    length = np.maximum(np.hypot(ey, ez), 1e-300)
    distance = ((py - edges.y[:, None, :]) * ez - (pz - edges.z[:, None, :]) * ey) / length
    curved = np.flatnonzero(edges.bulge)
    if curved.size:
        y_c, z_c, r, _, _ = arcs(edges, curved)
        distance[:, :, curved] = np.hypot(py - y_c[:, None, :], pz - z_c[:, None, :]) - r[:, None, :]
    along = ((py - edges.y[:, None, :]) * ey + (pz - edges.z[:, None, :]) * ez) / length**2
    flat, along = (v.reshape(v.shape[0], -1) for v in (distance, along))
    size = np.abs(flat).max(axis=0)
    # a corner that stays on the line of an edge, or never changes side, marks nothing
    moves = (flat.min(axis=0) < -1e-9 * size) & (flat.max(axis=0) > 1e-9 * size)
    found = []
    for k in np.flatnonzero(moves):
        for root in _sign_changes(flat[:, k]):
            # only where the corner passes the edge itself, not the line beyond it
            if -0.1 < float((rule(POINTS).basis(np.array([root])) @ along[:, k])[0]) < 1.1:
                found.append(root)
    return found


def _sign_changes(values: Array) -> list[float]:
    r = rule(POINTS)
    found = []
    for k in np.flatnonzero(np.diff(np.sign(values)) != 0.0):
        low, high = r.points[k], r.points[k + 1]
        start = values[k]
        for _ in range(60):
            middle = 0.5 * (low + high)
            value = float((r.basis(np.array([middle])) @ values)[0])
            if value * start > 0.0:
                low = middle
            else:
                high = middle
        found.append(0.5 * (low + high))
    return found
