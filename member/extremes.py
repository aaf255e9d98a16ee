"""Largest values along the member, from roots of the derivative, and values at any place."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.panels import Panels

Array = NDArray[np.float64]


LEVEL = 1e-12
"""Values closer than this share of the field's largest are one: where they are level the leftmost place is given."""


@dataclass(frozen=True, eq=False)
class Extreme:
    """A largest value, where it is [m], and which pattern loads are on there (shape (J,))."""

    value: float
    at: float
    on: NDArray[np.bool_]


def values_at(panels: Panels, field: Array, x: Array, side: str = "right") -> Array:
    """Values of a field (..., K, n) at places x [m], shape (..., X); at a border those of one side."""
    panel = panels.find(x, side)
    basis = panels.rule.basis(panels.local(panel, x))
    return np.asarray(np.einsum("xn,...xn->...x", basis, field[..., panel, :]))


def largest(panels: Panels, field: Array, first: int = 0, stop: int | None = None) -> Extreme:
    """Largest value of a field over panels first to stop.

    Parameters
    ----------
    panels : Panels
        The grid.
    field : ndarray, shape (J + 1, K, n) or (K, n)
        The field; with J more fields of loads that may be on or off, the largest over every arrangement.
    first, stop : int
        Panels to look at, one past the last.

    Returns
    -------
    Extreme
        The leftmost of equal ones.
    """
    stop = panels.count if stop is None else stop
    stack = field[None] if field.ndim == 2 else field
    here = stack[:, first:stop]
    left, right = panels.ends(here)
    points = np.concatenate((left[..., None], here, right[..., None]), axis=-1)
    # the end where a panel runs out to a point is not a place to look at: values there are extrapolated
    points[:, panels.anchor[first:stop] < 0, 0] = points[:, panels.anchor[first:stop] < 0, 1]
    points[:, panels.anchor[first:stop] > 0, -1] = points[:, panels.anchor[first:stop] > 0, -2]
    envelope = points[0] + np.maximum(points[1:], 0.0).sum(axis=0)
    top = envelope.max(axis=1)
    reach = top + 0.03 * np.ptp(envelope, axis=1)
    found: list[Extreme] = []
    best = -np.inf
    for k in np.argsort(-reach, kind="stable"):
        if found and reach[k] <= best:
            break
        found.append(_in_panel(panels, stack, first + int(k), envelope[k], points[:, k]))
        best = max(best, found[-1].value)
    equal = [e for e in found if e.value >= best - LEVEL * abs(best)]
    return _leftmost(panels, min(equal, key=lambda e: e.at), envelope, points, first)


def _leftmost(panels: Panels, found: Extreme, envelope: Array, points: Array, first: int) -> Extreme:
    """Where a field is level at its largest value, the first point of it that is."""
    size = np.abs(points).max()
    k, j = np.unravel_index(int(np.argmax(envelope >= found.value - LEVEL * size)), envelope.shape)
    s = float(np.concatenate(([-1.0], panels.rule.points, [1.0]))[j])
    at = float(panels.place(np.array(first + k), np.array(s)))
    if envelope[k, j] < found.value - LEVEL * size or at >= found.at:
        return found
    return Extreme(found.value, at, points[1:, k, j] > 0.0)


def _in_panel(panels: Panels, stack: Array, k: int, envelope: Array, points: Array) -> Extreme:
    j = int(np.argmax(envelope))
    on = points[1:, j] > 0.0
    s = float(np.concatenate(([-1.0], panels.rule.points, [1.0]))[j])
    value = float(envelope[j])
    for _ in range(6):
        values = stack[0, k] + stack[1:, k][on].sum(axis=0)
        s, value = _peak(panels, values, s, value)
        there = panels.rule.basis(np.array([s]))[0] @ stack[1:, k].T
        now = there > 0.0
        if np.array_equal(now, on):
            break
        on = now
    return Extreme(value, float(panels.place(np.array(k), np.array(s))), on)


def _peak(panels: Panels, values: Array, s0: float, value0: float) -> tuple[float, float]:
    """Largest value of one panel's interpolant: roots of its derivative, from its sign changes by Newton's method."""
    r = panels.rule
    first = r.differentiate @ values
    second = r.differentiate @ first
    places = np.concatenate(([-1.0], r.points, [1.0]))
    slopes = np.concatenate(([r.left @ first], first, [r.right @ first]))
    falling = np.flatnonzero((slopes[:-1] > 0.0) & (slopes[1:] <= 0.0))
    if not falling.size:
        return s0, value0
    low, high = places[falling], places[falling + 1]
    s = low + (high - low) * slopes[falling] / (slopes[falling] - slopes[falling + 1])
    for _ in range(8):
        basis = r.basis(s)
        slope, bend = basis @ first, basis @ second
        low, high = np.where(slope > 0.0, s, low), np.where(slope > 0.0, high, s)
        step = s - slope / np.where(bend == 0.0, 1.0, bend)
        s = np.where((step >= low) & (step <= high), step, 0.5 * (low + high))
    tops = r.basis(s) @ values
    best = int(np.argmax(tops))
    # no better than the point it started from, up to round-off: that point stays
    if tops[best] <= value0 + 1e-15 * abs(value0):
        return s0, value0
    return float(s[best]), float(tops[best])
