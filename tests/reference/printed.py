"""Rows of published values, and what half of a printed digit is."""

import json
from pathlib import Path
from typing import Any

import pytest


def rows(group: str) -> dict[str, dict[str, Any]]:
    """Rows of a group by id."""
    text = Path(__file__).with_name(f"group_{group}.json").read_text(encoding="utf-8")
    return {row["id"]: row for row in json.loads(text)}


def half_a_digit(found: float, printed: float, row: dict[str, Any], key: str, digits: int | None = None) -> None:
    """Assert that `found` lies within half of the last digit of `printed`, or within the row's stated difference.

    A value with ten digits or more is a closed form written out: 1e-9 then. `digits`: significant digits as printed,
    where the row's number has lost trailing zeros. Where the print itself is off by more than half a digit
    the row states the difference (`rel_diff`), and `found` must show just that difference.
    """
    text = f"{abs(printed):.15g}"
    shown = text.replace(".", "").lstrip("0")
    if len(shown if "." in text else shown.rstrip("0")) >= 10:
        assert found == pytest.approx(printed, rel=1e-9), (row["id"], key)
        return
    whole = digits if digits is not None else len(shown)
    exponent = int(f"{abs(printed):e}".split("e")[1])
    half = 0.5 * 10.0 ** (exponent - whole + 1)
    if abs(found - printed) <= half * (1 + 1e-9):
        return
    assert found / printed - 1 == pytest.approx(row["rel_diff"][key], rel=0.02, abs=2e-6), (row["id"], key)
