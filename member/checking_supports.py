"""Supports and hinges: do they lie on the member, and do they hold what they say."""

from __future__ import annotations

import math
from collections.abc import Iterator

from fishbelly.member.description import Support
from fishbelly.member.draft import KEYS, Draft, Path, Problem, one_of, within

LEVELS = ("centroid", "top", "bottom", "datum")


def support_problems(draft: Draft) -> Iterator[Problem]:
    """Find problems of supports and hinges."""
    for i, support in enumerate(draft.supports):
        if support is not None:
            yield from _support(draft, support, ("support", i))
            yield from _same_place(draft, i, support)
    places: list[float] = []
    for i, hinge in enumerate(draft.hinges):
        if hinge is None:
            continue
        yield from within(draft, hinge.at, ("hinge", i, "at"))
        if any(abs(hinge.at - at) <= draft.slack for at in places):
            yield Problem(("hinge", i, "at"), "a place where no other hinge is", f"{hinge.at:.6g} m")
        places.append(hinge.at)


def level_problems(level: str | float, path: Path) -> Iterator[Problem]:
    """Find a level that is neither a word nor a number."""
    if isinstance(level, str):
        yield from one_of(level, LEVELS, path)


def _support(draft: Draft, support: Support, path: Path) -> Iterator[Problem]:
    yield from within(draft, support.at, (*path, "at"))
    yield from level_problems(support.level, (*path, "level"))
    held = False
    for name in ("down", "rotation", "along", "across", "rotation_across"):
        stiffness = getattr(support, name)
        held |= stiffness != 0.0
        if math.isnan(stiffness) or stiffness < 0.0:
            yield Problem((*path, KEYS.get(name, name)), "a stiffness of 0 or more", f"{stiffness:g}")
    if not held:
        yield Problem(path, "", "it holds nothing")
    if support.sinks and not support.down > 0.0:
        yield Problem((*path, "sinks"), "", "a support that sinks has to hold down")
    if support.only_up and not support.down > 0.0:
        yield Problem((*path, "only"), "", 'only = "up" needs a support that holds down')


def _same_place(draft: Draft, i: int, support: Support) -> Iterator[Problem]:
    for other in draft.supports[:i]:
        if other is None or abs(other.at - support.at) > draft.slack:
            continue
        both = [k for k in ("down", "rotation", "along", "across") if getattr(other, k) and getattr(support, k)]
        if both:
            yield Problem(
                ("support", i, "at"),
                "a place where no other support holds the same way",
                f'{support.at:.6g} m, where "{other.name}" is',
            )
            return
