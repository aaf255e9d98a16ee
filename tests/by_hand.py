"""Second computations for the tests, from first principles: sections of strips, and the unit-load integral.

Nothing here uses the package.
"""

from collections.abc import Callable, Iterable
from itertools import pairwise

import numpy as np
from numpy.polynomial.legendre import leggauss

Along = Callable[[np.ndarray], np.ndarray]

POINTS, WEIGHTS = leggauss(60)


def integral(f: Along, breaks: Iterable[float]) -> float:
    """Integral of f over the pieces between breaks; x = a + (b − a)(1 − cos t)/2 takes a root at an end."""
    total = 0.0
    places = sorted(set(breaks))
    t = np.pi / 2 * (POINTS + 1)
    for a, b in pairwise(places):
        x = a + (b - a) * (1 - np.cos(t)) / 2
        total += float(np.sum(WEIGHTS * np.pi / 2 * (b - a) / 2 * np.sin(t) * f(x)))
    return total


def strips(*parts: tuple[float, float, float, float]) -> tuple[float, float, float]:
    """EA, level of the centroid and EI about it, of strips (E, width, z_bottom, z_top)."""
    E, b, z0, z1 = (np.array(column, dtype=float) for column in zip(*parts, strict=True))
    EA = E * b * (z1 - z0)
    z = float(np.sum(EA * (z0 + z1) / 2) / EA.sum())
    EI = float(np.sum(E * b * ((z1 - z) ** 3 - (z0 - z) ** 3) / 3))
    return float(EA.sum()), z, EI


def i_section(depth: float, width: float, flange: float, web: float, E: float) -> tuple[tuple[float, ...], ...]:
    """Strips of an I without root fillets, its top at z = 0."""
    return (
        (E, width, -flange, 0.0),
        (E, web, -depth + flange, -flange),
        (E, width, -depth, -depth + flange),
    )


def moment_simple(L: float, w: float = 0.0, points: Iterable[tuple[float, float]] = ()) -> Along:
    """Bending moment of a simple span under a uniform load and point loads (force, place)."""
    loads = tuple(points)

    def M(x: np.ndarray) -> np.ndarray:
        total = w * x * (L - x) / 2
        for P, a in loads:
            total = total + P * np.where(x < a, x * (L - a), a * (L - x)) / L
        return total

    return M


def shear_simple(L: float, w: float = 0.0, points: Iterable[tuple[float, float]] = ()) -> Along:
    """Shear force of the same span."""
    loads = tuple(points)

    def V(x: np.ndarray) -> np.ndarray:
        total = w * (L / 2 - x)
        for P, a in loads:
            total = total + P * np.where(x < a, (L - a) / L, -a / L)
        return total

    return V


def stepped(*pieces: tuple[float, float, float], other: float = 0.0) -> Along:
    """Value by pieces (from, to, value), `other` elsewhere."""

    def f(x: np.ndarray) -> np.ndarray:
        total = np.full_like(x, other)
        for a, b, value in pieces:
            total = np.where((x > a) & (x < b), value, total)
        return total

    return f


def simple_span(
    L: float, EI: Along, breaks: list[float], w: float, points: tuple[tuple[float, float], ...], at: float
) -> float:
    """Deflection at a place of a simple span of varying EI, by the unit load."""
    M, m = moment_simple(L, w, points), moment_simple(L, 0.0, [(1.0, at)])
    return integral(lambda x: M(x) * m(x) / EI(x), [0.0, L, at, *breaks, *(a for _, a in points)])


def skew_strips(*parts: tuple[float, float, float, float, float]) -> float:
    """EI in the vertical plane of strips (E, width, z_bottom, z_top, y of the middle), free to bend aside."""
    E, b, z0, z1, y = (np.array(column, dtype=float) for column in zip(*parts, strict=True))
    EA, z = E * b * (z1 - z0), (z0 + z1) / 2
    z_c, y_c = float(np.sum(EA * z) / EA.sum()), float(np.sum(EA * y) / EA.sum())
    EI_y = strips(*(part[:4] for part in parts))[2]
    EI_z = float(np.sum(EA * (b**2 / 12 + (y - y_c) ** 2)))
    EI_yz = float(np.sum(EA * (y - y_c) * (z - z_c)))
    return EI_y - EI_yz**2 / EI_z
