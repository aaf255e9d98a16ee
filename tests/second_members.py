"""Members for both methods, and how each of the two is run on them."""

from __future__ import annotations

import dataclasses

import numpy as np
import pytest

from fishbelly.member import sampling
from fishbelly.member.actions import Frame, actions, atoms
from fishbelly.member.description import (
    Haunch,
    Hinge,
    Material,
    Member,
    Notch,
    Opening,
    Part,
    Placing,
    Shape,
    Support,
)
from fishbelly.member.laws import constant, straight
from fishbelly.member.loads import (
    Axial,
    Couple,
    Distributed,
    Point,
    Prestress,
    SelfWeight,
    Shrinkage,
    Temperature,
)
from fishbelly.member.moduli import moduli
from fishbelly.member.nodes import layout
from fishbelly.member.response import free_of, respond
from fishbelly.member.second_method import LoadShare, SecondResult, second_method
from fishbelly.member.section_law import ElasticLaw

INF = float("inf")
G0 = 9.80665

AGREES = 1e-9
"""Target between the two methods, of the largest deflection, on members whose sections both resolve."""
SHOWS = 1e-6
"""A planted fault must show above this; it is also where a run is stopped."""

STEEL = Material("steel", 210e9, G=81e9, density=7850.0, expansion=12e-6)
TIMBER = Material("timber", 11e9, G=0.69e9, density=420.0, expansion=5e-6, creep=0.6)

LEFT = Support("left", 0.0, down=INF, along=INF, across=INF)
MIDDLE = Support("middle", 2.5, down=INF, across=INF)
RIGHT = Support("right", 6.0, down=INF, across=INF)
FIXED = Support("fixed", 0.0, down=INF, rotation=INF, along=INF, across=INF, rotation_across=INF)
FAR = dataclasses.replace(FIXED, name="far", at=6.0)
UNIFORM = Distributed(((0.0, 1e4), (6.0, 1e4)))


def part(name: str, kind: str, *more: object, material: str = "steel", **dimensions: object) -> Part:
    laws = {k: v if not isinstance(v, float) else constant(v) for k, v in dimensions.items()}
    return Part(name, material, Shape(kind, laws), 0.0, 6.0, *more)


BAR = part("bar", "rectangle", width=0.1, depth=0.2)
TAPER = part("bar", "rectangle", width=0.1, depth=straight([0.0, 6.0], [0.4, 0.1]))
TIMBER_TAPER = part("bar", "rectangle", material="timber", width=0.1, depth=straight([0.0, 6.0], [0.3, 0.2]))
STRIP = dataclasses.replace(
    part("strip", "rectangle", Placing("under", "bar"), width=0.08, depth=0.01),
    start=1.0,
    end=5.0,
    run_in=(0.4, 0.4),
)
ZED = (
    part("web", "rectangle", width=0.01, depth=0.2),
    part("over", "rectangle", Placing("over", "web", flush="left"), width=0.08, depth=0.01),
    part("under", "rectangle", Placing("under", "web", flush="right"), width=0.08, depth=0.01),
)
I_TAPER = part(
    "bar",
    "I",
    depth=straight([0.0, 6.0], [0.4, 0.2]),
    web=0.01,
    top_width=0.2,
    bottom_width=0.15,
    top_flange=0.015,
    bottom_flange=0.02,
    radius=0.012,
)
ROW = part(
    "row",
    "bars",
    Placing("position", position=(constant(0.0), constant(-0.17)), anchor="middle"),
    count=4.0,
    diameter=0.02,
    spacing=0.06,
)
WIDE = part("bar", "rectangle", material="timber", width=0.3, depth=straight([0.0, 6.0], [0.4, 0.2]))


def member(*parts: Part, **more: object) -> Member:
    given = {"supports": (LEFT, RIGHT), "loads": (UNIFORM, SelfWeight())} | more
    return Member(6.0, parts, (STEEL, TIMBER), **given)


def first(m: Member) -> tuple[np.ndarray, np.ndarray, np.ndarray, object]:
    """Places, deflections (2, X) and reactions of the first method, and its 1/GA as a function."""
    profile = sampling.build_profile(m)
    short = moduli(m)
    frame = Frame.of(profile, short)
    each = atoms(m)
    loads = [actions(frame, a) for a in each]
    law = ElasticLaw.of(frame, short, 2, m.shear)
    r = respond(frame, layout(frame), law, each, loads, free_of(frame, loads, short), 2).combined(np.ones(len(each)))
    panels = profile.panels

    def slide(x: np.ndarray, plane: int) -> np.ndarray:
        k = panels.find(x)
        basis = panels.rule.basis(panels.local(k, x))
        return np.einsum("xn,xn->x", basis, law.slide[plane][k])

    return panels.x.ravel(), r.deflection.reshape(2, -1), r.reactions, slide if m.shear else None


def second(m: Member, x: object, slide: object = None, **more: object) -> SecondResult:
    short = moduli(m).E
    share = LoadShare(dict.fromkeys(m.cases, 1.0), short)
    return second_method(m, x, [share], slide, short_E=short, **more)


def difference(m: Member) -> tuple[float, float]:
    """Difference of deflections and of reactions, each over its largest."""
    x, w, reactions, slide = first(m)
    few = np.linspace(0, x.size - 1, min(x.size, 300)).astype(int)
    found = second(m, x[few], slide)
    largest = np.abs(w).max()
    # the two look at different points
    assert found.largest == pytest.approx(largest, rel=0.02)
    gap = np.abs(found.deflection - w[:, few]).max() / largest
    return float(gap), float(np.abs(found.reactions - reactions).max() / np.abs(reactions).max())


MEMBERS = {
    "simple beam": lambda: member(BAR),
    "propped taper": lambda: member(TAPER, supports=(FIXED, RIGHT), loads=(UNIFORM, Couple(2.0, 1e3), SelfWeight())),
    "two spans": lambda: member(BAR, supports=(LEFT, MIDDLE, RIGHT), loads=(UNIFORM, Point(1.0, 1e4))),
    "hinge": lambda: member(
        TAPER,
        supports=(FIXED, RIGHT),
        hinges=(Hinge(3.0),),
        loads=(Point(3.0, 1e4), UNIFORM, Couple(3.0, 5e3), Axial(5.0, 1e4, level="top")),
    ),
    "springs and settlement": lambda: member(
        TAPER,
        supports=(
            Support("a", 1.0, down=1e6, rotation=2e5, along=INF, across=INF, sinks=0.01),
            Support("c", 3.0, down=3e5),
            Support("b", 5.0, down=INF, across=INF, sinks=0.004),
        ),
    ),
    "spring beside a rigid support": lambda: member(
        BAR,
        supports=(
            LEFT,
            dataclasses.replace(RIGHT, at=4.0),
            Support("soft", 4.0, rotation=1e6),
            Support("s", 6.0, down=1e5),
        ),
    ),
    "haunches held along": lambda: member(
        BAR,
        haunches=(Haunch("bar", 0.0, 0.2, (0.0, 2.0)), Haunch("bar", 6.0, 0.2, (2.0, 0.0), law="parabola")),
        supports=(FIXED, dataclasses.replace(FAR, level="bottom")),
    ),
    "haunches that meet": lambda: member(
        BAR,
        haunches=(Haunch("bar", 1.0, 0.2, (1.0, 3.0)), Haunch("bar", 4.0, 0.15, (2.5, 2.0), law="parabola")),
        shear=False,
    ),
    "Z": lambda: member(*ZED, loads=(UNIFORM, Point(2.0, 1e3, direction="across"))),
    "notches": lambda: member(
        BAR,
        notches=(
            Notch("bar", constant(0.05), 1.0, 1.2),
            Notch("bar", straight([4.0, 4.5], [0.02, 0.06]), 4.0, 4.5, side="top"),
        ),
    ),
    "notch with reach": lambda: member(
        BAR, notches=(Notch("bar", constant(0.05), 1.0, 1.2, reach=0.1),), loads=(UNIFORM,)
    ),
    "openings": lambda: member(
        BAR,
        openings=(
            Opening(2.0, ("bar",), diameter=0.1),
            Opening(4.0, ("bar",), length=0.3, depth=0.1, radius=0.03),
        ),
        shear=False,
    ),
    "circle taper": lambda: member(part("bar", "circle", diameter=straight([0.0, 6.0], [0.1, 0.05]))),
    "tube taper": lambda: member(
        part("bar", "tube", diameter=straight([0.0, 6.0], [0.1, 0.05]), wall=0.005), shear=False
    ),
    "two materials": lambda: member(TIMBER_TAPER, STRIP),
    "free strain": lambda: member(
        TIMBER_TAPER,
        STRIP,
        supports=(FIXED, MIDDLE, FAR),
        loads=(
            Temperature(0.0, 6.0, top=30.0, bottom=-5.0),
            Temperature(2.0, 4.0, parts={"strip": 10.0}),
            Shrinkage("bar", 2e-4, 1.0, 5.0),
            Prestress("strip", force=2e4),
            Prestress("bar", strain=1e-5),
        ),
    ),
    "inclined": lambda: member(
        TIMBER_TAPER,
        STRIP,
        rises=0.4,
        loads=(
            SelfWeight(factor=1.2, parts=("strip",)),
            Distributed(((0.0, 1e3), (2.0, 3e3), (2.0, 0.0), (6.0, 2e3)), per="plan"),
            Point(2.0, 1e3, per="slope"),
            Point(3.0, 1e3, direction="up"),
            Axial(5.0, 2e3, level="bottom"),
        ),
    ),
    "I taper": lambda: member(I_TAPER),
    "bars in a taper": lambda: member(WIDE, ROW),
    "turned and cut": lambda: member(
        dataclasses.replace(I_TAPER, turn=0.3),
        dataclasses.replace(
            part("groove", "rectangle", Placing("centred_on", "bar"), width=0.05, depth=0.08),
            material=None,
            cuts=("bar",),
            end=3.0,
        ),
        loads=(UNIFORM, SelfWeight()),
        shear=False,
    ),
    "polygon with a hole": lambda: member(
        Part(
            "bar",
            "steel",
            Shape(
                "polygon",
                points=((-0.1, -0.1), (0.12, -0.12), (0.15, 0.1), (0.0, 0.14)),
                holes=(((-0.02, -0.02), (0.03, -0.03), (0.02, 0.04)),),
            ),
            0.0,
            6.0,
        ),
        shear=False,
    ),
    "wedge to a point": lambda: member(
        part("bar", "rectangle", width=0.1, depth=straight([0.0, 6.0], [0.0, 0.4])), supports=(FAR,), shear=False
    ),
}
