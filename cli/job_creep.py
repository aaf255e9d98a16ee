"""Creep factor of a concrete: a number, or age, humidity and size from which EN 1992-1-1 gives it."""

from __future__ import annotations

import math
from typing import Any

from fishbelly.cli.job_types import Factor, Quantity, Reader, ill
from fishbelly.cli.quantities import Kind

RULE = "EN 1992-1-1"
_NEEDED = ("rule", "f_ck", "humidity", "size", "loaded_at")
_KEYS = (*_NEEDED, "age", "cement")


class CreepReader(Reader):
    """A creep factor, or ``{ rule, f_ck, humidity, size, loaded_at, age, cement }``."""

    words = (
        'a creep factor of 0 or more, or { rule = "EN 1992-1-1", f_ck = "30 MPa", humidity = 0.6, size = "200 mm", '
        "loaded_at = 28 } with ages in days, `age` and `cement` besides"
    )
    schema = {
        "anyOf": [
            {"type": "number", "minimum": 0},
            {
                "type": "object",
                "properties": {
                    "rule": {"enum": [RULE]},
                    "f_ck": {"type": "string"},
                    "humidity": {"type": "number"},
                    "size": {"type": "string"},
                    "loaded_at": {"type": "number"},
                    "age": {"type": "number"},
                    "cement": {"enum": ["S", "N", "R"]},
                },
                "required": list(_NEEDED),
                "additionalProperties": False,
            },
        ]
    }

    def read(self, value: Any) -> float:
        """Read the factor; by rule that of Annex B for load from `loaded_at` to `age` (default for good)."""
        if not isinstance(value, dict):
            return float(Factor("a creep factor", at_least=0.0).read(value))
        if any(key not in value for key in _NEEDED) or any(key not in _KEYS for key in value) or value["rule"] != RULE:
            raise ill(self.words, value)
        from fishbelly.catalog.concrete_time import creep_coefficient

        numbers = [value[k] for k in ("humidity", "loaded_at")] + [value.get("age", math.inf)]
        if any(isinstance(v, bool) or not isinstance(v, int | float) for v in numbers):
            raise ill(self.words, value)
        humidity, start, end = numbers
        strength, size = (
            Quantity(Kind.STRESS, "above zero").read(value["f_ck"]),
            Quantity(Kind.LENGTH, "above zero").read(value["size"]),
        )
        try:
            return creep_coefficient(end, start, strength, humidity, size, str(value.get("cement", "N")))
        except ValueError as error:
            raise ill(str(error).removeprefix("expected ").partition(", got ")[0], value) from None
