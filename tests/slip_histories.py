"""Members whose parts slip, with and without stages, for tests of their life and of the second method."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import Any

from common import INF, fixed, pin, roller, uniform
from slip_members import composite, over, piece

from fishbelly.member.description import Combination, Hinge, Joined, Member, Part, Placing, Support
from fishbelly.member.laws import constant, straight
from fishbelly.member.loads import Axial, Couple, Distributed, Point, Shrinkage, Temperature
from fishbelly.member.questions import Stage

L = 4.0
FEW = Joined(stiffness=2e7, pitch=0.4, rows=2)
"""Ten stiff fasteners, so far apart that they are taken one by one."""
SLOW = {"slab": 1.5, "joist": 0.7}


def pair_of_layers(joined: Joined, **slab: Any) -> tuple[Part, ...]:
    """A slab 300 x 50 over a joist 50 x 150."""
    given = {"place": Placing("over", "joist"), "joined": joined} | slab
    return piece("joist", "joist", 0.05, 0.15, 0.0, L), piece("slab", "slab", 0.3, 0.05, 0.0, L, **given)


def several(**more: Any) -> Member:
    """A joist that tapers, a slab over it, a strap under part of it, a cap over part of the slab."""
    parts = (
        piece("joist", "joist", 0.05, straight([0.0, L], [0.2, 0.1]), 0.0, L),
        piece("slab", "slab", 0.3, 0.05, 0.0, L, **over("joist", 2e7)),
        piece("strap", "slab", 0.05, 0.01, 0.5, 3.2, place=Placing("under", "joist"), joined=Joined(per_length=5e6)),
        piece("cap", "slab", 0.05, 0.01, 0.9, 3.2, place=Placing("over", "slab"), joined=Joined(per_length=7e6)),
    )
    return composite(L, 0.0, parts=parts, **more)


LOADS = (
    uniform(1e3, L, case="a"),
    uniform(700.0, L, case="b"),
    Shrinkage("slab", 2e-4, 0.0, L, case="c"),
    Point(1.3, 900.0, case="d"),
)
STAGES = (
    Stage("one", ("a",)),
    Stage("two", ("b",)),
    Stage("three", ("c",), creep=SLOW),
    Stage("four", ("d",)),
)


def staged(joined: Joined, **more: Any) -> Member:
    """Joist alone, then with the slab, then creep and shrinkage, then a short load."""
    given = {"parts": pair_of_layers(joined, stage="two"), "stages": STAGES, "loads": LOADS} | more
    return composite(L, 0.0, **given)


SOFT = Joined(per_length=5e7)
LASTING = (
    Stage("one", ("a",)),
    Stage("two", ("b",), long_term=True),
    Stage("three", ("c",), long_term=True),
    Stage("four", ("d",)),
)
PROPPED = (pin("A", 0.0), roller("P", 2.0, until="three"), roller("B", L))
OWN_CREEP = (
    uniform(1e3, L, case="a"),
    uniform(700.0, L, case="b"),
    Shrinkage("slab", 2e-4, 0.0, L, case="b", creep=1.1),
    Point(1.3, 900.0, case="c"),
)


def _slab_goes() -> Member:
    parts = (
        piece("joist", "joist", 0.05, 0.15, 0.0, L),
        piece("slab", "slab", 0.3, 0.05, 0.0, L, place=Placing("over", "joist"), joined=SOFT, until="three"),
        piece("strap", "slab", 0.05, 0.01, 0.5, 3.2, place=Placing("under", "joist"), joined=SOFT),
    )
    loads = (LOADS[0], LOADS[1], Temperature(0.0, L, top=20.0, bottom=-5.0, case="b"), LOADS[3])
    stages = (STAGES[0], STAGES[1], Stage("three", (), creep=SLOW), STAGES[3])
    return composite(L, 0.0, parts=parts, loads=loads, stages=stages)


def _aside() -> Member:
    parts = pair_of_layers(Joined(per_length=4e7))
    shifted = replace(parts[1], place=Placing("over", "joist", shift=(constant(0.03), constant(0.0))))
    loads = (uniform(1e3, L), Distributed(((0.0, 1e3), (L, 2e3)), direction="across"))
    return composite(L, 0.0, parts=(parts[0], shifted), loads=loads, shear=True)


def _sustained() -> Member:
    loads = (uniform(1e3, L, case="a"), Shrinkage("slab", 2e-4, 0.0, L, case="s", creep=1.1))
    share = Combination("final", {"a": 1.0, "s": 1.0}, {"a": 0.4, "s": 1.0})
    return composite(L, 5e7, loads=loads, combinations=(share,))


CLAMPED = fixed("A", 0.0, along=INF)
MEMBERS: dict[str, Callable[[], Member]] = {
    "simple": lambda: composite(L, 5e7),
    "soft": lambda: composite(L, 1e5),
    "apart": lambda: composite(L, 0.0),
    "with shear": lambda: composite(L, 5e7, shear=True),
    "fixed, slip held": lambda: composite(L, 5e7, supports=(CLAMPED, fixed("B", L))),
    "fixed, slip free": lambda: composite(L, 5e7, supports=(replace(CLAMPED, slip_free=True),)),
    "continuous": lambda: composite(L, 5e7, supports=(pin("A", 0.0), roller("C", 1.5), roller("B", L))),
    "thrust": lambda: composite(L, 5e7, supports=(pin("A", 0.0, level=0.025), pin("B", L, level=-0.075))),
    "hinge": lambda: composite(L, 5e7, supports=(CLAMPED, roller("B", L)), hinges=(Hinge(2.5, "h"),)),
    "hinge, apart": lambda: composite(L, 0.0, supports=(CLAMPED, roller("B", L)), hinges=(Hinge(2.5, "h"),)),
    "springs": lambda: composite(
        L, 5e7, supports=(CLAMPED, Support("s", L, down=3e5, rotation=1e5, across=INF, rotation_across=0.0))
    ),
    "inclined": lambda: composite(
        L, 5e7, rises=0.3, loads=(Distributed(((0.0, 1e3), (L, 2e3)), per="plan"), Point(1.7, 500.0, per="plan"))
    ),
    "free strain": lambda: composite(
        L,
        5e7,
        loads=(Shrinkage("slab", 3e-4, 0.0, L), Temperature(0.0, L, top=25.0, bottom=-5.0), Point(1.3, 500.0)),
    ),
    "one by one": lambda: composite(L, 0.0, parts=pair_of_layers(FEW)),
    "several": lambda: several(shear=True),
    "several, continuous": lambda: several(
        loads=(uniform(1e3, L), Axial(L, 1e3, level=0.025), Couple(1.1, 300.0)),
        supports=(pin("A", 0.0, level=-0.05), roller("B", 1.5), roller("C", L)),
    ),
    "aside": _aside,
    "sustained": _sustained,
    "staged": lambda: staged(SOFT),
    "staged, with shear": lambda: staged(SOFT, shear=True),
    "staged, one by one": lambda: staged(FEW),
    "staged, joint creeps by itself": lambda: staged(replace(FEW, creep=1.2)),
    "long-term": lambda: staged(SOFT, stages=LASTING),
    "own creep": lambda: staged(SOFT, loads=OWN_CREEP, stages=(STAGES[0], LASTING[1], Stage("three", ("c",)))),
    "propped": lambda: staged(SOFT, supports=PROPPED, shear=True),
    "propped, one by one": lambda: staged(replace(FEW, creep=1.2), supports=PROPPED),
    "slab goes": _slab_goes,
}
