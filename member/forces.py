"""Forces of the member at the grid points."""

from __future__ import annotations

from collections.abc import Sequence
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

    @property
    def any(self) -> bool:
        """Whether there is any force at all."""
        return bool(np.any(self.N) or np.any(self.V) or np.any(self.M))

    def atom(self, k: int) -> Forces:
        """Return one of several sets stacked in front of (K, n)."""
        return Forces(self.N[k], self.V[:, k], self.M[:, k])

    @classmethod
    def stacked(cls, several: Sequence[Forces]) -> Forces:
        """Stack sets on a new axis, in front of (K, n)."""
        N = np.stack([f.N for f in several])
        return Forces(N, *(np.stack([getattr(f, k) for f in several], axis=1) for k in "VM"))

    @classmethod
    def none(cls, shape: tuple[int, ...]) -> Forces:
        """Return no forces, on a grid of shape (K, n)."""
        return cls(np.zeros(shape), np.zeros((2, *shape)), np.zeros((2, *shape)))
