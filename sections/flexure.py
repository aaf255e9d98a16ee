"""Shear flexibility and shear centre of a section of any shape and mix of materials, Poisson's ratio zero.

The strain energy of the shear stresses of St Venant's flexure: F_ij = ∫τ_i · τ_j / G dA for unit shear forces i, j
along z and y. A rectangle has GA = 5/6 G A, a solid circle 6/7 G A, a thin tube 1/2 G A.
Source: S. P. Timoshenko and J. N. Goodier, Theory of Elasticity, 3rd ed., McGraw-Hill, 1970, arts. 120-128 (bending of
bars), with Poisson's ratio zero.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.composition import Composition
from fishbelly.sections.flexure_warping import TWIST, Warping, warping
from fishbelly.sections.mesh_direction import main_direction, turned_section
from fishbelly.sections.mesh_slabs import cuts
from fishbelly.sections.section_mesh import MeshFoldError, SharedMesh, shared_meshes
from fishbelly.sections.stiffness import SectionStiffness

Array = NDArray[np.float64]

BARS_DEGREE, STRAIGHT_DEGREE, CURVED_DEGREE = 6, 7, 8
"""Degree of the elements unless told otherwise: one straight material with bars in it, without arcs or with bars
and others, with arcs.

Own trials: 1e-7 of F; up to 1e-6 with arcs, or where two materials end at a re-entrant corner.
"""
_SLIM = 0.2
"""Circles smaller than this share of the section are bars: what they disturb is small."""
_FINER = 3
"""By how much the degree is raised for an estimate of the error."""

_TURNS = (0.0, 0.5 * np.pi, 0.4, 1.1)
"""Angles, besides that of most edges, at which a section is cut into slabs until its cells do not fold [rad]."""


@dataclass(frozen=True, eq=False)
class Flexure:
    """Shear flexibility of S stations.

    Parameters
    ----------
    F_zz, F_yy, F_yz : ndarray, shape (S,)
        Shear strain along z per V_z, along y per V_y, along y per V_z [1/N].
    y_s, z_s : ndarray, shape (S,)
        Shear centre: V_z through y_s and V_y through z_s do not twist the section [m]. Of a section in pieces, where
        the pieces' shares act.
    pieces : ndarray of int, shape (S,)
        Pieces that do not hang together.
    degree : int
        Degree of the elements.
    asked : tuple
        What it was asked for, so that `error` can ask again.
    """

    F_zz: Array
    F_yy: Array
    F_yz: Array
    y_s: Array
    z_s: Array
    pieces: NDArray[np.intp]
    degree: int
    asked: tuple[Composition, Array, Array, Sequence[int] | None, bool] = field(repr=False)

    @property
    def GA_z(self) -> Array:
        """Shear stiffness for shear along z alone, shape (S,) [N]."""
        return np.asarray(1.0 / self.F_zz)

    @property
    def GA_y(self) -> Array:
        """Shear stiffness for shear along y alone, shape (S,) [N]."""
        return np.asarray(1.0 / self.F_yy)

    def error(self) -> Array:
        """Estimate of the relative error of the flexibilities, shape (S,): against elements of a higher degree."""
        finer = flexure(*self.asked, degree=self.degree + _FINER)
        size = np.sqrt(finer.F_zz * finer.F_yy)
        gaps = [np.abs(finer.F_zz / self.F_zz - 1.0), np.abs(finer.F_yy / self.F_yy - 1.0)]
        gaps.append(np.abs(finer.F_yz - self.F_yz) / size)
        return np.asarray(np.max(gaps, axis=0))


def flexure(
    section: Composition,
    E: Array,
    G: Array,
    clusters: Sequence[int] | None = None,
    share_angle: bool = False,
    degree: int | None = None,
) -> Flexure:
    """Shear flexibility of a section.

    Parameters
    ----------
    section : Composition
        Parts and cuts at S stations.
    E, G : ndarray, shape (P, S)
        Moduli of the parts, above zero [Pa].
    clusters : sequence of int, optional
        Cluster of each part: parts of different clusters share nothing even where they touch, as fasteners leave
        them; all are one cluster if left out.
    share_angle : bool
        Pieces apart from each other share the shear angle (over an opening). Otherwise they share the curvature
        and each takes of the shear force what its bending stiffness takes of the moment.
    degree : int, optional
        Degree of the elements.

    Returns
    -------
    Flexure

    Raises
    ------
    MeshFoldError
        The section cannot be divided into cells.
    """
    asked = (section, E, G, clusters, share_angle)
    main = main_direction(section)
    for more in _TURNS:
        try:
            return _along(asked, main + more, degree)
        except MeshFoldError:
            # other slabs may divide the section where these could not
            if more == _TURNS[-1]:
                raise
    raise AssertionError("unreachable")


def _along(
    asked: tuple[Composition, Array, Array, Sequence[int] | None, bool], angle: float, degree: int | None
) -> Flexure:
    """Solve a section on slabs cut at an angle."""
    section, E, G, clusters, share_angle = asked
    section = turned_section(section, -angle)
    c = cuts(section)
    p = _degree(section, E, G, float(c.size.min())) if degree is None else degree
    sums = _Sums(G.shape[1])
    for shared in shared_meshes(section, E, G, clusters):
        sums.add(shared, warping(shared, E[:, shared.rows], G[:, shared.rows], p), share_angle)
    F, torque = sums.together(share_angle)
    centre = np.stack((c.middle_z - torque[:, 1], c.middle_y + torque[:, 0]), axis=-1)
    # (z, y) of the turned section to those asked for
    cos, sin = np.cos(angle), np.sin(angle)
    back = np.array([[cos, sin], [-sin, cos]])
    F, centre = back @ F @ back.T, centre @ back.T
    return Flexure(F[:, 0, 0], F[:, 1, 1], F[:, 0, 1], centre[:, 1], centre[:, 0], sums.pieces, p, asked)


def _degree(section: Composition, E: Array, G: Array, size: float) -> int:
    """Degree that keeps what `STRAIGHT_DEGREE` promises; size of the section [m]."""
    if any(np.any(c[0].bulge) for c in section.cuts):
        return CURVED_DEGREE
    bars = [i for i, o in enumerate(section.outlines) if np.all(o.bulge) and np.ptp(o.z, axis=1).max() < _SLIM * size]
    rest = [i for i in range(len(section.outlines)) if i not in bars]
    if not rest or (not bars and any(np.any(section.outlines[i].bulge) for i in rest)):
        return CURVED_DEGREE
    one = np.all(E[rest] == E[rest[0]]) and np.all(G[rest] == G[rest[0]])
    straight = not any(np.any(section.outlines[i].bulge) for i in rest)
    return BARS_DEGREE if bars and one and straight else STRAIGHT_DEGREE


class _Sums:
    """Adds up pieces: their bending stiffness K, K F K, F⁻¹ and torques, for forces (V_z, V_y)."""

    def __init__(self, stations: int) -> None:
        self.pieces = np.zeros(stations, dtype=np.intp)
        self.weight = np.zeros((stations, 2, 2))
        self.energy = np.zeros((stations, 2, 2))
        self.torque = np.zeros((stations, 2))

    def add(self, shared: SharedMesh, w: Warping, share_angle: bool) -> None:
        """Add the pieces of a mesh."""
        self.pieces[shared.rows] += len(w.stiffness)
        for stiffness, energy in zip(w.stiffness, w.energy, strict=True):
            F = energy[:, :TWIST, :TWIST]
            weight = np.linalg.inv(F) if share_angle else _bending(stiffness)
            self.weight[shared.rows] += weight
            self.energy[shared.rows] += weight @ F @ weight
            self.torque[shared.rows] += (energy[:, TWIST, None, :TWIST] @ weight)[:, 0]

    def together(self, share_angle: bool) -> tuple[Array, Array]:
        """Flexibility of all pieces and torque of unit forces, shapes (S, 2, 2) and (S, 2)."""
        share = np.asarray(np.linalg.inv(self.weight), dtype=float)
        whole: Array = share if share_angle else np.asarray(share @ self.energy @ share)
        return whole, (self.torque[:, None, :] @ share)[:, 0]


def _bending(s: SectionStiffness) -> Array:
    return np.stack((np.stack((s.EI_y, s.EI_yz), axis=-1), np.stack((s.EI_yz, s.EI_z), axis=-1)), axis=-2)
