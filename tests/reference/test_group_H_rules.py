"""Group H: stiffness, cracking stress and long-term factor of concrete by ACI 318."""

import pytest
from printed import half_a_digit, rows

from fishbelly.catalog.concrete_rules import aci_long_term, aci_modulus, aci_rupture

PSI = 0.45359237 * 9.80665 / 0.0254**2


def test_H8() -> None:
    row = rows("H")["H8"]
    found = {"Ec": aci_modulus(4000 * PSI) / PSI / 1e3, "fr": aci_rupture(4000 * PSI) / PSI}
    for key, value in found.items():
        half_a_digit(value, row["value"][key], row, key)
        assert value == pytest.approx(row["computed"][key], rel=1e-8)
    # the row's title, in MPa: 4700 sqrt(f'c) and 0.62 sqrt(f'c), rounded to so many figures
    assert aci_modulus(25e6) / 1e6 / 5 == pytest.approx(4700, rel=0.01)
    assert aci_rupture(25e6) / 1e6 / 5 == pytest.approx(0.62, rel=0.01)
    # and xi over 1 + 50 rho': 1.0 at 3 months, 1.2, 1.4 and 2.0 at 5 years
    assert [aci_long_term(m) for m in (3, 6, 12, 60, 600)] == [1.0, 1.2, 1.4, 2.0, 2.0]
    assert aci_long_term(60, 0.01) == pytest.approx(2.0 / 1.5, rel=1e-12)
