"""One effective stiffness for each span of a cracked member, as codes have it, beside the value along x.

ACI 318: one I_e from the critical sections of a span (ACI 318-14 and -19, 24.2.3: midspan of a simple span, the support
of a cantilever, for continuous spans the mean of the critical sections of positive and negative moment). EN 1992-1-1,
7.4.3(7): the member once uncracked and once fully cracked, with zeta of the critical section between the two.
Clause numbers from memory.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, ModuliKey, Share
from fishbelly.member.cracking import cracking_parts
from fishbelly.member.description import Combination
from fishbelly.member.extremes import largest, values_at
from fishbelly.member.faults import CannotCompute
from fishbelly.member.nodes import layout
from fishbelly.member.profile import Group, group_places
from fishbelly.member.response import Response, free_of, respond
from fishbelly.member.section_law import ElasticLaw
from fishbelly.member.spans import Span, spans
from fishbelly.sections.clipping import moved
from fishbelly.sections.composition import Composition
from fishbelly.sections.effective_inertia import effective_inertia
from fishbelly.sections.no_tension import FreePlanes, solve_section
from fishbelly.sections.stiffness import section_stiffness

Array = NDArray[np.float64]

MOST_ROUNDS = 60
CLOSED = 1e-12
"""Change of the largest moment in the last round, where moments depend on the effective stiffness."""
NEGLIGIBLE = 1e-9
"""A moment below this share of the largest makes no section critical."""


@dataclass(frozen=True)
class CriticalSection:
    """A section whose effective second moment counts for its span.

    `at`: place [m]; `moment`: bending moment there [N m]; `cracking`: moment at which it cracks, with the rule's whole
    stress [N m]; `gross`, `cracked`, `effective`: second moments [m4], the gross one without bars; `E`: modulus of the
    concrete they belong to [Pa].
    """

    at: float
    moment: float
    cracking: float
    gross: float
    cracked: float
    effective: float
    E: float


@dataclass(frozen=True, eq=False)
class SpanValue:
    """One effective stiffness of a span: its second moment [m4] and the critical sections it comes from."""

    span: Span
    effective: float
    sections: tuple[CriticalSection, ...]


@dataclass(frozen=True, eq=False)
class OneValue:
    """Response with one effective second moment for each span."""

    response: Response
    spans: tuple[SpanValue, ...]
    rounds: int


def one_value(
    analysis: Analysis, combination: Combination, rule: str, band: str = "nominal", shear: bool | None = None
) -> OneValue:
    """Response of a combination with I_e of ACI 318, one for each span.

    Moments in the span are those of the member with these stiffnesses, brought into agreement. Free strain acts on the
    same stiffness; an axial force does not change the section's cracking moment.

    Parameters
    ----------
    analysis : Analysis
        The member.
    combination : Combination
        Its loads.
    rule : {"ACI 318-14", "ACI 318-19"}
        Branson's or Bischoff's form.
    band : str
        Which end of the materials' bands of E.
    shear : bool, optional
        Whether shear deformation counts; default as the member says.

    Raises
    ------
    CannotCompute
        When the member bends sideways too, has nothing that cracks, or when moments do not settle.
    """
    if analysis.planes > 1:
        raise CannotCompute(
            f"{rule} has an effective second moment for bending in one plane, and the member bends in two"
        )
    if not cracking_parts(analysis.member):
        raise CannotCompute(f"{rule} wants the tensile stress at which concrete cracks: give its material `cracking`")
    combined = analysis.combine(combination, band)
    sheared = analysis.member.shear if shear is None else shear
    work = _Work(analysis, combined.shares, combined.lifted, rule, sheared)
    total, size = combined.total, np.inf
    for count in range(1, MOST_ROUNDS + 1):
        before, values = total, [work.value(span, total) for span in spans(analysis.member, combined.lifted)]
        total = work.response(values)
        size = float(np.abs(total.M).max(initial=0.0))
        if float(np.abs(total.M - before.M).max(initial=0.0)) <= CLOSED * max(size, 1e-300):
            return OneValue(total, tuple(values), count)
    raise CannotCompute(f"moments and effective stiffness of {rule} did not settle in {MOST_ROUNDS} rounds")


def one_value_response(
    analysis: Analysis, combination: Combination, rule: str, one: OneValue, band: str = "nominal"
) -> Response:
    """Response of other loads on the stiffness that a combination has given every span."""
    combined = analysis.combine(combination, band)
    work = _Work(analysis, combined.shares, combined.lifted, rule, analysis.member.shear)
    return work.response(list(one.spans))


@dataclass(eq=False)
class _Work:
    analysis: Analysis
    shares: tuple[Share, ...]
    lifted: frozenset[str]
    rule: str
    shear: bool

    def value(self, span: Span, total: Response) -> SpanValue:
        """Effective second moment of a span under the moments of a response."""
        found = [self.section(at, moment, side) for at, moment, side in self._critical(span, total)]
        if span.overhang or len(found) == 1:
            return SpanValue(span, found[0].effective, tuple(found))
        sagging = [s.effective for s in found if s.moment > 0.0]
        hogging = [s.effective for s in found if s.moment <= 0.0]
        each = [float(np.mean(group)) for group in (sagging, hogging) if group]
        return SpanValue(span, float(np.mean(each)), tuple(found))

    def _critical(self, span: Span, total: Response) -> list[tuple[float, float, str]]:
        """Largest sagging moment and hogging ends, or the support of an overhang: place, moment, side."""
        panels = self.analysis.profile.panels
        M = total.M[0] + total.N * self.analysis.frame.centre[0]
        size = NEGLIGIBLE * float(np.abs(M).max(initial=0.0))

        def there(x: float, side: str) -> tuple[float, float, str]:
            return x, float(values_at(panels, M, np.array([x]), side)[0]), side

        if span.overhang:
            return [there(span.root, "left" if span.label == "left" else "right")]
        first, stop = panels.border(span.start), panels.border(span.end)
        top = largest(panels, M, first, stop)
        ends = [there(span.start, "right"), there(span.end, "left")]
        found = [e for e in ends if e[1] < -size]
        if top.value > size:
            found.insert(0, (top.at, top.value, "right" if top.at < span.end else "left"))
        return found or [there(0.5 * (span.start + span.end), "right")]

    def section(self, at: float, moment: float, side: str) -> CriticalSection:
        """Second moments and cracking moment of one section, on short-term moduli."""
        g = group_places(self.analysis.profile.geometry, np.array([[at]]), np.array([at]), 0, side)[0]
        E, gross, low, high, stress = self._concrete(g)
        tension = gross[1] - low if moment >= 0.0 else high - gross[1]
        cracking = stress * gross[0] / tension
        cracked = self._cracked(g, self.analysis.moduli(ModuliKey()).E, moment) / E
        effective = gross[0]
        if moment:
            effective = float(effective_inertia(self.rule, gross[0], min(cracked, gross[0]), cracking / abs(moment)))
        return CriticalSection(at, moment, cracking, gross[0], cracked, effective, E)

    def _concrete(self, g: Group) -> tuple[float, tuple[float, float], float, float, float]:
        """Modulus of the main concrete, gross second moment and centroid, lowest and highest level, cracking stress."""
        parts = cracking_parts(self.analysis.member)
        mine = [k for k, i in enumerate(g.placed.index) if i in parts]
        if not mine:
            raise CannotCompute(f"{self.rule}: nothing that cracks is there at x = {g.placed.x[0]:.6g} m")
        cuts = tuple(
            (o, tuple(mine.index(t) for t in targets if t in mine), mass) for o, targets, mass in g.composition.cuts
        )
        plain = Composition(tuple(g.composition.outlines[k] for k in mine), tuple(c for c in cuts if c[1]))
        moduli = g.modulus(self.analysis.moduli(ModuliKey()).E)[mine]
        main = int(np.argmax(plain.moments.area[:, 0] * moduli[:, 0]))
        E = float(moduli[main, 0])
        s = section_stiffness(plain.moments, moduli)
        low, high = (float(f(v)) for f, v in zip((np.nanmin, np.nanmax), plain.extent, strict=True))
        stress = parts[g.placed.index[mine[main]]]
        return E, (float(s.EI_y[0]) / E, float(s.z_c[0])), low, high, stress

    def _cracked(self, g: Group, E: Array, moment: float) -> float:
        """Bending stiffness of the cracked section under moment alone [N m2]."""
        parts = cracking_parts(self.analysis.member)
        which = np.array([i in parts or self._never(i) for i in g.placed.index])
        section = moved(g.composition, 0.0, -float(g.stiffness(self.analysis.moduli(ModuliKey())).z_c[0]))
        one = 1.0 if moment >= 0.0 else -1.0
        state = solve_section(
            section, g.modulus(E), which, FreePlanes.none(which.size, 1), np.array([[0.0], [one], [0.0]])
        )
        if not state.carried[0]:
            raise CannotCompute(f"{self.rule}: no bars carry tension at x = {g.placed.x[0]:.6g} m")
        return one / float(state.plane[1, 0])

    def _never(self, part: int) -> bool:
        member = self.analysis.member
        return member.material(member.parts[part].material or "").no_tension

    def response(self, values: list[SpanValue]) -> Response:
        """Response of the member with one stiffness for each span, every share on its moduli."""
        a = self.analysis
        place = layout(a.frame, self.lifted)
        total: Response | None = None
        for share in self.shares:
            moduli = a.moduli(share.key)
            law = ElasticLaw.of(a.frame, moduli, a.planes, self.shear)
            bend = law.bend.copy()
            for value in values:
                first, stop = a.profile.panels.border(value.span.start), a.profile.panels.border(value.span.end)
                bend[0, first:stop] = 1.0 / self._stiffness(value, moduli.E)
            bend[2] = 0.0
            free = free_of(a.frame, a.loads, moduli)
            found = respond(a.frame, place, replace(law, bend=bend), a.atoms, a.loads, free, a.planes)
            r = found.combined(share.factors)
            total = r if total is None else total + r
        assert total is not None
        return total

    def _stiffness(self, value: SpanValue, E: Array) -> float:
        """E_c I_e of a span on a set of moduli; on long-term ones I_cr follows the concrete's modulus."""
        short = self.analysis.moduli(ModuliKey()).E
        if np.array_equal(E, short):
            return value.sections[0].E * value.effective
        found = []
        for s in value.sections:
            side = "left" if s.at >= value.span.end else "right"
            g = group_places(self.analysis.profile.geometry, np.array([[s.at]]), np.array([s.at]), 0, side)[0]
            parts = cracking_parts(self.analysis.member)
            ratio = max(float(E[i] / short[i]) for i in g.placed.index if i in parts)
            E_c = s.E * ratio
            cracked = self._cracked(g, E, s.moment) / E_c
            share = s.cracking / abs(s.moment) if s.moment else np.inf
            found.append(E_c * float(effective_inertia(self.rule, s.gross, min(cracked, s.gross), share)))
        sagging = [v for v, s in zip(found, value.sections, strict=True) if s.moment > 0.0]
        hogging = [v for v, s in zip(found, value.sections, strict=True) if s.moment <= 0.0]
        return float(np.mean([float(np.mean(v)) for v in (sagging, hogging) if v]))
