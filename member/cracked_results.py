"""What results tell of combinations that crack a member: the chosen response, and others beside it."""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, Combined
from fishbelly.member.cracked_code import OneValue, one_value
from fishbelly.member.cracked_found import CrackedResponse
from fishbelly.member.cracked_history import cracked_responses
from fishbelly.member.cracked_loading import pieces_of, stress_at_crack
from fishbelly.member.cracked_record import response_on
from fishbelly.member.cracked_response import bending_alone, cracked_response, cracked_stage, cracks_followed
from fishbelly.member.description import Combination
from fishbelly.member.extremes import largest
from fishbelly.member.faults import CannotCompute
from fishbelly.member.inclined_stress import along_plates
from fishbelly.member.pieces import Pieces
from fishbelly.member.response import Response
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
    others : tuple of CrackedResponse
        All combinations, at the end of the last stage, to tell which one has cracked what.
    """

    along: CrackedResponse
    rule: str | None
    one: OneValue | None
    chosen: Combined
    band: str = "nominal"
    others: tuple[CrackedResponse, ...] = ()
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
            self._ends[stage] = _case(self.along.at(stage), self.rule, self.band, self.others)
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
    if not cracks_followed(analysis):
        return none
    rule = member.tension_stiffening
    found = cracked_responses(analysis, member.combinations, rule)
    return tuple(_case(r, rule, others=found) if r.phases and r.cracks else None for r in found)


def chosen_response(analysis: Analysis, combination: Combination, upto: int | None = None) -> tuple[Analysis, Response]:
    """Response of one combination or case as results have it, and the grid on which it is.

    Parameters
    ----------
    analysis : Analysis
        A member whose cracks are followed.
    combination : Combination
        One of its own, or any other; where the member keeps a history its own crack places for it too.
    upto : int, optional
        Stage at whose end; default the last.
    """
    own = list(analysis.member.combinations)
    asked = own if combination in own else [*own, replace(combination, purpose="strength")]
    rule = analysis.member.tension_stiffening
    found = cracked_responses(analysis, asked, rule)[asked.index(combination) if combination in own else -1]
    case = _case(found if upto is None else found.at(upto), rule)
    return case.analysis, case.chosen.total


def _case(
    r: CrackedResponse, rule: str | None, band: str = "nominal", others: tuple[CrackedResponse, ...] = ()
) -> CrackedCase:
    if rule in (None, EN) or len(r.analysis.views) > 1:
        return CrackedCase(r, rule, None, r.combined, band, others)
    assert rule is not None
    one = one_value(r.analysis, r.combined.combination, rule, band)
    return CrackedCase(r, rule, one, replace(r.combined, total=one.response), band, others)


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
