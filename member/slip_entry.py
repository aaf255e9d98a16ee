"""Where forces along x enter a member made of layers, and where supports and hinges act on its joints."""

from __future__ import annotations

from collections.abc import Collection
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.description import Support
from fishbelly.member.faults import CannotCompute
from fishbelly.member.loads import Axial, Point
from fishbelly.member.slip_layers import Layers
from fishbelly.sections.placing import Bounds

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Entries:
    """What happens along x at the borders of the grid.

    Parameters
    ----------
    layer : ndarray of int, shape (K + 1,)
        Layer that a force along x enters at each border.
    spread : ndarray of int, shape (K,)
        Layer that a load along x per length enters, panel by panel.
    held : ndarray of bool, shape (K + 1,)
        Borders with a support that holds the rotation, and with it the slip of all layers.
    cut : ndarray of bool, shape (K + 1,)
        Ends of the member and hinges: all layers end there.
    """

    layer: NDArray[np.intp]
    spread: NDArray[np.intp]
    held: NDArray[np.bool_]
    cut: NDArray[np.bool_]


def entries(frame: Frame, layers: Layers, lifted: Collection[str] = ()) -> Entries:
    """Find where forces along x enter, and what supports and hinges do to the joints.

    A force enters the layer in which its level lies; on the face of two, the one nearer the root; between layers,
    the nearest. A load along x per length (of an inclined member) enters at the centroid.

    Parameters
    ----------
    frame : Frame
        The grid with its analysis line.
    layers : Layers
        Layers of the member.
    lifted : collection of str
        Names of supports that hold nothing.

    Raises
    ------
    CannotCompute
        When two forces along x enter different layers at one place.
    """
    member, panels = frame.profile.member, frame.profile.panels
    borders = panels.count + 1
    layer, spread = np.zeros(borders, dtype=np.intp), np.zeros(panels.count, dtype=np.intp)
    held, cut = np.zeros(borders, dtype=bool), np.zeros(borders, dtype=bool)
    cut[[0, -1]] = True
    gone = frozenset(lifted) | (frame.view.gone if frame.view is not None else frozenset())
    wanted: dict[int, list[tuple[float, float]]] = {}
    for support in member.supports:
        if support.name in gone:
            continue
        if _holds_slip(support):
            held[panels.border(support.at)] = True
        if support.along > 0.0:
            _ask(frame, wanted, support.at, support.level)
    for at in frame.view.hinges if frame.view is not None else [h.at for h in member.hinges]:
        cut[panels.border(at)] = True
        _ask(frame, wanted, at, "centroid")
    for load in member.loads:
        if isinstance(load, Axial) and load.value:
            _ask(frame, wanted, load.at, load.level)
    for load in member.loads:
        if isinstance(load, Point) and load.per and member.rises and panels.border(load.at) not in wanted:
            _ask(frame, wanted, load.at, "centroid")
    for border, levels in wanted.items():
        found = {_layer_at(frame, layers, x, z) for x, z in levels}
        if len(found) > 1:
            raise CannotCompute(f"forces along x enter different layers at x = {levels[0][0]:.6g} m")
        layer[border] = found.pop()
    if member.rises:
        middle = 0.5 * (panels.a + panels.b)
        half = panels.rule.points.size // 2
        for k, x in enumerate(middle):
            spread[k] = _layer_at(frame, layers, float(x), float(frame.centre[0, k, half] + frame.line[0]))
    return Entries(layer, spread, held, cut)


def _holds_slip(support: Support) -> bool:
    return bool(np.isinf(support.rotation)) and not support.slip_free


def _ask(frame: Frame, wanted: dict[int, list[tuple[float, float]]], at: float, level: str | float) -> None:
    z = float(frame.level(level, at)[0] + frame.line[0])
    wanted.setdefault(frame.profile.panels.border(at), []).append((at, z))


def _layer_at(frame: Frame, layers: Layers, x: float, z: float) -> int:
    """Layer in which a level lies, cuts left aside."""
    member, geometry = frame.profile.member, frame.profile.geometry
    side = "left" if x >= member.length * (1.0 - 1e-12) else "right"
    placed = geometry.place(np.array([x]), side)
    boxes = [Bounds.of(o) for o in placed.outlines]
    size = max(float(b.top[0]) for b in boxes) - min(float(b.bottom[0]) for b in boxes)
    away: dict[int, float] = {}
    for part, box in zip(placed.index, boxes, strict=True):
        gap = max(float(box.bottom[0]) - z, z - float(box.top[0]), 0.0)
        owner = layers.of(part)
        away[owner] = min(gap, away.get(owner, np.inf))
    nearest = min(away.values())
    return min(k for k, gap in away.items() if gap <= nearest + 1e-9 * size)
