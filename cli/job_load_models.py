"""The tables of loads, as pydantic models, one for each kind."""

from typing import Annotated, Any

from pydantic import Field

from fishbelly.cli.job_laws import LawOf, read_stations
from fishbelly.cli.job_models import Level, MaybeCreep, Table
from fishbelly.cli.job_types import (
    Factor,
    Length,
    MaybeLength,
    MaybeNames,
    MaybePositiveLength,
    Name,
    Quantity,
    Reader,
    TableOf,
    ValueFault,
    Word,
    Yes,
    of_quantity,
)
from fishbelly.cli.quantities import Kind, QuantityError, parse_quantity

DIRECTIONS = ("down", "up", "across")

Direction = Annotated[str, Word(*DIRECTIONS)]
Per = Annotated[str | None, Word("plan", "slope")]
MaybeStrain = Annotated[float | None, Factor("a strain, a bare number")]
Rise = Annotated[float | None, Quantity(Kind.TEMPERATURE)]


class LoadTable(Table):
    """What every load has."""

    kind: Name
    case: Name = "load"


class SelfWeightTable(LoadTable):
    """Self weight."""

    factor: Annotated[float, Factor("a factor")] = 1.0
    parts: MaybeNames = None


class LineLoad(Reader):
    """A force per length, or a force per area; read as a value and its kind."""

    words = 'a force per length such as "4.2 kN/m", or a force per area with `spacing`'
    schema = {"type": "string", "examples": ["4.2 kN/m", "2.5 kN/m2"]}

    def read(self, value: Any) -> tuple[float, Kind]:
        """Read the value."""
        try:
            return parse_quantity(value, Kind.FORCE_PER_LENGTH), Kind.FORCE_PER_LENGTH
        except QuantityError as error:
            try:
                return parse_quantity(value, Kind.FORCE_PER_AREA), Kind.FORCE_PER_AREA
            except QuantityError:
                raise of_quantity(error) from None


class LoadStations(Reader):
    """Stations [[x, value], …] of a line load; read as x, values and their kind."""

    words = "at least two stations [[x, value], …]"
    schema = LawOf(Kind.FORCE_PER_LENGTH).schema["anyOf"][1]

    def read(self, value: Any) -> tuple[list[float], list[float], Kind]:
        """Read the stations; the first value tells the kind."""
        kind = Kind.FORCE_PER_LENGTH
        if isinstance(value, list) and value and isinstance(value[0], list) and len(value[0]) == 2:
            try:
                kind = LineLoad().read(value[0][1])[1]
            except ValueFault:
                kind = Kind.FORCE_PER_LENGTH
        xs, values = read_stations(value, kind)
        return xs, values, kind


class UniformTable(LoadTable):
    """A uniform load."""

    value: Annotated[tuple[float, Kind], LineLoad()]
    spacing: MaybePositiveLength = None
    from_: MaybeLength = Field(None, alias="from")
    to: MaybeLength = None
    direction: Direction = "down"
    per: Per = None
    pattern: Yes = False


class VaryingTable(LoadTable):
    """A load that varies along x."""

    stations: Annotated[tuple[list[float], list[float], Kind], LoadStations()]
    spacing: MaybePositiveLength = None
    direction: Direction = "down"
    per: Per = None
    pattern: Yes = False


class PointTable(LoadTable):
    """A point load."""

    value: Annotated[float, Quantity(Kind.FORCE)]
    at: Length
    direction: Direction = "down"
    per: Per = None
    pattern: Yes = False


class CoupleTable(LoadTable):
    """A couple."""

    value: Annotated[float, Quantity(Kind.MOMENT)]
    at: Length


class AxialTable(LoadTable):
    """A force along the member."""

    value: Annotated[float, Quantity(Kind.FORCE)]
    at: Length
    level: Level = "centroid"


class TemperatureTable(LoadTable):
    """A temperature rise."""

    top: Rise = None
    bottom: Rise = None
    parts: Annotated[
        dict[str, float] | None, TableOf(Quantity(Kind.TEMPERATURE), 'a table such as { beam = "20 K" }')
    ] = None
    from_: MaybeLength = Field(None, alias="from")
    to: MaybeLength = None


class ShrinkageTable(LoadTable):
    """Shrinkage of a part."""

    part: Name
    strain: Annotated[float, Factor("a strain, a bare number")]
    creep: MaybeCreep = None
    from_: MaybeLength = Field(None, alias="from")
    to: MaybeLength = None


class PrestressTable(LoadTable):
    """Prestress of a part."""

    part: Name
    force: Annotated[float | None, Quantity(Kind.FORCE)] = None
    strain: MaybeStrain = None


LOADS: dict[str, type[LoadTable]] = {
    "self weight": SelfWeightTable,
    "uniform": UniformTable,
    "varying": VaryingTable,
    "point": PointTable,
    "couple": CoupleTable,
    "axial": AxialTable,
    "temperature": TemperatureTable,
    "shrinkage": ShrinkageTable,
    "prestress": PrestressTable,
}
