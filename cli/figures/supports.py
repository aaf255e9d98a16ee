"""Symbols of supports and hinges in the elevation, and their names."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Any

import numpy as np

from fishbelly.cli.figures.letters import ELLIPSIS, apart, shortened
from fishbelly.cli.figures.paper import LINE, MEDIUM, THIN, text_width
from fishbelly.cli.figures.scene import Scene
from fishbelly.cli.figures.ticks import value
from fishbelly.member.description import Support

HEIGHT = 6.0
"""Room that symbols take under the member [mm]."""
_UPRIGHT = 24.0
"""Most length of a label written upright [mm]."""
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


def draw(scene: Scene) -> None:
    """Draw all supports and hinges."""
    for support in scene.view.member.supports:
        _symbol(scene, support)
    for hinge in scene.view.member.hinges:
        low, high = scene.edges(hinge.at)
        _circle(scene, scene.mm(hinge.at), 0.5 * (low + high), 0.9, zorder=_OVER + 1)


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
        Ellipse(
            (scene.x(x), height), width, 2.0 * radius, facecolor="white", edgecolor="black", lw=MEDIUM, zorder=zorder
        )
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


@dataclass(frozen=True)
class Names:
    """Labels in a band under the member: middles [mm] and texts, level or upright, and the height they take [mm]."""

    places: tuple[tuple[float, str], ...]
    upright: bool
    height: float


def names_band(scene: Scene, wanted: list[tuple[float, str, str]]) -> Names:
    """Move labels of places [m] apart in one row; upright where they would be cut too short, none where even so.

    Parameters
    ----------
    scene : Scene
        Where.
    wanted : list of (float, str, str)
        Place, a name that may be cut, and what is said after it and is not cut.
    """
    if not wanted:
        return Names((), False, 0.0)
    places = [scene.mm(at) for at, _, _ in wanted]
    for limit in (60.0, 40.0, 28.0, 20.0, 15.0, 12.0, 9.5, 7.5):
        texts = [_brief(text, limit, more) for _, text, more in wanted]
        cut = any(ELLIPSIS in t and ELLIPSIS not in w for t, (_, w, _) in zip(texts, wanted, strict=True))
        if limit < 20.0 and cut:
            break
        middles = apart(places, [text_width(t) for t in texts], -0.5 * LINE, scene.width + 0.5 * LINE, 1.2)
        if middles is not None:
            return Names(tuple((float(m), t) for m, t in zip(middles, texts, strict=True)), False, LINE + 0.4)
    texts = [shortened(text + more, _UPRIGHT) for _, text, more in wanted]
    middles = apart(places, [LINE] * len(texts), 0.0, scene.width, 0.1)
    if middles is None:
        return Names((), True, 0.0)
    tall = max(map(text_width, texts)) + 1.0
    return Names(tuple((float(m), t) for m, t in zip(middles, texts, strict=True)), True, tall)


def write_names(scene: Scene, chosen: Names, top: float, **more: Any) -> None:
    """Write labels in their band, whose upper edge is at a height [mm]."""
    for place, text in chosen.places:
        if chosen.upright:
            scene.write(place, top - 0.4, text, rotation=90, va="top", bbox=white(), **more)
        else:
            scene.write(place, top - 0.5 * chosen.height, text, bbox=white(), **more)


def _brief(text: str, limit: float, more: str) -> str:
    if text_width(text + more) > limit and text.startswith("support "):
        text = text.removeprefix("support ")
    return shortened(text, max(limit - text_width(more), 5.0)) + more


def white() -> dict[str, Any]:
    """Keywords of the white ground under a label."""
    return {"facecolor": "white", "edgecolor": "none", "pad": 0.3}
