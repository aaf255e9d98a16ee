"""The member of a job file: top level, laws, outlines, materials, placing, notches and openings, in SI units."""

import math

import numpy as np
import pytest
from job_texts import BEAM, STEEL, dims, job, member, part

from fishbelly.cli.job_file import read_job
from fishbelly.member.laws import Law


def test_top_level():
    head = (
        'title = "T"\nnote = "N"\nlength = "20 ft"\nunits = "us"\ndatum = "bottom"\nrises = "6 deg"\n'
        'shear = false\ncamber = "20 mm"\n'
    )
    got = job(BEAM, head=head)
    assert (got.style, got.name, got.sizes, got.warnings) == ("us", "standard input", {}, ())
    assert got.text.startswith("title")
    m = got.member
    assert (m.title, m.note, m.shear, m.camber) == ("T", "N", False, 0.02)
    assert m.length == 6.096
    assert m.rises == math.radians(6)
    assert (m.parts[0].place.relation, m.parts[0].place.anchor) == ("datum", "bottom")
    assert [c.name for c in m.combinations] == ["all"]


def test_camber_ordinates():
    m = member(BEAM, head='length = "6 m"\ncamber = [["0 m", "0 mm"], ["3 m", "30 mm"], ["6 m", "0 mm"]]\n')
    assert isinstance(m.camber, Law)
    assert float(m.camber(1.5)) == pytest.approx(0.015, rel=1e-15)


def test_reads_a_file_and_its_survey(tmp_path):
    (tmp_path / "s.csv").write_text(
        "\ufeff# survey of June\n\nstation (m);remaining depth [mm]\n0;200\n\n3,0;150,5\n6;200\n",
        encoding="utf-8",
    )
    depth = '{ file = "s.csv", x = "station", value = "remaining depth" }'
    path = tmp_path / "j.toml"
    path.write_text('length = "6 m"\n' + STEEL + BEAM.replace('"200 mm"', depth), encoding="utf-8")
    law = read_job(str(path)).member.parts[0].shape.dimensions["depth"]
    assert law(np.array([0.0, 3.0, 4.5, 6.0])) == pytest.approx([0.2, 0.1505, 0.17525, 0.2], rel=1e-14)


@pytest.mark.parametrize(
    ("text", "x", "values"),
    [
        ('[["0 m", "900 mm"], ["1.8 m", "450 mm"]]', [0.0, 0.9, 5.0], [0.9, 0.675, 0.45]),
        (
            '{ steps = [["1 m", "45 mm"], ["2 m", "55 mm"], ["6 m", "34 mm"]] }',
            [0.5, 1.5, 5.0],
            [0.045, 0.055, 0.034],
        ),
        (
            '{ law = "parabola", stations = [["0 m", "900 mm"], ["2 m", "500 mm"]], flat_at = "2 m" }',
            [0.0, 1.0, 2.0],
            [0.9, 0.6, 0.5],
        ),
        ('{ law = "straight", stations = [["0 m", "100 mm"], ["2 m", "200 mm"]] }', [1.0], [0.15]),
        (
            '[["0 m", "1 ft"], ["3 m", "1 ft"], ["3 m", "6 in"], ["4 m", "6 in"]]',
            [2.9, 3.0],
            [0.3048, 0.1524],
        ),
    ],
)
def test_laws(text, x, values):
    law = part(f'shape = "circle"\ndiameter = {text}').shape.dimensions["diameter"]
    assert law(np.array(x)) == pytest.approx(values, rel=1e-13)


def test_outline_dimensions():
    assert dims('shape = "tube"\ndiameter = "10 in"\nwall = "0.25 in"') == {
        "diameter": 0.254,
        "wall": 0.00635,
    }
    box = dims('shape = "box"\nwidth = "100 mm"\ndepth = "200 mm"\nwall = "8 mm"\nradius = "16 mm"')
    assert box == {
        "width": 0.1,
        "depth": 0.2,
        "radius": 0.016,
        "web": 0.008,
        "flange": 0.008,
        "inner_radius": 0.008,
    }
    i = dims('shape = "I"\ndepth = "300 mm"\nweb = "7 mm"\nwidth = "150 mm"\nflange = "10 mm"\nbottom_width = "200 mm"')
    assert (i["top_width"], i["bottom_width"], i["top_flange"], i["bottom_flange"]) == (0.15, 0.2, 0.01, 0.01)
    assert i["radius"] == 0.0
    assert "width" not in i and "flange" not in i
    c = dims('shape = "channel"\ndepth = "200 mm"\nwidth = "75 mm"\nweb = "8 mm"\nflange = "11 mm"')
    assert {k: c[k] for k in ("slope", "flange_at", "radius", "toe_radius")} == dict.fromkeys(
        ("slope", "flange_at", "radius", "toe_radius"), 0.0
    )
    a = dims('shape = "angle"\ndepth = "100 mm"\nwidth = "80 mm"\nthickness = "10 mm"')
    assert (a["web"], a["flange"]) == (0.01, 0.01)
    p = dims('shape = "regular polygon"\nsides = 8\nacross_flats = "300 mm"')
    assert p == {"sides": 8.0, "across_flats": 0.3, "wall": 0.0}
    b = dims('shape = "bars"\ncount = 4\ndiameter = "20 mm"\nwidth = "200 mm"')
    assert b["spacing"] == pytest.approx(0.06, rel=1e-15)
    assert dims('shape = "bars"\ncount = 1\ndiameter = "20 mm"')["spacing"] == 0.0
    t = dims('shape = "trapezoid"\ntop_width = "300 mm"\nbottom_width = "0 mm"\ndepth = "200 mm"')
    assert t["bottom_width"] == 0.0


def test_bars_whose_width_changes():
    text = 'shape = "bars"\ncount = 3\ndiameter = "20 mm"\nwidth = [["0 m", "220 mm"], ["6 m", "420 mm"]]'
    assert float(part(text).shape.dimensions["spacing"](3.0)) == pytest.approx(0.15, rel=1e-14)


def test_polygon_with_a_hole():
    square = '[["0 mm", "0 mm"], ["100 mm", "0 mm"], ["100 mm", "100 mm"], ["0 mm", "100 mm"]]'
    hole = '[["40 mm", "40 mm"], ["60 mm", "40 mm"], ["50 mm", "60 mm"]]'
    shape = part(f'shape = "polygon"\npoints = {square}\nholes = [{hole}]').shape
    assert shape.points == ((0.0, 0.0), (0.1, 0.0), (0.1, 0.1), (0.0, 0.1))
    assert shape.holes == (((0.04, 0.04), (0.06, 0.04), (0.05, 0.06)),)


def test_a_size_of_the_catalogue():
    got = job('\n[[part]]\nname = "a"\nmaterial = "steel"\nsize = "ipe300"\n')
    assert got.sizes == {"a": "IPE 300"}
    shape = got.member.parts[0].shape
    assert shape.kind == "I"
    assert {k: v.value for k, v in shape.dimensions.items()} == {
        "depth": 0.3,
        "web": 0.0071,
        "top_width": 0.15,
        "bottom_width": 0.15,
        "top_flange": 0.0107,
        "bottom_flange": 0.0107,
        "radius": 0.015,
    }


def test_a_rolled_channel_keeps_its_slope():
    shape = job('\n[[part]]\nname = "a"\nmaterial = "steel"\nsize = "UPN 200"\n').member.parts[0].shape
    assert shape.kind == "channel"
    assert shape.dimensions["slope"].value == 0.08
    assert shape.dimensions["flange_at"].value > 0.0


def test_materials():
    text = """
[material.mine]
like = "S275"
E = "205 GPa"
poisson = 0.25
strength = "160 N/mm2"
band = ["200 GPa", "210 GPa"]
yield = "255 N/mm2"
[material.other]
E = "10 GPa"
G = "1 GPa"
strength = { tension = "20 N/mm2", shear = "2 N/mm2" }
"""
    m = member('\n[[part]]\nname = "a"\nmaterial = "C24"\nshape = "circle"\ndiameter = "1 in"\n', materials=text)
    mine, other, timber = m.materials
    assert (mine.E, mine.G, mine.poisson, mine.density, mine.yield_strength) == (
        205e9,
        None,
        0.25,
        7850.0,
        255e6,
    )
    assert (mine.strength.tension, mine.strength.compression, mine.strength.shear) == (160e6, 160e6, None)
    assert mine.band == (200e9, 210e9)
    assert (other.G, other.density, other.strength.compression) == (1e9, None, None)
    assert (timber.name, timber.E) == ("C24", 11e9)


def test_placing():
    m = member(
        BEAM
        + """
[[part]]
name = "plate"
material = "steel"
shape = "rectangle"
width = "80 mm"
depth = "10 mm"
from = "1 m"
to = "5 m"
under = "beam"
flush = "left"
gap = "2 mm"
shift = ["5 mm", [["0 m", "0 mm"], ["6 m", "6 mm"]]]
run_in = ["100 mm", "200 mm"]
turn = "90 deg"
mirror = true
[[part]]
name = "sides"
material = "steel"
shape = "rectangle"
width = "10 mm"
depth = "100 mm"
right_of = "beam"
pair = true
run_in = "50 mm"
[[part]]
name = "bar"
material = "steel"
shape = "circle"
diameter = "20 mm"
position = ["0 mm", "-50 mm"]
anchor = "top left"
[[part]]
name = "groove"
shape = "rectangle"
width = "20 mm"
depth = "20 mm"
cut = true
of = "beam"
centred_on = "beam"
flush = "top"
"""
    )
    _, plate, sides, bar, groove = m.parts
    assert (plate.place.relation, plate.place.host, plate.place.flush) == ("under", "beam", "left")
    assert (plate.start, plate.end, plate.run_in) == (1.0, 5.0, (0.1, 0.2))
    assert (plate.place.gap.value, plate.place.shift[0].value, float(plate.place.shift[1](3.0))) == (
        0.002,
        0.005,
        0.003,
    )
    assert (plate.turn, plate.mirror) == (math.radians(90), True)
    assert (sides.pair, sides.place.flush, sides.run_in) == (True, "middle", (0.05, 0.05))
    assert (bar.place.relation, bar.place.anchor, bar.place.position[1].value) == (
        "position",
        "top left",
        -0.05,
    )
    assert (groove.material, groove.cuts) == (None, ("beam",))


def test_cut_of_the_only_other_part():
    text = BEAM + '\n[[part]]\nname = "g"\nshape = "circle"\ndiameter = "10 mm"\ncut = true\ncentred_on = "beam"\n'
    assert member(text).parts[1].cuts == ("beam",)


def test_notch_haunch_and_a_row_of_openings():
    m = member(
        BEAM
        + """
[[notch]]
of = "beam"
depth = [["0 m", "0 mm"], ["1 m", "50 mm"]]
from = "0 m"
to = "1 m"
side = "top"
reach = "100 mm"
[[haunch]]
of = "beam"
at = "6 m"
depth = "200 mm"
reach = ["1 m", "0 m"]
law = "parabola"
[[opening]]
at = "2 m"
diameter = "80 mm"
spacing = "500 mm"
count = 3
[[opening]]
at = "4.5 m"
length = "200 mm"
depth = "100 mm"
radius = "20 mm"
level = "-100 mm"
of = ["beam"]
"""
    )
    (notch,) = m.notches
    assert (notch.side, notch.reach, float(notch.depth(0.5))) == ("top", 0.1, 0.025)
    (haunch,) = m.haunches
    assert (haunch.reach, haunch.law, haunch.depth, haunch.side) == ((1.0, 0.0), "parabola", 0.2, "bottom")
    assert [o.at for o in m.openings] == [2.0, 2.5, 3.0, 4.5]
    assert (m.openings[0].diameter, m.openings[0].of, m.openings[0].level) == (0.08, ("beam",), None)
    last = m.openings[3]
    assert (last.length, last.depth, last.radius, last.level) == (0.2, 0.1, 0.02, -0.1)
