"""Solve a member once for every set of moduli in use, and combine: the road from description to response."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Actions, Atom, Frame, actions, atoms, planes_of
from fishbelly.member.apex import pinched_at
from fishbelly.member.bearings import bearing
from fishbelly.member.description import Combination, Member
from fishbelly.member.faults import NoStiffness
from fishbelly.member.forces import Forces
from fishbelly.member.moduli import Moduli, has_band, moduli
from fishbelly.member.nodes import layout
from fishbelly.member.profile import Profile
from fishbelly.member.response import Response, free_of
from fishbelly.member.sampling import build_profiles
from fishbelly.member.section_law import ElasticLaw
from fishbelly.member.slip_layers import has_soft_joints
from fishbelly.member.slip_setting import joint_borders, tied
from fishbelly.member.spans import spans
from fishbelly.member.stage_view import StageView, stage_views
from fishbelly.member.staging import Planes, Setting, Step, life, summed

Array = NDArray[np.float64]


@dataclass(frozen=True)
class ModuliKey:
    """Which set of moduli: band, long-term or not, and parts with a creep factor of their own.

    `stage`: of which stage, the last where it says none; `aged`: divided by 1 + chi phi ("aged") or by 1 + phi
    ("softened") of the creep that runs off in the stage.
    """

    band: str = "nominal"
    long_term: bool = False
    own: tuple[tuple[str, float], ...] = ()
    stage: int | None = None
    aged: str = ""


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
    upto : int, optional
        Number of the stage at whose end it is; the last where none is given.
    """

    combination: Combination
    shares: tuple[Share, ...]
    lifted: frozenset[str]
    patterns: tuple[NDArray[np.bool_], ...]
    total: Response
    upto: int | None = None


@dataclass(frozen=True, eq=False)
class Analysis:
    """A member with its grid and loads, ready to respond.

    Parameters
    ----------
    profile : Profile
        The sampled member, in its last stage.
    earlier : tuple of Profile
        The member in the stages before, on the same grid.
    at_once : bool
        Nothing creeps: no stage is long-term, no share sustained, no creep runs off.
    """

    profile: Profile
    earlier: tuple[Profile, ...] = ()
    at_once: bool = False
    _responses: dict[object, Response] = field(default_factory=dict, repr=False)
    _histories: dict[object, tuple[Step, ...]] = field(default_factory=dict, repr=False)
    _moduli: dict[ModuliKey, Moduli] = field(default_factory=dict, repr=False)
    _combined: dict[tuple[object, ...], Combined] = field(default_factory=dict, repr=False)

    @classmethod
    def of(cls, member: Member, more: Iterable[float] = ()) -> Analysis:
        """Sample a member; `more` are further borders of the grid [m]."""
        borders = tuple(more)
        if has_soft_joints(member):
            borders = (*borders, *joint_borders(member, borders))
        *earlier, last = build_profiles(member, borders)
        pinched = pinched_at(last)
        if pinched is not None:
            raise NoStiffness(pinched, "the section runs out to nothing inside the member")
        return cls(last, tuple(earlier))

    @property
    def member(self) -> Member:
        """The member."""
        return self.profile.member

    @cached_property
    def views(self) -> tuple[StageView, ...]:
        """Stages in order of time; one for a member without stages."""
        return stage_views(self.member)

    @cached_property
    def frame(self) -> Frame:
        """The grid with its analysis line, in the last stage."""
        view = self.views[-1]
        return Frame.of(self.profile, self.moduli(ModuliKey()), view=None if view.stage is None else view)

    @cached_property
    def frames(self) -> tuple[Frame, ...]:
        """The grid in every stage, about one analysis line."""
        earlier = zip(self.earlier, self.views[:-1], strict=True)
        return (*(Frame.of(p, p.short, self.frame.line, view) for p, view in earlier), self.frame)

    @cached_property
    def atoms(self) -> tuple[Atom, ...]:
        """Groups of loads that act together."""
        return atoms(self.member)

    @cached_property
    def loads(self) -> list[Actions]:
        """What each atom puts on the grid."""
        return [actions(self.frames[self.stage_of(a)], a) for a in self.atoms]

    def stage_of(self, atom: Atom) -> int:
        """Number of the stage in which a load arrives."""
        return next((v.index for v in self.views if atom.case in v.cases), len(self.views) - 1)

    def moduli(self, key: ModuliKey) -> Moduli:
        """Return a set of moduli, always the same object for the same key."""
        if key == ModuliKey():
            return self.profile.short
        if key not in self._moduli:
            stage = self.views[-1 if key.stage is None else key.stage].stage
            aged = {}
            if stage is not None and key.aged:
                share = stage.ageing if key.aged == "aged" else 1.0
                aged = {name: 1.0 + share * phi for name, phi in stage.creep.items()}
            self._moduli[key] = moduli(self.member, key.band, key.long_term, dict(key.own), stage, aged)
        return self._moduli[key]

    @cached_property
    def planes(self) -> int:
        """2 where the member also bends sideways, else 1."""
        return max(self._planes_of(frame) for frame in self.frames)

    def _planes_of(self, frame: Frame) -> int:
        """2 where the member also bends sideways in one stage, else 1."""
        stage = None if frame.view is None else frame.view.index
        bands = ("nominal", "low", "high") if has_band(self.member) else ("nominal",)
        keys = {s.key for c in self.member.combinations for b in bands for s in self.shares(c, b)} | {ModuliKey()}
        keys = {replace(key, stage=stage) for key in keys}
        if any(np.any(v) for a in self.loads for v in (a.q[1], a.P[1])):
            return 2
        pushed = any(np.any(a.n) or np.any(a.F) for a in self.loads)
        for key in keys:
            s = frame.profile.stiffness(self.moduli(key))
            size = np.sqrt((s.EI_y + s.EI_z) / s.EA)
            skew = np.any(np.abs(s.EI_yz) > 1e-12 * np.sqrt(s.EI_y * s.EI_z))
            aside = np.abs(-s.y_c - frame.line[1]) > 1e-11 * size
            if skew:
                return 2
            row = frame.profile.row
            turned = any(
                np.any(
                    np.abs(f.M[1] + f.N * (-s.y_c[row] - frame.line[1]))
                    > 1e-11 * (np.abs(f.N) * size[row] + np.abs(f.M[0]))
                )
                for f in free_of(frame, self.loads, self.moduli(key))
            )
            if turned or (np.any(aside) and (pushed or len(self._holding) > 1)):
                return 2
            if any(np.any(np.abs(a.m[1]) > 1e-11 * np.abs(a.n) * size.max()) or np.any(a.C[1]) for a in self.loads):
                return 2
        return 1

    @cached_property
    def _holding(self) -> list[str]:
        return [s.name for s in self.member.supports if s.along > 0.0]

    def responses(
        self,
        key: ModuliKey,
        lifted: frozenset[str] = frozenset(),
        shear: bool | None = None,
        upto: int | None = None,
    ) -> Response:
        """Responses to every atom on one set of moduli, at the end of a stage (default the last)."""
        name = (key, lifted, shear, upto)
        if name not in self._responses:
            self._responses[name] = summed(self.history(key, lifted, shear), upto)
        return self._responses[name]

    def history(
        self, key: ModuliKey, lifted: frozenset[str] = frozenset(), shear: bool | None = None
    ) -> tuple[Step, ...]:
        """What every atom does, step by step, on one set of moduli; computed once."""
        with_shear = self.member.shear if shear is None else shear
        name = (key, lifted, with_shear)
        if name not in self._histories:
            settings = [self.setting(k, key, lifted, with_shear) for k in range(len(self.views))]
            self._histories[name] = life(settings, self.atoms, self.loads, self._free, self._free_planes, self.planes)
        return self._histories[name]

    def setting(self, k: int, key: ModuliKey, lifted: frozenset[str], shear: bool) -> Setting:
        """What a stage offers to loads on one set of moduli."""
        view, frame = self.views[k], self.frames[k]
        stage, planes = view.stage, self.planes
        lasting = key.long_term or (stage is not None and stage.long_term and not self.at_once)
        mine = self.moduli(key if stage is None else replace(key, stage=k, long_term=lasting))
        place = layout(frame, lifted | view.gone, view.hinges, self._homes)
        aged = softened = None
        if stage is not None and stage.creep and not self.at_once:
            aged, softened = (self.moduli(replace(key, stage=k, aged=how)) for how in ("aged", "softened"))
        if has_soft_joints(self.member):
            tie, law = tied(frame, view, key.band, lasting, dict(key.own), planes, shear, lifted | view.gone)
        else:
            tie = None

            def law(moduli: Moduli, _: str) -> ElasticLaw:
                return ElasticLaw.of(frame, moduli, planes, shear)

        short = mine if stage is None else self.moduli(replace(key, stage=k))
        return Setting(view, frame, place, mine, short, lasting, law, aged, softened, tie, self._homes)

    @cached_property
    def _homes(self) -> dict[str, Frame]:
        """The stage in which each support first holds, by name."""
        return {
            s.name: next(f for f, v in zip(self.frames, self.views, strict=True) if s.name not in v.gone)
            for s in self.member.supports
        }

    def _free(self, s: Setting, which: Sequence[int]) -> list[Forces]:
        loads = [self.loads[k] for k in which]
        return free_of(s.frame, loads, s.moduli) if s.tie is None else s.tie.free(s.frame, loads, s.moduli)

    def _free_planes(self, s: Setting, which: Sequence[int]) -> Planes:
        return planes_of(s.frame, [self.loads[k].free for k in which])

    def shares(self, combination: Combination, band: str = "nominal") -> tuple[Share, ...]:
        """What of a combination acts on which moduli.

        The share `sustained` of a case acts on long-term moduli, the rest on short-term ones; shrinkage with
        a creep factor of its own has a set of its own.
        """
        factors = np.array([combination.factors.get(a.case, 0.0) for a in self.atoms])
        sustained = {} if self.at_once else combination.sustained
        lasting = np.array([sustained.get(a.case, 0.0) for a in self.atoms]) * factors
        own = dict.fromkeys(a.own_creep for a in self.atoms)
        slow = np.array([self._in_long_term_stage(a) for a in self.atoms])
        found = [Share(ModuliKey(band), np.where(slow, 0.0, factors - lasting))]
        for creep in own:
            mine = slow & np.array([a.own_creep == creep for a in self.atoms])
            if creep and mine.any():
                found.append(Share(ModuliKey(band, False, (creep,)), np.where(mine, factors - lasting, 0.0)))
        for creep in own:
            mine = np.array([a.own_creep == creep for a in self.atoms]) & (lasting != 0.0)
            if mine.any():
                found.append(Share(ModuliKey(band, True, (creep,) if creep else ()), np.where(mine, lasting, 0.0)))
        return tuple(found)

    def _in_long_term_stage(self, atom: Atom) -> bool:
        """Whether shrinkage with a creep factor of its own arrives in a long-term stage."""
        stage = self.views[self.stage_of(atom)].stage
        return atom.own_creep is not None and stage is not None and stage.long_term and not self.at_once

    @cached_property
    def creeps(self) -> bool:
        """Whether anything creeps: a stage is long-term or has creep that runs off, or a share is sustained."""
        slow = any(v.stage is not None and (v.stage.long_term or any(v.stage.creep.values())) for v in self.views)
        return slow or any(s for c in self.member.combinations for s in c.sustained.values())

    @cached_property
    def instantaneous(self) -> Analysis:
        """The same member if nothing crept, on the same grid."""
        return Analysis(self.profile, self.earlier, True, _moduli=self._moduli)

    def combine(self, combination: Combination, band: str = "nominal", upto: int | None = None) -> Combined:
        """Response of a combination, bearings that cannot pull lifted off where they would; computed once.

        `upto`: number of the stage at whose end; default the last.
        """
        named = (tuple(combination.factors.items()), tuple(combination.sustained.items()), combination.name)
        key = (*named, band, upto)
        if key not in self._combined:
            self._combined[key] = self._combine(combination, band, upto)
        return self._combined[key]

    def _combine(self, combination: Combination, band: str, upto: int | None) -> Combined:
        shares = self.shares(combination, band)
        patterns = self._patterns(combination)
        if any(s.only_up for s in self.member.supports):
            lifted = bearing(self, shares)
        else:
            lifted = frozenset[str]()
        total = self.superposed(shares, lifted, upto=upto)
        return Combined(combination, shares, lifted, patterns, total, upto)

    def superposed(
        self,
        shares: Sequence[Share],
        lifted: frozenset[str],
        shear: bool | None = None,
        off: NDArray[np.bool_] | None = None,
        upto: int | None = None,
    ) -> Response:
        """Sum of shares at the end of a stage; atoms in `off` left out."""
        parts = []
        for share in shares:
            factors = share.factors if off is None else np.where(off, 0.0, share.factors)
            parts.append(self.responses(share.key, lifted, shear, upto).combined(factors))
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
        # free strain alone leaves a curvature that is nothing but the strain's own round-off over the section's size
        strain = 16.0 * float(np.finfo(float).eps) * float(np.abs(total.axial).max())
        return (moment / stiff + strain / size) * longest**2

    def _patterns(self, combination: Combination) -> tuple[NDArray[np.bool_], ...]:
        """Atoms of `pattern` loads, those of one span and case together."""
        masks = []
        for k, atom in enumerate(self.atoms):
            if atom.span is not None and combination.factors.get(atom.case, 0.0):
                mask = np.zeros(len(self.atoms), dtype=bool)
                mask[k] = True
                masks.append(mask)
        return tuple(masks)
