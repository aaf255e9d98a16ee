"""Loads in the elevation: blocks, arrows, couples; what cannot be drawn is said in words."""

from __future__ import annotations

from collections.abc import Collection, Sequence
from dataclasses import dataclass

import numpy as np

from fishbelly.cli.figures.letters import apart, one_line, shortened
from fishbelly.cli.figures.paper import GREY, LINE, MEDIUM, THIN, text_width
from fishbelly.cli.figures.scene import Scene
from fishbelly.cli.figures.ticks import place, value
from fishbelly.member.description import Member
from fishbelly.member.loads import (
    Axial,
    Couple,
    Distributed,
    Load,
    Point,
    Prestress,
    SelfWeight,
    Shrinkage,
    Temperature,
)

BLOCK = 4.6
"""Height of the largest block of a line load [mm]."""
ROW = BLOCK + LINE + 1.4
"""Height of a row of blocks with their labels [mm]."""
ARROW = 6.5
"""Length of the arrow of a point load [mm]."""
_MOST_ROWS = 6
_ABOVE = 6


@dataclass(frozen=True, eq=False)
class LoadPlan:
    """What is drawn where.

    Parameters
    ----------
    blocks : tuple of (Distributed, int)
        Line loads and their rows, counted from the member upwards.
    rows : int
        How many rows of blocks.
    points : tuple
        Loads that act at one place.
    words : str
        What is not drawn.
    """

    blocks: tuple[tuple[Distributed, int], ...]
    rows: int
    points: tuple[Point | Couple | Axial, ...]
    words: str

    @property
    def height(self) -> float:
        """Room over the member [mm]."""
        return self.rows * ROW + (ARROW + LINE + 2.5 if self.points else 0.0)


def plan(member: Member, style: str, width: float, cases: Collection[str] | None = None) -> LoadPlan:
    """Choose rows for the loads of some cases (None: of all); `width` is that of the member on paper [mm]."""
    loads = [v for v in member.loads if cases is None or v.case in cases]
    ends: list[float] = []
    blocks, left_out = [], 0
    for load in (v for v in loads if isinstance(v, Distributed)):
        start, end = _reach(load, member, style, width)
        row = next((k for k, e in enumerate(ends) if e + 1.5 <= start), len(ends))
        if row >= _MOST_ROWS:
            left_out += 1
            continue
        if row == len(ends):
            ends.append(end)
        ends[row] = end
        blocks.append((load, row))
    points = tuple(v for v in loads if isinstance(v, (Point, Couple, Axial)))
    words = [_said(v, member, style) for v in loads if not isinstance(v, (Point, Couple, Axial, Distributed))]
    if left_out:
        words.append(f"{left_out} more line loads")
    return LoadPlan(tuple(blocks), len(ends), points, "; ".join(dict.fromkeys(words)))


def _reach(load: Distributed, member: Member, style: str, width: float) -> tuple[float, float]:
    """Room of a block along the paper, label included, from the member's left end [mm]."""
    a, b = (x / member.length * width for x in (load.stations[0][0], load.stations[-1][0]))
    half = 0.5 * min(text_width(_block_words(load, style)), width)
    middle = min(max(0.5 * (a + b), half), width - half)
    return min(a, middle - half), max(b, middle + half)


def _block_words(load: Distributed, style: str) -> str:
    values = [v for _, v in load.stations]
    if max(values) <= 0.0:
        # the arrows show which way
        values = [-v for v in values]
    low, high = min(values), max(values)
    text = value(high, "force per length", style)
    if high - low > 1e-9 * max(abs(low), abs(high)):
        number = value(low, "force per length", style, scale=max(abs(low), abs(high))).split(" ")[0]
        text = f"{number} to {text}"
    if load.direction == "across":
        text += " across"
    if load.per:
        text += f" per {load.per}" + (" length" if load.per == "plan" else "")
    return _with_case(text, load.case)


def _with_case(text: str, case: str) -> str:
    return text if case == "load" else f"{text}, {shortened(case, 30.0)}"


def _said(load: Load, member: Member, style: str) -> str:
    def reach(start: float, end: float) -> str:
        if start <= 0.0 and end >= member.length:
            return ""
        return f" from {place(start, member.length, style)} to {place(end, member.length, style)}"

    if isinstance(load, SelfWeight):
        text = "self weight" + (f" × {load.factor:g}" if load.factor != 1.0 else "")
    elif isinstance(load, Temperature):
        if load.parts is not None:
            rises = ", ".join(f"{one_line(n)} {value(v, 'temperature', style)}" for n, v in load.parts.items())
            text = f"temperature {rises}"
        else:
            ends = (value(load.top, "temperature", style), value(load.bottom, "temperature", style))
            text = f"temperature {ends[0]} at the top, {ends[1]} at the bottom"
        text += reach(load.start, load.end)
    elif isinstance(load, Shrinkage):
        text = f"shrinkage {load.strain:g} of {one_line(load.part)}{reach(load.start, load.end)}"
    else:
        assert isinstance(load, Prestress)
        size = value(load.force, "force", style) if load.force is not None else f"strain {load.strain:g}"
        text = f"prestress {size} in {one_line(load.part)}"
    return text if load.case == "load" else f"{text} (case {shortened(load.case, 30.0)})"


def draw(scene: Scene, planned: LoadPlan, base: float) -> None:
    """Draw loads over a height [mm] of the paper: loads at a place first, rows of blocks over them."""
    if planned.points:
        _points(scene, planned.points, base)
        base += ARROW + LINE + 2.5
    largest = max((abs(v) for b, _ in planned.blocks for _, v in b.stations), default=0.0)
    for load, row in planned.blocks:
        _block(scene, load, base + row * ROW + 0.6, largest)


def _block(scene: Scene, load: Distributed, base: float, largest: float) -> None:
    x = np.array([s[0] for s in load.stations])
    v = np.array([s[1] for s in load.stations])
    height = np.where(v == 0.0, 0.0, 1.4 + (BLOCK - 1.4) * np.abs(v) / (largest or 1.0))
    scene.ax.fill(
        np.concatenate((x[:1], x, x[-1:])),
        base + np.concatenate(([0.0], height, [0.0])),
        facecolor="none" if load.direction != "across" else "0.9",
        edgecolor="black",
        lw=MEDIUM,
        zorder=_ABOVE,
    )
    a, b = scene.mm(float(x[0])), scene.mm(float(x[-1]))
    if load.direction != "across":
        count = max(2, round((b - a) / 6.0) + 1)
        for mm in np.linspace(a, b, count):
            at = float(scene.x(mm))
            tall, push = float(np.interp(at, x, height)), float(np.interp(at, x, v))
            if tall > 1.3 and push:
                _arrow(scene, mm, base + tall, mm, base, (push > 0.0) == (load.direction == "down"), THIN)
    text = shortened(_block_words(load, scene.style), scene.width)
    half = 0.5 * text_width(text)
    middle = min(max(0.5 * (a + b), half), scene.width - half)
    scene.write(middle, base + float(height.max()) + 0.5 * LINE + 0.2, text)


def _arrow(scene: Scene, x0: float, y0: float, x1: float, y1: float, forward: bool, pen: float = MEDIUM) -> None:
    """Draw an arrow from (x0, y0) to (x1, y1) [mm], or the other way."""
    if not forward:
        x0, y0, x1, y1 = x1, y1, x0, y0
    scene.ax.plot(scene.x(np.array([x0, x1])), [y0, y1], color="black", lw=pen, zorder=_ABOVE, solid_capstyle="butt")
    along = np.array([x1 - x0, y1 - y0]) / max(np.hypot(x1 - x0, y1 - y0), 1e-9)
    aside = np.array([-along[1], along[0]])
    size = 1.5 if pen > THIN else 1.0
    tip = np.array([x1, y1])
    corners = np.array([tip, tip - size * along + 0.32 * size * aside, tip - size * along - 0.32 * size * aside])
    scene.ax.fill(scene.x(corners[:, 0]), corners[:, 1], facecolor="black", edgecolor="none", zorder=_ABOVE)


def _points(scene: Scene, loads: Sequence[Point | Couple | Axial], base: float) -> None:
    top = base + ARROW
    ordered = sorted(loads, key=lambda v: v.at)
    for load in ordered:
        x = scene.mm(load.at)
        low, high = scene.edges(load.at)
        if isinstance(load, Couple):
            _turn(scene, x, 0.5 * (low + high), load.value > 0.0)
            _leader(scene, x, 0.5 * (low + high) + 2.6, x, top)
        elif isinstance(load, Axial):
            level = _level(scene, load, low, high)
            _arrow(scene, x - 3.0, level, x + 3.0, level, load.value > 0.0, 0.9)
            _leader(scene, x, level, x, top)
        elif load.direction == "across":
            scene.ax.plot([scene.x(x)], [high + 2.2], "o", ms=4.5, mfc="white", mec="black", mew=MEDIUM, zorder=_ABOVE)
            scene.ax.plot([scene.x(x)], [high + 2.2], "x", ms=2.8, mec="black", mew=MEDIUM, zorder=_ABOVE)
            _leader(scene, x, high + 3.2, x, top)
        else:
            _arrow(scene, x, top, x, high + 0.4, (load.value > 0.0) == (load.direction == "down"), 0.9)
    _point_labels(scene, ordered, top)


def _level(scene: Scene, load: Axial, low: float, high: float) -> float:
    if isinstance(load.level, str):
        datum = float(scene.up(0.0))
        return {"top": high, "bottom": low, "datum": datum}.get(load.level, 0.5 * (low + high))
    return float(scene.up(load.level))


def _leader(scene: Scene, x0: float, y0: float, x1: float, y1: float) -> None:
    scene.ax.plot(scene.x(np.array([x0, x1])), [y0, y1], color=GREY, lw=THIN, zorder=5)


def _turn(scene: Scene, x: float, height: float, clockwise: bool) -> None:
    turn = np.radians(np.linspace(200.0, -60.0, 40))
    dx, dy = 2.4 * np.cos(turn), 2.4 * np.sin(turn)
    if not clockwise:
        dx = -dx
    scene.ax.plot(scene.x(x + dx), height + dy, color="black", lw=0.9, zorder=8)
    ahead = np.array([dx[-1] - dx[-3], dy[-1] - dy[-3]])
    ahead /= np.hypot(*ahead)
    aside, tip = np.array([-ahead[1], ahead[0]]), np.array([x + dx[-1], height + dy[-1]]) + 0.7 * ahead
    corners = np.array([tip, tip - 1.5 * ahead + 0.55 * aside, tip - 1.5 * ahead - 0.55 * aside])
    scene.ax.fill(scene.x(corners[:, 0]), corners[:, 1], facecolor="black", edgecolor="none", zorder=8)


def _point_labels(scene: Scene, loads: Sequence[Point | Couple | Axial], top: float) -> None:
    """Write values in one row, as much as fits: with the case, the value alone, at last the largest of each kind."""
    kept = list(loads)
    for attempt in ("full", "value", "largest"):
        if attempt == "largest":
            kept = [
                max((v for v in loads if type(v) is kind), key=lambda v: abs(v.value))
                for kind in {type(v): 0 for v in loads}
            ]
        texts = [_point_words(v, scene.style, attempt == "full", attempt == "largest") for v in kept]
        wanted = [scene.mm(v.at) for v in kept]
        middles = apart(wanted, [text_width(t) for t in texts], 0.0, scene.width, 1.2)
        if middles is not None:
            break
    else:
        return
    for text, middle, at in zip(texts, middles, wanted, strict=True):
        reach = 0.5 * text_width(text) - 0.5
        scene.write(float(middle), top + 1.6 + 0.5 * LINE, text)
        if abs(float(middle) - at) > 0.3:
            _leader(scene, at, top, float(np.clip(at, middle - reach, middle + reach)), top + 1.4)


def _point_words(load: Point | Couple | Axial, style: str, with_case: bool, largest: bool) -> str:
    what = "moment" if isinstance(load, Couple) else "force"
    text = value(abs(load.value), what, style)
    if isinstance(load, Point) and load.direction == "across":
        text += " across"
    if largest:
        text += " at most"
    return _with_case(text, load.case) if with_case else text


def words_of(planned: LoadPlan) -> str:
    """Say what acts besides what is drawn; empty where nothing does."""
    return f"Besides: {planned.words}" if planned.words else ""
