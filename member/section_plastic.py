"""Plastic bending of the cross-section at one place: told beside the stiffness, never used in a deflection."""

from __future__ import annotations

from typing import Any

import numpy as np

from fishbelly.member.description import Material, Member
from fishbelly.member.profile import Group
from fishbelly.sections.plastic import plastic

Data = dict[str, Any]


def plastic_bending(member: Member, group: Group) -> Data | None:
    """Plastic modulus and moment about the level axis of the first section of a group.

    Parameters
    ----------
    member : Member
        The description.
    group : Group
        Places with the same parts present.

    Returns
    -------
    dict or None
        ``W_pl`` [m3] where one material is there alone, ``M_pl`` [N m] where every material has a yield stress, and
        ``z`` [m], the level of the plastic neutral axis, which is kept level. None where neither can be said:
        several materials of which one has no yield stress, or one that cracks or carries no tension, or parts that
        slip on each other.

    Notes
    -----
    Every material yields in compression at the stress at which it yields in tension. Over a run-in, stresses grow
    with the share of E that works.
    """
    parts = [member.parts[i] for i in group.placed.index]
    materials = [member.material(p.material or "") for p in parts]
    names = [p.name for p in parts]
    slips = any(p.joined is not None and p.joined.soft and p.place.host in names for p in parts)
    if slips or any(_brittle(m) for m in materials):
        return None
    one = len({m.name for m in materials}) == 1
    yields = [m.yield_strength for m in materials if m.yield_strength is not None]
    if not one and len(yields) < len(materials):
        return None
    stress = [1.0] * len(parts) if one else yields
    found = plastic(group.composition, np.array(stress)[:, None] * group.placed.run_in)
    if not np.isfinite(found.moment[0]):
        return None
    value = float(found.moment[0])
    if not one:
        return {"z": float(found.z[0]), "W_pl": None, "M_pl": value}
    return {"z": float(found.z[0]), "W_pl": value, "M_pl": value * yields[0] if yields else None}


def _brittle(material: Material) -> bool:
    """Whether a material gives way in tension before it yields."""
    return material.no_tension or material.cracking is not None
