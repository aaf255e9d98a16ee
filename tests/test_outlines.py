"""Named outlines: areas, centroids and second moments against closed forms, arcs included."""

from __future__ import annotations

import math

import numpy as np
import pytest
from common import CLOSED, check_close

from fishbelly.sections.area_moments import AreaMoments, area_moments
from fishbelly.sections.outlines import OUTLINES, Outline, polygon

STATIONS = 3


def outline(kind: str, **dimensions: float) -> Outline:
    """An outline at three stations, its dimensions growing by the station."""
    scale = np.array([1.0, 1.5, 4.0])
    bare = {"count", "sides", "slope"}
    return OUTLINES[kind]({k: np.full(3, float(v)) if k in bare else v * scale for k, v in dimensions.items()})


def moments(kind: str, **dimensions: float) -> AreaMoments:
    """Moments at the first station, after checking that the others scale by length squared and to the fourth."""
    m = area_moments(outline(kind, **dimensions))
    for k, s in ((1, 1.5), (2, 4.0)):
        check_close(m.area[k], m.area[0] * s**2, CLOSED)
        check_close(m.zz[k], m.zz[0] * s**4, CLOSED)
        check_close(m.yy[k], m.yy[0] * s**4, CLOSED)
    return m.at(0)


def check(m: AreaMoments, area: float, zz: float, yy: float, y: float = 0.0, z: float = 0.0, yz: float = 0.0) -> None:
    check_close(float(m.area), area, CLOSED)
    check_close(float(m.zz), zz, CLOSED)
    check_close(float(m.yy), yy, CLOSED)
    size = math.sqrt(area)
    check_close(float(m.y), y, CLOSED, size)
    check_close(float(m.z), z, CLOSED, size)
    check_close(float(m.yz), yz, CLOSED, area * area)


def sum_of_rectangles(*pieces: tuple[float, float, float, float]) -> tuple[float, float, float, float, float, float]:
    """Area, zz, yy, y, z, yz of rectangles (left, bottom, right, top), holes with left and right exchanged."""
    rows = [((r - b_) * (t - lo), 0.5 * (b_ + r), 0.5 * (lo + t), r - b_, t - lo) for b_, lo, r, t in pieces]
    area = sum(a for a, *_ in rows)
    y, z = sum(r[0] * r[1] for r in rows) / area, sum(r[0] * r[2] for r in rows) / area
    zz = sum(a * (d * d / 12 + (c - z) ** 2) for a, _, c, _, d in rows)
    yy = sum(a * (w * w / 12 + (b_ - y) ** 2) for a, b_, _, w, _ in rows)
    return area, zz, yy, y, z, sum(a * (b_ - y) * (c - z) for a, b_, c, _, _ in rows)


def spandrel(r: float) -> tuple[float, float, float]:
    """Area between a quarter circle and its two tangents; its centroid from the corner; its own second moment.

    The spandrel is a square of side r less a quarter disc about the far corner.
    """
    area = r * r * (1 - math.pi / 4)
    first = r**3 / 2 - (math.pi * r * r / 4) * (r - 4 * r / (3 * math.pi))
    c = first / area
    disc_own = math.pi * r**4 / 16 - (math.pi * r * r / 4) * (4 * r / (3 * math.pi)) ** 2
    second = r**4 / 3 - (disc_own + (math.pi * r * r / 4) * (r - 4 * r / (3 * math.pi)) ** 2)
    return area, c, second - area * c * c


def test_rectangle() -> None:
    check(moments("rectangle", width=0.2, depth=0.3), 0.06, 0.2 * 0.3**3 / 12, 0.3 * 0.2**3 / 12)


def test_circle_and_tube() -> None:
    d, t = 0.3, 0.02
    check(moments("circle", diameter=d), math.pi * d**2 / 4, math.pi * d**4 / 64, math.pi * d**4 / 64)
    i = d - 2 * t
    area, second = math.pi * (d**2 - i**2) / 4, math.pi * (d**4 - i**4) / 64
    check(moments("tube", diameter=d, wall=t), area, second, second)


def test_box_with_round_corners() -> None:
    b, h, w, f, r, s = 0.2, 0.3, 0.01, 0.015, 0.03, 0.018
    m = moments("box", width=b, depth=h, web=w, flange=f, radius=r, inner_radius=s)

    def rounded(width: float, depth: float, radius: float) -> tuple[float, float, float]:
        a, c, own = spandrel(radius)
        area = width * depth - 4 * a
        zz = width * depth**3 / 12 - 4 * (own + a * (depth / 2 - c) ** 2)
        yy = depth * width**3 / 12 - 4 * (own + a * (width / 2 - c) ** 2)
        return area, zz, yy

    outer, inner = rounded(b, h, r), rounded(b - 2 * w, h - 2 * f, s)
    check(m, *(o - i for o, i in zip(outer, inner, strict=True)))


@pytest.mark.parametrize("radius", [0.0, 0.018])
def test_i_shape(radius: float) -> None:
    h, w, bt, ft, bb, fb = 0.4, 0.012, 0.2, 0.02, 0.15, 0.016
    m = moments("I", depth=h, web=w, top_width=bt, top_flange=ft, bottom_width=bb, bottom_flange=fb, radius=radius)
    low, high = -h / 2 + fb, h / 2 - ft
    rectangles = [(-bb / 2, -h / 2, bb / 2, low), (-w / 2, low, w / 2, high), (-bt / 2, high, bt / 2, h / 2)]
    if not radius:
        check(m, *sum_of_rectangles(*rectangles))
        return
    a, c, own = spandrel(radius)
    area, zz, yy, _, z, _ = sum_of_rectangles(*rectangles)
    corners = [(s * (w / 2 + c), e) for s in (-1, 1) for e in (low + c, high - c)]
    total = area + 4 * a
    z_all = (area * z + sum(a * e for _, e in corners)) / total
    zz_all = zz + area * (z - z_all) ** 2 + sum(own + a * (e - z_all) ** 2 for _, e in corners)
    yy_all = yy + sum(own + a * d * d for d, _ in corners)
    check(m, total, zz_all, yy_all, 0.0, z_all)


def test_tee_channel_and_angle_with_sharp_corners() -> None:
    h, b, w, f = 0.3, 0.2, 0.012, 0.018
    tee = moments("tee", depth=h, width=b, web=w, flange=f, radius=0.0)
    check(tee, *sum_of_rectangles((-w / 2, -h / 2, w / 2, h / 2 - f), (-b / 2, h / 2 - f, b / 2, h / 2)))
    channel = moments(
        "channel", depth=h, width=b, web=w, flange=f, radius=0.0, toe_radius=0.0, slope=0.0, flange_at=0.0
    )
    check(channel, *sum_of_rectangles((0, -h / 2, w, h / 2), (w, -h / 2, b, -h / 2 + f), (w, h / 2 - f, b, h / 2)))
    angle = moments("angle", depth=h, width=b, web=w, flange=f, radius=0.0, toe_radius=0.0)
    check(angle, *sum_of_rectangles((0, 0, w, h), (w, 0, b, f)))


def test_fillets_of_tee_channel_and_angle_add_and_toes_take_away() -> None:
    h, b, w, f, r, t = 0.3, 0.2, 0.02, 0.018, 0.015, 0.008
    root, _, _ = spandrel(r)
    toe, _, _ = spandrel(t)
    sharp = {"depth": h, "width": b, "web": w, "flange": f}
    tee = moments("tee", **sharp, radius=r)
    check_close(float(tee.area), w * (h - f) + b * f + 2 * root, CLOSED)
    channel = moments("channel", **sharp, radius=r, toe_radius=t, slope=0.0, flange_at=0.0)
    check_close(float(channel.area), h * w + 2 * (b - w) * f + 2 * root - 2 * toe, CLOSED)
    angle = moments("angle", **sharp, radius=r, toe_radius=t)
    check_close(float(angle.area), w * h + (b - w) * f + root - 2 * toe, CLOSED)
    # first moment of the angle about its heel
    _, cr, _ = spandrel(r)
    _, ct, _ = spandrel(t)
    first = h * w * w / 2 + (b - w) * f * (b + w) / 2 + root * (w + cr) - toe * (b - ct) - toe * (w - ct)
    check_close(float(angle.y), first / float(angle.area), CLOSED)


def test_sloping_flanges_of_a_channel() -> None:
    h, b, w, f, slope, at = 0.3, 0.1, 0.01, 0.016, 0.08, 0.05
    m = moments("channel", depth=h, width=b, web=w, flange=f, radius=0.0, toe_radius=0.0, slope=slope, flange_at=at)
    toe, root = f - slope * (b - at), f + slope * (at - w)
    check_close(float(m.area), h * w + 2 * (b - w) * (toe + root) / 2, CLOSED)


def test_trapezoid() -> None:
    t, b, h = 0.3, 0.2, 0.4
    m = moments("trapezoid", top_width=t, bottom_width=b, depth=h)
    area = (t + b) / 2 * h
    z = -h / 2 + h / 3 * (b + 2 * t) / (b + t)
    zz = h**3 * (b * b + 4 * b * t + t * t) / (36 * (b + t))
    yy = h / 48 * (b + t) * (b * b + t * t)
    check(m, area, zz, yy, 0.0, z)


@pytest.mark.parametrize("sides", [3, 4, 5, 8, 12])
def test_regular_polygon(sides: int) -> None:
    flat, wall = 0.3, 0.02
    solid = moments("regular polygon", sides=sides, across_flats=flat, wall=0.0)

    def second(inscribed: float) -> tuple[float, float]:
        side = 2 * inscribed * math.tan(math.pi / sides)
        area = sides * side * inscribed / 2
        return area, area / 24 * (6 * (inscribed / math.cos(math.pi / sides)) ** 2 - side**2)

    area, i = second(flat / 2)
    check(solid, area, i, i)
    hollow = moments("regular polygon", sides=sides, across_flats=flat, wall=wall)
    inner_area, inner = second(flat / 2 - wall)
    check(hollow, area - inner_area, i - inner, i - inner)
    # it stands on a flat
    left, bottom, right, top = (
        float(v[0]) for v in outline("regular polygon", sides=sides, across_flats=flat, wall=0.0).bounds()
    )
    assert bottom == pytest.approx(-flat / 2, rel=1e-14)
    assert right == pytest.approx(-left, rel=1e-12)
    assert top == pytest.approx(flat / 2 if sides % 2 == 0 else flat / 2 / math.cos(math.pi / sides), rel=1e-12)


def test_bars() -> None:
    n, d, s = 4, 0.02, 0.07
    a, i = math.pi * d**2 / 4, math.pi * d**4 / 64
    m = moments("bars", count=n, diameter=d, spacing=s)
    offsets = [(k - 1.5) * s for k in range(n)]
    check(m, n * a, n * i, n * i + a * sum(o * o for o in offsets))


def test_polygon_with_a_hole_in_either_sense() -> None:
    points = ((0.0, 0.0), (0.3, 0.0), (0.3, 0.2), (0.0, 0.2))
    hole = ((0.05, 0.05), (0.15, 0.05), (0.15, 0.15), (0.05, 0.15))
    expected = sum_of_rectangles((0, 0, 0.3, 0.2), (0.15, 0.05, 0.05, 0.15))
    for p in (points, points[::-1]):
        for h in (hole, hole[::-1]):
            m = area_moments(polygon(p, (h,), STATIONS)).at(1)
            check(m, *expected)


ALL = {
    "rectangle": {"width": 0.2, "depth": 0.3},
    "circle": {"diameter": 0.3},
    "tube": {"diameter": 0.3, "wall": 0.02},
    "box": {"width": 0.2, "depth": 0.3, "web": 0.01, "flange": 0.02, "radius": 0.02, "inner_radius": 0.01},
    "I": {
        "depth": 0.4, "web": 0.01, "top_width": 0.2, "top_flange": 0.02, "bottom_width": 0.1, "bottom_flange": 0.01,
        "radius": 0.02,
    },
    "tee": {"depth": 0.3, "width": 0.2, "web": 0.01, "flange": 0.02, "radius": 0.015},
    "channel": {
        "depth": 0.3, "width": 0.1, "web": 0.01, "flange": 0.02, "radius": 0.015, "toe_radius": 0.006, "slope": 0.05,
        "flange_at": 0.05,
    },
    "angle": {"depth": 0.2, "width": 0.1, "web": 0.02, "flange": 0.015, "radius": 0.015, "toe_radius": 0.006},
    "trapezoid": {"top_width": 0.2, "bottom_width": 0.3, "depth": 0.1},
    "regular polygon": {"sides": 7, "across_flats": 0.2, "wall": 0.01},
    "bars": {"count": 3, "diameter": 0.02, "spacing": 0.05},
}  # fmt: skip


def test_every_outline_is_tried_here() -> None:
    assert set(ALL) == set(OUTLINES)


@pytest.mark.parametrize("kind", ALL)
def test_a_turned_outline_turns_its_second_moments(kind: str) -> None:
    shape, angle = outline(kind, **ALL[kind]), 0.7
    m, t = area_moments(shape).at(0), area_moments(shape.turned(angle)).at(0)
    c, s = math.cos(angle), math.sin(angle)
    size = float(m.zz + m.yy)
    check_close(float(t.area), float(m.area), CLOSED)
    check_close(float(t.zz), float(c * c * m.zz + s * s * m.yy + 2 * s * c * m.yz), CLOSED, size)
    check_close(float(t.yy), float(s * s * m.zz + c * c * m.yy - 2 * s * c * m.yz), CLOSED, size)
    check_close(float(t.yz), float((c * c - s * s) * m.yz + s * c * (m.yy - m.zz)), CLOSED, size)
    check_close(float(t.y), float(c * m.y - s * m.z), CLOSED, 0.1)


@pytest.mark.parametrize("kind", ALL)
def test_a_mirrored_outline_changes_the_sign_of_y_alone(kind: str) -> None:
    shape = outline(kind, **ALL[kind])
    m, f = area_moments(shape).at(0), area_moments(shape.mirrored(0.05)).at(0)
    check_close(float(f.area), float(m.area), CLOSED)
    check_close(float(f.zz), float(m.zz), CLOSED)
    check_close(float(f.yz), -float(m.yz), CLOSED, float(m.zz))
    check_close(float(f.y), 0.1 - float(m.y), CLOSED, 0.1)
    box, flipped = shape.bounds(), shape.mirrored(0.05).bounds()
    assert flipped[0][0] == pytest.approx(0.1 - box[2][0]) and flipped[3][0] == pytest.approx(box[3][0])


@pytest.mark.parametrize("kind", ALL)
def test_bounds_hold_the_outline_tightly(kind: str) -> None:
    """Extreme points found by walking along every edge in small steps, bows included."""
    shape = outline(kind, **ALL[kind]).turned(0.3)
    y, z = walked(shape, 0, 400)
    left, bottom, right, top = (float(v[0]) for v in shape.bounds())
    # the walk stops short of the top of a bow by a chord of its step
    for found, edge in ((y.min(), left), (z.min(), bottom), (-y.max(), -right), (-z.max(), -top)):
        assert -1e-13 < found - edge < 1e-6


def walked(shape: Outline, station: int, steps: int) -> tuple[np.ndarray, np.ndarray]:
    """Points along the edges of an outline, by the tangent-half-angle form of an arc's bulge."""
    t = np.linspace(0.0, 1.0, steps)
    ends_y, ends_z = shape.ends
    ys, zs = [], []
    for e, bulge in enumerate(shape.bulge):
        a, b = complex(shape.y[station, e], shape.z[station, e]), complex(ends_y[station, e], ends_z[station, e])
        if bulge == 0.0:
            p = a + (b - a) * t
        else:
            angle = 4 * math.atan(bulge)
            centre = a + (b - a) / (1 - np.exp(1j * angle))
            p = centre + (a - centre) * np.exp(1j * angle * t)
        ys.append(p.real)
        zs.append(p.imag)
    return np.concatenate(ys), np.concatenate(zs)


@pytest.mark.parametrize("far", [1.0, 1e3, 1e6])
def test_moments_of_an_outline_far_away_keep_their_digits(far: float) -> None:
    """Coordinates lose far * 1e-16; nothing else may be lost."""
    shape = OUTLINES["I"]({k: np.array([v]) for k, v in ALL["I"].items()})
    near, away = area_moments(shape), area_moments(shape.moved(far, -far))
    # edges of a centimetre carry the loss of the coordinates
    tolerance = max(1e-13, 4e-16 * far / 0.01 * 4)
    check_close(float(away.zz[0]), float(near.zz[0]), tolerance)
    check_close(float(away.yy[0]), float(near.yy[0]), tolerance)
    check_close(float(away.area[0]), float(near.area[0]), tolerance)


def test_turning_by_quarters_is_exact() -> None:
    shape = outline("angle", **ALL["angle"])
    four = shape
    for _ in range(4):
        four = four.turned(0.5 * math.pi)
    assert np.array_equal(four.y, shape.y) and np.array_equal(four.z, shape.z)
