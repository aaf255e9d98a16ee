"""Bare numbers: factors and counts, and what is refused in which words."""

import math
import re

import pytest

from fishbelly.cli.bare_numbers import parse_count, parse_factor
from fishbelly.cli.units import QuantityError


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
