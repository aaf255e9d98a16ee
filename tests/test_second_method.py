"""The second method against closed forms and against the first method."""

from __future__ import annotations

import dataclasses

import mpmath as mp
import numpy as np
import pytest
from second_members import (
    AGREES,
    BAR,
    FAR,
    FIXED,
    G0,
    INF,
    LEFT,
    MEMBERS,
    RIGHT,
    SHOWS,
    STEEL,
    STRIP,
    TAPER,
    TIMBER_TAPER,
    UNIFORM,
    difference,
    first,
    member,
    part,
    second,
)

from fishbelly.member.description import (
    Haunch,
    Member,
    Notch,
    Opening,
    Placing,
    Support,
)
from fishbelly.member.faults import Mechanism, NoStiffness
from fishbelly.member.laws import constant, straight
from fishbelly.member.loads import (
    Axial,
    Couple,
    Distributed,
    Point,
    SelfWeight,
    Temperature,
)
from fishbelly.member.moduli import moduli
from fishbelly.member.second_grid import RULE, own_breaks
from fishbelly.member.second_method import LoadShare, second_method
from fishbelly.member.second_strips import strip_moments
from fishbelly.sections.outlines import circle, rectangle, tube


@pytest.mark.parametrize("name", MEMBERS)
def test_agrees_with_the_first_method(name: str) -> None:
    m = MEMBERS[name]()
    gap, reactions = difference(m)
    assert gap < AGREES
    assert reactions < AGREES


@pytest.mark.parametrize("name", ["two spans", "propped taper", "bars in a taper", "haunches held along"])
def test_own_error_covers_the_difference(name: str) -> None:
    m = MEMBERS[name]()
    x, w, _, slide = first(m)
    found = second(m, x[::7], slide)
    gap = np.abs(found.deflection - w[:, ::7]).max() / np.abs(w).max()
    # both methods round off; below this neither can say who is right
    assert gap < max(found.error, 1e-12)
    assert found.error < SHOWS


def test_stretches_over_many_spans_stay_exact() -> None:
    n = 40
    supports = tuple(Support(f"s{k}", 3.0 * k, down=INF, along=INF if k == 0 else 0.0) for k in range(n + 1))
    bar = dataclasses.replace(BAR, end=3.0 * n)
    m = Member(
        3.0 * n, (bar,), (STEEL,), supports=supports, loads=(Distributed(((0.0, 1e4), (3.0 * n, 1e4))),), shear=False
    )
    # three-moment equations: M(k-1) + 4 M(k) + M(k+1) = -q L²/2
    inner = np.linalg.solve(
        4.0 * np.eye(n - 1) + np.eye(n - 1, k=1) + np.eye(n - 1, k=-1), np.full(n - 1, -1e4 * 9.0 / 2.0)
    )
    M = np.concatenate(([0.0], inner, [0.0]))
    span = 1e4 * 3.0 / 2.0 + np.diff(M) / 3.0
    other = 1e4 * 3.0 / 2.0 - np.diff(M) / 3.0
    expected = np.concatenate((span, [0.0])) + np.concatenate(([0.0], other))
    found = second(m, [1.5])
    assert -found.reactions[:, 0] == pytest.approx(expected, rel=1e-12)


def test_taper_against_thirty_digits() -> None:
    m = member(TAPER, supports=(FIXED,), loads=(Point(6.0, 1e4),), shear=False)
    with mp.workdps(30):
        stiff = [mp.mpf(210e9) * mp.mpf("0.1") / 12]
        tip = mp.quad(
            lambda x: 1e4 * (6 - x) ** 2 / (stiff[0] * (mp.mpf("0.4") - mp.mpf("0.05") * x) ** 3), [0, 2, 4, 6]
        )
    assert second(m, [6.0]).deflection[0, 0] == pytest.approx(float(tip), rel=1e-12)


def test_wedge_to_a_point_against_the_integral() -> None:
    # free at its point, q over its length: curvature = q s²/2 / (E b (k s)³ / 12), deflection there = ∫ curvature s ds
    m = member(
        part("bar", "rectangle", width=0.1, depth=straight([0.0, 6.0], [0.0, 0.4])),
        supports=(FAR,),
        loads=(UNIFORM,),
        shear=False,
    )
    expected = 0.5 * 1e4 * 12.0 * 6.0 / (210e9 * 0.1 * (0.4 / 6.0) ** 3)
    found = second(m, [0.0])
    assert found.deflection[0, 0] == pytest.approx(expected, rel=1e-10)
    assert found.error < SHOWS


def _segment(radius: float, half: float) -> mp.mpf:
    """Area of the slice of a disc between two level lines, as far above its middle as below."""
    r, h = mp.mpf(radius), min(mp.mpf(half), mp.mpf(radius))
    return 2 * (h * mp.sqrt(r * r - h * h) + r * r * mp.asin(h / r))


@pytest.mark.parametrize("half", [0.0301, 0.0899, 0.09001])
def test_round_outlines_cut_level_are_exact(half: float) -> None:
    one = np.ones(1)
    band = rectangle({"width": one, "depth": 2.0 * half * one})
    disc = mp.pi * mp.mpf("0.1") ** 2 - _segment(0.1, half)
    bore = mp.pi * mp.mpf("0.09") ** 2 - _segment(0.09, half)
    for outline, expected in (
        (circle({"diameter": 0.2 * one}), disc),
        (tube({"diameter": 0.2 * one, "wall": 0.01 * one}), disc - bore),
    ):
        area = strip_moments([outline], [(band, (0,))]).values[0, 0, 0]
        # a ring is the small difference of two discs
        assert area == pytest.approx(float(expected), rel=1e-12)


def test_the_later_part_wins_and_cuts_take_from_their_targets() -> None:
    one = np.ones(1)
    big = rectangle({"width": 0.4 * one, "depth": 0.3 * one})
    inner = rectangle({"width": 0.2 * one, "depth": 0.1 * one}).moved(0.15, 0.0)
    cut = rectangle({"width": 0.1 * one, "depth": 0.04 * one})
    s = strip_moments([big, inner], [(cut, (0,))])
    # the later part reaches 0.05 out of the first; the cut, 0.1 wide in the middle, meets it over nothing
    assert s.values[:, 0, 0] == pytest.approx([0.12 - 0.15 * 0.1 - 0.1 * 0.04, 0.02], rel=1e-13)
    assert (s.bottom[0], s.top[0]) == (-0.15, 0.15)
    s = strip_moments([big, inner], [(cut.moved(0.1, 0.0), (1,))])
    assert s.values[:, 0, 0] == pytest.approx([0.12 - 0.15 * 0.1, 0.02 - 0.1 * 0.04], rel=1e-13)


def test_reach_of_a_notch_takes_stiffness_but_no_mass() -> None:
    m = member(BAR, notches=(Notch("bar", constant(0.05), 1.0, 1.2, reach=0.1),), loads=(SelfWeight(),), shear=False)
    weight = -second(m, [3.0]).reactions[:, 0].sum()
    assert weight == pytest.approx((0.1 * 0.2 * 6.0 - 0.1 * 0.05 * 0.2) * 7850.0 * G0, rel=1e-12)


def test_level_of_a_hold_brings_thrust() -> None:
    # both ends held along at the bottom: M at the ends = H h/2 and ∫(N/EA + M h/2 /EI) dx = 0
    ends = (dataclasses.replace(LEFT, level="bottom"), dataclasses.replace(RIGHT, along=INF, level="bottom"))
    m = member(BAR, supports=ends, loads=(UNIFORM,), shear=False)
    h, area, inertia = 0.2, 0.02, 0.1 * 0.2**3 / 12.0
    load = 1e4 * 6.0**3 / 12.0
    push = load * (h / 2.0) / inertia / (6.0 / area + 6.0 * (h / 2.0) ** 2 / inertia)
    found = second(m, [3.0])
    assert found.reactions[0, 1] == pytest.approx(push, rel=1e-12)
    assert found.reactions[1, 1] == pytest.approx(-push, rel=1e-12)


def test_shares_add_and_carry_their_own_moduli() -> None:
    m = member(TIMBER_TAPER, loads=(UNIFORM, dataclasses.replace(UNIFORM, case="snow")), shear=False)
    short, long = moduli(m).E, moduli(m, long_term=True).E
    both = second_method(m, [2.0], [LoadShare({"load": 1.0}, long), LoadShare({"snow": 0.5}, short)], short_E=short)
    one = second_method(m, [2.0], [LoadShare({"load": 1.0}, short)], short_E=short)
    assert both.deflection[0] == pytest.approx(one.deflection[0] * (1.6 + 0.5), rel=1e-12)
    assert both.work_check is None
    none = second_method(m, [2.0], [LoadShare({"load": 1.0}, short, only=lambda load: False)], short_E=short)
    assert not np.any(none.deflection) and none.error == 0.0


def test_a_bearing_that_lifted_off_holds_nothing() -> None:
    m = member(BAR, supports=(FIXED, dataclasses.replace(RIGHT, only_up=True)), loads=(UNIFORM,), shear=False)
    found = second(m, [6.0], lifted=frozenset({"right"}))
    assert found.reactions[1, 0] == 0.0
    expected = 1e4 * 6.0**4 / 8.0 / (210e9 * 0.1 * 0.2**3 / 12.0)
    assert found.deflection[0, 0] == pytest.approx(expected, rel=1e-12)


def test_work_lies_between_softest_and_stiffest() -> None:
    m = member(TAPER, supports=(FIXED, RIGHT), loads=(UNIFORM, Couple(2.0, 4e3), Point(4.0, 1e3)))
    found = second(m, [3.0], first(m)[3]).work_check
    assert found is not None
    assert found["stiffest"] < found["work"] < found["softest"]
    even = second(member(BAR, loads=(UNIFORM,), shear=False), [3.0]).work_check
    # ½ ∫ q w dx of a simple beam
    work = 0.5 * 1e4**2 * 6.0**5 / 120.0 / (210e9 * 0.1 * 0.2**3 / 12.0)
    assert even is not None and list(even.values()) == pytest.approx([work] * 3, rel=1e-12)
    sunk = member(BAR, supports=(LEFT, dataclasses.replace(RIGHT, sinks=0.01)))
    assert second(sunk, [3.0]).work_check is None


def test_what_can_move_is_a_mechanism() -> None:
    for supports in ((), (LEFT,)):
        with pytest.raises(Mechanism):
            second(member(BAR, supports=supports, shear=False), [3.0])
    loose = (dataclasses.replace(LEFT, along=0.0), RIGHT)
    with pytest.raises(Mechanism, match="along"):
        second(member(BAR, supports=loose, loads=(Axial(3.0, 5.0),), shear=False), [3.0])
    free = tuple(dataclasses.replace(s, across=0.0) for s in (LEFT, RIGHT))
    with pytest.raises(Mechanism, match="sideways"):
        second(member(BAR, supports=free, loads=(Point(3.0, 5.0, direction="across"),), shear=False), [3.0])
    assert np.any(second(member(BAR, supports=free, shear=False), [3.0]).deflection)


def test_a_gap_between_parts_has_no_stiffness() -> None:
    at = Placing("position", position=(constant(0.0), constant(0.0)))
    halves = (
        dataclasses.replace(BAR, end=2.0),
        dataclasses.replace(STRIP, start=2.5, end=6.0, place=at, run_in=(0.0, 0.0)),
    )
    with pytest.raises(NoStiffness):
        second(member(*halves, shear=False), [3.0])


def test_own_breaks_name_every_place() -> None:
    m = member(
        dataclasses.replace(TAPER, start=0.1, run_in=(0.2, 0.3)),
        notches=(Notch("bar", straight([2.0, 2.1, 2.2], [0.01, 0.02, 0.01]), 2.0, 2.2, reach=0.05),),
        haunches=(Haunch("bar", 3.0, 0.1, (0.25, 0.35)),),
        openings=(Opening(4.5, ("bar",), length=0.4, depth=0.05, radius=0.02),),
        supports=(dataclasses.replace(LEFT, at=0.15), RIGHT),
        hinges=(),
        loads=(Point(1.1, 1.0), Distributed(((1.2, 1.0), (1.3, 2.0), (1.4, 0.0))), Temperature(5.0, 5.1, top=1.0)),
        shear=False,
    )
    wanted = [0, 0.1, 0.15, 0.3, 1.1, 1.2, 1.3, 1.4, 1.95, 2, 2.1, 2.2, 2.25, 2.75, 3, 3.35]
    wanted += [4.3, 4.32, 4.5, 4.68, 4.7, 5, 5.1, 5.7, 6]
    assert own_breaks(m) == pytest.approx(wanted, rel=1e-14)


def test_rule_integrates_and_sees_its_tail() -> None:
    x = np.array([-1.0, -0.3, 0.4, 1.0])
    assert RULE.up_to(x) @ RULE.s**15 == pytest.approx((x**16 - 1.0) / 16.0, abs=1e-14)
    assert RULE.tail(np.exp(RULE.s)) < 1e-12 < 1e-3 < RULE.tail(np.abs(RULE.s))
    assert RULE.at_end(RULE.s**3, -1) == pytest.approx(-1.0, rel=1e-13)
