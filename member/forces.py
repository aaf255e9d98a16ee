"""Forces of the member at the grid points."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Forces:
    """Forces at the grid points: N (K, n), V and M (2, K, n), M about the analysis line."""

    N: Array
    V: Array
    M: Array

    def plus(self, other: Forces, factor: float = 1.0) -> Forces:
        """Return the sum with another set, multiplied by a factor."""
        return Forces(self.N + factor * other.N, self.V + factor * other.V, self.M + factor * other.M)

    @classmethod
    def none(cls, shape: tuple[int, ...]) -> Forces:
        """Return no forces, on a grid of shape (K, n)."""
        return cls(np.zeros(shape), np.zeros((2, *shape)), np.zeros((2, *shape)))
