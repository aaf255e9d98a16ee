"""What comes and what goes when a stage begins, and what creeps in it, by name."""

from __future__ import annotations

from typing import Any

from fishbelly.member.analysis import Analysis
from fishbelly.member.description import Member
from fishbelly.member.stage_view import StageView

Data = dict[str, Any]


def changes(analysis: Analysis, view: StageView) -> Data:
    """Tell what comes, what goes and what creeps in a stage.

    Parameters
    ----------
    analysis : Analysis
        The member.
    view : StageView
        One of its stages.

    Returns
    -------
    dict
        ``comes`` and ``goes``, each with the names of ``parts``, ``supports`` and ``hinges``; in the first stage
        everything that is there comes. ``long_term``, and the ``creep`` that runs off, by material.
    """
    member = analysis.member
    before = analysis.views[view.index - 1] if view.index else None
    stage = view.stage
    there = _there(member, view)
    earlier: dict[str, tuple[str, ...]] = dict.fromkeys(there, ()) if before is None else _there(member, before)
    return {
        "comes": {kind: [n for n in names if n not in earlier[kind]] for kind, names in there.items()},
        "goes": {kind: [n for n in names if n not in there[kind]] for kind, names in earlier.items()},
        "long_term": stage is not None and stage.long_term,
        "creep": {} if stage is None else {name: phi for name, phi in stage.creep.items() if phi},
        "ageing": 1.0 if stage is None else stage.ageing,
    }


def _there(member: Member, view: StageView) -> dict[str, tuple[str, ...]]:
    """Names of parts, supports and hinges that work in a stage."""
    return {
        "parts": tuple(p.name for i, p in enumerate(member.parts) if i in view.parts),
        "supports": tuple(s.name for s in member.supports if s.name not in view.gone),
        "hinges": tuple(h.name or "hinge" for h in member.hinges if h.at in view.hinges),
    }
