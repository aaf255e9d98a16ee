"""JSON Schema of what results tell with ``--without``: the member without some of its parts."""

from __future__ import annotations

from fishbelly.cli.schema_words import Schema, array, maybe, number, record, text

_PARTS = array("names of the parts left out", {"type": "string"})
_GAIN = record(
    "stiffness with them over that without",
    {key: maybe(number(key)) for key in ("EA", "EI_y", "EI_z", "GA_z")},
)


def _by_name(words: str) -> Schema:
    return {"type": "object", "description": words, "additionalProperties": maybe(number("ratio"))}


def section_without_schema(values: dict[str, Schema]) -> Schema:
    """Return the schema of a section without parts; `values`: those that it has."""
    return record("the same section without some parts", {"parts": _PARTS} | values | {"gain": _GAIN})


def stiffness_without_schema(at: Schema, values: dict[str, Schema]) -> Schema:
    """Return the schema of the stiffness along the member without parts; `values`: those of a station."""
    station = record("a station", {"x": at} | values | {"gain": _GAIN})
    return record(
        "stiffness without some parts, at the same stations", {"parts": _PARTS, "stations": array("stations", station)}
    )


def deflect_without_schema(values: dict[str, Schema]) -> Schema:
    """Return the schema of a solved member without parts; `values`: those of a combination."""
    gain = record(
        "values without them over those with them",
        {
            "deflection": _by_name("largest deflections: down, up, across"),
            "stress": _by_name("largest stress by size of each part that stays"),
        },
    )
    row = record("a combination", {"name": text("its name")} | values | {"gain": gain})
    return record("the member without some parts", {"parts": _PARTS, "combinations": array("combinations", row)})
