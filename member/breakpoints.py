"""Every place along the member where something begins, ends or changes its law."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member, Part
from fishbelly.member.laws import Law
from fishbelly.member.loads import Distributed, SelfWeight, Shrinkage, Temperature
from fishbelly.member.openings import haunch_crossings, notch_span, opening_breaks

Array = NDArray[np.float64]


def distinct(values: Array) -> Array:
    """Return the different values in order, shape (n,); `numpy.unique` alone would cost a start-up 20 ms."""
    x = np.sort(np.ravel(values))
    return x[np.concatenate(([True], np.diff(x) > 0.0))] if x.size else x


def part_laws(part: Part) -> list[Law]:
    """Return every law of a part: dimensions, gap, shift and position."""
    place = part.place
    laws = [*part.shape.dimensions.values(), place.gap, *place.shift]
    return laws + list(place.position or ())


def geometry_breaks(member: Member) -> list[float]:
    """Places where the cross-section may jump or change its law [m], not sorted."""
    places: list[float] = []
    for part in member.parts:
        places += [part.start, part.end, part.start + part.run_in[0], part.end - part.run_in[1]]
        for law in part_laws(part):
            inside = law.knots[(law.knots > part.start) & (law.knots < part.end)]
            places += inside.tolist()
    for notch in member.notches:
        part = member.part(notch.of)
        places += [
            *notch_span(notch, part.start, part.end, True),
            *notch_span(notch, part.start, part.end, False),
        ]
        places += notch.depth.knots[(notch.depth.knots > notch.start) & (notch.depth.knots < notch.end)].tolist()
    for haunch in member.haunches:
        places += [haunch.at - haunch.reach[0], haunch.at, haunch.at + haunch.reach[1]]
    places += haunch_crossings(member)
    for opening in member.openings:
        places += opening_breaks(opening)
    return places


def load_breaks(member: Member) -> list[float]:
    """Places where a load begins, ends or changes its law [m], not sorted."""
    places: list[float] = []
    for load in member.loads:
        if isinstance(load, Distributed):
            places += [x for x, _ in load.stations]
        elif isinstance(load, (Temperature, Shrinkage)):
            places += [load.start, load.end]
        elif not isinstance(load, SelfWeight) and hasattr(load, "at"):
            places.append(load.at)
    return places


def breakpoints(member: Member, more: Iterable[float] = ()) -> Array:
    """Every break of the member, from 0 to its length.

    Parameters
    ----------
    member : Member
        The description.
    more : iterable of float
        Further places [m].

    Returns
    -------
    ndarray, shape (n,)
        Increasing places [m]; two places closer than 1e-11 of the length are one.
    """
    places = geometry_breaks(member) + load_breaks(member)
    places += [s.at for s in member.supports] + [h.at for h in member.hinges] + [s.at for s in member.stations]
    places += [x for limit in member.limits for x in (limit.start, limit.end) if x is not None]
    if isinstance(member.camber, Law):
        places += member.camber.knots.tolist()
    return merged([*places, *more], member.length)


def merged(places: Iterable[float], length: float) -> Array:
    """Sort places, clip them to the member and merge those that are one within round-off."""
    x = distinct(np.clip(np.fromiter(places, dtype=float), 0.0, length))
    x = distinct(np.concatenate(([0.0], x, [length])))
    keep = np.concatenate(([True], np.diff(x) > 1e-11 * length))
    x = x[keep]
    x[-1] = length
    return x
