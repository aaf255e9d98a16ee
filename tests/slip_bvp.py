"""Two layers of any shape as one boundary value problem of the displacements, solved by collocation that adapts itself.

State on each stretch: deflection, rotation, force beyond the joint, slip, moment about the datum line, shear force.
Nothing of the program is used.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from scipy.integrate import solve_bvp

Law = Callable[[np.ndarray], np.ndarray]
SCALE = np.array([1e-2, 1e-2, 1e4, 1e-4, 1e4, 1e4])
W, TURN, G, S, M, V = range(6)


@dataclass
class Stretch:
    """From a to b: EA, level and EI of both layers and k as functions of x, load q, free strain of the upper layer.

    `joined` False: one layer.
    """

    a: float
    b: float
    EA: tuple[Law, Law]
    c: tuple[Law, Law]
    EI: Law
    k: Law
    q: float = 0.0
    joined: bool = True
    free: float = 0.0

    def slopes(self, x: np.ndarray, y: np.ndarray) -> np.ndarray:
        force = y[G] if self.joined else np.zeros_like(x)
        EA0, EA1 = self.EA[0](x), self.EA[1](x)
        c0, c1 = self.c[0](x), self.c[1](x)
        curved = (y[M] + (c1 - c0) * force) / self.EI(x)
        e0, e1 = -force / EA0 + c0 * curved, force / EA1 + c1 * curved + self.free
        flow = self.k(x) * y[S] if self.joined else np.zeros_like(x)
        slip = e1 - e0 if self.joined else np.zeros_like(x)
        return np.stack((y[TURN], -curved, flow, slip, y[V], np.full_like(x, -self.q)))


Conditions = Callable[[np.ndarray, np.ndarray], Sequence[float]]
"""Residuals, 6 for each stretch, from the states at the left and at the right ends, shape (stretches, 6)."""


def solved(
    stretches: Sequence[Stretch], conditions: Conditions, tolerance: float = 1e-10
) -> Callable[[float], np.ndarray]:
    """State at any x, shape (6,)."""
    n = len(stretches)
    starts, lengths = np.array([s.a for s in stretches]), np.array([s.b - s.a for s in stretches])
    scale = np.tile(SCALE, n)

    def slopes(t: np.ndarray, y: np.ndarray) -> np.ndarray:
        full = y * scale[:, None]
        parts = [
            s.slopes(s.a + t * (s.b - s.a), full[6 * i : 6 * i + 6]) * (s.b - s.a) for i, s in enumerate(stretches)
        ]
        return np.concatenate(parts) / scale[:, None]

    def ends(left: np.ndarray, right: np.ndarray) -> np.ndarray:
        return np.array(conditions((left * scale).reshape(n, 6), (right * scale).reshape(n, 6)))

    t = np.linspace(0.0, 1.0, 41)
    found = solve_bvp(slopes, ends, t, np.zeros((6 * n, t.size)), tol=tolerance, max_nodes=100_000)
    assert found.status == 0, found.message

    def state(x: float) -> np.ndarray:
        i = int(np.clip(np.searchsorted(starts, x, side="right") - 1, 0, n - 1))
        return found.sol((x - starts[i]) / lengths[i])[6 * i : 6 * i + 6] * SCALE

    return state


def continuous(left: np.ndarray, right: np.ndarray, which: Sequence[int]) -> list[float]:
    """Fields in size units that go on unchanged from one stretch into the next."""
    return [(left[q] - right[q]) / SCALE[q] for q in which]
