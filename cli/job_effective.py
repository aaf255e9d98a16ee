"""How much of a part's width counts: the key `effective` of a part."""

from __future__ import annotations

from typing import Any

from fishbelly.cli.faults import as_written, suggest
from fishbelly.cli.job_types import Ill, Quantity, Reader, Text, ValueFault
from fishbelly.cli.quantities import Kind
from fishbelly.member.effective_rules import RULES
from fishbelly.member.fixings import EffectiveWidth

_READERS: dict[str, Reader] = {
    "rule": Text("the name of a rule"),
    "web_spacing": Quantity(Kind.LENGTH, "above zero"),
    "edge": Quantity(Kind.LENGTH, "above zero"),
}
_WORDS = {
    "rule": "rule by its name: EN 1992-1-1 (5.3.2.1) or AISC 360 (I3.1a)",
    "web_spacing": "distance to the next web, middle to middle; both sides where there is no `edge`",
    "edge": "distance from the middle of the web to a free edge; both sides where there is no `web_spacing`",
}


class EffectiveReader(Reader):
    """``{ rule, web_spacing, edge }``."""

    words = 'a table such as { rule = "EN 1992-1-1", web_spacing = "3 m" }'
    schema = {
        "type": "object",
        "properties": {
            "rule": {"enum": list(RULES), "description": _WORDS["rule"]},
            "web_spacing": {"type": "string", "description": _WORDS["web_spacing"]},
            "edge": {"type": "string", "description": _WORDS["edge"]},
        },
        "required": ["rule"],
        "additionalProperties": False,
    }

    def read(self, value: Any) -> EffectiveWidth:
        """Read the rule and the distances; every key that is wrong is told."""
        if not isinstance(value, dict) or not value:
            raise ValueFault(Ill((), self.words, as_written(value)))
        ills: list[Ill] = []
        values: dict[str, Any] = {}
        for key, given in value.items():
            reader = _READERS.get(key)
            if reader is None:
                ills.append(Ill((key,), "", f'unknown key "{key}"', suggest(key, tuple(_READERS))))
                continue
            try:
                values[key] = reader.read(given)
            except ValueFault as fault:
                ills += [i.below(key) for i in fault.ills]
        known = ", ".join(f'"{name}"' for name in RULES)
        if "rule" not in value:
            ills.append(Ill(("rule",), f"one of {known}", ""))
        elif values.get("rule", next(iter(RULES))) not in RULES:
            near = suggest(values["rule"], tuple(RULES))
            ills.append(Ill(("rule",), f"one of {known}", as_written(value["rule"]), near))
        if ills:
            raise ValueFault(*ills)
        return EffectiveWidth(**values)
