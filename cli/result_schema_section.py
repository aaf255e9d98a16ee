"""JSON Schema of what `fishbelly section` tells of shear and torsion, and of stress at a level."""

from __future__ import annotations

from fishbelly.cli.schema_words import Schema, array, maybe, number, record, text


def twist_schema() -> dict[str, Schema]:
    """Return the schema of `shear` and `torsion`, by key; null where a shear modulus is not known."""
    point = record("a place", {"y": number("to the right", "m"), "z": number("upwards", "m")})
    shear = record(
        "shear, by the strain energy of St Venant's flexure with Poisson's ratio zero",
        {
            "F_yz": number("shear angle along y by a force of 1 N along z", "1/N"),
            "y_s": number("shear centre, to the right", "m"),
            "z_s": number("shear centre, upwards from the datum line", "m"),
            "pieces": {"type": "integer", "description": "pieces that do not hang together in shear"},
            "error": number("estimated relative error of the shear stiffness"),
            "touching": array("places at which pieces touch at a point alone", point),
        },
    )
    torsion = record(
        "St Venant's torsion",
        {
            "GJ": maybe(number("torsional stiffness", "N m2")),
            "lower": maybe(number("lower bound, by the stress function", "N m2")),
            "upper": maybe(number("upper bound, by warping", "N m2")),
            "error": maybe(number("half the gap of the bounds, relative")),
        },
        {"reason": text("why there is none")},
    )
    return {"shear": maybe(shear), "torsion": maybe(torsion)}


def fibre_schema() -> dict[str, Schema]:
    """Return the schema of `fibres`, which is there with ``--fibre`` alone."""
    pair: Schema = {"type": "array", "items": {"type": "number"}, "minItems": 2, "maxItems": 2}
    fibre = record(
        "stress of a part at a level, all `pattern` loads on",
        {
            "combination": text("combination"),
            "part": text("name of the part"),
            "z": number("level", "m"),
            "side": {
                "enum": ["both", "below", "above"],
                "description": "whether just below or just above the level, where the two differ",
            },
            "normal": number("stress along the part in the middle of its width there, tension positive", "Pa"),
            "ends": pair | {"description": "the same at the left and right end of that width [Pa]"},
            "shear": number("mean shear stress over the width, positive as the shear force", "Pa"),
            "principal": pair | {"description": "largest and smallest principal stress [Pa]"},
            "tau_max": number("largest shear stress, half their difference", "Pa"),
            "angle": number("direction of the first from the axis, positive where it rises along x", "rad"),
        },
    )
    return {"fibres": array("stress at levels, with --fibre", fibre)}
