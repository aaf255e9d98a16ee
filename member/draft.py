"""What a check looks at: a member, or as much of one as could be read, and the faults it may find."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field, fields
from typing import TYPE_CHECKING, Any

import numpy as np

from fishbelly.member.description import (
    Combination,
    Haunch,
    Hinge,
    Limit,
    Material,
    Notch,
    Opening,
    Part,
    Stage,
    Station,
    Support,
)
from fishbelly.member.laws import Law
from fishbelly.member.loads import Load, Prestress, SelfWeight, Shrinkage, Temperature

if TYPE_CHECKING:
    from fishbelly.member.description import Member

Path = tuple[str | int, ...]

KEYS = {
    "start": "from",
    "end": "to",
    "yield_strength": "yield",
    "purpose": "for",
    "spans": "span",
    "down": "vertical",
    "only_up": "only",
    "cuts": "of",
}
"""Fields of a description whose key in a job, and in paths of problems, is another word."""


@dataclass(frozen=True)
class Problem:
    """One thing wrong with a description.

    Parameters
    ----------
    path : tuple of str and int
        Kind of thing, its number in the member's tuple (name for a material), key; ``("part", 2, "to")``.
    expected, found : str
        What should stand there, and what does; `found` empty where nothing does, `expected` empty where
        `found` says it all.
    among : tuple of str
        Names to choose from, where an unknown name was found.
    """

    path: Path
    expected: str
    found: str
    among: tuple[str, ...] = ()

    def __str__(self) -> str:
        first, *rest = self.path or ("member",)
        place = str(first) + "".join(f"[{p}]" if isinstance(p, int) else f".{p}" for p in rest)
        if not self.expected:
            return f"{place}: {self.found}"
        got = f"got {self.found}" if self.found else "but it is missing"
        return f"{place}: expected {self.expected}, {got}"


@dataclass(frozen=True)
class Reference:
    """A place in a description that names something: its path, the kind of thing and the name."""

    path: Path
    kind: str
    name: str


@dataclass(frozen=True, eq=False)
class Draft:
    """A member as far as it is known: None stands for what could not be read.

    Parameters
    ----------
    length : float or None
        Length [m].
    parts … stations : sequence
        As in `Member`.
    names : mapping of str to tuple of str
        Names that are given, by kind: "part", "material", "station", "combination", "case".
    references : sequence of Reference
        Places that name something.
    rises, shear, camber, tension_stiffening, cracks
        As in `Member`.
    """

    length: float | None
    parts: Sequence[Part | None] = ()
    materials: Sequence[Material] = ()
    notches: Sequence[Notch | None] = ()
    haunches: Sequence[Haunch | None] = ()
    openings: Sequence[Opening | None] = ()
    supports: Sequence[Support | None] = ()
    hinges: Sequence[Hinge | None] = ()
    loads: Sequence[Load | None] = ()
    stages: Sequence[Stage | None] = ()
    combinations: Sequence[Combination | None] = ()
    limits: Sequence[Limit | None] = ()
    stations: Sequence[Station | None] = ()
    names: Mapping[str, Sequence[str]] = field(default_factory=dict)
    references: Sequence[Reference] = ()
    rises: float = 0.0
    shear: bool = True
    camber: float | Law | None = None
    tension_stiffening: str | None = None
    cracks: str = "history"

    @property
    def slack(self) -> float:
        """Distance within which two places along the member are one [m]."""
        return 1e-9 * (self.length or 0.0)

    @property
    def listed(self) -> dict[str, Sequence[Any]]:
        """Everything that has a number, by kind."""
        return {
            "part": self.parts,
            "notch": self.notches,
            "haunch": self.haunches,
            "opening": self.openings,
            "support": self.supports,
            "hinge": self.hinges,
            "load": self.loads,
            "stage": self.stages,
            "combination": self.combinations,
            "limit": self.limits,
            "station": self.stations,
        }

    def adding(self) -> Iterator[tuple[int, Part]]:
        """Parts that add material, with their numbers."""
        return ((i, p) for i, p in enumerate(self.parts) if p is not None and not p.cuts)

    def find_part(self, name: str) -> Part | None:
        """Return the part of a name, if it is known."""
        return next((p for p in self.parts if p is not None and p.name == name), None)

    def find_material(self, name: str | None) -> Material | None:
        """Return the material of a name, if it is known."""
        return next((m for m in self.materials if m.name == name), None)


def draft_of(member: Member) -> Draft:
    """Return the draft of a member: everything is known."""
    names = {
        "part": tuple(p.name for p in member.parts),
        "material": tuple(m.name for m in member.materials),
        "station": tuple(s.name for s in member.stations),
        "combination": tuple(c.name for c in member.combinations) or ("all",),
        "stage": tuple(s.name for s in member.stages),
        "case": (*member.cases, *(s.case for s in member.supports)),
    }
    same = {f.name: getattr(member, f.name) for f in fields(Draft) if f.name not in ("names", "references")}
    return Draft(**same, names=names, references=tuple(_references(member)))


def _references(member: Member) -> Iterator[Reference]:
    for i, p in enumerate(member.parts):
        if p.material is not None:
            yield Reference(("part", i, "material"), "material", p.material)
        yield from (Reference(("part", i, "of"), "part", name) for name in p.cuts)
        if p.place.host:
            yield Reference(("part", i, p.place.relation), "part", p.place.host)
    for i, notch in enumerate(member.notches):
        yield Reference(("notch", i, "of"), "part", notch.of)
    for i, haunch in enumerate(member.haunches):
        yield Reference(("haunch", i, "of"), "part", haunch.of)
    for i, o in enumerate(member.openings):
        yield from (Reference(("opening", i, "of"), "part", name) for name in o.of)
    for i, load in enumerate(member.loads):
        if isinstance(load, Shrinkage | Prestress):
            yield Reference(("load", i, "part"), "part", load.part)
        elif isinstance(load, SelfWeight | Temperature):
            yield from (Reference(("load", i, "parts"), "part", name) for name in load.parts or ())
    for i, c in enumerate(member.combinations):
        yield from (Reference(("combination", i, "factors", name), "case", name) for name in c.factors)
        yield from (Reference(("combination", i, "sustained", name), "case", name) for name in c.sustained)
    for i, limit in enumerate(member.limits):
        if limit.at is not None:
            yield Reference(("limit", i, "at"), "station", limit.at)
        if limit.combination is not None:
            yield Reference(("limit", i, "combination"), "combination", limit.combination)
    yield from _stage_references(member)


def _stage_references(member: Member) -> Iterator[Reference]:
    """Places that name a stage, and what stages name."""
    for kind, things in (("part", member.parts), ("support", member.supports), ("hinge", member.hinges)):
        for i, thing in enumerate(things):
            for key in ("stage", "until"):
                if getattr(thing, key) is not None:
                    yield Reference((kind, i, key), "stage", getattr(thing, key))
    for i, limit in enumerate(member.limits):
        for key in ("after", "stage"):
            if getattr(limit, key) is not None:
                yield Reference(("limit", i, key), "stage", getattr(limit, key))
    for i, stage in enumerate(member.stages):
        yield from (Reference(("stage", i, "cases", k), "case", name) for k, name in enumerate(stage.cases))
        for key, names in (("moduli", {**stage.moduli, **stage.factors}), ("creep", stage.creep)):
            yield from (Reference(("stage", i, key, name), "material", name) for name in names)


def unknown_names(draft: Draft) -> Iterator[Problem]:
    """Find places that name something that is not there."""
    words = {"case": "a load case", "station": "a station", "combination": "a combination"}
    for ref in draft.references:
        known = tuple(draft.names.get(ref.kind, ()))
        if ref.name not in known:
            what = words.get(ref.kind, f"a {ref.kind}")
            yield Problem(ref.path, f"the name of {what}", f'"{ref.name}"', known)


def repeated_names(draft: Draft) -> Iterator[Problem]:
    """Find names that two things of one kind share."""
    for kind in ("part", "support", "hinge", "station", "stage", "combination", "limit"):
        seen: set[str] = set()
        for i, thing in enumerate(draft.listed[kind]):
            if thing is None:
                continue
            if thing.name in seen and thing.name:
                yield Problem((kind, i, "name"), "a name that no other has", f'"{thing.name}" again')
            seen.add(thing.name)
    named = [m.name for m in draft.materials]
    for name in sorted({n for n in named if named.count(n) > 1}):
        yield Problem(("material", name), "one material of a name", f"{named.count(name)}")


def infinite_numbers(draft: Draft) -> Iterator[Problem]:
    """Find numbers that are not finite, where they have to be."""
    things: list[tuple[Path, Any]] = [((kind, i), t) for kind, many in draft.listed.items() for i, t in enumerate(many)]
    things += [(("material", m.name), m) for m in draft.materials]
    for path, thing in things:
        if thing is not None:
            rigid = ("down", "rotation", "along", "across", "rotation_across")
            skip = rigid if isinstance(thing, Support) else ()
            yield from _infinite(thing, path, skip)
    for key in ("length", "rises", "camber"):
        value = getattr(draft, key)
        if value is not None:
            yield from _infinite(value, (key,), ())


def _infinite(value: Any, path: Path, skip: tuple[str, ...]) -> Iterator[Problem]:
    if isinstance(value, Law):
        if not (np.isfinite(value.coefficients).all() and np.isfinite(value.knots).all()):
            yield Problem(path, "finite numbers", "a law with one that is not")
    elif isinstance(value, float):
        if not math.isfinite(value):
            yield Problem(path, "a finite number", f"{value}")
    elif isinstance(value, Mapping):
        for key, item in value.items():
            yield from _infinite(item, (*path, key), ())
    elif isinstance(value, tuple):
        for k, item in enumerate(value):
            yield from _infinite(item, (*path, k), ())
    elif hasattr(value, "__dataclass_fields__"):
        for f in fields(value):
            key = KEYS.get(f.name, f.name)
            deeper = path if f.name in ("shape", "dimensions", "place") else (*path, key)
            if f.name not in skip:
                yield from _infinite(getattr(value, f.name), deeper, ())


def within(draft: Draft, x: float, path: Path, what: str = "a place") -> Iterator[Problem]:
    """Find a place that is off the member."""
    if draft.length is not None and not -draft.slack <= x <= draft.length + draft.slack:
        yield Problem(path, f"{what} within the member, 0 to {draft.length:.6g} m", f"{x:.6g} m")


def stretch(draft: Draft, start: float, end: float, path: Path) -> Iterator[Problem]:
    """Find a stretch that is off the member or runs backwards."""
    yield from within(draft, start, (*path, "from"))
    yield from within(draft, end, (*path, "to"))
    if end - start <= draft.slack:
        yield Problem((*path, "to"), f"a place beyond the start at {start:.6g} m", f"{end:.6g} m")


def one_of(value: object, choices: Sequence[str], path: Path) -> Iterator[Problem]:
    """Find a word that is none of the choices."""
    if value not in choices:
        listed = ", ".join(f'"{c}"' for c in choices)
        yield Problem(path, f"one of {listed}", f'"{value}"', tuple(choices))
