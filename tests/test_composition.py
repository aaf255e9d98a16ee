"""What each part really contributes where parts overlap, lie in each other or are cut."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import math

import numpy as np
import pytest
from common import CLOSED, check_close

from fishbelly.sections.area_moments import AreaMoments
from fishbelly.sections.composition import Composition
from fishbelly.sections.outlines import OUTLINES, Outline, polygon


def make(kind: str, y: float = 0.0, z: float = 0.0, **dimensions: float) -> Outline:
    return OUTLINES[kind]({k: np.array([float(v)]) for k, v in dimensions.items()}).moved(y, z)


def disc(d: float, y: float = 0.0, z: float = 0.0) -> Outline:
    return make("circle", y, z, diameter=d)


def plate(b: float, h: float, y: float = 0.0, z: float = 0.0) -> Outline:
    return make("rectangle", y, z, width=b, depth=h)


def net(*outlines: Outline, cuts: tuple = ()) -> AreaMoments:
    return Composition(tuple(outlines), cuts).moments


def about_origin(m: AreaMoments, k: int) -> tuple[float, float, float, float]:
    """Area, first moments and ∫z² about the origin."""
    a, y, z = float(m.area[k, 0]), float(m.y[k, 0]), float(m.z[k, 0])
    return a, a * y, a * z, float(m.zz[k, 0]) + a * z * z


def lens(r: float, s: float, gap: float) -> float:
    """Area that two circles have in common (radii r and s, centres `gap` apart)."""
    p = (gap * gap + r * r - s * s) / (2 * gap)
    q = gap - p
    return (
        r * r * math.acos(p / r)
        - p * math.sqrt(r * r - p * p)
        + s * s * math.acos(q / s)
        - q * math.sqrt(s * s - q * q)
    )


def segment(r: float, level: float) -> tuple[float, float, float]:
    """Area, first and second moment about its diameter of the part of a disc above a level."""
    c = math.sqrt(r * r - level * level)
    area = r * r * math.acos(level / r) - level * c
    first = 2 / 3 * c**3
    second = r**4 / 4 * math.acos(level / r) + level * c * (r * r - 2 * level * level) / 4
    return area, first, second


def test_parts_apart_are_as_drawn() -> None:
    m = net(plate(0.2, 0.3), disc(0.1, 0.0, 1.0))
    check_close(m.area[0, 0], 0.06, CLOSED)
    check_close(m.area[1, 0], math.pi * 0.1**2 / 4, CLOSED)


def test_bar_in_concrete_displaces_it() -> None:
    m = net(plate(0.3, 0.5), disc(0.03, 0.05, -0.2))
    a = math.pi * 0.03**2 / 4
    check_close(m.area[0, 0], 0.15 - a, CLOSED)
    zz = 0.3 * 0.5**3 / 12 - math.pi * 0.03**4 / 64 - a * 0.2**2
    check_close(about_origin(m, 0)[3], zz, CLOSED)
    check_close(m.y[0, 0], -a * 0.05 / (0.15 - a), CLOSED)


def test_bolt_hole_through_a_bar_in_concrete() -> None:
    """Three that lie in each other: the hole takes from the bar; the concrete loses the bar once."""
    m = net(plate(0.3, 0.5), plate(0.1, 0.1), cuts=((disc(0.04), (0, 1), True),))
    hole = math.pi * 0.04**2 / 4
    check_close(m.area[0, 0], 0.15 - 0.01, CLOSED)
    check_close(m.area[1, 0], 0.01 - hole, CLOSED)
    check_close(m.zz[0, 0], (0.3 * 0.5**3 - 0.1**4) / 12, CLOSED)
    check_close(m.zz[1, 0], 0.1**4 / 12 - math.pi * 0.04**4 / 64, CLOSED)


def test_three_plates_that_overlap_one_another() -> None:
    """Squares of 2 at (0,0), (1,1) and (1,0): the later one wins everywhere."""
    m = net(plate(2.0, 2.0), plate(2.0, 2.0, 1.0, 1.0), plate(2.0, 2.0, 1.0, 0.0))
    # first keeps y < 0, |z| < 1: 1 x 2; second keeps z > 1: 2 x 1; third is whole
    check_close(m.area[0, 0], 2.0, CLOSED)
    check_close(m.y[0, 0], -0.5, CLOSED)
    check_close(m.area[1, 0], 2.0, CLOSED)
    check_close(m.z[1, 0], 1.5, CLOSED)
    check_close(m.zz[1, 0], 2.0 / 12, CLOSED)
    check_close(m.area[2, 0], 4.0, CLOSED)


def test_two_discs_that_overlap() -> None:
    m = net(disc(0.4), disc(0.3, 0.2, 0.1))
    common = lens(0.2, 0.15, math.hypot(0.2, 0.1))
    check_close(m.area[0, 0], math.pi * 0.04 - common, CLOSED)
    check_close(m.area[1, 0], math.pi * 0.15**2, CLOSED)


@pytest.mark.parametrize("level", [-0.05, 0.0, 0.03, 0.099])
def test_plate_laid_over_a_disc(level: float) -> None:
    """A wide plate takes all of the disc above a level."""
    m = net(disc(0.2), plate(1.0, 1.0, 0.0, level + 0.5))
    area, first, second = segment(0.1, level)
    whole = math.pi * 0.1**2
    a, _, s, zz = about_origin(m, 0)
    check_close(a, whole - area, CLOSED, whole)
    check_close(s, -first, CLOSED, whole * 0.1)
    check_close(zz, math.pi * 0.1**4 / 4 - second, CLOSED, whole * 0.01)


def test_cut_takes_from_its_targets_alone_and_mass_may_stay() -> None:
    c = Composition((plate(0.2, 0.2), plate(0.2, 0.2, 0.2)), ((plate(1.0, 0.1, 0.0, -0.05), (0,), False),))
    check_close(c.moments.area[0, 0], 0.02, CLOSED)
    check_close(c.moments.area[1, 0], 0.04, CLOSED)
    check_close(c.mass_moments.area[0, 0], 0.04, CLOSED)


def test_cut_takes_from_what_a_later_part_has_left() -> None:
    """A hole cut out of a plate that a bar displaces too: their overlap counts once."""
    c = Composition((plate(1.0, 1.0), plate(0.4, 0.4, 0.1)), ((plate(0.4, 0.4, -0.1), (0,), True),))
    check_close(c.moments.area[0, 0], 1.0 - (0.6 * 0.4), CLOSED)
    check_close(c.moments.area[1, 0], 0.16, CLOSED)


def test_nothing_is_left_of_a_part_that_is_covered() -> None:
    m = net(plate(0.1, 0.1), plate(0.3, 0.3), disc(1.0))
    assert m.area[0, 0] == pytest.approx(0.0, abs=1e-15)
    assert m.area[1, 0] == pytest.approx(0.0, abs=1e-14)
    check_close(m.area[2, 0], math.pi * 0.25, CLOSED)


def test_the_same_outline_twice() -> None:
    m = net(disc(0.2), disc(0.2))
    assert m.area[0, 0] == pytest.approx(0.0, abs=1e-15)
    check_close(m.area[1, 0], math.pi * 0.01, CLOSED)
    m = net(plate(0.2, 0.1), plate(0.2, 0.1))
    assert m.area[0, 0] == pytest.approx(0.0, abs=1e-15)


def test_outlines_that_share_an_edge_do_not_overlap() -> None:
    one = make(
        "I", depth=0.3, web=0.01, top_width=0.1, top_flange=0.01, bottom_width=0.1, bottom_flange=0.01, radius=0.012
    )
    m = net(one, plate(0.1, 0.02, 0.0, 0.16), plate(0.145, 0.02, 0.0775, 0.0))
    check_close(m.area[1, 0], 0.002, CLOSED)
    check_close(m.area[0, 0], 0.002 + 0.01 * 0.28 + (4 - math.pi) * 0.012**2, CLOSED)


def test_hole_of_a_tube_is_free_for_what_stands_in_it() -> None:
    tube = make("tube", diameter=0.3, wall=0.01)
    m = net(disc(0.28), tube)
    check_close(m.area[0, 0], math.pi * 0.14**2, CLOSED)
    m = net(tube, disc(0.28))
    check_close(m.area[0, 0], math.pi * (0.15**2 - 0.14**2), CLOSED)
    # a core that is a little too large takes from the wall
    m = net(tube, disc(0.29))
    check_close(m.area[0, 0], math.pi * (0.15**2 - 0.145**2), CLOSED)


def test_slit_across_a_tube() -> None:
    """A cut as wide as the tube and thinner than its hole: strips of two circles, closed form."""
    h = 0.02
    c = Composition((make("tube", diameter=0.3, wall=0.01),), ((plate(1.0, 2 * h), (0,), True),))
    strip = lambda r: math.pi * r * r - 2 * segment(r, h)[0]
    check_close(c.moments.area[0, 0], math.pi * (0.15**2 - 0.14**2) - strip(0.15) + strip(0.14), CLOSED)
    low, high = c.extent
    assert (low[0, 0], high[0, 0]) == pytest.approx((-0.15, 0.15))


def test_extent_after_a_cut_from_below() -> None:
    c = Composition((plate(0.2, 0.4),), ((plate(1.0, 0.2, 0.0, -0.2), (0,), True),))
    assert float(c.extent[0][0, 0]) == pytest.approx(-0.1)
    assert float(c.extent[1][0, 0]) == pytest.approx(0.2)


def test_concave_polygon_crossed_twice() -> None:
    comb = polygon(((0, 0), (3, 0), (3, 2), (2, 2), (2, 1), (1, 1), (1, 2), (0, 2)), (), 1)
    m = net(comb, plate(4.0, 1.0, 1.5, 1.5))
    check_close(m.area[0, 0], 3.0, CLOSED)
    check_close(m.zz[0, 0], 3.0 / 12, CLOSED)


def test_stations_that_cross_differently_stand_in_one_stack() -> None:
    """A plate that moves up through another one: apart, part way, inside, at once."""
    up = np.array([-1.0, -0.55, 0.0, 0.55, 1.0])
    still = OUTLINES["rectangle"]({"width": np.full(5, 1.0), "depth": np.full(5, 1.0)})
    moving = OUTLINES["rectangle"]({"width": np.full(5, 0.5), "depth": np.full(5, 0.2)}).moved(0.0, up)
    m = Composition((still, moving)).moments
    covered = [0.0, 0.5 * 0.05, 0.1, 0.5 * 0.05, 0.0]
    for k, c in enumerate(covered):
        check_close(m.area[0, k], 1.0 - c, CLOSED)


def test_turned_section_exchanges_the_axes() -> None:
    c = Composition((disc(0.4), plate(0.2, 0.5, 0.15, 0.1)))
    one, other = c.moments, c.turned().moments
    for k in range(2):
        check_close(other.yy[k, 0], one.zz[k, 0], CLOSED)
        check_close(other.zz[k, 0], one.yy[k, 0], CLOSED)
        check_close(other.yz[k, 0], -one.yz[k, 0], CLOSED, float(one.zz[k, 0]))


@pytest.mark.parametrize("far", [10.0, 1e3])
def test_overlap_far_from_the_origin(far: float) -> None:
    """Coordinates lose far * 1e-16 m; the slivers that decide here are a few centimetres wide."""
    near, away = net(disc(0.2), plate(0.1, 0.3, 0.08)), net(disc(0.2, far, far), plate(0.1, 0.3, 0.08 + far, far))
    for name in ("area", "zz", "yy"):
        check_close(getattr(away, name)[0, 0], getattr(near, name)[0, 0], max(CLOSED, far * 1e-14))
