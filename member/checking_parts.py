"""Parts: do they lie within the member, and does each stand on something."""

from __future__ import annotations

from collections.abc import Iterator

from fishbelly.member.description import Part
from fishbelly.member.draft import Draft, Path, Problem, one_of, stretch

_SIDES = ("left", "middle", "right")
_LEVELS = ("top", "middle", "bottom")
FLUSH = {"under": _SIDES, "over": _SIDES, "left_of": _LEVELS, "right_of": _LEVELS, "centred_on": _LEVELS}
"""Which edges can be aligned, by relation."""

_CORNERS = tuple(f"{level} {side}" for level in ("top", "bottom") for side in ("left", "right"))
ANCHORS = ("middle", "top", "bottom", "left", "right", *_CORNERS)
"""Points of a bounding box that a position can fix."""


def part_problems(draft: Draft) -> Iterator[Problem]:
    """Find problems of extent, material, cuts and placing."""
    for i, part in enumerate(draft.parts):
        if part is None:
            continue
        path: Path = ("part", i)
        yield from stretch(draft, part.start, part.end, path)
        yield from _run_in(part, path)
        yield from _cuts(draft, part, path)
        yield from _placing(draft, i, part, path)


def _run_in(part: Part, path: Path) -> Iterator[Problem]:
    start, end = part.run_in
    if start < 0.0 or end < 0.0:
        yield Problem((*path, "run_in"), "lengths of 0 m or more", f"{start:g} m, {end:g} m")
    elif start + end > (part.end - part.start) * (1.0 + 1e-9) > 0.0:
        extent = part.end - part.start
        yield Problem(
            (*path, "run_in"),
            f"lengths that fit into the part's {extent:.6g} m",
            f"{start + end:.6g} m in all",
        )


def _cuts(draft: Draft, part: Part, path: Path) -> Iterator[Problem]:
    if part.material is None and not part.cuts:
        yield Problem((*path, "material"), "a material, or `cut` with the parts it cuts", "")
    if part.material is not None and part.cuts:
        yield Problem((*path, "material"), "", "a part that is cut away has no material")
    for name in part.cuts:
        target = draft.find_part(name)
        if name == part.name:
            yield Problem((*path, "of"), "another part", f'"{name}" itself')
        elif target is not None and target.cuts:
            yield Problem((*path, "of"), "a part that adds material", f'"{name}", a cut')


def _placing(draft: Draft, i: int, part: Part, path: Path) -> Iterator[Problem]:
    place = part.place
    if place.relation == "datum":
        if i > 0:
            yield Problem(path, "", "a part after the first needs a placing: under, over, left_of, right_of, "
                          "centred_on or position")  # fmt: skip
        yield from one_of(place.anchor or "top", _LEVELS, ("datum",))
        if part.pair:
            yield Problem((*path, "pair"), "", "a pair needs a placing: both copies would stand in one place")
    elif place.relation == "position":
        yield from one_of(place.anchor or "middle", ANCHORS, (*path, "anchor"))
        if place.position is None:
            yield Problem((*path, "position"), "a pair (y, z)", "")
    elif place.relation not in FLUSH:
        yield from one_of(place.relation, ("datum", "position", *FLUSH), path)
    else:
        yield from one_of(place.flush, FLUSH[place.relation], (*path, "flush"))
        yield from _host(draft, i, part, (*path, place.relation))


def _host(draft: Draft, i: int, part: Part, path: Path) -> Iterator[Problem]:
    name = part.place.host
    names = list(draft.names.get("part", ()))
    if name not in names:
        return
    earlier = names.index(name) < i
    if not earlier:
        cycle = _cycle(draft, part)
        if name == part.name:
            yield Problem(path, "an earlier part", f'"{name}" itself')
        elif cycle:
            chain = " on ".join(f'"{n}"' for n in cycle)
            yield Problem(path, "an earlier part", f"a circle: {chain}")
        else:
            yield Problem(path, "an earlier part", f'"{name}", which comes later')
        return
    host = draft.find_part(name)
    if host is None:
        return
    # what lies off the member is a fault of the part's own
    start, end = max(part.start, 0.0), part.end if draft.length is None else min(part.end, draft.length)
    gaps = []
    if host.start > start + draft.slack:
        gaps.append(f"{start:.6g} m to {min(host.start, end):.6g} m")
    if host.end < end - draft.slack:
        gaps.append(f"{max(host.end, start):.6g} m to {end:.6g} m")
    if gaps:
        stretches = " and ".join(gaps)
        yield Problem(path, f'a part present from {start:.6g} m to {end:.6g} m',
                      f'"{name}", absent from {stretches}')  # fmt: skip


def _cycle(draft: Draft, part: Part) -> list[str]:
    """Names along the circle in which parts lean on each other, or nothing."""
    chain = [part.name]
    at: Part | None = part
    while at is not None and at.place.host:
        chain.append(at.place.host)
        if at.place.host == part.name:
            return chain
        if chain.count(at.place.host) > 1:
            return []
        at = draft.find_part(at.place.host)
    return []
