"""Notes of a member with stages: what no stage uses, what creep in one step means, what one stage would have given."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from typing import Any

from fishbelly.member.analysis import Analysis
from fishbelly.member.description import Member
from fishbelly.member.extremes import largest
from fishbelly.member.faults import CannotCompute
from fishbelly.member.note import Note
from fishbelly.member.without import left_of_loads, of_cases

Data = dict[str, Any]

_SAME = 1e-6
"""Deflections that differ by less than this share are the same."""


def idle_parts(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    """Parts that are there only while nothing happens."""
    member, views = analysis.member, analysis.views
    if not member.stages:
        return
    busy = [
        v.index
        for v in views
        if v.cases or any(member.stages[v.index].creep.values()) or (v.index and v.gone - views[v.index - 1].gone)
    ]
    for i, part in enumerate(member.parts):
        mine = [v for v in views if i in v.parts]
        if not part.cuts and not any(v.index in busy for v in mine):
            names = ", ".join(v.name for v in mine)
            yield Note(f"no stage uses {part.name}: it is there in {names} alone, where nothing arrives")


def creep_in_one_step(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    """Creep of a stage runs off in one step: several with its shares give something else."""
    stages = [s for s in analysis.member.stages if any(s.creep.values())]
    for stage in stages:
        yield Note(
            f"stage {stage.name}: its creep runs off in one step, ageing coefficient {stage.ageing:g}; "
            "several stages with shares of it give another result"
        )


def one_stage(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    """What everything in one stage would have given: all loads at once on the section of the last stage."""
    member = analysis.member
    if len(member.stages) < 2:
        return
    view = analysis.views[-1]
    profile = analysis.profile
    one = replace(profile, geometry=replace(profile.geometry, member=_at_once(member, view.parts, view.gone)))
    simple = Analysis(one)
    worst: tuple[float, float, float, str] | None = None
    for chosen, told in zip(one.member.combinations, combinations, strict=True):
        exact = told["deflection"]["down"]
        if exact is None:
            continue
        try:
            grid, total = simple, simple.combine(chosen).total
            if "cracked" in told:
                from fishbelly.member.cracked_results import chosen_response

                grid, total = chosen_response(simple, chosen)
            found = largest(grid.profile.panels, total.deflection[0]).value
        except CannotCompute:
            return
        gap = abs(found / exact["value"] - 1.0)
        if gap > _SAME and (worst is None or gap > worst[0] * (1.0 + _SAME)):
            worst = (gap, found, float(exact["value"]), chosen.name)
    if worst is not None:
        yield Note(
            f"everything in one stage, all loads at once on the section of {view.name}, would have given {{one}} in "
            f"{worst[3]}; found here {{exact}}",
            {"one": (worst[1], "deflection"), "exact": (worst[2], "deflection")},
        )


def _at_once(member: Member, parts: frozenset[int], gone: frozenset[str]) -> Member:
    """Describe a member without stages, as it is in the last one; parts that have gone stay numbered."""
    absent = {p.name for i, p in enumerate(member.parts) if i not in parts}
    loads = left_of_loads(member.loads, absent)
    supports = tuple(replace(s, stage=None, until=None) for s in member.supports if s.name not in gone)
    cases = {load.case for load in loads} | {s.case for s in supports if s.sinks}
    return replace(
        member,
        stages=(),
        limits=(),
        parts=tuple(replace(p, stage=None, until=None) for p in member.parts),
        supports=supports,
        combinations=tuple(of_cases(c, cases) for c in member.combinations),
        hinges=tuple(replace(h, stage=None, until=None) for h in member.hinges if h.until is None),
        loads=loads,
    )
