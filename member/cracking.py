"""Which parts of a member never carry tension, and which crack: asked of every member, so it stands alone."""

from __future__ import annotations

from fishbelly.member.description import Member


def no_tension_parts(member: Member) -> frozenset[int]:
    """Numbers of the parts that never carry tension."""
    return frozenset(k for k, p in enumerate(member.parts) if p.material and member.material(p.material).no_tension)


def cracking_parts(member: Member) -> dict[int, float]:
    """Numbers of the parts that crack, with the tensile stress at which they do [Pa]."""
    return {
        k: stress
        for k, p in enumerate(member.parts)
        if p.material
        and member.material(p.material).cracks
        and not member.material(p.material).no_tension
        and (stress := member.material(p.material).cracking) is not None
    }


def may_crack(member: Member) -> bool:
    """Whether a member has parts that carry no tension or that crack."""
    return bool(no_tension_parts(member) or cracking_parts(member))
