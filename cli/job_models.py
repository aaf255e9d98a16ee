"""The tables of a job and their keys, as pydantic models.

One model a kind of table. A table is read with the model that its `kind` or `shape` asks for, so that a fault
speaks of the keys of that kind only. Models are built when first used.
"""

from functools import cache
from typing import Annotated, Any

from pydantic import BaseModel, ConfigDict, Field, create_model

from fishbelly.cli.job_laws import (
    LawOf,
    MaybeLaw,
    MaybePair,
    MaybeRadius,
    MaybeSize,
    Size,
    read_stations,
)
from fishbelly.cli.job_types import (
    Count,
    Factor,
    Length,
    Many,
    MaybeLength,
    MaybeName,
    MaybeNames,
    MaybePositiveLength,
    Name,
    PositiveLength,
    Quantity,
    Reader,
    TableOf,
    Text,
    ValueFault,
    Word,
    WordOr,
    Yes,
    ill,
    of_quantity,
)
from fishbelly.cli.quantities import Kind, QuantityError, parse_quantity

NOT_BUILT: dict[str, frozenset[str]] = {
    "": frozenset({"tension_stiffening", "cracks", "inclined", "stage", "travel", "mass"}),
    "material": frozenset({"no_tension"}),
    "part": frozenset({"stage", "until", "joined"}),
    "support": frozenset({"stage", "until", "slip"}),
    "hinge": frozenset({"stage", "until"}),
    "limit": frozenset({"after", "stage"}),
}
"""Keys of the contract, by table, that this version refuses by name."""

SIDES = ("bottom", "top", "left", "right")
DIRECTIONS = ("down", "up", "across")
CORNERS = tuple(f"{level} {side}" for level in ("top", "bottom") for side in ("left", "right"))
ANCHORS = ("middle", "top", "bottom", "left", "right", *CORNERS)
RELATIONS = ("under", "over", "left_of", "right_of", "centred_on")

Direction = Annotated[str, Word(*DIRECTIONS)]
Per = Annotated[str | None, Word("plan", "slope")]
Level = Annotated[str | float, WordOr(Quantity(Kind.LENGTH), "centroid", "top", "bottom", "datum")]
MaybeStiffness = Annotated[float | None, Quantity(Kind.STIFFNESS, "zero or more")]
MaybeRotational = Annotated[float | None, Quantity(Kind.ROTATIONAL_STIFFNESS, "zero or more")]
Held = Annotated[str | float | None, WordOr(Quantity(Kind.STIFFNESS, "zero or more"), "held", "free")]
MaybeModulus = Annotated[float | None, Quantity(Kind.MODULUS, "above zero")]
MaybeStress = Annotated[float | None, Quantity(Kind.STRESS, "above zero")]
MaybeStrain = Annotated[float | None, Factor("a strain, a bare number")]
MaybeCreep = Annotated[float | None, Factor("a creep factor", at_least=0.0)]
Rise = Annotated[float | None, Quantity(Kind.TEMPERATURE)]


class Table(BaseModel):
    """A table of a job: unknown keys are faults."""

    model_config = ConfigDict(extra="forbid", defer_build=True, frozen=True)


class Camber(Reader):
    """One height, or ordinates [[x, value], …]."""

    words = "a length, or ordinates [[x, value], …]"
    schema = {"anyOf": [{"type": "string"}, LawOf(Kind.LENGTH).schema["anyOf"][1]]}

    def read(self, value: Any) -> Any:
        """Read a float or a pair of lists."""
        return (
            read_stations(value, Kind.LENGTH)
            if isinstance(value, list)
            else Quantity(Kind.LENGTH).read(value)
        )


class JobTable(Table):
    """The top level, without its tables."""

    title: Annotated[str, Text(may_be_empty=True)] = ""
    note: Annotated[str, Text(may_be_empty=True)] = ""
    length: PositiveLength
    units: Annotated[str, Word("metric", "us")] = "metric"
    datum: Annotated[str | None, Word("top", "middle", "bottom")] = None
    rises: Annotated[float, Quantity(Kind.ANGLE)] = 0.0
    shear: Yes = True
    camber: Annotated[Any, Camber()] = None


class StrengthReader(Reader):
    """One allowable stress, or ``{ tension, compression, shear }``."""

    words = "an allowable stress, or { tension = …, compression = …, shear = … }"
    schema = {
        "anyOf": [
            {"type": "string"},
            {
                "type": "object",
                "properties": {k: {"type": "string"} for k in ("tension", "compression", "shear")},
                "additionalProperties": False,
            },
        ]
    }

    def read(self, value: Any) -> dict[str, float]:
        """Read stresses by name; one alone is for tension and compression."""
        stress = Quantity(Kind.STRESS, "above zero")
        if not isinstance(value, dict):
            both = stress.read(value)
            return {"tension": both, "compression": both}
        known = ("tension", "compression", "shear")
        unknown = [key for key in value if key not in known]
        if unknown or not value:
            raise ill(self.words, value)
        result: dict[str, float] = TableOf(stress, self.words).read(value)
        return result


class MaterialTable(Table):
    """``[material.NAME]``."""

    like: MaybeName = None
    E: MaybeModulus = None
    G: MaybeModulus = None
    poisson: Annotated[float | None, Factor("Poisson's ratio", above=-1.0, at_most=0.5)] = None
    density: Annotated[float | None, Quantity(Kind.DENSITY, "zero or more")] = None
    expansion: Annotated[float | None, Quantity(Kind.EXPANSION)] = None
    creep: MaybeCreep = None
    band: Annotated[
        tuple[float, ...] | None,
        Many(Quantity(Kind.MODULUS, "above zero"), "a pair [low, high] of moduli", count=2),
    ] = None
    strength: Annotated[dict[str, float] | None, StrengthReader()] = None
    yield_: MaybeStress = Field(None, alias="yield")
    cracking: MaybeStress = None


class PartTable(Table):
    """``[[part]]``, without `size` or `shape` and dimensions."""

    name: Name
    material: MaybeName = None
    from_: MaybeLength = Field(None, alias="from")
    to: MaybeLength = None
    run_in: Annotated[
        tuple[float, ...] | None,
        Many(Quantity(Kind.LENGTH, "zero or more"), "a length, or a pair [start, end]", one=True),
    ] = None
    cut: Yes = False
    of: MaybeNames = None
    pair: Yes = False
    turn: Annotated[float, Quantity(Kind.ANGLE)] = 0.0
    mirror: Yes = False
    under: MaybeName = None
    over: MaybeName = None
    left_of: MaybeName = None
    right_of: MaybeName = None
    centred_on: MaybeName = None
    position: MaybePair = None
    anchor: Annotated[str | None, Word(*ANCHORS)] = None
    flush: Annotated[str | None, Word("top", "middle", "bottom", "left", "right")] = None
    gap: MaybeLaw = None
    shift: MaybePair = None


class Points(Reader):
    """Corner points [[y, z], …]."""

    words = "at least three points [[y, z], …]"
    schema = LawOf(Kind.LENGTH).schema["anyOf"][1]

    def read(self, value: Any) -> tuple[tuple[float, float], ...]:
        """Read the points."""
        if not isinstance(value, list) or len(value) < 3:
            raise ill(self.words, value)
        pairs = Many(Many(Quantity(Kind.LENGTH), "a pair [y, z]", count=2), self.words).read(value)
        return tuple((y, z) for y, z in pairs)


_OUTLINES: dict[str, dict[str, Any]] = {
    "rectangle": {"width": Size, "depth": Size},
    "circle": {"diameter": Size},
    "tube": {"diameter": Size, "wall": Size},
    "box": {"width": Size, "depth": Size}
    | dict.fromkeys(("wall", "web", "flange"), MaybeSize)
    | dict.fromkeys(("radius", "inner_radius"), MaybeRadius),
    "I": {"depth": Size, "web": Size}
    | dict.fromkeys(
        ("width", "flange", "top_width", "top_flange", "bottom_width", "bottom_flange"), MaybeSize
    )
    | {"radius": MaybeRadius},
    "tee": {"depth": Size, "width": Size, "web": Size, "flange": Size, "radius": MaybeRadius},
    "channel": {"depth": Size, "width": Size, "web": Size, "flange": Size}
    | {"radius": MaybeRadius, "toe_radius": MaybeRadius}
    | {"slope": Annotated[float | None, Factor("a slope, a ratio", at_least=0.0, below=1.0)]},
    "angle": {"depth": Size, "width": Size}
    | dict.fromkeys(("thickness", "web", "flange"), MaybeSize)
    | {"radius": MaybeRadius, "toe_radius": MaybeRadius},
    "trapezoid": {"top_width": MaybeRadius, "bottom_width": MaybeRadius, "depth": Size},
    "regular polygon": {"sides": Annotated[int, Count(3)], "across_flats": Size, "wall": MaybeSize},
    "polygon": {
        "points": Annotated[Any, Points()],
        "holes": Annotated[Any, Many(Points(), "a list of holes, each [[y, z], …]")],
    },
    "bars": {"count": Annotated[int, Count(1)], "diameter": Size, "spacing": MaybeSize, "width": MaybeSize},
}
_REQUIRED = {"polygon": {"points"}, "trapezoid": {"top_width", "bottom_width", "depth"}}
SHAPES = tuple(_OUTLINES)
DIMENSIONS = frozenset(key for keys in _OUTLINES.values() for key in keys)


@cache
def part_model(shape: str | None) -> type[PartTable]:
    """Return the model of a part of one shape; None: of a part with `size`."""
    fields: dict[str, Any] = {}
    if shape is None:
        fields["size"] = (Annotated[str, Text("a designation")], ...)
        return create_model("SizedPart", __base__=PartTable, **fields)
    fields["shape"] = (Annotated[str, Word(shape)], ...)
    required = _REQUIRED.get(shape)
    for key, kind in _OUTLINES[shape].items():
        must = key in required if required is not None else kind in (Size,) or "int" in str(kind)
        fields[key] = (kind, ... if must else None)
    return create_model(f"{shape.title().replace(' ', '')}Part", __base__=PartTable, **fields)


class NotchTable(Table):
    """``[[notch]]``."""

    of: Name
    side: Annotated[str, Word(*SIDES)] = "bottom"
    depth: Size
    from_: Length = Field(alias="from")
    to: Length
    reach: Annotated[float, Quantity(Kind.LENGTH, "zero or more")] = 0.0


class HaunchTable(Table):
    """``[[haunch]]``."""

    of: Name
    at: Length
    depth: PositiveLength
    reach: Annotated[
        tuple[float, ...],
        Many(Quantity(Kind.LENGTH, "zero or more"), "a length, or a pair [left, right]", one=True),
    ]
    law: Annotated[str, Word("straight", "parabola")] = "straight"
    side: Annotated[str, Word("bottom", "top")] = "bottom"


class OpeningTable(Table):
    """``[[opening]]``."""

    at: Length
    diameter: MaybePositiveLength = None
    length: MaybePositiveLength = None
    depth: MaybePositiveLength = None
    radius: Annotated[float | None, Quantity(Kind.LENGTH, "zero or more")] = None
    level: Annotated[str | float, WordOr(Quantity(Kind.LENGTH), "middle")] = "middle"
    of: MaybeNames = None
    spacing: MaybePositiveLength = None
    count: Annotated[int | None, Count(1)] = None


class SupportTable(Table):
    """``[[support]]``."""

    at: Length
    name: MaybeName = None
    kind: Annotated[str | None, Word("pin", "roller", "fixed", "spring")] = None
    holds: Annotated[
        tuple[str, ...] | None,
        Many(Word("down", "rotation", "along", "across"), 'a list such as ["down", "rotation"]'),
    ] = None
    vertical: MaybeStiffness = None
    rotation: MaybeRotational = None
    along: Held = None
    across: Held = None
    level: Level = "centroid"
    sinks: MaybeLength = None
    case: Name = "settlement"
    only: Annotated[str | None, Word("up")] = None


class HingeTable(Table):
    """``[[hinge]]``."""

    at: Length
    name: MaybeName = None


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


class StationTable(Table):
    """``[[station]]``."""

    name: Name
    at: Length


class CombinationTable(Table):
    """``[[combination]]``."""

    name: Name
    factors: Annotated[dict[str, float], TableOf(Factor("a factor"), "a table such as { live = 1.5 }")]
    sustained: Annotated[
        dict[str, float],
        TableOf(Factor("a share", at_least=0.0, at_most=1.0), "a table such as { live = 0.3 }"),
    ] = {}
    for_: Annotated[str, Word("deflection", "strength")] = Field("deflection", alias="for")


class Span(Reader):
    """A span's number, or an overhang."""

    words = 'a span\'s number, "left" or "right"'
    schema = {"anyOf": [{"type": "integer", "minimum": 1}, {"enum": ["left", "right"]}]}

    def read(self, value: Any) -> int | str:
        """Read it."""
        if value in ("left", "right") or (isinstance(value, int) and value is not True and value > 0):
            result: int | str = value
            return result
        raise ill(self.words, value)


class LimitTable(Table):
    """``[[limit]]``."""

    name: Name
    span_over: Annotated[float | None, Factor("a number", above=0.0)] = None
    absolute: MaybePositiveLength = None
    slope: Annotated[float | None, Quantity(Kind.ANGLE, "above zero")] = None
    at: MaybeName = None
    of: Annotated[str, Word("down", "up", "across", "resultant")] = "down"
    net: Yes = False
    combination: MaybeName = None
    from_: MaybeLength = Field(None, alias="from")
    to: MaybeLength = None
    span: Annotated[tuple[int | str, ...] | None, Many(Span(), Span.words, one=True)] = None
    cantilever_over: Annotated[float | None, Factor("a number", above=0.0)] = None


SINGLE: dict[str, type[Table]] = {
    "notch": NotchTable,
    "haunch": HaunchTable,
    "opening": OpeningTable,
    "support": SupportTable,
    "hinge": HingeTable,
    "station": StationTable,
    "combination": CombinationTable,
    "limit": LimitTable,
}
"""Models of the tables that have one form only."""

TABLES = ("part", *SINGLE, "load")
"""Names of the lists of tables, ``[[name]]``, built so far."""
