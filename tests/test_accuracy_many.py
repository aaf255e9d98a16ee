"""Steps and spans, few and thousands, against integrals of 30 digits and exact sums."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import math
from fractions import Fraction

import mpmath as mp
import numpy as np
import pytest
from common import (
    CLOSED,
    INF,
    PROMISED,
    STEEL,
    TAPER,
    cantilever,
    check_close,
    line,
    part,
    pin,
    reaction,
    roller,
    run,
    simple,
    simple_moment,
    station,
    uniform,
    unit_moment,
    work,
)
from taper_formulas import E, L, Q, rectangle_EI, tapered

from fishbelly.member.description import Member, Support
from fishbelly.member.laws import steps
from fishbelly.member.loads import Point


def test_steps() -> None:
    depths, ends = [0.045, 0.055, 0.034, 0.08], [0.06, 0.2, 0.42, 0.6]
    shaft = part("shaft", "circle", 0.6, diameter=steps(ends, depths))
    member = Member(0.6, (shaft,), (STEEL,), supports=simple(0.6), loads=(Point(0.15, 5e3),), shear=False)
    found = run(member, 0.0, 0.3)

    def EI(x: mp.mpf) -> mp.mpf:
        return E * mp.pi * mp.mpf(next(d for d, e in zip(depths, ends, strict=True) if x <= e)) ** 4 / 64

    M, places = unit_moment(0.15, 0.6), (0, *ends, 0.15, 0.3)
    check_close(station(found, 0.3)["deflection"], 5000 * work(M, unit_moment(0.3, 0.6), EI, places), TAPER)
    check_close(station(found, 0.0)["slope"], 5000 * work(M, lambda x: 1 - x / mp.mpf(0.6), EI, places), TAPER)


def test_ten_thousand_steps() -> None:
    count, length = 10_000, 50.0
    generator = np.random.default_rng(7)
    depths = 0.2 + 0.3 * generator.random(count)
    ends = np.linspace(0.0, length, count + 1)[1:]
    beam = part("b", "rectangle", length, width=0.1, depth=steps(ends, depths))
    member = Member(length, (beam,), (STEEL,), supports=cantilever(), loads=(Point(length, 1e3),), shear=False)
    tip = run(member, length)["ends"]["right"]
    EI = 210e9 * 0.1 * depths**3 / 12
    near = length - np.concatenate(([0.0], ends[:-1]))
    far = length - ends
    w = math.fsum(1e3 / (3 * EI) * (near - far) * (near**2 + near * far + far**2))
    check_close(tip["deflection"], w, PROMISED)
    check_close(tip["slope"], math.fsum(1e3 / (2 * EI) * (near - far) * (near + far)), PROMISED)


def test_ten_thousand_steps_propped() -> None:
    count, length = 10_000, 50.0
    generator = np.random.default_rng(8)
    depths = 0.2 + 0.3 * generator.random(count)
    ends = np.linspace(0.0, length, count + 1)[1:]
    beam = part("b", "rectangle", length, width=0.1, depth=steps(ends, depths))
    supports = (*cantilever(), roller("B", length))
    member = Member(length, (beam,), (STEEL,), supports=supports, loads=(uniform(1e3, length),), shear=False)
    EI = 210e9 * 0.1 * depths**3 / 12
    near, far = length - np.concatenate(([0.0], ends[:-1])), length - ends
    flexibility = math.fsum((near**3 - far**3) / (3 * EI))
    gap = math.fsum(1e3 * (near**4 - far**4) / (8 * EI))
    check_close(reaction(run(member, length), "B"), gap / flexibility, PROMISED)


def moments_of_equal_spans(count: int, loaded: set[int]) -> list[Fraction]:
    """Support moments over q l², three-moment equations in exact fractions (B. P. E. Clapeyron, 1857)."""
    right = [Fraction(-((k - 1 in loaded) + (k in loaded)), 4) for k in range(count + 1)]
    upper, value = [Fraction(0)], [Fraction(0)]
    for k in range(1, count):
        pivot = 4 - upper[-1]
        upper.append(1 / pivot)
        value.append((right[k] - value[-1]) / pivot)
    moments = [Fraction(0)] * (count + 1)
    for k in range(count - 1, 0, -1):
        moments[k] = value[k] - upper[k] * moments[k + 1]
    return moments


@pytest.mark.parametrize("loaded", [set(range(200)), {0}, {57, 58, 140}], ids=["all", "first", "some"])
def test_two_hundred_spans(loaded: set[int]) -> None:
    count, span = 200, 3.0
    length = count * span
    beam = part("b", "rectangle", length, width=0.1, depth=0.2)
    supports = tuple(roller(f"S{k}", k * span) if k else pin("S0", 0.0) for k in range(count + 1))
    loads = tuple(uniform(Q, (k + 1) * span, k * span) for k in sorted(loaded))
    found = run(
        Member(length, (beam,), (STEEL,), supports=supports, loads=loads, shear=False),
        *(k * span for k in range(count + 1)),
    )
    m = [float(v) for v in moments_of_equal_spans(count, loaded)]
    largest = max(abs(v) for v in m) * Q * span**2
    for k in range(count + 1):
        check_close(station(found, k * span)["M"], m[k] * Q * span**2, PROMISED, largest)
        force = sum(0.5 for j in (k - 1, k) if j in loaded)
        for j in (k - 1, k + 1):
            if 0 <= j <= count:
                force += m[j] - m[k]
        check_close(reaction(found, f"S{k}"), force * Q * span, PROMISED, Q * span)


def test_spans_of_very_unequal_length() -> None:
    """A short span beside a long one: three-moment equation, closed form."""
    a, b = 0.05, 20.0
    beam = part("b", "rectangle", a + b, width=0.1, depth=0.2)
    supports = (pin("A", 0.0), roller("B", a), roller("C", a + b))
    member = Member(a + b, (beam,), (STEEL,), supports=supports, loads=(uniform(Q, a + b),), shear=False)
    found = run(member, a)
    m = -Q * (a**3 + b**3) / (8 * (a + b))
    check_close(station(found, a)["M"], m, PROMISED)
    check_close(reaction(found, "A"), Q * a / 2 + m / a, PROMISED)
    check_close(reaction(found, "C"), Q * b / 2 + m / b, PROMISED)


def test_stiff_stretch_between_soft_ones() -> None:
    """A stretch ten million times as stiff as its neighbours turns as one piece."""
    law = steps([2.0, 4.0, 6.0], [0.01, 10.0, 0.01])
    beam = part("b", "rectangle", L, width=0.1, depth=law)
    member = Member(L, (beam,), (STEEL,), supports=simple(L), loads=(Point(3.0, 10.0),), shear=False)
    soft, stiff = 210e9 * 0.1 * 0.01**3 / 12, 210e9 * 0.1 * 10.0**3 / 12
    expected = 10.0 / 2 * (2.0**3 / 3 / soft + (3.0**3 - 2.0**3) / 3 / stiff)
    check_close(station(run(member, 3.0), 3.0)["deflection"], expected, CLOSED)


def test_support_kinds_of_a_taper_on_springs() -> None:
    """A tapered beam on two vertical springs and a rotational one: force method, one redundant."""
    depth = line(0, 0.4, L, 0.1)
    springs = (Support("A", 0.0, down=2e6, rotation=3e6, along=INF, across=INF), Support("B", L, down=5e5, across=INF))
    member = Member(L, tapered(0.4, 0.1), (STEEL,), supports=springs, loads=(uniform(Q, L),), shear=False)
    EI, M = rectangle_EI(depth), simple_moment(Q, L)
    # redundant: the moment m of the rotational spring on the left end, positive sagging in the member
    s = lambda x: 1 - x / mp.mpf(L)
    flexibility = work(s, s, EI, (0, L)) + 1 / mp.mpf(3e6) + (1 / mp.mpf(2e6) + 1 / mp.mpf(5e5)) / mp.mpf(L) ** 2
    half = mp.mpf(Q) * L / 2
    gap = work(M, s, EI, (0, L)) + (-half / mp.mpf(2e6) + half / mp.mpf(5e5)) / L
    m = -gap / flexibility
    found = run(member, 0.0, 3.0, L)
    check_close(reaction(found, "A", "moment"), m, PROMISED)
    check_close(reaction(found, "A"), half - m / L, PROMISED)
    check_close(reaction(found, "B"), half + m / L, PROMISED)
    check_close(station(found, L)["deflection"], (half + m / L) / mp.mpf(5e5), PROMISED)
    check_close(station(found, 0.0)["rotation"], -m / mp.mpf(3e6), PROMISED)
