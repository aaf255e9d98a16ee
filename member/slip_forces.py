"""Forces that act on single layers: what holds free strain back, and slip that joints have of themselves."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.forces import Forces
from fishbelly.member.free_strain import free_plane, resultants
from fishbelly.member.loads import Load
from fishbelly.member.moduli import Moduli
from fishbelly.member.slip_layers import Layers

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class LayeredForces(Forces):
    """Forces of which a part acts on single layers and not on the member as a whole.

    Parameters
    ----------
    layers : ndarray, shape (L, ..., K, n)
        Axial forces that hold the free strain of each layer back [N]; N holds their sum, M their moment.
    slips : ndarray, shape (J, ..., K, n), optional
        Slip that each joint has without any force, as creep leaves it [m].
    """

    layers: Array
    slips: Array | None = None

    def plus(self, other: Forces, factor: float = 1.0) -> LayeredForces:
        """Return the sum with another set, multiplied by a factor; one without layers acts on the whole."""
        total = Forces.plus(self, other, factor)
        layers, slips = self.layers, self.slips
        if isinstance(other, LayeredForces):
            layers = layers + factor * other.layers
            if other.slips is not None:
                slips = factor * other.slips if slips is None else slips + factor * other.slips
        return LayeredForces(total.N, total.V, total.M, layers, slips)

    @property
    def any(self) -> bool:
        """Whether there is any force or slip at all."""
        return bool(
            Forces(self.N, self.V, self.M).any or np.any(self.layers) or (self.slips is not None and np.any(self.slips))
        )

    def atom(self, k: int) -> LayeredForces:
        """Return one of several sets stacked in front of (K, n)."""
        slips = None if self.slips is None else self.slips[:, k]
        return LayeredForces(self.N[k], self.V[:, k], self.M[:, k], self.layers[:, k], slips)

    @classmethod
    def by_layer(cls, layers: Layers, parts: Iterable[tuple[int, Forces]], shape: tuple[int, ...]) -> LayeredForces:
        """Collect forces given part by part, each with fields of `shape` (after the plane), into their layers."""
        N, V, M = np.zeros(shape), np.zeros((2, *shape)), np.zeros((2, *shape))
        each = np.zeros((layers.count, *shape))
        for part, forces in parts:
            N, V, M = N + forces.N, V + forces.V, M + forces.M
            each[layers.of(part)] += forces.N
        return cls(N, V, M, each)

    @classmethod
    def stacked(cls, several: Sequence[Forces]) -> LayeredForces:
        """Stack sets on a new axis, in front of (K, n); those that act on the whole alone may be among them."""
        N = np.stack([f.N for f in several])
        V, M = (np.stack([getattr(f, name) for f in several], axis=1) for name in "VM")
        layered = [f for f in several if isinstance(f, LayeredForces)]
        none = np.zeros_like(layered[0].layers)
        layers = np.stack([f.layers if isinstance(f, LayeredForces) else none for f in several], axis=1)
        slipping = next((f.slips for f in layered if f.slips is not None), None)
        if slipping is None:
            return cls(N, V, M, layers)
        own = (f.slips if isinstance(f, LayeredForces) else None for f in several)
        return cls(N, V, M, layers, np.stack([np.zeros_like(slipping) if v is None else v for v in own], axis=1))


def layered_free_forces(frame: Frame, layers: Layers, loads: Sequence[Load], moduli: Moduli) -> LayeredForces:
    """Forces that hold the free strain of loads back, layer by layer, about the analysis line.

    Parameters
    ----------
    frame : Frame
        The grid.
    layers : Layers
        Layers of the member.
    loads : sequence of Load
        Temperature, shrinkage, prestress.
    moduli : Moduli
        Set of moduli.
    """
    profile = frame.profile
    total = np.zeros((layers.count, 3, profile.rows))
    for group in profile.groups:
        E = group.modulus(moduli.E)
        owner = np.array([layers.of(part) for part in group.placed.index])
        for load in loads:
            plane = free_plane(profile, load, group, group.placed.x, frame.short)
            if plane is None:
                continue
            for layer in range(layers.count):
                mine = (owner == layer)[:, None]
                if mine.any():
                    total[layer][:, group.rows] += resultants(plane, group, E * mine)
    N, M_y, M_z = np.moveaxis(total[:, :, profile.row], 1, 0)
    M = np.stack((M_y + N * frame.line[0], -M_z + N * frame.line[1])).sum(axis=1)
    return LayeredForces(N.sum(axis=0), np.zeros_like(M), M, N)
