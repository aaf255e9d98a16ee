"""How a table stands in plain text: numbers on their decimal point, words wrapped, never wider than asked."""

from __future__ import annotations

import unicodedata
from collections.abc import Sequence
from dataclasses import dataclass

from fishbelly.cli.grid import Grid

WIDTH = 80
"""Columns of a terminal that every table fits into."""

_GAP = 2
_INDENT = 2
_NARROWEST = 12
"""Columns of words are not made narrower than this before a table is folded."""
_WIDEST_KEY = 24
"""Most that a first column of words takes where the table is folded."""
_MOST_LINES = 2
"""Lines that a cell of words may take; a longer one is shortened in its middle."""


@dataclass(frozen=True)
class _Strip:
    """A column ready to be set: lines of its head, cells, whether it holds words, its width."""

    head: tuple[str, str]
    cells: list[str]
    words: bool
    width: int

    def narrowed(self, width: int) -> _Strip:
        return _Strip(self.head, self.cells, self.words, width)


def render(grid: Grid, style: str, digits: int = 4, width: int = WIDTH, indent: int = _INDENT) -> list[str]:
    """Write a grid as lines of plain text.

    Parameters
    ----------
    grid : Grid
        What to write; optional columns that are empty are left out.
    style : {"metric", "us"}
        Units.
    digits : int
        Significant figures of the largest number of a column.
    width : int
        Most characters in a line.
    indent : int
        Blanks before every line.

    Returns
    -------
    list of str
        Two lines of heads, of which the second has the units, and the rows. A table that is too wide is
        folded: the rest of its columns follow below, beside the first column again.
    """
    strips = _strips(grid, style, digits)
    return _set(strips, width - indent, " " * indent) if strips else []


def _strips(grid: Grid, style: str, digits: int) -> list[_Strip]:
    return [
        _strip(c.title, c.unit(style), c.cells(style, digits), c.is_text, c.what == "position" and style == "us")
        for c in grid.without_empty().columns
    ]


def fits(grid: Grid, style: str, digits: int = 4, width: int = WIDTH - _INDENT) -> bool:
    """Whether a grid fits into a width without being folded."""
    strips = _strips(grid, style, digits)
    return sum(min(s.width, _NARROWEST) if s.words else s.width for s in strips) + _GAP * (len(strips) - 1) <= width


def _strip(title: str, unit: str, cells: list[str], words: bool, brings_unit: bool) -> _Strip:
    cells = [clean(c) for c in cells] if words else (cells if brings_unit else _on_the_point(cells))
    head = (title, "" if brings_unit else unit)
    return _Strip(head, cells, words, max(map(shown_width, (*head, *cells))))


def _on_the_point(cells: list[str]) -> list[str]:
    """Pad numbers on the right so that their decimal points stand below each other."""
    tails = [len(c) - len(c.partition(".")[0]) for c in cells]
    longest = max(tails, default=0)
    return [c + " " * (longest - tail) for c, tail in zip(cells, tails, strict=True)]


def _total(strips: Sequence[_Strip]) -> int:
    return sum(s.width for s in strips) + _GAP * (len(strips) - 1)


def _set(strips: list[_Strip], width: int, margin: str) -> list[str]:
    strips = _shrunk(strips, width)
    if _total(strips) <= width or len(strips) == 1:
        return _lines(strips, margin)
    key = strips[0]
    if key.words:
        key = key.narrowed(min(key.width, _WIDEST_KEY))
    fitting = 1
    while fitting < len(strips) - 1 and _total([key, *strips[1 : fitting + 2]]) <= width:
        fitting += 1
    first, rest = [key, *strips[1 : fitting + 1]], strips[fitting + 1 :]
    lines = _lines(_shrunk(first, width), margin)
    return [*lines, "", *_set([key, *rest], width, margin)] if rest else lines


def _shrunk(strips: list[_Strip], width: int) -> list[_Strip]:
    """Take what is too much from columns of words, the widest first."""
    strips = list(strips)
    while (excess := _total(strips) - width) > 0:
        wordy = [k for k, s in enumerate(strips) if s.words and s.width > _NARROWEST]
        if not wordy:
            break
        k = max(wordy, key=lambda k: strips[k].width)
        others = [strips[j].width for j in wordy if j != k]
        goal = max(strips[k].width - excess, max(others, default=_NARROWEST) - 1, _NARROWEST)
        strips[k] = strips[k].narrowed(min(goal, strips[k].width - 1))
    return strips


def _lines(strips: Sequence[_Strip], margin: str) -> list[str]:
    heads = [[s.head[k] for s in strips] for k in (0, 1)]
    rows = [h for h in heads if any(h)] + [list(r) for r in zip(*(s.cells for s in strips), strict=True)]
    lines = []
    for row in rows:
        wrapped = [_cell(text, s) for text, s in zip(row, strips, strict=True)]
        for k in range(max(map(len, wrapped))):
            pieces = [w[k] if k < len(w) else "" for w in wrapped]
            padded = [_padded(p, s) for p, s in zip(pieces, strips, strict=True)]
            lines.append((margin + (" " * _GAP).join(padded)).rstrip())
    return lines


def _cell(text: str, strip: _Strip) -> list[str]:
    return wrap(text, strip.width, _MOST_LINES) if strip.words else [text]


def _padded(text: str, strip: _Strip) -> str:
    blanks = " " * (strip.width - shown_width(text))
    return text + blanks if strip.words else blanks + text


def shown_width(text: str) -> int:
    """Columns that a text takes on a terminal; wide characters take two, combining marks none."""
    if text.isascii():
        return len(text)
    return sum(_char_width(c) for c in text)


def _char_width(char: str) -> int:
    if unicodedata.combining(char):
        return 0
    return 2 if unicodedata.east_asian_width(char) in "WF" else 1


def clean(text: str) -> str:
    r"""Set blanks for line ends and characters that steer a terminal, and one blank for several.

    Examples
    --------
    >>> clean("upper\n plate\x1b[31m")
    'upper plate [31m'
    """
    if text.isascii() and text.isprintable():
        return " ".join(text.split())
    kept = (" " if unicodedata.category(c)[0] in "CZ" else c for c in text)
    return " ".join("".join(kept).split())


def wrap(text: str, width: int, most: int = 0) -> list[str]:
    """Break a text into lines at blanks, and inside words that are too long.

    Parameters
    ----------
    text : str
        The text.
    width : int
        Most columns of a line.
    most : int
        Most lines; a text that takes more loses its middle, for which "…" stands, since names that are long
        often differ at their ends. 0: as many as it takes.

    Returns
    -------
    list of str
        At least one line.

    Examples
    --------
    >>> wrap("upper cover plate of the west girder 7", 14, most=2)
    ['upper cover …', 'west girder 7']
    """
    lines = _wrapped(text, width)
    length = len(text)
    while most and len(lines) > most and length > 2:
        length = min(length - 1, most * width)
        head = (length + 1) // 2
        lines = _wrapped(f"{_head(text, head)} …{_tail(text, length - head)}", width)
    return lines


def _head(text: str, count: int) -> str:
    """Give the beginning of a text, up to the last whole word where that leaves most of it."""
    start = text[:count]
    blank = start.rfind(" ")
    return start[:blank] if text[count] != " " and 2 * blank > count else start.rstrip()


def _tail(text: str, count: int) -> str:
    """Give the end of a text, from a whole word on where one begins in it."""
    end = text[len(text) - count :]
    blank = end.find(" ")
    return end[blank:] if 0 <= blank < len(end) - 1 else end


def _wrapped(text: str, width: int) -> list[str]:
    lines, line, rest = [], "", text.split(" ")
    while rest:
        word = rest.pop(0)
        joined = f"{line} {word}" if line else word
        if shown_width(joined) <= width:
            line = joined
        elif line:
            lines.append(line)
            line = ""
            rest.insert(0, word)
        else:
            head = _fitting(word, width)
            lines.append(head)
            rest.insert(0, word[len(head) :])
    lines.append(line)
    if len(lines) > 1 and not lines[-1]:
        lines.pop()
    return lines


def _fitting(text: str, width: int) -> str:
    """Give the beginning of a text that fits, at least one character."""
    used = 0
    for k, char in enumerate(text):
        used += _char_width(char)
        if used > width and k:
            return text[:k]
    return text


def paragraph(text: str, first: str = "", later: str | None = None, width: int = WIDTH) -> list[str]:
    """Wrap a text with something before its first line and blanks before the others.

    Parameters
    ----------
    text : str
        The text.
    first : str
        What stands before it.
    later : str, optional
        What stands before its other lines; default as many blanks.
    width : int
        Most columns of a line.
    """
    hanging = " " * shown_width(first) if later is None else later
    lines = wrap(clean(text), width - max(shown_width(first), shown_width(hanging)))
    return [(first if k == 0 else hanging) + line for k, line in enumerate(lines)]
