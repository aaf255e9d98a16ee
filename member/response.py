"""What the member does: forces, strains, rotations and deflections at the grid points, with an algebra.

Responses of the elastic law add and scale; everything else (extremes, stresses, checks) reads them.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, fields

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Actions, Atom, Frame, free_forces
from fishbelly.member.compatibility import Redundants, Solution, redundants, solve
from fishbelly.member.description import Support
from fishbelly.member.equilibrium import axial_forces, panels_integral
from fishbelly.member.forces import Forces
from fishbelly.member.moduli import Moduli
from fishbelly.member.nodes import Layout, Segment
from fishbelly.member.panels import Panels
from fishbelly.member.section_law import ElasticLaw, Strains
from fishbelly.member.unknowns import HELD_BY, Dof

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Response:
    """Fields at the grid points; leading axis A of atoms where there are several.

    Parameters
    ----------
    N : ndarray, shape (A, K, n)
        Axial force, tension positive [N].
    V, M : ndarray, shape (2, A, K, n)
        Shear force [N] and moment about the analysis line [N m] in both planes.
    axial : ndarray, shape (A, K, n)
        Strain on the analysis line.
    curvature, shear : ndarray, shape (2, A, K, n)
        Curvature [1/m] and shear angle [rad].
    rotation, deflection : ndarray, shape (2, A, K, n)
        Rotation of the section [rad] and deflection [m], plane 0 downwards, plane 1 towards +y.
    reactions : ndarray, shape (A, supports, 5)
        Force of each support on the member: down, along x, couple, across, couple sideways.
    """

    N: Array
    V: Array
    M: Array
    axial: Array
    curvature: Array
    shear: Array
    rotation: Array
    deflection: Array
    reactions: Array

    def __add__(self, other: Response) -> Response:
        """Superpose two responses of the same grid."""
        return Response(*(getattr(self, f.name) + getattr(other, f.name) for f in fields(self)))

    def __mul__(self, factor: float) -> Response:
        """Scale a response."""
        return Response(*(getattr(self, f.name) * factor for f in fields(self)))

    __rmul__ = __mul__

    def combined(self, factors: Array) -> Response:
        """Sum over atoms with factors, shape (A,): a response without the axis of atoms."""
        single = ("N", "axial", "reactions")
        return Response(
            *(np.tensordot(factors, getattr(self, f.name), (0, 0 if f.name in single else 1)) for f in fields(self))
        )

    @property
    def slope(self) -> Array:
        """Slope of the axis, d(deflection)/dx, shear included [rad]."""
        return self.rotation + self.shear


def respond(
    frame: Frame,
    layout: Layout,
    law: ElasticLaw,
    atoms: Sequence[Atom],
    loads: list[Actions],
    free: list[Forces],
    planes: int,
) -> Response:
    """Response to every atom; see `responded`."""
    return responded(frame, layout, law, atoms, loads, free, planes)[0]


def responded(
    frame: Frame,
    layout: Layout,
    law: ElasticLaw,
    atoms: Sequence[Atom],
    loads: list[Actions],
    free: list[Forces],
    planes: int,
) -> tuple[Response, Strains]:
    """Response to every atom, and the strains as the law has them.

    Parameters
    ----------
    frame, layout, law : Frame, Layout, ElasticLaw
        Grid, supports at work and section law.
    atoms, loads : sequences of Atom and of Actions
        The loads.
    free : list of Forces
        Forces that hold free strain back, for each atom.
    planes : int
        1: only the vertical plane deflects.

    Returns
    -------
    Response
        With an axis of atoms.
    Strains
        The same strains; where parts slip on each other, layer by layer.

    Raises
    ------
    Mechanism
        When something can move freely.
    """
    r = redundants(frame, layout, law, planes)
    sinks = [_settlements(layout, atom) for atom in atoms]
    found = solve(frame, r, law, loads, free, sinks, planes)
    N = np.array([s.forces.N for s in found])
    V = np.stack([s.forces.V for s in found], axis=1)
    M = np.stack([s.forces.M for s in found], axis=1)
    strains = law.strains(type(free[0]).stacked(free).plus(Forces(N, V, M)))
    rotation, deflection = np.zeros_like(V), np.zeros_like(V)
    for p in range(planes):
        rotation[p], deflection[p] = _deflected(
            frame.profile.panels, layout, found, strains.curvature[p], strains.shear[p], p
        )
    reactions = np.array([_reactions(frame, r, s, atom, a) for s, atom, a in zip(found, atoms, loads, strict=True)])
    found_strains = (strains.axial, strains.curvature, strains.shear)
    return Response(N, V, M, *found_strains, rotation, deflection, reactions), strains


def _settlements(layout: Layout, atom: Atom) -> dict[Dof, Array]:
    """For each movement down: [spring stiffness times settlement, settlement of a rigid support]."""
    found: dict[Dof, Array] = {}
    for k, node in enumerate(layout.nodes):
        for s in node.supports:
            if s.sinks and s.case == atom.case and atom.span is None and atom.own_creep is None:
                entry = found.setdefault((k, "down"), np.zeros(2))
                if np.isinf(s.down):
                    entry[1] = s.sinks
                else:
                    entry[0] += s.down * s.sinks
    return found


def _deflected(
    panels: Panels, layout: Layout, found: list[Solution], curvature: Array, shear: Array, p: int
) -> tuple[Array, Array]:
    """Rotation and deflection of one plane, shape (A, K, n): curvature integrated twice, shear once."""
    rotation, deflection = np.zeros_like(curvature), np.zeros_like(curvature)
    way = "across" if p else "down"
    for seg in layout.segments:
        part = slice(seg.first, seg.stop)
        if seg.left is not None and seg.right is not None:
            start, end = (np.array([s.movements[node, way] for s in found]) for node in (seg.left, seg.right))
            turned, bent, last = _from_left(panels, seg, curvature, shear)
            x0, length = panels.a[seg.first], panels.b[seg.stop - 1] - panels.a[seg.first]
            chord = ((end - start - last) / length)[:, None, None]
            rotation[:, part] = turned + chord
            deflection[:, part] = start[:, None, None] + bent + chord * (panels.x[part] - x0)
        else:
            node = seg.left if seg.left is not None else seg.right
            assert node is not None
            hinge_right = p == 0 and layout.nodes[node].hinge and seg.left is not None
            turn = "turn across" if p else ("turn right" if hinge_right else "turn left")
            at = np.array([s.movements[node, way] for s in found])[:, None, None]
            turned_at = np.array([s.movements[node, turn] for s in found])[:, None, None]
            x0 = panels.a[seg.first] if seg.left is not None else panels.b[seg.stop - 1]
            integrate = _from_left if seg.left is not None else _from_right
            turned, bent, _ = integrate(panels, seg, curvature, shear)
            rotation[:, part] = turned + turned_at
            deflection[:, part] = at + bent + turned_at * (panels.x[part] - x0)
    return rotation, deflection


def _from_left(panels: Panels, seg: Segment, curvature: Array, shear: Array) -> tuple[Array, Array, Array]:
    """Rotation and deflection with none at the left end, and the deflection at the right end."""
    inner, whole = panels_integral(panels, seg.first, seg.stop, -curvature)
    turned = (np.cumsum(whole, axis=-1) - whole)[..., None] + inner
    full = np.zeros_like(curvature)
    full[:, seg.first : seg.stop] = turned
    inner, whole = panels_integral(panels, seg.first, seg.stop, full + shear)
    total = np.cumsum(whole, axis=-1)
    return turned, (total - whole)[..., None] + inner, total[..., -1]


def _from_right(panels: Panels, seg: Segment, curvature: Array, shear: Array) -> tuple[Array, Array, Array]:
    """Rotation and deflection with none at the right end, and the deflection at the left end."""
    inner, whole = panels_integral(panels, seg.first, seg.stop, curvature)
    after = np.cumsum(whole[..., ::-1], axis=-1)[..., ::-1] - whole
    turned = after[..., None] + whole[..., None] - inner
    full = np.zeros_like(curvature)
    full[:, seg.first : seg.stop] = turned
    inner, whole = panels_integral(panels, seg.first, seg.stop, full + shear)
    after = np.cumsum(whole[..., ::-1], axis=-1)[..., ::-1] - whole
    bent = -(after[..., None] + whole[..., None] - inner)
    return turned, bent, -(after[..., 0] + whole[..., 0])


def _reactions(frame: Frame, r: Redundants, solution: Solution, atom: Atom, a: Actions) -> Array:
    """Force of every support of the member on it, shape (supports, 5)."""
    member = frame.profile.member
    result = np.zeros((len(member.supports), 5))
    index = {s.name: k for k, s in enumerate(member.supports)}
    ways = ("down", "along", "turn left", "across", "turn across")
    for k, node in enumerate(r.layout.nodes):
        for column, way in enumerate(ways):
            if (k, way) in solution.reactions:
                total = solution.reactions[k, way]
                moved = solution.movements[k, way]
                for support, share in _shared(node.supports, HELD_BY[way], total, moved, atom):
                    result[index[support.name], column] += share
    holds = r.layout.holds_along
    if len(holds) == 1:
        _, along = axial_forces(frame, r.layout, a)
        holding = [s for s in r.layout.nodes[holds[0]].supports if s.along > 0.0]
        for support in holding:
            result[index[support.name], 1] = along / len(holding)
    return result


def _shared(
    supports: tuple[Support, ...], quantity: str, total: float, moved: float, atom: Atom
) -> list[tuple[Support, float]]:
    """Share a node's reaction among its supports: springs by their stiffness, rigid ones take the rest."""
    shares = []
    rigid = [s for s in supports if np.isinf(getattr(s, quantity))]
    for s in supports:
        stiffness = getattr(s, quantity)
        if 0.0 < stiffness < np.inf:
            base = s.sinks if quantity == "down" and s.case == atom.case and atom.span is None else 0.0
            shares.append((s, stiffness * (base - moved)))
    rest = total - sum(v for _, v in shares)
    if not rigid and len(shares) == 1:
        return [(shares[0][0], total)]
    return shares + [(s, rest / len(rigid)) for s in rigid]


def free_of(frame: Frame, loads: Sequence[Actions], moduli: Moduli) -> list[Forces]:
    """Forces that hold the free strain of each atom back, for a set of moduli."""
    none = Forces.none(frame.profile.panels.x.shape)
    return [free_forces(frame, a.free, moduli) if a.free else none for a in loads]
