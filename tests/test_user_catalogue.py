"""Sections and materials of the user's own, in files beside the job."""

from __future__ import annotations

import re
from pathlib import Path
from typing import Any

import pytest
from commands import changed

from fishbelly.cli.job_file import read_job
from fishbelly.cli.main import DONE, WRONG, run

JOB = """
length = "6 m"
[catalog]
files = FILES
[[part]]
name = "beam"
size = "girder 7"
material = "old iron"
[[support]]
at = "0 m"
kind = "pin"
[[support]]
at = "6 m"
kind = "roller"
[[load]]
kind = "self weight"
"""
SECTIONS = """# measured on site
designation,kind,depth [mm],width [mm],web [mm],flange [mm],radius [mm],diameter [in],wall [mm],#Iy [cm4],source
Girder 7,I,612,228,11.5,18,,,,65000,drawing 7 of 1931
Mast,tube,,,,,,12.75,8,,
"Rail, worn",rectangle,150,60,,,,,,,
"""
MATERIALS = """name;E [GPa];poisson;density [kg/m3];expansion [1e-6/K];creep;strength [N/mm2];source
old iron;95,5;0,25;7150;11;0;40;tests 2019
"""
TOML = """
[material."old iron"]
E = "95.5 GPa"
poisson = 0.25
density = "7150 kg/m3"
expansion = "11e-6 /K"
creep = 0
strength = "40 N/mm2"
source = "tests 2019"

[material."our C24"]
like = "C24"
creep = 0.8
"""


def written(folder: Path, files: str = '["s.csv", "m.csv"]', **texts: str) -> str:
    """Path of a job beside its catalogue files, given by name with ``_`` for the point."""
    defaults = {"s_csv": SECTIONS, "m_csv": MATERIALS, "m_toml": TOML}
    for name, text in (defaults | texts).items():
        (folder / name.replace("_", ".")).write_text(text, encoding="utf-8")
    job = folder / "job.toml"
    job.write_text(JOB.replace("FILES", files), encoding="utf-8")
    return str(job)


def faults(capsys: pytest.CaptureFixture[str], job: str) -> list[str]:
    assert run(["section", job, "--at", "1 m"]) == WRONG
    return capsys.readouterr().err.splitlines()


@pytest.mark.parametrize("files", ['["s.csv", "m.csv"]', '["m.toml", "s.csv"]'])
def test_a_job_uses_its_own_sections_and_materials(files: str, tmp_path: Path) -> None:
    job = read_job(written(tmp_path, files))
    shape, iron = job.member.parts[0].shape, job.member.materials[0]
    assert {k: shape.dimensions[k].value for k in ("depth", "web", "top_width", "bottom_flange", "radius")} == {
        "depth": 0.612,
        "web": 0.0115,
        "top_width": 0.228,
        "bottom_flange": 0.018,
        "radius": 0.0,
    }
    assert (iron.name, iron.E, iron.poisson, iron.density, iron.creep) == ("old iron", 95.5e9, 0.25, 7150.0, 0.0)
    assert iron.expansion == pytest.approx(11e-6, rel=1e-15)
    assert iron.strength is not None and iron.strength.tension == 40e6
    assert job.sizes == {"beam": "Girder 7"}


def test_the_built_in_catalogue_is_still_there(tmp_path: Path) -> None:
    path = Path(written(tmp_path))
    path.write_text(changed(path.read_text(), ('"girder 7"', '"IPE 300"'), ('"old iron"', '"S275"')))
    assert read_job(str(path)).sizes == {"beam": "IPE 300"}


def test_units_of_columns_and_names_in_quotes(tmp_path: Path) -> None:
    path = Path(written(tmp_path))
    path.write_text(changed(path.read_text(), ('"girder 7"', '"mast"')))
    dimensions = read_job(str(path)).member.parts[0].shape.dimensions
    assert dimensions["diameter"].value == 0.32385 and dimensions["wall"].value == 0.008
    path.write_text(changed(path.read_text(), ('"mast"', '"Rail, worn"')))
    assert read_job(str(path)).member.parts[0].shape.kind == "rectangle"


def test_a_workbook_is_read_as_a_csv_is(tmp_path: Path) -> None:
    from openpyxl import Workbook

    book = Workbook()
    for row in (["designation", "kind", "width [mm]", "depth [in]"], ["Girder 7", "rectangle", 62.5, 6]):
        book.active.append(row)
    book.save(tmp_path / "s.xlsx")
    dimensions = read_job(written(tmp_path, '["s.xlsx", "m.csv"]')).member.parts[0].shape.dimensions
    assert dimensions["width"].value == 0.0625 and dimensions["depth"].value == 0.1524


def test_like_starts_from_an_own_material(tmp_path: Path) -> None:
    path = Path(written(tmp_path, '["s.csv", "m.toml"]'))
    table = '[material.mine]\nlike = "OLD IRON"\ndensity = "7000 kg/m3"\n[[part]]'
    path.write_text(changed(path.read_text(), ('"old iron"', '"mine"'), ("[[part]]", table)))
    mine = read_job(str(path)).member.materials[0]
    assert (mine.E, mine.density) == (95.5e9, 7000.0)
    assert mine.strength is not None and mine.strength.compression == 40e6
    path.write_text(changed(path.read_text(), ('"OLD IRON"', '"our c24"')))
    assert read_job(str(path)).member.materials[0].creep == 0.8


GIRDER = "Girder 7,I,612,228,11.5,18,,,,65000,drawing 7 of 1931"


@pytest.mark.parametrize(
    ("old", "new", "fault"),
    [
        (GIRDER, GIRDER.replace("612", "6l2"), r's.csv:3: section "Girder 7", depth: expected .*"6l2 mm"'),
        (GIRDER, GIRDER.replace("612", "-612"), r's.csv:3: section "Girder 7", depth: .*"-612 mm"'),
        (GIRDER, GIRDER.replace("612", ""), r's.csv:3: section "Girder 7", depth: expected .*it is missing'),
        (GIRDER, GIRDER.replace("612", "30"), r's.csv:3: section "Girder 7", flange: expected flanges that together'),
        (GIRDER, GIRDER.replace(",I,", ",H,"), r's.csv:3: section "Girder 7", kind: expected one of .*got "H"'),
        (GIRDER, GIRDER.replace(",I,", ",,"), r's.csv:3: section "Girder 7", kind: expected one of .*it is missing'),
        (GIRDER, GIRDER.replace("Girder 7", ""), r"s.csv:3: section 1, designation: expected a designation"),
        (GIRDER, GIRDER + ",more", r"s.csv:3: expected 11 columns as the header has, got 12; a text with"),
        (",8,,\n", ",8,,\n" + GIRDER + "\n", r's.csv:5: section "Girder 7": .*stands in s.csv, line 3, as "Girder 7"'),
        (
            "Mast,tube,,",
            "Mast,tube,300,",
            r's.csv:4: section "Mast", depth: expected an empty cell, as .* are diameter',
        ),
        ("Mast,", "ipe300,", r's.csv:4: section "ipe300": .*stands in the built-in catalogue as "IPE 300" already'),
        ("depth [mm]", "depth", r's.csv:2: header, depth: expected a unit of a length such as "mm"'),
        ("depth [mm]", "depth [kN]", r's.csv:2: header, depth: expected a unit of a length .*"kN", which is a force'),
        ("depth [mm]", "dept [mm]", r's.csv:2: unknown column "dept \[mm\]"; did you mean "depth"\?'),
        ("web [mm]", "width [mm]", r"s.csv:2: width: expected each column once"),
        ("designation", "title", r's.csv:2: expected a column "designation" \(sections\) or "name" \(materials\)'),
    ],
)
def test_a_fault_of_a_section_names_file_row_and_column(
    old: str, new: str, fault: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    found = faults(capsys, written(tmp_path, s_csv=changed(SECTIONS, (old, new))))
    assert len(found) == 1 and re.match(fault, found[0]), found


@pytest.mark.parametrize(
    ("old", "new", "fault"),
    [
        ("95,5", "stiff", r'm.csv:2: material "old iron", E: expected a modulus .*"stiff GPa"'),
        ("95,5", "", r'm.csv:2: material "old iron", E: expected a modulus, or `like`'),
        ("0,25", "0,75", r'm.csv:2: material "old iron", poisson: expected .*got 0.75'),
        ("0,25", "quarter", r'm.csv:2: material "old iron", poisson: expected .*"quarter"'),
        ("[kg/m3]", "[kg]", r'm.csv:1: header, density: expected a unit of a density .*"kg"'),
        ("[1e-6/K]", "[1e-6/kN]", r"m.csv:1: header, expansion: expected a unit of a coefficient of expansion"),
        ("old iron", "s275", r'm.csv:2: material "s275": .*stands in the built-in catalogue as "S275" already'),
    ],
)
def test_a_fault_of_a_material_names_file_row_and_column(
    old: str, new: str, fault: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    found = faults(capsys, written(tmp_path, m_csv=changed(MATERIALS, (old, new))))
    assert len(found) == 1 and re.match(fault, found[0]), found


@pytest.mark.parametrize(
    ("old", "new", "fault"),
    [
        ('E = "95.5 GPa"', "E = 95.5", r'm.toml:3: material "old iron", E: expected a modulus .*the unit is missing'),
        ("poisson", "poison", r'm.toml:4: material "old iron": unknown key "poison"; did you mean "poisson"\?'),
        ('like = "C24"', 'like = "C25"', r'm.toml:12: material "our C24", like: expected a material .*"C25"'),
        ('"our C24"', "S355", r'm.toml:11: material "S355": .*the built-in catalogue as "S355" already'),
        ("[material.", "[materials.", r'm.toml:2: unknown table "materials"'),
        ('E = "95.5 GPa"', 'E = "95.5 GPa', r"m.toml:3: a text in quotes is not closed"),
    ],
)
def test_a_fault_of_a_toml_names_file_line_and_key(
    old: str, new: str, fault: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    found = faults(capsys, written(tmp_path, '["s.csv", "m.toml"]', m_toml=changed(TOML, (old, new))))
    assert len(found) == 1 and re.match(fault, found[0]), found


def test_two_files_may_not_have_one_name(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    found = faults(capsys, written(tmp_path, '["s.csv", "m.csv", "m.toml"]'))
    assert found == [
        'm.toml:2: material "old iron": expected a name of its own, got "old iron", '
        'which stands in m.csv, line 2, as "old iron" already'
    ]


@pytest.mark.parametrize(
    ("files", "fault"),
    [
        ('["s.csv", "n.csv"]', r'job.toml:4: catalog.files, item 2: "n.csv": no such file beside the job; did you'),
        ('"n.toml"', r'job.toml:4: catalog.files: expected a file beside the job, got "n.toml"; did you mean'),
        ('["s.ods"]', r'job.toml:4: catalog.files, item 1: expected a .csv or .xlsx file, got "s.ods"'),
        ('["none/s.csv"]', r'job.toml:4: catalog.files, item 1: "s.csv": no such file beside the job'),
        ("[]", r"job.toml:4: catalog.files: expected a list of files"),
        ('["s.csv"]\nfile = "m.csv"', r'job.toml:5: unknown key "file"; did you mean "files"\?'),
    ],
)
def test_a_fault_of_the_table_names_the_job(
    files: str, fault: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    found = faults(capsys, written(tmp_path, files))
    assert len(found) == 1 and re.search(fault, found[0]), found


def test_near_misses_know_own_names(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = Path(written(tmp_path))
    path.write_text(changed(path.read_text(), ('"girder 7"', '"girder 8"'), ('"old iron"', '"old irn"')))
    found = faults(capsys, str(path))
    assert 'got "girder 8"; nearest are "Girder 7"' in found[0]
    assert '"old irn"; nearest' in found[1] and '"old iron"' in found[1]


def test_the_command_reads_them_too(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    written(tmp_path)
    own = [word for name in ("s.csv", "m.csv") for word in ("--with", str(tmp_path / name))]
    assert run(["catalog", "girder7", *own]) == DONE
    out = capsys.readouterr().out
    assert out.startswith("Girder 7\n") and "11.5 mm" in out and "drawing 7 of 1931" in out
    assert run(["catalog", "iron", "old", *own]) == DONE
    assert "tests 2019" in capsys.readouterr().out
    assert run(["catalog", "--with", str(tmp_path / "none.csv")]) == WRONG
    assert "no such file" in capsys.readouterr().err


def test_the_files_of_the_readme_work(tmp_path: Path) -> None:
    readme = (Path(__file__).parents[1] / "README.md").read_text(encoding="utf-8")
    files: dict[str, Any] = dict(re.findall(r"<!-- (my-\w+\.csv) -->\n```csv\n(.*?)```", readme, re.DOTALL))
    assert set(files) == {"my-sections.csv", "my-materials.csv"}
    for name, text in files.items():
        (tmp_path / name).write_text(text, encoding="utf-8")
    job = read_job(written(tmp_path, str(list(files)).replace("'", '"')))
    assert job.sizes == {"beam": "Girder 7"} and job.member.materials[0].E == 95e9
