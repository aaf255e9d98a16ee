"""Numbers in SI base units to what people of either style of units read."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import Literal

StyleName = Literal["metric", "us"]

NOTHING = "–"
"""What stands where there is no value."""

_INCH = 0.0254
_FOOT = 0.3048
_POUND = 0.45359237
_POUND_FORCE = 4.4482216152605
_KIP = 1e3 * _POUND_FORCE
_DEGREE = math.pi / 180.0
_RAD = {"angle": ("deg", _DEGREE), "slope": ("mrad", 1e-3), "frequency": ("Hz", 1.0), "time": ("s", 1.0)}
_RAD |= {"factor": ("", 1.0)}

_WHOLE_DIGITS = 9
"""Digits before the point up to which a number is written out."""
_SMALLEST_PLAIN = 1e-4
"""Numbers below are written with a power of ten."""
_FRACTION_TOLERANCE = 1e-3
"""How near a sixteenth of an inch a place has to be to be written as one [in]."""


@dataclass(frozen=True)
class Style:
    """How results are shown: for each quantity its label and one of that unit in SI.

    Attributes
    ----------
    name : {"metric", "us"}
        The name in the job file.
    units : mapping of str to tuple of str and float
        By quantity: the label, and the factor from it to SI base units.
    thousands : str
        What stands between groups of three digits.
    """

    name: StyleName
    units: Mapping[str, tuple[str, float]]
    thousands: str

    def unit(self, what: str) -> tuple[str, float]:
        """Give label and factor of a quantity; ValueError where it is not one of `units`."""
        if what not in self.units:
            raise ValueError(f"no unit is known for {what!r}; known are {', '.join(self.units)}")
        return self.units[what]


METRIC = Style(
    "metric",
    MappingProxyType(
        {
            "position": ("m", 1.0),
            "length": ("mm", 1e-3),
            "deflection": ("mm", 1e-3),
            "area": ("cm2", 1e-4),
            "section modulus": ("cm3", 1e-6),
            "second moment": ("cm4", 1e-8),
            "warping constant": ("cm6", 1e-12),
            "force": ("kN", 1e3),
            "moment": ("kNm", 1e3),
            "force per length": ("kN/m", 1e3),
            "moment per length": ("kNm/m", 1e3),
            "force per area": ("kN/m2", 1e3),
            "shear flow": ("N/mm", 1e3),
            "stress": ("MPa", 1e6),
            "modulus": ("GPa", 1e9),
            "axial stiffness": ("kN", 1e3),
            "shear stiffness": ("kN", 1e3),
            "bending stiffness": ("kNm2", 1e3),
            "stiffness": ("kN/mm", 1e6),
            "joint stiffness": ("N/mm/mm", 1e6),
            "rotational stiffness": ("kNm/rad", 1e3),
            "mass": ("kg", 1.0),
            "mass per length": ("kg/m", 1.0),
            "density": ("kg/m3", 1.0),
            "temperature": ("K", 1.0),
            "expansion": ("/K", 1.0),
            **_RAD,
        }
    ),
    " ",
)

US = Style(
    "us",
    MappingProxyType(
        {
            "position": ("ft", _FOOT),
            "length": ("in", _INCH),
            "deflection": ("in", _INCH),
            "area": ("in2", _INCH**2),
            "section modulus": ("in3", _INCH**3),
            "second moment": ("in4", _INCH**4),
            "warping constant": ("in6", _INCH**6),
            "force": ("kip", _KIP),
            "moment": ("kip-ft", _KIP * _FOOT),
            "force per length": ("kip/ft", _KIP / _FOOT),
            "moment per length": ("kip-ft/ft", _KIP),
            "force per area": ("psf", _POUND_FORCE / _FOOT**2),
            "shear flow": ("kip/in", _KIP / _INCH),
            "stress": ("ksi", _KIP / _INCH**2),
            "modulus": ("ksi", _KIP / _INCH**2),
            "axial stiffness": ("kip", _KIP),
            "shear stiffness": ("kip", _KIP),
            "bending stiffness": ("kip-in2", _KIP * _INCH**2),
            "stiffness": ("kip/in", _KIP / _INCH),
            "joint stiffness": ("kip/in/in", _KIP / _INCH**2),
            "rotational stiffness": ("kip-ft/rad", _KIP * _FOOT),
            "mass": ("lb", _POUND),
            "mass per length": ("lb/ft", _POUND / _FOOT),
            "density": ("lb/ft3", _POUND / _FOOT**3),
            "temperature": ("degF", 5.0 / 9.0),
            "expansion": ("/degF", 1.8),
            **_RAD,
        }
    ),
    ",",
)


def style_of(name: StyleName | Style) -> Style:
    """Give the style of a name; ValueError where there is none."""
    if isinstance(name, Style):
        return name
    if name not in ("metric", "us"):
        raise ValueError(f'units are "metric" or "us", not {name!r}')
    return METRIC if name == "metric" else US


def unit_label(what: str, style: StyleName | Style) -> str:
    """Give the unit that a quantity is shown in.

    Parameters
    ----------
    what : str
        A quantity: ``"moment"``, ``"bending stiffness"``, … (`Style.units` lists them).
    style : {"metric", "us"} or Style
        The style.

    Returns
    -------
    str
        The label; empty for a bare number.

    Examples
    --------
    >>> unit_label("bending stiffness", "metric"), unit_label("bending stiffness", "us")
    ('kNm2', 'kip-in2')
    """
    return style_of(style).unit(what)[0]


def unit_size(what: str, style: StyleName | Style) -> float:
    """Give one of the unit that a quantity is shown in, in SI base units.

    Divide by it to get the number to show, as for a plot's axis or a cell of a workbook.
    """
    return style_of(style).unit(what)[1]


def format_number(
    value: float | None, what: str, style: StyleName | Style, digits: int = 4, scale: float | None = None
) -> str:
    """Write a value in the unit of its style, without the unit.

    Parameters
    ----------
    value : float or None
        The value in SI base units; None is a dash.
    what : str
        The quantity, as for `unit_label`.
    style : {"metric", "us"} or Style
        The style.
    digits : int
        Significant figures. Digits before the point are never rounded away.
    scale : float, optional
        The largest value that stands beside this one, in SI base units: it fixes the decimals, so that
        numbers of a column line up and noise beside it becomes 0. Left out: the value itself.

    Returns
    -------
    str
        The number; never a minus before zeros.

    Examples
    --------
    >>> format_number(12345.6, "moment", "metric"), format_number(-1e-12, "force", "metric", scale=5e3)
    ('12.35', '0.000')
    """
    if value is None:
        return NOTHING
    chosen = style_of(style)
    size = chosen.unit(what)[1]
    number = value / size
    reference = number if scale is None else scale / size
    if not math.isfinite(number):
        return "nan" if math.isnan(number) else ("-inf" if number < 0 else "inf")
    if number == 0.0 and scale is None:
        return "0"
    exponent = _exponent(reference, digits)
    if exponent >= _WHOLE_DIGITS or 10.0**exponent < _SMALLEST_PLAIN:
        return _with_power(number, exponent, digits)
    text = f"{number:,.{max(digits - 1 - exponent, 0)}f}".replace(",", chosen.thousands)
    return _unsigned_zero(text)


def _exponent(reference: float, digits: int) -> int:
    """Power of ten of a number's first digit, after rounding to significant figures; 0 of zero."""
    if reference == 0.0 or not math.isfinite(reference):
        return 0
    return int(f"{abs(reference):.{max(digits - 1, 0)}e}".partition("e")[2])


def _with_power(number: float, exponent: int, digits: int) -> str:
    """Write a number with a power of ten, rounded to the last place that its column shows."""
    last = exponent - max(digits - 1, 0)
    own = _exponent(number, digits)
    if number == 0.0 or own < last:
        return "0"
    mantissa, _, power = f"{number:.{own - last}e}".partition("e")
    return f"{mantissa}e{int(power)}"


def _unsigned_zero(text: str) -> str:
    return text[1:] if text.startswith("-") and not text.strip("-0.") else text


def format_value(
    value: float | None, what: str, style: StyleName | Style, digits: int = 4, scale: float | None = None
) -> str:
    """Write a value with its unit; parameters as for `format_number`.

    Examples
    --------
    >>> format_value(0.0123456, "deflection", "metric"), format_value(2e11, "modulus", "us")
    ('12.35 mm', '29,008 ksi')
    """
    number = format_number(value, what, style, digits, scale)
    label = unit_label(what, style)
    return number if value is None or not label else f"{number} {label}"


def format_column(values: Iterable[float | None], what: str, style: StyleName | Style, digits: int = 4) -> list[str]:
    """Write the values of a column, all with the decimals that its largest needs.

    Examples
    --------
    >>> format_column([0.0, 12.5, -0.004, None], "position", "metric")
    ['0.00', '12.50', '0.00', '–']
    """
    column = list(values)
    known = [abs(value) for value in column if value is not None and math.isfinite(value)]
    scale = max(known, default=0.0)
    return [format_number(value, what, style, digits, scale) for value in column]


def format_position(x: float, style: StyleName | Style) -> str:
    r"""Write a place along the member.

    Parameters
    ----------
    x : float
        Distance from the member's left end [m].
    style : {"metric", "us"} or Style
        The style.

    Returns
    -------
    str
        Metric: metres to the millimetre, or to its tenth where that is exact. US: feet, inches and
        sixteenths where the place is within a thousandth of an inch of one, else decimal feet.

    Examples
    --------
    >>> format_position(3.75, "metric"), format_position(0.0305, "metric")
    ('3.750 m', '0.0305 m')
    >>> format_position(12 * 0.3048 + 6.5 * 0.0254, "us"), format_position(1.0, "us")
    ('12\'-6 1/2"', '3.281 ft')
    """
    if style_of(style).name == "us":
        return _feet_and_inches(x)
    tenths = x * 1e4
    to_tenth = abs(tenths - round(tenths)) < 1e-5 and round(tenths) % 10 != 0
    return f"{_unsigned_zero(f'{x:.{4 if to_tenth else 3}f}')} m"


def _feet_and_inches(x: float) -> str:
    inches = abs(x) / _INCH
    sixteenths = round(inches * 16.0)
    if abs(sixteenths / 16.0 - inches) > _FRACTION_TOLERANCE:
        return f"{_unsigned_zero(f'{x / _FOOT:.3f}')} ft"
    feet, rest = divmod(sixteenths, 12 * 16)
    whole, part = divmod(rest, 16)
    divisor = math.gcd(part, 16)
    fraction = f" {part // divisor}/{16 // divisor}" if part else ""
    sign = "-" if x < 0.0 and sixteenths else ""
    return f"{sign}{feet}'-{whole}{fraction}\""
