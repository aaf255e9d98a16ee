"""What happened stage by stage: deflection and stress at the end of each, and what goes when it begins."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, Combined, ModuliKey
from fishbelly.member.extremes import largest, values_at
from fishbelly.member.history_forces import resultant
from fishbelly.member.part_forces import Loading, loadings, stress_planes
from fishbelly.member.pieces import Pieces, pieces
from fishbelly.member.stage_changes import changes
from fishbelly.member.stage_view import StageView

Array = NDArray[np.float64]
Data = dict[str, Any]
Tell = Callable[[Analysis, Combined, Sequence[Loading], Pieces], Data]


def stage_rows(analysis: Analysis, finals: Sequence[Data], tell: Tell) -> list[Data]:
    """One entry a stage, cumulative to its end.

    Parameters
    ----------
    analysis : Analysis
        The member.
    finals : sequence of dict
        Results of the combinations at the end of the last stage.
    tell : callable
        Gives deflection and stress of a combination at the end of a stage.

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
    for view in analysis.views:
        assert view.stage is not None
        rows = [_row(analysis, analysis.combine(c, upto=view.index), view, tell) for c in member.combinations]
        entry: Data = {"name": view.name, "cases": list(view.stage.cases)} | changes(analysis, view)
        found.append(entry | {"combinations": rows})
    return found


def _row(analysis: Analysis, combined: Combined, view: StageView, tell: Tell) -> Data:
    """One combination at the end of a stage."""
    loading = loadings(analysis, combined)
    p = pieces(analysis, loading)
    at = _governing(analysis, p)
    row: Data = {"name": combined.combination.name} | tell(analysis, combined, loading, p)
    row["own"] = _own(analysis, combined, p, at)
    row |= _stiffness(analysis, view, at) | {"at": at}
    row["carried"] = _carried(analysis, loading, p, at)
    row["supports"] = _supports(analysis, combined)
    row["released"] = _gone(analysis, combined)
    if analysis.creeps:
        quick = analysis.instantaneous
        same = quick.combine(combined.combination, upto=combined.upto)
        there = loadings(quick, same)
        of = pieces(quick, there)
        row["instantaneous"] = tell(quick, same, there, of) | {"carried": _carried(quick, there, of, at)}
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


def _own(analysis: Analysis, combined: Combined, p: Pieces, at: float) -> Data:
    """What the stage itself adds to the deflection where that is largest."""
    here = _deflection(analysis, p.deflection[0].sum(axis=0), at)
    if combined.upto:
        before = analysis.combine(combined.combination, upto=combined.upto - 1).total
        here -= _deflection(analysis, before.deflection[0], at)
    return {"deflection": here, "at": at}


def _deflection(analysis: Analysis, field: Array, x: float) -> float:
    side = "left" if x >= analysis.member.length else "right"
    return float(values_at(analysis.profile.panels, field, np.array([x]), side)[0])


def _stiffness(analysis: Analysis, view: StageView, at: float) -> Data:
    """EI at a place on the moduli that the stage's loads act on, and on short-term ones; gain over the stage before."""

    def EI(k: int, lasting: bool) -> float:
        frame = analysis.frames[k]
        stage = analysis.views[k].stage
        short = not (lasting and stage is not None and stage.long_term)
        chosen = frame.short if short else analysis.moduli(ModuliKey(stage=k, long_term=True))
        return _deflection(analysis, frame.profile.stiffness(chosen).EI_y[frame.profile.row], at)

    k = view.index
    here, quick = EI(k, True), EI(k, False)
    return {"EI_y": here, "EI_y_short": quick, "gain": here / EI(k - 1, True) if k else None}


def _carried(analysis: Analysis, loading: Sequence[Loading], p: Pieces, at: float) -> list[Data]:
    """Force and moment that each part carries at a place, about the common centroid, and its share of the moment."""
    end = loading[0].end
    M = float(_deflection(analysis, p.M.sum(axis=0), at))
    parts = []
    for index in loading[0].parts:
        planes = stress_planes(loading, index)
        assert planes is not None
        forces = resultant(planes.sum(axis=0)[:, None], end.profile.part_moments(index, end.line))
        about = forces.M[0, 0] + forces.N[0] * end.centre[0]
        force, moment = (_deflection(analysis, v, at) for v in (forces.N[0], about))
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


def _gone(analysis: Analysis, combined: Combined) -> list[Data]:
    """Supports that go when the stage begins: their force before, the deflection there before and after."""
    k = combined.upto or 0
    if k == 0:
        return []
    before = analysis.combine(combined.combination, upto=k - 1)
    rows = []
    for number, support in enumerate(analysis.member.supports):
        if support.name not in analysis.views[k].gone - analysis.views[k - 1].gone:
            continue
        here = _deflection(analysis, before.total.deflection[0], support.at)
        here = 0.0 if abs(here) <= analysis.round_off(before.total) else here
        rows.append(
            {"name": support.name, "at": support.at}
            | _forces(before, number)
            | {
                "deflection_before": here,
                "deflection_after": here + _release(analysis, combined, k, support.at),
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
