"""Plastic moments: closed forms, mixes of materials, cuts, and what is not said."""

import math

import numpy as np
import pytest
from commands import section
from hypothesis import given, settings
from hypothesis import strategies as st

from fishbelly.sections.composition import Composition
from fishbelly.sections.outlines import OUTLINES, Outline
from fishbelly.sections.plastic import plastic

HELD = '[[support]]\nat = "0 m"\nkind = "fixed"\n'


def drawn(kind: str, **dimensions: float) -> Outline:
    return OUTLINES[kind]({name: np.array([value]) for name, value in dimensions.items()})


def bent(*outlines: Outline, stress: tuple[float, ...] | None = None, cuts: tuple = ()) -> tuple[float, float]:
    """Plastic moment and level of the neutral axis."""
    stresses = np.array(stress or [1.0] * len(outlines))[:, None]
    found = plastic(Composition(outlines, cuts), stresses)
    return float(found.moment[0]), float(found.z[0])


def test_tube_and_unsymmetric_i() -> None:
    moment, z = bent(drawn("tube", diameter=0.2, wall=0.01))
    # outer and inner circle; the sine of a level does not smooth the outer arc beside the inner circle: 3e-10
    assert moment == pytest.approx((0.2**3 - 0.18**3) / 6, rel=1e-9)
    assert z == pytest.approx(0.0, abs=1e-15)
    # 150 x 10 over 100 x 10, web 280 x 8: half of the area 4740 is 2370, 1370 above the lower flange
    flanges = {"top_width": 0.15, "bottom_width": 0.1, "top_flange": 0.01, "bottom_flange": 0.01}
    moment, z = bent(drawn("I", depth=0.3, web=0.008, radius=0.0, **flanges))
    up = 0.01 + 1.37e-3 / 0.008
    assert z == pytest.approx(up - 0.15, rel=1e-12)
    below = 0.1 * 0.01 * (up - 0.005) + 0.008 * (up - 0.01) ** 2 / 2
    above = 0.15 * 0.01 * (0.295 - up) + 0.008 * (0.29 - up) ** 2 / 2
    assert moment == pytest.approx(below + above, rel=1e-12)


def test_any_level_in_a_gap_will_do_the_middle_is_told() -> None:
    flange = drawn("rectangle", width=0.1, depth=0.01)
    moment, z = bent(flange, flange.moved(0.0, 0.2))
    assert (moment, z) == pytest.approx((0.1 * 0.01 * 0.2, 0.1), rel=1e-12)


def test_a_plate_under_timber_by_hand() -> None:
    """Timber 100 x 200 at 20 MPa over steel 100 x 10 at 235 MPa: half of 635 kN is 158.75 mm of timber."""
    timber, plate = drawn("rectangle", width=0.1, depth=0.2), drawn("rectangle", width=0.1, depth=0.01)
    moment, z = bent(timber, plate.moved(0.0, -0.105), stress=(20e6, 235e6))
    h = 0.15875
    assert z == pytest.approx(0.1 - h, rel=1e-12)
    assert moment == pytest.approx(20e6 * 0.1 * (h**2 + (0.2 - h) ** 2) / 2 + 235e3 * (0.2 - h + 0.005), rel=1e-12)


def test_overlaps_and_cuts_count_once() -> None:
    """A bar displaces what it stands in, and a hole takes away: 100 x 200 with a level slot of 50 in its middle."""
    block, bar = drawn("rectangle", width=0.1, depth=0.2), drawn("rectangle", width=0.1, depth=0.05)
    moment, z = bent(block, cuts=((bar, (0,), True),))
    assert (moment, z) == pytest.approx((0.1 * (0.2**2 - 0.05**2) / 4, 0.0), rel=1e-12, abs=1e-15)
    moment, _ = bent(block, bar, stress=(1.0, 3.0))
    assert moment == pytest.approx(0.1 * (0.2**2 + 2 * 0.05**2) / 4, rel=1e-12)


@settings(max_examples=25, deadline=None)
@given(st.floats(0.02, 0.3), st.floats(0.02, 0.3), st.floats(0.01, 0.2), st.floats(0.1, 20.0), st.floats(-5.0, 5.0))
def test_properties(width: float, depth: float, diameter: float, ratio: float, level: float) -> None:
    """Turned over it is the same, moved it is the same, stronger parts never make it weaker."""
    block, bar = drawn("rectangle", width=width, depth=depth), drawn("circle", diameter=diameter)
    bar = bar.moved(0.0, 0.4 * depth)
    moment, z = bent(block, bar, stress=(1.0, ratio))
    over, z_over = bent(block.turned(math.pi), bar.turned(math.pi), stress=(1.0, ratio))
    moved, z_moved = bent(block.moved(1.0, level), bar.moved(1.0, level), stress=(1.0, ratio))
    assert over == pytest.approx(moment, rel=1e-7)
    assert moved == pytest.approx(moment, rel=1e-7)
    assert z_over == pytest.approx(-z, abs=1e-7)
    assert z_moved - level == pytest.approx(z, abs=1e-7)
    assert bent(block, bar, stress=(1.0, 1.1 * ratio))[0] >= moment


def job(yields: tuple[str, str], more: str = "") -> str:
    """Two rectangles, the lower under the upper."""
    text = 'length = "1 m"\nshear = false\n'
    for name, given_yield in zip(("upper", "lower"), yields, strict=True):
        text += f'[material.{name}]\nE = "200 GPa"\n' + (f'yield = "{given_yield}"\n' if given_yield else "")
    for name, where in (("upper", ""), ("lower", f'under = "upper"\n{more}')):
        text += f'[[part]]\nname = "{name}"\nmaterial = "{name}"\nshape = "rectangle"\n'
        text += f'width = "100 mm"\ndepth = "50 mm"\n{where}'
    return text + HELD


def test_what_the_command_says_of_mixes() -> None:
    found = section(job(("200 MPa", "100 MPa")), "0.5 m")["plastic"]
    # 1500 kN, half of it in 37.5 mm of the upper part
    assert found["z"] == pytest.approx(-0.0375, rel=1e-12)
    assert found["W_pl"] is None
    by_hand = 20e6 * (0.0375**2 + 0.0125**2) / 2 + 0.5e6 * 0.0375
    assert found["M_pl"] == pytest.approx(by_hand, rel=1e-12)
    assert section(job(("200 MPa", "")), "0.5 m")["plastic"] is None
    cracking = job(("200 MPa", "100 MPa")).replace('yield = "100 MPa"\n', 'yield = "100 MPa"\ncracking = "2 MPa"\n')
    assert section(cracking, "0.5 m")["plastic"] is None
