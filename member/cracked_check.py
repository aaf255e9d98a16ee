"""The governing deflection of a cracked member once more: curvatures by strips, deflection by virtual work.

Forces, cracked places and shear angles are taken over; section law, cracking, tension stiffening along x and
integration are its own, and in a member with stages what history leaves in the parts. The unit load stands on a simple
beam between two supports, or on an overhang of one, cut free of everything else: virtual work holds with any forces in
balance with it.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from functools import cached_property
from itertools import pairwise
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.breakpoints import breakpoints
from fishbelly.member.cracked_found import CrackedResponse
from fishbelly.member.cracked_strip_life import StripLife
from fishbelly.member.cracked_strips import Plane, StripSection, strip_strain
from fishbelly.member.extremes import Extreme, largest, values_at
from fishbelly.member.faults import CannotCompute
from fishbelly.member.spans import Span, spans

Array = NDArray[np.float64]
Data = dict[str, Any]

METHOD = "moment and curvature by strips, virtual work; forces taken over"
AGREES = 1e-6
"""Difference of the two methods, of the largest deflection, above which the answer is withheld."""
MOST_HALVINGS = 5
"""Halvings of each stretch: under an axial force strains have kinks in it that are not sought, and 12 points miss."""
_GAUSS = np.polynomial.legendre.leggauss(12)


def cracked_check(r: CrackedResponse) -> Data | None:
    """Compute the largest deflection section by section again.

    Parameters
    ----------
    r : CrackedResponse
        A combination that cracks the member.

    Returns
    -------
    dict or None
        As `cross_check` has it; None where the method does not reach (`beyond`), or where the place lies in no span
        between two supports that hold in every stage.

    Raises
    ------
    CannotCompute
        When the two methods do not agree.
    """
    if not r.phases or beyond(r) is not None:
        return None
    sign, top, held = _governing(r)
    if not top.value > 0.0 or held is None:
        return None
    # where nothing deflects, two round-offs need not agree
    nothing = r.analysis.round_off(r.total)
    size = max(top.value, nothing)
    for halvings in range(0 if r.before else 1, MOST_HALVINGS + 1):
        value = _deflection(r, held.start, held.end, top.at, halvings)
        difference = abs(value - sign * top.value) / size
        if difference <= AGREES:
            break
    if not difference <= AGREES + nothing / size:
        raise CannotCompute(
            f"the second method gives {value:.9g} m at x = {top.at:.6g} m in {r.combined.combination.name}, the first "
            f"{sign * top.value:.9g} m: difference {difference:.1e} of the largest deflection"
        )
    return {
        "method": METHOD,
        "at": top.at,
        "value": value,
        "difference": difference,
        "error": AGREES,
        "equilibrium": _residual(r),
        "work": None,
    }


def beyond(r: CrackedResponse) -> str | None:
    """Why the second method does not reach a combination; None where it does."""
    if r.analysis.planes > 1:
        return "it bends sideways too"
    if r.analysis.member.hinges:
        return "it has hinges"
    if any(s.law.held for end in r.life for s in end.phases):
        return "what parts that go have carried is partly of loads that last"
    if _governing(r)[2] is None:
        return "its largest deflection lies in no span between two supports"
    return None


def _governing(r: CrackedResponse) -> tuple[float, Extreme, Span | None]:
    """Sign, size and place of the largest deflection, and the span between two supports in which it lies."""
    both = [(s, largest(r.analysis.profile.panels, s * r.total.deflection[0])) for s in (1.0, -1.0)]
    sign, top = max(both, key=lambda pair: pair[1].value)
    held = next((s for s in _always(r) if s.start <= top.at <= s.end), None)
    return sign, top, None if held is None or held.overhang else held


def _always(r: CrackedResponse) -> tuple[Span, ...]:
    """Spans between supports that hold in every stage so far."""
    views = r.analysis.views[: r.stage + 1]
    return spans(r.analysis.member, r.combined.lifted.union(*(v.gone for v in views)))


def _residual(r: CrackedResponse) -> float:
    """Reactions plus loads, down, over the sum of their sizes."""
    panels = r.analysis.profile.panels
    factors = np.asarray(sum(s.factors for s in r.combined.shares))
    factors = np.where([r.analysis.stage_of(a) <= r.stage for a in r.analysis.atoms], factors, 0.0)
    loads = np.array([panels.integrate(a.q[0])[1].sum() + a.P[0].sum() for a in r.analysis.loads])
    reactions = r.total.reactions[:, 0]
    size = float(np.abs(loads) @ np.abs(factors) + np.abs(reactions).sum())
    return abs(float(loads @ factors + reactions.sum())) / size if size else 0.0


def _deflection(r: CrackedResponse, start: float, end: float, at: float, halvings: int) -> float:
    """Deflection at a place between two supports, their own movements taken over; stretches halved so many times."""
    panels, length = r.analysis.profile.panels, end - start
    borders = [x for x in breakpoints(r.analysis.member) if start < x < end]
    borders += [x for end_of in r.life for pair in end_of.stretches for x in pair if start < x < end]
    work = _Work(r)
    cuts = np.unique([start, *borders, at, end])
    cuts = np.unique((*cuts, *work.kinks(cuts)))
    for _ in range(halvings):
        cuts = np.unique((*cuts, *(0.5 * (cuts[1:] + cuts[:-1]))))
    half, middle = 0.5 * np.diff(cuts)[:, None], 0.5 * (cuts[1:] + cuts[:-1])[:, None]
    x, dx = (middle + half * _GAUSS[0]).ravel(), (half * _GAUSS[1]).ravel()
    moment = np.where(x < at, (x - start) * (end - at), (end - x) * (at - start)) / length
    shear = np.where(x < at, end - at, -(at - start)) / length
    slid = values_at(panels, r.total.shear[0], x)
    bent = np.array([work.curvature(float(place)) for place in x])
    ends = [
        float(values_at(panels, r.total.deflection[0], np.array([p]), s)[0])
        for p, s in ((start, "right"), (end, "left"))
    ]
    chord = ends[0] + (ends[1] - ends[0]) * (at - start) / length
    return chord + float((moment * bent + shear * slid) @ dx)


@dataclass(eq=False)
class _Work:
    r: CrackedResponse
    _known: dict[tuple[int, float, int], Plane] = field(default_factory=dict)

    def forces(self, x: float) -> tuple[float, float]:
        """Axial force and moment about the datum line."""
        r, panels, at = self.r.total, self.r.analysis.profile.panels, np.array([x])
        N, M = (float(values_at(panels, v, at)[0]) for v in (r.N, r.M[0]))
        return N, M - N * float(self.r.analysis.frame.line[0])

    def kinks(self, cuts: Array) -> list[float]:
        """Places in stretches that other loads have cracked, from which on this one's tension stiffening counts."""
        law = self.r.phases[-1].law
        if law.stiffening is None or self.r.stretches == self.r.own:
            return []
        level, found = law.stiffening.starts_at, []
        for a, b in pairwise(cuts):
            inset = 1e-9 * (b - a)
            low, high = float(a + inset), float(b - inset)
            ends = [self.over(x) - level for x in (low, high)]
            if ends[0] * ends[1] >= 0.0 or not any(p < 0.5 * (a + b) < q for p, q in self.r.stretches):
                continue
            for _ in range(40):
                x = low + (high - low) * ends[0] / (ends[0] - ends[1])
                value = self.over(x) - level
                if abs(value) < 1e-12 or abs(high - low) < inset:
                    break
                # the end that stays counts half: both ends then close in
                if value * ends[1] < 0.0:
                    low, ends = high, [ends[1], value]
                else:
                    ends = [0.5 * ends[0], value]
                high = x
            found.append(x)
        return found

    def over(self, x: float) -> float:
        """Largest tension over the stress at which a part cracks, uncracked."""
        if self.r.before is not None:
            state = self._life.at(x)
            return self._over(state.section, state.strains[0], state.free[0])
        section = self._section(x)
        return self._over(section, self._strain(section, 0, x, *self.forces(x)), self._free(0, x))

    @cached_property
    def _life(self) -> StripLife:
        return StripLife(self.r)

    def _both(self, x: float) -> tuple[StripSection, Plane, Plane, Mapping[int, Plane]]:
        """Section, strains in state I and II, and free strain of the parts in state I."""
        if self.r.before is not None:
            state = self._life.at(x)
            return state.section, *state.strains, state.free[0]
        section, forces = self._section(x), self.forces(x)
        first = self._strain(section, 0, x, *forces)
        cracked = any(a < x < b for a, b in self.r.stretches)
        return section, first, self._strain(section, 1, x, *forces) if cracked else first, self._free(0, x)

    def curvature(self, x: float) -> float:
        """Curvature at a place, cracked or not, by strips."""
        law = self.r.phases[-1].law
        section, first, second, free = self._both(x)
        if not any(a < x < b for a, b in self.r.stretches):
            return first[1]
        if law.stiffening is None:
            return second[1]
        over = self._over(section, first, free)
        growth = second[1] / first[1] if first[1] else 1.0
        zeta = float(law.stiffening.zeta(1.0 / over if over > 0.0 else np.inf, growth))
        return (1.0 - zeta) * first[1] + zeta * second[1]

    def _section(self, x: float) -> StripSection:
        return self._life.section(self.r, x)

    def _strain(self, section: StripSection, state: int, x: float, N: float, M: float) -> Plane:
        law = self.r.phases[-1].law
        free = self._free(state, x)
        brittle = law.never | (frozenset(law.cracking) if state else frozenset())
        E = self._moduli(section, x)
        if free or abs(N) * float(np.ptp(section.levels)) > 1e-9 * abs(M) or not M:
            return strip_strain(section, E, brittle, free, N, M)
        # without axial force and free strain, strains grow with the moment
        key = (id(section), float(np.sign(M)), state)
        if key not in self._known or law.never or self._runs_in:
            self._known[key] = strip_strain(section, E, brittle, free, 0.0, float(np.sign(M)))
        e0, k = self._known[key]
        return e0 * abs(M), k * abs(M)

    @property
    def _runs_in(self) -> bool:
        return any(any(p.run_in) for p in self.r.analysis.member.parts)

    def _moduli(self, section: StripSection, x: float) -> Array:
        E = self.r.phases[-1].law.moduli.E.copy()
        if self._runs_in:
            profile, at = self.r.analysis.profile, np.array([x])
            for i in section.parts:
                E[i] = float(values_at(profile.panels, profile.part_modulus(i, E), at)[0])
        return E

    def _free(self, state: int, x: float) -> Mapping[int, Plane]:
        """Free strain of the parts, e + a z, what history left counted."""
        law, panels = self.r.phases[-1].law, self.r.analysis.profile.panels
        line = float(self.r.analysis.frame.line[0])
        found = {}
        for part, planes in law.free[state].items():
            v = values_at(panels, planes, np.array([x]))[:, 0]
            if np.any(v):
                found[part] = (float(v[0] - v[1] * line), float(v[1]))
        return found

    def _over(self, section: StripSection, strain: Plane, free: Mapping[int, Plane]) -> float:
        """Largest tension over the stress at which a part cracks, at the ends of the parts."""
        law, most = self.r.phases[-1].law, -np.inf
        for k, i in enumerate(section.parts):
            if i in law.cracking:
                e, a = free.get(i, (0.0, 0.0))
                levels = section.levels[[section.slabs[0, k].nonzero()[0][0], section.slabs[0, k].nonzero()[0][-1] + 1]]
                stress = law.moduli.E[i] * (strain[0] - e + (-strain[1] - a) * levels)
                most = max(most, float(stress.max()) / law.cracking[i])
        return most
