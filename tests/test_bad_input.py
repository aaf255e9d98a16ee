"""Every fault of a job is told, with its place, what was expected and what was found: the file, its top level, its materials."""

# ruff: noqa: E501 (a job and its message stand side by side, unbroken, as they are written)

import pytest
from bad_jobs import BASE, BEAM, HEAD, STEEL, faults_of, only_fault, plate

from fishbelly.cli.faults import JobFaults
from fishbelly.cli.job_file import read_job

BAD = {
    # the file
    "empty": ("", ": the file is empty: it has no key"),
    "blank": ("# nothing\n\n", ": the file is empty: it has no key"),
    # the top level
    "no parts": (HEAD, ": part: expected at least one part, but it is missing"),
    "no length": (STEEL + BEAM, ': length: expected a length such as "12 mm", but it is missing'),
    "negative length": (BASE.replace("6 m", "-6 m"), ':1: length: expected a length above 0 mm, got "-6 m"'),
    "bare number": (
        BASE.replace('"6 m"', "6"),
        ':1: length: expected a length such as "12 mm", got 6: the unit is missing',
    ),
    "nan": (
        BASE.replace("6 m", "nan m"),
        ':1: length: expected a length such as "12 mm", got "nan m", which is not a finite number',
    ),
    "inf factor": (
        BASE.replace("0.3", "inf"),
        ':4: material "steel", poisson: expected Poisson\'s ratio above -1 and of at most 0.5, got inf, which is not a finite number',
    ),
    "misspelt key": ("titel = 'x'\n" + BASE, ':1: unknown key "titel"; did you mean "title"?'),
    "misspelt word": (
        'units = "metrik"\n' + BASE,
        ':1: units: expected "metric" or "us", got "metrik"; did you mean "metric"?',
    ),
    "yes in quotes": (
        'shear = "true"\n' + BASE,
        ':1: shear: expected true or false, got "true"; without quotes',
    ),
    "steep": ('rises = "120 deg"\n' + BASE, ':1: rises: expected an angle from -90 to 90 deg, got "120 deg"'),
    "misspelt table": (
        BASE + '[[suport]]\nat = "0 m"\n',
        ':11: unknown table "suport"; did you mean "support"?',
    ),
    "single brackets": (
        BASE + '[support]\nat = "0 m"\n',
        ":11: support: [support] with single brackets; write [[support]]: there may be several",
    ),
    "top key too low": (
        BASE + 'units = "us"\n',
        ':11: part "beam": unknown key "units"; it belongs at the top of the file, before the first table',
    ),
    "datum and position": (
        'datum = "top"\n' + BASE + 'position = ["0 mm", "0 mm"]\n',
        ":1: datum: datum and the first part's `position` both say where it is; leave one out",
    ),
    # not built yet
    "rule of tension stiffening": (
        'tension_stiffening = "EN 1992"\n' + BASE,
        ':1: tension_stiffening: expected "EN 1992-1-1", "ACI 318-14" or "ACI 318-19", got "EN 1992"; did you mean "EN 1992-1-1"?',
    ),
    # materials
    "unknown material": (
        BASE.replace('= "steel"', '= "stel"'),
        ':7: part "beam", material: expected a material of the job or the catalogue, got "stel"; nearest is "steel"',
    ),
    "force for modulus": (
        BASE.replace("210 GPa", "210 kN"),
        ':3: material "steel", E: expected a modulus such as "210 GPa", got "210 kN", which is a force',
    ),
    "no E": (
        BASE.replace('E = "210 GPa"', ""),
        ':2: material "steel", E: expected a modulus, or `like` with a name of the catalogue, but it is missing',
    ),
    "unknown like": (
        BASE.replace('E = "210 GPa"', 'like = "S276"'),
        ':3: material "steel", like: expected a material of the catalogue, got "S276"; nearest are',
    ),
    "G and poisson": (
        BASE.replace("poisson", 'G = "80 GPa"\npoisson'),
        ':5: material "steel", poisson: expected either `G` or `poisson`, got both',
    ),
    "band turned round": (
        BASE.replace("poisson", 'band = ["2 GPa", "1 GPa"]\npoisson'),
        ':4: material "steel", band: expected a pair [low, high] of moduli',
    ),
}


@pytest.mark.parametrize("text, message", BAD.values(), ids=BAD.keys())
def test_fault(text, message):
    assert only_fault(text).startswith(message)


def test_all_faults_come_in_one_go_in_order_of_lines():
    text = (
        'lenght = "6 m"\n'
        + STEEL.replace("210 GPa", "210 kN")
        + BEAM.replace("100 mm", "100")
        + plate('under = "bean"')
        + '[[load]]\nkind = "point"\nvalue = "5 kg"\nat = "1 m"\n[[limit]]\nname = "a"\ncombination = "x"\n'
    )
    got = faults_of(text)
    lines = [int(fault.split(":")[1]) for fault in got]
    assert lines == [1, 3, 9, 17, 20, 22, 24]


def test_a_sound_part_is_checked_beside_a_faulty_top_level():
    got = faults_of('datum = "botom"\n' + BASE + 'to = "9 m"\n')
    assert len(got) == 2
    assert got[1].startswith(':12: part "beam", to')


def test_a_fault_is_not_told_twice():
    # a host that cannot be read is no reason to complain about what stands on it
    got = faults_of(BASE.replace("200 mm", "0 mm") + plate('under = "beam"'))
    assert len(got) == 1


@pytest.mark.parametrize(
    ("content", "message"),
    [
        (b"\x00\x01\x02", "the file is binary, not a text"),
        (b"\xff\xfea\x00", "UTF-16"),
        (b'length = "6 m', "never closed"),
        (b'length = 6 m"', "quantities and words stand in quotes"),
    ],
)
def test_not_a_job_at_all(tmp_path, content, message):
    path = tmp_path / "j.toml"
    path.write_bytes(content)
    with pytest.raises(JobFaults, match=message):
        read_job(str(path))


def test_no_such_file(tmp_path):
    with pytest.raises(JobFaults, match="there is no such file"):
        read_job(str(tmp_path / "none.toml"))
    with pytest.raises(JobFaults, match="a folder, not a file"):
        read_job(str(tmp_path))


SURVEY = {
    "no file": (None, 'j.toml:10: part "beam", depth.file: "s.csv": no such file beside the job'),
    "empty": ("# only a remark\n", 'j.toml:10: part "beam", depth.file: "s.csv" is empty'),
    "header only": (
        "x [m],d [mm]\n",
        's.csv: part "beam", depth, file: expected at least two rows below the header, got 0',
    ),
    "no column": (
        "x [m],e [mm]\n0,1\n6,2\n",
        'j.toml:10: part "beam", depth.value: no column "d" in s.csv; known are "x" and "e"',
    ),
    "near column": (
        "xx [m],d [mm]\n0,1\n6,2\n",
        'j.toml:10: part "beam", depth.x: no column "x" in s.csv; did you mean "xx"?',
    ),
    "no unit": (
        "x [m],d\n0,1\n6,2\n",
        's.csv:1: value: expected a unit of a length such as "mm", got "d" without one',
    ),
    "wrong unit": (
        "x [m],d [kN]\n0,1\n6,2\n",
        's.csv:1: value: expected a unit of a length such as "mm", got "kN", which is a force',
    ),
    "a word": (
        "x [m],d [mm]\n0,1\n\n6,thin\n",
        's.csv:4: d [mm]: expected a number of 0 or more, got "thin"',
    ),
    "a gap": (
        "x [m],d [mm]\n0,1\n6,\n",
        "s.csv:3: d [mm]: expected a number of 0 or more, got an empty cell",
    ),
    "nan": ("x [m],d [mm]\n0,nan\n6,1\n", 's.csv:2: d [mm]: expected a number of 0 or more, got "nan"'),
    "negative": ("x [m],d [mm]\n0,1\n6,-1\n", 's.csv:3: d [mm]: expected a number of 0 or more, got "-1"'),
    "repeated": (
        "x [m],d [mm]\n0,1\n0,1\n6,1\n",
        "s.csv:3: expected each station once, got the station at 0 m again",
    ),
    "back": (
        "x [m],d [mm]\n0,1\n3,1\n2,1\n6,2\n",
        "s.csv:4: expected stations in order of x, got 2 m after 3 m",
    ),
}


@pytest.mark.parametrize("content, message", SURVEY.values(), ids=SURVEY.keys())
def test_survey_file(tmp_path, monkeypatch, content, message):
    monkeypatch.chdir(tmp_path)
    if content is not None:
        (tmp_path / "s.csv").write_text(content)
    (tmp_path / "j.toml").write_text(BASE.replace('"200 mm"', '{ file = "s.csv", x = "x", value = "d" }'))
    with pytest.raises(JobFaults) as caught:
        read_job("j.toml")
    assert [str(f) for f in caught.value.faults] == [message]
