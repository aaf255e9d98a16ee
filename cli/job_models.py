"""The tables of a job and their keys, as pydantic models.

One model a kind of table. A table is read with the model that its `kind` or `shape` asks for, so that a fault
speaks of the keys of that kind only. Models are built when first used.
"""

from typing import Annotated, Any

from pydantic import BaseModel, ConfigDict, Field

from fishbelly.cli.job_creep import CreepReader
from fishbelly.cli.job_laws import (
    LawOf,
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
    Word,
    WordOr,
    Yes,
    ill,
)
from fishbelly.cli.quantities import Kind
from fishbelly.sections.effective_inertia import RULES

NOT_BUILT: dict[str, frozenset[str]] = {
    "": frozenset({"travel", "mass"}),
}
"""Keys of the contract, by table, that this version refuses by name."""

SIDES = ("bottom", "top", "left", "right")

Level = Annotated[str | float, WordOr(Quantity(Kind.LENGTH), "centroid", "top", "bottom", "datum")]
MaybeStiffness = Annotated[float | None, Quantity(Kind.STIFFNESS, "zero or more")]
MaybeRotational = Annotated[float | None, Quantity(Kind.ROTATIONAL_STIFFNESS, "zero or more")]
Held = Annotated[str | float | None, WordOr(Quantity(Kind.STIFFNESS, "zero or more"), "held", "free")]
MaybeModulus = Annotated[float | None, Quantity(Kind.MODULUS, "above zero")]
MaybeStress = Annotated[float | None, Quantity(Kind.STRESS, "above zero")]
MaybeCreep = Annotated[float | None, Factor("a creep factor", at_least=0.0)]


class Table(BaseModel):
    """A table of a job: unknown keys are faults."""

    model_config = ConfigDict(extra="forbid", defer_build=True, frozen=True)


class Camber(Reader):
    """One height, or ordinates [[x, value], …]."""

    words = "a length, or ordinates [[x, value], …]"
    schema = {"anyOf": [{"type": "string"}, LawOf(Kind.LENGTH).schema["anyOf"][1]]}

    def read(self, value: Any) -> Any:
        """Read a float or a pair of lists."""
        return read_stations(value, Kind.LENGTH) if isinstance(value, list) else Quantity(Kind.LENGTH).read(value)


class JobTable(Table):
    """The top level, without its tables."""

    title: Annotated[str, Text(may_be_empty=True)] = ""
    note: Annotated[str, Text(may_be_empty=True)] = ""
    length: PositiveLength
    units: Annotated[str, Word("metric", "us")] = "metric"
    datum: Annotated[str | None, Word("top", "middle", "bottom")] = None
    rises: Annotated[float, Quantity(Kind.ANGLE)] = 0.0
    shear: Yes = True
    inclined: Annotated[str, Word("along", "cut")] = "along"
    tension_stiffening: Annotated[str | None, Word(*RULES)] = None
    cracks: Annotated[str, Word("history", "by combination")] = "history"
    camber: Annotated[Any, Camber()] = None


class CatalogTable(Table):
    """``[catalog]``: files with sections and materials of one's own, beside the job."""

    files: Annotated[
        tuple[str, ...], Many(Text("the name of a file"), 'a list of files such as ["sections.csv"]', one=True)
    ]


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
    creep: Annotated[float | None, CreepReader()] = None
    band: Annotated[
        tuple[float, ...] | None,
        Many(Quantity(Kind.MODULUS, "above zero"), "a pair [low, high] of moduli", count=2),
    ] = None
    strength: Annotated[dict[str, float] | None, StrengthReader()] = None
    yield_: MaybeStress = Field(None, alias="yield")
    cracking: MaybeStress = None
    no_tension: Yes = False


class Reach(Quantity):
    """A length; the name of a rule is refused, as the catalogue has no published one."""

    def __init__(self) -> None:
        super().__init__(Kind.LENGTH, "zero or more")

    def read(self, value: Any) -> float:
        """Read the length."""
        if isinstance(value, str) and value.strip()[:1].isalpha():
            hint = "no published rule for the reach of a notch is in the catalogue: state the length"
            raise ill(self.words, value, hint)
        return super().read(value)


class NotchTable(Table):
    """``[[notch]]``."""

    of: Name
    side: Annotated[str, Word(*SIDES)] = "bottom"
    depth: Size
    from_: Length = Field(alias="from")
    to: Length
    reach: Annotated[float, Reach()] = 0.0


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
    slip: Annotated[str | None, Word("free")] = None
    stage: MaybeName = None
    until: MaybeName = None


class HingeTable(Table):
    """``[[hinge]]``."""

    at: Length
    name: MaybeName = None
    stage: MaybeName = None
    until: MaybeName = None


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
    like: MaybeName = None
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
    after: MaybeName = None
    stage: MaybeName = None


class ModulusOrFactor(Reader):
    """A modulus in a stage, or a factor of the material's own."""

    words = 'a modulus such as "11 GPa", or a factor above 0'
    schema = {"anyOf": [{"type": "string"}, {"type": "number", "exclusiveMinimum": 0}]}

    def read(self, value: Any) -> tuple[str, float]:
        """Read ("modulus", Pa) or ("factor", number)."""
        if isinstance(value, str):
            return "modulus", Quantity(Kind.MODULUS, "above zero").read(value)
        if isinstance(value, int | float) and not isinstance(value, bool) and 0.0 < value < float("inf"):
            return "factor", float(value)
        raise ill(self.words, value)


class StageTable(Table):
    """``[[stage]]``."""

    name: Name
    cases: Annotated[
        tuple[str, ...], Many(Text("a load case"), 'a list of load cases such as ["dead"]', empty=True)
    ] = ()
    long_term: Yes = False
    moduli: Annotated[
        dict[str, tuple[str, float]], TableOf(ModulusOrFactor(), 'a table such as { C24 = "9 GPa", concrete = 0.33 }')
    ] = {}
    creep: Annotated[
        dict[str, float], TableOf(Factor("a creep factor", at_least=0.0), "a table such as { concrete = 1.6 }")
    ] = {}
    ageing: Annotated[float, Factor("an ageing coefficient", at_least=0.0, at_most=1.0)] = 1.0


SINGLE: dict[str, type[Table]] = {
    "notch": NotchTable,
    "haunch": HaunchTable,
    "opening": OpeningTable,
    "support": SupportTable,
    "hinge": HingeTable,
    "station": StationTable,
    "stage": StageTable,
    "combination": CombinationTable,
    "limit": LimitTable,
}
"""Models of the tables that have one form only."""

TABLES = ("part", *SINGLE, "load")
"""Names of the lists of tables, ``[[name]]``, built so far."""
