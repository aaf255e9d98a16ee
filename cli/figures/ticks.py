"""Axes in the units of the job: round steps, few digits, powers of a thousand beside the unit."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.cli.format_quantity import format_number, format_position, style_of, unit_label, unit_size

Array = NDArray[np.float64]

_RAISED = str.maketrans("0123456789-", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻")
_MOST_WHOLE, _MOST_DECIMALS = 6, 3
_FOOT, _INCH = 0.3048, 0.0254
_SHORT_METRIC, _SHORT_US = 2.0, 3.0 * _FOOT
"""Members shorter than this are measured in mm, in inches [m]."""


@dataclass(frozen=True)
class Ticks:
    """Places of ticks in SI units, their labels, and the unit that the axis is marked with."""

    at: Array
    labels: list[str]
    unit: str


def pretty(unit: str) -> str:
    """Write the powers of a unit as raised figures: kNm2 as kNm²."""
    head = unit.rstrip("0123456789")
    return head + unit[len(head) :].translate(_RAISED)


def step_for(reach: float, most: int) -> float:
    """Return the smallest step of 1, 2 or 5 times a power of ten of which at most `most` fit into a reach."""
    rough = reach / max(most, 1)
    if not rough > 0.0 or not math.isfinite(rough):
        return 1.0
    power = 10.0 ** math.floor(math.log10(rough) + 1e-9)
    return power * next(m for m in (1.0, 2.0, 5.0, 10.0) if m * power >= rough * (1.0 - 1e-9))


def ticks(low: float, high: float, what: str, style: str, most: int = 4) -> Ticks:
    """Choose ticks of a quantity between two values.

    Parameters
    ----------
    low, high : float
        Ends of the axis, SI units.
    what : str
        The quantity, as for `unit_label`.
    style : {"metric", "us"}
        Units to show.
    most : int
        Most steps.

    Returns
    -------
    Ticks
    """
    size = unit_size(what, style)  # type: ignore[arg-type]
    unit = pretty(unit_label(what, style))  # type: ignore[arg-type]
    low, high = min(low, high) / size, max(low, high) / size
    step = step_for(high - low, most)
    first, last = math.ceil(low / step - 1e-6), math.floor(high / step + 1e-6)
    shown = np.arange(first, last + 1) * step
    top = max(abs(low), abs(high), step)
    power = 0
    if top >= 10.0**_MOST_WHOLE or step < 10.0**-_MOST_DECIMALS:
        power = 3 * math.floor(math.log10(top) / 3.0)
    scaled, step = shown / 10.0**power, step / 10.0**power
    if power:
        unit = f"10{str(power).translate(_RAISED)} {unit}".rstrip()
    return Ticks(np.asarray(shown * size, dtype=float), [number(v, step, style) for v in scaled], unit)


def number(value: float, step: float, style: str) -> str:
    """Write a number with the decimals that a step needs."""
    decimals = max(0, -math.floor(math.log10(step) + 1e-6))
    if decimals and abs(step * 10.0**decimals - round(step * 10.0**decimals)) > 1e-6:
        decimals += 1
    text = f"{value:,.{decimals}f}".replace(",", style_of(style).thousands)  # type: ignore[arg-type]
    text = text[1:] if not text.strip("-0.") and text.startswith("-") else text
    return text.replace("-", "−")


def places(length: float, style: str, most: int) -> Ticks:
    """Choose ticks along the member, whose length is in m: metres or millimetres, feet or inches."""
    if style != "us":
        return ticks(0.0, length, "position" if length >= _SHORT_METRIC else "length", style, most)
    if length < _SHORT_US:
        return ticks(0.0, length, "length", style, most)
    feet = length / _FOOT
    if feet / most > 0.5:
        return ticks(0.0, length, "position", style, most)
    inches = 3 if feet / most <= 0.25 else 6
    at = np.arange(0, int(feet * 12 / inches + 1e-6) + 1) * inches
    return Ticks(np.asarray(at * _INCH, dtype=float), [f"{v // 12}'-{v % 12}\"" for v in at], "ft-in")


def place(x: float, length: float, style: str) -> str:
    """Write a place along a member of a length [m], with its unit."""
    if x == 0.0 and style == "us" and length >= _SHORT_US:
        return "0'-0\""
    if x == 0.0:
        return f"0 {places(length, style, 5).unit.split('-')[0]}"
    if style == "us" or length >= _SHORT_METRIC:
        if style == "us" and length < _SHORT_US:
            return f"{trimmed(format_number(x, 'length', 'us', 4, length))} in"
        return format_position(x, style)  # type: ignore[arg-type]
    return f"{trimmed(format_number(x, 'length', 'metric', 5, length))} mm"


def exact(number_: float, what: str, style: str, scale: float, digits: int = 3) -> str:
    """Write a value with its unit and the decimals that a largest value beside it has with `digits` figures."""
    text = format_number(number_, what, style, digits, scale).replace("-", "−")  # type: ignore[arg-type]
    return f"{text} {pretty(unit_label(what, style))}".rstrip()  # type: ignore[arg-type]


def value(number_: float, what: str, style: str, digits: int = 3, scale: float | None = None) -> str:
    """Write a value with its unit, without zeros that say nothing."""
    text = trimmed(format_number(number_, what, style, digits, scale))  # type: ignore[arg-type]
    return f"{text} {pretty(unit_label(what, style))}".rstrip()  # type: ignore[arg-type]


def trimmed(text: str) -> str:
    """Take zeros off the end of decimals, and set a true minus."""
    if "." in text and "e" not in text:
        text = text.rstrip("0").rstrip(".")
    return (text if text not in ("-0", "") else "0").replace("-", "−")


def set_places(ax: Any, length: float, style: str, width: float, labelled: bool = True) -> None:
    """Mark the horizontal axis with places along the member; `width` is that of the axes [mm]."""
    chosen = places(length, style, max(2, int(width // 16.0)))
    ax.set_xticks(chosen.at, chosen.labels if labelled else [""] * chosen.at.size)
    ax.set_xlabel(f"x from the left end [{chosen.unit}]" if labelled else "")


def set_values(ax: Any, words: str, what: str, style: str, height: float) -> None:
    """Mark the vertical axis with a quantity and write what it is above it; `height` is that of the axes [mm]."""
    low, high = ax.get_ylim()
    chosen = ticks(low, high, what, style, max(2, int(height // 4.2)))
    ax.set_yticks(chosen.at, chosen.labels)
    head, _, rest = words.partition(",")
    text = f"{head} [{chosen.unit or '–'}]" + (f",{rest}" if rest else "")
    ax.set_ylabel(text, rotation=0, ha="left", va="bottom")
    ax.yaxis.set_label_coords(0.0, 1.0 + 0.7 / height)
