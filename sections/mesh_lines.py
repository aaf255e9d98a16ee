"""Lines that divide the slabs of a section into cells: points on the levels, columns through them, rows.

A point at which a block ends on a level divides the blocks above and below it; the dividing line runs through a
block at the same share of its width and goes on into the next one. So neighbouring cells meet edge to edge.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.mesh_slabs import Slab

Array = NDArray[np.float64]

_NEAR = 1e-8
"""Of the section's size: points on a level nearer than this are one."""


@dataclass
class Line:
    """A line through a block from its bottom to its top: share of the width, points at its ends."""

    share: Array
    at: float
    bottom: int
    top: int


@dataclass
class Block:
    """What stands between two neighbouring curves of a slab.

    Parameters
    ----------
    curve : int
        Index of its left curve in the slab.
    part : int
        The part whose material it is.
    run : int
        Number of the connected run of blocks it belongs to.
    lines : list of Line
        Its left side, the lines through it, its right side.
    """

    curve: int
    part: int
    run: int
    lines: list[Line]


@dataclass
class Grid:
    """Cells of a section at T stations while they are being laid out.

    Parameters
    ----------
    slabs : list of Slab
        From bottom to top.
    station : int
        The station by which decisions are taken.
    size : float
        Height and width of the section [m].
    points : list of list of ndarray, shape (T,)
        On each level the y of the points [m].
    places : list of list of float
        The same at the deciding station.
    blocks : list of list of Block
        Blocks of each slab.
    rows : list of list of list of float
        Of each run of each slab the heights, 0 to 1, at which it is divided, ends included.
    """

    slabs: list[Slab]
    station: int
    size: float
    points: list[list[Array]] = field(default_factory=list)
    places: list[list[float]] = field(default_factory=list)
    blocks: list[list[Block]] = field(default_factory=list)
    rows: list[list[list[float]]] = field(default_factory=list)
    waiting: list[tuple[int, int]] = field(default_factory=list)

    def point(self, level: int, y: Array) -> int:
        """Return the number of the point at y on a level; a new one waits to be carried on."""
        here = float(y[self.station])
        for k, other in enumerate(self.places[level]):
            if abs(other - here) <= _NEAR * self.size:
                return k
        self.points[level].append(y)
        self.places[level].append(here)
        self.waiting.append((level, len(self.places[level]) - 1))
        return len(self.places[level]) - 1

    def carry_on(self) -> None:
        """Divide the blocks above and below all waiting points, until no new point arises."""
        while self.waiting:
            level, number = self.waiting.pop()
            if level < len(self.slabs):
                self._divide(level, number, level, 0)
            if level > 0:
                self._divide(level, number, level - 1, 1)

    def _divide(self, level: int, number: int, slab: int, end: int) -> None:
        here = self.places[level][number]
        near = _NEAR * self.size
        for block in self.blocks[slab]:
            first, last = block.lines[0], block.lines[-1]
            a, b = ((first.bottom, last.bottom), (first.top, last.top))[end]
            if not self.places[level][a] + near < here < self.places[level][b] - near:
                continue
            if any((line.bottom, line.top)[end] == number for line in block.lines):
                return
            left, right = self.points[level][a], self.points[level][b]
            self.add_line(slab, block, (self.points[level][number] - left) / (right - left), number, end)
            return

    def add_line(self, slab: int, block: Block, share: Array, number: int = -1, end: int = -1) -> None:
        """Divide a block at a share of its width; one end may be a known point."""
        first, last = block.lines[0], block.lines[-1]
        ids = []
        for side, (a, b) in enumerate(((first.bottom, last.bottom), (first.top, last.top))):
            if side == end:
                ids.append(number)
            elif a == b:
                ids.append(a)
            else:
                left, right = self.points[slab + side][a], self.points[slab + side][b]
                ids.append(self.point(slab + side, left + share * (right - left)))
        at = float(share[self.station])
        if any(abs(line.at - at) <= 1e-7 for line in block.lines):
            return
        block.lines.append(Line(share, at, ids[0], ids[1]))
        block.lines.sort(key=lambda line: line.at)

    def add_row(self, slab: int, run: int, height: float, room: float) -> None:
        """Divide a run at a height, 0 to 1, unless it is divided within `room` of it."""
        rows = self.rows[slab][run]
        if all(abs(v - height) > room * (1.0 + 1e-7) for v in rows):
            rows.append(height)
            rows.sort()

    def around(self, level: int) -> Iterator[tuple[int, int, Block]]:
        """Blocks that stand on a level (end 0) and that hang below it (end 1): slab, end, block."""
        for slab, end in ((level, 0), (level - 1, 1)):
            if 0 <= slab < len(self.slabs):
                for block in self.blocks[slab]:
                    yield slab, end, block

    def height(self, slab: int) -> float:
        """Height of a slab at the deciding station [m]."""
        z = self.slabs[slab].curves[0].z
        return float(z[1, self.station] - z[0, self.station])


def lay_out(slabs: list[Slab], station: int, size: float) -> Grid:
    """Points at the ends of all curves, blocks between them, and every point carried on through the section."""
    grid = Grid(slabs, station, size)
    grid.points = [[] for _ in range(len(slabs) + 1)]
    grid.places = [[] for _ in range(len(slabs) + 1)]
    stations = np.ones(slabs[0].curves[0].y.shape[1])
    for k, slab in enumerate(slabs):
        ends = [(grid.point(k, c.y[0]), grid.point(k + 1, c.y[1])) for c in slab.curves]
        blocks: list[Block] = []
        run = -1
        for i, part in enumerate(slab.right):
            if part < 0:
                continue
            run += 0 if blocks and blocks[-1].curve == i - 1 else 1
            sides = [Line(0.0 * stations, 0.0, *ends[i]), Line(stations, 1.0, *ends[i + 1])]
            blocks.append(Block(i, part, run, sides))
        grid.blocks.append(blocks)
        grid.rows.append([[0.0, 1.0] for _ in range(run + 1)])
        for block in blocks:
            if all(getattr(block.lines[0], e) == getattr(block.lines[1], e) for e in ("bottom", "top")):
                grid.add_row(k, block.run, 0.5, 1e-3)
    return grid


def corner_angles(grid: Grid, level: int, number: int) -> list[tuple[float, int]]:
    """Angles of the blocks around a point and their parts [rad]."""
    here, near = grid.places[level][number], _NEAR * grid.size
    found = []
    for slab, end, block in grid.around(level):
        first, last = block.lines[0], block.lines[-1]
        a, b = ((first.bottom, last.bottom), (first.top, last.top))[end]
        if number not in (a, b) and not grid.places[level][a] + near < here < grid.places[level][b] - near:
            continue
        curves = grid.slabs[slab].curves
        left = curves[block.curve].direction(end, grid.station)
        right = curves[block.curve + 1].direction(end, grid.station)
        if end == 1:
            left, right = np.pi - left, np.pi - right
        if a == b:
            angle = left - right
        elif number == a:
            angle = left
        elif number == b:
            angle = np.pi - right
        else:
            angle = np.pi
        found.append((float(angle), block.part))
    return found
