"""A place along the member with the outlines there and just beside it, and the levels between their corners.

A level is followed along x as it lies between the corners of the outlines above and below it, so that what stands
above it varies smoothly; how fast it rises then tells what a fixed level would have.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.geometry import Geometry
from fishbelly.member.panels import Panels
from fishbelly.member.profile import Group, Profile, group_places, varies
from fishbelly.sections.area_moments import AreaMoments
from fishbelly.sections.chebyshev import rule
from fishbelly.sections.composition import Composition
from fishbelly.sections.flanges import Flange, flange_moments, working_moments
from fishbelly.sections.level_cuts import widths
from fishbelly.sections.outlines import Outline, rectangle

Array = NDArray[np.float64]

_REACH = 0.04
"""Length of the stretch beside x over which outlines are followed, a panel being 2 long."""
_POINTS = 8
"""Places in that stretch; outlines are smooth there, and three places tell of a parabola exactly."""
SAME = 1e-9
"""Levels closer than this share of the section's depth are one."""


@dataclass(frozen=True, eq=False)
class LevelSite:
    """A place along the member, seen from one side.

    Parameters
    ----------
    profile : Profile
        The sampled member.
    x : float
        The place [m]; beside the start of an outline like a root a little inside, where slopes exist.
    side : {"right", "left"}
        Which side of a break.
    panel : int
        Panel of the grid that holds it.
    s : float
        Where in the panel, -1 to 1.
    group : Group
        Sections at x and, where anything varies, at places beside it.
    step : float
        Length of the stretch beside x in s, below zero to the left; 0 where nothing varies.
    """

    profile: Profile
    x: float
    side: str
    panel: int
    s: float
    group: Group
    step: float

    @classmethod
    def at(cls, profile: Profile, x: float, side: str) -> LevelSite:
        """Find the place in the grid and cut the member there."""
        panels = profile.panels
        panel = int(panels.find(np.array([x]), side)[0])
        s = float(panels.local(np.array([panel]), np.array([x]))[0])
        anchor, points = int(panels.anchor[panel]), panels.rule.points
        s = max(s, float(points[0])) if anchor < 0 else min(s, float(points[-1])) if anchor > 0 else s
        k = slice(panel, panel + 1)
        step = 0.0
        if varies(profile.member, panels.a[k], panels.b[k])[0]:
            forward = s + _REACH <= 1.0 if side == "right" else s - _REACH < -1.0
            step = _REACH if forward else -_REACH
        beside = s + 0.5 * step * (1.0 + rule(_POINTS).points) if step else np.empty(0)
        places = panels.place(np.full(1 + beside.size, panel), np.concatenate(([s], beside)))
        middle = 0.5 * (panels.a[panel] + panels.b[panel])
        group = group_places(profile.geometry, places[None, :], np.array([middle]), 0, side)[0]
        return cls(profile, float(places[0]), side, panel, s, group, step)

    @property
    def geometry(self) -> Geometry:
        """Places the parts that work."""
        return self.profile.geometry

    @property
    def panels(self) -> Panels:
        """The grid."""
        return self.profile.panels

    @property
    def middle(self) -> float:
        """A place inside the panel [m]."""
        return float(0.5 * (self.panels.a[self.panel] + self.panels.b[self.panel]))

    def value(self, field: Array) -> Array:
        """Value at x of a field (..., K, n)."""
        return np.asarray(field[..., self.panel, :] @ self.panels.rule.basis(np.array([self.s]))[0])

    def slope(self, values: Array) -> Array:
        """Derivative along x at x of values (..., S) at the sections of the group; 0 where nothing varies."""
        if not self.step:
            return np.zeros(values.shape[:-1])
        r = rule(_POINTS)
        by_s = (values[..., 1:] @ r.differentiate.T @ r.left) / (0.5 * self.step)
        return np.asarray(by_s / self._stretch)

    @cached_property
    def _stretch(self) -> float:
        """dx/ds at x [m]."""
        u, anchor = 0.5 * (1.0 + self.s), int(self.panels.anchor[self.panel])
        length = float(self.panels.b[self.panel] - self.panels.a[self.panel])
        return length * (u if anchor < 0 else 1.0 - u if anchor > 0 else 0.5)

    @cached_property
    def extent(self) -> tuple[float, float]:
        """Lowest and highest level of what is there at x [m]."""
        low, high = self.group.composition.extent
        return float(np.nanmin(low[:, 0])), float(np.nanmax(high[:, 0]))

    @cached_property
    def edges(self) -> Array:
        """Levels of corners at the sections of the group, those of one corner in one column, shape (S, K + 1) [m]."""
        low, high = self.extent
        every = [_apart(row, SAME * (high - low)) for row in self.group.composition.levels.edges]
        if all(row.size == every[0].size for row in every):
            return np.stack(every)
        return _followed(every)

    def slabs(self, z: float) -> tuple[Slab | None, Slab | None]:
        """Return the level as it bounds what lies just below and just above; one and the same away from corners."""
        low, high = self.extent
        near = SAME * (high - low)
        here = self.edges[0]
        tall = np.flatnonzero(np.diff(here) > near)
        below = [int(k) for k in tall if here[k] < z - near and z <= here[k + 1] + near]
        over = [int(k) for k in tall if here[k] <= z + near and z + near < here[k + 1]]
        first = Slab.of(self, below[-1], z) if below else None
        second = Slab.of(self, over[0], z) if over else None
        if first is not None and second is not None and first.number == second.number:
            second = first
        return first, second


def _apart(levels: Array, near: float) -> Array:
    """Levels in rising order of which none is a round-off beside another, shape (K + 1,)."""
    kept = [float(levels[0])]
    for level in levels[1:]:
        if level - kept[-1] > near:
            kept.append(float(level))
    return np.array(kept)


def _followed(every: list[Array]) -> Array:
    """Levels of the first section followed through the others, where corners part or come together beside it."""
    rows = [every[0]]
    for there in every[1:]:
        # no corner moves far between two sections: the nearest is the same
        rows.append(there[np.abs(there[None, :] - rows[-1][:, None]).argmin(axis=1)])
    return np.stack(rows)


@dataclass(frozen=True, eq=False)
class Slab:
    """A level between two corner levels.

    Parameters
    ----------
    number : int
        Which stretch between corner levels, from the bottom.
    share : float
        Where in it, 0 to 1.
    z : float
        The level at x [m].
    levels : ndarray, shape (S,)
        The same share of the stretch at the sections of the group [m].
    rise : float
        How fast that rises along x.
    """

    number: int
    share: float
    z: float
    levels: Array
    rise: float

    @classmethod
    def of(cls, site: LevelSite, number: int, z: float) -> Slab:
        """Place a level in a stretch."""
        low, high = site.edges[:, number], site.edges[:, number + 1]
        share = float(np.clip((z - low[0]) / (high[0] - low[0]), 0.0, 1.0))
        levels = low + share * (high - low)
        return cls(number, share, float(levels[0]), levels, float(site.slope(levels)))


def above(site: LevelSite, slab: Slab) -> AreaMoments:
    """Moments of what works of every part above a level, shape (P, S)."""
    group = site.group
    boxes = group.composition.boxes
    left, right = (f([getattr(b, k) for b in boxes], axis=0) for f, k in ((np.min, "left"), (np.max, "right")))
    bottom = np.minimum(np.min([b.bottom for b in boxes], axis=0), slab.levels)
    size = np.max([b.top for b in boxes], axis=0) - bottom + right - left
    below = _box(left - size, bottom - size, right + size, slab.levels)
    cuts = (*group.composition.cuts, (below, tuple(range(len(boxes))), True))
    section = Composition(group.placed.outlines, cuts)
    return working_moments(section, group.placed.flanges, flange_moments(section, group.placed.flanges))


def _box(left: Array, bottom: Array, right: Array, top: Array) -> Outline:
    outline = rectangle({"width": right - left, "depth": top - bottom})
    return outline.moved(0.5 * (left + right), 0.5 * (bottom + top))


@dataclass(frozen=True, eq=False)
class OnLevel:
    """What a level meets of every part at x: width [m], ∫y dy [m2], leftmost and rightmost y [m], each shape (P,)."""

    width: Array
    first: Array
    left: Array
    right: Array


def on_level(site: LevelSite, slab: Slab, working: bool = False) -> OnLevel:
    """What a level meets; `working`: widths of inclined flanges by the share of E that works along the member."""
    middle = 0.5 * (site.edges[:, slab.number] + site.edges[:, slab.number + 1])
    whole = _met(site.group.composition, middle, slab.levels)
    if not working:
        return whole
    width, first = whole.width.copy(), whole.first.copy()
    for flange in site.group.placed.flanges:
        mine = _met(_flange_alone(site.group.composition, flange), middle, slab.levels)
        width[flange.part] -= (1.0 - flange.share[0]) * mine.width[0]
        first[flange.part] -= (1.0 - flange.share[0]) * mine.first[0]
    return OnLevel(width, first, whole.left, whole.right)


def _flange_alone(section: Composition, flange: Flange) -> Composition:
    later = section.outlines[flange.part + 1 :]
    cuts = tuple((o, (0,), m) for o, targets, m in section.cuts if flange.part in targets)
    return Composition((flange.outline, *later), cuts)


def _met(section: Composition, middle: Array, levels: Array) -> OnLevel:
    targets = [c[1] for c in section.cuts]
    w = widths(section.pieces, middle[:, None], levels[:, None, None], len(section.outlines), targets)
    return OnLevel(*(f[:, 0, 0, 0] for f in (w.width, w.first, w.left, w.right)))


def leaning_at(site: LevelSite, slab: Slab, part: int) -> float | None:
    """Slope dz/dx of the inclined flange in which a level meets a part (place in the group); None where in none.

    A flange that stands askew on the section counts as none.
    """
    middle = 0.5 * (site.edges[:, slab.number] + site.edges[:, slab.number + 1])
    for flange in site.group.placed.flanges:
        upright = abs(flange.normal[1]) > 1.0 - 1e-9
        alone = _flange_alone(site.group.composition, flange)
        if flange.part == part and upright and _met(alone, middle, middle).width[0] > 0.0:
            return float(flange.rise[0] * np.sign(flange.normal[1]))
    return None
