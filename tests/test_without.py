"""The option ``--without``: a member without some of its parts beside the whole one."""

import contextlib
import io

import pytest
from commands import SIMPLE_BEAM, changed, command, deflect, down, scenario
from jsonschema import Draft202012Validator

from fishbelly.cli.job_file import read_job
from fishbelly.cli.main import run
from fishbelly.cli.result_schema import result_schema
from fishbelly.member.without import CannotLeaveOut, without

PLATED = SIMPLE_BEAM.replace(
    "[[support]]",
    """[[part]]
name = "plate"
material = "steel"
shape = "rectangle"
width = "100 mm"
depth = "20 mm"
under = "beam"
from = "1 m"
to = "5 m"
[[part]]
name = "groove"
cut = true
of = "plate"
shape = "rectangle"
width = "20 mm"
depth = "5 mm"
position = ["0 mm", "-220 mm"]
anchor = "bottom"
from = "2 m"
to = "3 m"
[[notch]]
of = "plate"
depth = "4 mm"
from = "3.5 m"
to = "4 m"
[[opening]]
at = "4.5 m"
diameter = "50 mm"
of = ["beam", "plate"]
[[support]]""",
    1,
)
WITH_OPENING = changed(
    SIMPLE_BEAM, ("[[load]]", '[[opening]]\nat = "4.5 m"\ndiameter = "50 mm"\nof = "beam"\n[[load]]')
)


def said(name, text, *options):
    """Status, table and messages of a command on a job from standard input."""
    out, err = io.StringIO(), io.StringIO()
    import sys

    class Piped(io.StringIO):
        buffer = io.BytesIO(text.encode())

    old, sys.stdin = sys.stdin, Piped()
    try:
        with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
            status = run([name, "-", *options])
    finally:
        sys.stdin = old
    return status, out.getvalue(), err.getvalue()


def test_the_member_without_a_part_is_the_job_without_it():
    """The plate goes with its groove, its notch and its share of the opening; the bare job is run by itself."""
    found = command("deflect", PLATED, "--without", "plate")
    bare = deflect(WITH_OPENING)["combinations"][0]
    beside = found["without"]["combinations"][0]
    assert found["without"]["parts"] == ["plate"]
    assert down(beside) == pytest.approx(down(bare), rel=1e-12)
    assert beside["stress"] == bare["stress"]
    whole = found["combinations"][0]
    assert beside["gain"]["deflection"]["down"] == pytest.approx(down(bare) / down(whole), rel=1e-12)
    assert beside["gain"]["deflection"]["down"] > 1.05
    assert set(beside["gain"]["stress"]) == {"beam"}


def test_stiffness_at_the_same_stations():
    found = command("stiffness", PLATED, "--without", "plate")
    rows, bare = found["stations"], found["without"]["stations"]
    assert [r["x"] for r in rows] == [b["x"] for b in bare]
    EI = 210e9 * 0.1 * 0.2**3 / 12
    for row, beside in zip(rows, bare, strict=True):
        assert beside["gain"]["EI_y"] == pytest.approx(row["EI_y"] / beside["EI_y"], rel=1e-14)
        if not 4.4 < row["x"] < 4.6:
            assert beside["EI_y"] == pytest.approx(EI, rel=1e-12)
    # at a break the left and the right of it, each beside its own
    at_one = [b["gain"]["EI_y"] for r, b in zip(rows, bare, strict=True) if r["x"] == 1.0]
    assert at_one[0] == pytest.approx(1.0, rel=1e-12) and at_one[1] > 1.2


def test_section_and_several_parts():
    text = changed(scenario("s2_runway_beam"), ("[material.steel]", '[material.steel]\ndensity = "7850 kg/m3"'))
    found = command("section", text, "--at", "3.75 m", "--without", "top plate", "--without", "bottom plate")
    beside = found["without"]
    I = 180 * 400**3 / 12 - (180 - 8.6) * 373**3 / 12
    assert beside["EI_y"] == pytest.approx(210e9 * I * 1e-12, rel=1e-12)
    assert beside["mass"] == pytest.approx(7850 * (180 * 400 - 171.4 * 373) * 1e-6, rel=1e-12)
    assert beside["gain"]["EI_y"] == pytest.approx(found["EI_y"] / beside["EI_y"], rel=1e-14)
    assert found["transformed"]["I_y"] == pytest.approx(
        (I + 2 * (160 * 12**3 / 12 + 160 * 12 * 206**2)) * 1e-12, rel=1e-12
    )


@pytest.mark.parametrize(
    ("name", "options"),
    [("deflect", ()), ("stiffness", ()), ("section", ("--at", "2.5 m")), ("deflect", ("--at", "2 m"))],
)
def test_results_keep_their_schema_and_tables_show_both(name, options):
    found = command(name, PLATED, *options, "--without", "plate")
    Draft202012Validator(result_schema(name)).validate(found)
    status, table, _ = said(name, PLATED, *options, "--without", "plate")
    assert status == 0
    assert "Without plate" in table and "without" in table and "gain" in table
    assert max(len(line) for line in table.splitlines()) <= 80
    assert "Without" not in said(name, PLATED, *options)[1]


def test_loads_of_the_part_go_with_it():
    text = changed(scenario("s9_gantry_arm"), ('kind = "self weight"', 'kind = "self weight"\nparts = ["box", "flat"]'))
    text += '[[load]]\nkind = "prestress"\npart = "flat"\nforce = "3 kN"\ncase = "pull"\n'
    text += '[[combination]]\nname = "pulled"\nfactors = { pull = 1, tip = 1 }\n'
    member = without(read_job("-", text).member, ["flat"])
    assert [p.name for p in member.parts] == ["box"]
    assert "pull" not in member.cases
    assert dict(next(c for c in member.combinations if c.name == "pulled").factors) == {"tip": 1.0}
    beside = {c["name"]: c for c in command("deflect", text, "--without", "flat")["without"]["combinations"]}
    # only the box weighs: q = 2700 g A on a cantilever, 1200 N at its tip
    EI = 70e9 * (80 * 120**3 - 70 * 110**3) * 1e-12 / 12
    q = 2700 * 9.80665 * 1900e-6
    assert down(beside["self"]) == pytest.approx(q * 3.0**4 / (8 * EI), rel=1e-10)
    assert down(beside["pulled"]) == pytest.approx(1200 * 27 / (3 * EI), rel=1e-10)


CAPPED = SIMPLE_BEAM.replace(
    "[[support]]",
    """[[part]]
name = "cap"
material = "steel"
shape = "rectangle"
width = "120 mm"
depth = "30 mm"
over = "beam"
[[part]]
name = "sole"
material = "steel"
shape = "rectangle"
width = "80 mm"
depth = "20 mm"
under = "beam"
[[support]]""",
    1,
)


def test_parts_keep_their_place_without_what_they_lean_on():
    """Cap and sole stay 200 mm apart, on a member without stages and on one with them."""
    found = command("section", CAPPED, "--at", "2 m", "--without", "beam")["without"]
    a, b = 0.12 * 0.03, 0.08 * 0.02
    apart = 0.2 + 0.015 + 0.01
    EI = 210e9 * (0.12 * 0.03**3 / 12 + 0.08 * 0.02**3 / 12 + a * b / (a + b) * apart**2)
    assert found["EI_y"] == pytest.approx(EI, rel=1e-12)
    assert found["z_c"] == pytest.approx((a * 0.015 - b * 0.21) / (a + b), rel=1e-12)
    bent = 5 * 10e3 * 6**4 / (384 * EI)
    assert down(command("deflect", CAPPED, "--without", "beam")["without"]["combinations"][0]) == pytest.approx(bent)
    staged = changed(CAPPED, ('kind = "uniform"', 'kind = "uniform"\ncase = "all of it"'))
    staged += '[[stage]]\nname = "bare"\n[[stage]]\nname = "loaded"\ncases = ["all of it"]\n'
    staged = changed(staged, ('under = "beam"', 'under = "beam"\nstage = "loaded"'))
    beside = command("deflect", staged, "--without", "beam")["without"]["combinations"][0]
    assert down(beside) == pytest.approx(bent, rel=1e-9)
    assert {s["part"] for s in beside["stress"] if s["max"] or s["min"]} == {"cap", "sole"}
    rows = command("stiffness", CAPPED, "--without", "beam")["without"]["stations"]
    assert {round(r["EI_y"] / EI, 12) for r in rows} == {1.0}


def test_weight_and_notches_of_what_only_holds_a_place_go():
    text = changed(CAPPED, ('E = "210 GPa"', 'E = "210 GPa"\ndensity = "7850 kg/m3"'))
    text = text.replace('kind = "uniform"\nvalue = "10 kN/m"', 'kind = "self weight"', 1)
    text = text.replace(
        "[[support]]", '[[notch]]\nof = "beam"\ndepth = "20 mm"\nfrom = "1 m"\nto = "2 m"\n[[support]]', 1
    )
    found = command("section", text, "--at", "1.5 m", "--without", "beam")["without"]
    assert found["mass"] == pytest.approx(7850 * (0.12 * 0.03 + 0.08 * 0.02), rel=1e-12)
    q = 9.80665 * found["mass"]
    bent = 5 * q * 6**4 / (384 * found["EI_y"])
    assert down(command("deflect", text, "--without", "beam")["without"]["combinations"][0]) == pytest.approx(bent)


def test_one_that_slips_stays_alone_or_is_refused():
    fixing = 'joined = { pitch = "100 mm", stiffness = "5 kN/mm" }'
    text = changed(CAPPED, ('over = "beam"', f'over = "beam"\n{fixing}'))
    status, _, err = said("section", text, "--at", "1 m", "--without", "beam")
    assert status == 2 and "cap would have nothing to slip on without beam" in err
    found = command("section", text, "--at", "1 m", "--without", "beam", "--without", "sole")["without"]
    assert found["EI_y"] == pytest.approx(210e9 * 0.12 * 0.03**3 / 12, rel=1e-12)


def test_what_cannot_be_left_out_is_said():
    # the plate is over a stretch alone: beside it nothing is left
    status, _, err = said("deflect", PLATED, "--without", "beam")
    assert status == 3 and "without beam" in err
    status, _, err = said("stiffness", PLATED, "--without", "plat")
    assert status == 2 and 'the job has no part "plat"; did you mean "plate"?' in err
    status, _, err = said("section", PLATED, "--at", "1 m", "--without", "beam", "--without", "plate")
    assert status == 2 and "nothing is left of the member without beam, plate" in err
    with pytest.raises(KeyError):
        without(read_job("-", PLATED).member, ["nobody"])
    with pytest.raises(CannotLeaveOut):
        without(read_job("-", PLATED).member, ["beam", "plate"])


def test_nothing_left_over_a_stretch_is_status_3():
    """Two beams end to end: without one nothing is there over its half."""
    text = changed(SIMPLE_BEAM, ('depth = "200 mm"\n', 'depth = "200 mm"\nto = "3 m"\n'))
    text = text.replace(
        "[[support]]",
        """[[part]]
name = "other"
material = "steel"
shape = "rectangle"
width = "100 mm"
depth = "200 mm"
position = ["0 mm", "0 mm"]
anchor = "top"
from = "3 m"
[[support]]""",
        1,
    )
    status, _, err = said("deflect", text, "--without", "other")
    assert status == 3 and "without other" in err
    status, _, err = said("stiffness", text, "--without", "other")
    assert status == 3 and "without other" in err
