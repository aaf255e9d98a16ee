"""Second method, parts that slip: what each part, each joint and each support carries, stage after stage."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.second_loads import Ground
from fishbelly.member.second_record import Planes
from fishbelly.member.second_slip_layers import Stack
from fishbelly.member.second_slip_step import Moved

Array = NDArray[np.float64]


@dataclass(eq=False)
class SlipRecord:
    """What one share of the loads has done so far.

    Parameters
    ----------
    stack : Stack
        Layers and joints.
    reactions : ndarray, shape (supports, 5)
        Force of each support on the member, nothing of those that have gone.
    sliding : ndarray, shape (2, K, n)
        The part of V that still creeps [N].
    flow, fasteners : ndarray, shapes (J, K, n), (J, K + 1)
        The part of what joints carry that still creeps [N/m], [N].
    stress, creeping : dict of int to ndarray
        Stress of each part as a plane, and the part of it that still creeps [Pa].
    """

    stack: Stack
    reactions: Array
    sliding: Array
    flow: Array
    fasteners: Array
    stress: Planes = field(default_factory=dict)
    creeping: Planes = field(default_factory=dict)

    @classmethod
    def empty(cls, ground: Ground, stack: Stack) -> SlipRecord:
        """Return the record of a member to which nothing has happened."""
        K, n = ground.intervals.x.shape
        J = len(stack.joints)
        held = np.zeros((len(ground.member.supports), 5))
        return cls(stack, held, np.zeros((2, K, n)), np.zeros((J, K, n)), np.zeros((J, K + 1)))

    def take(self, ground: Ground, step: Moved, E: Array, free: Mapping[int, Array], creeps: bool) -> None:
        """Add what a step did, with moduli E (P,) [Pa] and free strain of parts as planes."""
        self.reactions = self.reactions + step.reactions
        if creeps:
            self.sliding = self.sliding + step.V
            self.flow, self.fasteners = self.flow + step.flow, self.fasteners + step.fasteners
        for part in sorted(ground.works or range(len(ground.member.parts))):
            if E[part] == 0.0:
                continue
            strain = np.stack((step.strain[self.stack.layer[part]], -step.curvature[0], -step.curvature[1]))
            added = E[part] * (strain - free.get(part, 0.0))
            self.stress[part] = self.stress.get(part, 0.0) + added
            if creeps:
                self.creeping[part] = self.creeping.get(part, 0.0) + added

    def forget(self, part: int) -> None:
        """Drop a part that has gone."""
        self.stress.pop(part, None)
        self.creeping.pop(part, None)
