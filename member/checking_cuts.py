"""Notches, haunches and openings: do they lie on their parts and leave something standing."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from fishbelly.member.checking_shapes import DIMENSIONS, outline_sizes
from fishbelly.member.description import Haunch, Notch, Opening, Part
from fishbelly.member.draft import Draft, Path, Problem, one_of, stretch, within
from fishbelly.member.openings import haunch_extra

SIDES = ("bottom", "top", "left", "right")


def cut_problems(draft: Draft) -> Iterator[Problem]:
    """Find problems of notches, haunches and openings."""
    for i, notch in enumerate(draft.notches):
        if notch is not None:
            yield from _notch(draft, notch, ("notch", i))
    for i, haunch in enumerate(draft.haunches):
        if haunch is not None:
            yield from _haunch(draft, haunch, ("haunch", i))
    for i, opening in enumerate(draft.openings):
        if opening is not None:
            yield from _opening(draft, opening, ("opening", i))


def _sound(part: Part) -> bool:
    """Whether the outline of a part can be drawn."""
    return part.shape.kind in DIMENSIONS and set(DIMENSIONS[part.shape.kind]) <= set(part.shape.dimensions)


def _no_cut(draft: Draft, name: str, path: Path) -> Iterator[Problem]:
    part = draft.find_part(name)
    if part is not None and part.cuts:
        yield Problem((*path, "of"), "a part that adds material", f'"{name}", a cut')


def _notch(draft: Draft, notch: Notch, path: Path) -> Iterator[Problem]:
    yield from one_of(notch.side, SIDES, (*path, "side"))
    yield from stretch(draft, notch.start, notch.end, path)
    yield from _no_cut(draft, notch.of, path)
    if notch.reach < 0.0:
        yield Problem((*path, "reach"), "a length of 0 m or more", f"{notch.reach:g} m")
    part = draft.find_part(notch.of)
    if part is None or notch.start >= notch.end:
        return
    start, end = max(notch.start, part.start), min(notch.end, part.end)
    if start >= end:
        found = f"{notch.start:.6g} m to {notch.end:.6g} m"
        yield Problem((*path, "from"), f'a stretch on "{part.name}", {part.start:.6g} m to {part.end:.6g} m', found)
    elif _sound(part) and notch.side in SIDES:
        yield from _notch_depth(draft, notch, part, path, start, end)


def _notch_depth(draft: Draft, notch: Notch, part: Part, path: Path, start: float, end: float) -> Iterator[Problem]:
    width, depth, others, x = outline_sizes(part, start, end, {"notch": notch.depth})
    cut = others["notch"]
    upright = notch.side in ("bottom", "top")
    room = depth if upright else width
    if upright:
        for haunch in draft.haunches:
            if haunch is not None and haunch.of == part.name:
                room = room + haunch_extra(haunch, x, "right")
    lowest = int(np.argmin(cut))
    worst = int(np.argmin(room - cut))
    if cut[lowest] < 0.0 or not np.any(cut > 0.0):
        yield Problem((*path, "depth"), "a depth above 0 m", f"{cut[lowest]:.6g} m")
    elif cut[worst] >= room[worst] > 0.0:
        word = "depth" if upright else "width"
        yield Problem(
            (*path, "depth"),
            f'less than the {word} of "{part.name}" at x = {x[worst]:.6g} m, {room[worst]:.6g} m',
            f"{cut[worst]:.6g} m",
        )


def _haunch(draft: Draft, haunch: Haunch, path: Path) -> Iterator[Problem]:
    yield from one_of(haunch.side, ("bottom", "top"), (*path, "side"))
    yield from one_of(haunch.law, ("straight", "parabola"), (*path, "law"))
    yield from within(draft, haunch.at, (*path, "at"))
    if haunch.depth <= 0.0:
        yield Problem((*path, "depth"), "a depth above 0 m", f"{haunch.depth:g} m")
    if min(haunch.reach) < 0.0 or max(haunch.reach) <= 0.0:
        found = f"{haunch.reach[0]:g} m and {haunch.reach[1]:g} m"
        yield Problem((*path, "reach"), "lengths of 0 m or more, one of them above", found)
    part = draft.find_part(haunch.of)
    if part is None:
        return
    yield from _no_cut(draft, haunch.of, path)
    if "depth" not in part.shape.dimensions:
        yield Problem((*path, "of"), "a part with a depth", f'"{part.name}", a {part.shape.kind}')
    elif part.turn != 0.0:
        yield Problem((*path, "of"), "a part that is not turned", f'"{part.name}", turned')
    elif not part.start - draft.slack <= haunch.at <= part.end + draft.slack:
        extent = f"{part.start:.6g} m to {part.end:.6g} m"
        yield Problem((*path, "at"), f'a place on "{part.name}", {extent}', f"{haunch.at:.6g} m")


def _opening(draft: Draft, opening: Opening, path: Path) -> Iterator[Problem]:
    if opening.diameter is None:
        for key in ("length", "depth"):
            if getattr(opening, key) <= 0.0:
                yield Problem((*path, key), "a length above 0 m, or `diameter` instead", f"{getattr(opening, key):g} m")
        most = 0.5 * min(opening.length, opening.depth)
        if not 0.0 <= opening.radius <= most * (1.0 + 1e-9):
            yield Problem(
                (*path, "radius"),
                f"at most half its length and depth, {most:.6g} m",
                f"{opening.radius:.6g} m",
            )
    elif opening.diameter <= 0.0:
        yield Problem((*path, "diameter"), "a length above 0 m", f"{opening.diameter:g} m")
    half = 0.5 * (opening.length if opening.diameter is None else opening.diameter)
    if draft.length is not None and not (half - draft.slack <= opening.at <= draft.length - half + draft.slack):
        found = f"{opening.at - half:.6g} m to {opening.at + half:.6g} m"
        yield Problem((*path, "at"), f"an opening within the member, 0 to {draft.length:.6g} m", found)
    if not opening.of:
        yield Problem((*path, "of"), "the part or parts that it cuts", "")
    for name in opening.of:
        yield from _no_cut(draft, name, path)
