"""What happened stage by stage: deflection and stress at the end of each, and what goes when it begins."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, Combined
from fishbelly.member.extremes import largest, values_at
from fishbelly.member.part_forces import Loading, loadings, stress_planes
from fishbelly.member.pieces import Pieces, pieces
from fishbelly.member.staging import resultant

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
        Name, cases, and for each combination deflection and stress; with stages also what the stage itself adds,
        the parts' shares of the moment where that deflection is largest, and supports that go when it begins.
    """
    member = analysis.member
    if not member.stages:
        rows = [{key: c[key] for key in ("name", "deflection", "stress")} for c in finals]
        return [{"name": "all", "cases": list(member.cases), "combinations": rows}]
    found = []
    for view in analysis.views:
        rows = []
        for c in member.combinations:
            combined = analysis.combine(c, upto=view.index)
            loading = loadings(analysis, combined)
            p = pieces(analysis, loading)
            row = {"name": c.name} | tell(analysis, combined, loading, p)
            row["own"] = _own(analysis, combined, p)
            row |= _shares(analysis, combined, loading, p)
            row["released"] = _gone(analysis, combined)
            rows.append(row)
        assert view.stage is not None
        found.append({"name": view.name, "cases": list(view.stage.cases), "combinations": rows})
    return found


def since(analysis: Analysis, combined: Combined, stage: int, after: int | None) -> Pieces:
    """Fields at the end of a stage; with `after` only what happens from the start of that stage on."""
    there = pieces(analysis, loadings(analysis, analysis.combine(combined.combination, upto=stage)))
    if not after:
        return there
    before = pieces(analysis, loadings(analysis, analysis.combine(combined.combination, upto=after - 1)))
    return Pieces(*(getattr(there, f) - getattr(before, f) for f in Pieces.__dataclass_fields__))


def _governing(analysis: Analysis, p: Pieces) -> float:
    """Where the deflection, all pattern loads on, is largest by size [m]."""
    down = p.deflection[0].sum(axis=0)[None]
    return max((largest(analysis.profile.panels, s * down) for s in (1.0, -1.0)), key=lambda e: e.value).at


def _own(analysis: Analysis, combined: Combined, p: Pieces) -> Data:
    """What the stage itself adds to the deflection where that is largest."""
    at = _governing(analysis, p)
    here = _deflection(analysis, p.deflection[0].sum(axis=0), at)
    if combined.upto:
        before = analysis.combine(combined.combination, upto=combined.upto - 1).total
        here -= _deflection(analysis, before.deflection[0], at)
    return {"deflection": here, "at": at}


def _deflection(analysis: Analysis, field: Array, x: float) -> float:
    side = "left" if x >= analysis.member.length else "right"
    return float(values_at(analysis.profile.panels, field, np.array([x]), side)[0])


def _shares(analysis: Analysis, combined: Combined, loading: Sequence[Loading], p: Pieces) -> Data:
    """EI where the deflection is largest, and what each part carries of the bending moment there."""
    at = _governing(analysis, p)
    end = loading[0].end
    s = end.profile.stiffness(end.profile.short)
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
    return {"EI_y": _deflection(analysis, s.EI_y[end.profile.row], at), "at": at, "carried": parts}


def _gone(analysis: Analysis, combined: Combined) -> list[Data]:
    """Supports that go when the stage begins: their force before, the deflection there before and after."""
    k = combined.upto or 0
    if k == 0:
        return []
    before = analysis.combine(combined.combination, upto=k - 1).total
    rows = []
    for number, support in enumerate(analysis.member.supports):
        if support.name not in analysis.views[k].gone - analysis.views[k - 1].gone:
            continue
        after = _deflection(analysis, before.deflection[0], support.at)
        rows.append(
            {
                "name": support.name,
                "at": support.at,
                "vertical": -float(before.reactions[number, 0]) + 0.0,
                "along": float(before.reactions[number, 1]) + 0.0,
                "moment": float(before.reactions[number, 2]) + 0.0,
                "deflection_before": after,
                "deflection_after": after + _release(analysis, combined, k, support.at),
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
