"""How a dimension changes along x: constant, straight between stations, steps, parabolas.

Every law is the same object, pieces of polynomials of degree two at most, constant outside its stations.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Law:
    """A quantity along x as polynomials between knots.

    Parameters
    ----------
    knots : ndarray, shape (m,)
        Places where one piece ends and the next begins [m], increasing, from the member's left end.
    origins : ndarray, shape (m + 1,)
        Where each piece counts its local coordinate from [m].
    coefficients : ndarray, shape (m + 1, 3)
        Value = c0 + c1 t + c2 t**2 with t = x - origin; first and last piece reach to infinity.
    """

    knots: Array
    origins: Array
    coefficients: Array

    def __post_init__(self) -> None:
        for name in ("knots", "origins", "coefficients"):
            array = np.array(getattr(self, name), dtype=float)
            array.flags.writeable = False
            object.__setattr__(self, name, array)

    def __call__(self, x: ArrayLike, side: str = "right") -> Array:
        """Value at x.

        Parameters
        ----------
        x : array_like
            Places along the member [m].
        side : {"right", "left"}
            Which piece speaks at a knot.

        Returns
        -------
        ndarray
            Values, shape of `x`.
        """
        x = np.asarray(x, dtype=float)
        if not self.knots.size:
            return np.full(x.shape, self.coefficients[0, 0])
        piece = np.searchsorted(self.knots, x, side="right" if side == "right" else "left")
        t = x - self.origins[piece]
        c = self.coefficients[piece]
        return np.asarray(c[..., 0] + t * (c[..., 1] + t * c[..., 2]))

    @property
    def is_constant(self) -> bool:
        """Whether the value is the same everywhere."""
        c = self.coefficients
        return bool(np.all(c[:, 1:] == 0.0) and np.all(c[:, 0] == c[0, 0]))

    @property
    def value(self) -> float:
        """The value at the left end of the first piece, for laws that are constant."""
        return float(self.coefficients[0, 0])

    def slope(self, x: ArrayLike, side: str = "right") -> Array:
        """Return the derivative with respect to x."""
        x = np.asarray(x, dtype=float)
        piece = np.searchsorted(self.knots, x, side="right" if side == "right" else "left")
        c = self.coefficients[piece]
        return np.asarray(c[..., 1] + 2.0 * (x - self.origins[piece]) * c[..., 2])

    def extremes(self, start: float, end: float) -> tuple[float, float]:
        """Smallest and largest value between two places, both one-sided values at knots counted."""
        inner = self.knots[(self.knots >= start) & (self.knots <= end)]
        places = [self(np.array([start]), "right"), self(np.array([end]), "left")]
        places += [self(inner[inner > start], "left"), self(inner[inner < end], "right")]
        with np.errstate(divide="ignore", invalid="ignore"):
            turning = self.origins - self.coefficients[:, 1] / (2.0 * self.coefficients[:, 2])
        lower = np.concatenate(([-np.inf], self.knots))
        upper = np.concatenate((self.knots, [np.inf]))
        turning = turning[(turning > np.maximum(lower, start)) & (turning < np.minimum(upper, end))]
        values = np.concatenate([*places, self(turning)])
        return float(values.min()), float(values.max())

    def times(self, factor: float) -> Law:
        """Return the same law with every value multiplied by a factor."""
        return Law(self.knots, self.origins, self.coefficients * factor)


def constant(value: float) -> Law:
    """Make a law that has one value everywhere."""
    return Law(np.empty(0), np.zeros(1), np.array([[value, 0.0, 0.0]]))


def straight(x: Sequence[float] | Array, values: Sequence[float] | Array) -> Law:
    """Make a law that is straight between stations and constant outside them.

    Parameters
    ----------
    x : sequence of float, shape (n,)
        Stations [m], not decreasing; the same place twice is a step.
    values : sequence of float, shape (n,)
        Value at each station.

    Raises
    ------
    ValueError
        When stations go back, or one place has more than two values.

    Examples
    --------
    >>> depth = straight([0.0, 2.0, 2.0], [0.9, 0.5, 0.4])
    >>> float(depth(1.0)), float(depth(2.0, "left")), float(depth(2.0)), float(depth(9.0))
    (0.7, 0.5, 0.4, 0.4)
    """
    return _pieces(x, values, None)


def steps(x: Sequence[float] | Array, values: Sequence[float] | Array) -> Law:
    """Make a law of steps: the first value up to the first place, the next up to the second, and so on.

    Parameters
    ----------
    x : sequence of float, shape (n,)
        Where each step ends [m], increasing.
    values : sequence of float, shape (n,)
        Value of each step; the last goes on to the right.

    Raises
    ------
    ValueError
        When places do not increase.
    """
    xs, vs = np.asarray(x, dtype=float), np.asarray(values, dtype=float)
    if np.any(np.diff(xs) <= 0.0):
        raise ValueError("places of steps must increase")
    coefficients = np.zeros((xs.size, 3))
    coefficients[:, 0] = vs
    return Law(xs[:-1], np.zeros(xs.size), coefficients)


def parabola(x: Sequence[float] | Array, values: Sequence[float] | Array, flat_at: Sequence[float] = ()) -> Law:
    """Make a law of parabolas between stations, each level at one of its two ends.

    Parameters
    ----------
    x : sequence of float, shape (n,)
        Stations [m]; the same place twice is a step.
    values : sequence of float, shape (n,)
        Value at each station.
    flat_at : sequence of float
        Stations where the slope is zero; pieces whose two values agree are level and need none.

    Raises
    ------
    ValueError
        When a piece has no flat end, or two.

    Examples
    --------
    >>> depth = parabola([0.0, 2.0], [0.9, 0.5], [2.0])
    >>> round(float(depth(1.0)), 12), float(depth(2.0))
    (0.6, 0.5)
    """
    return _pieces(x, values, tuple(flat_at))


def _pieces(x: Sequence[float] | Array, values: Sequence[float] | Array, flat_at: tuple[float, ...] | None) -> Law:
    xs, vs = np.asarray(x, dtype=float), np.asarray(values, dtype=float)
    gaps = np.diff(xs)
    if np.any(gaps < 0.0):
        raise ValueError("stations must not go back")
    if np.any((gaps[:-1] == 0.0) & (gaps[1:] == 0.0)):
        raise ValueError("one place has more than two values")
    inner = np.flatnonzero(gaps > 0.0)
    middle = np.zeros((inner.size, 3))
    rise, length = np.diff(vs)[inner], gaps[inner]
    origins = xs[inner].copy()
    middle[:, 0] = vs[inner]
    if flat_at is None:
        middle[:, 1] = rise / length
    else:
        right = _flat_right(xs[inner], xs[inner + 1], rise, flat_at)
        middle[:, 2] = np.where(right, -rise, rise) / length**2
        middle[right, 0] = vs[inner + 1][right]
        origins[right] = xs[inner + 1][right]
    ends = np.zeros((2, 3))
    ends[:, 0] = vs[[0, -1]]
    knots = np.concatenate((xs[inner], xs[-1:]))
    return Law(
        knots,
        np.concatenate((xs[:1], origins, xs[-1:])),
        np.concatenate((ends[:1], middle, ends[1:])),
    )


def _flat_right(left: Array, right: Array, rise: Array, flat_at: tuple[float, ...]) -> NDArray[np.bool_]:
    reach = 1e-9 * max(abs(float(right[-1])), abs(float(left[0])), 1e-300)
    flats = np.asarray(flat_at, dtype=float).reshape(-1, 1)
    at_left = np.any(np.abs(flats - left) <= reach, axis=0)
    at_right = np.any(np.abs(flats - right) <= reach, axis=0)
    sloping = rise != 0.0
    for k in np.flatnonzero(sloping & (at_left == at_right)):
        many = "both ends" if at_left[k] else "neither end"
        raise ValueError(f"the piece from {left[k]:g} m to {right[k]:g} m is flat at {many}, expected one")
    return at_right & sloping
