"""JSON Schema of joints that slip in the results of `fishbelly deflect`."""

from __future__ import annotations

from fishbelly.cli.schema_words import Schema, array, maybe, number, record, text

AT = number("place along the member", "m")


def slip_schema() -> dict[str, Schema]:
    """Return the schemas of what a combination has beside it where parts slip on each other."""
    return {"slip": array("joints that slip", _joint()), "bounds": _bounds(), "gamma": array("by span", _gamma())}


def _most(words: str, unit: str) -> Schema:
    value = number("the value, with its sign", unit)
    return record(words, {"max": record("largest by size", {"value": value, "at": AT})})


def _joint() -> Schema:
    slip = number("movement of the part against the other, towards +x", "m")
    end = {k: record(f"{k} end of the part", {"x": AT, "slip": slip}) for k in ("left", "right")}
    single = record("a fastener", {"x": AT, "force": number("force that it puts into the part", "N")})
    return record(
        "a joint",
        {
            "part": text("the part"),
            "to": text("what it is joined to"),
            "ends": record("slip just inside the ends", end),
            "slip": _most("slip along the part", "m"),
            "flow": _most("force per length that the joint puts into the part", "N/m"),
            "per_fastener": maybe(_most("force of one fastener; null without a pitch", "N")),
            "single": array("fasteners, where they are taken one by one", single),
            "stiffness": number("short-term stiffness per length, all rows, both copies of a pair", "N/m2"),
            "creep": maybe(number("creep factor of long-term values of it; null where nothing lasts")),
            "creep_of_shrinkage": array(
                "creep factors for shrinkage with one of its own", {"type": "number", "description": "creep factor"}
            ),
            "creep_in_stages": array(
                "creep factors that run off in stages",
                record("one", {"stage": text("the stage"), "creep": number("creep factor")}),
            ),
        },
    )


def _bounds() -> Schema:
    value = number("largest deflection", "m")
    found = {
        k: maybe(record(f"with the joints {words}; null where none can be had", {"value": value, "at": AT}))
        for k, words in (("apart", "away"), ("rigid", "rigid"))
    }
    ways = {"enum": ["down", "up", "across"], "description": "which deflection: the largest"}
    return record("the largest deflection with the joints that slip away, and rigid", {"of": ways} | found)


def _gamma() -> Schema:
    several = {"type": "number", "description": "by part"}
    return record(
        "the gamma-method of EN 1995-1-1, Annex B, on a span",
        {
            "from": number("left end of the span", "m"),
            "to": number("right end of the span", "m"),
            "span": {"type": ["integer", "string"], "description": "its number, or left or right overhang"},
            "holds": {"type": "boolean", "description": "whether its conditions hold"},
            "reason": maybe(text("which condition does not hold")),
            "deflection": maybe(number("largest deflection by it, of a single span under loads of one kind", "m")),
        },
        {
            "n": {"type": "integer", "description": "number of parts"},
            "length": number("length l that it took", "m"),
            "EI": number("effective bending stiffness", "N m2"),
            "EI_rigid": number("with the parts rigidly joined", "N m2"),
            "EI_apart": number("with the parts not joined", "N m2"),
            "gamma": array("share of each part's EA that counts", several),
            "a": array("level of each part's centroid above the axis of bending [m]", several),
        },
    )
