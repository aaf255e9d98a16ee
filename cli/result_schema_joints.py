"""JSON Schema of the joints between parts in the results of `fishbelly deflect`."""

from __future__ import annotations

from fishbelly.cli.schema_words import Schema, array, maybe, number, record, text

AT = number("place along the member", "m")


def joints_schema() -> Schema:
    """Return the schema of the joints of one combination."""
    per_fastener = maybe(number("flow through the joint that one fastener gets; null without fasteners", "N"))
    end = {
        "x": AT,
        "M": number("moment of the member", "N m"),
        "V": number("shear force of the member", "N"),
        "force": number("axial force of the part, tension: what has to enter it there", "N"),
        "shear": number("shear force of the part", "N"),
        "couple": number("moment of the part about its own centroid", "N m"),
        "flow": number("shear flow into the part, d(force)/dx", "N/m"),
        "per_fastener": per_fastener,
    }
    asked = {
        "needed": {"type": "integer", "description": "fasteners that bring the force in, with `capacity`"},
        "zone": number("length of joint that they, or the weld, take for it", "m"),
        "cut_off": maybe(number("place where the section without the part just meets its strength", "m")),
        "used_without": number("stress over strength of the section without the part"),
        "run_to": maybe(number("place to which the part has to run with its end fastening", "m")),
    }
    most = record("largest by size, with its sign", {"value": end["flow"], "at": AT}, {"per_fastener": per_fastener})
    pitch = {
        "largest_pitch": maybe(number("largest pitch along the part, with `capacity`; null where fasteners slip", "m"))
    }
    return array(
        "joints of parts with what they are placed against or touch; values just inside the part's ends",
        record(
            "a joint",
            {"part": text("the part"), "to": text("what it is joined to")}
            | {k: record(f"{k} of the part", end, asked) for k in ("start", "end")}
            | {"flow": record("flow through the joint: into the part and all that stands on it", {"max": most}, pitch)},
        ),
    )
