"""What happens to a cracking member in one stage of one combination, event by event, all loads so far together.

What parts and supports that go have carried is released, creep runs off, loads arrive: long-term shares first, on
their moduli, then the others. Every event starts from the strains inherited: a part whose stress was s keeps on a new
modulus E the free strain e - s / E, a part that joins is born with the strain that is there. Uncracked, the sum of
events is what the linear road (`staging`) adds up.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Actions, Frame, planes_of
from fishbelly.member.analysis import Analysis, Share
from fishbelly.member.cracked_events import Event, Solved
from fishbelly.member.cracked_law import CrackedLaw, LawState
from fishbelly.member.cracked_record import NOTHING, Both, Kept, Planes, Record, added
from fishbelly.member.cracked_sections import CrackedSections
from fishbelly.member.cracked_solve import CLOSED, Closed, Phase, close, radius, total_actions
from fishbelly.member.cracking import cracking_parts, no_tension_parts
from fishbelly.member.forces import Forces
from fishbelly.member.history_forces import resultant, sheared
from fishbelly.member.response import Response
from fishbelly.member.shear_sets import shear_of_parts
from fishbelly.member.spreading import nothing
from fishbelly.member.staging import Setting, reversed_reactions
from fishbelly.sections.effective_inertia import Stiffening

Array = NDArray[np.float64]
Mask = NDArray[np.bool_]

_SAME = 1e-12
"""A change of a part's area below this share of it is none."""


@dataclass(frozen=True, eq=False)
class Phases:
    """The events of one stage of one combination on one grid.

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
    stage : int
        Number of the stage.
    inherited : Record, optional
        All before the stage, on this grid or one that it refines.
    """

    analysis: Analysis
    shares: tuple[Share, ...]
    lifted: frozenset[str]
    rule: str | None = None
    shear: bool = True
    stage: int = 0
    inherited: Record | None = None

    @cached_property
    def frame(self) -> Frame:
        """The grid with the parts of the stage."""
        return self.analysis.frames[self.stage]

    @cached_property
    def sections(self) -> CrackedSections:
        """Sections of the stage."""
        return CrackedSections(self.frame)

    @cached_property
    def before(self) -> Record:
        """All before the stage, on this grid."""
        a = self.analysis
        if self.inherited is not None:
            return self.inherited.on(a.profile.panels)
        shape = a.profile.panels.x.shape
        none = nothing(1, shape, len(a.member.supports)).combined(np.ones(1))
        strain = np.zeros((3, *shape))
        return Record(a.profile.panels, a.views[0], none, (strain, strain), self.frame.short, NOTHING, {}, False)

    @cached_property
    def working(self) -> frozenset[int]:
        """Numbers of the parts that are there and add material."""
        return frozenset(i for g in self.frame.profile.groups for i in g.placed.index)

    @cached_property
    def events(self) -> tuple[Event, ...]:
        """What happens, in order; at least one."""
        a, view = self.analysis, self.analysis.views[self.stage]
        short, *lasting = self.shares
        sheared = a.member.shear and self.shear
        each = [(s, a.setting(self.stage, s.key, self.lifted, sheared)) for s in (*lasting, short)]
        old = [(share, s) for share, s in each if share.key in self.before.kept]
        gone = bool(view.gone - self.before.view.gone) or self._areas_change
        found = [Event("release", share, s) for share, s in old] if gone else []
        for share, s in each:
            kept = self.before.kept.get(share.key)
            if kept is not None and s.aged is not None and kept.creeping_shear is not None:
                found.append(Event("creep", share, s))
        found += [Event("loads", share, s) for share, s in each if np.any(self.arriving(share))]
        return tuple(found) or (Event("loads", *each[-1]),)

    @cached_property
    def _areas_change(self) -> bool:
        """Whether a part that has been there goes, is cut or is displaced."""
        now, was = self.analysis.views[self.stage].parts, self.before.view.parts
        if now == was:
            return False
        line, before = self.frame.line, self.analysis.frames[self.before.view.index].profile
        pairs = ((before.part_moments(i, line)[0], self.frame.profile.part_moments(i, line)[0]) for i in was)
        return any(bool(np.any(np.abs(old - new) > _SAME * np.abs(old).max())) for old, new in pairs)

    def arriving(self, share: Share) -> Array:
        """Factors of the atoms of a share that arrive in the stage, shape (A,)."""
        a = self.analysis
        here = np.array([a.stage_of(atom) == self.stage for atom in a.atoms], dtype=bool)
        return np.where(here, share.factors, 0.0)

    @cached_property
    def lasting(self) -> bool:
        """Whether a share of the loads so far lasts."""
        mine = any(e.what == "loads" and e.setting.lasting for e in self.events)
        return self.before.lasting or (mine and any(np.any(s.factors) for s in self.shares))

    @cached_property
    def stiffening(self) -> Stiffening | None:
        """Rule of tension stiffening; loads count as sustained as soon as a share of them is."""
        return None if self.rule is None else Stiffening(self.rule, self.lasting)

    @cached_property
    def planes(self) -> dict[int, Array]:
        """Free strain of the parts by every atom, (3, A, K, n) by part."""
        return planes_of(self.frame, [a.free for a in self.analysis.loads])

    @cached_property
    def never(self) -> frozenset[int]:
        """Parts that never carry tension."""
        return no_tension_parts(self.analysis.member) & self.working

    @cached_property
    def cracking(self) -> dict[int, float]:
        """Parts that crack, with the tensile stress at which they do [Pa]."""
        return {k: v for k, v in cracking_parts(self.analysis.member).items() if k in self.working}

    def solve(
        self,
        mask: Mask,
        starts: Sequence[tuple[Forces, LawState | None]],
        all_cracked: bool = False,
        closed: float = CLOSED,
    ) -> tuple[Solved, ...]:
        """Bring every event into equilibrium.

        Parameters
        ----------
        mask : ndarray of bool, shape (K, n)
            Places that count as cracked.
        starts : sequence of (Forces, LawState or None)
            For each event forces, and a state of the law, near the ones looked for.
        all_cracked : bool
            Without tension stiffening.
        closed : float
            Change of forces, against the largest, at which equilibrium counts as closed.
        """
        found: list[Solved] = []
        record, rule = self.before, None if all_cracked else self.stiffening
        planar, reach = self.analysis.planes == 1, radius(self.analysis)
        for event, (forces, near) in zip(self.events, starts, strict=True):
            free = self._free(record, event)
            still = self._still_held(record, event)
            law = CrackedLaw(self.sections, event.moduli, self.never, self.cracking, mask, rule, free, planar, still)
            phase, shear_on = self._phase(record, event)
            state = close(law, phase, forces, reach, near, closed)
            record = self._after(record, event, law, state, shear_on)
            found.append(Solved(event, law, state, record))
        return tuple(found)

    def _free(self, record: Record, event: Event) -> Both:
        """Free strain of the parts in an event that keeps strains and stresses as they are, and what it adds."""
        kept = [self._same(record, event, k) for k in range(2)]
        more: list[Planes] = [{}, {}]
        if event.what == "loads":
            factors = self.arriving(event.share)
            strained = {part: np.einsum("a,cakn->ckn", factors, v) for part, v in self.planes.items()}
            more = [{part: v for part, v in strained.items() if np.any(v)}] * 2
        elif event.what == "creep":
            more = [self._crept(record, event, k) for k in range(2)]
        return added((kept[0], kept[1]), (more[0], more[1]))

    def _same(self, record: Record, event: Event, state: int) -> Planes:
        """Free strain on the moduli of an event with which every part keeps its stress."""
        profile, strain = self.frame.profile, record.strains[state]
        if not np.any(strain) and not record.free[state]:
            return {}
        result = {}
        was = record.view.parts
        for part in sorted(self.working):
            if part not in was:
                result[part] = strain
                continue
            old, E = (profile.part_modulus(part, m.E) for m in (record.moduli, event.moduli))
            free = record.free[state].get(part, np.zeros_like(strain))
            keep = strain - old * (strain - free) / np.where(E > 0.0, E, np.inf)
            # without creep of its own a part keeps the free strain it has, to the last digit
            keep = np.where(old == E, free, keep)
            if np.any(keep):
                result[part] = keep
        return result

    def _crept(self, record: Record, event: Event, state: int) -> Planes:
        """Free strain by creep under the stress locked in."""
        stage, found = self.analysis.views[self.stage].stage, {}
        assert stage is not None
        for part, stress in record.kept[event.share.key].creeping[state].items():
            phi = stage.creep.get(self.analysis.member.parts[part].material or "", 0.0)
            if phi and part in self.working:
                E = self.frame.profile.part_modulus(part, event.setting.short.E)
                found[part] = phi * stress / np.where(E > 0.0, E, np.inf)
        return found

    def _still_held(self, record: Record, event: Event) -> tuple[Forces, ...]:
        """Forces that parts which go still carry of loads on moduli whose release comes later."""
        if event.what != "release":
            return ()
        order = [e.share.key for e in self.events if e.what == "release"]
        later = order[order.index(event.share.key) + 1 :]
        if not later:
            return ()
        before, line = self.analysis.frames[self.before.view.index].profile, self.frame.line
        found = []
        for state in range(2):
            brittle = self.never | (frozenset(self.cracking) if state else frozenset())
            total = Forces.none(self.frame.profile.panels.x.shape)
            for key in later:
                for part, stress in self.before.kept[key].stress[state].items():
                    if part in brittle:
                        continue
                    gone = before.part_moments(part, line) - self.frame.profile.part_moments(part, line)
                    total = total.plus(resultant(stress[:, None], gone).atom(0))
            found.append(total)
        return tuple(found)

    def _phase(self, record: Record, event: Event) -> tuple[Phase, dict[frozenset[int], Array]]:
        """What an event adds; and the shear forces of its moduli by the parts they are now on."""
        a, s, slide = self.analysis, event.setting, event.slide
        kept = record.kept.get(event.share.key)
        shear_on = {} if kept is None else dict(kept.shear_on)
        slid, response = np.zeros((2, *slide.shape[1:])), record.response
        factors = self.arriving(event.share) if event.what == "loads" else np.zeros(len(a.atoms))
        loads: Actions = total_actions(a.loads, factors)
        if event.what == "release" and kept is not None:
            gone = s.view.gone - self.before.view.gone
            numbers = [k for k, held in enumerate(a.member.supports) if held.name in gone]
            loads = reversed_reactions(s, kept.reactions, gone)
            reactions = response.reactions.copy()
            reactions[numbers] -= kept.reactions[numbers]
            response = replace(response, reactions=reactions)
            if np.any(slide):
                slid = slid + self._sheared_off(s, slide, shear_on)
        elif event.what == "creep" and kept is not None and kept.creeping_shear is not None and np.any(slide):
            assert s.softened is not None
            more = s.law(s.softened, "short").slide - s.law(s.short, "short").slide
            slid = slid + sheared(slide, more, kept.creeping_shear[:, None]).V[:, 0]
        sinking = {held.case for held in a.member.supports if held.sinks}
        settled = tuple(
            (atom.case, float(f))
            for atom, f in zip(a.atoms, factors, strict=True)
            if f and atom.case in sinking and atom.span is None and atom.own_creep is None
        )
        return Phase(self.frame, s.layout, a.planes, loads, settled, slide, slid, response), shear_on

    def _sheared_off(self, s: Setting, slide: Array, shear_on: dict[frozenset[int], Array]) -> Array:
        """Shear forces for the angle that what has been carried gains as parts go or are cut, (2, K, n)."""
        member, now = self.analysis.member, s.view.parts
        cuts = frozenset(i for i in now if member.parts[i].cuts)
        total = np.zeros((2, *slide.shape[1:]))
        for parts in list(shear_on):
            left = (parts & now) | cuts
            if left == parts:
                continue
            V = shear_on.pop(parts)
            was, rest = (shear_of_parts(self.frame.profile, which, s.short) for which in (parts, left))
            total += sheared(slide, rest - was, V[:, None]).V[:, 0]
            shear_on[left] = shear_on.get(left, 0.0) + V
        return total

    def _after(
        self, record: Record, event: Event, law: CrackedLaw, closed: Closed, shear_on: dict[frozenset[int], Array]
    ) -> Record:
        """All so far with an event in it."""
        first, second = closed.state.uncracked.plane, closed.state.cracked.plane
        second = np.where(np.isfinite(second).all(axis=0), second, first)
        strains = (_strain(first), _strain(second))
        view, kept = self.analysis.views[self.stage], dict(record.kept)
        if len(self.analysis.views) > 1:
            kept = {key: k.without(self.working) for key, k in kept.items()}
            kept[event.share.key] = self._kept(record, event, law, closed, shear_on, strains)
        moduli = event.moduli
        return Record(record.panels, view, closed.response, strains, moduli, law.free, kept, self.lasting)

    def _kept(
        self,
        record: Record,
        event: Event,
        law: CrackedLaw,
        closed: Closed,
        shear_on: dict[frozenset[int], Array],
        strains: tuple[Array, Array],
    ) -> Kept:
        """What loads on the moduli of an event have added, with it."""
        response, was = closed.response, record.response
        old = record.kept.get(event.share.key, Kept(np.zeros_like(response.reactions))).without(self.working)
        more = self._gained(record, event, law, strains)
        V = response.V - was.V
        here = event.setting.view.parts
        shear_on[here] = shear_on.get(here, 0.0) + V
        reactions = old.reactions + response.reactions - was.reactions
        creeping, shear = old.creeping, old.creeping_shear
        if event.creeps:
            creeping = added(creeping, more)
            shear = V if shear is None else shear + V
        return Kept(reactions, added(old.stress, more), creeping, shear_on, shear)

    def _gained(self, record: Record, event: Event, law: CrackedLaw, strains: tuple[Array, Array]) -> Both:
        """Stress of the parts that an event adds."""
        profile, found = self.frame.profile, []
        for state in range(2):
            planes = {}
            for part in self.working:
                now = strains[state] - law.free[state].get(part, 0.0)
                stress = profile.part_modulus(part, event.moduli.E) * now
                if part in record.view.parts:
                    then = record.strains[state] - record.free[state].get(part, 0.0)
                    stress = stress - profile.part_modulus(part, record.moduli.E) * then
                planes[part] = stress
            found.append(planes)
        return found[0], found[1]

    def uncracked(self) -> list[Forces]:
        """Forces near those looked for, event by event: those there are, and what the uncracked member adds."""
        a, r, found = self.analysis, self.before.response, []
        total = Forces(r.N, r.V, r.M)
        sheared = a.member.shear and self.shear
        for event in self.events:
            for step in a.history(event.share.key, self.lifted, sheared):
                if step.stage == self.stage and step.what == event.what:
                    more: Response = step.response.combined(event.share.factors)
                    total = total.plus(Forces(more.N, more.V, more.M))
            found.append(total)
        return found


def _strain(plane: Array) -> Array:
    """Strain as a plane about the analysis line, of axial strain and curvatures."""
    return np.stack((plane[0], -plane[1], -plane[2]))
