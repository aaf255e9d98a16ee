"""Parts in the elevation: surfaces with their hatch, hidden edges dashed, holes, and numbers that name them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.cli.figures.letters import Box, apart
from fishbelly.cli.figures.looks import number_of, part_look
from fishbelly.cli.figures.paper import GREY, LINE, MEDIUM, THIN, text_width
from fishbelly.cli.figures.scene import Scene
from fishbelly.cli.figures.side_view import Hole, Stretch
from fishbelly.member.loads import Axial, Couple

Array = NDArray[np.float64]

TAGS = LINE + 1.6
"""Height of a row of numbers under the member [mm]."""
_MOST_ROWS = 5
_TOO_THIN = 0.5
"""Parts thinner than this on paper are drawn without a hatch [mm]."""
_DASHES = (0, (4.0, 2.0))


@dataclass(frozen=True)
class Tag:
    """The number of a part: inside it at (x, height) [mm], or in a row under the member, counted from the top."""

    part: int
    x: float
    height: float
    inside: bool
    row: int = 0


def draw(scene: Scene) -> None:
    """Draw all parts and holes, the nearest last."""
    view = scene.view
    order = sorted({(s.near, -s.part) for s in view.stretches}, reverse=True)
    rank = {key: 2.0 + 2.5 * k / max(len(order), 1) for k, key in enumerate(order)}
    top_of: dict[int, float] = {}
    for part in sorted({s.part for s in view.stretches}):
        for run in view.runs(part):
            level = max(rank[s.near, -s.part] for s in run)
            top_of[part] = max(top_of.get(part, 0.0), level)
            _surface(scene, run, level)
    for hole in view.holes:
        x, low, high = hole.x, scene.up(hole.low), scene.up(hole.high)
        level = max(top_of[p] for p in hole.parts) + 0.001
        if hole.through:
            scene.ax.fill_between(x, low, high, facecolor="white", edgecolor="white", lw=0.2, zorder=level)
        _hole_edges(scene, hole, low, high, level + 0.001)


def _surface(scene: Scene, run: list[Stretch], level: float) -> None:
    """Draw one part over adjoining stretches."""
    x = np.concatenate([s.x for s in run])
    low, high = (scene.up(np.concatenate([getattr(s, f) for s in run])) for f in ("low", "high"))
    look = part_look(run[0].part)
    ring_x, ring_z = np.concatenate((x, x[::-1])), np.concatenate((low, high[::-1]))
    thin = float((high - low).max()) < _TOO_THIN
    drawn = {"facecolor": ("0.3", "0.8")[run[0].part % 2]} if thin else look.drawn
    pen = THIN if thin else MEDIUM
    scene.ax.fill(ring_x, ring_z, edgecolor="black", lw=pen, zorder=level, joinstyle="miter", **drawn)
    for s in run:
        for line in s.lines:
            scene.ax.plot(s.x, scene.up(line), color="black", lw=THIN, zorder=level)
    if any(s.hidden for s in run):
        closed_x, closed_z = np.append(ring_x, ring_x[:1]), np.append(ring_z, ring_z[:1])
        scene.ax.plot(closed_x, closed_z, color="black", lw=MEDIUM, ls=_DASHES, zorder=5.0)


def _hole_edges(scene: Scene, hole: Hole, low: Array, high: Array, level: float) -> None:
    style = {"ls": "-", "zorder": level} if hole.seen else {"ls": _DASHES, "zorder": 5.0}
    x, tiny = hole.x, 1e-6 * scene.length
    for edge in (low, high):
        scene.ax.plot(x, edge, color="black", lw=MEDIUM, **style)
    others = [h for h in scene.view.holes if h.key == hole.key]
    for k, end in ((0, -1), (-1, 0)):
        joined = any(abs(float(h.x[end] - x[k])) < tiny for h in others)
        if not joined and high[k] - low[k] > 0.05:
            scene.ax.plot([x[k], x[k]], [low[k], high[k]], color="black", lw=MEDIUM, **style)


def tags(scene: Scene) -> tuple[Tag, ...]:
    """Choose where the number of each part stands: inside where there is room and nothing before it."""
    found: list[Tag] = []
    taken: list[Box] = [_around(scene, h.x, h.low, h.high) for h in scene.view.holes]
    taken += [Box(scene.mm(s.at) - 0.7, -1e3, scene.mm(s.at) + 0.7, 1e3) for s in scene.view.member.stations]
    taken += [
        Box(scene.mm(v.at) - 3.2, -1e3, scene.mm(v.at) + 3.2, 1e3)
        for v in scene.view.member.loads
        if isinstance(v, (Axial, Couple))
    ]
    outside: list[int] = []
    for part in sorted({s.part for s in scene.view.stretches}):
        spot = _inside(scene, part, taken)
        if spot is None:
            outside.append(part)
            continue
        found.append(Tag(part, spot[0], spot[1], True))
        half = 0.5 * text_width(number_of(scene.view.member, part)) + 0.8
        taken.append(Box(spot[0] - half, spot[1] - 0.5 * LINE, spot[0] + half, spot[1] + 0.5 * LINE))
    return (*found, *_below(scene, outside))


def _around(scene: Scene, x: Array, low: Array, high: Array) -> Box:
    bottom, top = float(scene.up(low).min()), float(scene.up(high).max())
    return Box(scene.mm(float(x[0])), bottom, scene.mm(float(x[-1])), top)


def _inside(scene: Scene, part: int, taken: list[Box]) -> tuple[float, float] | None:
    half = 0.5 * text_width(number_of(scene.view.member, part)) + 0.8
    stretches = [s for s in scene.view.stretches if s.part == part]
    others = [s for s in scene.view.stretches if s.part != part]
    start, end = stretches[0].x[0], stretches[-1].x[-1]
    for share in (0.5, 0.42, 0.58, 0.33, 0.67, 0.25, 0.75, 0.17, 0.83, 0.1, 0.9):
        x = float(start + share * (end - start))
        here = next((s for s in stretches if s.x[0] <= x <= s.x[-1]), None)
        if here is None:
            continue
        low, high = (float(scene.up(np.interp(x, here.x, v))) for v in (here.low, here.high))
        middle = scene.mm(x)
        box = Box(middle - half, 0.5 * (low + high) - 0.55 * LINE, middle + half, 0.5 * (low + high) + 0.55 * LINE)
        fits = high - low > 1.3 * LINE and scene.mm(float(start)) + half < middle < scene.mm(float(end)) - half
        if not fits or any(box.meets(b, 0.2) for b in taken):
            continue
        if any(_before(scene, here, o, box) for o in others):
            continue
        return middle, 0.5 * (low + high)
    return None


def _before(scene: Scene, one: Stretch, other: Stretch, box: Box) -> bool:
    """Whether another stretch covers a box of the first, or shares it without being behind."""
    if scene.mm(float(other.x[-1])) < box.left or scene.mm(float(other.x[0])) > box.right:
        return False
    if other.near > one.near + 1e-9:
        return False
    return bool(float(scene.up(other.low).min()) < box.top and float(scene.up(other.high).max()) > box.bottom)


def _below(scene: Scene, parts: list[int]) -> list[Tag]:
    """Spread numbers in a row under the member, each under a place where its part is."""
    if not parts:
        return []
    spans = {}
    for part in parts:
        stretches = [s for s in scene.view.stretches if s.part == part]
        spans[part] = scene.mm(float(stretches[0].x[0])), scene.mm(float(stretches[-1].x[-1]))
    wanted = []
    for part in parts:
        a, b = spans[part]
        alike = [p for p in parts if abs(sum(spans[p]) - a - b) < 8.0]
        wanted.append(a + (b - a) * (alike.index(part) + 1.0) / (len(alike) + 1.0))
    sizes = [text_width(number_of(scene.view.member, p)) + 1.6 for p in parts]
    for rows in range(1, _MOST_ROWS + 1):
        # neighbours stand in different rows, so that a line passes between those of the rows above
        middles = apart(wanted, [s / rows for s in sizes], 1.0, scene.width - 1.0, 0.8 / rows)
        if middles is not None:
            place = {p: k % rows for k, p in enumerate(sorted(parts, key=lambda p: middles[parts.index(p)]))}
            return [Tag(p, float(m), 0.0, False, place[p]) for p, m in zip(parts, middles, strict=True)]
    return []


def draw_tags(scene: Scene, chosen: tuple[Tag, ...], top: float) -> None:
    """Write the numbers; those in rows, of which the first ends at a height [mm], with a line to their part."""
    for tag in chosen:
        text = number_of(scene.view.member, tag.part)
        height = tag.height if tag.inside else top - 0.5 * TAGS - tag.row * TAGS
        if not tag.inside:
            x, z = _foot(scene, tag)
            line_x, line_z = scene.x(np.array([tag.x, tag.x, x])), [height + 0.5 * LINE, top, z]
            scene.ax.plot(line_x, line_z, color=GREY, lw=THIN, zorder=5.5, solid_capstyle="butt")
            scene.ax.plot([scene.x(x)], [z], "o", ms=1.6, color="black", mec="white", mew=0.3, zorder=5.6)
        ground = {"boxstyle": "round,pad=0.18", "facecolor": "white", "edgecolor": "black", "lw": THIN}
        scene.write(tag.x, height, text, zorder=6.5, bbox=ground)


def _foot(scene: Scene, tag: Tag) -> tuple[float, float]:
    """Return the place in a part that its number points at [mm]."""
    stretches = [s for s in scene.view.stretches if s.part == tag.part]
    a, b = scene.mm(float(stretches[0].x[0])), scene.mm(float(stretches[-1].x[-1]))
    inset = min(1.0, 0.25 * (b - a))
    x = min(max(tag.x, a + inset), b - inset)
    at = float(scene.x(x))
    here = min(stretches, key=lambda s: max(float(s.x[0]) - at, at - float(s.x[-1]), 0.0))
    x = scene.mm(min(max(at, float(here.x[0])), float(here.x[-1])))
    low, high = (float(scene.up(np.interp(at, here.x, v))) for v in (here.low, here.high))
    # in the lower part of the depth, so that the line is short, but clear of other parts' edges
    return x, low + 0.5 * min(high - low, 3.0)
