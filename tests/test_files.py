"""Results in files: formats, whole or not at all, and what cannot be written in words."""

import csv
import errno
import io
import json
import os

import pytest

from fishbelly.cli import cautions, files
from fishbelly.cli.file_grids import OF_STATIONS
from fishbelly.cli.files import FileFault, check_targets, write
from fishbelly.cli.job_file import read_job
from fishbelly.member.results import deflect
from fishbelly.member.section_results import section_at, stiffness

TEXT = """title = "Beam"
length = "6 m"
{units}
[material.steel]
E = "210 GPa"
G = "81 GPa"
density = "7850 kg/m3"
[[part]]
name = "=beam"
material = "steel"
shape = "rectangle"
width = "100 mm"
depth = "200 mm"
[[support]]
at = "0 m"
kind = "pin"
name = "A, left"
[[support]]
at = "6 m"
kind = "roller"
[[load]]
kind = "uniform"
value = "10 kN/m"
[[load]]
kind = "point"
value = "8 kN"
at = "2 m"
case = "wheel"
[[limit]]
name = "L/300"
span_over = 300
[[combination]]
name = "q"
factors = {{ load = 1 }}
[[combination]]
name = "q + wheel"
factors = {{ load = 1, wheel = 1 }}
"""


def solved(units=""):
    job = read_job("-", TEXT.format(units=units))
    return job, deflect(job.member) | {"notes": ["a note, with a comma", "grün"]}


@pytest.fixture(scope="module")
def beam():
    return solved()


def table_of(path):
    rows = list(csv.reader(io.StringIO(path.read_bytes().decode("utf-8"), newline="")))
    return rows[: rows.index([])], rows[rows.index([]) + 1 :]


def test_csv_of_deflect(beam, tmp_path):
    job, data = beam
    write(str(tmp_path / "o.csv"), "deflect", data, job, False)
    rows, notes = table_of(tmp_path / "o.csv")
    assert rows[0][:3] == ["combination", "x [m]", "M [kNm]"]
    stations = [s for c in data["combinations"] for s in c["stations"]]
    assert len(rows) == 1 + len(stations)
    first = [dict(zip(rows[0], r, strict=True)) for r in rows[1:]]
    for row, station in zip(first, stations, strict=True):
        assert float(row["x [m]"]) == pytest.approx(station["x"], rel=1e-9)
        assert float(row["M [kNm]"]) == pytest.approx(station["M"] / 1e3, rel=1e-9, abs=1e-7)
        assert float(row["deflection [mm]"]) == pytest.approx(station["deflection"] * 1e3, rel=1e-9, abs=1e-9)
    assert first[0]["name"] == "A, left"
    assert {r["combination"] for r in first} == {"q", "q + wheel"}
    jump = [r for r in first if r["combination"] == "q + wheel" and r["x [m]"] == "2"]
    assert [r["side"] for r in jump] == ["left", "right"]
    assert float(jump[0]["V [kN]"]) - float(jump[1]["V [kN]"]) == pytest.approx(8.0, abs=1e-8)
    assert notes == [["note", "a note, with a comma"], ["note", "grün"], ["note", OF_STATIONS], ["note", cautions.LINE]]


def test_csv_in_us_units(tmp_path):
    job, data = solved('units = "us"')
    write(str(tmp_path / "o.csv"), "deflect", data, job, False)
    rows, _ = table_of(tmp_path / "o.csv")
    assert rows[0][:4] == ["combination", "x [ft]", "M [kip-ft]", "M_datum [kip-ft]"]
    last = [r for r in rows if r[0] == "q"][-1]
    assert float(last[1]) == pytest.approx(6.0 / 0.3048, rel=1e-9)


def test_csv_has_no_noise_and_gaps_for_what_is_not_there(beam, tmp_path):
    job, data = beam
    data = json.loads(json.dumps(data))
    data["combinations"][0]["stations"][0]["slope"] = None
    write(str(tmp_path / "o.csv"), "deflect", data, job, False)
    text = (tmp_path / "o.csv").read_text(encoding="utf-8")
    assert "e-1" not in text and ",-0," not in text and "None" not in text
    rows, _ = table_of(tmp_path / "o.csv")
    assert rows[1][rows[0].index("slope [mrad]")] == ""


def test_csv_of_stiffness_and_section(beam, tmp_path):
    job, _ = beam
    data = stiffness(job.member)
    write(str(tmp_path / "k.csv"), "stiffness", data, job, False)
    rows, _ = table_of(tmp_path / "k.csv")
    assert rows[0][:2] == ["x [m]", "EI_y [kNm2]"]
    assert len(rows) == 1 + len(data["stations"])
    assert float(rows[1][1]) == pytest.approx(14000.0, rel=1e-9)
    write(str(tmp_path / "s.csv"), "section", section_at(job.member, 1.0), job, False)
    rows, rest = table_of(tmp_path / "s.csv")
    values = {r[0]: (r[2], r[3]) for r in rows[1:]}
    assert values["EI_y"] == ("14000", "kNm2")
    assert values["x"] == ("1", "m")
    assert ["'=beam", "steel"] in [r[:2] for r in rest]


def test_json_is_the_same_object(beam, tmp_path):
    job, data = beam
    write(str(tmp_path / "o.json"), "deflect", data, job, False)
    assert json.loads((tmp_path / "o.json").read_text(encoding="utf-8")) == json.loads(json.dumps(data))


def test_workbook(beam, tmp_path):
    import openpyxl

    job, data = beam
    write(str(tmp_path / "o.xlsx"), "deflect", data, job, False)
    book = openpyxl.load_workbook(tmp_path / "o.xlsx")
    assert book.sheetnames == [
        "Answer", "Limits of deflection", "Supports", "Spans", "Ends", "Stress", "Stations", "EI", "Notes", "Job file",
    ]  # fmt: skip
    for name in book.sheetnames[:-2]:
        sheet = book[name]
        assert sheet.freeze_panes == "A2"
        assert all(cell.font.bold for cell in sheet[1])
    answer = [
        dict(zip([c.value for c in book["Answer"][1]], [c.value for c in r], strict=True))
        for r in book["Answer"].iter_rows(min_row=2)
    ]
    down = data["combinations"][1]["deflection"]["down"]
    assert answer[1]["down [mm]"] == pytest.approx(down["value"] * 1e3, rel=1e-12)
    assert "M hogging [kNm]" not in answer[1]  # no combination has any
    stations = book["Stations"]
    count = sum(len(c["stations"]) for c in data["combinations"])
    assert stations.cell(count + 1, 1).value == "q + wheel" and stations.cell(count + 2, 1).value is None
    assert stations.max_row == count + 3 and "M_datum about the datum line" in stations.cell(count + 3, 1).value
    shaded = [r[1].value for r in stations.iter_rows(min_row=2) if r[1].fill.fgColor.rgb == "FFEDEDED"]
    assert shaded == [2, 2, 2, 2]
    assert book["Stress"]["B2"].value == "=beam" and book["Stress"]["B2"].data_type == "s"
    said = [r[0].value for r in book["Notes"].iter_rows()]
    assert "grün" in said and "Beam" in said
    assert [r[0].value or "" for r in book["Job file"].iter_rows()] == job.text.splitlines()


def test_a_workbook_reads_and_prints_well(beam, tmp_path):
    import openpyxl

    job, data = beam
    write(str(tmp_path / "o.xlsx"), "deflect", data, job, False)
    book = openpyxl.load_workbook(tmp_path / "o.xlsx")
    for sheet in book.worksheets[:-2]:
        heads = [cell.value for cell in sheet[1]]
        assert len(set(heads)) == len(heads), sheet.title
        assert sum(sheet.column_dimensions[cell.column_letter].width for cell in sheet[1]) < 200, sheet.title
        assert sheet.sheet_properties.pageSetUpPr.fitToPage
        for row in sheet.iter_rows(min_row=2):
            for cell in row:
                digits = len(repr(cell.value).replace(".", "").strip("0"))
                assert cell.number_format != "General" or not isinstance(cell.value, float) or digits <= 7, cell
    assert [c.value for c in book["Stress"][1]][2:8] == [
        "max [MPa]", "at x of max [m]", "z of max [mm]", "min [MPa]", "at x of min [m]", "z of min [mm]",
    ]  # fmt: skip
    assert book["Limits of deflection"]["F2"].number_format == "0.000"
    cautioned = [r[0] for r in book["Notes"].iter_rows() if str(r[0].value).startswith("Cautions")]
    assert len(cautioned) == 1 and "ductility in earthquakes." in cautioned[0].value
    assert cautioned[0].alignment.wrap_text


@pytest.mark.parametrize("command", ["section", "stiffness"])
def test_workbooks_of_other_commands(beam, tmp_path, command):
    import openpyxl

    job, _ = beam
    data = section_at(job.member, 1.0) if command == "section" else stiffness(job.member)
    write(str(tmp_path / "o.xlsx"), command, data, job, False)
    book = openpyxl.load_workbook(tmp_path / "o.xlsx")
    found = [c.value for row in book.worksheets[0].iter_rows() for c in row if isinstance(c.value, (int, float))]
    assert any(v == pytest.approx(14000.0) for v in found)
    assert book.sheetnames[-2:] == ["Notes", "Job file"]


def test_the_same_job_gives_the_same_bytes(tmp_path):
    for suffix in files.WORKING:
        made = []
        for k in range(2):
            job, data = solved()
            path = tmp_path / f"{k}{suffix}"
            write(str(path), "deflect", data, job, False)
            made.append(path.read_bytes())
        assert made[0] == made[1]


def test_an_existing_file_is_left_alone(beam, tmp_path):
    job, data = beam
    path = tmp_path / "o.csv"
    path.write_text("mine")
    with pytest.raises(FileFault, match=r'o\.csv" exists; --force overwrites it'):
        write(str(path), "deflect", data, job, False)
    assert path.read_text() == "mine"
    write(str(path), "deflect", data, job, True)
    assert path.read_text().startswith("combination")


def test_force_keeps_the_mode_and_follows_links(beam, tmp_path):
    job, data = beam
    real, link = tmp_path / "real.csv", tmp_path / "link.csv"
    real.write_text("old")
    real.chmod(0o640)
    link.symlink_to(real)
    write(str(link), "deflect", data, job, True)
    assert link.is_symlink()
    assert real.read_text().startswith("combination")
    assert real.stat().st_mode & 0o777 == 0o640


@pytest.mark.parametrize(("suffix", "start"), [(".png", b"\x89PNG"), (".svg", b"<?xml"), (".pdf", b"%PDF")])
def test_figures_are_written_by_their_suffix(beam, tmp_path, suffix, start):
    job, data = beam
    write(str(tmp_path / f"o{suffix}"), "deflect", data, job, False)
    assert (tmp_path / f"o{suffix}").read_bytes().startswith(start)


@pytest.mark.parametrize(
    ("name", "words"),
    [
        ("o.doc", r"the format \.doc is not known; \.csv, \.json, \.xlsx, \.png, \.svg and \.pdf are written"),
        ("o", "the suffix says the format, and there is none"),
        ("gone/o.csv", 'there is no folder ".*gone"'),
        ("file/o.csv", 'file" is a file, not a folder'),
        ("folder.csv", "is a folder, not a file"),
        ("a" * 300 + ".csv", "the name is too long"),
        ("nul\0.csv", r'nul\?\.csv" cannot be written'),
        ("circle.csv", "circle"),
    ],
)
def test_places_that_cannot_be_written(beam, tmp_path, name, words):
    job, data = beam
    (tmp_path / "file").write_text("")
    (tmp_path / "folder.csv").mkdir()
    (tmp_path / "circle.csv").symlink_to(tmp_path / "circle.csv")
    before = sorted(p.name for p in tmp_path.iterdir())
    with pytest.raises(FileFault, match=words):
        write(f"{tmp_path}/{name}", "deflect", data, job, False)
    assert sorted(p.name for p in tmp_path.iterdir()) == before


@pytest.mark.parametrize(
    ("number", "words"),
    [
        (errno.ENOSPC, "the disk is full"),
        (errno.EROFS, "that disk can only be read"),
        (errno.EACCES, "no permission to write there"),
        (errno.EIO, os.strerror(errno.EIO)),
    ],
)
def test_trouble_while_writing_leaves_the_old_file(beam, tmp_path, monkeypatch, number, words):
    job, data = beam
    path = tmp_path / "o.csv"
    path.write_text("mine")

    def fail(_):
        raise OSError(number, os.strerror(number))

    monkeypatch.setattr(os, "fsync", fail)
    with pytest.raises(FileFault, match=words):
        write(str(path), "deflect", data, job, True)
    assert [p.name for p in tmp_path.iterdir()] == ["o.csv"]
    assert path.read_text() == "mine"


def test_a_stop_while_writing_leaves_nothing(beam, tmp_path, monkeypatch):
    job, data = beam

    def stop(_):
        raise KeyboardInterrupt

    monkeypatch.setattr(os, "fsync", stop)
    with pytest.raises(KeyboardInterrupt):
        write(str(tmp_path / "o.csv"), "deflect", data, job, False)
    assert list(tmp_path.iterdir()) == []


def test_the_job_file_is_never_overwritten(tmp_path):
    path = tmp_path / "job.json"
    path.write_text(TEXT.format(units=""))
    job = read_job(str(path))
    with pytest.raises(FileFault, match="is the job file itself"):
        write(str(path), "deflect", deflect(job.member), job, True)
    assert path.read_text() == TEXT.format(units="")


def test_all_targets_are_looked_at_before_anything_is_computed(tmp_path):
    (tmp_path / "there.csv").write_text("")
    targets = [f"{tmp_path}/{name}" for name in ("there.csv", "o.doc", "new.csv", "./new.csv")]
    with pytest.raises(FileFault) as caught:
        check_targets(targets, False)
    lines = str(caught.value).splitlines()
    assert len(lines) == 3
    assert "exists" in lines[0] and "not known" in lines[1] and "given twice" in lines[2]
    check_targets([targets[0], targets[2]], True)
    assert [p.name for p in tmp_path.iterdir()] == ["there.csv"]
