"""Effective widths by published rules: how wide a slab counts along a row of spans."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from itertools import pairwise

from fishbelly.member.spans import Span

_FIELD = (1.0, 0.85, 0.7)
"""Distance between points of zero moment in a span, over its length, by how many of its ends go on."""
_OVER = 0.15
"""Share of a span, from a support over which it goes on, up to the point of zero moment."""


@dataclass(frozen=True)
class Layout:
    """What stands beside a web.

    Parameters
    ----------
    sides : tuple of float
        On the two sides: half the distance to the next web, or the distance to the free edge, both from the middle
        of the web [m].
    web : float
        Width of the web [m].
    spans : sequence of Span
        Spans and overhangs from left to right.
    held : tuple of bool
        Whether the first and the last support hold rotation.
    """

    sides: tuple[float, float]
    web: float
    spans: Sequence[Span]
    held: tuple[bool, bool] = (False, False)


@dataclass(frozen=True)
class Zone:
    """A stretch of the member with one effective width, its given width not yet looked at [m]."""

    start: float
    end: float
    width: float


def en_1992(layout: Layout) -> list[Zone]:
    """Effective width of the flange of a concrete tee: EN 1992-1-1:2004, 5.3.2.1, (5.7), (5.7a), (5.7b), Figure 5.2.

    b_eff = b_eff,1 + b_eff,2 + b_w, b_eff,i = 0.2 b_i + 0.1 l_0, at most 0.2 l_0 and b_i, with b_i from the face of
    the web; from memory. l_0 between points of zero moment: 0.85 l in an end span, 0.7 l in an inner one,
    0.15 (l_1 + l_2) over a support, 0.15 l_2 + l_3 over one with a cantilever, l of a single span.

    Beyond the figure, common practice: a support that holds rotation counts as one over which an equal span goes on,
    and a cantilever without a span behind it has l_0 = l_3.
    """
    zones = []
    for start, end, l_0 in zero_moment_zones(layout):
        width = layout.web
        for side in layout.sides:
            b = max(side - 0.5 * layout.web, 0.0)
            width += min(0.2 * b + 0.1 * l_0, 0.2 * l_0, b)
        zones.append(Zone(start, end, width))
    return zones


def zero_moment_zones(layout: Layout) -> list[tuple[float, float, float]]:
    """Stretches of EN 1992-1-1, Figure 5.2, with the distance l_0 between points of zero moment of each [m]."""
    zones: list[tuple[float, float, float]] = []
    inner = [s for s in layout.spans if not s.overhang]
    left = next((s for s in layout.spans if s.label == "left"), None)
    right = next((s for s in layout.spans if s.label == "right"), None)
    if not inner:
        return [(s.start, s.end, s.length) for s in (left, right) if s is not None]
    before, l_0 = _end(left, inner[0], layout.held[0])
    start = 0.0 if left is not None else inner[0].start
    if before:
        zones.append((start, inner[0].start + _OVER * inner[0].length, l_0))
    after, l_0_end = _end(right, inner[-1], layout.held[1])
    for k, span in enumerate(inner):
        goes_left = k > 0 or before
        goes_right = k < len(inner) - 1 or after
        field = (span.start + _OVER * span.length * goes_left, span.end - _OVER * span.length * goes_right)
        zones.append((*field, _FIELD[goes_left + goes_right] * span.length))
        if k < len(inner) - 1:
            beyond = inner[k + 1]
            around = (span.end - _OVER * span.length, beyond.start + _OVER * beyond.length)
            zones.append((*around, _OVER * (span.length + beyond.length)))
    if after:
        last = inner[-1]
        end = right.end if right is not None else last.end
        zones.append((last.end - _OVER * last.length, end, l_0_end))
    return zones


def _end(overhang: Span | None, span: Span, held: bool) -> tuple[bool, float]:
    """Whether a span goes on at an end of the row, and l_0 over the support there [m]."""
    if overhang is not None:
        return True, _OVER * span.length + overhang.length
    return held, 2.0 * _OVER * span.length


def aisc_360(layout: Layout) -> list[Zone]:
    """Effective width of the slab of a composite beam: ANSI/AISC 360-16 (and -22), I3.1a, from memory.

    On each side of the middle of the beam the least of an eighth of the span, supports middle to middle, half the
    distance to the next beam and the distance to the edge of the slab. An overhang counts with its own length, which
    the clause does not speak of: common practice.
    """
    return [Zone(s.start, s.end, sum(min(s.length / 8.0, side) for side in layout.sides)) for s in layout.spans]


RULES: dict[str, Callable[[Layout], list[Zone]]] = {"EN 1992-1-1": en_1992, "AISC 360": aisc_360}
"""Rules by the name by which a job asks for them."""

CLAUSES = {"EN 1992-1-1": "EN 1992-1-1:2004, 5.3.2.1", "AISC 360": "AISC 360-16, I3.1a"}
"""Clause of each rule."""


def outside_figure(layout: Layout) -> bool:
    """Whether spans lie outside what EN 1992-1-1, 5.3.2.1(2), lets Figure 5.2 be used for.

    Neighbouring spans should be 2/3 to 1.5 times each other, a cantilever shorter than half its span.
    """
    inner = [s for s in layout.spans if not s.overhang]
    ratios = [a.length / b.length for a, b in pairwise(inner)]
    far = any(not 2.0 / 3.0 - 1e-9 <= ratio <= 1.5 + 1e-9 for ratio in ratios)
    for overhang in (s for s in layout.spans if s.overhang):
        if inner:
            far |= overhang.length >= 0.5 * (inner[0] if overhang.label == "left" else inner[-1]).length
    return far
