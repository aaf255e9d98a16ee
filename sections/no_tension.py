"""The strain plane of a section some of whose parts carry compression only, under N, M_y and M_z together.

Stress = E (e0 - k_y z - k_z y - free strain) where that is compression or the part takes tension, else none. The
strain energy is convex in (e0, k_y, k_z), so Newton's method with a step length that lowers the energy finds the one
solution there is; the tangent is the stiffness of what is at work, because stress vanishes on the border of it.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.clipping import at_stations, clipped_moments, raw_moments
from fishbelly.sections.composition import Composition
from fishbelly.sections.outlines import Outline, arcs

Array = NDArray[np.float64]
Mask = NDArray[np.bool_]

MOST_ROUNDS = 80
CLOSED = 1e-13
"""Change of the strain plane against the plane itself, in the last round."""
STILL = 1e-9
"""A change below this that no longer shrinks is round-off of a section whose stiffness nearly vanishes."""
SINGULAR = 1e-13
"""Determinant of a stiffness with ones on its diagonal, below which next to nothing is at work."""
_DIRECTIONS = 720
MARGIN = 1e-9
"""A resultant so near the edge, as a share of the section's size, counts as outside: nothing is left to carry it."""


@dataclass(frozen=True, eq=False)
class FreePlanes:
    """Free strain of the parts, each field of shape (P, S): e + a z + b y."""

    e: Array
    a: Array
    b: Array

    @classmethod
    def none(cls, parts: int, stations: int) -> FreePlanes:
        """Return no free strain."""
        zero = np.zeros((parts, stations))
        return cls(zero, zero, zero)


@dataclass(frozen=True, eq=False)
class SectionState:
    """Strains of sections and how they answer to a little more force.

    Parameters
    ----------
    plane : ndarray, shape (3, S)
        e0, k_y, k_z about the origin [-, 1/m, 1/m].
    matrix : ndarray, shape (S, 3, 3)
        Tangent stiffness: N, M_y, M_z by e0, k_y, k_z.
    carried : ndarray of bool, shape (S,)
        Whether the section can carry its forces at all.
    converged : ndarray of bool, shape (S,)
        Whether the strain plane closed to `CLOSED`; true where nothing can be carried.
    residual : ndarray, shape (S,)
        Energy of what is out of balance over the energy of the whole, its root.
    rounds : int
        Rounds of Newton's method.
    """

    plane: Array
    matrix: Array
    carried: Mask
    converged: Mask
    residual: Array
    rounds: int


def strain_lines(plane: Array, free: FreePlanes, part: int) -> Array:
    """Strain of a part that makes stress, as value at the origin, change with z and with y, shape (3, S)."""
    return np.stack((plane[0] - free.e[part], -plane[1] - free.a[part], -plane[2] - free.b[part]))


def matrices(moments: Array) -> Array:
    """Stiffness for E = 1 of raw moments (6, ...), shape (..., 3, 3), rows N, M_y, M_z."""
    A, y, z, zz, yy, yz = moments
    rows = ((A, -z, -y), (-z, zz, yz), (-y, yz, yy))
    return np.stack([np.stack(r, axis=-1) for r in rows], axis=-2)


def solve_section(
    section: Composition,
    E: Array,
    tensionless: Mask,
    free: FreePlanes,
    forces: Array,
    start: Array | None = None,
) -> SectionState:
    """Find the strain plane of S sections.

    Parameters
    ----------
    section : Composition
        The cross-sections, coordinates near the origin.
    E : ndarray, shape (P, S)
        Modulus of each part [Pa].
    tensionless : ndarray of bool, shape (P,)
        Which parts carry compression only.
    free : FreePlanes
        Free strain of the parts.
    forces : ndarray, shape (3, S)
        N [N], M_y and M_z about the origin [N m].
    start : ndarray, shape (3, S), optional
        A strain plane near the one looked for.

    Returns
    -------
    SectionState
        With NaN strains where the section cannot carry its forces.
    """
    whole = [raw_moments(section.moments.at(k)) for k in range(E.shape[0])]
    full = sum(matrices(m * E[k]) for k, m in enumerate(whole))
    assert not isinstance(full, int)
    linear = _balanced(full, _held(whole, E, free) + forces)
    if not tensionless.any():
        true = np.ones(E.shape[1], dtype=bool)
        return SectionState(linear, full, true, true, np.zeros(E.shape[1]), 0)
    work = _Work(section, E, tensionless, free, forces, whole, full)
    carried = work.can_carry()
    at = linear if start is None else np.where(np.isfinite(start), start, linear)
    at = np.where(carried, at, 0.0)
    return work.closed(at, carried)


def _held(moments: list[Array], E: Array, free: FreePlanes) -> Array:
    """Forces that hold the free strain of what is at work back, shape (3, S)."""
    total = np.zeros((3, E.shape[1]))
    for k, m in enumerate(moments):
        plane = np.stack((free.e[k], -free.a[k], -free.b[k]))
        if np.any(plane):
            total += np.einsum("sij,js->is", matrices(m * E[k]), plane)
    return total


def _balanced(matrix: Array, forces: Array, full: Array | None = None) -> Array:
    """Strain plane under forces, scaled so that a matrix with units does not lose digits, shape (3, S).

    Where next to nothing is at work a trace of the `full` section keeps the search going.
    """
    scale, scaled = _scaled(matrix)
    if full is not None:
        idle = np.linalg.det(scaled) < SINGULAR
        if idle.any():
            scale, scaled = _scaled(np.where(idle[:, None, None], matrix + 1e-12 * full, matrix))
    return np.asarray((np.linalg.solve(scaled, (forces.T / scale)[..., None])[..., 0] / scale).T)


def _scaled(matrix: Array) -> tuple[Array, Array]:
    scale = np.sqrt(np.maximum(np.einsum("sii->si", matrix), 1e-300))
    return scale, matrix / (scale[:, :, None] * scale[:, None, :])


@dataclass(eq=False)
class _Work:
    section: Composition
    E: Array
    tensionless: Mask
    free: FreePlanes
    forces: Array
    whole: list[Array]
    full: Array

    def active(self, plane: Array) -> list[Array]:
        """Raw moments of what is at work in each part."""
        found = []
        for k, m in enumerate(self.whole):
            if self.tensionless[k]:
                m = clipped_moments(self.section, k, strain_lines(plane, self.free, k))
            found.append(m)
        return found

    def energy(self, plane: Array, moments: list[Array]) -> tuple[Array, Array]:
        """Strain energy of what is at work, and the same less the work of the forces, each shape (S,)."""
        strain = np.zeros(plane.shape[1])
        for k, m in enumerate(moments):
            line = strain_lines(plane, self.free, k) * np.array([1.0, -1.0, -1.0])[:, None]
            strain += 0.5 * self.E[k] * np.einsum("is,sij,js->s", line, matrices(m), line)
        return strain, strain - (self.forces * plane).sum(axis=0)

    def can_carry(self) -> Mask:
        """Whether the sections can carry their forces: without a part that takes tension, the resultant is inside."""
        stations = self.E.shape[1]
        tough = ((self.E > 0.0) & ~self.tensionless[:, None] & (np.array([m[0] for m in self.whole]) > 0.0)).any(axis=0)
        carried = np.ones(stations, dtype=bool)
        index = np.flatnonzero(~tough & np.any(self.forces, axis=0))
        if index.size:
            share = largest_shares(at_stations(self.section, index), self.forces[:, index])
            carried[index] = share > 1.0 + MARGIN
        return carried

    def closed(self, at: Array, carried: Mask) -> SectionState:
        """Newton's method, every section with its own step length."""
        size = np.sqrt(np.einsum("sii->si", self.full)[:, 1] / np.maximum(self.full[:, 0, 0], 1e-300))
        weight = np.stack((np.ones_like(size), size, size))
        moments = self.active(at)
        strain, total = self.energy(at, moments)
        change = np.full(at.shape[1], np.inf)
        done, rounds, still = ~carried, 0, np.zeros(at.shape[1], dtype=np.int_)
        while not done.all() and rounds < MOST_ROUNDS:
            rounds += 1
            matrix = self.tangent(moments)
            target = _balanced(matrix, self.forces + _held(moments, self.E, self.free), self.full)
            step = np.where(done, 0.0, target - at)
            length, new = np.ones(at.shape[1]), at + step
            moments_new = self.active(new)
            strain_new, total_new = self.energy(new, moments_new)
            for _ in range(40):
                # round-off of the energy is no reason to shorten a step
                worse = total_new > total + 1e-14 * (np.abs(strain) + np.abs(strain_new))
                if not worse.any():
                    break
                length = np.where(worse, 0.5 * length, length)
                new = at + length * step
                moments_new = self.active(new)
                strain_new, total_new = self.energy(new, moments_new)
            plane, before = np.abs(new * weight).max(axis=0), change
            change = np.abs(step * weight).max(axis=0) / np.where(plane > 0.0, plane, 1.0)
            at, moments, strain, total = new, moments_new, strain_new, total_new
            # a small change that no longer shrinks, twice running, is round-off
            still = np.where((change <= STILL) & (change >= 0.25 * before), still + 1, 0)
            done = done | (change <= CLOSED) | (still > 1)
        matrix = self.tangent(moments)
        out = self.forces + _held(moments, self.E, self.free) - np.einsum("sij,js->is", matrix, at)
        return self._state(at, matrix, out, strain, carried, change, rounds)

    def _state(
        self, at: Array, matrix: Array, out: Array, strain: Array, carried: Mask, change: Array, rounds: int
    ) -> SectionState:
        answer = _balanced(matrix, out, self.full)
        lost = np.abs((out * answer).sum(axis=0))
        residual = np.sqrt(lost / np.where(strain > 0.0, 2.0 * strain, 1.0))
        closed = (change <= STILL) | ~carried
        matrix = np.where(carried[:, None, None], matrix, self.full)
        idle = ~np.any(at, axis=0)
        # where nothing strains either side of zero could be meant: the whole section stands for both
        matrix = np.where(idle[:, None, None], self.full, matrix)
        return SectionState(np.where(carried, at, np.nan), matrix, carried, closed, residual, rounds)

    def tangent(self, moments: list[Array]) -> Array:
        """Stiffness of what is at work, shape (S, 3, 3)."""
        return np.asarray(sum(matrices(m * self.E[k]) for k, m in enumerate(moments)))


def largest_shares(section: Composition, forces: Array) -> Array:
    """How many times their moment sections without tension can carry at their axial force, in the moment's direction.

    The resultant of compression lies inside the outline of all parts together. The moment counts about the area's
    centroid; the share is 0 where the axial force is none or tension, infinite where there is no moment.

    Parameters
    ----------
    section : Composition
        The cross-section at S stations.
    forces : ndarray, shape (3, S)
        N, M_y and M_z about the origin.

    Returns
    -------
    ndarray, shape (S,)
    """
    N, M_y, M_z = forces
    pressed = N < 0.0
    total = section.moments.total()
    safe = np.where(pressed, N, -1.0)
    y, z = -M_z / safe - total.y, -M_y / safe - total.z
    far = np.hypot(y, z)
    angles = np.broadcast_to(np.arange(_DIRECTIONS) * (2.0 * np.pi / _DIRECTIONS), (N.size, _DIRECTIONS))
    angles = np.concatenate((angles, np.arctan2(z, y)[:, None]), axis=1)
    reach = np.max([_reach(o, angles, total.y, total.z) for o in section.outlines], axis=0)
    with np.errstate(divide="ignore", invalid="ignore"):
        toward = (y[:, None] * np.cos(angles) + z[:, None] * np.sin(angles)) / far[:, None]
        share = np.where(toward > 1e-9, reach / np.where(toward > 1e-9, toward, 1.0), np.inf).min(axis=1) / far
    return np.where(pressed, np.where(far > 0.0, share, np.inf), 0.0)


def _reach(outline: Outline, angles: Array, y: Array, z: Array) -> Array:
    """How far an outline reaches from a point of each station in directions (S, A) [m]."""
    cos, sin = np.cos(angles), np.sin(angles)
    dy, dz = outline.y - y[:, None], outline.z - z[:, None]
    found = (cos[:, :, None] * dy[:, None, :] + sin[:, :, None] * dz[:, None, :]).max(axis=2)
    curved = np.flatnonzero(outline.bulge)
    if curved.size:
        y_c, z_c, r, start, turn = (v[:, None, :] for v in arcs(outline, curved))
        first = np.minimum(start, start + turn)
        passes = np.mod(angles[:, :, None] - first, 2.0 * np.pi) < np.abs(turn)
        centre = cos[:, :, None] * (y_c - y[:, None, None]) + sin[:, :, None] * (z_c - z[:, None, None])
        found = np.maximum(found, np.where(passes, centre + r, -np.inf).max(axis=2))
    return np.asarray(found)
