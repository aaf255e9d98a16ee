"""Layers of a member in one stage of its life: what the steps of that life need to know of parts that slip."""

from __future__ import annotations

from collections.abc import Collection, Mapping, Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Actions, Frame
from fishbelly.member.forces import Forces
from fishbelly.member.moduli import Moduli
from fishbelly.member.section_law import Strains
from fishbelly.member.slip_forces import LayeredForces, layered_free_forces
from fishbelly.member.slip_law import LayerStrains
from fishbelly.member.slip_layers import Layers, joint_creep

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Layered:
    """What layers and joints do, with an axis A of atoms.

    Parameters
    ----------
    layers : Layers
        Layers and joints.
    strain : ndarray, shape (L, A, K, n)
        Strain of each layer on the analysis line.
    flow, slip : ndarray, shape (J, A, K, n)
        Force per length that each joint passes on [N/m], movement of the part against its host [m].
    fasteners : ndarray, shape (J, A, K + 1)
        Force of single fasteners at the borders [N].
    """

    layers: Layers
    strain: Array
    flow: Array
    slip: Array
    fasteners: Array

    def axial(self, part: int) -> Array:
        """Strain of a part on the analysis line, shape (A, K, n)."""
        return np.asarray(self.strain[self.layers.of(part)])

    @property
    def locked(self) -> LockedIn:
        """What it leaves in the joints."""
        return LockedIn(self.flow, self.fasteners)


@dataclass(frozen=True, eq=False)
class LockedIn:
    """What joints carry that creeps: flow, shape (J, A, K, n) [N/m], and fasteners, shape (J, A, K + 1) [N]."""

    flow: Array
    fasteners: Array

    def plus(self, step: Layered) -> LockedIn:
        """Return the sum with what a step has left in them."""
        return LockedIn(self.flow + step.flow, self.fasteners + step.fasteners)


@dataclass(frozen=True, eq=False)
class Tie:
    """Layers and joints in one stage.

    Parameters
    ----------
    layers : Layers
        Layers and joints of the member.
    stiffness : mapping of str to ndarray, shape (J,)
        Stiffness of the joints per length, single fasteners counted [N/m2]: "now" on which loads of the stage act,
        "short" for those that do not last, and "aged" where creep runs off.
    creep : ndarray, shape (J,)
        Creep factor of the joints that runs off in the stage.
    springs : ndarray, shape (K + 1, J)
        Stiffness "short" of fasteners that are taken one by one, at the borders of the grid [N/m].
    """

    layers: Layers
    stiffness: Mapping[str, Array]
    creep: Array = field(default_factory=lambda: np.zeros(0))
    springs: Array | None = None

    def held(self, each: Sequence[tuple[int, Forces]], there: Collection[int], shape: tuple[int, ...]) -> LayeredForces:
        """Forces given part by part in their layers; those of a layer that has gone act on the one it stood on."""
        layers = np.zeros((self.layers.count, *shape))
        total = Forces.none(shape)
        for part, forces in each:
            total = total.plus(forces)
            layers[self._standing(self.layers.of(part), there)] += forces.N
        return LayeredForces(total.N, total.V, total.M, layers)

    def _standing(self, layer: int, there: Collection[int]) -> int:
        while layer and not any(p in there for p in self.layers.parts[layer]):
            layer = self.layers.joints[layer - 1].on
        return layer

    def free(self, frame: Frame, loads: Sequence[Actions], moduli: Moduli) -> list[Forces]:
        """Forces that hold the free strain of some atoms back, layer by layer."""
        return [layered_free_forces(frame, self.layers, a.free, moduli) for a in loads]

    def crept(self, held: Forces, locked: LockedIn) -> Forces:
        """Add the slip that creeps under what joints have locked in: flow along them, force of single fasteners."""
        assert isinstance(held, LayeredForces)
        k = self.stiffness["short"]
        share = self.creep / np.where(k > 0.0, k, np.inf)
        slips = share[:, None, None, None] * locked.flow
        if self.springs is not None and np.any(self.springs):
            # a fastener stands at the left border of a panel, and its slip is looked at there alone
            springs = np.where(self.springs > 0.0, self.springs, np.inf)[:-1].T
            single = (self.creep[:, None] / springs)[:, None] * locked.fasteners[..., :-1]
            slips = np.where(np.any(self.springs, axis=0)[:, None, None, None], single[..., None], slips)
        return LayeredForces(held.N, held.V, held.M, held.layers, slips)

    def layered(self, strains: Strains, which: Sequence[int], count: int) -> Layered:
        """What layers and joints do under some atoms, nothing under the others."""
        assert isinstance(strains, LayerStrains)

        def spread(v: Array) -> Array:
            full = np.zeros((v.shape[0], count, *v.shape[2:]))
            full[:, list(which)] = v
            return full

        fields = (strains.layer_axial, strains.flow, strains.slip, strains.fasteners)
        return Layered(self.layers, *(spread(v) for v in fields))


def stage_joint_creep(layers: Layers, creep: Mapping[str, float]) -> Array:
    """Creep factor of every joint in a stage in which materials creep by some factors, shape (J,)."""
    member = layers.member
    own = {p.name: creep.get(p.material or "", 0.0) for p in member.parts}
    running = any(v > 0.0 for v in creep.values())
    return np.array([joint_creep(member, j, own) if running else 0.0 for j in layers.joints])
