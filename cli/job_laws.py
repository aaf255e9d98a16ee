"""Dimensions along x as a job writes them: constant, stations, steps, parabola, columns of a file."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path as FilePath
from typing import Annotated, Any

import numpy as np

from fishbelly.cli.faults import as_written
from fishbelly.cli.job_types import Ill, Path, Reader, ValueFault, gather, ill, quantity
from fishbelly.cli.quantities import Kind, Sign
from fishbelly.cli.survey_file import read_columns
from fishbelly.member.laws import Law, constant, parabola, steps, straight

_FORMS = "[[x, value], …], { steps = … }, { law = …, stations = … } or { file = …, x = …, value = … }"


@dataclass(frozen=True)
class Steps:
    """A law of steps whose last place has still to be held against the end of the part."""

    law: Law
    last: float
    written: str


@dataclass(frozen=True)
class Columns:
    """Two columns of a file beside the job."""

    file: str
    x: str
    value: str
    kind: Kind
    sign: Sign


WrittenLaw = Law | Steps | Columns


class LawOf(Reader):
    """A quantity that is constant or changes along x.

    Parameters
    ----------
    kind : Kind
        What its values are.
    constant_sign, station_sign : str
        Which signs will do for a constant, and for a value at a station.
    """

    def __init__(self, kind: Kind, constant_sign: Sign = "any", station_sign: Sign = "any") -> None:
        self.kind, self.constant_sign, self.station_sign = kind, constant_sign, station_sign
        self.words = f'{kind.words} such as "{kind.example}", or a law along x'
        self.schema = {
            "description": f"{kind.words}, constant or a law along x",
            "anyOf": [
                {"type": "string", "examples": [kind.example]},
                _pairs_schema(),
                _table_schema(steps=_pairs_schema()),
                _table_schema(law={"enum": ["straight", "parabola"]}, stations=_pairs_schema(), flat_at={}),
                _table_schema(file={"type": "string"}, x={"type": "string"}, value={"type": "string"}),
            ],
        }

    def read(self, value: Any) -> WrittenLaw:
        """Read the law as far as it can be without the part and the folder it belongs to."""
        if isinstance(value, list):
            return straight(*self._stations(value, ()))
        if isinstance(value, dict):
            return self._table(value)
        return constant(quantity(value, self.kind, self.constant_sign))

    def _table(self, value: dict[str, Any]) -> WrittenLaw:
        if "steps" in value:
            _only(value, "steps")
            xs, values = self._stations(value["steps"], ("steps",), increasing=True)
            return Steps(steps(xs, values), xs[-1], as_written(value["steps"][-1][0]))
        if "file" in value:
            return self._columns(value)
        if "law" in value or "stations" in value:
            return self._named(value)
        raise ill(f"{self.kind.words} or a law along x: {_FORMS}", value)

    def _columns(self, value: dict[str, Any]) -> Columns:
        _only(value, "file", "x", "value")
        bad = [k for k in ("file", "x", "value") if not isinstance(value.get(k), str) or not value[k].strip()]
        if bad:
            words = {
                "file": "the name of a file beside the job",
                "x": "a column's name",
                "value": "a column's name",
            }
            raise ValueFault(*(Ill((k,), words[k], as_written(value[k]) if k in value else "") for k in bad))
        return Columns(value["file"], value["x"], value["value"], self.kind, self.station_sign)

    def _named(self, value: dict[str, Any]) -> Law:
        _only(value, "law", "stations", "flat_at")
        law = value.get("law", "straight")
        if law not in ("straight", "parabola"):
            raise ill('"straight" or "parabola"', law, path=("law",))
        if "stations" not in value:
            raise ValueFault(Ill(("stations",), "stations [[x, value], …]", ""))
        xs, values = self._stations(value["stations"], ("stations",))
        if law == "straight":
            if "flat_at" in value:
                raise ValueFault(Ill(("flat_at",), "", "flat_at belongs to a parabola"))
            return straight(xs, values)
        return parabola(xs, values, _flat_at(value, xs, values))

    def _stations(self, value: Any, path: Path, increasing: bool = False) -> tuple[list[float], list[float]]:
        """Read [[x, value], …]; raises `ValueFault` with every fault of it."""
        try:
            return read_stations(value, self.kind, self.station_sign, increasing=increasing)
        except ValueFault as fault:
            raise ValueFault(*(i.below(*path) for i in fault.ills)) from None


def _flat_at(value: dict[str, Any], xs: list[float], values: list[float]) -> list[float]:
    if xs[-1] == xs[0]:
        raise ill("stations at more than one x", value["stations"], path=("stations",))
    given = value.get("flat_at", [])
    given = given if isinstance(given, list) else [given]
    try:
        flats = gather(given, lambda item: quantity(item, Kind.LENGTH))
    except ValueFault as fault:
        raise ValueFault(*(i.below("flat_at") for i in fault.ills)) from None
    reach = 1e-9 * max(abs(xs[0]), abs(xs[-1]))
    for flat, written in zip(flats, given, strict=True):
        if min(abs(flat - x) for x in xs) > reach:
            raise ill("the x of one of its stations", written, path=("flat_at",))
    try:
        parabola(xs, values, flats)
    except ValueError as error:
        raise ValueFault(Ill(("flat_at",), "", str(error))) from None
    return flats


def read_stations(
    value: Any, kind: Kind, sign: Sign = "any", *, increasing: bool = False, at_least: int | None = None
) -> tuple[list[float], list[float]]:
    """Read ``[[x, value], …]``.

    Parameters
    ----------
    value : object
        What the job has.
    kind : Kind
        What the values are.
    sign : str
        Which signs will do for the values.
    increasing : bool
        Whether each x must lie beyond the one before; else the same x may stand twice, a step.
    at_least : int, optional
        How many stations there must be; default two, one where they must increase.

    Returns
    -------
    x, values : list of float
        In SI base units.

    Raises
    ------
    ValueFault
        With every fault found.
    """
    needed = at_least or (1 if increasing else 2)
    if not isinstance(value, list) or len(value) < needed:
        words = "at least one place" if needed == 1 else f"at least {needed} stations"
        raise ill(f"{words} [[x, value], …]", value)

    def pair(item: Any) -> tuple[float, float]:
        if not isinstance(item, list) or len(item) != 2:
            raise ill("a pair [x, value]", item)
        return quantity(item[0], Kind.LENGTH), quantity(item[1], kind, sign)

    pairs = gather(value, pair)
    ills = _out_of_order([p[0] for p in pairs], value, increasing)
    if ills:
        raise ValueFault(*ills)
    return [p[0] for p in pairs], [p[1] for p in pairs]


def _out_of_order(xs: list[float], value: list[Any], increasing: bool) -> list[Ill]:
    ills = []
    for k in range(1, len(xs)):
        x, before = xs[k], xs[k - 1]
        if x < before or (increasing and x == before):
            words = "an x beyond" if increasing else "an x not before"
            ills.append(
                Ill(
                    (k,),
                    f"{words} the one listed before, {as_written(value[k - 1][0])}",
                    as_written(value[k][0]),
                )
            )
        elif k > 1 and x == before == xs[k - 2]:
            ills.append(Ill((k,), "at most two values at one x", as_written(value[k][0])))
    return ills


def finish(written: WrittenLaw, folder: FilePath, end: float | None, length: float | None = None) -> Law:
    """Give the law itself, once the part's end and the job's folder are known.

    Parameters
    ----------
    written : Law, Steps or Columns
        As read.
    folder : Path
        Where the job lies.
    end : float or None
        Where the part ends [m]; None where it is not known.
    length : float or None
        Length of the member [m], for stations of a file.

    Raises
    ------
    ValueFault
        When steps do not reach the end, or the file cannot be read.
    """
    if isinstance(written, Steps):
        if end is not None and written.last < end - 1e-9 * abs(end):
            raise ValueFault(
                Ill(
                    ("steps",),
                    f"steps up to the end of the part at {end:.6g} m",
                    f"a last x of {written.written}",
                )
            )
        return written.law
    if isinstance(written, Columns):
        where = folder / written.file
        xs, values = read_columns(where, written.x, written.value, written.kind, written.sign, length)
        return straight(xs, values)
    return written


def minus(a: Law, b: Law, factor: float = 1.0) -> Law:
    """Return the law (a − b) · factor, exactly."""
    knots = np.union1d(a.knots, b.knots)
    origins = np.concatenate((knots[:1] if knots.size else [0.0], knots))
    inside = (
        np.concatenate((knots[:1] - 1.0, 0.5 * (knots[1:] + knots[:-1]), knots[-1:] + 1.0)) if knots.size else origins
    )
    total = np.zeros((origins.size, 3))
    for law, sign in ((a, factor), (b, -factor)):
        piece = np.searchsorted(law.knots, inside)
        c, t = law.coefficients[piece], origins - law.origins[piece]
        total[:, 0] += sign * (c[:, 0] + t * (c[:, 1] + t * c[:, 2]))
        total[:, 1] += sign * (c[:, 1] + 2.0 * t * c[:, 2])
        total[:, 2] += sign * c[:, 2]
    return Law(knots, origins, total)


def _only(value: dict[str, Any], *known: str) -> None:
    unknown = [key for key in value if key not in known]
    if unknown:
        raise ValueFault(*(Ill((key,), "", f'unknown key "{key}" in a law with {known[0]}') for key in unknown))


def _pairs_schema() -> dict[str, Any]:
    pair = {"type": "array", "items": {"type": "string"}, "minItems": 2, "maxItems": 2}
    return {"type": "array", "items": pair, "minItems": 1}


def _table_schema(**properties: Any) -> dict[str, Any]:
    required = [key for key in properties if key not in ("law", "flat_at")]
    return {"type": "object", "properties": properties, "required": required, "additionalProperties": False}


_SIZE = LawOf(Kind.LENGTH, "above zero", "zero or more")
_RADIUS = LawOf(Kind.LENGTH, "zero or more", "zero or more")
_PLACE = LawOf(Kind.LENGTH)

Size = Annotated[WrittenLaw, _SIZE]
MaybeSize = Annotated[WrittenLaw | None, _SIZE]
MaybeRadius = Annotated[WrittenLaw | None, _RADIUS]
MaybeLaw = Annotated[WrittenLaw | None, _PLACE]


class LawPair(Reader):
    """Two laws, ``[y, z]``."""

    words = "a pair [y, z] of lengths"
    schema = {"type": "array", "items": _PLACE.schema, "minItems": 2, "maxItems": 2}

    def read(self, value: Any) -> tuple[WrittenLaw, WrittenLaw]:
        """Read both."""
        if not isinstance(value, list) or len(value) != 2:
            raise ill(self.words, value)
        y, z = gather(value, _PLACE.read)
        return y, z


MaybePair = Annotated[tuple[WrittenLaw, WrittenLaw] | None, LawPair()]
