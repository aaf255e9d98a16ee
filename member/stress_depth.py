"""Stress over the depth of one cross-section under a combination, part by part."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.extremes import values_at
from fishbelly.member.free_strain import free_plane
from fishbelly.member.geometry import Geometry
from fishbelly.member.inclined_stress import whole_plates
from fishbelly.member.profile import Group, group_places

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


def stress_over_depth(analysis: Analysis, combination: str, x: float, side: str = "right") -> tuple[PartLine, ...]:
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
    combined = analysis.combine(chosen)
    group = group_places(Geometry(member), np.array([[x]]), np.array([x]), 0, side)[0]
    low, high = group.composition.extent
    z = np.stack((low[:, 0], high[:, 0]), axis=1)
    y = np.array([b.middle_y[0] for b in group.composition.boxes])
    total = np.zeros(z.shape)
    panels, line = analysis.profile.panels, analysis.frame.line
    for share in combined.shares:
        r = analysis.responses(share.key, combined.lifted).combined(share.factors)
        axial, k_z, k_y = (
            float(values_at(panels, f, np.array([x]), side)[0]) for f in (r.axial, r.curvature[0], r.curvature[1])
        )
        strain = axial - k_z * (z - line[0]) - (k_y * (-y - line[1]))[:, None]
        strain = strain - _free(analysis, share.factors, group, x, side, y, z)
        total += group.modulus(analysis.moduli(share.key).E)[:, :1] * strain
    total *= whole_plates(group)
    return tuple(PartLine(i, z[k], total[k]) for k, i in enumerate(group.placed.index) if np.all(np.isfinite(z[k])))


def _free(analysis: Analysis, factors: Array, group: Group, x: float, side: str, y: Array, z: Array) -> Array:
    """Free strain of the parts at their two levels, shape (P, 2)."""
    total = np.zeros(z.shape)
    # a load that begins or ends at x acts on one side of it only
    place = np.array([np.nextafter(x, -np.inf if side == "left" else np.inf)])
    for factor, actions in zip(factors, analysis.loads, strict=True):
        for load in actions.free if factor else ():
            plane = free_plane(analysis.profile, load, group, place, analysis.frame.short)
            if plane is not None:
                total += factor * (plane.e + plane.a * z + plane.b * y[:, None])
    return total
