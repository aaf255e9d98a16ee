"""Cracked members in stages: the second method follows the sections' lives, parts carry what sections have to."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from cracked_beams import everything
from cracked_lives import lives

from fishbelly.member import cracked_check as cracked_check_module
from fishbelly.member import cracked_phases, cracked_strip_life
from fishbelly.member.analysis import Analysis
from fishbelly.member.cracked_check import beyond, cracked_check
from fishbelly.member.cracked_loading import cracked_loading
from fishbelly.member.cracked_response import cracked_response
from fishbelly.member.description import Combination
from fishbelly.member.faults import CannotCompute
from fishbelly.member.part_forces import resultants
from fishbelly.member.results import deflect

EN = "EN 1992-1-1"
TWICE = 1e-9
"""Relative; the two methods share no quadrature, each is resolved to 1e-10."""


@pytest.mark.parametrize("rule", [None, EN])
@pytest.mark.parametrize("name", lives())
def test_second_method_follows_the_life_of_the_sections(name: str, rule: str | None) -> None:
    member = lives()[name]
    r = cracked_response(Analysis.of(member), everything(member), rule)
    assert r.cracks
    check = cracked_check(r)
    assert check is not None and check["difference"] < TWICE
    assert check["equilibrium"] < 1e-12


@pytest.mark.parametrize("name", lives())
def test_parts_carry_what_the_section_has_to(name: str) -> None:
    """Forces of all parts, bars, plates and what is left of the concrete, add up to N and M everywhere."""
    member = lives()[name]
    r = cracked_response(Analysis.of(member), everything(member), EN)
    for end in r.life:
        loading = cracked_loading(end)
        found = [f for i in loading[0].parts if (f := resultants(loading, i)) is not None]
        M, N = sum(f.M[0, 0] for f in found), sum(f.N[0] for f in found)
        size = np.abs(end.total.M[0]).max()
        assert np.abs(M - end.total.M[0]).max() < 1e-9 * size
        assert np.abs(N - end.total.N).max() < 1e-8 * size / 0.4


def test_second_method_says_where_it_does_not_reach() -> None:
    lasting = Combination("all", {"g": 1.0, "q": 1.0}, {"g": 0.7, "q": 0.3})
    member = replace(lives()["bars that go"], combinations=(lasting,), tension_stiffening=EN)
    r = cracked_response(Analysis.of(member), everything(member), EN)
    assert beyond(r) == "what parts that go have carried is partly of loads that last"
    result = deflect(member)
    assert result["combinations"][0]["cross_check"] is None
    assert any("second method does not reach" in note.text for note in result["notes"])


FAULTS = {
    "creep forgotten": (cracked_phases.Phases, "_crept", lambda self, record, event, state: {}),
    "parts born with stress": (cracked_phases.Phases, "_same", lambda self, record, event, state: {}),
}


@pytest.mark.parametrize("name", FAULTS)
def test_planted_faults_are_caught(name: str, monkeypatch: pytest.MonkeyPatch) -> None:
    """A fault in what the first method hands on makes the two disagree."""
    # these faults are gross: stretches need not be halved as often as it takes to tell small ones from rounding
    monkeypatch.setattr(cracked_check_module, "MOST_HALVINGS", 1)
    monkeypatch.setattr(*FAULTS[name])
    member = lives()["creep runs off"]
    with pytest.raises(CannotCompute, match="the second method gives"):
        cracked_check(cracked_response(Analysis.of(member), everything(member), EN))
    monkeypatch.undo()
    monkeypatch.setattr(cracked_check_module, "MOST_HALVINGS", 1)
    monkeypatch.setattr(cracked_strip_life, "_less", lambda one, other: (0.0, 0.0))
    with pytest.raises(CannotCompute, match="the second method gives"):
        cracked_check(cracked_response(Analysis.of(member), everything(member), EN))
