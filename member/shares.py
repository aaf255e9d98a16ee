"""What every part adds to EI_y along the member."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member
from fishbelly.member.profile import group_places
from fishbelly.member.stage_section import in_stage

Array = NDArray[np.float64]


def bending_shares(member: Member, x: Array, sides: list[str], stage: str | None = None) -> Array:
    """Share of each part in EI_y: E (I + A (z - z_c)²) of its own over the sum.

    Parameters
    ----------
    member : Member
        The description.
    x : ndarray, shape (X,)
        Places [m].
    sides : list of {"left", "right"}
        From which side each is seen.
    stage : str, optional
        Stage whose parts and moduli count; default the last.

    Returns
    -------
    ndarray, shape (P, X)
        Shares in the member's order of parts, 0 where a part is not there; each column sums to 1.
    """
    there = in_stage(member, stage)
    geometry, E = there.geometry, there.moduli.E
    result = np.zeros((len(member.parts), x.size))
    for side in ("left", "right"):
        which = np.flatnonzero(np.array(sides) == side)
        if not which.size:
            continue
        for g in group_places(geometry, x[which][:, None], x[which], 0, side):
            m, stiff = g.moments, g.modulus(E)
            z_c = g.stiffness(there.moduli).z_c
            own = stiff * (m.zz + m.area * (np.nan_to_num(m.z) - z_c) ** 2)
            total = own.sum(axis=0)
            result[np.ix_(np.array(g.placed.index), which[g.rows])] = own / np.where(total > 0.0, total, 1.0)
    return result
