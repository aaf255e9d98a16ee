"""Warping of a section under shear and twist, on one mesh: stiffness, loads, and energies of all its pieces.

With Poisson's ratio zero a shear force V changes the axial stress along x by E g, g a plane through the E-weighted
centroid; the warping w has div(G grad w) + E g = 0, no shear stress across free edges. Twist asks for the same with
the load of the field G (-z, y). Products of these loads with the solutions are energies.
Source: S. P. Timoshenko and J. N. Goodier, Theory of Elasticity, 3rd ed., McGraw-Hill, 1970, chapters 10 and 11.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections import elements
from fishbelly.sections.frontal import eliminate, fronts
from fishbelly.sections.section_mesh import MeshFoldError, Shaped, SharedMesh, shaped
from fishbelly.sections.stiffness import SectionStiffness

Array = NDArray[np.float64]

Z, Y, TWIST = 0, 1, 2
"""Load cases: unit shear force along z, along y, unit twist."""


@dataclass(frozen=True, eq=False)
class Warping:
    """What the pieces of one mesh give at its T stations; Q pieces.

    Parameters
    ----------
    stiffness : tuple of SectionStiffness
        Bending stiffness of each piece, about its own centroid, counted from the middle of the section.
    energy : ndarray, shape (Q, T, 3, 3)
        Products of loads and solutions for shear along z, along y, twist: shear flexibilities [1/N], torques
        of the shear stresses about the middle of the section [m], and what warping takes off the twist [N m2].
    polar : ndarray, shape (Q, T)
        ∫G (y² + z²) dA about the middle of the section [N m2].
    """

    stiffness: tuple[SectionStiffness, ...]
    energy: Array
    polar: Array


@dataclass(frozen=True, eq=False)
class Problem:
    """Elements of one mesh at one degree.

    Parameters
    ----------
    shape : Shaped
        Elements in space.
    matrices : ndarray, shape (N, T, m, m)
        Stiffness of the rims of the elements, their inner unknowns eliminated.
    loads : ndarray, shape (N, T, m, R)
        Loads on the rims.
    inner : ndarray, shape (N, T, i, 4 degree + R)
        Inner unknowns by the rim (with opposite sign) and under the loads.
    inside : ndarray, shape (N, T, R, R)
        Energies of the inner unknowns.
    """

    shape: Shaped
    matrices: Array
    loads: Array
    inner: Array
    inside: Array


def piece_stiffness(s: Shaped, shared: SharedMesh, E: Array) -> tuple[SectionStiffness, ...]:
    """Bending stiffness of every piece; E of shape (N, T, 1)."""
    weight = E * s.area
    found = []
    for piece in range(int(shared.mesh.piece.max()) + 1):
        mine = shared.mesh.piece == piece
        w, y, z = weight[mine], s.y[mine], s.z[mine]
        axial = w.sum(axis=(0, 2))
        y_c, z_c = (w * y).sum(axis=(0, 2)) / axial, (w * z).sum(axis=(0, 2)) / axial
        y, z = y - y_c[:, None], z - z_c[:, None]
        second = [(w * a * b).sum(axis=(0, 2)) for a, b in ((z, z), (y, y), (y, z))]
        found.append(SectionStiffness(axial, y_c, z_c, *second))
    return tuple(found)


def warping(shared: SharedMesh, E: Array, G: Array, degree: int) -> Warping:
    """Solve shear along both axes and twist.

    Parameters
    ----------
    shared : SharedMesh
        A mesh.
    E, G : ndarray, shape (P, T)
        Moduli at its stations [Pa].
    degree : int
        Degree of the elements.

    Raises
    ------
    MeshFoldError
        An element folds over itself.
    """
    if not shared.few:
        return _joined([warping(f, E[:, cols], G[:, cols], degree) for f, cols in shared.by_few()])
    m = shared.mesh
    e, g = E[m.part][:, :, None], G[m.part][:, :, None]
    s = shaped(m, degree)
    if np.any(s.folded):
        raise MeshFoldError(int(shared.rows[np.flatnonzero(s.folded)[0]]))
    pieces = piece_stiffness(s, shared, e)
    loads = node_loads(s, shared, e, g, pieces, degree)
    problem = condensed(s, g, loads, degree)
    unknowns = shared.unknowns(degree)
    energy = _energies(problem, unknowns, shared, len(pieces))
    polar = (g * s.area * (s.y**2 + s.z**2)).sum(axis=2)
    each = np.stack([polar[m.piece == q].sum(axis=0) for q in range(len(pieces))])
    return Warping(pieces, energy, each)


def _joined(parts: list[Warping]) -> Warping:
    """Stations one after the other."""
    if len(parts) == 1:
        return parts[0]
    names = ("EA", "y_c", "z_c", "EI_y", "EI_z", "EI_yz")
    stiffness = tuple(
        SectionStiffness(*(np.concatenate([getattr(p, n) for p in piece]) for n in names))
        for piece in zip(*(w.stiffness for w in parts), strict=True)
    )
    energy = np.concatenate([w.energy for w in parts], axis=1)
    return Warping(stiffness, energy, np.concatenate([w.polar for w in parts], axis=1))


def node_loads(
    s: Shaped, shared: SharedMesh, e: Array, g: Array, pieces: tuple[SectionStiffness, ...], degree: int
) -> Array:
    """Loads on the nodes, shape (N * T, (degree + 1)², 3); each piece under its own unit forces."""
    count, stations, _ = s.y.shape
    which = shared.mesh.piece
    cases = []
    one, nought = np.ones(stations), np.zeros(stations)
    flat = lambda a: a.reshape(count * stations, -1)  # noqa: E731
    centre_y, centre_z = (np.stack([getattr(p, f) for p in pieces])[which][..., None] for f in ("y_c", "z_c"))
    for m_y, m_z in ((one, nought), (nought, one)):
        change = [p.curvatures(m_y, m_z) for p in pieces]
        k_y, k_z = (np.stack([c[i] for c in change])[which][..., None] for i in (0, 1))
        plane = k_y * (s.z - centre_z) + k_z * (s.y - centre_y)
        cases.append(elements.loads(degree, flat(e * s.area * plane)))
    # ∫G (-z w,y + y w,z) dA with the derivatives of the local coordinates
    weight = g * s.area / s.turn
    by_x, by_y = weight * (-s.z * s.z_y - s.y * s.y_y), weight * (s.z * s.z_x + s.y * s.y_x)
    cases.append(elements.slope_loads(degree, flat(by_x), flat(by_y)))
    return np.stack(cases, axis=-1)


def condensed(s: Shaped, weight: Array, node_loads: Array, degree: int) -> Problem:
    """Stiffness of the elements with their inner unknowns eliminated.

    Parameters
    ----------
    s : Shaped
        Elements.
    weight : ndarray, shape (N, T, 1)
        G, or 1/G for a stress function.
    node_loads : ndarray, shape (N * T, (degree + 1)², R)
        Loads on the nodes.
    degree : int
        Degree.
    """
    count, stations, points = s.y.shape
    scale = weight * s.area / s.turn**2
    metric = np.stack(
        (
            scale * (s.y_y**2 + s.z_y**2),
            -scale * (s.y_x * s.y_y + s.z_x * s.z_y),
            scale * (s.y_x**2 + s.z_x**2),
        )
    ).reshape(3, count * stations, points)
    rim, cases = 4 * degree, node_loads.shape[2]
    inner = np.empty((count * stations, (degree - 1) ** 2, rim + cases))
    reduced = np.empty((count * stations, rim, rim + cases))
    for some, whole in elements.stiffness(degree, metric):
        right = np.concatenate((whole[:, rim:, :rim], node_loads[some, rim:]), axis=2)
        inner[some] = np.linalg.solve(whole[:, rim:, rim:], right)
        reduced[some, :, :rim], reduced[some, :, rim:] = whole[:, :rim, :rim], node_loads[some, :rim]
        reduced[some] -= np.swapaxes(right[:, :, :rim], 1, 2) @ inner[some]
    inside = np.swapaxes(node_loads[:, rim:], 1, 2) @ inner[:, :, rim:]
    shape = (count, stations)
    return Problem(
        s,
        reduced[:, :, :rim].reshape(*shape, rim, rim),
        reduced[:, :, rim:].reshape(*shape, rim, cases),
        inner.reshape(*shape, -1, rim + cases),
        inside.reshape(*shape, cases, cases),
    )


def gathered(problem: Problem, unknowns: NDArray[np.intp], degree: int) -> tuple[Array, Array]:
    """Stiffness and loads with the pointed side of elements taken as one unknown, its first."""
    pointed = unknowns[:, 1] == -2
    if not np.any(pointed):
        return problem.matrices, problem.loads
    k, b = problem.matrices.copy(), problem.loads.copy()
    side = np.array([1, *range(4, 4 + degree - 1)])
    k[pointed, :, 0] += k[pointed][:, :, side].sum(axis=2)
    k[pointed, :, :, 0] += k[pointed][:, :, :, side].sum(axis=3)
    b[pointed, :, 0] += b[pointed][:, :, side].sum(axis=2)
    return k, b


def _energies(problem: Problem, unknowns: NDArray[np.intp], shared: SharedMesh, pieces: int) -> Array:
    """Products of loads and solutions for every piece, shape (Q, T, 3, 3)."""
    degree = unknowns.shape[1] // 4
    k, b = gathered(problem, unknowns, degree)
    which = shared.mesh.piece
    inside = np.stack([problem.inside[which == q].sum(axis=0) for q in range(pieces)])
    if pieces == 1:
        return np.asarray(inside + eliminate(shared.order(degree, unknowns), k, b)[None])
    found = []
    for q in range(pieces):
        mine = np.flatnonzero(which == q)
        own = unknowns[mine].copy()
        there = own >= 0
        own[there] = np.unique(own[there], return_inverse=True)[1]
        order = fronts(own, shared.middles[mine])
        found.append(eliminate(order, k[mine], b[mine]))
    return np.asarray(inside + np.stack(found))
