"""JSON Schema of the stages in the results of `fishbelly deflect`."""

from __future__ import annotations

from fishbelly.cli.result_schema_cracked import stretches_schema
from fishbelly.cli.schema_words import Schema, array, maybe, number, record, text

AT = number("place along the member", "m")
_FORCES = {
    "vertical": number("upwards", "N"),
    "along": number("towards +x", "N"),
    "moment": number("clockwise", "N m"),
}


def stages_schema(deflection: Schema, stress: Schema) -> Schema:
    """Return the schema of the stages.

    Parameters
    ----------
    deflection, stress : dict
        Schemas of the deflections and of the stresses of a combination.
    """
    told = {"deflection": deflection, "stress": stress}
    stage = {
        "name": text("stage of construction"),
        "cases": array("load cases that arrive in it", {"type": "string"}),
        "combinations": array(
            "combinations up to its end",
            record("a combination", {"name": text("its name")} | told, _of_combination(told)),
        ),
    }
    return array("stages of construction", record("a stage", stage, _of_stage()))


def _of_stage() -> dict[str, Schema]:
    """What a stage tells by itself, where the job has stages."""
    creep = {"type": "object", "description": "creep factor that runs off in it, by material"}
    return {
        "comes": _names("what begins to work in it"),
        "goes": _names("what goes at its start"),
        "long_term": {"type": "boolean", "description": "whether what arrives acts on long-term moduli"},
        "creep": creep | {"additionalProperties": number("creep factor")},
        "ageing": number("ageing coefficient of that creep"),
    }


def _names(words: str) -> Schema:
    kinds = ("parts", "supports", "hinges")
    return record(words, {kind: array(f"names of {kind}", {"type": "string"}) for kind in kinds})


def _of_combination(told: dict[str, Schema]) -> dict[str, Schema]:
    """What a combination tells of a stage beside its deflection and stress, where the job has stages."""
    support = {"name": text("its name"), "at": AT}
    moved = {f"deflection_{when}": number(f"deflection there just {when}", "m") for when in ("before", "after")}
    own = {"deflection": number("what the stage adds there, downwards", "m"), "at": AT}
    carried = array(
        "what every part there carries of the bending moment, about the common centroid",
        record(
            "a part",
            {
                "part": text("its name"),
                "force": number("axial force, tension", "N"),
                "moment": number("moment, sagging", "N m"),
                "share": maybe(number("moment over that of the member; null where that is zero")),
            },
        ),
    )
    return {
        "own": record("what the stage adds where the deflection is largest", own),
        "at": number("place of the largest deflection, for EI_y and what the parts carry", "m"),
        "EI_y": number("bending stiffness there, on the moduli that the loads of the stage act on", "N m2"),
        "EI_y_short": number("bending stiffness there, on short-term moduli", "N m2"),
        "gain": maybe(number("EI_y over that of the stage before, there")),
        "carried": carried,
        "supports": array("forces on the member, by x; 0 where not there", record("a support", support | _FORCES)),
        "released": array(
            "supports that go at the start of the stage, with their forces just before",
            record("a support", support | _FORCES | moved),
        ),
        "cracked": stretches_schema(),
        "instantaneous": record(
            "the same if nothing crept", told | {"carried": carried}, {"cracked": stretches_schema()}
        ),
    }
