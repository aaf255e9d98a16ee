"""What works in each stage of a member's life: parts, supports, hinges, and the cases that arrive."""

from __future__ import annotations

from dataclasses import dataclass

from fishbelly.member.description import Hinge, Member, Part, Support
from fishbelly.member.questions import Stage


@dataclass(frozen=True)
class StageView:
    """One stage of a member.

    Parameters
    ----------
    index : int
        Its number in order of time, from 0.
    stage : Stage or None
        Its description; None for a member without stages.
    parts : frozenset of int
        Numbers of the parts that work, those that cut counted.
    gone : frozenset of str
        Names of the supports that do not hold: not there yet, or taken away.
    hinges : tuple of float
        Places of the hinges that are open [m].
    cases : frozenset of str
        Load cases that arrive in it.
    """

    index: int
    stage: Stage | None
    parts: frozenset[int]
    gone: frozenset[str]
    hinges: tuple[float, ...]
    cases: frozenset[str]

    @property
    def name(self) -> str:
        """Name of the stage; "all" where the member has none."""
        return "all" if self.stage is None else self.stage.name


def stage_views(member: Member) -> tuple[StageView, ...]:
    """Return the stages of a member in order of time; one that holds everything where it has none."""
    if not member.stages:
        everything = frozenset(range(len(member.parts)))
        hinges = tuple(h.at for h in member.hinges)
        return (StageView(0, None, everything, frozenset(), hinges, frozenset(member.cases)),)
    number = {s.name: k for k, s in enumerate(member.stages)}

    def there(thing: Part | Support | Hinge, k: int) -> bool:
        first = 0 if thing.stage is None else number[thing.stage]
        last = len(number) if thing.until is None else number[thing.until]
        return first <= k < last

    return tuple(
        StageView(
            k,
            stage,
            frozenset(i for i, p in enumerate(member.parts) if there(p, k) and p.name not in member.left_out),
            frozenset(s.name for s in member.supports if not there(s, k)),
            tuple(h.at for h in member.hinges if there(h, k)),
            frozenset(stage.cases),
        )
        for k, stage in enumerate(member.stages)
    )


def stage_number(member: Member, name: str | None) -> int:
    """Number of a stage by name; the last one where none is given.

    Raises
    ------
    KeyError
        When there is no such stage.
    """
    if name is None:
        return max(len(member.stages) - 1, 0)
    names = [s.name for s in member.stages] or ["all"]
    if name not in names:
        raise KeyError(f"expected one of the stages {', '.join(names)}, got {name!r}")
    return names.index(name)
