"""JSON Schema of what `fishbelly section` tells of shear and torsion."""

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
