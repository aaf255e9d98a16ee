"""Spans between neighbouring supports that hold down, and overhangs."""

from __future__ import annotations

from dataclasses import dataclass
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
    """

    label: int | str
    start: float
    end: float

    @property
    def length(self) -> float:
        """Length [m]."""
        return self.end - self.start

    @property
    def overhang(self) -> bool:
        """Whether one end is free."""
        return isinstance(self.label, str)

    @property
    def root(self) -> float:
        """The supported end of an overhang [m]."""
        return self.end if self.label == "left" else self.start


def spans(member: Member) -> tuple[Span, ...]:
    """Spans and overhangs from left to right; supports at one place count once."""
    places = sorted({s.at for s in member.supports if s.down > 0.0})
    tiny = 1e-9 * member.length
    places = [x for k, x in enumerate(places) if k == 0 or x - places[k - 1] > tiny]
    if not places:
        return ()
    found = [Span(k + 1, a, b) for k, (a, b) in enumerate(pairwise(places))]
    left = [Span("left", 0.0, places[0])] if places[0] > tiny else []
    right = [Span("right", places[-1], member.length)] if member.length - places[-1] > tiny else []
    return tuple(left + found + right)
