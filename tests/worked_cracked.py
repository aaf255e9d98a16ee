"""Answers of the worked jobs that crack: each number computed a second time.

A function takes the text of its job and gives the values stated, as `worked_answers` says. Depths count from the top
down, strains are e + k z with k sagging; bars are whole circles, which the axis of no stress does not cut.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from commands import KN, MM, MPA
from scipy.optimize import brentq
from worked_run import Values, answer, both, check, down

Line = tuple[float, float]
"""A strain a + b z."""
_GAUSS = np.polynomial.legendre.leggauss(24)


@dataclass(frozen=True)
class Beam:
    """A rectangle with rows of bars (count, diameter, depth), and a plate (width, depth) under it."""

    width: float
    height: float
    bars: tuple[tuple[int, float, float], ...]
    plate: tuple[float, float] | None = None
    steel: float = 200e9

    def strain(self, E: float, free: Line, born: Line, M: float, tension: bool) -> Line:
        """Strain under a moment without axial force; `free` of the concrete, `born` of the plate."""
        end = self.height
        for _ in range(100):
            K, R = np.zeros((2, 2)), np.array([0.0, M])
            for stiff, moments, off in self._pieces(E, end, free, born):
                A, S, I = moments
                piece = stiff * np.array([[A, S], [S, I]])
                K, R = K + piece, R + piece @ np.array(off)
            e, k = np.linalg.solve(K, R)
            zero = self.height if tension else -(e - free[0]) / (k - free[1])
            if abs(zero - end) <= 1e-15:
                return float(e), float(k)
            end = zero
        raise ArithmeticError("the axis of no stress did not settle")

    def _pieces(self, E: float, end: float, free: Line, born: Line):  # type: ignore[no-untyped-def]
        b = self.width
        yield E, (b * end, b * end**2 / 2, b * end**3 / 3), free
        for count, d, z in self.bars:
            A, own = count * math.pi * d**2 / 4, count * math.pi * d**4 / 64
            moments = (A, A * z, A * z**2 + own)
            assert abs(z - end) > d / 2
            yield self.steel, moments, (0.0, 0.0)
            if z < end:
                yield -E, moments, free
        if self.plate is not None:
            w, t = self.plate
            z = self.height + t / 2
            yield self.steel, (w * t, w * t * z, w * t * z**2 + w * t**3 / 12), born

    def bare(self) -> Beam:
        """The same without its plate."""
        return Beam(self.width, self.height, self.bars, None, self.steel)


@dataclass(frozen=True)
class Life:
    """A section under M1 on a soft modulus for long, then under all of M2 on the stiff one, uncracked and cracked."""

    beam: Beam
    E: float
    soft: float
    limit: float

    def states(self, M1: float, M2: float, first_cracked: bool) -> list[tuple[Line, Line, Line]]:
        """For both states: strain at the end, free strain of the concrete, and the strain with which the plate came."""
        found = []
        for tension in (True, False):
            e, k = self.beam.bare().strain(self.soft, (0.0, 0.0), (0.0, 0.0), M1, tension or not first_cracked)
            share = 1.0 - self.soft / self.E
            free = share * e, share * k
            found.append((self.beam.strain(self.E, free, (e, k), M2, tension), free, (e, k)))
        return found

    def over(self, M1: float, M2: float | None = None) -> float:
        """Tension of the uncracked soffit over the stress at which it cracks, after M1 or at the end."""
        h = self.beam.height
        if M2 is None:
            e, k = self.beam.bare().strain(self.soft, (0.0, 0.0), (0.0, 0.0), M1, True)
            return self.soft * (e + k * h) / self.limit
        (e, k), free, _ = self.states(M1, M2, False)[0]
        return self.E * (e - free[0] + (k - free[1]) * h) / self.limit


def zeta(over: float, beta: float = 0.5) -> float:
    """EN 1992-1-1, (7.19)."""
    return min(max(1.0 - beta / over**2, 0.0), 1.0)


def midspan(curvature: Callable[[float], float], length: float, places: list[float]) -> float:
    """Deflection at midspan of a simple beam that is symmetric about it; smooth between places."""
    cuts = sorted({0.0, *places, length / 2})
    total = 0.0
    for a, b in pairwise(cuts):
        x = (a + b) / 2 + (b - a) / 2 * _GAUSS[0]
        total += float(sum(w * (b - a) / 2 * curvature(v) * v for v, w in zip(x, _GAUSS[1], strict=True)))
    return total


def _simple(q: float, length: float) -> Callable[[float], float]:
    return lambda x: q * x * (length - x) / 2


def bonded_plate(text: str) -> Values:
    L, E, soft = 6.5, 31e9, 31e9 / 3
    bare = Life(Beam(0.3, 0.42, ((4, 0.02, 0.37), (2, 0.016, 0.05))), E, soft, 2.6e6)
    plated = Life(Beam(0.3, 0.42, bare.beam.bars, (0.24, 0.006)), E, soft, 2.6e6)
    M1, M2 = _simple(14e3, L), _simple(27e3, L)

    def life(x: float) -> Life:
        return plated if x > 0.6 else bare

    first = brentq(lambda x: bare.over(M1(x)) - 1.0, 0.1, L / 2, xtol=1e-14)
    second = brentq(lambda x: bare.over(M1(x), M2(x)) - 1.0, 0.1, 0.6, xtol=1e-14)

    def present(x: float) -> float:
        (_, k1), (_, k2) = (bare.beam.strain(soft, (0.0, 0.0), (0.0, 0.0), M1(x), t) for t in (True, False))
        share = zeta(bare.over(M1(x))) if x > first else 0.0
        return (1 - share) * k1 + share * k2

    def total(x: float) -> float:
        one, two = life(x).states(M1(x), M2(x), x > first)
        share = zeta(life(x).over(M1(x), M2(x))) if x > second else 0.0
        return (1 - share) * one[0][1] + share * two[0][1]

    def plate(x: float, z: float) -> tuple[float, float]:
        states = plated.states(M1(x), M2(x), x > first)
        one, two = (200e9 * (s[0][0] - s[2][0] + (s[0][1] - s[2][1]) * z) for s in states)
        share = zeta(plated.over(M1(x), M2(x)))
        return two, ((1 - share) * one + share * two) * 0.24 * 0.006

    step = 1e-4
    flow = (8 * (plate(0.6 + step, 0.423)[1] - plate(0.6 - step, 0.423)[1])) / (12 * step)
    flow -= (plate(0.6 + 2 * step, 0.423)[1] - plate(0.6 - 2 * step, 0.423)[1]) / (12 * step)
    sags = midspan(present, L, [first]), midspan(total, L, [first, second, 0.6])
    result = answer("bonded-plate", text)
    c = result["by_name"]["all"]
    added, whole = check(c, "added"), check(c, "total")
    stretch = c["cracked"]["stretches"][0]
    joint = next(j for j in c["joints"] if j["part"] == "plate")["start"]
    stress = next(s for s in c["stress"] if s["part"] == "plate")["max"]["value"]
    both(joint["flow"], flow)
    return [
        (both(down(result["stages"][0]["combinations"][0]), sags[0]) / MM, "18.69 mm"),
        (both(added["found"], sags[1] - sags[0]) / MM, "7.63 mm"),
        (both(added["allowed"], L / 500) / MM, "13.00 mm"),
        (both(whole["found"], sags[1]) / MM, "26.32 mm"),
        (both(whole["allowed"], L / 250) / MM, "26.00 mm"),
        (both(stretch["from"], second) / MM, "364.4 mm"),
        (both(stress, plate(L / 2, 0.426)[0]) / MPA, "81.7 MPa"),
        (both(joint["force"], plate(0.6, 0.423)[1]) / KN, "50.7 kN"),
    ]


def cracked_beam(text: str) -> Values:
    L, E, soft = 6.4, 31e9, 31e9 / 3.1
    beam = Beam(0.25, 0.5, ((4, 0.016, 0.45), (2, 0.012, 0.045)))
    life = Life(beam, E, soft, 2.6e6)
    M1, M2, live = _simple(11e3 + 0.3 * 7e3, L), _simple(18e3, L), _simple(7e3, L)
    whole = brentq(lambda x: life.over(M1(x), M2(x)) - 1.0, 0.1, L / 2, xtol=1e-14)

    def final(x: float) -> float:
        one, two = life.states(M1(x), M2(x), x > whole)
        share = zeta(life.over(M1(x), M2(x))) if x > whole else 0.0
        return (1 - share) * one[0][1] + share * two[0][1]

    def uncracked(x: float) -> float:
        return life.states(M1(x), M2(x), False)[0][0][1]

    quick = Life(beam, E, E, 2.6e6)
    begins = brentq(lambda x: quick.over(live(x)) - 1.0, 0.1, L / 2, xtol=1e-14)

    def imposed(x: float) -> float:
        one, two = (beam.strain(E, (0.0, 0.0), (0.0, 0.0), live(x), t)[1] for t in (True, False))
        share = zeta(quick.over(live(x)), 1.0) if x > begins else 0.0
        return (1 - share) * one + share * two

    result = answer("cracked-beam", text)["by_name"]
    c, limits = result["final"], [check(result["imposed"], "imposed load"), check(result["final"], "final")]
    stretch = c["cracked"]["stretches"][0]
    steel = 200e9 * np.dot(life.states(M1(L / 2), M2(L / 2), True)[1][0], (1.0, 0.458))
    bars = next(s for s in c["stress"] if s["part"] == "bottom bars")["max"]["value"]
    return [
        (both(limits[0]["found"], midspan(imposed, L, [begins])) / MM, "2.60 mm"),
        (both(limits[0]["allowed"], L / 360) / MM, "17.78 mm"),
        (both(limits[1]["found"], midspan(final, L, [whole])) / MM, "19.95 mm"),
        (both(limits[1]["allowed"], L / 250) / MM, "25.60 mm"),
        (both(c["cracked"]["uncracked"]["value"], midspan(uncracked, L, [])) / MM, "9.73 mm"),
        (both(stretch["from"], whole) / MM, "678.3 mm"),
        (both(bars, steel) / MPA, "293.9 MPa"),
    ]
