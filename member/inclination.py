"""How steeply the faces of parts run along the member."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.inclined import FLANGES, is_plate

Array = NDArray[np.float64]


def steepest_faces(analysis: Analysis) -> list[tuple[str, float, float, bool]]:
    """Steepest lower or upper face of each part that has one above half a degree.

    Returns
    -------
    list of (name, x, angle, counts)
        Part, place [m], angle to the member's axis [rad], and whether a flange or plate runs there, which a vertical
        cut overstates.
    """
    profile = analysis.profile
    panels = profile.panels
    if not any(np.ptp(profile.row[k]) for k in range(panels.count)):
        return []
    found = []
    for index, part in enumerate(analysis.member.parts):
        if part.cuts:
            continue
        best = (0.0, 0.0)
        for face in ("bottom", "top"):
            level = np.full(profile.rows, np.nan)
            for g in profile.groups:
                if index in g.placed.index:
                    level[g.rows] = getattr(g.composition.boxes[g.placed.index.index(index)], face)
            slope = (level[profile.row] @ panels.rule.differentiate.T) / panels.stretch
            slope = np.where(np.isnan(slope), 0.0, np.abs(slope))
            # next to a point in which the member ends, x itself has too few digits for a slope
            slope[(panels.anchor != 0) | (panels.b - panels.a < 1e-6 * analysis.member.length)] = 0.0
            k = np.unravel_index(int(np.argmax(slope)), slope.shape)
            if slope[k] > best[0]:
                best = (float(slope[k]), float(panels.x[k]))
        angle = float(np.arctan(best[0]))
        if angle > np.radians(0.5):
            thin = part.shape.kind in FLANGES or is_plate(analysis.member, part)
            found.append((part.name, best[1], angle, thin))
    return found
