"""A cracked member once more: moment and curvature by strips of the cross-section, deflection by virtual work.

Shares nothing with the first method's section law but the placed outlines. Every part is cut into level strips between
corners, tops of arcs and its own line of no stress; later parts displace earlier ones on each level line. Bending in
the vertical plane; forces and cracked stretches are taken over, strains are not.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member
from fishbelly.member.geometry import Geometry
from fishbelly.sections.outlines import Outline

Array = NDArray[np.float64]
Plane = tuple[float, float]
"""A strain e + a z, or a free strain."""

_GAUSS = np.polynomial.legendre.leggauss(20)
CLOSED = 1e-12
MOST_ROUNDS = 200


@dataclass(frozen=True, eq=False)
class StripSection:
    """A cross-section as level lines can cut it.

    Parameters
    ----------
    loops : tuple
        For each outline, parts first and then cuts, its edges as (ya, za, yb, zb, bulge) rows.
    parts : tuple of int
        Numbers of the parts.
    targets : tuple of tuple of int
        For each cut, which of the parts (by place in `parts`) it is taken from.
    levels : ndarray
        Where anything begins or ends [m], increasing.
    """

    loops: tuple[Array, ...]
    parts: tuple[int, ...]
    targets: tuple[tuple[int, ...], ...]
    levels: Array

    @classmethod
    def at(cls, member: Member, x: float, side: str = "right", works: frozenset[int] | None = None) -> StripSection:
        """Cut the member at x [m]; with `works` only some of its parts are there."""
        placed = Geometry(member, works).place(np.array([x]), side)
        outlines = [*placed.outlines, *(c.outline for c in placed.cuts)]
        loops = tuple(_edges(o) for o in outlines)
        levels = np.unique(np.concatenate([_tops(e) for e in loops]))
        return cls(loops, tuple(placed.index), tuple(tuple(c.targets) for c in placed.cuts), levels)

    def widths(self, z: Array) -> Array:
        """Width of each part on level lines, shape (P, len(z))."""
        crossings = [_crossings(e, z) for e in self.loops]
        outline = np.concatenate([np.full(c.shape[0], k) for k, c in enumerate(crossings)])
        y = np.concatenate(crossings)
        order = np.argsort(np.where(np.isnan(y), np.inf, y), axis=0)
        y, outline = np.take_along_axis(y, order, axis=0), outline[order]
        met = ~np.isnan(y)
        # what lies right of each crossing belongs to the last part that the line has entered and not left
        inside = [np.cumsum((outline == k) & met, axis=0) % 2 == 1 for k in range(len(self.loops))]
        owner = np.full(y.shape, -1)
        for part in range(len(self.parts)):
            owner[inside[part]] = part
        for cut, targets in enumerate(self.targets):
            owner[inside[len(self.parts) + cut] & np.isin(owner, targets)] = -1
        gap = np.nan_to_num(np.diff(y, axis=0))
        return np.array([np.where(owner[:-1] == part, gap, 0.0).sum(axis=0) for part in range(len(self.parts))])

    def forces(
        self, strain: Plane, E: Array, tensionless: frozenset[int], free: Mapping[int, Plane]
    ) -> tuple[Array, Array]:
        """N and M about z = 0 of a strain e0 - k z, shape (2,), and their change by e0 and k, shape (2, 2).

        Parameters
        ----------
        strain : (float, float)
            e0 and k [1/m].
        E : ndarray
            Moduli of the member's parts [Pa].
        tensionless : frozenset of int
            Parts that carry compression only.
        free : mapping
            Free strain of parts, e + a z.
        """
        total, change = np.zeros(2), np.zeros((2, 2))
        for k, i in enumerate(self.parts):
            e, a = strain[0] - free.get(i, (0.0, 0.0))[0], -strain[1] - free.get(i, (0.0, 0.0))[1]
            A, S, second = self._compressed(k, e, a) if i in tensionless else self.whole[:, k]
            total += E[i] * np.array([e * A + a * S, -e * S - a * second])
            # stress is nothing where the part stops to work: that place moving changes nothing
            change += E[i] * np.array([[A, -S], [-S, second]])
        return total, change

    @cached_property
    def whole(self) -> Array:
        """Area, first and second moment about z = 0 of each part, shape (3, P)."""
        return np.asarray(self.slabs.sum(axis=2))

    @cached_property
    def slabs(self) -> Array:
        """Area, first and second moment about z = 0 of each part between levels, shape (3, P, K)."""
        return self._integrals(self.levels[:-1], self.levels[1:])

    def _integrals(self, low: Array, high: Array) -> Array:
        half, middle = 0.5 * (high - low)[:, None], 0.5 * (high + low)[:, None]
        # crowded to the ends of a strip, where an arc begins like a root
        z = middle + half * np.sin(0.5 * np.pi * _GAUSS[0])
        dz = half * 0.5 * np.pi * np.cos(0.5 * np.pi * _GAUSS[0]) * _GAUSS[1]
        width = self.widths(z.ravel()).reshape(len(self.parts), *z.shape)
        return np.stack([(width * z**power * dz).sum(axis=2) for power in range(3)])

    def _compressed(self, part: int, e: float, a: float) -> Array:
        """Area and moments of a part where e + a z is below zero."""
        low, high = self.levels[:-1], self.levels[1:]
        if a == 0.0:
            return self.slabs[:, part].sum(axis=1) * (e < 0.0)
        zero = -e / a
        whole = high <= zero if a > 0.0 else low >= zero
        total = self.slabs[:, part][:, whole].sum(axis=1)
        k = np.flatnonzero((low < zero) & (zero < high))
        if k.size:
            ends = (low[k], np.array([zero])) if a > 0.0 else (np.array([zero]), high[k])
            total = total + self._integrals(*ends)[:, part, 0]
        return np.asarray(total)


def strip_strain(
    section: StripSection,
    E: Array,
    tensionless: frozenset[int],
    free: Mapping[int, Plane],
    N: float,
    M: float,
    start: Plane = (0.0, 0.0),
) -> Plane:
    """Strain e0 and curvature k under N and M about z = 0, by Newton's method.

    Raises
    ------
    ArithmeticError
        When it does not close.
    """
    near = start != (0.0, 0.0)
    if not near and tensionless and (N or M):
        start = strip_strain(section, E, frozenset(), free, N, M, start)
    depth = float(section.levels[-1] - section.levels[0])
    scale = np.array([1.0, 1.0 / depth])
    at, wanted = np.array(start), np.array([N, M])

    def gap(p: Array) -> tuple[Array, Array, float]:
        found, change = section.forces((float(p[0]), float(p[1])), E, tensionless, free)
        return (wanted - found) * scale, change, float(np.abs(found * scale).max())

    out, change, carried = gap(at)
    size = max(float(np.abs(wanted * scale).max()), carried, 1e-300)
    for _ in range(MOST_ROUNDS):
        if np.abs(out).max() <= CLOSED * size:
            break
        move = np.linalg.solve(change * scale[:, None] * scale, out) * scale
        length = 1.0
        while length > 1e-4:
            there = gap(at + length * move)
            if np.abs(there[0]).max() < np.abs(out).max():
                break
            length *= 0.5
        else:
            break
        at, (out, change, _) = at + length * move, there
    if np.abs(out).max() > 1e-9 * size:
        if near:
            # what was there before leads nowhere: from the section as if it took tension
            return strip_strain(section, E, tensionless, free, N, M)
        raise ArithmeticError(f"strips did not close: {np.abs(out).max() / size:.1e} of the forces is out of balance")
    return float(at[0]), float(at[1])


def _edges(outline: Outline) -> Array:
    rows = []
    for first, stop in outline.loops:
        for k in range(first, stop):
            after = first if k == stop - 1 else k + 1
            rows.append((outline.y[0, k], outline.z[0, k], outline.y[0, after], outline.z[0, after], outline.bulge[k]))
    return np.array(rows)


def _circles(edges: Array) -> tuple[Array, Array, Array]:
    """Centres and radii of arcs by their chords and bulges, each of shape (edges, 1)."""
    ya, za, yb, zb, bulge = edges.T[:, :, None]
    chord = np.hypot(yb - ya, zb - za)
    radius = chord * (1.0 + bulge**2) / (4.0 * np.abs(bulge))
    sag = 0.5 * chord * bulge
    # the centre lies on the normal of the chord, a radius from the top of the bow
    ny, nz = (zb - za) / chord, -(yb - ya) / chord
    top_y, top_z = 0.5 * (ya + yb) + sag * ny, 0.5 * (za + zb) + sag * nz
    sign = np.sign(bulge)
    return top_y - sign * radius * ny, top_z - sign * radius * nz, radius


def _tops(edges: Array) -> Array:
    """Levels at which edges begin or end, or an arc turns back."""
    levels = [edges[:, 1]]
    arcs = edges[edges[:, 4] != 0.0]
    if arcs.size:
        ya, za, yb, zb, bulge = arcs.T
        yc, zc, r = (v[:, 0] for v in _circles(arcs))
        for z in (zc - r, zc + r):
            # the highest and the lowest point of the circle, where they are on the bow's side of the chord
            side = (yb - ya) * (z - za) - (zb - za) * (yc - ya)
            levels.append(z[side * bulge < 0.0])
    return np.concatenate(levels)


def _crossings(edges: Array, z: Array) -> Array:
    """Where edges meet level lines: y with NaN where they do not, two rows for an arc, shape (rows, len(z))."""
    bent = edges[:, 4] != 0.0
    ya, za, yb, zb, _ = edges[~bent].T[:, :, None]
    with np.errstate(divide="ignore", invalid="ignore"):
        y = ya + (yb - ya) * (z - za) / (zb - za)
    rows = [np.where((z > np.minimum(za, zb)) & (z < np.maximum(za, zb)), y, np.nan)]
    if bent.any():
        arcs = edges[bent]
        ya, za, yb, zb, bulge = arcs.T[:, :, None]
        yc, zc, r = _circles(arcs)
        root = np.sqrt(np.maximum(r * r - (z - zc) ** 2, 0.0))
        for y in (yc - root, yc + root):
            # a point of the circle is on the arc where it lies on the bow's side of the chord
            side = (yb - ya) * (z - za) - (zb - za) * (y - ya)
            rows.append(np.where((np.abs(z - zc) < r) & (side * bulge < 0.0), y, np.nan))
    return np.concatenate(rows)
