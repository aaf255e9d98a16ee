"""Torsional stiffness GJ of a section of any shape and mix of materials, between two bounds.

Warping gives an upper bound, GJ = min ∫G |grad w + (-z, y)|² dA; the stress function on the same mesh, zero on the
outer rim and one value on the rim of each hole, a lower one. Both bounds are those of elements with exact arcs.
Sources: S. P. Timoshenko and J. N. Goodier, Theory of Elasticity, 3rd ed., McGraw-Hill, 1970, arts. 104, 115 (stress
function, hollow bars); E. Trefftz, Proc. 2nd Int. Congr. Appl. Mech., Zürich, 1926, 131-137 (bounds), from memory.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections import elements
from fishbelly.sections.composition import Composition
from fishbelly.sections.flexure_warping import TWIST, condensed, gathered, warping
from fishbelly.sections.frontal import eliminate, fronts
from fishbelly.sections.mesh_direction import main_direction, turned_section
from fishbelly.sections.mesh_rims import Rims, rims
from fishbelly.sections.mesh_slabs import Cuts, cuts
from fishbelly.sections.section_mesh import SharedMesh, shaped, shared_meshes

Array = NDArray[np.float64]

DEGREE = 9
"""Degree of the elements unless told otherwise."""


class PointContactError(ValueError):
    """Pieces of a section touch at a point only: whether they twist together is anybody's guess.

    Parameters
    ----------
    station : int
        Which station.
    y, z : float
        Where [m].
    """

    def __init__(self, station: int, y: float, z: float) -> None:
        super().__init__(f"pieces of the cross-section touch at a point only, at y = {y:.6g} m, z = {z:.6g} m")
        self.station, self.y, self.z = station, y, z


@dataclass(frozen=True, eq=False)
class Torsion:
    """Torsional stiffness of S stations; pieces apart from each other add up.

    Parameters
    ----------
    GJ : ndarray, shape (S,)
        Middle of the bounds [N m2].
    lower, upper : ndarray, shape (S,)
        The bounds [N m2].
    """

    GJ: Array
    lower: Array
    upper: Array

    def error(self) -> Array:
        """Half the gap between the bounds against GJ, shape (S,)."""
        return np.asarray(0.5 * (self.upper - self.lower) / self.GJ)


def torsion(
    section: Composition, G: Array, clusters: Sequence[int] | None = None, degree: int | None = None
) -> Torsion:
    """Torsional stiffness of a section.

    Parameters
    ----------
    section : Composition
        Parts and cuts at S stations.
    G : ndarray, shape (P, S)
        Shear moduli of the parts, above zero [Pa].
    clusters : sequence of int, optional
        Cluster of each part: parts of different clusters share nothing; all are one cluster if left out.
    degree : int, optional
        Degree of the elements.

    Returns
    -------
    Torsion

    Raises
    ------
    PointContactError
        Pieces touch at a point only.
    MeshFoldError
        The section cannot be divided into cells.
    """
    p = DEGREE if degree is None else degree
    lower, upper = np.zeros(G.shape[1]), np.zeros(G.shape[1])
    angle = main_direction(section)
    section = turned_section(section, -angle)
    c = cuts(section)
    for shared in shared_meshes(section, G, G, clusters, twist=True):
        for point in shared.mesh.touching:
            raise PointContactError(*_placed(c, shared, point, angle)[0])
        here = G[:, shared.rows]
        w = warping(shared, here, here, p)
        upper[shared.rows] += (w.polar - w.energy[:, :, TWIST, TWIST]).sum(axis=0)
        lower[shared.rows] += stress_function(shared, here, p)
    return Torsion(0.5 * (lower + upper), lower, upper)


def point_contacts(
    section: Composition, E: Array, G: Array, clusters: Sequence[int] | None = None
) -> list[tuple[int, float, float]]:
    """Places at which pieces of a section touch at a point only: station, y [m], z [m]."""
    angle = main_direction(section)
    section = turned_section(section, -angle)
    c = cuts(section)
    found = []
    for shared in shared_meshes(section, E, G, clusters):
        found += [place for point in shared.mesh.touching for place in _placed(c, shared, point, angle)]
    return found


def _placed(c: Cuts, shared: SharedMesh, point: Array, angle: float) -> list[tuple[int, float, float]]:
    """Station, y and z of a point of a section that was turned by -angle."""
    rows = shared.rows
    y, z = point[0] + c.middle_y[rows], point[1] + c.middle_z[rows]
    y, z = np.cos(angle) * y - np.sin(angle) * z, np.sin(angle) * y + np.cos(angle) * z
    return [(int(s), float(a), float(b)) for s, a, b in zip(rows, y, z, strict=True)]


def stress_function(shared: SharedMesh, G: Array, degree: int) -> Array:
    """Lower bound of GJ of all pieces of a mesh, shape (T,) [N m2]; G of shape (P, T)."""
    if not shared.few:
        return np.concatenate([stress_function(f, G[:, cols], degree) for f, cols in shared.by_few()])
    m = shared.mesh
    s = shaped(m, degree)
    count, stations, _ = s.y.shape
    density = 2.0 * s.area.reshape(count * stations, -1)
    problem = condensed(s, 1.0 / G[m.part][:, :, None], elements.loads(degree, density)[:, :, None], degree)
    rim = rims(m, degree)
    unknowns = _unknowns(shared, rim, degree)
    k, b = gathered(problem, unknowns, degree)
    unknowns, k, b = _merged(unknowns, k, b)
    total = problem.inside.sum(axis=0)
    first = int(unknowns.max(initial=-1)) + 1
    if first == 0:
        return np.asarray(total[:, 0, 0])
    for hole, area in enumerate(rim.area):
        # the hole's own load goes in with an element that knows it
        number = first - len(rim.area) + hole
        e, column = np.argwhere(unknowns == number)[0]
        b[e, :, column, 0] += 2.0 * area
    return np.asarray((total + eliminate(fronts(unknowns, shared.middles), k, b))[:, 0, 0])


def _unknowns(shared: SharedMesh, rim: Rims, degree: int) -> NDArray[np.intp]:
    """Numbers of the unknowns: none on outer rims, the last ones those of the holes."""
    m = shared.mesh
    whole = shared.unknowns(degree, rim.of_point == -2)
    on_rim = np.concatenate(
        (
            rim.of_point[m.corners],
            np.repeat(np.where(m.sides < 0, -1, rim.of_side[m.sides]), degree - 1, axis=1),
        ),
        axis=1,
    )
    free = (whole >= 0) & (on_rim == -1)
    result = np.where(whole == -2, -2, -1)
    _, result[free] = np.unique(whole[free], return_inverse=True)
    first = int(result.max()) + 1
    hole = (whole >= 0) & (on_rim >= 0)
    result[hole] = first + on_rim[hole]
    return result


def _merged(unknowns: NDArray[np.intp], k: Array, b: Array) -> tuple[NDArray[np.intp], Array, Array]:
    """Elements that meet the rim of a hole with several nodes take them as one unknown."""
    unknowns, k, b = unknowns.copy(), k.copy(), b.copy()
    for e, row in enumerate(unknowns):
        there = row[row >= 0]
        if np.unique(there).size == there.size:
            continue
        for number in np.unique(there):
            same = np.flatnonzero(row == number)
            if same.size > 1:
                k[e, :, same[0]] = k[e][:, same].sum(axis=1)
                k[e, :, :, same[0]] = k[e][:, :, same].sum(axis=2)
                b[e, :, same[0]] = b[e][:, same].sum(axis=1)
                row[same[1:]] = -2
    return unknowns, k, b
