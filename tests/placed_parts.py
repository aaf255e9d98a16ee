"""A host and plates placed against it, and where a part stands at a place."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from common import STEEL, TIMBER, part

from fishbelly.member.description import Member, Part, Placing, Shape
from fishbelly.member.geometry import Geometry
from fishbelly.member.laws import constant, straight

L = 8.0
NEAR = 1e-13
"""m; coordinates of a few tenths of a metre, a handful of additions."""

HOST = part("host", "rectangle", L, width=0.2, depth=0.4)


def plate(name: str = "plate", **more: object) -> Part:
    """A plate 100 mm by 20 mm, placed as told."""
    placing = {k: more.pop(k) for k in ("relation", "host", "flush", "gap", "shift", "anchor", "position") if k in more}
    law = lambda v: v if callable(v) else constant(v)
    for key in ("shift", "position"):
        if key in placing:
            placing[key] = tuple(map(law, placing[key]))
    if "gap" in placing:
        placing["gap"] = law(placing["gap"])
    if placing.get("relation") == "position":
        placing.setdefault("anchor", "middle")
    return replace(part(name, "rectangle", L, width=0.1, depth=0.02, place=Placing(**placing)), **more)


def member(*parts: Part, **more: object) -> Member:
    return Member(L, parts, (STEEL, TIMBER), **more)


def box(m: Member, name: str, x: float, side: str = "right") -> tuple[float, float, float, float]:
    """Left, bottom, right, top of a part at x [m]."""
    placed = Geometry(m).place(np.array([x]), side)
    names = [m.parts[i].name for i in placed.index]
    return tuple(float(v[0]) for v in placed.outlines[names.index(name)].bounds())


def at(found: tuple[float, ...], *expected: float) -> None:
    assert found == pytest.approx(expected, abs=NEAR)


def tapering() -> Shape:
    return Shape("rectangle", {"width": constant(0.2), "depth": straight([0.0, L], [0.4, 0.2])})
