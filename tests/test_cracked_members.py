"""Members that crack: closed forms along x, mirrors, compatibility, history, what cannot be carried."""

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
    STRONG,
    at_level,
    everything,
    rectangle_stiffness,
    reinforced,
    row_of_bars,
    simply,
    thin_beam,
    two_spans,
)

from fishbelly.member.analysis import Analysis
from fishbelly.member.cracked_code import one_value
from fishbelly.member.cracked_history import cracked_responses
from fishbelly.member.cracked_response import CrackedResponse, cracked_response
from fishbelly.member.cracked_strips import StripSection, strip_strain
from fishbelly.member.description import Combination, Material, Member
from fishbelly.member.extremes import largest, values_at
from fishbelly.member.faults import CannotCompute, NoStiffness
from fishbelly.member.laws import straight
from fishbelly.member.loads import Axial, Point, Shrinkage

EN = "EN 1992-1-1"
ALONG = 1e-9
"""Relative; places of cracks are found to 1e-10 of the length, strains resolved to 1e-10."""
ELASTIC = 1e-12
L, B, H, D, AREA, Q = 6.0, 0.3, 0.5, 0.45, 1.2e-3, 24e3


def solved(member: Member, rule: str | None = None, **more: Any) -> CrackedResponse:
    return cracked_response(Analysis.of(member), everything(member), rule, **more)


def field(r: CrackedResponse, name: str, x: float, plane: int | None = 0, side: str = "right") -> float:
    values = getattr(r.total, name)
    return float(
        values_at(r.analysis.profile.panels, values if plane is None else values[plane], np.array([x]), side)[0]
    )


def deepest(r: CrackedResponse) -> float:
    return largest(r.analysis.profile.panels, r.total.deflection[0]).value


def closed_form_beam() -> tuple[Member, float, float, float]:
    """Simple beam with a strip of bars: EI uncracked and cracked, cracking moment."""
    n_area = BARS.E * AREA / CONCRETE.E
    member = thin_beam(L, (B, H), AREA, D, supports=simple(L), loads=(uniform(Q, L),))
    # the strip displaces its own 0.2 m by 1e-6 m of concrete
    one, two = rectangle_stiffness(B, H, n_area - 0.2e-6, D, CONCRETE.E)[0], 0.0
    two = rectangle_stiffness(B, H, n_area, D, CONCRETE.E)[1]
    area, first = B * H + n_area - 0.2e-6, B * H * H / 2 + (n_area - 0.2e-6) * D
    assert CONCRETE.cracking is not None
    M_cr = CONCRETE.cracking * one / CONCRETE.E / (H - first / area)
    return member, one, two, M_cr


def midspan(curvature: Any, M_cr: float) -> Any:
    """Deflection at midspan of a simple beam under a uniform load by a law of curvature, to 30 digits."""
    onset = (L - mp.sqrt(mp.mpf(L) ** 2 - 8 * mp.mpf(M_cr) / Q)) / 2
    moment = lambda x: mp.mpf(Q) * x * (L - x) / 2  # noqa: E731
    whole = mp.quad(lambda x: curvature(moment(x)) * x / 2, [0, onset, mp.mpf(L) / 2])
    return 2 * whole, onset


def test_two_stiffnesses() -> None:
    """Without stiffening: EI uncracked up to the root of M = M_cr, EI cracked beyond it."""
    member, one, two, M_cr = closed_form_beam()
    r = solved(member)
    expected, onset = midspan(lambda M: M / (one if M_cr > M else two), M_cr)
    (a, b), *rest = r.stretches
    assert not rest
    check_close(a, onset, ALONG)
    check_close(b, L - onset, ALONG)
    check_close(field(r, "deflection", L / 2), expected, ALONG)
    assert r.convergence.status == "closed" and r.convergence.residual < 1e-11


@pytest.mark.parametrize("sustained", [False, True])
def test_stiffening_by_eurocode_along_x(sustained: bool) -> None:
    """zeta = 1 - beta (M_cr / M)^2 at every section, integrated to 30 digits; beta 0.5 on long-term moduli."""
    member, one, two, M_cr = closed_form_beam()
    beta = 1.0
    if sustained:
        beta = 0.5
        c = Combination("all", {"load": 1.0}, {"load": 1.0})
        member = replace(member, combinations=(c,))
        n_area = BARS.E * AREA / CONCRETE.E * 3.0
        one = rectangle_stiffness(B, H, n_area - 0.2e-6, D, CONCRETE.E / 3.0)[0]
        two = rectangle_stiffness(B, H, n_area, D, CONCRETE.E / 3.0)[1]
        area, first = B * H + n_area - 0.2e-6, B * H * H / 2 + (n_area - 0.2e-6) * D
        assert CONCRETE.cracking is not None
        M_cr = CONCRETE.cracking * one / (CONCRETE.E / 3.0) / (H - first / area)
    r = solved(member, EN)

    def curvature(M: Any) -> Any:
        if M <= M_cr:
            return M / one
        zeta = 1 - beta * (M_cr / M) ** 2
        return (1 - zeta) * M / one + zeta * M / two

    check_close(field(r, "deflection", L / 2), midspan(curvature, M_cr)[0], ALONG)


@pytest.mark.parametrize("rule", ["ACI 318-14", "ACI 318-19"])
def test_stiffening_by_aci_along_x(rule: str) -> None:
    """I_e of the section's own moment at every section, the uncracked section counted with its bars."""
    member, one, two, M_cr = closed_form_beam()
    share = 1.0 if rule == "ACI 318-14" else 2.0 / 3.0
    r = solved(member, rule)

    def curvature(M: Any) -> Any:
        m = share * M_cr / M
        if m >= 1:
            return M / one
        if rule == "ACI 318-14":
            return M / (m**3 * one + (1 - m**3) * two)
        return M / (two / (1 - (1 - two / one) * m**2))

    check_close(field(r, "deflection", L / 2), midspan(curvature, share * M_cr)[0], ALONG)


@pytest.mark.parametrize("rule", ["ACI 318-14", "ACI 318-19"])
def test_one_value_of_a_simple_beam(rule: str) -> None:
    """5 q L^4 / (384 E I_e) with I_e written out from the gross section."""
    member, _, two, _ = closed_form_beam()
    gross, cracked = B * H**3 / 12, two / CONCRETE.E
    assert CONCRETE.cracking is not None
    m = CONCRETE.cracking * gross / (H / 2) / (Q * L * L / 8)
    effective = m**3 * gross + (1 - m**3) * cracked
    if rule == "ACI 318-19":
        effective = cracked / (1 - (1 - cracked / gross) * (2 * m / 3) ** 2)
    found = one_value(Analysis.of(member), everything(member), rule)
    check_close(found.spans[0].effective, effective, 1e-9)
    check_close(found.response.deflection[0].max(), 5 * Q * L**4 / (384 * CONCRETE.E * effective), 2e-3)
    panels = Analysis.of(member).profile.panels
    top = largest(panels, found.response.deflection[0]).value
    check_close(top, 5 * Q * L**4 / (384 * CONCRETE.E * effective), 1e-9)


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


@pytest.mark.parametrize("rule", [None, EN])
def test_no_cracks_is_elastic(rule: str | None) -> None:
    """Concrete too strong to crack gives the linear response to the last digits."""
    for member in (simply(6.5, 27e3, concrete=STRONG), two_spans(6.5, 27e3, concrete=STRONG)):
        r = solved(member, rule)
        size = np.abs(r.uncracked.deflection).max()
        assert np.abs(r.total.deflection - r.uncracked.deflection).max() <= ELASTIC * size
        assert not r.stretches


def test_sustained_shares_without_cracks_add() -> None:
    """Through the law itself: long-term loads, then all, from inherited strains, are the sum of linear shares."""
    weak = replace(STRONG, no_tension=False)
    c = Combination("all", {"load": 1.0, "s": 1.0}, {"load": 0.6, "s": 1.0})
    loads = (uniform(9e3, 6.5), Shrinkage("beam", 2e-4, 0.0, 6.5, case="s"), Axial(6.5, -3e5))
    member = reinforced(6.5, concrete=weak, supports=simple(6.5), loads=loads, combinations=(c,))
    analysis = Analysis.of(member)
    r = cracked_response(analysis, c)
    from fishbelly.member.cracked_phases import Phases

    phases = Phases(analysis, r.combined.shares, frozenset())
    nowhere = np.zeros(analysis.profile.panels.x.shape, dtype=bool)
    last = phases.solve(nowhere, [(f, None) for f in phases.uncracked()])[-1].closed.response
    size = np.abs(r.uncracked.deflection).max()
    assert np.abs(last.deflection - r.uncracked.deflection).max() <= ELASTIC * size
    assert np.abs(last.axial - r.uncracked.axial).max() <= ELASTIC * np.abs(r.uncracked.axial).max()


@pytest.mark.parametrize("rule", [None, EN])
def test_upside_down(rule: str | None) -> None:
    """The beam turned over under loads turned round goes the other way as far."""
    plain = simply(6.5, 27e3)
    parts = (
        part("beam", "rectangle", 6.5, material="concrete", width=0.3, depth=0.42),
        row_of_bars("bottom", 4, 0.02, -0.05, 6.5),
        row_of_bars("top", 2, 0.016, -0.37, 6.5),
    )
    turned = replace(plain, parts=parts, loads=(uniform(27e3, 6.5, direction="up"),))
    one, other = solved(plain, rule), solved(turned, rule)
    assert field(other, "deflection", 3.25) == pytest.approx(-field(one, "deflection", 3.25), rel=ALONG)
    assert np.array(other.stretches) == pytest.approx(np.array(one.stretches), rel=ALONG)


def test_turned_end_for_end() -> None:
    """Two unequal spans, seen from the other side."""
    held = (pin("A", 0.0), roller("B", 5.0), roller("C", 12.0))
    back = (pin("A", 0.0), roller("B", 7.0), roller("C", 12.0))
    one = solved(reinforced(12.0, supports=held, loads=(uniform(20e3, 12.0),)))
    other = solved(reinforced(12.0, supports=back, loads=(uniform(20e3, 12.0),)))
    for x in (1.7, 5.0, 8.8):
        assert field(one, "deflection", x) == pytest.approx(field(other, "deflection", 12.0 - x), rel=1e-8, abs=1e-10)
    assert one.total.reactions[1, 0] == pytest.approx(other.total.reactions[1, 0], rel=ALONG)


@pytest.mark.parametrize("rule", [None, EN, "ACI 318-14", "ACI 318-19"])
def test_two_spans_close_over_the_support(rule: str | None) -> None:
    """Curvatures against the unit state of the middle support leave no gap, cracks end where M says, forces balance."""
    r = solved(two_spans(6.5, 27e3), rule)
    panels, span = r.analysis.profile.panels, 6.5
    unit = np.where(panels.x < span, panels.x / span, (2 * span - panels.x) / span)
    # shear works too: the unit state has a shear force of one over the span
    shear = np.where(panels.x < span, 1.0, -1.0) / span
    density = unit * r.total.curvature[0] + shear * r.total.shear[0]
    gap = panels.integrate(density)[1].sum()
    size = panels.integrate(np.abs(density))[1].sum()
    assert abs(gap) <= ALONG * size
    assert r.total.reactions[:, 0].sum() == pytest.approx(-27e3 * 13.0, rel=1e-12)
    level = {None: 1.0, EN: 1.0, "ACI 318-14": 1.0, "ACI 318-19": 2.0 / 3.0}[rule]
    state = r.state
    assert state is not None
    for end, side in ((x, side) for pair in r.stretches for x, side in zip(pair, ("right", "left"), strict=True)):
        over = values_at(panels, state.over, np.array([end]), side)[0]
        assert over == pytest.approx(level, rel=1e-7)


def test_strips_find_the_same_curvature() -> None:
    """Haunched, under N, M and shrinkage: the second method's strips at places cracked and not."""
    depth = straight([0.0, 3.0, 6.0], [0.55, 0.42, 0.55])
    loads = (uniform(22e3, 6.0), Axial(6.0, -120e3), Shrinkage("beam", 1.5e-4, 0.0, 6.0))
    member = reinforced(6.0, depth=depth, supports=simple(6.0), loads=loads)
    r = solved(member)
    frame = r.analysis.frame
    parts = [p.name for p in member.parts]
    E = r.analysis.profile.short.E
    for x in (0.2, 1.1, 2.0, 3.7, 5.9):
        inside = any(a < x < b for a, b in r.stretches)
        M = field(r, "M", x) - field(r, "N", x, None) * frame.line[0]
        brittle = frozenset([0]) if inside else frozenset[int]()
        free = {parts.index("beam"): (-1.5e-4, 0.0)}
        e0, k = strip_strain(StripSection.at(member, x), E, brittle, free, field(r, "N", x, None), M)
        assert field(r, "curvature", x) == pytest.approx(k, rel=1e-9, abs=1e-12)
        assert field(r, "axial", x, None) + k * frame.line[0] == pytest.approx(e0, rel=1e-8, abs=1e-12)


def test_compression_closes_cracks_and_tension_opens_them() -> None:
    """An axial force shifts the places where cracks end, to where the extreme fibre says."""
    lengths = {}
    for N in (-4e5, 0.0, 5e4):
        member = simply(6.5, 20e3)
        member = replace(member, loads=(*member.loads, Axial(6.5, N)))
        r = solved(member)
        lengths[N] = sum(b - a for a, b in r.stretches)
        s = r.analysis.profile.stiffness(r.analysis.profile.short)
        low = -0.42 - s.z_c[0]
        for a, _ in r.stretches:
            M = 20e3 * a * (6.5 - a) / 2
            stress = CONCRETE.E * (N / s.EA[0] - M * low / s.EI_y[0])
            assert stress == pytest.approx(CONCRETE.cracking, rel=1e-8)
    assert lengths[-4e5] < lengths[0.0] < lengths[5e4]


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
    r = solved(pier(15e3))
    # opens where M = N h / 6; beyond, k = -2 N / (9 b E c^2), c from the force to the edge
    x0 = 4.0 - 3e5 * h / 6 / 15e3

    def curvature(x: Any) -> Any:
        M = -15e3 * (4 - x)
        if abs(M) <= 3e5 * h / 6:
            return M / (E * b * h**3 / 12)
        return -2 * mp.mpf(3e5) / (9 * b * E * (h / 2 + M / mp.mpf(3e5)) ** 2)

    expected = mp.quad(lambda x: -curvature(x) * (4 - x), [0, x0, 4])
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
