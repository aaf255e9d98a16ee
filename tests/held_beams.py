"""A prismatic beam held and loaded in any way, so that each expected value is one line of strength of materials."""

from __future__ import annotations

from dataclasses import replace

from common import (
    STEEL,
    part,
    simple,
)

from fishbelly.member.description import Member, Support

L, Q, P = 6.0, 1.0e4, 2.0e4
H, B = 0.2, 0.1
E, A = 210e9, 0.02
EI, EA, GA = E * B * H**3 / 12, E * A, 81e9 * A * 5 / 6
HOT = 12e-6
BEAM = part("beam", "rectangle", L, width=B, depth=H)


def beam(*loads: object, supports: tuple[Support, ...] = (), length: float = L, **more: object) -> Member:
    piece = replace(BEAM, end=length)
    return Member(
        length, (piece,), (STEEL,), supports=supports or simple(length), loads=loads, **({"shear": False} | more)
    )
