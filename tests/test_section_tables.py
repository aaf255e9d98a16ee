"""The tables of a cross-section and of the stiffness along a member."""

import re

from table_jobs import block, simple, solved, station_rows

from fishbelly.cli.job_file import read_job
from fishbelly.cli.tables import section_table, stiffness_table
from fishbelly.member.section_results import section_at, stiffness


def test_section():
    job, _ = solved(simple())
    text = section_table(section_at(job.member, 2.4), "metric")
    values = {line.split()[0]: line for line in text.splitlines() if re.match(r"  \w+ +[a-z]", line)}
    assert values["EI_y"].endswith("14 000 kNm2")
    assert "section modulus, elastic, top" in values["W_top"]
    assert values["W_top"].split()[-2:] == ["666.7", "cm3"]
    assert values["z_c"].split()[-2:] == ["-100.0", "mm"]
    assert values["mass"].split()[-2:] == ["157.0", "kg/m"]
    # M/W of 1 kNm: 1000 / 666.7e-6 = 1.5 MPa
    assert block(text, "Stress coefficients")[2].split() == ["beam", "-1.500", "1.500", "0.05000", "666.7", "666.7"]
    assert "horizontal axis y–y" in " ".join(text.split())


def test_section_says_n_and_dashes():
    text = simple().replace('density = "7850 kg/m3"\n', "")
    text += '[material.oak]\nE = "10.5 GPa"\n[[part]]\nname = "sole"\nmaterial = "oak"\nshape = "rectangle"\n'
    text += 'width = "100 mm"\ndepth = "20 mm"\nunder = "beam"\n'
    job = read_job("-", "shear = false\n" + text)
    said = section_table(section_at(job.member, 1.0), "metric")
    assert [r.split() for r in block(said, "Materials")[1:]] == [["steel", "1.000"], ["oak", "0.05000"]]
    assert next(line for line in said.splitlines() if line.startswith("  mass")).endswith("–")
    assert next(line for line in said.splitlines() if line.startswith("  GA_z")).endswith("–")


def test_a_round_section_has_no_principal_direction():
    text = simple().replace(
        'shape = "rectangle"\nwidth = "100 mm"\ndepth = "200 mm"', 'shape = "tube"\ndiameter = "200 mm"\nwall = "8 mm"'
    )
    said = section_table(section_at(read_job("-", text).member, 1.0), "metric")
    assert next(line for line in said.splitlines() if line.startswith("  angle")).endswith("–")


PLATED = simple(
    '[[part]]\nname = "plate"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "100 mm"\ndepth = "10 mm"\n'
    'under = "beam"\nfrom = "1.234 m"\nto = "4.5 m"\n'
)


def test_stiffness_shows_every_break_and_no_repeats():
    job, _ = solved(PLATED)
    text = stiffness_table(stiffness(job.member), "metric")
    rows = station_rows(text)
    assert [r[0] for r in rows] == ["0.000", "1.234", "1.234", "4.500", "4.500", "6.000"]
    assert [r[-1] for r in rows[1:5]] == ["left", "right", "left", "right"]
    # (b d^3/12 of 210 mm) / (of 200 mm)
    assert rows[2][-6] == f"{1.05**3:.3f}"
    assert "6 of" in text


def test_stiffness_lists_what_is_asked_for():
    job, _ = solved(PLATED)
    text = stiffness_table(stiffness(job.member, [0.5, 1.0, 1.5]), "metric", True)
    rows = [r[0] for r in station_rows(text)]
    assert rows == ["0.500", "1.000", "1.500"]


def test_a_taper_shows_even_places():
    tapered = simple().replace('depth = "200 mm"', 'depth = [["0 m", "200 mm"], ["6 m", "400 mm"]]')
    job, _ = solved(tapered)
    text = stiffness_table(stiffness(job.member), "metric")
    rows = station_rows(text)
    assert len(rows) == 21
    assert rows[-1][2] == "8.000"
