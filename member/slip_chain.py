"""Panels with joints that slip put together along the member, from the left end to the right and back.

Going right, all that lies to the left of a border is one relation G = A s + g between force and slip of the joints
there; going back, the slips follow. The relation is positive for any stiffness of the joints, so that neither
direction loses digits to growing exponentials.

Source of the method: invariant imbedding, R. Bellman, G. M. Wing, An Introduction to Invariant Imbedding, Wiley, 1975
(from memory).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.faults import Mechanism
from fishbelly.member.slip_panels import Transfer

Array = NDArray[np.float64]
Index = NDArray[np.intp]


@dataclass(frozen=True, eq=False)
class Borders:
    """What happens to the joints at the borders of the grid.

    Parameters
    ----------
    at : ndarray, shape (K + 1,)
        Places [m].
    active : tuple of ndarray of int
        Joints that are there, panel by panel.
    held : ndarray of bool, shape (K + 1,)
        Nothing slips here: a support that holds the rotation.
    cut : ndarray of bool, shape (K + 1,)
        All layers end here: a hinge, an end of the member.
    springs : ndarray, shape (K + 1, J)
        Single fasteners [N/m].
    """

    at: Array
    active: tuple[Index, ...]
    held: NDArray[np.bool_]
    cut: NDArray[np.bool_]
    springs: Array


@dataclass(frozen=True, eq=False)
class _Through:
    """A panel after all that lies left of it: s and G at its left end by g there and s at its right end."""

    joints: Index
    held: bool
    A: Array
    inner: Array
    GG: Array
    sG: Array
    ss: Array


@dataclass(frozen=True, eq=False)
class _Border:
    """Joints that end at a border and those that go on; positions in the panel on the left, numbers on the right."""

    ends: Index
    on: Index
    pinned: NDArray[np.bool_]
    out: Array
    across: Array
    back: Array
    numbers: Index
    A: Array


@dataclass(frozen=True, eq=False)
class Chain:
    """The member as a chain of panels, factored once for all loads."""

    borders: Borders
    panels: tuple[_Through | None, ...]
    joins: tuple[_Border | None, ...]
    starts: tuple[Index, ...]

    @classmethod
    def of(cls, transfer: Transfer, borders: Borders) -> Chain:
        """Go along the member once and factor."""
        panels: list[_Through | None] = []
        joins: list[_Border | None] = []
        starts: list[Index] = []
        numbers, A = np.zeros(0, dtype=np.intp), np.zeros((0, 0))
        for k, joints in enumerate(borders.active):
            starts.append(np.setdiff1d(joints, numbers))
            if joints.size == 0:
                panels.append(None)
                joins.append(None)
                numbers, A = joints, np.zeros((0, 0))
                continue
            full = np.zeros((joints.size, joints.size))
            old = np.searchsorted(joints, numbers)
            full[np.ix_(old, old)] = A
            through, A = _passed(transfer, k, joints, bool(borders.held[k]), full)
            panels.append(through)
            if borders.held[k + 1]:
                joins.append(None)
                numbers, A = np.zeros(0, dtype=np.intp), np.zeros((0, 0))
                continue
            following = np.zeros(0, dtype=np.intp) if borders.cut[k + 1] else borders.active[k + 1]
            join = _joined(joints, following, A, borders.springs[k + 1])
            joins.append(join)
            numbers, A = join.numbers, join.A
        return cls(borders, tuple(panels), tuple(joins), tuple(starts))

    def ends(self, G: Array, s: Array, jumps: Array, before: Array, after: Array) -> tuple[Array, Array]:
        """Force of the joints at the left end of every panel and slip at its right end.

        Parameters
        ----------
        G, s : ndarray, shape (K, J, R)
            Force at the right end and slip at the left end by what acts inside each panel.
        jumps : ndarray, shape (K + 1, J, R)
            Force put in at the borders [N].
        before, after : ndarray, shape (K, J, R)
            Force beyond each joint at the right and at the left end of a panel, where the member is cut by a hinge [N].

        Returns
        -------
        left, right : ndarray, shape (K, J, R)
            Force at the left ends [N] and slip at the right ends [m]; zero where a joint is not there.

        Raises
        ------
        Mechanism
            When a layer that nothing holds along x is pushed.
        """
        offsets = self._forward(G, s, jumps, before, after)
        return self._backward(s, offsets)

    def _forward(self, G: Array, s: Array, jumps: Array, before: Array, after: Array) -> list[tuple[Array, Array]]:
        """For every panel: g at its left end, and what its ending joints need of slip at the right border."""
        found: list[tuple[Array, Array]] = []
        R = G.shape[-1]
        g = np.zeros((0, R))
        last = len(self.panels) - 1
        for k, panel in enumerate(self.panels):
            if panel is None:
                found.append((g, g))
                g = np.zeros((0, R))
                continue
            joints = panel.joints
            at_left = np.zeros((joints.size, R))
            at_left[np.searchsorted(joints, np.setdiff1d(joints, self.starts[k]))] = g
            fresh = np.searchsorted(joints, self.starts[k])
            hinge = self.borders.cut[k] and k > 0
            at_left[fresh] = (after if hinge else jumps)[k][self.starts[k]]
            if panel.held:
                G_left = panel.inner @ s[k][joints]
            else:
                G_left = panel.A @ (panel.inner @ (panel.sG @ at_left + s[k][joints])) + at_left
            g_right = panel.GG @ G_left + G[k][joints]
            join = self.joins[k]
            if join is None:
                found.append((at_left, np.zeros((0, R))))
                g = np.zeros((0, R))
                continue
            ending = joints[join.ends]
            hinge = self.borders.cut[k + 1] and k < last
            target = before[k][ending] if hinge else -jumps[k + 1][ending]
            missing = target - g_right[join.ends]
            self._see_pinned(join, joints, k, missing, g_right, target)
            needed = join.out @ missing
            found.append((at_left, needed))
            g = g_right[join.on] + join.across @ needed + jumps[k + 1][joints[join.on]]
        return found

    def _see_pinned(self, join: _Border, joints: Index, k: int, missing: Array, g: Array, target: Array) -> None:
        if not join.pinned.any():
            return
        size = max(float(np.abs(g).max(initial=0.0)), float(np.abs(target).max(initial=0.0)))
        if np.any(np.abs(missing[join.pinned]) > 1e-9 * size):
            raise Mechanism(
                f"nothing holds a layer along x left of x = {self.borders.at[k + 1]:.6g} m, and it is pushed"
            )

    def _backward(self, s: Array, offsets: list[tuple[Array, Array]]) -> tuple[Array, Array]:
        left, right = np.zeros_like(s), np.zeros_like(s)
        R = s.shape[-1]
        ahead, numbers = np.zeros((0, R)), np.zeros(0, dtype=np.intp)
        for k in range(len(self.panels) - 1, -1, -1):
            panel, join = self.panels[k], self.joins[k]
            if panel is None:
                ahead, numbers = np.zeros((0, R)), np.zeros(0, dtype=np.intp)
                continue
            joints, (g, needed) = panel.joints, offsets[k]
            here = np.zeros((joints.size, R))
            if join is not None:
                here[join.on] = ahead[np.searchsorted(numbers, joints[join.on])]
                here[join.ends] = needed - join.back @ here[join.on]
            right[k][joints] = here
            if panel.held:
                at_left = np.zeros_like(here)
                left[k][joints] = panel.inner @ (panel.ss @ here + s[k][joints])
            else:
                at_left = panel.inner @ (panel.sG @ g + panel.ss @ here + s[k][joints])
                left[k][joints] = panel.A @ at_left + g
            ahead, numbers = at_left, joints
        return left, right


def _passed(transfer: Transfer, k: int, joints: Index, held: bool, A: Array) -> tuple[_Through, Array]:
    """Add a panel to what lies left of it: the panel, and A at its right end."""
    at = np.ix_(joints, joints)
    GG, Gs, sG, ss = (v[k][at] for v in (transfer.GG, transfer.Gs, transfer.sG, transfer.ss))
    if held:
        # s = 0 at the left end: its force follows from the slip at the right end alone
        inner = -np.linalg.inv(sG)
        return _Through(joints, True, A, inner, GG, sG, ss), Gs + GG @ inner @ ss
    inner = np.linalg.inv(np.eye(joints.size) - sG @ A)
    return _Through(joints, False, A, inner, GG, sG, ss), Gs + GG @ A @ inner @ ss


def _joined(joints: Index, following: Index, A: Array, springs: Array) -> _Border:
    on = np.flatnonzero(np.isin(joints, following))
    ends = np.flatnonzero(~np.isin(joints, following))
    own = A[np.ix_(ends, ends)].copy()
    # nothing holds such a layer: its slip is anything, and is counted from this end
    pinned = ~np.any(A[ends] != 0.0, axis=1)
    own[pinned], own[:, pinned] = 0.0, 0.0
    own[pinned, pinned] = 1.0
    out: Array = np.linalg.inv(own).astype(float)
    out[pinned] = 0.0
    across = A[np.ix_(on, ends)]
    back = out @ A[np.ix_(ends, on)]
    rest = A[np.ix_(on, on)] - across @ back + np.diag(springs[joints[on]])
    return _Border(ends, on, pinned, out, across, back, joints[on], rest)
