"""Temperature of two metals against the closed form; beams of one metal stand in `test_actions`."""

from __future__ import annotations

import pytest
from common import INF, check_close, fixed, part, run, station

from fishbelly.member.description import Material, Member, Placing
from fishbelly.member.loads import Temperature

CLOSED = 1e-9
"""Relative; closed forms of prismatic members (asked for: 1e-8)."""

BRASS = Material("brass", 100e9, G=37e9, density=8500.0, expansion=19e-6)
INVAR = Material("invar", 145e9, G=57e9, density=8100.0, expansion=1.2e-6)
L = 0.2


@pytest.mark.parametrize(("upper", "lower"), [(0.001, 0.001), (0.0015, 0.0008)])
def test_two_metal_strip(upper: float, lower: float) -> None:
    """Curvature of a heated strip of two metals.

    S. Timoshenko, Analysis of bi-metal thermostats, J. Opt. Soc. Am. 11 (1925) 233-255, eq. (4):
    k = 6 (a2 - a1) dT (1 + m)² / (h (3 (1 + m)² + (1 + m n) (m² + 1 / (m n)))), m = t1 / t2, n = E1 / E2.
    """
    top = part("brass", "rectangle", L, width=0.01, depth=upper, material="brass")
    bottom = part("invar", "rectangle", L, width=0.01, depth=lower, material="invar", place=Placing("under", "brass"))
    heat = Temperature(0.0, L, 60.0, 60.0)
    supports = (fixed("A", 0.0, along=INF),)
    member = Member(L, (top, bottom), (BRASS, INVAR), supports=supports, loads=(heat,), shear=False)
    m, n, h = lower / upper, 145.0 / 100.0, upper + lower
    curved = 6.0 * (19e-6 - 1.2e-6) * 60.0 * (1.0 + m) ** 2
    curved /= h * (3.0 * (1.0 + m) ** 2 + (1.0 + m * n) * (m**2 + 1.0 / (m * n)))
    found = run(member, L)
    check_close(station(found, L)["deflection"], curved * L**2 / 2.0, CLOSED)
    # nothing is carried by the strip as a whole
    assert abs(station(found, L)["M"]) < 1e-12 and abs(station(found, L)["N"]) < 1e-9
