"""Which parts share the shear angle: those that fasteners join side by side share the deflection alone.

Parts held rigidly, or stacked and fastened, are one cluster. A part that fasteners join beside another, or that slips
on it, begins a cluster of its own, and what stands rigidly on it belongs to that one.
"""

from __future__ import annotations

from fishbelly.member.description import Member, Part

BESIDE = ("left_of", "right_of", "centred_on")
"""Relations in which fasteners pass a vertical joint: force across it goes by the fasteners, not by contact."""


def begins_cluster(part: Part) -> bool:
    """Whether a part is joined so that it has a shear angle of its own."""
    return part.joined is not None and (part.joined.soft or part.place.relation in BESIDE)


def clusters(member: Member) -> tuple[int, ...]:
    """Number the clusters of parts that share the shear angle.

    Parameters
    ----------
    member : Member
        The description.

    Returns
    -------
    tuple of int
        Cluster of each part, in the member's order, counted from 0 as they appear. Parts placed by `position` stand
        in no joint, so they belong to the first one; a part that is cut away has that of the first part it cuts.
    """
    found: dict[str, int] = {}
    count = 1
    for part in member.parts:
        if begins_cluster(part):
            found[part.name] = count
            count += 1
        else:
            found[part.name] = found.get(part.cuts[0] if part.cuts else part.place.host, 0)
    return tuple(found[p.name] for p in member.parts)
