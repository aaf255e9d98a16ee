"""How parts and materials are told apart without colour: each its own grey and hatch."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from fishbelly.member.description import Member

_HATCHES = ("", "////", "....", "\\\\\\\\", "xxxx", "----", "||||", "++++", "oo", "//..", "\\\\--", "**")
_GREYS = ("0.93", "1.0", "0.80", "0.87")
_MATERIALS = ("/////", "", ".....", "\\\\\\\\\\", "xxxxx", "----", "||||", "+++++", "ooo", "//..")
_MATERIAL_GREYS = ("1.0", "0.88", "0.96", "0.8")


@dataclass(frozen=True)
class Look:
    """Grey and hatch of a surface."""

    grey: str
    hatch: str

    @property
    def drawn(self) -> dict[str, Any]:
        """Keywords for a patch."""
        return {"facecolor": self.grey, "hatch": self.hatch or None}


def part_look(index: int) -> Look:
    """Grey and hatch of a part by its number in the job, from 0."""
    rounds = index // len(_HATCHES)
    return Look(_GREYS[(index + rounds) % len(_GREYS)], _HATCHES[index % len(_HATCHES)])


def material_look(member: Member, name: str) -> Look:
    """Grey and hatch of a material: in the order in which parts first use them."""
    used = list(dict.fromkeys(p.material for p in member.parts if p.material))
    k = used.index(name)
    rounds = k // len(_MATERIALS)
    return Look(_MATERIAL_GREYS[(k + rounds) % len(_MATERIAL_GREYS)], _MATERIALS[k % len(_MATERIALS)])


def number_of(member: Member, index: int) -> str:
    """Return the number that stands for a part in figures."""
    return str(index + 1)
