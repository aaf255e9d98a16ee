"""Stress at a level of one cross-section under a combination: normal, shear, and what they come to together.

Normal stress is that of the stress planes, so that stages, free strain and slip are in it; shear stress is the mean
over the width that the level meets, from the flow of `level_flow`. Principal stresses are those of the two, with no
stress square to the axis: O. Mohr's circle, as in S. Timoshenko, Strength of Materials I, 3rd ed., van Nostrand, 1955
(from memory). Twist and the shear that flanges carry sideways are not in them.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from fishbelly.member.analysis import Analysis
from fishbelly.member.cracked_results import cracked_cases
from fishbelly.member.faults import CannotCompute
from fishbelly.member.level_flow import Flows
from fishbelly.member.level_geometry import LevelSite, Slab, leaning_at, on_level
from fishbelly.member.part_forces import loadings
from fishbelly.member.stage_view import stage_number

_TIP = 1e-3
"""Share of a stretch of levels; where the section runs out to a point shear stress is carried on from there."""
_NARROW = 1e-6
"""A width below this share of that in the middle of its stretch is a point."""
_EQUAL = 1e-9
"""Stresses below and above a level that differ by less than this share are one."""


class LevelOutside(ValueError):
    """A level at which the section has nothing.

    Parameters
    ----------
    z : float
        The level [m].
    low, high : float
        Lowest and highest level of the section [m].
    """

    def __init__(self, z: float, low: float, high: float) -> None:
        super().__init__(f"nothing is met at z = {z:.6g} m; the section is between {low:.6g} m and {high:.6g} m")
        self.z, self.low, self.high = z, low, high


@dataclass(frozen=True)
class FibreStress:
    """Stress of one part at a level.

    Parameters
    ----------
    part : str
        Name of the part.
    z : float
        The level [m].
    side : {"both", "below", "above"}
        Whether it is just below or just above the level, where the two differ.
    normal : float
        Stress along the part in the middle of what the level meets of it, tension positive [Pa].
    ends : tuple of float
        The same at the left and right end of that [Pa].
    shear : float
        Mean shear stress over the width, positive as V [Pa].
    principal : tuple of float
        Largest and smallest principal stress [Pa].
    tau_max : float
        Largest shear stress in the vertical plane, half of their difference [Pa].
    angle : float
        Direction of the first principal stress from the member's axis, positive where it rises along x [rad].
    """

    part: str
    z: float
    side: str
    normal: float
    ends: tuple[float, float]
    shear: float
    principal: tuple[float, float]
    tau_max: float
    angle: float


def fibre_stresses(
    analysis: Analysis,
    x: float,
    levels: Sequence[float],
    combination: str | None = None,
    side: str = "right",
    stage: str | None = None,
) -> tuple[FibreStress, ...]:
    """Stress of every part met at some levels of the cross-section at x, all `pattern` loads on.

    Parameters
    ----------
    analysis : Analysis
        The member.
    x : float
        Place [m].
    levels : sequence of float
        Levels [m].
    combination : str, optional
        Name of one of its combinations; default the first.
    side : {"right", "left"}
        Which side of a break.
    stage : str, optional
        Stage at whose end it is; default the last.

    Returns
    -------
    tuple of FibreStress
        Level by level; where what lies just below a level differs from what lies just above, both.

    Raises
    ------
    KeyError
        When there is no such combination or stage.
    LevelOutside
        When a level meets nothing.
    CannotCompute
        When the numbers cannot be had: the member is cracked under the combination, or cannot stand.
    """
    member = analysis.member
    side = "left" if x >= member.length * (1.0 - 1e-12) else "right" if x <= member.length * 1e-12 else side
    names = [c.name for c in member.combinations]
    if combination is not None and combination not in names:
        raise KeyError(f"no combination is called {combination}")
    which = 0 if combination is None else names.index(combination)
    number = stage_number(member, stage)
    if cracked_cases(analysis)[which] is not None:
        raise CannotCompute(
            f"combination {names[which]} cracks the member: stress at a level is that of whole sections"
        )
    upto = number if number < len(analysis.views) - 1 else None
    loading = loadings(analysis, analysis.combine(member.combinations[which], upto=upto))
    flows = Flows(LevelSite.at(analysis.frames[number].profile, x, side), loading)
    return tuple(found for z in levels for found in _at_level(flows, z))


def _at_level(flows: Flows, z: float) -> list[FibreStress]:
    """Stress of every part at one level."""
    site = flows.site
    low, high = site.extent
    below, over = site.slabs(z)
    if below is over:
        found = _in_slab(flows, below, z, "both") if below is not None else []
    else:
        lower = _in_slab(flows, below, z, "below") if below is not None else []
        upper = _in_slab(flows, over, z, "above") if over is not None else []
        found = _merged(lower, upper)
    if not found:
        raise LevelOutside(z, low, high)
    return found


def _merged(lower: list[FibreStress], upper: list[FibreStress]) -> list[FibreStress]:
    """Both sides of a level, parts in which they are the same once."""
    mates = {f.part: f for f in upper}
    same = set()
    for f in lower:
        mate = mates.get(f.part)
        if mate is not None:
            size = max(abs(f.normal), abs(f.shear), abs(mate.normal), abs(mate.shear))
            if max(abs(f.normal - mate.normal), abs(f.shear - mate.shear)) <= _EQUAL * size:
                same.add(f.part)
    first = [replace(f, side="both") if f.part in same else f for f in lower]
    return first + [f for f in upper if f.part not in same]


def _in_slab(flows: Flows, slab: Slab, z: float, side: str) -> list[FibreStress]:
    """Stress of every part met by a level, taken as the bound of one stretch of levels."""
    site = flows.site
    met = on_level(site, slab)
    low, high = site.edges[0, slab.number : slab.number + 2]
    widest = float(on_level(site, Slab.of(site, slab.number, 0.5 * float(low + high))).width.sum())
    if met.width.sum() > _NARROW * widest:
        shear = flows.shears(slab)
    else:
        # the section runs out to a point: flow and width vanish, their quotient does not
        inwards = float(high - low) * (_TIP if slab.share < 0.5 else -_TIP)
        near, far = (Slab.of(site, slab.number, slab.z + k * inwards) for k in (1.0, 2.0))
        shear, met = 2.0 * flows.shears(near) - flows.shears(far), on_level(site, near)
    found = []
    for k, i in enumerate(site.group.placed.index):
        if met.width[k] > _NARROW * met.width.sum():
            places = (met.first[k] / met.width[k], met.left[k], met.right[k])
            along = [flows.stress(i, float(y), z) for y in places]
            name = site.profile.member.parts[i].name
            found.append(_fibre(name, z, side, along, float(shear[k]), leaning_at(site, slab, k)))
    return found


def _fibre(part: str, z: float, side: str, along: Sequence[float], shear: float, slope: float | None) -> FibreStress:
    """Put stress along x and shear stress together; in a flange that leans they are turned along it.

    A flange carries stress along itself alone: E times the strain along x times cos², so that its own shear stress
    is what is left of that on the upright section, (tau - sigma sin cos) / (cos² - sin²).
    """
    lean = 0.0 if slope is None else float(np.arctan(slope))
    s, c = np.sin(lean), np.cos(lean)
    normal, left, right = (float(v * c * c) for v in along)
    # on the face towards +x, upwards: V positive goes down there
    tau = float((-shear - normal * s * c) / (c * c - s * s))
    radius = float(np.hypot(0.5 * normal, tau))
    angle = lean + 0.5 * float(np.arctan2(2.0 * tau, normal)) if radius else 0.0
    return FibreStress(
        part,
        z,
        side,
        normal,
        (left, right),
        -tau + 0.0,
        (0.5 * normal + radius, 0.5 * normal - radius),
        radius,
        angle + 0.0,
    )
