"""The governing deflection by the second method, beside the first; reactions against loads."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, Combined, ModuliKey, Share
from fishbelly.member.description import Support
from fishbelly.member.extremes import values_at
from fishbelly.member.faults import CannotCompute
from fishbelly.member.loads import Load, Shrinkage
from fishbelly.member.moduli import Moduli
from fishbelly.member.profile import Profile
from fishbelly.member.second_loads import LoadShare
from fishbelly.member.second_method import SecondResult, second_method
from fishbelly.member.second_sections import Slide
from fishbelly.member.section_law import SLIDE_SIGNS
from fishbelly.member.shear_sets import shear_of_parts
from fishbelly.member.slip_layers import has_soft_joints, layers_of

if TYPE_CHECKING:
    from fishbelly.member.second_shares import ModuliOf, StagedShare

Array = NDArray[np.float64]

METHOD = "strips of the placed outlines, own statics, moment-area integrals"
SLIP_METHOD = "strips of the placed outlines, displacements of all layers, collocation at Gauss points"
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
    if not entries:
        return None
    way, entry = max(entries, key=lambda pair: abs(pair[1]["value"]))
    at, plane = entry["at"], 1 if way == "across" else 0
    side = "left" if at >= analysis.member.length else "right"
    panels = analysis.profile.panels
    first = float(values_at(panels, combined.total.deflection[plane], np.array([at]), side)[0])
    second = second_of(analysis, combined, np.array([at]))
    value = float(second.deflection[plane, 0])
    nothing = _round_off(analysis, combined)
    size = max(float(np.abs(combined.total.deflection).max()), abs(first), nothing)
    difference = abs(value - first) / size
    # where nothing deflects, two round-offs need not agree
    if not difference <= max(AGREES, min(second.error, CERTAIN)) + nothing / size:
        raise CannotCompute(
            f"the second method gives {value:.9g} m at x = {at:.6g} m in {combined.combination.name}, "
            f"the first {first:.9g} m: difference {difference:.1e} of the largest deflection"
        )
    return {
        "method": SLIP_METHOD if has_soft_joints(analysis.member) else METHOD,
        "at": at,
        "value": value,
        "difference": difference,
        "error": float(min(second.error, 1.0)),
        "equilibrium": _residual(analysis, combined),
        "work": None if second.work_check is None else dict(second.work_check),
    }


def second_of(analysis: Analysis, combined: Combined, x: Array) -> SecondResult:
    """Ask the second method for what a combination does.

    Parameters
    ----------
    analysis, combined : Analysis, Combined
        The member and its combination.
    x : ndarray, shape (X,)
        Places at which deflections are wanted [m].
    """
    if analysis.member.stages or has_soft_joints(analysis.member):
        # shrinkage with its own creep in a long-term stage finds its moduli by itself
        given = [share for share in combined.shares if share.key.long_term or not share.key.own]
        shares = [_staged(analysis, combined, share) for share in given]
        if has_soft_joints(analysis.member):
            from fishbelly.member.second_slip import slip_method
            from fishbelly.member.slip_setting import one_by_one

            layers = layers_of(analysis.member)
            single = [one_by_one(frame, layers) for frame in analysis.frames]
            return slip_method(analysis.member, x, shares, single, combined.lifted, combined.upto)
        from fishbelly.member.second_stages import staged_method

        return staged_method(analysis.member, x, shares, combined.lifted, combined.upto)
    return second_method(
        analysis.member,
        x,
        [_share(analysis, combined, share) for share in combined.shares],
        lifted=combined.lifted,
        short_E=analysis.moduli(ModuliKey()).E,
    )


def _round_off(analysis: Analysis, combined: Combined) -> float:
    """Deflection that is nothing but round-off: of what was there at the end of any stage, where it has gone again."""
    totals = [combined.total]
    for view in analysis.views[: combined.upto if combined.upto is not None else -1]:
        totals.append(analysis.superposed(combined.shares, combined.lifted, upto=view.index))
    return max(analysis.round_off(total) for total in totals)


def _share(analysis: Analysis, combined: Combined, share: Share) -> LoadShare:
    slide = _slide(analysis.profile, analysis.moduli(share.key)) if analysis.member.shear else None
    return LoadShare(_factors(combined, share.key), analysis.moduli(share.key).E, slide, _only(analysis, share.key))


def _staged(analysis: Analysis, combined: Combined, share: Share) -> StagedShare:
    # stages are met seldom, and what knows of them is not loaded for others
    from fishbelly.member.second_shares import StagedShare

    key = share.key

    def slide(which: ModuliOf) -> Slide:
        wanted = replace(key, stage=which.stage, long_term=which.long_term, own=which.own, aged=which.aged)
        profile = analysis.frames[which.stage].profile
        if which.parts is not None:
            return _along(profile, shear_of_parts(profile, which.parts, analysis.moduli(wanted)))
        return _slide(profile, analysis.moduli(wanted))

    return StagedShare(
        _factors(combined, key),
        key.band,
        key.long_term,
        key.own,
        _only(analysis, key),
        slide if analysis.member.shear else None,
    )


def _factors(combined: Combined, key: ModuliKey) -> dict[str, float]:
    """Factor of each case in the sustained share, or in what is left beside it."""
    c = combined.combination
    part = {case: c.sustained.get(case, 0.0) for case in c.factors}
    return {case: f * (part[case] if key.long_term else 1.0 - part[case]) for case, f in c.factors.items()}


def _only(analysis: Analysis, key: ModuliKey) -> Callable[[Load | Support], bool] | None:
    """Tell which loads belong to a long-term set: those of its own creep factor, or all others."""
    if not key.long_term:
        return None

    def belongs(load: Load | Support) -> bool:
        own = (load.part, load.creep) if isinstance(load, Shrinkage) and load.creep is not None else None
        return own in key.own if key.own else own is None

    return belongs


def _slide(profile: Profile, moduli: Moduli) -> Slide:
    """1/GA along x, taken over from the first method."""
    return _along(profile, (SLIDE_SIGNS * profile.shear_flexibility(moduli))[:, profile.row])


def _along(profile: Profile, fields: Array) -> Slide:
    """1/GA of each plane (3, K, n) as a function of x."""

    def slide(x: Array, plane: int) -> Array:
        return values_at(profile.panels, fields[plane], np.asarray(x, dtype=float))

    return slide


def _residual(analysis: Analysis, combined: Combined) -> float:
    """Reactions plus the loads that have arrived, down, over the sum of their sizes."""
    panels = analysis.profile.panels
    factors = np.asarray(sum(s.factors for s in combined.shares))
    loads = np.zeros(len(analysis.atoms))
    sizes = np.zeros(len(analysis.atoms))
    for k, a in enumerate(analysis.loads):
        if combined.upto is not None and analysis.stage_of(analysis.atoms[k]) > combined.upto:
            continue
        whole = panels.integrate(a.q[0])[1]
        loads[k] = whole.sum() + a.P[0].sum()
        sizes[k] = np.abs(whole).sum() + np.abs(a.P[0]).sum()
    reactions = combined.total.reactions[:, 0]
    size = float(sizes @ np.abs(factors) + np.abs(reactions).sum())
    return abs(float(loads @ factors + reactions.sum())) / size if size else 0.0
