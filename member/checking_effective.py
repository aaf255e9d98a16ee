"""Effective widths: is the rule known, and is the part one that it can be used for."""

from __future__ import annotations

from collections.abc import Iterator

from fishbelly.member.draft import Draft, Path, Problem
from fishbelly.member.effective_rules import RULES


def effective_problems(draft: Draft) -> Iterator[Problem]:
    """Find problems of the effective widths of parts."""
    for i, part in enumerate(draft.parts):
        if part is None or part.effective is None:
            continue
        path: Path = ("part", i, "effective")
        if part.effective.rule not in RULES:
            known = ", ".join(f'"{name}"' for name in RULES)
            yield Problem((*path, "rule"), f"one of {known}", f'"{part.effective.rule}"', tuple(RULES))
        for key in ("web_spacing", "edge"):
            value = getattr(part.effective, key)
            if value is not None and value <= 0.0:
                yield Problem((*path, key), "a length above 0 m", f"{value:g} m")
        if part.cuts:
            yield Problem(path, "", "a part that is cut away has no effective width")
        elif part.shape.kind != "rectangle":
            yield Problem(path, "a rectangle, whose width is a slab's", f'"{part.shape.kind}"')
        elif part.turn or part.pair:
            yield Problem(path, "a rectangle as it lies", "one that is turned" if part.turn else "a pair")
        elif draft.supports and not any(s is None or s.down > 0.0 for s in draft.supports):
            yield Problem(path, "", "an effective width needs spans, and no support holds the member up")
