"""Meshes of a section, one for every set of stations that can share one, and what an element gives there.

A mesh holds all parts of one cluster; parts of different clusters share nothing even where they touch.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections import elements
from fishbelly.sections.composition import Composition
from fishbelly.sections.frontal import Front, fronts
from fishbelly.sections.mesh_cells import Mesh, mesh
from fishbelly.sections.mesh_grading import grade, singular_points
from fishbelly.sections.mesh_lines import Grid, lay_out
from fishbelly.sections.mesh_slabs import Cuts, alike, cuts, slabs

Array = NDArray[np.float64]
Index = NDArray[np.intp]


_APART = 1e-6
"""Of the section's size: parts whose bounding boxes lie further from each other do not touch."""
_AT_A_TIME = 400
"""Elements that are worked on together."""


class MeshFoldError(ValueError):
    """A section whose cells fold over themselves.

    Parameters
    ----------
    station : int
        Which station.
    """

    def __init__(self, station: int) -> None:
        super().__init__(f"the cross-section at station {station} cannot be divided into cells")
        self.station = station


@dataclass(frozen=True, eq=False)
class Shaped:
    """Elements of T stations in space, at the quadrature points.

    Parameters
    ----------
    y, z : ndarray, shape (N, T, q)
        Where the points are, from the middle of the section [m].
    area : ndarray, shape (N, T, q)
        Quadrature weight times area [m2].
    y_x, y_y, z_x, z_y : ndarray, shape (N, T, q)
        Derivatives of y and z by the local coordinates x, y.
    turn : ndarray, shape (N, T, q)
        Their determinant.
    folded : ndarray of bool, shape (T,)
        Stations at which an element folds over itself.
    """

    y: Array
    z: Array
    area: Array
    y_x: Array
    y_y: Array
    z_x: Array
    z_y: Array
    turn: Array
    folded: NDArray[np.bool_]


@dataclass(frozen=True, eq=False)
class SharedMesh:
    """One mesh for some stations.

    Parameters
    ----------
    rows : ndarray of int, shape (T,)
        The stations.
    mesh : Mesh
        Its elements.
    station : int
        Which of the T stations decided on it.
    orders : dict
        Orders of elimination found so far, by degree.
    """

    rows: Index
    mesh: Mesh
    station: int
    orders: dict[int, list[Front]] = field(default_factory=dict, repr=False)

    @property
    def few(self) -> bool:
        """Whether all its stations can be worked on together."""
        return len(self.rows) == 1 or len(self.rows) * len(self.mesh.kind) <= _AT_A_TIME

    def by_few(self) -> Iterator[tuple[SharedMesh, slice]]:
        """The same mesh for a few stations at a time, so that their matrices stay in the processor's cache."""
        count = max(1, _AT_A_TIME // len(self.mesh.kind))
        for first in range(0, len(self.rows), count):
            pick = slice(first, first + count)
            m = self.mesh
            curves = tuple(c.at(pick) for c in m.curves)
            touching = tuple(p[:, pick] for p in m.touching)
            part = replace(m, shares=m.shares[:, :, pick], curves=curves, touching=touching)
            few = SharedMesh(self.rows[pick], part, 0, self.orders)
            few.__dict__["middles"] = self.middles
            yield few, pick

    @cached_property
    def middles(self) -> Array:
        """A point inside each element at the deciding station, shape (N, 2) [m]."""
        s = shaped(self.mesh, 2, self.station)
        return np.stack((s.y[:, 0].mean(axis=1), s.z[:, 0].mean(axis=1)), axis=1)

    def unknowns(self, degree: int, held: NDArray[np.bool_] | None = None) -> Index:
        """Numbers of the unknowns on the rim of each element, shape (N, 4 degree).

        Points that are `held`, one of each piece if left out, have -1. A pointed element names its point in its
        first column and has -2 where it has no unknown.
        """
        m = self.mesh
        inner = np.arange(degree - 1)
        if held is None:
            held = np.zeros(int(m.corners.max()) + 1, dtype=bool)
            for piece in range(int(m.piece.max()) + 1):
                held[m.corners[m.piece == piece].max()] = True
        number = np.where(held, -1, np.cumsum(~held) - 1)
        base = int((~held).sum())
        ends = m.corners[:, [[0, 1], [2, 3], [0, 2], [1, 3]]]
        along = base + m.sides[:, :, None] * (degree - 1) + inner
        against = base + m.sides[:, :, None] * (degree - 1) + inner[::-1]
        sides = np.where((ends[:, :, :1] < ends[:, :, 1:]), along, against)
        sides = np.where(m.sides[:, :, None] < 0, -2, sides)
        corners = number[m.corners]
        corners[m.kind != elements.ORDINARY, 1] = -2
        whole = np.concatenate((corners, sides.reshape(len(m.kind), -1)), axis=1)
        # numbers without gaps
        there = whole >= 0
        _, compact = np.unique(whole[there], return_inverse=True)
        whole[there] = compact
        return whole

    def order(self, degree: int, unknowns: Index) -> list[Front]:
        """Order of elimination of all its unknowns at a degree."""
        if degree not in self.orders:
            self.orders[degree] = fronts(unknowns, self.middles)
        return self.orders[degree]


def shared_meshes(
    section: Composition, E: Array, G: Array, clusters: Sequence[int] | None, twist: bool = False
) -> Iterator[SharedMesh]:
    """Meshes of all clusters for all stations, each for the stations that can share it.

    Parameters
    ----------
    section : Composition
        Parts and cuts at S stations.
    E, G : ndarray, shape (P, S)
        Moduli [Pa].
    clusters : sequence of int, optional
        Cluster of each part; all in one if left out.
    twist : bool
        Whether the mesh is for torsion, which disturbs the corners of the outline too.
    """
    c = cuts(section)
    numbers = _apart(section, float(c.size.max()), [0] * len(section.outlines) if clusters is None else clusters)
    for rows in alike(c):
        for number in sorted(set(numbers)):
            waiting = rows
            while waiting.size:
                made, waiting = _for_stations(c, waiting, E, G, [n == number for n in numbers], twist)
                if made is not None:
                    yield made


def _apart(section: Composition, size: float, clusters: Sequence[int]) -> list[int]:
    """Number the parts so that those of different clusters, and those that lie apart at all stations, differ.

    Parts that lie apart need not know of each other's levels: each set has a mesh of its own.
    """
    boxes = np.stack([np.stack(o.bounds()) for o in section.outlines])
    near = _APART * size
    meet = np.ones((len(boxes), len(boxes)), dtype=bool)
    for low, high in ((0, 2), (1, 3)):
        meet &= np.any(boxes[:, None, low] <= boxes[None, :, high] + near, axis=2)
    number = np.arange(len(boxes))
    meet &= meet.T & (np.equal.outer(clusters, clusters))
    while True:
        least = np.where(meet, number, len(boxes)).min(axis=1)
        if np.array_equal(least, number):
            return [int(n) for n in number]
        number = least


def _for_stations(
    c: Cuts, rows: Index, E: Array, G: Array, mine: Sequence[bool], twist: bool
) -> tuple[SharedMesh | None, Index]:
    """Return the mesh of the middle station for all stations it fits, and the others."""
    material = []
    for i, own in enumerate(mine):
        twins = (j for j in range(i + 1) if mine[j] and np.all((E[i] == E[j]) & (G[i] == G[j])))
        material.append(next(twins) if own else -1)
    found = slabs(c, rows, material)
    if not found:
        return None, rows[:0]
    station = len(rows) // 2
    grid = lay_out(found, station, float(c.size[rows[station]]))
    corners = singular_points(grid, G[:, rows[station]])
    grid.carry_on()
    grade(grid, corners, twist)
    fits = _fits(grid)
    if not np.all(fits):
        # the others get a mesh of their own
        made, none = _for_stations(c, rows[fits], E, G, mine, twist)
        return made, np.concatenate((rows[~fits], none))
    return SharedMesh(rows, mesh(grid, corners), station), rows[:0]


def _fits(grid: Grid) -> NDArray[np.bool_]:
    """At which stations the lines of a grid keep their order and the points that are one stay one, shape (T,)."""
    stations = len(grid.slabs[0].curves[0].y[0])
    fits = np.ones(stations, dtype=bool)
    if stations == 1:
        return fits
    near = 1e-7 * grid.size
    for k, slab in enumerate(grid.slabs):
        for block in grid.blocks[k]:
            shares = np.array([line.share for line in block.lines])
            fits &= np.all(np.diff(shares, axis=0) > 1e-9, axis=0)
            for side, curve in (
                (block.lines[0], slab.curves[block.curve]),
                (block.lines[-1], slab.curves[block.curve + 1]),
            ):
                for end, number in ((0, side.bottom), (1, side.top)):
                    fits &= np.abs(grid.points[k + end][number] - curve.y[end]) <= near
    fits[grid.station] = True
    return fits


def shaped(m: Mesh, degree: int, only: int | None = None) -> Shaped:
    """Shape of the elements at their quadrature points, at all stations or at one."""
    pick = slice(None) if only is None else slice(only, only + 1)
    y, z, y_x, y_y, z_x, z_y = mapped(m, *elements.places(degree), pick)
    turn = y_x * z_y - y_y * z_x
    way = np.where(turn.sum(axis=(1, 2)) < 0.0, -1.0, 1.0)[:, None, None]
    w = elements.basis(degree).weights
    area = np.outer(w, w).ravel() * (way * turn)
    return Shaped(y, z, area, y_x, y_y, z_x, z_y, turn, np.any(area <= 0.0, axis=(0, 2)))


def mapped(m: Mesh, uv: Array, slopes: Array, pick: slice) -> tuple[Array, Array, Array, Array, Array, Array]:
    """Return y and z of places given for every kind of element, and their derivatives by x and y, each (N, T, q)."""
    uv, slopes = uv[m.kind], slopes[m.kind]
    u0, wide = m.shares[0][:, pick, None], (m.shares[1] - m.shares[0])[:, pick, None]
    v0, tall = m.heights[0][:, None], (m.heights[1] - m.heights[0])[:, None]
    u, v = u0 + wide * uv[:, None, 0], (v0 + tall * uv[:, 1])
    u_x, u_y = wide * slopes[:, None, 0, 0], wide * slopes[:, None, 0, 1]
    v_x, v_y = (tall * slopes[:, 1, 0])[:, None], (tall * slopes[:, 1, 1])[:, None]
    yl, zl, dyl, dzl = _along(m, m.left, v, pick)
    yr, zr, dyr, dzr = _along(m, m.right, v, pick)
    y, z = yl + u * (yr - yl), zl + u * (zr - zl)
    y_v, z_v = dyl + u * (dyr - dyl), dzl + u * (dzr - dzl)
    y_x, y_y = (yr - yl) * u_x + y_v * v_x, (yr - yl) * u_y + y_v * v_y
    z_x, z_y = (zr - zl) * u_x + z_v * v_x, (zr - zl) * u_y + z_v * v_y
    return y, z, y_x, y_y, z_x, z_y


def _along(m: Mesh, which: Index, v: Array, pick: slice) -> tuple[Array, Array, Array, Array]:
    """y, z and their derivatives on curves of the elements at heights v of shape (N, q); each (N, T, q)."""
    ends_y = np.stack([c.y[:, pick] for c in m.curves])[which]
    ends_z = np.stack([c.z[:, pick] for c in m.curves])[which]
    v = v[:, None, :]
    dy, dz = (e[:, 1] - e[:, 0] for e in (ends_y, ends_z))
    y, z = ends_y[:, 0, :, None] + v * dy[..., None], ends_z[:, 0, :, None] + v * dz[..., None]
    y_v, z_v = np.broadcast_to(dy[..., None], y.shape), np.broadcast_to(dz[..., None], y.shape)
    bent = np.array([c.bent for c in m.curves])[which]
    if np.any(bent):
        y_v, z_v = y_v.copy(), z_v.copy()
        some = which[bent]
        angle = np.stack([c.angle[:, pick] for c in m.curves])[some]
        radius = np.stack([c.radius[pick] for c in m.curves])[some][..., None]
        turn = (angle[:, 1] - angle[:, 0])[..., None]
        a = angle[:, 0, :, None] + v[bent] * turn
        cos, sin = radius * np.cos(a), radius * np.sin(a)
        y[bent] = np.stack([c.centre_y[pick] for c in m.curves])[some][..., None] + cos
        z[bent] = np.stack([c.centre_z[pick] for c in m.curves])[some][..., None] + sin
        y_v[bent], z_v[bent] = -turn * sin, turn * cos
    return y, z, y_v, z_v
