"""A table before it is written anywhere: columns of values in SI units, and what each of them is."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

from fishbelly.cli.format_quantity import NOTHING, format_number, format_position, style_of

TEXT = "text"
"""What a column of words holds."""
PERCENT = "percent"
"""What a column of shares holds; 1 is shown as 100."""

NOISE = 1e-10
"""Values below this share of the largest beside them are shown as 0."""
_OWN_RANGE = 1e-3
"""With figures of its own, a value shows no finer than one of this share of the column's largest would."""
_SURE_DIGITS = 12
"""Figures that a value is cut to before it is rounded, so that equal values are rounded alike."""

_QUOTIENTS = {"stress per moment": ("stress", "moment"), "stress per force": ("stress", "force")}


@dataclass(frozen=True)
class Column:
    """One column.

    Attributes
    ----------
    title : str
        Its head, without the unit.
    what : str
        The quantity as `format_quantity` knows it, or ``"text"``, ``"percent"``, ``"stress per moment"`` or
        ``"stress per force"``.
    values : tuple
        Words, or values in SI base units; None where there is none.
    optional : bool
        Whether it may go where it holds nothing but zeros and gaps.
    noise : float
        Size below which a value is noise, in SI base units; besides `NOISE` of the column's largest.
    own : bool
        Whether every value has significant figures of its own; else all have the decimals of the largest.
    scale : float
        The largest value of the same kind elsewhere, to which decimals are also fitted, in SI base units.
    """

    title: str
    what: str
    values: tuple[Any, ...]
    optional: bool = False
    noise: float = 0.0
    own: bool = False
    scale: float = 0.0

    @property
    def is_text(self) -> bool:
        """Whether it holds words."""
        return self.what == TEXT

    @property
    def empty(self) -> bool:
        """Whether it holds nothing but gaps, zeros and noise."""
        if self.is_text:
            return not any(self.values)
        return not any(self.settled())

    def settled(self) -> list[float | None]:
        """Values in SI units with noise, and minus zero, set to 0."""
        top = self._top()
        floor = max(self.noise, NOISE * max(top, self.scale))
        return [None if v is None else (0.0 if abs(v) <= floor else float(v)) for v in self.values]

    def numbers(self, style: str) -> list[float | None]:
        """Values in the unit of a style, for files."""
        size = unit_of(self.what, style)[1]
        return [None if v is None else v / size for v in self.settled()]

    def unit(self, style: str) -> str:
        """Label of the unit that values are shown in; empty for words and bare numbers."""
        return "" if self.is_text else unit_of(self.what, style)[0]

    def cells(self, style: str, digits: int = 4) -> list[str]:
        """Values as people read them, without units; places in US style bring theirs."""
        if self.is_text:
            return ["" if v is None else str(v) for v in self.values]
        if self.what == PERCENT:
            return [NOTHING if v is None else _percent(v) for v in self.values]
        if self.what == "position":
            return [NOTHING if v is None else _place(v, style) for v in self.settled()]
        top = max(self._top(), self.scale)
        return [self._cell(v, style, digits, top) for v in self.settled()]

    def picked(self, rows: Iterable[int]) -> Column:
        """Give the column with some rows only, its noise and decimals as before."""
        return replace(self, values=tuple(self.values[k] for k in rows), scale=max(self.scale, self._top()))

    def _top(self) -> float:
        if self.is_text:
            return 0.0
        return max((abs(v) for v in self.values if v is not None and math.isfinite(v)), default=0.0)

    def _cell(self, value: float | None, style: str, digits: int, top: float) -> str:
        if value is None:
            return NOTHING
        size = unit_of(self.what, style)[1]
        if value == 0.0 and (self.own or top <= self.noise):
            return "0"
        scale = max(abs(value), _OWN_RANGE * top) if self.own else top
        number = float(f"{value / size:.{_SURE_DIGITS}g}")
        return format_number(number, "factor", style_of(style), digits, scale / size)  # type: ignore[arg-type]


@dataclass(frozen=True)
class Grid:
    """Columns of equal length with a heading.

    Attributes
    ----------
    title : str
        Heading, also the name of a worksheet.
    columns : tuple of Column
        The first one is repeated where the table has to be folded.
    note : str
        What the heading adds in brackets.
    """

    title: str
    columns: tuple[Column, ...]
    note: str = ""

    @property
    def count(self) -> int:
        """How many rows there are."""
        return len(self.columns[0].values) if self.columns else 0

    def picked(self, rows: Sequence[int]) -> Grid:
        """Give the grid with some rows only."""
        return replace(self, columns=tuple(c.picked(rows) for c in self.columns))

    def without_empty(self) -> Grid:
        """Give the grid without optional columns that hold nothing."""
        return replace(self, columns=tuple(c for c in self.columns if not (c.optional and c.empty)))


def column(
    rows: Sequence[Mapping[str, Any]],
    title: str,
    what: str,
    get: str | Callable[[Mapping[str, Any]], Any] | None = None,
    **rest: Any,
) -> Column:
    """Make a column of one entry of every row.

    Parameters
    ----------
    rows : sequence of mapping
        Rows of results.
    title, what : str
        As in `Column`.
    get : str or function, optional
        Key of the entry, or what finds it in a row; default the title.
    **rest
        Other attributes of `Column`.
    """
    key = title if get is None else get
    values = tuple(key(row) if callable(key) else row.get(key) for row in rows)
    return Column(title, what, values, **rest)


def unit_of(what: str, style: str) -> tuple[str, float]:
    """Give the label of the unit of a quantity, and one of it in SI base units.

    Examples
    --------
    >>> unit_of("stress per moment", "metric")
    ('MPa/kNm', 1000.0)
    """
    if what == PERCENT:
        return "%", 0.01
    chosen = style_of(style)  # type: ignore[arg-type]
    if what in _QUOTIENTS:
        (top, above), (bottom, below) = (chosen.unit(w) for w in _QUOTIENTS[what])
        return f"{top}/{bottom}", above / below
    return chosen.unit(what)


def _place(x: float, style: str) -> str:
    text = format_position(x, style)  # type: ignore[arg-type]
    return text.removesuffix(" m") if style == "metric" else text


def _percent(share: float) -> str:
    """Write a share in per cent; one just over 1 does not read as 100."""
    text = f"{100.0 * share:,.1f}".replace(",", " ")
    if text == "-0.0":
        return "0.0"
    return ">100.0" if text == "100.0" and share > 1.0 + 1e-12 else text
