"""Members that crack, with every kind of event in their lives."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from common import part, pin, roller, simple, uniform
from cracked_beams import reinforced, row_of_bars

from fishbelly.member.description import Combination, Material, Member, Placing
from fishbelly.member.laws import straight
from fishbelly.member.loads import Axial, Shrinkage
from fishbelly.member.questions import Stage

L = 6.5


def plated(**more: Any) -> Member:
    """Scenario S10: a plate bonded to a beam that has cracked and crept under its permanent load."""
    loads = (uniform(14e3, L, case="g"), uniform(13e3, L, case="q"))
    stages = (Stage("present", ("g",), long_term=True), Stage("strengthened", ("q",)))
    plain = reinforced(L, supports=simple(L), loads=loads, stages=stages, shear=False)
    steel = Material("plate", 200e9, poisson=0.3, density=7850.0, creep=0.0)
    strip = part(
        "plate",
        "rectangle",
        5.9,
        start=0.6,
        material="plate",
        width=0.24,
        depth=0.006,
        place=Placing("under", "beam"),
    )
    parts = (*plain.parts, replace(strip, stage="strengthened"))
    return replace(plain, parts=parts, materials=(*plain.materials, steel), **more)


CREPT = (Stage("old", ("g",)), Stage("crept", creep={"concrete": 1.5}, ageing=0.8), Stage("new", ("q",)))
LOADS = (uniform(12e3, L, case="g"), uniform(9e3, L, case="q"))


def lives() -> dict[str, Member]:
    """Cracked members with every kind of event."""
    prop = (pin("A", 0.0), roller("prop", 3.0, until="new"), roller("B", L))
    spans = (pin("A", 0.0), roller("M", 3.0), roller("B", L))
    lasting = Combination("all", {"g": 1.0, "q": 1.0}, {"g": 0.7, "q": 0.3})
    more = row_of_bars("more", 2, 0.02, -0.395, L)
    return {
        "creep runs off": reinforced(L, supports=simple(L), loads=LOADS, stages=CREPT),
        "prop struck after creep": reinforced(L, supports=prop, loads=LOADS, stages=CREPT),
        "three supports, creep": reinforced(L, supports=spans, loads=LOADS, stages=CREPT),
        "plate bonded": plated(),
        "shrinkage by stage": reinforced(
            L, supports=simple(L), loads=(*LOADS, Shrinkage("beam", 3e-4, 0.0, L, case="q")), stages=CREPT
        ),
        "bars that go": replace(
            (m := reinforced(L, supports=simple(L), loads=LOADS, stages=(CREPT[0], CREPT[2]))),
            parts=(*m.parts, replace(more, until="new")),
        ),
        "a share lasts": reinforced(
            L, supports=simple(L), loads=LOADS, stages=(CREPT[0], CREPT[2]), combinations=(lasting,)
        ),
        "support that comes": reinforced(
            L, supports=(*simple(L), roller("late", 3.0, stage="new")), loads=LOADS, stages=(CREPT[0], CREPT[2])
        ),
        "deeper to the middle": reinforced(
            L, supports=simple(L), loads=LOADS, stages=CREPT, depth=straight((0.0, L / 2, L), (0.40, 0.52, 0.40))
        ),
        "other moduli": reinforced(
            L,
            supports=simple(L),
            loads=LOADS,
            stages=(CREPT[0], Stage("new", ("q",), moduli={"concrete": 20e9})),
        ),
        "pressed": reinforced(L, supports=simple(L), loads=(*LOADS, Axial(L, -2e5, "g")), stages=(CREPT[0], CREPT[2])),
    }
