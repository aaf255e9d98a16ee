"""Shear flow through a level of the section: what the stresses above it gain along the member.

With F the axial force of all that lies above a fixed level, equilibrium of the strip between two neighbouring sections
makes the flow through the level -dF/dx. That holds where the section varies (at a sloping face it gives the stress
there times the slope of the face), for what stages and free strain have left, and under thrust; where nothing varies
along x it is V Q / I, D. J. Jourawski's formula. Axial load that is spread along the member comes in over the section
in proportion to E: it makes no flow.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.carried import rate
from fishbelly.member.inclined_stress import any_inclined, shear_in_webs
from fishbelly.member.level_geometry import LevelSite, Slab, above, on_level
from fishbelly.member.part_forces import Loading, share_plane
from fishbelly.member.profile import Group, group_places
from fishbelly.sections.area_moments import AreaMoments
from fishbelly.sections.level_pieces import has_gaps, piece_flow

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Flows:
    """Shear flow through levels at one place, for one combination.

    Parameters
    ----------
    site : LevelSite
        The place, with the outlines there and just beside it.
    loading : sequence of Loading
        Shares and steps of the combination; all pieces count.
    """

    site: LevelSite
    loading: Sequence[Loading]

    @property
    def line(self) -> Array:
        """The analysis line, shape (2,) [m]."""
        return self.loading[0].end.line

    @cached_property
    def planes(self) -> tuple[dict[int, tuple[Array, Array]], ...]:
        """By share and part there: its stress plane v0, v1, v2 at x, and how fast that changes along x, each (3,)."""
        return tuple(self._planes(share) for share in self.loading)

    def _planes(self, share: Loading) -> dict[int, tuple[Array, Array]]:
        found = {}
        for part in self.site.group.placed.index:
            plane = share_plane(share, part)
            if plane is not None:
                whole = plane.sum(axis=0)
                found[part] = (self.site.value(whole), self.site.value(rate(self.site.panels, whole)))
        return found

    def stress(self, part: int, y: float, z: float) -> float:
        """Stress along x of a part at a point, E times strain [Pa]."""
        v = np.sum([planes[part][0] for planes in self.planes if part in planes], axis=0)
        return float(v @ [1.0, z - self.line[0], -y - self.line[1]]) if np.ndim(v) else 0.0

    def shears(self, slab: Slab) -> Array:
        """Mean shear stress over the width of every part at a level, positive as V, shape (P,) [Pa].

        The flow of each share is spread over the parts that carried it, as G times their width.
        """
        group = self.site.group
        width, index = on_level(self.site, slab), group.placed.index
        gains = self._gains(slab)
        total = np.zeros(len(index))
        for share, planes, gain in zip(self.loading, self.planes, gains, strict=True):
            G = group.modulus(share.moduli.G)[:, 0]
            if not np.all(share.moduli.G[list(index)] > 0.0):
                # without a shear modulus stiffness shares the flow by E
                G = group.modulus(share.moduli.E)[:, 0]
            there = G * width.width * np.array([i in planes for i in index])
            if not there.sum() > 0.0:
                there = G * width.width
            if there.sum() > 0.0:
                total += gain * np.where(there > 0.0, G, 0.0) / there.sum()
        return total

    def _gains(self, slab: Slab) -> list[float]:
        """Flow through a level of every share, positive as V [N/m]."""
        over, more = self._moments(slab)
        whole, whole_more = self._whole
        E = self.site.group.modulus(self.loading[0].end.profile.short.E)[:, 0]
        EA = E @ whole[:, 0]
        part_of = float(E @ over[:, 0] / EA) if EA > 0.0 else 0.0
        found = []
        for share, planes in zip(self.loading, self.planes, strict=True):
            parted = self._in_pieces(share, slab.z)
            if parted is not None:
                found.append(parted)
                continue
            gain = _gain(planes, self.site.group.placed.index, over, more)
            entering = _gain(planes, self.site.group.placed.index, whole, whole_more)
            found.append(part_of * entering - gain)
        return found

    def _in_pieces(self, share: Loading, z: float) -> float | None:
        """Flow where the section of a share stands in pieces one above the other; None where it does not."""
        profile = share.step.frame.profile
        group = self._group_of(share)
        if not has_gaps(group.composition.levels):
            return None
        V = share.response.V[0]
        if any_inclined(profile):
            V = shear_in_webs(share, 0, share.step.frame.line)
        E, G = group.modulus(share.moduli.E), group.modulus(share.moduli.G)
        G = G if np.all(G.max(axis=1) > 0.0) else E
        unit = piece_flow(group.composition.levels, E, G, z, group.over_opening)
        return float(self.site.value(V.sum(axis=0))) * unit

    def _group_of(self, share: Loading) -> Group:
        """Section at x as it was when a share arrived."""
        geometry = share.step.frame.profile.geometry
        if geometry is self.site.geometry:
            return self.site.group
        x = np.array([[self.site.x]])
        return group_places(geometry, x, np.array([self.site.middle]), 0, self.site.side)[0]

    @cached_property
    def _whole(self) -> tuple[Array, Array]:
        moments = self._about_line(self.site.group.moments)
        return moments[:, :, 0], self.site.slope(moments)

    def _moments(self, slab: Slab) -> tuple[Array, Array]:
        """A, ∫c0, ∫c1 of what works of every part above a level, and how fast they change along x, each (P, 3)."""
        moments = self._about_line(above(self.site, slab))
        w = on_level(self.site, slab, working=True)
        strip = np.stack((w.width, w.width * (slab.z - self.line[0]), -w.first - w.width * self.line[1]), axis=1)
        # the level followed rises with the outlines: what it leaves below itself belongs above the fixed one
        return moments[:, :, 0], self.site.slope(moments) + slab.rise * strip

    def _about_line(self, m: AreaMoments) -> Array:
        A = m.area
        return np.stack((A, A * (m.z - self.line[0]), A * (-m.y - self.line[1])), axis=1)


def _gain(planes: dict[int, tuple[Array, Array]], index: tuple[int, ...], moments: Array, more: Array) -> float:
    """What the force of stress planes over areas gains along x [N/m]."""
    return float(
        sum(
            faster @ moments[k] + value @ more[k]
            for k, (value, faster) in ((k, planes[i]) for k, i in enumerate(index) if i in planes)
        )
    )
