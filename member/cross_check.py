"""The governing deflection by the second method, beside the first; reactions against loads."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, Combined, ModuliKey
from fishbelly.member.description import Support
from fishbelly.member.extremes import values_at
from fishbelly.member.faults import CannotCompute
from fishbelly.member.loads import Load, Shrinkage
from fishbelly.member.second_loads import LoadShare
from fishbelly.member.second_method import second_method
from fishbelly.member.section_law import SLIDE_SIGNS

Array = NDArray[np.float64]

METHOD = "strips of the placed outlines, own statics, moment-area integrals"
AGREES = 1e-6
"""Difference of the two methods, of the largest deflection, above which the answer is withheld."""

CERTAIN = 1e-4
"""However large the second method says its own error is, it excuses no more than this difference."""


def cross_check(analysis: Analysis, combined: Combined, deflection: dict[str, Any]) -> dict[str, Any] | None:
    """Compute the governing deflection of a combination again.

    Parameters
    ----------
    analysis : Analysis
        The member.
    combined : Combined
        Its combination, every pattern load on.
    deflection : dict
        Largest deflections, whose largest one gives the place.

    Returns
    -------
    dict or None
        Method, place [m], value [m], difference over the largest deflection, the second method's own error, and
        the residual of reactions against loads; None where nothing deflects.

    Raises
    ------
    CannotCompute
        When the two methods do not agree.
    """
    entries = [(k, e) for k, e in deflection.items() if e is not None]
    if not entries or analysis.member.stages:
        return None
    way, entry = max(entries, key=lambda pair: abs(pair[1]["value"]))
    at, plane = entry["at"], 1 if way == "across" else 0
    side = "left" if at >= analysis.member.length else "right"
    panels = analysis.profile.panels
    first = float(values_at(panels, combined.total.deflection[plane], np.array([at]), side)[0])
    second = second_method(
        analysis.member,
        np.array([at]),
        _shares(analysis, combined),
        lifted=combined.lifted,
        short_E=analysis.moduli(ModuliKey()).E,
    )
    value = float(second.deflection[plane, 0])
    nothing = analysis.round_off(combined.total)
    size = max(float(np.abs(combined.total.deflection).max()), abs(first), nothing)
    difference = abs(value - first) / size
    # where nothing deflects, two round-offs need not agree
    if not difference <= max(AGREES, min(second.error, CERTAIN)) + nothing / size:
        raise CannotCompute(
            f"the second method gives {value:.9g} m at x = {at:.6g} m in {combined.combination.name}, "
            f"the first {first:.9g} m: difference {difference:.1e} of the largest deflection"
        )
    return {
        "method": METHOD,
        "at": at,
        "value": value,
        "difference": difference,
        "error": float(min(second.error, 1.0)),
        "equilibrium": _residual(analysis, combined),
        "work": None if second.work_check is None else dict(second.work_check),
    }


def _shares(analysis: Analysis, combined: Combined) -> list[LoadShare]:
    c = combined.combination
    owns = {a.own_creep for a in analysis.atoms if a.own_creep is not None}
    found = []
    for share in combined.shares:
        key = share.key
        part = {case: c.sustained.get(case, 0.0) for case in c.factors}
        factors = {case: f * (part[case] if key.long_term else 1.0 - part[case]) for case, f in c.factors.items()}
        only = _only(key, owns) if key.long_term else None
        slide = _slide(analysis, key) if analysis.member.shear else None
        found.append(LoadShare(factors, analysis.moduli(key).E, slide, only))
    return found


def _only(key: ModuliKey, owns: set[tuple[str, float]]) -> Callable[[Load | Support], bool]:
    """Tell which loads belong to a long-term set: those of its own creep factor, or all others."""

    def belongs(load: Load | Support) -> bool:
        own = (load.part, load.creep) if isinstance(load, Shrinkage) and load.creep is not None else None
        return own in key.own if key.own else own is None

    return belongs


def _slide(analysis: Analysis, key: ModuliKey) -> Callable[[Array, int], Array]:
    """1/GA along x, taken over from the first method."""

    def slide(x: Array, plane: int) -> Array:
        profile = analysis.profile
        field = (SLIDE_SIGNS * profile.shear_flexibility(analysis.moduli(key)))[plane][profile.row]
        return values_at(profile.panels, field, np.asarray(x, dtype=float))

    return slide


def _residual(analysis: Analysis, combined: Combined) -> float:
    """Reactions plus loads, down, over the sum of their sizes."""
    panels = analysis.profile.panels
    factors = np.asarray(sum(s.factors for s in combined.shares))
    loads = np.zeros(len(analysis.atoms))
    sizes = np.zeros(len(analysis.atoms))
    for k, a in enumerate(analysis.loads):
        whole = panels.integrate(a.q[0])[1]
        loads[k] = whole.sum() + a.P[0].sum()
        sizes[k] = np.abs(whole).sum() + np.abs(a.P[0]).sum()
    reactions = combined.total.reactions[:, 0]
    size = float(sizes @ np.abs(factors) + np.abs(reactions).sum())
    return abs(float(loads @ factors + reactions.sum())) / size if size else 0.0
