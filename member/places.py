"""Which places along the member a table lists, and on which sides."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.breakpoints import breakpoints, merged
from fishbelly.member.description import Member
from fishbelly.member.loads import Axial, Couple, Point

Array = NDArray[np.float64]

EVEN = 101
"""How many places the default table spaces evenly over the member."""


def default_places(member: Member) -> Array:
    """An even 101 places and every break [m]."""
    return merged([*np.linspace(0.0, member.length, EVEN).tolist(), *breakpoints(member).tolist()], member.length)


def places_along(member: Member, equal: int | None) -> list[float]:
    """Borders of equal steps, or the breaks alone where no number of steps is given [m]."""
    if equal is not None:
        return [float(x) for x in np.linspace(0.0, member.length, equal + 1)]
    return [float(x) for x in breakpoints(member)]


def force_jumps(member: Member) -> list[float]:
    """Places of supports, hinges, and loads that act at a point [m]."""
    places = [s.at for s in member.supports] + [h.at for h in member.hinges]
    return places + [v.at for v in member.loads if isinstance(v, (Point, Couple, Axial))]


def two_sided(x: Array, jumps: Iterable[float], length: float) -> tuple[Array, list[str]]:
    """List places with their sides: twice where something jumps, once just inside at the two ends.

    Returns
    -------
    x : ndarray, shape (X,)
        Places, those that jump twice [m].
    side : list of str
        "left" or "right" for each.
    """
    tiny = 1e-9 * length
    jumping = np.sort(np.fromiter(jumps, dtype=float))
    places, sides = [], []
    for value in x:
        if value <= tiny:
            found = ["right"]
        elif value >= length - tiny:
            found = ["left"]
        else:
            k = int(np.searchsorted(jumping, value - tiny))
            found = ["left", "right"] if k < jumping.size and jumping[k] <= value + tiny else ["right"]
        places += [float(value)] * len(found)
        sides += found
    return np.array(places), sides
