"""Random overlapping outlines: what is left of each against polygon booleans with fine chords, and against sums."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import math

import numpy as np
import pytest
import shapely
from common import CLOSED, check_close
from hypothesis import given
from hypothesis import strategies as st
from members import shapes

from fishbelly.sections.composition import Composition
from fishbelly.sections.outlines import OUTLINES, Outline, arcs

CHORDS = 400
"""Chords to an edge. Inscribed chords of an angle d lose d²/6 of a disc's area: 3e-6 of a quarter at 400."""
BY_CHORDS = 2e-5
"""Of the gross value: loss of chords in two or three outlines and of the moments they carry."""

shifts = st.integers(-8, 8).map(lambda k: 0.037 * k)


@st.composite
def outlines(draw: st.DrawFn, straight: bool = False) -> Outline:
    only = ("rectangle", "trapezoid", "regular polygon") if straight else ()
    kind, dimensions = draw(shapes(constant_sizes=True, only=only))
    rest = {"radius": 0.0, "toe_radius": 0.0, "slope": 0.0, "flange_at": 0.0, "wall": 0.0, "inner_radius": 0.0}
    values = {k: np.array([float(v(0.0)) if callable(v) else float(v)]) for k, v in {**rest, **dimensions}.items()}
    one = OUTLINES[kind](values).turned(draw(st.sampled_from([0.0, 0.3, 0.5 * math.pi, 2.0])))
    return one.moved(draw(shifts), draw(shifts))


def polygon_of(outline: Outline) -> shapely.Geometry:
    """The outline with every arc as many chords."""
    rings = []
    for first, stop in outline.loops:
        points: list[tuple[float, float]] = []
        for e in range(first, stop):
            points.append((outline.y[0, e], outline.z[0, e]))
            if outline.bulge[e]:
                y, z, r, start, turn = (float(v[0, 0]) for v in arcs(outline, np.array([e])))
                angle = start + turn * np.linspace(0.0, 1.0, CHORDS + 1)[1:-1]
                points += list(zip(y + r * np.cos(angle), z + r * np.sin(angle), strict=True))
        rings.append(shapely.Polygon(points))
    outer = shapely.union_all([r for r in rings if shapely.is_ccw(r.exterior)])
    holes = [r for r in rings if not shapely.is_ccw(r.exterior)]
    return outer.difference(shapely.union_all(holes)) if holes else outer


def raw_moments(shape: shapely.Geometry) -> np.ndarray:
    """Area, ∫y, ∫z, ∫z², ∫y², ∫yz about the origin of a polygon or several."""
    total = np.zeros(6)
    for piece in getattr(shape, "geoms", [shape]):
        if piece.geom_type != "Polygon" or piece.is_empty:
            continue
        for k, ring in enumerate((piece.exterior, *piece.interiors)):
            p = np.array(ring.coords)
            y, z, v, w = p[:-1, 0], p[:-1, 1], p[1:, 0], p[1:, 1]
            c = y * w - v * z
            part = np.array([
                c.sum() / 2, (c * (y + v)).sum() / 6, (c * (z + w)).sum() / 6,
                (c * (z * z + z * w + w * w)).sum() / 12, (c * (y * y + y * v + v * v)).sum() / 12,
                (c * (y * w + 2 * y * z + 2 * v * w + v * z)).sum() / 24,
            ])  # fmt: skip
            total += part * (np.sign(part[0]) * (-1.0 if k else 1.0))
    return total


def compare(
    section: Composition, shapes_left: list[shapely.Geometry], gross: list[shapely.Geometry], tolerance: float
) -> None:
    m = section.moments
    for k, left in enumerate(shapes_left):
        a, y, z = (float(v[k, 0]) for v in (m.area, m.y, m.z))
        found = np.array(
            [a, a * y, a * z, m.zz[k, 0] + a * z * z, m.yy[k, 0] + a * y * y, m.yz[k, 0] + a * y * z], dtype=float
        )
        whole = np.abs(raw_moments(gross[k]))
        reach = max(abs(v) for v in gross[k].bounds)
        size = whole[0] * np.array([1.0, reach, reach, reach**2, reach**2, reach**2])
        gap = np.abs(found - raw_moments(left)) / size
        assert gap.max() <= tolerance, f"part {k}: {gap}"


def left_of(
    gross: list[shapely.Geometry], cuts: list[tuple[shapely.Geometry, tuple[int, ...]]]
) -> list[shapely.Geometry]:
    """Each part less all later ones and less the cuts that aim at it."""
    result = []
    for k, shape in enumerate(gross):
        for other in gross[k + 1 :]:
            shape = shape.difference(other)
        for cut, targets in cuts:
            if k in targets:
                shape = shape.difference(cut)
        result.append(shape)
    return result


@given(st.lists(outlines(), min_size=2, max_size=4))
def test_overlapping_parts(parts: list[Outline]) -> None:
    gross = [polygon_of(p) for p in parts]
    compare(Composition(tuple(parts)), left_of(gross, []), gross, BY_CHORDS)


@given(st.lists(outlines(straight=True), min_size=2, max_size=4))
def test_overlapping_parts_with_straight_edges(parts: list[Outline]) -> None:
    """No chords here: both are exact, booleans lose coordinates of 1e-16 along edges that nearly coincide."""
    gross = [polygon_of(p) for p in parts]
    compare(Composition(tuple(parts)), left_of(gross, []), gross, CLOSED)


@given(st.lists(outlines(), min_size=1, max_size=3), outlines(), st.data())
def test_cuts(parts: list[Outline], cut: Outline, data: st.DataObject) -> None:
    targets = tuple(sorted(data.draw(st.sets(st.integers(0, len(parts) - 1), min_size=1))))
    gross, hole = [polygon_of(p) for p in parts], polygon_of(cut)
    section = Composition(tuple(parts), ((cut, targets, True),))
    compare(section, left_of(gross, [(hole, targets)]), gross, BY_CHORDS)


@given(st.lists(outlines(), min_size=2, max_size=4))
def test_what_is_left_of_all_adds_up_to_their_union(parts: list[Outline]) -> None:
    """The later part wins everywhere, so that nothing is counted twice in any order of the parts."""
    one, other = (Composition(tuple(p)).moments.total() for p in (parts, parts[::-1]))
    for name in ("area", "zz", "yy"):
        check_close(getattr(one, name)[0], getattr(other, name)[0], 1e-11)


@given(st.integers(1, 40), st.integers(1, 40), st.integers(1, 60))
def test_two_discs(r: int, s: int, gap: int) -> None:
    """Common area of two circles, closed form; the smaller first."""
    r, s, gap = 0.01 * r, 0.01 * s, 0.013 * gap
    disc = lambda d, y: OUTLINES["circle"]({"diameter": np.array([2 * d])}).moved(y, 0.0)
    found = float(Composition((disc(r, 0.0), disc(s, gap))).moments.area[0, 0])
    if gap >= r + s:
        common = 0.0
    elif gap <= abs(r - s):
        common = math.pi * min(r, s) ** 2
    else:
        p = (gap**2 + r**2 - s**2) / (2 * gap)
        q = gap - p
        common = r**2 * math.acos(p / r) + s**2 * math.acos(q / s) - gap * math.sqrt(r**2 - p**2)
    # acos near its ends costs half the digits of the closed form in near touching
    assert found == pytest.approx(math.pi * r * r - common, abs=1e-11 * math.pi * max(r, s) ** 2)


@given(st.integers(1, 40), st.integers(-50, 50))
def test_disc_and_half_plane(r: int, level: int) -> None:
    r, level = 0.01 * r, 0.009 * level
    disc = OUTLINES["circle"]({"diameter": np.array([2 * r])})
    slab = OUTLINES["rectangle"]({"width": np.array([3.0]), "depth": np.array([2.0])}).moved(0.0, level + 1.0)
    found = float(Composition((disc, slab)).moments.area[0, 0])
    inside = min(max(level / r, -1.0), 1.0)
    left = math.pi * r * r - (r * r * math.acos(inside) - inside * r * r * math.sqrt(1 - inside**2))
    assert found == pytest.approx(left, abs=1e-12 * math.pi * r * r)
