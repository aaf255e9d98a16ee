"""Outlines and area moments of catalogue sections for tests, apart from the library's own geometry.

Corners are rounded with fine chords; moments are those of polygons. Lengths in whatever unit comes in.
"""

import math

import numpy as np
from numpy.typing import NDArray

from fishbelly.catalog.rolled import RolledSection

CHORDS = 512
Ring = NDArray[np.float64]


def rounded(points: list[tuple[float, float]], radii: list[float]) -> Ring:
    """Polygon with each corner rounded by its radius (0: sharp)."""
    corners = np.asarray(points, dtype=float)
    out: list[Ring] = []
    for i, (corner, radius) in enumerate(zip(corners, radii, strict=True)):
        if radius == 0:
            out.append(corner[None])
            continue
        before, after = corners[i - 1] - corner, corners[(i + 1) % len(corners)] - corner
        u, v = before / np.linalg.norm(before), after / np.linalg.norm(after)
        half = math.acos(np.clip(u @ v, -1, 1)) / 2
        centre = corner + (u + v) / np.linalg.norm(u + v) * radius / math.sin(half)
        start, end = (
            corner + u * radius / math.tan(half) - centre,
            corner + v * radius / math.tan(half) - centre,
        )
        first = math.atan2(start[1], start[0])
        swept = (math.atan2(end[1], end[0]) - first + math.pi) % (2 * math.pi) - math.pi
        angles = first + swept * np.linspace(0, 1, CHORDS + 1)
        out.append(centre + radius * np.column_stack((np.cos(angles), np.sin(angles))))
    return np.concatenate(out)


def _i(d: dict[str, float]) -> list[Ring]:
    x, w, z, f, r = d["width"] / 2, d["web"] / 2, d["depth"] / 2, d["depth"] / 2 - d["flange"], d["radius"]
    points = [(-x, -z), (x, -z), (x, -f), (w, -f), (w, f), (x, f)]
    points += [(-a, -b) for a, b in points]
    return [rounded(points, [0, 0, 0, r, r, 0] * 2)]


def _channel(d: dict[str, float]) -> list[Ring]:
    b, w, z = d["width"], d["web"], d["depth"] / 2

    def inner(y: float) -> float:
        return z - d["flange"] - d["slope"] * (d["flange_at"] - y)

    r, toe = d["radius"], d["toe_radius"]
    points = [(0, -z), (b, -z), (b, -inner(b)), (w, -inner(w)), (w, inner(w)), (b, inner(b)), (b, z), (0, z)]
    return [rounded(points, [0, 0, toe, r, r, toe, 0, 0])]


def _angle(d: dict[str, float]) -> list[Ring]:
    h, b, t, r, toe = d["depth"], d["width"], d["thickness"], d["radius"], d["toe_radius"]
    return [rounded([(0, 0), (b, 0), (b, t), (t, t), (t, h), (0, h)], [0, 0, toe, r, toe, 0])]


def _tee(d: dict[str, float]) -> list[Ring]:
    h, x, s = d["depth"], d["width"] / 2, d["slope"]

    def under(y: float) -> float:
        return d["flange"] + s * (d["flange_at"] - y)

    def half_web(depth: float) -> float:
        return d["web"] / 2 + s * (d["web_at"] - depth)

    y = d["web"] / 2
    for _ in range(60):
        y = half_web(under(y))
    right = [(half_web(h), -h), (y, -under(y)), (x, -under(x)), (x, 0.0)]
    points = right + [(-a, b) for a, b in reversed(right)]
    radii = [d["web_toe_radius"], d["radius"], d["toe_radius"], 0.0]
    return [rounded(points, radii + radii[::-1])]


def _rectangle(width: float, depth: float, radius: float) -> Ring:
    x, z = width / 2, depth / 2
    return rounded([(-x, -z), (x, -z), (x, z), (-x, z)], [radius] * 4)


def _box(d: dict[str, float]) -> list[Ring]:
    t = 2 * d["wall"]
    return [
        _rectangle(d["width"], d["depth"], d["radius"]),
        _rectangle(d["width"] - t, d["depth"] - t, d["inner_radius"])[::-1],
    ]


def _tube(d: dict[str, float]) -> list[Ring]:
    angles = np.linspace(0, 2 * math.pi, 20001)[:-1]
    circle = np.column_stack((np.cos(angles), np.sin(angles))) / 2
    return [circle * d["diameter"], circle[::-1] * (d["diameter"] - 2 * d["wall"])]


def outline(section: RolledSection) -> list[Ring]:
    """Rings of a section, anticlockwise outside and clockwise inside."""
    makers = {"I": _i, "channel": _channel, "angle": _angle, "tee": _tee, "box": _box, "tube": _tube}
    if section.kind == "rectangle":
        return [_rectangle(section.dimensions["width"], section.dimensions["depth"], 0)]
    return makers[section.kind](section.dimensions)


def moments(rings: list[Ring]) -> dict[str, float]:
    """A, centroid y and z, Iy (about the horizontal axis), Iz, Iyz, about the centroid."""
    total = np.zeros(6)
    for ring in rings:
        y, z = ring.T
        y1, z1 = np.roll(ring, -1, axis=0).T
        cross = y * z1 - y1 * z
        total += [
            cross.sum() / 2,
            (cross * (y + y1)).sum() / 6,
            (cross * (z + z1)).sum() / 6,
            (cross * (z * z + z * z1 + z1 * z1)).sum() / 12,
            (cross * (y * y + y * y1 + y1 * y1)).sum() / 12,
            (cross * (y * z1 + 2 * y * z + 2 * y1 * z1 + y1 * z)).sum() / 24,
        ]
    area, s_y, s_z, i_y, i_z, i_yz = (float(v) for v in total)
    y_c, z_c = s_y / area, s_z / area
    return {
        "A": area,
        "y": y_c,
        "z": z_c,
        "Iy": i_y - area * z_c**2,
        "Iz": i_z - area * y_c**2,
        "Iyz": i_yz - area * y_c * z_c,
    }


def half_of_last_digit(printed: str) -> float:
    """Half a unit of the last digit that counts: final zeros of a whole number do not."""
    if "." in printed:
        return 0.5 * 10.0 ** -len(printed.split(".")[1])
    return 0.5 * 10.0 ** (len(printed) - len(printed.rstrip("0")))
