"""Where forces along x enter a member made of layers, and where supports and hinges act on its joints."""

from __future__ import annotations

from collections.abc import Collection
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.description import Member, Support
from fishbelly.member.faults import CannotCompute
from fishbelly.member.loads import Axial, Point
from fishbelly.member.slip_layers import Layers
from fishbelly.member.stage_view import StageView
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
    hinges = frame.view.hinges if frame.view is not None else tuple(h.at for h in member.hinges)
    cut[[panels.border(at) for at in hinges]] = True
    held[[panels.border(s.at) for s in member.supports if s.name not in gone and _holds_slip(s)]] = True
    for border, levels in _wanted(frame, gone, hinges).items():
        found = {_layer_at(frame, layers, x, z) for x, z in levels}
        if len(found) > 1:
            raise CannotCompute(f"forces along x enter different layers at x = {levels[0][0]:.6g} m")
        layer[border] = found.pop()
    if member.rises:
        half = panels.rule.points.size // 2
        for k, x in enumerate(0.5 * (panels.a + panels.b)):
            spread[k] = _layer_at(frame, layers, float(x), float(frame.centre[0, k, half] + frame.line[0]))
    return Entries(layer, spread, held, cut)


def _wanted(frame: Frame, gone: frozenset[str], hinges: tuple[float, ...]) -> dict[int, list[tuple[float, float]]]:
    """Places and levels at which forces along x enter, by border; those that only may where nothing else does."""
    member = frame.profile.member
    arriving = [v for v in member.loads if frame.view is None or v.case in frame.view.cases]
    sure: list[tuple[float, str | float]] = [(h, "centroid") for h in hinges]
    sure += [(s.at, s.level) for s in member.supports if s.along > 0.0 and s.name not in gone]
    sure += [(v.at, v.level) for v in arriving if isinstance(v, Axial) and v.value]
    # a support that has gone leaves what it carried; an inclined member's point loads push along it too
    may: list[tuple[float, str | float]] = [(s.at, s.level) for s in member.supports if s.along > 0.0]
    may += [(v.at, "centroid") for v in arriving if isinstance(v, Point) and v.per and member.rises]
    found: dict[int, list[tuple[float, float]]] = {}
    for at, level in sure:
        z = float(frame.level(level, at)[0] + frame.line[0])
        found.setdefault(frame.profile.panels.border(at), []).append((at, z))
    for at, level in may:
        z = float(frame.level(level, at)[0] + frame.line[0])
        found.setdefault(frame.profile.panels.border(at), [(at, z)])
    return found


def see_nothing_opens(member: Member, view: StageView) -> None:
    """See that nothing that keeps layers from slipping, or ties their ends, goes with what it carries.

    Raises
    ------
    CannotCompute
        When a support that holds the slip of all layers has gone, or a hinge opens in a later stage than the first.
    """
    if view.stage is None:
        return
    number = {s.name: k for k, s in enumerate(member.stages)}
    for s in member.supports:
        if s.until is not None and number[s.until] <= view.index and _holds_slip(s):
            raise CannotCompute(
                f"{s.name} holds the slip of all layers and goes in stage {s.until}, which cannot be computed; "
                'with slip = "free" it holds none'
            )
    for h in member.hinges:
        if h.stage is not None and 0 < number[h.stage] <= view.index:
            raise CannotCompute(
                f"a hinge opens in stage {h.stage} at x = {h.at:.6g} m, which cannot be computed where parts slip"
            )


def _holds_slip(support: Support) -> bool:
    """Whether a support holds the slip of all layers: it holds the rotation rigidly, and does not let them slip."""
    return bool(np.isinf(support.rotation)) and not support.slip_free


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
