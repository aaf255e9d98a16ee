"""Equilibrium of a member whose sections crack: Newton's method on the tangent, the places of cracks held.

Every round is one linear solution: under forces F the law gives strains e and a tangent flexibility C, and strains
under other forces are about C (F' + R) with R = C⁻¹ e - F, which enters as forces of free strain do. Only what a
phase adds to what is there already is solved for: a support that comes later then holds the member where it is.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Actions, Atom, Frame
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
    """What is added at once to what acts already.

    Parameters
    ----------
    frame : Frame
        Grid with the parts of the stage.
    layout : Layout
        Supports at work: each holds the member where it is when it comes.
    planes : int
        1: the vertical plane alone.
    loads : Actions
        What is added, with its factors.
    settled : tuple of (str, float)
        Load cases of settlements added, with their factors.
    slide : ndarray, shape (3, K, n)
        Shear flexibility.
    slid : ndarray, shape (2, K, n)
        Shear forces that on it would give the shear angle added by itself [N].
    before : Response
        All so far.
    """

    frame: Frame
    layout: Layout
    planes: int
    loads: Actions
    settled: tuple[tuple[str, float], ...]
    slide: Array
    slid: Array
    before: Response


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
    law: Law, phase: Phase, forces: Forces, reach: float, near: LawState | None = None, closed: float = CLOSED
) -> Closed:
    """Bring one phase into equilibrium.

    Parameters
    ----------
    law : Law
        The section law.
    phase : Phase
        What is added.
    forces : Forces
        All forces, near the ones looked for, such as those of the uncracked member.
    reach : float
        Length by which an axial force counts beside moments [m].
    near : LawState, optional
        State of the law near the one looked for.
    closed : float
        Change of forces, against the largest, at which to stop.

    Returns
    -------
    Closed
        With the response to all so far, and the residual of the last round, which the caller judges.
    """
    state, rounds = near, 0
    change, at, best = np.inf, 0.0, np.inf
    response: Response | None = None
    damping = 1.0
    while rounds < MOST_ROUNDS:
        rounds += 1
        state = law.at(forces, state)
        response = _linear(phase, state, forces)
        new = Forces(response.N, response.V, response.M)
        change, at = _change(phase.frame.profile.panels.x, reach, forces, new)
        if change <= closed:
            break
        if change > 0.7 * best and rounds > 6:
            damping = max(0.5 * damping, 0.1)
        best = min(best, change)
        forces = forces.plus(new.plus(forces, -1.0), damping)
    assert response is not None and state is not None
    return Closed(response, state, rounds, change, at)


def _linear(phase: Phase, state: LawState, forces: Forces) -> Response:
    """Response on the tangent, what the tangent lacks entering as free strain, on top of what is there already."""
    before = phase.before
    tangent = state.tangent(phase.frame.profile.panels, phase.slide)
    gained = state.plane - np.stack((before.axial, before.curvature[0], before.curvature[1]))
    R = np.linalg.solve(state.flexibility, np.moveaxis(gained, 0, -1)[..., None])[..., 0]
    held = Forces(
        R[..., 0] - (forces.N - before.N), phase.slid, np.stack((R[..., 1], R[..., 2])) - (forces.M - before.M)
    )
    atoms = [Atom(""), *(Atom(case) for case, _ in phase.settled)]
    nothing = total_actions([phase.loads], np.zeros(1))
    zero = Forces.none(forces.N.shape)
    loads = [phase.loads] + [nothing] * len(phase.settled)
    free = [held] + [zero] * len(phase.settled)
    found = respond(phase.frame, phase.layout, tangent, atoms, loads, free, phase.planes)
    return before + found.combined(np.array([1.0, *(f for _, f in phase.settled)]))


def _change(x: Array, reach: float, old: Forces, new: Forces) -> tuple[float, float]:
    """Largest change of moment or axial force against the largest of its kind, and where [m]."""
    worst, at = 0.0, 0.0
    size = float(np.abs(new.M).max(initial=0.0))
    pairs = [(old.M[p], new.M[p], size) for p in range(2)]
    # an axial force counts by the moment it makes about the section
    pairs.append((old.N * reach, new.N * reach, max(size, float(np.abs(new.N).max(initial=0.0)) * reach)))
    for a, b, scale in pairs:
        if scale > 0.0:
            gap = np.abs(a - b) / scale
            k = int(np.argmax(gap))
            if gap.flat[k] > worst:
                worst, at = float(gap.flat[k]), float(x.flat[k])
    return worst, at


def radius(analysis: Analysis) -> float:
    """Mean radius of gyration of the sections [m], by which curvatures and strains, moments and forces compare."""
    s = analysis.profile.stiffness(analysis.profile.short)
    return float(np.sqrt(np.mean(s.EI_y / s.EA)))
