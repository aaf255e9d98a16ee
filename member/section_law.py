"""The elastic section law: forces at the grid points to strains, node by node.

Only this file knows how strains follow from forces; equilibrium and compatibility take any law with the same
two methods.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.forces import Forces
from fishbelly.member.moduli import Moduli
from fishbelly.member.panels import Panels

Array = NDArray[np.float64]

SLIDE_SIGNS = np.array([[1.0], [1.0], [-1.0]])
"""Plane 0 counts downwards, the section's z upwards: the mixed shear flexibility changes its sign."""


@dataclass(frozen=True, eq=False)
class Strains:
    """Strains at the grid points.

    Parameters
    ----------
    axial : ndarray, shape (..., K, n)
        Strain on the analysis line.
    curvature : ndarray, shape (2, ..., K, n)
        Curvature of each plane [1/m]; strain = axial - sum of curvature * c.
    shear : ndarray, shape (2, ..., K, n)
        Shear angle of each plane [rad].
    """

    axial: Array
    curvature: Array
    shear: Array


@dataclass(frozen=True, eq=False)
class ElasticLaw:
    """Flexibility of the section at the grid points, for one set of moduli.

    Parameters
    ----------
    panels : Panels
        The grid.
    EA : ndarray, shape (K, n)
        Axial stiffness [N].
    c : ndarray, shape (2, K, n)
        E-weighted centroid from the analysis line, in both planes [m].
    bend : ndarray, shape (3, K, n)
        Curvature of plane 0 and of plane 1 by their own moment, and by the other's [1/(N m2)].
    slide : ndarray, shape (3, K, n)
        Shear angle of plane 0 and of plane 1 by their own shear force, and by the other's; zero where shear is left
        out [1/N].
    """

    panels: Panels
    EA: Array
    c: Array
    bend: Array
    slide: Array

    @classmethod
    def of(cls, frame: Frame, moduli: Moduli, planes: int, shear: bool) -> ElasticLaw:
        """Make the law for a set of moduli; `planes` 1 leaves the horizontal plane's shear out."""
        profile = frame.profile
        s = profile.stiffness(moduli)
        det = s.EI_y * s.EI_z - s.EI_yz**2
        coupled = np.any(s.EI_yz)
        own = s.EI_z / det if coupled else 1.0 / s.EI_y
        other = s.EI_y / det if coupled else 1.0 / s.EI_z
        # plane 1 counts -k_z and -M_z, so that the coupling changes its sign
        bend = np.stack((own, other, s.EI_yz / det if coupled else np.zeros_like(own)))
        slide = np.zeros((3, profile.rows))
        if shear:
            slide[: planes + planes // 2] = (SLIDE_SIGNS * profile.shear_flexibility(moduli))[: planes + planes // 2]
        c = np.stack((s.z_c, -s.y_c)) - frame.line[:, None]
        row = profile.row
        return cls(profile.panels, s.EA[row], c[:, row], bend[:, row], slide[:, row])

    def without_shear(self) -> ElasticLaw:
        """Return the same law, rigid in shear."""
        return ElasticLaw(self.panels, self.EA, self.c, self.bend, np.zeros_like(self.slide))

    def strains(self, forces: Forces) -> Strains:
        """Return strains under forces; fields may have further axes in front of (K, n) (after the plane)."""
        N, M, V = forces.N, forces.M, forces.V
        first, second = M[0] + N * self.c[0], M[1] + N * self.c[1]
        k0 = self.bend[0] * first + self.bend[2] * second
        k1 = self.bend[2] * first + self.bend[1] * second
        axial = N / self.EA + k0 * self.c[0] + k1 * self.c[1]
        shear = np.stack((V[0] * self.slide[0] + V[1] * self.slide[2], V[1] * self.slide[1] + V[0] * self.slide[2]))
        strains = Strains(axial, np.stack((k0, k1)), shear)
        for panel in self.panels.apexes:
            for field in (strains.axial, strains.curvature, strains.shear):
                run_out(field, panel)
        return strains


def run_out(field: Array, apex: tuple[int, int, Array]) -> Array:
    """Continue strains to the point in which the member ends, as a power of the distance from it.

    There forces and stiffness both vanish and their quotient has no digits left; the panel is so short that
    what it adds to a deflection is below round-off.

    Parameters
    ----------
    field : ndarray, shape (..., K, n)
        Strains; the panel at the point is overwritten.
    apex : tuple
        Panel, neighbour, distances, as `Panels.apexes` gives them.

    Returns
    -------
    ndarray, shape (...)
        The power; NaN where strains vanish or change their sign.
    """
    panel, other, (own, beyond, order) = apex
    index = order.astype(np.intp)
    near, far = field[..., other, index[0]], field[..., other, index[-1]]
    with np.errstate(divide="ignore", invalid="ignore"):
        power = np.log(far / near) / np.log(beyond[-1] / beyond[0])
    usable = np.isfinite(power)
    share = (own / beyond[0]) ** np.clip(np.where(usable, power, 0.0), -3.0, 9.0)[..., None]
    field[..., panel, index] = near[..., None] * share
    return np.asarray(power)
