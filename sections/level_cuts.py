"""Level cuts through the section: how wide each part is on a level line, who owns each stretch of it.

Outlines are broken into pieces that are single-valued over z; between two neighbouring *events* (corner
levels, tops of arcs, crossings of outlines) the order of the pieces along a level line does not change. A
later part displaces an earlier one; a cut takes its targets away. Zero-width stretches weigh nothing, so
outlines that touch or coincide need no care.
"""

from __future__ import annotations

from collections.abc import Collection, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.outlines import Outline, arcs

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Pieces:
    """Single-valued boundary pieces, all of shape (S, E) unless said.

    `low`, `high`: levels between which a piece runs; `sign`: +1 where the loop climbs (shape (E,)), -1 where
    it falls; straight pieces y = y0 + slope (z - z0); curved ones y = y0 + branch sqrt(r² - (z - z0)²), for
    which `branch` (shape (E,)) is +1 or -1, 0 for straight; `owner` (shape (E,)): which outline it bounds.
    """

    low: Array
    high: Array
    y0: Array
    z0: Array
    slope: Array
    radius: Array
    sign: Array
    branch: Array
    owner: NDArray[np.intp]

    def at(self, levels: Array) -> Array:
        """Return y of every piece at levels of shape (S, L): shape (S, L, E), meaningless where not active."""
        dz = levels[:, :, None] - self.z0[:, None, :]
        y = self.y0[:, None, :] + self.slope[:, None, :] * dz
        curved = np.flatnonzero(self.branch)
        if curved.size:
            r, d = self.radius[:, None, curved], dz[:, :, curved]
            root = np.sqrt(np.maximum((r - d) * (r + d), 0.0))
            y[:, :, curved] = self.y0[:, None, curved] + self.branch[curved] * root
        return np.asarray(y)

    def active(self, levels: Array) -> NDArray[np.bool_]:
        """Whether a piece is met by a level, shape (S, L, E)."""
        z = levels[:, :, None]
        return np.asarray((self.low[:, None, :] < z) & (z < self.high[:, None, :]))


def pieces(outlines: Sequence[Outline]) -> Pieces:
    """Break outlines into pieces that are single-valued over z; level edges are left out."""
    columns: list[tuple[Array, ...]] = []
    flags: list[tuple[float, float, int]] = []
    for k, outline in enumerate(outlines):
        ends_y, ends_z = outline.ends
        for e in range(outline.bulge.size):
            if outline.bulge[e] == 0.0:
                _straight(columns, flags, k, outline.y[:, e], outline.z[:, e], ends_y[:, e], ends_z[:, e])
        curved = np.flatnonzero(outline.bulge)
        if curved.size:
            _curved(columns, flags, k, arcs(outline, curved))
    stack = np.stack([np.stack(c) for c in columns], axis=-1)
    sign, branch, owner = (np.array(v) for v in zip(*flags, strict=True))
    low, high, y0, z0, slope, radius = stack
    return Pieces(low, high, y0, z0, slope, radius, sign.astype(float), branch.astype(float), owner.astype(np.intp))


def _straight(
    columns: list[tuple[Array, ...]],
    flags: list[tuple[float, float, int]],
    owner: int,
    ya: Array,
    za: Array,
    yb: Array,
    zb: Array,
) -> None:
    rise = zb - za
    climbs = rise > 0.0
    if not np.any(rise):
        return
    slope = np.where(rise == 0.0, 0.0, (yb - ya) / np.where(rise == 0.0, 1.0, rise))
    for sense, mask in ((1.0, climbs), (-1.0, rise < 0.0)):
        if np.any(mask):
            low = np.where(mask, np.minimum(za, zb), np.inf)
            columns.append((low, np.where(mask, np.maximum(za, zb), np.inf), ya, za, slope, np.zeros_like(ya)))
            flags.append((sense, 0.0, owner))


def _curved(
    columns: list[tuple[Array, ...]],
    flags: list[tuple[float, float, int]],
    owner: int,
    arc: tuple[Array, Array, Array, Array, Array],
) -> None:
    y_c, z_c, radius, start, turn = arc
    for e in range(radius.shape[1]):
        a, b = start[:, e], start[:, e] + turn[:, e]
        low, high = np.minimum(a, b), np.maximum(a, b)
        for branch, centre in ((1.0, 0.0), (-1.0, np.pi)):
            # the half circle of this branch, turned by whole circles to lie nearest the arc
            middle = centre + 2.0 * np.pi * np.round((0.5 * (low + high) - centre) / (2.0 * np.pi))
            first = np.maximum(low, middle - 0.5 * np.pi)
            last = np.minimum(high, middle + 0.5 * np.pi)
            there = last - first > 1e-12
            if not np.any(there):
                continue
            za, zb = z_c[:, e] + radius[:, e] * np.sin(first), z_c[:, e] + radius[:, e] * np.sin(last)
            columns.append(
                (
                    np.where(there, np.minimum(za, zb), np.inf),
                    np.where(there, np.maximum(za, zb), np.inf),
                    y_c[:, e],
                    z_c[:, e],
                    np.zeros_like(za),
                    radius[:, e],
                )
            )
            flags.append((branch * float(np.sign(turn[0, e])), branch, owner))


def events(p: Pieces, meeting: Collection[tuple[int, int]]) -> Array:
    """Levels at which anything begins, ends or crosses, sorted, shape (S, K).

    Parameters
    ----------
    p : Pieces
        Boundary pieces.
    meeting : collection of (int, int)
        Owners, the lower first, that may cross each other; an owner with itself where its copies overlap.
    """
    levels = [np.where(np.isfinite(p.low), p.low, np.nan), np.where(np.isfinite(p.high), p.high, np.nan)]
    if meeting:
        levels.append(_crossings(p, meeting))
    z = np.sort(np.concatenate(levels, axis=1), axis=1)
    top = np.nanmax(z, axis=1, keepdims=True)
    z = np.where(np.isnan(z), top, z)
    scale = np.maximum(top - z[:, :1], 1e-300)
    # levels closer than round-off are one; columns that are nowhere apart from their neighbour go
    apart = np.any(np.diff(z, axis=1) > 1e-13 * scale, axis=0)
    return np.asarray(z[:, np.concatenate(([True], apart))])


def _crossings(p: Pieces, meeting: Collection[tuple[int, int]]) -> Array:
    """Levels where pieces of outlines that may cross meet, NaN elsewhere, shape (S, C)."""
    i, j = np.triu_indices(p.owner.size, 1)
    allowed = np.zeros((p.owner.max() + 1,) * 2, dtype=bool)
    for a, b in meeting:
        allowed[a, b] = allowed[b, a] = True
    keep = allowed[p.owner[i], p.owner[j]]
    i, j = i[keep], j[keep]
    low, high = np.maximum(p.low[:, i], p.low[:, j]), np.minimum(p.high[:, i], p.high[:, j])
    keep = np.any(high > low, axis=0)
    i, j, low, high = i[keep], j[keep], low[:, keep], high[:, keep]
    straight = (p.branch[i] == 0.0) & (p.branch[j] == 0.0)
    found = [_line_line(p, i[straight], j[straight])]
    ranges = [(low[:, straight], high[:, straight])]
    mixed = (p.branch[i] == 0.0) != (p.branch[j] == 0.0)
    line = np.where(p.branch[i] == 0.0, i, j)[mixed]
    arc = np.where(p.branch[i] == 0.0, j, i)[mixed]
    both = (p.branch[i] != 0.0) & (p.branch[j] != 0.0)
    for roots in (*_line_arc(p, line, arc),):
        found.append(roots)
        ranges.append((low[:, mixed], high[:, mixed]))
    for roots in (*_arc_arc(p, i[both], j[both]),):
        found.append(roots)
        ranges.append((low[:, both], high[:, both]))
    z = np.concatenate(found, axis=1)
    lo, hi = (np.concatenate([r[k] for r in ranges], axis=1) for k in (0, 1))
    z = np.where((z > lo) & (z < hi), z, np.nan)
    return np.asarray(z[:, np.any(~np.isnan(z), axis=0)])


def _line_line(p: Pieces, i: NDArray[np.intp], j: NDArray[np.intp]) -> Array:
    with np.errstate(divide="ignore", invalid="ignore"):
        gap = p.y0[:, j] - p.slope[:, j] * p.z0[:, j] - p.y0[:, i] + p.slope[:, i] * p.z0[:, i]
        return np.asarray(gap / (p.slope[:, i] - p.slope[:, j]))


def _line_arc(p: Pieces, line: NDArray[np.intp], arc: NDArray[np.intp]) -> tuple[Array, Array]:
    m = p.slope[:, line]
    c = p.y0[:, line] + m * (p.z0[:, arc] - p.z0[:, line]) - p.y0[:, arc]
    with np.errstate(invalid="ignore"):
        root = np.sqrt((1.0 + m * m) * p.radius[:, arc] ** 2 - c * c)
        first, second = ((-m * c + s * root) / (1.0 + m * m) for s in (1.0, -1.0))
    return p.z0[:, arc] + first, p.z0[:, arc] + second


def _arc_arc(p: Pieces, i: NDArray[np.intp], j: NDArray[np.intp]) -> tuple[Array, Array]:
    dy, dz = p.y0[:, j] - p.y0[:, i], p.z0[:, j] - p.z0[:, i]
    d2 = dy * dy + dz * dz
    with np.errstate(divide="ignore", invalid="ignore"):
        along = (p.radius[:, i] ** 2 - p.radius[:, j] ** 2 + d2) / (2.0 * d2)
        across = np.sqrt(p.radius[:, i] ** 2 / d2 - along**2)
        first, second = (along * dz + s * across * dy for s in (1.0, -1.0))
    return p.z0[:, i] + first, p.z0[:, i] + second


@dataclass(frozen=True, eq=False)
class Widths:
    """What level lines meet, shape (P, S, K, n): width [m], ∫y dy [m2], ∫y² dy [m3], leftmost and rightmost y [m].

    Where a part is not met, width and integrals are zero and the extremes are NaN.
    """

    width: Array
    first: Array
    second: Array
    left: Array
    right: Array


def widths(p: Pieces, middle: Array, levels: Array, parts: int, targets: Sequence[Sequence[int]] = ()) -> Widths:
    """Widths of every part on level lines, later parts displacing earlier ones, cuts taken off.

    Parameters
    ----------
    p : Pieces
        Pieces of the parts' outlines (owners 0 .. parts-1), then of the cuts' outlines.
    middle : ndarray, shape (S, K)
        A level inside each slab between two events, where the order of the pieces is read [m].
    levels : ndarray, shape (S, K, n)
        Level lines of each slab [m].
    parts : int
        How many owners are parts.
    targets : sequence
        For each cut, the parts it is taken from.

    Returns
    -------
    Widths
    """
    order, last, met = owners(p, middle, parts, targets)
    y = np.where(met[..., None], _at(p, order, levels), 0.0)
    # the stretch to the right of the last piece is outside everything
    end = np.concatenate((y[:, :, 1:], y[:, :, -1:]), axis=2)
    return _collect(np.where(met, last, -1), y, end, parts)


def _at(p: Pieces, order: NDArray[np.intp], levels: Array) -> Array:
    """Return y of the pieces met in each slab, in their order, at its levels, shape (S, K, m, n)."""
    row = np.arange(order.shape[0])[:, None, None]
    y0, z0, slope, radius = (v[row, order][..., None] for v in (p.y0, p.z0, p.slope, p.radius))
    dz = levels[:, :, None, :] - z0
    branch = p.branch[order][..., None]
    root = np.sqrt(np.maximum((radius - dz) * (radius + dz), 0.0)) if np.any(p.branch) else 0.0
    return np.asarray(y0 + slope * dz + branch * root)


def owners(
    p: Pieces, levels: Array, parts: int, targets: Sequence[Sequence[int]]
) -> tuple[NDArray[np.intp], NDArray[np.int_], NDArray[np.bool_]]:
    """Order of the pieces along level lines, and who owns the stretch to the right of each.

    Returns
    -------
    order : ndarray of int, shape (S, L, m)
        Pieces from left to right, at most m of them met by any level.
    last : ndarray of int, shape (S, L, m)
        The part that owns what lies right of each; -1 nothing.
    met : ndarray of bool, shape (S, L, m)
        Whether the level meets so many pieces at all.
    """
    y = np.where(p.active(levels), p.at(levels), np.inf)
    order = np.argsort(y, axis=2, kind="stable")
    most = int(np.isfinite(y).sum(axis=2).max(initial=0))
    order = order[:, :, :most]
    met = np.isfinite(np.take_along_axis(y, order, axis=2))
    owner = p.owner[order]
    entering = np.where(met, -p.sign[order], 0.0)
    last = np.full(order.shape, -1)
    inside = []
    for k in range(parts + len(targets)):
        inside.append(np.cumsum(np.where(owner == k, entering, 0.0), axis=2) > 0.5)
        if k < parts:
            last[inside[k]] = k
    for c, hit in enumerate(targets):
        last[inside[parts + c] & np.isin(last, hit)] = -1
    return order, last, met


def _collect(last: NDArray[np.int_], y: Array, end: Array, parts: int) -> Widths:
    shape = (parts, *y.shape[:2], y.shape[3])
    out = [np.zeros(shape) for _ in range(3)]
    left, right = np.full(shape, np.inf), np.full(shape, -np.inf)
    for k in range(parts):
        mine = (last == k)[..., None] & (end > y)
        if not mine.any():
            continue
        a, b = np.where(mine, y, 0.0), np.where(mine, end, 0.0)
        out[0][k] = (b - a).sum(axis=2)
        out[1][k] = (0.5 * (b - a) * (a + b)).sum(axis=2)
        out[2][k] = ((b - a) * (a * a + a * b + b * b) / 3.0).sum(axis=2)
        left[k] = np.where(mine, y, np.inf).min(axis=2, initial=np.inf)
        right[k] = np.where(mine, end, -np.inf).max(axis=2, initial=-np.inf)
    left[~np.isfinite(left)] = np.nan
    right[~np.isfinite(right)] = np.nan
    return Widths(out[0], out[1], out[2], left, right)
