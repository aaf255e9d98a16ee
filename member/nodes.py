"""Nodes (supports and hinges), segments between them and overhangs: where unknowns live."""

from __future__ import annotations

import itertools
from collections.abc import Collection, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.description import Support
from fishbelly.member.faults import CannotCompute

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Node:
    """A place with supports or a hinge.

    Parameters
    ----------
    at : float
        Place [m].
    border : int
        Border of the grid.
    supports : tuple of Support
        What holds it there.
    hinge : bool
        Whether the vertical plane is hinged there.
    level : ndarray, shape (2,)
        Level about which its rotation turns and at which it is held along, from the analysis line [m].
    """

    at: float
    border: int
    supports: tuple[Support, ...]
    hinge: bool
    level: Array

    def held(self, quantity: str) -> tuple[float, float]:
        """Stiffness with which the supports hold a direction: springs in sum, and ``inf`` or 0 for rigid."""
        values = [getattr(s, quantity) for s in self.supports]
        springs = sum(v for v in values if np.isfinite(v))
        return springs, np.inf if any(np.isinf(v) for v in values) else 0.0


@dataclass(frozen=True)
class Segment:
    """Panels `first` to `stop` (one past) between nodes `left` and `right`; None where an end is free."""

    first: int
    stop: int
    left: int | None
    right: int | None


@dataclass(frozen=True, eq=False)
class Layout:
    """Nodes and segments of a member for one set of supports at work."""

    nodes: tuple[Node, ...]
    segments: tuple[Segment, ...]

    @property
    def holds_along(self) -> list[int]:
        """Nodes that hold along x."""
        return [k for k, n in enumerate(self.nodes) if any(s.along > 0.0 for s in n.supports)]


def layout(
    frame: Frame,
    lifted: Collection[str] = (),
    hinges: Collection[float] | None = None,
    homes: Mapping[str, Frame] | None = None,
) -> Layout:
    """Nodes and segments.

    Parameters
    ----------
    frame : Frame
        The grid.
    lifted : collection of str
        Names of bearings that have lifted off, and of supports that are not there; they hold nothing.
    hinges : collection of float, optional
        Places of the hinges that are open [m]; default all.
    homes : mapping of str to Frame, optional
        Stage in which a support first holds, by name: its level is the section's of that stage.
    """
    member, panels = frame.profile.member, frame.profile.panels
    working = [s for s in member.supports if s.name not in lifted]
    by_border: dict[int, list[Support]] = {}
    for support in working:
        by_border.setdefault(panels.border(support.at), []).append(support)
    hinged = {panels.border(x) for x in ([h.at for h in member.hinges] if hinges is None else hinges)}
    borders = sorted({*by_border, *hinged})
    nodes = tuple(_node(frame, b, by_border.get(b, []), b in hinged, homes or {}) for b in borders)
    segments = []
    if not borders:
        return Layout((), (Segment(0, panels.count, None, None),))
    if borders[0] > 0:
        segments.append(Segment(0, borders[0], None, 0))
    segments += [Segment(a, b, k, k + 1) for k, (a, b) in enumerate(itertools.pairwise(borders))]
    if borders[-1] < panels.count:
        segments.append(Segment(borders[-1], panels.count, len(nodes) - 1, None))
    return Layout(nodes, tuple(segments))


def _node(frame: Frame, border: int, supports: list[Support], hinge: bool, homes: Mapping[str, Frame]) -> Node:
    panels = frame.profile.panels
    at = float(panels.a[border]) if border < panels.count else float(panels.b[-1])
    holding = [s for s in supports if s.along > 0.0]
    levels = [homes.get(s.name, frame).level(s.level, at) for s in holding] or [frame.centroid(at)]
    if any(np.abs(v - levels[0]).max() > 1e-9 for v in levels):
        raise CannotCompute(f"two supports at x = {at:.6g} m hold along at different levels")
    if hinge and any(s.rotation > 0.0 for s in supports):
        raise CannotCompute(f"a support that holds the rotation stands at the hinge at x = {at:.6g} m")
    if hinge:
        levels = [frame.centroid(at)]
    return Node(at, border, tuple(supports), hinge, levels[0])
