"""What acts on a cracking member in one combination: loads so far, set of moduli by set of moduli.

Sustained shares come first, on long-term moduli; then all loads act on short-term ones, from the strains inherited:
a part whose stress was s under long-term modulus E' keeps the free strain e - s / E of its creep. Uncracked, this is
the sum of shares that the linear road forms.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import planes_of
from fishbelly.member.analysis import Analysis, Share
from fishbelly.member.cracked_law import CrackedLaw, LawState
from fishbelly.member.cracked_sections import CrackedSections, Planes, cracking_parts, no_tension_parts
from fishbelly.member.cracked_solve import CLOSED, Closed, Phase, close, slid_after, total_actions
from fishbelly.member.forces import Forces
from fishbelly.member.nodes import Layout, layout
from fishbelly.member.response import Response
from fishbelly.member.section_law import ElasticLaw
from fishbelly.sections.effective_inertia import Stiffening

Array = NDArray[np.float64]
Mask = NDArray[np.bool_]


@dataclass(frozen=True, eq=False)
class Solved:
    """A phase in equilibrium with its law."""

    law: CrackedLaw
    closed: Closed

    def fibres(self) -> dict[int, Array]:
        """Tension over the stress at which it cracks at the fibres of each part that cracks, (C, K, n) by part."""
        return self.law.fibres(self.closed.state.uncracked.plane)


@dataclass(frozen=True, eq=False)
class Phases:
    """The phases of one combination on one grid.

    Parameters
    ----------
    analysis : Analysis
        The grid.
    shares : tuple of Share
        What of the combination acts on which moduli.
    lifted : frozenset of str
        Bearings that have lifted off.
    rule : str or None
        Rule of tension stiffening along x.
    shear : bool
        Whether shear deformation counts, where the member says so.
    """

    analysis: Analysis
    shares: tuple[Share, ...]
    lifted: frozenset[str]
    rule: str | None = None
    shear: bool = True
    sections: CrackedSections = field(init=False, repr=False)

    def __post_init__(self) -> None:
        object.__setattr__(self, "sections", CrackedSections(self.analysis.frame))

    @cached_property
    def order(self) -> tuple[Share, ...]:
        """Shares with loads so far, long-term first; at least one."""
        short, *lasting = self.shares
        working = [s for s in (*lasting, short) if np.any(s.factors)] or [short]
        total, found = np.zeros_like(short.factors), []
        for share in working:
            total = total + share.factors
            found.append(Share(share.key, total))
        return tuple(found)

    @cached_property
    def stiffening(self) -> Stiffening | None:
        """Rule of tension stiffening; loads count as sustained as soon as a share of them is."""
        return None if self.rule is None else Stiffening(self.rule, any(s.key.long_term for s in self.order))

    @cached_property
    def layout(self) -> Layout:
        """Supports at work."""
        return layout(self.analysis.frame, self.lifted)

    @cached_property
    def planes(self) -> dict[int, Array]:
        """Free strain of the parts by every atom, (3, A, K, n) by part."""
        return planes_of(self.analysis.frame, [a.free for a in self.analysis.loads])

    @cached_property
    def never(self) -> frozenset[int]:
        """Parts that never carry tension."""
        return no_tension_parts(self.analysis.member)

    @cached_property
    def cracking(self) -> dict[int, float]:
        """Parts that crack, with the tensile stress at which they do [Pa]."""
        return cracking_parts(self.analysis.member)

    def loaded(self, share: Share) -> dict[int, Array]:
        """Free strain that the loads so far give the parts, (3, K, n) by part."""
        found = {part: np.einsum("a,cakn->ckn", share.factors, v) for part, v in self.planes.items()}
        return {part: v for part, v in found.items() if np.any(v)}

    def slide(self, share: Share) -> Array:
        """Shear flexibility of a phase: that of the uncracked section, shape (3, K, n)."""
        a = self.analysis
        if not (a.member.shear and self.shear):
            return np.zeros((3, *a.profile.panels.x.shape))
        return ElasticLaw.of(a.frame, a.moduli(share.key), a.planes, True).slide

    def phase(self, share: Share, before: Closed | None) -> Phase:
        """What acts in a phase."""
        a, slide = self.analysis, self.slide(share)
        sinking = {s.case for s in a.member.supports if s.sinks}
        settled = tuple(
            (atom.case, float(f))
            for atom, f in zip(a.atoms, share.factors, strict=True)
            if f and atom.case in sinking and atom.span is None and atom.own_creep is None
        )
        slid = np.zeros((2, *slide.shape[1:])) if before is None else slid_after(before, slide)
        return Phase(total_actions(a.loads, share.factors), settled, slide, slid)

    def solve(
        self,
        mask: Mask,
        starts: Sequence[tuple[Forces, LawState | None]],
        all_cracked: bool = False,
        closed: float = CLOSED,
    ) -> tuple[Solved, ...]:
        """Bring every phase into equilibrium.

        Parameters
        ----------
        mask : ndarray of bool, shape (K, n)
            Places that count as cracked.
        starts : sequence of (Forces, LawState or None)
            For each phase forces, and a state of the law, near the ones looked for.
        all_cracked : bool
            Without tension stiffening.
        closed : float
            Change of forces, against the largest, at which equilibrium counts as closed.
        """
        found: list[Solved] = []
        inherited: tuple[dict[int, Array], dict[int, Array]] = ({}, {})
        loaded: dict[int, Array] = {}
        for share, (forces, near) in zip(self.order, starts, strict=True):
            new = self.loaded(share)
            more = _sum(new, {k: -v for k, v in loaded.items()})
            free = tuple(_sum(own, more) for own in inherited)
            rule = None if all_cracked else self.stiffening
            moduli = self.analysis.moduli(share.key)
            planar = self.analysis.planes == 1
            law = CrackedLaw(self.sections, moduli, self.never, self.cracking, mask, rule, (free[0], free[1]), planar)
            phase = self.phase(share, found[-1].closed if found else None)
            found.append(Solved(law, close(self.analysis, self.layout, law, phase, forces, near, closed)))
            loaded = new
            if len(found) < len(self.order):
                inherited = self._inherited(found[-1], self.order[len(found)])
        return tuple(found)

    def _inherited(self, done: Solved, following: Share) -> tuple[dict[int, Array], dict[int, Array]]:
        """Free strain on the moduli of the next phase that keeps strains and stresses as they are."""
        profile, state = self.analysis.profile, done.closed.state
        first = state.uncracked.plane
        second = np.where(self._known(state), state.cracked.plane, first)
        result: tuple[dict[int, Array], dict[int, Array]] = ({}, {})
        E_next = self.analysis.moduli(following.key).E
        for part in sorted({i for g in profile.groups for i in g.placed.index}):
            E = profile.part_modulus(part, E_next)
            for k, plane in enumerate((first, second)):
                strain = np.stack((plane[0], -plane[1], -plane[2]))
                free = done.law.free[k].get(part, 0.0)
                keep = strain - done.law.stress(part, plane, k) / np.where(E > 0.0, E, np.inf)
                # without creep of its own a part keeps the free strain it has, to the last digit
                same = profile.part_modulus(part, done.law.moduli.E) == E
                result[k][part] = np.where(same, free, keep)
        return result

    @staticmethod
    def _known(state: LawState) -> Mask:
        return np.asarray(np.isfinite(state.cracked.plane).all(axis=0))

    def uncracked(self) -> list[Forces]:
        """Forces of the loads so far in the uncracked member, for every phase."""
        a, found = self.analysis, []
        total: Response | None = None
        before = np.zeros(len(a.atoms))
        for share in self.order:
            r = a.responses(share.key, self.lifted).combined(share.factors - before)
            total = r if total is None else total + r
            before = share.factors
            found.append(Forces(total.N, total.V, total.M))
        return found


def _sum(own: Planes, more: dict[int, Array]) -> dict[int, Array]:
    result = dict(own)
    for part, v in more.items():
        result[part] = result[part] + v if part in result else v
    return result
