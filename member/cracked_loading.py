"""What the parts of a cracked member carry, in the form in which everything that tells of parts takes it.

Between cracks the strains are (1 - zeta) times those of state I and zeta times those of state II, and so are the
forces of the parts: these are means over the distance of cracks. At a crack itself it is state II that counts.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.cracked_events import Solved
from fishbelly.member.cracked_found import CrackedResponse
from fishbelly.member.forces import Forces
from fishbelly.member.history_forces import resultant
from fishbelly.member.part_forces import Loading
from fishbelly.member.pieces import Pieces
from fishbelly.member.response import Response
from fishbelly.member.staging import Step

Array = NDArray[np.float64]


def cracked_loading(r: CrackedResponse) -> tuple[Loading, ...]:
    """Loading of a combination on a member that cracks, at the end of a stage: all loads so far as one.

    Its planes and forces of parts are means over the distance of cracks.
    """
    solved = r.phases[-1]
    law = solved.law
    parts = sorted({i for g in r.frame.profile.groups for i in g.placed.index})
    planes = {i: mean_stress(solved, i)[None] for i in parts}
    brittle = law.never | frozenset(law.cracking)
    forces = {i: _forces(solved, i) for i in parts if i in brittle}
    response = stacked(r.total)
    step = Step(r.stage, "loads", response, law.moduli, r.frame, {}, False)
    factors = np.asarray(sum(s.factors for s in r.combined.shares))[None]
    return (Loading(response, law.moduli, factors, step, r.frame, planes, forces),)


def stacked(r: Response) -> Response:
    """Response with an axis of one piece."""
    single = ("N", "axial", "reactions")
    fields = {f: getattr(r, f) for f in Response.__dataclass_fields__}
    return Response(**{f: v[None] if f in single else v[:, None] for f, v in fields.items()})


def pieces_of(r: CrackedResponse, total: Response) -> Pieces:
    """Fields of a response on the grid of a cracked one; it has no pattern loads."""
    frame, t = r.frame, stacked(total)
    M, N = t.M[0], t.N
    return Pieces(
        N, t.V[0], M + N * frame.centre[0], M - N * frame.line[0], t.rotation, t.shear, t.deflection, t.reactions
    )


def stress_at_crack(solved: Solved, part: int) -> Array:
    """Stress of a part as a plane (3, K, n), in state II where the member is cracked; tension is not cut off."""
    law, state = solved.law, solved.closed.state
    second = np.where(np.isfinite(state.cracked.plane), state.cracked.plane, 0.0)
    return np.where(law.mask, law.stress(part, second, 1), law.stress(part, state.uncracked.plane, 0))


def mean_stress(solved: Solved, part: int) -> Array:
    """Stress of a part as a plane (3, K, n), mean over the distance of cracks; tension is not cut off."""
    zeta = solved.closed.state.zeta
    law, state = solved.law, solved.closed.state
    first = law.stress(part, state.uncracked.plane, 0)
    second = np.where(np.isfinite(state.cracked.plane), state.cracked.plane, 0.0)
    return np.asarray(np.where(law.mask, (1.0 - zeta) * first + zeta * law.stress(part, second, 1), first))


def _forces(solved: Solved, part: int) -> Forces:
    """Forces of a part that cracks or carries no tension, mean over the distance of cracks, fields (1, K, n)."""
    law, state = solved.law, solved.closed.state
    profile, line = law.sections.frame.profile, law.sections.frame.line
    first = law.stress(part, state.uncracked.plane, 0)
    whole = law.sections.pressed(part, first) if part in law.never else profile.part_moments(part, line)
    one = resultant(first[:, None], whole)
    second = np.where(law.mask, np.where(np.isfinite(state.cracked.plane), state.cracked.plane, 0.0), 0.0)
    pressed = law.stress(part, second, 1)
    two = resultant(pressed[:, None], law.sections.pressed(part, pressed))
    share = np.where(law.mask, state.zeta, 0.0)
    return Forces((1.0 - share) * one.N + share * two.N, one.V, (1.0 - share) * one.M + share * two.M)
