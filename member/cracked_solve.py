"""Equilibrium of a member whose sections crack: Newton's method on the tangent, the places of cracks held.

Every round is one linear solution: under forces F the law gives strains e and a tangent flexibility C, and strains
under other forces are about C (F' + R) with R = C⁻¹ e - F, which enters as forces of free strain do.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Actions, Atom
from fishbelly.member.analysis import Analysis
from fishbelly.member.cracked_law import LawState
from fishbelly.member.forces import Forces
from fishbelly.member.nodes import Layout
from fishbelly.member.response import Response, respond

Array = NDArray[np.float64]

MOST_ROUNDS = 60
CLOSED = 1e-11
"""Change of the forces in the last round against the largest of their kind: equilibrium has closed."""


class Law(Protocol):
    """Anything that gives strains and a tangent under forces."""

    def at(self, forces: Forces, near: LawState | None = None) -> LawState:
        """Return strains under forces."""
        ...


@dataclass(frozen=True, eq=False)
class Phase:
    """All loads so far, on one set of moduli.

    Parameters
    ----------
    loads : Actions
        Everything that acts, with its factors.
    settled : tuple of (str, float)
        Load cases of settlements at work with their factors.
    slide : ndarray, shape (3, K, n)
        Shear flexibility.
    slid : ndarray, shape (2, K, n)
        Shear angle that an earlier phase left, less what its shear forces would give on this one's moduli [rad].
    """

    loads: Actions
    settled: tuple[tuple[str, float], ...]
    slide: Array
    slid: Array


@dataclass(frozen=True, eq=False)
class Closed:
    """A solved phase: response without an axis of atoms, law there, rounds, residual and where it is largest."""

    response: Response
    state: LawState
    rounds: int
    residual: float
    at: float

    @property
    def ok(self) -> bool:
        """Whether equilibrium closed."""
        return self.residual <= CLOSED


def total_actions(loads: Sequence[Actions], factors: Array) -> Actions:
    """Sum what several atoms put on the grid, with factors; free strain left out."""
    names = ("q", "n", "m", "P", "F", "C")
    sums = {k: sum(f * getattr(a, k) for f, a in zip(factors, loads, strict=True)) for k in names}
    return Actions(**sums)


def close(
    analysis: Analysis,
    layout: Layout,
    law: Law,
    phase: Phase,
    forces: Forces,
    near: LawState | None = None,
    closed: float = CLOSED,
) -> Closed:
    """Bring one phase into equilibrium.

    Parameters
    ----------
    analysis, layout : Analysis, Layout
        Grid and supports at work.
    law : Law
        The section law.
    phase : Phase
        Loads.
    forces : Forces
        Forces near the ones looked for, such as those of the uncracked member.
    near : LawState, optional
        State of the law near the one looked for.
    closed : float
        Change of forces, against the largest, at which to stop.

    Returns
    -------
    Closed
        With the residual of the last round, which the caller judges.
    """
    state, rounds = near, 0
    change, at, best = np.inf, 0.0, np.inf
    response: Response | None = None
    damping = 1.0
    while rounds < MOST_ROUNDS:
        rounds += 1
        state = law.at(forces, state)
        response = _linear(analysis, layout, phase, state, forces)
        new = Forces(response.N, response.V, response.M)
        change, at = _change(analysis, forces, new)
        if change <= closed:
            break
        if change > 0.7 * best and rounds > 6:
            damping = max(0.5 * damping, 0.1)
        best = min(best, change)
        forces = forces.plus(new.plus(forces, -1.0), damping)
    assert response is not None and state is not None
    return Closed(response, state, rounds, change, at)


def _linear(analysis: Analysis, layout: Layout, phase: Phase, state: LawState, forces: Forces) -> Response:
    """Response on the tangent, what the tangent lacks entering as free strain."""
    panels = analysis.profile.panels
    tangent = state.tangent(panels, phase.slide)
    R = np.linalg.solve(state.flexibility, np.moveaxis(state.plane, 0, -1)[..., None])[..., 0]
    held = Forces(R[..., 0] - forces.N, _unslid(phase), np.stack((R[..., 1], R[..., 2])) - forces.M)
    atoms = [Atom(""), *(Atom(case) for case, _ in phase.settled)]
    nothing = total_actions([phase.loads], np.zeros(1))
    zero = Forces.none(forces.N.shape)
    loads = [phase.loads] + [nothing] * len(phase.settled)
    free = [held] + [zero] * len(phase.settled)
    found = respond(analysis.frame, layout, tangent, atoms, loads, free, analysis.planes)
    return found.combined(np.array([1.0, *(f for _, f in phase.settled)]))


def _unslid(phase: Phase) -> Array:
    """Shear forces that would give the shear angle left by an earlier phase."""
    own, other, both = phase.slide
    a, b = phase.slid
    if not np.any(phase.slid):
        return np.zeros_like(phase.slid)
    if not np.any(other):
        return np.stack((np.where(own > 0.0, a / np.where(own > 0.0, own, 1.0), 0.0), np.zeros_like(b)))
    det = own * other - both * both
    return np.stack(((other * a - both * b) / det, (own * b - both * a) / det))


def _change(analysis: Analysis, old: Forces, new: Forces) -> tuple[float, float]:
    """Largest change of moment or axial force against the largest of its kind, and where [m]."""
    worst, at = 0.0, 0.0
    size = float(np.abs(new.M).max(initial=0.0))
    pairs = [(old.M[p], new.M[p], size) for p in range(2)]
    # an axial force counts by the moment it makes about the section
    reach = radius(analysis)
    pairs.append((old.N * reach, new.N * reach, max(size, float(np.abs(new.N).max(initial=0.0)) * reach)))
    for a, b, scale in pairs:
        if scale > 0.0:
            gap = np.abs(a - b) / scale
            k = int(np.argmax(gap))
            if gap.flat[k] > worst:
                worst, at = float(gap.flat[k]), float(analysis.profile.panels.x.flat[k])
    return worst, at


def radius(analysis: Analysis) -> float:
    """Mean radius of gyration of the sections [m], by which curvatures and strains, moments and forces compare."""
    s = analysis.profile.stiffness(analysis.profile.short)
    return float(np.sqrt(np.mean(s.EI_y / s.EA)))


def slid_after(closed: Closed, slide: Array) -> Array:
    """Shear angle of a closed phase less what its shear forces would give on other moduli, shape (2, K, n)."""
    V, r = closed.response.V, closed.response
    return np.asarray(r.shear - np.stack((V[0] * slide[0] + V[1] * slide[2], V[1] * slide[1] + V[0] * slide[2])))
