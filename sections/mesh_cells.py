"""Elements of a section: which cell each covers, which points and sides it shares with its neighbours."""

from __future__ import annotations

from collections.abc import Hashable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.elements import (
    BESIDE,
    CORNER,
    FOOT,
    FOOT_SINGULAR,
    HEAD,
    HEAD_SINGULAR,
    ORDINARY,
)
from fishbelly.sections.mesh_lines import Block, Grid, Line
from fishbelly.sections.mesh_slabs import Curve

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Mesh:
    """N elements at T stations.

    Parameters
    ----------
    kind : ndarray of int, shape (N,)
        Kind of each element.
    part : ndarray of int, shape (N,)
        The part whose material it has.
    shares : ndarray, shape (2, N, T)
        Left and right end of its cell in shares of the block's width.
    heights : ndarray, shape (2, N)
        Bottom and top of its cell in heights of the slab, 0 to 1.
    left, right : ndarray of int, shape (N,)
        Curves on both sides of its block.
    curves : tuple of Curve
        All curves.
    corners : ndarray of int, shape (N, 4)
        Points at its corners (0, 0), (1, 0), (0, 1), (1, 1); a pointed one has its point twice.
    sides : ndarray of int, shape (N, 4)
        Sides y = 0, y = 1, x = 0, x = 1; -1 the side that is a point.
    piece : ndarray of int, shape (N,)
        Connected piece of the section it belongs to.
    touching : tuple of ndarray, shape (2, T)
        y and z of points at which pieces touch, or a piece itself, without a length in common [m].
    """

    kind: NDArray[np.intp]
    part: NDArray[np.intp]
    shares: Array
    heights: Array
    left: NDArray[np.intp]
    right: NDArray[np.intp]
    curves: tuple[Curve, ...]
    corners: NDArray[np.intp]
    sides: NDArray[np.intp]
    piece: NDArray[np.intp]
    touching: tuple[Array, ...]


class _Collector:
    """Gathers elements; points and sides get numbers by what they are."""

    def __init__(self) -> None:
        self.points: dict[Hashable, int] = {}
        self.edges: dict[Hashable, int] = {}
        self.rows: list[tuple[int, int, Array, Array, float, float, int, int]] = []
        self.corners: list[tuple[int, int, int, int]] = []
        self.sides: list[tuple[int, int, int, int]] = []
        self.curves: list[Curve] = []
        self.marks: set[int] = set()

    def point(self, key: Hashable) -> int:
        return self.points.setdefault(key, len(self.points))

    def edge(self, *key: Hashable) -> int:
        return self.edges.setdefault(key, len(self.edges))


def mesh(grid: Grid, singular: set[tuple[int, int]]) -> Mesh:
    """Elements of all cells of a grid.

    Parameters
    ----------
    grid : Grid
        Blocks, lines and rows, divided so that a cell has at most one singular corner.
    singular : set of (int, int)
        Singular points (level, number).
    """
    out = _Collector()
    for slab, blocks in enumerate(grid.blocks):
        base = len(out.curves)
        out.curves += grid.slabs[slab].curves
        for block in blocks:
            _block(out, grid, slab, block, base, singular)
    kind, part, left_share, right_share, low, high, left, right = zip(*out.rows, strict=True)
    corners, sides = np.array(out.corners), np.array(out.sides)
    piece = _pieces(sides)
    # pieces that touch at a point only do not share it
    _, apart = np.unique(piece[:, None] * len(out.points) + corners, return_inverse=True)
    return Mesh(
        np.array(kind),
        np.array(part),
        np.stack((np.stack(left_share), np.stack(right_share))),
        np.array((low, high)),
        np.array(left),
        np.array(right),
        tuple(out.curves),
        apart.reshape(corners.shape),
        sides,
        piece,
        _touching(out, grid, corners, sides),
    )


def _line_key(slab: int, block: Block, k: int) -> Hashable:
    """What a line is: the side of a block is shared with its neighbour."""
    if k == 0:
        return slab, block.curve
    if k == len(block.lines) - 1:
        return slab, block.curve + 1
    return slab, block.curve, k


def _block(out: _Collector, grid: Grid, slab: int, block: Block, base: int, singular: set[tuple[int, int]]) -> None:
    heights = grid.rows[slab][block.run]
    last = len(heights) - 2

    def vertex(line: Line, key: Hashable, row: int) -> int:
        if row == 0 or row == last + 1:
            name = (slab + (row > 0), line.top if row else line.bottom)
            number = out.point(name)
            if name in singular:
                out.marks.add(number)
            return number
        return out.point((key, row))

    for k in range(len(block.lines) - 1):
        a, b = block.lines[k], block.lines[k + 1]
        key_a, key_b = _line_key(slab, block, k), _line_key(slab, block, k + 1)
        for row in range(last + 1):
            points = [
                vertex(a, key_a, row),
                vertex(b, key_b, row),
                vertex(a, key_a, row + 1),
                vertex(b, key_b, row + 1),
            ]
            sides = [-1 if points[0] == points[1] else out.edge("level", *sorted(points[:2]))]
            sides += [-1 if points[2] == points[3] else out.edge("level", *sorted(points[2:]))]
            sides += [out.edge(key_a, row), out.edge(key_b, row)]
            cell = (
                block.part,
                a.share,
                b.share,
                heights[row],
                heights[row + 1],
                base + block.curve,
                base + block.curve + 1,
            )
            for kind, corners, edges in _elements(out, points, sides):
                out.rows.append((kind, *cell))
                out.corners.append(corners)
                out.sides.append(edges)


_Element = tuple[int, tuple[int, int, int, int], tuple[int, int, int, int]]


def _elements(out: _Collector, p: list[int], s: list[int]) -> list[_Element]:
    """Elements of a cell with corners (0,0), (1,0), (0,1), (1,1) and sides bottom, top, left, right."""
    marked = [k for k in range(4) if p[k] in out.marks]
    if s[0] == -1 or s[1] == -1:
        return [_three_sided(p, s, marked)]
    if not marked:
        return [(ORDINARY, (p[0], p[1], p[2], p[3]), (s[0], s[1], s[2], s[3]))]
    c = marked[0]
    beside, over, far = p[c ^ 1], p[c ^ 2], p[c ^ 3]
    diagonal = out.edge("diagonal", p[c], far, len(out.rows))
    level, other_level = (s[0], s[1]) if c < 2 else (s[1], s[0])
    upright, other_upright = (s[2], s[3]) if c % 2 == 0 else (s[3], s[2])
    return [
        (CORNER + 2 * c, (p[c], p[c], beside, far), (-1, other_upright, level, diagonal)),
        (CORNER + 2 * c + 1, (p[c], p[c], over, far), (-1, other_level, upright, diagonal)),
    ]


def _three_sided(p: list[int], s: list[int], marked: list[int]) -> _Element:
    """Element of a cell whose bottom or top is a point."""
    head = s[1] == -1
    point, left, right, level = (p[2], p[0], p[1], s[0]) if head else (p[0], p[2], p[3], s[1])
    if not marked or p[marked[0]] == point:
        kind = (FOOT, FOOT_SINGULAR, HEAD, HEAD_SINGULAR)[2 * head + bool(marked)]
        return kind, (point, point, left, right), (-1, level, s[2], s[3])
    at_right = marked[0] % 2
    corner, other = (right, left) if at_right else (left, right)
    near, far = (s[3], s[2]) if at_right else (s[2], s[3])
    return BESIDE + 2 * head + at_right, (corner, corner, point, other), (-1, far, near, level)


def _touching(out: _Collector, grid: Grid, corners: NDArray[np.intp], sides: NDArray[np.intp]) -> tuple[Array, ...]:
    """Points from which more than two free sides go out."""
    ends = corners[:, [[0, 1], [2, 3], [0, 2], [1, 3]]].reshape(-1, 2)
    flat = sides.ravel()
    there = flat >= 0
    used = np.bincount(flat[there], minlength=int(flat.max()) + 1)
    free = there & (used[np.where(there, flat, 0)] == 1)
    many = set(np.flatnonzero(np.bincount(ends[free].ravel()) > 2).tolist())
    found = []
    for key, number in out.points.items():
        # only points on a level, (level, number), can be such
        if number in many and isinstance(key, tuple) and isinstance(key[0], int):
            level, k = key
            slab, end = (level, 0) if level < len(grid.slabs) else (level - 1, 1)
            found.append(np.stack((grid.points[level][k], grid.slabs[slab].curves[0].z[end])))
    return tuple(found)


def _pieces(sides: NDArray[np.intp]) -> NDArray[np.intp]:
    """Number the sets of elements that hang together by their sides."""
    count = len(sides)
    owner = np.full(int(sides.max()) + 1, -1)
    parent = list(range(count))

    def root(i: int) -> int:
        while parent[i] != i:
            parent[i] = parent[parent[i]]
            i = parent[i]
        return i

    for e, row in enumerate(sides.tolist()):
        for side in row:
            if side < 0:
                continue
            if owner[side] >= 0:
                parent[root(e)] = root(int(owner[side]))
            owner[side] = e
    roots = np.array([root(e) for e in range(count)])
    return np.asarray(np.unique(roots, return_inverse=True)[1])
