"""Sets of moduli: short-term, long-term, low and high, for every part of a member."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Material, Member

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Moduli:
    """E and G of every part of the member [Pa], shape (P,), in the member's order; zero for cuts."""

    name: str
    E: Array
    G: Array


def moduli(
    member: Member, band: str = "nominal", long_term: bool = False, own: Mapping[str, float] | None = None
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
        E[k] = _elastic(material, band) / (1.0 + creep)
        G[k] = _shear(material, band) / (1.0 + creep)
    return Moduli(f"{band}{' long-term' if long_term else ''}", E, G)


def _elastic(material: Material, band: str) -> float:
    if band == "nominal" or material.band is None:
        return material.E
    return material.band[0] if band == "low" else material.band[1]


def _shear(material: Material, band: str) -> float:
    shear = material.shear_modulus or 0.0
    return shear if material.G is not None else shear * _elastic(material, band) / material.E


def has_band(member: Member) -> bool:
    """Whether any material has a band of E."""
    return any(m.band is not None for m in member.materials)
