"""What was found for one combination on a member that cracks, at the end of a stage."""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property

from fishbelly.member.actions import Frame
from fishbelly.member.analysis import Analysis, Combined
from fishbelly.member.cracked_events import Solved
from fishbelly.member.cracked_law import LawState
from fishbelly.member.cracked_places import Stretches
from fishbelly.member.cracked_record import Record
from fishbelly.member.response import Response


@dataclass(frozen=True)
class Convergence:
    """How equilibrium closed.

    Parameters
    ----------
    status : {"closed", "cracks held", "not closed"}
        "cracks held": cracks that opened on the way were kept, because no state without them agreed with itself.
    rounds : int
        Linear solutions in all.
    searches : int
        How often the places of cracks were found anew.
    residual : float
        Change of the forces in the last round against the largest.
    at : float
        Where that change is largest [m].
    """

    status: str
    rounds: int
    searches: int
    residual: float
    at: float


@dataclass(frozen=True, eq=False)
class CrackedResponse:
    """One combination on a member that cracks.

    Parameters
    ----------
    analysis : Analysis
        On a grid with borders where cracks begin.
    combined : Combined
        The combination, with the cracked response as its total.
    phases : tuple of Solved
        What happens in the stage, event by event, with the law; empty where nothing cracks in a member of one stage.
    stretches : tuple of (float, float)
        Where it counts as cracked [m].
    own : tuple of (float, float)
        Where this combination cracks it by itself [m].
    convergence : Convergence
        How it closed.
    rule : str or None
        Rule of tension stiffening.
    stage : int
        Number of the stage at whose end it is.
    before : CrackedResponse, optional
        The same combination at the end of the stage before.
    """

    analysis: Analysis
    combined: Combined
    phases: tuple[Solved, ...]
    stretches: Stretches
    own: Stretches
    convergence: Convergence
    rule: str | None = None
    stage: int = 0
    before: CrackedResponse | None = None
    _bent: list[tuple[Solved, ...]] = field(default_factory=list, repr=False)

    @property
    def total(self) -> Response:
        """The response."""
        return self.combined.total

    @property
    def frame(self) -> Frame:
        """The grid with the parts of the stage."""
        return self.analysis.frames[self.stage]

    @cached_property
    def uncracked(self) -> Response:
        """The linear response, on the same grid."""
        combined = self.combined
        return self.analysis.combine(combined.combination, combined.shares[0].key.band, combined.upto).total

    @property
    def state(self) -> LawState | None:
        """Sections in the last event; None where nothing cracks."""
        return self.phases[-1].closed.state if self.phases else None

    @property
    def record(self) -> Record | None:
        """What is left behind for the next stage."""
        return self.phases[-1].after if self.phases else None

    @property
    def cracks(self) -> bool:
        """Whether anything has cracked so far, or carries no tension."""
        own = bool(self.stretches) or any(s.law.never for s in self.phases)
        return own or (self.before is not None and self.before.cracks)

    def at(self, stage: int) -> CrackedResponse:
        """Return the same combination at the end of a stage, this or an earlier one."""
        if stage >= self.stage or self.before is None:
            return self
        return self.before.at(stage)

    @property
    def life(self) -> tuple[CrackedResponse, ...]:
        """Ends of all stages so far."""
        return (self,) if self.before is None else (*self.before.life, self)
