"""Events in the life of a cracking member: what is released, what creeps, what arrives, and how each was solved."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Share
from fishbelly.member.cracked_law import CrackedLaw
from fishbelly.member.cracked_record import Record
from fishbelly.member.cracked_solve import Closed
from fishbelly.member.moduli import Moduli
from fishbelly.member.staging import Setting

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Event:
    """One thing that happens at once.

    Parameters
    ----------
    what : {"release", "creep", "loads"}
        What happens.
    share : Share
        Set of moduli to which it belongs, and factors of the atoms of the whole combination on it.
    setting : Setting
        The stage on that set.
    """

    what: str
    share: Share
    setting: Setting

    @property
    def moduli(self) -> Moduli:
        """Moduli it acts on."""
        aged = self.setting.aged
        return aged if self.what == "creep" and aged is not None else self.setting.moduli

    @property
    def slide(self) -> Array:
        """Shear flexibility, that of the uncracked section, shape (3, K, n)."""
        return self.setting.law(self.moduli, "aged" if self.what == "creep" else "now").slide

    @property
    def creeps(self) -> bool:
        """Whether the stress that it leaves creeps in later stages."""
        return self.what == "creep" or not self.setting.lasting


@dataclass(frozen=True, eq=False)
class Solved:
    """An event in equilibrium with its law, and all so far after it."""

    event: Event
    law: CrackedLaw
    closed: Closed
    after: Record

    def fibres(self) -> dict[int, Array]:
        """Tension over the stress at which it cracks at the fibres of each part that cracks, (C, K, n) by part."""
        return self.law.fibres(self.closed.state.uncracked.plane)
