"""Inclined flanges in the second method: its own angles and bands agree with the first, and show a fault in either."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import replace
from typing import Any

import pytest
from common import STEEL, TIMBER, part, simple, uniform

from fishbelly.member import geometry, second_sections
from fishbelly.member.description import Haunch, Member, Notch, Opening, Part, Placing
from fishbelly.member.faults import CannotCompute
from fishbelly.member.laws import constant, parabola, straight
from fishbelly.member.loads import SelfWeight, Temperature
from fishbelly.member.results import deflect

L = 10.0
AGREES = 1e-12
"""Of the largest deflection; both methods resolve these sections."""
STRAIGHT, CURVED = straight([0.0, L], [1.0, 0.3]), parabola([0.0, L], [1.0, 0.4], [L])
I_SHAPE = {"web": 0.01, "top_width": 0.2, "bottom_width": 0.25, "top_flange": 0.02, "bottom_flange": 0.03}
FILLETS = {**I_SHAPE, "radius": 0.012}
THINNING = {**FILLETS, "bottom_flange": straight([0.0, L], [0.05, 0.02])}
CHANNEL = {"depth": 0.3, "width": 0.1, "web": 0.01, "flange": 0.015}
ROLLED = {**CHANNEL, "radius": 0.012, "toe_radius": 0.006, "slope": 0.05, "flange_at": 0.05}
WEB = part("web", "rectangle", L, width=0.02, depth=0.6)
PLATE = part("plate", "rectangle", L, width=0.3, depth=0.02, place=Placing("under", "web"))
SECOND = part("second", "rectangle", L, width=0.2, depth=0.02, place=Placing("under", "plate", flush="left"))
HAUNCHES = (Haunch("web", 0.0, 0.4, (0.0, 3.0), "parabola"), Haunch("web", 5.0, 0.3, (2.5, 2.0)))
ASIDE = (constant(0.06), constant(0.0))


def given(*parts: Part, **more: Any) -> Member:
    rest = {"supports": simple(L), "loads": (uniform(1e4, L), SelfWeight()), "shear": False} | more
    return Member(L, parts, (STEEL, TIMBER), **rest)


def under_web(p: Part, **more: Any) -> Member:
    return given(WEB, replace(p, **more), haunches=HAUNCHES)


GIRDER = part("girder", "I", L, depth=STRAIGHT, **FILLETS)
MEMBERS: Mapping[str, Member] = {
    "straight": given(GIRDER),
    "curved, about the middle": given(
        part("g", "I", L, depth=CURVED, place=Placing("datum", anchor="middle"), **FILLETS)
    ),
    "upside down": given(replace(GIRDER, turn=math.pi)),
    "on its side": given(replace(GIRDER, turn=0.5 * math.pi)),
    "askew": given(replace(GIRDER, turn=0.4)),
    "flange that thins": given(part("g", "I", L, depth=STRAIGHT, **THINNING)),
    "box with round corners": given(
        part("b", "box", L, depth=STRAIGHT, width=0.3, web=0.01, flange=0.02, radius=0.03, inner_radius=0.01)
    ),
    "tee": given(part("t", "tee", L, depth=STRAIGHT, width=0.3, web=0.01, flange=0.02, place=Placing(anchor="bottom"))),
    "plates under haunches": given(WEB, PLATE, SECOND, haunches=HAUNCHES),
    "rolled channel under haunches": under_web(part("c", "channel", L, place=Placing("under", "web"), **ROLLED)),
    "channels in a pair": under_web(
        part("c", "channel", L, place=Placing("under", "web", shift=ASIDE), **ROLLED), pair=True, mirror=True
    ),
    "haunched on both faces": given(
        part("web", "I", L, depth=0.6, **FILLETS), haunches=(*HAUNCHES, Haunch("web", 5.0, 0.3, (2.5, 2.0), side="top"))
    ),
    "cut": given(
        GIRDER,
        openings=(Opening(3.0, ("girder",), diameter=0.3),),
        notches=(Notch("girder", constant(0.1), 6.0, 7.0), Notch("girder", constant(0.05), 7.5, 8.0, "left")),
    ),
    "warmed": given(GIRDER, loads=(uniform(1e3, L), Temperature(0.0, L, top=10.0, bottom=30.0))),
}


@pytest.mark.parametrize("name", MEMBERS)
def test_both_methods_agree(name: str) -> None:
    along, cut = (deflect(replace(MEMBERS[name], inclined=w))["combinations"][0] for w in ("along", "cut"))
    assert along["cross_check"]["difference"] < AGREES
    if name != "warmed":
        assert along["deflection"]["down"]["value"] > cut["deflection"]["down"]["value"] * (1.0 + 1e-4)


@pytest.mark.parametrize("name", ["straight", "plates under haunches"])
def test_a_wrong_angle_in_the_first_method_is_caught(name: str, monkeypatch: pytest.MonkeyPatch) -> None:
    true = geometry.rises
    wrong = lambda *a: {i: {f: 1.05 * r for f, r in v.items()} for i, v in true(*a).items()}  # noqa: E731
    monkeypatch.setattr(geometry, "rises", wrong)
    with pytest.raises(CannotCompute, match="the second method gives"):
        deflect(MEMBERS[name])


def test_a_second_method_without_bands_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(second_sections, "bands", lambda *_: [])
    with pytest.raises(CannotCompute, match="the second method gives"):
        deflect(MEMBERS["straight"])
