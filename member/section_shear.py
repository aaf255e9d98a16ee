"""Shear and torsion of the cross-section at one place."""

from __future__ import annotations

from typing import Any

import numpy as np

from fishbelly.member.clusters import clusters
from fishbelly.member.description import Member
from fishbelly.member.faults import CannotCompute
from fishbelly.member.moduli import Moduli
from fishbelly.member.profile import Group
from fishbelly.sections.flexure import Flexure, flexure
from fishbelly.sections.section_mesh import MeshFoldError
from fishbelly.sections.torsion import PointContactError, point_contacts, torsion

Data = dict[str, Any]

NO_SHEAR: Data = dict.fromkeys(("GA_y", "GA_z", "shear", "torsion"))
"""What `section` tells of shear and torsion where a shear modulus is not known."""


DOUBTFUL = 1e-4
"""Estimated relative error above which a note says so: printed digits are no longer all right."""


def section_flexure(member: Member, group: Group, moduli: Moduli) -> Flexure:
    """Shear flexibility and shear centre of the sections of a group, every material with a shear modulus."""
    return flexure(
        group.composition,
        group.modulus(moduli.E),
        group.modulus(moduli.G),
        _clusters(member, group),
        share_angle=group.over_opening,
    )


def _clusters(member: Member, group: Group) -> list[int]:
    number = clusters(member)
    return [number[i] for i in group.placed.index]


def shear_and_torsion(member: Member, group: Group, moduli: Moduli) -> Data:
    """Shear and torsional stiffness of the first section of a group, with their errors.

    Raises
    ------
    CannotCompute
        When the section cannot be divided into cells.
    """
    if not np.all(group.modulus(moduli.G)[:, 0] > 0.0):
        return NO_SHEAR
    try:
        f = section_flexure(member, group, moduli)
    except MeshFoldError as error:
        raise CannotCompute(f"shear at x = {group.placed.x[0]:.6g} m: {error}") from None
    shear: Data = {
        "F_yz": float(f.F_yz[0]) + 0.0,
        "y_s": float(f.y_s[0]) + 0.0,
        "z_s": float(f.z_s[0]) + 0.0,
        "pieces": int(f.pieces[0]),
        "error": float(f.error()[0]),
    }
    touching = point_contacts(group.composition, group.modulus(moduli.E), group.modulus(moduli.G))
    shear["touching"] = [{"y": y, "z": z} for _, y, z in touching]
    return {
        "GA_y": float(f.GA_y[0]),
        "GA_z": float(f.GA_z[0]),
        "shear": shear,
        "torsion": _torsion(member, group, moduli),
    }


def _torsion(member: Member, group: Group, moduli: Moduli) -> Data:
    try:
        t = torsion(group.composition, group.modulus(moduli.G), _clusters(member, group))
    except PointContactError as error:
        return dict.fromkeys(("GJ", "lower", "upper", "error")) | {"reason": str(error)}
    return {
        "GJ": float(t.GJ[0]),
        "lower": float(t.lower[0]),
        "upper": float(t.upper[0]),
        "error": float(t.error()[0]),
    }


def shear_notes(data: Data) -> list[str]:
    """Notes on `shear` and `torsion` of a section: estimates of their errors that show, and why one is missing."""
    shear, torsion = data["shear"] or {}, data["torsion"] or {}
    found = []
    for what, error in (("shear stiffness and shear centre", shear.get("error")), ("GJ", torsion.get("error"))):
        if error is not None and error > DOUBTFUL:
            found.append(
                f"{what}: the estimated error is {100.0 * error:.2g} %; narrow gaps, slivers or materials unlike each "
                "other cause it"
            )
    if torsion.get("reason"):
        found.append("no torsional stiffness: pieces of the cross-section touch at a point alone")
    return found
