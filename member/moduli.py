"""Sets of moduli: short-term, long-term, low and high, for every part of a member."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Material, Member
from fishbelly.member.questions import Stage

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Moduli:
    """E and G of every part of the member [Pa], shape (P,), in the member's order; zero for cuts."""

    name: str
    E: Array
    G: Array


def moduli(
    member: Member,
    band: str = "nominal",
    long_term: bool = False,
    own: Mapping[str, float] | None = None,
    stage: Stage | None = None,
    aged: Mapping[str, float] | None = None,
) -> Moduli:
    """Return a set of moduli.

    Parameters
    ----------
    member : Member
        The description.
    band : {"nominal", "low", "high"}
        Which end of each material's `band`; materials without one keep E. Where G comes from Poisson's
        ratio it follows E.
    long_term : bool
        Divide E and G by 1 + creep (EN 1995-1-1:2004, 2.3.2.2(1)).
    own : mapping of str to float, optional
        Creep factors of single parts that replace the material's.
    stage : Stage, optional
        Stage whose own moduli count.
    aged : mapping of str to float, optional
        Numbers by which E and G of a material are divided besides, as 1 + chi phi of the age-adjusted
        modulus (EN 1992-1-1:2004, 5.7; Bazant 1972).

    Returns
    -------
    Moduli
    """
    E, G = np.zeros(len(member.parts)), np.zeros(len(member.parts))
    materials = {m.name: m for m in member.materials}
    for k, part in enumerate(member.parts):
        if part.material is None:
            continue
        material = materials[part.material]
        creep = (own or {}).get(part.name, material.creep or 0.0) if long_term else 0.0
        share = _of_stage(material, stage) / (1.0 + creep) / (aged or {}).get(material.name, 1.0)
        E[k] = _elastic(material, band) * share
        G[k] = _shear(material, band) * share
    when = f" in {stage.name}" if stage is not None else ""
    return Moduli(f"{band}{' long-term' if long_term else ''}{when}", E, G)


def modulus(material: Material, long_term: bool = False, stage: Stage | None = None) -> float:
    """E of a material in a stage [Pa], divided by 1 + creep where it is for loads of long duration."""
    creep = (material.creep or 0.0) if long_term else 0.0
    return material.E * _of_stage(material, stage) / (1.0 + creep)


def _of_stage(material: Material, stage: Stage | None) -> float:
    """Share of a material's E and G in a stage: its own modulus there over E, or a factor."""
    if stage is None:
        return 1.0
    if material.name in stage.moduli:
        return stage.moduli[material.name] / material.E
    return stage.factors.get(material.name, 1.0)


def _elastic(material: Material, band: str) -> float:
    if band == "nominal" or material.band is None:
        return material.E
    return material.band[0] if band == "low" else material.band[1]


def _shear(material: Material, band: str) -> float:
    shear = material.shear_modulus or 0.0
    return shear if material.G is not None else shear * _elastic(material, band) / material.E


def has_band(member: Member) -> bool:
    """Whether any material has a band of E, or any joint one of its stiffness."""
    joined = (p.joined for p in member.parts)
    return any(m.band is not None for m in member.materials) or any(
        j is not None and j.band is not None for j in joined
    )
