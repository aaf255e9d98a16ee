"""Where the member runs out to a point: whether its deflection there is finite, and whether it has a slope.

On the panel that touches the point strains follow a power of the distance from it. Curvature as distance^e gives a
finite slope for e > -1 and a finite deflection for e > -2; a shear angle a finite deflection for e > -1.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.faults import NoStiffness
from fishbelly.member.panels import Panels
from fishbelly.member.profile import Profile
from fishbelly.member.response import Response
from fishbelly.member.section_law import run_out

Array = NDArray[np.float64]

_ROUND = 0.04
"""How far a fitted exponent may lie from the true one."""


@dataclass(frozen=True)
class Apexes:
    """Borders of the grid at which the slope is infinite, by side: border numbers."""

    left_of: frozenset[int]
    right_of: frozenset[int]


def pinched_at(profile: Profile) -> float | None:
    """Place inside the member where the section runs out to nothing and no supported hinge makes that right [m]."""
    panels, member = profile.panels, profile.member
    tiny = 1e-9 * member.length
    for k, _, _ in panels.apexes:
        x = float(panels.a[k] if panels.anchor[k] < 0 else panels.b[k])
        inside = tiny < x < member.length - tiny
        hinged = any(abs(h.at - x) < tiny for h in member.hinges)
        held = any(abs(s.at - x) < tiny and s.down > 0.0 for s in member.supports)
        if inside and not (hinged and held):
            return x
    return None


def judge(panels: Panels, r: Response) -> Apexes:
    """Look at every point in which the member ends.

    Raises
    ------
    NoStiffness
        When the deflection is infinite there.
    """
    left_of: set[int] = set()
    right_of: set[int] = set()
    for apex in panels.apexes:
        k, _other, _ = apex
        at_a = panels.anchor[k] < 0
        steep = False
        for p in (0, 1):
            bent, slid = _power(r.curvature[p], apex), _power(r.shear[p], apex)
            if bent < -2.0 + _ROUND or slid < -1.0 + _ROUND:
                end = float(panels.a[k] if at_a else panels.b[k])
                raise NoStiffness(end, "the member runs out to a point there and still has to carry load")
            steep |= bent < -1.0 + _ROUND or slid < -_ROUND
        if steep:
            (right_of if at_a else left_of).add(k if at_a else k + 1)
    return Apexes(frozenset(left_of), frozenset(right_of))


def _power(field: Array, apex: tuple[int, int, Array]) -> float:
    """Power of the distance that strains follow; infinite where they vanish there or are round-off."""
    size = np.abs(field).max()
    near = np.abs(field[apex[1]])
    if near.min() <= 1e-12 * size:
        return np.inf
    power = float(run_out(field.copy(), apex))
    return power if np.isfinite(power) else np.inf
