"""Members that crack and live through stages: the linear road, own strips, closed forms, the second method."""

from __future__ import annotations

import dataclasses
from dataclasses import replace
from typing import Any

import bonded_plate
import numpy as np
import pytest
from common import fixed, part, pin, roller, simple, uniform
from cracked_beams import BARS, CONCRETE, THIN, at_level, everything, reinforced, row_of_bars
from cracked_lives import CREPT, L, lives, plated
from staged_members import BAR, LEFT, MIDDLE, PROP, RIGHT, STAGED, STRIP, TIMBER_TAPER, TWO, at, staged

from fishbelly.member.analysis import Analysis
from fishbelly.member.cracked_found import CrackedResponse
from fishbelly.member.cracked_loading import cracked_loading
from fishbelly.member.cracked_response import cracked_response
from fishbelly.member.description import Combination, Hinge, Material, Member, Placing, Support
from fishbelly.member.extremes import values_at
from fishbelly.member.faults import CannotCompute, NoStiffness, NotLinear
from fishbelly.member.laws import straight
from fishbelly.member.loads import Point, Temperature
from fishbelly.member.part_forces import resultants
from fishbelly.member.questions import Limit, Stage
from fishbelly.member.results import deflect
from fishbelly.member.solved import solve

EN = "EN 1992-1-1"
LINEAR = 1e-10
"""Of the largest of its kind; an uncracked member is what the linear road makes of it."""
STRIPS = 1e-5
"""Relative; own strips of 1 mm and stretches of 1 mm, against sections that are exact."""
ALONG = 1e-9
"""Relative; places of cracks are found to 1e-10 of the length, strains resolved to 1e-10."""
LASTING = Combination("all", {"old": 1.2, "new": 0.7}, sustained={"old": 0.4, "new": 0.3})

UNCRACKED = {name: make for name, make in STAGED.items() if "hinge" not in name} | {
    "part taken away, a share lasts": lambda: staged(
        TIMBER_TAPER, at(STRIP, until="new"), combinations=(LASTING,), shear=True
    ),
    "prop taken away, a share lasts": lambda: staged(
        TIMBER_TAPER, at(STRIP, stage="new"), supports=(LEFT, PROP, RIGHT), combinations=(LASTING,), shear=True
    ),
    "part taken away over three supports, a share lasts": lambda: staged(
        TIMBER_TAPER, at(STRIP, until="new"), supports=(LEFT, MIDDLE, RIGHT), combinations=(LASTING,)
    ),
    "restrained warmth, then softer": lambda: staged(
        BAR,
        supports=(fixed("A", 0.0, along=np.inf), fixed("B", 6.0, along=np.inf)),
        stages=(TWO[0], Stage("new", ("new",), factors={"steel": 0.5})),
        loads=(Temperature(0.0, 6.0, top=30.0, bottom=30.0, case="old"), uniform(1e3, 6.0, case="new")),
    ),
}


def unbroken(member: Member) -> Member:
    """The same of materials that could crack, but far beyond any stress."""
    strong = tuple(dataclasses.replace(m, cracking=1e14, cracks=True) for m in member.materials)
    return replace(member, materials=strong)


def field(r: CrackedResponse, name: str, x: float, side: str = "right") -> float:
    values = getattr(r.total, name)
    return float(values_at(r.analysis.profile.panels, values if name == "N" else values[0], np.array([x]), side)[0])


@pytest.mark.parametrize("name", UNCRACKED)
def test_uncracked_it_is_the_linear_road(name: str) -> None:
    """Moments, forces, strains, deflections and reactions at the end of every stage."""
    plain = UNCRACKED[name]()
    analysis = Analysis.of(plain)
    member = plain if any(g.placed.flanges for g in analysis.profile.groups) else unbroken(plain)
    analysis = Analysis.of(member)
    combination = member.combinations[0]
    for end in cracked_response(analysis, combination, EN).life:
        linear = analysis.combine(combination, upto=end.stage).total
        assert not end.stretches
        for of in ("M", "V", "deflection", "rotation", "shear", "axial", "curvature", "reactions", "N"):
            found, expected = getattr(end.total, of), getattr(linear, of)
            # one newton, and a strain of a millionth of a millionth, where there should be none
            size = max(np.abs(expected).max(), {"N": 1.0, "V": 1.0}.get(of, 1e-8))
            assert np.abs(found - expected).max() <= LINEAR * size, of


def test_plate_bonded_under_load_by_own_strips() -> None:
    """S10: deflection at the end of both stages, stress and force of the plate, by strips of the test's own."""
    member = plated()
    r = cracked_response(Analysis.of(member), everything(member), EN)
    expected = bonded_plate.deflections(1e-3)
    assert [field(end, "deflection", L / 2) for end in r.life] == pytest.approx(expected, rel=STRIPS)
    assert r.life[0].stretches[0][0] > r.stretches[0][0]
    force = resultants(cracked_loading(r), 3)
    assert force is not None
    for x in (0.6, 2.0, L / 2):
        own = bonded_plate.answer(bonded_plate.Section(True), *(bonded_plate.moment(q, x) for q in (14e3, 27e3)))
        found = values_at(r.analysis.profile.panels, force.N[0], np.array([x]))[0]
        assert found == pytest.approx(own.plate_mean, rel=STRIPS)


def test_limits_after_a_stage_take_the_difference_of_totals() -> None:
    limits = (Limit("added", absolute=0.013, after="strengthened"), Limit("total", span_over=250))
    result = deflect(plated(tension_stiffening=EN, limits=limits))
    c, stages = result["combinations"][0], result["stages"]
    added, total = c["checks"]
    ends = [s["combinations"][0] for s in stages]
    sags = [e["deflection"]["down"]["value"] for e in ends]
    assert added["found"] == pytest.approx(sags[1] - sags[0], rel=ALONG)
    assert total["found"] == c["deflection"]["down"]["value"] == pytest.approx(sags[1], rel=ALONG)
    assert added["ok"] and not total["ok"]
    assert ends[1]["own"]["deflection"] == pytest.approx(added["found"], rel=ALONG)
    # steel takes over as concrete creeps, and the section that cracked is softer than one that did not
    assert ends[0]["instantaneous"]["deflection"]["down"]["value"] < sags[0]
    assert sum(p["share"] for p in ends[1]["carried"]) == pytest.approx(1.0, rel=ALONG)
    assert sum(p["force"] for p in ends[1]["carried"]) == pytest.approx(0.0, abs=1e-3)
    asked = deflect(plated(tension_stiffening=EN, limits=limits), stage="present")["combinations"][0]
    assert asked["deflection"]["down"]["value"] == pytest.approx(sags[0], rel=ALONG)


def test_joints_tell_what_enters_the_plate_and_the_bars() -> None:
    """The force at a section is what has flowed in up to there, where no crack begins between."""
    c = deflect(plated(tension_stiffening=EN))["combinations"][0]
    joint = {j["part"]: j for j in c["joints"]}
    assert joint["plate"]["start"]["force"] > 40e3
    assert joint["plate"]["start"]["force"] == pytest.approx(joint["plate"]["end"]["force"], rel=1e-8)
    assert joint["plate"]["start"]["flow"] == pytest.approx(-joint["plate"]["end"]["flow"], rel=1e-6)
    assert joint["bottom"]["start"]["force"] == 0.0 and joint["bottom"]["flow"]["max"]["value"] > 0.0


def slab(**more: Any) -> Member:
    """A slab that carries no tension, bars alike above and below: one stiffness for moments of either sign."""
    plain = Material("concrete", 30e9, poisson=0.2, density=0.0, creep=0.0, no_tension=True)
    strips = Material("bars", 200e9 * 1e-3 / (0.2 * THIN), poisson=0.3, creep=0.0, density=0.0)
    parts = (
        part("slab", "rectangle", 8.0, material="concrete", width=1.0, depth=0.2),
        *(
            part(n, "rectangle", 8.0, material="bars", place=at_level(z), width=0.2, depth=THIN)
            for n, z in (("bottom", -0.17), ("top", -0.03))
        ),
    )
    given: dict[str, Any] = {"supports": simple(8.0), "shear": False} | more
    return Member(8.0, parts, (plain, strips), **given)


def slab_stiffness() -> float:
    """EI of the slab cracked: x from n A (x - d') + b x² / 2 = n A (d - x), strips displacing nothing to speak of."""
    b, n, d, top = 1.0, 200e9 / 30e9 * 1e-3, 0.17, 0.03
    x = float(np.roots([b / 2, 2 * n, -n * (d + top)]).max())
    return 30e9 * (b * x**3 / 3 + n * (d - x) ** 2 + n * (x - top) ** 2)


def test_prop_struck_from_a_cracked_slab() -> None:
    """Closed forms of a beam of constant EI: two spans on the prop, then one."""
    q, prop = 6e3, roller("prop", 4.0, until="struck")
    stages = (Stage("propped", ("q",)), Stage("struck"))
    member = slab(supports=(pin("A", 0.0), prop, roller("B", 8.0)), stages=stages, loads=(uniform(q, 8.0, case="q"),))
    r = cracked_response(Analysis.of(member), everything(member))
    EI = slab_stiffness()
    # to 1e-6: the strips, which have no depth in the closed form, take 1e-6 of the slab's concrete away
    assert -r.life[0].total.reactions[1, 0] == pytest.approx(0.625 * q * 8.0, rel=1e-6)
    x = 4.0 * 0.4215
    span = q * x * (4.0**3 - 3 * 4.0 * x**2 + 2 * x**3) / (48 * EI)
    assert field(r.life[0], "deflection", x) == pytest.approx(span, rel=1e-6)
    assert field(r, "deflection", 4.0) == pytest.approx(5 * q * 8.0**4 / (384 * EI), rel=1e-6)
    assert r.total.reactions[1] == pytest.approx(np.zeros(5), abs=1e-9)
    row = deflect(member)["stages"][1]["combinations"][0]
    (gone,) = row["released"]
    assert gone["name"] == "prop" and gone["vertical"] == pytest.approx(0.625 * q * 8.0, rel=1e-6)
    assert gone["deflection_before"] == pytest.approx(0.0, abs=1e-9)
    assert gone["deflection_after"] == pytest.approx(field(r, "deflection", 4.0), rel=ALONG)


@pytest.mark.parametrize("rule", [None, EN])
def test_prop_that_never_carries_changes_nothing(rule: str | None) -> None:
    """It comes after one load and goes before the next; the slab cracks further with the second."""
    stages = (Stage("first", ("g",)), Stage("propped"), Stage("last", ("q",)))
    loads = (uniform(9e3, L, case="g"), uniform(14e3, L, case="q"))
    held = (pin("A", 0.0), roller("prop", 3.0, stage="propped", until="last"), roller("B", L))
    plain = reinforced(L, supports=simple(L), loads=loads, stages=stages)
    one, other = (cracked_response(Analysis.of(m), everything(m), rule) for m in (plain, replace(plain, supports=held)))
    assert np.array(other.stretches) == pytest.approx(np.array(one.stretches), rel=1e-8)
    for x in (1.0, 3.0, 5.0):
        assert field(other, "deflection", x) == pytest.approx(field(one, "deflection", x), rel=1e-8)
    assert np.abs(other.life[1].total.reactions[1]).max() < 1e-6


def test_what_has_cracked_stays_cracked() -> None:
    """Load that goes again: the section keeps the stiffness of the cracked one."""
    stages = (Stage("light", ("g",)), Stage("heavy", ("q",)), Stage("light again", ("back",)))
    loads = tuple(uniform(q, L, case=c) for q, c in ((3e3, "g"), (20e3, "q"), (-20e3, "back")))
    member = reinforced(L, supports=simple(L), loads=loads, stages=stages, shear=False, top=False)
    r = cracked_response(Analysis.of(member), everything(member))
    first, heavy, last = r.life
    assert not first.stretches and last.stretches == heavy.stretches
    # bars, concrete and place of the axis are in proportion: the same cracked stiffness under 3 as under 23 kN/m
    assert field(last, "curvature", L / 2) == pytest.approx(field(heavy, "curvature", L / 2) * 3.0 / 23.0, rel=1e-8)
    assert field(last, "deflection", L / 2) > 1.5 * field(first, "deflection", L / 2)


def test_history_over_combinations_and_stages() -> None:
    """What one combination cracks in the first stage is cracked for another in the second."""
    stages = (Stage("built", ("g", "q")), Stage("used", ("p",)))
    loads = tuple(uniform(q, L, case=c) for q, c in ((3e3, "g"), (20e3, "q"), (1e3, "p")))
    combos = (Combination("rare", {"g": 1.0, "q": 1.0}), Combination("frequent", {"g": 1.0, "p": 1.0}))
    member = reinforced(L, supports=simple(L), loads=loads, stages=stages, combinations=combos, shear=False)
    rare, frequent = deflect(member)["combinations"]
    assert frequent["cracked"]["stretches"] == rare["cracked"]["stretches"] and frequent["cracked"]["from_history"]
    assert frequent["cracked"]["stretches"][0]["by"] == "rare"
    alone = deflect(replace(member, cracks="by combination"))["combinations"][1]
    assert "cracked" not in alone
    assert alone["deflection"]["down"]["value"] < frequent["deflection"]["down"]["value"]


def test_stage_in_which_it_cannot_be_carried_is_named() -> None:
    """Bars that go leave concrete that cannot carry its moment."""
    member = lives()["creep runs off"]
    bars = replace(member.parts[1], until="new")
    member = replace(member, parts=(member.parts[0], bars), stages=(CREPT[0], CREPT[2]))
    with pytest.raises(NoStiffness, match=r"x = .* cannot carry M = .* in stage new; it can carry 0 N m"):
        cracked_response(Analysis.of(member), everything(member))


def test_what_is_not_built_with_stages_says_so() -> None:
    member = replace(lives()["creep runs off"], hinges=(Hinge(3.0, until="new"),))
    with pytest.raises(CannotCompute, match="hinges that come or go together with parts that crack are not built"):
        cracked_response(Analysis.of(member), everything(member))
    lifting = Support("hold", 3.0, down=np.inf, only_up=True)
    held = replace(lives()["creep runs off"], supports=(*simple(L), lifting))
    pulled = replace(held, loads=(*held.loads, Point(3.0, -2e5, "q")))
    with pytest.raises(CannotCompute, match=r"would lift off .*not built together with"):
        cracked_response(Analysis.of(pulled), everything(pulled))


def test_inclined_flanges_that_crack_are_refused_by_name() -> None:
    """A concrete tee whose flange follows a slope; a steel plate that does so is counted as it is uncracked."""
    depth = straight((0.0, L), (0.5, 0.9))
    tee = part("tee", "tee", L, material="concrete", width=0.6, depth=depth, web=0.2, flange=0.1)
    bars = row_of_bars("bars", 3, 0.02, straight((0.0, L), (-0.45, -0.85)), L)
    place = Placing("position", position=at_level(0.0).position, anchor="bottom")
    member = Member(
        L, (replace(tee, place=place), bars), (CONCRETE, BARS), supports=simple(L), loads=(uniform(4e4, L),)
    )
    analysis = Analysis.of(member)
    assert any(g.placed.flanges for g in analysis.profile.groups)
    with pytest.raises(CannotCompute, match=r"tee cracks and has inclined flanges .*inclined"):
        cracked_response(analysis, everything(member))


def test_results_that_crack_do_not_add() -> None:
    member = plated(tension_stiffening=EN)
    found = solve(member).combination("all")
    assert found.largest("deflection")[0] == deflect(member)["combinations"][0]["deflection"]["down"]["value"]
    with pytest.raises(NotLinear, match="parts crack: results do not add"):
        _ = found * 2.0
    with pytest.raises(NotLinear, match="solve them as one combination"):
        _ = found + found
    plain = replace(member, materials=(replace(CONCRETE, cracking=None), *member.materials[1:]))
    linear = solve(plain).combination("all")
    assert (linear * 2.0).largest("deflection")[0] == pytest.approx(2.0 * linear.largest("deflection")[0])
    first = solve(member).combination("all", stage="present")
    assert first.largest("deflection")[0] < found.largest("deflection")[0]


def test_multiplier_for_lasting_loads_by_hand() -> None:
    """ACI 318: lambda = 2 / (1 + 50 rho'), rho' = A_s' / (b d), on the immediate deflection of what lasts."""
    lasting = (Combination("all", {"load": 1.0}, {"load": 0.6}),)
    member = reinforced(
        L,
        supports=simple(L),
        loads=(uniform(2e4, L),),
        combinations=lasting,
        tension_stiffening="ACI 318-19",
        shear=False,
    )
    cracked = deflect(member)["combinations"][0]["cracked"]
    found, I_e = cracked["long_term"], 0.0
    rho = 2 * np.pi * 0.016**2 / 4 / (0.3 * 0.37)
    at_once = replace(member, combinations=(Combination("all", {"load": 1.0}),))
    I_e = deflect(at_once)["combinations"][0]["cracked"]["one_value"]["spans"][0]["I_effective"]
    immediate = 5 * 2e4 * L**4 / (384 * 31e9 * I_e)
    assert found["compression_steel"] == pytest.approx(rho, rel=1e-12)
    assert found["lambda"] == pytest.approx(2.0 / (1.0 + 50.0 * rho), rel=1e-12)
    assert found["immediate"] == pytest.approx(immediate, rel=1e-9)
    assert found["value"] == pytest.approx(immediate * (1.0 + 0.6 * found["lambda"]), rel=1e-9)
    assert "long_term" not in deflect(at_once)["combinations"][0]["cracked"]
