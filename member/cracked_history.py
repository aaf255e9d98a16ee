"""Every combination of a member that cracks: what one has cracked stays cracked for all."""

from __future__ import annotations

from collections.abc import Sequence

from fishbelly.member.analysis import Analysis
from fishbelly.member.cracked_found import CrackedResponse
from fishbelly.member.cracked_places import Stretches, joined
from fishbelly.member.cracked_response import cracked_stage
from fishbelly.member.description import Combination
from fishbelly.member.faults import CannotCompute

MOST_ROUNDS = 12
SAME = 1e-8
"""Growth of the cracked stretches, as a share of the member's length, below which they are the same."""


def cracked_responses(
    analysis: Analysis, combinations: Sequence[Combination], rule: str | None, band: str = "nominal"
) -> tuple[CrackedResponse, ...]:
    """Responses of combinations in the member's way of counting cracks.

    With `cracks = "history"` a place counts as cracked where any combination for deflection cracks it by itself; in
    statically indeterminate members that is repeated until no combination cracks anything more, stage by stage: what
    is cracked at the end of one stays cracked in the next.

    Parameters
    ----------
    analysis : Analysis
        The member.
    combinations : sequence of Combination
        All combinations asked for, in their order.
    rule : str or None
        Rule of tension stiffening along x.
    band : str
        Which end of the materials' bands of E.

    Returns
    -------
    tuple of CrackedResponse
        At the end of the last stage.

    Raises
    ------
    CannotCompute
        When cracks keep growing.
    """
    found: list[CrackedResponse] = []
    for k in range(len(analysis.views)):
        before: list[CrackedResponse | None] = list(found) if k else [None] * len(combinations)
        found = _stage(analysis, combinations, before, rule, band)
    return tuple(found)


def _stage(
    analysis: Analysis,
    combinations: Sequence[Combination],
    before: Sequence[CrackedResponse | None],
    rule: str | None,
    band: str,
) -> list[CrackedResponse]:
    """One stage of all combinations, from the ends of the stage before."""
    pairs = list(zip(combinations, before, strict=True))
    found = [cracked_stage(analysis, c, b, rule, (), band) for c, b in pairs]
    if analysis.member.cracks == "by combination":
        return found
    makers = [k for k, c in enumerate(combinations) if c.purpose == "deflection"]
    held: Stretches = ()
    for _ in range(MOST_ROUNDS):
        close = 1e-9 * analysis.member.length
        kept = [pair for k in makers if (r := before[k]) is not None for pair in r.stretches]
        union = joined([pair for k in makers for pair in found[k].own] + kept + list(held), close)
        if _grown(held, union) <= SAME * analysis.member.length:
            return found
        held = union
        found = [
            r if _covers(r.own, held, close) else cracked_stage(analysis, c, b, rule, held, band)
            for r, (c, b) in zip(found, pairs, strict=True)
        ]
    raise CannotCompute(f"what combinations crack keeps growing after {MOST_ROUNDS} rounds")


def _grown(old: Stretches, new: Stretches) -> float:
    return sum(b - a for a, b in new) - sum(b - a for a, b in old)


def _covers(own: Stretches, held: Stretches, close: float) -> bool:
    """Whether a combination cracks all that is held by itself."""
    return all(any(a <= x + close and b >= y - close for a, b in own) for x, y in held)
