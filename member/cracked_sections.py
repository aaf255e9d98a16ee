"""Cracked sections at the grid points: which parts crack, strains under forces, tension of fibres.

Bridges the grid of the member (planes 0 and 1, levels from the analysis line) and the sections (y, z about the origin):
z' = z - line[0], y' = y + line[1], k_y = k0, k_z = -k1, M_y = M0, M_z = -M1.
"""

from __future__ import annotations

from collections.abc import Collection, Mapping
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.forces import Forces
from fishbelly.sections.area_moments import AreaMoments
from fishbelly.sections.clipping import at_stations, clipped_moments, moved
from fishbelly.sections.composition import Composition
from fishbelly.sections.fibres import arc_data, fibres
from fishbelly.sections.no_tension import FreePlanes, SectionState, largest_shares, solve_section

Array = NDArray[np.float64]
Mask = NDArray[np.bool_]
Planes = Mapping[int, Array]
"""Free strain of parts as planes v0 + v1 c0 + v2 c1 about the analysis line, by number of the part: (3, K, n)."""

SIGNS = np.array([1.0, 1.0, -1.0])
"""From (e0, k_y, k_z) to (axial, k0, k1), and from (N, M_y, M_z) to (N, M0, M1)."""


@dataclass(frozen=True, eq=False)
class PointStates:
    """Strains at the grid points and how they answer to a little more force.

    Parameters
    ----------
    plane : ndarray, shape (3, K, n)
        Strain on the analysis line and the curvatures of both planes; NaN where not asked for or not carried.
    flexibility : ndarray, shape (K, n, 3, 3)
        The same by N, M0 and M1.
    carried, converged : ndarray of bool, shape (K, n)
        Whether the section can carry its forces, and whether its strain plane closed; true where not asked for.
    rounds : int
        Most rounds any section took.
    """

    plane: Array
    flexibility: Array
    carried: Mask
    converged: Mask
    rounds: int


@dataclass(frozen=True, eq=False)
class CrackedSections:
    """The sections of a grid, expanded to its points."""

    frame: Frame
    _expanded: dict[tuple[int, bytes], Composition] = field(default_factory=dict, repr=False)

    @cached_property
    def _local(self) -> list[Composition]:
        """Sections of each group about the analysis line, inclined flanges by their share."""
        line = self.frame.line
        found = []
        for g in self.frame.profile.groups:
            section = moved(g.composition, float(line[1]), -float(line[0]))
            if g.placed.flanges:
                m = g.moments
                section.__dict__["moments"] = AreaMoments(m.area, m.y + line[1], m.z - line[0], m.zz, m.yy, m.yz)
            found.append(section)
        return found

    def inclined(self, parts: Collection[int]) -> int | None:
        """Return the first of some parts that has inclined flanges which count by their share; None without any."""
        for g in self.frame.profile.groups:
            for flange in g.placed.flanges:
                if g.placed.index[flange.part] in parts:
                    return g.placed.index[flange.part]
        return None

    @cached_property
    def _home(self) -> tuple[NDArray[np.intp], NDArray[np.intp]]:
        """Group and station in it of every grid point, flat."""
        profile = self.frame.profile
        group, station = np.zeros((2, profile.rows), dtype=np.intp)
        for k, g in enumerate(profile.groups):
            group[g.rows], station[g.rows] = k, np.arange(g.rows.size)
        row = profile.row.ravel()
        return group[row], station[row]

    def points(self, number: int, where: Mask) -> tuple[NDArray[np.intp], NDArray[np.intp]]:
        """Flat grid points of a group that are asked for, and their stations in it."""
        group, station = self._home
        index = np.flatnonzero((group == number) & where.ravel())
        return index, station[index]

    def section(self, number: int, stations: NDArray[np.intp]) -> Composition:
        """Sections of a group at its stations, about the analysis line."""
        key = (number, stations.tobytes())
        if key not in self._expanded:
            self._expanded[key] = at_stations(self._local[number], stations)
        return self._expanded[key]

    def states(
        self,
        E: Array,
        tensionless: frozenset[int],
        free: Planes,
        forces: Forces,
        where: Mask,
        start: Array | None = None,
    ) -> PointStates:
        """Strains under forces.

        Parameters
        ----------
        E : ndarray, shape (P,)
            Moduli of the member's parts [Pa].
        tensionless : frozenset of int
            Numbers of the parts that carry compression only.
        free : mapping
            Free strain of parts.
        forces : Forces
            N, V, M at the grid points.
        where : ndarray of bool, shape (K, n)
            Points asked for.
        start : ndarray, shape (3, K, n), optional
            Strains near the ones looked for.
        """
        found = _Collected.of(where.size)
        load = SIGNS[:, None] * np.stack((forces.N.ravel(), forces.M[0].ravel(), forces.M[1].ravel()))
        near = None if start is None else SIGNS[:, None] * start.reshape(3, -1)
        for number, g in enumerate(self.frame.profile.groups):
            index, stations = self.points(number, where)
            if not index.size:
                continue
            which = np.array([i in tensionless for i in g.placed.index])
            state = solve_section(
                self.section(number, stations),
                g.modulus(E)[:, stations],
                which,
                _free_of(free, g.placed.index, index),
                load[:, index],
                None if near is None else near[:, index],
            )
            found.take(index, state)
        return found.states(where.shape)

    def tension(self, part: int, stress: Array, planar: bool) -> Array:
        """Stress of a part at the fibres where it may be largest, shape (C, K, n); -inf where the part is not.

        Parameters
        ----------
        part : int
            Number of the part.
        stress : ndarray, shape (3, K, n)
            Its stress as a plane about the analysis line [Pa, Pa/m].
        planar : bool
            Bending in the vertical plane alone.
        """
        values = self.fibres(part, stress, planar)[0]
        return np.where(np.isnan(values), -np.inf, values)

    def fibres(self, part: int, stress: Array, planar: bool) -> Array:
        """Stress, y and z of the fibres where a part's stress may be largest, shape (3, C, K, n); NaN without the part.

        Parameters as in `tension`.
        """
        everywhere = np.ones(stress.shape[1:], dtype=bool)
        flat = stress.reshape(3, -1)
        line = self.frame.line
        rows: list[tuple[NDArray[np.intp], Array]] = []
        for number, g in enumerate(self.frame.profile.groups):
            index, stations = self.points(number, everywhere)
            if part not in g.placed.index or not index.size:
                continue
            k = g.placed.index.index(part)
            y, z = (v[:, stations] for v in fibres(g.composition, k, planar))
            v = flat[:, index]
            if not planar:
                more = _on_arcs(arc_data(g.composition, k)[:, :, stations], v)
                y, z = np.concatenate((y, more[0])), np.concatenate((z, more[1]))
            rows.append((index, np.stack((v[0] + v[1] * (z - line[0]) + v[2] * (-y - line[1]), y, z))))
        count = max((found.shape[1] for _, found in rows), default=1)
        result = np.full((3, count, flat.shape[1]), np.nan)
        for index, found in rows:
            result[:, : found.shape[1], index] = found
        return result.reshape(3, count, *stress.shape[1:])

    def pressed(self, part: int, stress: Array) -> Array:
        """Moments of a part's region in compression about the analysis line, shape (6, K, n): A, S0, S1, I00, I01, I11.

        Parameters
        ----------
        part : int
            Number of the part.
        stress : ndarray, shape (3, K, n)
            Its stress as a plane about the analysis line.
        """
        everywhere = np.ones(stress.shape[1:], dtype=bool)
        flat, result = stress.reshape(3, -1), np.zeros((6, everywhere.size))
        for number, g in enumerate(self.frame.profile.groups):
            index, stations = self.points(number, everywhere)
            if part in g.placed.index and index.size:
                v = flat[:, index]
                line = np.stack((v[0], v[1], -v[2]))
                found = clipped_moments(self.section(number, stations), g.placed.index.index(part), line)
                A, y, z, zz, yy, yz = found
                result[:, index] = (A, z, -y, zz, -yz, yy)
        return result.reshape(6, *stress.shape[1:])

    def shares_carried(self, where: Mask, forces: Forces) -> Array:
        """How many times its moment a section without tension can carry at its axial force; inf elsewhere, (K, n)."""
        result = np.full(where.size, np.inf)
        load = SIGNS[:, None] * np.stack((forces.N.ravel(), forces.M[0].ravel(), forces.M[1].ravel()))
        for number in range(len(self.frame.profile.groups)):
            index, stations = self.points(number, where)
            if index.size:
                result[index] = largest_shares(self.section(number, stations), load[:, index])
        return result.reshape(where.shape)


@dataclass(eq=False)
class _Collected:
    """States of all groups put together, flat."""

    plane: Array
    flexibility: Array
    carried: Mask
    converged: Mask
    rounds: int = 0

    @classmethod
    def of(cls, points: int) -> _Collected:
        true = np.ones(points, dtype=bool)
        return cls(np.full((3, points), np.nan), np.zeros((points, 3, 3)), true, true.copy())

    def take(self, index: NDArray[np.intp], state: SectionState) -> None:
        self.plane[:, index] = SIGNS[:, None] * state.plane
        self.flexibility[index] = _inverse(state.matrix)
        self.carried[index], self.converged[index] = state.carried, state.converged
        self.rounds = max(self.rounds, state.rounds)

    def states(self, shape: tuple[int, ...]) -> PointStates:
        return PointStates(
            self.plane.reshape(3, *shape),
            self.flexibility.reshape(*shape, 3, 3),
            self.carried.reshape(shape),
            self.converged.reshape(shape),
            self.rounds,
        )


def _free_of(free: Planes, parts: tuple[int, ...], index: NDArray[np.intp]) -> FreePlanes:
    e, a, b = np.zeros((3, len(parts), index.size))
    for k, part in enumerate(parts):
        if part in free:
            v = free[part].reshape(3, -1)[:, index]
            e[k], a[k], b[k] = v[0], v[1], -v[2]
    return FreePlanes(e, a, b)


def _inverse(matrix: Array) -> Array:
    """Flexibility in the member's signs of stiffness matrices in the section's, scaled before it is turned over."""
    scale = np.sqrt(np.einsum("sii->si", matrix))
    both = scale[:, :, None] * scale[:, None, :]
    # what a section without tension has left may be nearly nothing in one direction
    scaled = matrix / both + 1e-15 * np.eye(3)
    return np.asarray(np.linalg.inv(scaled) / both * (SIGNS[:, None] * SIGNS))


def _on_arcs(arcs: Array, v: Array) -> tuple[Array, Array]:
    """Point y, z of each outward arc where a stress plane is largest, each (E, S); arcs of shape (5, E, S)."""
    y_c, z_c, radius, start, turn = arcs
    angle = np.arctan2(v[1], -v[2])
    passed = np.mod(angle - start, 2.0 * np.pi)
    nearest = np.where(passed - turn < 2.0 * np.pi - passed, start + turn, start)
    angle = np.where(passed <= turn, angle, nearest)
    return y_c + radius * np.cos(angle), z_c + radius * np.sin(angle)
