"""Stress at a level of one cross-section: closed forms, strips in equilibrium, what stages left, and the option."""

import contextlib
import io
from dataclasses import replace

import numpy as np
import pytest
from commands import SIMPLE_BEAM, changed, command
from common import CLOSED, STEEL, TIMBER, cantilever, part
from jsonschema import Draft202012Validator

from fishbelly.cli.main import run
from fishbelly.cli.result_schema import result_schema
from fishbelly.member.analysis import Analysis
from fishbelly.member.description import Member, Opening, Placing, Strength
from fishbelly.member.fibre_stress import LevelOutside, fibre_stresses
from fishbelly.member.laws import constant, parabola, straight
from fishbelly.member.loads import Axial, Point, Temperature
from fishbelly.member.questions import Stage
from fishbelly.member.results import deflect

RATE = 1e-9
"""Relative; a flow is a derivative of values good to 1e-12 on panels of 17 points."""
DIFFERENCE = 1e-7
"""Relative; the second computation is a central difference over 0.1 mm, whose own error is of this size."""


TIP = (Point(4.0, 1e4),)


def beam(*parts, length=4.0, loads=TIP, **more):
    return Member(length, parts, (STEEL, TIMBER), loads=loads, **({"supports": cantilever(), "shear": False} | more))


def at(member, x, *levels, **how):
    return fibre_stresses(Analysis.of(member), x, levels, **how)


def mohr(normal, shear):
    radius = np.hypot(0.5 * normal, shear)
    return 0.5 * normal + radius, 0.5 * normal - radius


# ---- closed forms


def test_rectangle_on_two_supports():
    """V Q / I b of a rectangle, and the circle; in the left half tension falls to the right at mid-depth."""
    found = command("section", SIMPLE_BEAM, "--at", "1.5 m", "--fibre", "-50 mm", "--fibre", "-100 mm")["fibres"]
    M, V, I = 10e3 * 1.5 * 4.5 / 2, 10e3 * 1.5, 0.1 * 0.2**3 / 12
    for f, z, Q in zip(found, (-0.05, -0.1), (0.1 * 0.05 * 0.075, 0.1 * 0.1 * 0.05), strict=True):
        assert (f["part"], f["side"], f["combination"]) == ("beam", "both", "all")
        assert f["z"] == pytest.approx(z, rel=CLOSED)
        normal, shear = -M * (z + 0.1) / I, V * Q / (I * 0.1)
        assert f["normal"] == pytest.approx(normal, rel=RATE, abs=1e-6)
        assert f["shear"] == pytest.approx(shear, rel=RATE)
        assert f["principal"] == pytest.approx(mohr(normal, shear), rel=RATE)
        assert f["tau_max"] == pytest.approx(np.hypot(normal / 2, shear), rel=RATE)
        # the traction on the plane square to the first principal direction is that stress
        n = np.array([np.cos(f["angle"]), np.sin(f["angle"])])
        tensor = np.array([[normal, -shear], [-shear, 0.0]])
        assert tensor @ n == pytest.approx(f["principal"][0] * n, rel=1e-7, abs=1e-7 * abs(f["tau_max"]))
    assert found[1]["angle"] == pytest.approx(-np.pi / 4, rel=RATE)


def test_i_section_where_web_meets_flange():
    """By hand: Q of the flange, over the flange's width above the level and over the web's below."""
    shape = {"depth": 0.3, "web": 0.008, "top_width": 0.15, "bottom_width": 0.15}
    girder = part("girder", "I", 4.0, **shape, top_flange=0.012, bottom_flange=0.012)
    below, above = at(beam(girder), 1.0, -0.012)
    assert (below.side, above.side) == ("below", "above")
    I = (0.15 * 0.3**3 - 0.142 * 0.276**3) / 12
    flow, normal = 1e4 * 0.15 * 0.012 * 0.144 / I, 3e4 * 0.138 / I
    assert below.shear == pytest.approx(flow / 0.008, rel=RATE)
    assert above.shear == pytest.approx(flow / 0.15, rel=RATE)
    assert below.normal == pytest.approx(normal, rel=CLOSED) and above.normal == below.normal
    assert below.principal == pytest.approx(mohr(normal, flow / 0.008), rel=RATE)


def test_circle_up_to_its_top_where_width_vanishes():
    """4 V / 3 A at mid-depth, and a parabola over the depth: Q / b of a segment is (r² - z²) / 3."""
    found = at(beam(part("bar", "circle", 4.0, diameter=0.2)), 1.0, 0.0, -0.05, -0.1)
    most = 4e4 / (3 * np.pi * 0.01)
    for f, z in zip(found, (0.1, 0.05, 0.0), strict=True):
        # the top itself is carried on from a thousandth of the depth inside
        assert f.shear == pytest.approx(most * (1 - (z / 0.1) ** 2), rel=RATE, abs=1e-5 * most)


def test_parts_share_the_flow_by_g_and_keep_their_own_normal_stress():
    """A steel plate beside timber of the same depth."""
    timber = part("timber", "rectangle", 4.0, material="timber", width=0.1, depth=0.2)
    plate = part("plate", "rectangle", 4.0, place=Placing("right_of", "timber"), width=0.01, depth=0.2)
    found = {f.part: f for f in at(beam(timber, plate), 1.0, -0.1)}
    flow = 1e4 * 1.5 / 0.2
    stiff = 0.69e9 * 0.1 + 81e9 * 0.01
    assert found["timber"].shear == pytest.approx(flow * 0.69e9 / stiff, rel=RATE)
    assert found["plate"].shear == pytest.approx(flow * 81e9 / stiff, rel=RATE)
    above = {f.part: f for f in at(beam(timber, plate), 1.0, -0.05)}
    assert above["plate"].normal / above["timber"].normal == pytest.approx(210 / 11, rel=CLOSED)


def test_pieces_apart_take_shear_as_their_ei():
    """Two bars of 100 and 50 mm with a gap: each bends by itself, 8/9 and 1/9 of V."""
    upper = part("upper", "rectangle", 4.0, width=0.1, depth=0.1)
    lower = part("lower", "rectangle", 4.0, place=Placing("under", "upper", gap=constant(0.1)), width=0.1, depth=0.05)
    member = beam(upper, lower)
    levels = Analysis.of(member).profile.groups[0].composition.levels.edges[0]
    assert levels[1:3] == pytest.approx([-0.2, -0.1])
    first, second = at(member, 1.0, -0.05, -0.225)
    assert first.shear == pytest.approx(1.5 * 1e4 * 8 / 9 / 0.01, rel=RATE)
    assert second.shear == pytest.approx(1.5 * 1e4 / 9 / 0.005, rel=RATE)
    with pytest.raises(LevelOutside):
        at(member, 1.0, -0.15)


# ---- where the section varies


def strip_shear(F, x, z, width):
    """Mean shear stress from the force F(x, z) of what lies above a fixed level, by a difference along x."""
    d = 1e-4
    return -(F(x + d, z) - F(x - d, z)) / (2 * d) / width


@pytest.mark.parametrize("sloping", ["bottom", "top"])
def test_tapered_cantilever_by_equilibrium_of_a_strip(sloping):
    """At the sloping face shear is the normal stress times the slope; at the level one there is none."""
    depth = straight([0.0, 4.0], [0.6, 0.3])
    place = Placing("datum", anchor="bottom") if sloping == "top" else Placing("datum", anchor="top")
    member = beam(part("beam", "rectangle", 4.0, place=place, width=0.1, depth=depth))
    slope = 0.3 / 4.0
    for x in (0.9, 2.7):
        h = 0.6 - slope * x
        top, bottom = (h, 0.0) if sloping == "top" else (0.0, -h)

        def force(x, z):
            h = 0.6 - slope * x
            top = h if sloping == "top" else 0.0
            M, I, centre = -1e4 * (4.0 - x), 0.1 * h**3 / 12, top - h / 2
            return -M / I * 0.1 * ((top - centre) ** 2 - (z - centre) ** 2) / 2

        inner = np.linspace(bottom, top, 7)[1:-1]
        found = at(member, x, bottom, *inner, top)
        for f, z in zip(found[1:-1], inner, strict=True):
            assert f.shear == pytest.approx(strip_shear(force, x, z, 0.1), rel=DIFFERENCE)
        face, level = (found[-1], found[0]) if sloping == "top" else (found[0], found[-1])
        assert abs(face.normal) == pytest.approx(1e4 * (4.0 - x) * 6 / (0.1 * h * h), rel=CLOSED)
        assert face.shear == pytest.approx(abs(face.normal) * slope, rel=RATE)
        assert abs(level.shear) < RATE * face.shear


def test_inclined_flange_carries_stress_along_itself():
    """The sloping plate has no shear along its outer face; web and plate pass the same flow at their joint."""
    web = part("web", "rectangle", 10.0, width=0.02, depth=straight([0.0, 10.0], [1.0, 0.3]))
    plate = part("plate", "rectangle", 10.0, place=Placing("under", "web"), width=0.3, depth=0.02)
    member = beam(web, plate, length=10.0, loads=(Point(10.0, 1e5),))
    analysis = Analysis.of(member)
    assert any(g.placed.flanges for g in analysis.profile.groups)
    h, lean = 1.0 - 0.07 * 4.0, np.arctan(0.07)
    s, c = np.sin(lean), np.cos(lean)
    (outer,) = fibre_stresses(analysis, 4.0, [-h - 0.02 / c])
    assert outer.part == "plate" and outer.normal < 0.0
    assert abs(outer.shear) < 1e-7 * abs(outer.normal)
    # it is compressed along its slope: the first direction stands square to that
    assert np.tan(outer.angle + np.pi / 2) == pytest.approx(0.07, rel=1e-6)
    joint = {f.part: f for f in fibre_stresses(analysis, 4.0, [-h])}
    # on the upright section; equilibrium of a wedge whose third side is the sloping joint: no jump of its traction
    plate = 0.3 * np.array([joint["plate"].shear * (c * c - s * s) - joint["plate"].normal * s * c])
    plate += 0.07 * 0.3 * joint["plate"].normal * c * c
    web = 0.02 * (joint["web"].shear + 0.07 * joint["web"].normal)
    assert plate == pytest.approx(web, rel=1e-7)


def test_haunch_and_round_opening_keep_the_whole_shear_force():
    """Flow summed over the depth is V where the outline bends, and beside a round opening."""
    haunched = part("beam", "rectangle", 4.0, width=0.1, depth=parabola([0.0, 4.0], [0.5, 0.3], [4.0]))
    opening = Opening(2.0, diameter=0.1, of=("beam",))
    for member in (beam(haunched), beam(haunched, openings=(opening,))):
        analysis = Analysis.of(member)
        for x in (1.3, 1.97):
            low, high = 0.0, -member.parts[0].shape.dimensions["depth"](np.array([x]))[0]
            half = np.sqrt(max(0.05**2 - (x - 2.0) ** 2, 0.0)) if member.openings else 0.0
            middle = Analysis.of(member).profile.geometry.opening_levels[0] if member.openings else 0.5 * high
            s, w = np.polynomial.legendre.leggauss(6)
            total = 0.0
            for a, b in ((high, middle - half), (middle + half, low)):
                z = 0.5 * (a + b) + 0.5 * (b - a) * s
                tau = np.array([f.shear for f in fibre_stresses(analysis, x, z)])
                total += 0.5 * (b - a) * (w @ tau) * 0.1
            assert total == pytest.approx(1e4, rel=1e-8)


# ---- stages, thrust and free strain


def test_stress_that_stages_have_left():
    """A plate welded on under load: the first load on the beam alone, the second on both, each with its own flow."""
    parts = (
        part("beam", "rectangle", 4.0, width=0.1, depth=0.2),
        replace(part("plate", "rectangle", 4.0, place=Placing("under", "beam"), width=0.1, depth=0.1), stage="new"),
    )
    loads = (Point(4.0, 1e4, case="old"), Point(4.0, 2e4, case="new"))
    member = beam(*parts, loads=loads, stages=(Stage("first", ("old",)), Stage("new", ("new",))))
    joint = {f.side: f for f in at(member, 1.0, -0.2)}
    I, whole = 0.1 * 0.2**3 / 12, 0.1 * 0.3**3 / 12
    # both parts are 100 mm wide: the same flow on both sides, of the second load alone
    new = 2e4 * 0.1 * 0.2 * 0.05 / whole / 0.1
    assert joint["above"].shear == pytest.approx(new, rel=RATE)
    assert joint["below"].shear == pytest.approx(new, rel=RATE)
    assert joint["above"].normal == pytest.approx(-3e4 * 0.1 / I - 6e4 * 0.05 / whole, rel=CLOSED)
    assert joint["below"].normal == pytest.approx(-6e4 * 0.05 / whole, rel=CLOSED)
    (inside,) = at(member, 1.0, -0.1)
    old = 1.5 * 1e4 / 0.02
    assert inside.shear == pytest.approx(old + 2e4 * 0.1 * 0.1 * 0.1 / whole / 0.1, rel=RATE)
    (before,) = at(member, 1.0, -0.1, stage="first")
    assert before.shear == pytest.approx(old, rel=RATE)


def test_thrust_and_warmth_in_a_taper():
    """Constant thrust in a taper has a flow: sigma = N / A at the sloping face, whatever is warm besides."""
    depth = straight([0.0, 4.0], [0.6, 0.3])
    loads = (Axial(4.0, 2e5, level="centroid"), Temperature(0.0, 4.0, parts={"beam": 30.0}))
    member = beam(part("beam", "rectangle", 4.0, width=0.1, depth=depth), loads=loads)
    x, h = 1.6, 0.6 - 0.075 * 1.6

    def force(x, z):
        # the thrust passes the centroid at the tip: M about that at x
        h = 0.6 - 0.075 * x
        arm = -0.15 + h / 2
        M = -2e5 * arm
        I = 0.1 * h**3 / 12
        return 2e5 / h * (0.0 - z) - M / I * 0.1 * ((h / 2) ** 2 - (z + h / 2) ** 2) / 2

    levels = (-0.2 * h, -0.5 * h, -0.9 * h)
    for f, z in zip(at(member, x, *levels), levels, strict=True):
        assert f.shear == pytest.approx(strip_shear(force, x, z, 0.1), rel=DIFFERENCE)
    (face,) = at(member, x, -h)
    assert face.shear == pytest.approx(-face.normal * 0.075, rel=RATE)


# ---- the option


TWO = changed(SIMPLE_BEAM, ('kind = "uniform"', 'kind = "uniform"\ncase = "dead"')) + (
    '[[combination]]\nname = "once"\nfactors = { dead = 1 }\n[[combination]]\nname = "twice"\nfactors = { dead = 2 }\n'
)


def said(text, *options):
    import sys

    class Piped(io.StringIO):
        buffer = io.BytesIO(text.encode())

    out, err = io.StringIO(), io.StringIO()
    old, sys.stdin = sys.stdin, Piped()
    try:
        with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
            status = run(["section", "-", *options])
    finally:
        sys.stdin = old
    return status, out.getvalue(), err.getvalue()


def test_option_schema_table_and_default():
    found = command("section", TWO, "--at", "1.5 m", "--fibre", "-50 mm")
    Draft202012Validator(result_schema("section")).validate(found)
    assert found["fibres"][0]["combination"] == "once"
    twice = command("section", TWO, "--at", "1.5 m", "--fibre", "-50 mm", "--combination", "twice")["fibres"]
    for key in ("normal", "shear", "tau_max"):
        assert twice[0][key] == pytest.approx(2 * found["fibres"][0][key], rel=CLOSED)
    assert "fibres" not in command("section", TWO, "--at", "1.5 m")
    status, table, _ = said(TWO, "--at", "1.5 m", "--fibre", "-50 mm", "--fibre", "0 mm", "--combination", "twice")
    assert status == 0 and "Stress at levels, combination twice" in table and "sigma_1" in table
    assert max(map(len, table.splitlines())) <= 80
    assert "Stress at levels" not in said(TWO, "--at", "1.5 m")[1]


@pytest.mark.parametrize(
    ("options", "words"),
    [
        (("--fibre", "20 mm"), "--fibre: expected a level of the section, -200.0 mm to 0 mm, got 20.00 mm"),
        (("--fibre", "low"), '--fibre: expected a length such as "12 mm", got "low"'),
        (("--fibre", "-20 mm", "--combination", "twise"), '"twise"; did you mean "twice"?'),
        (("--combination", "twice"), "expected a level with it"),
    ],
)
def test_what_is_wrong_is_said(options, words):
    status, out, err = said(TWO, "--at", "1.5 m", *options)
    assert status == 2 and words in err and not out


@pytest.mark.parametrize(("depth", "told"), [(straight([0.0, 4.0], [0.6, 0.3]), True), (0.4, False)])
def test_checked_shear_of_a_taper_is_said_to_be_that_of_the_section(depth, told):
    strong = replace(STEEL, strength=Strength(shear=1e8))
    member = replace(beam(part("beam", "rectangle", 4.0, width=0.1, depth=depth)), materials=(strong,))
    notes = [note.say(lambda value, _: str(value)) for note in deflect(member)["notes"]]
    assert any("shear stress of beam is V Q / (I b)" in n for n in notes) is told
    assert not any("V Q" in n.say(lambda v, _: str(v)) for n in deflect(replace(member, materials=(STEEL,)))["notes"])
