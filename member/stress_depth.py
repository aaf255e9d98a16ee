"""Stress over the depth of one cross-section under a combination, part by part."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.extremes import values_at
from fishbelly.member.inclined_stress import whole_plates
from fishbelly.member.part_forces import loadings, stress_planes
from fishbelly.member.profile import group_places
from fishbelly.member.stage_view import stage_number

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
    """Stress of every part at x, all `pattern` loads on.

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
    line, loading = analysis.frame.line, loadings(analysis, combined)
    for k, index in enumerate(group.placed.index):
        planes = stress_planes(loading, index)
        if planes is not None:
            v0, v1, v2 = values_at(analysis.profile.panels, planes.sum(axis=0), np.array([x]), side)[:, 0]
            total[k] = v0 + v1 * (z[k] - line[0]) + v2 * (-y[k] - line[1])
    total *= whole_plates(group)
    return tuple(PartLine(i, z[k], total[k]) for k, i in enumerate(group.placed.index) if np.all(np.isfinite(z[k])))
