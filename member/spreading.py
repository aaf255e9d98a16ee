"""Responses of some atoms as responses of all of them."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.response import Response

Array = NDArray[np.float64]


def nothing(count: int, shape: tuple[int, ...], supports: int) -> Response:
    """Return the response of `count` atoms that do nothing, on a grid of shape (K, n)."""
    one, two = np.zeros((count, *shape)), np.zeros((2, count, *shape))
    return Response(one, two, two, one, two, two, two, two, np.zeros((count, supports, 5)))


def spread(r: Response, which: Sequence[int], count: int) -> Response:
    """A response of some atoms as one of all of them, nothing for the others."""
    if list(which) == list(range(count)):
        return r
    single = ("N", "axial", "reactions")
    fields = []
    for name in Response.__dataclass_fields__:
        v = getattr(r, name)
        axis = 0 if name in single else 1
        full = np.zeros((*v.shape[:axis], count, *v.shape[axis + 1 :]))
        full[(slice(None),) * axis + (list(which),)] = v
        fields.append(full)
    return Response(*fields)


def spread_planes(v: Array, which: Sequence[int], count: int) -> Array:
    """Planes (3, a, K, n) of some atoms as planes of all of them."""
    full = np.zeros((3, count, *v.shape[2:]))
    full[:, list(which)] = v
    return full
