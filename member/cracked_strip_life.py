"""The life of one cross-section by strips: strains and stresses of its parts event by event, once more.

Forces, cracked places and free strain by loads are taken over; what every event leaves in the parts is its own.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import planes_of
from fishbelly.member.cracked_events import Event, Solved
from fishbelly.member.cracked_found import CrackedResponse
from fishbelly.member.cracked_strips import Plane, StripSection, strip_strain
from fishbelly.member.extremes import values_at

Array = NDArray[np.float64]
Planes = dict[int, Plane]
"""Stress or free strain of parts, v + w z, by number."""


@dataclass
class StripState:
    """A section after an event: strains in state I and II, free strain and stress of the parts in both.

    A strain is (e0, k) with e = e0 - k z; `creeping` is stress by the set of moduli on which it came.
    """

    section: StripSection
    strains: tuple[Plane, Plane]
    free: tuple[Planes, Planes]
    stress: tuple[Planes, Planes]
    creeping: dict[object, tuple[Planes, Planes]]


@dataclass(eq=False)
class StripLife:
    """Lives of the sections of a member under one combination.

    Parameters
    ----------
    r : CrackedResponse
        The end of the life that is followed.
    """

    r: CrackedResponse
    _known: dict[float, StripState] = field(default_factory=dict)
    _sections: dict[tuple[int, float], StripSection] = field(default_factory=dict)
    _loaded: dict[int, dict[int, Array]] = field(default_factory=dict)

    def at(self, x: float) -> StripState:
        """Follow the section at x [m] through all stages; computed once."""
        if x not in self._known:
            state: StripState | None = None
            for end in self.r.life:
                for solved in end.phases:
                    state = self._next(end, solved, x, state)
            assert state is not None
            self._known[x] = state
        return self._known[x]

    def _next(self, end: CrackedResponse, solved: Solved, x: float, before: StripState | None) -> StripState:
        """Take one event in."""
        event, law = solved.event, solved.law
        section = self.section(end, x)
        E = self._moduli(end, event, section, x)
        cracked = any(a < x < b for a, b in end.stretches)
        strains: list[Plane] = []
        free: list[Planes] = []
        stress: list[Planes] = []
        gained: list[Planes] = []
        N, M = self._forces(end, solved, x)
        for state in range(2):
            mine = self._free(end, event, section, E, x, state, before)
            brittle = law.never | (frozenset(law.cracking) if state else frozenset())
            if state and not cracked:
                strains.append(strains[0])
            else:
                near = (0.0, 0.0) if before is None else before.strains[state]
                strains.append(strip_strain(section, E, brittle, mine, N, M, near))
            e0, k = strains[-1]
            now = {i: _scaled((e0, -k), mine.get(i, (0.0, 0.0)), float(E[i])) for i in section.parts}
            was: Mapping[int, Plane] = {} if before is None else before.stress[state]
            free.append(mine)
            stress.append(now)
            gained.append({i: _less(v, was.get(i, (0.0, 0.0))) for i, v in now.items()})
        creeping = {} if before is None else dict(before.creeping)
        key = event.share.key
        if event.creeps:
            old = creeping.get(key, ({}, {}))
            creeping[key] = (_plus(old[0], gained[0]), _plus(old[1], gained[1]))
        pair = (free[0], free[1]), (stress[0], stress[1])
        return StripState(section, (strains[0], strains[1]), *pair, creeping)

    def _free(
        self,
        end: CrackedResponse,
        event: Event,
        section: StripSection,
        E: Array,
        x: float,
        state: int,
        before: StripState | None,
    ) -> Planes:
        """Free strain with which every part keeps its stress, and what the event adds."""
        found: Planes = {}
        if before is not None:
            e0, k = before.strains[state]
            for i in section.parts:
                s = before.stress[state].get(i, (0.0, 0.0))
                found[i] = (e0 - s[0] / E[i], -k - s[1] / E[i]) if E[i] > 0.0 else (e0, -k)
        if event.what == "loads":
            found = _plus(found, self._by_loads(end, event, x))
        elif event.what == "creep" and before is not None:
            stage, member = end.analysis.views[end.stage].stage, end.analysis.member
            assert stage is not None
            short = event.setting.short.E
            for i, s in before.creeping.get(event.share.key, ({}, {}))[state].items():
                phi = stage.creep.get(member.parts[i].material or "", 0.0)
                if phi and i in section.parts:
                    found = _plus(found, {i: (phi * s[0] / short[i], phi * s[1] / short[i])})
        return found

    def _by_loads(self, end: CrackedResponse, event: Event, x: float) -> Planes:
        """Free strain by the loads of an event."""
        a, line = end.analysis, float(end.frame.line[0])
        if end.stage not in self._loaded:
            self._loaded[end.stage] = planes_of(end.frame, [load.free for load in a.loads])
        here = np.array([a.stage_of(atom) == end.stage for atom in a.atoms], dtype=bool)
        factors = np.where(here, event.share.factors, 0.0)
        found = {}
        for part, planes in self._loaded[end.stage].items():
            v = values_at(a.profile.panels, np.einsum("a,cakn->ckn", factors, planes), np.array([x]))[:, 0]
            if np.any(v):
                found[part] = (float(v[0] - v[1] * line), float(v[1]))
        return found

    def _forces(self, end: CrackedResponse, solved: Solved, x: float) -> tuple[float, float]:
        """Axial force and moment about the datum line."""
        response, panels, at = solved.closed.response, end.analysis.profile.panels, np.array([x])
        N, M = (float(values_at(panels, v, at)[0]) for v in (response.N, response.M[0]))
        return N, M - N * float(end.frame.line[0])

    def section(self, end: CrackedResponse, x: float) -> StripSection:
        """Section in a stage; where nothing varies along a stretch, the one for all of it."""
        panels, row = end.analysis.profile.panels, end.frame.profile.row
        k = int(panels.find(np.array([x]))[0])
        place = float(row[k, 0]) if np.ptp(row[k]) == 0 else -x
        if (end.stage, place) not in self._sections:
            works = end.analysis.views[end.stage].parts if end.analysis.member.stages else None
            self._sections[end.stage, place] = StripSection.at(end.analysis.member, x, works=works)
        return self._sections[end.stage, place]

    def _moduli(self, end: CrackedResponse, event: Event, section: StripSection, x: float) -> Array:
        E = event.moduli.E.copy()
        member, profile = end.analysis.member, end.frame.profile
        for i in section.parts:
            if any(member.parts[i].run_in):
                E[i] = float(values_at(profile.panels, profile.part_modulus(i, E), np.array([x]))[0])
        return E


def _scaled(strain: Plane, free: Plane, E: float) -> Plane:
    return E * (strain[0] - free[0]), E * (strain[1] - free[1])


def _less(one: Plane, other: Plane) -> Plane:
    return one[0] - other[0], one[1] - other[1]


def _plus(one: Planes, other: Mapping[int, Plane]) -> Planes:
    found = dict(one)
    for i, v in other.items():
        old = found.get(i, (0.0, 0.0))
        found[i] = (old[0] + v[0], old[1] + v[1])
    return found
