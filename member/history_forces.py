"""Forces that history puts on a section: of a stress plane over an area, and for a shear angle that has crept."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.forces import Forces

Array = NDArray[np.float64]


def resultant(planes: Array, moments: Array) -> Forces:
    """Forces of a stress plane over an area about the analysis line, shapes (A, K, n) and (2, A, K, n)."""
    A, S0, S1, I00, I01, I11 = moments
    s, s0, s1 = planes
    N = s * A + s0 * S0 + s1 * S1
    M = -np.stack((s * S0 + s0 * I00 + s1 * I01, s * S1 + s0 * I01 + s1 * I11))
    return Forces(N, np.zeros_like(M), M)


def sheared(slide: Array, more: Array, V: Array) -> Forces:
    """Shear forces that on a shear flexibility give the angles that further flexibility has under V.

    Parameters
    ----------
    slide, more : ndarray, shape (3, K, n)
        Shear flexibility at work and the further one [1/N].
    V : ndarray, shape (2, A, K, n)
        Shear forces [N].
    """
    found = _shear_for(slide, _angles(more, V))
    return Forces(np.zeros_like(V[0]), found, np.zeros_like(V))


def _angles(slide: Array, V: Array) -> Array:
    """Shear angles of both planes by shear forces, shape (2, A, K, n)."""
    return np.stack((slide[0] * V[0] + slide[2] * V[1], slide[1] * V[1] + slide[2] * V[0]))


def _shear_for(slide: Array, angles: Array) -> Array:
    """Shear forces that give shear angles; nothing in a plane that does not shear."""
    if not np.any(slide[1]):
        return np.stack((angles[0] / slide[0], np.zeros_like(angles[0])))
    det = slide[0] * slide[1] - slide[2] ** 2
    first, second = slide[1] * angles[0] - slide[2] * angles[1], slide[0] * angles[1] - slide[2] * angles[0]
    return np.stack((first, second)) / det
