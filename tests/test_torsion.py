"""Torsional stiffness against closed forms and published values; bounds that bracket."""

from __future__ import annotations

import math

import numpy as np
import pytest
from common import check_close
from flexure_shapes import SECTIONS, beam, columns, disc, make, plate

from fishbelly.sections.composition import Composition
from fishbelly.sections.outlines import Outline, polygon
from fishbelly.sections.torsion import PointContactError, Torsion, torsion

PROMISED = 3e-6
"""Relative, for the middle of the bounds."""
ROUND_OFF = 3e-8
"""Relative; the upper bound is the difference of a polar moment some thousand times as large."""


def twist(*outlines: Outline, G: tuple[float, ...] | None = None, **more: object) -> Torsion:
    cuts = more.pop("cuts", ())
    moduli = np.array([[g] for g in (G or (1.0,) * len(outlines))])
    return torsion(Composition(outlines, cuts), moduli, **more)  # type: ignore[arg-type]


def rectangle_series(b: float, t: float) -> float:
    """b t³ (1/3 - 64/π⁵ t/b Σ tanh((2n+1)πb/2t)/(2n+1)⁵): Timoshenko and Goodier, Theory of Elasticity, art. 109."""
    odd = 2 * np.arange(60) + 1
    series = (np.tanh(odd * math.pi * b / (2 * t)) / odd**5.0).sum()
    return float(b * t**3 * (1 / 3 - 64 / math.pi**5 * t / b * series))


@pytest.mark.parametrize("width, depth", [(0.1, 0.1), (0.1, 0.2), (1.0, 0.1), (0.02, 3.0)])
def test_rectangle(width: float, depth: float) -> None:
    f = twist(plate(width, depth))
    expected = rectangle_series(max(width, depth), min(width, depth))
    check_close(f.GJ[0], expected, PROMISED)
    assert f.lower[0] <= expected * (1 + 1e-12) and f.upper[0] >= expected * (1 - 1e-12)


def test_equilateral_triangle() -> None:
    """sqrt(3) a⁴/80: Timoshenko and Goodier, Theory of Elasticity, art. 106."""
    check_close(twist(polygon(((0, 0), (1, 0), (0.5, math.sqrt(3) / 2)), (), 1)).GJ[0], math.sqrt(3) / 80, 1e-11)


@pytest.mark.parametrize("wall", [0.1, 0.05, 0.001])
def test_circle_and_ring(wall: float) -> None:
    shape = disc(0.2, 1.0, 2.0) if wall == 0.1 else make("tube", 1.0, 2.0, diameter=0.2, wall=wall)
    check_close(twist(shape).GJ[0], math.pi / 2 * (0.1**4 - (0.1 - wall) ** 4), 1e-9)


def test_core_in_a_sleeve_is_the_sum() -> None:
    f = twist(disc(0.2), disc(0.1), G=(3.0, 50.0))
    check_close(f.GJ[0], math.pi / 2 * (3.0 * (0.1**4 - 0.05**4) + 50.0 * 0.05**4), 1e-7)


def sector(degrees: float) -> Outline:
    """Sector of a circle of radius 1 m."""
    n = math.ceil(degrees / 90)
    a = np.radians(np.linspace(0, degrees, n + 1))
    y, z = np.concatenate(([0.0], np.cos(a))), np.concatenate(([0.0], np.sin(a)))
    bulge = np.array([0.0, *[math.tan(math.radians(degrees) / n / 4)] * n, 0.0])
    return Outline(y[None], z[None], bulge, ((0, n + 2),))


@pytest.mark.parametrize("degrees, printed, digit", [(45, 0.0181, 1e-4), (300, 0.672, 1e-3)])
def test_sectors_as_printed(degrees: float, printed: float, digit: float) -> None:
    """J / R⁴: Timoshenko and Goodier, Theory of Elasticity, table of sectors (also Roark, table 10.7)."""
    f = twist(sector(degrees))
    assert abs(f.GJ[0] - printed) <= 0.5 * digit * (1 + 1e-9) and f.error()[0] < 1e-5


def test_half_disc_and_quarter_disc() -> None:
    """Half: π/2 - 4/π (exact); the table prints .296. Quarter: .0825 printed, .08233 by other reckonings."""
    check_close(twist(sector(180)).GJ[0], math.pi / 2 - 4 / math.pi, PROMISED)
    assert twist(sector(90)).GJ[0] == pytest.approx(0.0825, rel=3e-3)


def test_thin_square_tube() -> None:
    """Bredt: 4 A²t/s = t a³ along the middle line; the wall's own and the corners add in t/a."""
    gaps = []
    for t in (0.01, 0.005):
        shape = make("box", width=1 + t, depth=1 + t, web=t, flange=t, radius=0, inner_radius=0)
        gaps.append(twist(shape).GJ[0] / t - 1.0)
    assert 0 < gaps[1] < gaps[0] < 0.02 and gaps[0] / gaps[1] == pytest.approx(2.0, rel=0.05), gaps


def test_split_tube() -> None:
    """s t³/3: a narrow slot from the hole out; ends of the strip take off 0.63 t as in a thin rectangle."""
    t, slot = 0.004, 1e-3
    f = twist(make("tube", diameter=0.2, wall=t), cuts=((plate(0.05, slot, 0.1), (0,), True),))
    length = 2 * math.pi * (0.1 - t / 2) - slot
    check_close(f.GJ[0], (length - 0.6302 * t) * t**3 / 3, 2e-3)
    whole = twist(make("tube", diameter=0.2, wall=t))
    assert whole.GJ[0] > 1000 * f.GJ[0]


def test_two_layers_of_a_wide_strip() -> None:
    """Thin strip of two layers far from its ends: GJ / b = 4 (S2 - S1²/S0) with Sk = ∫G z^k dz; the ends take off t."""
    g, t = (1.0, 4.0), (0.01, 0.006)
    s0 = g[0] * t[0] + g[1] * t[1]
    s1 = g[1] * t[1] ** 2 / 2 - g[0] * t[0] ** 2 / 2
    s2 = (g[0] * t[0] ** 3 + g[1] * t[1] ** 3) / 3
    found = [twist(plate(b, t[0], 0.0, -t[0] / 2), plate(b, t[1], 0.0, t[1] / 2), G=g).GJ[0] for b in (1.0, 2.0)]
    # the ends drop out of the difference
    check_close(found[1] - found[0], 4 * (s2 - s1**2 / s0), 1e-5)


@pytest.mark.parametrize("name", SECTIONS)
def test_bounds_bracket_and_close(name: str) -> None:
    outlines, moduli = SECTIONS[name]
    _, G = columns(moduli)
    coarse, fine = (torsion(Composition(outlines), G, degree=p) for p in (5, 11))
    slack = ROUND_OFF * fine.GJ
    assert np.all(coarse.lower <= fine.lower + slack) and np.all(fine.lower <= fine.upper + slack)
    assert np.all(fine.upper <= coarse.upper + slack)
    own = torsion(Composition(outlines), G)
    # an angle's thick legs end in corners where the warping behaves like r² log r
    assert own.error()[0] < 1e-5, own.error()
    assert abs(own.GJ - fine.GJ)[0] <= (own.error() + ROUND_OFF)[0] * own.GJ[0]


def test_pieces_apart_add_up_and_clusters_are_apart() -> None:
    alone = twist(plate(0.1, 0.2)).GJ[0] + twist(disc(0.1)).GJ[0]
    # the levels of the disc divide the plate's mesh too
    check_close(twist(plate(0.1, 0.2), disc(0.1, 0.5)).GJ[0], alone, PROMISED)
    pair = (plate(0.1, 0.2, -0.05), plate(0.1, 0.2, 0.05))
    check_close(twist(*pair, clusters=[0, 1]).GJ[0], 2 * rectangle_series(0.2, 0.1), PROMISED)
    check_close(twist(*pair).GJ[0], rectangle_series(0.2, 0.2), PROMISED)


@pytest.mark.parametrize("angle", [0.0, 0.3])
def test_contact_at_a_point_is_refused(angle: float) -> None:
    pair = [plate(0.1, 0.1), plate(0.1, 0.1, 0.1, 0.1)]
    with pytest.raises(PointContactError, match="touch at a point only") as caught:
        twist(*(o.turned(angle) for o in pair))
    y, z = 0.05 * (math.cos(angle) - math.sin(angle)), 0.05 * (math.cos(angle) + math.sin(angle))
    assert (caught.value.y, caught.value.z) == (pytest.approx(y), pytest.approx(z))


def test_turning_shifting_and_splitting_move_nothing() -> None:
    whole = twist(beam(0.012)).GJ[0]
    check_close(twist(beam(0.012).turned(0.4).moved(2.0, 3.0)).GJ[0], whole, 1e-7)
    check_close(twist(beam(0.012).turned(0.5 * math.pi)).GJ[0], whole, PROMISED)
    check_close(
        twist(plate(0.1, 0.1, 0.0, 0.05), plate(0.1, 0.1, 0.0, -0.05)).GJ[0], twist(plate(0.1, 0.2)).GJ[0], 1e-9
    )


def test_many_stations() -> None:
    x = np.linspace(0.0, 1.0, 40)
    from fishbelly.sections.outlines import OUTLINES

    d = {"width": 0.2 + 0.1 * x, "depth": 0.3 + 0.2 * x, "web": 0.01 + 0 * x, "flange": 0.012 + 0 * x}
    d |= {"radius": 0.02 + 0 * x, "inner_radius": 0.01 + 0 * x}
    together = torsion(Composition((OUTLINES["box"](d),)), np.ones((1, 40)))
    for k in (0, 17, 39):
        one = {name: v[k : k + 1] for name, v in d.items()}
        check_close(together.GJ[k], torsion(Composition((OUTLINES["box"](one),)), np.ones((1, 1))).GJ[0], PROMISED)
