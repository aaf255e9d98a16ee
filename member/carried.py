"""Force and couples that a part carries along the member, and the shear flow into it.

The flow is q = dF/dx of the part's own force: right for tapers, thrust, stages and free strain at once.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.panels import Panels
from fishbelly.member.part_forces import Loading, resultants

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class PartForce:
    """What a part carries along the member, piece by piece; zero where it is not.

    Parameters
    ----------
    N : ndarray, shape (J + 1, K, n)
        Axial force in it, tension positive [N].
    M : ndarray, shape (2, J + 1, K, n)
        Couple about its own centroid in both planes, sagging positive in the vertical one [N m].
    about_line : ndarray, shape (2, J + 1, K, n)
        The same about the analysis line [N m].
    flow : ndarray, shape (J + 1, K, n)
        Shear flow into it, dN/dx within a panel [N/m].
    first, stop : int
        Panels in which it is, one past the last.
    """

    N: Array
    M: Array
    about_line: Array
    flow: Array
    first: int
    stop: int


def part_force(loading: Sequence[Loading], index: int) -> PartForce | None:
    """Force, couples and shear flow of a part, from the planes of its stress and its net area moments.

    Parameters
    ----------
    loading : sequence of Loading
        Shares and steps of a combination; some of them give what those do to the part.
    index : int
        Number of the part.

    Returns
    -------
    PartForce or None
        None where the part is not there in the stage asked for, or nothing of the loading has met it.
    """
    carried = resultants(loading, index)
    if carried is None:
        return None
    end = loading[0].end
    moments = end.profile.part_moments(index, end.line)
    area = np.where(moments[0] > 0.0, moments[0], 1.0)
    own = carried.M + carried.N * (moments[1:3] / area)[:, None]
    panels, part = end.profile.panels, end.profile.member.parts[index]
    first, stop = panels.border(part.start), panels.border(part.end)
    return PartForce(carried.N, own, carried.M, rate(panels, carried.N), first, stop)


def rate(panels: Panels, field: Array) -> Array:
    """Derivative along x of a field (..., K, n), panel by panel: jumps at breaks are not in it."""
    return np.asarray(field @ panels.rule.differentiate.T / panels.stretch)
