"""Numbers without quotes and unit: ratios, factors, strains and counts."""

from __future__ import annotations

import math
import re
from typing import Any

from fishbelly.cli.faults import as_written
from fishbelly.cli.units import QuantityError


def parse_factor(
    value: object,
    words: str = "a bare number",
    *,
    above: float | None = None,
    at_least: float | None = None,
    below: float | None = None,
    at_most: float | None = None,
) -> float:
    """Read a ratio, factor or strain: a number without quotes and unit.

    Parameters
    ----------
    value : object
        What the job has.
    words : str
        What it has to be, in words.
    above, at_least, below, at_most : float, optional
        Bounds, the first and third exclusive.

    Returns
    -------
    float
        The number.

    Raises
    ------
    QuantityError
        Where it is no finite number within the bounds.
    """
    bounds = (("above", above), ("of at least", at_least), ("below", below), ("of at most", at_most))
    limits = " and ".join(f"{word} {bound:g}" for word, bound in bounds if bound is not None)
    expected = f"{words} {limits}".rstrip()
    if isinstance(value, bool) or not isinstance(value, (int, float)):
        hint = ""
        if isinstance(value, str) and re.match(r"\s*[-+]?\.?\d", value):
            hint = "without quotes" if re.fullmatch(r"[-+\d.eE\s]+", value) else "without quotes and unit"
        raise QuantityError(expected, as_written(value), hint)
    number = float_or_infinite(value)
    if not math.isfinite(number):
        raise QuantityError(expected, f"{as_written(value)}, which is not a finite number")
    too_low = (above is not None and number <= above) or (at_least is not None and number < at_least)
    too_high = (below is not None and number >= below) or (at_most is not None and number > at_most)
    if too_low or too_high:
        raise QuantityError(expected, as_written(value))
    return number


def parse_count(value: object, *, at_least: int = 1) -> int:
    """Read a count: a whole number without quotes, at least `at_least`; QuantityError where it is none."""
    if isinstance(value, bool) or not isinstance(value, int) or value < at_least:
        raise QuantityError(f"a whole number of at least {at_least}", as_written(value))
    return value


def float_or_infinite(value: Any) -> float:
    """Give a number as a float, infinite where it is an integer beyond all floats."""
    try:
        return float(value)
    except OverflowError:
        return math.inf
