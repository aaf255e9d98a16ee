"""Layers and joints, the grid they ask for, slip and fastener forces, the gamma-method and its conditions."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from common import INF, fixed, pin, roller, uniform
from slip_members import JOIST, SLAB, Run, composite, over, piece

from fishbelly.member.description import Hinge, Joined, Member, Placing
from fishbelly.member.gamma_method import gamma_method, gamma_spans
from fishbelly.member.laws import straight
from fishbelly.member.slip_grid import RATE, fading, joint_fading, pitch_matters, slip_borders
from fishbelly.member.slip_layers import has_soft_joints, joint_creep, joint_stiffness, layers_of
from fishbelly.member.slip_results import joint_slips, layer_strains, part_strain

L = 4.0
EXACT = 1e-10


def nailed(k: float, pitch: float, **more: object) -> Joined:
    return Joined(stiffness=k, pitch=pitch, **more)


def stack(joined: Joined, **more: object) -> tuple[object, ...]:
    return (
        piece("joist", "joist", 0.05, 0.15, 0.0, L),
        piece("slab", "slab", 0.3, 0.05, 0.0, L, place=Placing("over", "joist"), joined=joined, **more),
    )


def tree() -> Member:
    """Two straps slip on the joist, a lath sits rigidly on one of them and a plate slips on the lath."""
    rigid = Placing("over", "slab")
    parts = (
        *stack(Joined(per_length=1e7)),
        piece("lath", "joist", 0.05, 0.02, 0.0, L, place=rigid),
        piece("plate", "slab", 0.05, 0.01, 1.0, 3.0, **over("lath", 2e7)),
        piece("strap", "slab", 0.05, 0.01, 0.0, L, place=Placing("under", "joist"), joined=Joined(per_length=3e7)),
        piece("rider", "joist", 0.05, 0.01, 0.0, L, place=Placing("under", "strap"), joined=Joined(pitch=0.1)),
    )
    return composite(L, 1.0, parts=parts)


def test_layers_of_a_tree() -> None:
    """Fastened without a stiffness is rigid; every soft joint begins a layer."""
    layers = layers_of(tree())
    assert layers.parts == ((0,), (1, 2), (3,), (4, 5))
    assert [(j.layer, j.on, j.part, j.host) for j in layers.joints] == [(1, 0, 1, 0), (2, 1, 3, 2), (3, 0, 4, 0)]
    assert layers.beyond.tolist() == [[0, 1, 1, 0], [0, 0, 1, 0], [0, 0, 0, 1]]
    assert [layers.of(k) for k in range(6)] == [0, 1, 1, 2, 3, 3]
    assert has_soft_joints(tree())
    assert not has_soft_joints(composite(L, 1.0, parts=stack(Joined(pitch=0.1))))


@pytest.mark.parametrize(
    ("joined", "pair", "expected"),
    [
        (nailed(1e6, 0.2), False, 5e6),
        (nailed(1e6, 0.2, rows=2), False, 10e6),
        (nailed(1e6, 0.2, rows=2), True, 20e6),
        (Joined(per_length=4e7), False, 4e7),
        (Joined(apart=True), False, 0.0),
    ],
)
def test_stiffness_per_length(joined: Joined, pair: bool, expected: float) -> None:
    parts = stack(joined)
    if pair:
        side = Placing("right_of", "joist")
        parts = (parts[0], replace(parts[1], pair=True, place=side))
    layers = layers_of(composite(L, 1.0, parts=parts))
    assert joint_stiffness(layers).tolist() == [pytest.approx(expected, rel=1e-14)]


def test_band_of_a_joint() -> None:
    layers = layers_of(composite(L, 1.0, parts=stack(nailed(1e6, 0.2, band=(5e5, 3e6)))))
    assert [float(joint_stiffness(layers, b)[0]) for b in ("low", "nominal", "high")] == pytest.approx(
        [2.5e6, 5e6, 15e6]
    )


@pytest.mark.parametrize(
    ("first", "second", "given", "expected"),
    [
        (0.6, 0.6, None, 1.2),
        (0.6, 2.4, None, 2.4),
        (0.6, None, None, 0.6),
        (None, 2.0, None, 2.0),
        (None, None, None, 0.0),
        (0.6, 0.6, 0.3, 0.3),
    ],
)
def test_creep_of_a_joint(first: float | None, second: float | None, given: float | None, expected: float) -> None:
    """2 phi of two alike, 2 sqrt(phi1 phi2) of two unlike, phi where only one creeps."""
    member = composite(L, 1.0, parts=stack(nailed(1e6, 0.2, creep=given)))
    member = replace(member, materials=(replace(SLAB, creep=second), replace(JOIST, creep=first)))
    layers = layers_of(member)
    assert joint_creep(member, layers.joints[0]) == pytest.approx(expected, rel=1e-14)
    assert float(joint_stiffness(layers, long_term=True)[0]) == pytest.approx(5e6 / (1.0 + expected), rel=1e-14)


def test_creep_of_single_parts_goes_into_the_joint() -> None:
    layers = layers_of(composite(L, 1.0, parts=stack(nailed(1e6, 0.2))))
    assert joint_creep(layers.member, layers.joints[0], {"slab": 0.6}) == pytest.approx(1.2)


def test_fasteners_stand_half_a_space_from_the_ends() -> None:
    (joint,) = layers_of(composite(L, 1.0, parts=stack(nailed(1e6, 0.9)))).joints
    assert joint.places() == pytest.approx([0.5, 1.5, 2.5, 3.5])


def test_grid_resolves_the_fading() -> None:
    """No panel longer than RATE / omega, or than its distance from where it may begin."""
    for k in (1e4, 5e7, 5e9, 5e13):
        run = Run(composite(L, k))
        h, omega = run.panels.b - run.panels.a, float(fading(run.law)[0])
        near = np.minimum(run.panels.a, L - run.panels.b)
        assert np.all(h <= np.maximum(RATE / omega, 1.01 * near) * (1 + 1e-9))
        assert run.panels.count < 60
        # cutting every panel once more changes nothing
        assert slip_borders(run.law, np.zeros(run.panels.count)) == ()
    assert joint_fading(run.law, run.k)[0] == pytest.approx(omega, rel=1e-12)


def test_when_the_pitch_matters() -> None:
    near, far = (Run(composite(L, 1.0, parts=stack(nailed(5e7 * p, p)))) for p in (0.05, 0.5))
    assert pitch_matters(near.law, near.k).tolist() == [False]
    assert pitch_matters(far.law, far.k).tolist() == [True]


@pytest.mark.parametrize("pair", [False, True])
def test_force_per_fastener(pair: bool) -> None:
    """Flow times pitch over the fasteners side by side; largest at the ends, where slip is."""
    joined = nailed(2e6, 0.1, rows=2)
    parts = stack(joined)
    if pair:
        parts = (parts[0], piece("slab", "slab", 0.02, 0.1, 0.0, L, place=Placing("right_of", "joist"), pair=True))
        parts = (parts[0], replace(parts[1], joined=joined, place=Placing("right_of", "joist", flush="top")))
    run = Run(composite(L, 1.0, parts=parts))
    _, s = run.respond()
    (joint,) = joint_slips(run.law, s)
    assert (joint.part, joint.to, joint.start, joint.end) == ("slab", "joist", 0.0, L)
    assert joint.most_force is not None and joint.per_fastener is not None
    per_slip = joint.most_force.value / joint.slip[0]
    assert per_slip == pytest.approx(2e6, rel=EXACT)
    assert joint.most_force.at == pytest.approx(0.0, abs=1e-9)
    assert joint.slip[0] == pytest.approx(-joint.slip[1], rel=1e-9)
    assert joint.most_slip.value == pytest.approx(joint.slip[0], rel=EXACT)
    count = 4 if pair else 2
    assert joint.most_flow.value * 0.1 / count == pytest.approx(joint.most_force.value, rel=1e-12)


def test_single_fasteners_in_the_results() -> None:
    run = Run(composite(L, 1.0, parts=stack(nailed(2e6, 0.5, rows=2))), discrete=True)
    _, s = run.respond()
    (joint,) = joint_slips(run.law, s)
    assert [x for x, _ in joint.single] == pytest.approx(np.arange(0.25, 4.0, 0.5))
    assert joint.most_force is not None
    assert joint.most_force.value == pytest.approx(joint.single[0][1])
    slip = float(run.value(s.slip, 0.25)[0])
    assert joint.single[0][1] == pytest.approx(2e6 * slip, rel=EXACT)


def test_strains_of_parts() -> None:
    """Strain of a part is its layer's; stress over the part adds up to the layer's force."""
    run = Run(composite(L, 5e7))
    r, s = run.respond()
    again = layer_strains(run.law, r)
    assert np.array_equal(again.layer_axial, s.layer_axial)
    for part in (0, 1):
        plane = part_strain(run.law, again, part)
        moments = run.frame.profile.part_moments(part, run.frame.line)
        E = run.frame.short.E[part]
        force = E * (plane[0] * moments[0] + plane[1] * moments[1] + plane[2] * moments[2])
        assert np.abs(force - s.layer_force[part]).max() < EXACT * np.abs(force).max()


def test_gamma_of_three_parts() -> None:
    """A sine-shaped moment: equilibrium of the slip in every joint, solved as a linear system."""
    EA, EI, levels = [40e6, 60e6, 25e6], [3e4, 1e5, 2e4], [0.12, 0.0, -0.15]
    k, l = [3e7, 0.0, 8e6], 5.0
    found = gamma_method(EA, EI, levels, k, l, middle=1)
    own, p = sum(EI), np.pi / l
    # unknown: forces in the outer parts under a unit moment times sine
    arm = np.array([levels[0] - levels[1], levels[2] - levels[1]])
    C = np.diag([1 / EA[0], 1 / EA[2]]) + 1 / EA[1] + np.outer(arm, arm) / own
    G = np.linalg.solve(C + p**2 * np.diag([1 / k[0], 1 / k[2]]), -arm / own)
    assert own / (1.0 + arm @ G) == pytest.approx(found.EI, rel=1e-12)
    assert found.n == 3
    assert found.gamma[1] == 1.0
    # flow in a joint for V = p cos: force's slope
    assert [found.flow[0], found.flow[2]] == pytest.approx(np.abs(G).tolist(), rel=1e-12)
    with pytest.raises(ValueError, match="expected two or three parts, got 4"):
        gamma_method([1.0] * 4, [1.0] * 4, [0.0] * 4, [1.0] * 4, 1.0)


def test_gamma_takes_the_length_of_the_code() -> None:
    """0.8 of a span of a continuous beam, twice an overhang."""
    supports = (pin("A", 1.0), roller("B", 3.0), roller("C", L))
    spans = gamma_spans(Run(composite(L, 5e7, supports=supports)).law)
    assert [s.result.length for s in spans if s.result] == pytest.approx([2.0, 1.6, 0.8])
    assert [s.span.label for s in spans] == ["left", 1, 2]
    (simple,) = gamma_spans(Run(composite(L, 5e7)).law)
    assert simple.result is not None and simple.result.length == L


@pytest.mark.parametrize(("depth", "end"), [(straight([0.0, L], [0.15, 0.1]), L), (0.15, 3.0)])
def test_gamma_where_its_conditions_do_not_hold(depth: object, end: float) -> None:
    """A joist that tapers; a slab that ends within the span."""
    parts = (
        piece("joist", "joist", 0.05, depth, 0.0, L),
        piece("slab", "slab", 0.3, 0.05, 0.0, end, **over("joist", 5e7)),
    )
    (span,) = gamma_spans(Run(composite(L, 1.0, parts=parts)).law)
    assert span.result is None
    assert span.reason == "the section changes between 0 m and 4 m"
    assert 0.0 < span.apart < span.rigid


def test_gamma_of_spans_that_do_not_turn_freely() -> None:
    held = (fixed("A", 0.0, along=INF), roller("B", 3.0))
    spans = gamma_spans(Run(composite(L, 5e7, supports=held)).law)
    assert [s.reason for s in spans] == ["a support holds the rotation at 0 m", ""]
    (cantilever,) = gamma_spans(Run(composite(L, 5e7, supports=held[:1])).law)
    assert cantilever.result is not None and cantilever.result.length == 2 * L
    hinged = (pin("A", 0.0), roller("B", 2.0), roller("C", L))
    spans = gamma_spans(Run(composite(L, 5e7, supports=hinged, hinges=(Hinge(2.5),))).law)
    assert [s.reason for s in spans] == ["", "there is a hinge between 2 m and 4 m"]


def test_gamma_of_too_many_parts() -> None:
    parts = [piece("p0", "joist", 0.05, 0.1, 0.0, L)]
    parts += [piece(f"p{i}", "slab", 0.05, 0.05, 0.0, L, **over(f"p{i - 1}", 1e7)) for i in (1, 2, 3)]
    (span,) = gamma_spans(Run(composite(L, 1.0, parts=tuple(parts))).law)
    assert span.result is None
    assert "there are 4 parts that slip on each other between 0 m and 4 m" in span.reason


def test_shear_angle_of_layers() -> None:
    """With shear: GA = (sum EI)² / sum(EI² / GA) of the layers, and the same bending."""
    with_shear, without = (Run(composite(L, 5e7, shear=s)) for s in (True, False))
    (r, _), (r2, _) = with_shear.respond(), without.respond()
    GA = [5 / 6 * 0.5e9 * 0.05 * 0.15, 5 / 6 * 5e9 * 0.3 * 0.05]
    EI = [112500.0, 37500.0]
    whole = sum(EI) ** 2 / sum(e**2 / g for e, g in zip(EI, GA, strict=True))
    gap = float(with_shear.value(r.deflection[0], 2.0)) - float(without.value(r2.deflection[0], 2.0))
    # GA is by finite elements: 1e-5 is what they promise
    assert gap == pytest.approx(1000.0 * L**2 / 8 / whole, rel=1e-5)
    flat = with_shear.law.without_shear()
    assert np.abs(flat.sections.slide).max() == 0.0


def test_slip_held_at_one_end_only() -> None:
    """`slip_free` is asked of the support that holds rotation alone; a pin never holds slip."""
    run = Run(composite(L, 5e7, supports=(fixed("A", 0.0, along=INF), fixed("B", L, slip_free=True))))
    _, s = run.respond()
    size = np.abs(s.slip).max()
    assert abs(float(run.value(s.slip, 0.0)[0])) < EXACT * size
    assert abs(float(run.value(s.slip, L)[0])) > 0.01 * size
    assert abs(float(run.value(s.joint_force, L)[0])) < EXACT * np.abs(s.joint_force).max()


def test_fixed_support_between_the_ends() -> None:
    """It parts the member: a load on one side bends and slips nothing on the other."""
    supports = (pin("A", 0.0), fixed("B", 2.0), roller("C", L))
    run = Run(composite(L, 5e7, supports=supports, loads=(uniform(1e3, 2.0),)))
    r, s = run.respond()
    right = run.panels.a >= 2.0 - 1e-9
    assert np.abs(r.deflection[0][right]).max() < EXACT * np.abs(r.deflection[0]).max()
    assert np.abs(s.joint_force[0][right]).max() < EXACT * np.abs(s.joint_force).max()
    assert abs(float(run.value(s.slip, 2.0, "left")[0])) < EXACT * np.abs(s.slip).max()
