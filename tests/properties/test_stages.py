"""What must hold for any member in stages: stress that is locked in is in equilibrium with the forces everywhere."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from common import ROUND_OFF
from hypothesis import given, settings
from hypothesis import strategies as st
from members import MATERIALS, SPAN, loads, part_lists, support_lists

from fishbelly.member.analysis import Analysis
from fishbelly.member.cross_check import second_of
from fishbelly.member.description import Member, Stage
from fishbelly.member.extremes import values_at
from fishbelly.member.history_forces import resultant
from fishbelly.member.part_forces import loadings, stress_planes


@st.composite
def staged_members(draw: st.DrawFn) -> Member:
    """A random member whose later parts join, or go, between its loads; timber and concrete creep in between."""
    supports, hinges = draw(support_lists())
    parts = draw(part_lists(3))
    when = draw(st.sampled_from([{"stage": "later"}, {"until": "later"}, {"stage": "slow", "until": "later"}]))
    parts = (parts[0], *(replace(p, **when) for p in parts[1:]))
    acting = tuple(draw(loads(case=case)) for case in ("early", "late"))
    creep = {"timber": draw(st.sampled_from([0.0, 0.6])), "concrete": draw(st.sampled_from([0.0, 2.0]))}
    stages = (
        Stage("first", ("early",)),
        Stage("slow", creep=creep, ageing=draw(st.sampled_from([0.8, 1.0]))),
        Stage("later", ("late",)),
    )
    return Member(
        SPAN, parts, MATERIALS, supports=supports, hinges=hinges, loads=acting, stages=stages, shear=draw(st.booleans())
    )


@settings(max_examples=5, deadline=None)
@given(staged_members())
def test_stresses_of_all_parts_add_up_to_the_forces_and_both_methods_agree(member: Member) -> None:
    analysis = Analysis.of(member)
    for stage in range(3):
        combined = analysis.combine(member.combinations[0], upto=stage)
        loading = loadings(analysis, combined)
        end = loading[0].end
        N, M = 0.0, 0.0
        for part in loading[0].parts:
            planes = stress_planes(loading, part)
            assert planes is not None
            f = resultant(planes.sum(axis=0)[:, None], end.profile.part_moments(part, end.line))
            N, M = N + f.N[0], M + f.M[:, 0]
        total = combined.total
        reach = float(np.sqrt(np.mean(end.profile.stiffness(end.profile.short).EI_y)))
        reach /= float(np.sqrt(np.mean(end.profile.stiffness(end.profile.short).EA)))
        size = max(float(np.abs(total.M).max()), float(np.abs(total.N).max()) * reach, 1.0)
        assert np.abs(M[0] - total.M[0]).max() < ROUND_OFF * size
        assert np.abs(N - total.N).max() * reach < ROUND_OFF * size
    x = np.linspace(0.1, SPAN - 0.1, 5)
    first = values_at(analysis.profile.panels, combined.total.deflection, x)
    second = second_of(analysis, combined, x)
    size = float(np.abs(combined.total.deflection).max()) + analysis.round_off(combined.total) / ROUND_OFF
    assert np.abs(first - second.deflection).max() < max(1e-7, 10.0 * second.error) * size
