"""Fasteners and welds of joints, theoretical cut-offs, what is said of them, and the key `joined` itself."""

import numpy as np
import pytest
from commands import MM, changed, command, deflect
from common import STEEL, part, pin, roller, uniform

from fishbelly.cli.faults import JobFaults
from fishbelly.cli.job_file import read_job
from fishbelly.cli.tables import deflect_table
from fishbelly.member.description import Member, Placing
from fishbelly.member.loads import Distributed
from fishbelly.member.results import deflect as solve


def joint(combination, name):
    return next(j for j in combination["joints"] if j["part"] == name)


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
    assert not any(n.startswith("a fastener") for n in strong["notes"])


@pytest.mark.parametrize(
    ("asked", "key"), [('pitch = "120 mm", rows = 2, capacity = "9 kN"', "capacity"), ('weld = "60 N/mm"', "weld")]
)
def test_capacity_along_x_says_nothing_of_a_plate_at_the_side(asked, key):
    """A centred side plate has no force along x but shear and couple as its share of EI: not "0 fasteners needed"."""
    text = changed(
        CUT, ('under = "beam"', 'right_of = "beam"'), ('pitch = "120 mm", rows = 2, capacity = "9 kN"', asked)
    )
    found = deflect(text)
    j = joint(found["combinations"][0], "plate")
    share = 0.02**3 / (0.02**3 + 0.2**3)
    for end, x in (("start", 2.5), ("end", 5.0)):
        assert j[end]["couple"] == pytest.approx(share * moment(x), rel=1e-9)
        assert j[end]["force"] == 0.0
        assert not {"needed", "zone", "run_to"} & set(j[end])
    told = [n for n in found["notes"] if n.startswith("plate stands beside beam")]
    assert len(told) == 1 and f"`{key}` is not compared with" in told[0]
    assert not any("stands beside" in n for n in deflect(CUT)["notes"])


def test_the_joint_of_a_plate_passes_what_a_second_plate_on_it_carries():
    """One plate of 20 mm or two of 10 mm on top of each other: the fasteners to the beam carry the same."""
    more = '[[part]]\nname = "outer"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "60 mm"\ndepth = "10 mm"\n'
    more += 'under = "plate"\nfrom = "2.5 m"\nto = "5 m"\n[[support]]\nat = "0 m"'
    text = changed(CUT, ('depth = "20 mm"', 'depth = "10 mm"'), ('[[support]]\nat = "0 m"', more))
    one, two = (joint(deflect(t)["combinations"][0], "plate") for t in (CUT, text))
    for end in ("start", "end"):
        assert two[end]["force"] < 0.51 * one[end]["force"]
        assert two[end]["per_fastener"] == pytest.approx(one[end]["per_fastener"], rel=1e-9)
        assert two[end]["zone"] == pytest.approx(one[end]["zone"])
        assert two[end]["needed"] == one[end]["needed"]
    assert two["flow"]["largest_pitch"] == pytest.approx(one["flow"]["largest_pitch"], rel=1e-9)
    assert two["flow"]["max"]["value"] == pytest.approx(one["flow"]["max"]["value"], rel=1e-9)


def test_overloaded_fasteners_that_slip_are_named_at_their_place():
    text = changed(CUT, ('capacity = "9 kN"', 'capacity = "1 kN", stiffness = "100 kN/mm"'))
    found = deflect(text)
    told = [n for n in found["notes"] if n.startswith("a fastener of plate carries")]
    assert joint(found["combinations"][0], "plate")["flow"]["largest_pitch"] is None
    assert len(told) == 1 and told[0].endswith("more than its 1.000 kN")
    most = found["combinations"][0]["slip"][0]["per_fastener"]["max"]
    assert f"at x = {most['at']:.3f} m" in told[0]


def test_fastening_for_which_the_member_is_too_short():
    short = deflect(changed(CUT, ('"9 kN"', '"2 kN"')))
    j = joint(short["combinations"][0], "plate")
    assert j["start"]["run_to"] < 0.0
    told = next(n for n in short["notes"] if n.startswith("plate ends at x = 2.500 m"))
    assert told.endswith("and its fastening cannot bring its force in before the end of the member")


def test_names_with_braces_are_told_as_they_are():
    for name in ("pl{a}te", "{", "}"):
        found = deflect(changed(CUT, ('name = "plate"', f'name = "{name}"')))
        assert any(n.startswith(f"{name} ends at x = 2.500 m") for n in found["notes"])


def test_a_section_tells_of_parts_that_do_not_touch():
    def notes(text):
        return command("section", text, "--at", "3 m").get("notes", [])

    text = changed(CUT, ('joined = { pitch = "120 mm", rows = 2, capacity = "9 kN" }\n', ""), ("shear = false\n", ""))
    text = changed(text, ('E = "210 GPa"', 'E = "210 GPa"\nG = "81 GPa"'))
    assert notes(text) == []
    apart = notes(changed(text, ('under = "beam"', 'under = "beam"\ngap = "20 mm"')))
    assert apart == ["beam and plate do not all touch, yet are taken to act together"]


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
        ('"loose"', 'joined: expected "apart", or a table such as'),
        ('{ stiffness = "3 kN/mm" }', "joined.stiffness: `stiffness` needs the `pitch`"),
        (
            '{ stiffness = "3 kN/mm", pitch = "100 mm", per_length = "40 N/mm/mm" }',
            "joined.per_length: expected only one of `stiffness` and `per_length`",
        ),
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
