"""Ends of the stages of a member that cracks, as `stage_results` tells of them."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from functools import partial
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import ModuliKey
from fishbelly.member.cracked_found import CrackedResponse
from fishbelly.member.cracked_loading import cracked_loading
from fishbelly.member.cracked_results import CrackedCase
from fishbelly.member.extremes import values_at
from fishbelly.member.profile import group_places
from fishbelly.member.stage_results import End, Ends
from fishbelly.sections.clipping import moved
from fishbelly.sections.no_tension import FreePlanes, solve_section

Array = NDArray[np.float64]
Data = dict[str, Any]


def cracked_ends(cases: Sequence[CrackedCase | None], linear: Ends, tell: Callable[[CrackedCase], Data]) -> Ends:
    """Ends of stages where some combinations crack the member.

    Parameters
    ----------
    cases : sequence of CrackedCase or None
        The combinations at the end of the last stage; None where one cracks nothing.
    linear : callable
        Ends of those.
    tell : callable
        Gives deflection and stress of a combination at the end of a stage.
    """

    def end(number: int, stage: int) -> End:
        last = cases[number]
        if last is None:
            return linear(number, stage)
        case = last.at(stage)
        r = case.along
        return End(
            case.analysis,
            case.chosen,
            cracked_loading(r),
            case.fields,
            tell(case),
            partial(_stiffness, r),
            partial(_released, r),
        )

    return end


def _released(r: CrackedResponse, x: float) -> float:
    """Deflection at a place that what the stage releases causes by itself [m]."""
    after = [s.closed.response for s in r.phases if s.event.what == "release"]
    if not after or r.before is None:
        return 0.0
    return _at(r, after[-1].deflection[0], x) - _at(r.before, r.before.total.deflection[0], x)


def _at(r: CrackedResponse, field: Array, x: float) -> float:
    side = "left" if x >= r.analysis.member.length else "right"
    return float(values_at(r.analysis.profile.panels, field, np.array([x]), side)[0])


def _stiffness(r: CrackedResponse, x: float) -> tuple[float, float]:
    """EI at a place on the moduli that the stage's loads act on, and on short-term ones.

    Where it is cracked, that of the cracked section under moment alone.
    """
    frame, stage = r.frame, r.analysis.views[r.stage].stage
    lasting = stage is not None and stage.long_term
    band = r.combined.shares[0].key.band
    long = r.analysis.moduli(ModuliKey(band, stage=r.stage if stage is not None else None, long_term=True))
    found = []
    for moduli in (long if lasting else frame.short, frame.short):
        EI = _at(r, frame.profile.stiffness(moduli).EI_y[frame.profile.row], x)
        found.append(_cracked_stiffness(r, moduli.E, x) or EI)
    return found[0], found[1]


def _cracked_stiffness(r: CrackedResponse, E: Array, x: float) -> float | None:
    """EI of the cracked section under moment alone; None where it is not cracked or cannot carry any."""
    law = r.phases[-1].law
    tensionless = set(law.never)
    if any(a < x < b for a, b in r.stretches):
        tensionless |= set(law.cracking)
    if not tensionless:
        return None
    side = "left" if x >= r.analysis.member.length else "right"
    g = group_places(r.frame.profile.geometry, np.array([[x]]), np.array([x]), 0, side)[0]
    section = moved(g.composition, 0.0, -float(r.frame.line[0]))
    which = np.array([i in tensionless for i in g.placed.index])
    sign = 1.0 if _at(r, r.total.M[0], x) >= 0.0 else -1.0
    load = np.array([[0.0], [sign], [0.0]])
    state = solve_section(section, g.modulus(E), which, FreePlanes.none(which.size, 1), load)
    return sign / float(state.plane[1, 0]) if state.carried[0] else None
