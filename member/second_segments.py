"""Second method, between the nodes: forces from both ends of a segment and how its far end moves.

A node is an end of the member, a support or a hinge. Forces are counted (N, V, V across, M, M across),
movements (u, down, across, rotation, rotation across). In the left half of a segment forces are summed from
its left end and in the right half from its right end, so that they stay exact where the member gets thin.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.second_grid import RULE, Intervals
from fishbelly.member.second_loads import Pushes
from fishbelly.member.second_sections import Flexibility

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Stretch:
    """A segment: intervals `first` to `stop`, the ones from `split` on belong to the right half."""

    first: int
    split: int
    stop: int


@dataclass(frozen=True, eq=False)
class Segments:
    """The member between its nodes.

    Parameters
    ----------
    intervals : Intervals
        All intervals.
    stretches : tuple of Stretch
        Segments from left to right.
    free_left, free_right : bool
        Whether the first and the last segment end free.
    """

    intervals: Intervals
    stretches: tuple[Stretch, ...]
    free_left: bool
    free_right: bool

    @classmethod
    def at(cls, intervals: Intervals, borders: list[int], held: set[int]) -> Segments:
        """Cut at borders, of which `held` have supports; the first and last are the ends of the member."""
        count = intervals.a.size
        free_left, free_right = 0 not in held, count not in held
        stretches = []
        for a, b in pairwise(borders):
            middle = 0.5 * (intervals.a[a] + intervals.b[b - 1])
            split = a + int(np.argmin(np.abs(intervals.a[a:b] - middle)))
            if free_left and a == 0:
                split = b
            elif free_right and b == count:
                split = a if not (free_left and a == 0) else split
            stretches.append(Stretch(a, split, b))
        return cls(intervals, tuple(stretches), free_left, free_right)

    @cached_property
    def start(self) -> Array:
        """Left end of each segment [m]."""
        return self.intervals.a[[s.first for s in self.stretches]]

    @cached_property
    def end(self) -> Array:
        """Right end of each segment [m]."""
        return self.intervals.b[[s.stop - 1 for s in self.stretches]]

    @cached_property
    def segment(self) -> NDArray[np.intp]:
        """Segment of each interval, shape (K,)."""
        return np.repeat(np.arange(len(self.stretches)), [s.stop - s.first for s in self.stretches])

    @cached_property
    def from_left(self) -> NDArray[np.bool_]:
        """Whether an interval's forces are summed from the left end of its segment, shape (K,)."""
        split = np.array([s.split for s in self.stretches])[self.segment]
        return np.asarray(np.arange(self.segment.size) < split)

    @cached_property
    def lever(self) -> Array:
        """X minus the end from which forces are summed [m], shape (K, n)."""
        origin = np.where(self.from_left, self.start[self.segment], self.end[self.segment])
        return np.asarray(self.intervals.x - origin[:, None])


@dataclass(frozen=True, eq=False)
class Fields:
    """Forces at the Gauss points: N (..., K, n), V and M (2, ..., K, n)."""

    N: Array
    V: Array
    M: Array


@dataclass(frozen=True, eq=False)
class Strain:
    """Strain on the line (..., K, n), curvature and shear angle (2, ..., K, n)."""

    axial: Array
    curvature: Array
    angle: Array


def unit_fields(cut: Segments) -> Fields:
    """Forces by each unit force at the end from which they are summed, shape (5, K, n)."""
    shape = cut.intervals.x.shape
    N, V, M = np.zeros((5, *shape)), np.zeros((2, 5, *shape)), np.zeros((2, 5, *shape))
    N[0] = 1.0
    for p in range(2):
        V[p, 1 + p] = 1.0
        M[p, 1 + p] = cut.lever
        M[p, 3 + p] = 1.0
    return Fields(N, V, M)


def load_fields(cut: Segments, p: Pushes) -> tuple[Fields, Array]:
    """Forces by the loads inside the segments, and what is left over where the two halves meet.

    Returns
    -------
    Fields
        With nothing at the ends.
    ndarray, shape (segments, 5)
        Value of the left half at the split minus that of the right half there, jumps at the split counted.
    """
    shape = cut.intervals.x.shape
    out = Fields(np.zeros(shape), np.zeros((2, *shape)), np.zeros((2, *shape)))
    over = np.zeros((len(cut.stretches), 5))
    for k, s in enumerate(cut.stretches):
        left = _ahead(cut, p, s, out)
        right = _behind(cut, p, s, out)
        over[k] = left - right
        if s.first < s.split < s.stop:
            over[k] += p.jumps[:, s.split]
    return out, over


def _ahead(cut: Segments, p: Pushes, s: Stretch, out: Fields) -> Array:
    """Sum loads from the left end of a segment to its split; the value there."""
    if s.split == s.first:
        return np.zeros(5)
    part = slice(s.first, s.split)
    stretch = cut.intervals.stretch[part]

    def summed(density: Array, jump: Array) -> tuple[Array, Array]:
        steps = (density * stretch) @ RULE.weights
        last = steps[..., -1]
        before = np.zeros_like(steps)
        before[..., 1:] = np.cumsum(steps[..., :-1] + jump, axis=-1)
        return before[..., None] + (density * stretch) @ RULE.running.T, before[..., -1] + last

    return _all(p, part, p.jumps[:, s.first + 1 : s.split], out, summed)


def _behind(cut: Segments, p: Pushes, s: Stretch, out: Fields) -> Array:
    """Sum loads from the right end of a segment back to its split; the value there."""
    if s.split == s.stop:
        return np.zeros(5)
    part = slice(s.split, s.stop)
    stretch = cut.intervals.stretch[part]
    backwards = RULE.running[::-1, ::-1].T

    def summed(density: Array, jump: Array) -> tuple[Array, Array]:
        steps = (density * stretch) @ RULE.weights
        first = steps[..., 0]
        after = np.zeros_like(steps)
        after[..., :-1] = -np.cumsum((steps[..., 1:] + jump)[..., ::-1], axis=-1)[..., ::-1]
        return after[..., None] - (density * stretch) @ backwards, after[..., 0] - first

    return _all(p, part, p.jumps[:, s.split + 1 : s.stop], out, summed)


def _all(
    p: Pushes, part: slice, jumps: Array, out: Fields, summed: Callable[[Array, Array], tuple[Array, Array]]
) -> Array:
    out.N[part], n = summed(-p.n[part], jumps[0])
    out.V[:, part], v = summed(-p.q[:, part], jumps[1:3])
    out.M[:, part], m = summed(out.V[:, part] + p.m[:, part], jumps[3:])
    return np.concatenate((np.atleast_1d(n), v, m))


def strains(f: Flexibility, line: Array, fields: Fields) -> Strain:
    """Strains under forces about the line; fields may have an axis in front of (K, n)."""
    c = f.c - line[:, None, None]
    about = [fields.M[p] + fields.N * c[p] for p in range(2)]
    curvature = np.stack([f.bend[p, 0] * about[0] + f.bend[p, 1] * about[1] for p in range(2)])
    axial = fields.N / f.EA + curvature[0] * c[0] + curvature[1] * c[1]
    angle = np.stack([fields.V[p] * f.slide[p] + fields.V[1 - p] * f.slide[2] for p in range(2)])
    return Strain(axial, curvature, angle)


def end_movements(cut: Segments, strain: Strain) -> tuple[Array, Array]:
    """Movement of the right end of each segment against its left end, by the strains of each half.

    Returns
    -------
    left, right : ndarray, shape (segments, 5, ...)
        Movements (u, down, across, rotation, rotation across) by the strains of the left and right half.
    """
    weight = cut.intervals.stretch * RULE.weights
    ahead = weight * (cut.end[cut.segment][:, None] - cut.intervals.x)
    rows = [(strain.axial * weight).sum(axis=-1)]
    for p in range(2):
        rows.append((strain.angle[p] * weight - strain.curvature[p] * ahead).sum(axis=-1))
    rows += [-(strain.curvature[p] * weight).sum(axis=-1) for p in range(2)]
    by_interval = np.stack(rows)
    shape = (len(cut.stretches), *by_interval.shape[:-1])
    left, right = np.zeros(shape), np.zeros(shape)
    for k, s in enumerate(cut.stretches):
        left[k] = by_interval[..., s.first : s.split].sum(axis=-1)
        right[k] = by_interval[..., s.split : s.stop].sum(axis=-1)
    return left, right
