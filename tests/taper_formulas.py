"""Stiffness of tapering rectangles and end moments of fixed members, as formulas of 30 digits."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import mpmath as mp
from common import (
    Field,
    part,
    work,
)

from fishbelly.member.laws import straight

E, G = mp.mpf(210e9), mp.mpf(81e9)
B, L = mp.mpf(0.1), 6.0
Q = 1.0e4


def rectangle_EI(depth: Field, width: float = 0.1, modulus: float = 210e9) -> Field:
    return lambda x: mp.mpf(modulus) * mp.mpf(width) * depth(x) ** 3 / 12


def rectangle_GA(depth: Field, width: float = 0.1, modulus: float = 81e9) -> Field:
    return lambda x: mp.mpf(modulus) * mp.mpf(width) * depth(x) * 5 / 6


def tapered(h0: float, h1: float, length: float = L) -> tuple:
    return (part("b", "rectangle", length, width=0.1, depth=straight([0.0, length], [h0, h1])),)


def graded(start: float, end: float, ratio: float) -> list:
    """Places that crowd towards `end`, for integrands that grow there."""
    return [mp.mpf(end) - (mp.mpf(end) - start) * mp.mpf(ratio) ** k for k in range(24)] + [mp.mpf(end)]


def fixed_fixed(M: Field, EI: Field, places: tuple, length: float) -> tuple:
    """End moments of a member fixed at both ends, from the moment M on a simple span."""
    t = lambda x: x / mp.mpf(length)
    s = lambda x: 1 - x / mp.mpf(length)
    a, b, c = (work(f, g, EI, places) for f, g in ((s, s), (s, t), (t, t)))
    p, q = -work(M, s, EI, places), -work(M, t, EI, places)
    det = a * c - b * b
    return (c * p - b * q) / det, (a * q - b * p) / det
