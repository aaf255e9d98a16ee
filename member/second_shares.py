"""Second method, stages: loads that go through the stages together, and on which moduli."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace

from fishbelly.member.description import Member, Support
from fishbelly.member.loads import Load, Shrinkage
from fishbelly.member.second_sections import Slide

Own = tuple[tuple[str, float], ...]


@dataclass(frozen=True)
class ModuliOf:
    """Which moduli: of a stage, long-term or not, with own creep factors of parts; "aged", "softened" or neither.

    `parts`: of a section of these alone, those of the stage where none are given.
    """

    stage: int
    long_term: bool = False
    own: Own = ()
    aged: str = ""
    parts: frozenset[int] | None = None


@dataclass(frozen=True, eq=False)
class StagedShare:
    """Loads that go through the stages together.

    Parameters
    ----------
    factors : mapping of str to float
        Factor of each case; a case not named has factor 0.
    band : {"nominal", "low", "high"}
        Which end of each material's band.
    long_term : bool
        A sustained share: on long-term moduli in every stage; its stress does not creep again.
    own : tuple of (str, float)
        Creep factors of single parts that replace the material's, for a sustained share.
    only : callable, optional
        Asked for every load and every support that sinks: whether it belongs to this share.
    slide : callable, optional
        1/GA for moduli in a stage; without it shear is left out.
    """

    factors: Mapping[str, float]
    band: str = "nominal"
    long_term: bool = False
    own: Own = ()
    only: Callable[[Load | Support], bool] | None = None
    slide: Callable[[ModuliOf], Slide] | None = None


def split(member: Member, shares: Sequence[StagedShare]) -> list[StagedShare]:
    """Give shrinkage that brings a creep factor of its own into a long-term stage a share of its own."""
    slow = {case for s in member.stages if s.long_term for case in s.cases}
    owns = dict.fromkeys(own for load in member.loads if load.case in slow and (own := _own_creep(load)) is not None)
    found: list[StagedShare] = []
    for share in shares:
        if share.long_term or not owns:
            found.append(share)
            continue
        found.append(replace(share, only=_having(share, None, slow)))
        found += [replace(share, own=(own,), only=_having(share, own, slow)) for own in owns]
    return found


def _own_creep(load: Load | Support) -> tuple[str, float] | None:
    return (load.part, load.creep) if isinstance(load, Shrinkage) and load.creep is not None else None


def _having(share: StagedShare, own: tuple[str, float] | None, slow: set[str]) -> Callable[[Load | Support], bool]:
    """Tell which loads bring an own creep factor into one of the slow cases; those that bring none where it is None."""

    def belongs(load: Load | Support) -> bool:
        mine = _own_creep(load) if load.case in slow else None
        return mine == own and (share.only is None or share.only(load))

    return belongs
