"""Cowper's shear coefficient of a homogeneous section with Poisson's ratio: mean deflection and mean rotation.

Another definition than the energy's: a rectangle has 10(1+ν)/(12+11ν), a circle 6(1+ν)/(7+6ν).
Source: G. R. Cowper, The shear coefficient in Timoshenko's beam theory, J. Appl. Mech. 33 (1966) 335-340.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections import elements
from fishbelly.sections.composition import Composition
from fishbelly.sections.flexure_warping import condensed, gathered
from fishbelly.sections.frontal import eliminate
from fishbelly.sections.mesh_slabs import cuts
from fishbelly.sections.section_mesh import Shaped, SharedMesh, shaped, shared_meshes

Array = NDArray[np.float64]


def cowper_coefficient(section: Composition, poisson: float, degree: int = 10) -> Array:
    """Shear coefficient k for shear along z: GA_z = k G A.

    With the load along z and y, z principal axes through the centroid, the flexure function has ∇²χ = 0 and
    ∂χ/∂n = -(ν z²/2 + (1 - ν/2) y²) n_z - (2 + ν) y z n_y on the rim, and
    k = 2 (1 + ν) I_y / (ν/2 (I_z - I_y) - A/I_y ∫z (χ + z y²) dA), with I_y = ∫z² dA and I_z = ∫y² dA.

    Parameters
    ----------
    section : Composition
        Section in one piece at S stations, symmetric about the y or z axis; all of it counts as one material.
    poisson : float
        Poisson's ratio.
    degree : int
        Degree of the elements.

    Returns
    -------
    ndarray, shape (S,)

    Raises
    ------
    ValueError
        The section is in pieces, or its y and z axes are not principal ones.
    """
    stations = cuts(section).size.size
    one = np.ones((len(section.outlines), stations))
    result = np.empty(stations)
    seen = np.zeros(stations, dtype=int)
    for shared in shared_meshes(section, one, one, None):
        seen[shared.rows] += int(shared.mesh.piece.max()) + 1
        result[shared.rows] = _coefficient(shared, poisson, degree)
    if np.any(seen != 1):
        raise ValueError("Cowper's coefficient is that of a section in one piece")
    return result


def _coefficient(shared: SharedMesh, nu: float, degree: int) -> Array:
    s = shaped(shared.mesh, degree)
    area = s.area.sum(axis=(0, 2))
    y = s.y - ((s.area * s.y).sum(axis=(0, 2)) / area)[:, None]
    z = s.z - ((s.area * s.z).sum(axis=(0, 2)) / area)[:, None]
    i_y, i_z, i_yz = ((s.area * f).sum(axis=(0, 2)) for f in (z * z, y * y, y * z))
    if np.any(np.abs(i_yz) > 1e-9 * (i_y + i_z)):
        raise ValueError("Cowper's coefficient needs a section whose y and z axes are principal ones")
    problem = condensed(s, np.ones((s.y.shape[0], s.y.shape[1], 1)), _loads(s, y, z, nu, degree), degree)
    unknowns = shared.unknowns(degree)
    k, b = gathered(problem, unknowns, degree)
    products = problem.inside.sum(axis=0) + eliminate(shared.order(degree, unknowns), k, b)
    moment = products[:, 0, 1] + (s.area * z * z * y * y).sum(axis=(0, 2))
    return np.asarray(2.0 * (1.0 + nu) * i_y / (0.5 * nu * (i_z - i_y) - area / i_y * moment))


def _loads(s: Shaped, y: Array, z: Array, nu: float, degree: int) -> Array:
    """Loads by z, whose product with χ is ∫z χ dA, and by the slopes of χ on the rim, taken inside by Green."""
    flat = (s.y.shape[0] * s.y.shape[1], -1)
    by_z = elements.loads(degree, (s.area * z).reshape(flat))
    q_y, q_z = (2.0 + nu) * y * z, 0.5 * nu * z * z + (1.0 - 0.5 * nu) * y * y
    weight = s.area / s.turn
    by_x, by_y = weight * (q_y * s.z_y - q_z * s.y_y), weight * (q_z * s.y_x - q_y * s.z_x)
    slopes = elements.slope_loads(degree, by_x.reshape(flat), by_y.reshape(flat))
    return np.stack((by_z, -2.0 * (1.0 + nu) * by_z - slopes), axis=-1)
