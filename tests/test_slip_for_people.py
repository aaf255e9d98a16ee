"""Joints that slip as people use them: the keys of a job, the results, the table, the workbook, what is said."""

from __future__ import annotations

import io
from typing import Any

import numpy as np
import pytest
from by_hand import stepped, strips
from commands import KN, MM, changed, check_agrees, command, deflect, down, scenario
from openpyxl import load_workbook

from fishbelly.catalog.worked_jobs import worked_jobs
from fishbelly.cli.files_xlsx import xlsx_bytes
from fishbelly.cli.job_file import read_job
from fishbelly.cli.tables_deflect import deflect_table

FLOOR = """
title = "Board on a joist"
length = "4.5 m"
shear = false
[material.pine]
E = "11 GPa"
creep = 0.6
[[part]]
name = "joist"
material = "pine"
shape = "rectangle"
width = "60 mm"
depth = "200 mm"
[[part]]
name = "board"
material = "pine"
shape = "rectangle"
width = "400 mm"
depth = "40 mm"
over = "joist"
joined = { stiffness = "1.2 kN/mm", pitch = "100 mm" }
[[support]]
at = "0 m"
kind = "pin"
[[support]]
at = "4.5 m"
kind = "roller"
[[load]]
kind = "uniform"
value = "1.5 kN/m"
case = "live"
[[combination]]
name = "short"
factors = { live = 1 }
[[combination]]
name = "final"
factors = { live = 1 }
sustained = { live = 0.5 }
"""
L, E, Q, K = 4.5, 11e9, 1.5e3, 1.2e6 / 0.1
APART = E * (0.06 * 0.2**3 + 0.4 * 0.04**3) / 12
RIGID = strips((E, 0.06, -0.2, 0.0), (E, 0.4, 0.0, 0.04))[2]
C = (RIGID / APART - 1.0) ** -1 * 0.12**2 / APART * (RIGID / APART)
"""Strain difference of the two by unit force in the joint [1/N]: h² / EI of both apart, and of 1/EA."""


def sag(k: float = K, E_over: float = 1.0) -> float:
    """Closed form under a uniform load, by Newmark's equation for the curvature; stiffness of all divided alike."""
    omega = np.sqrt(k / E_over * C * E_over)
    rigid = 5 * Q * L**4 / 384 / RIGID
    # w = w_rigid + (1/EI_0 - 1/EI_inf) (q L²/8 / omega² - q / omega⁴ (1 - 1/cosh))
    more = Q * (L**2 / 8 / omega**2 - (1 - 1 / np.cosh(omega * L / 2)) / omega**4)
    return float(E_over * (rigid + (1 / APART - 1 / RIGID) * more))


def test_a_board_on_a_joist() -> None:
    c = deflect(FLOOR)["by_name"]["short"]
    check_agrees(C, 1 / (E * 0.012) + 1 / (E * 0.016) + 0.12**2 / APART)
    check_agrees(down(c), sag())
    check_agrees(c["bounds"]["apart"]["value"], 5 * Q * L**4 / 384 / APART)
    check_agrees(c["bounds"]["rigid"]["value"], 5 * Q * L**4 / 384 / RIGID)
    (joint,) = c["slip"]
    assert (joint["part"], joint["to"], joint["creep"], joint["stiffness"]) == ("board", "joist", None, K)
    left, right = (joint["ends"][e]["slip"] for e in ("left", "right"))
    check_agrees(left, -right)
    assert left < 0.0
    check_agrees(joint["flow"]["max"]["value"], K * left)
    check_agrees(joint["per_fastener"]["max"]["value"], K * left * 0.1)
    assert joint["per_fastener"]["max"]["at"] == 0.0
    assert c["cross_check"]["difference"] < 1e-8


def test_creep_of_the_joint_is_twice_that_of_two_timbers() -> None:
    result = deflect(FLOOR)["by_name"]["final"]
    assert result["slip"][0]["creep"] == pytest.approx(1.2)
    # half at once; half with E over 1.6 and the joint over 2.2
    slow = sag(K * 1.6 / 2.2, 1.6)
    check_agrees(down(result), 0.5 * sag() + 0.5 * slow)
    given = deflect(changed(FLOOR, ('pitch = "100 mm" }', 'pitch = "100 mm", creep = 0.6 }')))["by_name"]["final"]
    check_agrees(down(given), 1.3 * sag())


def test_gamma_method_beside_it() -> None:
    (row,) = deflect(FLOOR)["by_name"]["short"]["gamma"]
    assert (row["holds"], row["reason"], row["n"], row["length"]) == (True, None, 2, L)
    gamma = 1.0 / (1.0 + np.pi**2 * E * 0.016 / (K * L**2))
    assert row["gamma"] == pytest.approx([1.0, gamma], rel=1e-9)
    a = gamma * 0.016 * 0.12 / (0.012 + gamma * 0.016)
    EI = APART + E * 0.012 * a**2 + gamma * E * 0.016 * (0.12 - a) ** 2
    check_agrees(row["EI"], EI)
    check_agrees(row["deflection"], 5 * Q * L**4 / 384 / EI)
    # a parabolic moment is near a sine: the exact slip differs by less than one part in a hundred
    assert row["deflection"] == pytest.approx(sag(), rel=1e-2)


@pytest.mark.parametrize(
    ("change", "reason"),
    [
        (
            ('depth = "40 mm"', 'depth = [["0 m", "40 mm"], ["4.5 m", "50 mm"]]'),
            "the section changes between 0 m and 4.5 m",
        ),
        (('kind = "pin"', 'kind = "fixed"'), "a support holds the rotation at 0 m"),
        (('joined = {', 'from = "1 m"\njoined = {'), "there is one part alone between 0 m and 4.5 m"),
    ],
)  # fmt: skip
def test_gamma_method_says_why_not(change: tuple[str, str], reason: str) -> None:
    (row,) = deflect(changed(FLOOR, change))["by_name"]["short"]["gamma"]
    assert (row["holds"], row["reason"], row["deflection"]) == (False, reason, None)


def test_ways_to_state_a_stiffness() -> None:
    one = down(deflect(FLOOR)["by_name"]["short"])
    for joined in (
        '{ per_length = "12 N/mm/mm" }',
        '{ stiffness = "0.6 kN/mm", pitch = "100 mm", rows = 2 }',
        '{ stiffness = "1200 N/mm", pitch = "10 cm" }',
    ):
        text = changed(FLOOR, ('{ stiffness = "1.2 kN/mm", pitch = "100 mm" }', joined))
        assert down(deflect(text)["by_name"]["short"]) == pytest.approx(one, rel=1e-12)


def test_apart() -> None:
    c = deflect(changed(FLOOR, ('{ stiffness = "1.2 kN/mm", pitch = "100 mm" }', '"apart"')))["by_name"]["short"]
    check_agrees(down(c), 5 * Q * L**4 / 384 / APART)
    assert c["slip"][0]["stiffness"] == 0.0 and c["slip"][0]["per_fastener"] is None
    assert c["joints"][0]["flow"]["max"]["value"] == pytest.approx(0.0, abs=1e-6)


def test_a_band_of_the_stiffness() -> None:
    text = changed(FLOOR, ('pitch = "100 mm" }', 'pitch = "100 mm", band = ["0.8 kN/mm", "1.8 kN/mm"] }'))
    limit = '[[limit]]\nname = "short"\nspan_over = 300\ncombination = "short"\n'
    c = deflect(text + limit)["by_name"]["short"]
    for entry in (c["deflection"]["down"], c["checks"][0]):
        check_agrees(entry["band"]["low"], sag(8e6))
        check_agrees(entry["band"]["high"], sag(18e6))
    said = deflect_table(deflect(text), "metric")
    assert "with low / nominal / high stiffness: 12.16 / 10.94 / 9.74 mm" in said


def test_slip_held_and_free_at_a_fixed_end() -> None:
    arm = changed(FLOOR, ('[[support]]\nat = "4.5 m"\nkind = "roller"\n', ""), ('kind = "pin"', 'kind = "fixed"'))
    held = deflect(arm)["by_name"]["short"]
    free = deflect(changed(arm, ('kind = "fixed"', 'kind = "fixed"\nslip = "free"')))["by_name"]["short"]
    assert held["slip"][0]["ends"]["left"]["slip"] == pytest.approx(0.0, abs=1e-15)
    assert abs(free["slip"][0]["ends"]["left"]["slip"]) > 1e-4
    assert down(free) > 1.05 * down(held)
    assert held["cross_check"]["difference"] < 1e-8 and free["cross_check"]["difference"] < 1e-8


@pytest.mark.parametrize("stiffness, pitch, single", [(3, 100, False), (60, 900, True)])
def test_a_pair_shares_the_flow_between_both_copies(stiffness: int, pitch: int, single: bool) -> None:
    """Two planks beside a joist: what joints say of a fastener is what slip says of it, in either way of reckoning."""
    plank = 'width = "30 mm"\ndepth = "100 mm"\nright_of = "joist"\nflush = "top"\npair = true\n'
    planks = changed(
        FLOOR,
        ('width = "400 mm"\ndepth = "40 mm"\nover = "joist"\n', plank),
        (
            'stiffness = "1.2 kN/mm", pitch = "100 mm"',
            f'stiffness = "{stiffness} kN/mm", pitch = "{pitch} mm", rows = 2',
        ),
    )
    c = deflect(planks)["by_name"]["short"]
    (joint,), (slip,) = c["joints"], c["slip"]
    assert bool(slip["single"]) is single
    assert slip["stiffness"] == pytest.approx(2 * 2 * stiffness * 1e6 / (pitch * MM))
    most = slip["per_fastener"]["max"]["value"]
    assert joint["flow"]["max"]["per_fastener"] == pytest.approx(most, rel=1e-6)
    assert joint["start"]["per_fastener"] == pytest.approx(most, rel=1e-6)
    if single:
        assert len(slip["single"]) == 5
        assert [v["x"] for v in slip["single"]] == pytest.approx([0.45, 1.35, 2.25, 3.15, 4.05])
        # what the fasteners bring into the planks up to midspan is what these carry there
        assert slip["single"][2]["force"] == pytest.approx(0.0, abs=1e-6 * abs(most))
    else:
        assert most == pytest.approx(slip["flow"]["max"]["value"] * 0.1 / 4)


def test_s9_slip_band() -> None:
    """No interaction gives the stiffness of box and flat alone, full interaction that of both as one."""
    box = ((70e9, 0.08, -0.005, 0.0), (70e9, 0.01, -0.115, -0.005), (70e9, 0.08, -0.12, -0.115))
    flat = (210e9, 0.08, -0.13, -0.12)
    own = strips(*box)[2], strips(flat)[2]
    text = scenario("s9_gantry_arm")
    bolts = changed(text, ('to = "1600 mm"', 'to = "1600 mm"\njoined = { stiffness = "8 kN/mm", pitch = "100 mm" }'))
    tip = deflect(bolts)["by_name"]["tip"]
    for name, stiffness in (("apart", sum(own)), ("rigid", strips(*box, flat)[2])):
        EI = stepped((0.0, 1.6, stiffness), other=own[0])
        x, w = np.polynomial.legendre.leggauss(20)
        found = 0.0
        for a, b in ((0.0, 1.6), (1.6, 3.0)):
            s = 0.5 * (a + b) + 0.5 * (b - a) * x
            found += float((w * 0.5 * (b - a) * 1200 * (3.0 - s) ** 2 / EI(s)).sum())
        check_agrees(tip["bounds"][name]["value"], found)
    assert tip["bounds"]["rigid"]["value"] < down(tip) < tip["bounds"]["apart"]["value"]
    assert down(deflect(changed(bolts, ("8 kN/mm", "80 kN/mm")))["by_name"]["tip"]) < down(tip)


def test_warm_metals_slip_past_each_other() -> None:
    """Apart, two metals that warm up only slip: nothing bends, and the free end of the flat has moved."""
    text = scenario("s9_gantry_arm")
    apart = deflect(changed(text, ('to = "1600 mm"', 'to = "1600 mm"\njoined = "apart"')))["by_name"]["warmth"]
    assert apart["deflection"]["down"] is None
    right = apart["slip"][0]["ends"]["right"]["slip"]
    check_agrees(right, -(23e-6 - 12e-6) * 35 * 1.6)


def told(text: str, name: str = "job.toml") -> Any:
    result = deflect(text)
    result.pop("by_name")
    return result


def test_the_table_says_it_in_words() -> None:
    said = deflect_table(told(FLOOR), "metric")
    for words in (
        "Joints that slip (slip of the part against what it is joined to",
        "board on joist: stiffness 12.00 N/mm/mm",
        "Both bounds (largest deflection with the joints that slip away, as given, and",
        "Gamma-method (EN 1995-1-1, Annex B), span 1: EI_ef",
        "deflection by it 10.96 mm.",
        "slip counts in short: ",
    ):
        assert words in " ".join(said.split()) or words in said
    assert "act together, rigidly joined" not in said
    fixed = deflect_table(told(changed(FLOOR, ('kind = "pin"', 'kind = "fixed"'))), "us")
    assert "does not apply: a support holds the rotation at 0 m." in " ".join(fixed.split())
    assert "kip/in/in" in fixed


def test_slip_that_is_neglected_is_noted() -> None:
    notes = [str(n) for n in told(changed(FLOOR, ('stiffness = "1.2 kN/mm", ', "")))["notes"]]
    assert any(n.startswith("board: slip of its fasteners is neglected") for n in notes)


def test_a_section_says_that_its_joints_slip() -> None:
    for name, options in (("section", ("--at", "1 m")), ("stiffness", ())):
        (note,) = command(name, FLOOR, *options)["notes"]
        assert note.startswith("the joint of board slips: this is the section with rigid joints")
    assert "notes" not in command("stiffness", changed(FLOOR, ('stiffness = "1.2 kN/mm", ', "")))


def test_creep_that_is_used_is_printed() -> None:
    (footbridge,) = (job.text for job in worked_jobs() if job.name == "footbridge")
    said = " ".join(deflect_table(told(footbridge), "metric").split())
    assert "stiffness 720.0 N/mm/mm, creep 2.75; 1.375 with shrinkage" in said
    (joint,) = told(footbridge)["combinations"][0]["slip"]
    assert (joint["creep"], joint["creep_of_shrinkage"]) == (2.75, [1.375])
    assert joint["per_fastener"]["max"]["value"] / KN == pytest.approx(-7.107, abs=5e-4)
    assert joint["ends"]["left"]["slip"] / MM == pytest.approx(0.2567, abs=5e-5)


def test_the_workbook_has_them(tmp_path: Any) -> None:
    path = tmp_path / "floor.toml"
    path.write_text(FLOOR, encoding="utf-8")
    book = load_workbook(io.BytesIO(xlsx_bytes("deflect", told(FLOOR), read_job(str(path)))))
    assert {"Joints that slip", "Both bounds", "Gamma-method"} <= set(book.sheetnames)
    rows = list(book["Both bounds"].values)
    assert [r[1] for r in rows[1:4]] == ["not joined", "as joined", "rigid"]
    assert rows[2][2] == pytest.approx(sag() / MM, rel=1e-9)
