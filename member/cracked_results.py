"""What results tell of combinations that crack a member: the chosen response, and others beside it."""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, Combined
from fishbelly.member.cracked_code import OneValue, SpanValue, one_value
from fishbelly.member.cracked_found import CrackedResponse
from fishbelly.member.cracked_history import cracked_responses
from fishbelly.member.cracked_loading import pieces_of, stress_at_crack
from fishbelly.member.cracked_record import response_on
from fishbelly.member.cracked_response import bending_alone, cracked_response, cracked_stage, may_crack
from fishbelly.member.cracked_sections import no_tension_parts
from fishbelly.member.extremes import largest
from fishbelly.member.faults import CannotCompute
from fishbelly.member.inclined_stress import along_plates
from fishbelly.member.pieces import Pieces
from fishbelly.member.response import Response
from fishbelly.member.slip_layers import has_soft_joints
from fishbelly.member.stresses import PartStress, StressPeak
from fishbelly.sections.effective_inertia import EN

Array = NDArray[np.float64]
Data = dict[str, Any]

NEGLIGIBLE = 1e-9


@dataclass(frozen=True, eq=False)
class CrackedCase:
    """One combination that cracks the member, at the end of a stage.

    Parameters
    ----------
    along : CrackedResponse
        Section by section along x, by the rule of tension stiffening.
    rule : str or None
        The rule.
    one : OneValue or None
        By the code's one effective stiffness for each span, where the rule is one of ACI 318 and there is one stage.
    chosen : Combined
        The combination with the response that results are of: the code's one value by ACI 318, else along x.
    band : str
        Which end of the materials' bands of E.
    """

    along: CrackedResponse
    rule: str | None
    one: OneValue | None
    chosen: Combined
    band: str = "nominal"
    _ends: dict[int, CrackedCase] = field(default_factory=dict, repr=False)

    @property
    def analysis(self) -> Analysis:
        """The grid, with borders where cracks begin."""
        return self.along.analysis

    @cached_property
    def bent(self) -> Response:
        """The chosen response, rigid in shear."""
        if self.one is None:
            return bending_alone(self.along)
        assert self.rule is not None
        return one_value(self.analysis, self.chosen.combination, self.rule, self.band, shear=False).response

    @cached_property
    def everywhere(self) -> CrackedResponse | None:
        """Cracked everywhere, without tension stiffening; None where that cannot be carried."""
        try:
            return cracked_response(self.analysis, self.chosen.combination, band=self.band, everywhere=True)
        except CannotCompute:
            return None

    @property
    def fields(self) -> Pieces:
        """Fields of the chosen response; it has no pattern loads."""
        return pieces_of(self.along, self.chosen.total)

    def at(self, stage: int) -> CrackedCase:
        """Return the same combination at the end of a stage, this or an earlier one."""
        if stage >= self.along.stage:
            return self
        if stage not in self._ends:
            self._ends[stage] = _case(self.along.at(stage), self.rule, self.band)
        return self._ends[stage]

    def since(self, stage: int, after: int | None) -> Pieces:
        """Fields at the end of a stage, on this grid; with `after` only what happens from the start of that stage on.

        All loads so far are solved as one: what stages add is the difference of totals.
        """

        def total(k: int) -> Response:
            r = self.along.at(k)
            return response_on(r.analysis.profile.panels, self.analysis.profile.panels, r.total)

        there = total(stage)
        return pieces_of(self.along, there + total(after - 1) * -1.0 if after else there)


def cracked_cases(analysis: Analysis) -> tuple[CrackedCase | None, ...]:
    """Every combination of a member that cracks it, at the end of the last stage; None for those that do not.

    Pattern loads, joints that slip and hinges that come or go are not followed through cracking: without a part that
    never carries tension and without a rule of tension stiffening the member then counts as uncracked, and a note
    says so.

    Raises
    ------
    CannotCompute
        When the numbers cannot be had.
    """
    member = analysis.member
    none: tuple[CrackedCase | None, ...] = (None,) * len(member.combinations)
    if not may_crack(member) or (_unbuilt(analysis) and not _asked(analysis)):
        return none
    rule = member.tension_stiffening
    found = cracked_responses(analysis, member.combinations, rule)
    return tuple(_case(r, rule) if r.phases and r.cracks else None for r in found)


def _asked(analysis: Analysis) -> bool:
    member = analysis.member
    return bool(no_tension_parts(member)) or member.tension_stiffening is not None


def _unbuilt(analysis: Analysis) -> bool:
    hinged = any(v.hinges != analysis.views[0].hinges for v in analysis.views)
    return hinged or has_soft_joints(analysis.member) or any(a.span is not None for a in analysis.atoms)


def _case(r: CrackedResponse, rule: str | None, band: str = "nominal") -> CrackedCase:
    if rule in (None, EN) or len(r.analysis.views) > 1:
        return CrackedCase(r, rule, None, r.combined, band)
    assert rule is not None
    one = one_value(r.analysis, r.combined.combination, rule, band)
    return CrackedCase(r, rule, one, replace(r.combined, total=one.response), band)


def in_band(case: CrackedCase, band: str) -> CrackedCase:
    """Return the same combination at the low or high end of the materials' bands, places cracked so far held."""
    analysis, history = case.analysis, case.analysis.member.cracks == "history"
    found: CrackedResponse | None = None
    for r in case.along.life:
        held = r.stretches if history else ()
        found = cracked_stage(analysis, case.chosen.combination, found, case.rule, held, band)
    assert found is not None
    return _case(found, case.rule, band)


def cracked_stresses(case: CrackedCase) -> tuple[PartStress, ...]:
    """Extreme stresses of every part: at a crack where the member is cracked, without tension stiffening."""
    if not case.along.phases:
        return ()
    solved = case.along.phases[-1]
    law, frame = solved.law, case.along.frame
    analysis, mask = case.analysis, solved.law.mask
    brittle = law.never | frozenset(law.cracking)
    there = {i for g in frame.profile.groups for i in g.placed.index}
    found = []
    for index, part in enumerate(analysis.member.parts):
        if part.cuts or part.material is None:
            continue
        if index not in there:
            found.append(PartStress(part.name, None, None))
            continue
        plane = stress_at_crack(solved, index)
        none = (mask if index in brittle else np.zeros_like(mask)) | (index in law.never)
        high, low = (_peak(case, index, plane, none, sign) for sign in (1.0, -1.0))
        found.append(PartStress(part.name, high, low))
    size = max((abs(p.value) for s in found for p in (s.highest, s.lowest) if p is not None), default=0.0)
    return tuple(PartStress(s.part, _told(s.highest, size), _told(s.lowest, size)) for s in found)


def _told(peak: StressPeak | None, size: float) -> StressPeak | None:
    return None if peak is None or abs(peak.value) <= NEGLIGIBLE * size else peak


def _peak(case: CrackedCase, index: int, plane: Array, none: NDArray[np.bool_], sign: float) -> StressPeak | None:
    """Largest of sign times stress, no tension where there is `none`."""
    law, panels = case.along.phases[-1].law, case.analysis.profile.panels
    values, y, z = law.sections.fibres(index, sign * plane, law.planar)
    along = along_plates(law.sections.frame.profile, index, y, z)
    values = values if along is None else values * along
    stress = np.where(none, np.minimum(sign * values, 0.0), sign * values) * sign
    best: StressPeak | None = None
    for c in range(stress.shape[0]):
        there = ~np.isnan(stress[c]).any(axis=1)
        edges = np.flatnonzero(np.diff(np.concatenate(([0], there.astype(int), [0]))))
        for first, stop in zip(edges[::2], edges[1::2], strict=True):
            top = largest(panels, np.nan_to_num(stress[c]), int(first), int(stop))
            if best is None or top.value > sign * best.value:
                k = int(np.clip(panels.find(np.array([top.at]))[0], first, stop - 1))
                basis = panels.rule.basis(panels.local(np.array([k]), np.array([top.at])))[0]
                best = StressPeak(sign * top.value, top.at, float(basis @ z[c, k]), float(basis @ y[c, k]))
    if best is None or sign * best.value <= 0.0:
        return None
    return best


def cracked_data(case: CrackedCase) -> Data:
    """What stands under ``cracked`` in the results of a combination."""
    r, done = case.along, case.along.convergence
    data: Data = {
        "rule": case.rule,
        "from_history": _more(r),
        "stretches": [{"from": a, "to": b} for a, b in r.stretches],
        "convergence": {
            "status": done.status,
            "rounds": done.rounds,
            "residual": done.residual,
            "at": done.at,
        },
        "uncracked": _deepest(r.uncracked, case.analysis),
        "along": _deepest(r.total, case.analysis),
        "everywhere": None if case.everywhere is None else _deepest(case.everywhere.total, case.everywhere.analysis),
    }
    if case.one is not None:
        data["one_value"] = _deepest(case.one.response, case.analysis) | {"spans": [_span(s) for s in case.one.spans]}
    elif case.rule == EN and case.everywhere is not None:
        data["one_value"] = _between(case, case.everywhere)
    return data


def _more(r: CrackedResponse) -> bool:
    """Whether other combinations have cracked places that this one does not crack by itself."""
    close = 1e-6 * r.analysis.member.length
    return not all(any(a <= x + close and b >= y - close for a, b in r.own) for x, y in r.stretches)


def _deepest(response: Response, analysis: Analysis) -> Data:
    """Largest deflection by size in the plane of the loads, with its sign, downwards positive."""
    panels = analysis.profile.panels
    both = [(s, largest(panels, s * response.deflection[0])) for s in (1.0, -1.0)]
    sign, found = max(both, key=lambda pair: pair[1].value)
    return {"value": sign * found.value, "at": found.at}


def _span(value: SpanValue) -> Data:
    return {
        "span": value.span.label,
        "I_effective": value.effective,
        "sections": [
            {
                "at": s.at,
                "M": s.moment,
                "M_cracking": s.cracking,
                "I_gross": s.gross,
                "I_cracked": s.cracked,
                "I_effective": s.effective,
            }
            for s in value.sections
        ],
    }


def _between(case: CrackedCase, everywhere: CrackedResponse) -> Data:
    """EN 1992-1-1, 7.4.3(7): between uncracked and cracked throughout, by zeta of the most cracked section."""
    state = case.along.state
    assert state is not None
    rule = case.along.phases[-1].law.stiffening
    assert rule is not None
    most = largest(case.analysis.profile.panels, np.where(np.isfinite(state.over), state.over, 0.0))
    zeta = float(rule.zeta(1.0 / most.value if most.value > 0.0 else np.inf, 1.0))
    one, other = _deepest(case.along.uncracked, case.analysis), _deepest(everywhere.total, everywhere.analysis)
    value = (1.0 - zeta) * one["value"] + zeta * other["value"]
    return {"value": value, "at": other["at"], "zeta": zeta, "section": most.at}
