"""The road without a file: solve a member, ask for its profile and for responses that add, scale and envelope."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fishbelly.member.analysis import Analysis, ModuliKey
from fishbelly.member.apex import judge
from fishbelly.member.cracking import may_crack
from fishbelly.member.description import Combination, Member
from fishbelly.member.extremes import largest, values_at
from fishbelly.member.faults import NotLinear
from fishbelly.member.panels import Panels
from fishbelly.member.response import Response
from fishbelly.member.section_results import COLUMNS, profile_at
from fishbelly.member.stage_view import stage_number

Array = NDArray[np.float64]

QUANTITIES = ("deflection", "across", "rotation", "slope", "moment", "shear", "axial")
"""What a result can be asked for: m, m, rad, rad, N m, N, N, with the signs of the job file's contract."""


@dataclass(frozen=True, eq=False)
class Result:
    """Response of a member to one case or combination.

    Results of a linear member add, subtract and scale; those of one that cracks, or in which bearings may lift off, do
    not, and say so.

    Parameters
    ----------
    analysis : Analysis
        The solved member.
    response : Response
        Fields at the grid points.
    linear : bool
        Whether results of this member add.
    stage : int
        Number of the stage at whose end it is; below 0 the last.
    """

    analysis: Analysis
    response: Response
    linear: bool = True
    stage: int = -1

    def __add__(self, other: Result) -> Result:
        """Superpose two results of one solved member."""
        self._must_be_linear()
        other._must_be_linear()
        if other.analysis is not self.analysis:
            raise ValueError("expected results of one solved member, got results of two")
        if other.stage != self.stage:
            raise ValueError("expected results at the end of one stage, got results at the end of two")
        return Result(self.analysis, self.response + other.response, stage=self.stage)

    def __mul__(self, factor: float) -> Result:
        """Scale a result."""
        self._must_be_linear()
        return Result(self.analysis, self.response * float(factor), stage=self.stage)

    __rmul__ = __mul__

    def __neg__(self) -> Result:
        """Turn a result round."""
        return self * -1.0

    def __sub__(self, other: Result) -> Result:
        """Take another result off."""
        return self + other * -1.0

    def _must_be_linear(self) -> None:
        if not self.linear:
            why = "parts crack" if may_crack(self.analysis.member) else "bearings that cannot pull may lift off"
            raise NotLinear(f"{why}: results do not add; solve them as one combination")

    def field(self, quantity: str) -> Array:
        """Values at the grid points, shape (K, n), of one of `QUANTITIES`."""
        r = self.response
        fields = {
            "deflection": r.deflection[0],
            "across": r.deflection[1],
            "rotation": r.rotation[0],
            "slope": r.slope[0],
            "moment": r.M[0] + r.N * self.analysis.frames[self.stage].centre[0],
            "shear": r.V[0],
            "axial": r.N,
        }
        if quantity not in fields:
            raise KeyError(f"expected one of {', '.join(QUANTITIES)}, got {quantity!r}")
        return fields[quantity]

    def at(self, quantity: str, x: ArrayLike, side: str = "right") -> Array:
        """Values of a quantity at places x [m]; where it jumps, on the side asked for."""
        places = np.atleast_1d(np.asarray(x, dtype=float))
        return values_at(self._panels, self.field(quantity), places, side).reshape(np.shape(x))

    def largest(self, quantity: str) -> tuple[float, float]:
        """Largest value of a quantity and its place [m]."""
        found = largest(self._panels, self.field(quantity))
        return found.value, found.at

    def smallest(self, quantity: str) -> tuple[float, float]:
        """Smallest value of a quantity and its place [m]."""
        found = largest(self._panels, -self.field(quantity))
        return -found.value, found.at

    @property
    def reactions(self) -> dict[str, float]:
        """Upward force of each support on the member [N]."""
        names = [s.name for s in self.analysis.member.supports]
        return dict(zip(names, (-self.response.reactions[:, 0] + 0.0).tolist(), strict=True))

    @property
    def _panels(self) -> Panels:
        return self.analysis.profile.panels


@dataclass(frozen=True, eq=False)
class Envelope:
    """Smallest and largest of several results at every place."""

    results: tuple[Result, ...]

    def at(self, quantity: str, x: ArrayLike, side: str = "right") -> tuple[Array, Array]:
        """Smallest and largest value of a quantity at places x [m]."""
        values = np.array([r.at(quantity, x, side) for r in self.results])
        return values.min(axis=0), values.max(axis=0)

    def largest(self, quantity: str) -> tuple[float, float]:
        """Largest value of a quantity over all results and its place [m]."""
        return max((r.largest(quantity) for r in self.results), key=lambda pair: pair[0])

    def smallest(self, quantity: str) -> tuple[float, float]:
        """Smallest value of a quantity over all results and its place [m]."""
        return min((r.smallest(quantity) for r in self.results), key=lambda pair: pair[0])


def envelope(results: Sequence[Result]) -> Envelope:
    """Envelope of results, at least one."""
    if not results:
        raise ValueError("expected at least one result, got none")
    return Envelope(tuple(results))


@dataclass(frozen=True, eq=False)
class Solved:
    """A member that can be asked."""

    analysis: Analysis

    def profile(self, x: ArrayLike, side: str = "right") -> dict[str, Array]:
        """EA, EI_y, EI_z, EI_yz, GA_z, z_c, y_c and mass per length at places x [m], SI units."""
        places = np.atleast_1d(np.asarray(x, dtype=float))
        length = self.analysis.member.length
        sides = ["left" if v >= length else side for v in places]
        table = profile_at(self.analysis.member, places, sides)
        return {name: row.reshape(np.shape(x)) for name, row in zip(COLUMNS, table, strict=True)}

    def case(self, name: str) -> Result:
        """Response to one load case, factor 1."""
        member = self.analysis.member
        if name not in member.cases:
            raise KeyError(f"expected one of the cases {', '.join(member.cases)}, got {name!r}")
        return self._result(Combination(name, {name: 1.0}))

    def combination(self, name: str, stage: str | None = None) -> Result:
        """Response to a combination of the description, lifting bearings and sustained shares counted.

        `stage`: name of the stage at whose end; default the last.
        """
        number = -1 if stage is None else stage_number(self.analysis.member, stage)
        for c in self.analysis.member.combinations:
            if c.name == name:
                return self._result(c, number if number < len(self.analysis.views) - 1 else -1)
        names = ", ".join(c.name for c in self.analysis.member.combinations)
        raise KeyError(f"expected one of the combinations {names}, got {name!r}")

    def _result(self, combination: Combination, stage: int = -1) -> Result:
        if may_crack(self.analysis.member):
            from fishbelly.member.cracked_response import cracks_followed

            if cracks_followed(self.analysis):
                return self._cracked(combination, stage)
        total = self.analysis.combine(combination, upto=None if stage < 0 else stage).total
        judge(self.analysis.profile.panels, total)
        linear = not any(s.only_up for s in self.analysis.member.supports)
        return Result(self.analysis, total, linear, stage)

    def _cracked(self, combination: Combination, stage: int) -> Result:
        """Response with cracks: those of the member's own combinations count where it keeps a history."""
        from fishbelly.member.cracked_results import chosen_response

        analysis, total = chosen_response(self.analysis, combination, None if stage < 0 else stage)
        judge(analysis.profile.panels, total)
        return Result(analysis, total, False, stage)


def solve(member: Member) -> Solved:
    """Solve a member.

    Parameters
    ----------
    member : Member
        The description, SI units.

    Returns
    -------
    Solved

    Raises
    ------
    CannotCompute
        When a stretch has no stiffness; mechanisms are found when a result is asked for.
    """
    solved = Solved(Analysis.of(member))
    _ = solved.analysis.responses(ModuliKey()) if member.loads else None
    return solved
