"""Which flanges and plates run inclined to the member's axis, by how much, and where they stand.

Angles come from the derivatives of the laws: of a flange by its middle line, of a plate by the edge it follows.
The two faces of a plate are taken as parallel at every x.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.breakpoints import part_laws
from fishbelly.member.description import Haunch, Member, Part
from fishbelly.member.laws import Law
from fishbelly.member.openings import haunch_extra
from fishbelly.member.standing import Stand, offset
from fishbelly.sections.flanges import flange_outlines
from fishbelly.sections.outlines import OUTLINES, Outline
from fishbelly.sections.placing import Bounds

Array = NDArray[np.float64]
Rises = Mapping[str, Array]
"""Tangent of the angle of each inclined flange of a part to the axis, by face, shape (S,)."""

FLANGES: Mapping[str, Mapping[str, str]] = {
    "I": {"top": "top_flange", "bottom": "bottom_flange"},
    "tee": {"top": "flange"},
    "channel": {"top": "flange", "bottom": "flange"},
    "box": {"top": "flange", "bottom": "flange"},
}
"""Outlines whose flanges count along their slope: faces, and the dimension that is their thickness."""

LEVEL = 1e-12
"""A tangent below this is round-off: the flange is level."""
_STEP = 1.0 / 64.0
"""Share of a dimension by which outlines are varied to find how fast their boxes change; these are linear in it."""


def is_plate(member: Member, part: Part) -> bool:
    """Whether a part is a plate that follows the outline of another: a rectangle under or over it.

    Only where its thickness is constant does it count along its slope: else it is a solid shape, in one piece or two.
    """
    square = abs(part.turn / (0.5 * np.pi) - round(part.turn / (0.5 * np.pi))) < 1e-9
    follows = part.shape.kind == "rectangle" and part.place.relation in ("under", "over")
    return follows and square and not any(h.of == part.name for h in member.haunches)


def may_incline(member: Member) -> bool:
    """Whether anything of a member may have to count along its slope."""
    if member.inclined != "along":
        return False
    if not any(p.material and (p.shape.kind in FLANGES or is_plate(member, p)) for p in member.parts):
        return False
    return bool(member.haunches) or any(not law.is_constant for p in member.parts for law in part_laws(p))


def thickness_name(part: Part, face: str) -> str:
    """Name of the dimension that is the thickness of a flange, or of a plate on the face it stands on."""
    if part.shape.kind != "rectangle":
        return FLANGES[part.shape.kind][face]
    return "width" if round(part.turn / (0.5 * np.pi)) % 2 else "depth"


def steepened(part: Part, values: Mapping[str, Array], rises: Rises) -> dict[str, Array]:
    """Dimensions of a part whose flanges stand t / cos(angle) deep on the section [m]."""
    result = dict(values)
    for face, rise in rises.items():
        name = thickness_name(part, face)
        own = name if part.shape.kind in ("rectangle", "tee") else f"{face}_flange"
        result[own] = values[name] * np.sqrt(1.0 + rise * rise)
    return result


@dataclass(frozen=True, eq=False)
class _Slopes:
    """Derivatives along x at stations seen from one side; a knot within `tiny` of a station speaks for that side."""

    x: Array
    side: str
    tiny: float

    @property
    def seen(self) -> Array:
        return self.x + (self.tiny if self.side == "right" else -self.tiny)

    def of(self, law: Law) -> Array:
        piece = np.searchsorted(law.knots, self.seen)
        c = law.coefficients[piece]
        return np.asarray(c[..., 1] + 2.0 * (self.x - law.origins[piece]) * c[..., 2])

    def of_plate(self, part: Part, host: Stand, carried: Array) -> Array:
        """Slope of the edge a plate follows; level where its own thickness changes: there it is a solid shape."""
        thickness = part.shape.dimensions[thickness_name(part, "top")]
        tapers = np.any(thickness.coefficients[:, 1:] != 0.0, axis=1)[np.searchsorted(thickness.knots, self.seen)]
        edge = host.box.bottom if part.place.relation == "under" else host.box.top
        return np.where(tapers, 0.0, edge + carried)

    def of_haunch(self, haunch: Haunch) -> Array:
        distance = self.seen - haunch.at
        left = distance < 0.0
        reach = np.where(left, haunch.reach[0], haunch.reach[1])
        inside = np.abs(distance) < reach
        safe = np.where(inside, reach, 1.0)
        fade = 1.0 - np.abs(self.x - haunch.at) / safe
        slope = np.where(left, 1.0, -1.0) / safe
        return np.asarray(np.where(inside, haunch.depth * slope * (2.0 * fade if haunch.law == "parabola" else 1.0), 0))

    def growth(self, member: Member, part: str, face: str) -> Array:
        """Return how fast the haunches of one face grow, the deepest one speaking [m/m]."""
        deepest, slope = np.zeros(self.x.size), np.zeros(self.x.size)
        for haunch in member.haunches:
            if haunch.of == part and haunch.side == face:
                extra, own = haunch_extra(haunch, self.x, self.side), self.of_haunch(haunch)
                # where two are equally deep the one that grows towards the side looked at speaks
                ahead = own > slope if self.side == "right" else own < slope
                close = np.abs(extra - deepest) <= 1e-12 * haunch.depth
                takes = np.where(close, ahead, extra > deepest)
                deepest, slope = np.where(takes, extra, deepest), np.where(takes, own, slope)
        return slope


def rises(member: Member, parts: tuple[int, ...], x: Array, side: str) -> dict[int, Rises]:
    """How steeply flanges and plates run at stations between two breaks.

    Parameters
    ----------
    member : Member
        The description.
    parts : tuple of int
        Parts that stand there, in order.
    x : ndarray, shape (S,)
        Stations [m].
    side : {"right", "left"}
        Which side speaks at a break.

    Returns
    -------
    dict of int to mapping
        For each part with an inclined flange or plate the tangent of its angle by face, shape (S,), positive where
        the flange moves along its normal (upwards, before the part is turned) with x; a plate has "top" alone.
    """
    slopes = _Slopes(x, side, 2e-11 * member.length)
    stands: dict[str, Stand] = {}
    found: dict[int, Rises] = {}
    for i in parts:
        part = member.parts[i]
        below, above = (slopes.growth(member, part.name, face) for face in ("bottom", "top"))
        own = _box_rates(part, slopes, 0.0)
        dy, dz, carried = offset(part, own, stands, slopes.of)
        box = own.moved(dy, dz)
        up = dz
        if np.any(below) or np.any(above):
            up = box.top + above - _box_rates(part, slopes, below + above).top
        if is_plate(member, part):
            mine = {"top": slopes.of_plate(part, stands[part.place.host], carried)}
        else:
            mine = _own(part, slopes, (dy, up + carried), below + above)
        mine = {face: np.where(np.abs(rise) < LEVEL, 0.0, rise) for face, rise in mine.items()}
        mine = {face: rise for face, rise in mine.items() if np.any(rise)}
        if mine and part.material:
            found[i] = mine
        if part.pair:
            about = stands[part.place.host].box.middle_y if part.place.host in stands else np.zeros(x.size)
            right = np.maximum(box.right, 2.0 * about - box.left)
            box = Bounds(2.0 * about - right, box.bottom, right, box.top)
        stands[part.name] = Stand(box, carried - below, carried, carried + above)
    return found


def _own(part: Part, slopes: _Slopes, moved: tuple[Array, Array], extra: Array) -> dict[str, Array]:
    """Tangents of a part's flanges: `moved` is how fast it is shifted, `extra` how fast its own depth grows."""
    if part.shape.kind not in FLANGES:
        return {}
    n_y, n_z = normal(part)
    shift = n_y * moved[0] + n_z * moved[1]
    half = 0.5 * (slopes.of(part.shape.dimensions["depth"]) + extra)
    result = {}
    for face in FLANGES[part.shape.kind]:
        out = 1.0 if face == "top" else -1.0
        thicker = slopes.of(part.shape.dimensions[thickness_name(part, face)])
        result[face] = out * (half - 0.5 * thicker) + shift
    return result


def normal(part: Part) -> tuple[float, float]:
    """Direction (y, z) in which the top of a part looks once it is turned; a plate's is upwards."""
    quarter = part.turn / (0.5 * np.pi)
    if part.shape.kind == "rectangle":
        return 0.0, 1.0
    if abs(quarter - round(quarter)) < 1e-9:
        return ((0.0, 1.0), (-1.0, 0.0), (0.0, -1.0), (1.0, 0.0))[round(quarter) % 4]
    return -float(np.sin(part.turn)), float(np.cos(part.turn))


def _box_rates(part: Part, slopes: _Slopes, extra: Array | float) -> Bounds:
    """How fast the edges of the box of a part move in its own frame, its depth growing by `extra` besides."""
    laws = part.shape.dimensions
    rates = {name: slopes.of(law) for name, law in laws.items()}
    if np.any(extra):
        rates["depth"] = rates["depth"] + extra
    if part.shape.kind == "polygon" or not any(np.any(r) for r in rates.values()):
        return Bounds(*(np.zeros(slopes.x.size),) * 4)
    values = {name: law(slopes.x, slopes.side) for name, law in laws.items()}
    step = np.full(slopes.x.size, np.inf)
    for name, rate in rates.items():
        moving = (rate != 0.0) & (values[name] != 0.0)
        step = np.minimum(step, np.where(moving, np.abs(values[name] / np.where(moving, rate, 1.0)), np.inf))
    step = _STEP * np.where(np.isfinite(step), step, 1.0)
    ahead, behind = (
        Bounds.of(_oriented(part, OUTLINES[part.shape.kind]({n: v + s * rates[n] for n, v in values.items()})))
        for s in (step, -step)
    )
    edges = ("left", "bottom", "right", "top")
    return Bounds(*((getattr(ahead, e) - getattr(behind, e)) / (2.0 * step) for e in edges))


def _oriented(part: Part, outline: Outline) -> Outline:
    return (outline.mirrored() if part.mirror else outline).turned(part.turn)


def drawn_flanges(part: Part, values: Mapping[str, Array], inclined: Rises) -> dict[str, Outline]:
    """Outlines of the inclined flanges of a part in its own frame, mirrored and turned as the part is.

    Parameters
    ----------
    part : Part
        The part.
    values : mapping of str to ndarray
        Its dimensions as they stand on the section [m].
    inclined : mapping
        Its inclined flanges.
    """
    return {
        face: _oriented(part, outline)
        for face, outline in flange_outlines(part.shape.kind, values).items()
        if face in inclined
    }
