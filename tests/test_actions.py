"""Inclined members, couples, temperature, shrinkage, prestress, patterns and shares against closed forms."""

from __future__ import annotations

import itertools
import math
from dataclasses import replace

import pytest
from common import (
    CLOSED,
    CONCRETE,
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
from held_beams import BEAM, EA, EI, GA, HOT, A, B, E, H, L, P, Q, beam

from fishbelly.member.description import Combination, Material, Member, Placing, Station, Support
from fishbelly.member.loads import Couple, Distributed, Point, Prestress, SelfWeight, Shrinkage, Temperature
from fishbelly.member.results import deflect

# inclined members


RISES = math.radians(25.0)


@pytest.mark.parametrize("per, share", [("slope", 1.0), ("plan", math.cos(RISES))])
def test_inclined_member_under_vertical_load(per: str, share: float) -> None:
    found = run(beam(uniform(Q, L, per=per), rises=RISES), 0.0, 3.0)
    down, along = Q * share * math.cos(RISES), -Q * share * math.sin(RISES)
    check_close(station(found, 3.0)["deflection"], 5 * down * L**4 / (384 * EI), CLOSED)
    check_close(reaction(found, "A"), down * L / 2, CLOSED)
    check_close(reaction(found, "A", "along"), -along * L, CLOSED)
    check_close(station(found, 0.0)["N"], along * L, CLOSED)
    check_close(station(found, 3.0)["N"], along * L / 2, CLOSED)


def test_inclined_member_under_square_load_point_and_weight() -> None:
    loads = (Point(3.0, P, per="slope", case="point"), SelfWeight(case="weight"), uniform(Q, L, case="square"))
    cases = (case("point", point=1.0), case("weight", weight=1.0), case("square", square=1.0))
    member = beam(*loads, rises=RISES, combinations=cases)
    point, weight, square = (run(member, 0.0, combination=k) for k in range(3))
    check_close(reaction(point, "A"), P * math.cos(RISES) / 2, CLOSED)
    check_close(reaction(point, "A", "along"), P * math.sin(RISES), CLOSED)
    w = 7850 * A * 9.80665 * L
    check_close(reaction(weight, "A") + reaction(weight, "B"), w * math.cos(RISES), CLOSED)
    check_close(reaction(weight, "A", "along"), w * math.sin(RISES), CLOSED)
    assert reaction(square, "A", "along") == pytest.approx(0.0, abs=1e-9)


def test_upright_pole_has_no_bending_by_its_weight() -> None:
    found = run(beam(SelfWeight(), rises=math.pi / 2, supports=cantilever()), 0.0)
    check_close(station(found, 0.0)["N"], -7850 * A * 9.80665 * L, CLOSED)
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
    check_close(station(found, 0.0)["M"], weight * L * 0.15, 1e-9)


# couples, temperature, shrinkage, prestress


def test_couple_on_a_simple_beam() -> None:
    c = 3.0e4
    found = run(beam(Couple(2.0, c)), 0.0, 2.0)
    check_close(reaction(found, "A"), -c / L, CLOSED)
    check_close(station(found, 2.0, "left")["M"], -c * 2.0 / L, CLOSED)
    check_close(station(found, 2.0)["M"], c * 4.0 / L, CLOSED)
    # rotation under the couple: C (a³ + b³) / (3 EI L²), clockwise as the couple
    check_close(station(found, 2.0)["slope"], c * (2.0**3 + 4.0**3) / (3 * EI * L**2), CLOSED)


def test_couples_at_both_ends_of_a_cantilever_and_over_a_support() -> None:
    c = 1.0e4
    found = run(beam(Couple(L, c), supports=cantilever()), L)
    check_close(station(found, L)["deflection"], c * L**2 / (2 * EI), CLOSED)
    check_close(reaction(found, "A", "moment"), -c, CLOSED)
    supports = (pin("A", 0.0), roller("C", L), roller("B", 2 * L))
    found = run(beam(Couple(L, c), supports=supports, length=2 * L), L)
    check_close(station(found, L, "left")["M"], -c / 2, CLOSED)
    check_close(station(found, L)["M"], c / 2, CLOSED)


@pytest.mark.parametrize("top, bottom", [(30.0, 0.0), (0.0, 20.0), (25.0, 25.0), (-10.0, 15.0)])
def test_temperature(top: float, bottom: float) -> None:
    heat = Temperature(0.0, L, top=top, bottom=bottom)
    k = HOT * (top - bottom) / H
    free = run(beam(heat), 3.0)
    check_close(station(free, 3.0)["deflection"], -k * L**2 / 8, CLOSED, HOT * 30 / H * L**2)
    assert abs(station(free, 3.0)["M"]) < 1e-6
    assert all(abs(s["max"]["value"]) < 1.0 for s in free["stress"])
    propped = run(beam(heat, supports=(fixed("A", 0.0, along=INF), roller("B", L))), 0.0)
    check_close(reaction(propped, "B"), 1.5 * EI * k / L, CLOSED, EI * HOT * 30 / H / L)
    check_close(station(propped, 0.0)["M"], 1.5 * EI * k, CLOSED, EI * HOT * 30 / H)
    held = run(beam(heat, supports=(fixed("A", 0.0, along=INF), fixed("B", L, along=INF))), 3.0)
    check_close(station(held, 3.0)["M"], EI * k, CLOSED, EI * HOT * 30 / H)
    check_close(station(held, 3.0)["N"], -EA * HOT * (top + bottom) / 2, CLOSED, EA * HOT * 30)
    assert abs(station(held, 3.0)["deflection"]) < 1e-15


def test_temperature_over_a_stretch() -> None:
    k = HOT * 30.0 / H
    found = run(beam(Temperature(1.0, 3.0, top=30.0)), 0.0, 3.0)
    # a kink spread over 2 m, centred at 2 m: w(3) by virtual work of the unit moment
    unit = 0.25 * (3.0**2 - 1.0**2)
    check_close(station(found, 3.0)["deflection"], -k * unit, CLOSED)
    check_close(station(found, 0.0)["slope"], -k * 2.0 * 4.0 / 6.0, CLOSED)


def test_temperature_of_one_part_of_two() -> None:
    upper = part("upper", "rectangle", L, width=B, depth=H, place=Placing("over", "beam"))
    heat = Temperature(0.0, L, parts={"upper": 40.0})
    member = Member(L, (BEAM, upper), (STEEL,), supports=simple(L), loads=(heat,), shear=False)
    found = run(member, 3.0)
    # two equal halves: kappa = EA a dT e / EI_total
    kappa = EA * HOT * 40.0 * (H / 2) / (E * B * (2 * H) ** 3 / 12)
    check_close(station(found, 3.0)["deflection"], -kappa * L**2 / 8, CLOSED)
    stress = {s["part"]: s for s in found["stress"]}
    e0 = HOT * 40.0 / 2
    # at the joint: strain e0 both sides, the upper part wanted more
    check_close(stress["upper"]["min"]["value"], E * (e0 - HOT * 40.0), CLOSED)
    check_close(stress["beam"]["max"]["value"], E * e0, CLOSED)
    check_close(stress["beam"]["min"]["value"], E * (e0 - kappa * H), CLOSED)


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
    check_close(station(found, 3.0)["deflection"], kappa * L**2 / 8, CLOSED)
    supports = (pin("A", 0.0), roller("C", 3.0), roller("B", L))
    held = run(composite(Shrinkage("slab", strain, 0.0, L), supports=supports), 3.0)
    check_close(reaction(held, "C"), kappa * L**2 / 8 * 48 * total / L**3, CLOSED)


@pytest.mark.parametrize("creep, by", [(None, 1 + 2.0), (0.5, 1.5)])
def test_sustained_shrinkage_acts_on_long_term_moduli(creep: float | None, by: float) -> None:
    strain = 3.2e-4
    total, arm = composite_stiffness(by)
    kappa = E_SLAB / by * A_SLAB * strain * arm / total
    lasting = Combination("long", {"load": 1.0}, {"load": 1.0})
    found = run(composite(Shrinkage("slab", strain, 0.0, L, creep=creep), combinations=(lasting,)), 3.0)
    check_close(station(found, 3.0)["deflection"], kappa * L**2 / 8, CLOSED)


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
    check_close(station(found, 3.0)["deflection"], -kappa * L**2 / 8, CLOSED)
    assert abs(station(found, 3.0)["M"]) < 1e-6
    stress = {s["part"]: s for s in found["stress"]}
    e0 = -force / (one + two)
    # the tie's own fibres, from its centroid `arm` below the common one
    upper = E * (force / two + e0) - E * kappa * (arm - 0.005)
    lower = E * (force / two + e0) - E * kappa * (arm + 0.005)
    check_close(stress["tie"]["max"]["value"], upper, CLOSED)
    check_close(stress["tie"]["min"]["value"], lower, CLOSED)


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
            check_close(one[key], other[key], PROMISED, size)
    rows = {(round(r["x"], 9), k): r for r, k in _sided(found["envelope"]["stations"])}
    for key, size in (("M", Q * L**2), ("V", Q * L), ("deflection", 0.01)):
        arrangements = [dict(_keyed(c["stations"], key)) for c in every]
        for place, row in rows.items():
            values = [a[place] for a in arrangements]
            check_close(row[key]["min"], min(values), PROMISED, size)
            check_close(row[key]["max"], max(values), PROMISED, size)
    check_close(found["deflection"]["down"]["value"], max(c["deflection"]["down"]["value"] for c in every), PROMISED)
    check_close(found["moment"]["hogging"]["value"], min(c["moment"]["hogging"]["value"] for c in every), PROMISED)
    check_close(found["moment"]["sagging"]["value"], max(c["moment"]["sagging"]["value"] for c in every), PROMISED)
    for k in range(n + 1):
        values = [reaction(c, f"S{k}") for c in every]
        row = found["envelope"]["supports"][k]["vertical"]
        check_close(row["min"], min(values), PROMISED, Q * L)
        check_close(row["max"], max(values), PROMISED, Q * L)
    for k in range(n):
        largest = max((c["spans"][k]["deflection"] for c in every), key=abs)
        check_close(found["spans"][k]["deflection"], largest, PROMISED)


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
    check_close(station(run(member, 3.0), 3.0)["deflection"], 2 * w * (0.6 + 0.4 * 2.5), CLOSED)


def test_sustained_share_of_two_materials() -> None:
    share = 0.7
    combos = (Combination("all", {"load": 1.0}, {"load": share}),)
    found = run(composite(uniform(Q, L), combinations=combos), 3.0)
    shape = 5 * Q * L**4 / 384
    expected = shape * ((1 - share) / composite_stiffness()[0] + share / composite_stiffness(3.0)[0])
    check_close(station(found, 3.0)["deflection"], expected, CLOSED)


def test_band() -> None:
    loose = replace(STEEL, band=(180e9, 231e9))
    member = Member(L, (BEAM,), (loose,), supports=simple(L), loads=(uniform(Q, L),), shear=False)
    found = run(member)["deflection"]["down"]
    w = 5 * Q * L**4 / (384 * EI)
    check_close(found["value"], w, CLOSED)
    check_close(found["band"]["low"], w * 210 / 180, CLOSED)
    check_close(found["band"]["high"], w * 210 / 231, CLOSED)


def test_named_station_is_listed() -> None:
    member = beam(uniform(Q, L), stations=(Station("seal", 2.345),))
    row = next(s for s in run(member)["stations"] if s["name"] == "seal")
    x = 2.345
    check_close(row["deflection"], Q * x * (L**3 - 2 * L * x**2 + x**3) / (24 * EI), CLOSED)


def test_varying_load() -> None:
    """A triangular load and a trapezoidal patch with a step in it."""
    found = run(beam(Distributed(((0.0, 0.0), (L, Q)))), 0.0)
    check_close(reaction(found, "A"), Q * L / 6, CLOSED)
    check_close(station(found, 0.0)["slope"], 7 * Q * L**3 / (360 * EI), CLOSED)
    patch = Distributed(((1.0, 2e3), (2.0, 4e3), (2.0, 8e3), (3.0, 8e3)))
    found = run(beam(patch), 2.0)
    total = 3e3 + 8e3
    about_left = 2e3 * 1.5 + 1e3 * (1 + 2 / 3) + 8e3 * 2.5
    check_close(reaction(found, "B"), about_left / L, CLOSED)
    check_close(reaction(found, "A"), total - about_left / L, CLOSED)
    assert station(found, 2.0)["V"] == pytest.approx(reaction(found, "A") - 3e3)
