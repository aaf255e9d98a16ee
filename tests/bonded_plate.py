"""Scenario S10, a cracked beam to which a plate is bonded under load, once more by strips of 1 mm of its own."""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

LENGTH, WIDTH, HEIGHT = 6.5, 0.3, 0.42
E_CONCRETE, E_STEEL, F_CT, CREEP = 31e9, 200e9, 2.6e6, 2.0
PLATE, FROM, TO = (0.24, 0.006), 0.6, 5.9
ROWS = ((4, 0.02, 0.37), (2, 0.016, 0.05))
"""Bars: count, diameter, depth."""
PRESENT, ADDED = 14e3, 13e3
STRIP = 1e-3


@dataclass
class Section:
    """Strips of 1 mm: depth below the top, area of concrete, of bars and of the plate."""

    plated: bool
    z: Array = field(init=False)
    concrete: Array = field(init=False)
    bars: Array = field(init=False)
    plate: Array = field(init=False)

    def __post_init__(self) -> None:
        count = round((HEIGHT + PLATE[1]) / STRIP)
        self.z = (np.arange(count) + 0.5) * STRIP
        self.bars = np.zeros(count)
        for number, diameter, depth in ROWS:
            off = np.abs(self.z - depth)
            chord = 2.0 * np.sqrt(np.maximum(diameter**2 / 4.0 - off**2, 0.0))
            # chords at the middles of strips are a little off in area: that of the circles counts
            chord *= np.pi * diameter**2 / 4.0 / (chord.sum() * STRIP)
            self.bars += number * chord * STRIP
        self.concrete = np.where(self.z < HEIGHT, WIDTH * STRIP, 0.0) - self.bars
        self.plate = np.where(self.z > HEIGHT, PLATE[0] * STRIP, 0.0) * self.plated


def balanced(s: Section, E: float, born: Array, free: Array, M: float, tension: bool) -> tuple[float, float]:
    """Strain at the top and curvature under a moment, N = 0: e = e0 + k z with k > 0 sagging.

    `free`: free strain of the concrete at the strips, `born`: that of the plate; by secant stiffness of the strips
    that are at work, until none changes.
    """
    work = np.ones(s.z.size, dtype=bool)
    for _ in range(500):
        weight = E * np.where(work, s.concrete, 0.0), E_STEEL * s.bars, E_STEEL * s.plate
        whole = sum(weight)
        matrix = np.array([[whole.sum(), (whole * s.z).sum()], [(whole * s.z).sum(), (whole * s.z**2).sum()]])
        held = weight[0] * free + weight[2] * born
        e0, k = np.linalg.solve(matrix, [held.sum(), M + (held * s.z).sum()])
        now = np.ones_like(work) if tension else e0 + k * s.z - free < 0.0
        if np.array_equal(now, work):
            return float(e0), float(k)
        # one strip at a time at most near the end, so that the search does not go to and fro
        work = now
    raise ArithmeticError("strips did not settle")


@dataclass
class Answer:
    """What one section does in both stages: mean curvatures, stress and force of the plate at a crack."""

    curvature: tuple[float, float]
    plate_stress: float
    plate_mean: float
    cracked: tuple[bool, bool]


def answer(s: Section, M1: float, M2: float) -> Answer:
    """Curvature by EN 1992-1-1, 7.4.3, beta = 0.5, at the end of both stages; M2 is all load."""
    soft, nothing = E_CONCRETE / (1.0 + CREEP), np.zeros(s.z.size)
    bare, states = Section(False), []
    first_cracked = False
    for tension in (True, False):
        # what was not cracked when the plate came had the strains of the uncracked section
        e1, k1 = balanced(bare, soft, nothing, nothing, M1, tension or not first_cracked)
        strain = e1 + k1 * s.z
        first_cracked = first_cracked or soft * (e1 + k1 * HEIGHT) > F_CT
        # its stress stays where it is on the short-term modulus
        free = strain - soft * strain / E_CONCRETE
        e2, k2 = balanced(s, E_CONCRETE, strain, free, M2, tension)
        last = np.where(s.plate > 0.0, e2 + k2 * s.z - strain, 0.0)
        states.append((e1, k1, e2, k2, E_STEEL * last, free))
    one, two = states
    bottom = HEIGHT
    free = one[0] + one[1] * bottom
    free -= soft * free / E_CONCRETE
    over = (
        soft * (one[0] + one[1] * bottom) / F_CT,
        E_CONCRETE * (one[2] + one[3] * bottom - free) / F_CT,
    )
    cracked = (over[0] > 1.0, over[0] > 1.0 or over[1] > 1.0)
    zeta = [float(np.clip(1.0 - 0.5 / o**2, 0.0, 1.0)) * c for o, c in zip(over, cracked, strict=True)]
    curvature = tuple((1.0 - z) * one[1 + 2 * k] + z * two[1 + 2 * k] for k, z in enumerate(zeta))
    there = s.plate > 0.0
    plate = [float(v[4][there].max()) if there.any() else 0.0 for v in states]
    return Answer(
        (curvature[0], curvature[1]),
        plate[1] if cracked[1] else plate[0],
        (1.0 - zeta[1]) * _force(s, one[4]) + zeta[1] * _force(s, two[4]),
        cracked,
    )


def _force(s: Section, stress: Array) -> float:
    return float((stress * s.plate).sum())


def moment(q: float, x: float) -> float:
    """Bending moment of the simple beam."""
    return q * x * (LENGTH - x) / 2.0


def deflections(step: float = 0.01) -> tuple[float, float]:
    """Midspan deflection at the end of both stages: curvature at the middles of short stretches, virtual work."""
    x = np.arange(0.5 * step, LENGTH / 2.0, step)
    plated, bare = Section(True), Section(False)
    found = np.zeros(2)
    for place in x:
        s = plated if FROM < place < TO else bare
        got = answer(s, moment(PRESENT, place), moment(PRESENT + ADDED, place))
        # both halves alike: x / 2 is the moment of a unit force at midspan
        found += 2.0 * np.array(got.curvature) * place / 2.0 * step
    return float(found[0]), float(found[1])
