"""Units: the size of each, what is refused in which words, and what reading one imports."""

import math
import re
import subprocess
import sys
from fractions import Fraction

import pytest

from fishbelly.cli.quantities import parse_quantity
from fishbelly.cli.units import Kind, QuantityError, _scipy_unseen, unit_factor

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


@pytest.mark.parametrize(("unit", "kind", "size"), UNITS, ids=[f"{kind.name} {unit}" for unit, kind, _ in UNITS])
def test_every_unit_has_its_size(unit, kind, size):
    assert parse_quantity(f"7.3 {unit}", kind) == pytest.approx(float(Fraction("7.3") * size), rel=LAST_DIGITS)
    if unit not in "'\"″":  # marks for feet and inches are for numbers, not for headers
        assert unit_factor(unit, kind) == pytest.approx(float(size), rel=LAST_DIGITS)


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


# What reading a unit imports ------------------------------------------------------------------------------


def run(code):
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr


PARSE = "import sys; from fishbelly.cli.quantities import Kind, parse_quantity\n"


def test_pint_is_imported_only_once_a_unit_is_read():
    run(
        PARSE + "import fishbelly.cli.format_quantity, fishbelly.cli.toml_lines\n"
        "from fishbelly.cli.bare_numbers import parse_factor\n"
        "parse_factor(1.0); assert 'pint' not in sys.modules\n"
        "parse_quantity('12 mm', Kind.LENGTH); assert 'pint' in sys.modules\n"
    )


def test_reading_a_unit_brings_nothing_heavy():
    run(
        PARSE + "parse_quantity('12 mm', Kind.LENGTH); parse_quantity('1-1/2 in', Kind.LENGTH)\n"
        "tops = {name.partition('.')[0] for name in sys.modules}\n"
        "heavy = tops & {'scipy', 'matplotlib', 'pandas', 'xlsxwriter', 'openpyxl', 'rich'}\n"
        "assert not heavy, heavy\n"
    )


def test_scipy_can_be_imported_after_a_unit_was_read():
    run(
        PARSE + "parse_quantity('12 mm', Kind.LENGTH)\n"
        "import scipy, scipy.linalg\n"
        "assert scipy.linalg.det([[2.0, 0.0], [0.0, 3.0]]) == 6.0\n"
        "assert parse_quantity('4 kN/m', Kind.FORCE_PER_LENGTH) == 4000.0\n"
    )


def test_scipy_that_is_loaded_already_is_left_alone():
    run(
        "import scipy; before = scipy\n" + PARSE + "parse_quantity('12 mm', Kind.LENGTH)\n"
        "assert sys.modules['scipy'] is before\n"
    )


def test_scipy_is_hidden_no_longer_than_the_import_even_where_that_fails(monkeypatch):
    monkeypatch.delitem(sys.modules, "scipy", raising=False)
    with pytest.raises(RuntimeError, match=r"^no pint$"), _scipy_unseen():
        with pytest.raises(ImportError, match="scipy"):
            import scipy  # noqa: F401
        raise RuntimeError("no pint")
    assert "scipy" not in sys.modules


def test_the_registry_is_made_quickly():
    run(
        "from fishbelly.cli.units import _registry; from time import perf_counter\n"
        "_registry(); best = 1.0\n"
        "for _ in range(3):\n"
        "    _registry.cache_clear(); start = perf_counter(); _registry()\n"
        "    best = min(best, perf_counter() - start)\n"
        "assert best < 0.015, best\n"
    )
