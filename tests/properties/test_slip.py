"""Random members whose parts slip: between their bounds, softer joint by joint, mirrored, superposed."""

from __future__ import annotations

from dataclasses import replace
from itertools import pairwise

import numpy as np
from common import INF, fixed, pin, roller
from hypothesis import given
from hypothesis import strategies as st
from slip_members import JOIST, SLAB, piece

from fishbelly.member.analysis import Analysis
from fishbelly.member.description import Joined, Member, Part, Placing, Support
from fishbelly.member.extremes import values_at
from fishbelly.member.laws import constant, straight
from fishbelly.member.loads import Distributed, Load, Point
from fishbelly.member.response import Response

L = 4.0
SAME = 1e-9
"""Of the largest value of its kind; stiff joints cost four digits of double precision."""
X = np.linspace(0.0, L, 17)

stiffnesses = st.floats(4.0, 10.0).map(lambda e: 10.0**e)
widths = st.integers(5, 40).map(lambda k: 0.01 * k)
depths = st.integers(2, 25).map(lambda k: 0.01 * k)
inside = st.integers(1, 15).filter(lambda k: k != 7).map(lambda k: L * k / 16)
"""Places of loads, none on a support."""
HELD: dict[str, tuple[Support, ...]] = {
    "simple": (pin("A", 0.0), roller("B", L)),
    "cantilever": (fixed("A", 0.0, along=INF),),
    "fixed": (fixed("A", 0.0, along=INF), fixed("B", L)),
    "continuous": (pin("A", 0.0), roller("C", 1.75), roller("B", L)),
}


@st.composite
def stacks(draw: st.DrawFn) -> tuple[Part, ...]:
    """A joist that may taper, and one or two parts over and under it, each on a joint of its own."""
    deep, shallow = draw(depths), draw(depths)
    law = straight([0.0, L], [deep, shallow]) if draw(st.booleans()) else constant(deep)
    parts = [piece("joist", "joist", draw(widths), law, 0.0, L)]
    for name, relation in (("slab", "over"), ("strap", "under"))[: draw(st.integers(1, 2))]:
        start, end = sorted(draw(st.sampled_from([(0.0, L), (0.0, 2.5), (0.75, 3.0)])))
        joint = Joined(per_length=draw(stiffnesses))
        parts.append(
            piece(name, "slab", draw(widths), draw(depths), start, end, place=Placing(relation, "joist"), joined=joint)
        )
    return tuple(parts)


@st.composite
def members(draw: st.DrawFn, held: tuple[str, ...] = tuple(HELD), shear: bool = True) -> Member:
    """A random stack under one or two loads."""
    loads: list[Load] = [Point(draw(inside), draw(st.integers(1, 9)) * 100.0, case="p")]
    if draw(st.booleans()):
        loads.append(Distributed(((0.0, draw(st.integers(1, 9)) * 50.0), (L, 300.0)), case="q"))
    return Member(
        L,
        draw(stacks()),
        (SLAB, JOIST),
        supports=HELD[draw(st.sampled_from(held))],
        loads=tuple(loads),
        shear=shear and draw(st.booleans()),
    )


def total(member: Member) -> tuple[Analysis, Response]:
    analysis = Analysis.of(member)
    return analysis, analysis.combine(member.combinations[0]).total


def sagging(member: Member) -> np.ndarray:
    analysis, r = total(member)
    return values_at(analysis.profile.panels, r.deflection[0], X)


def work(member: Member) -> float:
    """½ΣPδ of one point load [J]."""
    (load,) = member.loads
    analysis, r = total(member)
    assert isinstance(load, Point)
    return 0.5 * load.value * float(values_at(analysis.profile.panels, r.deflection[0], np.array([load.at]))[0])


def joined(member: Member, change: Joined | float | None) -> Member:
    """The same member with its joints apart, rigid (None), or times a factor."""

    def other(j: Joined) -> Joined | None:
        return replace(j, per_length=j.per_length * change) if isinstance(change, float) and j.per_length else change  # type: ignore[return-value]

    parts = tuple(p if p.joined is None else replace(p, joined=other(p.joined)) for p in member.parts)
    return replace(member, parts=parts)


@given(members(shear=False))
def test_the_work_of_one_load_lies_between_its_bounds(member: Member) -> None:
    """Under one load, without free strain, every joint that is made stiffer takes work off, however it is held."""
    alone = replace(member, loads=member.loads[:1], combinations=())
    soft = replace(alone, supports=tuple(replace(s, slip_free=True) for s in alone.supports))
    found = [work(joined(soft, change)) for change in (Joined(apart=True), 1.0, 3.0, None)]
    assert all(a >= b * (1.0 - SAME) for a, b in pairwise(found))
    if any(p.joined is not None and (p.start, p.end) == (0.0, L) for p in member.parts):
        # a part that lies where nothing bends may as well be apart
        assert found[0] > found[-1]
    assert work(alone) <= found[1] * (1.0 + SAME)


@given(members())
def test_mirrored(member: Member) -> None:
    def law(part: Part) -> Part:
        dimensions = {
            k: v if v.knots.size < 2 else straight([0.0, L], [float(v(np.array([x]))[0]) for x in (L, 0.0)])
            for k, v in part.shape.dimensions.items()
        }
        shape = replace(part.shape, dimensions=dimensions)
        return replace(part, shape=shape, start=L - part.end, end=L - part.start)

    loads = tuple(
        replace(v, at=L - v.at)
        if isinstance(v, Point)
        else replace(v, stations=tuple((L - x, q) for x, q in v.stations[::-1]))
        for v in member.loads
    )
    supports = tuple(replace(s, at=L - s.at) for s in member.supports)
    other = replace(member, parts=tuple(law(p) for p in member.parts), loads=loads, supports=supports)
    one, two = sagging(member), sagging(other)
    assert np.abs(one - two[::-1]).max() < SAME * np.abs(one).max()


@given(members())
def test_superposed(member: Member) -> None:
    whole = sagging(member)
    parts = [sagging(replace(member, loads=(load,), combinations=())) for load in member.loads]
    assert np.abs(sum(parts) - whole).max() < SAME * np.abs(whole).max()


@given(members(), st.floats(0.2, 5.0))
def test_everything_softer_alike(member: Member, share: float) -> None:
    """E, G and joints divided by one factor: deflections times that factor."""
    materials = tuple(replace(m, E=m.E * share, G=None if m.G is None else m.G * share) for m in member.materials)
    other = joined(replace(member, materials=materials), float(share))
    one, two = sagging(member), sagging(other)
    assert np.abs(one - share * two).max() < SAME * np.abs(one).max()


@given(members())
def test_a_station_more_moves_nothing(member: Member) -> None:
    analysis = Analysis.of(member, (0.3, 1.1, 2.9))
    r = analysis.combine(member.combinations[0]).total
    one, two = sagging(member), values_at(analysis.profile.panels, r.deflection[0], X)
    assert np.abs(one - two).max() < SAME * np.abs(one).max()
