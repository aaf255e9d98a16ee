"""Effective width of a part along the member: cuts from both its sides that take stiffness and leave mass."""

from __future__ import annotations

import math
from collections.abc import Iterator
from itertools import pairwise
from typing import Any

import numpy as np

from fishbelly.member.description import Member, Notch, Part
from fishbelly.member.effective_rules import CLAUSES, RULES, Layout, Zone
from fishbelly.member.laws import Law
from fishbelly.member.spans import spans

_EDGES = {
    "rectangle": ("width", "width"),
    "box": ("width", "width"),
    "I": ("top_width", "bottom_width"),
    "tee": ("width", "web"),
    "channel": ("width", "width"),
    "trapezoid": ("top_width", "bottom_width"),
}
"""Dimension that is the width of the top and of the bottom edge of an outline."""


def effective_notches(member: Member) -> tuple[Notch, ...]:
    """Cuts that leave the effective width of every part that has one, in the middle of its given width.

    They go through the part's depth from both sides alike, so that both methods and every result see them, and cut
    no mass. Where the given width is the smaller, nothing is cut.
    """
    found: list[Notch] = []
    for part in member.parts:
        if part.effective is None:
            continue
        given = part.shape.dimensions["width"]
        for zone in effective_zones(member, part):
            for start, end in _wider(given, zone):
                depth = Law(given.knots, given.origins, 0.5 * (given.coefficients - [zone.width, 0.0, 0.0]))
                found += [Notch(part.name, depth, start, end, s, rule=part.effective.rule) for s in ("left", "right")]
    return tuple(found)


def effective_zones(member: Member, part: Part) -> list[Zone]:
    """Stretches of a part with the width that its rule gives each, larger than the given one or not."""
    assert part.effective is not None
    zones = RULES[part.effective.rule](layout_of(member, part))
    clipped = [Zone(max(z.start, part.start), min(z.end, part.end), z.width) for z in zones]
    tiny = 1e-9 * member.length
    return [z for z in clipped if z.end - z.start > tiny]


def layout_of(member: Member, part: Part) -> Layout:
    """Webs, edges and spans that an effective width depends on; supports that are taken away count none.

    Without `web_spacing` and `edge`, half the largest given width is the distance to the edge on either side.
    """
    rule = part.effective
    assert rule is not None
    half = 0.5 * part.shape.dimensions["width"].extremes(part.start, part.end)[1]
    between = None if rule.web_spacing is None else 0.5 * rule.web_spacing
    towards_web = next(v for v in (between, rule.edge, half) if v is not None)
    towards_edge = next(v for v in (rule.edge, between, half) if v is not None)
    lasting = [s for s in member.supports if s.until is None]
    gone = [s.name for s in member.supports if s.until is not None]
    places = [s.at for s in lasting if s.down > 0.0]
    rigid = {s.at for s in lasting if math.isinf(s.rotation)}
    held = (min(places, default=0.0) in rigid, max(places, default=0.0) in rigid)
    return Layout((towards_web, towards_edge), web_width(member, part), spans(member, gone), held)


def web_width(member: Member, part: Part) -> float:
    """Width of the edge of the host on which a part lies, its least along the part; 0 where it is not plain [m]."""
    if part.place.relation not in ("over", "under"):
        return 0.0
    host = member.part(part.place.host)
    names = _EDGES.get(host.shape.kind)
    if names is None or host.turn or host.pair:
        return 0.0
    start, end = max(part.start, host.start), min(part.end, host.end)
    law = host.shape.dimensions[names[0] if part.place.relation == "over" else names[1]]
    return law.extremes(start, end)[0] if end > start else 0.0


def width_at(member: Member, part: Part, x: float, side: str = "right") -> tuple[float, float]:
    """Given and effective width of a part at x, seen from one side [m]."""
    given = float(part.shape.dimensions["width"](np.array([x]), side)[0])
    # a place is looked at from a little inside its side
    inside = x + (1e-9 if side == "right" else -1e-9) * member.length
    for zone in effective_zones(member, part):
        if zone.start <= inside <= zone.end:
            return given, min(given, zone.width)
    return given, given


def counting_width(member: Member, part: Part, x: float, side: str = "right") -> dict[str, Any]:
    """Return ``width`` of a part as `fishbelly section` tells it; nothing of a part without effective width."""
    if part.effective is None:
        return {}
    given, effective = width_at(member, part, x, side)
    return {"width": {"given": given, "effective": effective, "rule": CLAUSES[part.effective.rule]}}


def _wider(given: Law, zone: Zone) -> Iterator[tuple[float, float]]:
    """Stretches of a zone over which the given width is the larger [m]."""
    tiny = 1e-9 * (zone.end - zone.start)
    places = [zone.start, zone.end, *given.knots, *_crossings(given, zone.width)]
    inside = sorted({float(x) for x in places if zone.start <= x <= zone.end})
    for start, end in pairwise(inside):
        middle = float(given(np.array([0.5 * (start + end)]))[0])
        if end - start > tiny and middle > zone.width * (1.0 + 1e-12):
            yield start, end


def _crossings(given: Law, width: float) -> list[float]:
    """Places where a law has a value [m]."""
    found: list[float] = []
    for origin, (c0, c1, c2) in zip(given.origins, given.coefficients, strict=True):
        scale = max(abs(c0), abs(width))
        kept = [c2, c1, c0 - width] if max(abs(c1), abs(c2)) > 1e-14 * scale else []
        roots = np.roots(np.trim_zeros(kept, "f")) if kept else np.empty(0)
        found += [float(origin + r.real) for r in roots if abs(r.imag) <= 1e-12 * max(1.0, abs(r))]
    return found
