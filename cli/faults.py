"""What is wrong with a job, where it stands and what was expected: faults as data, and their wording."""

from __future__ import annotations

import difflib
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

_LONGEST_SHOWN = 60
"""Characters of a value that a message repeats."""
_LONGEST_LIST = 8
"""Choices up to this many are all listed where none is near."""


@dataclass(frozen=True)
class Fault:
    """One thing wrong with a file that someone wrote.

    Attributes
    ----------
    file : str
        Name of the file as the reader knows it.
    line : int or None
        Line in it, counted from 1; None where the fault stands on no line.
    where : str
        What the key belongs to (``'part "arm"'``); empty for the top level.
    key : str
        The key; empty where the fault is not about one key.
    expected : str
        What should stand there (``'a length above 0 mm'``); empty where `found` says it all
        (``'unknown key "widht"'``).
    found : str
        What stands there, as written (``'"-120 mm"'``); empty where nothing does.
    hint : str
        A way out, printed after a semicolon.

    Examples
    --------
    >>> print(Fault("roof.toml", 34, 'part "arm"', "depth", "a length above 0 mm", '"-120 mm"'))
    roof.toml:34: part "arm", depth: expected a length above 0 mm, got "-120 mm"
    >>> print(Fault("roof.toml", None, "", "length", 'a length such as "12 mm"', ""))
    roof.toml: length: expected a length such as "12 mm", but it is missing
    """

    file: str
    line: int | None
    where: str
    key: str
    expected: str
    found: str
    hint: str = ""

    def __str__(self) -> str:
        place = self.file if self.line is None else f"{self.file}:{self.line}"
        subject = ", ".join(part for part in (self.where, self.key) if part)
        return ": ".join(part for part in (place, subject, self.message) if part)

    @property
    def message(self) -> str:
        """What is wrong, without the place."""
        return word_fault(self.expected, self.found, self.hint)


class JobFaults(ValueError):
    """Everything wrong with a job, gathered before it is reported.

    Attributes
    ----------
    faults : tuple of Fault
        At least one; those of one file in order of their lines, files in the order they were given.
    """

    def __init__(self, faults: Iterable[Fault]) -> None:
        given = tuple(faults)
        if not given:
            raise ValueError("JobFaults needs at least one fault")
        files = list(dict.fromkeys(fault.file for fault in given))
        self.faults = tuple(sorted(given, key=lambda fault: (files.index(fault.file), fault.line or 0)))
        super().__init__(self.faults)

    def __str__(self) -> str:
        return "\n".join(str(fault) for fault in self.faults)


def word_fault(expected: str, found: str, hint: str = "") -> str:
    """Put what was expected, what was found and a hint into one sentence.

    Examples
    --------
    >>> word_fault('a force such as "12 kN"', '"5 kg", which is a mass', "kgf?")
    'expected a force such as "12 kN", got "5 kg", which is a mass; kgf?'
    >>> word_fault("", 'unknown key "widht"', 'did you mean "width"?')
    'unknown key "widht"; did you mean "width"?'
    """
    if not expected:
        text = found
    elif found:
        text = f"expected {expected}, got {found}"
    else:
        text = f"expected {expected}, but it is missing"
    return f"{text}; {hint}" if hint else text


def nearest(word: str, choices: Iterable[str]) -> str | None:
    """Find the choice that was most likely meant by a misspelt word.

    Capitals, and spaces, hyphens and underscores between words, count for nothing.

    Examples
    --------
    >>> nearest("widht", ["width", "depth"])
    'width'
    >>> nearest("Top-Width", ["width", "top_width"])
    'top_width'
    >>> nearest("colour", ["width", "depth"]) is None
    True
    """
    plain: dict[str, str] = {}
    for choice in choices:
        plain.setdefault(_plain(choice), choice)
    found = difflib.get_close_matches(_plain(word), plain, n=1, cutoff=0.6)
    return plain[found[0]] if found else None


def _plain(word: str) -> str:
    return word.casefold().replace("_", " ").replace("-", " ").strip()


def suggest(word: str, choices: Sequence[str]) -> str:
    """Word a hint: the nearest choice, else all of them where they are few, else nothing.

    Examples
    --------
    >>> suggest("widht", ["width", "depth"])
    'did you mean "width"?'
    >>> suggest("colour", ["width", "depth"])
    'known are "width" and "depth"'
    """
    near = nearest(word, choices)
    if near is not None:
        return f'did you mean "{near}"?'
    if 0 < len(choices) <= _LONGEST_LIST:
        return f"known {'is' if len(choices) == 1 else 'are'} {join_words(choices, 'and')}"
    return ""


def join_words(words: Sequence[str], last: str = "or") -> str:
    """List words in quotes, with a word before the last.

    Examples
    --------
    >>> join_words(["top", "middle", "bottom"])
    '"top", "middle" or "bottom"'
    """
    quoted = [f'"{word}"' for word in words]
    return quoted[0] if len(quoted) == 1 else f"{', '.join(quoted[:-1])} {last} {quoted[-1]}"


def unknown_key(file: str, line: int | None, where: str, word: str, choices: Sequence[str]) -> Fault:
    """Make the fault of a key that nobody knows.

    Examples
    --------
    >>> print(unknown_key("roof.toml", 3, 'part "arm"', "widht", ["width", "depth"]))
    roof.toml:3: part "arm": unknown key "widht"; did you mean "width"?
    """
    return Fault(file, line, where, "", "", f'unknown key "{word}"', suggest(word, choices))


def unknown_word(file: str, line: int | None, where: str, key: str, word: object, choices: Sequence[str]) -> Fault:
    """Make the fault of a value that is not one of the words allowed there.

    Examples
    --------
    >>> print(unknown_word("roof.toml", 3, "", "datum", "midle", ["top", "middle", "bottom"]))
    roof.toml:3: datum: expected "top", "middle" or "bottom", got "midle"; did you mean "middle"?
    """
    near = nearest(word, choices) if isinstance(word, str) else None
    hint = f'did you mean "{near}"?' if near is not None else ""
    if len(choices) <= _LONGEST_LIST:
        return Fault(file, line, where, key, join_words(choices), as_written(word), hint)
    return Fault(file, line, where, key, "", f"{as_written(word)} is not known", hint)


def as_written(value: object) -> str:
    """Show a value of a job much as its file has it, cut where it is long.

    Examples
    --------
    >>> print(as_written("12 mm"), as_written(True), as_written([1, "2 m"]), as_written({"at": 2.5}))
    "12 mm" true [1, "2 m"] { at = 2.5 }
    """
    text = _written(value)
    if len(text) <= _LONGEST_SHOWN:
        return text
    return f"{text[:_LONGEST_SHOWN]}…" + ('"' if isinstance(value, str) else "")


def _written(value: object) -> str:
    if isinstance(value, str):
        shown = "".join(c if c.isprintable() else ascii(c)[1:-1] for c in value[: 2 * _LONGEST_SHOWN])
        return f"'{shown}'" if '"' in shown and "'" not in shown else f'"{shown}"'
    if isinstance(value, bool):
        return str(value).lower()
    if value is None:
        return "nothing"
    if isinstance(value, (list, tuple)):
        return f"[{', '.join(_written(item) for item in value[:_LONGEST_SHOWN])}]"
    if isinstance(value, dict):
        return "{}" if not value else f"{{ {', '.join(f'{key} = {_written(item)}' for key, item in value.items())} }}"
    return str(value)
