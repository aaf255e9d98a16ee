"""Shear stresses of flexure and twist at the quadrature points of the elements of a section."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.composition import Composition
from fishbelly.sections.elements import at_points, numbering
from fishbelly.sections.flexure_warping import TWIST, Problem, condensed, gathered, node_loads, piece_stiffness
from fishbelly.sections.frontal import eliminate, fronts, solution
from fishbelly.sections.mesh_slabs import cuts
from fishbelly.sections.section_mesh import SharedMesh, shaped, shared_meshes

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class ShearField:
    """Shear stresses of N elements at q points each, T stations.

    Every piece of the section is under its own unit forces: V_z = 1 N, V_y = 1 N, and twist of 1 rad/m about the
    middle of the section.

    Parameters
    ----------
    rows : ndarray of int, shape (T,)
        The stations.
    part, piece : ndarray of int, shape (N,)
        Part and connected piece of each element.
    y, z, area : ndarray, shape (N, T, q)
        Places [m] and the areas they stand for [m2].
    tau_y, tau_z : ndarray, shape (N, T, q, 3)
        Stresses under V_z, V_y [1/m2] and twist [N/m2 per rad/m], positive along +y and +z on the face towards +x.
    """

    rows: NDArray[np.intp]
    part: NDArray[np.intp]
    piece: NDArray[np.intp]
    y: Array
    z: Array
    area: Array
    tau_y: Array
    tau_z: Array


def shear_fields(
    section: Composition, E: Array, G: Array, clusters: Sequence[int] | None = None, degree: int = 8
) -> Iterator[ShearField]:
    """Shear stresses, mesh by mesh.

    Parameters
    ----------
    section : Composition
        Parts and cuts at S stations.
    E, G : ndarray, shape (P, S)
        Moduli of the parts, above zero [Pa].
    clusters : sequence of int, optional
        Cluster of each part; all are one cluster if left out.
    degree : int
        Degree of the elements.

    Yields
    ------
    ShearField
        Of each cluster and each set of stations that share a mesh. Stresses grow without bound towards re-entrant
        corners: their largest value there says how fine the mesh is, not what the corner bears.
    """
    c = cuts(section)
    for shared in shared_meshes(section, E, G, clusters):
        rows, m = shared.rows, shared.mesh
        e, g = E[:, rows][m.part][:, :, None], G[:, rows][m.part][:, :, None]
        s = shaped(m, degree)
        loads = node_loads(s, shared, e, g, piece_stiffness(s, shared, e), degree)
        w = _warping(shared, condensed(s, g, loads, degree), degree)
        count, stations, points = s.y.shape
        # the warping that goes with a twist lessens its energy
        w[..., TWIST] *= -1.0
        cases = [at_points(degree, w[..., i].reshape(count * stations, -1)) for i in range(w.shape[-1])]
        by_x, by_y = (np.stack([v[k] for v in cases], axis=-1).reshape(count, stations, points, -1) for k in (0, 1))
        y_x, y_y, z_x, z_y, turn = (a[..., None] for a in (s.y_x, s.y_y, s.z_x, s.z_y, s.turn))
        tau_y, tau_z = (by_x * z_y - by_y * z_x) / turn, (by_y * y_x - by_x * y_y) / turn
        tau_y[..., TWIST] -= s.z
        tau_z[..., TWIST] += s.y
        y, z = s.y + c.middle_y[rows][:, None], s.z + c.middle_z[rows][:, None]
        yield ShearField(rows, m.part, m.piece, y, z, s.area, g[..., None] * tau_y, g[..., None] * tau_z)


def _warping(shared: SharedMesh, problem: Problem, degree: int) -> Array:
    """Values at all nodes of the elements, in the order of `elements.stiffness`, shape (N, T, (degree + 1)², R)."""
    unknowns = shared.unknowns(degree)
    k, b = gathered(problem, unknowns, degree)
    order = fronts(unknowns, shared.middles)
    eliminate(order, k, b, keep=True)
    count = int(unknowns.max(initial=-1)) + 1
    cases = b.shape[3]
    x = solution(order, count) if count else np.zeros((b.shape[1], 0, cases))
    # two more rows: what is held
    x = np.concatenate((x, np.zeros((x.shape[0], 2, cases))), axis=1)
    rim = np.moveaxis(x[:, unknowns], 0, 1).copy()
    pointed = unknowns[:, 1] == -2
    side = np.array([1, *range(4, 4 + degree - 1)])
    rim[np.ix_(np.flatnonzero(pointed), np.arange(rim.shape[1]), side)] = rim[pointed][:, :, :1]
    inner = problem.inner[..., 4 * degree :] - problem.inner[..., : 4 * degree] @ rim
    assert rim.shape[2] + inner.shape[2] == sum(n.size for n in numbering(degree))
    return np.concatenate((rim, inner), axis=2)
