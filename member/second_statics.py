"""Second method, statics: the parameters at every node, found from equilibrium and from what supports hold.

Unknown are the movements of each node, the forces just to the right of it, the force of every support and the
kink of every hinge (method of initial parameters). Moments at supports, which the first method takes as its
redundants, have no part in it.
"""

from __future__ import annotations

from collections.abc import Collection, Mapping
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Support
from fishbelly.member.faults import Mechanism
from fishbelly.member.second_loads import Ground, LoadShare
from fishbelly.member.second_segments import Segments

Array = NDArray[np.float64]

WAYS = ("down", "along", "rotation", "across", "rotation_across")
"""In the order of reactions: down, along, couple, across, couple sideways."""
MOVES = (1, 0, 3, 2, 4)
"""Which movement (u, down, across, rotation, rotation across) each way holds."""


@dataclass(frozen=True, eq=False)
class Hold:
    """One direction held at one node.

    Parameters
    ----------
    node : int
        The node.
    way : int
        Index into `WAYS`.
    level : ndarray, shape (2,)
        Level at which it is held along, from the line [m].
    supports : tuple of (int, float)
        Supports that hold it, as indices into the member's, with their stiffness.
    only_reference : bool
        Held for reference: nothing else holds it, and nothing may push it.
    """

    node: int
    way: int
    level: Array
    supports: tuple[tuple[int, float], ...] = ()
    only_reference: bool = False

    @property
    def rigid(self) -> bool:
        """Whether it holds rigidly."""
        return self.only_reference or any(np.isinf(k) for _, k in self.supports)

    @property
    def spring(self) -> float:
        """Stiffness of its springs together."""
        return sum(k for _, k in self.supports if np.isfinite(k))

    @property
    def jump(self) -> Array:
        """Jump of the forces (N, V, V across, M, M across) by a unit force on the member, shape (5,)."""
        v = np.zeros(5)
        v[MOVES[self.way]] = -1.0 if self.way in (0, 1, 3) else 1.0
        if self.way == 1:
            v[3:] = self.level
        return v

    @property
    def movement(self) -> Array:
        """Its movement as a row on the movements of the node, shape (5,)."""
        v = np.zeros(5)
        v[MOVES[self.way]] = 1.0
        if self.way == 1:
            v[3:] = self.level
        return v


@dataclass(frozen=True, eq=False)
class Frame:
    """Nodes and what holds them.

    Parameters
    ----------
    borders : tuple of int
        Border between intervals at which each node lies.
    holds : tuple of Hold
        All directions held.
    hinges : dict of int to float
        Nodes with a hinge, and the level of the centroid there from the line [m].
    cut : Segments
        The member between the nodes.
    planes : int
        1: the vertical plane alone; 2: both.
    """

    borders: tuple[int, ...]
    holds: tuple[Hold, ...]
    hinges: dict[int, float]
    cut: Segments
    planes: int

    @property
    def active(self) -> list[int]:
        """Components at work: (u, down, across, rotation, rotation across) or the vertical ones of them."""
        return [0, 1, 2, 3, 4] if self.planes == 2 else [0, 1, 3]


def frame(
    ground: Ground,
    lifted: Collection[str],
    planes: int,
    hinges: Collection[float] | None = None,
    homes: Mapping[str, Ground] | None = None,
) -> Frame:
    """Find the nodes, and everything that is held.

    Parameters
    ----------
    ground : Ground
        What stands there.
    lifted : collection of str
        Names of the supports that hold nothing.
    planes : int
        1: the vertical plane alone; 2: both.
    hinges : collection of float, optional
        Places of the hinges that are open [m]; default all.
    homes : mapping of str to Ground, optional
        By support, what stood there when it came: its level is found on that.

    Raises
    ------
    Mechanism
        When there is no support.
    """
    member = ground.member
    working = [(i, s, ground.border(s.at)) for i, s in enumerate(member.supports) if s.name not in lifted]
    if not working:
        raise Mechanism("there is no support")
    count = ground.intervals.a.size
    hinged = {ground.border(x): x for x in ([h.at for h in member.hinges] if hinges is None else hinges)}
    borders = sorted({0, count, *(b for _, _, b in working), *(b for b in hinged if 0 < b < count)})
    node = {b: k for k, b in enumerate(borders)}
    holds = _holds(ground, [(i, s, node[b]) for i, s, b in working], planes, homes or {})
    places = [float(np.append(ground.intervals.a, ground.intervals.b[-1])[b]) for b in borders]
    holds += _references(holds, node[working[0][2]], places, planes)
    at_nodes = {node[b]: float(ground.level("centroid", x)[0]) for b, x in hinged.items() if 0 < b < count}
    cut = Segments.at(ground.intervals, borders, {b for _, _, b in working})
    return Frame(tuple(borders), tuple(holds), at_nodes, cut, planes)


def _holds(
    ground: Ground, working: list[tuple[int, Support, int]], planes: int, homes: Mapping[str, Ground]
) -> list[Hold]:
    found: list[Hold] = []
    for i, support, node in working:
        for way, name in enumerate(WAYS[: 5 if planes == 2 else 3]):
            stiffness = float(getattr(support, name))
            if stiffness == 0.0:
                continue
            home = homes.get(support.name, ground)
            level = home.level(support.level, support.at) if name == "along" else np.zeros(2)
            for k, h in enumerate(found):
                if h.node == node and h.way == way and np.abs(h.level - level).max() < 1e-9:
                    found[k] = Hold(node, way, h.level, (*h.supports, (i, stiffness)))
                    break
            else:
                found.append(Hold(node, way, level, ((i, stiffness),)))
    return found


def _references(holds: list[Hold], node: int, places: list[float], planes: int) -> list[Hold]:
    """Hold along and sideways what nothing holds: no force may come there, which `solved` looks at."""
    extra = []
    if not any(h.way == 1 for h in holds):
        extra.append(Hold(node, 1, np.zeros(2), (), True))
    if planes == 2:
        at = {places[h.node] for h in holds if h.way == 3}
        turns = any(h.way == 4 for h in holds)
        if not at:
            extra.append(Hold(node, 3, np.zeros(2), (), True))
        if not turns and len(at) < 2:
            extra.append(Hold(node, 4, np.zeros(2), (), True))
    return extra


@dataclass(frozen=True, eq=False)
class Affine:
    """Five forces as constants plus coefficients times some of the unknowns."""

    columns: list[int]
    coefficients: Array
    constant: Array


@dataclass(frozen=True, eq=False)
class Parameters:
    """What was found at the nodes.

    Parameters
    ----------
    left, right : ndarray, shape (segments, 5)
        Forces just inside the left and right end of each segment.
    before, after : ndarray, shape (nodes, 5)
        Movements just left and right of each node; NaN at free ends.
    forces : ndarray, shape (holds,)
        Force of each hold on the member.
    correction : float
        Change of the movements by the first refinement over their size: round-off of the system.
    """

    left: Array
    right: Array
    before: Array
    after: Array
    forces: Array
    correction: float


@dataclass(eq=False)
class System:
    """Equations of one frame under one set of loads.

    Parameters
    ----------
    frame : Frame
        Nodes and holds.
    jumps : ndarray, shape (5, K + 1)
        Jumps of forces by loads at the borders.
    sinks : ndarray, shape (holds, 2)
        Settlement of rigid supports, and spring stiffness times settlement.
    opened : mapping of int to float
        Moment about the centroid just right of a hinge, by node, where it is not zero [N m].
    """

    frame: Frame
    jumps: Array
    sinks: Array
    opened: Mapping[int, float] = field(default_factory=dict)
    count: int = 0
    move: dict[tuple[int, int], int] = field(default_factory=dict)
    force: dict[tuple[int, int], int] = field(default_factory=dict)
    hold: list[int] = field(default_factory=list)
    kink: dict[int, int] = field(default_factory=dict)

    def __post_init__(self) -> None:
        f = self.frame
        last = len(f.borders) - 1
        for j in range(last + 1):
            free = (j == 0 and f.cut.free_left) or (j == last and f.cut.free_right)
            for c in f.active:
                if not free:
                    self.move[j, c] = self._next()
                if 0 < j < last and not (c == 3 and j in f.hinges):
                    self.force[j, c] = self._next()
            if j in f.hinges:
                self.kink[j] = self._next()
            for _ in (h for h in f.holds if h.node == j):
                self._next()
        self._number_holds()

    def _next(self) -> int:
        self.count += 1
        return self.count - 1

    def _number_holds(self) -> None:
        used = {*self.move.values(), *self.force.values(), *self.kink.values()}
        spare = iter(sorted(set(range(self.count)) - used))
        by_node = sorted(range(len(self.frame.holds)), key=lambda k: self.frame.holds[k].node)
        numbers = {k: next(spare) for k in by_node}
        self.hold = [numbers[k] for k in range(len(self.frame.holds))]

    @cached_property
    def node_jumps(self) -> list[Affine]:
        """Jump of the forces over each node: loads there and forces of its supports."""
        found = []
        for j, border in enumerate(self.frame.borders):
            at = [k for k, h in enumerate(self.frame.holds) if h.node == j]
            coefficients = np.array([self.frame.holds[k].jump for k in at]).reshape(len(at), 5).T
            found.append(Affine([self.hold[k] for k in at], coefficients, self.jumps[:, border]))
        return found

    def right_of(self, j: int) -> Affine:
        """Forces just right of a node; about the centroid no moment right of a hinge but one that is given."""
        if j == 0:
            return self.node_jumps[0]
        f = self.frame
        free = [c for c in f.active if (j, c) in self.force]
        coefficients = np.eye(5)[:, free]
        if j in f.hinges:
            coefficients[3, free.index(0)] = -f.hinges[j]
        given = np.array([0.0, 0.0, 0.0, self.opened.get(j, 0.0), 0.0])
        return Affine([self.force[j, c] for c in free], coefficients, given)

    def left_of(self, j: int) -> Affine:
        """Forces just left of a node."""
        jump = self.node_jumps[j]
        if j == len(self.frame.borders) - 1:
            return Affine(jump.columns, -jump.coefficients, -jump.constant)
        right = self.right_of(j)
        return Affine(
            right.columns + jump.columns,
            np.hstack((right.coefficients, -jump.coefficients)),
            right.constant - jump.constant,
        )


def sinks(ground: Ground, f: Frame, share: LoadShare) -> Array:
    """Settlements of the holds in a share: [of rigid supports, spring stiffness times settlement]."""
    found = np.zeros((len(f.holds), 2))
    for k, h in enumerate(f.holds):
        if h.way == 0:
            for i, stiffness in h.supports:
                support = ground.member.supports[i]
                down = share.factor(support) * support.sinks if support.sinks else 0.0
                if np.isinf(stiffness):
                    found[k, 0] = down or found[k, 0]
                else:
                    found[k, 1] += stiffness * down
    return found
