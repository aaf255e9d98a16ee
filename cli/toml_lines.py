"""A TOML text to its data and to the line on which each key is written."""

from __future__ import annotations

import re
import tomllib
from collections.abc import Sequence
from typing import Any

from fishbelly.cli.faults import Fault, JobFaults

Path = tuple[str | int, ...]


class Lines:
    r"""Where the keys of a file are written.

    Parameters
    ----------
    of_path : dict of tuple to int
        The line, counted from 1, of each key, table and item of an array.

    Examples
    --------
    >>> _, lines = load_toml("[[part]]\nname = 'arm'\njoined = { rows = 2 }\n", "roof.toml")
    >>> lines.line(("part", 0, "joined", "rows")), lines.line(("part", 0, "depth")), lines.line(("length",))
    (3, 1, None)
    """

    def __init__(self, of_path: dict[Path, int]) -> None:
        self._of_path = dict(of_path)

    def line(self, path: Sequence[str | int]) -> int | None:
        """Give the line of a key, else of the nearest table around it that is written.

        Parameters
        ----------
        path : sequence of str and int
            Keys, and places in arrays counted from 0, as the data are indexed.

        Returns
        -------
        int or None
            Counted from 1; None for what would stand at the top level and does not.
        """
        for end in range(len(path), 0, -1):
            found = self._of_path.get(tuple(path[:end]))
            if found is not None:
                return found
        return None

    def written(self, path: Sequence[str | int]) -> bool:
        """Tell whether exactly this key, table or item is written in the file."""
        return tuple(path) in self._of_path


def load_toml(text: str | bytes, name: str) -> tuple[dict[str, Any], Lines]:
    """Read a TOML text, and remember its lines.

    Parameters
    ----------
    text : str or bytes
        The content of the file; bytes have to be UTF-8, with or without a mark at the start.
    name : str
        The file's name, for messages.

    Returns
    -------
    tuple of dict and Lines
        The data as `tomllib` gives them, and where they are written.

    Raises
    ------
    JobFaults
        With one fault, where the text is not TOML or holds nothing.
    """
    decoded = _decode(text, name).removeprefix("\ufeff").replace("\r\n", "\n")
    scan = _Scan(decoded)
    try:
        data = tomllib.loads(decoded)
    except tomllib.TOMLDecodeError as error:
        raise JobFaults([_syntax_fault(str(error), decoded, name)]) from None
    except (ValueError, RecursionError) as error:
        deep = isinstance(error, RecursionError)
        found = "brackets stand too deep inside one another" if deep else "a number has too many digits"
        raise JobFaults([Fault(name, None, "", "", "", found)]) from None
    if not data:
        raise JobFaults([Fault(name, None, "", "", "", "the file is empty: it has no key")])
    scan.run()
    return data, Lines(scan.lines)


def _decode(text: str | bytes, name: str) -> str:
    if isinstance(text, bytes):
        if text.startswith((b"\xff\xfe", b"\xfe\xff")):
            fault = Fault(name, None, "", "", "", "the file is UTF-16 text", "save it as UTF-8")
            raise JobFaults([fault])
        if b"\0" in text:
            raise JobFaults([Fault(name, None, "", "", "", "the file is binary, not a text")])
        try:
            return text.decode("utf-8")
        except UnicodeDecodeError as error:
            line = text.count(b"\n", 0, error.start) + 1
            fault = Fault(name, line, "", "", "", "the file is not UTF-8 text", "save it as UTF-8")
            raise JobFaults([fault]) from None
    if "\0" in text:
        raise JobFaults([Fault(name, None, "", "", "", "the file is binary, not a text")])
    return text


# What is wrong with a text that is not TOML --------------------------------------------------------------

_QUOTES = 'quantities and words stand in quotes: depth = "12 mm"'
_WORDING: tuple[tuple[str, str, str], ...] = (
    ("Expected newline or end of document after a statement", "something follows the value", _QUOTES),
    ("Invalid value", "what stands there is no value", _QUOTES),
    ("Invalid statement", "the line is neither a key with its value nor a [table]", ""),
    ('Expected "=" after a key', 'a "=" is missing after the key', ""),
    ("Expected '=' after a key", 'a "=" is missing after the key', ""),
    ("Invalid initial character for a key part", "the key is missing or has a sign that needs quotes", ""),
    ("Unclosed array", 'a "[" is not closed', ""),
    ("Unclosed inline table", 'a "{" is not closed on its line', ""),
    ("Unterminated string", "a text in quotes is not closed", ""),
    ("Expected ']' at the end of a table declaration", 'a "]" is missing after the table\'s name', ""),
    ("Expected ']]' at the end of an array declaration", 'a "]]" is missing after the table\'s name', ""),
    ("Unescaped '\\'", "a backslash in double quotes", "use single quotes around it"),
    ("Illegal character '\\n'", "a text in quotes is not closed on its line", ""),
)
_REPEATS = (
    "Cannot overwrite",
    "Cannot declare",
    "Duplicate inline table key",
    "Cannot redefine",
    "Cannot mutate",
)


def _syntax_fault(error: str, text: str, name: str) -> Fault:
    """Put the parser's complaint into words, with the line where the cause stands."""
    match = re.fullmatch(r"(.*) \(at (?:line (\d+), column \d+|end of document)\)", error, re.DOTALL)
    said, at = (match[1], match[2]) if match is not None else (error, None)
    line = int(at) if at else text.rstrip().count("\n") + 1
    scan = _Scan(text)
    scan.run()
    if said.startswith(_REPEATS):
        return _repeat_fault(said, scan, line, name)
    if scan.unclosed is not None and not at:
        sign, line = scan.unclosed
        return Fault(name, line, "", "", "", f"a {sign} is opened here and never closed")
    written = text.split("\n")[line - 1] if line <= text.count("\n") + 1 else ""
    for start, words, hint in _WORDING:
        if said.startswith(start):
            if hint == _QUOTES and "'" in written and '"' in written:
                hint = 'a foot or inch mark ends the quotes: write "7 ft 6 in"'
            elif said.startswith("Invalid initial") and "{" in written and "}" not in written:
                hint = "a table in { } stands on one line"
            return Fault(name, line, "", "", "", words, hint)
    return Fault(name, line, "", "", "", f"not valid TOML: {said[:1].lower()}{said[1:]}")


def _repeat_fault(said: str, scan: _Scan, line: int, name: str) -> Fault:
    for path, first, second in scan.repeats:
        if second <= line:
            shown = ".".join(step for step in path if isinstance(step, str))
            is_header = scan.text.splitlines()[second - 1].lstrip().startswith("[")
            several = is_header and len(path) == 1 and path not in scan.values
            hint = f"where there are several, each is written [[{shown}]]" if several else ""
            return Fault(name, second, "", "", "", f'"{shown}" is given twice, first on line {first}', hint)
    return Fault(name, line, "", "", "", "a key or table is given twice")


# Lines ---------------------------------------------------------------------------------------------------

_SPACE = re.compile(r"[ \t]+")
_FILL = re.compile(r"(?:[ \t\n]+|#[^\n]*)*")
_STRING = re.compile(
    r'"""(?:[^"\\]|\\.|"{1,2}(?!"))*"{3,5}'
    r"|'''(?:[^']|'{1,2}(?!'))*'{3,5}"
    r'|"(?!"")(?:[^"\\\n]|\\.)*"'
    r"|'(?!'')[^'\n]*'",
    re.DOTALL,
)
_BARE_KEY = re.compile(r"[A-Za-z0-9_-]+")
_SCALAR = re.compile(r"[^,\]}#\n]+")


class _Stop(Exception):
    """The text goes on in a way that is no TOML; `tomllib` has the say about that."""


class _Scan:
    """One walk over a text that notes on which line each key, table and item stands.

    It relies on `tomllib` for what is valid. Of a text that is not, it notes what comes before the first
    thing it cannot follow, the line of a bracket or quote that is never closed, and keys given twice.
    """

    def __init__(self, text: str) -> None:
        self.text = text
        self.place = 0
        self.lines: dict[Path, int] = {}
        self.repeats: list[tuple[Path, int, int]] = []
        self.unclosed: tuple[str, int] | None = None
        self._items: dict[Path, int] = {}
        self._declared: set[Path] = set()
        self.values: set[Path] = set()
        self._counted = (0, 1)

    def run(self) -> None:
        """Walk to the end, or as far as the text can be followed."""
        table: Path = ()
        try:
            while self._skip(_FILL):
                if self._take("[["):
                    table = self._header("]]", item=True)
                elif self._take("["):
                    table = self._header("]", item=False)
                else:
                    self._pair(table)
        except (_Stop, RecursionError):
            return

    def _header(self, close: str, item: bool) -> Path:
        line = self._line()
        keys = self._key()
        self._require(close)
        base: Path = ()
        for key in keys[:-1]:
            base = self._last_item((*base, key))
            self._pass_through(base, line)
        path: Path = (*base, keys[-1])
        taken = path in self._declared or path in self.values or path in self._items
        if (path in self.lines and path not in self._items) if item else taken:
            self.repeats.append((path, self.lines[path], line))
        if item:
            self.lines.setdefault(path, line)
            count = self._items.get(path, 0)
            self._items[path] = count + 1
            path = (*path, count)
        self._declared.add(path)
        self.lines.setdefault(path, line)
        return path

    def _pass_through(self, path: Path, line: int) -> None:
        """Note a table on the way to a key, and where a value stands in its place."""
        if path in self.values:
            self.repeats.append((path, self.lines[path], line))
        self.lines.setdefault(path, line)

    def _last_item(self, path: Path) -> Path:
        """Add the place of the last item where a path leads to an array of tables."""
        return (*path, self._items[path] - 1) if path in self._items else path

    def _pair(self, table: Path) -> None:
        line = self._line()
        keys = self._key()
        self._require("=")
        path = table
        for key in keys[:-1]:
            path = (*path, key)
            self._pass_through(path, line)
        path = (*path, keys[-1])
        if path in self.lines:
            self.repeats.append((path, self.lines[path], line))
        self.lines.setdefault(path, line)
        self.values.add(path)
        self._skip(_SPACE)
        self._value(path)

    def _key(self) -> list[str]:
        keys = []
        while True:
            self._skip(_SPACE)
            quoted = _STRING.match(self.text, self.place)
            match = quoted or _BARE_KEY.match(self.text, self.place)
            if match is None:
                raise _Stop
            self.place = match.end()
            keys.append(_unquote(match[0]) if quoted else match[0])
            self._skip(_SPACE)
            if not self._take("."):
                return keys

    def _value(self, path: Path) -> None:
        line = self._line()
        if self._take("["):
            self._array(path, line)
        elif self._take("{"):
            self._inline_table(path, line)
        elif self.text[self.place : self.place + 1] in ('"', "'"):
            match = _STRING.match(self.text, self.place)
            if match is None:
                self.unclosed = (self._opening(), line)
                raise _Stop
            self.place = match.end()
        else:
            self._match(_SCALAR)

    def _array(self, path: Path, line: int) -> None:
        count = 0
        while True:
            if not self._skip(_FILL):
                self.unclosed = ("[", line)
                raise _Stop
            if self._take("]"):
                return
            self.lines.setdefault((*path, count), self._line())
            self._value((*path, count))
            count += 1
            self._skip(_FILL)
            if not self._take(",") and self.text[self.place : self.place + 1] not in ("]", ""):
                raise _Stop

    def _inline_table(self, path: Path, line: int) -> None:
        while True:
            if not self._skip(_FILL):
                self.unclosed = ("{", line)
                raise _Stop
            if self._take("}"):
                return
            self._pair(path)
            self._skip(_FILL)
            if not self._take(",") and self.text[self.place : self.place + 1] not in ("}", ""):
                raise _Stop

    def _opening(self) -> str:
        sign = self.text[self.place]
        return sign * 3 if self.text.startswith(sign * 3, self.place) else sign

    def _line(self) -> int:
        place, line = self._counted
        line += self.text.count("\n", place, self.place)
        self._counted = (self.place, line)
        return line

    def _skip(self, pattern: re.Pattern[str]) -> bool:
        """Pass over what a pattern matches; tell whether anything is left."""
        match = pattern.match(self.text, self.place)
        if match is not None:
            self.place = match.end()
        return self.place < len(self.text)

    def _match(self, pattern: re.Pattern[str]) -> None:
        match = pattern.match(self.text, self.place)
        if match is None:
            raise _Stop
        self.place = match.end()

    def _take(self, sign: str) -> bool:
        if not self.text.startswith(sign, self.place):
            return False
        self.place += len(sign)
        return True

    def _require(self, sign: str) -> None:
        self._skip(_SPACE)
        if not self._take(sign):
            raise _Stop


def _unquote(text: str) -> str:
    """Give the key that stands in quotes, escapes resolved."""
    if text.startswith("'"):
        return text[1:-1]
    try:
        return str(tomllib.loads(f"key = {text}")["key"])
    except tomllib.TOMLDecodeError:
        raise _Stop from None
