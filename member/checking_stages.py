"""Stages: does every case arrive once, is everything there when it is leaned on or loaded."""

from __future__ import annotations

from collections.abc import Iterator

from fishbelly.member.description import Part, Support
from fishbelly.member.draft import Draft, Path, Problem
from fishbelly.member.loads import Prestress, Shrinkage, Temperature


def stage_problems(draft: Draft) -> Iterator[Problem]:
    """Find problems of stages and of what names them."""
    if any(s is None for s in draft.stages):
        return
    names = [s.name for s in draft.stages if s is not None]
    number = {name: k for k, name in enumerate(names)}
    yield from _orders(draft, number)
    if not names:
        return
    yield from _cases(draft)
    yield from _leaning(draft, number)
    yield from _loaded(draft, number)
    yield from _moduli(draft)


def _orders(draft: Draft, number: dict[str, int]) -> Iterator[Problem]:
    """`until` after `stage`; `after` before the stage at whose end a limit looks."""
    for kind, things in (("part", draft.parts), ("support", draft.supports), ("hinge", draft.hinges)):
        for i, thing in enumerate(things):
            if thing is None:
                continue
            first = 0 if thing.stage is None else number.get(thing.stage)
            last = None if thing.until is None else number.get(thing.until)
            if first is not None and last is not None and last <= first:
                since = f'"{thing.stage}"' if thing.stage is not None else "the first"
                yield Problem((kind, i, "until"), f"a stage after {since}, in which it begins", f'"{thing.until}"')
    for i, limit in enumerate(draft.limits):
        if limit is None or limit.after not in number or limit.stage not in number:
            continue
        if number[limit.stage] < number[limit.after]:
            yield Problem(("limit", i, "after"), f'a stage not later than "{limit.stage}"', f'"{limit.after}"')


def _cases(draft: Draft) -> Iterator[Problem]:
    """Every case belongs to exactly one stage."""
    home: dict[str, str] = {}
    for i, stage in enumerate(draft.stages):
        assert stage is not None
        for k, case in enumerate(stage.cases):
            if case in home:
                yield Problem(
                    ("stage", i, "cases", k), "a case that no other stage has", f'"{case}", which "{home[case]}" has'
                )
            home.setdefault(case, stage.name)
    for kind, things in (("load", draft.loads), ("support", draft.supports)):
        for i, thing in enumerate(things):
            if thing is None or (kind == "support" and not getattr(thing, "sinks", 0.0)):
                continue
            if thing.case not in home:
                home[thing.case] = ""
                yield Problem(
                    (kind, i, "case"), "a case that a stage has under `cases`", f'"{thing.case}", in no stage'
                )


def _leaning(draft: Draft, number: dict[str, int]) -> Iterator[Problem]:
    """A part may lean on one that comes later, not on one that has gone."""
    for i, part in enumerate(draft.parts):
        if part is None or not part.place.host:
            continue
        host = draft.find_part(part.place.host)
        if host is None or host.until is None or host.until not in number:
            continue
        last = number.get(part.until, len(number)) if part.until is not None else len(number)
        if last > number[host.until]:
            path: Path = ("part", i, part.place.relation)
            yield Problem(path, "a part that stays as long as this one", f'"{host.name}", which goes in "{host.until}"')


def _there(part: Part | Support, stage: int, number: dict[str, int]) -> bool:
    first = 0 if part.stage is None else number.get(part.stage, 0)
    last = len(number) if part.until is None else number.get(part.until, len(number))
    return first <= stage < last


def _loaded(draft: Draft, number: dict[str, int]) -> Iterator[Problem]:
    """Free strain needs its part, and settlement its support, in the stage in which it arrives."""
    home = {case: s.name for s in draft.stages if s is not None for case in s.cases}
    for i, load in enumerate(draft.loads):
        if load is None or load.case not in home:
            continue
        stage = number[home[load.case]]
        names: tuple[str, ...] = ()
        key = "part"
        if isinstance(load, Shrinkage | Prestress):
            names = (load.part,)
        elif isinstance(load, Temperature) and load.parts is not None:
            names, key = tuple(load.parts), "parts"
        for name in names:
            part = draft.find_part(name)
            if part is not None and not _there(part, stage, number):
                found = f'"{name}", not there in stage "{home[load.case]}"'
                yield Problem(("load", i, key), "a part that is there when it arrives", found)
    for i, support in enumerate(draft.supports):
        if support is None or not support.sinks or support.case not in home:
            continue
        if not _there(support, number[home[support.case]], number):
            found = f'"{support.name}", not there in stage "{home[support.case]}"'
            yield Problem(("support", i, "sinks"), "a support that is there when it settles", found)


def _moduli(draft: Draft) -> Iterator[Problem]:
    """Moduli in a stage are above zero; a long-term stage needs creep factors."""
    for i, stage in enumerate(draft.stages):
        assert stage is not None
        for name, value in {**stage.moduli, **stage.factors}.items():
            if value <= 0.0:
                yield Problem(("stage", i, "moduli", name), "a modulus or a factor above 0", f"{value:g}")
        for name, phi in stage.creep.items():
            if phi < 0.0:
                yield Problem(("stage", i, "creep", name), "a creep factor of 0 or more", f"{phi:g}")
        if not 0.0 <= stage.ageing <= 1.0:
            yield Problem(("stage", i, "ageing"), "an ageing coefficient from 0 to 1", f"{stage.ageing:g}")


def long_term_needs(draft: Draft) -> Iterator[tuple[Part, str, str]]:
    """Creep factors that long-term stages need: of every part that is there."""
    if any(s is None for s in draft.stages):
        return
    number = {s.name: k for k, s in enumerate(draft.stages) if s is not None}
    for k, stage in enumerate(draft.stages):
        if stage is None or not stage.long_term:
            continue
        why = f'a creep factor, because stage "{stage.name}" is long-term'
        loads = [load for load in draft.loads if load is not None and load.case in stage.cases]
        for _, part in draft.adding():
            own = [isinstance(x, Shrinkage) and x.part == part.name and x.creep is not None for x in loads]
            if _there(part, k, number) and not (own and all(own)):
                yield part, "creep", why
