"""Where the member runs out to a point: is the deflection there finite, and has it a slope?

On the panel that touches the point strains follow a power of the distance from it. Curvature as distance^e gives a
finite slope for e > -1 and a finite deflection for e > -2; a shear angle a finite deflection for e > -1.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.faults import NoStiffness
from fishbelly.member.panels import Panels
from fishbelly.member.response import Response

Array = NDArray[np.float64]

_ROUND = 0.04
"""How far a fitted exponent may lie from the true one."""


@dataclass(frozen=True)
class Apexes:
    """Borders of the grid at which the slope is infinite, by side: border numbers."""

    left_of: frozenset[int]
    right_of: frozenset[int]


def exponent(distance: Array, values: Array) -> float | None:
    """Power of the distance that values follow, from the three points nearest the end; None where all vanish."""
    size = np.abs(values)
    if not size[0] or not size[2] or size.max() == 0.0:
        return None
    return float(np.log(size[2] / size[0]) / np.log(distance[2] / distance[0]))


def judge(panels: Panels, r: Response) -> Apexes:
    """Look at every anchored panel end.

    Raises
    ------
    NoStiffness
        When the deflection is infinite there.
    """
    left_of, right_of = set(), set()
    size_k = np.abs(r.curvature).max(axis=(1, 2))
    size_s = np.abs(r.shear).max(axis=(1, 2))
    for k in np.flatnonzero(panels.anchor):
        at_a = panels.anchor[k] < 0
        end = panels.a[k] if at_a else panels.b[k]
        order = slice(None) if at_a else slice(None, None, -1)
        distance = np.abs(panels.x[k] - end)[order]
        if distance[0] <= 0.0:
            continue
        steep = False
        for p in (0, 1):
            bent = exponent(distance, r.curvature[p, k][order]) if size_k[p] else None
            slid = exponent(distance, r.shear[p, k][order]) if size_s[p] else None
            if (bent is not None and bent < -2.0 + _ROUND) or (slid is not None and slid < -1.0 + _ROUND):
                raise NoStiffness(float(end), "the member runs out to a point there and still has to carry load")
            steep |= (bent is not None and bent < -1.0 + _ROUND) or (slid is not None and slid < -_ROUND)
        if steep:
            (right_of if at_a else left_of).add(int(k) if at_a else int(k) + 1)
    return Apexes(frozenset(left_of), frozenset(right_of))
