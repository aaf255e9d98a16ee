"""Members that live through stages, for both methods, and how each of the two is run on them."""

from __future__ import annotations

import dataclasses

import numpy as np
from second_members import BAR, FIXED, INF, LEFT, MIDDLE, RIGHT, STEEL, STRIP, TAPER, TIMBER, TIMBER_TAPER, part

from fishbelly.member.analysis import Analysis, Combined
from fishbelly.member.cross_check import second_of
from fishbelly.member.description import Hinge, Member, Part, Placing, Support
from fishbelly.member.extremes import values_at
from fishbelly.member.laws import straight
from fishbelly.member.loads import (
    Axial,
    Couple,
    Distributed,
    Load,
    Point,
    Prestress,
    SelfWeight,
    Shrinkage,
    Temperature,
)
from fishbelly.member.questions import Combination, Stage
from fishbelly.member.second_method import SecondResult

TWO = (Stage("old", ("old",)), Stage("new", ("new",)))
TARGET = 1e-8
"""Target between the two methods on worked jobs, of the largest deflection."""
WORN = (Stage("old", ("old",)), Stage("worn", creep={"timber": 1.5}, ageing=0.8), Stage("new", ("new",)))
PAIR = (TIMBER_TAPER, dataclasses.replace(STRIP, stage="new"))
SIDE = part("side", "rectangle", Placing("centred_on", "bar"), width=0.14, depth=0.1)


def even(value: float, case: str) -> Distributed:
    """A load all along the member."""
    return Distributed(((0.0, value), (6.0, value)), case=case)


OLD, NEW = even(1e4, "old"), even(6e3, "new")
BOTH = (OLD, SelfWeight(case="old"), NEW, SelfWeight(case="new"))


def at(thing: Part | Support, **more: object) -> Part | Support:
    """The same part or support with other dates or places."""
    return dataclasses.replace(thing, **more)


def staged(*parts: Part, stages: tuple[Stage, ...] = TWO, loads: tuple[Load, ...] = BOTH, **more: object) -> Member:
    """A member of 6 m on two supports, in stages."""
    given = {"supports": (LEFT, RIGHT), "shear": False} | more
    # sustained shares want to know that steel does not creep
    return Member(6.0, parts, (dataclasses.replace(STEEL, creep=0.0), TIMBER), stages=stages, loads=loads, **given)


PROP = Support("prop", 3.0, down=INF, until="new")
GROOVE = at(part("groove", "rectangle", Placing("centred_on", "bar"), width=0.05, depth=0.08), material=None)

STAGED = {
    "plate welded on under load": lambda: staged(TAPER, at(STRIP, stage="new")),
    "prop taken from a composite beam": lambda: staged(*PAIR, supports=(LEFT, PROP, RIGHT), shear=True),
    "creep passes load to a flitch": lambda: staged(
        TIMBER_TAPER,
        at(STRIP, stage="worn"),
        stages=WORN,
        shear=True,
    ),
    "part taken away": lambda: staged(TIMBER_TAPER, at(STRIP, until="new")),
    "settlement in a later stage, then creep": lambda: staged(
        TIMBER_TAPER,
        STRIP,
        stages=(Stage("old", ("old", "settlement")), WORN[1], WORN[2]),
        supports=(LEFT, at(MIDDLE, sinks=0.01, case="settlement"), at(RIGHT, sinks=0.004, case="new")),
    ),
    "support taken from two spans": lambda: staged(
        BAR,
        supports=(
            LEFT,
            at(MIDDLE, until="new"),
            RIGHT,
            Support("spring", 4.0, down=2e6, rotation=1e5, until="new"),
        ),
    ),
    "support that comes later": lambda: staged(TAPER, supports=(LEFT, at(MIDDLE, stage="new"), RIGHT)),
    "warmth and shrinkage by stage": lambda: staged(
        TIMBER_TAPER,
        at(STRIP, stage="worn"),
        stages=WORN,
        supports=(FIXED, MIDDLE, RIGHT),
        loads=(
            OLD,
            Temperature(0.0, 6.0, top=30.0, bottom=-5.0, case="old"),
            Shrinkage("bar", 2e-4, 1.0, 5.0, case="new"),
            Temperature(2.0, 4.0, parts={"strip": 10.0}, case="new"),
            Prestress("strip", force=2e4, case="new"),
            Temperature(0.0, 6.0, top=10.0, bottom=0.0, case="new"),
        ),
    ),
    "hinge that closes": lambda: staged(
        TAPER, supports=(FIXED, RIGHT), hinges=(Hinge(3.0, until="new"),), loads=(*BOTH, Axial(5.0, 1e4, "old"))
    ),
    "hole cut later": lambda: staged(TIMBER_TAPER, STRIP, at(GROOVE, cuts=("bar",), start=1.0, end=3.0, stage="new")),
    "part displaced later": lambda: staged(TIMBER_TAPER, at(SIDE, stage="new")),
    "long-term stage": lambda: staged(
        *PAIR, stages=(Stage("old", ("old",), long_term=True), Stage("new", ("new",), creep={"timber": 1.0}))
    ),
    "sustained share": lambda: staged(
        *PAIR,
        stages=(Stage("old", ("old",)), Stage("new", ("new",), creep={"timber": 1.0})),
        combinations=(Combination("all", {"old": 1.2, "new": 0.7}, sustained={"old": 0.4, "new": 0.3}),),
    ),
    "moduli by stage": lambda: staged(
        *PAIR, stages=(Stage("old", ("old",), moduli={"timber": 7e9}), Stage("new", ("new",), factors={"timber": 1.3}))
    ),
    "plate to one side": lambda: staged(
        part("web", "rectangle", width=0.01, depth=0.2),
        at(part("over", "rectangle", Placing("over", "web", flush="left"), width=0.08, depth=0.01), stage="new"),
        supports=(LEFT, at(PROP, across=INF), RIGHT),
        loads=(*BOTH, Point(2.0, 1e3, "new", direction="across")),
    ),
    "wet part weighed before it works": lambda: staged(
        TAPER,
        at(STRIP, stage="new"),
        loads=(SelfWeight(case="old", parts=("bar", "strip")), OLD, NEW, SelfWeight(case="new")),
    ),
    "wide taper that is cut free": lambda: staged(
        part("bar", "rectangle", material="timber", width=straight([0.0, 6.0], [0.3, 0.1]), depth=0.3),
        at(STRIP, stage="worn"),
        stages=WORN,
        supports=(FIXED, Support("far", 6.0, down=INF, rotation=INF, along=INF, across=INF, until="new")),
        rises=0.3,
    ),
}

RELEASED = {
    "held along by what goes": lambda: staged(
        TIMBER_TAPER,
        at(STRIP, stage="new"),
        supports=(LEFT, at(PROP, along=INF, level="bottom", rotation=1e6), RIGHT),
        loads=(*BOTH, Couple(2.0, 3e3, "old")),
    ),
    "hinge that opens": lambda: staged(
        TIMBER_TAPER,
        at(STRIP, stage="new"),
        supports=(FIXED, RIGHT),
        hinges=(Hinge(3.0, stage="new"),),
        loads=(*BOTH, Axial(5.0, 1e4, "old")),
    ),
    "long-term stage that creeps": lambda: staged(
        *PAIR, stages=(TWO[0], Stage("new", ("new",), long_term=True, creep={"timber": 1.0}))
    ),
    "own creep of shrinkage": lambda: staged(
        *PAIR,
        stages=(TWO[0], Stage("new", ("new",), long_term=True)),
        loads=(*BOTH, Shrinkage("bar", 3e-4, 0.0, 6.0, creep=2.0, case="new")),
    ),
    "own creep of sustained shrinkage": lambda: staged(
        *PAIR,
        loads=(*BOTH, Shrinkage("bar", 3e-4, 0.0, 6.0, creep=2.0, case="new")),
        combinations=(Combination("all", {"old": 1.2, "new": 0.7}, sustained={"old": 0.4, "new": 0.3}),),
    ),
}
STAGED |= RELEASED


def found(analysis: Analysis, upto: int | None = None) -> tuple[Combined, np.ndarray, SecondResult]:
    """First combination: by the first method, its deflections at places, and the second method's result."""
    combined = analysis.combine(analysis.member.combinations[0], upto=upto)
    x = np.linspace(0.02, 5.98, 61)
    first = [values_at(analysis.profile.panels, combined.total.deflection[p], x) for p in range(2)]
    return combined, np.array(first), second_of(analysis, combined, x)


def differences(analysis: Analysis, upto: int | None = None) -> tuple[float, float]:
    """Difference of deflections and of reactions, each over its largest."""
    combined, first, second = found(analysis, upto)
    gap = np.abs(second.deflection - first).max() / np.abs(combined.total.deflection).max()
    reactions = combined.total.reactions
    return float(gap), float(np.abs(second.reactions - reactions).max() / np.abs(reactions).max())
