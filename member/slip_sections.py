"""What each layer of a slipping member gives at every point of the grid: its own EA, centroid and EI."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.moduli import Moduli
from fishbelly.member.section_law import SLIDE_SIGNS
from fishbelly.member.slip_layers import Layers

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class LayerSections:
    """Layers at the grid points, about the analysis line.

    Parameters
    ----------
    EA : ndarray, shape (L, K, n)
        Axial stiffness [N]; zero where the layer is not there.
    c : ndarray, shape (2, L, K, n)
        E-weighted centroid from the analysis line, in both planes [m].
    EI : ndarray, shape (3, L, K, n)
        Bending stiffness about the layer's own centroid: of plane 0, of plane 1, and ∫E c0 c1 dA [N m2].
    slide : ndarray, shape (3, K, n)
        Shear angle of the member by shear force, as `ElasticLaw` has it [1/N].
    """

    EA: Array
    c: Array
    EI: Array
    slide: Array

    @property
    def there(self) -> NDArray[np.bool_]:
        """Panels in which a layer stands, shape (L, K)."""
        return np.all(self.EA > 0.0, axis=-1)

    @property
    def softness(self) -> Array:
        """1 / EA, zero where the layer is not there, shape (L, K, n) [1/N]."""
        stands = self.EA > 0.0
        return np.where(stands, 1.0, 0.0) / np.where(stands, self.EA, 1.0)

    @property
    def bend(self) -> Array:
        """Curvature by moment of all layers on their own, of plane 0, of plane 1 and mixed, shape (3, K, n)."""
        own, other, mixed = self.EI.sum(axis=1)
        if not np.any(mixed):
            return np.stack((1.0 / own, 1.0 / other, np.zeros_like(own)))
        det = own * other - mixed**2
        return np.stack((other / det, own / det, -mixed / det))


def layer_sections(frame: Frame, layers: Layers, moduli: Moduli, planes: int, shear: bool) -> LayerSections:
    """Sections of all layers for a set of moduli.

    Parameters
    ----------
    frame : Frame
        The grid with its analysis line.
    layers : Layers
        Layers of the member.
    moduli : Moduli
        Set of moduli.
    planes : int
        1 leaves the horizontal plane's shear out.
    shear : bool
        Whether shear deformation counts. Layers share the deflection, not the shear angle: each takes its part of
        V as its own EI, GA = (Σ EI)² / Σ (EI² / GA); the profile's shear flexibility has it so.
    """
    profile = frame.profile
    columns = np.zeros((6, layers.count, profile.rows))
    for group in profile.groups:
        E = group.modulus(moduli.E)
        for layer, parts in enumerate(layers.parts):
            mine = [k for k, part in enumerate(group.placed.index) if part in parts]
            if mine:
                m = group.moments.at(mine).times(E[mine]).total()
                columns[:, layer, group.rows] = (
                    m.area,
                    m.z - frame.line[0],
                    -m.y - frame.line[1],
                    m.zz,
                    m.yy,
                    -m.yz,
                )
    slide = np.zeros((3, profile.rows))
    if shear:
        count = planes + planes // 2
        slide[:count] = (SLIDE_SIGNS * profile.shear_flexibility(moduli))[:count]
    points = columns[:, :, profile.row]
    return LayerSections(points[0], points[1:3], points[3:], slide[:, profile.row])


def strain_differences(layers: Layers, s: LayerSections, active: NDArray[np.bool_]) -> Array:
    """Strain difference of the two layers of each joint by unit force beyond each [1/N], shape (K, n, J, J).

    Parameters
    ----------
    layers : Layers
        Layers and joints.
    s : LayerSections
        Their sections.
    active : ndarray of bool, shape (J, K)
        Panels in which both layers of a joint stand; rows and columns of others are zero.
    """
    between = np.zeros((len(layers.joints), layers.count))
    for j, joint in enumerate(layers.joints):
        between[j, joint.layer], between[j, joint.on] = 1.0, -1.0
    axial = np.einsum("il,lkn,jl->knij", between, s.softness, between)
    arm = np.einsum("jl,plkn->pknj", between, s.c * (s.EA > 0.0))
    own, other, mixed = s.bend[..., None]
    turn = np.stack((own * arm[0] + mixed * arm[1], mixed * arm[0] + other * arm[1]))
    full = axial + np.einsum("pkni,pknj->knij", arm, turn)
    return np.asarray(full * (active.T[:, None, :, None] & active.T[:, None, None, :]))
