"""Second method, inclined flanges and plates: its own angles, and its own band of each flange on the section.

A plate's angle is that of the edge it follows, a flange's that of its middle line, both from the description.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Haunch, Member, Part
from fishbelly.member.laws import Law
from fishbelly.sections.outlines import OUTLINES, Outline

Array = NDArray[np.float64]

FACES = {"I": (1, -1), "box": (1, -1), "channel": (1, -1), "tee": (1,)}
"""Flanges of an outline in its own frame: +1 on top, -1 at the bottom."""
HEIGHTS = {"circle": "diameter", "tube": "diameter", "bars": "diameter"}
"""The dimension that is an outline's height where it is not its depth."""
ROUND_OFF = 1e-12
"""A tangent below this is that of a level plate."""


@dataclass(frozen=True, eq=False)
class Band:
    """All of a part inside an outline, which counts with a share of E; `share` has shape (S,)."""

    part: int
    outline: Outline
    share: Array


def bands(member: Member, index: Sequence[int], outlines: Sequence[Outline], x: Array) -> list[Band]:
    """Bands of the flanges that run inclined at stations between two breaks.

    Parameters
    ----------
    member : Member
        The description.
    index : sequence of int
        Which of its parts stand there.
    outlines : sequence of Outline
        Where they stand.
    x : ndarray, shape (S,)
        Stations [m], all inside one stretch between breaks or several with the same parts.

    Returns
    -------
    list of Band
        `part` counts within `index`.
    """
    if member.inclined != "along" or (all(_still(p) for p in member.parts) and not member.haunches):
        return []
    found = []
    for k, i in enumerate(index):
        part = member.parts[i]
        for face in (1,) if _follows(member, part) else FACES.get(part.shape.kind, ()):
            lean = _lean(member, part, face, x) if part.material else np.zeros(x.size)
            lean = np.where(np.abs(lean) < ROUND_OFF, 0.0, lean)
            if np.any(lean):
                share = np.cos(np.arctan(lean)) ** 4
                found += [Band(k, o, share) for o in _band(member, part, face, outlines[k], lean, x)]
    return found


def _still(part: Part) -> bool:
    place = part.place
    laws = [*part.shape.dimensions.values(), place.gap, *place.shift, *(place.position or ())]
    return all(law.is_constant for law in laws)


def _quarters(part: Part) -> int | None:
    """How many quarters a part is turned; None where it stands askew."""
    quarter = 2.0 * part.turn / np.pi
    return round(quarter) % 4 if abs(quarter - round(quarter)) < 1e-9 else None


def _follows(member: Member, part: Part) -> bool:
    plate = part.shape.kind == "rectangle" and part.place.relation in ("under", "over")
    return plate and _quarters(part) is not None and all(h.of != part.name for h in member.haunches)


def _slope(law: Law, x: Array) -> Array:
    """Derivative at places none of which is a knot."""
    result = np.zeros(x.size)
    for piece, (origin, (_, c1, c2)) in enumerate(zip(law.origins, law.coefficients, strict=True)):
        low = law.knots[piece - 1] if piece else -np.inf
        high = law.knots[piece] if piece < law.knots.size else np.inf
        on = (x > low) & (x <= high)
        result[on] = c1 + 2.0 * c2 * (x[on] - origin)
    return result


def _value(law: Law, x: Array) -> Array:
    return np.asarray(law(x), dtype=float)


def _haunch(haunch: Haunch, x: Array) -> tuple[Array, Array]:
    """Extra depth and how fast it grows."""
    off = x - haunch.at
    reach = np.where(off < 0.0, haunch.reach[0], haunch.reach[1])
    on = np.abs(off) < reach
    t = np.where(on, 1.0 - np.abs(off) / np.where(on, reach, 1.0), 0.0)
    down = np.where(on, -np.sign(off) / np.where(on, reach, 1.0), 0.0)
    if haunch.law == "parabola":
        return haunch.depth * t * t, haunch.depth * 2.0 * t * down
    return haunch.depth * t, haunch.depth * down


def _growth(member: Member, part: Part, side: str, x: Array) -> Array:
    mine = [_haunch(h, x) for h in member.haunches if h.of == part.name and h.side == side]
    if not mine:
        return np.zeros(x.size)
    extra, rate = np.stack([m[0] for m in mine]), np.stack([m[1] for m in mine])
    deepest = np.argmax(extra, axis=0)[None]
    return np.asarray(np.take_along_axis(rate, deepest, axis=0)[0])


@dataclass(frozen=True, eq=False)
class _Box:
    """How fast the box of a part moves: middle and half sizes in y and z, and the middle of its own frame in it."""

    y: Array
    z: Array
    wide: Array
    high: Array
    off_y: Array
    off_z: Array


def _own_box(part: Part, x: Array) -> tuple[Array, ...]:
    """How fast the half sizes and the middle of the box of a part change in its own frame, turned.

    Taken from the outline itself, drawn with its dimensions as they would be a little further on and back; the
    height of one that stands upright is a dimension, and its law says it.
    """
    zero = np.zeros(x.size)
    laws = part.shape.dimensions
    rates = {k: _slope(v, x) for k, v in laws.items()}
    if part.shape.kind == "polygon" or not any(np.any(r) for r in rates.values()):
        return zero, zero, zero, zero
    here = {k: np.asarray(v(x), dtype=float) for k, v in laws.items()}
    step = np.full(x.size, np.inf)
    for k, r in rates.items():
        step = np.where((r != 0.0) & (here[k] > 0.0), np.minimum(step, here[k] / np.where(r == 0.0, 1.0, abs(r))), step)
    step = 0.01 * np.where(np.isfinite(step), step, 1.0)
    sizes = []
    for s in (step, -step):
        outline = OUTLINES[part.shape.kind]({k: v + s * rates[k] for k, v in here.items()})
        left, bottom, right, top = (outline.mirrored() if part.mirror else outline).turned(part.turn).bounds()
        sizes.append((right - left, top - bottom, right + left, top + bottom))
    wide, high, y, z = (0.25 * (a - b) / step for a, b in zip(*sizes, strict=True))
    height = HEIGHTS.get(part.shape.kind, "depth")
    if _quarters(part) in (0, 2) and height in rates:
        high = 0.5 * rates[height]
    return wide, high, y, z


def _moves(member: Member, part: Part, x: Array) -> _Box:
    """How fast the box of a part moves where it stands, haunches left out."""
    wide, high, off_y, off_z = _own_box(part, x)
    place, zero = part.place, np.zeros(x.size)
    y = z = zero
    if place.relation == "position" and place.position is not None:
        words = place.anchor.split()
        y, z = (_slope(law, x) for law in place.position)
        y = y + wide * (("left" in words) * 1.0 - ("right" in words))
        z = z + high * (("bottom" in words) * 1.0 - ("top" in words))
    elif place.relation == "datum":
        z = high * {"top": -1.0, "bottom": 1.0}.get(place.anchor or "top", 0.0)
    else:
        host = _moves(member, member.part(place.host), x)
        if member.part(place.host).pair:
            host = _paired(member, member.part(place.host), host, x)
        gap = _slope(place.gap, x)
        up = {"over": 1.0, "under": -1.0}.get(place.relation)
        out = {"right_of": 1.0, "left_of": -1.0}.get(place.relation)
        flush_y = {"right": 1.0, "left": -1.0}.get(place.flush, 0.0) if up else 0.0
        flush_z = {"top": 1.0, "bottom": -1.0}.get(place.flush, 0.0)
        z = host.z + (up * (host.high + gap + high) if up else flush_z * (host.high - high))
        y = host.y + (out * (host.wide + gap + wide) if out else flush_y * (host.wide - wide))
    y, z = y + _slope(place.shift[0], x), z + _slope(place.shift[1], x)
    return _Box(y, z, wide, high, off_y, off_z)


def _paired(member: Member, part: Part, box: _Box, x: Array) -> _Box:
    """Box of both copies of a pair."""
    hosted = part.place.relation not in ("datum", "position")
    about = _moves(member, member.part(part.place.host), x).y if hosted else np.zeros(x.size)
    right = np.maximum(box.y + box.wide, 2.0 * about - box.y + box.wide)
    return _Box(about, box.z, right - about, box.high, box.off_y, box.off_z)


def _carried(member: Member, part: Part, x: Array) -> Array:
    """How fast haunches of others carry a part upwards."""
    if part.place.relation in ("datum", "position"):
        return np.zeros(x.size)
    host = member.part(part.place.host)
    edge = {"under": "bottom", "over": "top"}.get(part.place.relation, part.place.flush)
    rate = _carried(member, host, x)
    if edge == "bottom":
        return rate - _growth(member, host, "bottom", x)
    return rate + _growth(member, host, "top", x) if edge == "top" else rate


def _edge_followed(member: Member, part: Part, x: Array) -> Array:
    """Slope of the edge of its host that a plate lies on; level where its own thickness changes."""
    host = member.part(part.place.host)
    box, carried = _moves(member, host, x), _carried(member, part, x)
    edge = box.z - box.high if part.place.relation == "under" else box.z + box.high
    thickness = part.shape.dimensions["width" if (_quarters(part) or 0) % 2 else "depth"]
    solid = np.zeros(x.size, dtype=bool)
    for k in np.flatnonzero(np.abs(thickness.coefficients[:, 1:]).sum(axis=1)):
        low = thickness.knots[k - 1] if k else -np.inf
        high = thickness.knots[k] if k < thickness.knots.size else np.inf
        solid |= (x > low) & (x < high)
    return np.where(solid, 0.0, edge + carried)


def _lean(member: Member, part: Part, face: int, x: Array) -> Array:
    """Tangent of the angle of a plate, or of a flange: how fast it moves outwards with x."""
    box, carried = _moves(member, part, x), _carried(member, part, x)
    if part.shape.kind == "rectangle":
        return _edge_followed(member, part, x)
    below, above = (_growth(member, part, side, x) for side in ("bottom", "top"))
    wider = 0.5 * (below + above)
    out = {
        "top": box.z + box.high + carried + above,
        "bottom": -(box.z - box.high + carried - below),
        "left": -(box.y - box.wide) + wider,
        "right": box.y + box.wide + wider,
    }
    quarter = _quarters(part)
    if quarter is None:
        n_y, n_z = -np.sin(part.turn), np.cos(part.turn)
        moved = n_y * (box.y - box.off_y) + n_z * (box.z - box.off_z + carried)
        outwards = 0.5 * _slope(part.shape.dimensions["depth"], x) + face * moved
    else:
        outwards = out[("top", "left", "bottom", "right")[(quarter + (0 if face > 0 else 2)) % 4]]
    return outwards - 0.5 * _slope(_thickness(part, face), x)


def _thickness(part: Part, face: int) -> Law:
    own = "top_flange" if face > 0 else "bottom_flange"
    return part.shape.dimensions[own if part.shape.kind == "I" else "flange"]


def _band(member: Member, part: Part, face: int, outline: Outline, lean: Array, x: Array) -> list[Outline]:
    """Outlines that hold the flange and no more of the part, one for each copy of a pair."""
    copies = [(outline, part.turn, part.mirror)]
    if part.pair:
        half, loops = outline.bulge.size // 2, outline.loops[: len(outline.loops) // 2]
        first = Outline(outline.y[:, :half], outline.z[:, :half], outline.bulge[:half], loops)
        second = Outline(outline.y[:, half:], outline.z[:, half:], outline.bulge[half:], loops)
        copies = [(first, part.turn, part.mirror), (second, -part.turn, not part.mirror)]
    found = []
    for one, turn, mirror in copies:
        upright = one.turned(-turn)
        corners = _corners(part, face, upright.bounds(), mirror, np.sqrt(1.0 + lean * lean), x)
        y, z = (np.stack(np.broadcast_arrays(*[c[k] for c in corners]), axis=-1) for k in (0, 1))
        band = Outline(y, z, np.zeros(len(corners)), ((0, len(corners)),))
        found.append(band.turned(turn))
    return found


def _corners(
    part: Part, face: int, bounds: tuple[Array, Array, Array, Array], mirror: bool, steeper: Array, x: Array
) -> list[tuple[Array, Array]]:
    """Corners of the band of a flange in the frame of an outline with these bounds, anticlockwise."""
    left, bottom, right, top = bounds
    if part.shape.kind == "rectangle":
        return [(left, bottom), (right, bottom), (right, top), (left, top)]
    zero = np.zeros(x.size)
    d = {k: np.asarray(law(x), dtype=float) for k, law in part.shape.dimensions.items()}
    t = _thickness(part, face)(x) * steeper
    slope, at = d.get("slope", zero), d.get("flange_at", zero)
    middle, width = 0.5 * (left + right), right - left
    if part.shape.kind == "tee":
        y = (0.5 * d["web"] + slope * (d.get("web_at", zero) - t) - slope**2 * at) / (1.0 - slope**2)
        inner = [(-0.5 * width, slope * (0.5 * width - at)), (-y, slope * (y - at))]
        inner += [(y, slope * (y - at)), (0.5 * width, slope * (0.5 * width - at))]
        inner = [(middle + a, c - t) for a, c in inner]
    elif part.shape.kind == "channel":
        inner = [(zero, -slope * (at - d["web"])), (d["web"], -slope * (at - d["web"])), (width, slope * (width - at))]
        inner = [(right - a if mirror else left + a, c - t) for a, c in inner]
    else:
        half = 0.5 * width - (d["radius"] if part.shape.kind == "box" else zero)
        inner = [(middle - half, -t), (middle + half, -t)]
    # `inner` has levels counted from the outer face of the flange, inwards below zero
    ends = [(inner[-1][0], zero), (inner[0][0], zero)]
    loop = [(y, top + z if face > 0 else bottom - z) for y, z in (*inner, *ends)]
    clockwise = (face < 0) != (part.shape.kind == "channel" and mirror)
    return loop[::-1] if clockwise else loop
