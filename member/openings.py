"""How deep an opening, a notch or a haunch is at x: pure functions of its description."""

from __future__ import annotations

import itertools

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Haunch, Member, Notch, Opening

Array = NDArray[np.float64]


def half_length(opening: Opening) -> float:
    """Half the length of an opening along the member [m]."""
    return 0.5 * (opening.diameter if opening.diameter is not None else opening.length)


def opening_depth(opening: Opening, x: Array) -> Array:
    """Depth of the hole at x [m], zero outside it.

    Parameters
    ----------
    opening : Opening
        Circle, or rectangle with rounded corners.
    x : ndarray
        Places [m].
    """
    half = half_length(opening)
    inside = np.maximum(half - np.abs(x - opening.at), 0.0)
    if opening.diameter is not None:
        return np.asarray(2.0 * np.sqrt(inside * (2.0 * half - inside)))
    r = opening.radius
    lost = r - np.sqrt(np.maximum(inside * (2.0 * r - inside), 0.0))
    depth = opening.depth - 2.0 * np.where(inside < r, lost, 0.0)
    return np.asarray(np.where(inside > 0.0, depth, 0.0))


def opening_breaks(opening: Opening) -> list[float]:
    """Return the places where the hole begins, ends or changes its outline [m]."""
    half, at = half_length(opening), opening.at
    if opening.diameter is not None:
        return [at - half, at, at + half]
    r = opening.radius
    places = [at - half, at - half + r, at, at + half - r, at + half] if r else [at - half, at, at + half]
    return places


def opening_round_ends(opening: Opening) -> list[float]:
    """Places where the depth of the hole changes like a square root [m]: edges of circles, round corners."""
    half, at = half_length(opening), opening.at
    return [at - half, at + half] if opening.diameter is not None or opening.radius else []


def haunch_extra(haunch: Haunch, x: Array, side: str) -> Array:
    """Depth that a haunch adds at x [m]."""
    distance = np.asarray(x, dtype=float) - haunch.at
    left = (distance <= 0.0) if side == "left" else (distance < 0.0)
    reach = np.where(left, haunch.reach[0], haunch.reach[1])
    fade = 1.0 - np.abs(distance) / np.where(reach > 0.0, reach, 1.0)
    fade = np.where(reach > 0.0, np.maximum(fade, 0.0), 0.0)
    return haunch.depth * (fade**2 if haunch.law == "parabola" else fade)


def grown(member: Member, part: str, face: str, x: Array, side: str) -> Array:
    """Depth that all haunches of one face of a part add at x [m]; where two meet the deeper governs."""
    extra = np.zeros(np.shape(x))
    for haunch in member.haunches:
        if haunch.of == part and haunch.side == face:
            extra = np.maximum(extra, haunch_extra(haunch, x, side))
    return extra


def haunch_crossings(member: Member) -> list[float]:
    """Places where one haunch takes over from another on the same face [m]."""
    places: list[float] = []
    for i, a in enumerate(member.haunches):
        for b in member.haunches[i + 1 :]:
            if a.of != b.of or a.side != b.side:
                continue
            low = max(a.at - a.reach[0], b.at - b.reach[0], 0.0)
            high = min(a.at + a.reach[1], b.at + b.reach[1], member.length)
            if high > low:
                places += _roots(a, b, low, high)
    return places


def _roots(a: Haunch, b: Haunch, low: float, high: float) -> list[float]:
    """Roots of the difference of two haunches, exact for pieces of degree two between their stations."""
    cuts = sorted({low, high, *(c for c in (a.at, b.at) if low < c < high)})
    roots: list[float] = []
    for start, end in itertools.pairwise(cuts):
        t = np.array([0.0, 0.5, 1.0])
        x = start + t * (end - start)
        x[0], x[2] = np.nextafter(x[0], end), np.nextafter(x[2], start)
        d = haunch_extra(a, x, "right") - haunch_extra(b, x, "right")
        c2, c1, c0 = 2.0 * (d[0] - 2.0 * d[1] + d[2]), -3.0 * d[0] + 4.0 * d[1] - d[2], d[0]
        for r in np.roots(np.trim_zeros(np.where(np.abs([c2, c1, c0]) < 1e-14 * a.depth, 0.0, [c2, c1, c0]), "f")):
            if abs(r.imag) < 1e-12 and 0.0 < r.real < 1.0:
                roots.append(start + float(r.real) * (end - start))
    return roots


def notch_span(notch: Notch, part_start: float, part_end: float, with_reach: bool) -> tuple[float, float]:
    """Stretch over which a notch cuts [m]; with its reach for stiffness, without for mass."""
    reach = notch.reach if with_reach else 0.0
    return max(notch.start - reach, part_start), min(notch.end + reach, part_end)


def notch_depth(notch: Notch, x: Array, side: str) -> Array:
    """Depth of a notch at x [m]; within its reach the depth at its end goes on."""
    clipped = np.clip(x, notch.start, notch.end)
    inner = "left" if side == "left" else "right"
    depth = notch.depth(clipped, inner)
    depth = np.where(x <= notch.start, notch.depth(np.array(notch.start), "right"), depth)
    return np.asarray(np.where(x >= notch.end, notch.depth(np.array(notch.end), "left"), depth))
