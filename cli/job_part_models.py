"""The table of a part and the dimensions of its outline, as pydantic models, one for each outline."""

from functools import cache
from typing import Annotated, Any

from pydantic import Field, create_model

from fishbelly.cli.job_effective import EffectiveReader
from fishbelly.cli.job_joined import JoinedReader
from fishbelly.cli.job_laws import LawOf, MaybeLaw, MaybePair, MaybeRadius, MaybeSize, Size
from fishbelly.cli.job_models import Table
from fishbelly.cli.job_types import (
    Count,
    Factor,
    Many,
    MaybeLength,
    MaybeName,
    MaybeNames,
    Name,
    Quantity,
    Reader,
    Text,
    Word,
    Yes,
    ill,
)
from fishbelly.cli.quantities import Kind
from fishbelly.member.fixings import EffectiveWidth, Joined

CORNERS = tuple(f"{level} {side}" for level in ("top", "bottom") for side in ("left", "right"))
ANCHORS = ("middle", "top", "bottom", "left", "right", *CORNERS)
RELATIONS = ("under", "over", "left_of", "right_of", "centred_on")


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
    stage: MaybeName = None
    until: MaybeName = None
    joined: Annotated[Joined | None, JoinedReader()] = None
    effective: Annotated[EffectiveWidth | None, EffectiveReader()] = None


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
    | dict.fromkeys(("width", "flange", "top_width", "top_flange", "bottom_width", "bottom_flange"), MaybeSize)
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
