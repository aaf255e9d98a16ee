"""Joints: is there something to be joined to, and can the fasteners be what they are said to be."""

from __future__ import annotations

from collections.abc import Iterator

from fishbelly.member.draft import Draft, Path, Problem
from fishbelly.member.fixings import Joined


def joint_problems(draft: Draft) -> Iterator[Problem]:
    """Find problems of the joints of parts."""
    for i, part in enumerate(draft.parts):
        if part is None or part.joined is None:
            continue
        path: Path = ("part", i, "joined")
        if part.cuts:
            yield Problem(path, "", "a part that is cut away is joined to nothing")
        elif not part.place.host:
            yield Problem(
                path,
                "a part placed against another by under, over, left_of, right_of or centred_on",
                "the first part" if i == 0 else "one placed by position",
            )
        yield from _numbers(part.joined, path)


def _numbers(joined: Joined, path: Path) -> Iterator[Problem]:
    for key in ("stiffness", "per_length", "pitch", "capacity", "weld"):
        value = getattr(joined, key)
        if value is not None and value <= 0.0:
            yield Problem((*path, key), "a value above 0", f"{value:g}")
    if joined.rows < 1:
        yield Problem((*path, "rows"), "at least 1", f"{joined.rows}")
    if joined.pitch is None:
        for key in ("stiffness", "capacity"):
            if getattr(joined, key) is not None:
                yield Problem((*path, key), "", f"`{key}` needs the `pitch` of the fasteners")
    if joined.stiffness is not None and joined.per_length is not None:
        yield Problem((*path, "per_length"), "only one of `stiffness` and `per_length`", "also `stiffness`")
    if joined.apart and (joined.stiffness is not None or joined.per_length is not None or joined.pitch is not None):
        yield Problem(path, "", "parts that are apart have no fasteners")
