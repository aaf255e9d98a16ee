"""Joints between parts: what enters a part at its ends, the flow along it, fasteners, theoretical cut-offs.

Forces of parts are computed a second time from the section's own closed forms; the scenarios' figures come through the
command and hold to half of their last digit.
"""

from dataclasses import replace
from itertools import product

import numpy as np
import pytest
from commands import INCH, KN, LBF, changed, check_prints, deflect, scenario
from common import CONCRETE, STEEL, TIMBER, part, pin, roller, simple, uniform

from fishbelly.member.analysis import Analysis
from fishbelly.member.carried import part_force, rate
from fishbelly.member.clusters import clusters
from fishbelly.member.description import Member, Placing
from fishbelly.member.extremes import values_at
from fishbelly.member.fixings import Joined
from fishbelly.member.laws import straight
from fishbelly.member.loads import Distributed, Point, Shrinkage, Temperature
from fishbelly.member.part_forces import loadings
from fishbelly.member.part_shears import part_shears
from fishbelly.member.results import deflect as solve

SMOOTH = 1e-9
"""Relative; a flow is a derivative of values good to 1e-12 on panels of 17 points."""
EXACT = 1e-11
"""Relative; closed forms where nothing varies."""


def joint(combination, name):
    return next(j for j in combination["joints"] if j["part"] == name)


# ---- the scenarios, through the command


def test_s9_flat_of_the_gantry_arm():
    found = deflect(scenario("s9_gantry_arm"))["by_name"]
    both = joint(found["tip and self"], "flat")
    assert both["to"] == "box"
    check_prints(abs(both["end"]["force"]) / KN, "14.4")
    check_prints(abs(both["flow"]["max"]["value"]) / 1e3, "12.1")
    assert both["flow"]["max"]["at"] == 0.0
    warm = joint(found["warmth"], "flat")
    check_prints(warm["end"]["force"] / KN, "13.1")
    assert warm["flow"]["max"]["value"] == 0.0
    # the tip load has no share in V·ES/EI that varies: closed form
    a, s = 1900e-6 * 70e9, 800e-6 * 210e9
    z = 65e-3 * s / (a + s)
    EI = 70e9 * (80 * 120**3 - 70 * 110**3) / 12e12 + 210e9 * 80 * 10**3 / 12e12 + a * z**2 + s * (65e-3 - z) ** 2
    flow = 1200.0 * s * (65e-3 - z) / EI
    tip = joint(found["tip"], "flat")
    assert tip["start"]["flow"] == pytest.approx(flow, rel=1e-9)
    assert tip["start"]["force"] == pytest.approx(-flow * 3.0, rel=EXACT)
    assert tip["end"]["force"] == pytest.approx(-flow * 1.4, rel=EXACT)


def test_s1_plate_of_the_flitch_beam_shares_v_as_ei():
    text = changed(
        scenario("s1_flitch_beam"),
        ('centred_on = "timber"', 'centred_on = "timber"\njoined = { pitch = "400 mm", rows = 2 }'),
    )
    final = joint(deflect(text)["by_name"]["final"], "plate")
    check_prints(final["start"]["shear"] / KN, "8.53")
    check_prints(final["start"]["couple"] / KN, "1.32")
    assert final["end"]["shear"] == pytest.approx(-final["start"]["shear"], rel=1e-9)
    assert abs(final["start"]["force"]) < 1e-6
    timber, steel = 11e9 * 0.150 * 0.225**3 / 12, 210e9 * 0.010 * 0.200**3 / 12
    share = 0.6 * steel / (steel + timber / 1.6) + 0.4 * steel / (steel + timber)
    assert final["start"]["V"] == pytest.approx(7e3 * 2.25, rel=EXACT)
    assert final["start"]["shear"] == pytest.approx(7e3 * 2.25 * share, rel=1e-9)
    assert final["start"]["couple"] == pytest.approx(7e3 * (2.4 * 0.15 - 0.5 * 0.15**2) * share, rel=1e-9)


def test_s2_plates_of_the_runway_beam():
    found = deflect(changed(scenario("s2_runway_beam"), ('"2547.5 mm"', '"2540 mm"'), ('"4952.5 mm"', '"4960 mm"')))[
        "by_name"
    ]["wheels"]
    for name, sign in (("top plate", -1.0), ("bottom plate", 1.0)):
        start = joint(found, name)["start"]
        check_prints(sign * start["force"] / KN, "137")
        check_prints(start["M"] / KN, "132")


def test_s11_plate_with_all_new_load_on_it_and_in_stages():
    new = joint(deflect(scenario("s11_after_welding"))["by_name"]["new"], "plate")
    kip = 1000 * LBF
    check_prints(new["start"]["force"] / kip, "24.25")
    check_prints(abs(new["flow"]["max"]["value"]) / (kip / INCH), "0.41")
    text = changed(
        scenario("s11_after_welding"),
        ('under = "beam"', 'under = "beam"\nstage = "plated"'),
        (
            '[[combination]]\nname = "new"\nfactors = { dead = 1, live = 1 }',
            '[[load]]\nkind = "uniform"\nvalue = "0.9 kip/ft"\ncase = "old"\n'
            '[[stage]]\nname = "bare"\ncases = ["old"]\n'
            '[[stage]]\nname = "plated"\ncases = ["dead", "live"]\n'
            '[[combination]]\nname = "new"\nfactors = { old = 1, dead = 1, live = 1 }',
        ),
    )
    staged = joint(deflect(text)["by_name"]["new"], "plate")
    assert staged["start"]["force"] == pytest.approx(new["start"]["force"], rel=1e-9)
    assert staged["flow"]["max"]["value"] == pytest.approx(new["flow"]["max"]["value"], rel=1e-8)
    assert staged["start"]["M"] == pytest.approx(new["start"]["M"] * 2.15 / 1.25, rel=1e-9)


# ---- forces and flows against closed forms


def plated(E_plate=210e9, depth=None, more=()):
    """A timber beam whose depth may vary with a plate under its middle, and a concrete topping."""
    depth = depth or 0.30
    parts = (
        part("beam", "rectangle", 6.0, material="timber", width=0.20, depth=depth),
        part("plate", "rectangle", 4.5, start=1.2, place=Placing("under", "beam"), width=0.12, depth=0.012),
        part("topping", "rectangle", 6.0, material="concrete", place=Placing("over", "beam"), width=0.5, depth=0.06),
    )
    loads = (uniform(9e3, 6.0), Point(2.0, 15e3), *more)
    return Member(6.0, parts, (TIMBER, STEEL, CONCRETE), supports=simple(6.0), loads=loads)


def solved(member, combination=0):
    analysis = Analysis.of(member)
    loading = loadings(analysis, analysis.combine(member.combinations[combination]))
    return analysis, loading


def forces(loading):
    return {i: f for i in loading[0].parts if (f := part_force(loading, i)) is not None}


@pytest.mark.parametrize("depth", [None, straight((0.0, 6.0), (0.24, 0.40))])
def test_parts_together_carry_what_the_member_carries(depth):
    more = (Temperature(0.0, 6.0, parts={"beam": 10.0, "plate": 25.0}), Shrinkage("topping", 3e-4, 0.0, 6.0))
    _, loading = solved(plated(depth=depth, more=more))
    carried = forces(loading)
    r = loading[0].response
    scale = max(np.abs(f.N).max() for f in carried.values())
    assert np.abs(sum(f.N for f in carried.values()) - r.N).max() < 1e-10 * scale
    assert np.abs(sum(f.about_line for f in carried.values())[0] - r.M[0]).max() < 1e-11 * np.abs(r.M).max()
    shears = part_shears(loading, carried)
    assert np.abs(sum(shears.values()) - r.V[0]).max() < 1e-8 * np.abs(r.V).max()


def test_flow_between_two_cuts_is_the_difference_of_forces_of_own_strips():
    """Force of the plate at two cuts of a tapering beam, by strips of the section drawn here."""
    member = replace(plated(depth=straight((0.0, 6.0), (0.24, 0.40))), inclined="cut")
    analysis, loading = solved(member)
    plate = part_force(loading, 1)
    panels = analysis.profile.panels

    def by_strips(x):
        h = 0.24 + 0.16 * x / 6.0
        R = (9e3 * 18.0 + 15e3 * 4.0) / 6.0
        M = R * x - 4.5e3 * x * x - 15e3 * max(x - 2.0, 0.0)
        edges = {"top": (0.06, 33e9 * 0.5), "beam": (h, 11e9 * 0.2), "plate": (0.012, 210e9 * 0.12)}
        z, stiff, owner, top = [], [], [], 0.06
        for name, (d, EB) in edges.items():
            n = 4000
            z.append(top - d * (np.arange(n) + 0.5) / n)
            stiff.append(np.full(n, EB * d / n))
            owner += [name] * n
            top -= d
        z, stiff = np.concatenate(z), np.concatenate(stiff)
        centre = (z * stiff).sum() / stiff.sum()
        curvature = M / ((z - centre) ** 2 * stiff).sum()
        return float((-curvature * (z - centre) * stiff)[np.array(owner) == "plate"].sum())

    for a, b in ((1.3, 1.9), (2.1, 4.2)):
        x = np.polynomial.legendre.leggauss(24)
        places = 0.5 * (a + b) + 0.5 * (b - a) * x[0]
        flow = values_at(panels, plate.flow[0], places)
        difference = by_strips(b) - by_strips(a)
        # 4000 strips leave (1/4000)² of a part's own second moment: far below
        assert 0.5 * (b - a) * (x[1] @ flow) == pytest.approx(difference, rel=1e-6)


def test_stacked_halves_share_shear_evenly():
    lower = Placing("under", "upper")
    parts = (
        part("upper", "rectangle", 4.0, width=0.1, depth=0.1),
        part("lower", "rectangle", 4.0, place=lower, width=0.1, depth=0.1),
    )
    member = Member(4.0, parts, (STEEL,), supports=simple(4.0), loads=(uniform(5e3, 4.0),))
    _, loading = solved(member)
    shears = part_shears(loading, forces(loading))
    V = loading[0].response.V[0]
    for half in shears.values():
        assert np.abs(half - 0.5 * V).max() < SMOOTH * np.abs(V).max()


def test_three_laminations_carry_shear_as_the_parabola_says():
    """7/27, 13/27 and 7/27 of V: the parabola of shear stress integrated over thirds of a rectangle."""
    parts = (
        part("a", "rectangle", 4.0, width=0.1, depth=0.05),
        part("b", "rectangle", 4.0, place=Placing("under", "a"), width=0.1, depth=0.05),
        part("c", "rectangle", 4.0, place=Placing("under", "b"), width=0.1, depth=0.05),
    )
    member = Member(4.0, parts, (STEEL,), supports=simple(4.0), loads=(uniform(5e3, 4.0),))
    _, loading = solved(member)
    shears = part_shears(loading, forces(loading))
    V = loading[0].response.V[0]
    for number, share in ((0, 7 / 27), (1, 13 / 27), (2, 7 / 27)):
        assert np.abs(shears[number] - share * V).max() < SMOOTH * np.abs(V).max()


def test_parts_side_by_side_share_by_level_cuts_where_rigid_and_as_ei_where_fastened():
    """Depths 100 and 200 mm on one axis: a rigid joint gives the shallow one only where it is."""

    def shares(joined):
        beside = Placing("right_of", "deep")
        parts = (
            part("deep", "rectangle", 4.0, width=0.05, depth=0.2),
            part("shallow", "rectangle", 4.0, place=beside, width=0.05, depth=0.1),
        )
        parts = (parts[0], replace(parts[1], joined=joined))
        member = Member(4.0, parts, (STEEL,), supports=simple(4.0), loads=(Point(2.0, 8e3),), shear=False)
        assert clusters(member) == ((0, 1) if joined else (0, 0))
        _, loading = solved(member)
        found = part_shears(loading, forces(loading))
        return found[1][0, 0, 3] / 4e3

    assert shares(Joined(pitch=0.1)) == pytest.approx(1.0 / 9.0, rel=1e-9)
    # strips: q(z) from the outside, the shallow part has half the width within |z| < 50 mm
    z = (np.arange(200_000) + 0.5) / 200_000 * 0.05
    I = 0.05 * (0.2**3 + 0.1**3) / 12
    q = (0.05 * (0.01 - 0.0025) / 2 + 0.1 * (0.0025 - z**2) / 2) / I
    assert shares(None) == pytest.approx(2.0 * 0.5 * q.mean() * 0.05, rel=1e-8)


def test_clusters_follow_what_stands_on_what():
    parts = (
        part("left", "rectangle", 4.0, width=0.05, depth=0.2),
        part("plate", "rectangle", 4.0, place=Placing("right_of", "left"), width=0.01, depth=0.2),
        part("right", "rectangle", 4.0, place=Placing("right_of", "left"), width=0.05, depth=0.2),
        part("flange", "rectangle", 4.0, place=Placing("under", "plate"), width=0.05, depth=0.02),
        part("cap", "rectangle", 4.0, place=Placing("over", "left"), width=0.05, depth=0.02),
    )
    fastened = Joined(pitch=0.2)
    parts = (parts[0], replace(parts[1], joined=fastened), parts[2], parts[3], replace(parts[4], joined=fastened))
    member = Member(4.0, parts, (STEEL,), supports=simple(4.0), loads=(uniform(1.0, 4.0),))
    assert clusters(member) == (0, 1, 0, 1, 0)


def test_pattern_loads_give_the_worst_of_every_arrangement():
    parts = (
        part("beam", "rectangle", 9.0, width=0.1, depth=0.2),
        part("plate", "rectangle", 6.5, start=3.0, place=Placing("under", "beam"), width=0.1, depth=0.02),
    )
    supports = (pin("A", 0.0), roller("B", 4.0), roller("C", 9.0))

    def member(*spans):
        loads = (uniform(2e3, 9.0), *(uniform(7e3, b, a) for a, b in spans))
        return Member(9.0, parts, (STEEL,), supports=supports, loads=loads, shear=False)

    pattern = Distributed(((0.0, 7e3), (9.0, 7e3)), pattern=True)
    whole = Member(9.0, parts, (STEEL,), supports=supports, loads=(uniform(2e3, 9.0), pattern), shear=False)
    found = joint(solve(whole)["combinations"][0], "plate")
    spans = ((0.0, 4.0), (4.0, 9.0))
    each = [
        joint(solve(member(*(s for s, on in zip(spans, which, strict=True) if on)))["combinations"][0], "plate")
        for which in product((True, False), repeat=2)
    ]
    for end, key in product(("start", "end"), ("M", "V", "force", "shear", "couple", "flow")):
        most = max((j[end][key] for j in each), key=abs)
        assert found[end][key] == pytest.approx(most, rel=1e-8), (end, key)
    most = max((j["flow"]["max"] for j in each), key=lambda m: abs(m["value"]))
    assert found["flow"]["max"]["value"] == pytest.approx(most["value"], rel=1e-8)


def test_rate_is_exact_on_polynomials():
    analysis, _ = solved(plated())
    panels = analysis.profile.panels
    assert np.abs(rate(panels, panels.x**5) - 5 * panels.x**4).max() < 1e-9


def test_what_symmetry_makes_nothing_is_nothing():
    """A part on the axis has no force; at free ends and at mid-span nothing is left of round-off."""
    depth = straight((0.0, 3.0, 6.0), (0.24, 0.40, 0.24))
    parts = (
        part("beam", "rectangle", 6.0, material="timber", width=0.20, depth=depth),
        part("cheek", "rectangle", 6.0, place=Placing("right_of", "beam"), width=0.01, depth=0.1),
        part("sole", "rectangle", 6.0, place=Placing("under", "beam"), width=0.12, depth=0.012),
        part("cap", "rectangle", 6.0, place=Placing("over", "beam"), width=0.12, depth=0.012),
        part("half", "rectangle", 3.0, place=Placing("left_of", "beam"), width=0.01, depth=0.1),
        part("rest", "rectangle", 6.0, start=3.0, place=Placing("left_of", "beam"), width=0.01, depth=0.1),
    )
    loads = (uniform(9e3, 6.0),)
    # the sole slopes and the cap does not: as they are cut they are alike
    member = Member(6.0, parts, (TIMBER, STEEL), supports=simple(6.0), loads=loads, shear=False, inclined="cut")
    found = solve(member)["combinations"][0]
    for name in ("cheek", "half", "rest"):
        one = joint(found, name)
        assert one["start"]["force"] == one["end"]["force"] == 0.0
        assert one["flow"]["max"]["value"] == one["start"]["flow"] == one["end"]["flow"] == 0.0
        assert abs(one["start"]["shear"]) + abs(one["end"]["shear"]) > 1.0
    sole = joint(found, "sole")
    assert sole["start"]["force"] == sole["end"]["force"] == 0.0 and sole["start"]["couple"] == 0.0
    assert sole["start"]["flow"] == pytest.approx(-sole["end"]["flow"], rel=SMOOTH) and sole["start"]["flow"] > 1e3
    assert joint(found, "half")["end"]["V"] == joint(found, "rest")["start"]["V"] == 0.0
