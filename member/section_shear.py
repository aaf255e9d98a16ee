"""Shear and torsion of the cross-section at one place."""

from __future__ import annotations

from typing import Any

import numpy as np

from fishbelly.member.clusters import clusters
from fishbelly.member.description import Member
from fishbelly.member.moduli import Moduli
from fishbelly.member.profile import Group
from fishbelly.sections.flexure import Flexure, flexure

Data = dict[str, Any]


def section_flexure(member: Member, group: Group, moduli: Moduli) -> Flexure:
    """Shear flexibility and shear centre of the sections of a group, every material with a shear modulus."""
    number = clusters(member)
    return flexure(
        group.composition,
        group.modulus(moduli.E),
        group.modulus(moduli.G),
        [number[i] for i in group.placed.index],
        share_angle=group.over_opening,
    )


def shear_results(found: Flexure) -> Data:
    """What `section` tells of shear: stiffnesses, the mixed flexibility, the shear centre, the error's estimate."""
    return {
        "GA_y": float(found.GA_y[0]),
        "GA_z": float(found.GA_z[0]),
        "F_yz": float(found.F_yz[0]) + 0.0,
        "shear_centre": {"y": float(found.y_s[0]) + 0.0, "z": float(found.z_s[0]) + 0.0},
        "pieces": int(found.pieces[0]),
        "error": float(np.max(found.error())),
    }
