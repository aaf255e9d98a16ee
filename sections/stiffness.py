"""Stiffness of a cross-section and the strains that forces cause, for any mix of materials.

Strain at (y, z): e = e0 - k_y z - k_z y. Forces N, M_y, M_z are about a reference line; everything is formed
about the E-weighted centroid, so that no digits are lost to a far reference.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.area_moments import AreaMoments

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class SectionStiffness:
    """Stiffness about the E-weighted centroid, stacked over S stations.

    Parameters
    ----------
    EA : ndarray
        Axial stiffness [N].
    y_c, z_c : ndarray
        E-weighted centroid [m].
    EI_y, EI_z, EI_yz : ndarray
        ∫E z² dA, ∫E y² dA, ∫E y z dA about the centroid [N m2].
    """

    EA: Array
    y_c: Array
    z_c: Array
    EI_y: Array
    EI_z: Array
    EI_yz: Array

    def strains(self, N: Array, M_y: Array, M_z: Array) -> tuple[Array, Array, Array]:
        """Strain plane under forces about the reference line.

        Parameters
        ----------
        N, M_y, M_z : ndarray, shape (..., S)
            Axial force [N], moments about the reference line [N m]; free strain's share already added.

        Returns
        -------
        e0, k_y, k_z : ndarray, shape (..., S)
            Strain on the reference line and curvatures [1/m].
        """
        m_y, m_z = M_y + N * self.z_c, M_z + N * self.y_c
        k_y, k_z = self.curvatures(m_y, m_z)
        return N / self.EA + k_y * self.z_c + k_z * self.y_c, k_y, k_z

    def curvatures(self, m_y: Array, m_z: Array) -> tuple[Array, Array]:
        """Curvatures under moments about the centroid [N m]."""
        if not np.any(self.EI_yz):
            return m_y / self.EI_y, m_z / self.EI_z
        det = self.EI_y * self.EI_z - self.EI_yz**2
        return (self.EI_z * m_y - self.EI_yz * m_z) / det, (self.EI_y * m_z - self.EI_yz * m_y) / det

    def matrix(self) -> Array:
        """Return the 3x3 stiffness about the reference line, shape (S, 3, 3): N, M_y, M_z by e0, k_y, k_z."""
        es_y, es_z = self.EA * self.z_c, self.EA * self.y_c
        rows = [
            [self.EA, -es_y, -es_z],
            [-es_y, self.EI_y + es_y * self.z_c, self.EI_yz + es_y * self.y_c],
            [-es_z, self.EI_yz + es_y * self.y_c, self.EI_z + es_z * self.y_c],
        ]
        return np.stack([np.stack(r, axis=-1) for r in rows], axis=-2)


def section_stiffness(moments: AreaMoments, E: Array) -> SectionStiffness:
    """Stiffness of all parts together.

    Parameters
    ----------
    moments : AreaMoments
        Net moments of the parts, fields of shape (P, S).
    E : ndarray, shape (P, S)
        Modulus of each part [Pa].

    Returns
    -------
    SectionStiffness
        Fields of shape (S,).
    """
    total = moments.times(E).total()
    return SectionStiffness(total.area, total.y, total.z, total.zz, total.yy, total.yz)


def principal_axes(stiffness: SectionStiffness) -> tuple[Array, Array, Array]:
    """Largest and smallest bending stiffness and the direction of the axis of the largest.

    Returns
    -------
    EI_1, EI_2, angle : ndarray
        Stiffnesses [N m2]; angle from the y axis to the axis about which EI_1 acts, anticlockwise [rad].
    """
    middle = 0.5 * (stiffness.EI_y + stiffness.EI_z)
    half = 0.5 * (stiffness.EI_y - stiffness.EI_z)
    radius = np.hypot(half, stiffness.EI_yz)
    return middle + radius, middle - radius, 0.5 * np.arctan2(-stiffness.EI_yz, half)
