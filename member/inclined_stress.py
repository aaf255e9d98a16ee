"""What inclined flanges do to stresses: their own along their slope, and the shear force they take off the webs."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.part_forces import Loading, share_plane
from fishbelly.member.profile import Group, Profile
from fishbelly.sections.outlines import Outline

Array = NDArray[np.float64]

_EDGE = 1e-9
"""A fibre so close to a flange, of its size, belongs to it: where web and flange meet the flange speaks."""


def any_inclined(profile: Profile) -> bool:
    """Whether anything in a profile counts along its slope."""
    return any(g.placed.flanges for g in profile.groups)


def along_plates(profile: Profile, index: int, y: Array, z: Array) -> Array | None:
    """Stress along an inclined plate over E times the strain along the member: cos² of its angle, else 1.

    Parameters
    ----------
    profile : Profile
        The sampled member.
    index : int
        Number of the part.
    y, z : ndarray, shape (C, K, n)
        Fibres of the part [m].

    Returns
    -------
    ndarray, shape (C, K, n), or None
        None where the part has no inclined flange. A part that stands askew keeps 1, which is never too little.
    """
    found = np.ones(y.shape)
    touched = False
    for group in profile.groups:
        for flange in (f for f in group.placed.flanges if group.placed.index[f.part] == index):
            if 1e-9 < max(abs(v) for v in flange.normal) < 1.0 - 1e-9:
                continue
            touched = True
            factor = np.ones(profile.rows)
            factor[group.rows] = flange.along
            for loop in _loops(flange.outline):
                inside = _inside(profile, group, loop, y, z)
                found = np.where(inside, factor[profile.row], found)
    return found if touched else None


def _loops(outline: Outline) -> list[Outline]:
    return [Outline(outline.y[:, a:b], outline.z[:, a:b], outline.bulge[a:b], ((0, b - a),)) for a, b in outline.loops]


def _inside(profile: Profile, group: Group, loop: Outline, y: Array, z: Array) -> NDArray[np.bool_]:
    box = np.full((4, profile.rows), np.nan)
    box[:, group.rows] = loop.bounds()
    left, bottom, right, top = box[:, profile.row]
    near = _EDGE * (right - left + top - bottom)
    # comparisons with NaN are false: places of other groups are outside
    inside = (y >= left - near) & (y <= right + near) & (z >= bottom - near) & (z <= top + near)
    return np.asarray(inside)


def whole_plates(group: Group) -> Array:
    """Cosine squared of parts that are inclined plates as a whole, 1 for others, shape (P, S)."""
    found = np.ones(group.placed.run_in.shape)
    for flange, part in ((f, group.placed.outlines[f.part]) for f in group.placed.flanges):
        if flange.outline.bulge.size == part.bulge.size and not np.any(part.bulge):
            found[flange.part] = flange.along
    return found


def shear_in_webs(share: Loading, plane: int, line: Array) -> Array:
    """Shear force that is left for the webs: V less what flanges carry along their slope.

    The force F of a flange inclined by alpha has the part F tan(alpha) across the member; in an I-section with one
    sloping flange this leaves V - M tan(alpha) / h.

    Parameters
    ----------
    share : Loading
        A share of a combination in one step.
    plane : {0, 1}
        0 vertical, 1 across.
    line : ndarray, shape (2,)
        The analysis line.

    Returns
    -------
    ndarray, shape (J + 1, K, n)
        Shear force [N].
    """
    V = np.asarray(share.response.V[plane])
    profile = share.step.frame.profile
    for index, arms in _arms(profile, plane, line).items():
        stress = share_plane(share, index)
        if stress is not None:
            V = V + np.einsum("jckn,ckn->jkn", stress, arms[:, profile.row])
    return V


def _arms(profile: Profile, plane: int, line: Array) -> dict[int, Array]:
    """By part: what its stress plane v[0] + v[1] c0 + v[2] c1 makes of force across the member, shape (3, R)."""
    found: dict[int, Array] = {}
    for group in profile.groups:
        for flange, net in zip(group.placed.flanges, group.flange_moments, strict=True):
            n_y, n_z = flange.normal
            turned = n_z if plane == 0 else -n_y
            force = net.area * flange.share * flange.rise * turned
            index = group.placed.index[flange.part]
            arms = found.setdefault(index, np.zeros((3, profile.rows)))
            arms[:, group.rows] += (force, force * (net.z - line[0]), force * (-net.y - line[1]))
    return found
