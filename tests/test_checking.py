"""A description built from Python is checked too, and every problem is told at once."""

# ruff: noqa: E501 (a job and its message stand side by side, unbroken, as they are written)

from dataclasses import replace

import pytest

from fishbelly.member.checking import DescriptionError
from fishbelly.member.description import (
    Combination,
    Limit,
    Material,
    Member,
    Part,
    Placing,
    Shape,
    Station,
    Support,
)
from fishbelly.member.laws import constant, straight
from fishbelly.member.loads import Distributed, Point, SelfWeight, Shrinkage, Temperature

STEEL = Material("steel", 210e9, G=81e9)
BAR = Shape("rectangle", {"width": 0.1, "depth": 0.2})
BEAM = Part("beam", "steel", BAR, 0.0, 6.0)
PIN = Support("left", 0.0, down=1e99)
INF = float("inf")


def member(**changes):
    return Member(**{"length": 6.0, "parts": (BEAM,), "materials": (STEEL,), **changes})


def problems(**changes):
    with pytest.raises(DescriptionError) as caught:
        member(**changes)
    return [str(problem) for problem in caught.value.problems]


def under(name, start=0.0, end=6.0, host="beam"):
    return Part(name, "steel", BAR, start, end, Placing("under", host))


def test_a_sound_member_has_one_combination():
    m = member(loads=(Point(1.0, 5.0),), supports=(replace(PIN, down=INF),))
    assert m.combinations == (Combination("all", {"load": 1.0}, implied=True),)


def test_all_problems_at_once():
    got = problems(parts=(replace(BEAM, end=7.0), under("plate", host="bean")), stations=(Station("s", -1.0),))
    assert got == [
        'part[1].under: expected the name of a part, got "bean"',
        "part[0].to: expected a place within the member, 0 to 6 m, got 7 m",
        "station[0].at: expected a place within the member, 0 to 6 m, got -1 m",
    ]


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"length": 0.0}, "length: expected a length above 0 m, got 0 m"),
        ({"length": float("nan")}, "length: expected a finite number, got nan"),
        ({"parts": ()}, "part: expected at least one part, but it is missing"),
        ({"materials": ()}, 'part[0].material: expected the name of a material, got "steel"'),
        ({"materials": (replace(STEEL, G=None),)}, "material.steel.G: expected a shear modulus or `poisson`"),
        ({"materials": (replace(STEEL, E=-1.0),)}, "material.steel.E: expected a stress above 0 Pa, got -1 Pa"),
        ({"parts": (replace(BEAM, turn=INF),)}, "part[0].turn: expected a finite number, got inf"),
        ({"parts": (BEAM, under("a", host="b"), under("b", host="a"))}, 'part[1].under: expected an earlier part, got a circle: "a" on "b" on "a"'),
        ({"parts": (replace(BEAM, start=1.0), under("a"))}, 'part[1].under: expected a part present from 0 m to 6 m, got "beam", absent from 0 m to 1 m'),
        ({"parts": (replace(BEAM, shape=Shape("square", {})),)}, 'part[0].shape: expected one of "rectangle"'),
        ({"parts": (replace(BEAM, shape=Shape("rectangle", {"width": 1.0})),)}, "part[0].depth: expected a dimension of the rectangle, but it is missing"),
        ({"parts": (replace(BEAM, shape=Shape("rectangle", {"width": 1.0, "depth": straight([0, 3, 6], [1, -1, 1])})),)}, "part[0].depth: expected a length above 0 m all along the part, got -1 m"),
        ({"supports": (replace(PIN, down=-1.0),)}, "support[0].vertical: expected a stiffness of 0 or more, got -1"),
        ({"supports": (replace(PIN, down=0.0),)}, "support[0]: it holds nothing"),
        ({"supports": (replace(PIN, level="middle"),)}, 'support[0].level: expected one of "centroid", "top", "bottom", "datum", got "middle"'),
        ({"loads": (SelfWeight(),)}, "material.steel.density: expected a density, because self weight counts, but it is missing"),
        ({"loads": (Temperature(0.0, 6.0, 1.0, 1.0),)}, "material.steel.expansion"),
        ({"loads": (Distributed(((3.0, 1.0), (2.0, 1.0))),)}, "load[0].stations: expected stations in order of x, got one that goes back"),
        ({"loads": (Point(1.0, 1.0, direction="left"),)}, 'load[0].direction: expected one of "down", "up", "across", got "left"'),
        ({"combinations": (Combination("a", {"wind": 1.0}),)}, 'combination[0].factors.wind: expected the name of a load case, got "wind"'),
        ({"loads": (Point(1.0, 1.0),), "combinations": (Combination("a", {"load": 1.0}, {"load": 1.0}),)}, 'material.steel.creep: expected a creep factor, because combination "a" has a sustained share, but it is missing'),
        ({"limits": (Limit("a", absolute=0.1, at="s"),)}, 'limit[0].at: expected the name of a station, got "s"'),
        ({"limits": (Limit("a", span_over=300.0),)}, "support: limits on spans need supports that hold down"),
    ],
)  # fmt: skip
def test_problem(changes, message):
    got = problems(**changes)
    assert len(got) == 1
    assert got[0].startswith(message)


def test_what_is_not_needed_is_not_asked_for():
    bare = replace(STEEL, G=None)
    warm = Temperature(0.0, 6.0, parts={"beam": 0.0})
    assert member(materials=(bare,), shear=False, loads=(warm,)).materials == (bare,)


def test_shrinkage_with_its_own_creep_needs_no_other():
    combination = Combination("final", {"load": 1.0}, {"load": 1.0})
    own = Shrinkage("beam", 1e-4, 0.0, 6.0, creep=2.0)
    assert member(loads=(own,), combinations=(combination,)).loads == (own,)
    assert problems(loads=(own, Point(1.0, 1.0)), combinations=(combination,))[0].startswith("material.steel.creep")


def test_a_taper_may_run_to_a_point():
    point = Shape("rectangle", {"width": constant(0.1), "depth": straight([0.0, 6.0], [0.2, 0.0])})
    assert member(parts=(replace(BEAM, shape=point),)).parts[0].shape is point
    early = Shape("rectangle", {"width": constant(0.1), "depth": straight([0.0, 5.0], [0.2, 0.0])})
    assert problems(parts=(replace(BEAM, shape=early),))[0].startswith("part[0].depth")
