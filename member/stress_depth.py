"""Stress over the depth of one cross-section under a combination, part by part."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.cracking import may_crack
from fishbelly.member.description import Combination
from fishbelly.member.extremes import values_at
from fishbelly.member.inclined_stress import whole_plates
from fishbelly.member.part_forces import loadings, stress_planes
from fishbelly.member.profile import Group, group_places
from fishbelly.member.stage_view import stage_number

if TYPE_CHECKING:
    from fishbelly.member.cracked_found import CrackedResponse

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class PartLine:
    """Stress of one part along the upright through the middle of its width, straight between its two levels.

    Parameters
    ----------
    part : int
        Which part of the member.
    z : ndarray, shape (2,)
        Lowest and highest level of what works of it [m].
    stress : ndarray, shape (2,)
        Stress there, tension positive [Pa].
    """

    part: int
    z: Array
    stress: Array


def stress_over_depth(
    analysis: Analysis, combination: str, x: float, side: str = "right", stage: str | None = None
) -> tuple[PartLine, ...]:
    """Stress of every part at x, all `pattern` loads on; where the member is cracked, at a crack.

    Parameters
    ----------
    analysis : Analysis
        The member.
    combination : str
        Name of one of its combinations.
    x : float
        Place [m].
    side : {"right", "left"}
        Which side of a break.
    stage : str, optional
        Stage at whose end it is; default the last.

    Returns
    -------
    tuple of PartLine
        Parts that are there, in the member's order; those of which nothing is left are left out.

    Raises
    ------
    CannotCompute
        When the member has no answer.
    """
    member = analysis.member
    side = "left" if x >= member.length * (1.0 - 1e-12) else "right" if x <= member.length * 1e-12 else side
    chosen = next(c for c in member.combinations if c.name == combination)
    number = stage_number(member, stage)
    combined = analysis.combine(chosen, upto=number if number < len(analysis.views) - 1 else None)
    geometry = analysis.frames[number].profile.geometry
    group = group_places(geometry, np.array([[x]]), np.array([x]), 0, side)[0]
    low, high = group.composition.extent
    z = np.stack((low[:, 0], high[:, 0]), axis=1)
    y = np.array([b.middle_y[0] for b in group.composition.boxes])
    total = np.zeros(z.shape)
    at_crack = _cracked(analysis, chosen, number)
    if at_crack is not None:
        return _at_crack(at_crack, group, x, side, z, y)
    line, loading = analysis.frame.line, loadings(analysis, combined)
    for k, index in enumerate(group.placed.index):
        planes = stress_planes(loading, index)
        if planes is not None:
            v0, v1, v2 = values_at(analysis.profile.panels, planes.sum(axis=0), np.array([x]), side)[:, 0]
            total[k] = v0 + v1 * (z[k] - line[0]) + v2 * (-y[k] - line[1])
    total *= whole_plates(group)
    return tuple(PartLine(i, z[k], total[k]) for k, i in enumerate(group.placed.index) if np.all(np.isfinite(z[k])))


def _cracked(analysis: Analysis, combination: Combination, number: int) -> CrackedResponse | None:
    """Response of a combination that cracks the member, at the end of a stage; None where nothing cracks."""
    if not may_crack(analysis.member):
        return None
    from fishbelly.member.cracked_results import cracked_cases

    case = cracked_cases(analysis)[analysis.member.combinations.index(combination)]
    found = None if case is None else case.along.at(number)
    return found if found is not None and found.phases else None


def _at_crack(r: CrackedResponse, group: Group, x: float, side: str, z: Array, y: Array) -> tuple[PartLine, ...]:
    """Stress at a crack where the member is cracked; of parts that carry no tension there, what is pressed."""
    from fishbelly.member.cracked_loading import stress_at_crack

    solved, panels, line = r.phases[-1], r.analysis.profile.panels, r.frame.line
    law, place = solved.law, np.array([x])
    cracked = bool(values_at(panels, law.mask.astype(float), place, side)[0] > 0.5)
    found = []
    for k, index in enumerate(group.placed.index):
        v0, v1, v2 = values_at(panels, stress_at_crack(solved, index), place, side)[:, 0]
        levels, stress = z[k], v0 + v1 * (z[k] - line[0]) + v2 * (-y[k] - line[1])
        if index in law.never or (cracked and index in law.cracking):
            if not np.any(stress < 0.0):
                continue
            if np.any(stress > 0.0):
                nought = levels[0] - stress[0] * (levels[1] - levels[0]) / (stress[1] - stress[0])
                levels, stress = np.where(stress > 0.0, nought, levels), np.minimum(stress, 0.0)
        if np.all(np.isfinite(levels)):
            found.append(PartLine(index, levels, stress))
    return tuple(found)
