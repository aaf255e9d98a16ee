"""Which limits and strengths a combination is held against, at which stage's end, and in which spans."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from functools import partial

from fishbelly.member.analysis import Analysis, Combined
from fishbelly.member.checks import Check, Fields, applies, check_limit, check_strengths
from fishbelly.member.description import Limit
from fishbelly.member.pieces import Pieces
from fishbelly.member.spans import Span, spans
from fishbelly.member.stage_results import since
from fishbelly.member.stage_view import stage_number
from fishbelly.member.stresses import PartStress

Since = Callable[[int, int | None], Pieces]
"""Gives fields at the end of a stage, or of what happens from the start of another on."""


def checks_of(
    analysis: Analysis,
    combined: Combined,
    p: Pieces,
    stresses: Sequence[PartStress],
    since_stage: Since | None = None,
) -> list[Check]:
    """Limits and strengths of a combination.

    Parameters
    ----------
    analysis, combined, p : Analysis, Combined, Pieces
        The combination and its fields.
    stresses : sequence of PartStress
        Extreme stresses of every part.
    since_stage : callable, optional
        Gives fields of other stages; default those of a member whose results add.
    """
    between = since_stage or partial(since, analysis, combined)
    fields = Fields(p.deflection, p.rotation[0:2], spans_at(analysis, combined))
    found = []
    for limit in analysis.member.limits:
        if applies(limit, combined.combination) and not _later(analysis, combined, limit):
            check = check_limit(analysis, limit, _fields_of(analysis, combined, limit, fields, between))
            if check is not None:
                found.append(check)
    strong = any(c.purpose == "strength" for c in analysis.member.combinations)
    if not strong or combined.combination.purpose == "strength":
        found += check_strengths(analysis, stresses)
    return found


def _later(analysis: Analysis, combined: Combined, limit: Limit) -> bool:
    """Whether a limit looks at a stage after the one at whose end results are asked for."""
    named = [stage_number(analysis.member, s) for s in (limit.stage, limit.after) if s is not None]
    return combined.upto is not None and max(named, default=0) > combined.upto


def spans_at(analysis: Analysis, combined: Combined, stage: int | None = None) -> tuple[Span, ...]:
    """Spans between the supports at work at the end of a stage."""
    last = len(analysis.views) - 1 if combined.upto is None else combined.upto
    view = analysis.views[last if stage is None else stage]
    return spans(analysis.member, combined.lifted | view.gone)


def _fields_of(analysis: Analysis, combined: Combined, limit: Limit, fields: Fields, between: Since) -> Fields:
    """Fields that a limit looks at: at the end of its stage, or what happens after another has begun."""
    if limit.stage is None and limit.after is None:
        return fields
    last = combined.upto if combined.upto is not None else len(analysis.views) - 1
    at = last if limit.stage is None else stage_number(analysis.member, limit.stage)
    after = None if limit.after is None else stage_number(analysis.member, limit.after)
    p = between(at, after)
    return Fields(p.deflection, p.rotation[0:2], spans_at(analysis, combined, at))
