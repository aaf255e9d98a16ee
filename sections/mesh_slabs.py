"""The section cut into slabs between its events, equal materials merged: the first step of its mesh.

In each slab the material stands between curves that run from its bottom level to its top level: straight lines
or arcs of circles. Interfaces between equal materials and events at which nothing changes are dropped, so that a
part drawn in two pieces is meshed like one.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.composition import Composition
from fishbelly.sections.level_cuts import Pieces, events, owners

Array = NDArray[np.float64]

_FLAT = 1e-10
"""Of the section's size: slabs lower and stretches narrower than this are none."""


@dataclass(frozen=True, eq=False)
class Curve:
    """Side of a block over its slab, at T stations: a line, or an arc run through by its angle.

    Parameters
    ----------
    y, z : ndarray, shape (2, T)
        Its bottom and top end [m].
    centre_y, centre_z, radius : ndarray, shape (T,)
        Of an arc [m].
    angle : ndarray, shape (2, T)
        Angles of the ends of an arc, from the +y axis [rad].
    bent : bool
        Whether it is an arc.
    """

    y: Array
    z: Array
    centre_y: Array
    centre_z: Array
    radius: Array
    angle: Array
    bent: bool

    def at(self, pick: slice) -> Curve:
        """Return the curve at some of the stations."""
        centre = self.centre_y[pick], self.centre_z[pick], self.radius[pick]
        return Curve(self.y[:, pick], self.z[:, pick], *centre, self.angle[:, pick], self.bent)

    def direction(self, end: int, station: int) -> float:
        """Angle of the upward tangent at the bottom (0) or top (1) end, 0 to pi [rad]."""
        if self.bent:
            a = float(self.angle[end, station])
            turn = float(self.angle[1, station]) - float(self.angle[0, station])
            return float(np.mod(a + np.copysign(0.5 * np.pi, turn) + 1e-9, 2.0 * np.pi)) - 1e-9
        y, z = self.y[:, station], self.z[:, station]
        return float(np.arctan2(z[1] - z[0], y[1] - y[0]))


@dataclass(frozen=True, eq=False)
class Slab:
    """One slab at T stations: curves from left to right, and what lies right of each.

    Parameters
    ----------
    curves : tuple of Curve
        The boundaries between materials.
    right : tuple of int
        The part whose material lies right of each curve; -1 nothing.
    """

    curves: tuple[Curve, ...]
    right: tuple[int, ...]


@dataclass(frozen=True, eq=False)
class Cuts:
    """Order and owners of the boundary pieces of a section in every slab, for S stations.

    Parameters
    ----------
    pieces : Pieces
        The boundary pieces.
    edges : ndarray, shape (S, K + 1)
        Levels of the events [m].
    order, last : ndarray of int, shape (S, K, m)
        Pieces from left to right; the part right of each, -1 nothing.
    same : ndarray of bool, shape (S, K, m)
        Whether a piece lies on the next one.
    met : ndarray of bool, shape (S, K, m)
        Whether there is such a piece in a slab of some height.
    size : ndarray, shape (S,)
        Height and width of the section together [m].
    middle_y, middle_z : ndarray, shape (S,)
        Middle of the section, from which the mesh counts [m].
    """

    pieces: Pieces
    edges: Array
    order: NDArray[np.intp]
    last: NDArray[np.int_]
    same: NDArray[np.bool_]
    met: NDArray[np.bool_]
    size: Array
    middle_y: Array
    middle_z: Array


def cuts(section: Composition) -> Cuts:
    """Cut a section between its events and find who owns each stretch."""
    p = section.pieces
    edges = events(p, section.meeting)
    middle = 0.5 * (edges[:, 1:] + edges[:, :-1])
    order, last, met = owners(p, middle, len(section.outlines), [c[1] for c in section.cuts])
    y = np.take_along_axis(p.at(middle), order, axis=2)
    left, right = np.where(met, y, np.inf).min(axis=(1, 2)), np.where(met, y, -np.inf).max(axis=(1, 2))
    size = edges[:, -1] - edges[:, 0] + right - left
    flat = (edges[:, 1:] - edges[:, :-1]) <= _FLAT * size[:, None]
    met = met & ~flat[:, :, None]
    after = np.concatenate((y[:, :, 1:], np.full((*y.shape[:2], 1), np.inf)), axis=2)
    same = met & np.concatenate((met[:, :, 1:], np.zeros_like(met[:, :, :1])), axis=2)
    same &= np.where(same, after - y, np.inf) <= _FLAT * size[:, None, None]
    last = np.where(met, last, -1)
    order = np.where(met, order, 0)
    return Cuts(p, edges, order, last, same, met, size, 0.5 * (left + right), 0.5 * (edges[:, -1] + edges[:, 0]))


def alike(c: Cuts) -> Iterator[NDArray[np.intp]]:
    """Groups of stations whose slabs hold the same pieces in the same order."""
    count = c.edges.shape[0]
    if count == 1:
        yield np.array([0])
        return
    flat = (c.edges[:, 1:] - c.edges[:, :-1]) > _FLAT * c.size[:, None]
    keys = (c.order, c.last, c.same, c.met, flat)
    rows = np.hstack([np.reshape(k, (count, -1)).astype(np.int32) for k in keys])
    _, which = np.unique(rows, axis=0, return_inverse=True)
    which = np.ravel(which)
    for g in range(int(which.max()) + 1):
        yield np.flatnonzero(which == g)


def slabs(c: Cuts, rows: NDArray[np.intp], material: Sequence[int]) -> list[Slab]:
    """Slabs of stations that are alike.

    Parameters
    ----------
    c : Cuts
        The section's cuts.
    rows : ndarray of int, shape (T,)
        Stations that are alike.
    material : sequence of int
        For every part the first part of the same material, or -1 to leave it out.

    Returns
    -------
    list of Slab
        From bottom to top, right of a curve the first part of its material; coordinates from the section's middle.
    """
    first = rows[0]
    tall = np.flatnonzero(c.edges[first, 1:] - c.edges[first, :-1] > _FLAT * c.size[first])
    twin = _twins(c, rows)
    found: list[tuple[int, int, tuple[tuple[int, int], ...]]] = []
    for k in tall:
        stretches = tuple(_stretches(c, first, int(k), material, twin))
        if found and found[-1][2] == stretches:
            found[-1] = (found[-1][0], int(k), stretches)
        else:
            found.append((int(k), int(k), stretches))
    while found and not found[0][2]:
        found.pop(0)
    while found and not found[-1][2]:
        found.pop()
    result = []
    for low, high, stretches in found:
        z = np.stack((c.edges[rows, low], c.edges[rows, high + 1]))
        result.append(Slab(tuple(_curve(c, rows, e, z) for e, _ in stretches), tuple(m for _, m in stretches)))
    return result


def _stretches(c: Cuts, row: int, k: int, material: Sequence[int], twin: NDArray[np.intp]) -> Iterator[tuple[int, int]]:
    """Pieces at which the material changes and what lies right of them, in one slab at one station."""
    now, piece = -1, -1
    for i in range(c.order.shape[2]):
        if not c.met[row, k, i]:
            return
        here = int(twin[c.order[row, k, i]])
        piece = here if piece < 0 else min(piece, here)
        if c.same[row, k, i]:
            continue
        part = int(c.last[row, k, i])
        new = material[part] if part >= 0 else -1
        if new != now:
            yield piece, new
            now = new
        piece = -1


def _twins(c: Cuts, rows: NDArray[np.intp]) -> NDArray[np.intp]:
    """For every piece the first one that lies on the same line or circle at all stations."""
    p = c.pieces
    low, high = p.low[rows], p.high[rows]
    there = np.isfinite(low)
    low, high = np.where(there, low, 0.0), np.where(there, high, 0.0)
    near = 1e-11 * c.size[rows][:, None, None]
    y0, z0, slope, radius = (v[rows] for v in (p.y0, p.z0, p.slope, p.radius))

    def off(z: Array) -> Array:
        # y of piece i (last axis) at an end of piece j, against y of piece j there
        y = y0[:, None, :] + slope[:, None, :] * (z[:, :, None] - z0[:, None, :])
        return np.asarray(np.abs(y - np.diagonal(y, axis1=1, axis2=2)[:, :, None]))

    line = (off(low) <= near) & (off(high) <= near)
    circle = (np.abs(y0[:, :, None] - y0[:, None, :]) <= near) & (np.abs(z0[:, :, None] - z0[:, None, :]) <= near)
    circle &= np.abs(radius[:, :, None] - radius[:, None, :]) <= near
    curved = p.branch != 0.0
    equal = np.where(curved[:, None], circle, line) & (p.branch[:, None] == p.branch)
    equal &= there[:, :, None] == there[:, None, :]
    every = equal.all(axis=0)
    every |= np.eye(every.shape[0], dtype=bool)
    return np.asarray(every.argmax(axis=1))


def _curve(c: Cuts, rows: NDArray[np.intp], e: int, z: Array) -> Curve:
    """Piece e between two levels z of shape (2, T)."""
    p = c.pieces
    y0, z0, radius = p.y0[rows, e], p.z0[rows, e], p.radius[rows, e]
    move_y, move_z = c.middle_y[rows], c.middle_z[rows]
    branch = float(p.branch[e])
    if branch == 0.0:
        y = y0 + p.slope[rows, e] * (z - z0)
        return Curve(y - move_y, z - move_z, y0, z0, radius, np.zeros_like(z), False)
    sine = (z - z0) / radius
    # the arcsine loses half the digits near the top of a circle: what is level there is taken as the top itself
    sine = np.where(np.abs(sine) > 1.0 - 1e-12, np.sign(sine), sine)
    rise = np.arcsin(np.clip(sine, -1.0, 1.0))
    angle = rise if branch > 0.0 else np.pi - rise
    y = y0 + radius * np.cos(angle)
    return Curve(y - move_y, z - move_z, y0 - move_y, z0 - move_z, radius, angle, True)
