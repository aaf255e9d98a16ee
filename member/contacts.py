"""What each part is fixed to: the one it is placed against, or the one it touches."""

from __future__ import annotations

from fishbelly.member.profile import Profile
from fishbelly.sections.composition import Composition
from fishbelly.sections.placing import Bounds
from fishbelly.sections.touching import touching_groups

_NEAR = 1e-6
"""Parts closer than this share of the section's size touch."""


def contacts(profile: Profile) -> dict[int, int]:
    """Find what each part that adds material is fixed to.

    Parameters
    ----------
    profile : Profile
        The sampled member.

    Returns
    -------
    dict of int to int
        Number of the other part, by number of the part. A part placed against another is fixed to that one; one
        placed by `position`, or the first, to the first part before it that it touches, or where it ends inside the
        member to the first one after it. Others are not there.
    """
    member = profile.member
    number = {p.name: i for i, p in enumerate(member.parts)}
    there = sorted({i for g in profile.groups for i in g.placed.index})
    found = {}
    for i in there:
        part = member.parts[i]
        if part.place.host:
            found[i] = number[part.place.host]
            continue
        inside = part.start > 1e-9 * member.length or part.end < (1.0 - 1e-9) * member.length
        for j in [k for k in there if k < i] + ([k for k in there if k > i] if inside else []):
            if _touch(profile, i, j):
                found[i] = j
                break
    return found


def _touch(profile: Profile, i: int, j: int) -> bool:
    """Whether two parts touch or overlap at the first sampled place of any stretch in which both are."""
    for g in profile.groups:
        if i in g.placed.index and j in g.placed.index:
            a, b = (g.placed.index.index(k) for k in (i, j))
            if _near(g.composition, a, b) and len(touching_groups([g.composition.outlines[k] for k in (a, b)], 0)) == 1:
                return True
    return False


def _near(section: Composition, a: int, b: int) -> bool:
    """Whether the boxes of two parts meet at the first station of a section."""
    p, q = section.boxes[a], section.boxes[b]
    size = max(_size(p), _size(q))
    return bool(
        max(p.left[0], q.left[0]) - min(p.right[0], q.right[0]) <= _NEAR * size
        and max(p.bottom[0], q.bottom[0]) - min(p.top[0], q.top[0]) <= _NEAR * size
    )


def _size(box: Bounds) -> float:
    return float(box.right[0] - box.left[0] + box.top[0] - box.bottom[0])
