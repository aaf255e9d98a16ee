"""Units and kinds of quantity: which units there are, their factors to SI, and what is wrong with others."""

from __future__ import annotations

import re
import sys
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from decimal import Decimal
from enum import Enum
from functools import lru_cache
from importlib.resources import files
from typing import TYPE_CHECKING, Any

from fishbelly.cli.faults import Fault, as_written, word_fault

if TYPE_CHECKING:
    import pint

_GRAVITY = Decimal("9.80665")
"""Standard acceleration of free fall [m/s2], 3rd CGPM 1901; as the contract of job files has it."""


@dataclass(frozen=True)
class _Meaning:
    words: str
    example: str
    si: str
    also: tuple[tuple[str, Decimal], ...] = ()
    is_force: bool = False
    bare: bool = False


class Kind(Enum):
    """The kind of quantity that a key expects.

    Kinds may share a dimension and differ in words: a modulus and a load per area are both N/m2.
    In kinds that contain a force ``lb`` is the pound-force and ``kg`` is refused.
    """

    LENGTH = _Meaning("a length", "12 mm", "m")
    FORCE = _Meaning("a force", "12 kN", "N", is_force=True)
    MOMENT = _Meaning("a moment", "12 kNm", "N*m", is_force=True)
    FORCE_PER_LENGTH = _Meaning("a force per length", "4.2 kN/m", "N/m", is_force=True)
    FORCE_PER_AREA = _Meaning("a force per area", "2.5 kN/m2", "N/m2", is_force=True)
    STRESS = _Meaning("a stress", "160 N/mm2", "N/m2", is_force=True)
    PRESSURE = STRESS
    MODULUS = _Meaning("a modulus", "210 GPa", "N/m2", is_force=True)
    STIFFNESS = _Meaning("a stiffness (force per length)", "3.2 kN/mm", "N/m", is_force=True)
    JOINT_STIFFNESS = _Meaning("a joint stiffness (force per length per length)", "40 N/mm/mm", "N/m2", is_force=True)
    ROTATIONAL_STIFFNESS = _Meaning(
        "a rotational stiffness (moment per angle)",
        "500 kNm/rad",
        "N*m/rad",
        also=(("N*m", Decimal(1)),),
        is_force=True,
    )
    DENSITY = _Meaning("a density", "7850 kg/m3", "kg/m3", also=(("N/m3", 1 / _GRAVITY),))
    MASS = _Meaning("a mass", "250 kg", "kg")
    MASS_PER_LENGTH = _Meaning("a mass per length", "40 kg/m", "kg/m")
    ANGLE = _Meaning("an angle", "6 deg", "rad")
    TEMPERATURE = _Meaning("a temperature rise", "20 K", "K")
    EXPANSION = _Meaning("a coefficient of expansion", "12e-6 /K", "1/K", bare=True)
    TIME = _Meaning("a time", "2 s", "s")
    FREQUENCY = _Meaning("a frequency", "5 Hz", "1/s")

    @property
    def words(self) -> str:
        """The kind in words, with its article."""
        return self.value.words

    @property
    def example(self) -> str:
        """One quantity of the kind, as one would write it."""
        return self.value.example

    @property
    def unit(self) -> str:
        """The unit of the example."""
        return self.value.example.split(" ", 1)[1]


class QuantityError(ValueError):
    """A value that is not the quantity expected.

    Attributes
    ----------
    expected, found, hint : str
        What should stand there, what does (as written, and what is wrong with it), and a way out.
    """

    def __init__(self, expected: str, found: str, hint: str = "") -> None:
        super().__init__(expected, found, hint)
        self.expected, self.found, self.hint = expected, found, hint

    def __str__(self) -> str:
        return word_fault(self.expected, self.found, self.hint)

    def at(self, file: str, line: int | None, where: str, key: str) -> Fault:
        """Give the fault that this is at a place in a file."""
        return Fault(file, line, where, key, self.expected, self.found, self.hint)


class UnitProblem(Exception):
    """What is wrong with a unit: a clause that follows the value as written, and a hint."""

    def __init__(self, clause: str, hint: str = "") -> None:
        super().__init__(clause, hint)
        self.clause, self.hint = clause, hint


_SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻", "0123456789-")
_LOOKALIKES = str.maketrans(
    {
        **dict.fromkeys("−–—‐‑", "-"),
        **dict.fromkeys("·⋅∙•×", "*"),
        **dict.fromkeys("µμ", "u"),
        **dict.fromkeys("′’‘", "'"),
        **dict.fromkeys("″”“", '"'),
        **dict.fromkeys("\u00a0\u2009\u202f\t", " "),
        "⁄": "/",
        "°": "deg",
        "℃": "degC",
        "℉": "degF",
        **{char: f" {text}" for char, text in zip("¼½¾⅛⅜⅝⅞", "1/4 1/2 3/4 1/8 3/8 5/8 7/8".split(), strict=True)},
    }
)


def tidy(text: str) -> str:
    """Write signs that look alike in the one way that numbers and units are read in."""
    powers = re.sub("[⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+", lambda match: "^" + match[0].translate(_SUPERSCRIPTS), text)
    return powers.translate(_LOOKALIKES).replace("''", '"').strip()


_UNIT_TOKEN = re.compile(r"([A-Za-z]+)(?:\^(-?[1-9])|([1-9]))?(?!\d)|([*/()-])|(1)(?=\s*/)|\s+")
_MEANT = {"k": "kip", "C": "degC", "F": "degF", "pound": "lb", "pounds": "lb", "meter": "m", "metre": "m"}
"""Spellings that are not accepted because they are taken for different things."""
_OTHER_DIMENSIONS = {"m2": "an area", "m3": "a volume", "m4": "a second moment of area", "m/m": "a ratio"}


def unit_factor(unit: str, kind: Kind) -> float:
    """Give the factor from a unit to SI, as for the header of a column.

    Parameters
    ----------
    unit : str
        A unit: ``"mm"``, ``"N/mm²"``, ``"kip-ft"``.
    kind : Kind
        What the column has to hold.

    Returns
    -------
    float
        One of this unit in SI base units.

    Raises
    ------
    QuantityError
        Where it is no unit of that kind.

    Examples
    --------
    >>> unit_factor("mm", Kind.LENGTH)
    0.001
    """
    try:
        return float(resolve_unit(tidy(unit), kind))
    except UnitProblem as problem:
        found = as_written(unit) + problem.clause if unit.strip() else ""
        raise QuantityError(f'a unit of {kind.words} such as "{kind.unit}"', found, problem.hint) from None


@lru_cache(maxsize=4096)
def resolve_unit(unit: str, kind: Kind) -> Decimal:
    """Give the factor from a unit to SI as a decimal, for callers that word the whole error themselves.

    Parameters
    ----------
    unit : str
        A unit as written.
    kind : Kind
        What it has to be a unit of.

    Returns
    -------
    Decimal
        One of this unit in SI base units, to 28 figures.

    Raises
    ------
    UnitProblem
        Where it is no unit of that kind.
    """
    if not unit:
        raise UnitProblem(": the unit is missing")
    expression = _expression(unit, kind)
    factor = _fit(expression, kind)
    if factor is None and kind.value.is_force:
        factor = _fit(re.sub(r"\blbs?\b", "lbf", expression), kind)
    if factor is not None:
        return factor
    raise UnitProblem(f", which is {_dimension_words(expression)}", _force_hint(unit, expression, kind))


def _fit(expression: str, kind: Kind) -> Decimal | None:
    factor, base = _pint_unit(expression)
    for si, multiplier in ((kind.value.si, Decimal(1)), *kind.value.also):
        if base == _pint_unit(_tokens(si))[1]:
            return factor * multiplier
    return None


def _force_hint(unit: str, expression: str, kind: Kind) -> str:
    """Ask whether a force was meant where a mass is given, and the other way round."""
    as_force = {"kg": "kgf", "kilogram": "kgf", "g": "kgf", "gram": "kgf", "t": "tf", "tonne": "tf"}
    as_mass = {"lbf": "lb", "kip": "lb", "kips": "lb", "plf": "lb/ft", "kgf": "kg", "tf": "t"}
    as_mass |= {"N": "kg", "kN": "t", "MN": "t"}
    meant = as_force if kind.value.is_force else as_mass
    pattern = rf"(?<![A-Za-z])({'|'.join(meant)})(?![A-Za-z])"
    swapped = re.sub(pattern, lambda match: meant[match[0]], expression)
    if swapped == expression or _fit(swapped, kind) is None:
        return ""
    return re.sub(pattern, lambda match: meant[match[0]], unit) + "?"


def _expression(unit: str, kind: Kind) -> str:
    """Write a unit as a product that pint reads, every word of it known."""
    spelt = re.sub(r"\bper\b", "/", tidy(unit)).replace("**", "^")
    spelt = re.sub(r"\bdeg ([CF])\b", r"deg\1", spelt)
    spelt = re.sub(r"(?<=[A-Za-z])\.(?=[\s/*)-]|$)", "", spelt)
    spelt = re.sub(r"(?<=[A-Za-z\d])\.(?=[A-Za-z])", "*", spelt)
    spelt = re.sub(r"(?<![A-Za-z])([kM]?N)(mm|cm|m)(?![A-Za-z])", r"\1*\2", spelt)
    spelt = spelt.strip()
    for word in re.findall("[A-Za-z]+", spelt):
        if word not in _known_units():
            near = _meant_unit(word, spelt, kind)
            raise UnitProblem(f': unknown unit "{word}"', f'did you mean "{near}"?' if near else "")
    return _tokens(spelt)


def _tokens(spelt: str) -> str:
    """Set the operators that a unit leaves out, and refuse what can be read in two ways."""
    out: list[str] = []
    divided = [False]
    place = 0
    while place < len(spelt):
        match = _UNIT_TOKEN.match(spelt, place)
        after_operator = bool(out) and out[-1] in "*/"
        if match is None or (after_operator and match[4] in ("*", "/", "-", ")")):
            raise UnitProblem(f': "{spelt}" cannot be read as a unit')
        place = match.end()
        word, sign, one = match[1], match[4], match[5]
        after_factor = bool(out) and out[-1] not in "*/("
        if sign in ("*", "-") or (after_factor and (word or one or sign == "(")):
            out.append("*")
            if divided[-1]:
                raise UnitProblem(f': "{spelt}" can be read in two ways', "put brackets around the divisor")
        if word:
            power = match[2] or match[3]
            out.append(f"{word}**{power}" if power else word)
        elif one or sign == "(" or sign == ")":
            out.append(one or sign)
        elif sign == "/":
            out += ["/"] if after_factor else ["1", "/"]
            divided[-1] = True
        if sign == "(":
            divided.append(False)
        elif sign == ")" and len(divided) > 1:
            divided.pop()
    return "".join(out)


def _meant_unit(word: str, spelt: str, kind: Kind) -> str | None:
    """Find the unit most like a word, one that makes the whole fit the kind before any other."""
    from difflib import get_close_matches

    known = sorted(_known_units())
    same_letters = [unit for unit in known if unit.lower() == word.lower()]
    alike = get_close_matches(word, known, n=8, cutoff=0.5)
    alike.sort(key=lambda unit: (abs(len(unit) - len(word)), unit[0] != word[0]))
    near = [_MEANT[word]] if word in _MEANT else []
    near += same_letters + alike
    for unit in near:
        try:
            resolve_unit(re.sub(rf"(?<![A-Za-z]){word}(?![A-Za-z])", unit, spelt), kind)
        except UnitProblem:
            continue
        return unit
    return near[0] if near else None


def _dimension_words(expression: str) -> str:
    base = _pint_unit(expression)[1]
    named = [(kind.value.si, kind.words) for kind in Kind] + list(_OTHER_DIMENSIONS.items())
    for si, words in named:
        if base == _pint_unit(_tokens(si))[1]:
            return words
    return f"in {base:~P}"


def _definitions() -> list[str]:
    return files("fishbelly.cli").joinpath("units.txt").read_text(encoding="utf-8").splitlines()


@lru_cache(maxsize=1)
def _known_units() -> frozenset[str]:
    """Every spelling in units.txt; pint alone would take plurals that nobody writes (``mms``)."""
    names: set[str] = set()
    for line in _definitions():
        fields = [field.strip() for field in line.partition("#")[0].split("=")]
        names.update(name for name in (fields[0], *fields[2:]) if re.fullmatch("[A-Za-z]+", name))
    return frozenset(names)


@contextmanager
def _scipy_unseen() -> Iterator[None]:
    """Let nothing that is imported meanwhile find scipy, unless it is loaded already.

    pint imports scipy to see whether it is there, for a search of preferred units that nothing here asks for;
    a table of deflections has to come without scipy. None in `sys.modules` is how Python marks a module that
    is not to be found. It goes again at once, so that who needs scipy later gets it. An import of scipy in
    another thread would fail meanwhile.
    """
    if "scipy" in sys.modules:
        yield
        return
    sys.modules["scipy"] = None  # type: ignore[assignment]
    try:
        yield
    finally:
        del sys.modules["scipy"]


@lru_cache(maxsize=1)
def _registry() -> pint.UnitRegistry[Any]:
    with _scipy_unseen():
        import pint

    return pint.UnitRegistry(_definitions(), non_int_type=Decimal)


@lru_cache(maxsize=1024)
def _pint_unit(expression: str) -> tuple[Decimal, Any]:
    """Give a unit's factor to base units, and those base units."""
    registry = _registry()
    try:
        factor, base = registry.get_base_units(registry.parse_units(expression))
    except Exception:  # pint and the tokenizer under it raise many kinds
        raise UnitProblem(f': "{expression.replace("**", "^")}" cannot be read as a unit') from None
    return Decimal(str(factor)), base
