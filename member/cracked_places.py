"""Where a member cracks: stretches between roots of tension over cracking stress, and how they are closed in on."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.cracked_events import Solved
from fishbelly.member.cracked_grid import roots
from fishbelly.member.panels import Panels

Array = NDArray[np.float64]
Mask = NDArray[np.bool_]
Stretches = tuple[tuple[float, float], ...]
"""Where a member is cracked: starts and ends [m], in order, apart."""


def joined(stretches: Sequence[tuple[float, float]], close: float) -> Stretches:
    """Put stretches in order and make one of those that meet within `close` [m]; shorter ones than that go."""
    found: list[tuple[float, float]] = []
    for a, b in sorted(stretches):
        if b - a <= close:
            continue
        if found and a <= found[-1][1] + close:
            found[-1] = (found[-1][0], max(found[-1][1], b))
        else:
            found.append((a, b))
    return tuple(found)


def inside(panels: Panels, stretches: Stretches) -> Mask:
    """Which panels lie in stretches, by their middle, shape (K, n)."""
    middle = 0.5 * (panels.a + panels.b)
    held = np.zeros(middle.size, dtype=bool)
    for a, b in stretches:
        held |= (middle > a) & (middle < b)
    return np.asarray(np.broadcast_to(held[:, None], panels.x.shape))


def own_stretches(panels: Panels, phases: Sequence[Solved], level: float = 1.0) -> tuple[Stretches, list[float]]:
    """Stretches in which tension passes the stress at which a part cracks in any phase, and the roots that end them.

    `level`: share of that stress at which a rule of tension stiffening begins to count it as cracked.
    """
    found: list[tuple[float, float]] = []
    ends: list[float] = []
    for solved in phases:
        fields = [np.where(np.isfinite(f), f / level, -1.0) for v in solved.fibres().values() for f in v]
        if not fields:
            continue
        places = [x for f in fields for x in roots(panels, f - 1.0)]
        # a fibre that passes its limit where another is over it already ends nothing
        governing = [x for x in places if _largest(panels, fields, np.array([x]))[0] < 1.0 + 1e-6]
        governing = [x for x in governing if 0.0 < x < panels.b[-1]]
        cuts = np.unique(np.concatenate((panels.a, panels.b, governing)))
        over = _largest(panels, fields, 0.5 * (cuts[1:] + cuts[:-1]))
        found += [(float(a), float(b)) for a, b, v in zip(cuts[:-1], cuts[1:], over, strict=True) if v > 1.0]
        ends += governing
    return joined(found, 1e-9 * float(panels.b[-1])), sorted(ends)


def openings(panels: Panels, phases: Sequence[Solved]) -> list[float]:
    """Places where a part that never carries tension begins to open [m]."""
    found: list[float] = []
    for solved in phases:
        law, plane = solved.law, solved.closed.state.uncracked.plane
        inherited = any(np.any(v) for v in law.free[0].values())
        if not np.any(solved.closed.response.N) and not inherited:
            continue
        for part in law.never:
            for field in law.sections.tension(part, law.stress(part, plane, 0), law.planar):
                found += roots(panels, field)
    close = 1e-8 * float(panels.b[-1])
    return sorted(x for x in found if close < x < panels.b[-1] - close)


def _largest(panels: Panels, fields: Sequence[Array], x: Array) -> Array:
    k = panels.find(x)
    basis = panels.rule.basis(panels.local(k, x))
    return np.asarray(np.max([(f[k] * basis).sum(axis=1) for f in fields], axis=0))


def kinks(panels: Panels, phases: Sequence[Solved], cracked: Mask, start: float | None) -> list[float]:
    """Further places where strains have a kink: cracked places where moment or zeta passes zero [m].

    `start`: tension over the stress at which it cracks, from which on zeta is above 0 in a place cracked before.
    """
    found: list[float] = []
    for solved in phases:
        state, law = solved.closed.state, solved.law
        where = cracked | bool(law.never)
        rows = np.flatnonzero(where.any(axis=1))
        if not rows.size:
            continue
        curvatures = state.uncracked.plane[1:2] if law.planar else state.uncracked.plane[1:]
        size = np.abs(curvatures).max()
        for curvature in curvatures:
            # a plane in which next to nothing bends has no places, only round-off
            if np.abs(curvature).max() > 1e-9 * size:
                found += [x for x in roots(panels, curvature) if where[panels.find(np.array([x]))[0], 0]]
        if start is not None:
            for field in (f for v in solved.fibres().values() for f in v):
                found += [x for x in roots(panels, field - start) if cracked[panels.find(np.array([x]))[0], 0]]
    return found


@dataclass(eq=False)
class Search:
    """Closes in on places that depend on themselves: Broyden's method on x -> roots found with borders at x.

    Source: C. G. Broyden, Mathematics of Computation 19, 1965.
    """

    x: Array | None = None
    found: Array | None = None
    inverse: Array | None = None

    def next(self, x: Array, found: Array) -> Array:
        """Return where to try next, given what was found with borders at x, both in order."""
        residual = found - x
        if self.x is None or self.found is None or self.x.size != x.size or self.inverse is None:
            self.inverse = np.eye(x.size)
        elif np.abs(residual).max(initial=0.0) > 0.5 * np.abs(self.found - self.x).max(initial=0.0):
            # what it has learned does not hold any more
            self.inverse = np.eye(x.size)
        else:
            dx, dr = x - self.x, residual - (self.found - self.x)
            change = self.inverse @ dr
            weight = float(dx @ change)
            if abs(weight) > 1e-12 * float(dx @ dx):
                self.inverse = self.inverse + np.outer(dx + change, dx @ self.inverse) / -weight
        self.x, self.found = x, found
        step = x + self.inverse @ residual
        if np.any(np.diff(step) <= 0.0):
            self.inverse, step = None, found
        return np.asarray(step)
