"""Second method, parts that slip: what loads do to all layers at once on one set of moduli, joints and supports."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.second_grid import RULE, GaussRule
from fishbelly.member.second_loads import Ground, Pushes
from fishbelly.member.second_record import line_moments
from fishbelly.member.second_slip_borders import Border, Held, Scale, conditions, reactions
from fishbelly.member.second_slip_chain import Between, Linear, collocated, left_states
from fishbelly.member.second_slip_layers import Stack
from fishbelly.member.second_slip_ties import Grip, borders_of
from fishbelly.member.second_step import _SAFETY as SAFETY

Array = NDArray[np.float64]

FEWER = 10
"""Gauss points of the solution beside, whose difference tells the error of the one with all."""


@dataclass(frozen=True, eq=False)
class Sheet:
    """Layers at the Gauss points for one set of moduli: what resists, and what gives way.

    Parameters
    ----------
    there : ndarray of bool, shape (L, K)
        Whether a layer stands in an interval.
    give : ndarray, shape (K, n, L + P, L + P)
        Strain of each layer on the line, and curvatures, by N of each layer and M.
    slide : ndarray, shape (3, K, n)
        Shear angle by shear force.
    k : ndarray, shape (J, K)
        Stiffness of the joints per length [N/m2].
    springs : ndarray, shape (J, K + 1)
        Fasteners taken one by one [N/m].
    """

    there: NDArray[np.bool_]
    give: Array
    slide: Array
    k: Array
    springs: Array


@dataclass(frozen=True, eq=False)
class Acting:
    """What acts, layer by layer.

    Parameters
    ----------
    pushes : Pushes
        Loads on the member as a whole; its N, n and free strain count below.
    n : ndarray, shape (L, K, n)
        Load along x per length [N/m].
    along : ndarray, shape (L, K + 1)
        Forces along x at the borders [N].
    free : ndarray, shape (L, K, n)
        Axial forces that would hold free strain back [N].
    own : ndarray, shape (J, K, n); single : ndarray, shape (J, K + 1)
        Slip that joints, and single fasteners, have of themselves [m].
    """

    pushes: Pushes
    n: Array
    along: Array
    free: Array
    own: Array
    single: Array


@dataclass(frozen=True, eq=False)
class Moved:
    """Solution of one step.

    Parameters
    ----------
    strain : ndarray, shape (L, K, n)
        Strain of each layer on the line.
    curvature, V : ndarray, shape (2, K, n)
        Curvatures and shear forces.
    N, M : ndarray, shapes (L, K, n), (2, K, n)
        Axial force of each layer, moments about the line.
    flow, fasteners : ndarray, shapes (J, K, n), (J, K + 1)
        Force that joints put into their part, per length, and of single fasteners.
    start, rate : ndarray, shapes (2, K), (2, K, n)
        Deflection at the left end of each interval [m], and its slope at the points.
    reactions : ndarray, shape (supports, 5)
        Force of each support on the member.
    error : float
        Estimate of the error of the deflections [m].
    """

    strain: Array
    curvature: Array
    V: Array
    N: Array
    M: Array
    flow: Array
    fasteners: Array
    start: Array
    rate: Array
    reactions: Array
    error: float = 0.0

    def deflections(self, ground: Ground, places: Array) -> Array:
        """Deflections at places, shape (2, X)."""
        i = ground.intervals
        k = np.clip(np.searchsorted(i.a, places, side="right") - 1, 0, i.a.size - 1)
        weights = RULE.up_to(i.local(k, places))
        return np.asarray(self.start[:, k] + ((self.rate * i.stretch)[:, k] * weights).sum(axis=-1))

    def everywhere(self, ground: Ground) -> Array:
        """Deflections at the points, shape (2, K, n)."""
        return np.asarray(self.start[:, :, None] + (self.rate * ground.intervals.stretch) @ RULE.running.T)


def sheet(ground: Ground, stack: Stack, E: Array, slide: Array, k: Array, springs: Array, planes: int) -> Sheet:
    """Sum the strips of every layer and turn their stiffness over, point by point."""
    L, shape = stack.count, ground.intervals.x.shape
    D = np.zeros((*shape, L + planes, L + planes))
    for part in sorted(ground.works or range(E.size)):
        if E[part] == 0.0 or stack.layer[part] < 0:
            continue
        at = int(stack.layer[part])
        A, S0, S1, I00, I01, I11 = E[part] * line_moments(ground, part)
        second = np.array([[I00, I01], [I01, I11]])
        D[..., at, at] += A
        for p, S in enumerate((S0, S1)[:planes]):
            D[..., at, L + p] -= S
            D[..., L + p, at] -= S
            for q in range(planes):
                D[..., L + p, L + q] += second[p, q]
    there = np.array([np.all(D[..., at, at] > 0.0, axis=-1) for at in range(L)])
    size = np.sqrt(np.einsum("knii->kni", D))
    size[..., :L][~np.moveaxis(there, 0, -1)[:, None].repeat(shape[1], 1)] = 1.0
    unit = D / size[..., :, None] / size[..., None, :]
    unit[..., range(L), range(L)] = 1.0
    give: Array = np.linalg.inv(unit) / size[..., :, None] / size[..., None, :]
    for at in range(L):
        give[~there[at], :, at, :] = 0.0
        give[~there[at], :, :, at] = 0.0
    return Sheet(there, give, slide, k, springs)


@dataclass(frozen=True, eq=False)
class Problem:
    """One step as equations.

    Parameters
    ----------
    ground, stack, sheet : Ground, Stack, Sheet
        What stands there.
    grips : sequence of Grip
        What supports, hinges and ends do.
    planes : int
        1: the vertical plane alone.
    """

    ground: Ground
    stack: Stack
    sheet: Sheet
    grips: Sequence[Grip]
    planes: int
    scales: Scale = field(init=False)

    def __post_init__(self) -> None:
        L, P = self.stack.count, self.planes
        give = self.sheet.give
        bend = float(np.median(give[..., L, L]))
        stands = self.sheet.there.any(axis=1)
        axial = float(np.median([give[self.sheet.there[at]][..., at, at].min() for at in np.flatnonzero(stands)]))
        length, size = self.ground.member.length, float(np.sqrt(axial / bend))
        q = np.array([size] * L + [length] * P + [1.0] * P)
        object.__setattr__(self, "scales", Scale(q, 1.0 / (bend * length) / q))

    def solve(self, acting: Acting) -> Moved:
        """Solve with all Gauss points, and with fewer to tell the error."""
        A, b = self._equations(acting)
        stretch = self.ground.intervals.stretch
        borders = borders_of(self.ground, self.stack, self.sheet.there, self.grips, self.planes, acting.along)
        borders = self._loaded(borders, acting)
        between = conditions(borders, self.scales)
        linear = collocated(A, b, stretch)
        y = left_states(linear, between)
        moved = self._read(acting, borders, linear, y)
        return Moved(**(vars(moved) | {"error": self._beside(A, b, between, moved)}))

    def _beside(self, A: Array, b: Array, between: Between, moved: Moved) -> float:
        """Difference of the deflections from those of a solution with fewer Gauss points [m]."""
        stretch, rule = self.ground.intervals.stretch, GaussRule.of(FEWER)
        to = np.polynomial.legendre.legvander(rule.s, RULE.s.size - 1) @ RULE.coefficients
        near = stretch @ to.T
        few = collocated(np.einsum("ij,kjab->kiab", to, A), np.einsum("ij,kja->kia", to, b), near, rule)
        y = left_states(few, between)
        slopes = np.einsum("knij,kj->kni", few.slopes, y) + few.own
        w = slice(self.stack.count, self.stack.count + self.planes)
        there = y[:, None, w] + np.einsum("ij,kj,kja->kia", rule.running, near, slopes[..., w])
        here = moved.everywhere(self.ground)[: self.planes] @ to.T
        return float(np.abs(there.transpose(2, 0, 1) * self.ground.member.length - here).max())

    def _equations(self, acting: Acting) -> tuple[Array, Array]:
        """A and b of y' = A y + b in units of `scale`, y = (u, w, rotation, N, V, -M)."""
        L, P, s = self.stack.count, self.planes, self.sheet
        d, shape = L + 2 * P, self.ground.intervals.x.shape
        A, b = np.zeros((*shape, 2 * d, 2 * d)), np.zeros((*shape, 2 * d))
        u, w, turn, N, V, M = (range(v, v + c) for v, c in self._places())
        p = acting.pushes
        # strains of the layers and curvatures by (N, M), of which -M is counted
        forces, strains = [*N, *M], [*u, *turn]
        signs = np.array([1.0] * L + [-1.0] * P)
        by_force = s.give * signs[:, None] * signs[None, :]
        A[..., np.array(strains)[:, None], forces] = by_force
        held = np.concatenate((acting.free, p.free[1 : 1 + P])).transpose(1, 2, 0)
        b[..., strains] = np.einsum("knij,knj->kni", s.give, held) * signs
        for q in range(P):
            A[..., w[q], turn[q]] = 1.0
            A[..., w[q], V[q]] = s.slide[q]
            if P == 2:
                A[..., w[q], V[1 - q]] = s.slide[2]
            if p.angle is not None:
                b[..., w[q]] = p.angle[q]
            A[..., M[q], V[q]] = -1.0
            b[..., M[q]] = -p.m[q]
            b[..., V[q]] = -p.q[q]
        for at in range(L):
            b[..., N[at]] -= acting.n[at]
        for j, tied in enumerate(self.stack.joints):
            k = s.k[j][:, None]
            for at, sign in ((tied.upper, 1.0), (tied.lower, -1.0)):
                A[..., N[at], u[tied.upper]] += sign * k
                A[..., N[at], u[tied.lower]] -= sign * k
                b[..., N[at]] -= sign * k * acting.own[j]
        scale = np.concatenate((self.scales.q, self.scales.f))
        return A * scale / scale[:, None], b / scale

    def _places(self) -> list[tuple[int, int]]:
        L, P = self.stack.count, self.planes
        d = L + 2 * P
        return [(0, L), (L, P), (L + P, P), (d, L), (d + L, P), (d + L + P, P)]

    def _loaded(self, borders: Sequence[Border], acting: Acting) -> list[Border]:
        """Add loads across and couples, and single fasteners, to the borders."""
        L, P = self.stack.count, self.planes
        d, found = L + 2 * P, []
        for k, border in enumerate(borders):
            push = border.push.copy()
            jumps = acting.pushes.jumps[:, k]
            push[0, L : L + P] -= jumps[1 : 1 + P]
            push[0, L + P :] += jumps[3 : 3 + P]
            held = list(border.held)
            for j, tied in enumerate(self.stack.joints):
                if self.sheet.springs[j, k]:
                    row = np.zeros(d)
                    row[tied.upper], row[tied.lower] = 1.0, -1.0
                    held.append(Held(row, float(self.sheet.springs[j, k]), float(acting.single[j, k])))
            found.append(Border(border.split, border.blank, tuple(held), border.tied, push))
        return found

    def _read(self, acting: Acting, borders: Sequence[Border], linear: Linear, y: Array) -> Moved:
        L, P, i = self.stack.count, self.planes, self.ground.intervals
        scale = np.concatenate((self.scales.q, self.scales.f))
        slopes = np.einsum("knij,kj->kni", linear.slopes, y) + linear.own
        states = (y[:, None] + np.einsum("ij,kj,kja->kia", RULE.running, i.stretch, slopes)) * scale
        rates = slopes * scale
        u, w, turn, N, V, M = (slice(v, v + c) for v, c in self._places())

        def two(v: Array) -> Array:
            full = np.zeros((2, *i.x.shape))
            full[:P] = v.transpose(2, 0, 1)
            return full

        slip = np.array([states[..., t.upper] - states[..., t.lower] for t in self.stack.joints])
        right = np.einsum("kij,kj->ki", linear.T, y) + linear.t
        held = reactions(borders, self.scales, [None, *right], [*y, None])
        ends = np.vstack((y, right[-1:]))[:, :L] * self.scales.q[:L]
        jumped = np.array([ends[:, t.upper] - ends[:, t.lower] for t in self.stack.joints])
        start = np.zeros((2, i.a.size))
        start[:P] = (y[:, w] * self.scales.q[w]).T
        return Moved(
            rates[..., u].transpose(2, 0, 1) * self.sheet.there[:, :, None],
            -two(rates[..., turn]),
            two(states[..., V]),
            states[..., N].transpose(2, 0, 1),
            -two(states[..., M]),
            self.sheet.k[:, :, None] * (slip - acting.own),
            self.sheet.springs * (jumped - acting.single),
            start,
            two(rates[..., w]),
            self._by_support(held),
        )

    def _by_support(self, held: Mapping[int, float]) -> Array:
        found = np.zeros((len(self.ground.member.supports), 5))
        for number, force in held.items():
            found[number // 5, number % 5] = force
        return found


def not_resolved(problem: Problem, moved: Moved, tail: Array) -> float:
    """Deflection that may be missing where the section is not resolved [m]; see `second_step.error_of`."""
    i = problem.ground.intervals
    weight = i.stretch * RULE.weights
    bent = (np.abs(moved.curvature) * weight).sum(axis=(0, 2)) * problem.ground.member.length
    slide = problem.sheet.slide
    with np.errstate(divide="ignore", invalid="ignore"):
        loose = np.nan_to_num(RULE.tail(slide[:1]) / np.maximum(slide[:1].max(axis=-1), 1e-300))
    sheared = (loose[:, :, None] * np.abs(slide[:1] * moved.V[:1]) * weight).sum()
    return SAFETY * float((tail * bent).sum() + sheared)
