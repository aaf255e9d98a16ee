"""Where the mesh of a section is made finer: at corners near which shear strains have no smooth form.

Re-entrant corners and corners of interfaces make the solution behave like a fractional power of the distance. A
cell then touches one such corner at most, is about as long as wide there, and cells grow away from it until the
disturbance has died out, which takes about the thickness of the plate.
"""

from __future__ import annotations

import math
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.mesh_lines import Block, Grid, Line, corner_angles
from fishbelly.sections.mesh_necks import grade_necks

Array = NDArray[np.float64]

_DEGREE = np.pi / 180.0
_CLOSED = 1e-7
"""A gap of a smaller angle around a point is round-off [rad]."""


class Rule(NamedTuple):
    """How cells grow away from a point.

    Parameters
    ----------
    first : float
        Length of the first cell, in the least size there.
    longest : float
        Length of a cell at the point, in the least size there, from which on it is divided.
    growth : float
        Growth of the distances of further lines.
    """

    first: float
    longest: float
    growth: float


AT_CORNER = Rule(2.5, 4.0, 8.0)
AT_ARC = Rule(1.5, 2.3, 5.0)
"""Own trials: 1e-7 of the flexibility at degree 7, 1e-6 with arcs at degree 8; longer cells lose a digit or two."""
_TIE = 1.0 + 1e-7
"""So that lengths that are equal but for round-off decide alike."""
FADED = 1.5
"""Distance from a corner, in thicknesses, beyond which its disturbance has died out."""


def singular_points(grid: Grid, G: Array) -> set[tuple[int, int]]:
    """Points (level, number) near which the solution is not smooth.

    Parameters
    ----------
    grid : Grid
        Blocks with the points of the section itself.
    G : ndarray, shape (P,)
        Shear moduli at the deciding station [Pa].
    """
    found = set()
    for level, places in enumerate(grid.places):
        for number in range(len(places)):
            if _singular(corner_angles(grid, level, number), G):
                found.add((level, number))
    return found


def _singular(angles: list[tuple[float, int]], G: Array) -> bool:
    """Whether angles of several materials around a point make the solution singular there."""
    by_material: dict[float, float] = {}
    for angle, part in angles:
        by_material[float(G[part])] = by_material.get(float(G[part]), 0.0) + angle
    whole = sum(by_material.values())
    sharp = 3.0 * _DEGREE
    # material all around, or a gap however narrow
    closed = whole > 2.0 * np.pi - _CLOSED
    if len(by_material) == 1:
        re_entrant = np.pi + 5.0 * _DEGREE < whole and not closed
        return bool(re_entrant or 98.0 * _DEGREE < whole < 170.0 * _DEGREE)
    if len(by_material) == 2:
        one = next(iter(by_material.values()))
        straight = closed and abs(one - np.pi) < sharp
        square = abs(whole - np.pi) < sharp and abs(one - 0.5 * np.pi) < sharp
        # an interface along which one side runs out into nothing: a tangent point of an arc
        cusp = min(by_material.values()) < 1e-3 * _DEGREE and abs(whole - np.pi) < sharp
        return not (straight or square or cusp)
    return True


def arc_ends(grid: Grid) -> dict[tuple[int, int], float]:
    """Points (level, number) at which an arc ends, and its radius there, the least of several [m]."""
    found: dict[tuple[int, int], float] = {}
    for slab, blocks in enumerate(grid.blocks):
        for block in blocks:
            for line, number in ((block.lines[0], block.curve), (block.lines[-1], block.curve + 1)):
                curve = grid.slabs[slab].curves[number]
                if curve.bent:
                    radius = float(curve.radius[grid.station])
                    for point in ((slab, line.bottom), (slab + 1, line.top)):
                        found[point] = min(radius, found.get(point, radius))
    return found


def outer_corners(grid: Grid) -> dict[tuple[int, int], float]:
    """Points (level, number) at which the outline has a corner, with a radius without bound.

    Shear in one direction leaves them alone; twist makes the warping behave like r² log r there.
    """
    found = {}
    for level, places in enumerate(grid.places):
        for number in range(len(places)):
            whole = sum(angle for angle, _ in corner_angles(grid, level, number))
            if abs(whole - np.pi) > 3.0 * _DEGREE and abs(whole - 2.0 * np.pi) > 3.0 * _DEGREE:
                found[level, number] = math.inf
    return found


def grade(grid: Grid, corners: set[tuple[int, int]], twist: bool = False) -> None:
    """Divide the blocks around the corners until each cell has one corner at most and a good shape there.

    Around the ends of arcs cells are about as large as the radius, and grow from there; for twist, around the corners
    of the outline as large as the section is thick.
    """
    grade_necks(grid)
    # small radii first: their lines are the finer ones
    ends = {**(outer_corners(grid) if twist else {}), **arc_ends(grid)}
    ends = {point: radius for point, radius in ends.items() if point not in corners}
    for _ in range(4):
        before = _count(grid)
        for level, number in sorted(corners):
            _grade_at(grid, corners, level, number)
            grid.carry_on()
        for (level, number), radius in sorted(ends.items(), key=lambda item: (float(f"{item[1]:.9g}"), item[0])):
            _grade_end(grid, level, number, radius)
        _part_corners(grid, corners)
        grid.carry_on()
        if _count(grid) == before:
            return


def _grade_end(grid: Grid, level: int, number: int, radius: float) -> None:
    """Divide long cells at the end of an arc."""
    for step in range(2):
        for slab, end, block, k, j in _beside(grid, level, number):
            line, other = block.lines[k], block.lines[j]
            far = (other.bottom, other.top)[end]
            wide = abs(grid.places[level][far] - grid.places[level][number])
            rows = grid.rows[slab][block.run]
            length = _length(grid, slab, line)
            tall = (rows[1] if end == 0 else 1.0 - rows[-2]) * length
            if step == 0:
                first = min(radius, _span(grid, slab, end, block))
                if tall > _TIE * AT_ARC.longest * first:
                    _rows(grid, slab, end, block, AT_ARC, first, tall, length)
                continue
            first = min(radius, _thickness(grid, slab, block, line.at))
            if wide > _TIE * AT_ARC.longest * first:
                _columns(grid, slab, end, block, k, j, AT_ARC, first, wide)
                grid.carry_on()
                return _grade_end(grid, level, number, radius)
    return None


def _length(grid: Grid, slab: int, line: Line) -> float:
    """Length of a line through a slab, as the crow flies [m]."""
    return math.hypot(grid.places[slab + 1][line.top] - grid.places[slab][line.bottom], grid.height(slab))


def _span(grid: Grid, slab: int, end: int, block: Block) -> float:
    """Width of the run of a block at its bottom (0) or top (1) [m]."""
    run = [b for b in grid.blocks[slab] if b.run == block.run]
    first, last = run[0].lines[0], run[-1].lines[-1]
    places = grid.places[slab + end]
    return places[(last.bottom, last.top)[end]] - places[(first.bottom, first.top)[end]]


def _count(grid: Grid) -> int:
    lines = sum(len(b.lines) for blocks in grid.blocks for b in blocks)
    return lines + sum(len(rows) for runs in grid.rows for rows in runs)


def _beside(grid: Grid, level: int, number: int) -> list[tuple[int, int, Block, int, int]]:
    """Cells at a point that have a level edge there: slab, end, block, line at the point, line across the cell."""
    found = []
    for slab, end, block in grid.around(level):
        ids = [(line.bottom, line.top)[end] for line in block.lines]
        if number not in ids or ids[0] == ids[-1]:
            continue
        k = ids.index(number)
        found += [(slab, end, block, k, j) for j in (k - 1, k + 1) if 0 <= j < len(ids)]
    return found


def _grade_at(grid: Grid, corners: set[tuple[int, int]], level: int, number: int) -> None:
    cells = _beside(grid, level, number)
    if not cells:
        return
    here = grid.places[level][number]
    sizes = []
    for slab, end, block, k, j in cells:
        other = (block.lines[j].bottom, block.lines[j].top)[end]
        wide = abs(grid.places[level][other] - here) * (0.5 if (level, other) in corners else 1.0)
        rows = grid.rows[slab][block.run]
        step = rows[1] if end == 0 else 1.0 - rows[-2]
        line = block.lines[k]
        tall = step * _length(grid, slab, line) * (0.5 if _two_ended(corners, slab, line) and step == 1.0 else 1.0)
        sizes.append((wide, tall))
    least = min(min(s) for s in sizes)
    for (slab, end, block, k, j), (wide, tall) in zip(cells, sizes, strict=True):
        if tall > _TIE * AT_CORNER.longest * least:
            _rows(grid, slab, end, block, AT_CORNER, least, tall, _length(grid, slab, block.lines[k]))
        other = (block.lines[j].bottom, block.lines[j].top)[end]
        if wide > _TIE * AT_CORNER.longest * least:
            # carried on at once, so that the cell on the other side of the level finds the line
            _columns(grid, slab, end, block, k, j, AT_CORNER, least, wide)
            grid.carry_on()
            return _grade_at(grid, corners, level, number)
    return None


def _two_ended(corners: set[tuple[int, int]], slab: int, line: Line) -> bool:
    return (slab, line.bottom) in corners and (slab + 1, line.top) in corners


def _distances(rule: Rule, least: float, room: float, thickness: float) -> list[float]:
    """Distances from a corner at which lines are drawn, short of `room`."""
    found = [rule.first * least]
    while _TIE * found[-1] < FADED * thickness and _TIE * rule.growth * found[-1] < 0.7 * room:
        found.append(rule.growth * found[-1])
    return [d for d in found if _TIE * d < 0.75 * room] or [0.5 * room]


def _rows(grid: Grid, slab: int, end: int, block: Block, rule: Rule, least: float, tall: float, length: float) -> None:
    for d in _distances(rule, least, tall, _span(grid, slab, end, block)):
        share = d / length
        grid.add_row(slab, block.run, share if end == 0 else 1.0 - share, 0.4 * share)


def _columns(
    grid: Grid, slab: int, end: int, block: Block, k: int, j: int, rule: Rule, least: float, wide: float
) -> None:
    line, other = block.lines[k], block.lines[j]
    level = slab + end
    edge = grid.places[level][(block.lines[-1].bottom, block.lines[-1].top)[end]]
    edge -= grid.places[level][(block.lines[0].bottom, block.lines[0].top)[end]]
    for d in _distances(rule, least, wide, _thickness(grid, slab, block, line.at)):
        # keeps its share of the cell at all stations
        part = d / edge / abs(other.at - line.at)
        grid.add_line(slab, block, line.share + part * (other.share - line.share))


def _thickness(grid: Grid, slab: int, block: Block, share: float) -> float:
    """Height of the material above and below a place in a block, together with the block's own [m]."""
    total = grid.height(slab)
    a, b = grid.places[slab], grid.places[slab + 1]
    first, last = block.lines[0], block.lines[-1]
    ends = (
        (slab - 1, -1, 1, a[first.bottom] + share * (a[last.bottom] - a[first.bottom])),
        (slab + 1, 1, 0, b[first.top] + share * (b[last.top] - b[first.top])),
    )
    for k, step, end, y in ends:
        while 0 <= k < len(grid.slabs):
            places = grid.places[k + end]
            near = 1e-6 * grid.size
            spans = [
                ((x.lines[0].bottom, x.lines[-1].bottom), (x.lines[0].top, x.lines[-1].top))[end]
                for x in grid.blocks[k]
            ]
            if not any(places[i] - near <= y <= places[j] + near for i, j in spans):
                break
            total += grid.height(k)
            k += step
    return total


def _part_corners(grid: Grid, corners: set[tuple[int, int]]) -> None:
    """Divide cells that still have two such corners."""
    for slab, blocks in enumerate(grid.blocks):
        for block in blocks:
            rows = grid.rows[slab][block.run]
            for left, right in list(zip(block.lines, block.lines[1:], strict=False)):
                low = {(slab, left.bottom), (slab, right.bottom)} & corners
                high = {(slab + 1, left.top), (slab + 1, right.top)} & corners
                if len(low) > 1 or len(high) > 1:
                    grid.add_line(slab, block, 0.5 * (left.share + right.share))
                elif len(rows) == 2 and low and high:
                    grid.add_row(slab, block.run, 0.5, 1e-3)
