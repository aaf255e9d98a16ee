"""How parts are told apart without colour: each its own grey and hatch, the same in every drawing of a page."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from fishbelly.member.description import Member

_HATCHES = ("", "////", "....", "\\\\\\\\", "xxxx", "----", "||||", "++++", "oo", "//..", "\\\\--", "**")
_GREYS = ("0.93", "1.0", "0.80", "0.87")


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


def number_of(member: Member, index: int) -> str:
    """Return the number that stands for a part in figures."""
    return str(index + 1)
