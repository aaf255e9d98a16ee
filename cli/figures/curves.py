"""Values along the member close enough together for a smooth line, from both sides where they jump."""

from __future__ import annotations

import itertools
from collections.abc import Mapping
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.breakpoints import breakpoints
from fishbelly.member.description import Member
from fishbelly.member.extremes import values_at
from fishbelly.member.places import default_places
from fishbelly.member.profile import varies
from fishbelly.member.solved import Result, Solved

Array = NDArray[np.float64]

_BETWEEN, _EVEN = 12, 240


def response_places(member: Member) -> Array:
    """Places for lines of moment, shear, slope and deflection [m]: even ones, and some between every two breaks."""
    breaks = breakpoints(member)
    between = [np.linspace(a, b, _BETWEEN) for a, b in itertools.pairwise(breaks)] if breaks.size < 60 else []
    return np.unique(np.concatenate((breaks, np.linspace(0.0, member.length, _EVEN), *between)))


def section_places(member: Member) -> Array:
    """Places for lines of stiffness [m]: more where the cross-section changes, crowded to the breaks."""
    breaks = breakpoints(member)
    changing = varies(member, breaks[:-1], breaks[1:])
    t = 0.5 - 0.5 * np.cos(np.linspace(0.0, np.pi, _BETWEEN))
    between = [a + (b - a) * t for (a, b), c in zip(itertools.pairwise(breaks), changing, strict=True) if c]
    inside = np.concatenate(between) if between and len(between) < 80 else np.empty(0)
    every = np.unique(np.concatenate((default_places(member), np.clip(inside, 0.0, member.length))))
    # round-off beside a break would be a place of its own
    keep = np.concatenate(([True], np.diff(every) > 1e-9 * member.length))
    return np.asarray(every[keep])


class Curves:
    """A solved member whose fields are drawn, at the end of a stage; default the last."""

    def __init__(self, member: Member, analysis: Analysis | None = None, stage: str | None = None) -> None:
        self.member = member
        self.analysis = Analysis.of(member) if analysis is None else analysis
        self.places = response_places(member)
        self.stage = stage
        self._results: dict[tuple[str, str | None], Result] = {}

    def result(self, combination: Mapping[str, Any], stage: str | None = None) -> Result:
        """Solve a combination of the results, once; at the end of the stage of these curves or of another one."""
        name = str(combination["name"]), stage or self.stage
        if name not in self._results:
            self._results[name] = Solved(self.analysis).combination(*name)
        return self._results[name]

    def along(self, combination: Mapping[str, Any], quantity: str, stage: str | None = None) -> tuple[Array, Array]:
        """Places [m] and values [SI] of a quantity of a combination of the results; every place twice, left first."""
        result = self.result(combination, stage)
        x = np.repeat(self.places, 2)[1:-1]
        left, right = (_at(result, quantity, self.places, side) for side in ("left", "right"))
        y = np.empty(2 * self.places.size)
        y[0::2], y[1::2] = left, right
        y = y[1:-1]
        for end, k in (("left", 0), ("right", -1)):
            if quantity == "slope" and combination["ends"][end]["slope"] is None:
                y[k] = np.nan
        return x, y


def _at(result: Result, quantity: str, places: Array, side: str) -> Array:
    """Values at places; besides the quantities of a result the moment of the sideways plane, of which +y is below."""
    if quantity != "moment across":
        return result.at(quantity, places, side)
    field = result.response.M[1] + result.response.N * result.analysis.frames[result.stage].centre[1]
    return values_at(result.analysis.profile.panels, field, places, side)
