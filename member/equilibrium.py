"""Forces in the member from statics alone: loads on simple spans and overhangs, and unit end forces.

Between two nodes the loads act on a simple beam whose ends turn freely about the nodes' levels; overhangs hang
from their node. Half of each segment is summed from its left end and half from its right, so that forces stay
exact towards both ends, however thin the member gets there.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Actions, Frame
from fishbelly.member.faults import Mechanism
from fishbelly.member.forces import Forces
from fishbelly.member.nodes import Layout, Segment
from fishbelly.member.panels import Panels

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Ends:
    """Forces at one end of a segment: N, V (2,), M (2,) about the node's level."""

    N: float
    V: Array
    M: Array


@dataclass(frozen=True, eq=False)
class Determinate:
    """Forces of one atom on the released member, and what each segment's ends carry.

    `left` and `right` hold one `Ends` for each segment, None at a free end.
    """

    forces: Forces
    left: tuple[Ends | None, ...]
    right: tuple[Ends | None, ...]


def _forward(panels: Panels, first: int, stop: int, start: float | Array, density: Array, jumps: Array) -> Array:
    """Start value plus integral plus jumps, at the points of panels; jumps act at borders first+1 .. stop-1."""
    inner, whole = panels_integral(panels, first, stop, density)
    before = np.cumsum(whole, axis=-1) - whole
    steps = np.cumsum(jumps[..., first + 1 : stop], axis=-1)
    steps = np.concatenate((np.zeros((*steps.shape[:-1], 1)), steps), axis=-1)
    return np.asarray(np.expand_dims(start, (-1, -2)) + (before + steps)[..., None] + inner)


def _backward(panels: Panels, first: int, stop: int, end: float | Array, density: Array, jumps: Array) -> Array:
    """End value minus integral minus jumps to the right, at the points of panels."""
    inner, whole = panels_integral(panels, first, stop, density)
    after = np.cumsum(whole[..., ::-1], axis=-1)[..., ::-1] - whole
    steps = np.cumsum(jumps[..., first + 1 : stop][..., ::-1], axis=-1)[..., ::-1]
    steps = np.concatenate((steps, np.zeros((*steps.shape[:-1], 1))), axis=-1)
    return np.asarray(np.expand_dims(end, (-1, -2)) - (after + steps)[..., None] - (whole[..., None] - inner))


def panels_integral(panels: Panels, first: int, stop: int, values: Array) -> tuple[Array, Array]:
    """Integrals from the left end of each panel to its points, and over it, for panels first to stop."""
    density = values[..., first:stop, :] * panels.stretch[first:stop]
    return density @ panels.rule.integrate.T, density @ panels.rule.weights


def _last(panels: Panels, first: int, stop: int, start: float | Array, density: Array, jumps: Array) -> Array:
    """Value at the far end of panels first to stop, jumps at inner borders counted."""
    _, whole = panels_integral(panels, first, stop, density)
    return np.asarray(start + whole.sum(axis=-1) + jumps[..., first + 1 : stop].sum(axis=-1))


def axial_forces(frame: Frame, layout: Layout, a: Actions) -> tuple[Array, float]:
    """Axial force of one atom with the member held along at most at one place, and that place's reaction.

    Returns
    -------
    N : ndarray, shape (K, n)
        Axial force [N]; where it is held along at several places, on the member cut loose at every node.
    reaction : float
        Force on the member at the only hold, towards +x [N].

    Raises
    ------
    Mechanism
        When nothing holds it along and the loads push it.
    """
    panels = frame.profile.panels
    count = panels.count
    holds = layout.holds_along
    ahead = _forward(panels, 0, count, -float(a.F[0]), -a.n, -a.F)
    behind = _backward(panels, 0, count, float(a.F[-1]), -a.n, -a.F)
    if len(holds) > 1:
        return ahead, 0.0
    _, whole = panels.integrate(a.n)
    total = float(a.F.sum() + whole.sum())
    if not holds:
        size = float(np.abs(a.F).sum() + np.abs(whole).sum())
        if abs(total) > 1e-9 * size:
            raise Mechanism(f"nothing holds the member along x, and a force of {total:.6g} N pushes it")
        return ahead, 0.0
    border = layout.nodes[holds[0]].border
    left = (np.arange(count) < border)[:, None]
    return np.where(left, ahead, behind), -total


def determinate(frame: Frame, layout: Layout, a: Actions, planes: int) -> Determinate:
    """Forces of one atom on the released member."""
    panels = frame.profile.panels
    N, _ = axial_forces(frame, layout, a)
    N = N.copy()
    V, M = np.zeros((2, *N.shape)), np.zeros((2, *N.shape))
    left: list[Ends | None] = []
    right: list[Ends | None] = []
    several = len(layout.holds_along) > 1
    for seg in layout.segments:
        part = slice(seg.first, seg.stop)
        if several:
            _cut_loose(panels, seg, a, N)
        n_left = float(N[seg.first] @ panels.rule.left)
        n_right = float(N[seg.stop - 1] @ panels.rule.right)
        ends = (np.zeros(2), np.zeros(2), np.zeros(2), np.zeros(2))
        for p in range(planes):
            v, m, values = _plane(panels, layout, seg, a, p, n_left, n_right)
            V[p, part], M[p, part] = v, m
            for store, value in zip(ends, values, strict=True):
                store[p] = value
        left.append(None if seg.left is None else Ends(n_left, ends[0], ends[2]))
        right.append(None if seg.right is None else Ends(n_right, ends[1], ends[3]))
    return Determinate(Forces(N, V, M), tuple(left), tuple(right))


def _cut_loose(panels: Panels, seg: Segment, a: Actions, N: Array) -> None:
    """Axial force of a segment that begins with none at a node, or ends with none at a free end."""
    part = slice(seg.first, seg.stop)
    if seg.right is None:
        N[part] = _backward(panels, seg.first, seg.stop, float(a.F[-1]), -a.n, -a.F)
    elif seg.left is not None:
        N[part] = _forward(panels, seg.first, seg.stop, 0.0, -a.n, -a.F)


def _plane(
    panels: Panels, layout: Layout, seg: Segment, a: Actions, p: int, n_left: float, n_right: float
) -> tuple[Array, Array, tuple[float, float, float, float]]:
    """V and M of one plane on a segment; V left, V right, M left and M right about the nodes' levels."""
    first, stop = seg.first, seg.stop
    q, P, C = -a.q[p], -a.P[p], a.C[p]
    level_left = layout.nodes[seg.left].level[p] if seg.left is not None else 0.0
    level_right = layout.nodes[seg.right].level[p] if seg.right is not None else 0.0

    def density(v: Array) -> Array:
        full = np.zeros_like(a.m[p])
        full[first:stop] = v
        return full + a.m[p]

    if seg.left is None and seg.right is None:
        raise Mechanism("there is no support: the member is held nowhere")
    if seg.left is None:
        v = _forward(panels, first, stop, float(P[0]), q, P)
        m = _forward(panels, first, stop, float(C[0]), density(v), C)
        v_end = float(_last(panels, first, stop, float(P[0]), q, P))
        m_end = float(_last(panels, first, stop, float(C[0]), density(v), C))
        return v, m, (0.0, v_end, 0.0, m_end + n_right * level_right)
    if seg.right is None:
        v = _backward(panels, first, stop, -float(P[-1]), q, P)
        m = _backward(panels, first, stop, -float(C[-1]), density(v), C)
        v_start = float(v[0] @ panels.rule.left)
        m_start = float(m[0] @ panels.rule.left)
        return v, m, (v_start, 0.0, m_start + n_left * level_left, 0.0)
    known_left, known_right = known_moments(layout, seg, a, p)
    m_left, m_right = known_left - n_left * level_left, known_right - n_right * level_right
    length = layout.nodes[seg.right].at - layout.nodes[seg.left].at
    v0 = _forward(panels, first, stop, 0.0, q, P)
    m0_end = float(_last(panels, first, stop, m_left, density(v0), C))
    v_left = (m_right - m0_end) / length
    v_right = float(_last(panels, first, stop, v_left, q, P))
    ahead = v0 + v_left
    behind = _backward(panels, first, stop, v_right, q, P)
    m_ahead = _forward(panels, first, stop, m_left, density(ahead), C)
    m_behind = _backward(panels, first, stop, m_right, density(behind), C)
    middle = 0.5 * (layout.nodes[seg.right].at + layout.nodes[seg.left].at)
    near_left = (panels.b[first:stop] <= middle)[:, None]
    v, m = np.where(near_left, ahead, behind), np.where(near_left, m_ahead, m_behind)
    return v, m, (v_left, v_right, known_left, known_right)


def turns_freely(layout: Layout, node: int, p: int) -> bool:
    """Whether a node ends the member and lets it turn in plane p: then its end moment is known."""
    n = layout.nodes[node]
    here = [s for s in layout.segments if node in (s.left, s.right)]
    if len(here) != 1 or here[0].left is None or here[0].right is None or (n.hinge and p == 0):
        return False
    springs, rigid = n.held("rotation" if p == 0 else "rotation_across")
    return not springs and not rigid


def known_moments(layout: Layout, seg: Segment, a: Actions, p: int) -> tuple[float, float]:
    """Moments at the ends of a segment about its nodes' levels, where they are known; else zero."""
    left = right = 0.0
    if seg.left is not None and turns_freely(layout, seg.left, p):
        left = couple_at(layout, seg.left, a, p)
    if seg.right is not None and turns_freely(layout, seg.right, p):
        right = -couple_at(layout, seg.right, a, p)
    return left, right


def couple_at(layout: Layout, node: int, a: Actions, p: int) -> float:
    """Couple of the loads at a node, about its level [N m]."""
    n = layout.nodes[node]
    return float(a.C[p, n.border] - a.F[n.border] * n.level[p])
