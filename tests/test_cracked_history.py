"""Members that crack: history, no tension at all, thrust, long-term, one value of spans, what is not built."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import Any

import mpmath as mp
import numpy as np
import pytest
from common import check_close, fixed, part, pin, roller, simple, uniform
from cracked_beams import (
    BARS,
    CONCRETE,
    at_level,
    everything,
    reinforced,
    row_of_bars,
    simply,
    two_spans,
)

from fishbelly.member.analysis import Analysis
from fishbelly.member.cracked_check import cracked_check
from fishbelly.member.cracked_code import one_value
from fishbelly.member.cracked_history import cracked_responses
from fishbelly.member.cracked_response import CrackedResponse, cracked_response
from fishbelly.member.description import Combination, Material, Member, Opening
from fishbelly.member.extremes import largest, values_at
from fishbelly.member.faults import CannotCompute, NoStiffness
from fishbelly.member.loads import Axial, Point, Shrinkage

EN = "EN 1992-1-1"
ALONG = 1e-9
"""Relative; places of cracks are found to 1e-10 of the length, strains resolved to 1e-10."""


def solved(member: Member, rule: str | None = None, **more: Any) -> CrackedResponse:
    return cracked_response(Analysis.of(member), everything(member), rule, **more)


def field(r: CrackedResponse, name: str, x: float, plane: int | None = 0, side: str = "right") -> float:
    values = getattr(r.total, name)
    return float(
        values_at(r.analysis.profile.panels, values if plane is None else values[plane], np.array([x]), side)[0]
    )


def deepest(r: CrackedResponse) -> float:
    return largest(r.analysis.profile.panels, r.total.deflection[0]).value


def test_one_value_of_a_cantilever_and_of_continuous_spans() -> None:
    """The support of a cantilever counts; a continuous span takes the mean of its critical sections."""
    arm = reinforced(3.0, supports=(fixed("A", 0.0, along=math.inf),), loads=(uniform(15e3, 3.0),))
    found = one_value(Analysis.of(arm), everything(arm), "ACI 318-14").spans[0]
    assert [s.at for s in found.sections] == [0.0]
    assert found.sections[0].moment == pytest.approx(-15e3 * 4.5, rel=1e-9)
    spans = two_spans(6.5, 27e3)
    for value in one_value(Analysis.of(spans), everything(spans), "ACI 318-14").spans:
        sagging, hogging = value.sections
        assert sagging.moment > 0 > hogging.moment and hogging.at == 6.5
        assert value.effective == pytest.approx(0.5 * (sagging.effective + hogging.effective), rel=1e-14)


def test_bars_on_one_side_bend_it_sideways() -> None:
    """An unsymmetric section moves across once it is cracked; mirrored it moves the other way."""
    found = []
    for y in (0.09, -0.09):
        member = Member(
            5.0,
            (
                part("beam", "rectangle", 5.0, material="concrete", width=0.3, depth=0.42),
                row_of_bars("bottom", 2, 0.025, -0.37, 5.0, y),
            ),
            (CONCRETE, BARS),
            supports=simple(5.0),
            loads=(uniform(25e3, 5.0),),
        )
        found.append(solved(member))
    one, other = found
    assert abs(field(one, "deflection", 2.5, 1)) > 0.05 * field(one, "deflection", 2.5)
    assert field(other, "deflection", 2.5, 1) == pytest.approx(-field(one, "deflection", 2.5, 1), rel=1e-8)
    assert field(other, "deflection", 2.5) == pytest.approx(field(one, "deflection", 2.5), rel=1e-8)


def test_history_and_by_combination() -> None:
    """What the rare load cracks stays cracked under the frequent one, unless the job says otherwise."""
    combos = (Combination("rare", {"g": 1.0, "q": 1.0}), Combination("frequent", {"g": 1.0, "q": 0.0}))
    loads = (uniform(4e3, 6.5, case="g"), uniform(20e3, 6.5, case="q"))
    member = reinforced(6.5, supports=simple(6.5), loads=loads, combinations=combos, shear=False)
    rare, frequent = cracked_responses(Analysis.of(member), combos, None)
    assert not frequent.own and frequent.stretches == rare.stretches
    # without stiffening the cracked stretch is as soft under the small load as under the large one
    assert field(frequent, "deflection", 3.25) == pytest.approx(field(rare, "deflection", 3.25) / 6.0, rel=ALONG)
    single = replace(member, cracks="by combination")
    alone = cracked_responses(Analysis.of(single), combos, None)[1]
    assert not alone.stretches
    assert field(alone, "deflection", 3.25) < 0.5 * field(frequent, "deflection", 3.25)


def test_history_in_continuous_spans_settles() -> None:
    """Each arrangement's cracks are counted in the others; nothing cracks outside what is held."""
    combos = (
        Combination("left", {"g": 1.0, "l": 1.0}),
        Combination("right", {"g": 1.0, "r": 1.0}),
    )
    loads = (uniform(12e3, 13.0, case="g"), uniform(15e3, 6.5, case="l"), uniform(15e3, 13.0, 6.5, case="r"))
    held = (pin("A", 0.0), roller("B", 6.5), roller("C", 13.0))
    member = reinforced(13.0, supports=held, loads=loads, combinations=combos)
    one, other = cracked_responses(Analysis.of(member), combos, EN)
    for x in (2.0, 6.5, 9.0, 11.0):
        assert field(one, "deflection", x) == pytest.approx(field(other, "deflection", 13.0 - x), rel=1e-6, abs=1e-9)
    for r in (one, other):
        for a, b in r.own:
            assert any(p <= a + 1e-6 and b <= q + 1e-6 for p, q in r.stretches)


def test_masonry_column_opens_and_its_limit() -> None:
    """No tension at all: a pier under an eccentric thrust, the opening found as a root, and what it cannot carry."""
    brick = Material("brick", 5e9, poisson=0.2, no_tension=True)

    def pier(push: float) -> Member:
        return Member(
            4.0,
            (part("pier", "rectangle", 4.0, material="brick", width=1.0, depth=0.6),),
            (brick,),
            supports=(fixed("foot", 0.0, along=math.inf),),
            loads=(Axial(4.0, -3e5), Point(4.0, push)),
            shear=False,
        )

    N, b, h, E = -3e5, 1.0, 0.6, 5e9
    # at 20.25 kN the foot stands at 0.9 of what it carries, and strains there grow fast
    for push in (15e3, 20.25e3):
        r = solved(pier(push))
        # opens where M = N h / 6; beyond, k = -2 N / (9 b E c^2), c from the force to the edge
        x0 = 4.0 - 3e5 * h / 6 / push

        def curvature(x: Any, push: float = push) -> Any:
            M = -push * (4 - x)
            if abs(M) <= 3e5 * h / 6:
                return M / (E * b * h**3 / 12)
            return -2 * mp.mpf(3e5) / (9 * b * E * (h / 2 + M / mp.mpf(3e5)) ** 2)

        expected = mp.quad(lambda x, k=curvature: -k(x) * (4 - x), [0, 0.2 * x0, x0, 4])
        check_close(field(r, "deflection", 4.0, side="left"), expected, ALONG)
        assert min(abs(r.analysis.profile.panels.a - x0)) < 1e-8
    assert N < 0.0
    with pytest.raises(NoStiffness, match=r"x = .*cannot carry M = -1.*it can carry -9") as caught:
        solved(pier(30e3))
    assert caught.value.at < 4.0 - 3e5 * 0.3 / 30e3


def test_thrust_between_fixed_ends() -> None:
    """Held along at both ends a cracked beam wants to grow longer, and is pressed: it deflects less."""
    ends = (fixed("A", 0.0, along=math.inf), fixed("B", 6.5, along=math.inf))
    free = (fixed("A", 0.0, along=math.inf), fixed("B", 6.5))
    held, loose = (solved(reinforced(6.5, supports=s, loads=(uniform(45e3, 6.5),))) for s in (ends, free))
    assert held.total.N.max() < -1e4
    assert np.abs(loose.total.N).max() < 1.0
    assert deepest(held) < deepest(loose)
    assert held.convergence.residual < 1e-11


def test_long_term_shrinkage_adds_curvature() -> None:
    """Shrinkage of cracked concrete bends the beam more than of uncracked, and all with creep more than without."""
    c = Combination("all", {"load": 1.0, "s": 1.0}, {"load": 1.0, "s": 1.0})
    loads = (uniform(15e3, 6.5), Shrinkage("beam", 3e-4, 0.0, 6.5, case="s"))
    more = reinforced(6.5, supports=simple(6.5), loads=loads, combinations=(c,), top=False)
    less = replace(more, loads=loads[:1], combinations=(Combination("all", {"load": 1.0}, {"load": 1.0}),))
    short = replace(less, combinations=(Combination("all", {"load": 1.0}),))
    w = [deepest(solved(m, EN)) for m in (more, less, short)]
    assert w[0] > w[1] > w[2]


def test_what_is_not_built_says_so() -> None:
    member = simply(6.5, 20e3)
    spans = two_spans(6.5, 20e3)
    spans = replace(spans, loads=(uniform(20e3, 13.0, pattern=True),))
    with pytest.raises(CannotCompute, match="pattern loads together with parts that crack"):
        solved(spans)
    plain = replace(member, materials=(replace(CONCRETE, cracking=None), BARS))
    with pytest.raises(CannotCompute, match="give its material `cracking`"):
        one_value(Analysis.of(plain), everything(plain), "ACI 318-14")


def test_cracks_end_at_breaks() -> None:
    """Bars that stop inside the cracked stretch: the break stays a border, and state II jumps there."""
    member = simply(6.5, 20e3)
    short = replace(member.parts[1], start=1.5, end=5.0)
    whole = row_of_bars("all along", 2, 0.016, -0.37, 6.5)
    member = replace(member, parts=(member.parts[0], short, replace(whole, place=at_level(-0.33))))
    r = solved(member)
    panels = r.analysis.profile.panels
    k = panels.border(1.5)
    assert panels.a[k] == 1.5
    left, right = (values_at(panels, r.total.curvature[0], np.array([1.5]), s)[0] for s in ("left", "right"))
    assert left > 2.0 * right


def test_opening_in_the_cracked_stretch() -> None:
    """Panels are anchored at the opening: round-off of the plane in which nothing bends must not cut them up."""
    member = simply(6.5, 20e3)
    member = replace(member, openings=(Opening(4.0, ("beam",), diameter=0.1, level=-0.25),))
    r = solved(member, EN)
    assert r.analysis.profile.panels.count < 40
    check = cracked_check(r)
    assert check is not None and check["difference"] < 1e-7


def test_round_column_cracks_askew() -> None:
    """A ring of bars a little turned: state II by strips cannot be had askew, equilibrium of its fibres can."""
    ring = [(0.2 * math.sin(a), 0.2 * math.cos(a)) for a in (k * math.pi / 3 + 0.2 for k in range(5))]
    bars = [
        part(f"bar {k}", "circle", 5.0, material="bars", diameter=0.02, place=at_level(-0.25 + z, y))
        for k, (z, y) in enumerate(ring)
    ]
    column = part("column", "circle", 5.0, material="concrete", diameter=0.5)
    member = Member(5.0, (column, *bars), (CONCRETE, BARS), supports=simple(5.0), loads=(uniform(40e3, 5.0),))
    r = solved(member)
    ((a, b),) = r.stretches
    # the bars are not symmetric about the middle plane, the member is about its middle
    assert a + b == pytest.approx(5.0, rel=1e-8)
    assert abs(field(r, "deflection", 2.5, 1)) > 1e-3 * field(r, "deflection", 2.5) > 0.0
    assert r.total.M[1].max() == pytest.approx(0.0, abs=1e-9 * r.total.M[0].max())
