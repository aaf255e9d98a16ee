"""Second method, places: its own list of breaks from the description, and Gauss points between them."""

from __future__ import annotations

import itertools
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Haunch, Member
from fishbelly.member.laws import Law

Array = NDArray[np.float64]

POINTS = 16
"""Gauss points in an interval."""


@dataclass(frozen=True, eq=False)
class GaussRule:
    """Gauss-Legendre points s from -1 to 1.

    Parameters
    ----------
    s, weights : ndarray, shape (n,)
        Points and weights.
    coefficients : ndarray, shape (n, n)
        Values at the points to Legendre coefficients.
    """

    s: Array
    weights: Array
    coefficients: Array

    @classmethod
    def of(cls, n: int) -> GaussRule:
        """Make the rule of n points."""
        s, weights = np.polynomial.legendre.leggauss(n)
        basis = np.polynomial.legendre.legvander(s, n - 1)
        return cls(s, weights, (np.arange(n) + 0.5)[:, None] * (basis * weights[:, None]).T)

    def up_to(self, s: Array) -> Array:
        """Weights that integrate from -1 to each of the places s (m,), shape (m, n)."""
        n = self.s.size
        p = np.polynomial.legendre.legvander(np.asarray(s, dtype=float), n)
        integrals = np.empty((p.shape[0], n))
        integrals[:, 0] = p[:, 1] + 1.0
        integrals[:, 1:] = (p[:, 2:] - p[:, :-2]) / (2.0 * np.arange(1, n) + 1.0)
        return np.asarray(integrals @ self.coefficients)

    @cached_property
    def running(self) -> Array:
        """Weights that integrate from -1 to each of the rule's own points, shape (n, n)."""
        return self.up_to(self.s)

    def tail(self, values: Array) -> Array:
        """Size of the last three coefficients of values (..., n), shape (...)."""
        return np.asarray(np.abs(values @ self.coefficients[-3:].T).max(axis=-1))

    def at_end(self, values: Array, end: int) -> Array:
        """Values (..., n) carried on to s = -1 or s = +1."""
        signs = float(end) ** np.arange(self.s.size)
        return np.asarray(values @ (signs @ self.coefficients))


RULE = GaussRule.of(POINTS)


@dataclass(frozen=True, eq=False)
class Intervals:
    """K intervals a to b [m]; `root` -1 or +1 where the section changes like a root at a or at b, else 0.

    At such an end x - a = (b - a) u², with u from 0 to 1, takes the root away. `home`: middle of the interval
    between breaks of which each is a piece, where it is certain what stands there.
    """

    a: Array
    b: Array
    root: NDArray[np.int_]
    home: Array

    def at(self, index: NDArray[np.generic]) -> Intervals:
        """Return some of the intervals."""
        return Intervals(self.a[index], self.b[index], self.root[index], self.home[index])

    @cached_property
    def x(self) -> Array:
        """Gauss points [m], shape (K, n)."""
        u = 0.5 * (1.0 + RULE.s)
        a, b, h, root = self.a[:, None], self.b[:, None], (self.b - self.a)[:, None], self.root[:, None]
        plain = np.where(u < 0.5, a + h * u, b - h * (1.0 - u))
        return np.asarray(np.where(root < 0, a + h * u * u, np.where(root > 0, b - h * (1.0 - u) ** 2, plain)))

    @cached_property
    def stretch(self) -> Array:
        """dx/ds at the Gauss points [m], shape (K, n)."""
        u = 0.5 * (1.0 + RULE.s)
        root = self.root[:, None]
        slope = np.where(root < 0, u, np.where(root > 0, 1.0 - u, 0.5))
        return np.asarray((self.b - self.a)[:, None] * slope)

    def local(self, k: NDArray[np.intp], x: Array) -> Array:
        """Local coordinates s of places x [m] in intervals k."""
        t = np.clip((x - self.a[k]) / (self.b[k] - self.a[k]), 0.0, 1.0)
        u = np.where(self.root[k] < 0, np.sqrt(t), np.where(self.root[k] > 0, 1.0 - np.sqrt(1.0 - t), t))
        return np.asarray(2.0 * u - 1.0)

    def halved(self) -> Intervals:
        """Every interval as two; an end like a root keeps a quarter of it."""
        h = self.b - self.a
        middle = self.a + h * np.choose(self.root + 1, (0.25, 0.5, 0.75))
        root = np.concatenate((np.minimum(self.root, 0), np.maximum(self.root, 0)))
        home = np.concatenate((self.home, self.home))
        return Intervals(np.concatenate((self.a, middle)), np.concatenate((middle, self.b)), root, home)

    def graded(self, k: int, end: int, smallest: float) -> Intervals:
        """Interval k as several, each a third of the next, towards its end a (-1) or b (+1)."""
        h = float(self.b[k] - self.a[k])
        count = max(2, int(np.ceil(np.log(h / smallest) / np.log(3.0))))
        reach = h * 3.0 ** -np.arange(count)
        if end < 0:
            borders = np.concatenate((self.a[k : k + 1], self.a[k] + reach[:0:-1], self.b[k : k + 1]))
        else:
            borders = np.concatenate((self.a[k : k + 1], self.b[k] - reach[1:], self.b[k : k + 1]))
        n = borders.size - 1
        return Intervals(borders[:-1], borders[1:], np.zeros(n, dtype=np.int_), np.full(n, self.home[k]))

    @staticmethod
    def joined(several: list[Intervals]) -> Intervals:
        """Return several sets as one."""
        return Intervals(*(np.concatenate([getattr(i, f) for i in several]) for f in ("a", "b", "root", "home")))


def typical(values: Array) -> float:
    """Return the value in the middle of the order; `numpy.median` would cost a start-up 20 ms."""
    x = np.sort(np.ravel(values))
    return float(x[x.size // 2])


def own_breaks(member: Member) -> Array:
    """Every place at which the raw description says that something begins, ends or changes its law [m]."""
    tiny = 1e-11 * member.length
    x = np.array(sorted(set(np.clip(np.array([0.0, member.length, *_named(member)]), 0.0, member.length).tolist())))
    x = x[np.concatenate(([True], np.diff(x) > tiny))]
    x[-1] = member.length
    return x


def _named(member: Member) -> Iterator[float]:
    for part in member.parts:
        yield from (part.start, part.end, part.start + part.run_in[0], part.end - part.run_in[1])
        place = part.place
        laws: list[Law] = [*part.shape.dimensions.values(), place.gap, *place.shift, *(place.position or ())]
        for law in laws:
            yield from law.knots.tolist()
    for notch in member.notches:
        yield from (notch.start - notch.reach, notch.start, notch.end, notch.end + notch.reach)
        yield from notch.depth.knots.tolist()
    for haunch in member.haunches:
        yield from (haunch.at - haunch.reach[0], haunch.at, haunch.at + haunch.reach[1])
    yield from _meetings(member)
    for opening in member.openings:
        half = 0.5 * (opening.length if opening.diameter is None else opening.diameter)
        corner = 0.0 if opening.diameter is not None else opening.radius
        for d in (-half, corner - half, 0.0, half - corner, half):
            yield opening.at + d
    for place_of in (*member.supports, *member.hinges, *member.loads):
        for name in ("at", "start", "end"):
            value = getattr(place_of, name, None)
            if value is not None:
                yield float(value)
        for x, _ in getattr(place_of, "stations", ()):
            yield float(x)


def _meetings(member: Member) -> Iterator[float]:
    """Places at which another haunch becomes the deepest of its face [m]: depths are parabolas between stations."""
    for k, one in enumerate(member.haunches):
        for other in member.haunches[:k]:
            if (one.of, one.side) != (other.of, other.side):
                continue
            x = np.unique([v for h in (one, other) for v in (h.at - h.reach[0], h.at, h.at + h.reach[1])])
            for a, b in itertools.pairwise(x.tolist()):
                low, middle, high = (_deeper(one, v, a + b) - _deeper(other, v, a + b) for v in (a, 0.5 * (a + b), b))
                bend, lean = 2.0 * (low - 2.0 * middle + high), 4.0 * middle - 3.0 * low - high
                # low + lean t + bend t² = 0; the second form keeps the root of a parabola that is nearly straight
                root = np.sqrt(max(lean * lean - 4.0 * bend * low, 0.0))
                half = -0.5 * (lean + np.copysign(root, lean))
                for over, under in ((half, bend), (low, half)):
                    if under and 0.0 < over / under < 1.0:
                        yield a + over / under * (b - a)


def _deeper(haunch: Haunch, x: float, twice: float) -> float:
    """Depth that a haunch adds at x, in the stretch about half of `twice` [m]."""
    reach = haunch.reach[0] if twice < 2.0 * haunch.at else haunch.reach[1]
    t = max(0.0, 1.0 - abs(x - haunch.at) / reach) if reach > 0.0 else 0.0
    return haunch.depth * (t * t if haunch.law == "parabola" else t)


def root_ends(member: Member) -> list[float]:
    """Places at which the hole of an opening begins or ends like a root [m]: circles and rounded corners."""
    places = []
    for opening in member.openings:
        if opening.diameter is not None or opening.radius:
            half = 0.5 * (opening.length if opening.diameter is None else opening.diameter)
            places += [opening.at - half, opening.at + half]
    return places


def first_intervals(member: Member) -> Intervals:
    """Return the intervals between the breaks."""
    x = own_breaks(member)
    a, b = x[:-1], x[1:]
    root = np.zeros(a.size, dtype=np.int_)
    for place in root_ends(member):
        root[np.abs(a - place) < 1e-9 * member.length] = -1
        root[np.abs(b - place) < 1e-9 * member.length] = 1
    return Intervals(a, b, root, 0.5 * (a + b))
