"""Every way of holding, releasing, pushing, heating and shrinking a member, against closed forms.

The beam is prismatic so that each expected value is one line of strength of materials; bending alone unless said.
"""

from __future__ import annotations

import itertools
import math
from dataclasses import replace

import numpy as np
import pytest
from common import (
    CLOSED,
    CONCRETE,
    INF,
    PROMISED,
    STEEL,
    cantilever,
    case,
    close,
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

from fishbelly.member.description import Combination, Hinge, Material, Member, Part, Placing, Station, Support
from fishbelly.member.faults import CannotCompute, Mechanism, NoStiffness
from fishbelly.member.laws import Law, constant, straight
from fishbelly.member.loads import Axial, Couple, Distributed, Point, Prestress, SelfWeight, Shrinkage, Temperature
from fishbelly.member.results import deflect

L, Q, P = 6.0, 1.0e4, 2.0e4
H, B = 0.2, 0.1
E, A = 210e9, 0.02
EI, EA, GA = E * B * H**3 / 12, E * A, 81e9 * A * 5 / 6
HOT = 12e-6
BEAM = part("beam", "rectangle", L, width=B, depth=H)


def beam(*loads: object, supports: tuple[Support, ...] = (), length: float = L, **more: object) -> Member:
    piece = replace(BEAM, end=length)
    return Member(
        length, (piece,), (STEEL,), supports=supports or simple(length), loads=loads, **({"shear": False} | more)
    )


# springs and guides


@pytest.mark.parametrize("shear", [False, True])
def test_spring_under_midspan(shear: bool) -> None:
    k = 5e6
    supports = (pin("A", 0.0), Support("S", L / 2, down=k), roller("B", L))
    found = run(beam(uniform(Q, L), supports=supports, shear=shear), L / 2)
    free = 5 * Q * L**4 / (384 * EI) + shear * Q * L**2 / (8 * GA)
    give = L**3 / (48 * EI) + shear * L / (4 * GA)
    R = free / (give + 1 / k)
    close(reaction(found, "S"), R, CLOSED)
    close(station(found, L / 2)["deflection"], R / k, CLOSED)


def test_rotational_spring_at_an_end() -> None:
    k = 3e6
    supports = (Support("A", 0.0, down=INF, across=INF, along=INF, rotation=k), roller("B", L))
    found = run(beam(uniform(Q, L), supports=supports), 0.0)
    m = -Q * L**3 / (24 * EI) / (L / (3 * EI) + 1 / k)
    close(reaction(found, "A", "moment"), m, CLOSED)
    close(station(found, 0.0)["rotation"], -m / k, CLOSED)


def test_rotational_spring_in_the_middle_of_a_continuous_beam() -> None:
    """A column that holds the middle support's rotation: each span sees half of it when one is loaded."""
    k = 4e6
    supports = (pin("A", 0.0), Support("C", L, down=INF, across=INF, rotation=k), roller("B", 2 * L))
    found = run(beam(uniform(Q, L), supports=supports, length=2 * L), L)
    # slope deflection with far ends pinned: (2 * 3EI/L + k) theta = -qL²/8
    theta = -Q * L**2 / 8 / (6 * EI / L + k)
    close(station(found, L)["rotation"], theta, CLOSED)
    close(reaction(found, "C", "moment"), -k * theta, CLOSED)
    close(station(found, L, "left")["M"], -Q * L**2 / 8 - 3 * EI / L * theta, CLOSED)
    close(station(found, L)["M"], 3 * EI / L * theta, CLOSED)


def test_all_springs_sink_as_a_rigid_body() -> None:
    """Two springs under a stiff beam: deflection is force over stiffness and leans."""
    supports = (Support("A", 0.0, down=1e3, along=INF, across=INF), Support("B", L, down=3e3, across=INF))
    found = run(beam(Point(2.0, 300.0), supports=supports), 0.0, L)
    close(station(found, 0.0)["deflection"], 200.0 / 1e3, CLOSED)
    close(station(found, L)["deflection"], 100.0 / 3e3, CLOSED)


def test_guide_at_the_tip() -> None:
    supports = (fixed("A", 0.0, along=INF), Support("G", L, rotation=INF))
    found = run(beam(Point(L, P), supports=supports), L)
    close(station(found, L)["deflection"], P * L**3 / (12 * EI), CLOSED)
    close(reaction(found, "G", "moment"), -P * L / 2, CLOSED)
    assert reaction(found, "G") == 0.0
    assert abs(station(found, L)["slope"]) < 1e-16


def test_guide_in_midspan_changes_nothing_where_symmetry_holds() -> None:
    supports = (*simple(L), Support("G", L / 2, rotation=INF))
    found = run(beam(uniform(Q, L), supports=supports), L / 2)
    close(station(found, L / 2)["deflection"], 5 * Q * L**4 / (384 * EI), CLOSED)
    assert abs(reaction(found, "G", "moment")) < CLOSED * Q * L**2


def test_guide_in_midspan_under_one_half_loaded() -> None:
    """The antisymmetric half: two spans of a beam that is propped at its end and fixed in rotation, free to move."""
    supports = (*simple(L), Support("G", L / 2, rotation=INF))
    found = run(beam(uniform(Q, L / 2), supports=supports), L / 2)
    # rotation of the free beam in midspan under half the load: all from +-q/2
    a, q = L / 2, Q / 2
    theta = -q * a**3 / (24 * EI)
    m = -theta / (a / (6 * EI))
    close(abs(reaction(found, "G", "moment")), abs(m), CLOSED)


# along


def test_along_spring_shares_an_axial_force() -> None:
    k = 1e9
    supports = (pin("A", 0.0), roller("B", L, along=k))
    found = run(beam(Axial(2.0, P), supports=supports), 1.0, 4.0)
    left, right = EA / 2.0, 1 / ((L - 2.0) / EA + 1 / k)
    close(reaction(found, "A", "along"), -P * left / (left + right), CLOSED)
    close(reaction(found, "B", "along"), -P * right / (left + right), CLOSED)
    close(station(found, 1.0)["N"], P * left / (left + right), CLOSED)
    close(station(found, 4.0)["N"], -P * right / (left + right), CLOSED)


@pytest.mark.parametrize(
    "level, arm",
    [("centroid", 0.0), ("bottom", H / 2), ("top", -H / 2), ("datum", -H / 2), (-0.17, 0.07), (-0.5, 0.4)],
)
def test_thrust_by_the_level_at_which_both_ends_are_held(level: str | float, arm: float) -> None:
    """Both ends held along, `arm` below the centroid, under a uniform load."""
    supports = (pin("A", 0.0, level=level), pin("B", L, level=level))
    found = run(beam(uniform(Q, L), supports=supports), 0.0, L / 2, L)
    N = -(Q * L**3 * arm / (12 * EI)) / (L / EA + L * arm**2 / EI)
    close(station(found, L / 2)["N"], N, CLOSED, Q * L)
    close(reaction(found, "A", "along"), -N, CLOSED, Q * L)
    close(reaction(found, "B", "along"), N, CLOSED, Q * L)
    close(station(found, 0.0)["M"], N * arm, CLOSED, Q * L**2)
    close(station(found, L / 2)["M"], Q * L**2 / 8 + N * arm, CLOSED)
    close(station(found, L / 2)["deflection"], 5 * Q * L**4 / (384 * EI) + N * arm * L**2 / (8 * EI), CLOSED)
    assert abs(reaction(found, "A", "moment")) < CLOSED * Q * L**2


def test_thrust_with_an_along_spring() -> None:
    arm, k = H / 2, 2e8
    supports = (pin("A", 0.0, level="bottom"), roller("B", L, along=k, level="bottom"))
    N = -(Q * L**3 * arm / (12 * EI)) / (L / EA + L * arm**2 / EI + 1 / k)
    close(reaction(run(beam(uniform(Q, L), supports=supports)), "A", "along"), -N, CLOSED)


def test_ends_held_at_different_levels() -> None:
    """Left at the bottom, right at the top: the line of thrust runs through the section."""
    supports = (pin("A", 0.0, level="bottom"), pin("B", L, level="top"))
    found = run(beam(Distributed(((0, 0), (L, Q))), supports=supports), 0.0, L)
    # arm from +h/2 to -h/2: integral of arm² = L h²/12, of M0 * arm for a triangular load
    x = np.polynomial.legendre.leggauss(8)
    s = (x[0] + 1) * L / 2
    M0, arm = Q * s * (L**2 - s**2) / (6 * L), H / 2 - H * s / L
    N = -float((M0 * arm * x[1]).sum() * L / 2) / EI / (L / EA + L * H**2 / 12 / EI)
    close(reaction(found, "B", "along"), N, CLOSED)
    close(station(found, L)["M"], -N * H / 2, CLOSED)
    # vertical forces of the inclined line of thrust about the left pin
    close(reaction(found, "B"), Q * L / 3 + N * H / L, CLOSED)


@pytest.mark.parametrize(
    "level, up", [("centroid", 0.0), ("top", H / 2), ("bottom", -H / 2), ("datum", H / 2), (-0.16, -0.06)]
)
def test_axial_force_off_the_centroid_bends(level: str | float, up: float) -> None:
    found = run(beam(Axial(L, P, level=level), supports=cantilever()), 3.0, L)
    close(station(found, 3.0)["N"], P, CLOSED)
    close(station(found, 3.0)["M"], -P * up, CLOSED, P * H)
    close(station(found, L)["deflection"], P * up * L**2 / (2 * EI), CLOSED, P * H * L**2 / EI)
    close(reaction(found, "A", "along"), -P, CLOSED)


@pytest.mark.parametrize("level", ["centroid", "datum"])
def test_axial_force_through_the_centroid_does_not_bend_beyond_round_off(level: str) -> None:
    """Two tubes one over the other, the datum line between them: deflections are round-off, and that is no fault."""
    lower = part("lower", "tube", L, diameter=0.1, wall=0.01)
    upper = part("upper", "tube", L, diameter=0.1, wall=0.01, place=Placing("over", "lower"))
    member = Member(
        L, (lower, upper), (STEEL,), supports=cantilever(), loads=(Axial(3.75, P, level=level),), shear=False
    )
    assert abs(station(run(member, L), L)["deflection"]) < 1e-15


# settlement and jacking


@pytest.mark.parametrize("sinks", [0.01, -0.02])
def test_settlement_of_the_middle_support(sinks: float) -> None:
    supports = (pin("A", 0.0), roller("C", L, sinks=sinks), roller("B", 2 * L))
    found = run(beam(supports=supports, length=2 * L), L)
    close(reaction(found, "C"), -6 * EI * sinks / L**3, CLOSED)
    close(station(found, L)["deflection"], sinks, CLOSED)
    close(station(found, L)["M"], 3 * EI * sinks / L**2, CLOSED)
    assert found["deflection"]["down" if sinks > 0 else "up"]["value"] == pytest.approx(abs(sinks), rel=1e-12)


def test_settlement_of_a_fixed_end_and_of_a_spring() -> None:
    sinks, k = 0.012, 4e6
    found = run(beam(supports=(fixed("A", 0.0, along=INF), fixed("B", L, sinks=sinks))))
    close(reaction(found, "A", "moment"), 6 * EI * sinks / L**2 * -1, CLOSED)
    close(reaction(found, "B"), -12 * EI * sinks / L**3, CLOSED)
    found = run(beam(supports=(fixed("A", 0.0, along=INF), Support("B", L, down=k, across=INF, sinks=sinks))), L)
    w = sinks * k / (k + 3 * EI / L**3)
    close(station(found, L)["deflection"], w, CLOSED)
    close(reaction(found, "B"), -k * (sinks - w), CLOSED)


def test_settlement_belongs_to_its_case() -> None:
    supports = (pin("A", 0.0), roller("C", L, sinks=0.01), roller("B", 2 * L, sinks=0.02, case="later"))
    both = (case("first", settlement=1.0), case("twice", settlement=2.0, later=-1.0))
    member = beam(supports=supports, length=2 * L, combinations=both)
    first, twice = (run(member, L, 2 * L, combination=k) for k in (0, 1))
    close(station(first, L)["deflection"], 0.01, CLOSED)
    close(station(twice, L)["deflection"], 0.02, CLOSED)
    close(station(twice, 2 * L)["deflection"], -0.02, CLOSED)


def test_a_determinate_member_follows_settlement_without_force() -> None:
    found = run(beam(supports=(pin("A", 0.0), roller("B", L, sinks=0.03))), 2.0)
    close(station(found, 2.0)["deflection"], 0.01, CLOSED)
    assert abs(station(found, 2.0)["M"]) < 1e-6


# bearings that cannot pull


def test_bearing_lifts_off() -> None:
    supports = (pin("A", 0.0), roller("C", L), roller("B", 2 * L, only_up=True))
    lifted = run(beam(uniform(Q, L), supports=supports, length=2 * L), 2 * L)
    gone = run(beam(uniform(Q, L), supports=supports[:2], length=2 * L), 2 * L)
    assert lifted["lifted"] == ["B"] and reaction(lifted, "B") == 0.0
    close(station(lifted, 2 * L)["deflection"], station(gone, 2 * L)["deflection"], CLOSED)
    close(station(lifted, 2 * L)["deflection"], -Q * L**3 / (24 * EI) * L, CLOSED)
    assert next(s for s in lifted["supports"] if s["name"] == "B")["lifted"] is True


def test_bearing_stays_where_it_is_pressed() -> None:
    supports = (pin("A", 0.0), roller("C", L), roller("B", 2 * L, only_up=True))
    found = run(beam(uniform(Q, 2 * L), supports=supports, length=2 * L))
    close(reaction(found, "B"), 0.375 * Q * L, CLOSED)
    assert not found.get("lifted")


@pytest.mark.parametrize("factor", [0.5, 0.99, 1.01, 3.0])
def test_bearing_with_a_gap_closes_when_the_load_is_large_enough(factor: float) -> None:
    gap = 0.01
    q = factor * gap * 384 * EI / (5 * (2 * L) ** 4)
    supports = (pin("A", 0.0), roller("C", L, only_up=True, sinks=gap, case="load"), roller("B", 2 * L))
    found = run(beam(uniform(q, 2 * L), supports=supports, length=2 * L), L)
    free = factor * gap
    close(reaction(found, "C"), max(0.0, free - gap) * 48 * EI / (2 * L) ** 3, PROMISED, q * L)
    close(station(found, L)["deflection"], min(free, gap), PROMISED)


def test_bearings_are_judged_by_combination() -> None:
    supports = (pin("A", 0.0), roller("C", L), roller("B", 2 * L, only_up=True))
    loads = (uniform(Q, L, case="left"), uniform(Q, 2 * L, L, case="right"))
    pair = (case("left alone", left=1.0), case("both", left=1.0, right=1.0))
    member = beam(*loads, supports=supports, length=2 * L, combinations=pair)
    assert reaction(run(member, combination=0), "B") == 0.0
    close(reaction(run(member, combination=1), "B"), 0.375 * Q * L, CLOSED)


def test_several_bearings_of_a_long_beam_lift() -> None:
    """Only the two supports of the loaded span and those that press stay; each state is checked against the rest."""
    n = 6
    supports = (pin("S0", 0.0, only_up=True), *(roller(f"S{k}", k * L, only_up=True) for k in range(1, n + 1)))
    found = run(beam(Point(2.5 * L, P), supports=supports, length=n * L), *(k * L for k in range(n + 1)))
    stays = {s["name"] for s in found["supports"] if not s["lifted"]}
    for s in found["supports"]:
        w = station(found, s["at"])["deflection"]
        if s["name"] in stays:
            assert s["vertical"] > 0.0 and abs(w) < 1e-12
        else:
            assert s["vertical"] == 0.0 and w < 0.0
    without = run(
        beam(Point(2.5 * L, P), supports=tuple(s for s in supports if s.name in stays), length=n * L), 2.5 * L
    )
    close(found["deflection"]["down"]["value"], without["deflection"]["down"]["value"], CLOSED)


def test_uplift_on_bearings_alone_cannot_be_carried() -> None:
    supports = (pin("A", 0.0, only_up=True), roller("B", L, only_up=True))
    with pytest.raises(CannotCompute):
        run(beam(uniform(-Q, L), supports=supports))


# hinges and overhangs


def test_hinge_between_a_cantilever_and_a_suspended_span() -> None:
    supports = (fixed("A", 0.0, along=INF), roller("B", L))
    found = run(beam(uniform(Q, L), supports=supports, hinges=(Hinge(2.0),)), 2.0)
    R = Q * (L - 2.0) / 2
    close(reaction(found, "B"), R, CLOSED)
    close(reaction(found, "A", "moment"), -(R * 2.0 + Q * 2.0), CLOSED)
    close(station(found, 2.0)["deflection"], R * 2.0**3 / (3 * EI) + Q * 2.0**4 / (8 * EI), CLOSED)
    assert abs(station(found, 2.0)["M"]) < CLOSED * Q * L**2
    left, right = station(found, 2.0, "left"), station(found, 2.0)
    close(left["slope"], R * 4 / (2 * EI) + Q * 8 / (6 * EI), CLOSED)
    span = L - 2.0
    close(right["slope"], -left["deflection"] / span + Q * span**3 / (24 * EI), CLOSED)


def test_hinges_of_a_gerber_beam() -> None:
    supports = tuple(roller(f"S{k}", k * L) if k else pin("S0", 0.0) for k in range(4))
    hinges = (Hinge(1.2 * L), Hinge(1.8 * L))
    found = run(beam(uniform(Q, 3 * L), supports=supports, length=3 * L, hinges=hinges), L)
    drop = 0.3 * Q * L
    m = -(drop * 0.2 * L + Q * (0.2 * L) ** 2 / 2)
    close(station(found, L)["M"], m, CLOSED)
    close(reaction(found, "S0"), Q * L / 2 + m / L, CLOSED)
    close(reaction(found, "S1"), Q * L / 2 - m / L + 0.5 * Q * L, CLOSED)


def test_hinge_at_a_support_cuts_the_beam_in_two() -> None:
    supports = (pin("A", 0.0), roller("C", L), roller("B", 2 * L))
    found = run(beam(uniform(Q, L), supports=supports, length=2 * L, hinges=(Hinge(L),)), L)
    close(reaction(found, "C"), Q * L / 2, CLOSED)
    assert abs(reaction(found, "B")) < CLOSED * Q * L
    close(station(found, L, "left")["slope"], -Q * L**3 / (24 * EI), CLOSED)
    close(station(found, L)["slope"], 0.0, CLOSED, Q * L**3 / EI)


@pytest.mark.parametrize("at, share", [(2.9999999, -0.25), (3.0, -0.25), (3.0000001, 0.75)])
def test_couple_beside_a_hinge(at: float, share: float) -> None:
    """Two cantilevers joined by a hinge; a couple at the hinge itself acts on the piece to its left."""
    supports = (fixed("A", 0.0, along=INF), fixed("B", L))
    found = run(beam(Couple(at, P), supports=supports, hinges=(Hinge(3.0),)))
    # the place is off by 1e-7 m of 3 m
    close(reaction(found, "A", "moment"), share * P, 1e-6)


def test_overhangs() -> None:
    a = 1.5
    length = L + 2 * a
    supports = (pin("A", a), roller("B", a + L))
    found = run(beam(Point(0.0, P), Point(length, P), supports=supports, length=length), 0.0, a, length / 2)
    close(station(found, a)["M"], -P * a, CLOSED)
    close(station(found, 0.0)["deflection"], P * a**2 * (2 * a + 3 * L) / (6 * EI), CLOSED)
    close(station(found, length / 2)["deflection"], -P * a * L**2 / (8 * EI), CLOSED)
    labels = [s["span"] for s in found["spans"]]
    assert labels == ["left", 1, "right"]


def test_overhang_with_a_load_along_it() -> None:
    """A force along x on an overhang passes through to the support that holds along, and off its level bends."""
    supports = (pin("A", 1.5), roller("B", 1.5 + L))
    found = run(beam(Axial(0.0, P, level="top"), supports=supports, length=L + 1.5), 0.5, 3.0)
    close(station(found, 0.5)["N"], -P, CLOSED)
    close(station(found, 0.5)["M"], P * H / 2, CLOSED)
    assert abs(station(found, 3.0)["N"]) < CLOSED * P


# inclined members


RISES = math.radians(25.0)


@pytest.mark.parametrize("per, share", [("slope", 1.0), ("plan", math.cos(RISES))])
def test_inclined_member_under_vertical_load(per: str, share: float) -> None:
    found = run(beam(uniform(Q, L, per=per), rises=RISES), 0.0, 3.0)
    down, along = Q * share * math.cos(RISES), -Q * share * math.sin(RISES)
    close(station(found, 3.0)["deflection"], 5 * down * L**4 / (384 * EI), CLOSED)
    close(reaction(found, "A"), down * L / 2, CLOSED)
    close(reaction(found, "A", "along"), -along * L, CLOSED)
    close(station(found, 0.0)["N"], along * L, CLOSED)
    close(station(found, 3.0)["N"], along * L / 2, CLOSED)


def test_inclined_member_under_square_load_point_and_weight() -> None:
    loads = (Point(3.0, P, per="slope", case="point"), SelfWeight(case="weight"), uniform(Q, L, case="square"))
    cases = (case("point", point=1.0), case("weight", weight=1.0), case("square", square=1.0))
    member = beam(*loads, rises=RISES, combinations=cases)
    point, weight, square = (run(member, 0.0, combination=k) for k in range(3))
    close(reaction(point, "A"), P * math.cos(RISES) / 2, CLOSED)
    close(reaction(point, "A", "along"), P * math.sin(RISES), CLOSED)
    w = 7850 * A * 9.80665 * L
    close(reaction(weight, "A") + reaction(weight, "B"), w * math.cos(RISES), CLOSED)
    close(reaction(weight, "A", "along"), w * math.sin(RISES), CLOSED)
    assert reaction(square, "A", "along") == pytest.approx(0.0, abs=1e-9)


def test_upright_pole_has_no_bending_by_its_weight() -> None:
    found = run(beam(SelfWeight(), rises=math.pi / 2, supports=cantilever()), 0.0)
    close(station(found, 0.0)["N"], -7850 * A * 9.80665 * L, CLOSED)
    assert abs(station(found, 0.0)["M"]) < 1e-9


def test_weight_along_an_inclined_member_bends_by_the_centroid_of_mass() -> None:
    """A heavy pad with hardly any stiffness on top of an upright pole bends it."""
    pad = Material("pad", 1.0, poisson=0.0, density=2000.0)
    top = part("pad", "rectangle", L, material="pad", width=B, depth=0.1, place=Placing("over", "beam"))
    member = Member(
        L, (BEAM, top), (STEEL, pad), supports=cantilever(), loads=(SelfWeight(),), rises=math.pi / 2, shear=False
    )
    found = run(member, 0.0)
    weight = 2000.0 * B * 0.1 * 9.80665
    # weight acts towards -x at 0.15 m above the centroid: sagging
    close(station(found, 0.0)["M"], weight * L * 0.15, 1e-9)


# couples, temperature, shrinkage, prestress


def test_couple_on_a_simple_beam() -> None:
    c = 3.0e4
    found = run(beam(Couple(2.0, c)), 0.0, 2.0)
    close(reaction(found, "A"), -c / L, CLOSED)
    close(station(found, 2.0, "left")["M"], -c * 2.0 / L, CLOSED)
    close(station(found, 2.0)["M"], c * 4.0 / L, CLOSED)
    # rotation under the couple: C (a³ + b³) / (3 EI L²), clockwise as the couple
    close(station(found, 2.0)["slope"], c * (2.0**3 + 4.0**3) / (3 * EI * L**2), CLOSED)


def test_couples_at_both_ends_of_a_cantilever_and_over_a_support() -> None:
    c = 1.0e4
    found = run(beam(Couple(L, c), supports=cantilever()), L)
    close(station(found, L)["deflection"], c * L**2 / (2 * EI), CLOSED)
    close(reaction(found, "A", "moment"), -c, CLOSED)
    supports = (pin("A", 0.0), roller("C", L), roller("B", 2 * L))
    found = run(beam(Couple(L, c), supports=supports, length=2 * L), L)
    close(station(found, L, "left")["M"], -c / 2, CLOSED)
    close(station(found, L)["M"], c / 2, CLOSED)


@pytest.mark.parametrize("top, bottom", [(30.0, 0.0), (0.0, 20.0), (25.0, 25.0), (-10.0, 15.0)])
def test_temperature(top: float, bottom: float) -> None:
    heat = Temperature(0.0, L, top=top, bottom=bottom)
    k = HOT * (top - bottom) / H
    free = run(beam(heat), 3.0)
    close(station(free, 3.0)["deflection"], -k * L**2 / 8, CLOSED, HOT * 30 / H * L**2)
    assert abs(station(free, 3.0)["M"]) < 1e-6
    assert all(abs(s["max"]["value"]) < 1.0 for s in free["stress"])
    propped = run(beam(heat, supports=(fixed("A", 0.0, along=INF), roller("B", L))), 0.0)
    close(reaction(propped, "B"), 1.5 * EI * k / L, CLOSED, EI * HOT * 30 / H / L)
    close(station(propped, 0.0)["M"], 1.5 * EI * k, CLOSED, EI * HOT * 30 / H)
    held = run(beam(heat, supports=(fixed("A", 0.0, along=INF), fixed("B", L, along=INF))), 3.0)
    close(station(held, 3.0)["M"], EI * k, CLOSED, EI * HOT * 30 / H)
    close(station(held, 3.0)["N"], -EA * HOT * (top + bottom) / 2, CLOSED, EA * HOT * 30)
    assert abs(station(held, 3.0)["deflection"]) < 1e-15


def test_temperature_over_a_stretch() -> None:
    k = HOT * 30.0 / H
    found = run(beam(Temperature(1.0, 3.0, top=30.0)), 0.0, 3.0)
    # a kink spread over 2 m, centred at 2 m: w(3) by virtual work of the unit moment
    unit = 0.25 * (3.0**2 - 1.0**2)
    close(station(found, 3.0)["deflection"], -k * unit, CLOSED)
    close(station(found, 0.0)["slope"], -k * 2.0 * 4.0 / 6.0, CLOSED)


def test_temperature_of_one_part_of_two() -> None:
    upper = part("upper", "rectangle", L, width=B, depth=H, place=Placing("over", "beam"))
    heat = Temperature(0.0, L, parts={"upper": 40.0})
    member = Member(L, (BEAM, upper), (STEEL,), supports=simple(L), loads=(heat,), shear=False)
    found = run(member, 3.0)
    # two equal halves: kappa = EA a dT e / EI_total
    kappa = EA * HOT * 40.0 * (H / 2) / (E * B * (2 * H) ** 3 / 12)
    close(station(found, 3.0)["deflection"], -kappa * L**2 / 8, CLOSED)
    stress = {s["part"]: s for s in found["stress"]}
    e0 = HOT * 40.0 / 2
    # at the joint: strain e0 both sides, the upper part wanted more
    close(stress["upper"]["min"]["value"], E * (e0 - HOT * 40.0), CLOSED)
    close(stress["beam"]["max"]["value"], E * e0, CLOSED)
    close(stress["beam"]["min"]["value"], E * (e0 - kappa * H), CLOSED)


SLAB = part("slab", "rectangle", L, material="concrete", width=1.0, depth=0.12, place=Placing("over", "beam"))
E_SLAB, A_SLAB = 33e9, 0.12


def composite(*loads: object, supports: tuple[Support, ...] = (), **more: object) -> Member:
    parts = (BEAM, replace(SLAB, place=Placing("over", "beam")))
    steel = replace(STEEL, creep=0.0)
    return Member(L, parts, (steel, CONCRETE), supports=supports or simple(L), loads=loads, **({"shear": False} | more))


def composite_stiffness(n: float = 1.0) -> tuple[float, float]:
    """EI about the common centroid and the arm of the slab's centroid above it; slab modulus divided by n."""
    one, two, gap = EA, E_SLAB / n * A_SLAB, H / 2 + 0.06
    total = EI + E_SLAB / n * 1.0 * 0.12**3 / 12 + one * two / (one + two) * gap**2
    return total, one / (one + two) * gap


def test_shrinkage_of_a_slab_on_steel() -> None:
    strain = 3.2e-4
    total, arm = composite_stiffness()
    kappa = E_SLAB * A_SLAB * strain * arm / total
    found = run(composite(Shrinkage("slab", strain, 0.0, L)), 3.0)
    close(station(found, 3.0)["deflection"], kappa * L**2 / 8, CLOSED)
    supports = (pin("A", 0.0), roller("C", 3.0), roller("B", L))
    held = run(composite(Shrinkage("slab", strain, 0.0, L), supports=supports), 3.0)
    close(reaction(held, "C"), kappa * L**2 / 8 * 48 * total / L**3, CLOSED)


@pytest.mark.parametrize("creep, by", [(None, 1 + 2.0), (0.5, 1.5)])
def test_sustained_shrinkage_acts_on_long_term_moduli(creep: float | None, by: float) -> None:
    strain = 3.2e-4
    total, arm = composite_stiffness(by)
    kappa = E_SLAB / by * A_SLAB * strain * arm / total
    lasting = Combination("long", {"load": 1.0}, {"load": 1.0})
    found = run(composite(Shrinkage("slab", strain, 0.0, L, creep=creep), combinations=(lasting,)), 3.0)
    close(station(found, 3.0)["deflection"], kappa * L**2 / 8, CLOSED)


@pytest.mark.parametrize("by_force", [True, False])
def test_prestress_of_one_part(by_force: bool) -> None:
    tie = part("tie", "rectangle", L, width=0.05, depth=0.01, place=Placing("under", "beam"))
    force = 1.0e5
    load = Prestress("tie", force=force) if by_force else Prestress("tie", strain=force / (E * 5e-4))
    member = Member(L, (BEAM, tie), (STEEL,), supports=simple(L), loads=(load,), shear=False)
    found = run(member, 3.0)
    one, two, gap = EA, E * 5e-4, H / 2 + 0.005
    total = EI + E * 0.05 * 0.01**3 / 12 + one * two / (one + two) * gap**2
    arm = one / (one + two) * gap
    kappa = force * arm / total
    close(station(found, 3.0)["deflection"], -kappa * L**2 / 8, CLOSED)
    assert abs(station(found, 3.0)["M"]) < 1e-6
    stress = {s["part"]: s for s in found["stress"]}
    e0 = -force / (one + two)
    # the tie's own fibres, from its centroid `arm` below the common one
    upper = E * (force / two + e0) - E * kappa * (arm - 0.005)
    lower = E * (force / two + e0) - E * kappa * (arm + 0.005)
    close(stress["tie"]["max"]["value"], upper, CLOSED)
    close(stress["tie"]["min"]["value"], lower, CLOSED)


# unsymmetric sections and loads across


def z_section(*loads: object, supports: tuple[Support, ...]) -> Member:
    parts = (
        part("web", "rectangle", L, width=0.01, depth=0.2),
        part("top", "rectangle", L, width=0.08, depth=0.01, place=Placing("over", "web", flush="left")),
        part("bottom", "rectangle", L, width=0.08, depth=0.01, place=Placing("under", "web", flush="right")),
    )
    return Member(L, parts, (STEEL,), supports=supports, loads=loads, shear=False)


def z_compliance() -> np.ndarray:
    """Inverse of the bending stiffness: curvatures (k_y, k_z) under (M_y, M_z)."""
    y, f = 0.035, 0.08 * 0.01
    iy = 0.01 * 0.2**3 / 12 + 2 * (0.08 * 0.01**3 / 12 + f * 0.105**2)
    iz = 0.2 * 0.01**3 / 12 + 2 * (0.01 * 0.08**3 / 12 + f * y**2)
    # the top flange reaches to the right of the web when left edges are flush
    iyz = 2 * f * y * 0.105
    return np.linalg.inv(E * np.array([[iy, iyz], [iyz, iz]]))


def test_z_section_moves_aside_under_vertical_load() -> None:
    found = run(z_section(uniform(1e3, L), supports=simple(L)), 3.0)
    c = z_compliance()
    shape = 5 * 1e3 * L**4 / 384
    close(station(found, 3.0)["deflection"], shape * c[0, 0], CLOSED)
    # down'' = -k_y and across'' = +k_z: across carries the other sign
    close(station(found, 3.0)["across"], -shape * c[1, 0], CLOSED)
    close(found["deflection"]["across"]["value"], -shape * c[1, 0], CLOSED)


def test_z_section_held_sideways_in_midspan() -> None:
    supports = (*simple(L), Support("side", 3.0, across=INF))
    found = run(z_section(uniform(1e3, L), supports=supports), 3.0)
    c = z_compliance()
    load, point = 5 * 1e3 * L**4 / 384, L**3 / 48
    # force f towards +y at midspan: across = f point c_zz, down = -f point c_yz
    f = load * c[1, 0] / (point * c[1, 1])
    close(reaction(found, "side", "across"), f, CLOSED)
    close(station(found, 3.0)["deflection"], load * c[0, 0] - f * point * c[0, 1], CLOSED)
    assert abs(station(found, 3.0)["across"]) < 1e-15


def test_z_section_with_the_ends_free_sideways_at_one_place() -> None:
    """One end free sideways and the rest held: still determinate, nothing changes at the other support."""
    supports = (pin("A", 0.0), roller("B", L, across=0.0), Support("side", 4.0, across=INF))
    found = run(z_section(uniform(1e3, L), supports=supports), 3.0)
    free = run(z_section(uniform(1e3, L), supports=simple(L)), 3.0, 4.0)
    # no force sideways is needed: vertical bending is the same, across is turned about A
    close(station(found, 3.0)["deflection"], station(free, 3.0)["deflection"], CLOSED)
    shifted = station(free, 3.0)["across"] - station(free, 4.0)["across"] * 3.0 / 4.0
    close(station(found, 3.0)["across"], shifted, PROMISED)


def test_angle_principal_axes() -> None:
    """An equal angle under vertical load moves equally in the way its principal axes say."""
    piece = part("angle", "angle", L, depth=0.1, width=0.1, web=0.01, flange=0.01)
    found = run(Member(L, (piece,), (STEEL,), supports=simple(L), loads=(uniform(500.0, L),), shear=False), 3.0)
    legs = [(0.001, 0.005, 0.05, 0.01, 0.1), (0.0009, 0.055, 0.005, 0.09, 0.01)]
    area = sum(a for a, *_ in legs)
    yc = sum(a * y for a, y, *_ in legs) / area
    zc = sum(a * z for a, _, z, *_ in legs) / area
    iy = sum(w * d**3 / 12 + a * (z - zc) ** 2 for a, y, z, w, d in legs)
    iz = sum(d * w**3 / 12 + a * (y - yc) ** 2 for a, y, z, w, d in legs)
    iyz = sum(a * (y - yc) * (z - zc) for a, y, z, w, d in legs)
    c = np.linalg.inv(E * np.array([[iy, iyz], [iyz, iz]]))
    shape = 5 * 500.0 * L**4 / 384
    close(station(found, 3.0)["deflection"], shape * c[0, 0], CLOSED)
    close(station(found, 3.0)["across"], -shape * c[1, 0], CLOSED)


@pytest.mark.parametrize("shear", [False, True])
def test_load_across(shear: bool) -> None:
    found = run(beam(uniform(Q, L, direction="across"), shear=shear), 3.0)
    iz = E * H * B**3 / 12
    w = 5 * Q * L**4 / (384 * iz) + shear * Q * L**2 / (8 * GA)
    close(station(found, 3.0)["across"], w, CLOSED)
    close(reaction(found, "A", "across"), -Q * L / 2, CLOSED)
    assert station(found, 3.0)["deflection"] == 0.0
    assert found["deflection"]["down"] is None
    close(found["deflection"]["across"]["value"], w, CLOSED)


def test_load_across_between_fixed_ends_and_a_sideways_spring() -> None:
    iz = E * H * B**3 / 12
    supports = (fixed("A", 0.0, along=INF), fixed("B", L))
    found = run(beam(Point(3.0, P, direction="across"), supports=supports), 3.0)
    close(station(found, 3.0)["across"], P * L**3 / (192 * iz), CLOSED)
    k = 2e6
    found = run(beam(Point(3.0, P, direction="across"), supports=(*simple(L), Support("S", 3.0, across=k))), 3.0)
    f = L**3 / (48 * iz)
    close(station(found, 3.0)["across"], P * f / (1 + k * f), CLOSED)
    close(reaction(found, "S", "across"), -P * k * f / (1 + k * f), CLOSED)


def test_up_is_minus_down() -> None:
    up = run(beam(uniform(Q, L, direction="up")), 3.0)
    close(station(up, 3.0)["deflection"], -5 * Q * L**4 / (384 * EI), CLOSED)
    assert up["deflection"]["down"] is None
    close(up["deflection"]["up"]["value"], 5 * Q * L**4 / (384 * EI), CLOSED)


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
    close(station(found, L)["rotation"], L / k + L**2 / (2 * EI), CLOSED)


def test_held_along_nowhere_is_fine_while_nothing_pushes() -> None:
    found = run(beam(uniform(Q, L), supports=(roller("A", 0.0), roller("B", L))), 3.0)
    close(station(found, 3.0)["deflection"], 5 * Q * L**4 / (384 * EI), CLOSED)
    twice = beam(Axial(1.0, P), Axial(5.0, -P), uniform(Q, L), supports=(roller("A", 0.0), roller("B", L)))
    close(station(run(twice, 3.0), 3.0)["N"], -P, CLOSED)


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
    close(reaction(found, "C"), Q * 3.0, CLOSED)
    # M / EI = q s (a - s) / 2 / (EI s / a) with s from the middle, a = 3: a straight line
    k = Q * 3.0 / (2 * EI)
    close(station(found, 0.0)["slope"], k * 3.0**2 / 6, PROMISED)
    close(station(found, 3.0)["slope"], k * 3.0**2 / 3, PROMISED)


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


# patterns, shares, bands


def test_pattern_loads_against_every_arrangement() -> None:
    n = 3
    supports = tuple(roller(f"S{k}", k * L) if k else pin("S0", 0.0) for k in range(n + 1))
    on = beam(uniform(Q, n * L, pattern=True), uniform(0.4 * Q, n * L), supports=supports, length=n * L)
    found = run(on)
    cases = [tuple(c) for c in itertools.product((0.0, 1.0), repeat=n)]
    loads = tuple(uniform(Q, (k + 1) * L, k * L, case=f"s{k}") for k in range(n))
    combos = tuple(case(str(c), dead=1.0, **{f"s{k}": v for k, v in enumerate(c)}) for c in cases)
    brute = beam(*loads, uniform(0.4 * Q, n * L, case="dead"), supports=supports, length=n * L, combinations=combos)
    every = deflect(brute)["combinations"]
    full = every[-1]
    for one, other in zip(found["stations"], full["stations"], strict=True):
        for key, size in (("M", Q * L**2), ("V", Q * L), ("deflection", 0.01)):
            close(one[key], other[key], PROMISED, size)
    rows = {(round(r["x"], 9), k): r for r, k in _sided(found["envelope"]["stations"])}
    for key, size in (("M", Q * L**2), ("V", Q * L), ("deflection", 0.01)):
        arrangements = [dict(_keyed(c["stations"], key)) for c in every]
        for place, row in rows.items():
            values = [a[place] for a in arrangements]
            close(row[key]["min"], min(values), PROMISED, size)
            close(row[key]["max"], max(values), PROMISED, size)
    close(found["deflection"]["down"]["value"], max(c["deflection"]["down"]["value"] for c in every), PROMISED)
    close(found["moment"]["hogging"]["value"], min(c["moment"]["hogging"]["value"] for c in every), PROMISED)
    close(found["moment"]["sagging"]["value"], max(c["moment"]["sagging"]["value"] for c in every), PROMISED)
    for k in range(n + 1):
        values = [reaction(c, f"S{k}") for c in every]
        row = found["envelope"]["supports"][k]["vertical"]
        close(row["min"], min(values), PROMISED, Q * L)
        close(row["max"], max(values), PROMISED, Q * L)
    for k in range(n):
        largest = max((c["spans"][k]["deflection"] for c in every), key=abs)
        close(found["spans"][k]["deflection"], largest, PROMISED)


def _sided(rows: list) -> list:
    """Rows with a number that tells the first from the second at the same x."""
    return [(r, int(k > 0 and rows[k - 1]["x"] == r["x"])) for k, r in enumerate(rows)]


def _keyed(rows: list, key: str) -> list:
    return [((round(r["x"], 9), k), r[key]) for r, k in _sided(rows)]


def test_sustained_share() -> None:
    soft = replace(STEEL, creep=1.5)
    combos = (Combination("all", {"load": 2.0}, {"load": 0.4}),)
    member = Member(L, (BEAM,), (soft,), supports=simple(L), loads=(uniform(Q, L),), combinations=combos)
    w = 5 * Q * L**4 / (384 * EI) + Q * L**2 / (8 * GA)
    close(station(run(member, 3.0), 3.0)["deflection"], 2 * w * (0.6 + 0.4 * 2.5), CLOSED)


def test_sustained_share_of_two_materials() -> None:
    share = 0.7
    combos = (Combination("all", {"load": 1.0}, {"load": share}),)
    found = run(composite(uniform(Q, L), combinations=combos), 3.0)
    shape = 5 * Q * L**4 / 384
    expected = shape * ((1 - share) / composite_stiffness()[0] + share / composite_stiffness(3.0)[0])
    close(station(found, 3.0)["deflection"], expected, CLOSED)


def test_band() -> None:
    loose = replace(STEEL, band=(180e9, 231e9))
    member = Member(L, (BEAM,), (loose,), supports=simple(L), loads=(uniform(Q, L),), shear=False)
    found = run(member)["deflection"]["down"]
    w = 5 * Q * L**4 / (384 * EI)
    close(found["value"], w, CLOSED)
    close(found["band"]["low"], w * 210 / 180, CLOSED)
    close(found["band"]["high"], w * 210 / 231, CLOSED)


def test_named_station_is_listed() -> None:
    member = beam(uniform(Q, L), stations=(Station("seal", 2.345),))
    row = next(s for s in run(member)["stations"] if s["name"] == "seal")
    x = 2.345
    close(row["deflection"], Q * x * (L**3 - 2 * L * x**2 + x**3) / (24 * EI), CLOSED)


def test_varying_load() -> None:
    """A triangular load and a trapezoidal patch with a step in it."""
    found = run(beam(Distributed(((0.0, 0.0), (L, Q)))), 0.0)
    close(reaction(found, "A"), Q * L / 6, CLOSED)
    close(station(found, 0.0)["slope"], 7 * Q * L**3 / (360 * EI), CLOSED)
    patch = Distributed(((1.0, 2e3), (2.0, 4e3), (2.0, 8e3), (3.0, 8e3)))
    found = run(beam(patch), 2.0)
    total = 3e3 + 8e3
    about_left = 2e3 * 1.5 + 1e3 * (1 + 2 / 3) + 8e3 * 2.5
    close(reaction(found, "B"), about_left / L, CLOSED)
    close(reaction(found, "A"), total - about_left / L, CLOSED)
    assert station(found, 2.0)["V"] == pytest.approx(reaction(found, "A") - 3e3)
