"""Symbols of supports and hinges in the elevation, and their names."""

from __future__ import annotations

import math
from typing import Any

import numpy as np

from fishbelly.cli.figures.letters import apart, shortened
from fishbelly.cli.figures.paper import LINE, MEDIUM, THIN, text_width
from fishbelly.cli.figures.scene import Scene
from fishbelly.cli.figures.ticks import value
from fishbelly.member.description import Support

HEIGHT = 6.0
"""Room that symbols take under the member [mm]."""
_OVER = 7
"""Drawing order: over parts and holes."""


def kind_of(support: Support) -> str:
    """Name the symbol of a support: fixed, guide, pin, roller, spring, turning spring, along, across."""
    if support.rotation == math.inf:
        return "fixed" if support.down > 0.0 else "guide"
    if support.down == math.inf:
        return "pin" if support.along > 0.0 else "roller"
    if support.down > 0.0:
        return "spring"
    if support.rotation > 0.0:
        return "turning spring"
    return "along" if support.along > 0.0 else "across"


def draw(scene: Scene, label_height: float) -> None:
    """Draw all supports and hinges, names with their middles at a height [mm] (several at one place: one name)."""
    for support in scene.view.member.supports:
        _symbol(scene, support)
    for hinge in scene.view.member.hinges:
        low, high = scene.edges(hinge.at)
        _circle(scene, scene.mm(hinge.at), 0.5 * (low + high), 0.9, zorder=_OVER + 1)
    _names(scene, label_height)


def _symbol(scene: Scene, support: Support) -> None:
    x = scene.mm(support.at)
    low, high = scene.edges(support.at)
    kind = kind_of(support)
    if kind in ("fixed", "guide"):
        _wall(scene, support, x, low, high, kind)
    elif kind in ("pin", "roller"):
        _triangle(scene, x, low, 3.0)
        if kind == "roller":
            for dx in (-1.1, 0.0, 1.1):
                _circle(scene, x + dx, low - 3.5, 0.45)
            _line(scene, [(x - 2.4, low - 4.0), (x + 2.4, low - 4.0)])
        _ground(scene, x, low - (4.0 if kind == "roller" else 3.0))
    elif kind == "spring":
        _zigzag(scene, x, low)
        _ground(scene, x, low - 5.0)
    elif kind == "along":
        _triangle(scene, x, 0.5 * (low + high), 2.4, sideways=True)
    elif kind == "across":
        _circle(scene, x, low - 1.6, 1.2)
        _line(scene, [(x - 0.85, low - 2.45), (x + 0.85, low - 0.75)])
        _line(scene, [(x - 0.85, low - 0.75), (x + 0.85, low - 2.45)])
    if 0.0 < support.rotation < math.inf:
        _spiral(scene, x, low - (1.8 if kind == "turning spring" else 0.0))


def _wall(scene: Scene, support: Support, x: float, low: float, high: float, kind: str) -> None:
    """Draw a hatched wall at an end, or a block under the member in between; a guide keeps a gap with rollers."""
    tiny = 1e-9 * scene.length
    if tiny < support.at < scene.length - tiny:
        _line(scene, [(x - 2.0, low), (x - 2.0, low - 3.0), (x + 2.0, low - 3.0), (x + 2.0, low), (x - 2.0, low)])
        if kind == "guide":
            _line(scene, [(x - 2.0, low - 1.5), (x + 2.0, low - 1.5)])
        else:
            _ground(scene, x, low - 3.0)
        return
    away = -1.0 if support.at <= tiny else 1.0
    bottom, top = low - 1.5, high + 1.5
    if kind == "guide":
        _line(scene, [(x + 0.15 * away, bottom), (x + 0.15 * away, top)], MEDIUM)
        for height in np.linspace(low + 0.5, max(high - 0.5, low + 0.6), 3):
            _circle(scene, x + 0.8 * away, float(height), 0.5)
        x += 1.5 * away
    _line(scene, [(x, bottom), (x, top)], 1.2)
    count = max(3, round((top - bottom) / 1.3))
    for height in np.linspace(bottom, top - 1.2, count):
        _line(scene, [(x, float(height) + 1.2), (x + 1.4 * away, float(height))], THIN)


def _line(scene: Scene, points: list[tuple[float, float]], pen: float = MEDIUM) -> None:
    x = [scene.x(p[0]) for p in points]
    scene.ax.plot(x, [p[1] for p in points], color="black", lw=pen, zorder=_OVER, solid_capstyle="butt")


def _circle(scene: Scene, x: float, height: float, radius: float, zorder: float = _OVER) -> None:
    from matplotlib.patches import Ellipse

    width = 2.0 * radius * scene.per_mm
    scene.ax.add_patch(
        Ellipse((scene.x(x), height), width, 2.0 * radius, facecolor="white", edgecolor="black", lw=MEDIUM, zorder=zorder)
    )


def _triangle(scene: Scene, x: float, tip: float, size: float, sideways: bool = False) -> None:
    half = 0.6 * size
    points = [(x, tip), (x - half, tip - size), (x + half, tip - size)]
    if sideways:
        points = [(x, tip), (x - size, tip - half), (x - size, tip + half)]
    xs = [scene.x(p[0]) for p in points]
    scene.ax.fill(xs, [p[1] for p in points], facecolor="white", edgecolor="black", lw=MEDIUM, zorder=_OVER)


def _ground(scene: Scene, x: float, height: float) -> None:
    _line(scene, [(x - 2.6, height), (x + 2.6, height)])
    for dx in np.arange(-2.2, 2.7, 0.95):
        _line(scene, [(x + float(dx), height), (x + float(dx) - 0.8, height - 1.0)], THIN)


def _zigzag(scene: Scene, x: float, top: float) -> None:
    heights = np.linspace(top - 0.8, top - 4.2, 8)
    sides = np.array([0.0, 1.1, -1.1, 1.1, -1.1, 1.1, -1.1, 0.0])
    middle = [(x + float(s), float(h)) for s, h in zip(sides, heights, strict=True)]
    _line(scene, [(x, top), *middle, (x, top - 5.0)])


def _spiral(scene: Scene, x: float, height: float) -> None:
    turn = np.linspace(0.0, 3.5 * math.pi, 60)
    radius = 0.25 + 1.4 * turn / turn[-1]
    points = zip(x + radius * np.cos(turn), height + radius * np.sin(turn), strict=True)
    _line(scene, [(float(a), float(b)) for a, b in points], MEDIUM)


def names(scene: Scene) -> list[tuple[float, str, str]]:
    """Place and name of the supports, those at one place together, and what a symbol cannot say."""
    found: dict[float, tuple[list[str], list[str]]] = {}
    for s in sorted(scene.view.member.supports, key=lambda s: s.at):
        words, more = found.setdefault(s.at, ([], []))
        words.append(s.name)
        if s.only_up:
            more.append("up only")
        if s.sinks:
            way, size = ("sinks", s.sinks) if s.sinks > 0.0 else ("jacked", -s.sinks)
            more.append(f"{way} {value(size, 'deflection', scene.style)}")
    return [(at, "; ".join(words), "".join(f", {m}" for m in more)) for at, (words, more) in found.items()]


def _names(scene: Scene, height: float) -> None:
    wanted = names(scene)
    for place, text in placed_in_row(scene, wanted):
        scene.write(place, height, text, bbox=white())


def placed_in_row(scene: Scene, wanted: list[tuple[float, str, str]], most: float = 60.0) -> list[tuple[float, str]]:
    """Labels of places [m] moved apart in one row: middles [mm] and texts, cut shorter until they fit.

    Of each label the first text is cut, the second is kept.
    """
    if not wanted:
        return []
    places = [scene.mm(at) for at, _, _ in wanted]
    room = scene.width + LINE
    for limit in (most, 40.0, 28.0, 20.0, 15.0, 12.0, 9.5, 7.5, 6.0):
        texts = [_brief(text, limit, more) for _, text, more in wanted]
        middles = apart(places, [text_width(t) for t in texts], -0.5 * LINE, room - 0.5 * LINE, 1.2)
        if middles is not None:
            return [(float(m), t) for m, t in zip(middles, texts, strict=True) if t]
    return []


def _brief(text: str, limit: float, more: str) -> str:
    if text_width(text) > limit and text.startswith("support "):
        text = text.removeprefix("support ")
    return shortened(text, limit - (text_width(more) if limit > 12.0 else 0.0)) + (more if limit > 12.0 else "")


def white() -> dict[str, Any]:
    """Keywords of the white ground under a label."""
    return {"facecolor": "white", "edgecolor": "none", "pad": 0.3}
