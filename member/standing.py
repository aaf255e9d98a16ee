"""How far a part is moved to where it stands: by its anchor, or against the part that carries it.

Everything here is linear in levels, so that it serves rates along x as well: boxes then hold d/dx of edges.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Part
from fishbelly.member.laws import Law
from fishbelly.sections.placing import Bounds, against, anchored

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Stand:
    """Bounding box of a part without haunches, and how far haunches move its bottom, middle and top [m]."""

    box: Bounds
    bottom: Array
    middle: Array
    top: Array


def offset(
    part: Part, box: Bounds, stands: Mapping[str, Stand], value: Callable[[Law], Array]
) -> tuple[Array, Array, Array]:
    """Shift of a part as placed without haunches, and how far haunches of others carry it [m].

    Parameters
    ----------
    part : Part
        The part.
    box : Bounds
        Its box as drawn, or the rates of its edges.
    stands : mapping of str to Stand
        Parts that stand already, or their rates.
    value : callable
        Value of a law at the stations, or its slope.

    Returns
    -------
    dy, dz, carried : ndarray, shape (S,)
        Shift to the right and upwards, and how far haunches move what it stands against.
    """
    place = part.place
    dy0, dz0 = value(place.shift[0]), value(place.shift[1])
    zero = np.zeros(np.shape(dy0))
    if place.relation == "datum":
        dy, dz = anchored(box, place.anchor or "top", 0.0, 0.0)
        return dy + dy0, dz + dz0, zero
    if place.relation == "position":
        assert place.position is not None
        dy, dz = anchored(box, place.anchor or "middle", value(place.position[0]), value(place.position[1]))
        return dy + dy0, dz + dz0, zero
    host = stands[place.host]
    dy, dz = against(box, host.box, place.relation, place.flush, value(place.gap))
    edge = {"under": "bottom", "over": "top"}.get(place.relation, place.flush)
    return dy + dy0, dz + dz0, {"bottom": host.bottom, "top": host.top}.get(edge, host.middle)
