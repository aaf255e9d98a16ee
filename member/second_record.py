"""Second method, what each part carries at its own Gauss points: one plane of stress, stage after stage.

A plane is v0 + v1 c0 + v2 c1 with c0 = z and c1 = -y from the line, shape (3, K, n). Stress is that of the part in
full: over a run-in only a share of its area works.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.second_loads import Ground
from fishbelly.member.second_step import Solved

Array = NDArray[np.float64]
Planes = dict[int, Array]

UNCHANGED = 1e-11
"""A change of what works of a part below this share of it is none."""


def line_moments(ground: Ground, part: int) -> Array:
    """Moments of what works of a part about the line: A, ∫c0, ∫c1, ∫c0², ∫c0 c1, ∫c1², run-in counted, (6, K, n)."""
    s = ground.sections
    area, y, z, yy, zz, yz = s.works[part]
    up, aside = s.about[1] - ground.line[0], s.about[0] + ground.line[1]
    return np.asarray(
        s.run_in[part]
        * np.stack(
            (
                area,
                z + up * area,
                -(y + aside * area),
                zz + up * (2.0 * z + up * area),
                -(yz + up * y + aside * (z + up * area)),
                yy + aside * (2.0 * y + aside * area),
            )
        )
    )


def carried(planes: Array, moments: Array) -> Array:
    """Forces (N, M, M across) about the line of a stress plane over an area, shape (3, K, n)."""
    s, s0, s1 = planes
    area, c0, c1, c00, c01, c11 = moments
    return np.stack((s * area + s0 * c0 + s1 * c1, -(s * c0 + s0 * c00 + s1 * c01), -(s * c1 + s0 * c01 + s1 * c11)))


def lost(before: Ground, after: Ground, part: int, planes: Array) -> Array | None:
    """Forces (3, K, n) that a part no longer carries when less of it works; None where it stays as it is."""
    old, new = line_moments(before, part), line_moments(after, part)
    reach = np.sqrt(np.maximum(old[3], old[5]).max() / max(float(old[0].max()), 1e-300))
    size = float(old[0].max()) * reach ** np.array([0.0, 1.0, 1.0, 2.0, 2.0, 2.0])
    if not np.any(np.abs(old - new) > UNCHANGED * size[:, None, None]):
        return None
    return carried(planes, old - new)


@dataclass(eq=False)
class Record:
    """What one share of the loads has done so far.

    Parameters
    ----------
    N, V, M : ndarray, shapes (K, n), (2, K, n), (2, K, n)
        Forces about the line [N], [N m].
    reactions : ndarray, shape (supports, 5)
        Force of each support on the member, nothing of those that have gone.
    stress : dict of int to ndarray
        Stress of each part [Pa].
    creeping, sliding : dict of int to ndarray; ndarray, shape (2, K, n)
        The part of it, and of V, that still creeps.
    borne : dict of frozenset of int to ndarray, shape (2, K, n)
        V by the parts that were there when it arrived.
    """

    N: Array
    V: Array
    M: Array
    reactions: Array
    sliding: Array
    stress: Planes = field(default_factory=dict)
    creeping: Planes = field(default_factory=dict)
    borne: dict[frozenset[int], Array] = field(default_factory=dict)

    @classmethod
    def empty(cls, ground: Ground) -> Record:
        """Return the record of a member to which nothing has happened."""
        shape = ground.intervals.x.shape
        two = (2, *shape)
        return cls(
            np.zeros(shape), np.zeros(two), np.zeros(two), np.zeros((len(ground.member.supports), 5)), np.zeros(two)
        )

    def take(
        self, step: Solved, E: Array, free: Mapping[int, Array], creeps: bool, parts: frozenset[int] = frozenset()
    ) -> None:
        """Add what a step did, with moduli E (P,) [Pa] and free strain of parts as planes.

        `creeps`: its stress creeps in later stages; `parts` that are there.
        """
        ground = step.ground
        f, s = step.fields, step.strain
        self.N, self.V, self.M = self.N + f.N, self.V + f.V, self.M + f.M
        self.borne[parts] = self.borne.get(parts, 0.0) + f.V
        if creeps:
            self.sliding = self.sliding + f.V
        strain = np.stack((s.axial, -s.curvature[0], -s.curvature[1]))
        for part in sorted(ground.works or range(len(ground.member.parts))):
            if E[part] == 0.0:
                continue
            added = E[part] * (strain - free.get(part, 0.0))
            self.stress[part] = self.stress.get(part, 0.0) + added
            if creeps:
                self.creeping[part] = self.creeping.get(part, 0.0) + added

    def forget(self, part: int) -> None:
        """Drop a part that has gone."""
        self.stress.pop(part, None)
        self.creeping.pop(part, None)
