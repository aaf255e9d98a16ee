"""What happened stage by stage: deflection and stress at the end of each, and what goes when it begins."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import partial
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, Combined, ModuliKey
from fishbelly.member.extremes import largest, values_at
from fishbelly.member.part_forces import Loading, loadings, resultants
from fishbelly.member.pieces import Pieces, pieces
from fishbelly.member.stage_changes import changes
from fishbelly.member.stage_view import StageView

Array = NDArray[np.float64]
Data = dict[str, Any]
Tell = Callable[[Analysis, Combined, Sequence[Loading], Pieces], Data]
"""Gives deflection and stress of a combination at the end of a stage."""


@dataclass(frozen=True, eq=False)
class End:
    """One combination at the end of a stage.

    Parameters
    ----------
    analysis, combined : Analysis, Combined
        The grid, and the combination with its response.
    loading : sequence of Loading
        What it does to the parts.
    p : Pieces
        Its fields.
    told : dict
        Deflection and stress.
    stiffness : callable
        EI at a place on the moduli that the stage's loads act on, and on short-term ones.
    released : callable
        Deflection at a place that what the stage releases causes by itself [m].
    """

    analysis: Analysis
    combined: Combined
    loading: Sequence[Loading]
    p: Pieces
    told: Data
    stiffness: Callable[[float], tuple[float, float]]
    released: Callable[[float], float]


Ends = Callable[[int, int], End]
"""Gives the end of a stage for a combination: its number and that of the stage."""


def linear_ends(analysis: Analysis, tell: Tell) -> Ends:
    """Ends of stages of a member whose results add."""

    def end(number: int, stage: int) -> End:
        combined = analysis.combine(analysis.member.combinations[number], upto=stage)
        loading = loadings(analysis, combined)
        p = pieces(analysis, loading)
        told = tell(analysis, combined, loading, p)
        stiffness = partial(_stiffness, analysis, stage)
        return End(analysis, combined, loading, p, told, stiffness, partial(_release, analysis, combined, stage))

    return end


def stage_rows(analysis: Analysis, finals: Sequence[Data], ends: Ends, quick: Ends) -> list[Data]:
    """One entry a stage, cumulative to its end.

    Parameters
    ----------
    analysis : Analysis
        The member.
    finals : sequence of dict
        Results of the combinations at the end of the last stage.
    ends, quick : callable
        Ends of stages, and what they would be if nothing crept.

    Returns
    -------
    list of dict
        Name, cases, and for each combination deflection and stress; with stages also what comes, goes and creeps,
        what the stage itself adds, EI and the parts' shares of the moment where the deflection is largest, forces of
        supports, and supports that go when it begins. Where anything creeps, deflection, stress and shares as they
        were if nothing did stand beside them.
    """
    member = analysis.member
    if not member.stages:
        rows = [{key: c[key] for key in ("name", "deflection", "stress")} for c in finals]
        return [{"name": "all", "cases": list(member.cases), "combinations": rows}]
    found = []
    before: list[End | None] = [None] * len(member.combinations)
    for view in analysis.views:
        assert view.stage is not None
        rows = []
        for number in range(len(member.combinations)):
            end = ends(number, view.index)
            rows.append(_row(end, before[number], view, quick(number, view.index) if analysis.creeps else None))
            before[number] = end
        entry: Data = {"name": view.name, "cases": list(view.stage.cases)} | changes(analysis, view)
        found.append(entry | {"combinations": rows})
    return found


def _row(end: End, before: End | None, view: StageView, quick: End | None) -> Data:
    """One combination at the end of a stage."""
    at = _governing(end.analysis, end.p)
    row: Data = {"name": end.combined.combination.name} | end.told
    row["own"] = _own(end, before, at)
    here, short = end.stiffness(at)
    gain = None if before is None else here / before.stiffness(at)[0]
    row |= {"EI_y": here, "EI_y_short": short, "gain": gain, "at": at}
    row["carried"] = _carried(end, at)
    row["supports"] = _supports(end.analysis, end.combined)
    row["released"] = [] if before is None else _gone(end, before, view)
    if quick is not None:
        row["instantaneous"] = quick.told | {"carried": _carried(quick, at)}
    return row


def since(analysis: Analysis, combined: Combined, stage: int, after: int | None) -> Pieces:
    """Fields at the end of a stage; with `after` only what happens from the start of that stage on."""
    band = combined.shares[0].key.band

    def at_end(k: int) -> Pieces:
        return pieces(analysis, loadings(analysis, analysis.combine(combined.combination, band, k)))

    there = at_end(stage)
    if not after:
        return there
    before = at_end(after - 1)
    return Pieces(*(getattr(there, f) - getattr(before, f) for f in Pieces.__dataclass_fields__))


def _governing(analysis: Analysis, p: Pieces) -> float:
    """Where the deflection, all pattern loads on, is largest by size [m]."""
    down = p.deflection[0].sum(axis=0)[None]
    return max((largest(analysis.profile.panels, s * down) for s in (1.0, -1.0)), key=lambda e: e.value).at


def _own(end: End, before: End | None, at: float) -> Data:
    """What the stage itself adds to the deflection where that is largest."""
    here = _deflection(end.analysis, end.p.deflection[0].sum(axis=0), at)
    if before is not None:
        here -= _deflection(before.analysis, before.combined.total.deflection[0], at)
    return {"deflection": here, "at": at}


def _deflection(analysis: Analysis, field: Array, x: float) -> float:
    side = "left" if x >= analysis.member.length else "right"
    return float(values_at(analysis.profile.panels, field, np.array([x]), side)[0])


def _stiffness(analysis: Analysis, stage: int, at: float) -> tuple[float, float]:
    """EI at a place on the moduli that a stage's loads act on, and on short-term ones."""
    frame, view = analysis.frames[stage], analysis.views[stage].stage

    def EI(lasting: bool) -> float:
        chosen = analysis.moduli(ModuliKey(stage=stage, long_term=True)) if lasting else frame.short
        return _deflection(analysis, frame.profile.stiffness(chosen).EI_y[frame.profile.row], at)

    return EI(view is not None and view.long_term), EI(False)


def _carried(end: End, at: float) -> list[Data]:
    """Force and moment that each part carries at a place, about the common centroid, and its share of the moment."""
    analysis, p, frame = end.analysis, end.p, end.loading[0].end
    M = float(_deflection(analysis, p.M.sum(axis=0), at))
    parts = []
    for index in end.loading[0].parts:
        forces = resultants(end.loading, index)
        assert forces is not None
        axial = forces.N.sum(axis=0)
        about = forces.M[0].sum(axis=0) + axial * frame.centre[0]
        force, moment = (_deflection(analysis, v, at) for v in (axial, about))
        share = moment / M if abs(M) > 1e-9 * float(np.abs(p.M).max()) else None
        parts.append({"part": analysis.member.parts[index].name, "force": force, "moment": moment, "share": share})
    return parts


def _supports(analysis: Analysis, combined: Combined) -> list[Data]:
    """Forces of the supports on the member at the end of the stage, by x; 0 of one that is not there."""
    supports = analysis.member.supports
    order = sorted(range(len(supports)), key=lambda k: supports[k].at)
    return [_forces(combined, k) | {"name": supports[k].name, "at": supports[k].at} for k in order]


def _forces(combined: Combined, number: int) -> Data:
    """Force of a support on the member, upwards, towards +x and clockwise."""
    down, along, couple = (float(v) + 0.0 for v in combined.total.reactions[number, :3])
    return {"vertical": -down + 0.0, "along": along, "moment": couple}


def _gone(end: End, before: End, view: StageView) -> list[Data]:
    """Supports that go when the stage begins: their force before, the deflection there before and after."""
    analysis, combined = before.analysis, before.combined
    rows = []
    for number, support in enumerate(analysis.member.supports):
        if support.name not in view.gone - analysis.views[view.index - 1].gone:
            continue
        here = _deflection(analysis, combined.total.deflection[0], support.at)
        here = 0.0 if abs(here) <= analysis.round_off(combined.total) else here
        rows.append(
            {"name": support.name, "at": support.at}
            | _forces(combined, number)
            | {
                "deflection_before": here,
                "deflection_after": here + end.released(support.at),
            }
        )
    return rows


def _release(analysis: Analysis, combined: Combined, stage: int, x: float) -> float:
    """Deflection at x that a stage's releases alone cause [m]."""
    total = 0.0
    for share in combined.shares:
        for step in analysis.history(share.key, combined.lifted):
            if step.stage == stage and step.what == "release":
                total += _deflection(analysis, step.response.combined(share.factors).deflection[0], x)
    return total
