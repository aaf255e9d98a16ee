"""Joints between parts: what enters a part at its ends, the flow along it, fasteners, theoretical cut-offs.

Forces of parts are computed a second time from the section's own closed forms; the scenarios' figures come through the
command and hold to half of their last digit.
"""

from dataclasses import replace
from itertools import product

import numpy as np
import pytest
from commands import INCH, KN, LBF, MM, changed, check_prints, command, deflect, scenario
from common import CONCRETE, STEEL, TIMBER, part, pin, roller, simple, uniform

from fishbelly.cli.faults import JobFaults
from fishbelly.cli.job_file import read_job
from fishbelly.cli.tables import deflect_table
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


# ---- fasteners, welds, cut-offs


CUT = """
length = "6 m"
shear = false
[material.steel]
E = "210 GPa"
strength = "160 MPa"
[[part]]
name = "beam"
material = "steel"
shape = "rectangle"
width = "60 mm"
depth = "200 mm"
[[part]]
name = "plate"
material = "steel"
shape = "rectangle"
width = "60 mm"
depth = "20 mm"
under = "beam"
from = "2.5 m"
to = "5 m"
joined = { pitch = "120 mm", rows = 2, capacity = "9 kN" }
[[support]]
at = "0 m"
kind = "pin"
[[support]]
at = "6 m"
kind = "roller"
[[load]]
kind = "uniform"
value = "15 kN/m"
"""


def plate_by_hand():
    """Area, lever of the plate, I of the whole, by the centroid from the plate's middle."""
    a, p = 0.06 * 0.2, 0.06 * 0.02
    z = a * 0.11 / (a + p)
    inertia = 0.06 * 0.2**3 / 12 + a * (0.11 - z) ** 2 + 0.06 * 0.02**3 / 12 + p * z**2
    return p, z, inertia


def moment(x):
    return 15e3 * x * (6.0 - x) / 2


def test_fasteners_and_theoretical_cut_off():
    found = deflect(CUT)
    j = joint(found["combinations"][0], "plate")
    p, z, inertia = plate_by_hand()
    for end, x in (("start", 2.5), ("end", 5.0)):
        e = j[end]
        force, flow = moment(x) * p * z / inertia, 15e3 * (3.0 - x) * p * z / inertia
        assert e["force"] == pytest.approx(force, rel=1e-10)
        assert e["flow"] == pytest.approx(flow, rel=1e-8)
        assert e["per_fastener"] == pytest.approx(flow * 0.12 / 2, rel=1e-8)
        assert e["needed"] == np.ceil(force / 9e3)
        assert e["zone"] == pytest.approx(np.ceil(force / 18e3) * 0.12, rel=1e-12)
    most = 15e3 * 2.0 * p * z / inertia
    assert j["flow"]["max"]["value"] == pytest.approx(-most, rel=1e-8)
    assert j["flow"]["max"]["per_fastener"] == pytest.approx(-most * 0.06, rel=1e-8)
    assert j["flow"]["largest_pitch"] == pytest.approx(18e3 / most, rel=1e-8)
    # M = 160 MPa W of the bare beam: 64 kNm, met at these two places
    W = 0.06 * 0.2**2 / 6
    off = np.sqrt(9.0 - 2.0 * 160e6 * W / 15e3)
    assert j["start"]["cut_off"] == pytest.approx(3.0 - off, rel=1e-8)
    assert j["end"]["cut_off"] == pytest.approx(3.0 + off, rel=1e-8)
    # the first lies outside the plate, the second inside it: there the plate's own force has to be brought in
    at_end = np.ceil(moment(3.0 + off) * p * z / inertia / 18e3) * 0.12
    assert j["end"]["run_to"] == pytest.approx(3.0 + off + at_end, rel=1e-8)
    assert j["start"]["run_to"] < j["start"]["cut_off"] - 0.11
    assert j["start"]["used_without"] == pytest.approx(moment(2.5) / W / 160e6, rel=1e-9)
    short = [n for n in found["notes"] if n.startswith("plate ends at x = 2.500 m")]
    assert len(short) == 1 and "further" in short[0]
    assert not any(n.startswith("plate ends at x = 5") for n in found["notes"])


def test_weld_and_overload_notes():
    text = changed(CUT, ('pitch = "120 mm", rows = 2, capacity = "9 kN"', 'weld = "60 N/mm"'))
    found = deflect(text)
    j = joint(found["combinations"][0], "plate")
    assert j["start"]["zone"] == pytest.approx(j["start"]["force"] / 60e3, rel=1e-12)
    assert j["start"]["per_fastener"] is None and "needed" not in j["start"]
    assert any(n.startswith("the joint of plate carries") for n in found["notes"])
    weak = deflect(changed(CUT, ('"9 kN"', '"2 kN"')))
    assert any(n.startswith("a fastener of plate carries") for n in weak["notes"])
    strong = deflect(changed(CUT, ('"9 kN"', '"90 kN"')))
    assert not any("fastener" in n for n in strong["notes"])


def test_a_part_that_is_not_needed_has_no_cut_off():
    j = joint(deflect(changed(CUT, ('"15 kN/m"', '"5 kN/m"')))["combinations"][0], "plate")
    assert j["start"]["cut_off"] is None and j["end"]["cut_off"] is None
    assert j["start"]["run_to"] is None and j["start"]["used_without"] < 1.0


def test_a_plate_needed_to_the_very_end_has_none_either():
    text = changed(CUT, ('kind = "uniform"\nvalue = "15 kN/m"', 'kind = "couple"\nvalue = "300 kNm"\nat = "0 m"'))
    found = deflect(text)
    j = joint(found["combinations"][0], "plate")
    assert j["start"]["used_without"] > 1.0 and j["start"]["cut_off"] is None
    assert any("all the way to the end of the member" in n for n in found["notes"])


def test_stages_leave_the_plate_what_came_after_it():
    """Half of the load before the plate is there: the plate has half the force, the note speaks of the whole moment."""
    text = changed(
        CUT,
        ('under = "beam"', 'under = "beam"\nstage = "then"'),
        ('value = "15 kN/m"', 'value = "7.5 kN/m"\ncase = "old"'),
    )
    text += '[[load]]\nkind = "uniform"\nvalue = "7.5 kN/m"\ncase = "new"\n'
    text += '[[stage]]\nname = "first"\ncases = ["old"]\n[[stage]]\nname = "then"\ncases = ["new"]\n'
    staged, at_once = (joint(deflect(t)["combinations"][0], "plate") for t in (text, CUT))
    for end in ("start", "end"):
        assert staged[end]["force"] == pytest.approx(0.5 * at_once[end]["force"], rel=1e-10)
        assert staged[end]["cut_off"] == pytest.approx(at_once[end]["cut_off"], rel=1e-9)


def test_parts_by_position_are_joined_to_what_they_touch():
    text = changed(
        CUT,
        ('under = "beam"\n', 'position = ["0 mm", "-210 mm"]\n'),
        ('joined = { pitch = "120 mm", rows = 2, capacity = "9 kN" }\n', ""),
    )
    placed = joint(deflect(text)["combinations"][0], "plate")
    against = joint(deflect(CUT)["combinations"][0], "plate")
    assert placed["to"] == "beam"
    for end in ("start", "end"):
        for key in ("M", "V", "force", "couple", "flow"):
            assert placed[end][key] == pytest.approx(against[end][key], rel=1e-9)
        # by level cuts here, by the moment about the joint there
        assert placed[end]["shear"] == pytest.approx(against[end]["shear"], rel=1e-7)
    far = changed(text, ('"-210 mm"', '"-260 mm"'))
    assert deflect(far)["combinations"][0]["joints"] == []


def test_bearings_that_lift_off_keep_the_worst_joint():
    member = Member(
        9.0,
        (
            part("beam", "rectangle", 9.0, width=0.1, depth=0.2),
            part("plate", "rectangle", 6.5, start=3.0, place=Placing("under", "beam"), width=0.1, depth=0.02),
        ),
        (STEEL,),
        supports=(pin("A", 0.0, only_up=True), roller("B", 4.0, only_up=True), roller("C", 9.0, only_up=True)),
        loads=(uniform(1e3, 9.0), Distributed(((0.0, 7e3), (9.0, 7e3)), pattern=True)),
        shear=False,
    )
    held = joint(solve(member)["combinations"][0], "plate")
    assert held["start"]["force"] != 0.0 and held["flow"]["max"]["value"] != 0.0


def test_joints_in_the_table():
    said = deflect_table(deflect(CUT), "metric")
    assert "Joints and cut-offs" in said and "Largest flow along each joint" in said
    assert "run to" in said and "Fastening at the ends" in said


# ---- the key


@pytest.mark.parametrize(
    ("given", "said"),
    [
        ('"apart"', "joined: not built yet in this version: joints that slip"),
        ('{ stiffness = "3 kN/mm", pitch = "100 mm" }', "joined.stiffness: not built yet in this version"),
        ('{ per_length = "40 N/mm/mm" }', "joined.per_length: not built yet in this version"),
        ("{}", 'joined: expected "apart", or a table such as'),
        ("3", 'joined: expected "apart", or a table such as'),
        ('{ pitch = "0 mm" }', "joined.pitch: expected a length above 0 m"),
        ('{ pitch = "100 mm", rows = 0 }', "joined.rows: expected a whole number of at least 1"),
        ("{ rows = 2 }", "joined.rows: `rows` needs the `pitch`"),
        ('{ capacity = "3 kN" }', "joined.capacity: `capacity` needs the `pitch`"),
        ('{ pitch = "100 mm", weld = "1 kN/m" }', "joined.weld: expected either fasteners with a `pitch` or a `weld`"),
        ('{ pitch = "100 mm", creep = 2 }', "joined.creep: `creep` is that of a `stiffness`"),
        ('{ pich = "100 mm" }', 'joined.pich: unknown key "pich"; did you mean "pitch"?'),
    ],
)
def test_what_is_wrong_with_a_joint_is_said_once(given, said):
    text = changed(CUT, ('{ pitch = "120 mm", rows = 2, capacity = "9 kN" }', given))
    with pytest.raises(JobFaults) as caught:
        read_job("-", text)
    (fault,) = caught.value.faults
    assert said in str(fault)


def test_a_joint_needs_a_host():
    for text in (
        changed(CUT, ('depth = "200 mm"', 'depth = "200 mm"\njoined = { pitch = "1 m" }')),
        changed(CUT, ('under = "beam"', 'position = ["0 mm", "-210 mm"]')),
    ):
        with pytest.raises(JobFaults) as caught:
            read_job("-", text)
        (fault,) = caught.value.faults
        assert "joined: expected a part placed against another" in str(fault)


def test_section_moduli_of_every_fibre():
    found = command("section", CUT, "--at", "3 m")
    _, z, inertia = plate_by_hand()
    beam, plate = found["parts"]
    assert plate["W"]["bottom"] == pytest.approx(inertia / (z + 10 * MM), rel=1e-10)
    assert plate["W"]["top"] == pytest.approx(inertia / (z - 10 * MM if z > 10 * MM else 10 * MM - z), rel=1e-10)
    assert beam["W"]["top"] == pytest.approx(inertia / (0.210 - z), rel=1e-10)
    for row in found["parts"]:
        for edge in ("top", "bottom"):
            assert abs(row["stress_per_moment"][edge]) * row["W"][edge] == pytest.approx(1.0, rel=1e-12)
