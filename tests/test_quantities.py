"""Quantities: what is read, and what is refused in which words."""

import math
import pickle
import re
import time
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from fishbelly.cli.format_quantity import format_position, format_value, unit_size
from fishbelly.cli.quantities import parse_quantity, split_header
from fishbelly.cli.units import Kind, QuantityError

# Exact by definition: international yard and pound agreement 1959.
INCH, FOOT = Fraction("0.0254"), Fraction("0.3048")


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
    st.sampled_from([("length", Kind.LENGTH), ("moment", Kind.MOMENT), ("stress", Kind.STRESS), ("slope", Kind.ANGLE)]),
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


@pytest.mark.parametrize(("value", "kind", "words"), REFUSED, ids=[ascii(value)[:30] for value, _, _ in REFUSED])
def test_refusals_say_what_is_wrong(value, kind, words):
    with pytest.raises(QuantityError, match=f"{re.escape(words)}$" if ";" in words else re.escape(words)) as caught:
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


# Headers and speed ----------------------------------------------------------------------------------------


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
