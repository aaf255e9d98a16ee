"""Loads: do they act on the member, in ways that have a meaning."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import pairwise

from fishbelly.member.checking_supports import level_problems
from fishbelly.member.draft import Draft, Path, Problem, one_of, stretch, within
from fishbelly.member.loads import (
    Axial,
    Couple,
    Distributed,
    Load,
    Point,
    Prestress,
    SelfWeight,
    Shrinkage,
    Temperature,
)

DIRECTIONS = ("down", "up", "across")
PER = ("plan", "slope")


def load_problems(draft: Draft) -> Iterator[Problem]:
    """Find problems of loads."""
    for i, load in enumerate(draft.loads):
        if load is None:
            continue
        path: Path = ("load", i)
        if isinstance(load, Distributed | Point):
            yield from _transverse(draft, load, path)
        if isinstance(load, Point | Couple | Axial):
            yield from within(draft, load.at, (*path, "at"))
        if isinstance(load, Axial):
            yield from level_problems(load.level, (*path, "level"))
        if isinstance(load, Temperature | Shrinkage):
            yield from stretch(draft, load.start, load.end, path)
        yield from _parts(draft, load, path)
        if isinstance(load, Prestress) and (load.force is None) == (load.strain is None):
            what = "neither" if load.force is None else "both"
            yield Problem((*path, "force"), "either `force` or `strain`", what)


def _transverse(draft: Draft, load: Distributed | Point, path: Path) -> Iterator[Problem]:
    yield from one_of(load.direction, DIRECTIONS, (*path, "direction"))
    if load.per is not None:
        yield from one_of(load.per, PER, (*path, "per"))
        if load.direction == "across":
            yield Problem((*path, "per"), "", "a load across the member has no `per`: per is for vertical loads")
    if isinstance(load, Point):
        return
    places = [x for x, _ in load.stations]
    if len(places) < 2:
        yield Problem((*path, "stations"), "at least two stations", f"{len(places)}")
        return
    if any(b < a for a, b in pairwise(places)):
        yield Problem((*path, "stations"), "stations in order of x", "one that goes back")
    elif places[-1] - places[0] <= draft.slack:
        yield Problem((*path, "to"), f"a place beyond the start at {places[0]:.6g} m", f"{places[-1]:.6g} m")
    for key, x in (("from", places[0]), ("to", places[-1])):
        yield from within(draft, x, (*path, key))


def _parts(draft: Draft, load: Load, path: Path) -> Iterator[Problem]:
    """Find parts that cannot carry what the load gives them."""
    names: tuple[str, ...] = ()
    key = "part"
    if isinstance(load, SelfWeight | Temperature):
        names, key = tuple(load.parts or ()), "parts"
        if load.parts is not None and not names:
            yield Problem((*path, key), "at least one part", "")
    elif isinstance(load, Shrinkage | Prestress):
        names = (load.part,)
    for name in names:
        part = draft.find_part(name)
        if part is None:
            continue
        if part.cuts:
            yield Problem((*path, key), "a part that adds material", f'"{name}", a cut')
        elif isinstance(load, Shrinkage) and (load.end <= part.start or load.start >= part.end):
            extent = f"{part.start:.6g} m to {part.end:.6g} m"
            found = f"{load.start:.6g} m to {load.end:.6g} m"
            yield Problem((*path, "from"), f'a stretch on "{name}", {extent}', found)
