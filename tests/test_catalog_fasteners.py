"""Slip moduli of fasteners and rules of concrete: pairs of timbers, steel, and arguments that are refused."""

import math

import pytest

from fishbelly.catalog.concrete_rules import aci_long_term, aci_modulus, aci_rupture
from fishbelly.catalog.fasteners import UnknownFastener, fasteners, find_fastener, slip_modulus, ultimate_slip_modulus
from fishbelly.catalog.search import search


def test_two_timbers_steel_and_ultimate_limit_states() -> None:
    one = slip_modulus("Bolt", 0.012, math.sqrt(350.0 * 550.0))
    assert slip_modulus("bolt", 0.012, 350.0, 550.0) == pytest.approx(one, rel=1e-12)
    plain = slip_modulus("screw", 0.006, 420.0)
    assert slip_modulus("screw", 0.006, 420.0, to_steel_or_concrete=True) == pytest.approx(2 * plain, rel=1e-12)
    assert ultimate_slip_modulus(plain) == pytest.approx(plain * 2 / 3, rel=1e-12)


def test_the_stud_has_one_stiffness() -> None:
    assert find_fastener("headed stud 19 mm").constant == 100e6
    with pytest.raises(ValueError, match="not a fastener of timber"):
        slip_modulus("headed stud 19 mm", 0.019, 420.0)


@pytest.mark.parametrize(
    ("size", "density", "other", "steel"),
    [(0.0, 420.0, None, False), (0.012, 0.0, None, False), (0.012, 420.0, -1.0, False), (0.012, 420.0, 350.0, True)],
)
def test_refused(size: float, density: float, other: float | None, steel: bool) -> None:
    with pytest.raises(ValueError, match="expected"):
        slip_modulus("bolt", size, density, other, steel)


def test_unknown_ones_name_the_nearest() -> None:
    with pytest.raises(UnknownFastener, match="nearest: split ring"):
        find_fastener("split rings")


def test_search_finds_them_with_their_source() -> None:
    for word in ("bolt", "nail", "stud", "screw", "staple"):
        assert any(e.group == "fastener" and e.source for e in search(word)), word
    assert len(search("fasteners")) == len(fasteners()) == len(search("K_ser"))


def test_concrete_of_light_weight_and_what_is_refused() -> None:
    # 33 w^1.5 sqrt(f'c) at 145 lb/ft3 is within 1.2 % of 57 000 sqrt(f'c)
    assert aci_modulus(30e6, 145 * 16.01846337) == pytest.approx(aci_modulus(30e6), rel=0.012)
    assert aci_rupture(30e6, 0.75) == pytest.approx(0.75 * aci_rupture(30e6), rel=1e-12)
    assert aci_long_term(36) == pytest.approx(1.4 + 0.6 * 24 / 48, rel=1e-12)
    for call in (
        lambda: aci_modulus(0.0),
        lambda: aci_modulus(30e6, 1000.0),
        lambda: aci_rupture(30e6, 0.5),
        lambda: aci_long_term(1.0),
        lambda: aci_long_term(12.0, -0.1),
    ):
        with pytest.raises(ValueError, match="expected"):
            call()
