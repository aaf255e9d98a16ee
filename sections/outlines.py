"""Named outlines as closed loops of straight and circular edges, stacked over stations.

An `Outline` holds the corner points of S stations at once; row s is the outline at station s. Arcs are kept
exactly, as the *bulge* of an edge: the tangent of a quarter of the angle it turns through, positive where
the edge bows outwards of a counter-clockwise loop, zero for a straight edge.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Dimensions = Mapping[str, Array]

QUARTER = float(np.tan(np.pi / 8.0))
"""Bulge of a quarter circle."""


@dataclass(frozen=True, eq=False)
class Outline:
    """Closed loops at S stations, E edges in all.

    Parameters
    ----------
    y, z : ndarray, shape (S, E)
        Start point of each edge [m]; an edge ends where the next one of its loop starts.
    bulge : ndarray, shape (E,)
        Tangent of a quarter of the angle each edge turns through.
    loops : tuple of (int, int)
        First and one past the last edge of each loop; outer loops run counter-clockwise, holes clockwise.
    """

    y: Array
    z: Array
    bulge: Array
    loops: tuple[tuple[int, int], ...]

    @property
    def following(self) -> NDArray[np.intp]:
        """Index of the edge that starts where each edge ends, shape (E,)."""
        index = np.arange(1, self.bulge.size + 1)
        for first, stop in self.loops:
            index[stop - 1] = first
        return index

    @property
    def ends(self) -> tuple[Array, Array]:
        """End points (y, z) of the edges, each shape (S, E)."""
        nxt = self.following
        return self.y[:, nxt], self.z[:, nxt]

    def moved(self, dy: Array | float, dz: Array | float) -> Outline:
        """Return the outline shifted by (dy, dz) [m], scalars or shape (S,)."""
        shift_y, shift_z = np.reshape(dy, (-1, 1)), np.reshape(dz, (-1, 1))
        return Outline(self.y + shift_y, self.z + shift_z, self.bulge, self.loops)

    def turned(self, angle: float) -> Outline:
        """Return the outline turned anticlockwise about the origin [rad]."""
        if angle == 0.0:
            return self
        c, s = np.cos(angle), np.sin(angle)
        quarter = round(angle / (0.5 * np.pi))
        if abs(angle - quarter * 0.5 * np.pi) < 1e-12:
            c, s = [(1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0)][quarter % 4]
        return Outline(c * self.y - s * self.z, s * self.y + c * self.z, self.bulge, self.loops)

    def mirrored(self, about: Array | float = 0.0) -> Outline:
        """Return the outline flipped left-right about the vertical line y = `about` [m], scalar or shape (S,)."""
        y, z = np.empty_like(self.y), np.empty_like(self.z)
        bulge = np.empty_like(self.bulge)
        for first, stop in self.loops:
            # the loop is run through backwards, so that it keeps its sense of turning
            order = np.concatenate(([first], np.arange(stop - 1, first, -1)))
            y[:, first:stop] = 2.0 * np.reshape(about, (-1, 1)) - self.y[:, order]
            z[:, first:stop] = self.z[:, order]
            bulge[first:stop] = self.bulge[np.arange(stop - 1, first - 1, -1)]
        return Outline(y, z, bulge, self.loops)

    def joined(self, other: Outline) -> Outline:
        """Return this outline and another as one."""
        n = self.bulge.size
        loops = self.loops + tuple((a + n, b + n) for a, b in other.loops)
        y, z = np.hstack((self.y, other.y)), np.hstack((self.z, other.z))
        return Outline(y, z, np.concatenate((self.bulge, other.bulge)), loops)

    def bounds(self) -> tuple[Array, Array, Array, Array]:
        """Bounding box: left, bottom, right, top [m], each shape (S,), bows of arcs included."""
        left, right = self.y.min(axis=1), self.y.max(axis=1)
        bottom, top = self.z.min(axis=1), self.z.max(axis=1)
        curved = np.flatnonzero(self.bulge)
        if curved.size:
            lo_y, hi_y, lo_z, hi_z = edge_boxes(self, curved)
            left, right = np.minimum(left, lo_y.min(axis=1)), np.maximum(right, hi_y.max(axis=1))
            bottom, top = np.minimum(bottom, lo_z.min(axis=1)), np.maximum(top, hi_z.max(axis=1))
        return left, bottom, right, top


def arcs(outline: Outline, edges: NDArray[np.intp]) -> tuple[Array, Array, Array, Array, Array]:
    """Centre, radius, start angle and turned angle of curved edges.

    Returns
    -------
    y_c, z_c, radius, start, turn : ndarray, shape (S, len(edges))
        Centre and radius [m], angle of the start point and angle turned through (with sign) [rad].
    """
    y1, z1 = outline.ends
    y0, z0, y1, z1 = outline.y[:, edges], outline.z[:, edges], y1[:, edges], z1[:, edges]
    bulge = outline.bulge[edges]
    offset = (1.0 - bulge**2) / (4.0 * bulge)
    y_c = 0.5 * (y0 + y1) - (z1 - z0) * offset
    z_c = 0.5 * (z0 + z1) + (y1 - y0) * offset
    radius = np.hypot(y0 - y_c, z0 - z_c)
    start = np.arctan2(z0 - z_c, y0 - y_c)
    return y_c, z_c, radius, start, np.broadcast_to(4.0 * np.arctan(bulge), radius.shape)


def edge_boxes(outline: Outline, edges: NDArray[np.intp]) -> tuple[Array, Array, Array, Array]:
    """Bounding box of each edge: lowest y, highest y, lowest z, highest z, each shape (S, len(edges))."""
    y1, z1 = outline.ends
    y0, z0, y1, z1 = outline.y[:, edges], outline.z[:, edges], y1[:, edges], z1[:, edges]
    lo_y, hi_y = np.minimum(y0, y1), np.maximum(y0, y1)
    lo_z, hi_z = np.minimum(z0, z1), np.maximum(z0, z1)
    curved = np.flatnonzero(outline.bulge[edges])
    if curved.size:
        y_c, z_c, r, start, turn = arcs(outline, edges[curved])
        low = np.minimum(start, start + turn)
        for k, (lo, hi, centre) in enumerate(
            ((None, hi_y, y_c), (None, hi_z, z_c), (lo_y, None, y_c), (lo_z, None, z_c))
        ):
            # the arc passes the direction k * 90 degrees, seen from its centre
            passes = np.mod(0.5 * np.pi * k - low, 2.0 * np.pi) < np.abs(turn)
            if hi is not None:
                hi[:, curved] = np.where(passes, np.maximum(hi[:, curved], centre + r), hi[:, curved])
            if lo is not None:
                lo[:, curved] = np.where(passes, np.minimum(lo[:, curved], centre - r), lo[:, curved])
    return lo_y, hi_y, lo_z, hi_z


def _loop(points: list[tuple[Array, Array]], bulge: list[float]) -> Outline:
    y = np.stack(np.broadcast_arrays(*[p[0] for p in points]), axis=-1)
    z = np.stack(np.broadcast_arrays(*[p[1] for p in points]), axis=-1)
    y, z = np.broadcast_arrays(y, z)
    return Outline(np.array(y, float), np.array(z, float), np.array(bulge), ((0, len(points)),))


def _flip(outline: Outline) -> Outline:
    y, z, bulge = outline.y.copy(), outline.z.copy(), outline.bulge.copy()
    for first, stop in outline.loops:
        order = np.concatenate(([first], np.arange(stop - 1, first, -1)))
        y[:, first:stop], z[:, first:stop] = outline.y[:, order], outline.z[:, order]
        bulge[first:stop] = -outline.bulge[np.arange(stop - 1, first - 1, -1)]
    return Outline(y, z, bulge, outline.loops)


def rounded(corners: list[tuple[Array, Array]], radii: list[Array | float]) -> Outline:
    """Return a counter-clockwise loop with its corners rounded, at convex and re-entrant corners alike.

    Parameters
    ----------
    corners : list of (y, z)
        Corner points [m], scalars or shape (S,).
    radii : list
        Radius at each corner [m]; zero for a sharp one at every station.
    """
    points: list[tuple[Array, Array]] = []
    bulge: list[float] = []
    n = len(corners)
    for k, (y, z) in enumerate(corners):
        if not np.any(radii[k]):
            points.append((np.asarray(y, float), np.asarray(z, float)))
            bulge.append(0.0)
            continue
        (ya, za), (yb, zb) = corners[k - 1], corners[(k + 1) % n]
        ua, va, ub, vb = ya - y, za - z, yb - y, zb - z
        la, lb = np.hypot(ua, va), np.hypot(ub, vb)
        cross = (-ua * vb + va * ub) / (la * lb)
        turn = np.arctan2(cross, -(ua * ub + va * vb) / (la * lb))
        reach = radii[k] * np.abs(np.tan(0.5 * turn))
        points.append((y + ua / la * reach, z + va / la * reach))
        points.append((y + ub / lb * reach, z + vb / lb * reach))
        bulge += [float(np.tan(0.25 * np.ravel(turn)[0])), 0.0]
    return _loop(points, bulge)


def rectangle(d: Dimensions) -> Outline:
    """Rectangle: width, depth."""
    b, h = 0.5 * d["width"], 0.5 * d["depth"]
    return _loop([(-b, -h), (b, -h), (b, h), (-b, h)], [0.0] * 4)


def _circle(radius: Array) -> Outline:
    zero = np.zeros_like(radius)
    return _loop([(radius, zero), (zero, radius), (-radius, zero), (zero, -radius)], [QUARTER] * 4)


def circle(d: Dimensions) -> Outline:
    """Circle: diameter."""
    return _circle(0.5 * d["diameter"])


def tube(d: Dimensions) -> Outline:
    """Round tube: diameter outside, wall."""
    outer = 0.5 * d["diameter"]
    return _circle(outer).joined(_flip(_circle(outer - d["wall"])))


def _rounded_rectangle(width: Array, depth: Array, radius: Array) -> Outline:
    b, h = 0.5 * width, 0.5 * depth
    return rounded([(-b, -h), (b, -h), (b, h), (-b, h)], [radius] * 4)


def both_flanges(d: Dimensions) -> tuple[Array, Array]:
    """Thickness of the top and of the bottom flange: one `flange`, or top_flange and bottom_flange beside it."""
    return d.get("top_flange", d["flange"]), d.get("bottom_flange", d["flange"])


def box(d: Dimensions) -> Outline:
    """Box: width, depth, web (each side wall), flange (see `both_flanges`), radius outside, inner_radius."""
    outer = _rounded_rectangle(d["width"], d["depth"], d["radius"])
    top, bottom = both_flanges(d)
    inner = _rounded_rectangle(d["width"] - 2.0 * d["web"], d["depth"] - (top + bottom), d["inner_radius"])
    if top is not bottom:
        inner = inner.moved(0.0, 0.5 * (bottom - top))
    return outer.joined(_flip(inner))


def i_shape(d: Dimensions) -> Outline:
    """I: depth, web, top_width, top_flange, bottom_width, bottom_flange, radius of the four fillets."""
    t, b, w, h = 0.5 * d["top_width"], 0.5 * d["bottom_width"], 0.5 * d["web"], 0.5 * d["depth"]
    low, high, r = -h + d["bottom_flange"], h - d["top_flange"], d["radius"]
    right = [(b, -h), (b, low), (w, low), (w, high), (t, high), (t, h)]
    left = [(-t, h), (-t, high), (-w, high), (-w, low), (-b, low), (-b, -h)]
    return rounded(right + left, [0.0, 0.0, r, r, 0.0, 0.0] * 2)


def tee(d: Dimensions) -> Outline:
    """Tee, flange on top: depth, width, web, flange, radius; rolled ones also slope, toe_radius, web_toe_radius.

    With a slope the under face of the flange climbs towards its toes and the faces of the web draw together towards
    its foot; the flange has its thickness at the distance flange_at from the middle of the web, the web has its at
    the distance web_at from the outer face of the flange.
    """
    b, h = 0.5 * d["width"], d["depth"]
    zero = np.zeros_like(b)
    slope, toe, foot = (d.get(k, zero) for k in ("slope", "toe_radius", "web_toe_radius"))
    flange_at, web_at = d.get("flange_at", zero), d.get("web_at", zero)
    # the faces meet where y = web / 2 + slope (web_at - t) and t = flange + slope (flange_at - y)
    y = 0.5 * d["web"] + slope * (web_at - d["flange"]) - slope**2 * flange_at
    y = y / (1.0 - slope**2)
    root = 0.5 * h - d["flange"] - slope * (flange_at - y)
    tip = 0.5 * h - d["flange"] - slope * (flange_at - b)
    w = 0.5 * d["web"] + slope * (web_at - h)
    low, top = -0.5 * h, 0.5 * h
    corners = [(-w, low), (w, low), (y, root), (b, tip), (b, top), (-b, top), (-b, tip), (-y, root)]
    return rounded(corners, [foot, foot, d["radius"], toe, 0.0, 0.0, toe, d["radius"]])


def channel(d: Dimensions) -> Outline:
    """Channel, web on the left: depth, width, web, flange (see `both_flanges`), radius, toe_radius, slope, flange_at.

    With a slope the inner faces of the flanges climb towards the web; the flange has its thickness at
    the distance flange_at from the back of the web.
    """
    h, b, w = 0.5 * d["depth"], d["width"], d["web"]
    upper, lower = both_flanges(d)
    thinner, thicker = d["slope"] * (b - d["flange_at"]), d["slope"] * (d["flange_at"] - w)
    zero = np.zeros_like(b)
    corners = [
        (zero, -h),
        (b, -h),
        (b, -h + (lower - thinner)),
        (w, -h + (lower + thicker)),
        (w, h - (upper + thicker)),
        (b, h - (upper - thinner)),
        (b, h),
        (zero, h),
    ]
    r, s = d["radius"], d["toe_radius"]
    return rounded(corners, [0.0, 0.0, s, r, r, s, 0.0, 0.0])


def angle(d: Dimensions) -> Outline:
    """Angle, heel at the bottom left: depth, width, web (upright leg), flange (level leg), radius, toe_radius."""
    h, b, w, f = d["depth"], d["width"], d["web"], d["flange"]
    zero = np.zeros_like(b)
    corners = [(zero, zero), (b, zero), (b, f), (w, f), (w, h), (zero, h)]
    return rounded(corners, [0.0, 0.0, d["toe_radius"], d["radius"], d["toe_radius"], 0.0])


def trapezoid(d: Dimensions) -> Outline:
    """Symmetric trapezoid: top_width, bottom_width, depth."""
    t, b, h = 0.5 * d["top_width"], 0.5 * d["bottom_width"], 0.5 * d["depth"]
    return _loop([(-b, -h), (b, -h), (t, h), (-t, h)], [0.0] * 4)


def regular_polygon(d: Dimensions) -> Outline:
    """Regular polygon standing on a flat: sides, across_flats (twice the inscribed radius), wall (0: solid)."""
    sides = round(float(np.ravel(d["sides"])[0]))
    outer = _regular(sides, 0.5 * d["across_flats"])
    if not np.any(d["wall"]):
        return outer
    return outer.joined(_flip(_regular(sides, 0.5 * d["across_flats"] - d["wall"])))


def _regular(sides: int, inscribed: Array) -> Outline:
    corner = inscribed / np.cos(np.pi / sides)
    angles = -0.5 * np.pi + np.pi / sides * (1.0 + 2.0 * np.arange(sides))
    return _loop([(corner * np.cos(a), corner * np.sin(a)) for a in angles], [0.0] * sides)


def bars(d: Dimensions) -> Outline:
    """Row of round bars: count, diameter, spacing between their middles."""
    count = round(float(np.ravel(d["count"])[0]))
    one = _circle(0.5 * d["diameter"])
    row = one.moved(-0.5 * (count - 1) * d["spacing"], 0.0)
    for k in range(1, count):
        row = row.joined(one.moved((k - 0.5 * (count - 1)) * d["spacing"], 0.0))
    return row


def polygon(
    points: tuple[tuple[float, float], ...], holes: tuple[tuple[tuple[float, float], ...], ...], stations: int
) -> Outline:
    """Return a polygon with holes, the same at every station; loops may be given in either sense."""
    result: Outline | None = None
    for k, loop in enumerate((points, *holes)):
        corners = np.array(loop, dtype=float)
        y, z = corners[:, 0], corners[:, 1]
        anticlockwise = np.sum(y * np.roll(z, -1) - np.roll(y, -1) * z) > 0.0
        if anticlockwise != (k == 0):
            corners = corners[::-1]
        shape = (stations, len(loop))
        one = Outline(
            np.broadcast_to(corners[:, 0], shape).copy(),
            np.broadcast_to(corners[:, 1], shape).copy(),
            np.zeros(len(loop)),
            ((0, len(loop)),),
        )
        result = one if result is None else result.joined(one)
    assert result is not None
    return result


OUTLINES: Mapping[str, Callable[[Dimensions], Outline]] = {
    "rectangle": rectangle,
    "circle": circle,
    "tube": tube,
    "box": box,
    "I": i_shape,
    "tee": tee,
    "channel": channel,
    "angle": angle,
    "trapezoid": trapezoid,
    "regular polygon": regular_polygon,
    "bars": bars,
}
"""Outlines by the name a job uses; ``"polygon"`` is made by `polygon`."""
