"""A note: a sentence with quantities that whoever shows it puts into units."""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field

Quantity = tuple[float, str]
"""A value in SI units and what it is, such as (0.012, "deflection")."""

_PLACE = re.compile(r"\{(\w+)\}")


@dataclass(frozen=True)
class Note:
    """A sentence with places for quantities, such as "… at {at}", and the quantities."""

    text: str
    values: Mapping[str, Quantity] = field(default_factory=dict)

    def say(self, show: Callable[[float, str], str]) -> str:
        """Return the sentence with its quantities shown by a function of value and kind."""
        # names of parts stand in the text too, and may have braces of their own
        return _PLACE.sub(lambda m: show(*self.values[m[1]]) if m[1] in self.values else m[0], self.text)

    def __str__(self) -> str:
        return self.say(lambda value, what: f"{value:.4g}")
