"""Hinges, overhangs and mechanisms against closed forms."""

from __future__ import annotations

import pytest
from common import (
    CLOSED,
    INF,
    PROMISED,
    STEEL,
    check_close,
    fixed,
    part,
    pin,
    reaction,
    roller,
    run,
    simple,
    station,
    uniform,
)
from held_beams import BEAM, EI, B, H, L, P, Q, beam

from fishbelly.member.description import Hinge, Member, Part, Placing, Support
from fishbelly.member.faults import CannotCompute, Mechanism, NoStiffness
from fishbelly.member.laws import Law, constant, straight
from fishbelly.member.loads import Axial, Couple, Point

# hinges and overhangs


def test_hinge_between_a_cantilever_and_a_suspended_span() -> None:
    supports = (fixed("A", 0.0, along=INF), roller("B", L))
    found = run(beam(uniform(Q, L), supports=supports, hinges=(Hinge(2.0),)), 2.0)
    R = Q * (L - 2.0) / 2
    check_close(reaction(found, "B"), R, CLOSED)
    check_close(reaction(found, "A", "moment"), -(R * 2.0 + Q * 2.0), CLOSED)
    check_close(station(found, 2.0)["deflection"], R * 2.0**3 / (3 * EI) + Q * 2.0**4 / (8 * EI), CLOSED)
    assert abs(station(found, 2.0)["M"]) < CLOSED * Q * L**2
    left, right = station(found, 2.0, "left"), station(found, 2.0)
    check_close(left["slope"], R * 4 / (2 * EI) + Q * 8 / (6 * EI), CLOSED)
    span = L - 2.0
    check_close(right["slope"], -left["deflection"] / span + Q * span**3 / (24 * EI), CLOSED)


def test_hinges_of_a_gerber_beam() -> None:
    supports = tuple(roller(f"S{k}", k * L) if k else pin("S0", 0.0) for k in range(4))
    hinges = (Hinge(1.2 * L), Hinge(1.8 * L))
    found = run(beam(uniform(Q, 3 * L), supports=supports, length=3 * L, hinges=hinges), L)
    drop = 0.3 * Q * L
    m = -(drop * 0.2 * L + Q * (0.2 * L) ** 2 / 2)
    check_close(station(found, L)["M"], m, CLOSED)
    check_close(reaction(found, "S0"), Q * L / 2 + m / L, CLOSED)
    check_close(reaction(found, "S1"), Q * L / 2 - m / L + 0.5 * Q * L, CLOSED)


def test_hinge_at_a_support_cuts_the_beam_in_two() -> None:
    supports = (pin("A", 0.0), roller("C", L), roller("B", 2 * L))
    found = run(beam(uniform(Q, L), supports=supports, length=2 * L, hinges=(Hinge(L),)), L)
    check_close(reaction(found, "C"), Q * L / 2, CLOSED)
    assert abs(reaction(found, "B")) < CLOSED * Q * L
    check_close(station(found, L, "left")["slope"], -Q * L**3 / (24 * EI), CLOSED)
    check_close(station(found, L)["slope"], 0.0, CLOSED, Q * L**3 / EI)


@pytest.mark.parametrize("at, share", [(2.9999999, -0.25), (3.0, -0.25), (3.0000001, 0.75)])
def test_couple_beside_a_hinge(at: float, share: float) -> None:
    """Two cantilevers joined by a hinge; a couple at the hinge itself acts on the piece to its left."""
    supports = (fixed("A", 0.0, along=INF), fixed("B", L))
    found = run(beam(Couple(at, P), supports=supports, hinges=(Hinge(3.0),)))
    # the place is off by 1e-7 m of 3 m
    check_close(reaction(found, "A", "moment"), share * P, 1e-6)


def test_overhangs() -> None:
    a = 1.5
    length = L + 2 * a
    supports = (pin("A", a), roller("B", a + L))
    found = run(beam(Point(0.0, P), Point(length, P), supports=supports, length=length), 0.0, a, length / 2)
    check_close(station(found, a)["M"], -P * a, CLOSED)
    check_close(station(found, 0.0)["deflection"], P * a**2 * (2 * a + 3 * L) / (6 * EI), CLOSED)
    check_close(station(found, length / 2)["deflection"], -P * a * L**2 / (8 * EI), CLOSED)
    labels = [s["span"] for s in found["spans"]]
    assert labels == ["left", 1, "right"]


def test_overhang_with_a_load_along_it() -> None:
    """A force along x on an overhang passes through to the support that holds along, and off its level bends."""
    supports = (pin("A", 1.5), roller("B", 1.5 + L))
    found = run(beam(Axial(0.0, P, level="top"), supports=supports, length=L + 1.5), 0.5, 3.0)
    check_close(station(found, 0.5)["N"], -P, CLOSED)
    check_close(station(found, 0.5)["M"], P * H / 2, CLOSED)
    assert abs(station(found, 3.0)["N"]) < CLOSED * P


# mechanisms

HELD_ALONG = Support("X", 0.0, along=INF)


@pytest.mark.parametrize(
    "supports, hinges, load",
    [
        ((), (), Point(3.0, P)),
        ((pin("A", 2.0),), (), Point(3.0, P)),
        ((roller("A", 0.0), roller("B", L)), (), Axial(3.0, P)),
        ((HELD_ALONG,), (), Point(3.0, P)),
        (simple(L), (Hinge(3.0),), Point(2.0, P)),
        ((fixed("A", 0.0, along=INF), roller("B", L)), (Hinge(2.0), Hinge(4.0)), Point(3.0, P)),
        ((Support("G", 0.0, rotation=INF, along=INF), Support("G2", L, rotation=INF)), (), Point(3.0, P)),
        ((Support("A", 0.0, down=1e6, along=INF),), (), Point(3.0, P)),
        ((pin("A", 0.0), roller("B", L, across=0.0)), (), Point(3.0, P, direction="across")),
        ((pin("A", 2.0), roller("B", 4.0)), (Hinge(1.0),), Point(0.5, P)),
    ],
    ids=[
        "nothing",
        "one pin",
        "along",
        "only along",
        "hinge",
        "two hinges",
        "guides",
        "one spring",
        "sideways",
        "loose end",
    ],
)
def test_mechanisms_are_told_with_their_place(supports: tuple, hinges: tuple, load: object) -> None:
    member = Member(L, (BEAM,), (STEEL,), supports=supports, hinges=hinges, loads=(load,), shear=False)
    with pytest.raises(Mechanism) as fault:
        run(member)
    if supports:
        assert "x = " in str(fault.value) or "along" in str(fault.value)


def test_a_nearly_loose_member_is_no_mechanism() -> None:
    """A very soft rotational spring is enough, and what it gives is right."""
    k = 10.0
    supports = (Support("A", 0.0, down=INF, across=INF, along=INF, rotation=k),)
    found = run(beam(Point(L, 1.0), supports=supports), L)
    check_close(station(found, L)["rotation"], L / k + L**2 / (2 * EI), CLOSED)


def test_held_along_nowhere_is_fine_while_nothing_pushes() -> None:
    found = run(beam(uniform(Q, L), supports=(roller("A", 0.0), roller("B", L))), 3.0)
    check_close(station(found, 3.0)["deflection"], 5 * Q * L**4 / (384 * EI), CLOSED)
    twice = beam(Axial(1.0, P), Axial(5.0, -P), uniform(Q, L), supports=(roller("A", 0.0), roller("B", L)))
    check_close(station(run(twice, 3.0), 3.0)["N"], -P, CLOSED)


def in_two_pieces(end: float, start: float, **laws: Law) -> tuple[Part, Part]:
    """The beam in two pieces on the datum line; laws of x for its width or depth."""
    sizes = {"width": B, "depth": H} | laws
    on_datum = Placing("position", position=(constant(0.0), constant(0.0)), anchor="top")
    first = part("a", "rectangle", end, **sizes)
    return first, part("b", "rectangle", L, start=start, place=on_datum, **sizes)


def test_a_gap_between_parts_has_no_stiffness() -> None:
    with pytest.raises(NoStiffness) as fault:
        run(Member(L, in_two_pieces(2.0, 2.5), (STEEL,), supports=simple(L), loads=(Point(3.0, P),)))
    assert 2.0 < fault.value.at < 2.5


def test_depth_that_falls_to_nothing_in_the_span_has_no_stiffness() -> None:
    pieces = in_two_pieces(3.0, 3.0, depth=straight([0, 3, L], [H, 0.0, H]))
    with pytest.raises(CannotCompute) as fault:
        run(Member(L, pieces, (STEEL,), supports=simple(L), loads=(Point(3.0, P),), shear=False))
    assert "x = 3" in str(fault.value)


def test_beam_pointed_over_its_middle_support_with_a_hinge_there() -> None:
    """The width runs out to a point over the middle support; with a hinge there the spans stand on their own."""
    pieces = in_two_pieces(3.0, 3.0, width=straight([0, 3, L], [B, 0.0, B]))
    supports = (pin("A", 0.0), roller("C", 3.0), roller("B", L))
    loads = (uniform(Q, L),)
    found = run(
        Member(L, pieces, (STEEL,), supports=supports, hinges=(Hinge(3.0),), loads=loads, shear=False), 0.0, 3.0
    )
    check_close(reaction(found, "C"), Q * 3.0, CLOSED)
    # M / EI = q s (a - s) / 2 / (EI s / a) with s from the middle, a = 3: a straight line
    k = Q * 3.0 / (2 * EI)
    check_close(station(found, 0.0)["slope"], k * 3.0**2 / 6, PROMISED)
    check_close(station(found, 3.0)["slope"], k * 3.0**2 / 3, PROMISED)


def test_beam_pointed_over_its_middle_support_without_a_hinge() -> None:
    """No moment can pass the point: the values of two beams, or an error that names the place; never others."""
    pieces = in_two_pieces(3.0, 3.0, width=straight([0, 3, L], [B, 0.0, B]))
    supports = (pin("A", 0.0), roller("C", 3.0), roller("B", L))
    member = Member(L, pieces, (STEEL,), supports=supports, loads=(uniform(Q, L),), shear=False)
    try:
        found = run(member, 3.0)
    except CannotCompute as fault:
        assert "x = 3" in str(fault)
    else:
        assert abs(station(found, 3.0)["M"]) < PROMISED * Q * 9
