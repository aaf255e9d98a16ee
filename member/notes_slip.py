"""Notes of joints that slip: both bounds beside the result, slip that is neglected."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from fishbelly.member.analysis import Analysis
from fishbelly.member.note import Note

Data = dict[str, Any]


def joints_slip(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    """Tell both bounds of every combination, and the joints whose slip is neglected."""
    for c in combinations:
        bounds = c.get("bounds")
        found = None if bounds is None else c["deflection"][bounds["of"]]
        if bounds is None or found is None:
            continue
        values = {"found": (found["value"], "deflection")}
        said = []
        for name, words in (("rigid", "with rigid joints"), ("apart", "with nothing joined that slips")):
            if bounds[name] is not None:
                values[name] = (bounds[name]["value"], "deflection")
                said.append(f"{{{name}}} {words}")
        if said:
            yield Note(f"slip counts in {c['name']}: {{found}} {bounds['of']}; {', '.join(said)}", values)
    for part in analysis.member.parts:
        joined = part.joined
        if part.material and joined is not None and not joined.soft and joined.pitch is not None:
            yield Note(
                f"{part.name}: slip of its fasteners is neglected, as no `stiffness` is given; the deflection is larger"
            )
