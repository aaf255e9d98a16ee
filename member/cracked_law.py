"""The law of cracked sections for all loads together: forces at the grid points to strains, node by node.

State I is the section before it cracks (parts that never carry tension carry none), state II the section in which no
part that can crack carries tension. Where a place counts as cracked its strains are (1 - zeta) times those of state I
and zeta times those of state II (EN 1992-1-1:2004, 7.4.3(3), (7.18)); zeta is 1 without tension stiffening.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.cracked_sections import CrackedSections, Planes, PointStates
from fishbelly.member.forces import Forces
from fishbelly.member.moduli import Moduli
from fishbelly.member.section_law import ElasticLaw
from fishbelly.sections.effective_inertia import Stiffening

Array = NDArray[np.float64]
Mask = NDArray[np.bool_]

_STEP = 1e-6
SOFT = 1e3
"""So much softer than uncracked a section counts, while the search goes on, that cannot carry its forces."""


@dataclass(frozen=True, eq=False)
class LawState:
    """Strains under forces, and the tangent there.

    Parameters
    ----------
    plane : ndarray, shape (3, K, n)
        Strain on the analysis line and curvatures of both planes.
    flexibility : ndarray, shape (K, n, 3, 3)
        Their change by N, M0 and M1.
    uncracked, cracked : PointStates
        States I and II; II only where it was asked for.
    over : ndarray, shape (K, n)
        Largest tensile stress in state I over the stress at which it cracks, largest of all parts; -inf without any.
    zeta : ndarray, shape (K, n)
        Share of state II.
    """

    plane: Array
    flexibility: Array
    uncracked: PointStates
    cracked: PointStates
    over: Array
    zeta: Array

    @property
    def carried(self) -> Mask:
        """Whether every section can carry its forces, shape (K, n)."""
        return self.uncracked.carried & self.cracked.carried

    @property
    def converged(self) -> Mask:
        """Whether every strain plane closed, shape (K, n)."""
        return self.uncracked.converged & self.cracked.converged

    def tangent(self, panels: object, slide: Array) -> ElasticLaw:
        """Return the flexibility as an elastic law."""
        F = self.flexibility
        own, other, both = F[..., 1, 1], F[..., 2, 2], F[..., 1, 2]
        det = own * other - both * both
        a0, a1 = F[..., 0, 1], F[..., 0, 2]
        c0, c1 = (other * a0 - both * a1) / det, (own * a1 - both * a0) / det
        axial = F[..., 0, 0] - c0 * a0 - c1 * a1
        EA = 1.0 / np.maximum(axial, 1e-14 * F[..., 0, 0])
        return ElasticLaw(panels, EA, np.stack((c0, c1)), np.stack((own, other, both)), slide)  # type: ignore[arg-type]


@dataclass(frozen=True, eq=False)
class CrackedLaw:
    """The law of one set of moduli and one set of cracked places.

    Parameters
    ----------
    sections : CrackedSections
        The sections of the grid.
    moduli : Moduli
        E and G of the parts.
    never : frozenset of int
        Parts that never carry tension.
    cracking : mapping
        Parts that crack, with the tensile stress at which they do [Pa].
    mask : ndarray of bool, shape (K, n)
        Places that count as cracked.
    stiffening : Stiffening or None
        Rule of tension stiffening; None without.
    free : tuple of Planes
        Free strain of the parts in state I and in state II, what history left in them counted.
    planar : bool
        Bending in the vertical plane alone.
    held : tuple of Forces
        Forces that parts which are going still carry for the section, in state I and in state II; none where empty.
    """

    sections: CrackedSections
    moduli: Moduli
    never: frozenset[int]
    cracking: Mapping[int, float]
    mask: Mask
    stiffening: Stiffening | None
    free: tuple[Planes, Planes]
    planar: bool
    held: tuple[Forces, ...] = ()

    def at(self, forces: Forces, near: LawState | None = None) -> LawState:
        """Return strains under forces; `near` is a state from which to start."""
        everywhere = np.ones(self.mask.shape, dtype=bool)
        E, brittle = self.moduli.E, self.never | frozenset(self.cracking)
        own = [forces.plus(h, -1.0) for h in self.held] or [forces, forces]
        first = self.sections.states(
            E, self.never, self.free[0], own[0], everywhere, None if near is None else near.uncracked.plane
        )
        start = first.plane if near is None else near.cracked.plane
        second = self.sections.states(E, brittle, self.free[1], own[1], self.mask, start)
        over = self.over(self.fibres(first.plane))
        one, two = _softened(first, first), _softened(second, first)
        cracked = np.where(self.mask, two[0], one[0])
        zeta = self._zeta(over, one[0], cracked)
        plane = one[0] + zeta * (cracked - one[0])
        share = zeta[..., None, None]
        flexibility = (1.0 - share) * one[1] + share * np.where(self.mask[..., None, None], two[1], one[1])
        if self.stiffening is not None:
            # a little more moment makes zeta grow too; about right, for the tangent alone
            grown = (self._zeta(over * (1.0 + _STEP), one[0], cracked) - zeta) / _STEP
            moment = np.where(forces.M[0] == 0.0, np.inf, forces.M[0])
            flexibility[..., 1, 1] += np.maximum(grown * (cracked[1] - one[0][1]) / moment, 0.0)
        return LawState(plane, flexibility, first, second, over, zeta)

    def _zeta(self, over: Array, first: Array, second: Array) -> Array:
        """Share of state II, shape (K, n), given the strains of both states."""
        if self.stiffening is None:
            return np.where(self.mask, 1.0, 0.0)
        tense = over > 0.0
        ratio = np.where(tense, 1.0 / np.where(tense, over, 1.0), np.inf)
        bent = first[1] != 0.0
        growth = np.where(bent, second[1] / np.where(bent, first[1], 1.0), 1.0)
        return np.where(self.mask, self.stiffening.zeta(ratio, growth), 0.0)

    def fibres(self, plane: Array) -> dict[int, Array]:
        """Tension over the stress at which it cracks at the fibres of every part that cracks, (C, K, n) by part."""
        return {
            part: self.sections.tension(part, self.stress(part, plane, 0), self.planar) / limit
            for part, limit in self.cracking.items()
        }

    def over(self, fibres: Mapping[int, Array]) -> Array:
        """Largest of all fibres, shape (K, n)."""
        if not fibres:
            return np.full(self.mask.shape, -np.inf)
        return np.asarray(np.max([v.max(axis=0) for v in fibres.values()], axis=0))

    def stress(self, part: int, plane: Array, state: int) -> Array:
        """Stress of a part as a plane v0 + v1 c0 + v2 c1, (3, K, n) [Pa, Pa/m], tension of cracked parts not cut off.

        `state`: 0 of state I, 1 of state II, for their free strain.
        """
        strain = np.stack((plane[0], -plane[1], -plane[2]))
        if part in self.free[state]:
            strain = strain - self.free[state][part]
        return self.sections.frame.profile.part_modulus(part, self.moduli.E) * strain


def _softened(own: PointStates, other: PointStates) -> tuple[Array, Array]:
    """Strains and flexibility, where the section cannot carry its forces those of a very soft one."""
    if own.carried.all():
        return own.plane, own.flexibility
    plane = np.where(np.isfinite(other.plane), other.plane, 0.0)
    lost = ~own.carried
    soft = np.where(lost[..., None, None], SOFT * own.flexibility, own.flexibility)
    return np.where(lost, SOFT * plane, own.plane), soft
