"""Joints that slip in a member's life: creep of joints in closed form, limits of stiffness, props, what is refused."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from common import INF, fixed, pin, roller
from slip_histories import FEW, SOFT, L, pair_of_layers, staged
from slip_members import JOIST, SLAB, composite

from fishbelly.member.analysis import Analysis
from fishbelly.member.description import Hinge, Joined, Material, Member
from fishbelly.member.extremes import values_at
from fishbelly.member.faults import CannotCompute
from fishbelly.member.moduli import has_band
from fishbelly.member.questions import Stage
from fishbelly.member.slip_forces import LayeredForces
from fishbelly.member.slip_layers import layers_of

EXACT = 1e-10
"""Relative, of the largest value of its kind."""
Q, H = 1e3, 0.1
EI = 150e3
C = 1 / 60e6 + 1 / 180e6 + H**2 / EI
"""Strain difference of slab and joist by unit force in the joint [1/N]."""
IDLE = Material("idle", 1e9, G=1e9, creep=0.0)
"""A material of no part: a stage in which it creeps lets joints creep that have a factor of their own."""


def sag(member: Member, x: float, upto: int | None = None) -> float:
    analysis = Analysis.of(member)
    total = analysis.combine(member.combinations[0], upto=upto).total
    return float(values_at(analysis.profile.panels, total.deflection[0], np.array([x]))[0])


def creeping(phi: float, chi: float, k: float = 5e7) -> Member:
    """Loaded at once; then the joint alone creeps."""
    stages = (Stage("load", ("load",)), Stage("wait", (), creep={"idle": 1.0}, ageing=chi))
    member = composite(L, k, parts=pair_of_layers(Joined(per_length=k, creep=phi)))
    return replace(member, materials=(SLAB, JOIST, IDLE), stages=stages)


@pytest.mark.parametrize("phi, chi", [(2.0, 1.0), (0.8, 0.6), (3.0, 0.8)])
def test_a_joint_that_creeps_by_itself(phi: float, chi: float) -> None:
    """G'' = k' (C G - phi/k G0''), k' = k / (1 + chi phi), from G0'' = (h/EI/C) q (1 - cosh / cosh) of the load."""
    k = 5e7
    member = creeping(phi, chi)
    ka = k / (1.0 + chi * phi)
    omega, slow = np.sqrt(k * C), np.sqrt(ka * C)

    def near(w: float, x: np.ndarray) -> np.ndarray:
        return np.cosh(w * (x - 0.5 * L)) / np.cosh(0.5 * w * L)

    # G0'' = -(beta) q (1 - near(omega)), beta = -h / (EI C) against sagging moments
    R = ka * phi / k * (-H / (EI * C)) * Q
    A = -R / (omega**2 - slow**2)
    B = R / slow**2 - A

    def G(x: np.ndarray) -> np.ndarray:
        return -R / slow**2 + A * near(omega, x) + B * near(slow, x)

    # deflection at midspan: unit load, by Gauss points
    s, weight = np.polynomial.legendre.leggauss(60)
    x = 0.25 * L * (1.0 + s)
    more = 2.0 * float((H * G(x) / EI * x / 2 * 0.25 * L * weight).sum())
    assert abs(more) > 1e-5
    assert sag(member, 0.5 * L) - sag(member, 0.5 * L, 0) == pytest.approx(more, rel=1e-9)


def test_everything_creeps_alike() -> None:
    """A member that stands freely and creeps by one factor everywhere, joint too, only deflects more by it."""
    phi = 1.7
    stages = (Stage("load", ("load",)), Stage("wait", (), creep={"slab": phi, "joist": phi}, ageing=0.8))
    for joined in (Joined(per_length=5e7, creep=phi), replace(FEW, creep=phi)):
        member = composite(L, 0.0, parts=pair_of_layers(joined), stages=stages)
        for x in (0.7, 2.0):
            # ageing 0.8: nothing is held back, so that it does not matter
            assert sag(member, x) == pytest.approx((1.0 + phi) * sag(member, x, 0), rel=EXACT)


def test_single_fasteners_creep_as_the_joint_they_make() -> None:
    """Forty fasteners one by one, made so stiff that the pitch matters, against the joint smeared: one part in 100."""
    few = Joined(stiffness=4e6, pitch=0.1, creep=2.0)
    smeared = Joined(per_length=4e7, creep=2.0)
    more = []
    for joined in (few, replace(few, stiffness=4.0001e6), smeared):
        member = replace(creeping(0.0, 1.0), parts=pair_of_layers(joined))
        more.append(sag(member, 2.0) - sag(member, 2.0, 0))
    assert more[0] == pytest.approx(more[2], rel=1e-2)
    apart = replace(creeping(0.0, 1.0), parts=pair_of_layers(replace(FEW, creep=2.0)))
    assert sag(apart, 2.0) - sag(apart, 2.0, 0) > 1e-4


def history(joined: Joined | None) -> Member:
    return staged(joined) if joined is not None else replace(staged(SOFT), parts=pair_of_layers(None, stage="two"))  # type: ignore[arg-type]


def test_towards_a_rigid_joint() -> None:
    """The difference from a rigid joint falls as one over the stiffness, in every stage."""
    rigid = history(None)
    for stage in range(4):
        exact = sag(rigid, 2.0, stage)
        away = [abs(sag(history(Joined(per_length=k)), 2.0, stage) - exact) for k in (1e9, 1e10, 1e11)]
        if stage == 0:
            assert max(away) < EXACT * exact
            continue
        assert away[1] < 0.2 * away[0] and away[2] < 0.2 * away[1]
        assert away[2] < 1e-3 * exact


def test_towards_no_joint() -> None:
    """The difference from parts that are apart falls as the stiffness."""
    apart = history(Joined(apart=True))
    for stage in (1, 2, 3):
        exact = sag(apart, 2.0, stage)
        away = [abs(sag(history(Joined(per_length=k)), 2.0, stage) - exact) for k in (1e4, 1e3, 1e2)]
        assert away[1] == pytest.approx(0.1 * away[0], rel=0.05)
        assert away[2] == pytest.approx(0.1 * away[1], rel=0.05)


@pytest.mark.parametrize("joined", [SOFT, FEW, Joined(apart=True)])
def test_a_prop_struck_leaves_the_member_as_if_it_had_never_stood(joined: Joined) -> None:
    """Loaded on the prop, which is struck: nothing creeps, so that all is as loaded without it."""
    stages = (Stage("on the prop", ("load",)), Stage("struck", ()))
    parts = pair_of_layers(joined)
    props = (pin("A", 0.0), roller("P", 1.5, until="struck"), roller("B", L))
    propped = composite(L, 0.0, parts=parts, stages=stages, supports=props)
    never = composite(L, 0.0, parts=parts)
    for x in (0.6, 1.5, 2.9):
        assert sag(propped, x) == pytest.approx(sag(never, x), rel=EXACT)
    assert abs(sag(propped, 1.5, 0)) < EXACT * sag(never, 1.5)


def test_a_slab_that_goes_leaves_the_joist_as_if_it_had_never_stood() -> None:
    parts = pair_of_layers(SOFT)
    stages = (Stage("with slab", ("load",)), Stage("without", ()))
    member = composite(L, 0.0, parts=(parts[0], replace(parts[1], until="without")), stages=stages)
    alone = composite(L, 0.0, parts=parts[:1])
    assert sag(member, 2.0) == pytest.approx(sag(alone, 2.0), rel=EXACT)


def test_every_step_acts_layer_by_layer() -> None:
    """Release, creep and loads all hand the law forces by layer, stacked as they are."""
    member = staged(SOFT, supports=(pin("A", 0.0), roller("P", 2.0, until="three"), roller("B", L)))
    analysis = Analysis.of(member)
    steps = analysis.history(analysis.shares(member.combinations[0])[0].key)
    assert [s.what for s in steps] == ["loads", "loads", "release", "creep", "loads", "loads"]
    assert all(s.layered is not None for s in steps)
    setting = analysis.setting(2, analysis.shares(member.combinations[0])[0].key, frozenset(), False)
    free = analysis._free(setting, range(len(analysis.atoms)))
    assert all(isinstance(f, LayeredForces) for f in free)
    assert isinstance(setting.held([], (2, *analysis.profile.panels.x.shape)), LayeredForces)


def test_forces_of_the_layers_balance_in_every_stage() -> None:
    """Without thrust the axial forces of all layers add to nothing, whatever has crept and gone."""
    from fishbelly.member.carried import part_force
    from fishbelly.member.part_forces import loadings

    member = staged(SOFT)
    analysis = Analysis.of(member)
    loading = loadings(analysis, analysis.combine(member.combinations[0]))
    forces = [part_force(loading, i).N for i in range(len(layers_of(member).parts))]  # type: ignore[union-attr]
    assert np.abs(sum(forces)).max() < EXACT * np.abs(forces[0]).max()


def test_a_support_that_holds_slip_cannot_go() -> None:
    supports = (fixed("A", 0.0, along=INF), fixed("B", L, until="four"))
    with pytest.raises(CannotCompute, match="B holds the slip of all layers and goes in stage four"):
        sag(staged(SOFT, supports=supports), 2.0)
    free = (supports[0], replace(supports[1], slip_free=True))
    assert sag(staged(SOFT, supports=free), 2.0) > 0.0


def test_a_hinge_cannot_open_later() -> None:
    supports = (fixed("A", 0.0, along=INF), fixed("B", L))
    with pytest.raises(CannotCompute, match=r"a hinge opens in stage two at x = 1\.5 m"):
        sag(staged(SOFT, supports=supports, hinges=(Hinge(1.5, "h", stage="two"),)), 2.0)


def test_a_band_of_a_joint_counts() -> None:
    parts = pair_of_layers(Joined(per_length=5e7, band=(2e7, 9e7)))
    member = composite(L, 0.0, parts=parts)
    assert has_band(member) and not has_band(composite(L, 5e7))
    analysis = Analysis.of(member)
    for band, k in (("low", 2e7), ("high", 9e7)):
        total = analysis.combine(member.combinations[0], band).total
        found = float(values_at(analysis.profile.panels, total.deflection[0], np.array([2.0]))[0])
        assert found == pytest.approx(sag(composite(L, k), 2.0), rel=EXACT)
