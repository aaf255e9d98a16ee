"""Second method, loads: what the raw loads put on the Gauss points and on the borders between intervals.

Two planes are treated alike, the vertical one with c = z and the horizontal one with c = -y, so that a force F
towards +x at c makes M jump by +F c in both. Levels count from a straight line near the centroid, `line`.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member, Support
from fishbelly.member.geometry import Geometry
from fishbelly.member.loads import (
    Axial,
    Couple,
    Distributed,
    Load,
    Point,
    Prestress,
    SelfWeight,
    Shrinkage,
    Temperature,
)
from fishbelly.member.second_grid import RULE, Intervals
from fishbelly.member.second_sections import Sections, Slide, flexibility

Array = NDArray[np.float64]

G0 = 9.80665
"""Standard acceleration of gravity [m/s2], exact by definition (3rd CGPM, 1901)."""


@dataclass(frozen=True, eq=False)
class LoadShare:
    """Loads that act together on one set of moduli.

    Parameters
    ----------
    factors : mapping of str to float
        Factor of each case; a case not named has factor 0.
    E : ndarray, shape (P,)
        Modulus of every part of the member, 0 for cuts [Pa].
    shear_flexibility : callable, optional
        1/GA [1/N] at places x (S,) in plane 0 (vertical) or 1 (across), shape (S,), for the same moduli.
    only : callable, optional
        Asked for every load and every support that sinks: whether it belongs to this share.
    """

    factors: Mapping[str, float]
    E: Array
    shear_flexibility: Slide | None = None
    only: Callable[[Load | Support], bool] | None = None

    def factor(self, load: Load | Support) -> float:
        """Factor with which a load, or the settlement of a support, acts in this share."""
        if self.only is not None and not self.only(load):
            return 0.0
        return float(self.factors.get(load.case, 0.0))


@dataclass(frozen=True, eq=False)
class Pushes:
    """Loads on K intervals of n points.

    Parameters
    ----------
    q : ndarray, shape (2, K, n)
        Transverse load per length, down and across [N/m].
    n, m : ndarray, shapes (K, n) and (2, K, n)
        Load along x per length [N/m] and its moment per length about the line [N].
    jumps : ndarray, shape (5, K + 1)
        Jumps of (N, V, V across, M, M across) at the borders.
    free : ndarray, shape (3, K, n)
        Forces (N, M, M across) that would hold free strain back, about the line.
    angle : ndarray, shape (2, K, n), optional
        Shear angle of each plane that comes without a shear force.
    """

    q: Array
    n: Array
    m: Array
    jumps: Array
    free: Array
    angle: Array | None = None

    @classmethod
    def none(cls, shape: tuple[int, ...]) -> Pushes:
        """Return no loads on intervals whose points have shape (K, n)."""
        k, n = shape
        return cls(
            np.zeros((2, k, n)), np.zeros((k, n)), np.zeros((2, k, n)), np.zeros((5, k + 1)), np.zeros((3, k, n))
        )


@dataclass(frozen=True, eq=False)
class Ground:
    """What loads stand on: the member, its intervals and sections, the line and the short-term centroid.

    `line`: level of the line in both planes, shape (2,) [m]; `centroid`: from it, shape (2, K, n); `works`: numbers
    of the parts that work, None for all.
    """

    member: Member
    intervals: Intervals
    sections: Sections
    short: Array
    line: Array
    centroid: Array
    works: frozenset[int] | None = None

    @classmethod
    def of(cls, member: Member, intervals: Intervals, sections: Sections, short: Array) -> Ground:
        """Find the line (mid between the extremes of the centroid)."""
        c = flexibility(sections, short).c
        line = 0.5 * (c.max(axis=(1, 2)) + c.min(axis=(1, 2)))
        return cls(member, intervals, sections, short, line, c - line[:, None, None])

    def weighed(self, load: SelfWeight) -> tuple[Sections, frozenset[str]]:
        """Sections in which a self weight finds its parts, and the names of these."""
        return self.sections, frozenset(load.parts or (p.name for p in self.member.parts))

    def border(self, x: float) -> int:
        """Number of the border at x; K is the far end."""
        borders = np.append(self.intervals.a, self.intervals.b[-1])
        return int(np.argmin(np.abs(borders - x)))

    def level(self, level: str | float, x: float) -> Array:
        """Return a named level or a z, from the line, in both planes; sideways always the centroid."""
        k = self.border(x)
        last = k == self.intervals.a.size
        here = RULE.at_end(self.centroid[:, -1 if last else k], 1 if last else -1)
        if level == "centroid":
            return np.asarray(here)
        if level == "datum":
            z = 0.0
        elif isinstance(level, str):
            placed = Geometry(self.member, self.works).place(np.array([x]), "left" if last else "right")
            bounds = [o.bounds() for o in placed.outlines]
            z = min(float(b[1][0]) for b in bounds) if level == "bottom" else max(float(b[3][0]) for b in bounds)
        else:
            z = float(level)
        return np.array([z - self.line[0], here[1]])


def pushes(ground: Ground, share: LoadShare) -> Pushes:
    """Collect the loads of a share, each times its factor."""
    p = Pushes.none(ground.intervals.x.shape)
    for load in ground.member.loads:
        factor = share.factor(load)
        if factor == 0.0:
            continue
        if isinstance(load, Distributed):
            _along_length(ground, p, load, factor)
        elif isinstance(load, SelfWeight):
            _weight(ground, p, load, factor)
        elif isinstance(load, Point):
            _force(ground, p, load, factor)
        elif isinstance(load, Couple):
            p.jumps[3, ground.border(load.at)] += factor * load.value
        elif isinstance(load, Axial):
            _push(p, ground.border(load.at), factor * load.value, ground.level(load.level, load.at))
        else:
            _hold_back(ground, p, load, factor, share.E)
    return p


def _push(p: Pushes, border: int, force: float, level: Array) -> None:
    """Put a force towards +x at a level on a border."""
    p.jumps[0, border] -= force
    p.jumps[3:, border] += force * level


def _turned(member: Member, load: Distributed | Point) -> Array:
    """Shares of a load down, across and along the member."""
    if load.direction == "across":
        return np.array([0.0, 1.0, 0.0])
    upright = -1.0 if load.direction == "up" else 1.0
    if load.per is None:
        return np.array([upright, 0.0, 0.0])
    lean = member.rises
    length = np.cos(lean) if load.per == "plan" and isinstance(load, Distributed) else 1.0
    return upright * length * np.array([np.cos(lean), 0.0, -np.sin(lean)])


def _along_length(ground: Ground, p: Pushes, load: Distributed, factor: float) -> None:
    down, across, along = factor * _turned(ground.member, load)
    x = ground.intervals.x
    middle = 0.5 * (ground.intervals.a + ground.intervals.b)
    for (x0, q0), (x1, q1) in zip(load.stations, load.stations[1:], strict=False):
        on = (middle > x0) & (middle < x1)
        if not np.any(on):
            continue
        t = (x[on] - x0) / (x1 - x0)
        q = q0 * (1.0 - t) + q1 * t
        p.q[0, on] += down * q
        p.q[1, on] += across * q
        if along:
            p.n[on] += along * q
            p.m[:, on] += along * q * ground.centroid[:, on]


def _weight(ground: Ground, p: Pushes, load: SelfWeight, factor: float) -> None:
    member = ground.member
    s, weighed = ground.weighed(load)
    density = np.zeros(len(member.parts))
    for k, part in enumerate(member.parts):
        if part.material is not None and part.name in weighed:
            density[k] = member.material(part.material).density or 0.0
    mass, y, z = np.einsum("p,pmkn->mkn", density, s.stands[:, :3])
    pull = factor * load.factor * G0
    p.q[0] += pull * np.cos(member.rises) * mass
    if member.rises:
        along = -pull * np.sin(member.rises)
        p.n[...] += along * mass
        p.m[0] += along * (z + (s.about[1] - ground.line[0]) * mass)
        p.m[1] += along * (-y - (s.about[0] + ground.line[1]) * mass)


def _force(ground: Ground, p: Pushes, load: Point, factor: float) -> None:
    down, across, along = factor * load.value * _turned(ground.member, load)
    k = ground.border(load.at)
    p.jumps[1:3, k] -= down, across
    if along:
        _push(p, k, float(along), ground.level("centroid", load.at))


def _hold_back(ground: Ground, p: Pushes, load: Temperature | Shrinkage | Prestress, factor: float, E: Array) -> None:
    """Free strain e + a (z - about) of every part, times E, as forces about the line."""
    s = ground.sections
    for k, part in enumerate(ground.member.parts):
        if part.material is None:
            continue
        e, a = free_strain(ground, load, k)
        area, y, z, _, zz, yz = s.works[k]
        weight = factor * E[k] * s.run_in[k]
        force = weight * (e * area + a * z)
        p.free[0] += force
        p.free[1] -= weight * (e * z + a * zz) + force * (s.about[1] - ground.line[0])
        p.free[2] += weight * (e * y + a * yz) + force * (s.about[0] + ground.line[1])


def free_strain(ground: Ground, load: Temperature | Shrinkage | Prestress, k: int) -> tuple[Array, Array]:
    """Free strain of part k at the point `about`, and its change with z [1/m], where the load says."""
    e, a = _plane(ground, load, k)
    if isinstance(load, Prestress):
        return e, a
    middle = 0.5 * (ground.intervals.a + ground.intervals.b)
    on = ((middle > load.start) & (middle < load.end))[:, None]
    return e * on, a * on


def _plane(ground: Ground, load: Temperature | Shrinkage | Prestress, k: int) -> tuple[Array, Array]:
    """Free strain of part k at the point `about`, and its change with z [1/m]."""
    member, s = ground.member, ground.sections
    part = member.parts[k]
    zero = np.zeros_like(s.top)
    if isinstance(load, Temperature):
        stretch = member.material(part.material or "").expansion or 0.0
        if load.parts is not None:
            return zero + stretch * load.parts.get(part.name, 0.0), zero
        gradient = stretch * (load.top - load.bottom) / (s.top - s.bottom)
        return stretch * load.bottom + gradient * (s.about[1] - s.bottom), gradient
    if load.part != part.name:
        return zero, zero
    if isinstance(load, Shrinkage):
        return zero - load.strain, zero
    if load.strain is not None:
        return zero - load.strain, zero
    # the strain it is fixed with, before any run-in
    stiff = ground.short[k] * s.works[k, 0]
    return -(load.force or 0.0) / np.where(stiff > 0.0, stiff, np.inf), zero
