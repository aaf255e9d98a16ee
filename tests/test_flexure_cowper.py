"""Cowper's shear coefficient: G. R. Cowper, J. Appl. Mech. 33 (1966) 335-340, table of coefficients."""

from __future__ import annotations

import pytest
from common import check_close
from flexure_shapes import disc, ell, make, many_sided, plate

from fishbelly.sections.composition import Composition
from fishbelly.sections.cowper import cowper_coefficient
from fishbelly.sections.outlines import Outline


def k(shape: Outline, nu: float = 0.3) -> float:
    return float(cowper_coefficient(Composition((shape,)), nu)[0])


@pytest.mark.parametrize("nu", [0.0, 0.3, 0.5])
def test_rectangle(nu: float) -> None:
    check_close(k(plate(0.1, 0.2, 2.0, 3.0), nu), 10 * (1 + nu) / (12 + 11 * nu), 1e-10)
    check_close(k(plate(0.2, 0.05), nu), 10 * (1 + nu) / (12 + 11 * nu), 1e-10)


@pytest.mark.parametrize("nu", [0.0, 0.3, 0.5])
def test_circle(nu: float) -> None:
    check_close(k(disc(0.2, 2.0, 3.0), nu), 6 * (1 + nu) / (7 + 6 * nu), 1e-9)


@pytest.mark.parametrize("nu", [0.0, 0.3])
@pytest.mark.parametrize("m", [0.2, 0.6, 0.9])
def test_hollow_circle(nu: float, m: float) -> None:
    """6 (1+ν)(1+m²)² / ((7+6ν)(1+m²)² + (20+12ν) m²), m the ratio of the radii."""
    s = (1 + m * m) ** 2
    expected = 6 * (1 + nu) * s / ((7 + 6 * nu) * s + (20 + 12 * nu) * m * m)
    check_close(k(make("tube", diameter=0.2, wall=0.1 * (1 - m)), nu), expected, 1e-6)


@pytest.mark.parametrize("a, b", [(2.0, 1.0), (1.0, 2.0)])
def test_ellipse_loaded_along_a(a: float, b: float) -> None:
    """12 (1+ν) a² (3a²+b²) / ((40+37ν) a⁴ + (16+10ν) a²b² + ν b⁴); a polygon of 48 sides is 2e-5 off."""
    nu = 0.3
    bottom = (40 + 37 * nu) * a**4 + (16 + 10 * nu) * a**2 * b**2 + nu * b**4
    check_close(k(many_sided(a, b, 48), nu), 12 * (1 + nu) * a**2 * (3 * a**2 + b**2) / bottom, 5e-5)


def test_thin_square_tube() -> None:
    """20 (1+ν) / (48+39ν) in the limit of a thin wall, here extrapolated from two walls."""
    walls = [k(make("box", width=2, depth=2, web=t, flange=t, radius=0, inner_radius=0)) for t in (0.01, 0.005)]
    check_close(2 * walls[1] - walls[0], 20 * 1.3 / (48 + 39 * 0.3), 1e-4)


def test_no_poisson_no_difference() -> None:
    """With ν = 0 the definition is the energy's: an I with its fillets."""
    from flexure_shapes import beam, solve

    from fishbelly.sections.area_moments import area_moments

    shape = beam(0.012)
    check_close(k(shape, 0.0), solve((shape,)).GA_z[0] / area_moments(shape).area[0], 1e-6)


def test_refuses_what_the_definition_does_not_cover() -> None:
    with pytest.raises(ValueError, match="in one piece"):
        cowper_coefficient(Composition((plate(0.1, 0.1), plate(0.1, 0.1, 0.5))), 0.3)
    with pytest.raises(ValueError, match="principal"):
        k(ell())
