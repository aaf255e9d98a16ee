"""Types of the values in a job's tables: each reads a value, or says what should have stood there.

They stand in `Annotated` types of pydantic models. Every reader raises `ValueFault`, which may carry several
faults of one value with their places in it.
"""

from __future__ import annotations

from collections.abc import Callable
from copy import deepcopy
from dataclasses import dataclass, replace
from typing import Annotated, Any

from pydantic_core import core_schema

from fishbelly.cli.bare_numbers import parse_count, parse_factor
from fishbelly.cli.faults import as_written, join_words, nearest
from fishbelly.cli.quantities import Kind, QuantityError, Sign, parse_quantity

Path = tuple[str | int, ...]


@dataclass(frozen=True)
class Ill:
    """What is wrong with one value: its place below the value read, and the three texts of a `Fault`.

    `file`, `line` and `key` say where, when that is in another file than the job.
    """

    path: Path
    expected: str
    found: str
    hint: str = ""
    file: str = ""
    line: int | None = None
    key: str = ""

    def below(self, *path: str | int) -> Ill:
        """Return the same, seen from further up."""
        return replace(self, path=(*path, *self.path))


class ValueFault(ValueError):
    """A value that cannot be read.

    Attributes
    ----------
    ills : tuple of Ill
        At least one.
    """

    def __init__(self, *ills: Ill) -> None:
        super().__init__(*ills)
        self.ills = ills


def ill(expected: str, found: object, hint: str = "", path: Path = ()) -> ValueFault:
    """Make the fault of one value, `found` shown as written."""
    return ValueFault(Ill(path, expected, as_written(found), hint))


def of_quantity(error: QuantityError) -> ValueFault:
    """Turn the fault of a quantity into that of a value."""
    return ValueFault(Ill((), error.expected, error.found, error.hint))


def gather(values: list[Any], read: Callable[[Any], Any]) -> list[Any]:
    """Read every item of a list, and raise the faults of all of them at once."""
    read_values, ills = [], []
    for k, value in enumerate(values):
        try:
            read_values.append(read(value))
        except ValueFault as fault:
            ills += [i.below(k) for i in fault.ills]
    if ills:
        raise ValueFault(*ills)
    return read_values


class Reader:
    """A reader of one value, used as metadata of an `Annotated` type.

    Attributes
    ----------
    words : str
        What is expected, for the message of a missing key.
    schema : dict
        JSON Schema of the value.
    """

    words: str = "a value"
    schema: dict[str, Any] = {}

    def read(self, value: Any) -> Any:
        """Read a value as TOML has it; raises `ValueFault`."""
        raise NotImplementedError

    def __get_pydantic_core_schema__(self, source: Any, handler: Any) -> core_schema.CoreSchema:
        return core_schema.no_info_plain_validator_function(self.read)

    def __get_pydantic_json_schema__(self, schema: Any, handler: Any) -> dict[str, Any]:
        return deepcopy(self.schema)  # pydantic adds defaults to what it gets


def quantity(value: Any, kind: Kind, sign: Sign = "any") -> float:
    """Read a quantity with its unit to SI base units; raises `ValueFault`."""
    try:
        return parse_quantity(value, kind, sign=sign)
    except QuantityError as error:
        raise of_quantity(error) from None


class Quantity(Reader):
    """A quantity: a text with its unit, read to SI base units."""

    def __init__(self, kind: Kind, sign: Sign = "any") -> None:
        self.kind, self.sign = kind, sign
        self.words = f'{kind.words} such as "{kind.example}"'
        self.schema = {
            "type": ["string", "number"] if kind.value.bare else "string",
            "description": kind.words,
            "examples": [kind.example],
        }

    def read(self, value: Any) -> float:
        """Read the quantity."""
        return quantity(value, self.kind, self.sign)


_BOUNDS = {"above": "exclusiveMinimum", "at_least": "minimum", "below": "exclusiveMaximum", "at_most": "maximum"}


class Factor(Reader):
    """A bare number within bounds."""

    def __init__(self, words: str, **bounds: float) -> None:
        self.words, self.bounds = words, bounds
        self.schema = {"type": "number", "description": words} | {_BOUNDS[k]: v for k, v in bounds.items()}

    def read(self, value: Any) -> float:
        """Read the number."""
        try:
            return parse_factor(value, self.words, **self.bounds)
        except QuantityError as error:
            raise of_quantity(error) from None


class Count(Reader):
    """A whole number; the most there may be keeps a slip from filling the memory."""

    def __init__(self, at_least: int = 1, at_most: int = 10_000) -> None:
        self.at_least, self.at_most = at_least, at_most
        self.words = f"a whole number of at least {at_least}"
        self.schema = {"type": "integer", "minimum": at_least, "maximum": at_most}

    def read(self, value: Any) -> int:
        """Read the number."""
        try:
            count = parse_count(value, at_least=self.at_least)
        except QuantityError as error:
            raise of_quantity(error) from None
        if count > self.at_most:
            raise ill(f"a whole number of at most {self.at_most}", value)
        return count


class Text(Reader):
    """A text; a name may not be empty."""

    def __init__(self, words: str = "a text", may_be_empty: bool = False) -> None:
        self.words, self.may_be_empty = words, may_be_empty
        self.schema = {"type": "string"} if may_be_empty else {"type": "string", "minLength": 1}

    def read(self, value: Any) -> str:
        """Read the text."""
        if not isinstance(value, str) or not (self.may_be_empty or value.strip()):
            raise ill(self.words, value)
        return value


class Word(Reader):
    """One of a few words."""

    def __init__(self, *choices: str) -> None:
        self.choices = choices
        self.words = join_words(choices)
        self.schema = {"enum": list(choices)}

    def read(self, value: Any) -> str:
        """Read the word."""
        if not isinstance(value, str) or value not in self.choices:
            near = nearest(value, self.choices) if isinstance(value, str) else None
            raise ill(self.words, value, f'did you mean "{near}"?' if near else "")
        return value


class WordOr(Word):
    """One of a few words, or something else such as a quantity."""

    def __init__(self, other: Reader, *choices: str) -> None:
        super().__init__(*choices)
        self.other = other
        self.words = f"{join_words(choices, 'or')} or {other.words}"
        self.schema = {"anyOf": [{"enum": list(choices)}, other.schema]}

    def read(self, value: Any) -> Any:
        """Read a word or the other thing."""
        if isinstance(value, str) and value in self.choices:
            return value
        if isinstance(value, str) and not any(c.isdigit() for c in value):
            near = nearest(value, self.choices)
            raise ill(self.words, value, f'did you mean "{near}"?' if near else "")
        return self.other.read(value)


class YesNo(Reader):
    """True or false."""

    words = "true or false"
    schema = {"type": "boolean"}

    def read(self, value: Any) -> bool:
        """Read it."""
        if not isinstance(value, bool):
            raise ill(self.words, value, "without quotes" if value in ("true", "false") else "")
        return value


class Many(Reader):
    """A list of one thing; with `one`, a single one may stand alone, with `empty` none at all. Read as a tuple."""

    def __init__(
        self, item: Reader, words: str, *, one: bool = False, count: int | None = None, empty: bool = False
    ) -> None:
        self.item, self.words, self.one, self.count, self.empty = item, words, one, count, empty
        several: dict[str, Any] = {"type": "array", "items": item.schema, "minItems": 0 if empty else count or 1}
        self.schema = {"anyOf": [item.schema, several]} if one else several
        if count is not None:
            several["maxItems"] = count

    def read(self, value: Any) -> tuple[Any, ...]:
        """Read the list."""
        if self.one and not isinstance(value, list):
            return (self.item.read(value),)
        wrong = not isinstance(value, list) or not (value or self.empty)
        if wrong or (self.count is not None and len(value) != self.count):
            raise ill(self.words, value)
        return tuple(gather(value, self.item.read))


class TableOf(Reader):
    """A table of names to one thing, ``{ name = value }``."""

    def __init__(self, item: Reader, words: str) -> None:
        self.item, self.words = item, words
        self.schema = {"type": "object", "additionalProperties": item.schema}

    def read(self, value: Any) -> dict[str, Any]:
        """Read the table."""
        if not isinstance(value, dict):
            raise ill(self.words, value)
        ills, result = [], {}
        for name, entry in value.items():
            try:
                result[name] = self.item.read(entry)
            except ValueFault as fault:
                ills += [i.below(name) for i in fault.ills]
        if ills:
            raise ValueFault(*ills)
        return result


NAMES = Many(Text("a name"), 'a name or a list of names such as ["beam", "plate"]', one=True)

Length = Annotated[float, Quantity(Kind.LENGTH)]
PositiveLength = Annotated[float, Quantity(Kind.LENGTH, "above zero")]
MaybeLength = Annotated[float | None, Quantity(Kind.LENGTH)]
MaybePositiveLength = Annotated[float | None, Quantity(Kind.LENGTH, "above zero")]
MaybeName = Annotated[str | None, Text("a name")]
MaybeNames = Annotated[tuple[str, ...] | None, NAMES]
Name = Annotated[str, Text("a name")]
Yes = Annotated[bool, YesNo()]
