"""What results tell of flanges and plates that count along their slope."""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member
from fishbelly.member.geometry import Geometry
from fishbelly.member.profile import Group, group_places

Array = NDArray[np.float64]
Data = dict[str, Any]


def inclined_there(member: Member, group: Group, station: int) -> list[Data]:
    """Flanges and plates that run inclined at one place of a group.

    Returns
    -------
    list of dict
        ``part``, ``flange`` ("top", "bottom", or "all" for a plate) and ``angle`` to the axis [rad].
    """
    found = []
    for flange in group.placed.flanges:
        part = member.parts[group.placed.index[flange.part]]
        angle = float(np.arctan(abs(flange.rise[station])))
        if angle > 0.0:
            face = "all" if part.shape.kind == "rectangle" else flange.face
            found.append({"part": part.name, "flange": face, "angle": angle})
    return found


def inclined_at(member: Member, x: Array, sides: list[str], works: frozenset[int] | None = None) -> list[list[Data]]:
    """Flanges and plates that run inclined at places, each seen from one side; `works`: parts that work, if not all."""
    found: list[list[Data]] = [[] for _ in sides]
    geometry = Geometry(member, works)
    if not geometry.may_incline:
        return found
    for side in ("left", "right"):
        which = np.flatnonzero(np.array(sides) == side)
        if which.size:
            for g in group_places(geometry, x[which][:, None], x[which], 0, side):
                for station, row in enumerate(which[g.rows]):
                    found[row] = inclined_there(member, g, station)
    return found


def along_at_levels(group: Group, part: int, levels: tuple[float, float]) -> list[float]:
    """Stress over E times strain at the lowest and highest level of a part at the first place of a group."""
    result = [1.0, 1.0]
    for flange in (f for f in group.placed.flanges if f.part == part):
        _, bottom, _, top = (float(v[0]) for v in flange.outline.bounds())
        near = 1e-9 * (top - bottom)
        for k, z in enumerate(levels):
            if bottom - near <= z <= top + near and abs(flange.normal[1]) > 1.0 - 1e-9:
                result[k] = float(flange.along[0])
    return result
