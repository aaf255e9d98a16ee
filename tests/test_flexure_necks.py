"""Shear flexibility where little is left beside a hole: cells crowd towards the neck."""

from __future__ import annotations

import math

import numpy as np
import pytest
from flexure_shapes import ONE, beam, disc, plate, solve, tensor

from fishbelly.sections.outlines import polygon

PROMISED = 1e-6
"""Relative; the same as without a neck."""


def gap(found: np.ndarray, expected: np.ndarray) -> float:
    return float(np.abs(found - expected).max() / math.sqrt(abs(np.linalg.det(expected))))


@pytest.mark.parametrize("diameter, aside", [(6.82, 0.0), (6.0, 0.41), (5.0, 0.91), (3.0, 1.91), (6.98, 0.0)])
def test_hole_along_a_web_with_little_left_beside_it(diameter: float, aside: float) -> None:
    """Web of 7 mm; down to a hundredth of a millimetre is left."""
    hole = ((disc(diameter * 1e-3, aside * 1e-3, 0.01), (0,), True),)
    f = solve((beam(),), cuts=hole)
    settled = tensor(solve((beam(),), cuts=hole, degree=14))
    true = gap(tensor(f), settled)
    assert true < PROMISED and f.error()[0] < PROMISED, (true, f.error())
    # the neck counts: it is worth more than what is promised
    assert gap(tensor(solve((beam(),))), settled) > 1e-3


def test_wedge_that_ends_short_of_its_point() -> None:
    wedge = polygon(((-0.05, 0.0), (0.05, 0.0), (0.0005, 0.3), (-0.0005, 0.3)), (), 1)
    shapes = (wedge, plate(0.1, 0.02, 0.0, 0.31))
    assert gap(tensor(solve(shapes, ONE * 2)), tensor(solve(shapes, ONE * 2, degree=14))) < PROMISED
