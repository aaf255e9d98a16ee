"""Shear flexibility against closed forms of St Venant's flexure with Poisson's ratio zero."""

from __future__ import annotations

import math

import numpy as np
import pytest
from common import check_close
from flexure_shapes import CONCRETE, ONE, STEEL, TIMBER, disc, make, many_sided, plate, solve

from fishbelly.sections.composition import Composition
from fishbelly.sections.flexure import flexure
from fishbelly.sections.outlines import polygon

PROMISED = 1e-6
"""Relative, for flexibilities of sections without re-entrant corners."""
EXACT = 1e-11
"""Relative; the warping is a polynomial of low degree and the elements hold it."""


@pytest.mark.parametrize("width, depth", [(0.1, 0.2), (2.0, 0.01), (0.3, 0.3)])
def test_rectangle(width: float, depth: float) -> None:
    f = solve((plate(width, depth, 3.0, -1.0),))
    check_close(f.GA_z[0], 5 / 6 * width * depth, EXACT)
    check_close(f.GA_y[0], 5 / 6 * width * depth, EXACT)
    assert abs(f.F_yz[0]) < EXACT * f.F_zz[0]
    assert (f.y_s[0], f.z_s[0]) == pytest.approx((3.0, -1.0), abs=1e-9)


def ring(a: float, b: float) -> float:
    """Flexibility of a ring of radii a, b with E = G = 1.

    w = f(r) sin t, f = -r³/8I + A r + B/r with f'(a) = f'(b) = 0; F = ∫w z/I dA.
    """
    i = math.pi * (b**4 - a**4) / 4
    big_a, big_b = 3 * (a**2 + b**2) / (8 * i), 3 * a**2 * b**2 / (8 * i)
    return math.pi / i * (-(b**6 - a**6) / (48 * i) + big_a * (b**4 - a**4) / 4 + big_b * (b**2 - a**2) / 2)


def test_ring_formula_holds_the_solid_circle() -> None:
    check_close(ring(0.0, 0.1), 7 / 6 / (math.pi * 0.01), 1e-13)


def test_circle() -> None:
    f = solve((disc(0.2),))
    check_close(f.GA_z[0], 6 / 7 * math.pi * 0.01, PROMISED)
    check_close(f.GA_y[0], 6 / 7 * math.pi * 0.01, PROMISED)


@pytest.mark.parametrize("wall", [0.08, 0.03, 0.005, 0.001])
def test_ring(wall: float) -> None:
    f = solve((make("tube", diameter=0.2, wall=wall),))
    check_close(f.F_zz[0], ring(0.1 - wall, 0.1), PROMISED)
    check_close(f.F_yy[0], ring(0.1 - wall, 0.1), PROMISED)


def test_thin_ring_is_half_its_area() -> None:
    f = solve((make("tube", diameter=0.2, wall=1e-3),))
    # (r/t = 100: the closed form itself is 2.5e-5 off the limit)
    check_close(f.GA_z[0], 0.5 * math.pi * (0.1**2 - 0.099**2), 1e-4)


def sleeved(a: float, b: float, core: tuple[float, float], sleeve: tuple[float, float]) -> float:
    """Flexibility of a core of radius a in a sleeve of radius b, each with its (E, G).

    w = f(r) sin t in each, G (f'' + f'/r - f/r²) = -E r / EI; f and G f' go on at r = a, f'(b) = 0.
    """
    (e1, g1), (e2, g2) = core, sleeve
    ei = math.pi / 4 * (e1 * a**4 + e2 * (b**4 - a**4))
    c1, c2 = -e1 / (8 * g1 * ei), -e2 / (8 * g2 * ei)
    rows = [[a, -a, -1 / a], [g1, -g2, g2 / a**2], [0, 1, -1 / b**2]]
    a1, a2, b2 = np.linalg.solve(rows, [(c2 - c1) * a**3, 3 * a**2 * (g2 * c2 - g1 * c1), -3 * c2 * b**2])
    inner = e1 * (c1 * a**6 / 6 + a1 * a**4 / 4)
    outer = e2 * (c2 * (b**6 - a**6) / 6 + a2 * (b**4 - a**4) / 4 + b2 * (b**2 - a**2) / 2)
    return float(math.pi / ei * (inner + outer))


def test_sleeve_formula_holds_the_circle() -> None:
    check_close(sleeved(0.05, 0.1, (1, 1), (1, 1)), ring(0.0, 0.1), 1e-12)


@pytest.mark.parametrize("core, sleeve", [(STEEL, CONCRETE), (CONCRETE, STEEL), ((20.0, 20.0), (1.0, 1.0))])
def test_core_in_a_sleeve(core: tuple[float, float], sleeve: tuple[float, float]) -> None:
    f = solve((disc(0.2), disc(0.1)), (sleeve, core))
    # the sleeve is cut by quarters round the core, as coarse as a mesh gets
    check_close(f.F_zz[0], sleeved(0.05, 0.1, core, sleeve), 2e-6)
    check_close(f.F_yy[0], sleeved(0.05, 0.1, core, sleeve), 2e-6)


def test_layers_of_one_width_are_exact() -> None:
    """A sandwich: shear is the same across each level, F = ∫q²/(G b) dz with q from the layers' stresses."""
    layers = [(0.02, STEEL), (0.2, TIMBER), (0.05, CONCRETE)]
    b, z, parts, moduli = 0.12, 0.0, [], []
    for h, m in layers:
        parts.append(plate(b, h, 0.0, z + h / 2))
        moduli.append(m)
        z += h
    ends = np.cumsum([0.0] + [h for h, _ in layers])
    e = np.array([m[0] for m in moduli])
    centre = (e * (ends[1:] ** 2 - ends[:-1] ** 2) / 2).sum() / (e * np.diff(ends)).sum()
    ei = b * (e * ((ends[1:] - centre) ** 3 - (ends[:-1] - centre) ** 3) / 3).sum()
    x, w = np.polynomial.legendre.leggauss(6)
    start, total = 0.0, 0.0
    for k, (h, (e_k, g_k)) in enumerate(layers):
        t = ends[k] + h * (x + 1) / 2
        q = start + e_k * b * ((t - centre) ** 2 - (ends[k] - centre) ** 2) / 2 / ei
        total += float((q**2 / (g_k * b)) @ w) * h / 2
        start += e_k * b * ((ends[k + 1] - centre) ** 2 - (ends[k] - centre) ** 2) / 2 / ei
    check_close(solve(tuple(parts), tuple(moduli)).F_zz[0], total, EXACT)


@pytest.mark.parametrize("a, b", [(0.1, 0.05), (0.05, 0.1)])
def test_ellipse_by_a_polygon_of_many_sides(a: float, b: float) -> None:
    """The polygon tends to the ellipse, of which the warping is known: w = z (p + q z² + r y²).

    Balance gives 6q + 2r = -1/I; no flow across the rim y² = b² (1 - z²/a²), with a normal along (y/b², z/a²), gives
    one equation each for the terms with z and z³.
    """
    area, i = math.pi * a * b, math.pi * a**3 * b / 4
    system = [
        [0.0, 6.0, 2.0],
        [1 / a**2, 0.0, 2.0 + b**2 / a**2],
        [0.0, 3 / a**2, -2 / a**2 - b**2 / a**4],
    ]
    p, q, r = np.linalg.solve(system, [-1 / i, 0.0, 0.0])
    # F = ∫w z/I dA with the moments of an ellipse
    z2, z4, zy = area * a**2 / 4, area * a**4 / 8, area * a**2 * b**2 / 24
    expected = float((p * z2 + q * z4 + r * zy) / i)
    gaps = np.array([abs(solve((many_sided(a, b, n),)).F_zz[0] / expected - 1) for n in (12, 24, 48)])
    order = np.log2(gaps[:-1] / gaps[1:])
    assert gaps[-1] < 2e-5 and order.min() > 2.0, (gaps, order)


def test_triangle_settles_with_the_degree() -> None:
    """No closed form: the flexibility of a triangle settles as the degree grows, from below."""
    shape = polygon(((0, 0), (0.1, 0), (0.05, 0.05 * math.sqrt(3))), (), 1)
    settled = solve((shape,), degree=16).F_zz[0]
    gaps = [1 - solve((shape,), degree=p).F_zz[0] / settled for p in (4, 6, 8)]
    order = -np.diff(np.log(gaps)) / np.diff(np.log([4, 6, 8]))
    assert all(g > 0 for g in gaps) and gaps[-1] < 1e-7 and order.min() > 6, (gaps, order)


def test_shear_centre_of_a_thin_channel() -> None:
    """e = 3 b²/(h + 6 b) from the middle of the web, flanges b and web h along the middle lines, one thickness.

    S. P. Timoshenko, Strength of Materials I, 3rd ed., 1955, art. 53 (from memory); thickness against depth 1:200.
    """
    h, b, t = 0.2, 0.1, 0.001
    shape = make("channel", depth=h + t, width=b + t / 2, web=t, flange=t, radius=0, toe_radius=0, slope=0, flange_at=0)
    f = solve((shape,))
    e = t / 2 - f.y_s[0]
    check_close(e, 3 * b**2 / (h + 6 * b), 5e-3)
    assert f.z_s[0] == pytest.approx(0.0, abs=1e-6 * h)


def test_shear_centre_of_an_angle_lies_where_its_legs_meet() -> None:
    t = 0.001
    f = solve((make("angle", depth=0.1, width=0.08, web=t, flange=t, radius=0, toe_radius=0),))
    assert (f.y_s[0], f.z_s[0]) == pytest.approx((t / 2, t / 2), abs=0.2 * t)


def test_stations_together_are_stations_alone() -> None:
    count = 9
    x = np.linspace(0.0, 1.0, count)
    one = np.ones(count)

    def section(rows: slice) -> Composition:
        from fishbelly.sections.outlines import OUTLINES

        o = one[rows]
        beam = {"depth": 0.3 + 0.2 * x[rows] ** 2, "web": 0.007 * o, "top_width": 0.15 * o, "top_flange": 0.01 * o}
        beam |= {"bottom_width": 0.15 * o, "bottom_flange": 0.01 * o, "radius": 0.012 * o}
        hole = OUTLINES["circle"]({"diameter": 0.1 * o}).moved(0.2 - 0.4 * x[rows], 0.05 * o)
        return Composition((OUTLINES["I"](beam),), ((hole, (0,), True),))

    together = flexure(section(slice(None)), one[None], one[None])
    for k in range(count):
        alone = flexure(section(slice(k, k + 1)), np.ones((1, 1)), np.ones((1, 1)))
        assert together.pieces[k] == alone.pieces[0]
        # the mesh is laid out for the middle one of the stations that share it
        check_close(together.F_zz[k], alone.F_zz[0], 2e-6)
        check_close(together.F_yy[k], alone.F_yy[0], 2e-6)


def test_no_section_of_one_station_is_left_out() -> None:
    assert solve((plate(0.1, 0.1),), ONE).F_zz.shape == (1,)
