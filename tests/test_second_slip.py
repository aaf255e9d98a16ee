"""The second method for parts that slip: it repeats the first, says how good it is, and shows faults planted in it."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest
from slip_histories import MEMBERS, SOFT, L, staged
from slip_members import composite

from fishbelly.member import second_slip_grid, slip_law, slip_setting, slip_tie
from fishbelly.member.analysis import Analysis
from fishbelly.member.cross_check import second_of
from fishbelly.member.description import Member
from fishbelly.member.extremes import values_at
from fishbelly.member.faults import CannotCompute
from fishbelly.member.results import deflect
from fishbelly.member.second_method import SecondResult

AGREES = 1e-10
"""Of the largest deflection; both are good to about 1e-13 with joints of any usual stiffness."""
SHOWS = 1e-6
"""A fault in the first method moves the deflection by at least this share."""
X = np.linspace(0.0, L, 21)


def compared(member: Member, upto: int | None = None) -> tuple[float, SecondResult, Analysis, Any]:
    """Largest difference of the deflections, both planes, over the largest deflection."""
    analysis = Analysis.of(member)
    combined = analysis.combine(member.combinations[0], upto=upto)
    second = second_of(analysis, combined, X)
    first = np.stack([values_at(analysis.profile.panels, w, X) for w in combined.total.deflection])
    size = np.abs(first).max()
    return float(np.abs(first - second.deflection).max() / size), second, analysis, combined


@pytest.mark.parametrize("make", MEMBERS.values(), ids=MEMBERS.keys())
def test_repeats_the_first_method(make: Callable[[], Member]) -> None:
    member = make()
    for upto in [None, *range(len(member.stages))][: 2 + len(member.stages)]:
        difference, second, _, combined = compared(member, upto)
        assert difference < AGREES
        assert difference < second.error
        size = np.abs(combined.total.reactions).max()
        assert np.abs(combined.total.reactions - second.reactions).max() < AGREES * size


@pytest.mark.parametrize("k", [1e9, 1e11, 1e13])
def test_a_joint_as_good_as_rigid_costs_digits_and_is_owned_up_to(k: float) -> None:
    difference, second, _, _ = compared(composite(L, k))
    assert difference < 1e-7
    assert difference <= 2.0 * second.error


def test_an_unresolved_solution_says_so(monkeypatch: pytest.MonkeyPatch) -> None:
    good = compared(composite(L, 5e9))[1].error
    monkeypatch.setattr(second_slip_grid, "FADES", 1e3)
    difference, second, _, _ = compared(composite(L, 5e9))
    assert difference > 1e-9 and second.error > 1e2 * good
    assert difference < second.error


def test_is_in_every_run() -> None:
    checked = deflect(staged(SOFT))["combinations"][0]["cross_check"]
    assert "displacements of all layers" in checked["method"]
    assert checked["difference"] < AGREES


def _caught(member: Member) -> None:
    assert compared(member)[0] > SHOWS
    with pytest.raises(CannotCompute, match="the second method gives"):
        deflect(member)


def test_a_wrong_stiffness_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    right = slip_setting.tied

    def wrong(*args: Any) -> Any:
        tie, law = right(*args)
        tie.stiffness["now"][...] *= 1.001
        return tie, law

    monkeypatch.setattr("fishbelly.member.analysis.tied", wrong)
    _caught(composite(L, 5e7))


def test_a_wrong_strain_difference_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    right = slip_law.strain_differences
    monkeypatch.setattr(slip_law, "strain_differences", lambda *args: 1.001 * right(*args))
    _caught(composite(L, 5e7))


def test_joints_that_forget_to_creep_are_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(slip_tie.Tie, "crept", lambda self, held, locked: held)
    _caught(staged(SOFT))


def test_free_strain_in_the_wrong_layer_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    right = slip_tie.layered_free_forces

    def wrong(*args: Any) -> Any:
        forces = right(*args)
        return type(forces)(forces.N, forces.V, forces.M, forces.layers[::-1].copy())

    monkeypatch.setattr(slip_tie, "layered_free_forces", wrong)
    _caught(MEMBERS["free strain"]())
