"""Notes of effective widths: how much of a slab counts, of how much, and by which clause."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from fishbelly.member.analysis import Analysis
from fishbelly.member.description import Member, Part
from fishbelly.member.effective_rules import CLAUSES, outside_figure
from fishbelly.member.effective_width import effective_zones, layout_of, web_width
from fishbelly.member.note import Note

Data = dict[str, Any]


def effective_widths(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    """Tell of every part with an effective width what counts of the width given."""
    member = analysis.member
    for part in member.parts:
        if part.effective is not None:
            yield _note(member, part)
            if part.effective.rule == "EN 1992-1-1" and outside_figure(layout_of(member, part)):
                yield Note(
                    f"{part.name}: Figure 5.2 of EN 1992-1-1 is for neighbouring spans of 2/3 to 1.5 times each other "
                    "and cantilevers shorter than half their span; here it is used beyond"
                )


def _note(member: Member, part: Part) -> Note:
    assert part.effective is not None
    given = part.shape.dimensions["width"]
    least, most = given.extremes(part.start, part.end)
    zones = effective_zones(member, part)
    counts = [min(zone.width, value) for zone in zones for value in given.extremes(zone.start, zone.end)]
    values = {"low": (min(counts), "length"), "high": (max(counts), "length"), "given": (most, "length")}
    same = max(counts) - min(counts) <= 1e-9 * most
    web = web_width(member, part)
    values["web"] = (web, "length")
    if part.effective.rule == "AISC 360":
        said = ""
    elif web > 0.0:
        said = f", with {{web}} of {part.place.host} as the width of the web"
    else:
        said = ", with no width of a web"
    return Note(
        f"{part.name}: effective width {{low}}{'' if same else ' to {high}'} of {{given}}"
        f"{' at most' if most - least > 1e-9 * most else ''} by {CLAUSES[part.effective.rule]}{said}; "
        "its weight is that of the whole width",
        values,
    )
