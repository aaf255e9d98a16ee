"""Second method, parts that slip: boundary values of a system of first order, interval by interval.

In every interval y' = A(x) y + b(x) is collocated at the Gauss points (implicit Runge-Kutta, order 2 n); borders tie
the intervals together, and what is left is reduced by orthogonal factors, two neighbours at a time, so that growing
and fading solutions are treated alike.

Source: U. M. Ascher, R. M. M. Mattheij, R. D. Russell, Numerical Solution of Boundary Value Problems for Ordinary
Differential Equations, Prentice Hall 1988, chapters 5 and 7; S. J. Wright, SIAM J. Sci. Stat. Comput. 13 (1992)
742-764 (both from memory).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.faults import Mechanism
from fishbelly.member.second_grid import RULE, GaussRule

Array = NDArray[np.float64]

_AT_ONCE = 40
"""Intervals whose collocation is solved in one call: what keeps the memory small."""


@dataclass(frozen=True, eq=False)
class Linear:
    """What an interval makes of the state at its left end: y at the right end = T y + t; slopes at the points.

    Parameters
    ----------
    T, t : ndarray, shapes (K, m, m) and (K, m)
        Transfer of the state.
    slopes, own : ndarray, shapes (K, n, m, m) and (K, n, m)
        y' at the points by the state at the left end, and by what acts inside.
    """

    T: Array
    t: Array
    slopes: Array
    own: Array


def collocated(A: Array, b: Array, stretch: Array, rule: GaussRule = RULE) -> Linear:
    """Collocate y' = A y + b, shapes (K, n, m, m) and (K, n, m), dx/ds given as (K, n)."""
    K, n, m, _ = A.shape
    slopes, own = np.zeros((K, n, m, m)), np.zeros((K, n, m))
    for first in range(0, K, _AT_ONCE):
        part = slice(first, first + _AT_ONCE)
        a = A[part]
        # Y_i - A_i sum_j running_ij stretch_j Y_j = A_i y + b_i
        weights = rule.running[None] * stretch[part][:, None, :]
        matrix = -(a[:, :, :, None, :] * weights[:, :, None, :, None]).reshape(len(a), n * m, n * m)
        matrix += np.eye(n * m)
        right = np.concatenate((a, b[part][..., None]), axis=-1).reshape(len(a), n * m, m + 1)
        found = np.linalg.solve(matrix, right).reshape(len(a), n, m, m + 1)
        slopes[part], own[part] = found[..., :m], found[..., m]
    weight = stretch * rule.weights
    T = np.eye(m) + np.einsum("kn,knij->kij", weight, slopes)
    return Linear(T, np.einsum("kn,kni->ki", weight, own), slopes, own)


@dataclass(frozen=True, eq=False)
class Between:
    """Conditions at the borders: C y_left + D y_right = r at the K - 1 inner ones, (m, m) each; half at both ends."""

    C: Array
    D: Array
    r: Array
    first: tuple[Array, Array]
    last: tuple[Array, Array]


def left_states(linear: Linear, between: Between) -> Array:
    """State at the left end of every interval, shape (K, m).

    Raises
    ------
    Mechanism
        When the conditions leave something free.
    """
    K, m = linear.t.shape
    C = between.C @ linear.T[:-1]
    r = between.r - np.einsum("kij,kj->ki", between.C, linear.t[:-1])
    levels, (C, D, r) = _halved(C, between.D, r)
    E, e = between.first
    F, f = between.last[0] @ linear.T[-1], between.last[1] - between.last[0] @ linear.t[-1]
    y = np.zeros((K, m))
    if K == 1:
        y[0] = _solve(np.vstack((E, F)), np.concatenate((e, f)))
        return y
    zero = np.zeros_like(E)
    rows = np.vstack((np.hstack((E, zero)), np.hstack((C[0], D[0])), np.hstack((zero, F))))
    both = _solve(rows, np.concatenate((e, r[0], f)))
    y[0], y[-1] = both[:m], both[m:]
    for level in reversed(levels):
        level.put(y)
    return y


@dataclass(frozen=True, eq=False)
class _Level:
    """States that one round of reduction took out: R y = r - U y_before - W y_after."""

    at: NDArray[np.intp]
    before: NDArray[np.intp]
    after: NDArray[np.intp]
    R: Array
    U: Array
    W: Array
    r: Array

    def put(self, y: Array) -> None:
        known = np.einsum("kij,kj->ki", self.U, y[self.before]) + np.einsum("kij,kj->ki", self.W, y[self.after])
        y[self.at] = _solve(self.R, self.r - known)


def _halved(C: Array, D: Array, r: Array) -> tuple[list[_Level], tuple[Array, Array, Array]]:
    """Take every other state out until one relation between the first and the last is left."""
    levels: list[_Level] = []
    index = np.arange(C.shape[0] + 1)
    while C.shape[0] > 1:
        m = C.shape[-1]
        pairs = C.shape[0] // 2
        one, two = slice(0, 2 * pairs, 2), slice(1, 2 * pairs, 2)
        Q, R = np.linalg.qr(np.concatenate((D[one], C[two]), axis=1), mode="complete")
        Qt = np.swapaxes(Q, 1, 2)
        U, W = Qt[:, :, :m] @ C[one], Qt[:, :, m:] @ D[two]
        right = np.einsum("kij,kj->ki", Qt, np.concatenate((r[one], r[two]), axis=1))
        middle = index[1 : 2 * pairs : 2]
        before, after = index[0 : 2 * pairs : 2], index[2 : 2 * pairs + 1 : 2]
        levels.append(_Level(middle, before, after, R[:, :m], U[:, :m], W[:, :m], right[:, :m]))
        rest = slice(2 * pairs, None)
        C, D = np.concatenate((U[:, m:], C[rest])), np.concatenate((W[:, m:], D[rest]))
        r = np.concatenate((right[:, m:], r[rest]))
        index = np.concatenate((index[0 : 2 * pairs + 1 : 2], index[2 * pairs + 1 :]))
    return levels, (C, D, r)


def _solve(matrix: Array, right: Array) -> Array:
    try:
        found = np.linalg.solve(matrix, right[..., None])[..., 0]
    except np.linalg.LinAlgError:
        raise Mechanism("the member can move without straining") from None
    if not np.all(np.isfinite(found)):
        raise Mechanism("the member can move without straining")
    return np.asarray(found)
