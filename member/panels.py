"""The grid along the member: panels between breaks, Chebyshev points in each."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.chebyshev import Rule, rule

Array = NDArray[np.float64]

POINTS = 17
"""Chebyshev points in a panel."""


@dataclass(frozen=True, eq=False)
class Panels:
    """Panels from one end of the member to the other, K of them.

    A panel may be *anchored* at one end, where the section changes like a root: x - a = (b - a) u² then takes
    the root away, with u from 0 to 1.

    Parameters
    ----------
    a, b : ndarray, shape (K,)
        Ends [m].
    anchor : ndarray of int, shape (K,)
        Below 0 anchored at a, above 0 at b, 0 not; -2 and 2 where the member runs out to a point there.
    """

    a: Array
    b: Array
    anchor: NDArray[np.int_]

    @property
    def count(self) -> int:
        """Number of panels."""
        return int(self.a.size)

    @cached_property
    def apexes(self) -> tuple[tuple[int, int, Array], ...]:
        """Panels that run out to a point: number, number of the neighbour away from it, distances, shape (3, n).

        Distances [m] from the point: of the panel's points, of the neighbour's points, both from the point
        outwards; the third row holds the order (as numbers) in which the points lie so.
        """
        found = []
        for k in np.flatnonzero(np.abs(self.anchor) == 2):
            left = self.anchor[k] < 0
            other = int(k) + 1 if left else int(k) - 1
            if not 0 <= other < self.count:
                continue
            order = np.arange(POINTS) if left else np.arange(POINTS)[::-1]
            u = 0.5 * (1.0 + self.rule.points)
            own = (self.b[k] - self.a[k]) * u * u
            end = self.a[k] if left else self.b[k]
            found.append((int(k), other, np.stack((own, np.abs(self.x[other][order] - end), order.astype(float)))))
        return tuple(found)

    @property
    def rule(self) -> Rule:
        """Chebyshev rule used in every panel."""
        return rule(POINTS)

    @cached_property
    def x(self) -> Array:
        """Places of the points [m], shape (K, n)."""
        return self.place(np.arange(self.count)[:, None], self.rule.points[None, :])

    @cached_property
    def stretch(self) -> Array:
        """dx/ds at the points [m], shape (K, n)."""
        u = 0.5 * (1.0 + self.rule.points)
        length = (self.b - self.a)[:, None]
        left, right = self.anchor[:, None] < 0, self.anchor[:, None] > 0
        return np.asarray(length * np.where(left, u, np.where(right, 1.0 - u, 0.5)))

    def place(self, panel: NDArray[np.intp], s: Array) -> Array:
        """Return x [m] of local coordinates s (-1 to 1) in panels."""
        u = 0.5 * (1.0 + s)
        a, b, anchor = self.a[panel], self.b[panel], self.anchor[panel]
        h = b - a
        plain = np.where(u < 0.5, a + h * u, b - h * (1.0 - u))
        return np.asarray(np.where(anchor < 0, a + h * u * u, np.where(anchor > 0, b - h * (1.0 - u) ** 2, plain)))

    def local(self, panel: NDArray[np.intp], x: Array) -> Array:
        """Return local coordinates s of places x [m] in panels."""
        a, b, anchor = self.a[panel], self.b[panel], self.anchor[panel]
        t = np.clip((x - a) / (b - a), 0.0, 1.0)
        u = np.where(anchor < 0, np.sqrt(t), np.where(anchor > 0, 1.0 - np.sqrt(1.0 - t), t))
        return np.asarray(2.0 * u - 1.0)

    def find(self, x: Array, side: str = "right") -> NDArray[np.intp]:
        """Return the panels in which places lie; at a border, or a round-off beside it, the one on the given side."""
        close = 1e-11 * float(self.b[-1])
        if side == "right":
            panel = np.searchsorted(self.b, np.asarray(x) + close, side="right")
        else:
            panel = np.searchsorted(self.b, np.asarray(x) - close, side="left")
        return np.asarray(np.clip(panel, 0, self.count - 1))

    def border(self, x: float) -> int:
        """Return the number of the border nearest to x: k is the left end of panel k, K the far end."""
        borders = np.concatenate((self.a, self.b[-1:]))
        return int(np.argmin(np.abs(borders - x)))

    def integrate(self, values: Array) -> tuple[Array, Array]:
        """Integrals from the left end of each panel to its points, and over it, of values (..., K, n)."""
        density = values * self.stretch
        return density @ self.rule.integrate.T, density @ self.rule.weights

    def ends(self, values: Array) -> tuple[Array, Array]:
        """Values just inside the left and right end of each panel, shape (..., K), of values (..., K, n)."""
        return values @ self.rule.left, values @ self.rule.right
