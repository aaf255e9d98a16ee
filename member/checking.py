"""The check of a member's description: every problem is found in one go."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import TYPE_CHECKING

from fishbelly.member.checking_cuts import cut_problems
from fishbelly.member.checking_effective import effective_problems
from fishbelly.member.checking_joints import joint_problems
from fishbelly.member.checking_loads import load_problems
from fishbelly.member.checking_materials import material_problems
from fishbelly.member.checking_parts import part_problems
from fishbelly.member.checking_questions import question_problems
from fishbelly.member.checking_shapes import shape_problems
from fishbelly.member.checking_stages import stage_problems
from fishbelly.member.checking_supports import support_problems
from fishbelly.member.draft import (
    Draft,
    Problem,
    draft_of,
    infinite_numbers,
    repeated_names,
    unknown_names,
)
from fishbelly.sections.effective_inertia import RULES

if TYPE_CHECKING:
    from fishbelly.member.description import Member

__all__ = ["DescriptionError", "Draft", "Problem", "check", "problems"]


class DescriptionError(ValueError):
    """A description that cannot be a member.

    Attributes
    ----------
    problems : tuple of Problem
        At least one.
    """

    def __init__(self, problems: tuple[Problem, ...]) -> None:
        super().__init__(problems)
        self.problems = problems

    def __str__(self) -> str:
        return "\n".join(str(problem) for problem in self.problems)


def check(member: Member) -> None:
    """Check a member.

    Parameters
    ----------
    member : Member
        The description.

    Raises
    ------
    DescriptionError
        With every problem found.
    """
    found = problems(draft_of(member))
    if found:
        raise DescriptionError(tuple(found))


def problems(draft: Draft) -> list[Problem]:
    """Return every problem of a member, or of as much of one as could be read.

    Parameters
    ----------
    draft : Draft
        What is known.

    Returns
    -------
    list of Problem
        One for each path at most.
    """
    first = list(infinite_numbers(draft))
    if first:
        return first
    found: dict[tuple[str | int, ...], Problem] = {}
    for problem in _all(draft):
        found.setdefault(problem.path, problem)
    return list(found.values())


def _all(draft: Draft) -> Iterator[Problem]:
    if draft.length is not None and draft.length <= 0.0:
        yield Problem(("length",), "a length above 0 m", f"{draft.length:g} m")
        return
    if abs(draft.rises) > 0.5 * math.pi * (1.0 + 1e-12):
        yield Problem(("rises",), "an angle from -90 to 90 deg", f"{math.degrees(draft.rises):g} deg")
    if draft.tension_stiffening is not None and draft.tension_stiffening not in RULES:
        yield Problem(("tension_stiffening",), f"one of {', '.join(RULES)}", repr(draft.tension_stiffening))
    if draft.cracks not in ("history", "by combination"):
        yield Problem(("cracks",), '"history" or "by combination"', repr(draft.cracks))
    if not draft.parts:
        yield Problem(("part",), "at least one part", "")
    elif all(p is not None and p.cuts for p in draft.parts):
        yield Problem(("part",), "at least one part that is not a cut", "")
    for step in (
        unknown_names,
        repeated_names,
        part_problems,
        joint_problems,
        effective_problems,
        shape_problems,
        cut_problems,
        support_problems,
        load_problems,
        stage_problems,
        question_problems,
        material_problems,
    ):
        yield from step(draft)
