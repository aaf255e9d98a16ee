"""Clipped area moments and strain planes of sections without tension: closed forms, invariances, tangents."""

from __future__ import annotations

import math
from typing import Any

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from fishbelly.sections.clipping import at_stations, clipped_moments, clipped_outline, moved, raw_moments
from fishbelly.sections.composition import Composition
from fishbelly.sections.no_tension import FreePlanes, largest_shares, solve_section
from fishbelly.sections.outlines import bars, circle, i_shape, rectangle, tee

ONE = np.ones(1)
EXACT = 1e-13
"""Relative to the largest moment of its kind: a few dozen additions."""
CLOSED = 1e-11
"""Newton's method stops at 1e-13 of the strain plane; moments amplify that by the slenderness of what is left."""


def line(*values: float) -> Any:
    return np.array(values, dtype=float)[:, None]


def box(width: float, depth: float) -> Any:
    return rectangle({"width": width * ONE, "depth": depth * ONE})


def disc(diameter: float) -> Any:
    return circle({"diameter": diameter * ONE})


def reinforced(skew: float = 0.0) -> Composition:
    """A rectangle with bars at the bottom and, for `skew`, one bar off its middle at the top."""
    row = bars({"count": 4 * ONE, "diameter": 0.02 * ONE, "spacing": 0.06 * ONE}).moved(0.0, -0.16)
    one = disc(0.016).moved(skew, 0.16)
    return Composition((box(0.3, 0.42), row, one))


E_RC = np.array([[31e9], [200e9], [200e9]])
CONCRETE_ALONE = np.array([True, False, False])


def solved(section: Composition, N: float, M_y: float, M_z: float = 0.0, **more: Any) -> Any:
    free = more.pop("free", FreePlanes.none(len(E_RC), 1))
    return solve_section(section, E_RC, CONCRETE_ALONE, free, line(N, M_y, M_z))


@pytest.mark.parametrize("share", [-0.9, -0.3, 0.0, 0.55, 0.99])
def test_segment_of_a_circle(share: float) -> None:
    """Area and first moment of the part of a circle below a chord, chord at any angle."""
    r, turn = 0.7, 1.1
    h = share * r
    found = clipped_outline(disc(2 * r), line(-h, math.cos(turn), math.sin(turn)))
    half = math.acos(-share)
    area = r * r * (half - math.sin(half) * math.cos(half))
    first = -2.0 / 3.0 * (r * r - h * h) ** 1.5
    assert found[0, 0] == pytest.approx(area, rel=EXACT)
    assert found[2, 0] == pytest.approx(first * math.cos(turn), abs=EXACT)
    assert found[1, 0] == pytest.approx(first * math.sin(turn), abs=EXACT)


def test_triangle_of_a_square() -> None:
    """A square cut along its diagonal: the lower left half."""
    a, h = 0.2, 0.4
    found = clipped_outline(box(2 * a, 2 * a), line(0.0, 1.0, 1.0))[:, 0]
    expected = [h * h / 2, -(h**3) / 12, -(h**3) / 12, 4 / 3 * a**4 / 2 * 1, 4 / 3 * a**4 / 2, 0.0]
    # ∫yz over the half is that of the square's half, zero by the mirror y <-> -z
    assert found == pytest.approx(expected, abs=EXACT)


@settings(deadline=None, max_examples=40)
@given(
    st.floats(-0.3, 0.3), st.floats(-1.0, 1.0), st.floats(-1.0, 1.0).filter(lambda v: abs(v) > 1e-3), st.integers(0, 2)
)
def test_two_sides_make_the_whole(level: float, a: float, b: float, part: int) -> None:
    """What lies on one side and on the other is the part, overlap and cuts counted, by both roads."""
    d = {"depth": 0.5, "web": 0.1, "flange": 0.12, "radius": 0.03, "width": 0.4}
    shape = tee({k: v * ONE for k, v in d.items()})
    cut = (disc(0.14).moved(0.05, -0.1), (0,), True)
    section = Composition((shape, disc(0.03).moved(0.02, 0.2), box(0.1, 0.05).moved(0.17, 0.22)), (cut,))
    whole = raw_moments(section.moments.at(part))
    one, other = (clipped_moments(section, part, s * line(level, a, b)) for s in (1.0, -1.0))
    assert one + other == pytest.approx(whole, abs=EXACT)


@settings(deadline=None, max_examples=30)
@given(st.floats(-0.2, 0.2), st.floats(-1.0, 1.0), st.floats(-1.0, 1.0).filter(lambda v: abs(v) > 1e-3))
def test_slabs_give_the_same(level: float, a: float, b: float) -> None:
    """Where nothing crosses, the road for crossing outlines gives the same."""
    direct, slabs = reinforced(0.05), reinforced(0.05)
    slabs.__dict__["crossing"] = True
    for part in range(3):
        one, other = (clipped_moments(s, part, line(level, a, b)) for s in (direct, slabs))
        assert one == pytest.approx(other, abs=EXACT)


@pytest.mark.parametrize("share", [0.1, 0.2, 0.3, 0.45, 0.499])
def test_rectangle_outside_its_kern(share: float) -> None:
    """Compression outside the kern: a triangle of stress 2 N / (3 b c), c from the force to the edge."""
    b, h, N, E = 0.3, 0.5, -2e5, 5e9
    e = share * h
    state = solve_section(
        Composition((box(b, h),)), np.array([[E]]), np.array([True]), FreePlanes.none(1, 1), line(N, -N * e, 0.0)
    )
    e0, k, _ = state.plane[:, 0]
    edge = E * (e0 - k * 0.5 * h)
    c = 0.5 * h - e
    expected = 2.0 * N / (3.0 * b * c) if share > 1.0 / 6.0 else N / (b * h) * (1.0 + 6.0 * share)
    # second moments of what is left about the middle of the section lose (h / c)^2
    assert edge == pytest.approx(expected, rel=CLOSED + 1e-16 * (h / c) ** 2)
    assert state.carried.all() and state.converged.all()


def test_corner_of_a_square() -> None:
    """A force on a square's diagonal that leaves a corner in compression: a pyramid of stress, force at its quarter."""
    a, E, N = 0.4, 1e9, -1e4
    side = 0.2  # the triangle's legs from the corner
    at = 0.5 * a - side / 4.0
    state = solve_section(
        Composition((box(a, a),)), np.array([[E]]), np.array([True]), FreePlanes.none(1, 1), line(N, -N * at, -N * at)
    )
    e0, ky, kz = state.plane[:, 0]
    corner = E * (e0 - (ky + kz) * 0.5 * a)
    # volume of the pyramid: corner stress times legs² / 6
    assert corner == pytest.approx(6.0 * N / side**2, rel=1e-9)
    # the stress is zero on the line through the ends of the legs
    assert e0 - ky * 0.5 * a - kz * (0.5 * a - side) == pytest.approx(0.0, abs=1e-9 * abs(corner) / E)


@pytest.mark.parametrize("M", [-9e4, -1e3, 1e3, 9e4])
@pytest.mark.parametrize("N", [-3e5, 0.0, 1e5])
def test_mirrored_up_and_down(N: float, M: float) -> None:
    """The section upside down under the moment turned round has the curvature turned round."""
    plain = reinforced()
    upside = Composition(tuple(o.turned(math.pi) for o in plain.outlines))
    one, other = solved(plain, N, M).plane[:, 0], solved(upside, N, -M).plane[:, 0]
    assert other * [1, -1, 1] == pytest.approx(one, rel=CLOSED, abs=1e-15)


@settings(deadline=None, max_examples=40)
@given(st.floats(-8e5, 3e5), st.floats(-2e5, 2e5), st.floats(-1e5, 1e5), st.floats(-3e-4, 3e-4))
def test_forces_are_carried_and_the_tangent_is_theirs(N: float, M_y: float, M_z: float, shrunk: float) -> None:
    """Stresses integrated by fibres of the solution give the forces; differences of solutions give the tangent."""
    section = reinforced(0.08)
    free = FreePlanes(np.array([[-shrunk], [0.0], [0.0]]), np.zeros((3, 1)), np.zeros((3, 1)))
    state = solve_section(section, E_RC, CONCRETE_ALONE, free, line(N, M_y, M_z))
    assert state.converged.all()
    plane = state.plane[:, 0]
    found = np.zeros(3)
    for k in range(3):
        lines = np.array([plane[0] - free.e[k, 0], -plane[1], -plane[2]])
        m = clipped_moments(section, k, lines[:, None]) if k == 0 else raw_moments(section.moments.at(k))
        A, y, z, zz, yy, yz = m[:, 0]
        rows = np.array([[A, z, y], [-z, -zz, -yz], [-y, -yz, -yy]])
        found += E_RC[k, 0] * rows @ lines
    size = np.array([1.0, 0.2, 0.2]) * max(abs(N), abs(M_y) / 0.2, abs(M_z) / 0.2, 31e9 * 0.126 * abs(shrunk), 1.0)
    assert found / size == pytest.approx(np.array([N, M_y, M_z]) / size, abs=1e-11)
    matrix = state.matrix[0]
    assert matrix == pytest.approx(matrix.T, rel=1e-12, abs=1e-6 * np.abs(matrix).max())


def test_tangent_by_differences() -> None:
    section, force = reinforced(0.08), np.array([-2e5, 7e4, 2e4])
    state = solved(section, *force)
    for column, step in enumerate((1e2, 1e1, 1e1)):
        more, less = force.copy(), force.copy()
        more[column] += step
        less[column] -= step
        slope = (solved(section, *more).plane - solved(section, *less).plane)[:, 0] / (2.0 * step)
        flexible = np.linalg.inv(state.matrix[0])[:, column]
        # the border of the cracked region moves with the square of the step: 1e-4 of the force each
        assert slope == pytest.approx(flexible, rel=1e-5, abs=1e-6 * np.abs(flexible).max())


def test_far_bars_do_not_matter_for_the_datum() -> None:
    """Moving section and reference line together changes nothing."""
    near, far = reinforced(), moved(reinforced(), 0.05, -0.1)
    N, M = -1e5, 8e4
    one = solved(near, N, M).plane[:, 0]
    # moments about the same line of the section
    other = solved(far, N, M + N * 0.1, -N * 0.05).plane[:, 0]
    assert other[1:] == pytest.approx(one[1:], rel=CLOSED, abs=1e-15)
    assert other[0] - other[1] * -0.1 == pytest.approx(one[0], rel=CLOSED)


def test_uncracked_under_enough_compression() -> None:
    """Compressed everywhere it is the elastic section."""
    section = reinforced()
    plain = solve_section(section, E_RC, np.zeros(3, dtype=bool), FreePlanes.none(3, 1), line(-2e6, 5e4, 0.0))
    assert solved(section, -2e6, 5e4).plane == pytest.approx(plain.plane, rel=1e-13)


def test_what_no_tension_cannot_carry() -> None:
    """Without bars nothing is carried in tension or beyond the edge; the largest moment is N times the way there."""
    section, E = Composition((box(0.3, 0.5),)), np.array([[5e9]])
    forces = np.array([[1e3, 0.0, -1e5, -1e5], [0.0, 1e3, 0.26e5, 0.2e5], [0.0] * 4])
    state = solve_section(
        at_stations(section, np.zeros(4, dtype=np.intp)),
        np.repeat(E, 4, axis=1),
        np.array([True]),
        FreePlanes.none(1, 4),
        forces,
    )
    assert state.carried.tolist() == [False, False, False, True]
    assert np.isnan(state.plane[:, :3]).all()
    skew = np.array([[-1e5], [1e4], [1e4]])
    assert largest_shares(section, forces[:, 2:3]) == pytest.approx([0.25 / 0.26], rel=1e-12)
    assert largest_shares(section, forces[:, :1]) == [0.0]
    assert largest_shares(section, skew) == pytest.approx([0.15 / 0.1], rel=1e-12)
    round_one = Composition((disc(0.4),))
    assert largest_shares(round_one, skew) == pytest.approx([0.2 / math.hypot(0.1, 0.1)], rel=1e-12)


def test_shrinkage_alone_leaves_no_force() -> None:
    """Concrete that shrinks on its bars: no force in all, bars in compression, and it may open nowhere or somewhere."""
    section = reinforced()
    free = FreePlanes(np.array([[-3e-4], [0.0], [0.0]]), np.zeros((3, 1)), np.zeros((3, 1)))
    e0, k, _ = solved(section, 0.0, 0.0, free=free).plane[:, 0]
    # concrete in tension everywhere carries nothing: nothing holds the bars
    assert max(abs(e0), abs(k)) <= 3e-4
    assert solved(section, 0.0, 0.0, free=free).converged.all()


def test_flanges_and_fillets() -> None:
    """A rolled shape by its moments above a level inside its web, against the tee that remains."""
    d = {k: v * ONE for k, v in dict(depth=0.4, web=0.01, radius=0.02).items()}
    d |= {k: v * ONE for k, v in dict(top_width=0.2, bottom_width=0.2, top_flange=0.015, bottom_flange=0.015).items()}
    found = clipped_outline(i_shape(d), line(0.05, -1.0, 0.0))[:, 0]
    t = tee({"depth": 0.15 * ONE, "width": 0.2 * ONE, "web": 0.01 * ONE, "flange": 0.015 * ONE, "radius": 0.02 * ONE})
    expected = raw_moments(Composition((t.moved(0.0, 0.125),)).moments)[:, 0, 0]
    assert found == pytest.approx(expected, abs=EXACT)
