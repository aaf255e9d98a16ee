"""What the results tell of a combination that cracks the member, beside its fields: ``cracked``."""

from __future__ import annotations

from typing import Any

import numpy as np

from fishbelly.member.analysis import Analysis
from fishbelly.member.cracked_check import beyond
from fishbelly.member.cracked_code import SpanValue
from fishbelly.member.cracked_found import CrackedResponse
from fishbelly.member.cracked_places import joined
from fishbelly.member.cracked_results import CrackedCase
from fishbelly.member.extremes import largest
from fishbelly.member.response import Response
from fishbelly.sections.effective_inertia import EN

Data = dict[str, Any]


def cracked_data(case: CrackedCase) -> Data:
    """What stands under ``cracked`` in the results of a combination."""
    r, done = case.along, case.along.convergence
    data: Data = {
        "rule": case.rule,
        "from_history": _more(r),
        "stretches": stretches(case),
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
    why = beyond(r)
    if why is not None:
        data["beyond_check"] = why
    if case.one is not None:
        data["one_value"] = _deepest(case.one.response, case.analysis) | {"spans": [_span(s) for s in case.one.spans]}
        data |= _long_term(case)
    elif case.rule == EN and case.everywhere is not None and r.phases[-1].law.cracking:
        # a part that never carries tension has no moment at which it cracks, and so no share of the code's
        data["one_value"] = _between(case, case.everywhere)
    return data


def _long_term(case: CrackedCase) -> Data:
    """The code's multiplier for loads that last, where a share of the combination does."""
    combination = case.chosen.combination
    if not any(combination.sustained.values()):
        return {}
    from fishbelly.member.cracked_multiplier import multiplied

    assert case.rule is not None
    found = multiplied(case.analysis, combination, case.rule, case.band)
    return {} if found is None else {"long_term": found}


def stretches(case: CrackedCase) -> list[Data]:
    """Where it is cracked, and which combination cracks most of each stretch: this one where it does so by itself."""
    r, rows = case.along, []
    mine = [o for o in case.others if o.combined.combination.name == r.combined.combination.name]
    rest = [o for o in case.others if o not in mine and o.combined.combination.purpose == "deflection"]
    for a, b in r.stretches:
        shares = [(_cracked_by(o.at(r.stage), a, b), o) for o in (*mine, *rest)]
        most = max((share for share, _ in shares), default=0.0)
        by = next((o.combined.combination.name for share, o in shares if share >= most * (1.0 - 1e-6)), None)
        rows.append({"from": a, "to": b, "by": by if most > 0.0 else None})
    return rows


def _cracked_by(r: CrackedResponse, start: float, end: float) -> float:
    """Length of a stretch that a combination has cracked by itself up to a stage [m]."""
    own = joined([pair for each in r.life for pair in each.own], 0.0)
    return sum(max(0.0, min(b, end) - max(a, start)) for a, b in own)


def _more(r: CrackedResponse) -> bool:
    """Whether other combinations have cracked places that this one has not cracked by itself."""
    close = 1e-6 * r.analysis.member.length
    own = joined([pair for each in r.life for pair in each.own], close)
    return not all(any(a <= x + close and b >= y - close for a, b in own) for x, y in r.stretches)


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
