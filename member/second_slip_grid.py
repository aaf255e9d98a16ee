"""Second method, parts that slip: further intervals for what fades near ends and fasteners, sections on them."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.second_grid import Intervals
from fishbelly.member.second_loads import Ground
from fishbelly.member.second_record import line_moments
from fishbelly.member.second_sections import Sampled, flexibility, sections_on
from fishbelly.member.second_slip_layers import Stack
from fishbelly.member.second_stages import Site

Array = NDArray[np.float64]

FADES = 3.0
"""Rate of fading times length of an interval that the Gauss points resolve."""
EVENLY = 6
"""Up to so many pieces an interval is cut evenly; beyond, pieces double from both ends inwards."""


def refined_site(site: Site, stack: Stack, stiffness: Array, single: list[NDArray[np.bool_]]) -> Site:
    """Cut the intervals of a site so that what joints carry is resolved, and evaluate the sections on them.

    Parameters
    ----------
    site : Site
        Stages with their sections resolved.
    stack : Stack
        Layers and joints.
    stiffness : ndarray, shape (J,)
        Largest stiffness of every joint per length [N/m2].
    single : list of ndarray of bool, shape (J,)
        Joints whose fasteners are taken one by one, in each stage.
    """
    i = site.grounds[0].intervals
    rate = np.max([_fading(g, stack, stiffness) for g in site.grounds], axis=0)
    places = [x for one in single for j, t in enumerate(stack.joints) if one[j] for x in t.places]
    pieces: list[Intervals] = []
    origin: list[int] = []
    for k in range(i.a.size):
        cuts = _cuts(float(i.a[k]), float(i.b[k]), float(rate[k]), places)
        pieces.append(_cut(i, k, cuts))
        origin += [k] * (len(cuts) + 1)
    intervals = Intervals.joined(pieces)
    sampled, grounds = [], []
    for view, found, ground in zip(site.views, site.sampled, site.grounds, strict=True):
        sections = found.sections.at(np.array(origin))
        if np.array_equal(intervals.a, i.a):
            sections = found.sections
        elif _any_vary(found, np.array(origin)):
            sections = sections_on(site.member, view.parts, intervals)
        c = flexibility(sections, ground.short).c - ground.line[:, None, None]
        sampled.append(Sampled(intervals, sections, found.tail[origin]))
        grounds.append(replace(ground, intervals=intervals, sections=sections, centroid=c))
    at = {id(old): new for old, new in zip(site.grounds, grounds, strict=True)}
    homes = {name: at[id(ground)] for name, ground in site.homes.items()}
    return replace(site, sampled=tuple(sampled), grounds=tuple(grounds), homes=homes)


def _any_vary(found: Sampled, origin: NDArray[np.intp]) -> bool:
    """Whether the section varies anywhere: else that of the interval a piece is cut from holds."""
    s = found.sections
    fields = (s.works, s.about, s.bottom, s.top, s.run_in)
    return any(bool(np.any(v != v[..., :1])) for v in fields)


def _fading(ground: Ground, stack: Stack, stiffness: Array) -> Array:
    """Bound of the rate at which a force in the joints fades, interval by interval [1/m], shape (K,)."""
    L, shape = stack.count, ground.intervals.x.shape
    EA, ES, EI = np.zeros((L, *shape)), np.zeros((L, *shape)), np.zeros((L, *shape))
    for part in sorted(ground.works or range(len(ground.member.parts))):
        at = int(stack.layer[part])
        if at >= 0:
            m = ground.short[part] * line_moments(ground, part)
            EA[at], ES[at], EI[at] = EA[at] + m[0], ES[at] + m[1], EI[at] + m[3]
    soft = np.where(EA > 0.0, 1.0 / np.where(EA > 0.0, EA, 1.0), 0.0)
    level = ES * soft
    own = (EI - ES * level).sum(axis=0)
    total = np.zeros(shape)
    for j, t in enumerate(stack.joints):
        both = (EA[t.upper] > 0.0) & (EA[t.lower] > 0.0)
        apart = soft[t.upper] + soft[t.lower] + (level[t.upper] - level[t.lower]) ** 2 / own
        total += stiffness[j] * np.where(both, apart, 0.0)
    return np.asarray(np.sqrt(total.max(axis=-1)))


def _cuts(a: float, b: float, rate: float, places: list[float]) -> list[float]:
    """Places inside an interval at which it is cut."""
    tiny = 1e-9 * (b - a)
    inside = sorted({x for x in places if a + tiny < x < b - tiny})
    found: list[float] = list(inside)
    for low, high in zip([a, *inside], [*inside, b], strict=True):
        h = high - low
        n = int(np.ceil(rate * h / FADES))
        if n <= EVENLY:
            found += [low + h * k / n for k in range(1, n)]
            continue
        d = FADES / rate
        while d < 0.5 * h:
            found += [low + d, high - d]
            d *= 2.0
    return sorted(found)


def _cut(i: Intervals, k: int, cuts: list[float]) -> Intervals:
    borders = np.array([i.a[k], *cuts, i.b[k]])
    n = borders.size - 1
    root = np.zeros(n, dtype=np.int_)
    if i.root[k] < 0:
        root[0] = -1
    elif i.root[k] > 0:
        root[-1] = 1
    return Intervals(borders[:-1], borders[1:], root, np.full(n, i.home[k]))
