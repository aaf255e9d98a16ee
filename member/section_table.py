"""Torsion and warping constants that a section table prints for the rolled shape at one place."""

from __future__ import annotations

from typing import Any

import numpy as np

from fishbelly.member.description import Member
from fishbelly.member.profile import Group
from fishbelly.sections.rolled_torsion import FORMULAS, table_torsion

Data = dict[str, Any]


def rolled_table(member: Member, group: Group) -> Data | None:
    """Table values of the section at the first place of a group, where it is one rolled or hollow shape alone.

    A shape is taken for a rolled one where it is a tube, or has rounded corners, dimensions that do not change along
    the member, no haunch and nothing cut from it.

    Returns
    -------
    dict or None
        ``part``, ``I_t`` [m4], ``I_w`` [m6] (None where the formula's source gives none) and ``formula``, whose
        formula it is. None where the section is anything else.
    """
    if len(group.placed.index) != 1 or group.placed.cuts:
        return None
    part = member.parts[group.placed.index[0]]
    laws, kind = part.shape.dimensions, part.shape.kind
    if kind not in FORMULAS or part.pair or any(h.of == part.name for h in member.haunches):
        return None
    if not all(law.is_constant for law in laws.values()):
        return None
    x = np.array([group.placed.x[0]])
    dimensions = {name: float(law(x)[0]) for name, law in laws.items()}
    if kind != "tube" and not dimensions.get("radius", 0.0) > 0.0:
        return None
    found = table_torsion(kind, dimensions)
    if found is None:
        return None
    return {"part": part.name, "I_t": found.I_t, "I_w": found.I_w, "formula": found.formula}
