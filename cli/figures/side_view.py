"""The member seen from the side: for every part the levels of its edges along x, cuts taken off."""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.breakpoints import geometry_breaks, merged
from fishbelly.member.description import Member
from fishbelly.member.geometry import Geometry, PlacedParts
from fishbelly.member.openings import half_length, opening_depth
from fishbelly.member.profile import varies
from fishbelly.sections.outlines import Outline
from fishbelly.sections.placing import Bounds

Array = NDArray[np.float64]

_POINTS = 15
"""Places drawn between two breaks where something varies."""


@dataclass(frozen=True, eq=False)
class Stretch:
    """A part between two breaks.

    Parameters
    ----------
    part : int
        Which part of the member.
    x, low, high : ndarray, shape (S,)
        Places and the levels of its lower and upper edge [m].
    lines : tuple of ndarray, shape (S,)
        Levels of further edges that are seen, such as those of flanges [m].
    near : float
        How near its nearest edge is to the viewer: the least y [m].
    hidden : bool
        Whether nearer parts stand before it.
    """

    part: int
    x: Array
    low: Array
    high: Array
    lines: tuple[Array, ...]
    near: float
    hidden: bool = False


@dataclass(frozen=True, eq=False)
class Hole:
    """An opening, a part that takes away or a notch from the side, between two breaks.

    Parameters
    ----------
    key : str
        What it is, the same on both sides of a break.
    x, low, high : ndarray, shape (S,)
        Places and the levels of its edges [m].
    parts : tuple of int
        What it cuts.
    through : bool
        Whether one sees through.
    seen : bool
        Whether its edges are seen; else they are hidden.
    """

    key: str
    x: Array
    low: Array
    high: Array
    parts: tuple[int, ...]
    through: bool
    seen: bool


@dataclass(frozen=True, eq=False)
class SideView:
    """Everything seen from the side.

    Parameters
    ----------
    member : Member
        What is seen.
    breaks : ndarray
        Places where the cross-section may jump [m].
    stretches : tuple of Stretch
        Parts between breaks, from left to right.
    holes : tuple of Hole
        Openings and cuts.
    """

    member: Member
    breaks: Array
    stretches: tuple[Stretch, ...]
    holes: tuple[Hole, ...]

    @cached_property
    def levels(self) -> tuple[float, float]:
        """Lowest and highest level of all [m]."""
        return min(float(s.low.min()) for s in self.stretches), max(float(s.high.max()) for s in self.stretches)

    def runs(self, part: int) -> list[list[Stretch]]:
        """Stretches of one part, those that adjoin together."""
        runs: list[list[Stretch]] = []
        for s in self.stretches:
            if s.part != part:
                continue
            if runs and abs(runs[-1][-1].x[-1] - s.x[0]) <= 1e-9 * self.member.length:
                runs[-1].append(s)
            else:
                runs.append([s])
        return runs

    def edges_at(self, x: float) -> tuple[float, float]:
        """Lowest and highest level of the member at x, of both sides at a break [m]; 0, 0 where nothing is there."""
        tiny = 1e-9 * self.member.length
        here = [s for s in self.stretches if s.x[0] - tiny <= x <= s.x[-1] + tiny]
        if not here:
            return 0.0, 0.0
        low = min(float(np.interp(x, s.x, s.low)) for s in here)
        return low, max(float(np.interp(x, s.x, s.high)) for s in here)


def side_view(member: Member) -> SideView:
    """Look at a member from the side, x to the right and z upwards: parts with the least y are nearest."""
    geometry = Geometry(member)
    breaks = merged(geometry_breaks(member), member.length)
    changing = varies(member, breaks[:-1], breaks[1:])
    stretches: list[Stretch] = []
    holes: list[Hole] = []
    for k, (a, b) in enumerate(itertools.pairwise(breaks)):
        there = geometry.present(0.5 * float(a + b))
        if not any(not member.parts[i].cuts for i in there[0]):
            continue
        t = 0.5 - 0.5 * np.cos(np.linspace(0.0, np.pi, _POINTS if changing[k] else 2))
        # just inside, so that laws speak for this side of their steps
        x = a + (b - a) * np.clip(t, 1e-9, 1.0 - 1e-9)
        placed = geometry.place(x, "right", there)
        x = a + (b - a) * t
        low, high = _edges(placed)
        stretches += _stretches(placed, x, low, high)
        holes += _openings(geometry, there[2], placed, x, low, high)
        holes += _cuts(placed, x, low, high, there, member)
    return SideView(member, breaks, tuple(stretches), tuple(holes))


def _edges(placed: PlacedParts) -> tuple[Array, Array]:
    """Levels of the lower and upper edges of the parts after cuts from side to side, each shape (P, S)."""
    boxes = [Bounds.of(o) for o in placed.outlines]
    low, high = np.array([b.bottom for b in boxes]), np.array([b.top for b in boxes])
    for cut in (c for c in placed.cuts if c.mass):
        box = Bounds.of(cut.outline)
        for k in cut.targets:
            tiny = 1e-9 * (high[k] - low[k])
            across = (box.left <= boxes[k].left + tiny) & (box.right >= boxes[k].right - tiny)
            below, above = across & (box.bottom <= low[k] + tiny), across & (box.top >= high[k] - tiny)
            low[k] = np.where(below & ~above, np.clip(box.top, low[k], high[k]), low[k])
            high[k] = np.where(above & ~below, np.clip(box.bottom, low[k], high[k]), high[k])
    return low, high


def _stretches(placed: PlacedParts, x: Array, low: Array, high: Array) -> list[Stretch]:
    middle = x.size // 2
    near = [float(Bounds.of(o).left[middle]) for o in placed.outlines]
    size = 1e-6 * max(float((high - low).max()), 1e-12)
    found = []
    for k, index in enumerate(placed.index):
        hidden = any(
            near[j] < near[k] - size
            and low[j, middle] < high[k, middle] - size
            and high[j, middle] > low[k, middle] + size
            for j in range(len(near))
        )
        lines = tuple(
            np.clip(level, low[k], high[k]) for level in _seen_lines(placed.outlines[k], middle, low[k], high[k])
        )
        found.append(Stretch(index, x, low[k], high[k], lines, near[k], hidden))
    return found


def _seen_lines(outline: Outline, at: int, low: Array, high: Array) -> list[Array]:
    """Levels of edges along the member where the face towards the viewer jumps, such as those of flanges."""
    z_end = outline.ends[1]
    depth = float(high[at] - low[at])
    level = np.abs(outline.z[at] - z_end[at]) < 1e-9 * max(depth, 1e-12)
    edges = np.flatnonzero((outline.bulge == 0.0) & level)
    found: dict[float, Array] = {}
    for e in edges:
        z = float(outline.z[at, e])
        if not low[at] + 1e-6 * depth < z < high[at] - 1e-6 * depth:
            continue
        step = 1e-5 * depth
        if abs(_face(outline, at, z + step) - _face(outline, at, z - step)) > 1e-3 * depth:
            found.setdefault(round(z / step), outline.z[:, e])
    return list(found.values())


def _face(outline: Outline, at: int, z: float) -> float:
    """Least y of an outline at a level, arcs by their chords."""
    y1, z1 = outline.ends
    a, b = outline.z[at] - z, z1[at] - z
    crossing = a * b < 0.0
    if not crossing.any():
        return np.inf
    share = a[crossing] / (a[crossing] - b[crossing])
    y = outline.y[at][crossing]
    return float((y + share * (y1[at][crossing] - y)).min())


def _openings(
    geometry: Geometry, there: tuple[int, ...], placed: PlacedParts, x: Array, low: Array, high: Array
) -> list[Hole]:
    found = []
    for k in there:
        opening = geometry.member.openings[k]
        rows = [r for r, i in enumerate(placed.index) if geometry.member.parts[i].name in opening.of]
        inside = np.clip(
            x, opening.at - half_length(opening) * (1 - 1e-9), opening.at + half_length(opening) * (1 - 1e-9)
        )
        half, level = 0.5 * opening_depth(opening, inside), geometry.opening_levels[k]
        if rows:
            bottom = np.clip(level - half, low[rows].min(axis=0), high[rows].max(axis=0))
            top = np.clip(level + half, low[rows].min(axis=0), high[rows].max(axis=0))
            found.append(Hole(f"opening {k}", x, bottom, top, tuple(placed.index[r] for r in rows), True, True))
    return found


def _cuts(
    placed: PlacedParts, x: Array, low: Array, high: Array, there: tuple[tuple[int, ...], ...], member: Member
) -> list[Hole]:
    """Parts that take away, and notches from the left or the right; what runs into an edge is seen there already."""
    found = []
    names = {member.parts[i].name for i in placed.index}
    kinds = [("part", i) for i in there[0] if names.intersection(member.parts[i].cuts)]
    kinds += [(member.notches[k].side, k) for k in there[1] if member.notches[k].of in names]
    for (kind, number), cut in zip(kinds, placed.cuts, strict=False):
        if not cut.mass or kind in ("top", "bottom"):
            continue
        box = Bounds.of(cut.outline)
        rows = list(cut.targets)
        bottom = np.clip(box.bottom, low[rows].min(axis=0), high[rows].max(axis=0))
        top = np.clip(box.top, low[rows].min(axis=0), high[rows].max(axis=0))
        boxes = [Bounds.of(placed.outlines[r]) for r in rows]
        through = all(np.all((box.left <= b.left + 1e-9) & (box.right >= b.right - 1e-9)) for b in boxes)
        if np.all(top - bottom > 1e-9 * (high[rows].max() - low[rows].min())) or not through:
            parts = tuple(placed.index[r] for r in rows)
            found.append(Hole(f"{kind} {number}", x, bottom, top, parts, through, through or kind == "left"))
    return found
