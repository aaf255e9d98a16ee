"""The cross-section at one place: parts with their fills, dimensions, centroid, principal axes, datum line."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

import numpy as np

from fishbelly.cli.figures import section_dimensions
from fishbelly.cli.figures.letters import apart, shortened
from fishbelly.cli.figures.looks import number_of, part_look
from fishbelly.cli.figures.paper import (
    GREY,
    LINE,
    MEDIUM,
    RIGHT,
    THIN,
    WIDTH,
    in_millimetres,
    own_panel,
    pens,
)
from fishbelly.cli.figures.section_shapes import part_shapes
from fishbelly.cli.figures.sheet_of_section import Sheet, scales
from fishbelly.cli.figures.supports import white
from fishbelly.cli.figures.ticks import place
from fishbelly.member.breakpoints import geometry_breaks
from fishbelly.member.description import Member

MARGIN_LEFT = 6.0
"""Left edge of the drawing [mm]."""
DIMENSIONS, BESIDE, CHAIN = 9.0, 14.0, 13.0
"""Bands for the overall depth, for labels of axes, for the chain of depths [mm]."""
TOP, FOOT = 5.5, 9.0
"""Bands over and under the cross-section [mm]."""
TALLEST = 78.0
"""Most that a cross-section takes in height [mm]."""
_TAG = 6.0
_MOST_COLUMNS = 4
_AXIS = (0, (8, 1.6, 1.2, 1.6))
_DATUM = (0, (5, 1.5, 1, 1.5, 1, 1.5))


def bounds(shapes: Sequence[tuple[int, Any]]) -> tuple[float, float, float, float]:
    """Left, bottom, right and top of all shapes [m]."""
    boxes = np.array([shape.bounds for _, shape in shapes])
    return (
        float(boxes[:, 0].min()),
        float(boxes[:, 1].min()),
        float(boxes[:, 2].max()),
        float(boxes[:, 3].max()),
    )


def sheet(shapes: Sequence[tuple[int, Any]], width: float, tallest: float = TALLEST) -> Sheet:
    """Choose scale and height of the axes for a cross-section; `width` of the axes in mm."""
    box = bounds(shapes)
    tags = _columns(len(shapes), tallest) * _TAG
    wide = width - DIMENSIONS - tags - BESIDE - CHAIN
    by_y, by_z = scales(box, wide, tallest)
    drawn, need = (box[3] - box[1]) * by_z, min(len(shapes) / _columns(len(shapes), tallest) * (LINE + 1.2), tallest)
    inside = max(drawn, need, 12.0)
    left = DIMENSIONS + tags + 0.5 * (wide - (box[2] - box[0]) * by_y)
    return Sheet(width, inside + TOP + FOOT, box[0], box[1], left, FOOT + 0.5 * (inside - drawn), by_y, by_z, box)


def _columns(count: int, tallest: float) -> int:
    return max(1, min(_MOST_COLUMNS, int(np.ceil(count * (LINE + 1.6) / tallest))))


def plot(job: Any, data: Mapping[str, Any], ax: Any = None) -> Any:
    """Draw a cross-section.

    Parameters
    ----------
    job : Job
        The job.
    data : mapping
        Results of `fishbelly section`.
    ax : Axes, optional
        Where to draw; default axes of a new figure.

    Returns
    -------
    Axes
        Both directions in mm of paper.
    """
    with pens():
        shapes = part_shapes(job.member, data["x"], data["side"], data.get("stage"))
        if ax is None:
            ax = own_panel(sheet(shapes, WIDTH - MARGIN_LEFT - RIGHT).height, left=MARGIN_LEFT, foot=2.0)
        width, height = in_millimetres(ax)
        paper = sheet(shapes, width, max(height - TOP - FOOT, 6.0))
        side = f", {data['side']} side" if _at_break(job.member, data["x"]) else ""
        head = f"Cross-section at x = {place(data['x'], job.member.length, job.style)}{side}{paper.words}"
        ax.text(0.0, height + 0.8, shortened(head, width), ha="left", va="bottom", clip_on=False)
        for index, shape in shapes:
            _surface(ax, paper, shape, index)
        _numbers(ax, paper, job.member, shapes)
        _axes(ax, paper, data)
        section_dimensions.draw(ax, paper, shapes, job.style)
    return ax


def _at_break(member: Member, x: float) -> bool:
    """Whether the cross-section may differ on the two sides of x."""
    tiny = 1e-9 * member.length
    return tiny < x < member.length - tiny and any(abs(b - x) < tiny for b in geometry_breaks(member))


def _surface(ax: Any, paper: Sheet, shape: Any, index: int) -> None:
    from matplotlib.patches import PathPatch
    from matplotlib.path import Path

    look = part_look(index)
    for piece in getattr(shape, "geoms", (shape,)):
        rings = [np.array(r.coords) for r in (piece.exterior, *piece.interiors)]
        points = [np.column_stack((paper.across(r[:, 0]), paper.up(r[:, 1]))) for r in rings]
        codes = [np.array([Path.MOVETO, *[Path.LINETO] * (len(r) - 2), Path.CLOSEPOLY], dtype=np.uint8) for r in rings]
        path = Path(np.concatenate(points), np.concatenate(codes))
        thin = min(np.ptp(points[0], axis=0)) < 0.5
        drawn = {"facecolor": "0.3"} if thin else look.drawn
        ax.add_patch(
            PathPatch(path, edgecolor="black", lw=THIN if thin else MEDIUM, zorder=3, joinstyle="miter", **drawn)
        )


def _numbers(ax: Any, paper: Sheet, member: Member, shapes: Sequence[tuple[int, Any]]) -> None:
    """Write the numbers of the parts in columns on the left, with a line to each part."""
    feet = [_foot(paper, shape) for _, shape in shapes]
    columns = _columns(len(shapes), paper.height - TOP - FOOT)
    middles = apart([f[1] for f in feet], [(LINE + 1.2) / columns] * len(feet), 1.0, paper.height - 1.0, 0.4 / columns)
    if middles is None:
        return
    order = np.argsort(middles, kind="stable")
    for k, which in enumerate(order):
        index, foot, height = shapes[which][0], feet[which], float(middles[which])
        x = DIMENSIONS + _TAG * (columns - (k % columns)) - 3.0
        ax.plot([x, foot[0], foot[0]], [height, foot[1], foot[1]], color=GREY, lw=THIN, zorder=4)
        ax.plot([foot[0]], [foot[1]], "o", ms=1.8, color="black", mec="white", mew=0.4, zorder=5)
        ground = {"boxstyle": "round,pad=0.18", "facecolor": "white", "edgecolor": "black", "lw": THIN}
        ax.text(x, height, number_of(member, index), ha="center", va="center", zorder=6, bbox=ground)


def _foot(paper: Sheet, shape: Any) -> tuple[float, float]:
    """Return the point of a part that its number points at [mm]: in its leftmost piece, off mid-height."""
    from shapely.geometry import LineString

    piece = min(getattr(shape, "geoms", (shape,)), key=lambda g: (round(g.bounds[0], 9), -g.area))
    left, bottom, right, top = piece.bounds
    share = 0.64 if (top - bottom) * paper.by_z > 8.0 else 0.5
    for z in (bottom + share * (top - bottom), piece.representative_point().y):
        level = LineString([(left - 1.0, z), (right + 1.0, z)]).intersection(piece)
        cuts = sorted(g.bounds[0::2] for g in getattr(level, "geoms", (level,)) if not g.is_empty)
        if cuts:
            break
    first, last = cuts[0]
    inset = min(1.5 / paper.by_y, 0.5 * (last - first))
    return float(paper.across(first + inset)), float(paper.up(z))


def _axes(ax: Any, paper: Sheet, data: Mapping[str, Any]) -> None:
    """Draw the centroid, the principal axes and the datum line, each named beside the section."""
    y, z = float(paper.across(data["y_c"])), float(paper.up(data["z_c"]))
    left, right = float(paper.across(paper.box[0])) - 3.0, float(paper.across(paper.box[2])) + 3.0
    bottom, top = float(paper.up(paper.box[1])) - 2.0, float(paper.up(paper.box[3])) + 2.5
    principal = data.get("principal") or {}
    big, small, angle = (principal.get(k) for k in ("EI_1", "EI_2", "angle"))
    even = big is None or small is None or big - small <= 1e-9 * big
    turn = 0.0 if even or angle is None else float(angle)
    names = ("", "") if even else ("axis 1", "axis 2")
    labels = []
    for k, direction in enumerate((turn, turn + 0.5 * np.pi)):
        ends = _across_box(paper, y, z, direction, (left, bottom, right, top))
        ax.plot(ends[:, 0], ends[:, 1], color="black", lw=THIN, ls=_AXIS, zorder=5)
        tip = ends[np.argmax(ends[:, 0] + 0.2 * ends[:, 1])]
        if names[k] and tip[0] >= right - 0.1:
            labels.append((float(tip[1]), names[k]))
        elif names[k]:
            upper = ends[np.argmax(ends[:, 1])]
            ax.text(upper[0], upper[1] + 0.3, names[k], ha="center", va="bottom", zorder=8)
    _cross(ax, y, z)
    datum = float(paper.up(0.0))
    if bottom - 1.0 <= datum <= top + 1.0:
        ax.plot([left, right + 1.0], [datum, datum], color=GREY, lw=MEDIUM, ls=_DATUM, zorder=5)
        labels.append((datum, "datum"))
    middles = apart([v for v, _ in labels], [LINE] * len(labels), 0.0, paper.height, 0.2)
    for (_, text), height in zip(labels, middles if middles is not None else (), strict=False):
        ax.text(right + 1.4, float(height), text, ha="left", va="center", zorder=8, bbox=white())


def _across_box(paper: Sheet, y: float, z: float, direction: float, box: tuple[float, float, float, float]) -> Any:
    """Ends of a line through the centroid where it leaves a box [mm]."""
    step = np.array([np.cos(direction) * paper.by_y, np.sin(direction) * paper.by_z])
    step /= np.hypot(*step)
    ends = []
    for sign in (-1.0, 1.0):
        reach = np.inf
        for k, (low, high) in enumerate(((box[0], box[2]), (box[1], box[3]))):
            go = sign * step[k]
            if abs(go) > 1e-9:
                reach = min(reach, ((high if go > 0.0 else low) - (y, z)[k]) / go)
        ends.append((y + sign * step[0] * reach, z + sign * step[1] * reach))
    return np.array(ends)


def _cross(ax: Any, y: float, z: float) -> None:
    """Draw the mark of the centroid: a circle with two dark quarters."""
    from matplotlib.patches import Circle, Wedge

    ax.add_patch(Circle((y, z), 1.3, facecolor="white", edgecolor="black", lw=MEDIUM, zorder=7))
    for start in (0.0, 180.0):
        ax.add_patch(Wedge((y, z), 1.3, start, start + 90.0, facecolor="black", edgecolor="none", zorder=7.1))
