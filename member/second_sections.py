"""Second method, sections along x: strip moments at Gauss points, intervals halved until they are resolved."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member
from fishbelly.member.faults import NoStiffness
from fishbelly.member.geometry import Geometry, PlacedParts
from fishbelly.member.loads import Temperature
from fishbelly.member.second_grid import POINTS, RULE, Intervals, first_intervals
from fishbelly.member.second_inclined import Band, bands
from fishbelly.member.second_strips import StripMoments, strip_moments
from fishbelly.sections.outlines import Outline

Array = NDArray[np.float64]

Slide = Callable[[Array, int], Array]
"""1/GA [1/N] at places x for shear in a plane: 0 vertical, 1 across."""

RESOLVED = 1e-11
"""Last Legendre coefficients against the largest value, times the interval over the member's length."""
SLIDE_RESOLVED = 1e-9
"""The same for 1/GA, which is handed in and good to about this."""
APEX = 1e-6
"""Where stiffness carried on to an end falls below this share of its largest, the interval is graded."""
SMALLEST = 1e-12
"""Intervals are not graded or halved below this share of the member's length."""
MOST_ROUNDS = 45
MOST_INTERVALS = 4_000


@dataclass(frozen=True, eq=False)
class Sections:
    """What stands at the Gauss points of K intervals, about the point `about` of each.

    Parameters
    ----------
    works : ndarray, shape (P, 6, K, n)
        Area, ∫y, ∫z, ∫y², ∫z², ∫yz of what works of each part.
    stands : ndarray, shape (P, 6, K, n)
        The same of what is there and has mass.
    about : ndarray, shape (2, K, n)
        Point (y, z) about which they are taken [m].
    bottom, top : ndarray, shape (K, n)
        Lowest and highest level of what works [m].
    run_in : ndarray, shape (P, K, n)
        Share of E and G that works.
    """

    works: Array
    stands: Array
    about: Array
    bottom: Array
    top: Array
    run_in: Array

    def at(self, index: NDArray[np.generic]) -> Sections:
        """Return the sections of some intervals."""
        return Sections(
            self.works[:, :, index],
            self.stands[:, :, index],
            self.about[:, index],
            self.bottom[index],
            self.top[index],
            self.run_in[:, index],
        )

    @staticmethod
    def joined(several: list[Sections]) -> Sections:
        """Return the sections of several sets of intervals as one."""
        fields = (("works", 2), ("stands", 2), ("about", 1), ("bottom", 0), ("top", 0), ("run_in", 1))
        return Sections(*(np.concatenate([getattr(s, f) for s in several], axis=axis) for f, axis in fields))


@dataclass(frozen=True, eq=False)
class Flexibility:
    """Section flexibility at the Gauss points for one set of moduli, in the two planes c = (z, -y).

    Parameters
    ----------
    EA : ndarray, shape (K, n)
        Axial stiffness [N].
    c : ndarray, shape (2, K, n)
        E-weighted centroid [m].
    bend : ndarray, shape (2, 2, K, n)
        Curvature by moments about the centroid [1/(N m2)].
    slide : ndarray, shape (3, K, n)
        Shear angle by the plane's own shear force, and of each plane by that of the other [1/N].
    """

    EA: Array
    c: Array
    bend: Array
    slide: Array


def flexibility(s: Sections, E: Array, slide: Array | None = None) -> Flexibility:
    """Flexibility for moduli E, shape (P,); the matrix of second moments is turned over point by point."""
    weight = E[:, None, None] * s.run_in
    area, y, z, yy, zz, yz = np.einsum("pkn,pmkn->mkn", weight, s.works)
    with np.errstate(divide="ignore", invalid="ignore"):
        y, z = y / area, z / area
        iy, iz, cross = zz - area * z * z, yy - area * y * y, -(yz - area * y * z)
        det = iy * iz - cross * cross
        bend = np.array([[iz / det, -cross / det], [-cross / det, iy / det]])
    c = np.stack((z + s.about[1], -(y + s.about[0])))
    return Flexibility(area, c, bend, np.zeros((3, *area.shape)) if slide is None else slide)


@dataclass(frozen=True, eq=False)
class Sampled:
    """Intervals from one end of the member to the other, their sections, and how well they are resolved.

    `tail`, shape (K,): last Legendre coefficients against the largest value.
    """

    intervals: Intervals
    sections: Sections
    tail: Array


def sample(member: Member, moduli: Sequence[Array], slides: Sequence[Slide | None]) -> Sampled:
    """Evaluate the sections of a member, intervals halved until stiffness is resolved.

    Parameters
    ----------
    member : Member
        The description.
    moduli : sequence of ndarray, shape (P,)
        Sets of E that shall be resolved [Pa].
    slides : sequence of Slide or None
        1/GA that shall be resolved.

    Raises
    ------
    NoStiffness
        Where no part is there, or none that has stiffness.
    """
    return sample_stages(member, [None], [moduli], [slides])[0]


def sample_stages(
    member: Member,
    works: Sequence[frozenset[int] | None],
    moduli: Sequence[Sequence[Array]],
    slides: Sequence[Sequence[Slide | None]],
) -> tuple[Sampled, ...]:
    """Evaluate the sections of a member stage by stage, on intervals that resolve them all; see `sample`.

    Parameters
    ----------
    member : Member
        The description.
    works : sequence of (frozenset of int or None)
        Parts that work in each stage; None for all.
    moduli, slides : sequence of sequence
        Sets of E, and 1/GA, that shall be resolved in each stage.
    """
    geometries = [Geometry(member, w) for w in works]
    batch = first_intervals(member)
    most = MOST_INTERVALS + batch.a.size
    # a temperature from top to bottom follows the edges, whose corners may change over in a turned section
    warmed = any(isinstance(v, Temperature) and v.parts is None for v in member.loads)
    kept: list[tuple[Intervals, list[Sections], Array]] = []
    count = 0
    for _ in range(MOST_ROUNDS):
        found = [_evaluated(geometry, batch) for geometry in geometries]
        tails = [
            _tails(s, batch, E, slide, varies, warmed)
            for (s, varies), E, slide in zip(found, moduli, slides, strict=True)
        ]
        sections, tail = [s for s, _ in found], np.max([t for t, _ in tails], axis=0)
        thin = tails[0][1]
        for _, ends in tails[1:]:
            thin = np.where(thin == 0, ends, thin)
        done = tail * (batch.b - batch.a) / member.length < RESOLVED
        done |= batch.b - batch.a <= SMALLEST * member.length
        count += done.size
        if count > most:
            done[:] = True
        kept.append((batch.at(done), [s.at(done) for s in sections], tail[done]))
        if np.all(done):
            break
        batch = _refined(batch, ~done, thin, SMALLEST * member.length)
    else:
        # what is left when the rounds are over is not resolved
        kept.append((batch, [_evaluated(g, batch)[0] for g in geometries], np.ones(batch.a.size)))
    intervals = Intervals.joined([k[0] for k in kept])
    order = np.argsort(intervals.a, kind="stable")
    tail = np.concatenate([k[2] for k in kept])[order]
    stages = [Sections.joined([k[1][stage] for k in kept]).at(order) for stage in range(len(geometries))]
    intervals = intervals.at(order)
    return tuple(Sampled(intervals, s, tail) for s in stages)


def sections_on(member: Member, works: frozenset[int], intervals: Intervals) -> Sections:
    """Evaluate the sections of some parts on intervals that are given."""
    return _evaluated(Geometry(member, works), intervals)[0]


def _refined(batch: Intervals, rest: NDArray[np.bool_], thin: NDArray[np.int_], smallest: float) -> Intervals:
    graded = [
        batch.graded(int(k), int(thin[k]), smallest)
        for k in np.flatnonzero(rest & (thin != 0))
        if batch.b[k] - batch.a[k] > 30.0 * smallest
    ]
    plain = rest & ((thin == 0) | (batch.b - batch.a <= 30.0 * smallest))
    return Intervals.joined([batch.at(plain).halved(), *graded])


def _tails(
    s: Sections,
    i: Intervals,
    moduli: Sequence[Array],
    slides: Sequence[Slide | None],
    varies: NDArray[np.bool_],
    warmed: bool,
) -> tuple[Array, NDArray[np.int_]]:
    """How well each interval is resolved, and at which end (-1, +1) it gets thin."""
    tail, thin = np.zeros(i.a.size), np.zeros(i.a.size, dtype=np.int_)
    for E in moduli:
        f = flexibility(s, E)
        bad = ~(f.EA > 0.0) | ~np.all(np.isfinite(f.bend), axis=(0, 1))
        if np.any(bad):
            raise NoStiffness(float(i.x[bad][0]), "the parts there have none")
        k = np.flatnonzero(varies)
        if not k.size:
            continue
        own = np.stack((f.bend[0, 0, k], f.bend[1, 1, k], 1.0 / f.EA[k]))
        found = (RULE.tail(own) / own.max(axis=-1)).max(axis=0)
        across = RULE.tail(f.bend[0, 1, k]) / np.sqrt(own[0] * own[1]).max(axis=-1)
        size = np.sqrt(own[2] / np.minimum(own[0], own[1])).max(axis=-1)
        moved = (RULE.tail(f.c[:, k]) / size).max(axis=0)
        tail[k] = np.maximum.reduce([tail[k], found, across, moved])
        stiff = 1.0 / own[0]
        low = APEX * stiff.max(axis=-1)
        end = np.where(RULE.at_end(stiff, -1) < low, -1, np.where(RULE.at_end(stiff, 1) < low, 1, 0))
        thin[k] = np.where(thin[k] == 0, end, thin[k])
        if warmed:
            edges = RULE.tail(np.stack((s.bottom[k], s.top[k]))).max(axis=0)
            tail[k] = np.maximum(tail[k], edges / (s.top[k] - s.bottom[k]).max(axis=-1))
    for slide in slides:
        if slide is not None and np.any(varies):
            g = np.asarray(slide(i.x[varies].ravel(), 0)).reshape(-1, POINTS)
            tail[varies] = np.maximum(tail[varies], RULE.tail(g) / g.max(axis=-1) * (RESOLVED / SLIDE_RESOLVED))
    return tail, thin


def _evaluated(geometry: Geometry, i: Intervals) -> tuple[Sections, NDArray[np.bool_]]:
    """Sections of all intervals, those with the same parts together; and in which of them anything varies."""
    parts, shape = len(geometry.member.parts), i.x.shape
    s = Sections(
        np.zeros((parts, 6, *shape)),
        np.zeros((parts, 6, *shape)),
        np.zeros((2, *shape)),
        np.zeros(shape),
        np.zeros(shape),
        np.zeros((parts, *shape)),
    )
    varies = np.zeros(shape[0], dtype=bool)
    groups: dict[tuple[object, object], list[int]] = {}
    there_at = {home: geometry.present(home) for home in set(i.home.tolist())}
    for number, home in enumerate(i.home.tolist()):
        # a notch takes mass between its ends and stiffness alone within its reach: never both in one call
        weighed = tuple(n.start < home < n.end for n in geometry.member.notches)
        groups.setdefault((there_at[home], weighed), []).append(number)
    for members in groups.values():
        k = np.array(members)
        there = there_at[float(i.home[k[0]])]
        if all(geometry.member.parts[p].cuts for p in there[0]):
            raise NoStiffness(float(i.a[k[0]]), "no part is there")
        placed = geometry.place(i.x[k].ravel(), "right", there)
        varies[k] = _varies(placed, k.size)
        still, moving = k[~varies[k]], k[varies[k]]
        points = np.arange(k.size * POINTS).reshape(k.size, POINTS)
        if still.size:
            _fill(geometry.member, s, still, placed, points[~varies[k], :1])
        if moving.size:
            _fill(geometry.member, s, moving, placed, points[varies[k]])
    return s, varies


def _varies(placed: PlacedParts, count: int) -> NDArray[np.bool_]:
    """In which of the intervals any corner or run-in is not the same at all Gauss points."""
    result = np.zeros(count, dtype=bool)
    fields = [v.T for o in (*placed.outlines, *(c.outline for c in placed.cuts)) for v in (o.y, o.z)]
    for v in (*fields, placed.run_in):
        rows = v.reshape(v.shape[0], count, POINTS)
        result |= np.any(rows != rows[:, :, :1], axis=(0, 2))
    return result


def _fill(member: Member, s: Sections, k: NDArray[np.intp], placed: PlacedParts, points: NDArray[np.intp]) -> None:
    """Evaluate the section at points (an index into the placed stations, a row for each interval)."""
    flat = points.ravel()
    outlines = [_rows(o, flat) for o in placed.outlines]
    cuts = [(_rows(c.outline, flat), c.targets, c.mass) for c in placed.cuts]
    inclined = bands(member, placed.index, outlines, placed.x[flat])
    works, stands = _weighed(outlines, [(o, t) for o, t, _ in cuts], inclined)
    if not all(mass for _, _, mass in cuts):
        stands = strip_moments(outlines, [(o, t) for o, t, mass in cuts if mass])
    index = np.array(placed.index)

    def spread(values: Array) -> Array:
        shaped = values.reshape(*values.shape[:-1], *points.shape)
        return np.broadcast_to(shaped, (*shaped.shape[:-1], POINTS))

    for name, found in (("works", works), ("stands", stands)):
        getattr(s, name)[index[:, None, None], np.arange(6)[:, None], k] = spread(found.values)
    _spread_rest(s, k, works, spread)
    s.run_in[index[:, None], k] = spread(placed.run_in[:, flat])


def _weighed(
    outlines: list[Outline], cuts: list[tuple[Outline, tuple[int, ...]]], inclined: list[Band]
) -> tuple[StripMoments, StripMoments]:
    """Moments of the parts as they work along the member, bands with their share, and as they stand there."""
    if not inclined:
        found = strip_moments(outlines, cuts)
        return found, found
    every: list[Outline] = []
    own: list[int] = []
    within: dict[int, int] = {}
    shares = {}
    for part, outline in enumerate(outlines):
        own.append(len(every))
        every.append(outline)
        for band in (b for b in inclined if b.part == part):
            within[len(every)], shares[len(every)] = own[part], band.share
            every.append(band.outline)
    cut = [
        (o, tuple(n for t in targets for n in (own[t], *(b for b, p in within.items() if p == own[t]))))
        for o, targets in cuts
    ]
    split = strip_moments(every, cut, within)
    works, stands = split.values[own], split.values[own]
    for band_at, part_at in within.items():
        works[own.index(part_at)] += shares[band_at] * split.values[band_at]
        stands[own.index(part_at)] += split.values[band_at]
    return replace(split, values=works), replace(split, values=stands)


def _spread_rest(s: Sections, k: NDArray[np.intp], works: StripMoments, spread: Callable[[Array], Array]) -> None:
    s.about[:, k] = spread(works.about)
    s.bottom[k] = spread(works.bottom)
    s.top[k] = spread(works.top)


def _rows(outline: Outline, rows: NDArray[np.intp]) -> Outline:
    return Outline(outline.y[rows], outline.z[rows], outline.bulge, outline.loops)
