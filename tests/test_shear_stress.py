"""Largest shear stress by level cuts: D. J. Jourawski's formula, VS/(I b), and how pieces share V."""

from __future__ import annotations

import math

import numpy as np
import pytest
from common import check_close
from flexure_shapes import ONE, STEEL, TIMBER, Moduli, columns, disc, make, plate

from fishbelly.sections.composition import Composition
from fishbelly.sections.outlines import Outline, polygon
from fishbelly.sections.shear_stress import ShearStress, shear_stress
from fishbelly.sections.stiffness import section_stiffness

EXACT = 1e-11
"""Relative; flow and width are polynomials over every slab."""
PARABOLA = 2e-6
"""Relative; where the flow over the width is no parabola, the one through the three largest of 81 places misses it."""


def stress(outlines: tuple[Outline, ...], moduli: Moduli = ONE, share_angle: bool = False) -> ShearStress:
    section, (E, G) = Composition(outlines), columns(moduli)
    return shear_stress(section.levels, E, G, section_stiffness(section.moments, E), share_angle)


def test_rectangle() -> None:
    found = stress((plate(0.1, 0.3, 2.0, 1.0),))
    check_close(found.peak[0, 0], 1.5 / 0.03, EXACT)
    assert found.level[0, 0] == pytest.approx(1.0, abs=1e-9)


def test_circle_is_four_thirds() -> None:
    found = stress((disc(0.2),))
    # sixteen levels a slab follow an arc to 1e-8
    check_close(found.peak[0, 0], 4 / 3 / (math.pi * 0.01), 1e-7)
    assert found.level[0, 0] == pytest.approx(0.0, abs=1e-5)


def test_triangle_is_largest_at_half_its_height() -> None:
    """3/2 V/A at mid-height, 4/3 V/A at the centroid: S. Timoshenko, Strength of Materials I, art. 26 (from memory)."""
    b, h = 0.2, 0.3
    found = stress((polygon(((-b / 2, 0), (b / 2, 0), (0, h)), (), 1),))
    check_close(found.peak[0, 0], 1.5 / (0.5 * b * h), PARABOLA)
    assert found.level[0, 0] == pytest.approx(0.5 * h, abs=1e-3 * h)


def test_i_in_its_web() -> None:
    h, w, b, f = 0.3, 0.01, 0.15, 0.015
    flanges = {"top_width": b, "bottom_width": b, "top_flange": f, "bottom_flange": f}
    found = stress((make("I", depth=h, web=w, radius=0, **flanges),))
    first = b * f * (h - f) / 2 + w * (h / 2 - f) ** 2 / 2
    inertia = (b * h**3 - (b - w) * (h - 2 * f) ** 3) / 12
    check_close(found.peak[0, 0], first / (inertia * w), EXACT)


def test_parts_on_one_level_share_as_g_times_width() -> None:
    pair = (plate(0.1, 0.3, -0.055), plate(0.01, 0.3))
    found = stress(pair, (TIMBER, STEEL))
    angle = 1.5 / (TIMBER[1] * 0.03 + STEEL[1] * 0.003)
    check_close(found.peak[0, 0], TIMBER[1] * angle, EXACT)
    check_close(found.peak[1, 0], STEEL[1] * angle, EXACT)


@pytest.mark.parametrize("share_angle", [False, True])
def test_pieces_apart_share_the_curvature_or_the_angle(share_angle: bool) -> None:
    """Pieces one above the other take V as their EI, over an opening as their G A."""
    b, h = np.array([0.1, 0.06]), np.array([0.1, 0.2])
    found = stress((plate(0.1, 0.1), plate(0.06, 0.2, 0.0, 0.3)), ONE * 2, share_angle)
    weight = b * h if share_angle else b * h**3
    for k in (0, 1):
        check_close(found.peak[k, 0], 1.5 / (b[k] * h[k]) * weight[k] / weight.sum(), EXACT)
    assert found.level[:, 0] == pytest.approx([0.0, 0.3], abs=1e-9)
