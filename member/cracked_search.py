"""The search for the state of a cracking member in which cracks, forces and stiffness agree, in one stage.

Places where cracks begin are roots along x at which the grid gets borders; a state is found when they no longer move.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, Combined
from fishbelly.member.cracked_found import Convergence, CrackedResponse
from fishbelly.member.cracked_grid import CLOSE, split
from fishbelly.member.cracked_law import LawState
from fishbelly.member.cracked_phases import Phases, Solved
from fishbelly.member.cracked_places import Search, Stretches, inside, joined, kinks, openings, own_stretches
from fishbelly.member.cracked_record import on_grid
from fishbelly.member.cracked_solve import CLOSED, radius
from fishbelly.member.faults import CannotCompute, NoStiffness
from fishbelly.member.forces import Forces
from fishbelly.member.panels import POINTS
from fishbelly.member.response import Response
from fishbelly.sections.chebyshev import rule

Array = NDArray[np.float64]
Mask = NDArray[np.bool_]

MOST_SEARCHES = 40
SETTLED = 1e-10
"""Change of the ends of cracked stretches, as a share of the member's length, at which they count as found."""
RESOLVED = 1e-10
"""Last Chebyshev coefficients of strains against the largest strain of the member."""
MOST_HALVINGS = 5
STUCK = 6
"""After so many searches the grid gets finer though cracks still move: on a coarse one they may never settle."""


@dataclass(eq=False)
class Run:
    """The search in one stage of one combination, from the end of the stage before.

    Parameters
    ----------
    base : Analysis
        Grid from which it starts.
    combined : Combined
        The combination.
    rule : str or None
        Rule of tension stiffening.
    held : tuple of (float, float)
        Stretches that are cracked already [m].
    everywhere : bool
        Every place counts as cracked.
    stage : int
        Number of the stage.
    before : CrackedResponse, optional
        The end of the stage before.
    """

    base: Analysis
    combined: Combined
    rule: str | None
    held: Stretches
    everywhere: bool
    stage: int = 0
    before: CrackedResponse | None = None

    def go(self) -> CrackedResponse:
        """Find cracks and forces that agree."""
        phases, solved = self._start(self.base)
        own, ends = self._own(self.base, solved)
        cracked = joined([*own, *self.held], CLOSE * self.base.member.length)
        if not cracked and not phases.never:
            return self._finished(self.base, solved if self.staged else (), (), (), 0, 0, "closed")
        self._plain(solved)
        search, extra, halved, rounds, status = Search(), list[float](), 0, 0, "closed"
        borders = np.array(sorted([*ends, *openings(self.base.profile.panels, solved)]))
        gap = 0.0 if not borders.size else np.inf
        for count in range(1, MOST_SEARCHES + 1):
            places = [*borders.tolist(), *(x for pair in cracked for x in pair), *extra]
            analysis = split(self.base, [*places, *self._kinks(solved, cracked)])
            # as long as cracks still move by much, forces need not close to the last digit
            rough = max(CLOSED, min(1e-3 * gap / self.base.member.length, 1e-6))
            solved = self._solve(analysis, cracked, solved, rough)
            rounds += sum(s.closed.rounds for s in solved)
            if count == 1 and all(s.closed.rounds == 1 for s in solved):
                # forces follow from statics alone: what cannot be carried now cannot later
                self._carried(solved)
            own, ends = self._own(analysis, solved)
            found = np.array(sorted([*ends, *openings(analysis.profile.panels, solved)]))
            same = found.size == borders.size
            gap = float(np.abs(found - borders).max(initial=0.0)) if same else np.inf
            settled = gap <= SETTLED * self.base.member.length
            if settled or count % STUCK == 0:
                more = self._unresolved(analysis, solved) if halved < MOST_HALVINGS else []
                if settled and not more:
                    return self._finished(analysis, solved, cracked, own, rounds, count, status)
                halved += settled
                extra += more
                # on a finer grid places answer anew
                search = Search() if more else search
            if count > MOST_SEARCHES // 2:
                # no state agrees with itself: what has cracked on the way stays cracked
                status = "cracks held"
                cracked = joined([*cracked, *own], CLOSE * self.base.member.length)
                borders = found
            else:
                borders = search.next(borders, found) if same and borders.size else found
                cracked = self._moved(own, found, borders)
        worst = max(solved, key=lambda s: s.closed.residual)
        raise CannotCompute(
            f"cracks of combination {self._named} did not settle in {MOST_SEARCHES} searches: "
            f"they still move by {gap:.3g} m, forces by {worst.closed.residual:.1e} at x = {worst.closed.at:.6g} m"
        )

    def _plain(self, solved: Sequence[Solved]) -> None:
        """See that no part that cracks has inclined flanges that count by their share of E."""
        law = solved[-1].law
        part = law.sections.inclined(law.never | frozenset(law.cracking))
        if part is not None:
            name = self.base.member.parts[part].name
            raise CannotCompute(
                f"{name} cracks and has inclined flanges that count along their slope: these two are not built "
                'together; inclined = "cut" counts them as a vertical cut shows them'
            )

    def _moved(self, own: Stretches, found: Array, borders: Array) -> Stretches:
        """Stretches with their ends where the search goes next, and those that are held."""
        places = dict(zip(found.tolist(), borders.tolist(), strict=True)) if found.size == borders.size else {}
        moved = [(places.get(a, a), places.get(b, b)) for a, b in own]
        return joined([*moved, *self.held], CLOSE * self.base.member.length)

    @property
    def staged(self) -> bool:
        """Whether the member has several stages, so that each has to leave a record."""
        return len(self.base.views) > 1

    def _phases(self, analysis: Analysis) -> Phases:
        inherited = None if self.before is None else self.before.record
        c = self.combined
        return Phases(analysis, c.shares, c.lifted, self.rule, stage=self.stage, inherited=inherited)

    def _start(self, analysis: Analysis) -> tuple[Phases, tuple[Solved, ...]]:
        """State under the forces that the uncracked member adds, with the cracks there are."""
        phases = self._phases(analysis)
        starts: list[tuple[Forces, LawState | None]] = [(f, None) for f in phases.uncracked()]
        if phases.never or self.before is not None:
            known = () if self.before is None else self.held
            return phases, self._guarded(phases, inside(analysis.profile.panels, known), starts)
        # without cracks every event closes in one round
        return phases, phases.solve(np.zeros(analysis.profile.panels.x.shape, dtype=bool), starts)

    def _guarded(
        self, phases: Phases, mask: Mask, starts: list[tuple[Forces, LawState | None]], closed: float = CLOSED
    ) -> tuple[Solved, ...]:
        with np.errstate(all="ignore"):
            return phases.solve(mask, starts, self.everywhere, closed)

    def _solve(
        self, analysis: Analysis, cracked: Stretches, near: Sequence[Solved], closed: float
    ) -> tuple[Solved, ...]:
        phases = self._phases(analysis)
        mask = inside(analysis.profile.panels, cracked)
        starts: list[tuple[Forces, LawState | None]] = [(carried_over(analysis, s), None) for s in near]
        return self._guarded(phases, mask, starts, closed)

    def _own(self, analysis: Analysis, solved: Sequence[Solved]) -> tuple[Stretches, list[float]]:
        if self.everywhere:
            return (), []
        rule = solved[-1].law.stiffening
        return own_stretches(analysis.profile.panels, solved, 1.0 if rule is None else rule.level)

    def _kinks(self, solved: Sequence[Solved], cracked: Stretches) -> list[float]:
        panels, rule = solved[-1].law.sections.frame.profile.panels, solved[-1].law.stiffening
        # a panel that is cracked in part counts: its borders follow
        mask = np.array([any(a < y and b > x for a, b in cracked) for x, y in zip(panels.a, panels.b, strict=True)])
        where = np.broadcast_to(mask[:, None], panels.x.shape)
        # other loads, or a later event, may have cracked what one event does not
        fresh = not self.held and len(solved) == 1
        found = kinks(panels, solved, where, None if fresh or rule is None else rule.starts_at)
        if solved[-1].law.never:
            return found
        return [x for x in found if any(a < x < b for a, b in cracked)]

    def _unresolved(self, analysis: Analysis, solved: Sequence[Solved]) -> list[float]:
        """Middles, and quarters, of panels in which strains need more points."""
        panels = analysis.profile.panels
        found: list[float] = []
        to = rule(POINTS).to_coefficients
        reach = np.array([1.0, *(2 * [radius(analysis)])])[:, None, None]
        wide = (panels.b - panels.a > 1e-4 * analysis.member.length) & (np.abs(panels.anchor) < 2)
        for s in solved:
            strains = s.closed.state.plane * reach
            largest = float(np.abs(strains).max())
            ends = np.abs(strains @ to.T)[:, :, -3:].max(axis=(0, 2))
            if largest > 0.0 and np.all(np.isfinite(ends)):
                bad = np.flatnonzero((ends > RESOLVED * largest) & wide)
                # three digits and more away, a half would not be enough
                far = bad[ends[bad] > 1e3 * RESOLVED * largest]
                found += (0.5 * (panels.a + panels.b)[bad]).tolist()
                found += [float(x) for t in (0.25, 0.75) for x in ((1.0 - t) * panels.a + t * panels.b)[far]]
        return found

    def _finished(
        self,
        analysis: Analysis,
        solved: tuple[Solved, ...],
        cracked: Stretches,
        own: Stretches,
        rounds: int,
        count: int,
        status: str,
    ) -> CrackedResponse:
        more = {"rule": self.rule, "stage": self.stage, "before": self.before}
        if not solved:
            done = Convergence("closed", 0, 0, 0.0, 0.0)
            return CrackedResponse(analysis, self.combined, (), (), (), done, **more)  # type: ignore[arg-type]
        self._judge(solved)
        worst = max(solved, key=lambda s: s.closed.residual)
        total = solved[-1].closed.response
        self._bears(total)
        done = Convergence(status, rounds, count, worst.closed.residual, worst.closed.at)
        mine = replace(self.combined, total=total)
        return CrackedResponse(analysis, mine, solved, cracked, own, done, **more)  # type: ignore[arg-type]

    @property
    def _named(self) -> str:
        """Combination, and stage where there are several."""
        view = self.base.views[self.stage]
        name = self.combined.combination.name
        return name if view.stage is None else f"{name}, in stage {view.name}"

    def _judge(self, solved: Sequence[Solved]) -> None:
        """See that every section carries its forces and that equilibrium has closed."""
        self._carried(solved)
        for s in solved:
            state, panels = s.closed.state, s.law.sections.frame.profile.panels
            if not state.converged.all():
                k = int(np.argmin(state.converged))
                raise CannotCompute(
                    f"the cracked section at x = {panels.x.flat[k]:.6g} m did not close in combination {self._named}"
                )
            if s.closed.residual > 1e3 * CLOSED:
                raise CannotCompute(
                    f"the cracked member did not come into equilibrium in {s.closed.rounds} rounds in combination "
                    f"{self._named}: forces still change by {s.closed.residual:.1e} of the largest "
                    f"at x = {s.closed.at:.6g} m"
                )

    def _carried(self, solved: Sequence[Solved]) -> None:
        for s in solved:
            if not s.closed.state.carried.all():
                raise _cannot_carry(s, self._named)

    def _bears(self, total: Response) -> None:
        """See that bearings that cannot pull bear or lift as they did without cracks."""
        down = total.reactions[:, 0]
        size = float(np.abs(down).max(initial=0.0))
        for k, s in enumerate(self.base.member.supports):
            if s.only_up and s.name not in self.combined.lifted and down[k] > 1e-9 * size:
                raise CannotCompute(
                    f"{s.name} would lift off once cracks have opened: bearings that lift off are not built "
                    "together with parts that crack"
                )


def carried_over(analysis: Analysis, solved: Solved) -> Forces:
    """Forces of a solved phase on another grid."""
    old, new = solved.law.sections.frame.profile.panels, analysis.profile.panels
    r = solved.closed.response
    if old is new:
        return Forces(r.N, r.V, r.M)
    values = on_grid(old, new, np.stack((r.N, *r.V, *r.M)))
    return Forces(values[0], values[1:3], values[3:5])


def _cannot_carry(solved: Solved, name: str) -> NoStiffness:
    """Tell where a section cannot carry its forces, and what it can."""
    state, sections = solved.closed.state, solved.law.sections
    r, panels = solved.closed.response, sections.frame.profile.panels
    forces = Forces(r.N, r.V, r.M)
    moment = r.M[0] + r.N * sections.frame.centre[0]
    shares = sections.shares_carried(~state.carried, forces)
    # of places that carry alike the one with the largest moment
    most = np.where(shares <= shares.min() + 1e-9, np.abs(moment), -1.0)
    k, j = (int(v) for v in np.unravel_index(int(np.argmax(most)), shares.shape))
    share = float(shares[k, j])
    return NoStiffness(
        float(panels.x[k, j]),
        f"without tension the section cannot carry M = {moment[k, j]:.6g} N m with N = {r.N[k, j]:.6g} N in "
        f"combination {name}; it can carry {share * moment[k, j]:.6g} N m at that axial force",
    )
