"""Shear stiffness along the member: the section's strain energy, solved where its shape changes and no more.

Between two places where the section's shape may jump, the shear coefficient (flexibility times the sum of G A) is
smooth. It is found once where the shape only stays or scales, else at Chebyshev points, as many as it takes. These
stretches come from the geometry alone: stations, loads and the grid of the solution move nothing.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.breakpoints import geometry_breaks, merged
from fishbelly.member.clusters import clusters
from fishbelly.member.faults import CannotCompute
from fishbelly.member.geometry import Geometry
from fishbelly.member.openings import opening_round_ends
from fishbelly.member.panels import Panels
from fishbelly.member.topology import crossing_places
from fishbelly.sections.chebyshev import rule
from fishbelly.sections.composition import Composition
from fishbelly.sections.flexure import flexure
from fishbelly.sections.outlines import Outline
from fishbelly.sections.section_mesh import MeshFoldError

Array = NDArray[np.float64]
Presence = tuple[tuple[int, ...], ...]

POINTS = 7
"""Places at which the section is solved on a stretch in which its shape changes; three times as many, these among
them, where they are not enough."""
RESOLVED = 1e-6
"""Last Chebyshev coefficients of the shear coefficient against its largest value: it is as exact as the elements are.

They promise 1e-6, and neighbouring places may have different meshes: a tighter bound would chase their difference.
"""
MOST_PIECES = 10
"""Pieces a stretch is divided into at most, those first that miss most over their length: where a section is hard to
mesh its coefficient scatters, and no number of pieces would follow that.
"""
ALIKE = 1e-10
"""Outlines that differ by less than this share of the section's size have one shape."""


@dataclass(frozen=True, eq=False)
class _Piece:
    """A stretch with its coefficients at the points of a panel: (3, n), or (3, 1) where they do not change."""

    panel: Panels
    there: Presence
    values: Array

    def at(self, x: Array) -> Array:
        if self.values.shape[1] == 1:
            return np.broadcast_to(self.values, (3, x.size))
        s = self.panel.local(np.zeros(x.size, dtype=np.intp), x)
        return np.asarray(self.values @ rule(self.values.shape[1]).basis(s).T)


@dataclass(frozen=True, eq=False)
class ShearAlong:
    """Shear flexibility of a member at any place, for any moduli.

    Parameters
    ----------
    geometry : Geometry
        Places the parts.
    """

    geometry: Geometry
    _found: dict[bytes, tuple[_Piece, ...]] = field(default_factory=dict, repr=False)

    @cached_property
    def _stretches(self) -> tuple[Array, Array, NDArray[np.int_]]:
        """Ends of the stretches and the anchor of each: where an opening's outline begins like a root."""
        member = self.geometry.member
        ends = merged([0.0, member.length, *geometry_breaks(member)], member.length)
        anchors = np.zeros(ends.size - 1, dtype=np.int_)
        more = crossing_places(self.geometry, Panels(ends[:-1], ends[1:], anchors))
        if more:
            ends = merged([*ends.tolist(), *more], member.length)
        a, b = ends[:-1], ends[1:]
        anchors = np.zeros(a.size, dtype=np.int_)
        close = 1e-9 * member.length
        for place in (x for o in member.openings for x in opening_round_ends(o)):
            anchors[np.abs(a - place) < close] = -1
            anchors[np.abs(b - place) < close] = 1
        return a, b, anchors

    def coefficients(self, x: Array, middle: Array, E: Array, G: Array) -> Array:
        """Flexibility along z, along y and mixed, times the sum of G A, shape (3, X).

        Parameters
        ----------
        x : ndarray, shape (X,)
            Places [m].
        middle : ndarray, shape (X,)
            A place beside each that tells on which side of a break it is [m].
        E, G : ndarray, shape (P,)
            Moduli of the member's parts [Pa].

        Raises
        ------
        CannotCompute
            When a section cannot be divided into cells.
        """
        pieces = self._pieces(E, G)
        ends = np.array([p.panel.b[0] for p in pieces])
        which = np.minimum(np.searchsorted(ends, middle, side="left"), ends.size - 1)
        found = np.empty((3, x.size))
        for k in sorted(set(which.tolist())):
            mine = which == k
            found[:, mine] = pieces[k].at(x[mine])
        return found

    def _pieces(self, E: Array, G: Array) -> tuple[_Piece, ...]:
        # a common factor changes no coefficient
        key = (E / E.max()).tobytes() + (G / G.max()).tobytes()
        if key not in self._found:
            self._found[key] = self._solve(E, G)
        return self._found[key]

    def _solve(self, E: Array, G: Array) -> tuple[_Piece, ...]:
        by_presence: dict[Presence, list[int]] = {}
        a, b, anchors = self._stretches
        for k in range(a.size):
            there = self.geometry.present(float(0.5 * (a[k] + b[k])))
            if any(not self.geometry.member.parts[i].cuts for i in there[0]):
                by_presence.setdefault(there, []).append(k)
        pieces: list[_Piece] = []
        for there, which in by_presence.items():
            known: dict[bytes, Array] = {}
            for k in which:
                panel = Panels(a[k : k + 1], b[k : k + 1], anchors[k : k + 1])
                pieces += self._stretch(panel, there, E, G, known)
        return tuple(sorted(pieces, key=lambda p: float(p.panel.a[0])))

    def _stretch(self, panel: Panels, there: Presence, E: Array, G: Array, known: dict[bytes, Array]) -> list[_Piece]:
        """Coefficients over a stretch, of which halves are halved where they are not resolved."""
        whole = float(panel.b[0] - panel.a[0])
        pieces = [self._piece(panel, there, E, G, known)]
        while len(pieces) < MOST_PIECES:
            missed = [_missed(p) * float(p.panel.b[0] - p.panel.a[0]) / whole for p in pieces]
            worst = max(range(len(pieces)), key=missed.__getitem__)
            if missed[worst] < RESOLVED:
                break
            pieces[worst : worst + 1] = [self._piece(h, there, E, G, known) for h in _halves(pieces[worst].panel)]
        return pieces

    def _piece(self, panel: Panels, there: Presence, E: Array, G: Array, known: dict[bytes, Array]) -> _Piece:
        values = self._at(_places(panel, POINTS), there, E, G, known)
        piece = _Piece(panel, there, values)
        if _missed(piece) < RESOLVED:
            return piece
        x = _places(panel, 3 * POINTS)
        new = np.ones(x.size, dtype=bool)
        # every third place is one of the first ones
        new[1::3] = False
        more = np.empty((3, x.size))
        more[:, ~new], more[:, new] = values, self._at(x[new], there, E, G, known)
        return _Piece(panel, there, more)

    def _at(self, x: Array, there: Presence, E: Array, G: Array, known: dict[bytes, Array]) -> Array:
        """Coefficients at places of one stretch, (3, n); (3, 1) where the shape stays or only scales."""
        placed = self.geometry.place(x, "right", there)
        cuts = tuple((c.outline, c.targets, c.mass) for c in placed.cuts)
        index = list(placed.index)
        run = placed.run_in
        shape = _shape(placed.outlines, [c[0] for c in cuts], run)
        if np.ptp(shape, axis=0).max(initial=0.0) < ALIKE:
            key = np.round(shape[0], 9).tobytes()
            if key not in known:
                known[key] = self._solved(Composition(placed.outlines, cuts), index, run, there, E, G, x, slice(0, 1))
            return known[key]
        return self._solved(Composition(placed.outlines, cuts), index, run, there, E, G, x, slice(None))

    def _solved(
        self,
        section: Composition,
        index: list[int],
        run: Array,
        there: Presence,
        E: Array,
        G: Array,
        x: Array,
        rows: slice,
    ) -> Array:
        some = section if rows == slice(None) else _first(section)
        if _is_rectangle(some):
            return np.array([[1.2], [1.2], [0.0]])
        mine_E, mine_G = (v[index][:, None] * run[:, rows] for v in (E, G))
        groups = clusters(self.geometry.member)
        try:
            f = flexure(some, mine_E, mine_G, [groups[i] for i in index], share_angle=bool(there[2]))
        except MeshFoldError as error:
            raise CannotCompute(f"shear at x = {x[error.station]:.6g} m: {error}") from None
        whole = (mine_G * some.moments.area).sum(axis=0)
        return np.stack((f.F_zz, f.F_yy, f.F_yz)) * whole


def _places(panel: Panels, count: int) -> Array:
    return panel.place(np.zeros(count, dtype=np.intp), rule(count).points)


def _missed(piece: _Piece) -> float:
    """Last Chebyshev coefficients of a piece against its largest value."""
    n = piece.values.shape[1]
    if n == 1:
        return 0.0
    last = piece.values @ rule(n).to_coefficients[-2:].T
    return float(np.abs(last).max() / np.abs(piece.values[:2]).max())


def _halves(panel: Panels) -> tuple[Panels, Panels]:
    a, b, anchor = panel.a[0], panel.b[0], int(panel.anchor[0])
    middle = float(panel.place(np.zeros(1, dtype=np.intp), np.zeros(1))[0])
    left = Panels(np.array([a]), np.array([middle]), np.array([min(anchor, 0)]))
    return left, Panels(np.array([middle]), np.array([b]), np.array([max(anchor, 0)]))


def _first(section: Composition) -> Composition:
    """Return the first station of a composition."""

    def first(o: Outline) -> Outline:
        return Outline(o.y[:1], o.z[:1], o.bulge, o.loops)

    return Composition(tuple(map(first, section.outlines)), tuple((first(o), t, m) for o, t, m in section.cuts))


def _is_rectangle(section: Composition) -> bool:
    """Whether the section is one rectangle that stands upright, for which 6/5 is exact."""
    if len(section.outlines) > 1 or section.cuts:
        return False
    o = section.outlines[0]
    if o.bulge.size != 4 or np.any(o.bulge):
        return False
    dy, dz = o.ends[0] - o.y, o.ends[1] - o.z
    size = np.abs(dy).max() + np.abs(dz).max()
    return bool(np.all(np.minimum(np.abs(dy), np.abs(dz)) < 1e-12 * size))


def _shape(outlines: Sequence[Outline], cuts: Sequence[Outline], run: Array) -> Array:
    """Corners of all outlines in the section's own size about its middle, and what else decides, shape (S, ...)."""
    y = np.concatenate([o.y for o in (*outlines, *cuts)], axis=1)
    z = np.concatenate([o.z for o in (*outlines, *cuts)], axis=1)
    own_y, own_z = (np.concatenate([getattr(o, f) for o in outlines], axis=1) for f in ("y", "z"))
    low_y, low_z = own_y.min(axis=1, keepdims=True), own_z.min(axis=1, keepdims=True)
    size = np.maximum(np.ptp(own_y, axis=1), np.ptp(own_z, axis=1))[:, None]
    # openings reach far out to both sides: what lies beyond the section does not count
    far = 2.0
    flat = [np.clip((y - low_y) / size, -far, far), np.clip((z - low_z) / size, -far, far)]
    bulges = np.concatenate([np.broadcast_to(o.bulge, o.y.shape) for o in (*outlines, *cuts)], axis=1)
    return np.concatenate([*flat, bulges, (run / np.maximum(run.max(axis=0), 1e-300)).T], axis=1)
