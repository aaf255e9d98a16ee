"""Area moments of what lies on one side of a straight line: the compressed region of a part that carries no tension.

In coordinates along and square to the line (u, t) Green's theorem reads ∮ F dt with ∂F/∂u the integrand. The new edge
along the line has dt = 0 and gives nothing, so each edge of an outline is integrated as far as it lies on the wanted
side, exactly for straight edges and to 1e-14 for arcs. Where outlines cross, slabs between events do the same.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.area_moments import AreaMoments, area_moments
from fishbelly.sections.composition import Composition
from fishbelly.sections.level_cuts import events, pieces
from fishbelly.sections.outlines import Outline, arcs
from fishbelly.sections.overlap import relation
from fishbelly.sections.placing import Bounds
from fishbelly.sections.slab_moments import slab_moments

Array = NDArray[np.float64]

_LINE = (0.5 * (1.0 + np.array([-np.sqrt(0.6), 0.0, np.sqrt(0.6)])), np.array([5.0, 8.0, 5.0]) / 18.0)
_ARC = np.polynomial.legendre.leggauss(14)
"""Gauss points of an arc up to half a circle; trigonometric polynomials of degree four to 1e-14."""


def raw_moments(moments: AreaMoments) -> Array:
    """Return A, ∫y, ∫z, ∫z², ∫y², ∫yz about the origin, shape (6, ...), of moments about their centroid."""
    A, y, z = moments.area, moments.y, moments.z
    return np.stack(
        (A, A * y, A * z, moments.zz + A * z * z, moments.yy + A * y * y, moments.yz + A * y * z),
    )


def at_stations(section: Composition, index: NDArray[np.intp]) -> Composition:
    """Return the section at some of its stations, which may be repeated; what is known of it goes along."""
    outlines = tuple(_rows(o, index) for o in section.outlines)
    chosen = Composition(outlines, tuple((_rows(o, index), t, m) for o, t, m in section.cuts))
    # relations hold at every station, and moments were computed once: a cached property is a plain entry
    chosen.__dict__["relations"] = section.relations
    chosen.__dict__["crossing"] = section.crossing
    chosen.__dict__["gross"] = section.gross.at((slice(None), index))
    chosen.__dict__["moments"] = section.moments.at((slice(None), index))
    return chosen


def moved(section: Composition, dy: float, dz: float) -> Composition:
    """Return the section shifted by (dy, dz) [m], with what is known of it."""
    shifted = Composition(
        tuple(o.moved(dy, dz) for o in section.outlines), tuple((o.moved(dy, dz), t, m) for o, t, m in section.cuts)
    )
    shifted.__dict__["relations"] = section.relations
    shifted.__dict__["crossing"] = section.crossing
    for name in ("gross", "moments"):
        m = getattr(section, name)
        shifted.__dict__[name] = AreaMoments(m.area, m.y + dy, m.z + dz, m.zz, m.yy, m.yz)
    return shifted


def _rows(outline: Outline, index: NDArray[np.intp]) -> Outline:
    return Outline(outline.y[index], outline.z[index], outline.bulge, outline.loops)


def clipped_moments(section: Composition, part: int, line: Array) -> Array:
    """Net moments of a part's region where line[0] + line[1] z + line[2] y < 0.

    Parameters
    ----------
    section : Composition
        The cross-section at S stations.
    part : int
        Which part; what later parts displace and cuts take away is left out.
    line : ndarray, shape (3, S)
        The linear function; where it is constant the part is there as a whole or not at all.

    Returns
    -------
    ndarray, shape (6, S)
        A, ∫y, ∫z, ∫z², ∫y², ∫yz about the origin.
    """
    if section.crossing:
        return _across_slabs(section, part, line)
    total = clipped_outline(section.outlines[part], line, raw_moments(section.gross.at(part)), section.boxes[part])
    count = len(section.outlines)
    for i, j in section.relations:
        if i == part:
            if j < count:
                whole = raw_moments(section.gross.at(j))
                total = total - clipped_outline(section.outlines[j], line, whole, section.boxes[j])
            else:
                total = total - clipped_outline(section.cuts[j - count][0], line)
    return total


def clipped_outline(outline: Outline, line: Array, whole: Array | None = None, box: Bounds | None = None) -> Array:
    """Moments of the region of an outline where a linear function is below zero.

    Parameters
    ----------
    outline : Outline
        Loops at S stations.
    line : ndarray, shape (3, S)
        line[0] + line[1] z + line[2] y.
    whole : ndarray, shape (6, S), optional
        Moments of the whole outline, where they are known already.
    box : Bounds, optional
        Its bounding box, where it is known already.

    Returns
    -------
    ndarray, shape (6, S)
        A, ∫y, ∫z, ∫z², ∫y², ∫yz about the origin.
    """
    c, s, level = _direction(line)
    box = box or Bounds.of(outline)
    # the box turned with the line tells of most stations whether they are cut at all
    low = np.minimum(s * box.left, s * box.right) + np.minimum(c * box.bottom, c * box.top)
    high = np.maximum(s * box.left, s * box.right) + np.maximum(c * box.bottom, c * box.top)
    result = np.zeros((6, level.size))
    inside = high <= level
    if whole is None:
        inside = np.zeros_like(inside)
    else:
        result[:, inside] = whole[:, inside]
    index = np.flatnonzero(~inside & (low < level))
    if index.size:
        found = _edges(_turned(_rows(outline, index), c[index], s[index]), np.minimum(level, high)[index])
        result[:, index] = _turned_back(found, c[index], s[index])
    return result


def _direction(line: Array) -> tuple[Array, Array, Array]:
    """Cosine and sine of the line's direction and its level t, where t < level is the wanted side."""
    steep = np.hypot(line[1], line[2])
    level = np.where(line[0] < 0.0, np.inf, -np.inf)
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        c, s = np.where(steep > 0.0, line[1] / steep, 1.0), np.where(steep > 0.0, line[2] / steep, 0.0)
        level = np.where(steep > 0.0, -line[0] / steep, level)
    return c, s, level


def _turned(outline: Outline, c: Array, s: Array) -> Outline:
    """Coordinates along (u) and square to (t) the line, as y and z of an outline."""
    c, s = c[:, None], s[:, None]
    return Outline(c * outline.y - s * outline.z, s * outline.y + c * outline.z, outline.bulge, outline.loops)


def _turned_back(m: Array, c: Array, s: Array) -> Array:
    A, u, t, tt, uu, ut = m
    return np.stack(
        (
            A,
            c * u + s * t,
            c * t - s * u,
            s * s * uu - 2.0 * c * s * ut + c * c * tt,
            c * c * uu + 2.0 * c * s * ut + s * s * tt,
            c * s * (tt - uu) + (c * c - s * s) * ut,
        )
    )


def _edges(outline: Outline, level: Array) -> Array:
    """Integrate every edge as far as it lies below the level, shape (6, S)."""
    result = np.zeros((6, level.size))
    straight, curved = np.flatnonzero(outline.bulge == 0.0), np.flatnonzero(outline.bulge)
    if straight.size:
        ends = outline.ends
        ua, ta, ub, tb = outline.y[:, straight], outline.z[:, straight], ends[0][:, straight], ends[1][:, straight]
        top = level[:, None]
        rise = np.where(tb == ta, 1.0, tb - ta)
        slope = (ub - ua) / rise
        a, b = np.minimum(ta, top), np.minimum(tb, top)
        t = a[..., None] + (b - a)[..., None] * _LINE[0]
        u = ua[..., None] + slope[..., None] * (t - ta[..., None])
        result += _green(u, t, (b - a)[..., None] * _LINE[1])
    if curved.size:
        result += _arcs(arcs(outline, curved), level)
    return result


def _arcs(arc: tuple[Array, Array, Array, Array, Array], level: Array) -> Array:
    """Integrate arcs as far as they lie below the level: at most four crossings part an arc."""
    u_c, t_c, radius, start, turn = arc
    low = np.mod(np.minimum(start, start + turn) + np.pi, 2.0 * np.pi) - np.pi
    high = low + np.abs(turn)
    sine = np.clip((level[:, None] - t_c) / radius, -1.0, 1.0)
    first = np.arcsin(sine)
    crossings = np.stack((-np.pi - first, first, np.pi - first, first + 2.0 * np.pi), axis=-1)
    borders = np.concatenate((low[..., None], np.clip(crossings, low[..., None], high[..., None])), axis=-1)
    borders = np.concatenate((borders, high[..., None]), axis=-1)
    half, middle = 0.5 * np.diff(borders, axis=-1), 0.5 * (borders[..., 1:] + borders[..., :-1])
    # what lies wholly above is left out; -1 and 1 of the sine mean all above and all below
    below = np.sin(middle) <= np.where(sine >= 1.0, 2.0, np.where(sine <= -1.0, -2.0, sine))[..., None]
    half = np.where(below, half, 0.0) * np.sign(turn)[..., None]
    angle = middle[..., None] + np.abs(half)[..., None] * _ARC[0]
    r = radius[..., None, None]
    u, t = u_c[..., None, None] + r * np.cos(angle), t_c[..., None, None] + r * np.sin(angle)
    weight = half[..., None] * _ARC[1] * r * np.cos(angle)
    shape = (level.size, -1, _ARC[0].size)
    return _green(u.reshape(shape), t.reshape(shape), weight.reshape(shape))


def _green(u: Array, t: Array, dt: Array) -> Array:
    half = 0.5 * u * u * dt
    terms = (u * dt, half, u * t * dt, u * t * t * dt, u * u * u / 3.0 * dt, half * t)
    return np.stack([term.sum(axis=(1, 2)) for term in terms])


def _across_slabs(section: Composition, part: int, line: Array) -> Array:
    """The same where outlines cross: slabs between events, square to the line, as far as they lie below it.

    What lies inside the part and apart from everything else taken off it, as bars do, needs no slabs.
    """
    reduced, alone = _reduced(section, part)
    c, s, level = _direction(line)
    shapes = [_turned(o, c, s) for o in (*reduced.outlines, *(cut[0] for cut in reduced.cuts))]
    p = pieces(shapes)
    edges = events(p, reduced.meeting)
    edges = np.minimum(edges, np.maximum(level, edges[:, 0])[:, None])
    found = slab_moments(p, edges, len(reduced.outlines), [cut[1] for cut in reduced.cuts])
    total = _turned_back(raw_moments(found.at(0)), c, s)
    for outline, whole, box in alone:
        total = total - clipped_outline(outline, line, whole, box)
    return total


def _reduced(section: Composition, part: int) -> tuple[Composition, list[tuple[Outline, Array, Bounds]]]:
    """A part with what crosses it, as the first of a section, and what lies inside it alone."""
    known: dict[int, tuple[Composition, list[tuple[Outline, Array, Bounds]]]]
    known = section.__dict__.setdefault("_reduced_parts", {})
    if part in known:
        return known[part]
    count = len(section.outlines)
    outlines = [*section.outlines, *(cut[0] for cut in section.cuts)]
    removers = [j for i, j in section.relations if i == part]
    alone = [
        j
        for j in removers
        if section.relations[part, j] == "inside"
        and all(relation(outlines[j], outlines[k]) == "apart" for k in removers if k != j)
    ]
    kept = [part, *(j for j in removers if j < count and j not in alone)]
    cuts = []
    for j, (outline, targets, mass) in enumerate(section.cuts, start=count):
        mine = tuple(kept.index(t) for t in targets if t in kept)
        if mine and j not in alone:
            cuts.append((outline, mine, mass))
    reduced = Composition(tuple(outlines[k] for k in kept), tuple(cuts))
    single = [(outlines[j], raw_moments(area_moments(outlines[j])), Bounds.of(outlines[j])) for j in alone]
    known[part] = reduced, single
    return known[part]
