"""Fields of a combination, piece by piece: everything but pattern loads, then each pattern load."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.part_forces import Loading

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Pieces:
    """Fields of a combination by piece: everything but the patterns first, then each pattern; (J + 1, K, n).

    `M`: moment about the centroid; `M_datum`: about the datum line; `rotation` and `deflection` have a leading
    axis of planes.
    """

    N: Array
    V: Array
    M: Array
    M_datum: Array
    rotation: Array
    shear: Array
    deflection: Array
    reactions: Array


def pieces(analysis: Analysis, loading: Sequence[Loading]) -> Pieces:
    """Sum the shares of a combination, piece by piece."""
    frame = loading[0].end

    def total(name: str) -> Array:
        return np.asarray(sum(getattr(share.response, name) for share in loading))

    N, V, M = total("N"), total("V"), total("M")
    return Pieces(
        N,
        V[0],
        M[0] + N * frame.centre[0],
        M[0] - N * frame.line[0],
        total("rotation"),
        total("shear"),
        total("deflection"),
        total("reactions"),
    )
