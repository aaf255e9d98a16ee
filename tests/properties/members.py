"""Random members for property tests: up to four parts of any outline, laws along x, supports and loads."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import replace
from typing import Any

import numpy as np
from common import CONCRETE, INF, STEEL, TIMBER, fixed, part, pin, roller, run
from hypothesis import strategies as st

from fishbelly.member.description import Hinge, Member, Part, Placing, Shape, Support
from fishbelly.member.laws import Law, constant, parabola, steps, straight
from fishbelly.member.loads import Axial, Couple, Distributed, Load, Point

MATERIALS = (STEEL, TIMBER, CONCRETE)
SPAN = 6.0
"""Length of every random member [m]; other lengths follow by scale."""

sizes = st.integers(10, 60).map(lambda k: 0.01 * k)
places = st.integers(1, 23).map(lambda k: SPAN * k / 24)
factors = st.sampled_from([0.5, 0.8, 1.0, 1.25])
forces = st.integers(-50, 50).filter(bool).map(lambda k: 200.0 * k)


@st.composite
def laws(draw: st.DrawFn, value: float, length: float = SPAN) -> Law:
    """A law along x around a value [m]."""
    kind = draw(st.sampled_from(["constant", "constant", "straight", "parabola", "steps"]))
    other = value * draw(factors)
    at = draw(places)
    if kind == "straight":
        return straight([0.0, at, length], [value, other, value])
    if kind == "parabola":
        return parabola([0.0, at], [value, other], [at])
    if kind == "steps":
        return steps([at, length], [value, other])
    return constant(value)


@st.composite
def shapes(draw: st.DrawFn, constant_sizes: bool = False, only: tuple[str, ...] = ()) -> tuple[str, dict[str, Any]]:
    """An outline by name with its dimensions; its depth follows a law unless `constant_sizes`."""
    kinds = only or (
        "rectangle", "circle", "tube", "box", "I", "tee", "channel", "angle", "trapezoid", "regular polygon", "bars",
    )  # fmt: skip
    kind = draw(st.sampled_from(kinds))
    d, b = draw(sizes), draw(sizes)
    t = 0.1 * min(d, b)
    depth: Any = constant(d) if constant_sizes else draw(laws(d))
    radius = draw(st.sampled_from([0.0, 0.5])) * t
    table: dict[str, dict[str, Any]] = {
        "rectangle": {"width": b, "depth": depth},
        "circle": {"diameter": depth},
        "tube": {"diameter": depth, "wall": 0.1 * d},
        "box": {"width": b, "depth": depth, "web": t, "flange": t, "radius": 2 * radius, "inner_radius": radius},
        "I": {
            "depth": depth, "web": t, "top_width": b, "bottom_width": 0.7 * b, "top_flange": t,
            "bottom_flange": 1.5 * t, "radius": radius,
        },
        "tee": {"depth": depth, "width": b, "web": t, "flange": t, "radius": radius},
        "channel": {"depth": depth, "width": b, "web": t, "flange": t, "radius": radius},
        "angle": {"depth": depth, "width": b, "web": t, "flange": t, "radius": radius},
        "trapezoid": {"top_width": b, "bottom_width": 0.6 * b, "depth": depth},
        "regular polygon": {"sides": draw(st.integers(3, 8)), "across_flats": depth},
        "bars": {"count": draw(st.integers(1, 3)), "diameter": 0.5 * t, "spacing": t},
    }  # fmt: skip
    return kind, table[kind]


@st.composite
def part_lists(draw: st.DrawFn, most: int = 3) -> tuple[Part, ...]:
    """Parts, the first over the whole length."""
    first = draw(st.sampled_from(["steel", "timber", "concrete"]))
    kind, dimensions = draw(shapes())
    found = [part("p0", kind, SPAN, material=first, **dimensions)]
    for k in range(1, draw(st.integers(1, most))):
        # outlines that vary side by side take long where they cross: two of them are enough
        kind, dimensions = draw(shapes(constant_sizes=k > 1))
        relation = draw(st.sampled_from(["under", "over", "left_of", "right_of", "centred_on"]))
        flush = draw(
            st.sampled_from(
                ["left", "middle", "right"] if relation in ("under", "over") else ["top", "middle", "bottom"]
            )
        )
        start, end = 0.0, SPAN
        if draw(st.booleans()):
            start, end = sorted(draw(st.lists(places, min_size=2, max_size=2, unique=True)))
        place = Placing(
            relation, draw(st.sampled_from([p.name for p in found if p.end - p.start == SPAN])), flush=flush
        )
        one = part(
            f"p{k}",
            kind,
            end,
            start=start,
            material=draw(st.sampled_from(["steel", "timber"])),
            place=place,
            **dimensions,
        )
        # rows of bars at an angle beside what varies are right and take seconds a member: not in these tests
        turn = 0.0 if kind == "bars" else draw(st.sampled_from([0.0, 0.0, 0.5 * np.pi, 0.3]))
        found.append(
            replace(one, turn=turn, pair=kind != "bars" and relation in ("left_of", "right_of") and draw(st.booleans()))
        )
    return tuple(found)


@st.composite
def support_lists(
    draw: st.DrawFn, level: str = "datum", settles: bool = False
) -> tuple[tuple[Support, ...], tuple[Hinge, ...]]:
    """Supports, with a hinge where they are more than enough."""
    kind = draw(st.sampled_from(["simple", "cantilever", "propped", "fixed", "spans", "springs", "overhang", "hinged"]))
    a, b = sorted(draw(st.lists(places, min_size=2, max_size=2, unique=True)))
    again = draw(st.sampled_from([0.0, INF, 1e8]))
    k = draw(st.sampled_from([1e5, 1e6, 1e8]))
    sinks = draw(st.sampled_from([0.0, 0.01])) if settles else 0.0
    held = {"along": INF, "level": level}
    rows: dict[str, tuple[Support, ...]] = {
        "simple": (pin("A", 0.0, level=level), roller("B", SPAN, along=again, level=level)),
        "cantilever": (fixed("A", 0.0, **held),),
        "propped": (fixed("A", 0.0, **held), roller("B", SPAN, along=again, level=level, sinks=sinks)),
        "fixed": (fixed("A", 0.0, **held), fixed("B", SPAN, along=again, level=level)),
        "spans": (pin("A", 0.0, level=level), roller("C", a, sinks=sinks), roller("B", SPAN)),
        "springs": (
            Support("A", 0.0, down=k, rotation=k, along=INF, across=INF, level=level),
            Support("C", b, down=2 * k, across=k),
            Support("B", SPAN, down=k, rotation=0.3 * k, across=INF),
        ),
        "overhang": (roller("C", a), pin("B", b, level=level)),
        "hinged": (fixed("A", 0.0, **held), fixed("B", SPAN)),
    }
    hinges = (Hinge(b),) if kind == "hinged" else ()
    return rows[kind], hinges


@st.composite
def loads(draw: st.DrawFn, case: str = "load", level: str = "datum", along: bool = True, across: bool = True) -> Load:
    """One load."""
    kinds = ["distributed", "point", "couple"] + ["axial"] * along
    kind = draw(st.sampled_from(kinds))
    direction = draw(st.sampled_from(["down", "down", "up"] + ["across"] * across))
    a, b = sorted(draw(st.lists(places, min_size=2, max_size=2, unique=True)))
    value = draw(forces)
    if kind == "distributed":
        return Distributed(((a, value), (b, value * draw(factors))), case, direction)
    if kind == "point":
        return Point(a, value, case, direction)
    if kind == "couple":
        return Couple(a, value, case)
    return Axial(a, value, case, level)


@st.composite
def members(
    draw: st.DrawFn, most: int = 3, count: int = 2, shear: bool | None = None, level: str = "datum", **how: bool
) -> Member:
    """A random member with loads, all of one case."""
    supports, hinges = draw(support_lists(level))
    acting = tuple(draw(loads(level=level, **how)) for _ in range(count))
    with_shear = draw(st.sampled_from([False, False, True])) if shear is None else shear
    return Member(
        SPAN, draw(part_lists(most)), MATERIALS, supports=supports, hinges=hinges, loads=acting, shear=with_shear
    )


KEYS = ("M", "V", "N", "rotation", "slope", "deflection", "across")
GRID = tuple(SPAN * k / 12 for k in range(13))


def table(
    member: Member, places_: tuple[float, ...] = GRID, combination: int = 0
) -> dict[tuple[float, str], dict[str, float]]:
    """Values at places by (x, side); where nothing jumps both sides are the same."""
    found: dict[tuple[float, str], dict[str, float]] = {}
    for row in run(member, *places_, combination=combination)["stations"]:
        x = min(places_, key=lambda p: abs(p - row["x"]))
        if abs(x - row["x"]) > 1e-9:
            continue
        if (x, "left") in found:
            found[x, "right"] = row
        else:
            found[x, "left"] = found[x, "right"] = row
    return found


def sizes_of(*tables: dict[tuple[float, str], dict[str, float]]) -> dict[str, float]:
    """The largest value of every kind; forces that are zero by statics are weighed against the other forces."""
    largest = {k: max(abs(r[k]) for t in tables for r in t.values()) for k in KEYS}
    force = max(largest["V"], largest["N"], largest["M"] / SPAN, 1e-3)
    moved = max(largest["deflection"], largest["across"], 1e-15)
    turned = max(largest["rotation"], largest["slope"], moved / SPAN)
    return {
        "M": max(largest["M"], force * 0.1), "V": force, "N": force, "rotation": turned, "slope": turned,
        "deflection": max(moved, 0.01 * turned * SPAN), "across": max(moved, 0.01 * turned * SPAN),
    }  # fmt: skip


def check_same(
    one: dict[tuple[float, str], dict[str, float]],
    other: dict[tuple[float, str], dict[str, float]],
    tolerance: float,
    change: Callable[[str, float], float] = lambda key, v: v,
    weighed_with: Sequence[dict[tuple[float, str], dict[str, float]]] = (),
) -> None:
    """Assert that two tables agree; `change` turns a value of the other one into what is expected.

    Differences are weighed against the largest value of their kind, in the tables `weighed_with` too.
    """
    size = sizes_of(one, *weighed_with)
    for place, row in one.items():
        for key in KEYS:
            gap = abs(row[key] - change(key, other[place][key]))
            assert gap <= tolerance * size[key], (
                f"{key} at {place}: {row[key]} and {other[place][key]}, {gap / size[key]:.1e}"
            )


def reversed_law(law: Law, length: float) -> Law:
    """The law seen from the other end of the member."""
    turned = law.coefficients[::-1] * np.array([1.0, -1.0, 1.0])
    return Law(length - law.knots[::-1], length - law.origins[::-1], turned)


def map_laws(shape: Shape, change: Callable[[Law], Law]) -> Shape:
    """A shape with every law changed."""
    return Shape(shape.kind, {k: change(v) for k, v in shape.dimensions.items()}, shape.points, shape.holes)
