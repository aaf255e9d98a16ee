"""What is left of every part in the cross-section at one place, as polygons."""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member
from fishbelly.member.stage_section import in_stage
from fishbelly.sections.outlines import Outline

Array = NDArray[np.float64]

_TURN = np.pi / 24.0
"""Angle of an arc that one chord stands for [rad]."""


def part_shapes(member: Member, x: float, side: str = "right", stage: str | None = None) -> list[tuple[int, Any]]:
    """Polygons (y, z) [m] of the parts at x, cuts and later parts taken off, in the member's order.

    Parameters
    ----------
    member : Member
        The description.
    x : float
        Place [m].
    side : {"right", "left"}
        Which side of a break.
    stage : str, optional
        Stage of which they are; default the last.

    Returns
    -------
    list of (int, shapely geometry)
        Index of the part and its polygons; parts of which nothing is left are left out.
    """
    from shapely.ops import unary_union

    side = "left" if x >= member.length * (1.0 - 1e-12) else "right" if x <= member.length * 1e-12 else side
    placed = in_stage(member, stage).geometry.place(np.array([x]), side)
    whole = [_polygon(o) for o in placed.outlines]
    cuts = [(_polygon(c.outline), c.targets) for c in placed.cuts if c.mass]
    found = []
    for k, index in enumerate(placed.index):
        taken = [shape for shape, targets in cuts if k in targets] + whole[k + 1 :]
        rest = whole[k].difference(unary_union(taken)) if taken else whole[k]
        if not rest.is_empty and rest.area > 1e-9 * whole[k].area:
            found.append((index, rest))
    return found


def _polygon(outline: Outline) -> Any:
    """Turn the loops of an outline at its first station into polygons with holes."""
    from shapely.geometry import Polygon
    from shapely.ops import unary_union

    outer: list[Any] = []
    holes: list[Any] = []
    for first, stop in outline.loops:
        ring = _ring(outline, first, stop)
        y, z = ring[:, 0], ring[:, 1]
        turning = float(np.sum(y * np.roll(z, -1) - np.roll(y, -1) * z))
        (outer if turning > 0.0 else holes).append(Polygon(ring).buffer(0.0))
    shape = unary_union(outer)
    return shape.difference(unary_union(holes)) if holes else shape


def _ring(outline: Outline, first: int, stop: int) -> Array:
    """Points of one loop, arcs as chords."""
    y1, z1 = outline.ends
    points = []
    for e in range(first, stop):
        a = np.array([outline.y[0, e], outline.z[0, e]])
        b = np.array([y1[0, e], z1[0, e]])
        bulge = float(outline.bulge[e])
        points.append(a)
        if bulge:
            points += _arc(a, b, bulge)
    return np.array(points)


def _arc(a: Array, b: Array, bulge: float) -> list[Array]:
    """Points between the ends of an arc."""
    turn = 4.0 * np.arctan(bulge)
    offset = (1.0 - bulge**2) / (4.0 * bulge)
    middle = 0.5 * (a + b)
    centre = np.array([middle[0] - (b[1] - a[1]) * offset, middle[1] + (b[0] - a[0]) * offset])
    count = int(np.ceil(abs(turn) / _TURN))
    start = np.arctan2(a[1] - centre[1], a[0] - centre[0])
    radius = float(np.hypot(*(a - centre)))
    angles = start + turn * np.arange(1, count) / count
    return [centre + radius * np.array([np.cos(t), np.sin(t)]) for t in angles]
