"""The second method against closed forms, against the first method, and with faults planted in the first."""

from __future__ import annotations

import ast
import dataclasses
import importlib
from pathlib import Path

import mpmath as mp
import numpy as np
import pytest

import fishbelly.member
from fishbelly.member import actions as first_actions
from fishbelly.member import breakpoints as first_breaks
from fishbelly.member import panels as first_panels
from fishbelly.member import sampling
from fishbelly.member.actions import Frame, actions, atoms
from fishbelly.member.description import (
    Haunch,
    Hinge,
    Material,
    Member,
    Notch,
    Opening,
    Part,
    Placing,
    Shape,
    Support,
)
from fishbelly.member.faults import Mechanism, NoStiffness
from fishbelly.member.laws import constant, straight
from fishbelly.member.loads import (
    Axial,
    Couple,
    Distributed,
    Point,
    Prestress,
    SelfWeight,
    Shrinkage,
    Temperature,
)
from fishbelly.member.moduli import moduli
from fishbelly.member.nodes import layout
from fishbelly.member.response import free_of, respond
from fishbelly.member.second_grid import RULE, own_breaks
from fishbelly.member.second_method import LoadShare, SecondResult, second_method
from fishbelly.member.second_strips import strip_moments
from fishbelly.member.section_law import ElasticLaw
from fishbelly.sections import composition as first_composition
from fishbelly.sections.area_moments import AreaMoments, area_moments
from fishbelly.sections.outlines import Outline, circle, rectangle, tube

INF = float("inf")
G0 = 9.80665

AGREES = 1e-9
"""Target between the two methods, of the largest deflection, on members whose sections both resolve."""
SHOWS = 1e-6
"""A planted fault must show above this; it is also where a run is stopped."""

STEEL = Material("steel", 210e9, G=81e9, density=7850.0, expansion=12e-6)
TIMBER = Material("timber", 11e9, G=0.69e9, density=420.0, expansion=5e-6, creep=0.6)

LEFT = Support("left", 0.0, down=INF, along=INF, across=INF)
MIDDLE = Support("middle", 2.5, down=INF, across=INF)
RIGHT = Support("right", 6.0, down=INF, across=INF)
FIXED = Support("fixed", 0.0, down=INF, rotation=INF, along=INF, across=INF, rotation_across=INF)
FAR = dataclasses.replace(FIXED, name="far", at=6.0)
UNIFORM = Distributed(((0.0, 1e4), (6.0, 1e4)))


def part(name: str, kind: str, *more: object, material: str = "steel", **dimensions: object) -> Part:
    laws = {k: v if not isinstance(v, float) else constant(v) for k, v in dimensions.items()}
    return Part(name, material, Shape(kind, laws), 0.0, 6.0, *more)


BAR = part("bar", "rectangle", width=0.1, depth=0.2)
TAPER = part("bar", "rectangle", width=0.1, depth=straight([0.0, 6.0], [0.4, 0.1]))
TIMBER_TAPER = part("bar", "rectangle", material="timber", width=0.1, depth=straight([0.0, 6.0], [0.3, 0.2]))
STRIP = dataclasses.replace(
    part("strip", "rectangle", Placing("under", "bar"), width=0.08, depth=0.01),
    start=1.0,
    end=5.0,
    run_in=(0.4, 0.4),
)
ZED = (
    part("web", "rectangle", width=0.01, depth=0.2),
    part("over", "rectangle", Placing("over", "web", flush="left"), width=0.08, depth=0.01),
    part("under", "rectangle", Placing("under", "web", flush="right"), width=0.08, depth=0.01),
)
I_TAPER = part(
    "bar",
    "I",
    depth=straight([0.0, 6.0], [0.4, 0.2]),
    web=0.01,
    top_width=0.2,
    bottom_width=0.15,
    top_flange=0.015,
    bottom_flange=0.02,
    radius=0.012,
)
ROW = part(
    "row",
    "bars",
    Placing("position", position=(constant(0.0), constant(-0.17)), anchor="middle"),
    count=4.0,
    diameter=0.02,
    spacing=0.06,
)
WIDE = part("bar", "rectangle", material="timber", width=0.3, depth=straight([0.0, 6.0], [0.4, 0.2]))


def member(*parts: Part, **more: object) -> Member:
    given = {"supports": (LEFT, RIGHT), "loads": (UNIFORM, SelfWeight())} | more
    return Member(6.0, parts, (STEEL, TIMBER), **given)


def first(m: Member) -> tuple[np.ndarray, np.ndarray, np.ndarray, object]:
    """Places, deflections (2, X) and reactions of the first method, and its 1/GA as a function."""
    profile = sampling.build_profile(m)
    short = moduli(m)
    frame = Frame.of(profile, short)
    each = atoms(m)
    loads = [actions(frame, a) for a in each]
    law = ElasticLaw.of(frame, short, 2, m.shear)
    r = respond(frame, layout(frame), law, each, loads, free_of(frame, loads, short), 2).combined(np.ones(len(each)))
    panels = profile.panels

    def slide(x: np.ndarray, plane: int) -> np.ndarray:
        k = panels.find(x)
        basis = panels.rule.basis(panels.local(k, x))
        return np.einsum("xn,xn->x", basis, law.slide[plane][k])

    return panels.x.ravel(), r.deflection.reshape(2, -1), r.reactions, slide if m.shear else None


def second(m: Member, x: object, slide: object = None, **more: object) -> SecondResult:
    short = moduli(m).E
    share = LoadShare(dict.fromkeys(m.cases, 1.0), short)
    return second_method(m, x, [share], slide, short_E=short, **more)


def difference(m: Member) -> tuple[float, float]:
    """Difference of deflections and of reactions, each over its largest."""
    x, w, reactions, slide = first(m)
    few = np.linspace(0, x.size - 1, min(x.size, 300)).astype(int)
    found = second(m, x[few], slide)
    largest = np.abs(w).max()
    # the two look at different points
    assert found.largest == pytest.approx(largest, rel=0.02)
    gap = np.abs(found.deflection - w[:, few]).max() / largest
    return float(gap), float(np.abs(found.reactions - reactions).max() / np.abs(reactions).max())


MEMBERS = {
    "simple beam": lambda: member(BAR),
    "propped taper": lambda: member(TAPER, supports=(FIXED, RIGHT), loads=(UNIFORM, Couple(2.0, 1e3), SelfWeight())),
    "two spans": lambda: member(BAR, supports=(LEFT, MIDDLE, RIGHT), loads=(UNIFORM, Point(1.0, 1e4))),
    "hinge": lambda: member(
        TAPER,
        supports=(FIXED, RIGHT),
        hinges=(Hinge(3.0),),
        loads=(Point(3.0, 1e4), UNIFORM, Couple(3.0, 5e3), Axial(5.0, 1e4, level="top")),
    ),
    "springs and settlement": lambda: member(
        TAPER,
        supports=(
            Support("a", 1.0, down=1e6, rotation=2e5, along=INF, across=INF, sinks=0.01),
            Support("c", 3.0, down=3e5),
            Support("b", 5.0, down=INF, across=INF, sinks=0.004),
        ),
    ),
    "spring beside a rigid support": lambda: member(
        BAR,
        supports=(
            LEFT,
            dataclasses.replace(RIGHT, at=4.0),
            Support("soft", 4.0, rotation=1e6),
            Support("s", 6.0, down=1e5),
        ),
    ),
    "haunches held along": lambda: member(
        BAR,
        haunches=(Haunch("bar", 0.0, 0.2, (0.0, 2.0)), Haunch("bar", 6.0, 0.2, (2.0, 0.0), law="parabola")),
        supports=(FIXED, dataclasses.replace(FAR, level="bottom")),
    ),
    "haunches that meet": lambda: member(
        BAR,
        haunches=(Haunch("bar", 1.0, 0.2, (1.0, 3.0)), Haunch("bar", 4.0, 0.15, (2.5, 2.0), law="parabola")),
        shear=False,
    ),
    "Z": lambda: member(*ZED, loads=(UNIFORM, Point(2.0, 1e3, direction="across"))),
    "notches": lambda: member(
        BAR,
        notches=(
            Notch("bar", constant(0.05), 1.0, 1.2),
            Notch("bar", straight([4.0, 4.5], [0.02, 0.06]), 4.0, 4.5, side="top"),
        ),
    ),
    "notch with reach": lambda: member(
        BAR, notches=(Notch("bar", constant(0.05), 1.0, 1.2, reach=0.1),), loads=(UNIFORM,)
    ),
    "openings": lambda: member(
        BAR,
        openings=(
            Opening(2.0, ("bar",), diameter=0.1),
            Opening(4.0, ("bar",), length=0.3, depth=0.1, radius=0.03),
        ),
        shear=False,
    ),
    "circle taper": lambda: member(part("bar", "circle", diameter=straight([0.0, 6.0], [0.1, 0.05]))),
    "tube taper": lambda: member(
        part("bar", "tube", diameter=straight([0.0, 6.0], [0.1, 0.05]), wall=0.005), shear=False
    ),
    "two materials": lambda: member(TIMBER_TAPER, STRIP),
    "free strain": lambda: member(
        TIMBER_TAPER,
        STRIP,
        supports=(FIXED, MIDDLE, FAR),
        loads=(
            Temperature(0.0, 6.0, top=30.0, bottom=-5.0),
            Temperature(2.0, 4.0, parts={"strip": 10.0}),
            Shrinkage("bar", 2e-4, 1.0, 5.0),
            Prestress("strip", force=2e4),
            Prestress("bar", strain=1e-5),
        ),
    ),
    "inclined": lambda: member(
        TIMBER_TAPER,
        STRIP,
        rises=0.4,
        loads=(
            SelfWeight(factor=1.2, parts=("strip",)),
            Distributed(((0.0, 1e3), (2.0, 3e3), (2.0, 0.0), (6.0, 2e3)), per="plan"),
            Point(2.0, 1e3, per="slope"),
            Point(3.0, 1e3, direction="up"),
            Axial(5.0, 2e3, level="bottom"),
        ),
    ),
    "I taper": lambda: member(I_TAPER),
    "bars in a taper": lambda: member(WIDE, ROW),
    "turned and cut": lambda: member(
        dataclasses.replace(I_TAPER, turn=0.3),
        dataclasses.replace(
            part("groove", "rectangle", Placing("centred_on", "bar"), width=0.05, depth=0.08),
            material=None,
            cuts=("bar",),
            end=3.0,
        ),
        loads=(UNIFORM, SelfWeight()),
        shear=False,
    ),
    "polygon with a hole": lambda: member(
        Part(
            "bar",
            "steel",
            Shape(
                "polygon",
                points=((-0.1, -0.1), (0.12, -0.12), (0.15, 0.1), (0.0, 0.14)),
                holes=(((-0.02, -0.02), (0.03, -0.03), (0.02, 0.04)),),
            ),
            0.0,
            6.0,
        ),
        shear=False,
    ),
    "wedge to a point": lambda: member(
        part("bar", "rectangle", width=0.1, depth=straight([0.0, 6.0], [0.0, 0.4])), supports=(FAR,), shear=False
    ),
}


@pytest.mark.parametrize("name", MEMBERS)
def test_agrees_with_the_first_method(name: str) -> None:
    m = MEMBERS[name]()
    gap, reactions = difference(m)
    assert gap < AGREES
    assert reactions < AGREES


@pytest.mark.parametrize("name", ["two spans", "propped taper", "bars in a taper", "haunches held along"])
def test_own_error_covers_the_difference(name: str) -> None:
    m = MEMBERS[name]()
    x, w, _, slide = first(m)
    found = second(m, x[::7], slide)
    gap = np.abs(found.deflection - w[:, ::7]).max() / np.abs(w).max()
    # both methods round off; below this neither can say who is right
    assert gap < max(found.error, 1e-12)
    assert found.error < SHOWS


def test_stretches_over_many_spans_stay_exact() -> None:
    n = 40
    supports = tuple(Support(f"s{k}", 3.0 * k, down=INF, along=INF if k == 0 else 0.0) for k in range(n + 1))
    bar = dataclasses.replace(BAR, end=3.0 * n)
    m = Member(
        3.0 * n, (bar,), (STEEL,), supports=supports, loads=(Distributed(((0.0, 1e4), (3.0 * n, 1e4))),), shear=False
    )
    # three-moment equations: M(k-1) + 4 M(k) + M(k+1) = -q L²/2
    inner = np.linalg.solve(
        4.0 * np.eye(n - 1) + np.eye(n - 1, k=1) + np.eye(n - 1, k=-1), np.full(n - 1, -1e4 * 9.0 / 2.0)
    )
    M = np.concatenate(([0.0], inner, [0.0]))
    span = 1e4 * 3.0 / 2.0 + np.diff(M) / 3.0
    other = 1e4 * 3.0 / 2.0 - np.diff(M) / 3.0
    expected = np.concatenate((span, [0.0])) + np.concatenate(([0.0], other))
    found = second(m, [1.5])
    assert -found.reactions[:, 0] == pytest.approx(expected, rel=1e-12)


def test_taper_against_thirty_digits() -> None:
    m = member(TAPER, supports=(FIXED,), loads=(Point(6.0, 1e4),), shear=False)
    with mp.workdps(30):
        stiff = [mp.mpf(210e9) * mp.mpf("0.1") / 12]
        tip = mp.quad(
            lambda x: 1e4 * (6 - x) ** 2 / (stiff[0] * (mp.mpf("0.4") - mp.mpf("0.05") * x) ** 3), [0, 2, 4, 6]
        )
    assert second(m, [6.0]).deflection[0, 0] == pytest.approx(float(tip), rel=1e-12)


def test_wedge_to_a_point_against_the_integral() -> None:
    # free at its point, q over its length: curvature = q s²/2 / (E b (k s)³ / 12), deflection there = ∫ curvature s ds
    m = member(
        part("bar", "rectangle", width=0.1, depth=straight([0.0, 6.0], [0.0, 0.4])),
        supports=(FAR,),
        loads=(UNIFORM,),
        shear=False,
    )
    expected = 0.5 * 1e4 * 12.0 * 6.0 / (210e9 * 0.1 * (0.4 / 6.0) ** 3)
    found = second(m, [0.0])
    assert found.deflection[0, 0] == pytest.approx(expected, rel=1e-10)
    assert found.error < SHOWS


def _segment(radius: float, half: float) -> mp.mpf:
    """Area of the slice of a disc between two level lines, as far above its middle as below."""
    r, h = mp.mpf(radius), min(mp.mpf(half), mp.mpf(radius))
    return 2 * (h * mp.sqrt(r * r - h * h) + r * r * mp.asin(h / r))


@pytest.mark.parametrize("half", [0.0301, 0.0899, 0.09001])
def test_round_outlines_cut_level_are_exact(half: float) -> None:
    one = np.ones(1)
    band = rectangle({"width": one, "depth": 2.0 * half * one})
    disc = mp.pi * mp.mpf("0.1") ** 2 - _segment(0.1, half)
    bore = mp.pi * mp.mpf("0.09") ** 2 - _segment(0.09, half)
    for outline, expected in (
        (circle({"diameter": 0.2 * one}), disc),
        (tube({"diameter": 0.2 * one, "wall": 0.01 * one}), disc - bore),
    ):
        area = strip_moments([outline], [(band, (0,))]).values[0, 0, 0]
        # a ring is the small difference of two discs
        assert area == pytest.approx(float(expected), rel=1e-12)


def test_the_later_part_wins_and_cuts_take_from_their_targets() -> None:
    one = np.ones(1)
    big = rectangle({"width": 0.4 * one, "depth": 0.3 * one})
    inner = rectangle({"width": 0.2 * one, "depth": 0.1 * one}).moved(0.15, 0.0)
    cut = rectangle({"width": 0.1 * one, "depth": 0.04 * one})
    s = strip_moments([big, inner], [(cut, (0,))])
    # the later part reaches 0.05 out of the first; the cut, 0.1 wide in the middle, meets it over nothing
    assert s.values[:, 0, 0] == pytest.approx([0.12 - 0.15 * 0.1 - 0.1 * 0.04, 0.02], rel=1e-13)
    assert (s.bottom[0], s.top[0]) == (-0.15, 0.15)
    s = strip_moments([big, inner], [(cut.moved(0.1, 0.0), (1,))])
    assert s.values[:, 0, 0] == pytest.approx([0.12 - 0.15 * 0.1, 0.02 - 0.1 * 0.04], rel=1e-13)


def test_reach_of_a_notch_takes_stiffness_but_no_mass() -> None:
    m = member(BAR, notches=(Notch("bar", constant(0.05), 1.0, 1.2, reach=0.1),), loads=(SelfWeight(),), shear=False)
    weight = -second(m, [3.0]).reactions[:, 0].sum()
    assert weight == pytest.approx((0.1 * 0.2 * 6.0 - 0.1 * 0.05 * 0.2) * 7850.0 * G0, rel=1e-12)


def test_level_of_a_hold_brings_thrust() -> None:
    # both ends held along at the bottom: M at the ends = H h/2 and ∫(N/EA + M h/2 /EI) dx = 0
    ends = (dataclasses.replace(LEFT, level="bottom"), dataclasses.replace(RIGHT, along=INF, level="bottom"))
    m = member(BAR, supports=ends, loads=(UNIFORM,), shear=False)
    h, area, inertia = 0.2, 0.02, 0.1 * 0.2**3 / 12.0
    load = 1e4 * 6.0**3 / 12.0
    push = load * (h / 2.0) / inertia / (6.0 / area + 6.0 * (h / 2.0) ** 2 / inertia)
    found = second(m, [3.0])
    assert found.reactions[0, 1] == pytest.approx(push, rel=1e-12)
    assert found.reactions[1, 1] == pytest.approx(-push, rel=1e-12)


def test_shares_add_and_carry_their_own_moduli() -> None:
    m = member(TIMBER_TAPER, loads=(UNIFORM, dataclasses.replace(UNIFORM, case="snow")), shear=False)
    short, long = moduli(m).E, moduli(m, long_term=True).E
    both = second_method(m, [2.0], [LoadShare({"load": 1.0}, long), LoadShare({"snow": 0.5}, short)], short_E=short)
    one = second_method(m, [2.0], [LoadShare({"load": 1.0}, short)], short_E=short)
    assert both.deflection[0] == pytest.approx(one.deflection[0] * (1.6 + 0.5), rel=1e-12)
    assert both.work_check is None
    none = second_method(m, [2.0], [LoadShare({"load": 1.0}, short, only=lambda load: False)], short_E=short)
    assert not np.any(none.deflection) and none.error == 0.0


def test_a_bearing_that_lifted_off_holds_nothing() -> None:
    m = member(BAR, supports=(FIXED, dataclasses.replace(RIGHT, only_up=True)), loads=(UNIFORM,), shear=False)
    found = second(m, [6.0], lifted=frozenset({"right"}))
    assert found.reactions[1, 0] == 0.0
    expected = 1e4 * 6.0**4 / 8.0 / (210e9 * 0.1 * 0.2**3 / 12.0)
    assert found.deflection[0, 0] == pytest.approx(expected, rel=1e-12)


def test_work_lies_between_softest_and_stiffest() -> None:
    m = member(TAPER, supports=(FIXED, RIGHT), loads=(UNIFORM, Couple(2.0, 4e3), Point(4.0, 1e3)))
    found = second(m, [3.0], first(m)[3]).work_check
    assert found is not None
    assert found["stiffest"] < found["work"] < found["softest"]
    even = second(member(BAR, loads=(UNIFORM,), shear=False), [3.0]).work_check
    # ½ ∫ q w dx of a simple beam
    work = 0.5 * 1e4**2 * 6.0**5 / 120.0 / (210e9 * 0.1 * 0.2**3 / 12.0)
    assert even is not None and list(even.values()) == pytest.approx([work] * 3, rel=1e-12)
    sunk = member(BAR, supports=(LEFT, dataclasses.replace(RIGHT, sinks=0.01)))
    assert second(sunk, [3.0]).work_check is None


def test_what_can_move_is_a_mechanism() -> None:
    for supports in ((), (LEFT,)):
        with pytest.raises(Mechanism):
            second(member(BAR, supports=supports, shear=False), [3.0])
    loose = (dataclasses.replace(LEFT, along=0.0), RIGHT)
    with pytest.raises(Mechanism, match="along"):
        second(member(BAR, supports=loose, loads=(Axial(3.0, 5.0),), shear=False), [3.0])
    free = tuple(dataclasses.replace(s, across=0.0) for s in (LEFT, RIGHT))
    with pytest.raises(Mechanism, match="sideways"):
        second(member(BAR, supports=free, loads=(Point(3.0, 5.0, direction="across"),), shear=False), [3.0])
    assert np.any(second(member(BAR, supports=free, shear=False), [3.0]).deflection)


def test_a_gap_between_parts_has_no_stiffness() -> None:
    at = Placing("position", position=(constant(0.0), constant(0.0)))
    halves = (
        dataclasses.replace(BAR, end=2.0),
        dataclasses.replace(STRIP, start=2.5, end=6.0, place=at, run_in=(0.0, 0.0)),
    )
    with pytest.raises(NoStiffness):
        second(member(*halves, shear=False), [3.0])


def test_own_breaks_name_every_place() -> None:
    m = member(
        dataclasses.replace(TAPER, start=0.1, run_in=(0.2, 0.3)),
        notches=(Notch("bar", straight([2.0, 2.1, 2.2], [0.01, 0.02, 0.01]), 2.0, 2.2, reach=0.05),),
        haunches=(Haunch("bar", 3.0, 0.1, (0.25, 0.35)),),
        openings=(Opening(4.5, ("bar",), length=0.4, depth=0.05, radius=0.02),),
        supports=(dataclasses.replace(LEFT, at=0.15), RIGHT),
        hinges=(),
        loads=(Point(1.1, 1.0), Distributed(((1.2, 1.0), (1.3, 2.0), (1.4, 0.0))), Temperature(5.0, 5.1, top=1.0)),
        shear=False,
    )
    wanted = [0, 0.1, 0.15, 0.3, 1.1, 1.2, 1.3, 1.4, 1.95, 2, 2.1, 2.2, 2.25, 2.75, 3, 3.35]
    wanted += [4.3, 4.32, 4.5, 4.68, 4.7, 5, 5.1, 5.7, 6]
    assert own_breaks(m) == pytest.approx(wanted, rel=1e-14)


def test_rule_integrates_and_sees_its_tail() -> None:
    x = np.array([-1.0, -0.3, 0.4, 1.0])
    assert RULE.up_to(x) @ RULE.s**15 == pytest.approx((x**16 - 1.0) / 16.0, abs=1e-14)
    assert RULE.tail(np.exp(RULE.s)) < 1e-12 < 1e-3 < RULE.tail(np.abs(RULE.s))
    assert RULE.at_end(RULE.s**3, -1) == pytest.approx(-1.0, rel=1e-13)


ALLOWED = {
    "fishbelly.member.description",
    "fishbelly.member.faults",
    "fishbelly.member.geometry",
    "fishbelly.member.laws",
    "fishbelly.member.loads",
    "fishbelly.member.openings",
    "fishbelly.sections.outlines",
}


def test_shares_nothing_with_the_first_method_but_the_description() -> None:
    folder = Path(fishbelly.member.__file__).parent
    files = sorted(folder.glob("second_*.py"))
    assert len(files) >= 5
    own = {f"fishbelly.member.{f.stem}" for f in files}
    for file in files:
        for node in ast.walk(ast.parse(file.read_text(encoding="utf-8"))):
            names = []
            if isinstance(node, ast.ImportFrom):
                assert node.level == 0
                names = [node.module or ""]
            elif isinstance(node, ast.Import):
                names = [a.name for a in node.names]
            for name in names:
                assert not name.startswith("fishbelly") or name in ALLOWED | own, f"{file.name} imports {name}"
    # and what they do import of the description leads to no way of computing sections or forces
    for name in ALLOWED:
        tree = ast.parse(Path(importlib.import_module(name).__file__ or "").read_text(encoding="utf-8"))
        found = {n.module for n in tree.body if isinstance(n, ast.ImportFrom)}
        assert not found & {
            f"fishbelly.sections.{n}" for n in ("area_moments", "composition", "level_cuts", "chebyshev")
        }


def _wrong_moments(outline: Outline) -> AreaMoments:
    """Shift from the point beside the outline to its centroid with the wrong sign."""
    right = area_moments(outline)
    z0 = outline.z.mean(axis=1)
    return dataclasses.replace(right, zz=right.zz + 2.0 * right.area * (right.z - z0) ** 2)


def _shown(m: Member) -> float:
    """How far the first method, with a fault in it, is from the second at the largest deflection."""
    x, w, _, slide = first(m)
    k = int(np.argmax(np.abs(w[0])))
    return float(abs(second(m, [x[k]], slide).deflection[0, 0] - w[0, k]) / np.abs(w).max())


def test_a_forgotten_breakpoint_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    m = MEMBERS["notches"]()
    assert _shown(m) < AGREES
    every = first_breaks.breakpoints
    monkeypatch.setattr(
        sampling, "breakpoints", lambda member, more=(): every(dataclasses.replace(member, notches=()), more)
    )
    assert _shown(m) > SHOWS


def test_a_wrong_sign_in_area_moments_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    m = member(I_TAPER, shear=False)
    assert _shown(m) < AGREES
    monkeypatch.setattr(first_composition, "area_moments", _wrong_moments)
    assert _shown(m) > SHOWS


def test_a_dropped_load_piece_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    m = member(TAPER, loads=(Distributed(((0.0, 1e4), (5.0, 1e4), (6.0, 2e4))), SelfWeight()))
    assert _shown(m) < AGREES
    put = first_actions._distributed

    def dropped(frame: Frame, a: object, load: Distributed, span: object) -> None:
        put(frame, a, dataclasses.replace(load, stations=load.stations[:-1]), span)

    monkeypatch.setattr(first_actions, "_distributed", dropped)
    assert _shown(m) > SHOWS


def test_a_wrong_integration_matrix_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    m = MEMBERS["propped taper"]()
    assert _shown(m) < AGREES
    right = first_panels.rule

    def wrong(n: int) -> object:
        r = right(n)
        integrate = r.integrate.copy()
        integrate[:, n // 2] *= 1.001
        return dataclasses.replace(r, integrate=integrate)

    monkeypatch.setattr(first_panels, "rule", wrong)
    assert _shown(m) > SHOWS
