"""TOML: the line of every key, and the wording of every text that is not TOML."""

import time

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from fishbelly.cli.faults import JobFaults
from fishbelly.cli.toml_lines import Lines, load_toml

JOB = '''\
# head = [
title = "beam # no comment"   # one
length = "6 m"
camber = [["0 m", "0 mm"], ["3 m", "20 mm"]]

[material.pine]
E = "9.5 GPa"
[material."C24, wet"]
like = 'C24'   # ]
"no tension" = true

[[part]]
name = "joist"
depth = [            # [[part]]
  ["0 m", "900 mm"],

  ["1.8 m",
   "450 mm"],        # last ]
]
note = """
[[part]]
depth = "no \\""" key"
"""

[[part]]   # second
name = 'plate'
joined = { stiffness = "3.2 kN/mm", pitch = "150 mm", rows = 2 }
depth.law = "parabola"
depth . "flat at" = '1.8 m'

[part.notes]
by = "x"

[[load]]
kind = "point"
value = "3 kN"
'''


@pytest.mark.parametrize(
    ("path", "line"),
    [
        (("title",), 2),
        (("length",), 3),
        (("camber", 1, 1), 4),
        (("material",), 6),
        (("material", "pine"), 6),
        (("material", "pine", "E"), 7),
        (("material", "C24, wet"), 8),
        (("material", "C24, wet", "like"), 9),
        (("material", "C24, wet", "no tension"), 10),
        (("part",), 12),
        (("part", 0), 12),
        (("part", 0, "name"), 13),
        (("part", 0, "depth"), 14),
        (("part", 0, "depth", 0), 15),
        (("part", 0, "depth", 1), 17),
        (("part", 0, "depth", 1, 0), 17),
        (("part", 0, "depth", 1, 1), 18),
        (("part", 0, "note"), 20),
        (("part", 1), 25),
        (("part", 1, "name"), 26),
        (("part", 1, "joined", "pitch"), 27),
        (("part", 1, "depth"), 28),
        (("part", 1, "depth", "law"), 28),
        (("part", 1, "depth", "flat at"), 29),
        (("part", 1, "notes"), 31),
        (("part", 1, "notes", "by"), 32),
        (("load", 0, "value"), 36),
    ],
)
def test_line_of_what_is_written(path, line):
    data, lines = load_toml(JOB, "job.toml")
    assert lines.written(path)
    assert lines.line(path) == line
    for step in path:  # the path is one of the data
        data = data[step]


@pytest.mark.parametrize(
    ("path", "line"),
    [
        (("part", 0, "width"), 12),
        (("part", 1, "joined", "creep"), 27),
        (("part", 1, "joined", "creep", "deeper"), 27),
        (("part", 7, "name"), 12),
        (("material", "oak", "E"), 6),
        (("width",), None),
        (("support", 0), None),
        ((), None),
    ],
)
def test_line_of_what_is_missing_is_that_of_the_table_around_it(path, line):
    lines = load_toml(JOB, "job.toml")[1]
    assert not lines.written(path)
    assert lines.line(path) == line


def test_data_are_those_of_the_parser():
    data = load_toml(JOB, "job.toml")[0]
    assert data["part"][0]["note"] == '[[part]]\ndepth = "no """ key"\n'
    assert data["part"][1]["depth"] == {"law": "parabola", "flat at": "1.8 m"}


def test_nested_arrays_of_tables_and_tables_in_their_items():
    text = (
        "[[stage]]\n[[stage.load]]\na = 1\n[[stage.load]]\na = 2\n[stage.load.by]\nc = 1\n"
        "[[stage]]\n[[stage.load]]\na = 3\n"
    )
    data, lines = load_toml(text, "job.toml")
    assert data["stage"][1]["load"][0]["a"] == 3
    assert lines.line(("stage", 0, "load", 1, "a")) == 5
    assert lines.line(("stage", 0, "load", 1, "by", "c")) == 7
    assert lines.line(("stage", 1, "load", 0, "a")) == 10


def test_strings_of_every_kind_hide_what_is_in_them():
    text = "\n".join(
        [
            "a = '''",
            "[[x]] # '' ",
            "'''''",
            'b = """\\',
            '  "" [y] \\\\"""',
            'c = "\\"]#"',
            "d = ''",
            'e = ""',
            "f = [ '#]', \"[\" ] # ]",
            "g = 1",
        ]
    )
    data, lines = load_toml(text, "job.toml")
    assert list(data) == list("abcdefg")
    assert [lines.line((key,)) for key in "abcdefg"] == [1, 4, 6, 7, 8, 9, 10]


def test_windows_line_ends_and_a_mark_at_the_start():
    data, lines = load_toml(b"\xef\xbb\xbfa = 1\r\n\r\n[t]\r\nb = 2\r\n", "job.toml")
    assert data == {"a": 1, "t": {"b": 2}}
    assert (lines.line(("a",)), lines.line(("t", "b"))) == (1, 4)


def test_lines_can_be_made_by_hand():
    lines = Lines({("a",): 3})
    assert lines.line(["a", "b"]) == 3


# Faults --------------------------------------------------------------------------------------------------

QUOTES = r'; quantities and words stand in quotes: depth = "12 mm"'
FAULTS = [
    (b"\xff\xfea\x00=\x001\x00", r"j: the file is UTF-16 text; save it as UTF-8"),
    (b"a = 1\n\0", r"j: the file is binary, not a text"),
    ("a = 1\n\0", r"j: the file is binary, not a text"),
    (b"# ok\na = '\xe9'\n", r"j:2: the file is not UTF-8 text; save it as UTF-8"),
    ("", r"j: the file is empty: it has no key"),
    ("\n# only words\n", r"j: the file is empty: it has no key"),
    ("a = 1\nb = 2\na = 3\n", r'j:3: "a" is given twice, first on line 1'),
    ("a = 1\nb = 2\na = [\n1,\n2]\nc = 1", r'j:3: "a" is given twice, first on line 1'),
    ("a = { b = 1, b = 2 }\n", r'j:1: "a.b" is given twice, first on line 1'),
    ("a = 1\na.b = 2\n", r'j:2: "a" is given twice, first on line 1'),
    ("a = 1\n[a]\n", r'j:2: "a" is given twice, first on line 1'),
    ("a = 1\n[a.b]\n", r'j:2: "a" is given twice, first on line 1'),
    ("[[part]]\na = 1\n[[part]]\nb = 1\nb = 2\n", r'j:5: "part.b" is given twice, first on line 4'),
    ("[m.x]\na = 1\n[m.x]\n", r'j:3: "m.x" is given twice, first on line 1'),
    (
        "[part]\n[part]\n",
        r'j:2: "part" is given twice, first on line 1; where there are several, each is written [[part]]',
    ),
    (
        "[part]\n\n[[part]]\n",
        r'j:3: "part" is given twice, first on line 1; where there are several, each is written [[part]]',
    ),
    (
        "[[part]]\n[part]\n",
        r'j:2: "part" is given twice, first on line 1; where there are several, each is written [[part]]',
    ),
    ("[m]\na.b = 1\n[m.a]\nc = 2\n", r"j:3: a key or table is given twice"),
    ("b = 1\na = [\n  1,\n  2\n", r"j:2: a [ is opened here and never closed"),
    ("a = [\n  1,\n  [2,\n", r"j:3: a [ is opened here and never closed"),
    ("a = '''x\nb = 1\n", r"j:1: a ''' is opened here and never closed"),
    ('a = 1\nb = """x\nc = 1\n', r'j:2: a """ is opened here and never closed'),
    ('a = "x\nb = 1\n', r"j:1: a text in quotes is not closed on its line"),
    ("b = 1\na = 12 mm\n", r"j:2: something follows the value" + QUOTES),
    ("a = mm\n", r"j:1: what stands there is no value" + QUOTES),
    ("a = \n", r"j:1: what stands there is no value" + QUOTES),
    (
        "a = '7' 6\"'\n",
        r'j:1: something follows the value; a foot or inch mark ends the quotes: write "7 ft 6 in"',
    ),
    ("a = {b = 1,\n c = 2}\n", r"a table in { } stands on one line"),
    ("a\n", r'j:1: a "=" is missing after the key'),
    ("a: 1\n", r'j:1: a "=" is missing after the key'),
    ("= 1\n", r"j:1: the line is neither a key with its value nor a [table]"),
    ("[a\n", r"j:1: a \"]\" is missing after the table's name".replace("\\", "")),
    ("[[a]\n", r"j:1: a \"]]\" is missing after the table's name".replace("\\", "")),
    ('a = "c:\\dir"\n', r"j:1: a backslash in double quotes; use single quotes around it"),
    ("a = " + "[" * 5000, r"j: brackets stand too deep inside one another"),
    ("a = 1" + "0" * 5000, r"j: a number has too many digits"),
]


@pytest.mark.parametrize(("text", "words"), FAULTS, ids=[words[:60] for _, words in FAULTS])
def test_what_is_no_toml_is_said_in_words(text, words):
    with pytest.raises(JobFaults) as caught:
        load_toml(text, "j")
    assert len(caught.value.faults) == 1
    said = str(caught.value)
    assert said.startswith(words) if words.startswith("j:") else words in said


@given(st.text(alphabet="ab=.[]{}\"'\\#\n,1 ", max_size=60))
@settings(max_examples=300, deadline=None)
def test_any_text_is_read_or_faulted_and_every_key_read_has_a_line(text):
    try:
        data, lines = load_toml(text, "j")
    except JobFaults as error:
        fault = error.faults[0]
        assert fault.found
        assert fault.line is None or 1 <= fault.line <= text.count("\n") + 1
        return
    for path in _paths(data):
        assert lines.written(path), path


# Round trip: data written as TOML in ways that a person might choose --------------------------------------

KEYS = st.text(alphabet="ab-_ .\"'#[]=é", min_size=1, max_size=4)
SCALARS = st.one_of(
    st.integers(-99, 99), st.booleans(), st.text(alphabet="a\"'\\#[]{}=,\n \t", max_size=8), st.just(1.5)
)


def _inline(value_of):
    return st.one_of(SCALARS, st.lists(value_of, max_size=3), st.dictionaries(KEYS, value_of, max_size=3))


VALUES = st.recursive(SCALARS, _inline, max_leaves=6)
TABLES = st.dictionaries(KEYS, VALUES, max_size=3)
JOBS = st.fixed_dictionaries(
    {},
    optional={
        "top": VALUES,
        "material": st.dictionaries(KEYS, TABLES, min_size=1, max_size=2),
        "part": st.lists(TABLES, min_size=1, max_size=3),
    },
)


def _string(text):
    return '"' + "".join(f"\\u{ord(c):04x}" if c in '"\\\n\t' else c for c in text) + '"'


class Writer:
    """Writes data as TOML and notes, by another way than the reader's, where each key went."""

    def __init__(self, draw):
        self.draw, self.out, self.expected = draw, "", {}

    def line(self):
        return self.out.count("\n") + 1

    def fill(self):
        self.out += self.draw(st.sampled_from(["", " ", "\n", " # [x] '\n", "\n\n"]))

    def value(self, value, path, inline=False):
        if isinstance(value, bool) or not isinstance(value, (str, list, dict)):
            self.out += str(value).lower()
        elif isinstance(value, str):
            if "'''" not in value and not value.endswith("'") and not inline and self.draw(st.booleans()):
                self.out += f"'''\n{value}'''"
            else:
                self.out += _string(value)
        elif isinstance(value, list):
            self.out += "["
            for k, item in enumerate(value):
                self.fill()
                self.expected[(*path, k)] = self.line()
                self.value(item, (*path, k), inline)
                self.fill()
                self.out += ","
            self.out += "]"
        else:
            self.out += "{"
            for k, (key, item) in enumerate(value.items()):
                self.out += ", " if k else " "
                self.pair(key, item, path, inline=True)
            self.out += " }"

    def pair(self, key, value, path, inline=False):
        self.expected[(*path, key)] = self.line()
        self.out += f"{_string(key)} = "
        self.value(value, (*path, key), inline)

    def table(self, header, table, path):
        self.fill()
        self.out += "" if self.out.endswith("\n") or not self.out else "\n"
        self.expected[path] = self.line()
        self.expected.setdefault(path[:1], self.line())
        self.out += header + "\n"
        for key, value in table.items():
            self.pair(key, value, path)
            self.out += "\n"


@given(st.data(), JOBS)
@settings(max_examples=150, deadline=None)
def test_every_key_of_any_job_has_its_line(data, job):
    writer = Writer(data.draw)
    if "top" in job:
        writer.pair("top", job["top"], ())
        writer.out += "\n"
    for name, table in job.get("material", {}).items():
        writer.table(f"[material.{_string(name)}]", table, ("material", name))
    for k, table in enumerate(job.get("part", [])):
        writer.table("[[part]]", table, ("part", k))
    if not job:
        return
    found, lines = load_toml(writer.out, "j")
    assert found == job
    assert {path: lines.line(path) for path in writer.expected} == writer.expected
    assert set(_paths(found)) == set(writer.expected)


def _paths(value, path=()):
    items = value.items() if isinstance(value, dict) else enumerate(value) if isinstance(value, list) else ()
    for step, item in items:
        yield (*path, step)
        yield from _paths(item, (*path, step))


def test_ten_thousand_stations_are_quick():
    stations = "".join(f'  ["{k} mm", "{2 * k}.5 mm"],\n' for k in range(10_000))
    start = time.perf_counter()
    lines = load_toml(f"[[part]]\ndepth = [\n{stations}]\n", "j")[1]
    took = time.perf_counter() - start
    assert lines.line(("part", 0, "depth", 9_999, 1)) == 10_002
    assert took < 1.0  # about 0.1 s on a slow machine; grows with the square if lines were counted anew
