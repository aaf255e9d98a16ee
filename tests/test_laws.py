"""Dimensions along x: stations, steps, parabolas, sides, slopes and extremes."""

from __future__ import annotations

import numpy as np
import pytest

from fishbelly.member.laws import constant, parabola, steps, straight


def test_constant() -> None:
    law = constant(0.3)
    assert law.is_constant and law.value == 0.3
    assert law(np.array([0.0, 5.0])).tolist() == [0.3, 0.3]
    assert law.slope(1.0) == 0.0 and law.extremes(0.0, 9.0) == (0.3, 0.3)


def test_straight_between_and_constant_outside() -> None:
    law = straight([1.0, 3.0], [0.2, 0.6])
    assert law(np.array([-1.0, 0.5, 1.0, 2.0, 3.0, 7.0])) == pytest.approx([0.2, 0.2, 0.2, 0.4, 0.6, 0.6])
    assert law.slope(np.array([0.5, 2.0, 4.0])) == pytest.approx([0.0, 0.2, 0.0])
    assert not law.is_constant


def test_the_same_place_twice_is_a_step() -> None:
    law = straight([0.0, 2.0, 2.0, 4.0], [0.9, 0.5, 0.3, 0.3])
    assert float(law(2.0, "left")) == pytest.approx(0.5)
    assert float(law(2.0, "right")) == pytest.approx(0.3)
    assert float(law(2.0)) == float(law(2.0, "right"))
    assert law.extremes(0.0, 4.0) == pytest.approx((0.3, 0.9))
    assert law.extremes(0.0, 2.0) == pytest.approx((0.5, 0.9))
    assert law.extremes(2.0, 4.0) == pytest.approx((0.3, 0.3))


def test_a_step_at_the_first_and_at_the_last_station() -> None:
    law = straight([0.0, 0.0, 1.0, 1.0], [0.1, 0.2, 0.2, 0.4])
    assert float(law(0.0, "left")) == pytest.approx(0.1) and float(law(0.0)) == pytest.approx(0.2)
    assert float(law(1.0, "left")) == pytest.approx(0.2) and float(law(1.0)) == pytest.approx(0.4)
    assert float(law(5.0)) == pytest.approx(0.4)


def test_steps_hold_up_to_their_place() -> None:
    law = steps([0.06, 0.2, 0.42], [0.045, 0.055, 0.034])
    assert law(np.array([0.0, 0.06, 0.1, 0.2, 0.3, 0.9])) == pytest.approx([0.045, 0.055, 0.055, 0.034, 0.034, 0.034])
    assert law(np.array([0.06, 0.2]), "left") == pytest.approx([0.045, 0.055])
    assert law.knots.tolist() == [0.06, 0.2]


@pytest.mark.parametrize("flat, at, expected", [(2.0, 1.0, 0.6), (0.0, 1.0, 0.8)])
def test_parabola_is_flat_where_it_says(flat: float, at: float, expected: float) -> None:
    law = parabola([0.0, 2.0], [0.9, 0.5], [flat])
    assert float(law(at)) == pytest.approx(expected)
    assert float(law.slope(flat, "left" if flat else "right")) == pytest.approx(0.0, abs=1e-15)
    assert law(np.array([0.0, 2.0])) == pytest.approx([0.9, 0.5])


def test_fish_belly_of_two_parabolas() -> None:
    law = parabola([0.0, 3.0, 6.0], [0.3, 0.8, 0.3], [3.0])
    assert float(law(1.5)) == pytest.approx(0.8 - 0.5 / 4)
    assert float(law(4.5)) == pytest.approx(0.8 - 0.5 / 4)
    assert law.extremes(0.0, 6.0) == pytest.approx((0.3, 0.8))
    assert law.extremes(1.0, 2.0)[1] < 0.8


def test_level_piece_of_a_parabola_needs_no_flat_end() -> None:
    law = parabola([0.0, 1.0, 2.0], [0.5, 0.5, 0.3], [2.0])
    assert float(law(0.5)) == 0.5 and float(law(1.5)) == pytest.approx(0.35)


@pytest.mark.parametrize(
    "call",
    [
        lambda: parabola([0.0, 2.0], [0.9, 0.5]),
        lambda: parabola([0.0, 2.0], [0.9, 0.5], [0.0, 2.0]),
        lambda: straight([0.0, 2.0, 1.0], [1, 2, 3]),
        lambda: straight([0.0, 1.0, 1.0, 1.0, 2.0], [1, 2, 3, 4, 5]),
        lambda: steps([0.0, 2.0, 2.0], [1, 2, 3]),
    ],
    ids=["no flat end", "two flat ends", "goes back", "three at one place", "steps that do not grow"],
)
def test_laws_that_make_no_sense_are_refused(call: object) -> None:
    with pytest.raises(ValueError):
        call()


def test_turning_point_inside_a_piece_is_an_extreme() -> None:
    law = straight([0.0, 1.0], [0.0, 1.0])
    law = type(law)(law.knots, law.origins, np.array([[0.0, 0, 0], [0.0, 1.0, -1.0], [0.0, 0, 0]]))
    low, high = law.extremes(0.0, 1.0)
    assert high == pytest.approx(0.25) and low == pytest.approx(0.0)


def test_times() -> None:
    law = straight([0.0, 1.0], [0.2, 0.4]).times(2.5)
    assert float(law(0.5)) == pytest.approx(0.75)


def test_arrays_of_a_law_cannot_be_changed() -> None:
    with pytest.raises(ValueError):
        constant(1.0).coefficients[0, 0] = 2.0
