"""Stages, release and creep against closed forms: what joins later carries nothing of what came before."""

from __future__ import annotations

from dataclasses import replace

import pytest
from common import INF, STEEL, TIMBER, check_close, fixed, part, pin, reaction, roller, run, simple, station, uniform

from fishbelly.member.description import Hinge, Limit, Material, Member, Part, Placing, Stage
from fishbelly.member.loads import Point, Shrinkage, Temperature
from fishbelly.member.results import deflect

STAGED = 1e-9
"""Relative; closed forms of stages of prismatic members (asked for: 1e-8)."""

L, Q = 6.0, 1.0e4
BEAM = part("beam", "rectangle", L, width=0.2, depth=0.3, material="timber")
EI_BEAM, EA_BEAM = 11e9 * 0.2 * 0.3**3 / 12, 11e9 * 0.2 * 0.3
PLATE = part("plate", "rectangle", L, width=0.2, depth=0.01, place=Placing("under", "beam"))
EA_PLATE, EI_PLATE = 210e9 * 0.2 * 0.01, 210e9 * 0.2 * 0.01**3 / 12
ARM = 0.5 * (0.3 + 0.01)
"""Between the centroids of beam and plate [m]."""
BOTH = EI_BEAM + EI_PLATE + ARM**2 * EA_BEAM * EA_PLATE / (EA_BEAM + EA_PLATE)


def staged(*loads: object, stages: tuple[Stage, ...], parts: tuple[Part, ...] = (), **more: object) -> Member:
    """A timber beam, by default with a steel plate that joins in stage "later"."""
    both = parts or (BEAM, replace(PLATE, stage="later"))
    options = {"supports": simple(L), "shear": False, "materials": (STEEL, TIMBER)} | more
    return Member(length=L, parts=both, loads=loads, stages=stages, **options)  # type: ignore[arg-type]


NOW_LATER = (Stage("now", ("dead",)), Stage("later", ("live",)))


def sag(q: float, EI: float) -> float:
    """Deflection at mid-span of a simple beam under a uniform load."""
    return 5.0 * q * L**4 / (384.0 * EI)


def test_a_plate_that_joins_later_carries_the_later_load_alone() -> None:
    data = deflect(staged(uniform(Q, L, case="dead"), uniform(Q, L, case="live"), stages=NOW_LATER))
    found = data["combinations"][0]
    check_close(found["deflection"]["down"]["value"], sag(Q, EI_BEAM) + sag(Q, BOTH), STAGED)
    check_close(data["stages"][0]["combinations"][0]["deflection"]["down"]["value"], sag(Q, EI_BEAM), STAGED)
    M = Q * L**2 / 8.0
    # top fibre: bending of the beam alone, then of both about their common axis
    axis = ARM * EA_PLATE / (EA_BEAM + EA_PLATE)
    top = -M * 0.15 / EI_BEAM * 11e9 - M * (0.15 + axis) / BOTH * 11e9
    plate = M * (0.16 - axis) / BOTH * 210e9
    beam, steel = found["stress"]
    check_close(beam["min"]["value"], top, STAGED)
    check_close(steel["max"]["value"], plate, STAGED)
    assert data["stages"][0]["combinations"][0]["stress"][1]["max"] is None


def test_limits_since_a_stage_and_at_the_end_of_one() -> None:
    limits = (Limit("all", span_over=300.0), Limit("since", span_over=300.0, after="later"))
    limits += (Limit("first", span_over=300.0, stage="now"),)
    member = staged(uniform(Q, L, case="dead"), uniform(3.0 * Q, L, case="live"), stages=NOW_LATER, limits=limits)
    found = {c["limit"]: c["found"] for c in run(member)["checks"]}
    check_close(found["first"], sag(Q, EI_BEAM), STAGED)
    check_close(found["since"], sag(3.0 * Q, BOTH), STAGED)
    check_close(found["all"], found["first"] + found["since"], STAGED)


def test_a_plate_taken_off_gives_back_what_it_carried() -> None:
    """Load on both, then the plate goes: as if the beam had carried everything alone."""
    stages = (Stage("both", ("dead",)), Stage("alone"))
    data = deflect(staged(uniform(Q, L, case="dead"), stages=stages, parts=(BEAM, replace(PLATE, until="alone"))))
    first, second = (s["combinations"][0] for s in data["stages"])
    check_close(first["deflection"]["down"]["value"], sag(Q, BOTH), STAGED)
    check_close(second["deflection"]["down"]["value"], sag(Q, EI_BEAM), STAGED)
    check_close(second["stress"][0]["max"]["value"], Q * L**2 / 8.0 * 0.15 / EI_BEAM * 11e9, STAGED)
    assert second["stress"][1] == {"part": "plate", "max": None, "min": None}


@pytest.mark.parametrize("kind", ["groove", "bar"])
def test_a_stressed_part_that_is_cut_or_displaced(kind: str) -> None:
    """A groove, or a bar of no stress put in its place: the stress that was there acts on what remains."""
    stages = (Stage("whole", ("dead",)), Stage("cut"))
    where = Placing("position", position=None)
    law = part("x", "rectangle", L, width=0.2, depth=0.1).shape.dimensions["depth"]
    where = replace(where, position=(replace(law, coefficients=law.coefficients * 0.0),) * 2, anchor="top")
    shape = part("groove", "rectangle", L, width=0.2, depth=0.1, place=where)
    more = replace(shape, material=None, cuts=("beam",), stage="cut")
    if kind == "bar":
        more = replace(shape, name="bar", material="putty", stage="cut")
    # a bar without stiffness to speak of displaces the timber alike
    putty = Material("putty", 1e-3, G=1e-3, density=1.0)
    member = staged(uniform(Q, L, case="dead"), stages=stages, parts=(BEAM, more), materials=(STEEL, TIMBER, putty))
    found = run(member)
    left = 11e9 * 0.2 * 0.2**3 / 12
    check_close(found["deflection"]["down"]["value"], sag(Q, left), STAGED)
    check_close(found["stress"][0]["max"]["value"], Q * L**2 / 8.0 * 0.1 / left * 11e9, STAGED)


def test_a_prop_taken_away_from_a_beam_that_has_been_plated_meanwhile() -> None:
    """Dead load on two spans, the plate joins, the prop goes: its force acts on both."""
    stages = (Stage("propped", ("dead",)), Stage("later"), Stage("struck"))
    supports = (*simple(L), roller("prop", L / 2.0, until="struck"))
    data = deflect(staged(uniform(Q, L, case="dead"), stages=stages, supports=supports))
    force = 1.25 * Q * L / 2.0
    last = data["stages"][2]["combinations"][0]
    check_close(last["own"]["deflection"], force * L**3 / (48.0 * BOTH), STAGED)
    gone = last["released"][0]
    check_close(gone["vertical"], force, STAGED)
    check_close(gone["deflection_after"] - gone["deflection_before"], force * L**3 / (48.0 * BOTH), STAGED)
    assert reaction(data["combinations"][0], "prop") == pytest.approx(0.0, abs=1e-9 * force)
    check_close(reaction(data["combinations"][0], "A"), Q * L / 2.0, STAGED)


def test_a_jacked_prop_lifts_and_locks_its_force_in() -> None:
    """Jacked 5 mm before the plate joins; struck afterwards, the plate keeps part of it."""
    stages = (Stage("jacked", ("jack",)), Stage("later"), Stage("struck"))
    supports = (*simple(L), roller("jack", L / 2.0, until="struck", sinks=-0.005, case="jack"))
    found = run(staged(stages=stages, supports=supports))
    force = 48.0 * EI_BEAM * 0.005 / L**3
    check_close(station(found, 3.0)["deflection"], -0.005 + force * L**3 / (48.0 * BOTH), STAGED)


def test_a_hinge_that_closes_keeps_its_kink() -> None:
    """Two simple beams that become continuous: later load finds the whole, the kink stays."""
    supports = (pin("A", 0.0), roller("B", L / 2.0), roller("C", L))
    stages = (Stage("single", ("dead",)), Stage("continuous", ("live",)))
    member = staged(
        uniform(Q, L, case="dead"),
        uniform(Q, L, case="live"),
        stages=stages,
        parts=(BEAM,),
        supports=supports,
        hinges=(Hinge(L / 2.0, until="continuous"),),
    )
    found = run(member, 0.0, L / 2.0)
    half = L / 2.0
    check_close(station(found, half)["M"], -Q * half**2 / 8.0, STAGED)
    turned = Q * half**3 / (24.0 * EI_BEAM)
    check_close(station(found, half, "left")["rotation"], -turned, STAGED)
    check_close(station(found, half, "right")["rotation"], turned, STAGED)


SLEEVE = replace(
    part("steel", "rectangle", L, width=0.01, depth=0.3, place=Placing("centred_on", "beam")), stage="later"
)
EI_SLEEVE = 210e9 * 0.01 * 0.3**3 / 12
EI_TIMBER = 11e9 * 0.19 * 0.3**3 / 12


def test_moment_moves_from_creeping_timber_to_a_plate_that_joined_later() -> None:
    """Old moment in the timber; creep phi against the age-adjusted modulus passes some of it to the steel.

    In the proportions of a flitch beam 1.566 : 1.400 with phi 0.6 it is 22 %.
    """
    phi, chi = 0.6, 0.8
    stages = (Stage("old", ("dead",)), Stage("later", creep={"timber": phi}, ageing=chi))
    # the steel takes 10 mm of the timber's width, which is not there from the first day
    slot = replace(SLEEVE, name="slot", material=None, cuts=("beam",), stage=None)
    data = deflect(staged(uniform(Q, L, case="dead"), stages=stages, parts=(BEAM, slot, SLEEVE)))
    aged = EI_TIMBER / (1.0 + chi * phi)
    k0 = sag(Q, EI_TIMBER)
    more = aged * phi * k0 / (aged + EI_SLEEVE)
    check_close(data["combinations"][0]["deflection"]["down"]["value"], k0 + more, STAGED)
    share = {p["part"]: p["share"] for p in data["stages"][1]["combinations"][0]["carried"]}
    check_close(share["steel"], EI_SLEEVE * more / (EI_TIMBER * k0), STAGED)


def test_twenty_two_percent() -> None:
    """1.566 : 1.400 with phi 0.6: the formula above by itself."""
    aged = 1.566 / 1.6
    assert 1.4 * aged * 0.6 / (aged + 1.4) / 1.566 * 1.566 / 1.566 == pytest.approx(0.2207, abs=5e-5)


@pytest.mark.parametrize(("pieces", "left"), [(1, 1.0 / 3.0), (2, 1.0 / 4.0), (4, (2.0 / 3.0) ** 4)])
def test_splitting_a_creep_stage_under_full_restraint(pieces: int, left: float) -> None:
    """phi = 2 with chi = 1: 1/3 is left in one step, 1/4 in two; e**-2 in the limit."""
    creeps = tuple(Stage(f"creep {k}", creep={"timber": 2.0 / pieces}) for k in range(pieces))
    supports = (fixed("A", 0.0, along=INF), fixed("B", L, along=INF))
    cooled = Temperature(0.0, L, -20.0, -20.0, case="cold")
    member = staged(cooled, stages=(Stage("cold", ("cold",)), *creeps), parts=(BEAM,), supports=supports)
    found = run(member, 3.0)
    check_close(station(found, 3.0)["N"], EA_BEAM * 5e-6 * 20.0 * left, STAGED)


def test_the_limit_of_many_creep_stages_is_exponential() -> None:
    """(1 + phi/n)**-n tends to exp(-phi) with the first order in 1/n."""
    gaps = []
    for n in (10, 20):
        creeps = tuple(Stage(f"creep {k}", creep={"timber": 2.0 / n}) for k in range(n))
        supports = (fixed("A", 0.0, along=INF), fixed("B", L, along=INF))
        cooled = Temperature(0.0, L, -20.0, -20.0, case="cold")
        member = staged(cooled, stages=(Stage("cold", ("cold",)), *creeps), parts=(BEAM,), supports=supports)
        gaps.append(station(run(member, 3.0), 3.0)["N"] / (EA_BEAM * 1e-4) - 0.1353352832366127)
    assert gaps[0] / gaps[1] == pytest.approx(2.0, rel=0.06)


def test_long_term_stage_divides_by_one_plus_creep() -> None:
    """Permanent load in a long-term stage, live load on short-term moduli again."""
    steel = replace(STEEL, creep=0.0)
    stages = (Stage("final", ("dead",), long_term=True), Stage("short", ("live",)))
    parts = (BEAM, PLATE)
    found = run(
        staged(
            uniform(Q, L, case="dead"),
            uniform(Q, L, case="live"),
            stages=stages,
            parts=parts,
            materials=(steel, TIMBER),
        )
    )
    slow = EA_BEAM / 1.6
    both = EI_BEAM / 1.6 + EI_PLATE + ARM**2 * slow * EA_PLATE / (slow + EA_PLATE)
    check_close(found["deflection"]["down"]["value"], sag(Q, both) + sag(Q, BOTH), STAGED)


def test_moduli_of_a_stage() -> None:
    """3n: the concrete's modulus over three for what is permanent, by factor or by value."""
    for stage in (
        Stage("slow", ("dead",), factors={"timber": 1.0 / 3.0}),
        Stage("slow", ("dead",), moduli={"timber": 11e9 / 3.0}),
    ):
        member = staged(
            uniform(Q, L, case="dead"),
            uniform(Q, L, case="live"),
            stages=(stage, Stage("fast", ("live",))),
            parts=(BEAM,),
        )
        check_close(run(member)["deflection"]["down"]["value"], 4.0 * sag(Q, EI_BEAM), STAGED)


def test_creep_of_shear_under_a_locked_in_force() -> None:
    """A cantilever of one material: bending and shear both grow by phi."""
    stages = (Stage("now", ("dead",)), Stage("creep", creep={"timber": 0.6}))
    member = staged(
        Point(L, 1e3, case="dead"), stages=stages, parts=(BEAM,), supports=(fixed("A", 0.0, along=INF),), shear=True
    )
    data = deflect(member)
    first, second = (s["combinations"][0]["deflection"]["down"]["value"] for s in data["stages"])
    GA = 0.69e9 * 0.06 * 5.0 / 6.0
    check_close(first, 1e3 * L**3 / (3.0 * EI_BEAM) + 1e3 * L / GA, STAGED)
    check_close(second, 1.6 * first, STAGED)


def test_shrinkage_of_a_slab_on_a_beam_with_its_own_creep() -> None:
    """Restrained shortening e of the plate, on a modulus divided by 1 + creep of its own: M = N arm."""
    slab = Material("slab", 30e9, poisson=0.2, density=2500.0, creep=2.5)
    top = part("slab", "rectangle", L, width=1.0, depth=0.1, material="slab", place=Placing("over", "beam"))
    steel = replace(STEEL, creep=0.0)
    beam = replace(BEAM, material="steel")
    stages = (Stage("shrinks", ("shrinkage",), long_term=True),)
    member = staged(
        Shrinkage("slab", 3e-4, 0.0, L, creep=1.375, case="shrinkage"),
        stages=stages,
        parts=(beam, top),
        materials=(steel, TIMBER, slab),
    )
    found = run(member)
    slow = 30e9 / 2.375
    ea, EA, ei, EI = slow * 0.1, 210e9 * 0.06, slow * 0.1**3 / 12.0, 210e9 * 0.2 * 0.3**3 / 12.0
    arm = 0.2
    force = ea * EA / (ea + EA)
    curvature = force * arm * 3e-4 / (ei + EI + force * arm**2)
    check_close(found["deflection"]["down"]["value"], curvature * L**2 / 8.0, STAGED)


def test_order_of_stages_without_change_of_section_does_not_matter() -> None:
    loads = (uniform(Q, L, case="dead"), Point(2.0, 5e3, case="live"))
    found = [
        run(staged(*loads, stages=stages, parts=(BEAM,)))["deflection"]["down"]["value"]
        for stages in ((Stage("a", ("dead",)), Stage("b", ("live",))), (Stage("a", ("live",)), Stage("b", ("dead",))))
    ]
    check_close(found[0], found[1], 1e-13)


def test_a_stage_with_no_cases_and_a_part_that_comes_and_goes_unloaded_change_nothing() -> None:
    loads = (uniform(Q, L, case="dead"), uniform(Q, L, case="live"))
    plain = run(staged(*loads, stages=NOW_LATER))
    stages = (NOW_LATER[0], Stage("nothing"), Stage("visit"), NOW_LATER[1])
    guest = replace(PLATE, name="guest", stage="nothing", until="visit", place=Placing("over", "beam"))
    more = run(staged(*loads, stages=stages, parts=(BEAM, replace(PLATE, stage="later"), guest)))
    check_close(more["deflection"]["down"]["value"], plain["deflection"]["down"]["value"], 1e-12)
    check_close(more["stress"][0]["min"]["value"], plain["stress"][0]["min"]["value"], 1e-12)


def test_shear_passes_on_to_what_remains_when_a_part_goes() -> None:
    """With shear too a plate taken off leaves the beam as if it had been alone all the time."""
    stages = (Stage("both", ("dead",)), Stage("alone"))
    parts = (BEAM, replace(PLATE, until="alone"))
    both = staged(uniform(Q, L, case="dead"), stages=stages, parts=parts, shear=True)
    alone = staged(uniform(Q, L, case="dead"), stages=(Stage("alone", ("dead",)),), parts=(BEAM,), shear=True)
    check_close(run(both)["deflection"]["down"]["value"], run(alone)["deflection"]["down"]["value"], STAGED)


def test_a_hinge_that_opens_gives_its_moment_back() -> None:
    """A moment released at mid-span of a fixed beam: as if the hinge had always been there."""
    supports = (fixed("A", 0.0, along=INF), fixed("B", L))
    stages = (Stage("whole", ("dead",)), Stage("cut"))
    loads = (uniform(Q, L, case="dead"),)
    more = {"parts": (BEAM,), "supports": supports}
    late = run(staged(*loads, stages=stages, hinges=(Hinge(L / 2.0, stage="cut"),), **more), L / 2.0, 0.0)
    always = run(staged(*loads, stages=stages, hinges=(Hinge(L / 2.0),), **more), L / 2.0, 0.0)
    assert abs(station(late, L / 2.0)["M"]) < 1e-9 * Q * L**2
    check_close(station(late, L / 2.0)["deflection"], station(always, L / 2.0)["deflection"], STAGED)
    check_close(station(late, 0.0)["M"], station(always, 0.0)["M"], STAGED)


def test_creep_in_a_stage_that_is_long_term_too() -> None:
    """What was locked in before creeps by the stage's creep; what arrives acts on long-term moduli."""
    stages = (Stage("now", ("dead",)), Stage("slow", ("live",), long_term=True, creep={"timber": 1.0}))
    member = staged(uniform(Q, L, case="dead"), uniform(Q, L, case="live"), stages=stages, parts=(BEAM,))
    check_close(run(member)["deflection"]["down"]["value"], (2.0 + 1.6) * sag(Q, EI_BEAM), STAGED)
