"""Loads as the grid sees them: densities at its points, forces at its borders, free strain.

Two planes are treated alike. Plane 0 is the vertical one with c = z; plane 1 the horizontal one with c = -y, so
that a force along x at (y, z) turns both the same way. Levels count from the *analysis line*, a straight line
near the centroid.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member
from fishbelly.member.forces import Forces
from fishbelly.member.free_strain import free_plane, resultants
from fishbelly.member.laws import straight
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
from fishbelly.member.moduli import Moduli
from fishbelly.member.profile import Profile
from fishbelly.member.spans import Span, spans
from fishbelly.member.stage_view import StageView, stage_views

Array = NDArray[np.float64]

GRAVITY = 9.80665
"""Standard acceleration of gravity [m/s2], exact by definition (3rd CGPM, 1901)."""

FREE_STRAIN = (Temperature, Shrinkage, Prestress)


@dataclass(frozen=True)
class Atom:
    """Loads that always act together: of one case, one span where they are `pattern`, one creep of shrinkage."""

    case: str
    span: Span | None = None
    own_creep: tuple[str, float] | None = None


@dataclass(frozen=True, eq=False)
class Actions:
    """What one atom puts on the member.

    Parameters
    ----------
    q : ndarray, shape (2, K, n)
        Transverse load per length at the grid points, down and across [N/m].
    n, m : ndarray, shapes (K, n) and (2, K, n)
        Load along x per length [N/m], and its moment per length about the analysis line [N].
    P, F, C : ndarray, shapes (2, K + 1), (K + 1,), (2, K + 1)
        Transverse forces, forces along x [N] and couples about the analysis line [N m] at the borders.
    free : tuple of Load
        Loads that give free strain.
    opened : ndarray, shape (K + 1,), optional
        Moment at borders with a hinge that opens there and goes [N m].
    """

    q: Array
    n: Array
    m: Array
    P: Array
    F: Array
    C: Array
    free: tuple[Load, ...] = ()
    opened: Array | None = None


@dataclass(frozen=True, eq=False)
class Frame:
    """The grid with its analysis line and short-term centroid.

    Parameters
    ----------
    profile : Profile
        The sampled member.
    short : Moduli
        Short-term moduli.
    line : ndarray, shape (2,)
        Level c of the analysis line in both planes [m].
    centre : ndarray, shape (2, K, n)
        E-weighted centroid, short-term, from the analysis line [m].
    view : StageView, optional
        The stage it is of, where the member has stages.
    """

    profile: Profile
    short: Moduli
    line: Array
    centre: Array
    view: StageView | None = None

    @classmethod
    def of(cls, profile: Profile, short: Moduli, line: Array | None = None, view: StageView | None = None) -> Frame:
        """Make the frame: the analysis line is the mean of the centroid line unless one is given."""
        s = profile.stiffness(short)
        c = np.stack((s.z_c, -s.y_c))[:, profile.row]
        if line is None:
            line = 0.5 * (c.reshape(2, -1).min(axis=1) + c.reshape(2, -1).max(axis=1))
        return cls(profile, short, line, c - line[:, None, None], view)

    def centroid(self, x: float) -> Array:
        """Centroid at x from the analysis line, right of a break (left of it at the far end), shape (2,)."""
        panels = self.profile.panels
        k = panels.border(x)
        if k == panels.count:
            return np.asarray(self.centre[:, -1] @ panels.rule.right)
        return np.asarray(self.centre[:, k] @ panels.rule.left)

    def level(self, level: str | float, x: float) -> Array:
        """Return a level of the section, as loads and supports name it, from the analysis line, shape (2,)."""
        here = self.centroid(x)
        if level == "centroid":
            return here
        if level == "datum":
            z = 0.0
        elif isinstance(level, str):
            z = self._edge(level, x)
        else:
            z = float(level)
        return np.array([z - self.line[0], here[1]])

    def _edge(self, level: str, x: float) -> float:
        geometry = self.profile.geometry
        side = "left" if x >= self.profile.member.length * (1.0 - 1e-12) else "right"
        outlines = geometry.place(np.array([x]), side).outlines
        bounds = [o.bounds() for o in outlines]
        if level == "bottom":
            return float(min(b[1][0] for b in bounds))
        return float(max(b[3][0] for b in bounds))


def atoms(member: Member) -> tuple[Atom, ...]:
    """Return the groups of loads that act together, in the order of the member's cases; at least one."""
    found: dict[Atom, None] = {}
    for load in member.loads:
        for atom in _atoms_of(member, load):
            found.setdefault(atom)
    for support in member.supports:
        if support.sinks:
            found.setdefault(Atom(support.case))
    return tuple(found) or (Atom("nothing"),)


def _atoms_of(member: Member, load: Load) -> list[Atom]:
    if isinstance(load, Shrinkage) and load.creep is not None:
        return [Atom(load.case, None, (load.part, load.creep))]
    if getattr(load, "pattern", False):
        return [Atom(load.case, s) for s in spans(member) if _covers(load, s, member.length)]
    return [Atom(load.case)]


def _covers(load: Load, span: Span, length: float) -> bool:
    if isinstance(load, Point):
        last = span.end >= length * (1.0 - 1e-12)
        return span.start <= load.at < span.end or (last and load.at >= span.start)
    if isinstance(load, Distributed):
        xs = [x for x, _ in load.stations]
        return min(max(xs), span.end) - max(min(xs), span.start) > 1e-12 * length
    return False


def actions(frame: Frame, atom: Atom) -> Actions:
    """Collect what an atom puts on the grid."""
    member, panels = frame.profile.member, frame.profile.panels
    shape = panels.x.shape
    a = Actions(
        np.zeros((2, *shape)),
        np.zeros(shape),
        np.zeros((2, *shape)),
        np.zeros((2, shape[0] + 1)),
        np.zeros(shape[0] + 1),
        np.zeros((2, shape[0] + 1)),
        tuple(v for v in member.loads if isinstance(v, FREE_STRAIN) and atom in _atoms_of(member, v)),
    )
    for load in member.loads:
        if atom not in _atoms_of(member, load):
            continue
        if isinstance(load, Distributed):
            _distributed(frame, a, load, atom.span)
        elif isinstance(load, Point):
            _point(frame, a, load)
        elif isinstance(load, Couple):
            a.C[0, panels.border(load.at)] += load.value
        elif isinstance(load, Axial):
            _axial(frame, a, load.at, load.value, frame.level(load.level, load.at))
        elif isinstance(load, SelfWeight):
            _self_weight(frame, a, load)
    return a


def components(rises: float, direction: str, per: str | None) -> tuple[float, float, float]:
    """Shares of a load's value down, across and along x, per length of the member.

    Parameters
    ----------
    rises : float
        Inclination of the member [rad].
    direction : {"down", "up", "across"}
        Direction of the load.
    per : {None, "plan", "slope"}
        None: square to the member; else vertical, per plan length or per length along the member.
    """
    c, s = float(np.cos(rises)), float(np.sin(rises))
    share = c if per == "plan" else 1.0
    if direction == "across":
        return 0.0, share, 0.0
    sign = -1.0 if direction == "up" else 1.0
    if per is None:
        return sign, 0.0, 0.0
    return sign * share * c, 0.0, -sign * share * s


def _distributed(frame: Frame, a: Actions, load: Distributed, span: Span | None) -> None:
    panels = frame.profile.panels
    xs, qs = np.array(load.stations, dtype=float).T
    middle = 0.5 * (panels.a + panels.b)
    inside = (middle > xs[0]) & (middle < xs[-1])
    if span is not None:
        inside &= (middle > span.start) & (middle < span.end)
    q = np.where(inside[:, None], straight(xs, qs)(panels.x), 0.0)
    down, across, along = components(frame.profile.member.rises, load.direction, load.per)
    a.q[0] += down * q
    a.q[1] += across * q
    if along:
        a.n[...] += along * q
        a.m[...] += along * q * frame.centre


def _point(frame: Frame, a: Actions, load: Point) -> None:
    rises = frame.profile.member.rises
    # a single force has no plan length: per "plan" and "slope" both mean vertical
    down, across, along = components(rises, load.direction, "slope" if load.per else None)
    k = frame.profile.panels.border(load.at)
    a.P[0, k] += down * load.value
    a.P[1, k] += across * load.value
    if along:
        _axial(frame, a, load.at, along * load.value, frame.centroid(load.at))


def _axial(frame: Frame, a: Actions, at: float, value: float, level: Array) -> None:
    k = frame.profile.panels.border(at)
    a.F[k] += value
    a.C[:, k] += value * level


def weighed_parts(member: Member, load: SelfWeight, view: StageView | None) -> tuple[str, ...]:
    """Parts that a self weight counts: those it names, else those present that no earlier stage has weighed."""
    if load.parts is not None:
        return load.parts
    if view is None:
        return tuple(p.name for p in member.parts)
    before: set[str] = set()
    for earlier in stage_views(member)[: view.index]:
        for other in member.loads:
            if isinstance(other, SelfWeight) and other.case in earlier.cases:
                before.update(other.parts or (member.parts[i].name for i in earlier.parts))
    return tuple(member.parts[i].name for i in sorted(view.parts) if member.parts[i].name not in before)


def _self_weight(frame: Frame, a: Actions, load: SelfWeight) -> None:
    member, profile = frame.profile.member, frame.profile
    weighed = weighed_parts(member, load, frame.view)
    wanted = [p.material is not None and p.name in weighed for p in member.parts]
    density = np.array(
        [
            member.material(p.material).density or 0.0 if w and p.material else 0.0
            for p, w in zip(member.parts, wanted, strict=True)
        ]
    )
    mass, y, z = (v[profile.row] for v in profile.mass(density, frozenset(weighed)))
    weight = load.factor * GRAVITY * mass
    a.q[0] += weight * np.cos(member.rises)
    if member.rises:
        along = -weight * np.sin(member.rises)
        a.n[...] += along
        a.m[0] += along * (z - frame.line[0])
        a.m[1] += along * (-y - frame.line[1])


def free_forces(frame: Frame, loads: Sequence[Load], moduli: Moduli) -> Forces:
    """Forces that hold free strain back, about the analysis line, at the grid points."""
    profile = frame.profile
    total = np.zeros((3, profile.rows))
    for group in profile.groups:
        E = group.modulus(moduli.E)
        for load in loads:
            plane = free_plane(profile, load, group, group.placed.x, frame.short)
            if plane is not None:
                total[:, group.rows] += resultants(plane, group, E)
    N, M_y, M_z = total[:, profile.row]
    M = np.stack((M_y + N * frame.line[0], -M_z + N * frame.line[1]))
    return Forces(N, np.zeros_like(M), M)


def planes_of(frame: Frame, loads: Sequence[Sequence[Load]]) -> dict[int, Array]:
    """Free strain of each part that several sets of loads give, as planes about the analysis line.

    Parameters
    ----------
    frame : Frame
        The grid.
    loads : sequence of sequence of Load
        A sets of loads.

    Returns
    -------
    dict
        By number of the part: v0 + v1 c0 + v2 c1 at the grid points, shape (3, A, K, n); parts without left out.
    """
    profile = frame.profile
    found: dict[int, Array] = {}
    for a, each in enumerate(loads):
        for group in profile.groups if each else ():
            for load in each:
                plane = free_plane(profile, load, group, group.placed.x, frame.short)
                if plane is None:
                    continue
                values = np.stack((plane.e + plane.a * frame.line[0] - plane.b * frame.line[1], plane.a, -plane.b))
                for k, part in enumerate(group.placed.index):
                    rows = found.setdefault(part, np.zeros((3, len(loads), profile.rows)))
                    rows[:, a, group.rows] += values[:, k]
    return {part: rows[:, :, profile.row] for part, rows in found.items()}
