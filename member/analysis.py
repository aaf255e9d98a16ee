"""Solve a member once for every set of moduli in use, and combine: the road from description to response."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Actions, Atom, Frame, actions, atoms
from fishbelly.member.apex import pinched_at
from fishbelly.member.description import Combination, Member
from fishbelly.member.faults import CannotCompute, NoStiffness
from fishbelly.member.moduli import Moduli, has_band, moduli
from fishbelly.member.nodes import layout
from fishbelly.member.profile import Profile
from fishbelly.member.response import Response, free_of, respond
from fishbelly.member.sampling import build_profile
from fishbelly.member.section_law import ElasticLaw
from fishbelly.member.spans import spans

Array = NDArray[np.float64]

MOST_CHANGES = 60
"""Changes of bearings between bearing and lifted before the search is given up."""


@dataclass(frozen=True)
class ModuliKey:
    """Which set of moduli: band, long-term or not, and parts with a creep factor of their own."""

    band: str = "nominal"
    long_term: bool = False
    own: tuple[tuple[str, float], ...] = ()


@dataclass(frozen=True, eq=False)
class Share:
    """Part of a combination that acts on one set of moduli: factors of the atoms, shape (A,)."""

    key: ModuliKey
    factors: Array


@dataclass(frozen=True, eq=False)
class Combined:
    """Response of one combination.

    Parameters
    ----------
    combination : Combination
        Which one.
    shares : tuple of Share
        What acts on which moduli, all `pattern` loads on.
    lifted : frozenset of str
        Bearings that have lifted off.
    patterns : tuple of ndarray
        Masks of atoms that may be on or off together with nothing else, each shape (A,).
    total : Response
        Sum of everything, no axis of atoms.
    """

    combination: Combination
    shares: tuple[Share, ...]
    lifted: frozenset[str]
    patterns: tuple[NDArray[np.bool_], ...]
    total: Response


@dataclass(frozen=True, eq=False)
class Analysis:
    """A member with its grid and loads, ready to respond.

    Parameters
    ----------
    profile : Profile
        The sampled member.
    """

    profile: Profile
    _responses: dict[object, Response] = field(default_factory=dict, repr=False)
    _moduli: dict[ModuliKey, Moduli] = field(default_factory=dict, repr=False)
    _combined: dict[tuple[object, ...], Combined] = field(default_factory=dict, repr=False)

    @classmethod
    def of(cls, member: Member, more: Iterable[float] = ()) -> Analysis:
        """Sample a member; `more` are further borders of the grid [m]."""
        profile = build_profile(member, tuple(more))
        pinched = pinched_at(profile)
        if pinched is not None:
            raise NoStiffness(pinched, "the section runs out to nothing inside the member")
        return cls(profile)

    @property
    def member(self) -> Member:
        """The member."""
        return self.profile.member

    @cached_property
    def frame(self) -> Frame:
        """The grid with its analysis line."""
        return Frame.of(self.profile, self.moduli(ModuliKey()))

    @cached_property
    def atoms(self) -> tuple[Atom, ...]:
        """Groups of loads that act together."""
        return atoms(self.member)

    @cached_property
    def loads(self) -> list[Actions]:
        """What each atom puts on the grid."""
        return [actions(self.frame, a) for a in self.atoms]

    def moduli(self, key: ModuliKey) -> Moduli:
        """Return a set of moduli, always the same object for the same key."""
        if key == ModuliKey():
            return self.profile.short
        if key not in self._moduli:
            self._moduli[key] = moduli(self.member, key.band, key.long_term, dict(key.own))
        return self._moduli[key]

    @cached_property
    def planes(self) -> int:
        """2 where the member also bends sideways, else 1."""
        bands = ("nominal", "low", "high") if has_band(self.member) else ("nominal",)
        keys = {s.key for c in self.member.combinations for b in bands for s in self.shares(c, b)} | {ModuliKey()}
        if any(np.any(v) for a in self.loads for v in (a.q[1], a.P[1])):
            return 2
        pushed = any(np.any(a.n) or np.any(a.F) for a in self.loads)
        for key in keys:
            s = self.profile.stiffness(self.moduli(key))
            size = np.sqrt((s.EI_y + s.EI_z) / s.EA)
            skew = np.any(np.abs(s.EI_yz) > 1e-12 * np.sqrt(s.EI_y * s.EI_z))
            aside = np.abs(-s.y_c - self.frame.line[1]) > 1e-11 * size
            if skew:
                return 2
            free = free_of(self.frame, self.loads, self.moduli(key))
            turned = any(
                np.any(
                    np.abs(m[1] + n * (-s.y_c[self.profile.row] - self.frame.line[1]))
                    > 1e-11 * (np.abs(n) * size[self.profile.row] + np.abs(m[0]))
                )
                for n, m in free
            )
            if turned or (np.any(aside) and (pushed or len(self._holding) > 1)):
                return 2
            if any(np.any(np.abs(a.m[1]) > 1e-11 * np.abs(a.n) * size.max()) or np.any(a.C[1]) for a in self.loads):
                return 2
        return 1

    @cached_property
    def _holding(self) -> list[str]:
        return [s.name for s in self.member.supports if s.along > 0.0]

    def responses(self, key: ModuliKey, lifted: frozenset[str] = frozenset(), shear: bool | None = None) -> Response:
        """Responses to every atom on one set of moduli."""
        with_shear = self.member.shear if shear is None else shear
        name = (key, lifted, with_shear)
        if name not in self._responses:
            law = ElasticLaw.of(self.frame, self.moduli(key), self.planes, with_shear)
            free = free_of(self.frame, self.loads, self.moduli(key))
            place = layout(self.frame, lifted)
            self._responses[name] = respond(self.frame, place, law, self.atoms, self.loads, free, self.planes)
        return self._responses[name]

    def shares(self, combination: Combination, band: str = "nominal") -> tuple[Share, ...]:
        """What of a combination acts on which moduli.

        The share `sustained` of a case acts on long-term moduli, the rest on short-term ones; shrinkage with
        a creep factor of its own has a set of its own.
        """
        factors = np.array([combination.factors.get(a.case, 0.0) for a in self.atoms])
        lasting = np.array([combination.sustained.get(a.case, 0.0) for a in self.atoms]) * factors
        found = [Share(ModuliKey(band), factors - lasting)]
        own = dict.fromkeys(a.own_creep for a in self.atoms)
        for creep in own:
            mine = np.array([a.own_creep == creep for a in self.atoms]) & (lasting != 0.0)
            if mine.any():
                found.append(Share(ModuliKey(band, True, (creep,) if creep else ()), np.where(mine, lasting, 0.0)))
        return tuple(found)

    def combine(self, combination: Combination, band: str = "nominal") -> Combined:
        """Response of a combination, bearings that cannot pull lifted off where they would; computed once."""
        key = (tuple(combination.factors.items()), tuple(combination.sustained.items()), combination.name, band)
        if key not in self._combined:
            self._combined[key] = self._combine(combination, band)
        return self._combined[key]

    def _combine(self, combination: Combination, band: str) -> Combined:
        shares = self.shares(combination, band)
        patterns = self._patterns(combination)
        if any(s.only_up for s in self.member.supports):
            lifted = self.bearing(shares)
        else:
            lifted = frozenset[str]()
        return Combined(combination, shares, lifted, patterns, self.superposed(shares, lifted))

    def superposed(
        self,
        shares: Sequence[Share],
        lifted: frozenset[str],
        shear: bool | None = None,
        off: NDArray[np.bool_] | None = None,
    ) -> Response:
        """Sum of shares; atoms in `off` left out."""
        parts = []
        for share in shares:
            factors = share.factors if off is None else np.where(off, 0.0, share.factors)
            parts.append(self.responses(share.key, lifted, shear).combined(factors))
        total = parts[0]
        for part in parts[1:]:
            total = total + part
        return total

    def round_off(self, total: Response) -> float:
        """Deflection below which a combination's is nothing but round-off [m].

        Moments are good to 1e-12, and an axial force meets a centroid whose coordinates have fewer digits the
        farther it lies from the datum.
        """
        s = self.profile.stiffness(self.moduli(ModuliKey()))
        panels, row = self.profile.panels, self.profile.row
        stiff, axial = (
            float(panels.integrate(v[row])[1].sum()) / self.member.length for v in (np.minimum(s.EI_y, s.EI_z), s.EA)
        )
        size, far = float(np.sqrt(stiff / axial)), float(np.abs(self.frame.line).max())
        arm = 1e-12 * size + 16.0 * float(np.finfo(float).eps) * far
        moment = 1e-12 * float(np.abs(total.M).max()) + arm * float(np.abs(total.N).max())
        longest = max((span.length for span in spans(self.member)), default=self.member.length)
        return moment / stiff * longest**2

    def _patterns(self, combination: Combination) -> tuple[NDArray[np.bool_], ...]:
        """Atoms of `pattern` loads, those of one span and case together."""
        masks = []
        for k, atom in enumerate(self.atoms):
            if atom.span is not None and combination.factors.get(atom.case, 0.0):
                mask = np.zeros(len(self.atoms), dtype=bool)
                mask[k] = True
                masks.append(mask)
        return tuple(masks)

    def bearing(self, shares: tuple[Share, ...]) -> frozenset[str]:
        """Which bearings have lifted: none pulls, none sinks into its seat."""
        lifted: frozenset[str] = frozenset()
        seen = {lifted}
        supports = self.member.supports
        for _ in range(MOST_CHANGES):
            r = self.superposed(shares, lifted)
            size = np.abs(r.reactions[:, 0]).max(initial=0.0)
            pulls = {
                s.name: r.reactions[k, 0]
                for k, s in enumerate(supports)
                if s.only_up and s.name not in lifted and r.reactions[k, 0] > 1e-9 * size
            }
            presses = {s.name: g for s in supports if s.name in lifted and (g := self._gap(r, shares, s.name)) > 0.0}
            if not pulls and not presses:
                return lifted
            if pulls:
                lifted = lifted | {max(pulls, key=lambda n: pulls[n])}
            else:
                lifted = lifted - {max(presses, key=lambda n: presses[n])}
            if lifted in seen:
                break
            seen.add(lifted)
        raise CannotCompute("no state of the bearings that cannot pull was found in which all of them agree")

    def _gap(self, r: Response, shares: tuple[Share, ...], name: str) -> float:
        """How far the member would sink below the seat of a lifted bearing [m], round-off taken off."""
        support = next(s for s in self.member.supports if s.name == name)
        panels = self.profile.panels
        k = panels.border(support.at)
        w = r.deflection[0]
        here = float(w[k] @ panels.rule.left if k < panels.count else w[-1] @ panels.rule.right)
        factor = sum(
            float(f)
            for s in shares
            for f, a in zip(s.factors, self.atoms, strict=True)
            if a.case == support.case and a.span is None
        )
        return here - support.sinks * factor - 1e-9 * float(np.abs(w).max())
