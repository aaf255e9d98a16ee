"""Second method, cross-section: parts cut into horizontal strips between corners, arc tops and crossings.

Within a strip the order of the edges along a level line does not change, so one level line through its middle
tells which part owns what lies between two edges; each edge is then integrated over the strip by itself.
Nothing here is shared with the first method's area moments.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.outlines import Outline

Array = NDArray[np.float64]
Index = NDArray[np.intp]

_LINE = np.polynomial.legendre.leggauss(3)
_ARC = np.polynomial.legendre.leggauss(14)
_SHORT_ARC = np.polynomial.legendre.leggauss(7)
_LARGEST = 2_000_000
"""Most entries (stations, strips, edges) worked on at once."""


@dataclass(frozen=True, eq=False)
class StripMoments:
    """Moments of P parts at S stations about a point of each station.

    Parameters
    ----------
    values : ndarray, shape (P, 6, S)
        Area, ∫y, ∫z, ∫y², ∫z², ∫yz [m2 to m4] of what is left of each part, about `about`.
    about : ndarray, shape (2, S)
        The point (y, z) [m].
    bottom, top : ndarray, shape (S,)
        Lowest and highest level at which anything is left [m].
    """

    values: Array
    about: Array
    bottom: Array
    top: Array


@dataclass(frozen=True, eq=False)
class _Edges:
    """Edges that climb or fall all their way; shape (S, E) but for `side` and `owner`, shape (E,).

    Straight: y = y0 + lean (z - z0). Curved: y = y0 + side sqrt(radius² - (z - z0)²). `climb`: +1 or -1.
    """

    low: Array
    high: Array
    left: Array
    right: Array
    y0: Array
    z0: Array
    lean: Array
    radius: Array
    climb: Array
    side: Array
    owner: Index


def strip_moments(
    outlines: Sequence[Outline],
    cuts: Sequence[tuple[Outline, tuple[int, ...]]],
    within: Mapping[int, int] | None = None,
) -> StripMoments:
    """Moments of parts of which later ones displace earlier ones, cuts taken off.

    Parameters
    ----------
    outlines : sequence of Outline
        The P parts, each at S stations.
    cuts : sequence of (Outline, tuple of int)
        What is taken away, and from which parts.
    within : mapping of int to int, optional
        Outlines that take over only what is owned, so far, by an outline before them.

    Returns
    -------
    StripMoments
    """
    boxes = np.array([o.bounds() for o in outlines])
    about = np.stack([0.5 * (boxes[:, k].min(axis=0) + boxes[:, k + 2].max(axis=0)) for k in (0, 1)])  # (2, S)
    moved = [o.moved(-about[0], -about[1]) for o in (*outlines, *(c[0] for c in cuts))]
    targets = [c[1] for c in cuts]
    edges = _edges(moved)
    levels = _levels(edges, len(moved))
    stations = about.shape[1]
    step = max(1, _LARGEST // max(1, levels.shape[1] * edges.owner.size))
    pieces = [
        _integrated(_rows(edges, slice(k, k + step)), levels[k : k + step], len(outlines), targets, within or {})
        for k in range(0, stations, step)
    ]
    values, bottom, top = (np.concatenate([p[k] for p in pieces], axis=-1) for k in range(3))
    return StripMoments(values, about, bottom + about[1], top + about[1])


def _rows(e: _Edges, rows: slice) -> _Edges:
    shaped = (e.low, e.high, e.left, e.right, e.y0, e.z0, e.lean, e.radius, e.climb)
    low, high, left, right, y0, z0, lean, radius, climb = (v[rows] for v in shaped)
    return _Edges(low, high, left, right, y0, z0, lean, radius, climb, e.side, e.owner)


def _edges(outlines: Sequence[Outline]) -> _Edges:
    fields: list[list[Array]] = []
    sides: list[Array] = []
    owners: list[Index] = []
    for k, outline in enumerate(outlines):
        for found, half in (_straight(outline), *_curved(outline)):
            keep = np.any(found[1] > found[0], axis=0)
            fields.append([v[:, keep] for v in found])
            sides.append(np.full(int(keep.sum()), half))
            owners.append(np.full(int(keep.sum()), k, dtype=np.intp))
    low, high, left, right, y0, z0, lean, radius, climb = (
        np.concatenate([f[j] for f in fields], axis=1) for j in range(9)
    )
    side, owner = np.concatenate(sides), np.concatenate(owners)
    return _Edges(low, high, left, right, y0, z0, lean, radius, climb, side, owner)


def _corners(outline: Outline, curved: bool) -> tuple[Array, Array, Array, Array, Array]:
    """Start and end points of the straight or curved edges, and their bulge."""
    following = np.arange(1, outline.bulge.size + 1)
    for first, stop in outline.loops:
        following[stop - 1] = first
    chosen = np.flatnonzero((outline.bulge != 0.0) == curved)
    after = following[chosen]
    y, z = outline.y, outline.z
    return y[:, chosen], z[:, chosen], y[:, after], z[:, after], outline.bulge[chosen]


def _straight(outline: Outline) -> tuple[list[Array], float]:
    ya, za, yb, zb, _ = _corners(outline, False)
    rise = zb - za
    lean = np.where(rise == 0.0, 0.0, (yb - ya) / np.where(rise == 0.0, 1.0, rise))
    low, high = np.minimum(za, zb), np.maximum(za, zb)
    left, right = np.minimum(ya, yb), np.maximum(ya, yb)
    return [low, high, left, right, ya, za, lean, np.zeros_like(ya), np.sign(rise)], 0.0


def _curved(outline: Outline) -> list[tuple[list[Array], float]]:
    """Arcs broken where they stand level or upright: halves to the right (+1) and to the left (-1)."""
    ya, za, yb, zb, bulge = _corners(outline, True)
    if not bulge.size:
        return []
    turn = 4.0 * np.arctan(bulge)
    # the centre lies on the normal of the chord, at half a chord times the cotangent of half the turn
    cot = 1.0 / np.tan(0.5 * turn)
    y0, z0 = 0.5 * (ya + yb) - 0.5 * (zb - za) * cot, 0.5 * (za + zb) + 0.5 * (yb - ya) * cot
    radius = 0.5 * np.hypot(yb - ya, zb - za) / np.abs(np.sin(0.5 * turn))
    start = np.arctan2(za - z0, ya - y0)
    first = np.where(turn > 0.0, start, start + turn)
    first = np.mod(first + 0.5 * np.pi, 2.0 * np.pi) - 0.5 * np.pi
    last = first + np.abs(turn)
    found = []
    for half in range(4):
        side = 1.0 if half % 2 == 0 else -1.0
        begin = np.maximum(first, (half - 0.5) * np.pi)
        end = np.minimum(last, (half + 0.5) * np.pi)
        there = (end > begin) & (radius > 0.0)
        a, b = z0 + radius * np.sin(begin), z0 + radius * np.sin(end)
        low, high = np.where(there, np.minimum(a, b), 0.0), np.where(there, np.maximum(a, b), 0.0)
        left, right = y0 - radius * (side < 0.0), y0 + radius * (side > 0.0)
        climb = side * np.sign(turn) * np.ones_like(y0)
        found.append(([low, high, left, right, y0, z0, np.zeros_like(y0), radius, climb], side))
    return found


def _levels(e: _Edges, outlines: int) -> Array:
    """Levels between which nothing begins, ends or crosses, sorted, shape (S, K + 1)."""
    real = e.high > e.low
    z = [np.where(real, e.low, np.nan), np.where(real, e.high, np.nan)]
    i, j = _meeting(e, outlines)
    if i.size:
        z.append(_crossings(e, i, j))
    levels = np.sort(np.concatenate(z, axis=1), axis=1)
    top, bottom = np.nanmax(levels, axis=1, keepdims=True), np.nanmin(levels, axis=1, keepdims=True)
    levels = np.where(np.isnan(levels), top, levels)
    new = np.any(np.diff(levels, axis=1) > 1e-15 * (top - bottom), axis=0)
    return np.asarray(levels[:, np.concatenate(([True], new))])


def _meeting(e: _Edges, outlines: int) -> tuple[Index, Index]:
    """Pairs of edges of different outlines whose boxes overlap at any station."""
    boxes = np.stack((e.low, e.high, e.left, e.right))
    lows = [e.owner == k for k in range(outlines)]
    pairs: list[tuple[Index, Index]] = []
    for a in range(outlines):
        for b in range(a):
            first, second = np.flatnonzero(lows[a]), np.flatnonzero(lows[b])
            i, j = (v.ravel() for v in np.meshgrid(first, second, indexing="ij"))
            p, q = boxes[:, :, i], boxes[:, :, j]
            meets = (p[0] < q[1]) & (q[0] < p[1]) & (p[2] <= q[3]) & (q[2] <= p[3])
            keep = np.any(meets, axis=0)
            pairs.append((i[keep], j[keep]))
    if not pairs:
        return np.empty(0, dtype=np.intp), np.empty(0, dtype=np.intp)
    return np.concatenate([p[0] for p in pairs]), np.concatenate([p[1] for p in pairs])


def _crossings(e: _Edges, i: Index, j: Index) -> Array:
    """Levels at which edges i and j cross; NaN where they do not."""
    bent_i, bent_j = e.side[i] != 0.0, e.side[j] != 0.0
    found: list[tuple[Index, Index, Array]] = []
    with np.errstate(divide="ignore", invalid="ignore"):
        both = ~bent_i & ~bent_j
        a, b = i[both], j[both]
        gap = e.y0[:, b] - e.lean[:, b] * e.z0[:, b] - e.y0[:, a] + e.lean[:, a] * e.z0[:, a]
        found.append((a, b, gap / (e.lean[:, a] - e.lean[:, b])))
        one = bent_i != bent_j
        line, arc = np.where(bent_i, j, i)[one], np.where(bent_i, i, j)[one]
        s = e.lean[:, line]
        k = e.y0[:, line] + s * (e.z0[:, arc] - e.z0[:, line]) - e.y0[:, arc]
        root = np.sqrt((1.0 + s * s) * e.radius[:, arc] ** 2 - k * k)
        for sign in (-1.0, 1.0):
            found.append((line, arc, e.z0[:, arc] + (sign * root - k * s) / (1.0 + s * s)))
        two = bent_i & bent_j
        a, b = i[two], j[two]
        dy, dz = e.y0[:, b] - e.y0[:, a], e.z0[:, b] - e.z0[:, a]
        apart = np.hypot(dy, dz)
        reach = 0.5 * (apart + (e.radius[:, a] ** 2 - e.radius[:, b] ** 2) / apart)
        off = np.sqrt(e.radius[:, a] ** 2 - reach**2)
        for sign in (-1.0, 1.0):
            found.append((a, b, e.z0[:, a] + (reach * dz + sign * off * dy) / apart))
    columns = []
    for a, b, z in found:
        low, high = np.maximum(e.low[:, a], e.low[:, b]), np.minimum(e.high[:, a], e.high[:, b])
        inside = (z > low) & (z < high)
        keep = np.any(inside, axis=0)
        columns.append(np.where(inside, z, np.nan)[:, keep])
    return np.concatenate(columns, axis=1)


def _integrated(
    e: _Edges, levels: Array, parts: int, targets: Sequence[tuple[int, ...]], within: Mapping[int, int]
) -> tuple[Array, Array, Array]:
    """Moments (P, 6, S), bottom and top (S,) of stations whose levels are given."""
    below, above = levels[:, :-1], levels[:, 1:]
    order, y, owner = _owned(e, 0.5 * (below + above), parts, targets, within)
    before = np.concatenate((np.full((*owner.shape[:2], 1), -1), owner[:, :, :-1]), axis=2)
    # only edges that part what is owned from what is not, or by another part, count
    s, k, place = np.nonzero((before != owner) & (above > below)[:, :, None])
    integrals = _edge_integrals(e, s, order[s, k, place], below[s, k], above[s, k])
    ends, starts = before[s, k, place], owner[s, k, place]
    values = np.zeros((parts, 6, levels.shape[0]))
    for part in range(parts):
        share = (ends == part).astype(float) - (starts == part)
        mine = np.flatnonzero(share)
        for m in range(6):
            values[part, m] = np.bincount(s[mine], share[mine] * integrals[m, mine], levels.shape[0])
    # something is left in a strip where any stretch of its level line is owned
    after = np.concatenate((y[:, :, 1:], y[:, :, -1:]), axis=2)
    height = (levels[:, -1:] - levels[:, :1])[:, :, None]
    with np.errstate(invalid="ignore"):
        stretch = np.where(np.isfinite(after), after - y, 0.0) > 1e-12 * height
    left = np.any((owner >= 0) & stretch, axis=2) & (above - below > 1e-13 * height[:, :, 0])
    bottom = np.where(left, below, np.inf).min(axis=1)
    top = np.where(left, above, -np.inf).max(axis=1)
    return values, bottom, top


def _owned(
    e: _Edges, z: Array, parts: int, targets: Sequence[tuple[int, ...]], within: Mapping[int, int]
) -> tuple[Index, Array, NDArray[np.int_]]:
    """Edges met by level lines from left to right, their y, and the part to the right of each (-1: none)."""
    dz = z[:, :, None] - e.z0[:, None, :]
    y = e.y0[:, None, :] + e.lean[:, None, :] * dz
    bent = np.flatnonzero(e.side)
    if bent.size:
        r, d = e.radius[:, None, bent], dz[:, :, bent]
        y[:, :, bent] += e.side[bent] * np.sqrt(np.maximum((r - d) * (r + d), 0.0))
    y = np.where((e.low[:, None, :] < z[:, :, None]) & (z[:, :, None] < e.high[:, None, :]), y, np.inf)
    order = np.argsort(y, axis=2, kind="stable")
    order = order[:, :, : max(1, int(np.isfinite(y).sum(axis=2).max(initial=0)))]
    y = np.take_along_axis(y, order, axis=2)
    climb = np.take_along_axis(np.broadcast_to(e.climb[:, None, :], (*z.shape, e.owner.size)), order, axis=2)
    # an outline is entered over an edge that falls and left over one that climbs
    enters = np.where(np.isfinite(y), -climb, 0.0)
    whose = e.owner[order]
    owner = np.full(y.shape, -1)
    for k in range(parts + len(targets)):
        inside = np.cumsum(np.where(whose == k, enters, 0.0), axis=2) > 0.5
        if k in within:
            owner[inside & (owner == within[k])] = k
        elif k < parts:
            owner[inside] = k
        else:
            owner[inside & np.isin(owner, targets[k - parts])] = -1
    return order, y, owner


def _edge_integrals(e: _Edges, station: Index, edge: Index, below: Array, above: Array) -> Array:
    """∫ y, y²/2, y z, y³/3, y z², y² z/2 dz of M edges, each over its strip, shape (6, M)."""
    result = np.empty((6, station.size))
    y0, z0, side = e.y0[station, edge], e.z0[station, edge], e.side[edge]
    flat = np.flatnonzero(side == 0.0)
    if flat.size:
        half = 0.5 * (above - below)[flat, None]
        z = 0.5 * (above + below)[flat, None] + half * _LINE[0]
        y = y0[flat, None] + e.lean[station, edge][flat, None] * (z - z0[flat, None])
        result[:, flat] = _powers(y, z, half * _LINE[1])
    bent = np.flatnonzero(side)
    if bent.size:
        r = e.radius[station, edge]
        a, b = (np.arcsin(np.clip((v[bent] - z0[bent]) / r[bent], -1.0, 1.0)) for v in (below, above))
        wide = np.abs(b - a) > 0.5
        for chosen, (points, weights) in ((wide, _ARC), (~wide, _SHORT_ARC)):
            at = bent[chosen]
            middle, half = 0.5 * (a + b)[chosen, None], 0.5 * (b - a)[chosen, None]
            angle = middle + half * points
            radius, cos = r[at, None], np.cos(angle)
            y = y0[at, None] + side[at, None] * radius * cos
            z = z0[at, None] + radius * np.sin(angle)
            result[:, at] = _powers(y, z, half * radius * cos * weights)
    return result


def _powers(y: Array, z: Array, dz: Array) -> Array:
    first = y * dz
    second = 0.5 * y * first
    terms = (first, second, z * first, y * second * (2.0 / 3.0), z * z * first, z * second)
    return np.stack([t.sum(axis=-1) for t in terms])
