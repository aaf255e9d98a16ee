"""Where the mesh of a section is made finer along narrow necks: thin ligaments beside holes, truncated wedges.

Where shear passes from a wide place into a narrow one its strain grows as the width falls: rows stand where the
width is some times that of the neck, so that it changes by that much at most within a cell.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.mesh_lines import Block, Grid
from fishbelly.sections.mesh_slabs import Curve

Array = NDArray[np.float64]

NARROW = 0.3
"""Share of the largest width of a block below which its least is a neck. Own trials: wider ones cost no digits."""
_STEP = 3.0
"""Ratio of the widths at neighbouring rows."""
_SHUT = 1e-6
"""Share of the largest width below which a block comes to a point."""
_HEIGHTS = np.linspace(0.0, 1.0, 201)


def grade_necks(grid: Grid) -> None:
    """Divide blocks with a neck into rows that crowd towards it."""
    for slab, blocks in enumerate(grid.blocks):
        for block in blocks:
            left, right = grid.slabs[slab].curves[block.curve], grid.slabs[slab].curves[block.curve + 1]
            if not (left.bent or right.bent) and not _tapers(grid, slab, block):
                continue
            width = _places(right, grid.station) - _places(left, grid.station)
            for height in _rows(width):
                grid.add_row(slab, block.run, height, 0.02)


def _tapers(grid: Grid, slab: int, block: Block) -> bool:
    """Whether a block with straight sides is a neck at one of its ends."""
    first, last = block.lines[0], block.lines[-1]
    low = grid.places[slab][last.bottom] - grid.places[slab][first.bottom]
    high = grid.places[slab + 1][last.top] - grid.places[slab + 1][first.top]
    return _SHUT * max(low, high) < min(low, high) < NARROW * max(low, high)


def _places(curve: Curve, station: int) -> Array:
    """Return y of a curve at heights of its slab [m]."""
    if curve.bent:
        start, end = curve.angle[:, station]
        return np.asarray(curve.centre_y[station] + curve.radius[station] * np.cos(start + _HEIGHTS * (end - start)))
    low, high = curve.y[:, station]
    return np.asarray(low + _HEIGHTS * (high - low))


def _rows(width: Array) -> list[float]:
    """Heights of the rows for the widths of a block."""
    k = int(width.argmin())
    least, most = width[k], width.max()
    if not _SHUT * most < least < NARROW * most:
        return []
    found = [float(_HEIGHTS[k])] if 0 < k < _HEIGHTS.size - 1 else []
    for side in (slice(k, None), slice(k, None, -1)):
        heights, widths = _HEIGHTS[side], np.maximum.accumulate(width[side])
        wanted = least * _STEP ** np.arange(1, 16)
        wanted = wanted[wanted < 0.7 * widths[-1]]
        found += np.interp(wanted, widths, heights).tolist()
    return found
