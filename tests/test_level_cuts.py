"""Level cuts: events, widths by owner, and their integrals against exact outline moments."""

from __future__ import annotations

import math

import numpy as np
import pytest
from common import CLOSED, check_close
from test_outlines import ALL

from fishbelly.sections.area_moments import area_moments
from fishbelly.sections.composition import Composition
from fishbelly.sections.level_cuts import events, pieces, widths
from fishbelly.sections.outlines import OUTLINES, Outline, polygon


def make(kind: str, y: float = 0.0, z: float = 0.0, **dimensions: float) -> Outline:
    return OUTLINES[kind]({k: np.array([float(v)]) for k, v in dimensions.items()}).moved(y, z)


def cut(outlines: list[Outline], level: float, parts: int | None = None, targets: tuple = ()) -> tuple:
    """Width, first and second integral over y, and ends, of every part on one level."""
    count = len(outlines) if parts is None else parts
    w = widths(pieces(outlines), np.array([[level]]), np.array([[[level]]]), count, targets)
    return tuple(np.array(getattr(w, f))[:, 0, 0, 0] for f in ("width", "first", "second", "left", "right"))


def test_width_of_a_disc() -> None:
    width, first, second, left, right = cut([make("circle", 0.1, diameter=0.2)], 0.06)
    check_close(width[0], 0.16, CLOSED)
    check_close(first[0], 0.016, CLOSED)
    check_close(second[0], (0.18**3 - 0.02**3) / 3, CLOSED)
    assert (left[0], right[0]) == pytest.approx((0.02, 0.18))


def test_later_part_displaces_and_a_cut_takes_away() -> None:
    plate, core = make("rectangle", width=0.4, depth=0.2), make("circle", diameter=0.1)
    width, *_ = cut([plate, core], 0.03)
    chord = 2 * math.sqrt(0.05**2 - 0.03**2)
    check_close(width[0], 0.4 - chord, CLOSED)
    check_close(width[1], chord, CLOSED)
    slot = make("rectangle", width=0.02, depth=1.0)
    width, *_ = cut([plate, core, slot], 0.03, 2, ((1,),))
    check_close(width[0], 0.4 - chord, CLOSED)
    check_close(width[1], chord - 0.02, CLOSED)


def test_a_level_that_misses_a_part() -> None:
    width, _, _, left, right = cut([make("rectangle", width=0.1, depth=0.1)], 0.2)
    assert width[0] == 0.0 and math.isnan(left[0]) and math.isnan(right[0])


def test_comb_is_met_in_several_stretches() -> None:
    comb = polygon(((0, 0), (3, 0), (3, 2), (2, 2), (2, 1), (1, 1), (1, 2), (0, 2)), (), 1)
    width, first, _, left, right = cut([comb], 1.5)
    assert (width[0], first[0], left[0], right[0]) == pytest.approx((2.0, 0.5 + 2.5, 0.0, 3.0))


def test_events_of_a_disc_beside_a_plate_hold_their_crossings() -> None:
    p = pieces([make("circle", diameter=0.2), make("rectangle", 0.1, 0.0, width=0.1, depth=0.3)])
    z = events(p, ((0, 1),))[0]
    for level in (-0.15, -0.1, 0.0, 0.1, 0.15, math.sqrt(0.1**2 - 0.05**2)):
        assert np.abs(z - level).min() < 1e-14, level
    # without crossings only corners and the tops of arcs
    assert np.abs(events(p, ())[0] - math.sqrt(0.0075)).min() > 1e-3


@pytest.mark.parametrize("kind", ALL)
@pytest.mark.parametrize("turn", [0.0, 0.4, 0.5 * math.pi])
def test_integrated_widths_are_the_area_moments(kind: str, turn: float) -> None:
    """Level cuts integrated over their slabs against Green's theorem along the outline: two separate roads.

    Sixteen levels a slab follow an arc to about 1e-8 where fillets are short; only shear stiffness, wanted to
    1e-6, is integrated from them.
    """
    tolerance = 1e-7 if np.any(make(kind, **ALL[kind]).bulge) else CLOSED
    shape = make(kind, **ALL[kind]).turned(turn)
    exact = area_moments(shape)
    levels = Composition((shape,)).levels
    from fishbelly.sections.chebyshev import rule

    weight = levels.stretch[0] * rule(levels.z.shape[-1]).weights
    w, first, second = (getattr(levels.widths, f)[0, 0] for f in ("width", "first", "second"))
    z = levels.z[0]
    area = float((w * weight).sum())
    check_close(area, exact.area[0], tolerance)
    size = float(exact.zz[0] + exact.yy[0]) + area * float(exact.y[0] ** 2 + exact.z[0] ** 2)
    check_close(float((first * weight).sum()), float(exact.area[0] * exact.y[0]), tolerance, area * 0.1)
    check_close(
        float((w * z * z * weight).sum()), float(exact.zz[0] + exact.area[0] * exact.z[0] ** 2), tolerance, size
    )
    check_close(float((second * weight).sum()), float(exact.yy[0] + exact.area[0] * exact.y[0] ** 2), tolerance, size)
    check_close(
        float((first * z * weight).sum()), float(exact.yz[0] + exact.area[0] * exact.y[0] * exact.z[0]), tolerance, size
    )


def test_bars_that_touch_leave_no_gap_and_no_overlap() -> None:
    row = make("bars", count=3, diameter=0.02, spacing=0.02)
    width, *_ = cut([row], 0.0005)
    check_close(width[0], 3 * 2 * math.sqrt(0.01**2 - 0.0005**2), CLOSED)
