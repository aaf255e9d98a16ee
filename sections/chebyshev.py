"""Chebyshev points of the first kind on [-1, 1]: integrate, differentiate, interpolate to the ends.

First-kind points lie strictly inside, so that a quantity is never asked for on a break itself.
Source: J. C. Mason and D. C. Handscomb, Chebyshev Polynomials, CRC, 2003, chapters 2 and 4.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Rule:
    """Matrices that act on values at n Chebyshev points.

    Parameters
    ----------
    points : ndarray, shape (n,)
        The points, increasing.
    to_coefficients : ndarray, shape (n, n)
        Values to coefficients of T_0 .. T_(n-1).
    integrate : ndarray, shape (n, n)
        Values to the integral from -1 to each point.
    weights : ndarray, shape (n,)
        Values to the integral from -1 to 1.
    differentiate : ndarray, shape (n, n)
        Values to the derivative at each point.
    left, right : ndarray, shape (n,)
        Values to the interpolated value at -1 and at 1.
    """

    points: Array
    to_coefficients: Array
    integrate: Array
    weights: Array
    differentiate: Array
    left: Array
    right: Array

    def basis(self, at: Array) -> Array:
        """Return the matrix from values at the points to values at other places, shape (len(at), n)."""
        return np.asarray(_cosines(np.asarray(at, dtype=float), self.points.size) @ self.to_coefficients)


def _cosines(at: Array, n: int) -> Array:
    return np.asarray(np.cos(np.arange(n) * np.arccos(np.clip(at, -1.0, 1.0))[:, None]))


@lru_cache(maxsize=8)
def rule(n: int) -> Rule:
    """Return the rule of n points, n at least 3."""
    k = np.arange(n)
    angle = (2.0 * k[::-1] + 1.0) * np.pi / (2.0 * n)
    points = np.sin(0.5 * np.pi - angle)
    to_coefficients = 2.0 / n * np.cos(np.outer(k, angle))
    to_coefficients[0] *= 0.5
    higher = np.cos(np.outer(angle, np.arange(n + 1)))
    primitive = _primitive(higher, n)
    signs = np.where(np.arange(n + 1) % 2 == 0, 1.0, -1.0)
    start, end = _primitive(signs[None, :], n), _primitive(np.ones((1, n + 1)), n)
    # T_k' = k U_(k-1), U_(k-1) = sin(k angle) / sin(angle)
    slopes = k * np.sin(np.outer(angle, k)) / np.sin(angle)[:, None]
    return Rule(
        points,
        to_coefficients,
        (primitive - start) @ to_coefficients,
        np.ravel((end - start) @ to_coefficients),
        slopes @ to_coefficients,
        signs[:n] @ to_coefficients,
        np.ones(n) @ to_coefficients,
    )


def _primitive(t: Array, n: int) -> Array:
    """Primitives of T_0 .. T_(n-1) from the values of T_0 .. T_n, shape (m, n)."""
    result = np.empty((t.shape[0], n))
    result[:, 0] = t[:, 1]
    result[:, 1] = 0.25 * t[:, 2]
    k = np.arange(2, n)
    result[:, 2:] = 0.5 * (t[:, 3:] / (k + 1.0) - t[:, 1 : n - 1] / (k - 1.0))
    return result


def tail(values: Array, n: int) -> Array:
    """Size of the last coefficients against the largest, along the last axis: how well n points resolve.

    Parameters
    ----------
    values : ndarray, shape (..., n)
        Values at the points.
    n : int
        Number of points.

    Returns
    -------
    ndarray, shape (...)
        Largest of the last three coefficients over the largest value; 0 where all values are zero.
    """
    coefficients = np.abs(values @ rule(n).to_coefficients.T)
    scale = np.abs(values).max(axis=-1)
    return np.asarray(coefficients[..., -3:].max(axis=-1) / np.where(scale == 0.0, 1.0, scale))
