"""Members that crack: closed forms along x, mirrors, compatibility, history, what cannot be carried."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import mpmath as mp
import numpy as np
import pytest
from common import check_close, part, pin, roller, simple, uniform
from cracked_beams import (
    BARS,
    CONCRETE,
    STRONG,
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
from fishbelly.member.cracked_response import CrackedResponse, cracked_response
from fishbelly.member.cracked_strips import StripSection, strip_strain
from fishbelly.member.description import Combination, Member
from fishbelly.member.extremes import largest, values_at
from fishbelly.member.laws import straight
from fishbelly.member.loads import Axial, Shrinkage

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
