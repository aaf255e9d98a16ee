"""All parts present in a cross-section, taken together: what each of them really contributes.

Parts come in the order in which later ones displace earlier ones; cuts take material from their targets.
Moments of parts that lie apart, or wholly inside one another, are sums of exact outline moments; where
outlines cross, level cuts decide.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.area_moments import AreaMoments, area_moments
from fishbelly.sections.chebyshev import rule
from fishbelly.sections.level_cuts import Pieces, Widths, events, pieces, widths
from fishbelly.sections.outlines import Outline
from fishbelly.sections.overlap import boxes_apart, relation
from fishbelly.sections.placing import Bounds
from fishbelly.sections.slab_moments import slab_moments

Array = NDArray[np.float64]

_CURVED_POINTS, _STRAIGHT_POINTS = 24, 12


@dataclass(frozen=True, eq=False)
class Levels:
    """Level cuts of a section between its events.

    Parameters
    ----------
    edges : ndarray, shape (S, K + 1)
        Levels of the events [m].
    z : ndarray, shape (S, K, n)
        Levels of the cuts, n Chebyshev points to a slab [m].
    stretch : ndarray, shape (S, K, n)
        dz / ds, with s from -1 to 1 over the slab [m].
    widths : Widths
        What the cuts meet; arrays of shape (P, S, K, n).
    """

    edges: Array
    z: Array
    stretch: Array
    widths: Widths


@dataclass(frozen=True, eq=False)
class Composition:
    """Parts and cuts at S stations.

    Parameters
    ----------
    outlines : tuple of Outline
        The P parts.
    cuts : tuple of (Outline, tuple of int, bool)
        Outline, parts it is taken from, and whether their mass is taken too.
    """

    outlines: tuple[Outline, ...]
    cuts: tuple[tuple[Outline, tuple[int, ...], bool], ...] = ()

    @cached_property
    def boxes(self) -> tuple[Bounds, ...]:
        """Bounding boxes of the parts, cuts not taken off."""
        return tuple(Bounds.of(o) for o in self.outlines)

    @cached_property
    def relations(self) -> dict[tuple[int, int], str]:
        """How later outlines lie to earlier parts, pairs that are apart left out.

        Keys are (part, remover); removers from P on are the cuts.
        """
        n = len(self.outlines)
        found = {}
        for i in range(n):
            for j in range(i + 1, n):
                found[i, j] = relation(self.outlines[i], self.outlines[j])
            for c, (outline, targets, _) in enumerate(self.cuts):
                if i in targets:
                    found[i, n + c] = relation(self.outlines[i], outline)
        return {pair: how for pair, how in found.items() if how != "apart"}

    @cached_property
    def crossing(self) -> bool:
        """Whether any two outlines cross, or more than two lie within each other."""
        if self.overlaps_itself or "mixed" in self.relations.values():
            return True
        for i in range(len(self.outlines)):
            removers = [j for (k, j) in self.relations if k == i]
            if len(removers) > 1 and not self._apart(removers):
                return True
        return False

    @cached_property
    def meeting(self) -> tuple[tuple[int, int], ...]:
        """Pairs of outlines that may cross: those not apart, cuts among themselves, copies that overlap."""
        if not self.crossing:
            return ()
        n = len(self.outlines)
        cuts = [(n + a, n + b) for b in range(len(self.cuts)) for a in range(b)]
        copies = [(k, k) for k, o in enumerate(self.outlines) if _copies_meet(o)]
        later = {j for _, j in self.relations}
        removers = [(i, j) for i in later for j in later if i < j < n]
        return (
            *self.relations,
            *cuts,
            *copies,
            *removers,
            *((i, n + c) for i in later if i < n for c in range(len(self.cuts))),
        )

    @cached_property
    def overlaps_itself(self) -> bool:
        """Whether an outline has copies whose boxes overlap, as a pair set too close."""
        return any(_copies_meet(o) for o in self.outlines)

    def _apart(self, removers: list[int]) -> bool:
        shapes = [self._outline(j) for j in removers]
        return all(relation(a, b) == "apart" for k, a in enumerate(shapes) for b in shapes[:k])

    def _outline(self, j: int) -> Outline:
        n = len(self.outlines)
        return self.outlines[j] if j < n else self.cuts[j - n][0]

    @cached_property
    def gross(self) -> AreaMoments:
        """Moments of the parts as drawn, nothing taken off, shape (P, S)."""
        return _stacked([area_moments(o) for o in self.outlines])

    @cached_property
    def moments(self) -> AreaMoments:
        """Moments of what works of each part, shape (P, S)."""
        if self.crossing:
            edges = events(self.pieces, self.meeting)
            return slab_moments(self.pieces, edges, len(self.outlines), [c[1] for c in self.cuts])
        return self._subtracted(self.relations)

    @cached_property
    def mass_moments(self) -> AreaMoments:
        """Moments of what is really there of each part, shape (P, S): cuts for stiffness alone left out."""
        if all(mass for _, _, mass in self.cuts):
            return self.moments
        return Composition(self.outlines, tuple(c for c in self.cuts if c[2])).moments

    def _subtracted(self, relations: dict[tuple[int, int], str]) -> AreaMoments:
        removed: dict[int, list[AreaMoments]] = {}
        for i, j in relations:
            removed.setdefault(i, []).append(area_moments(self._outline(j)).times(-1.0))
        rows = []
        for i in range(len(self.outlines)):
            own = self.gross.at(i)
            rows.append(_stacked([own, *removed[i]]).total() if i in removed else own)
        return _stacked(rows)

    @cached_property
    def pieces(self) -> Pieces:
        """Boundary pieces of parts and cuts."""
        return pieces([*self.outlines, *(c[0] for c in self.cuts)])

    @cached_property
    def levels(self) -> Levels:
        """Level cuts of the whole section."""
        targets = [c[1] for c in self.cuts]
        return level_cuts(self.pieces, len(self.outlines), targets, self.meeting)

    @cached_property
    def extent(self) -> tuple[Array, Array]:
        """Lowest and highest level of what works of each part, each shape (P, S) [m]; NaN where nothing is left."""
        if not self.cuts and not self.relations:
            return np.array([b.bottom for b in self.boxes]), np.array([b.top for b in self.boxes])
        there = self.levels.widths.width.max(axis=3) > 1e-12 * np.abs(self.levels.edges).max()
        low = np.where(there, self.levels.edges[:, :-1], np.inf).min(axis=2)
        high = np.where(there, self.levels.edges[:, 1:], -np.inf).max(axis=2)
        return np.where(np.isfinite(low), low, np.nan), np.where(np.isfinite(high), high, np.nan)

    def turned(self) -> Composition:
        """Return the section turned by a quarter, so that level cuts run upright: y becomes z, z becomes -y."""
        cuts = tuple((o.turned(0.5 * np.pi), t, m) for o, t, m in self.cuts)
        return Composition(tuple(o.turned(0.5 * np.pi) for o in self.outlines), cuts)


def level_cuts(p: Pieces, parts: int, targets: Sequence[Sequence[int]], meeting: Sequence[tuple[int, int]]) -> Levels:
    """Cut the section between its events: Chebyshev levels, crowded to the events where edges are curved."""
    edges = events(p, meeting)
    curved = bool(np.any(p.branch))
    r = rule(_CURVED_POINTS if curved else _STRAIGHT_POINTS)
    half = 0.5 * np.diff(edges, axis=1)[..., None]
    # a level z = middle + half sin(pi s / 2) takes the square root out of the ends of an arc
    angle = 0.5 * np.pi * r.points
    shape, slope = (np.sin(angle), 0.5 * np.pi * np.cos(angle)) if curved else (r.points, np.ones(r.points.size))
    middle = 0.5 * (edges[:, 1:] + edges[:, :-1])
    z = middle[..., None] + half * shape
    return Levels(edges, z, half * slope, widths(p, middle, z, parts, targets))


def _copies_meet(outline: Outline) -> bool:
    """Whether the boxes of two outer loops of an outline share area at any station."""
    if len(outline.loops) < 2:
        return False
    loops = [Outline(outline.y[:, a:b], outline.z[:, a:b], outline.bulge[a:b], ((0, b - a),)) for a, b in outline.loops]
    # holes run clockwise: their corners enclose an area below zero
    outer = [Bounds.of(o) for o in loops if np.any((o.y * (o.ends[1] - np.roll(o.z, 1, axis=1))).sum(axis=1) > 0.0)]
    return any(not boxes_apart(a, b) for k, a in enumerate(outer) for b in outer[:k])


def _stacked(rows: Sequence[AreaMoments]) -> AreaMoments:
    return AreaMoments(*(np.stack([getattr(m, f) for m in rows]) for f in ("area", "y", "z", "zz", "yy", "yz")))
