"""JSON Schema of effective widths, plastic bending and the constants of section tables at one place."""

from __future__ import annotations

from fishbelly.cli.schema_words import Schema, maybe, number, record, text


def trade_schema() -> dict[str, Schema]:
    """Return the schema of ``plastic`` and ``table`` of the results of `section`."""
    plastic = {
        "z": number("level of the plastic neutral axis, which is kept level", "m"),
        "W_pl": maybe(number("plastic section modulus, of one material alone", "m3")),
        "M_pl": maybe(number("plastic moment without axial force; null without a yield stress", "N m")),
    }
    table = {
        "part": text("the rolled or hollow shape that stands there alone"),
        "I_t": number("torsion constant as section tables have it", "m4"),
        "I_w": maybe(number("warping constant as section tables have it", "m6")),
        "formula": text("whose formula it is"),
    }
    return {
        "plastic": maybe(record("plastic bending about the level axis, never used in a deflection", plastic)),
        "table": maybe(record("what a section table prints, never used in a result", table)),
    }


def width_schema() -> dict[str, Schema]:
    """Return the schema of ``width`` of a part with an effective width."""
    width = {
        "given": number("given width, in weight", "m"),
        "effective": number("effective width, in stiffness and stress", "m"),
        "rule": text("clause that it is by"),
    }
    return {"width": record("how much of the width counts", width)}
