"""How results are written, in either style of units."""

import math
import re
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from fishbelly.cli.format_quantity import (
    METRIC,
    US,
    format_column,
    format_number,
    format_position,
    format_value,
    style_of,
    unit_label,
    unit_size,
)
from fishbelly.cli.units import Kind, unit_factor

# Exact by definition: international yard and pound agreement 1959; g of the 3rd CGPM 1901.
INCH = Fraction("0.0254")
KIP = 1000 * Fraction("0.45359237") * Fraction("9.80665")

LABELS = {
    "position": Kind.LENGTH,
    "length": Kind.LENGTH,
    "deflection": Kind.LENGTH,
    "force": Kind.FORCE,
    "moment": Kind.MOMENT,
    "force per length": Kind.FORCE_PER_LENGTH,
    "force per area": Kind.FORCE_PER_AREA,
    "shear flow": Kind.FORCE_PER_LENGTH,
    "stress": Kind.STRESS,
    "modulus": Kind.MODULUS,
    "axial stiffness": Kind.FORCE,
    "shear stiffness": Kind.FORCE,
    "stiffness": Kind.STIFFNESS,
    "joint stiffness": Kind.JOINT_STIFFNESS,
    "rotational stiffness": Kind.ROTATIONAL_STIFFNESS,
    "mass": Kind.MASS,
    "mass per length": Kind.MASS_PER_LENGTH,
    "density": Kind.DENSITY,
    "temperature": Kind.TEMPERATURE,
    "expansion": Kind.EXPANSION,
    "angle": Kind.ANGLE,
    "slope": Kind.ANGLE,
    "frequency": Kind.FREQUENCY,
    "time": Kind.TIME,
}
NOT_READ = {"area": 2, "section modulus": 3, "second moment": 4}


@pytest.mark.parametrize("style", ["metric", "us"])
@pytest.mark.parametrize("what", LABELS)
def test_labels_say_the_factor_used(what, style):
    assert unit_size(what, style) == pytest.approx(unit_factor(unit_label(what, style), LABELS[what]), rel=1e-15)


@pytest.mark.parametrize(("what", "power"), NOT_READ.items())
def test_labels_of_section_properties_say_the_factor_used(what, power):
    assert (unit_label(what, "us"), unit_size(what, "us")) == (f"in{power}", pytest.approx(0.0254**power))
    assert (unit_label(what, "metric"), unit_size(what, "metric")) == (
        f"cm{power}",
        pytest.approx(0.01**power),
    )


def test_styles_show_the_same_quantities():
    only_shown = {"bending stiffness", "factor", "moment per length", "warping constant"}
    assert set(METRIC.units) == set(US.units) == {*LABELS, *NOT_READ} | only_shown
    assert unit_label("bending stiffness", METRIC) == "kNm2" and unit_size("bending stiffness", METRIC) == 1e3
    assert unit_label("bending stiffness", US) == "kip-in2"
    assert unit_size("bending stiffness", US) == pytest.approx(float(KIP * INCH**2), rel=1e-15)
    assert style_of("us") is US and style_of(METRIC) is METRIC


def test_unknown_styles_and_quantities_are_refused():
    with pytest.raises(ValueError, match='units are "metric" or "us", not \'imperial\''):
        style_of("imperial")
    with pytest.raises(ValueError, match="no unit is known for 'colour'; known are position, length"):
        unit_label("colour", "metric")


@pytest.mark.parametrize(
    ("value", "what", "metric", "us"),
    [
        (0.0, "force", "0 kN", "0 kip"),
        (-0.0, "force", "0 kN", "0 kip"),
        (1002.0, "force", "1.002 kN", "0.2253 kip"),
        (-12345.6, "moment", "-12.35 kNm", "-9.106 kip-ft"),
        (12_345_678.0, "force", "12 346 kN", "2,775 kip"),
        (99_999_600.0, "force", "100 000 kN", "22,481 kip"),
        (9999.6, "force", "10.00 kN", "2.248 kip"),
        (0.0803e-3, "deflection", "0.08030 mm", "0.003161 in"),
        (1e-9, "deflection", "1.000e-6 mm", "3.937e-8 in"),
        (29_435_700.0, "bending stiffness", "29 436 kNm2", "10,257,004 kip-in2"),
        (2.1e11, "modulus", "210.0 GPa", "30,458 ksi"),
        (12e-6, "expansion", "1.200e-5 /K", "6.667e-6 /degF"),
        (1e20, "force", "1.000e17 kN", "2.248e16 kip"),
        (1 / 360, "slope", "2.778 mrad", "2.778 mrad"),
        (0.97, "factor", "0.9700", "0.9700"),
        (None, "force", "–", "–"),
        (math.nan, "force", "nan kN", "nan kip"),
        (-math.inf, "force", "-inf kN", "-inf kip"),
    ],
)
def test_values_as_written(value, what, metric, us):
    assert format_value(value, what, "metric") == metric
    assert format_value(value, what, "us") == us


def test_digits_and_scale():
    assert format_number(0.0123456, "deflection", "metric", digits=3) == "12.3"
    assert format_number(0.0123456, "deflection", "metric", digits=1) == "12"
    assert format_number(-1e-12, "force", "metric", scale=5e3) == "0.000"
    assert format_number(-6.0, "force", "metric", scale=5e3) == "-0.006"
    assert format_number(0.0, "force", "metric", scale=0.0) == "0.000"


def test_columns_share_their_decimals():
    assert format_column([1e-20, -1e-9, 3.0, -12345.6], "force", "metric") == [
        "0.00",
        "0.00",
        "0.00",
        "-12.35",
    ]
    assert format_column([0.0, 0.0], "force", "us") == ["0.000", "0.000"]
    assert format_column([None, math.inf, 2e3], "force", "metric") == ["–", "inf", "2.000"]
    assert format_column([1e-9, 3.33e-12, 1e-20, 0.0], "deflection", "metric") == [
        "1.000e-6",
        "3e-9",
        "0",
        "0",
    ]
    assert format_column([], "force", "metric") == []


@given(st.lists(st.floats(-1e9, 1e9), max_size=8), st.integers(1, 6))
def test_columns_are_right_to_their_last_digit_and_never_minus_zero(values, digits):
    shown = format_column(values, "force", "metric", digits)
    scale = max((abs(value) for value in values), default=0.0) / 1e3
    for value, text in zip(values, shown, strict=True):
        assert abs(float(text.replace(" ", "")) - value / 1e3) <= 0.5001 * 10.0 ** (1 - digits) * scale + 1e-300
        assert not re.fullmatch(r"-0(\.0*)?", text)


@pytest.mark.parametrize(
    ("x", "metric", "us"),
    [
        (0.0, "0.000 m", "0'-0\""),
        (-0.0, "0.000 m", "0'-0\""),
        (-1e-9, "0.000 m", "0'-0\""),
        (3.75, "3.750 m", "12.303 ft"),
        (0.0305, "0.0305 m", "0.100 ft"),
        (12.066 / 7, "1.724 m", "5.655 ft"),
        (0.1 + 0.2, "0.300 m", "0.984 ft"),
        (12 * 0.3048 + 6.5 * 0.0254, "3.8227 m", "12'-6 1/2\""),
        (0.1524, "0.1524 m", "0'-6\""),
        (0.0254 / 16, "0.002 m", "0'-0 1/16\""),
        (0.3048 * 11.9999999, "3.658 m", "12'-0\""),
        (-1.905, "-1.905 m", "-6'-3\""),
    ],
)
def test_positions_as_written(x, metric, us):
    assert format_position(x, "metric") == metric
    assert format_position(x, "us") == us
