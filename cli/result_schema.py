"""JSON Schema of the results that the commands print with ``--json``; kept by hand, held against real results."""

from __future__ import annotations

from fishbelly.cli.catalog_properties import MEANINGS
from fishbelly.cli.job_schema import DIALECT
from fishbelly.cli.result_schema_cracked import cracked_schema
from fishbelly.cli.result_schema_joints import joints_schema
from fishbelly.cli.result_schema_section import fibre_schema, twist_schema
from fishbelly.cli.result_schema_slip import slip_schema
from fishbelly.cli.result_schema_stages import stages_schema
from fishbelly.cli.result_schema_trade import trade_schema, width_schema
from fishbelly.cli.result_schema_without import (
    deflect_without_schema,
    section_without_schema,
    stiffness_without_schema,
)
from fishbelly.cli.schema_words import Schema
from fishbelly.cli.schema_words import array as _list
from fishbelly.cli.schema_words import maybe as _maybe
from fishbelly.cli.schema_words import number as _number
from fishbelly.cli.schema_words import record as _object
from fishbelly.cli.schema_words import text as _text

_AT = _number("place along the member", "m")
_HEAD = {
    "title": _text("title of the job"),
    "units": _text("SI base units: m, N, Pa, rad, kg"),
}
_STIFFNESS = {
    "EA": _maybe(_number("axial stiffness", "N")),
    "EI_y": _maybe(_number("bending stiffness in the vertical plane, about the horizontal axis y-y", "N m2")),
    "EI_z": _maybe(_number("bending stiffness sideways", "N m2")),
    "EI_yz": _maybe(_number("coupling of the two planes", "N m2")),
}
_CENTROID = {
    "y_c": _maybe(_number("y of the E-weighted centroid, to the right", "m")),
    "z_c": _maybe(_number("z of the E-weighted centroid, upwards from the datum line", "m")),
    "mass": _maybe(_number("mass per length; null where a density is not known", "kg/m")),
}
_GA_Z = _maybe(_number("shear stiffness in the vertical plane; null where a G is not known", "N"))
_BREAK = {"type": "boolean", "description": "whether something begins, ends or jumps there"}
_STAGE = _text("stage of construction")
_NOTES = _list("notes; they change no result", {"type": "string"})


def _extreme(words: str, unit: str, more: dict[str, Schema] | None = None, maybe: bool = True) -> Schema:
    found = _object(words, {"value": _number("the value", unit), "at": _AT} | (more or {}))
    return _maybe(found) if maybe else found


_TRANSFORMED = {
    "A": _maybe(_number("area", "m2")),
    "I_y": _maybe(_number("second moment of area about y", "m4")),
    "I_z": _maybe(_number("second moment of area about z", "m4")),
    "W_top": _maybe(_number("elastic section modulus of the top", "m3")),
    "W_bottom": _maybe(_number("elastic section modulus of the bottom", "m3")),
}
_TO = {"to": _text("material to which the section is transformed"), "E": _number("its modulus", "Pa")}


_PRINCIPAL = {
    "EI_1": _maybe(_number("largest bending stiffness", "N m2")),
    "EI_2": _maybe(_number("smallest", "N m2")),
    "angle": _maybe(_number("angle of the first principal axis", "rad")),
}


def _angles(words: str) -> Schema:
    return {"type": "object", "description": words, "additionalProperties": _number("angle", "rad")}


def _section() -> Schema:
    per_moment = _object(
        "stress for a moment of 1 N m",
        {k: _maybe(_number(f"at the part's {k}", "Pa/(N m)")) for k in ("top", "bottom")},
    )
    part = {
        "name": _text("name of the part"),
        "material": _text("its material"),
        "area": _number("area", "m2"),
        "E": _number("modulus", "Pa"),
        "y": _maybe(_number("y of its centroid", "m")),
        "z": _maybe(_number("z of its centroid", "m")),
        "I_y": _number("own second moment of area about y", "m4"),
        "I_z": _number("own second moment of area about z", "m4"),
        "z_top": _maybe(_number("level of its top", "m")),
        "z_bottom": _maybe(_number("level of its bottom", "m")),
        "stress_per_moment": per_moment,
        "W": _object(
            "section modulus of the part's fibres, elastic: moment over stress",
            {k: _maybe(_number(f"at the part's {k}", "m3")) for k in ("top", "bottom")},
        ),
        "stress_per_force": _maybe(_number("stress for an axial force of 1 N", "Pa/N")),
    }
    leaning = _angles("angle to the axis of flanges that count along their slope; all: a plate")
    ratios = {"type": "object", "description": "ratio of moduli by material", "additionalProperties": _number("ratio")}
    levels = {"top": _number("level of the section's top", "m"), "bottom": _number("level of its bottom", "m")}
    shears = {"GA_y": _maybe(_number("shear stiffness sideways", "N")), "GA_z": _GA_Z}
    return _object(
        "The cross-section at one place.",
        _HEAD
        | {"x": _AT, "side": {"enum": ["left", "right"], "description": "side of a break"}, "stage": _STAGE}
        | {"break": {"type": "boolean", "description": "whether something begins, ends or changes its law there"}}
        | _STIFFNESS
        | shears
        | _CENTROID
        | {
            "principal": _object("principal axes", _PRINCIPAL),
            "parts": _list("parts there", _object("a part", part, {"inclined": leaning} | width_schema())),
            "transformed": _object(
                "properties transformed to one material", _TO | _TRANSFORMED | {"n": ratios} | levels
            ),
        },
        {"notes": _NOTES, "without": section_without_schema(_STIFFNESS | shears | _CENTROID)}
        | twist_schema()
        | fibre_schema()
        | trade_schema(),
    )


def _stiffness() -> Schema:
    ends = {f"z_{k}": _maybe(_number(f"level of the section's {k}", "m")) for k in ("top", "bottom")}
    station = {"x": _AT} | _STIFFNESS | {"GA_z": _GA_Z} | _CENTROID | ends | {"break": _BREAK}
    single = {"transformed": _object("section of that one material that is as stiff, with --to", _TRANSFORMED)}
    leaning = {"part": _text("the part"), "flange": _text("top, bottom, or all of a plate")}
    leaning |= {"angle": _number("its angle to the axis", "rad")}
    single |= {"inclined": _list("flanges and plates that count along their slope", _object("one", leaning))}
    return _object(
        "Stiffness along the member; two stations at one x where it jumps, the left one first.",
        _HEAD | {"stage": _STAGE, "stations": _list("stations by x", _object("a station", station, single))},
        {
            "transformed": _object("with --to", _TO),
            "notes": _NOTES,
            "without": stiffness_without_schema(_AT, _STIFFNESS | {"GA_z": _GA_Z} | _CENTROID),
        },
    )


_BAND = {
    "band": _object(
        "with E, and joint stiffness, at the low and the high end of its band",
        {k: _maybe(_number(k)) for k in ("low", "high")},
    )
}


def _deflection() -> Schema:
    def way(words: str, more: dict[str, Schema] | None = None) -> Schema:
        plain = _extreme(words, "m", more)
        plain["properties"] = plain["properties"] | _BAND
        return plain

    return _object(
        "largest deflections; null where there is none",
        {
            "down": way("largest downwards", {"shear_part": _number("of it from shear deformation", "m")}),
            "up": way("largest upwards, positive"),
            "across": way("largest sideways by size, with its sign, towards +y"),
        },
    )


def _stress() -> Schema:
    peak = {"z": _number("level", "m")}
    return _list(
        "stresses of every part; tension positive",
        _object(
            "a part",
            {
                "part": _text("its name"),
                "max": _extreme("largest", "Pa", peak),
                "min": _extreme("smallest", "Pa", peak),
            },
            {"shear": _extreme("largest shear stress, without sign", "Pa", {"z": _maybe(peak["z"])}, maybe=False)},
        ),
    )


def _checks() -> Schema:
    return _list(
        "one entry a limit or strength, for the span or place that governs",
        _object(
            "a check",
            {
                "limit": _text("name of the limit"),
                "span": {"type": ["integer", "string", "null"], "description": "its number, or left or right overhang"},
                "allowed": _number("allowed", "m, rad or Pa"),
                "found": _number("found", "m, rad or Pa"),
                "used": _number("found / allowed"),
                "ok": {"type": "boolean", "description": "whether it is met"},
                "at": _AT,
                "kind": {
                    "enum": ["deflection", "slope", "tension", "compression", "shear"],
                    "description": "what is checked",
                },
            },
            {
                "part": _text("part of a strength"),
                "z": _maybe(_number("level of the fibre", "m")),
                "source": _text("where a published limit stands"),
            }
            | _BAND,
        ),
    )


_FORCES = {
    "vertical": _number("upwards", "N"),
    "along": _number("towards +x", "N"),
    "moment": _number("clockwise", "N m"),
    "across": _number("towards +y", "N"),
}


def _supports() -> Schema:
    return _list(
        "forces of the supports on the member, by x",
        _object(
            "a support",
            {"name": _text("its name"), "at": _AT}
            | _FORCES
            | {
                "moment_across": _number("moment sideways", "N m"),
                "lifted": {"type": "boolean", "description": "whether a bearing that cannot pull has lifted off"},
            },
        ),
    )


_END = {
    "deflection": _number("downwards", "m"),
    "slope": _maybe(_number("slope of the axis, clockwise", "rad")),
    "rotation": _maybe(_number("rotation of the section, clockwise", "rad")),
}
_STATION = {
    "M": _number("bending moment, sagging, about the E-weighted centroid", "N m"),
    "M_datum": _number("bending moment about the datum line", "N m"),
    "V": _number("shear force", "N"),
    "N": _number("axial force, tension", "N"),
    "slope": _END["slope"],
    "rotation": _END["rotation"],
    "deflection": _END["deflection"],
    "across": _number("deflection towards +y", "m"),
}


def _envelope() -> Schema:
    def range_of(schema: Schema) -> Schema:
        return _object(schema["description"], {k: {"type": "number", "description": k} for k in ("min", "max")})

    at = {k: range_of(_STATION[k]) for k in ("M", "V", "N", "deflection", "across", "rotation")}
    held = {k: range_of(v) for k, v in _FORCES.items()}
    return _object(
        "least and most over all arrangements of pattern loads",
        {
            "stations": _list("as `stations`", _object("a station", {"x": _AT} | at)),
            "supports": _list("as `supports`", _object("a support", {"name": _text("its name"), "at": _AT} | held)),
        },
    )


def _cross_check() -> Schema:
    work = {"type": ["object", "null"], "description": "work of the loads against that of the strains"}
    return _maybe(
        _object(
            "the governing deflection by a second method",
            {
                "method": _text("how"),
                "at": _AT,
                "value": _number("deflection", "m"),
                "difference": _number("difference over the largest deflection"),
                "error": _number("the second method's own error, relative"),
                "equilibrium": _number("reactions against loads, relative"),
                "work": work | {"additionalProperties": {"type": "number"}},
            },
        )
    )


def _spans() -> Schema:
    return _list(
        "spans and overhangs from the left",
        _object(
            "a span",
            {
                "from": _number("its left end", "m"),
                "to": _number("its right end", "m"),
                "span": {"type": ["integer", "string"], "description": "its number, or left or right overhang"},
                "deflection": _number("largest by size, from the line between its supports", "m"),
                "at": _AT,
                "ratio": _maybe(_number("length over deflection")),
            },
        ),
    )


def _moments() -> Schema:
    found = {k: _extreme(w, "N m") for k, w in (("sagging", "largest"), ("hogging", "largest, negative"))}
    return _object("largest moments", found)


def _combination() -> Schema:
    shears = {k: _extreme(w, "N", maybe=False) for k, w in (("max", "largest"), ("min", "smallest"))}
    station = {"x": _AT, "name": _maybe(_text("name of a named station")), "break": _BREAK} | _STATION
    return _object(
        "a combination",
        {
            "name": _text("its name"),
            "for": {"enum": ["deflection", "strength"], "description": "what it is for"},
            "deflection": _deflection(),
            "moment": _moments(),
            "shear": _object("largest shear forces", shears),
            "supports": _supports(),
            "ends": _object("movements of the ends", {k: _object(f"{k} end", _END) for k in ("left", "right")}),
            "spans": _spans(),
            "checks": _checks(),
            "stress": _stress(),
            "joints": joints_schema(),
            "cross_check": _cross_check(),
            "stations": _list("values along the member; two at one x where one jumps", _object("a station", station)),
        },
        {
            "envelope": _envelope(),
            "lifted": _list("names of the bearings that have lifted off", {"type": "string"}),
            "cracked": cracked_schema(),
        }
        | slip_schema(),
    )


def _deflect() -> Schema:
    bare = {"deflection": _deflection(), "moment": _moments(), "stress": _stress(), "checks": _checks()}
    return _object(
        "Reactions, moments, deflections, stresses and limits.",
        _HEAD
        | {
            "length": _number("length of the member", "m"),
            "notes": _NOTES,
            "combinations": _list("combinations", _combination()),
            "stages": stages_schema(_deflection(), _stress()),
        },
        {"stage": _text("stage at whose end they are, with --stage"), "without": deflect_without_schema(bare)},
    )


def _catalog() -> Schema:
    values = {"type": "object", "description": "values by name", "additionalProperties": {"type": ["number", "string"]}}
    entry = {
        "group": {
            "enum": ["material", "rolled section", "limit", "creep of timber", "fastener"],
            "description": "what it is",
        },
        "name": _text("name by which a job asks for it"),
        "kind": _text("what kind of it"),
        "values": values,
        "source": _text("where it is published"),
        "note": _text("what to know about it"),
        "snippet": _text("lines to paste into a job"),
    }
    units = {"A": "m2", "I": "m4", "W": "m3", "m": "kg/m", "y": "m", "z": "m"}
    computed = {symbol: _number(words, units[symbol[0]]) for symbol, words in MEANINGS.items()}
    computed["steel_density"] = _number("density that the mass is for", "kg/m3")
    section = {"computed": _object("properties of a section", {"from": _text("what they are computed from")}, computed)}
    return _object(
        "Entries of the catalogue.",
        {
            "units": _text("SI base units: m, N, Pa, rad, kg, K"),
            "asked": _text("words asked for"),
            "count": {"type": "integer", "description": "number of entries"},
            "entries": _list("entries, the best first", _object("an entry", entry, section)),
        },
    )


RESULTS = {"catalog": _catalog, "section": _section, "stiffness": _stiffness, "deflect": _deflect}
"""What makes the schema of a command's results."""


def result_schema(command: str | None = None) -> Schema:
    """Return the JSON Schema (draft 2020-12) of what a command prints with ``--json``.

    Parameters
    ----------
    command : str, optional
        The command; without it the schema of any of them.
    """
    if command is not None:
        return {"$schema": DIALECT, "title": f"Results of fishbelly {command}"} | RESULTS[command]()
    return {
        "$schema": DIALECT,
        "title": "Results of fishbelly",
        "anyOf": [{"$ref": f"#/$defs/{name}"} for name in RESULTS],
        "$defs": {name: make() for name, make in RESULTS.items()},
    }
