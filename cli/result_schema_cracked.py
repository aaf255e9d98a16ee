"""JSON Schema of what the results of `fishbelly deflect` tell of a combination that cracks the member."""

from __future__ import annotations

from fishbelly.cli.schema_words import Schema, array, maybe, number, record, text

AT = number("place along the member", "m")


def cracked_schema() -> Schema:
    """Return the schema of ``cracked`` in a combination."""
    deepest = {"value": number("largest deflection by size, downwards positive", "m"), "at": AT}
    section: dict[str, Schema] = {
        "at": AT,
        "M": number("moment there", "N m"),
        "M_cracking": number("moment at which it cracks", "N m"),
        "I_gross": number("second moment without bars", "m4"),
        "I_cracked": number("cracked, bars counted", "m4"),
        "I_effective": number("by the rule", "m4"),
    }
    span: dict[str, Schema] = {
        "span": {"type": ["integer", "string"], "description": "its number, or left or right overhang"},
        "I_effective": number("the one value of the span", "m4"),
        "sections": array("its critical sections", record("a section", section)),
    }
    one = record(
        "by the code's one value: I_e of each span, or zeta of the most cracked section",
        deepest,
        {"spans": array("spans", record("a span", span)), "zeta": number("share of the cracked state"), "section": AT},
    )
    closed: dict[str, Schema] = {
        "status": {"enum": ["closed", "cracks held"], "description": "how equilibrium closed"},
        "rounds": {"type": "integer", "description": "linear solutions in all"},
        "residual": number("change of the forces in the last round against the largest"),
        "at": AT,
    }
    return record(
        "for a combination that cracks the member: the chosen result stands above, others beside it here",
        {
            "rule": {"type": ["string", "null"], "description": "rule of tension stiffening"},
            "from_history": {"type": "boolean", "description": "whether other combinations have cracked more places"},
            "stretches": stretches_schema(),
            "convergence": record("how equilibrium closed", closed),
            "uncracked": record("uncracked throughout", deepest),
            "along": record("section by section along x", deepest),
            "everywhere": maybe(record("cracked throughout, no tension stiffening; null: cannot be carried", deepest)),
        },
        {"one_value": one, "long_term": _long_term(), "beyond_check": text("why the second method does not reach it")},
    )


def stretches_schema() -> Schema:
    """Return the schema of the stretches that are cracked."""
    by: dict[str, Schema] = {
        "by": {"type": ["string", "null"], "description": "combination that cracks most of it by itself"}
    }
    return array("where it is cracked", record("a stretch", {"from": AT, "to": AT} | by))


def _long_term() -> Schema:
    """Return the schema of ACI 318's multiplier for loads that last."""
    steel = number("steel in compression over width times depth of the bars in tension, rho'")
    return record(
        "by the multiplier of ACI 318 for loads that last five years and more: immediate + lambda times sustained",
        {
            "lambda": number("2 / (1 + 50 rho')"),
            "compression_steel": steel,
            "immediate": number("deflection there by all loads, on short-term moduli", "m"),
            "sustained": number("the same by what lasts", "m"),
            "value": number("largest deflection by size, downwards positive", "m"),
            "at": AT,
        },
    )
