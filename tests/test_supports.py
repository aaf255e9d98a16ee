"""Springs, guides, holds along, settlement and bearings against closed forms.

The beam is prismatic so that each expected value is one line of strength of materials; bending alone unless said.
"""

from __future__ import annotations

import numpy as np
import pytest
from common import (
    CLOSED,
    INF,
    PROMISED,
    STEEL,
    cantilever,
    case,
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
from held_beams import EA, EI, GA, H, L, P, Q, beam

from fishbelly.member.description import Member, Placing, Support
from fishbelly.member.faults import CannotCompute
from fishbelly.member.loads import Axial, Distributed, Point

# springs and guides


@pytest.mark.parametrize("shear", [False, True])
def test_spring_under_midspan(shear: bool) -> None:
    k = 5e6
    supports = (pin("A", 0.0), Support("S", L / 2, down=k), roller("B", L))
    found = run(beam(uniform(Q, L), supports=supports, shear=shear), L / 2)
    free = 5 * Q * L**4 / (384 * EI) + shear * Q * L**2 / (8 * GA)
    give = L**3 / (48 * EI) + shear * L / (4 * GA)
    R = free / (give + 1 / k)
    check_close(reaction(found, "S"), R, CLOSED)
    check_close(station(found, L / 2)["deflection"], R / k, CLOSED)


def test_rotational_spring_at_an_end() -> None:
    k = 3e6
    supports = (Support("A", 0.0, down=INF, across=INF, along=INF, rotation=k), roller("B", L))
    found = run(beam(uniform(Q, L), supports=supports), 0.0)
    m = -Q * L**3 / (24 * EI) / (L / (3 * EI) + 1 / k)
    check_close(reaction(found, "A", "moment"), m, CLOSED)
    check_close(station(found, 0.0)["rotation"], -m / k, CLOSED)


def test_rotational_spring_in_the_middle_of_a_continuous_beam() -> None:
    """A column that holds the middle support's rotation: each span sees half of it when one is loaded."""
    k = 4e6
    supports = (pin("A", 0.0), Support("C", L, down=INF, across=INF, rotation=k), roller("B", 2 * L))
    found = run(beam(uniform(Q, L), supports=supports, length=2 * L), L)
    # slope deflection with far ends pinned: (2 * 3EI/L + k) theta = -qL²/8
    theta = -Q * L**2 / 8 / (6 * EI / L + k)
    check_close(station(found, L)["rotation"], theta, CLOSED)
    check_close(reaction(found, "C", "moment"), -k * theta, CLOSED)
    check_close(station(found, L, "left")["M"], -Q * L**2 / 8 - 3 * EI / L * theta, CLOSED)
    check_close(station(found, L)["M"], 3 * EI / L * theta, CLOSED)


def test_all_springs_sink_as_a_rigid_body() -> None:
    """Two springs under a stiff beam: deflection is force over stiffness and leans."""
    supports = (Support("A", 0.0, down=1e3, along=INF, across=INF), Support("B", L, down=3e3, across=INF))
    found = run(beam(Point(2.0, 300.0), supports=supports), 0.0, L)
    check_close(station(found, 0.0)["deflection"], 200.0 / 1e3, CLOSED)
    check_close(station(found, L)["deflection"], 100.0 / 3e3, CLOSED)


def test_guide_at_the_tip() -> None:
    supports = (fixed("A", 0.0, along=INF), Support("G", L, rotation=INF))
    found = run(beam(Point(L, P), supports=supports), L)
    check_close(station(found, L)["deflection"], P * L**3 / (12 * EI), CLOSED)
    check_close(reaction(found, "G", "moment"), -P * L / 2, CLOSED)
    assert reaction(found, "G") == 0.0
    assert abs(station(found, L)["slope"]) < 1e-16


def test_guide_in_midspan_changes_nothing_where_symmetry_holds() -> None:
    supports = (*simple(L), Support("G", L / 2, rotation=INF))
    found = run(beam(uniform(Q, L), supports=supports), L / 2)
    check_close(station(found, L / 2)["deflection"], 5 * Q * L**4 / (384 * EI), CLOSED)
    assert abs(reaction(found, "G", "moment")) < CLOSED * Q * L**2


def test_guide_in_midspan_under_one_half_loaded() -> None:
    """The antisymmetric half: two spans of a beam that is propped at its end and fixed in rotation, free to move."""
    supports = (*simple(L), Support("G", L / 2, rotation=INF))
    found = run(beam(uniform(Q, L / 2), supports=supports), L / 2)
    # rotation of the free beam in midspan under half the load: all from +-q/2
    a, q = L / 2, Q / 2
    theta = -q * a**3 / (24 * EI)
    m = -theta / (a / (6 * EI))
    check_close(abs(reaction(found, "G", "moment")), abs(m), CLOSED)


# along


def test_along_spring_shares_an_axial_force() -> None:
    k = 1e9
    supports = (pin("A", 0.0), roller("B", L, along=k))
    found = run(beam(Axial(2.0, P), supports=supports), 1.0, 4.0)
    left, right = EA / 2.0, 1 / ((L - 2.0) / EA + 1 / k)
    check_close(reaction(found, "A", "along"), -P * left / (left + right), CLOSED)
    check_close(reaction(found, "B", "along"), -P * right / (left + right), CLOSED)
    check_close(station(found, 1.0)["N"], P * left / (left + right), CLOSED)
    check_close(station(found, 4.0)["N"], -P * right / (left + right), CLOSED)


@pytest.mark.parametrize(
    "level, arm",
    [("centroid", 0.0), ("bottom", H / 2), ("top", -H / 2), ("datum", -H / 2), (-0.17, 0.07), (-0.5, 0.4)],
)
def test_thrust_by_the_level_at_which_both_ends_are_held(level: str | float, arm: float) -> None:
    """Both ends held along, `arm` below the centroid, under a uniform load."""
    supports = (pin("A", 0.0, level=level), pin("B", L, level=level))
    found = run(beam(uniform(Q, L), supports=supports), 0.0, L / 2, L)
    N = -(Q * L**3 * arm / (12 * EI)) / (L / EA + L * arm**2 / EI)
    check_close(station(found, L / 2)["N"], N, CLOSED, Q * L)
    check_close(reaction(found, "A", "along"), -N, CLOSED, Q * L)
    check_close(reaction(found, "B", "along"), N, CLOSED, Q * L)
    check_close(station(found, 0.0)["M"], N * arm, CLOSED, Q * L**2)
    check_close(station(found, L / 2)["M"], Q * L**2 / 8 + N * arm, CLOSED)
    check_close(station(found, L / 2)["deflection"], 5 * Q * L**4 / (384 * EI) + N * arm * L**2 / (8 * EI), CLOSED)
    assert abs(reaction(found, "A", "moment")) < CLOSED * Q * L**2


def test_thrust_with_an_along_spring() -> None:
    arm, k = H / 2, 2e8
    supports = (pin("A", 0.0, level="bottom"), roller("B", L, along=k, level="bottom"))
    N = -(Q * L**3 * arm / (12 * EI)) / (L / EA + L * arm**2 / EI + 1 / k)
    check_close(reaction(run(beam(uniform(Q, L), supports=supports)), "A", "along"), -N, CLOSED)


def test_ends_held_at_different_levels() -> None:
    """Left at the bottom, right at the top: the line of thrust runs through the section."""
    supports = (pin("A", 0.0, level="bottom"), pin("B", L, level="top"))
    found = run(beam(Distributed(((0, 0), (L, Q))), supports=supports), 0.0, L)
    # arm from +h/2 to -h/2: integral of arm² = L h²/12, of M0 * arm for a triangular load
    x = np.polynomial.legendre.leggauss(8)
    s = (x[0] + 1) * L / 2
    M0, arm = Q * s * (L**2 - s**2) / (6 * L), H / 2 - H * s / L
    N = -float((M0 * arm * x[1]).sum() * L / 2) / EI / (L / EA + L * H**2 / 12 / EI)
    check_close(reaction(found, "B", "along"), N, CLOSED)
    check_close(station(found, L)["M"], -N * H / 2, CLOSED)
    # vertical forces of the inclined line of thrust about the left pin
    check_close(reaction(found, "B"), Q * L / 3 + N * H / L, CLOSED)


@pytest.mark.parametrize(
    "level, up", [("centroid", 0.0), ("top", H / 2), ("bottom", -H / 2), ("datum", H / 2), (-0.16, -0.06)]
)
def test_axial_force_off_the_centroid_bends(level: str | float, up: float) -> None:
    found = run(beam(Axial(L, P, level=level), supports=cantilever()), 3.0, L)
    check_close(station(found, 3.0)["N"], P, CLOSED)
    check_close(station(found, 3.0)["M"], -P * up, CLOSED, P * H)
    check_close(station(found, L)["deflection"], P * up * L**2 / (2 * EI), CLOSED, P * H * L**2 / EI)
    check_close(reaction(found, "A", "along"), -P, CLOSED)


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
    check_close(reaction(found, "C"), -6 * EI * sinks / L**3, CLOSED)
    check_close(station(found, L)["deflection"], sinks, CLOSED)
    check_close(station(found, L)["M"], 3 * EI * sinks / L**2, CLOSED)
    assert found["deflection"]["down" if sinks > 0 else "up"]["value"] == pytest.approx(abs(sinks), rel=1e-12)


def test_settlement_of_a_fixed_end_and_of_a_spring() -> None:
    sinks, k = 0.012, 4e6
    found = run(beam(supports=(fixed("A", 0.0, along=INF), fixed("B", L, sinks=sinks))))
    check_close(reaction(found, "A", "moment"), 6 * EI * sinks / L**2 * -1, CLOSED)
    check_close(reaction(found, "B"), -12 * EI * sinks / L**3, CLOSED)
    found = run(beam(supports=(fixed("A", 0.0, along=INF), Support("B", L, down=k, across=INF, sinks=sinks))), L)
    w = sinks * k / (k + 3 * EI / L**3)
    check_close(station(found, L)["deflection"], w, CLOSED)
    check_close(reaction(found, "B"), -k * (sinks - w), CLOSED)


def test_settlement_belongs_to_its_case() -> None:
    supports = (pin("A", 0.0), roller("C", L, sinks=0.01), roller("B", 2 * L, sinks=0.02, case="later"))
    both = (case("first", settlement=1.0), case("twice", settlement=2.0, later=-1.0))
    member = beam(supports=supports, length=2 * L, combinations=both)
    first, twice = (run(member, L, 2 * L, combination=k) for k in (0, 1))
    check_close(station(first, L)["deflection"], 0.01, CLOSED)
    check_close(station(twice, L)["deflection"], 0.02, CLOSED)
    check_close(station(twice, 2 * L)["deflection"], -0.02, CLOSED)


def test_a_determinate_member_follows_settlement_without_force() -> None:
    found = run(beam(supports=(pin("A", 0.0), roller("B", L, sinks=0.03))), 2.0)
    check_close(station(found, 2.0)["deflection"], 0.01, CLOSED)
    assert abs(station(found, 2.0)["M"]) < 1e-6


# bearings that cannot pull


def test_bearing_lifts_off() -> None:
    supports = (pin("A", 0.0), roller("C", L), roller("B", 2 * L, only_up=True))
    lifted = run(beam(uniform(Q, L), supports=supports, length=2 * L), 2 * L)
    gone = run(beam(uniform(Q, L), supports=supports[:2], length=2 * L), 2 * L)
    assert lifted["lifted"] == ["B"] and reaction(lifted, "B") == 0.0
    check_close(station(lifted, 2 * L)["deflection"], station(gone, 2 * L)["deflection"], CLOSED)
    check_close(station(lifted, 2 * L)["deflection"], -Q * L**3 / (24 * EI) * L, CLOSED)
    assert next(s for s in lifted["supports"] if s["name"] == "B")["lifted"] is True


def test_bearing_stays_where_it_is_pressed() -> None:
    supports = (pin("A", 0.0), roller("C", L), roller("B", 2 * L, only_up=True))
    found = run(beam(uniform(Q, 2 * L), supports=supports, length=2 * L))
    check_close(reaction(found, "B"), 0.375 * Q * L, CLOSED)
    assert not found.get("lifted")


@pytest.mark.parametrize("factor", [0.5, 0.99, 1.01, 3.0])
def test_bearing_with_a_gap_closes_when_the_load_is_large_enough(factor: float) -> None:
    gap = 0.01
    q = factor * gap * 384 * EI / (5 * (2 * L) ** 4)
    supports = (pin("A", 0.0), roller("C", L, only_up=True, sinks=gap, case="load"), roller("B", 2 * L))
    found = run(beam(uniform(q, 2 * L), supports=supports, length=2 * L), L)
    free = factor * gap
    check_close(reaction(found, "C"), max(0.0, free - gap) * 48 * EI / (2 * L) ** 3, PROMISED, q * L)
    check_close(station(found, L)["deflection"], min(free, gap), PROMISED)


def test_bearings_are_judged_by_combination() -> None:
    supports = (pin("A", 0.0), roller("C", L), roller("B", 2 * L, only_up=True))
    loads = (uniform(Q, L, case="left"), uniform(Q, 2 * L, L, case="right"))
    pair = (case("left alone", left=1.0), case("both", left=1.0, right=1.0))
    member = beam(*loads, supports=supports, length=2 * L, combinations=pair)
    assert reaction(run(member, combination=0), "B") == 0.0
    check_close(reaction(run(member, combination=1), "B"), 0.375 * Q * L, CLOSED)


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
    check_close(found["deflection"]["down"]["value"], without["deflection"]["down"]["value"], CLOSED)


def test_uplift_on_bearings_alone_cannot_be_carried() -> None:
    supports = (pin("A", 0.0, only_up=True), roller("B", L, only_up=True))
    with pytest.raises(CannotCompute):
        run(beam(uniform(-Q, L), supports=supports))
