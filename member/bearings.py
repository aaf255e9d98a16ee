"""Bearings that cannot pull: which of them have lifted, so that none pulls and none sinks into its seat."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from fishbelly.member.faults import CannotCompute
from fishbelly.member.response import Response

if TYPE_CHECKING:
    from fishbelly.member.analysis import Analysis, Share

MOST_CHANGES = 60
"""Changes of bearings between bearing and lifted before the search is given up."""


def bearing(analysis: Analysis, shares: tuple[Share, ...]) -> frozenset[str]:
    """Which bearings have lifted: none pulls, none sinks into its seat."""
    lifted: frozenset[str] = frozenset()
    if len(analysis.views) > 1:
        _bear_throughout(analysis, shares)
        return lifted
    seen = {lifted}
    supports = analysis.member.supports
    for _ in range(MOST_CHANGES):
        r = analysis.superposed(shares, lifted)
        size = np.abs(r.reactions[:, 0]).max(initial=0.0)
        pulls = {
            s.name: r.reactions[k, 0]
            for k, s in enumerate(supports)
            if s.only_up and s.name not in lifted and r.reactions[k, 0] > 1e-9 * size
        }
        presses = {s.name: g for s in supports if s.name in lifted and (g := _gap(analysis, r, shares, s.name)) > 0.0}
        if not pulls and not presses:
            return lifted
        if pulls:
            lifted = lifted | {max(pulls, key=lambda n: pulls[n])}
        else:
            lifted = lifted - {max(presses, key=lambda n: presses[n])}
        if lifted in seen:
            break
        seen.add(lifted)
    raise CannotCompute("no state of the bearings that cannot pull was found in which all of them agree")


def _bear_throughout(analysis: Analysis, shares: tuple[Share, ...]) -> None:
    """See that no bearing that cannot pull lifts at the end of any stage.

    Raises
    ------
    CannotCompute
        When one does: what it had carried would have to be followed through the stages.
    """
    for view in analysis.views:
        r = analysis.superposed(shares, frozenset(), upto=view.index)
        size = np.abs(r.reactions[:, 0]).max(initial=0.0)
        for k, s in enumerate(analysis.member.supports):
            if s.only_up and r.reactions[k, 0] > 1e-9 * size:
                raise CannotCompute(
                    f"{s.name} would lift off in stage {view.name}: "
                    "bearings that lift off are not built together with stages"
                )


def _gap(analysis: Analysis, r: Response, shares: tuple[Share, ...], name: str) -> float:
    """How far the member would sink below the seat of a lifted bearing [m], round-off taken off."""
    support = next(s for s in analysis.member.supports if s.name == name)
    panels = analysis.profile.panels
    k = panels.border(support.at)
    w = r.deflection[0]
    here = float(w[k] @ panels.rule.left if k < panels.count else w[-1] @ panels.rule.right)
    factor = sum(
        float(f)
        for s in shares
        for f, a in zip(s.factors, analysis.atoms, strict=True)
        if a.case == support.case and a.span is None
    )
    return here - support.sinks * factor - 1e-9 * float(np.abs(w).max())
