"""Finite elements of high degree on cells of a section: shapes, stiffness of their corners and sides.

Every element is the image of the unit square. An ordinary one covers a rectangle of the cell's own coordinates
(share of the width, height). A pointed one covers a triangle: its side at height 0 is one point, and where the
solution is a fractional power of the distance from that point, the distance is the cube of the height, which turns
the power 2/3 of a re-entrant corner into a square.

Sources: B. Szabó and I. Babuška, Finite Element Analysis, Wiley, 1991, chapters 3 and 10 (hierarchy of degrees,
singular points); G. E. Karniadakis and S. J. Sherwin, Spectral/hp Element Methods for CFD, Oxford, 1999, chapter 2
(collapsed coordinates, points of Gauss and Lobatto); both from memory.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

POWER = 3
"""Power of the height in the distance from a singular point."""
ORDINARY = 0
FOOT, FOOT_SINGULAR, HEAD, HEAD_SINGULAR = 1, 2, 3, 4
CORNER = 5
"""First of eight: corner (u, v) = (0, 0), (1, 0), (0, 1), (1, 1), and of each first the triangle along u."""
BESIDE = 13
"""First of four: singular corner of a three-sided cell; foot pointed u = 0, u = 1, head pointed u = 0, u = 1."""
KINDS = 17


@dataclass(frozen=True, eq=False)
class Basis:
    """Lagrange polynomials of degree p on Lobatto points of [0, 1], seen at n Gauss points.

    Parameters
    ----------
    points, weights : ndarray, shape (n,)
        Gauss points and weights.
    values, slopes : ndarray, shape (n, p + 1)
        Values and derivatives.
    """

    points: Array
    weights: Array
    values: Array
    slopes: Array


@lru_cache(maxsize=16)
def basis(degree: int) -> Basis:
    """Return the basis of a degree, with degree + 2 Gauss points."""
    n = degree + 2
    x = _roots(n, np.cos(np.pi * (np.arange(n, 0.0, -1.0) - 0.25) / (n + 0.5)), 0)
    at, slope = _legendre(n, x)
    w = 2.0 / ((1.0 - x * x) * slope[:, n] ** 2)
    inner = _roots(degree, -np.cos(np.pi * np.arange(1, degree) / degree), 1)
    turn = np.linalg.inv(_legendre(degree, np.concatenate(([-1.0], inner, [1.0])))[0])
    cut = slice(0, degree + 1)
    return Basis(0.5 * (x + 1.0), 0.5 * w, at[:, cut] @ turn, 2.0 * slope[:, cut] @ turn)


def _legendre(degree: int, x: Array) -> tuple[Array, Array]:
    """Legendre polynomials up to a degree and their derivatives, each of shape (len(x), degree + 1)."""
    p, d = np.ones((x.size, degree + 1)), np.zeros((x.size, degree + 1))
    if degree:
        p[:, 1], d[:, 1] = x, 1.0
    for k in range(1, degree):
        p[:, k + 1] = ((2 * k + 1) * x * p[:, k] - k * p[:, k - 1]) / (k + 1)
        d[:, k + 1] = d[:, k - 1] + (2 * k + 1) * p[:, k]
    return p, d


def _roots(degree: int, x: Array, derivative: int) -> Array:
    """Roots of the Legendre polynomial of a degree (0), or of its derivative (1), by Newton's method from near ones."""
    for _ in range(12):
        p, d = (v[:, degree] for v in _legendre(degree, x))
        # Legendre's differential equation gives the second derivative
        step = p / d if derivative == 0 else d * (1.0 - x * x) / (2.0 * x * d - degree * (degree + 1) * p)
        x = x - step
    return x


@lru_cache(maxsize=16)
def places(degree: int) -> tuple[Array, Array]:
    """Cell coordinates of the quadrature points of every kind, and their derivatives.

    Returns
    -------
    uv : ndarray, shape (KINDS, 2, n * n)
        Share of the width and height of each point in its cell; first local coordinate slowest.
    slopes : ndarray, shape (KINDS, 2, 2, n * n)
        Derivatives of (u, v) by the local coordinates.
    """
    t = basis(degree).points
    x, y = (np.ravel(m) for m in np.meshgrid(t, t, indexing="ij"))
    return _places(x, y)


@lru_cache(maxsize=16)
def side_places(degree: int) -> tuple[Array, Array]:
    """Cell coordinates of Gauss points on the sides y = 0, y = 1, x = 0, x = 1 of every kind, in this order.

    Returns
    -------
    uv : ndarray, shape (KINDS, 2, 4 * n)
        As `places`; the side that is a point is worth nothing.
    slopes : ndarray, shape (KINDS, 2, 2, 4 * n)
        As `places`.
    """
    t = basis(degree).points
    # the side that is a point is kept a little away from it
    near, one = np.full_like(t, 1e-3), np.ones_like(t)
    return _places(np.concatenate((t, t, 0.0 * t, one)), np.concatenate((near, one, t, t)), level=near.size)


def _places(x: Array, y: Array, level: int = 0) -> tuple[Array, Array]:
    one, nought = np.ones_like(x), np.zeros_like(x)
    uv = np.empty((KINDS, 2, x.size))
    slopes = np.empty((KINDS, 2, 2, x.size))
    for kind in range(KINDS):
        u, v = x, y
        du, dv = (one, nought), (nought, one)
        if kind == ORDINARY:
            v = np.concatenate((0.0 * y[:level], y[level:]))
        else:
            power = 1 if kind in (FOOT, HEAD) else POWER
            s, ds = y**power, power * y ** (power - 1)
            (u, du), (v, dv) = _pointed(kind, x, s)
            du, dv = (du[0], du[1] * ds), (dv[0], dv[1] * ds)
        uv[kind] = u, v
        slopes[kind] = (du[0] * one, du[1] * one), (dv[0] * one, dv[1] * one)
    return uv, slopes


def _pointed(
    kind: int, x: Array, s: Array
) -> tuple[tuple[Array, tuple[Array, Array]], tuple[Array, tuple[Array, Array]]]:
    """Cell coordinates u, v and their derivatives by (x, s), s the distance from the point."""
    one, nought = np.ones_like(x), np.zeros_like(x)
    if kind < CORNER:
        u = (x, (one, nought))
        v = (s, (nought, one))
    elif kind < BESIDE:
        along, across = (s, (nought, one)), (s * x, (s, x))
        corner, which = divmod(kind - CORNER, 2)
        u, v = (along, across) if which == 0 else (across, along)
        u = _turned(u) if corner % 2 else u
        return u, _turned(v) if corner // 2 else v
    else:
        # v is counted from the point of the cell, u from the side of the singular corner
        v = (1.0 - s + s * x, (s, x - 1.0))
        u = (s * x / v[0], (s / v[0] - s * x * s / v[0] ** 2, x / v[0] - s * x * (x - 1.0) / v[0] ** 2))
        u = _turned(u) if (kind - BESIDE) % 2 else u
        return u, _turned(v) if kind >= BESIDE + 2 else v
    return u, _turned(v) if kind in (HEAD, HEAD_SINGULAR) else v


def _turned(c: tuple[Array, tuple[Array, Array]]) -> tuple[Array, tuple[Array, Array]]:
    return 1.0 - c[0], (-c[1][0], -c[1][1])


@lru_cache(maxsize=16)
def numbering(degree: int) -> tuple[NDArray[np.intp], NDArray[np.intp], NDArray[np.intp]]:
    """Local numbers of the nodes of an element, node (i, j) being i (degree + 1) + j.

    Returns
    -------
    corners : ndarray, shape (4,)
        At (0, 0), (1, 0), (0, 1), (1, 1).
    sides : ndarray, shape (4, degree - 1)
        Inner nodes of the sides y = 0, y = 1 (with growing x), x = 0, x = 1 (with growing y).
    inner : ndarray, shape ((degree - 1)²,)
    """
    n = degree + 1
    grid = np.arange(n * n).reshape(n, n)
    corners = np.array([grid[0, 0], grid[-1, 0], grid[0, -1], grid[-1, -1]])
    sides = np.stack((grid[1:-1, 0], grid[1:-1, -1], grid[0, 1:-1], grid[-1, 1:-1]))
    return corners, sides, grid[1:-1, 1:-1].ravel()


@lru_cache(maxsize=16)
def _products(degree: int) -> tuple[Array, Array, NDArray[np.intp]]:
    """Products of values and slopes by pairs of nodes, and the order that makes a matrix of them."""
    b = basis(degree)
    n = degree + 1

    def pair(f: Array, g: Array) -> Array:
        return np.asarray((f[:, :, None] * g[:, None, :]).reshape(f.shape[0], n * n))

    vv, dd, vd, dv = (
        pair(f, g) for f, g in ((b.values, b.values), (b.slopes, b.slopes), (b.values, b.slopes), (b.slopes, b.values))
    )
    first = np.concatenate((dd, dv, vd, vv)).T
    second = np.stack((vv, vd, dv, dd))
    corners, sides, inner = numbering(degree)
    order = np.concatenate((corners, sides.ravel(), inner))
    i, j = order // n, order % n
    take = (i[:, None] * n + i[None, :]) * (n * n) + j[:, None] * n + j[None, :]
    return np.ascontiguousarray(first), second, take.ravel()


_AT_ONCE = 16
"""Elements whose matrices are worked out together: they stay in the processor's cache."""


def stiffness(degree: int, metric: Array) -> Iterator[tuple[slice, Array]]:
    """Stiffness of elements from their metric: corners first, then sides, then the inner nodes.

    Parameters
    ----------
    degree : int
        Degree p.
    metric : ndarray, shape (3, N, n * n)
        Weights of the products of derivatives by xx, xy, yy at the quadrature points, quadrature weights included.

    Yields
    ------
    some : slice
        A few elements.
    matrices : ndarray, shape (few, (p + 1)², (p + 1)²)
        Theirs; the next ones are written over them.
    """
    first, second, take = _products(degree)
    n, m, count = degree + 2, (degree + 1) ** 2, metric.shape[1]
    c = metric.reshape(3, count, n, n)
    # room that is used again and again: fresh memory would cost more than the sums
    few = min(count, _AT_ONCE)
    middle, whole, ordered = np.empty((few, 4, n, m)), np.empty((few, m, m)), np.empty((few, m * m))
    for start in range(0, count, few):
        some = slice(start, min(start + few, count))
        size = some.stop - start
        for k, which in enumerate((0, 1, 1, 2)):
            np.matmul(c[which, some], second[k], out=middle[:size, k])
        np.matmul(first, middle[:size].reshape(size, 4 * n, m), out=whole[:size])
        # "clip" only says that numpy may write where it is told to
        np.take(whole[:size].reshape(size, m * m), take, axis=1, out=ordered[:size], mode="clip")
        yield some, ordered[:size].reshape(size, m, m)


def loads(degree: int, density: Array) -> Array:
    """Loads on the nodes from a density by values, in the order of `stiffness`.

    Parameters
    ----------
    density : ndarray, shape (N, n * n)
        Density at the quadrature points, weights included.

    Returns
    -------
    ndarray, shape (N, (p + 1)²)
    """
    return _sums(degree, basis(degree).values, basis(degree).values, density)


def slope_loads(degree: int, by_x: Array, by_y: Array) -> Array:
    """Loads on the nodes from densities by the derivatives along x and y, in the order of `stiffness`."""
    b = basis(degree)
    return _sums(degree, b.slopes, b.values, by_x) + _sums(degree, b.values, b.slopes, by_y)


def _sums(degree: int, f: Array, g: Array, density: Array) -> Array:
    n = degree + 2
    corners, sides, inner = numbering(degree)
    order = np.concatenate((corners, sides.ravel(), inner))
    summed = np.matmul(f.T, np.matmul(density.reshape(-1, n, n), g))
    return np.asarray(summed.reshape(summed.shape[0], -1)[:, order])


def at_points(degree: int, nodal: Array) -> tuple[Array, Array]:
    """Derivatives by x and y at the quadrature points of fields given by nodes (order of `stiffness`), (N, n * n)."""
    b = basis(degree)
    corners, sides, inner = numbering(degree)
    order = np.concatenate((corners, sides.ravel(), inner))
    n = degree + 1
    grid = np.empty_like(nodal)
    grid[:, order] = nodal
    grid = grid.reshape(-1, n, n)
    by_x = np.matmul(np.matmul(b.slopes, grid), b.values.T)
    by_y = np.matmul(np.matmul(b.values, grid), b.slopes.T)
    return by_x.reshape(len(nodal), -1), by_y.reshape(len(nodal), -1)
