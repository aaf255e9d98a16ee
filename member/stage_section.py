"""The member as its cross-sections are in one stage: the parts that work, and the moduli in force."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from fishbelly.member.description import Member
from fishbelly.member.geometry import Geometry
from fishbelly.member.moduli import Moduli, moduli, modulus
from fishbelly.member.stage_view import StageView, stage_number, stage_views


@dataclass(frozen=True, eq=False)
class StageSection:
    """Geometry and moduli of a member in one stage.

    Parameters
    ----------
    member : Member
        The description.
    view : StageView
        The stage; what holds everything where the member has none.
    """

    member: Member
    view: StageView

    @property
    def long_term(self) -> bool:
        """Whether the loads of the stage act on moduli divided by 1 + creep."""
        return self.view.stage is not None and self.view.stage.long_term

    @cached_property
    def geometry(self) -> Geometry:
        """Where the parts stand, those that do not work in the stage left out."""
        return Geometry(self.member, None if self.view.stage is None else self.view.parts)

    @cached_property
    def moduli(self) -> Moduli:
        """E and G that the loads of the stage act on [Pa]: long-term ones in a stage that is `long_term`."""
        return moduli(self.member, long_term=self.long_term, stage=self.view.stage)

    def modulus(self, material: str) -> float:
        """E of a material in the stage [Pa]."""
        return modulus(self.member.material(material), self.long_term, self.view.stage)


def in_stage(member: Member, stage: str | None = None) -> StageSection:
    """Return the member as its cross-sections are in a stage.

    Parameters
    ----------
    member : Member
        The description.
    stage : str, optional
        Name of the stage; default the last.

    Raises
    ------
    KeyError
        When there is no such stage.
    """
    return StageSection(member, stage_views(member)[stage_number(member, stage)])
