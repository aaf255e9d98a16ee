"""Quantities: what is read, what is refused in which words, and how results are written."""

import math
import pickle
import re
import subprocess
import sys
import time
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
from fishbelly.cli.quantities import (
    Kind,
    QuantityError,
    parse_count,
    parse_factor,
    parse_quantity,
    split_header,
    unit_factor,
)

# Exact by definition: international yard and pound agreement 1959; g of the 3rd CGPM 1901.
INCH, FOOT, POUND, G = Fraction("0.0254"), Fraction("0.3048"), Fraction("0.45359237"), Fraction("9.80665")
LBF = POUND * G
KIP = 1000 * LBF
LAST_DIGITS = 4e-16
"""Relative: a result is the float next to the exact value, or the one beside it."""

UNITS = [
    ("um", Kind.LENGTH, Fraction(1, 10**6)),
    ("µm", Kind.LENGTH, Fraction(1, 10**6)),
    ("mm", Kind.LENGTH, Fraction(1, 1000)),
    ("cm", Kind.LENGTH, Fraction(1, 100)),
    ("m", Kind.LENGTH, Fraction(1)),
    ("km", Kind.LENGTH, Fraction(1000)),
    ("in", Kind.LENGTH, INCH),
    ("in.", Kind.LENGTH, INCH),
    ("inch", Kind.LENGTH, INCH),
    ("inches", Kind.LENGTH, INCH),
    ('"', Kind.LENGTH, INCH),
    ("″", Kind.LENGTH, INCH),
    ("ft", Kind.LENGTH, FOOT),
    ("ft.", Kind.LENGTH, FOOT),
    ("foot", Kind.LENGTH, FOOT),
    ("feet", Kind.LENGTH, FOOT),
    ("'", Kind.LENGTH, FOOT),
    ("yd", Kind.LENGTH, 3 * FOOT),
    ("N", Kind.FORCE, Fraction(1)),
    ("kN", Kind.FORCE, Fraction(1000)),
    ("MN", Kind.FORCE, Fraction(10**6)),
    ("lbf", Kind.FORCE, LBF),
    ("lb", Kind.FORCE, LBF),
    ("lbs", Kind.FORCE, LBF),
    ("kip", Kind.FORCE, KIP),
    ("kips", Kind.FORCE, KIP),
    ("kgf", Kind.FORCE, G),
    ("tf", Kind.FORCE, 1000 * G),
    ("kN m", Kind.MOMENT, Fraction(1000)),
    ("kNm", Kind.MOMENT, Fraction(1000)),
    ("kN·m", Kind.MOMENT, Fraction(1000)),
    ("kN.m", Kind.MOMENT, Fraction(1000)),
    ("kN*m", Kind.MOMENT, Fraction(1000)),
    ("kN-m", Kind.MOMENT, Fraction(1000)),
    ("Nm", Kind.MOMENT, Fraction(1)),
    ("Nmm", Kind.MOMENT, Fraction(1, 1000)),
    ("kNcm", Kind.MOMENT, Fraction(10)),
    ("MNm", Kind.MOMENT, Fraction(10**6)),
    ("kip-ft", Kind.MOMENT, KIP * FOOT),
    ("kip ft", Kind.MOMENT, KIP * FOOT),
    ("kip·in", Kind.MOMENT, KIP * INCH),
    ("ft-lb", Kind.MOMENT, LBF * FOOT),
    ("lb-in", Kind.MOMENT, LBF * INCH),
    ("kN/m", Kind.FORCE_PER_LENGTH, Fraction(1000)),
    ("kN per m", Kind.FORCE_PER_LENGTH, Fraction(1000)),
    ("kN m^-1", Kind.FORCE_PER_LENGTH, Fraction(1000)),
    ("N/mm", Kind.FORCE_PER_LENGTH, Fraction(1000)),
    ("lb/ft", Kind.FORCE_PER_LENGTH, LBF / FOOT),
    ("plf", Kind.FORCE_PER_LENGTH, LBF / FOOT),
    ("klf", Kind.FORCE_PER_LENGTH, KIP / FOOT),
    ("kip/ft", Kind.FORCE_PER_LENGTH, KIP / FOOT),
    ("kgf/m", Kind.FORCE_PER_LENGTH, G),
    ("kN/m2", Kind.FORCE_PER_AREA, Fraction(1000)),
    ("kPa", Kind.FORCE_PER_AREA, Fraction(1000)),
    ("psf", Kind.FORCE_PER_AREA, LBF / FOOT**2),
    ("lb/ft2", Kind.FORCE_PER_AREA, LBF / FOOT**2),
    ("ksf", Kind.FORCE_PER_AREA, KIP / FOOT**2),
    ("Pa", Kind.STRESS, Fraction(1)),
    ("MPa", Kind.STRESS, Fraction(10**6)),
    ("N/mm2", Kind.STRESS, Fraction(10**6)),
    ("N/mm^2", Kind.STRESS, Fraction(10**6)),
    ("N/mm**2", Kind.STRESS, Fraction(10**6)),
    ("N/mm²", Kind.STRESS, Fraction(10**6)),
    ("N·mm⁻²", Kind.STRESS, Fraction(10**6)),
    ("kN/cm2", Kind.STRESS, Fraction(10**7)),
    ("psi", Kind.STRESS, LBF / INCH**2),
    ("lb/in2", Kind.STRESS, LBF / INCH**2),
    ("ksi", Kind.STRESS, KIP / INCH**2),
    ("ksi", Kind.PRESSURE, KIP / INCH**2),
    ("GPa", Kind.MODULUS, Fraction(10**9)),
    ("kN/mm", Kind.STIFFNESS, Fraction(10**6)),
    ("kip/in", Kind.STIFFNESS, KIP / INCH),
    ("N/mm/mm", Kind.JOINT_STIFFNESS, Fraction(10**6)),
    ("N/(mm mm)", Kind.JOINT_STIFFNESS, Fraction(10**6)),
    ("N/(mm*mm)", Kind.JOINT_STIFFNESS, Fraction(10**6)),
    ("kip/in/in", Kind.JOINT_STIFFNESS, KIP / INCH**2),
    ("kNm", Kind.ROTATIONAL_STIFFNESS, Fraction(1000)),
    ("kNm/rad", Kind.ROTATIONAL_STIFFNESS, Fraction(1000)),
    ("kN*m/rad", Kind.ROTATIONAL_STIFFNESS, Fraction(1000)),
    ("kNm/mrad", Kind.ROTATIONAL_STIFFNESS, Fraction(10**6)),
    ("kNm/deg", Kind.ROTATIONAL_STIFFNESS, 180_000 / Fraction(math.pi)),
    ("kip-ft/rad", Kind.ROTATIONAL_STIFFNESS, KIP * FOOT),
    ("kg/m3", Kind.DENSITY, Fraction(1)),
    ("g/cm3", Kind.DENSITY, Fraction(1000)),
    ("t/m3", Kind.DENSITY, Fraction(1000)),
    ("lb/ft^3", Kind.DENSITY, POUND / FOOT**3),
    ("lbf/ft^3", Kind.DENSITY, POUND / FOOT**3),
    ("pcf", Kind.DENSITY, POUND / FOOT**3),
    ("kN/m3", Kind.DENSITY, 1000 / G),
    ("g", Kind.MASS, Fraction(1, 1000)),
    ("kg", Kind.MASS, Fraction(1)),
    ("tonne", Kind.MASS, Fraction(1000)),
    ("lb", Kind.MASS, POUND),
    ("kg/m", Kind.MASS_PER_LENGTH, Fraction(1)),
    ("lb/ft", Kind.MASS_PER_LENGTH, POUND / FOOT),
    ("rad", Kind.ANGLE, Fraction(1)),
    ("mrad", Kind.ANGLE, Fraction(1, 1000)),
    ("deg", Kind.ANGLE, Fraction(math.pi) / 180),
    ("°", Kind.ANGLE, Fraction(math.pi) / 180),
    ("K", Kind.TEMPERATURE, Fraction(1)),
    ("degC", Kind.TEMPERATURE, Fraction(1)),
    ("°C", Kind.TEMPERATURE, Fraction(1)),
    ("deg C", Kind.TEMPERATURE, Fraction(1)),
    ("℃", Kind.TEMPERATURE, Fraction(1)),
    ("degF", Kind.TEMPERATURE, Fraction(5, 9)),
    ("°F", Kind.TEMPERATURE, Fraction(5, 9)),
    ("/K", Kind.EXPANSION, Fraction(1)),
    ("1/K", Kind.EXPANSION, Fraction(1)),
    ("per K", Kind.EXPANSION, Fraction(1)),
    ("K^-1", Kind.EXPANSION, Fraction(1)),
    ("mm/m/K", Kind.EXPANSION, Fraction(1, 1000)),
    ("/°F", Kind.EXPANSION, Fraction(9, 5)),
    ("s", Kind.TIME, Fraction(1)),
    ("Hz", Kind.FREQUENCY, Fraction(1)),
]


@pytest.mark.parametrize(
    ("unit", "kind", "size"), UNITS, ids=[f"{kind.name} {unit}" for unit, kind, _ in UNITS]
)
def test_every_unit_has_its_size(unit, kind, size):
    assert parse_quantity(f"7.3 {unit}", kind) == pytest.approx(
        float(Fraction("7.3") * size), rel=LAST_DIGITS
    )
    if unit not in "'\"″":  # marks for feet and inches are for numbers, not for headers
        assert unit_factor(unit, kind) == pytest.approx(float(size), rel=LAST_DIGITS)


@pytest.mark.parametrize("kind", Kind)
def test_every_example_is_of_its_kind(kind):
    assert parse_quantity(kind.example, kind) > 0.0
    assert kind.words.split()[0] in ("a", "an")
    assert kind.example.endswith(kind.unit)


LENGTHS = [
    ("12 mm", 0.012),
    ("12mm", 0.012),
    ("  12   mm ", 0.012),
    ("+5 mm", 0.005),
    ("-5 mm", -0.005),
    ("−5 mm", -0.005),
    ("–5 mm", -0.005),
    ("- 5 mm", -0.005),
    (".5 m", 0.5),
    ("5. m", 5.0),
    ("1.2e3 mm", 1.2),
    ("1.2E+3mm", 1.2),
    ("12 000 mm", 12.0),
    ("12\u202f000.5 mm", 12.0005),
    ("0 mm", 0.0),
    ("-0 mm", 0.0),
    ("3/4 in", 0.01905),
    ("3/4in", 0.01905),
    ("1-1/2 in", 0.0381),
    ("1 1/2 in", 0.0381),
    ("1–1/2 in", 0.0381),
    ("-1-1/2 in", -0.0381),
    ("1½ in", 0.0381),
    ("½ in", 0.0127),
    ('1 1/2"', 0.0381),
    ("7 1/2 ft", 2.286),
    ("7 ft 6 in", 2.286),
    ("7ft6in", 2.286),
    ("7 ft. 6 in.", 2.286),
    ("7 feet 6 inches", 2.286),
    ("7 ft 6-1/2 in", 2.2987),
    ("7 ft 6 1/2 in", 2.2987),
    ("7 ft 6.5 in", 2.2987),
    ("7 ft 1/2 in", 2.1463),
    ("7 ft-6 in", 2.286),
    ("7' 6\"", 2.286),
    ("7'6\"", 2.286),
    ("7'-6\"", 2.286),
    ("7'-6 1/2\"", 2.2987),
    ("7′ 6″", 2.286),
    ("7’ 6”", 2.286),
    ("7' 6''", 2.286),
    ("7'", 2.1336),
    ("7 ft 0 in", 2.1336),
    ("-7 ft 6 in", -2.286),
    ("-7'-6\"", -2.286),
]


@pytest.mark.parametrize(("text", "metres"), LENGTHS)
def test_lengths_are_the_float_nearest_to_what_is_written(text, metres):
    assert parse_quantity(text, Kind.LENGTH) == metres


def test_the_same_place_in_other_units_is_the_same_float():
    places = ["1250.3 mm", "125.03 cm", "1.2503 m", "0.0012503 km"]
    assert {parse_quantity(text, Kind.LENGTH) for text in places} == {1.2503}
    assert parse_quantity("90 in", Kind.LENGTH) == parse_quantity("7.5 ft", Kind.LENGTH) == 2.286


@given(st.integers(-(10**6), 10**6), st.integers(0, 4))
def test_decimals_of_millimetres_round_trip(digits, places):
    text = f"{digits / 10**places:.{places}f} mm"
    assert parse_quantity(text, Kind.LENGTH) == float(Fraction(text[:-3]) / 1000)


@given(
    st.booleans(),
    st.integers(0, 500),
    st.integers(0, 11),
    st.integers(0, 63),
    st.sampled_from([2, 4, 8, 16, 32, 64]),
    st.sampled_from(["{f} ft {i} in", "{f}' {i}\"", "{f}'-{i}\"", "{f} feet {i} inches", "{f}ft {i}in"]),
    st.sampled_from(["-", " "]),
)
def test_feet_inches_and_fractions_round_trip(minus, feet, inches, part, over, form, dash):
    part %= over
    shown = f"{inches}{dash}{part}/{over}" if part else f"{inches}"
    text = ("-" if minus else "") + form.format(f=feet, i=shown)
    exact = feet * FOOT + (inches + Fraction(part, over)) * INCH
    assert parse_quantity(text, Kind.LENGTH) == float(-exact if minus else exact)


@given(st.integers(-16 * 12 * 300, 16 * 12 * 300))
def test_what_is_written_in_feet_and_sixteenths_reads_back(sixteenths):
    x = float(sixteenths * INCH / 16)
    shown = format_position(x, "us")
    assert "'" in shown
    assert parse_quantity(shown, Kind.LENGTH) == x


@given(
    st.floats(-1e4, 1e4).filter(lambda value: abs(value) > 1e-6),
    st.sampled_from(
        [("length", Kind.LENGTH), ("moment", Kind.MOMENT), ("stress", Kind.STRESS), ("slope", Kind.ANGLE)]
    ),
)
def test_what_is_written_in_metric_reads_back_to_its_digits(number, quantity):
    what, kind = quantity
    value = number * unit_size(what, "metric")
    read = parse_quantity(format_value(value, what, "metric", digits=6), kind)
    assert read == pytest.approx(value, rel=0.51e-5)  # half of the sixth figure of 1.00000


# Refusals ------------------------------------------------------------------------------------------------

LENGTH = 'expected a length such as "12 mm", got '
FORCE = 'expected a force such as "12 kN", got '
REFUSED = [
    (12, Kind.LENGTH, LENGTH + "12: the unit is missing"),
    (1.5, Kind.MODULUS, 'expected a modulus such as "210 GPa", got 1.5: the unit is missing'),
    ("12", Kind.LENGTH, LENGTH + '"12": the unit is missing'),
    ("3/4", Kind.LENGTH, LENGTH + '"3/4": the unit is missing'),
    (True, Kind.LENGTH, LENGTH + "true"),
    (None, Kind.LENGTH, LENGTH + "nothing"),
    (["1 m"], Kind.LENGTH, LENGTH + '["1 m"], a list'),
    ({"at": 1}, Kind.LENGTH, LENGTH + "{ at = 1 }, a table"),
    ("", Kind.LENGTH, LENGTH + '"", which is empty'),
    (" \t", Kind.LENGTH, LENGTH + '" \\t", which is empty'),
    ("mm", Kind.LENGTH, LENGTH + '"mm": the number is missing'),
    ("--5 mm", Kind.LENGTH, LENGTH + '"--5 mm": the number is missing'),
    ("x 5 mm", Kind.LENGTH, LENGTH + '"x 5 mm": the number is missing'),
    ("nan mm", Kind.LENGTH, LENGTH + '"nan mm", which is not a finite number'),
    ("-inf mm", Kind.LENGTH, LENGTH + '"-inf mm", which is not a finite number'),
    ("1e400 mm", Kind.LENGTH, LENGTH + '"1e400 mm", which is not a finite number'),
    ("1e400 kN m", Kind.MOMENT, "which is not a finite number"),
    (math.nan, Kind.LENGTH, LENGTH + "nan"),
    (math.inf, Kind.LENGTH, LENGTH + "inf"),
    ("12,5 mm", Kind.LENGTH, LENGTH + '"12,5 mm", with a comma in the number; use a point: "12.5 mm"'),
    ("1,200 mm", Kind.LENGTH, "; use a point for decimals, and no comma between thousands"),
    ("1,234,567 N", Kind.FORCE, "; use a point for decimals, and no comma between thousands"),
    ("12 kN", Kind.LENGTH, LENGTH + '"12 kN", which is a force'),
    ("12 mm", Kind.FORCE, FORCE + '"12 mm", which is a length'),
    ("7 ft 6 in", Kind.FORCE, FORCE + '"7 ft 6 in", which is a length'),
    ("12 mm2", Kind.LENGTH, LENGTH + '"12 mm2", which is an area'),
    ("12 mm3", Kind.LENGTH, LENGTH + '"12 mm3", which is a volume'),
    ("12 cm4", Kind.LENGTH, LENGTH + '"12 cm4", which is a second moment of area'),
    ("5 m5", Kind.LENGTH, LENGTH + '"5 m5", which is in m⁵'),
    ("5 kNm/rad", Kind.MOMENT, "which is a rotational stiffness"),
    ("5 mm/m", Kind.ANGLE, 'expected an angle such as "6 deg", got "5 mm/m", which is a ratio'),
    ("5 °", Kind.TEMPERATURE, 'expected a temperature rise such as "20 K", got "5 °", which is an angle'),
    ("5 kg", Kind.FORCE, FORCE + '"5 kg", which is a mass; kgf?'),
    ("5 t", Kind.FORCE, FORCE + '"5 t", which is a mass; tf?'),
    ("5 kg/m", Kind.FORCE_PER_LENGTH, '"5 kg/m", which is a mass per length; kgf/m?'),
    ("5 kg", Kind.LENGTH, LENGTH + '"5 kg", which is a mass'),
    ("5 lb", Kind.LENGTH, LENGTH + '"5 lb", which is a mass'),
    ("5 lbf", Kind.MASS, 'expected a mass such as "250 kg", got "5 lbf", which is a force; lb?'),
    ("5 kN", Kind.MASS, 'expected a mass such as "250 kg", got "5 kN", which is a force; t?'),
    ("5 plf", Kind.MASS_PER_LENGTH, '"5 plf", which is a force per length; lb/ft?'),
    ("12 mn", Kind.LENGTH, LENGTH + '"12 mn": unknown unit "mn"; did you mean "mm"?'),
    ("12 mn", Kind.FORCE, FORCE + '"12 mn": unknown unit "mn"; did you mean "MN"?'),
    ("12 KN", Kind.FORCE, FORCE + '"12 KN": unknown unit "KN"; did you mean "kN"?'),
    ("12 KN/m", Kind.FORCE_PER_LENGTH, '"12 KN/m": unknown unit "KN"; did you mean "kN"?'),
    ("12 Gpa", Kind.MODULUS, '"12 Gpa": unknown unit "Gpa"; did you mean "GPa"?'),
    ("12 mms", Kind.LENGTH, LENGTH + '"12 mms": unknown unit "mms"; did you mean "mm"?'),
    ("3 k", Kind.FORCE, FORCE + '"3 k": unknown unit "k"; did you mean "kip"?'),
    ("20 C", Kind.TEMPERATURE, '"20 C": unknown unit "C"; did you mean "degC"?'),
    ("20 F", Kind.TEMPERATURE, '"20 F": unknown unit "F"; did you mean "degF"?'),
    ("3 parsec", Kind.LENGTH, LENGTH + '"3 parsec": unknown unit "parsec"'),
    ("12 mm 5", Kind.LENGTH, LENGTH + '"12 mm 5": "mm 5" cannot be read as a unit'),
    ("5 m 20 cm", Kind.LENGTH, LENGTH + '"5 m 20 cm": "m 20 cm" cannot be read as a unit'),
    ("5 m12", Kind.LENGTH, '"m12" cannot be read as a unit'),
    ("5 (m", Kind.LENGTH, '"5 (m": "(m" cannot be read as a unit'),
    ("5 m)", Kind.LENGTH, "cannot be read as a unit"),
    ("5 ()", Kind.LENGTH, "cannot be read as a unit"),
    ("5 m/", Kind.LENGTH, "cannot be read as a unit"),
    ("5 m//m", Kind.LENGTH, "cannot be read as a unit"),
    ("5 *m", Kind.LENGTH, "cannot be read as a unit"),
    ("5 m^", Kind.LENGTH, "cannot be read as a unit"),
    ("1.2.3 mm", Kind.LENGTH, '".3 mm" cannot be read as a unit'),
    ("5 kN/m m", Kind.FORCE, '"kN/m m" can be read in two ways; put brackets around the divisor'),
    ("5 kN/m·m", Kind.FORCE, "can be read in two ways; put brackets around the divisor"),
    ("7 ft 14 in", Kind.LENGTH, LENGTH + '"7 ft 14 in": inches after feet have to be less than 12'),
    ("7.5 ft 6 in", Kind.LENGTH, LENGTH + '"7.5 ft 6 in": feet before inches have to be a whole number'),
    ("1/0 in", Kind.LENGTH, LENGTH + '"1/0 in", with a fraction over zero'),
    ("1 5/4 in", Kind.LENGTH, '"1 5/4 in": a fraction after a whole number has to be less than 1'),
    ("1.2e-5", Kind.EXPANSION, "the unit is missing; per K is understood where there are no quotes"),
    ("9" * 200 + " mm", Kind.LENGTH, ", which is too long"),
    ("9" * 200, Kind.LENGTH, ", which is too long"),
    ("٣ mm", Kind.LENGTH, '"٣ mm": the number is missing'),
    ("5 __import__('os')", Kind.LENGTH, 'unknown unit "import"'),
]


@pytest.mark.parametrize(
    ("value", "kind", "words"), REFUSED, ids=[ascii(value)[:30] for value, _, _ in REFUSED]
)
def test_refusals_say_what_is_wrong(value, kind, words):
    with pytest.raises(
        QuantityError, match=f"{re.escape(words)}$" if ";" in words else re.escape(words)
    ) as caught:
        parse_quantity(value, kind)
    assert str(caught.value).startswith(f'expected {kind.words} such as "{kind.example}", got ')


@pytest.mark.parametrize("kind", Kind)
@pytest.mark.parametrize("other", Kind)
def test_kinds_of_another_dimension_are_told_apart(kind, other):
    alike = [
        {Kind.FORCE_PER_LENGTH, Kind.STIFFNESS},
        {Kind.FORCE_PER_AREA, Kind.STRESS, Kind.MODULUS, Kind.JOINT_STIFFNESS},
    ]
    one_way = {(Kind.MOMENT, Kind.ROTATIONAL_STIFFNESS)}
    if kind is other or (other, kind) in one_way or any({kind, other} <= group for group in alike):
        assert math.isfinite(parse_quantity(other.example, kind))
    else:
        with pytest.raises(QuantityError, match=r", which is an? "):
            parse_quantity(other.example, kind)


@given(st.text(max_size=30) | st.from_regex(r"\A[-+]?[0-9./ -]{0,8}[a-zA-Z0-9()*/^ .'\"-]{0,8}\Z"))
def test_any_text_is_read_or_refused(text):
    try:
        assert math.isfinite(parse_quantity(text, Kind.LENGTH))
    except QuantityError as error:
        assert error.found.startswith(('"', "'")) and "\n" not in str(error)


def test_an_expansion_may_be_bare():
    assert parse_quantity(12e-6, Kind.EXPANSION) == 12e-6
    with pytest.raises(QuantityError, match="got nan, which is not a finite number"):
        parse_quantity(math.nan, Kind.EXPANSION)


@pytest.mark.parametrize(
    ("text", "sign", "words"),
    [
        ("-120 mm", "above zero", 'expected a length above 0 mm, got "-120 mm"'),
        ("0 mm", "above zero", 'expected a length above 0 mm, got "0 mm"'),
        ("-1 mm", "zero or more", 'expected a length of 0 mm or more, got "-1 mm"'),
    ],
)
def test_signs_are_checked_where_asked(text, sign, words):
    with pytest.raises(QuantityError, match=f"^{re.escape(words)}$"):
        parse_quantity(text, Kind.LENGTH, sign=sign)


def test_signs_that_will_do():
    assert parse_quantity("0 mm", Kind.LENGTH, sign="zero or more") == 0.0
    assert parse_quantity("1 mm", Kind.LENGTH, sign="above zero") == 0.001
    assert parse_quantity("-1 mm", Kind.LENGTH) == -0.001


def test_errors_carry_their_parts_make_faults_and_survive_pickling():
    with pytest.raises(QuantityError) as caught:
        parse_quantity("5 kg", Kind.FORCE)
    error = caught.value
    assert isinstance(error, ValueError)
    assert error.expected == 'a force such as "12 kN"'
    assert error.found == '"5 kg", which is a mass'
    assert error.hint == "kgf?"
    assert str(error.at("a.toml", 7, "load 2", "value")) == f"a.toml:7: load 2, value: {error}"
    assert str(pickle.loads(pickle.dumps(error))) == str(error)


# Headers and bare numbers --------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("header", "name", "unit"),
    [
        ("remaining depth [mm]", "remaining depth", "mm"),
        ("station (m)", "station", "m"),
        ("station, mm", "station", "mm"),
        ("web, north side [mm]", "web, north side", "mm"),
        ("web (north) [mm]", "web (north)", "mm"),
        ("stiffness (N/(mm mm))", "stiffness", "N/(mm mm)"),
        ("E [N/mm²]", "E", "N/mm²"),
        ("  station   name ", "station name", ""),
        ("depth[mm]", "depth", "mm"),
        ("depth []", "depth", ""),
        ("", "", ""),
    ],
)
def test_headers_part_into_name_and_unit(header, name, unit):
    assert split_header(header) == (name, unit)


@pytest.mark.parametrize(
    ("unit", "words"),
    [
        ("kN", 'expected a unit of a length such as "mm", got "kN", which is a force'),
        ("", 'expected a unit of a length such as "mm", but it is missing'),
        ("mn", 'got "mn": unknown unit "mn"; did you mean "mm"?'),
        ("north", 'got "north": unknown unit "north"'),
        ("12", 'got "12": "12" cannot be read as a unit'),
    ],
)
def test_units_that_will_not_do(unit, words):
    with pytest.raises(QuantityError, match=re.escape(words)):
        unit_factor(unit, Kind.LENGTH)


def test_factors():
    assert parse_factor(0.3) == 0.3
    assert isinstance(parse_factor(2), float)
    assert parse_factor(0.3, "Poisson's ratio", above=-1, at_most=0.5) == 0.3


@pytest.mark.parametrize(
    ("value", "bounds", "words"),
    [
        ("0.3", {}, 'expected a bare number, got "0.3"; without quotes'),
        ("3 mm", {}, 'expected a bare number, got "3 mm"; without quotes and unit'),
        ("much", {}, 'expected a bare number, got "much"'),
        (True, {}, "expected a bare number, got true"),
        ([1], {}, "expected a bare number, got [1]"),
        (None, {}, "expected a bare number, got nothing"),
        (math.nan, {}, "expected a bare number, got nan, which is not a finite number"),
        (-math.inf, {}, "expected a bare number, got -inf, which is not a finite number"),
        (10**400, {}, "which is not a finite number"),
        (0, {"above": 0}, "expected a bare number above 0, got 0"),
        (-1, {"at_least": 0}, "expected a bare number of at least 0, got -1"),
        (2, {"above": 0, "below": 2}, "expected a bare number above 0 and below 2, got 2"),
        (1.5, {"at_most": 1}, "expected a bare number of at most 1, got 1.5"),
    ],
)
def test_what_is_no_factor(value, bounds, words):
    with pytest.raises(QuantityError, match=re.escape(words) + ("" if value == 10**400 else "$")):
        parse_factor(value, **bounds)


def test_counts():
    assert parse_count(2) == 2
    for value in (0, True, 2.0, "2", None):
        with pytest.raises(QuantityError, match=r"^expected a whole number of at least 1, got "):
            parse_count(value)


# Speed and imports ---------------------------------------------------------------------------------------


def test_twenty_thousand_quantities_are_quick():
    kinds = {"mm": Kind.LENGTH, "kN/m": Kind.FORCE_PER_LENGTH, "N/mm2": Kind.MODULUS, "ft": Kind.LENGTH}
    pairs = [(f"{0.37 * k:.3f} {unit}", kind) for k in range(5000) for unit, kind in kinds.items()]
    best = math.inf
    for _ in range(3):
        start = time.perf_counter()
        for text, kind in pairs:
            parse_quantity(text, kind)
        best = min(best, time.perf_counter() - start)
    assert best < 0.1


def test_pint_is_imported_only_once_a_unit_is_read_and_brings_nothing_heavy():
    code = (
        "import sys; import fishbelly.cli.format_quantity; import fishbelly.cli.toml_lines\n"
        "from fishbelly.cli.quantities import *\n"
        "assert 'pint' not in sys.modules\n"
        "parse_factor(1.0); parse_quantity('12 mm', Kind.LENGTH)\n"
        "assert 'pint' in sys.modules\n"
        # pint looks whether scipy is there, which loads its empty top package and none of its numerics
        "heavy = {'scipy.linalg', 'scipy.sparse', 'scipy.optimize', 'scipy.integrate', 'scipy.special'}\n"
        "heavy |= {'matplotlib', 'pandas', 'xlsxwriter', 'openpyxl', 'rich'}\n"
        "heavy &= set(sys.modules)\n"
        "assert not heavy, heavy\n"
        "from fishbelly.cli.quantities import _registry; from time import perf_counter\n"
        "best = 1.0\n"
        "for _ in range(3):\n"
        "    _registry.cache_clear(); start = perf_counter(); _registry()\n"
        "    best = min(best, perf_counter() - start)\n"
        "assert best < 0.015, best\n"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr


# Results as people read them -----------------------------------------------------------------------------

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
    assert unit_size(what, style) == pytest.approx(
        unit_factor(unit_label(what, style), LABELS[what]), rel=1e-15
    )


@pytest.mark.parametrize(("what", "power"), NOT_READ.items())
def test_labels_of_section_properties_say_the_factor_used(what, power):
    assert (unit_label(what, "us"), unit_size(what, "us")) == (f"in{power}", pytest.approx(0.0254**power))
    assert (unit_label(what, "metric"), unit_size(what, "metric")) == (
        f"cm{power}",
        pytest.approx(0.01**power),
    )


def test_styles_show_the_same_quantities():
    assert set(METRIC.units) == set(US.units) == {*LABELS, *NOT_READ, "bending stiffness", "factor"}
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
        assert (
            abs(float(text.replace(" ", "")) - value / 1e3) <= 0.5001 * 10.0 ** (1 - digits) * scale + 1e-300
        )
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
