"""Spans between neighbouring supports that hold down, and overhangs."""

from __future__ import annotations

from collections.abc import Collection
from dataclasses import dataclass, replace
from itertools import pairwise

from fishbelly.member.description import Member


@dataclass(frozen=True)
class Span:
    """A span or an overhang.

    Parameters
    ----------
    label : int or str
        Number from the left, or "left" or "right" for an overhang.
    start, end : float
        From and to [m].
    merged : tuple of int
        Numbers of the spans it takes in, where a bearing between them has lifted off.
    """

    label: int | str
    start: float
    end: float
    merged: tuple[int, ...] = ()

    @property
    def length(self) -> float:
        """Length [m]."""
        return self.end - self.start

    def answers(self, labels: Collection[int | str]) -> bool:
        """Whether any of some labels means this span."""
        return self.label in labels or any(k in labels for k in self.merged)

    @property
    def overhang(self) -> bool:
        """Whether one end is free."""
        return isinstance(self.label, str)

    @property
    def root(self) -> float:
        """The supported end of an overhang [m]."""
        return self.end if self.label == "left" else self.start


def spans(member: Member, lifted: Collection[str] = ()) -> tuple[Span, ...]:
    """Spans and overhangs from left to right; supports at one place count once.

    A bearing that has lifted off ends no span: those on its two sides become one, under the lower number.
    """
    every = _between(member, ())
    if not lifted:
        return every
    now = _between(member, lifted)
    numbered = [s for s in every if not s.overhang]
    found = []
    for span in now:
        inside = tuple(int(s.label) for s in numbered if s.start > span.start - 1e-9 and s.end < span.end + 1e-9)
        found.append(span if span.overhang or not inside else replace(span, label=inside[0], merged=inside))
    return tuple(found)


def _between(member: Member, lifted: Collection[str]) -> tuple[Span, ...]:
    places = sorted({s.at for s in member.supports if s.down > 0.0 and s.name not in lifted})
    tiny = 1e-9 * member.length
    places = [x for k, x in enumerate(places) if k == 0 or x - places[k - 1] > tiny]
    if not places:
        return ()
    found = [Span(k + 1, a, b) for k, (a, b) in enumerate(pairwise(places))]
    left = [Span("left", 0.0, places[0])] if places[0] > tiny else []
    right = [Span("right", places[-1], member.length)] if member.length - places[-1] > tiny else []
    return tuple(left + found + right)
