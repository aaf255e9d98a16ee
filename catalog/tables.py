"""Read the catalogue's data files: plain csv, exact decimal units, each file read once.

A column header carries its unit in square brackets, ``depth [mm]``; the values are turned into SI
units in decimal arithmetic, so that ``5.6`` in a column of millimetres is the float ``0.0056``.
"""

import csv
import math
import re
from collections.abc import Callable, Iterable
from decimal import Decimal
from difflib import get_close_matches
from functools import cache
from pathlib import Path

DATA = Path(__file__).parent / "data"

_INCH = Decimal("0.0254")
_POUND = Decimal("0.45359237")
_PSI = _POUND * Decimal("9.80665") / _INCH**2

SI: dict[str, Decimal] = {
    "1": Decimal(1),
    "mm": Decimal("1e-3"),
    "in": _INCH,
    "mm2": Decimal("1e-6"),
    "cm2": Decimal("1e-4"),
    "cm4": Decimal("1e-8"),
    "in2": _INCH**2,
    "in4": _INCH**4,
    "MPa": Decimal("1e6"),
    "GPa": Decimal("1e9"),
    "kg/m3": Decimal(1),
    "kN/mm": Decimal("1e6"),
    "1e-6/K": Decimal("1e-6"),
    "psi": _PSI,
    "ksi": 1000 * _PSI,
    "lb/ft3": _POUND / (12 * _INCH) ** 3,
    "1e-6/degF": Decimal("1.8e-6"),
}
"""Factor from the unit of a column header to SI base units (m, Pa, N/m, kg, K)."""


@cache
def read_table(name: str) -> tuple[dict[str, str], ...]:
    """Read one data file, once.

    Parameters
    ----------
    name : str
        File name in the data folder, ``"sections_ipe.csv"``.

    Returns
    -------
    tuple of dict
        One dictionary a row, header to text, in the order of the file. Not to be changed.
    """
    with (DATA / name).open(encoding="utf-8", newline="") as file:
        return tuple(csv.DictReader(file))


def data_files(prefix: str) -> tuple[str, ...]:
    """Names of the data files that begin with `prefix`, sorted."""
    return tuple(sorted(path.name for path in DATA.glob(prefix + "*.csv")))


def split_header(header: str) -> tuple[str, str]:
    """Split a column header into its name and its unit.

    Parameters
    ----------
    header : str
        ``"depth [mm]"``, or ``"source"`` for a column of text.

    Returns
    -------
    name, unit : str
        The unit is empty for a column of text.

    Examples
    --------
    >>> split_header("depth [mm]")
    ('depth', 'mm')
    >>> split_header("source")
    ('source', '')
    """
    name, bracket, rest = header.partition(" [")
    return (name, rest.rstrip("]")) if bracket else (header, "")


def in_si(text: str, unit: str) -> float:
    """Value of a cell in SI units, exact to the last bit of the decimal product.

    Parameters
    ----------
    text : str
        A decimal number.
    unit : str
        A unit of `SI`.

    Returns
    -------
    float
        In m, Pa, kg and K.

    Examples
    --------
    >>> in_si("5.6", "mm"), in_si("0.375", "in")
    (0.0056, 0.009525)
    """
    return float(Decimal(text) * SI[unit])


def numbers(row: dict[str, str]) -> dict[str, float]:
    """All filled-in cells of a row that have a unit, by name, in SI units."""
    found = {}
    for header, text in row.items():
        name, unit = split_header(header)
        if unit and text:
            found[name] = in_si(text, unit)
    return found


_NUMBER = re.compile(r"\d+(?:\.\d+)?")
_FAR = 0.3
"""Names whose numbers differ by more than this, as sum of logarithms of ratios, are not near."""


def folded(name: str) -> str:
    """Spelling under which a name is looked up: no spaces, any case."""
    return "".join(name.split()).casefold()


class UnknownName(LookupError):
    """No entry of that name is in the catalogue; the base of one error for each kind of entry.

    Attributes
    ----------
    what : str
        Kind of entry, in the message.
    name : str
        What was asked for.
    nearest : list of str
        Names that look most like it, the best first; may be empty.
    """

    what = "entry"

    def __init__(self, name: str, nearest: list[str]) -> None:
        self.name = name
        self.nearest = nearest
        hint = f"; nearest: {', '.join(nearest)}" if nearest else ""
        super().__init__(f'no {self.what} "{name}" in the catalogue{hint}')


def nearest_names(name: str, known: tuple[str, ...], count: int = 4, fold: Callable[[str], str] = folded) -> list[str]:
    """Names of the catalogue that look most like `name`, the best first.

    Names that go on where `name` ends come first, then those with the same letters and the nearest numbers
    (``IPE 300`` and ``IPE 330`` for ``IPE 310``); only where there are neither, names spelt alike.

    Parameters
    ----------
    name : str
        What was asked for.
    known : tuple of str
        What there is.
    count : int
        How many at most.
    fold : callable
        Gives the spelling under which names are compared.
    """
    by_spelling: dict[str, str] = {}
    for entry in known:
        by_spelling.setdefault(fold(entry), entry)
    wanted = fold(name)
    near = [entry for entry in by_spelling if wanted and entry.startswith(wanted)]
    near += _by_numbers(wanted, by_spelling)
    if not near:
        near = get_close_matches(wanted, list(by_spelling), n=count, cutoff=0.5)
    return [by_spelling[entry] for entry in dict.fromkeys(near)][:count]


def _by_numbers(wanted: str, spellings: Iterable[str]) -> list[str]:
    """Spellings with the same letters in front and as many numbers, by how far these differ."""
    numbers_wanted = _positive(wanted)
    if not numbers_wanted:
        return []
    letters = _NUMBER.split(wanted)[0]
    found = []
    for spelling in spellings:
        have = _positive(spelling)
        if len(have) == len(numbers_wanted) and _NUMBER.split(spelling)[0] == letters:
            pairs = zip(numbers_wanted, have, strict=True)
            distance = sum(abs(math.log(a / b)) for a, b in pairs)
            if distance <= _FAR:
                found.append((distance, spelling))
    return [spelling for _, spelling in sorted(found, key=lambda pair: pair[0])]


def _positive(spelling: str) -> list[float]:
    values = [float(text) for text in _NUMBER.findall(spelling)]
    return values if all(value > 0.0 for value in values) else []
