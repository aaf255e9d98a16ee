"""Layers that slip, prismatic, solved in closed form to 30 digits: exponentials and polynomials stretch by stretch.

G'' = K (C G + g) with G the force beyond each joint, K the joints' stiffness, C the strain difference by unit force
and g that by the moment; slip = K^-1 G'. Nothing of the program is used.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import mpmath as mp

Polynomial = tuple[float, ...]
"""Moment on a stretch: coefficients of 1, x, x²."""
Field = Callable[[mp.mpf], mp.matrix]


@dataclass
class Layered:
    """Layers with EA, level of centroid and own EI; joint j fixes layer j + 1 on layer on[j] with k[j]."""

    EA: Sequence[float]
    c: Sequence[float]
    EI: Sequence[float]
    on: Sequence[int]
    k: Sequence[float]

    def __post_init__(self) -> None:
        J, L = len(self.on), len(self.EA)
        self.T = mp.zeros(L, J)
        for j, host in enumerate(self.on):
            self.T[j + 1, j], self.T[host, j] = 1, -1
        self.bending = mp.fsum(mp.mpf(v) for v in self.EI)
        soft = mp.diag([1 / mp.mpf(v) for v in self.EA])
        self.arm = self.T.T * mp.matrix([mp.mpf(v) for v in self.c])
        self.C = self.T.T * soft * self.T + self.arm * self.arm.T / self.bending
        root = mp.diag([mp.sqrt(mp.mpf(v)) for v in self.k])
        values, vectors = mp.eigsy(root * self.C * root)
        self.rates = [mp.sqrt(v) for v in values]
        self.modes = root * vectors
        self.J = J

    def particular(self, moment: Polynomial) -> list[mp.matrix]:
        """Coefficients of the polynomial part of G."""
        inverse, soft = self.C**-1, mp.diag([1 / mp.mpf(v) for v in self.k])
        m = [mp.mpf(v) / self.bending for v in moment]
        second = -inverse * self.arm * m[2]
        return [inverse * (soft * (2 * second) - self.arm * m[0]), -inverse * self.arm * m[1], second]

    def exponentials(self, a: mp.mpf, b: mp.mpf, at: mp.mpf, order: int) -> list[mp.matrix]:
        """The 2 J exponentials of a stretch from a to b at a place, or their derivatives."""
        found = []
        for m, rate in enumerate(self.rates):
            for start, sign in ((a, -1), (b, 1)):
                found.append(self.modes[:, m] * ((sign * rate) ** order * mp.exp(sign * rate * (at - start))))
        return found

    def solve(
        self, places: Sequence[float], moments: Sequence[Polynomial], held: tuple[bool, bool]
    ) -> tuple[Field, Field, Callable[[mp.mpf], mp.mpf]]:
        """G(x), slip(x) and curvature(x); `held`: nothing slips at the left and at the right end, else G = 0."""
        x = [mp.mpf(p) for p in places]
        J, count = self.J, len(moments)
        parts = [self.particular(m) for m in moments]
        A, r = mp.zeros(2 * J * count), mp.zeros(2 * J * count, 1)

        def own(i: int, at: mp.mpf, order: int) -> mp.matrix:
            a, b, c = parts[i]
            return b + 2 * c * at if order else a + b * at + c * at**2

        def put(row: int, i: int, at: mp.mpf, order: int, sign: int) -> None:
            for q in range(J):
                for m, column in enumerate(self.exponentials(x[i], x[i + 1], at, order)):
                    A[row + q, 2 * J * i + m] += sign * column[q]
                r[row + q] -= sign * own(i, at, order)[q]

        put(0, 0, x[0], int(held[0]), 1)
        put(J, count - 1, x[-1], int(held[1]), 1)
        for i in range(1, count):
            for order in (0, 1):
                put(2 * J * i + J * order, i - 1, x[i], order, 1)
                put(2 * J * i + J * order, i, x[i], order, -1)
        weights = mp.lu_solve(A, r)

        def field(at: mp.mpf, order: int) -> mp.matrix:
            i = sum(1 for p in x[1:-1] if at > p)
            columns = self.exponentials(x[i], x[i + 1], at, order)
            return sum((c * weights[2 * J * i + m] for m, c in enumerate(columns)), own(i, at, order))

        def curvature(at: mp.mpf) -> mp.mpf:
            a, b, c = (mp.mpf(v) for v in moments[sum(1 for p in x[1:-1] if at > p)])
            return (a + b * at + c * at**2 + (self.arm.T * field(at, 0))[0]) / self.bending

        stiff = mp.diag([1 / mp.mpf(v) for v in self.k])
        return (lambda at: field(mp.mpf(at), 0)), (lambda at: stiff * field(mp.mpf(at), 1)), curvature


def deflection(curvature: Callable[[mp.mpf], mp.mpf], at: float, length: float, places: Sequence[float] = ()) -> mp.mpf:
    """Deflection of a simple beam: work of the moment of a unit force on the curvature."""
    a, L = mp.mpf(at), mp.mpf(length)
    ends = sorted({mp.mpf(0), a, L, *(mp.mpf(p) for p in places)})
    return mp.quad(lambda x: curvature(x) * (x * (L - a) if x <= a else a * (L - x)) / L, ends)
