"""What the stresses of parts must come to in any member: its forces, the flow into each part, the shear force."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from common import ROUND_OFF, part, simple
from hypothesis import given
from hypothesis import strategies as st
from members import MATERIALS, SPAN, loads, part_lists, support_lists
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.carried import part_force
from fishbelly.member.description import Member, Placing
from fishbelly.member.extremes import values_at
from fishbelly.member.laws import straight
from fishbelly.member.level_flow import Flows
from fishbelly.member.level_geometry import LevelSite, Slab, on_level
from fishbelly.member.loads import Axial, Point, Temperature
from fishbelly.member.part_forces import Loading, loadings, stress_planes
from fishbelly.member.profile import group_places
from fishbelly.member.questions import Stage
from fishbelly.sections.chebyshev import rule

Array = NDArray[np.float64]

STRIPS = 1e-8
"""Relative to the largest force of a part; outlines are followed over panels that are resolved to 1e-12 of EI."""
LEVELS = 1e-6
"""Relative; eight levels in each stretch between corners leave 1e-8, curves that end in one a little more."""


@st.composite
def lived(draw: st.DrawFn, most: int = 3) -> Member:
    """A member with thrust and warmth whose last part may come when half of its loads are there."""
    supports, hinges = draw(support_lists())
    parts = draw(part_lists(most))
    acting = (
        draw(loads()),
        draw(loads(case="new")),
        Axial(SPAN / 2, 5e4, "new", "datum"),
        Temperature(0.0, SPAN, case="new", parts={"p0": 20.0}),
    )
    stages: tuple[Stage, ...] = ()
    if len(parts) > 1 and draw(st.booleans()):
        parts = (*parts[:-1], replace(parts[-1], stage="second"))
        stages = (Stage("first", ("load",)), Stage("second", ("new",)))
    return Member(
        SPAN,
        parts,
        MATERIALS,
        supports=supports,
        hinges=hinges,
        loads=acting,
        shear=False,
        stages=stages,
        inclined="cut",
    )


def solved(member: Member) -> tuple[Analysis, tuple[Loading, ...]]:
    analysis = Analysis.of(member)
    return analysis, loadings(analysis, analysis.combine(member.combinations[0]))


@given(lived())
def test_stresses_of_every_section_are_its_forces(member: Member) -> None:
    _, loading = solved(member)
    carried = [f for i in loading[0].parts if (f := part_force(loading, i)) is not None]
    N, M = sum(v.response.N for v in loading), sum(v.response.M for v in loading)
    force = max(np.abs(f.N).max() for f in carried) + np.abs(N).max()
    moment = max(np.abs(f.about_line).max() for f in carried) + np.abs(M).max()
    assert np.abs(sum(f.N for f in carried) - N).max() <= ROUND_OFF * force
    assert np.abs(sum(f.about_line for f in carried) - M).max() <= ROUND_OFF * moment


def by_strips(analysis: Analysis, loading: tuple[Loading, ...], part: int, panel: int, x: float) -> float:
    """Force of a part at x, from its stress on level lines across the section."""
    panels, line = analysis.profile.panels, analysis.frame.line
    middle = np.array([0.5 * (panels.a[panel] + panels.b[panel])])
    group = group_places(analysis.profile.geometry, np.array([[x]]), middle, 0)[0]
    planes = stress_planes(loading, part)
    assert planes is not None
    v = values_at(panels, planes.sum(axis=0), np.array([x]))[:, 0]
    levels, k = group.composition.levels, group.placed.index.index(part)
    width, first = levels.widths.width[k, 0], levels.widths.first[k, 0]
    z, r = levels.z[0], rule(levels.z.shape[-1])
    stress = width * (v[0] + v[1] * (z - line[0])) + v[2] * (-first - width * line[1])
    return float((stress * levels.stretch[0] @ r.weights).sum())


@given(lived(most=2), st.floats(0.0, 1.0, exclude_max=True))
def test_flow_into_a_part_is_what_its_force_gains(member: Member, where: float) -> None:
    analysis, loading = solved(member)
    panels = analysis.profile.panels
    panel = int(where * panels.count)
    h = panels.b[panel] - panels.a[panel]
    a, b = panels.a[panel] + 0.2 * h, panels.a[panel] + 0.8 * h
    s, w = np.polynomial.legendre.leggauss(24)
    forces = {i: f for i in loading[0].parts if (f := part_force(loading, i)) is not None}
    size = max(np.abs(f.N).max() for f in forces.values())
    for i, f in forces.items():
        if f.first <= panel < f.stop:
            flow = values_at(panels, f.flow.sum(axis=0), 0.5 * (a + b) + 0.5 * (b - a) * s)
            gained = by_strips(analysis, loading, i, panel, b) - by_strips(analysis, loading, i, panel, a)
            assert 0.5 * (b - a) * (w @ flow) == pytest.approx(gained, abs=STRIPS * size)


def over_the_depth(flows: Flows) -> float:
    """Flow through every level of a section, summed over its depth [N]."""
    site, total = flows.site, 0.0
    points, weights = np.polynomial.legendre.leggauss(8)
    for k, (low, high) in enumerate(zip(site.edges[0, :-1], site.edges[0, 1:], strict=True)):
        half = 0.5 * (high - low)
        if half <= 1e-9:
            continue
        for s, w in zip(points, weights, strict=True):
            slab = Slab.of(site, k, 0.5 * (low + high) + half * np.sin(0.5 * np.pi * s))
            flow = float(flows.shears(slab) @ on_level(site, slab).width)
            total += w * half * 0.5 * np.pi * np.cos(0.5 * np.pi * s) * flow
    return total


@given(lived(most=2), st.floats(0.05, 0.95), st.sampled_from(["along", "cut"]))
def test_flow_over_the_whole_depth_is_the_shear_force(member: Member, where: float, inclined: str) -> None:
    analysis, loading = solved(replace(member, inclined=inclined))
    flows = Flows(LevelSite.at(analysis.profile, where * SPAN, "right"), loading)
    V = sum(v.response.V[0].sum(axis=0) for v in loading)
    M = sum(v.response.M[0].sum(axis=0) for v in loading)
    size = np.abs(V).max() + np.abs(M).max() / SPAN + 5e4
    assert over_the_depth(flows) == pytest.approx(float(flows.site.value(V)), abs=LEVELS * size)


def test_corners_that_round_off_parts_are_one() -> None:
    """Tapered discs flush with a square: where their arcs begin, levels differ by round-off, elsewhere not."""
    square = part("square", "rectangle", SPAN, width=0.1, depth=0.1)
    taper = straight([0.0, 0.25, SPAN], [0.1, 0.05, 0.1])
    disc = part("disc", "circle", SPAN, place=Placing("left_of", "square", flush="top"), diameter=taper)
    held = (square, replace(disc, pair=True))
    member = Member(SPAN, held, MATERIALS, supports=simple(SPAN), loads=(Point(0.25, 400.0),), shear=False)
    analysis, loading = solved(member)
    flows = Flows(LevelSite.at(analysis.profile, 3.0, "right"), loading)
    # beyond the load V is the far reaction
    assert over_the_depth(flows) == pytest.approx(-400.0 * 0.25 / SPAN, rel=LEVELS)
