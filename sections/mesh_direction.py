"""The direction in which a section is cut for its mesh: along most of its edges.

Slabs with edges that are level but for a hair are needles; a section turned by a small angle is turned back first.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.composition import Composition

Array = NDArray[np.float64]

_SAME = 1e-9
"""Edges whose directions differ by less are parallel [rad]."""


def main_direction(section: Composition) -> float:
    """Angle, from -45 to 45 degrees, of most straight edges from level or upright, the same at all stations [rad].

    Zero where edges that are level or upright are as long together as those of any other direction.
    """
    angles, lengths = [], []
    for outline in (*section.outlines, *(c[0] for c in section.cuts)):
        y, z = outline.ends
        straight = outline.bulge == 0.0
        dy, dz = (y - outline.y)[:, straight], (z - outline.z)[:, straight]
        quarter = np.arctan2(dz, dy)
        angles.append(quarter - 0.5 * np.pi * np.round(quarter / (0.5 * np.pi)))
        lengths.append(np.hypot(dy, dz))
    angle, length = np.hstack(angles), np.hstack(lengths)
    if not angle.size or not np.any(np.abs(angle) > _SAME):
        return 0.0
    steady = np.ptp(angle, axis=0) < _SAME
    angle, weight = angle[0, steady], length[:, steady].mean(axis=0)
    if not angle.size:
        return 0.0
    total = ((np.abs(angle[:, None] - angle) < _SAME) * weight).sum(axis=1)
    level = float(weight[np.abs(angle) < _SAME].sum())
    k = int(total.argmax())
    return 0.0 if total[k] <= level * (1.0 + 1e-9) else float(angle[k])


def turned_section(section: Composition, angle: float) -> Composition:
    """Return a section turned anticlockwise about the datum by an angle [rad]."""
    if angle == 0.0:
        return section
    cuts = tuple((o.turned(angle), targets, mass) for o, targets, mass in section.cuts)
    return Composition(tuple(o.turned(angle) for o in section.outlines), cuts)
