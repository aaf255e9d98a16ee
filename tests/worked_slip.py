"""Answers of worked jobs whose parts slip on each other: each number computed a second time.

A function takes the text of its job and gives the values stated, as `worked_answers` says. Stages are boundary value
problems of slip between two layers, solved by collocation (`slip_bvp`), each on its own moduli, and added.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from by_hand import simple_span, stepped, strips
from commands import KN, MM
from scipy.optimize import minimize_scalar
from slip_bvp import SCALE, G, M, S, Stretch, V, W, continuous, solved
from worked_run import Values, answer, both, check, down

L, STEEL, CONCRETE = 18.0, 210e9, 33e9
ENDS = ((STEEL, 0.2, -0.015, 0.0), (STEEL, 0.01, -0.58, -0.015), (STEEL, 0.25, -0.6, -0.58))
MIDDLE = (*ENDS[:2], (STEEL, 0.25, -0.615, -0.58))
STUDS = 2 * 90e6 / 0.25
ZONES = ((0.0, 4.0, ENDS), (4.0, 14.0, MIDDLE), (14.0, 18.0, ENDS))


def flat(value: float):
    return lambda x: np.full_like(np.asarray(x, dtype=float), value)


@dataclass
class Stage:
    """Girder and slab under one set of moduli: load [N/m], shortening of the slab, creep of slab and joint."""

    q: float
    shrinks: float = 0.0
    creep: float = 0.0

    def solve(self):
        """State along x: deflection, rotation, force of the slab, slip, M, V."""
        E, k = CONCRETE / (1 + self.creep), STUDS / (1 + self.creep)
        slab = strips((E, 1.4, 0.0, 0.13))
        stretches = []
        for a, b, steel in ZONES:
            girder = strips(*steel)
            EA, c = (flat(girder[0]), flat(slab[0])), (flat(girder[1]), flat(slab[1]))
            stretches.append(Stretch(a, b, EA, c, flat(girder[2] + slab[2]), flat(k), self.q, free=-self.shrinks))

        def conditions(left: np.ndarray, right: np.ndarray) -> Sequence[float]:
            outer = [left[0][W], left[0][M], left[0][G], right[-1][W], right[-1][M], right[-1][G]]
            found = [value / SCALE[q] for value, q in zip(outer, (W, M, G) * 2, strict=True)]
            for i in (0, 1):
                found += continuous(right[i], left[i + 1], (W, 1, G, S, M, V))
            return found

        return solved(stretches, conditions, tolerance=1e-9)


def rigid(q: float, shrinks: float, creep: float) -> float:
    """Deflection at midspan with a rigid joint: curvature by load, and by the slab held back, against a unit load."""
    slab = (CONCRETE / (1 + creep), 1.4, 0.0, 0.13)
    force = slab[0] * 1.4 * 0.13 * shrinks
    whole = [strips(*steel, slab) for steel in (ENDS, MIDDLE)]
    by_load = simple_span(L, stepped((4.0, 14.0, whole[1][2]), other=whole[0][2]), [4.0, 14.0], q, (), 9.0)
    turned = [force * (0.065 - z) / EI for _, z, EI in whole]
    # moment of a unit load at midspan is x / 2: its integral is 4 over an end and 65/4 over half of the middle
    return by_load + 2 * turned[0] * 4.0 + 2 * turned[1] * (9.0**2 - 4.0**2) / 4


def apart(q: float, creep: float) -> float:
    """Deflection at midspan with girder and slab side by side, not joined; a slab that shrinks only slips."""
    slab = CONCRETE / (1 + creep) * 1.4 * 0.13**3 / 12
    own = [strips(*steel)[2] + slab for steel in (ENDS, MIDDLE)]
    return simple_span(L, stepped((4.0, 14.0, own[1]), other=own[0]), [4.0, 14.0], q, (), 9.0)


def footbridge(text: str) -> Values:
    result = answer("footbridge", text)
    c = result["combinations"][0]
    stages = [s["combinations"][0]["deflection"]["down"]["value"] for s in result["stages"]]
    bare = simple_span(
        L, stepped((4.0, 14.0, strips(*MIDDLE)[2]), other=strips(*ENDS)[2]), [4.0, 14.0], 5.95e3, (), 9.0
    )
    finishes, shrinkage, live = Stage(1.6e3, creep=2.75), Stage(0.0, 325e-6, 1.375), Stage(7e3)
    states = [s.solve() for s in (finishes, shrinkage, live)]
    sags = [float(state(9.0)[W]) for state in states]
    stiffness = [STUDS / (1 + s.creep) for s in (finishes, shrinkage, live)]

    def stud(x: float) -> float:
        return sum(k * float(state(x)[S]) for k, state in zip(stiffness, states, strict=True)) * 0.25 / 2

    most = minimize_scalar(stud, bounds=(1.0, 4.0), method="bounded", options={"xatol": 1e-7})
    slip = c["slip"][0]

    kinds = ((1.6e3, 0.0, 2.75), (0.0, 325e-6, 1.375), (7e3, 0.0, 0.0))

    return [
        (both(stages[0], bare) / MM, "39.35 mm"),
        (both(stages[1], bare + sags[0] + sags[1]) / MM, "61.11 mm"),
        (both(down(c), bare + sum(sags)) / MM, "76.13 mm"),
        (both(check(c, "live load")["found"], sags[2]) / MM, "15.03 mm"),
        (both(check(c, "live load")["allowed"], L / 500) / MM, "36.00 mm"),
        (both(slip["ends"]["left"]["slip"], sum(float(state(0.0)[S]) for state in states)) / MM, "0.257 mm"),
        (-both(slip["per_fastener"]["max"]["value"], float(most.fun)) / KN, "7.11 kN"),
        (both(c["bounds"]["rigid"]["value"], bare + sum(rigid(*kind) for kind in kinds)) / MM, "75.73 mm"),
        (
            both(c["bounds"]["apart"]["value"], bare + sum(apart(q, creep) for q, _, creep in kinds)) / MM,
            "94.29 mm",
        ),
    ]
