"""Notes on members that crack: where, by which rule, and what that does to the deflection."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from fishbelly.member.analysis import Analysis
from fishbelly.member.note import Note
from fishbelly.sections.effective_inertia import EN

Data = dict[str, Any]


def cracked_notes(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    """Say what cracks, by which rule strains between cracks count, and what stays as it was."""
    found = [c for c in combinations if "cracked" in c]
    for c in found:
        yield _where(c)
        if c["cracked"]["from_history"]:
            yield Note(f"in {c['name']} places count as cracked that another combination for deflection has cracked")
        if c["cracked"]["convergence"]["status"] == "cracks held":
            yield Note(f"in {c['name']} cracks that opened while forces were found are kept")
        if c["cross_check"] is None:
            why = c["cracked"].get("beyond_check")
            yield Note(f"the second method does not reach {c['name']}" + (f": {why}" if why else ""))
    if not found:
        return
    rule = found[0]["cracked"]["rule"]
    yield Note(
        "no tension stiffening: where a section is cracked, parts that crack carry compression alone"
        if rule is None
        else f"tension stiffening by {rule}; stresses are those at a crack"
    )
    if rule is not None and rule != EN and len(analysis.views) > 1:
        yield Note(f"the one value of {rule} is not built for members with stages: the result is section by section")
    if analysis.member.shear:
        yield Note("where the member is cracked its shear stiffness counts as that of the uncracked section")


def _where(c: Data) -> Note:
    stretches = c["cracked"]["stretches"]
    values: dict[str, tuple[float, str]] = {}
    words = []
    for k, s in enumerate(stretches[:4]):
        words.append(f"{{a{k}}} to {{b{k}}}")
        values |= {f"a{k}": (s["from"], "position"), f"b{k}": (s["to"], "position")}
    if len(stretches) > 4:
        words.append(f"{len(stretches) - 4} more stretches")
    cracked = c["cracked"]
    for key in ("uncracked", "along"):
        values[key] = (cracked[key]["value"], "deflection")
    where = f"cracked from {' and '.join(words)}" if words else "parts without tension open"
    text = f"{c['name']}: {where}; largest deflection {{along}} section by section, {{uncracked}} uncracked"
    if cracked["everywhere"] is not None:
        text += ", {everywhere} cracked throughout"
        values["everywhere"] = (cracked["everywhere"]["value"], "deflection")
    if "one_value" in cracked:
        text += ", {one} by the code's one value"
        values["one"] = (cracked["one_value"]["value"], "deflection")
    return Note(text, values)
