"""Text with a unit to a number in SI base units, and what is wrong with it where that cannot be."""

from __future__ import annotations

import math
import re
from decimal import Context, Decimal
from fractions import Fraction
from typing import Literal

from fishbelly.cli.bare_numbers import float_or_infinite
from fishbelly.cli.faults import as_written
from fishbelly.cli.units import Kind, QuantityError, UnitProblem, resolve_unit, tidy

Sign = Literal["any", "above zero", "zero or more"]

_LONGEST = 100
"""Characters of a quantity; no quantity of the trade needs as many."""
_EXACT = Context(prec=34, traps=[])

_PLAIN_NUMBER = r"(?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d{1,3}(?!\d))?"
_FRACTION = r"(?:\d+(?:\s*-\s*|\s+))?\d+\s*/\s*\d+"
_GROUPED = r"\d{1,3}(?: \d{3})+(?:\.\d+)?(?![\d.])"
_NUMBER = rf"{_FRACTION}|{_GROUPED}|{_PLAIN_NUMBER}"
# The usual form, told from the others by its look alone: one number, one unit without spaces.
_USUAL = re.compile(
    rf"([-+]?{_PLAIN_NUMBER}) ?([A-Za-z]+(?:\^?[2-4])?(?:[/*·][A-Za-z]+(?:\^?[2-4]|[²³⁴])?)*)", re.ASCII
)
_NUMBER_AND_UNIT = re.compile(rf"([-+]?)\s*({_NUMBER})\s*(.*)", re.ASCII)
_FEET_AND_INCHES = re.compile(
    rf"([-+]?)\s*({_NUMBER})\s*(?:ft\.?|foot|feet|')\s*-?\s*({_NUMBER})\s*(?:inches|inch|in\.?|\")", re.ASCII
)


def parse_quantity(text: object, kind: Kind, *, sign: Sign = "any") -> float:
    """Read a quantity.

    Parameters
    ----------
    text : object
        What the job has: ``"12 mm"``, ``"4.2 kN/m"``, ``"7 ft 6-1/2 in"``, ``"1-1/2 in"`` …
    kind : Kind
        What it has to be.
    sign : {"any", "above zero", "zero or more"}
        Which signs will do.

    Returns
    -------
    float
        The value in m, N, Pa, rad, kg, K, s and their products, nearest to the decimal written. A minus
        before feet and inches holds for both; the dash of ``7'-6"`` is no minus.

    Raises
    ------
    QuantityError
        Where it is no such quantity.

    Examples
    --------
    >>> parse_quantity("7 ft 6 in", Kind.LENGTH)
    2.286
    >>> try:
    ...     parse_quantity(12, Kind.LENGTH)
    ... except QuantityError as error:
    ...     print(error)
    expected a length such as "12 mm", got 12: the unit is missing
    """
    usual = _USUAL.fullmatch(text) if isinstance(text, str) else None
    try:
        if usual is not None and len(usual[0]) <= _LONGEST:
            value = float(_EXACT.multiply(Decimal(usual[1]), resolve_unit(usual[2], kind)))
        else:
            value = _read_unusual(text, kind)
        if not math.isfinite(value):
            raise UnitProblem(", which is not a finite number")
    except UnitProblem as problem:
        found = as_written(text) + problem.clause
        raise QuantityError(_expectation(kind), found, problem.hint) from None
    if (sign == "above zero" and value <= 0.0) or (sign == "zero or more" and value < 0.0):
        bound = f"above 0 {kind.unit}" if sign == "above zero" else f"of 0 {kind.unit} or more"
        raise QuantityError(f"{kind.words} {bound}", as_written(text))
    return value


def _expectation(kind: Kind) -> str:
    return f'{kind.words} such as "{kind.example}"'


def _read_unusual(text: object, kind: Kind) -> float:
    if not isinstance(text, str):
        if isinstance(text, bool) or not isinstance(text, (int, float)):
            is_list, is_table = isinstance(text, list), isinstance(text, dict)
            raise UnitProblem(", a list" if is_list else ", a table" if is_table else "")
        if kind.value.bare:
            return float_or_infinite(text)
        raise UnitProblem(": the unit is missing" if math.isfinite(float_or_infinite(text)) else "")
    if not text.strip():
        raise UnitProblem(", which is empty")
    if len(text) > _LONGEST:
        raise UnitProblem(", which is too long")
    tidied = tidy(text)
    both = _FEET_AND_INCHES.fullmatch(tidied)
    if both is not None:
        return _feet_and_inches(both[1], both[2], both[3], kind)
    match = _NUMBER_AND_UNIT.fullmatch(tidied)
    _refuse_odd_number(tidied, match)
    assert match is not None
    number = _rational(match[2])
    if not match[3] and kind.value.bare:
        raise UnitProblem(": the unit is missing", "per K is understood where there are no quotes")
    unit = {"'": "ft", '"': "in"}.get(match[3], match[3])
    factor = Fraction(resolve_unit(unit, kind))
    return float_or_infinite(-number * factor if match[1] == "-" else number * factor)


def _refuse_odd_number(text: str, match: re.Match[str] | None) -> None:
    """Say what is wrong with a text that begins with no number, or has a comma in it."""
    comma = re.match(r"[-+]?\d*,\d+", text)
    if comma is not None:
        thousands = re.match(r"[-+]?\d{1,3}(,\d{3})+(?!\d)", text)
        point = f'use a point: "{text.replace(",", ".", 1)}"'
        hint = "use a point for decimals, and no comma between thousands" if thousands else point
        raise UnitProblem(", with a comma in the number", hint)
    if match is None:
        if re.match(r"[-+]?\s*(nan|inf|infinity)\b", text, re.IGNORECASE):
            raise UnitProblem(", which is not a finite number")
        raise UnitProblem(": the number is missing")


def _feet_and_inches(sign: str, feet: str, inches: str, kind: Kind) -> float:
    foot, inch = Fraction(resolve_unit("ft", kind)), Fraction(resolve_unit("in", kind))
    whole, rest = _rational(feet), _rational(inches)
    if whole.denominator != 1:
        raise UnitProblem(": feet before inches have to be a whole number")
    if rest >= 12:
        raise UnitProblem(": inches after feet have to be less than 12")
    length = float(whole * foot + rest * inch)
    return -length if sign == "-" else length


def _rational(number: str) -> Fraction:
    """Read a decimal, a fraction or a whole number and a fraction, exactly."""
    parts = [int(digits) for digits in re.findall(r"\d+", number)]
    if "/" not in number:
        return Fraction(number.replace(" ", ""))
    if parts[-1] == 0:
        raise UnitProblem(", with a fraction over zero")
    fraction = Fraction(parts[-2], parts[-1])
    if len(parts) == 2:
        return fraction
    if fraction >= 1:
        raise UnitProblem(": a fraction after a whole number has to be less than 1")
    return parts[0] + fraction


def split_header(header: str) -> tuple[str, str]:
    """Part the name of a column from its unit.

    Parameters
    ----------
    header : str
        ``"remaining depth [mm]"``, ``"station (m)"`` or ``"station, mm"``.

    Returns
    -------
    tuple of str
        Name and unit; the unit is empty where there is none.

    Examples
    --------
    >>> split_header("web, north side [mm]")
    ('web, north side', 'mm')
    >>> split_header("station")
    ('station', '')
    """
    text = " ".join(header.split())
    for pattern in (r"(.*?)\s*\[([^\[\]]*)\]", r"(.*?)\s*\(((?:[^()]|\([^()]*\))*)\)", r"(.*),\s*([^,]*)"):
        match = re.fullmatch(pattern, text)
        if match is not None:
            return match[1].strip(), match[2].strip()
    return text, ""
