import math

import pytest

from fishbelly.catalog.concrete_time import (
    basic_drying_shrinkage,
    creep_coefficient,
    notional_size,
    shrinkage,
    total_shrinkage,
)

TABLE_3_2 = [
    (20, (0.62, 0.58, 0.49, 0.30, 0.17, 0.00)),
    (40, (0.48, 0.46, 0.38, 0.24, 0.13, 0.00)),
    (60, (0.38, 0.36, 0.30, 0.19, 0.10, 0.00)),
    (80, (0.30, 0.28, 0.24, 0.15, 0.08, 0.00)),
    (90, (0.27, 0.25, 0.21, 0.13, 0.07, 0.00)),
]


@pytest.mark.parametrize(("strength", "printed"), TABLE_3_2)
def test_drying_shrinkage_of_table_3_2(strength: float, printed: tuple[float, ...]) -> None:
    """EN 1992-1-1:2004 Table 3.2, per mille, from memory; half of the last printed digit."""
    for humidity, value in zip((0.2, 0.4, 0.6, 0.8, 0.9, 1.0), printed, strict=True):
        assert 1e3 * basic_drying_shrinkage(strength * 1e6, humidity) == pytest.approx(value, abs=0.005)


def test_creep_by_hand_below_35() -> None:
    """C20/25, RH 80 %, h_0 = 400 mm, loaded at 28 days, cement N; all to five figures on paper.

    phi_RH = 1 + 0.2/(0.1 · 7.36806) = 1.27144; beta(fcm) = 16.8/5.29150 = 3.17490;
    beta(t_0) = 1/(0.1 + 1.94730) = 0.48845.
    """
    expected = 1.27144 * 3.17490 * 0.48845
    assert creep_coefficient(math.inf, 28, 20e6, 0.8, 0.4) == pytest.approx(expected, rel=2e-5)


def test_creep_by_hand_above_35() -> None:
    """C30/37, RH 50 %, h_0 = 200 mm, loaded at 28 days, cement N.

    alpha_1 = (35/38)^0.7 = 0.94407, alpha_2 = (35/38)^0.2 = 0.98369;
    phi_RH = (1 + 0.94407 · 0.5/(0.1 · 5.84804)) · 0.98369 = 1.77769; beta(fcm) = 16.8/6.16441 = 2.72532.
    """
    expected = 1.77769 * 2.72532 * 0.48845
    assert creep_coefficient(math.inf, 28, 30e6, 0.5, 0.2) == pytest.approx(expected, rel=2e-5)


def test_creep_with_time_by_hand() -> None:
    """The same after 365 days under load: beta_H = 1.5 (1 + 0.6^18) 200 + 250 · (35/38)^0.5 = 539.956.

    beta_c = (365/(539.956 + 365))^0.3 = 0.76157.
    """
    final = creep_coefficient(math.inf, 28, 30e6, 0.5, 0.2)
    after = creep_coefficient(393, 28, 30e6, 0.5, 0.2)
    assert after / final == pytest.approx(0.76157, abs=2e-5)


def test_rapid_cement_ages_faster() -> None:
    """t_0 = 7 days, class R: 7 (9/(2 + 7^1.2) + 1) = 12.109 days of class N."""
    equal = 7 * (9 / (2 + 7**1.2) + 1)
    rapid = creep_coefficient(math.inf, 7, 30e6, 0.5, 0.2, "R")
    assert rapid == pytest.approx(creep_coefficient(math.inf, equal, 30e6, 0.5, 0.2, "N"), rel=1e-12)
    assert equal == pytest.approx(12.109, abs=5e-4)


def test_shrinkage_by_hand() -> None:
    """C30/37, RH 50 %, h_0 = 200 mm, N: 0.85 · 660 e^(-0.456) · 1.55 (1 - 0.125) = 482.24e-6.

    k_h = 0.85; autogenous 2.5 (30 - 10) = 50e-6.
    """
    found = shrinkage(math.inf, 3, 30e6, 0.5, 0.2)
    assert found.drying == pytest.approx(0.85 * 482.24e-6, rel=2e-5)
    assert found.autogenous == pytest.approx(50e-6, rel=1e-12)
    assert total_shrinkage(math.inf, 3, 30e6, 0.5, 0.2) == found.drying + found.autogenous


def test_shrinkage_with_time_by_hand() -> None:
    """100 days of drying: 100/(100 + 0.04 · 200^1.5) = 0.46919; 1 - e^-2 = 0.86466."""
    final, found = shrinkage(math.inf, 1, 30e6, 0.5, 0.2), shrinkage(101, 1, 30e6, 0.5, 0.2)
    assert found.drying / final.drying == pytest.approx(0.46919, abs=1e-5)
    hundred = shrinkage(100, 1, 30e6, 0.5, 0.2)
    assert hundred.autogenous / final.autogenous == pytest.approx(0.86466, abs=1e-5)


@pytest.mark.parametrize(("size", "k_h"), [(0.05, 1), (0.1, 1), (0.15, 0.925), (0.3, 0.75), (0.4, 0.725), (2, 0.7)])
def test_size_factor_of_table_3_3(size: float, k_h: float) -> None:
    found = shrinkage(math.inf, 3, 30e6, 0.5, size).drying / basic_drying_shrinkage(30e6, 0.5)
    assert found == pytest.approx(k_h, rel=1e-12)


def test_nothing_has_happened_yet() -> None:
    assert creep_coefficient(28, 28, 30e6, 0.5, 0.2) == 0
    assert shrinkage(3, 3, 30e6, 0.5, 0.2).drying == 0


def test_notional_size_of_a_slab_drying_on_both_faces() -> None:
    assert notional_size(1.0 * 0.13, 2.0) == pytest.approx(0.13)


@pytest.mark.parametrize(
    ("changed", "message"),
    [
        ({"age": 10}, "ages 0 < start <= age"),
        ({"loaded_at": 0}, "ages 0 < start <= age"),
        ({"f_ck": 30}, "from 1e6 to 90e6 Pa"),
        ({"f_ck": 120e6}, "from 1e6 to 90e6 Pa"),
        ({"humidity": 50}, "as a ratio"),
        ({"size": 0}, "notional size above 0"),
        ({"cement": "X"}, 'cement class "S", "N" or "R"'),
    ],
)
def test_out_of_range(changed: dict[str, float | str], message: str) -> None:
    arguments = {
        "age": 100,
        "loaded_at": 28,
        "f_ck": 30e6,
        "humidity": 0.5,
        "size": 0.2,
        "cement": "N",
        **changed,
    }
    with pytest.raises(ValueError, match=message):
        creep_coefficient(**arguments)


def test_notional_size_out_of_range() -> None:
    with pytest.raises(ValueError, match="area and a perimeter above 0"):
        notional_size(1.0, 0.0)
