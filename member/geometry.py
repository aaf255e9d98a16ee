"""The outlines that stand at given places along the member: laws evaluated, parts placed, cuts made.

All stations of one call must lie where the same parts, notches and openings are present (between two
breaks); `present` says which.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member, Opening, Part
from fishbelly.member.openings import grown, half_length, notch_depth, notch_span, opening_depth
from fishbelly.sections.outlines import OUTLINES, Outline, polygon, rectangle
from fishbelly.sections.placing import Bounds, against, anchored

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Cut:
    """An outline that takes material away from some parts.

    `targets` are indices into the parts of the same `PlacedParts`; `mass` tells whether mass is taken too;
    `opening` is the opening it belongs to, if any.
    """

    outline: Outline
    targets: tuple[int, ...]
    mass: bool = True
    opening: Opening | None = None


@dataclass(frozen=True, eq=False)
class PlacedParts:
    """Outlines of the parts that are there, at S stations.

    Parameters
    ----------
    x : ndarray, shape (S,)
        Stations [m].
    index : tuple of int
        Which parts of the member these are (P of them), in the member's order.
    outlines : tuple of Outline
        Their outlines, cuts not yet taken off.
    cuts : tuple of Cut
        What is taken away.
    run_in : ndarray, shape (P, S)
        Share of E and G that works, 0 to 1.
    """

    x: Array
    index: tuple[int, ...]
    outlines: tuple[Outline, ...]
    cuts: tuple[Cut, ...]
    run_in: Array


@dataclass(frozen=True, eq=False)
class _Stand:
    """Bounding box of a part without haunches, and how far haunches move its bottom, middle and top [m]."""

    box: Bounds
    bottom: Array
    middle: Array
    top: Array


@dataclass(frozen=True, eq=False)
class Geometry:
    """Places the parts of a member at any x.

    Parameters
    ----------
    member : Member
        The description.
    works : frozenset of int, optional
        Parts that work, cuts counted, where others have not come yet or have gone; these still carry what leans
        on them. Default all.
    """

    member: Member
    works: frozenset[int] | None = None

    @cached_property
    def tolerance(self) -> float:
        """Distance below which two places along the member are one [m]."""
        return 1e-11 * self.member.length

    def is_there(self, start: float, end: float, x: float, side: str) -> bool:
        """Whether a stretch covers x, seen from one side."""
        tiny = 2.0 * self.tolerance
        return start <= x + tiny < end if side == "right" else start < x - tiny <= end

    def present(self, x: float, side: str = "right") -> tuple[tuple[int, ...], ...]:
        """Indices of the parts, notches and openings that are there at x; ~i for a notch within its reach alone.

        The fourth entry has the parts that stand there whether or not they work: others may lean on them.
        """
        m = self.member
        standing = tuple(i for i, p in enumerate(m.parts) if self.is_there(p.start, p.end, x, side))
        parts = standing if self.works is None else tuple(i for i in standing if i in self.works)
        names = {m.parts[i].name for i in parts}
        notches = []
        for i, n in enumerate(m.notches):
            if n.of in names:
                p = m.part(n.of)
                if self.is_there(*notch_span(n, p.start, p.end, False), x, side):
                    notches.append(i)
                elif self.is_there(*notch_span(n, p.start, p.end, True), x, side):
                    notches.append(~i)
        openings = tuple(
            i
            for i, o in enumerate(m.openings)
            if names.intersection(o.of) and self.is_there(o.at - half_length(o), o.at + half_length(o), x, side)
        )
        return parts, tuple(notches), openings, standing

    @cached_property
    def opening_levels(self) -> tuple[float, ...]:
        """Level of the middle of each opening [m]."""
        return tuple(self._opening_level(k) for k in range(len(self.member.openings)))

    def _opening_level(self, k: int) -> float:
        opening = self.member.openings[k]
        if opening.level is not None:
            return opening.level
        side = "left" if opening.at >= self.member.length else "right"
        _, _, _, parts = self.present(opening.at, side)
        there = {self.member.parts[i].name: i for i in parts if not self.member.parts[i].cuts}
        for name in opening.of:
            if name in there:
                outline = self._stand(parts, np.array([opening.at]), side)[1][there[name]]
                return float(Bounds.of(outline).middle_z[0])
        raise ValueError(f"the opening at {opening.at:g} m cuts no part that is there")

    def place(self, x: Array, side: str = "right", there: tuple[tuple[int, ...], ...] | None = None) -> PlacedParts:
        """Outlines at stations between two breaks.

        Parameters
        ----------
        x : ndarray, shape (S,)
            Stations [m] at which the same parts are present.
        side : {"right", "left"}
            Which side speaks at a break.
        there : tuple, optional
            What `present` said for them; found from the first station if left out.

        Returns
        -------
        PlacedParts
        """
        x = np.atleast_1d(np.asarray(x, dtype=float))
        parts, notches, openings, standing = there or self.present(float(x[0]), side)
        _, outlines = self._stand(standing, x, side)
        adding = tuple(i for i in parts if not self.member.parts[i].cuts)
        names = [self.member.parts[i].name for i in adding]
        cuts = [
            Cut(outlines[i], tuple(k for k, n in enumerate(names) if n in self.member.parts[i].cuts))
            for i in parts
            if self.member.parts[i].cuts
        ]
        cuts += [c for k in notches for c in self._notch(k, names, outlines, adding, x, side)]
        cuts += [c for k in openings for c in self._opening(k, names, outlines, adding, x)]
        run_in = np.array([self._run_in(self.member.parts[i], x) for i in adding]).reshape(len(adding), x.size)
        return PlacedParts(x, adding, tuple(outlines[i] for i in adding), tuple(c for c in cuts if c.targets), run_in)

    def _run_in(self, part: Part, x: Array) -> Array:
        left, right = part.run_in
        factor = np.ones(x.size)
        if left:
            factor = np.minimum(factor, (x - part.start) / left)
        if right:
            factor = np.minimum(factor, (part.end - x) / right)
        return np.clip(factor, 0.0, 1.0)

    def _stand(self, parts: tuple[int, ...], x: Array, side: str) -> tuple[dict[str, _Stand], dict[int, Outline]]:
        stands: dict[str, _Stand] = {}
        outlines: dict[int, Outline] = {}
        for i in parts:
            part = self.member.parts[i]
            below = grown(self.member, part.name, "bottom", x, side)
            above = grown(self.member, part.name, "top", x, side)
            drawn = _drawn(part, x, side, 0.0)
            dy, dz, shift = _offset(part, Bounds.of(drawn), stands, x, side)
            placed = drawn.moved(dy, dz)
            box = Bounds.of(placed)
            if np.any(below) or np.any(above):
                grown_outline = _drawn(part, x, side, below + above)
                placed = grown_outline.moved(dy, box.top + above - Bounds.of(grown_outline).top)
            host = stands.get(part.place.host)
            if part.pair:
                about = host.box.middle_y if host is not None else np.zeros(x.size)
                placed = placed.joined(placed.mirrored(about))
                right = np.maximum(box.right, 2.0 * about - box.left)
                box = Bounds(2.0 * about - right, box.bottom, right, box.top)
            stands[part.name] = _Stand(box, shift - below, shift, shift + above)
            outlines[i] = placed.moved(0.0, shift)
        return stands, outlines

    def _notch(
        self,
        k: int,
        names: list[str],
        outlines: dict[int, Outline],
        adding: tuple[int, ...],
        x: Array,
        side: str,
    ) -> list[Cut]:
        notch = self.member.notches[k if k >= 0 else ~k]
        if notch.of not in names:
            return []
        target = names.index(notch.of)
        outline, depth = outlines[adding[target]], notch_depth(notch, x, side)
        if self.member.part(notch.of).pair and notch.side in ("left", "right"):
            return self._notched_pair(outline, depth, notch.side, target, k >= 0)
        box = Bounds.of(outline)
        edges = [box.left - 1.0, box.bottom - 1.0, box.right + 1.0, box.top + 1.0]
        if notch.side == "bottom":
            edges[3] = box.bottom + depth
        elif notch.side == "top":
            edges[1] = box.top - depth
        elif notch.side == "left":
            edges[2] = box.left + depth
        else:
            edges[0] = box.right - depth
        return [Cut(_box_outline(*edges), (target,), k >= 0)]

    def _notched_pair(self, outline: Outline, depth: Array, face: str, target: int, mass: bool) -> list[Cut]:
        """A notch from the side in a pair: cut from the first copy, and mirrored from the second."""
        edges, loops = outline.bulge.size // 2, outline.loops[: len(outline.loops) // 2]
        first = Bounds.of(Outline(outline.y[:, :edges], outline.z[:, :edges], outline.bulge[:edges], loops))
        left, right = (
            (first.left - 1e-3, first.left + depth) if face == "left" else (first.right - depth, first.right + 1e-3)
        )
        cut = _box_outline(left, first.bottom - 1.0, right, first.top + 1.0)
        return [Cut(cut, (target,), mass), Cut(cut.mirrored(Bounds.of(outline).middle_y), (target,), mass)]

    def _opening(
        self, k: int, names: list[str], outlines: dict[int, Outline], adding: tuple[int, ...], x: Array
    ) -> list[Cut]:
        opening = self.member.openings[k]
        targets = tuple(t for t, n in enumerate(names) if n in opening.of)
        if not targets:
            return []
        boxes = [Bounds.of(outlines[adding[t]]) for t in targets]
        left = np.min([b.left for b in boxes], axis=0) - 1.0
        right = np.max([b.right for b in boxes], axis=0) + 1.0
        half = 0.5 * opening_depth(opening, x)
        level = self.opening_levels[k]
        return [Cut(_box_outline(left, level - half, right, level + half), targets, opening=opening)]


def _box_outline(left: Array, bottom: Array, right: Array, top: Array) -> Outline:
    outline = rectangle({"width": right - left, "depth": top - bottom})
    return outline.moved(0.5 * (left + right), 0.5 * (bottom + top))


def _drawn(part: Part, x: Array, side: str, extra: Array | float) -> Outline:
    """Outline of a part in its own frame, `extra` deeper, mirrored and turned."""
    shape = part.shape
    if shape.kind == "polygon":
        outline = polygon(shape.points, shape.holes, x.size)
    else:
        values = {name: law(x, side) for name, law in shape.dimensions.items()}
        if np.any(extra):
            values["depth"] = values["depth"] + extra
        outline = OUTLINES[shape.kind](values)
    if part.mirror:
        outline = outline.mirrored()
    return outline.turned(part.turn)


def _offset(part: Part, box: Bounds, stands: dict[str, _Stand], x: Array, side: str) -> tuple[Array, Array, Array]:
    """Shift of a part as placed without haunches, and how far haunches of others carry it [m]."""
    place = part.place
    zero = np.zeros(x.size)
    dy0, dz0 = place.shift[0](x, side), place.shift[1](x, side)
    if place.relation == "datum":
        dy, dz = anchored(box, place.anchor or "top", 0.0, 0.0)
        return dy + dy0, dz + dz0, zero
    if place.relation == "position":
        assert place.position is not None
        dy, dz = anchored(box, place.anchor or "middle", place.position[0](x, side), place.position[1](x, side))
        return dy + dy0, dz + dz0, zero
    host = stands[place.host]
    dy, dz = against(box, host.box, place.relation, place.flush, place.gap(x, side))
    edge = {"under": "bottom", "over": "top"}.get(place.relation, place.flush)
    return dy + dy0, dz + dz0, {"bottom": host.bottom, "top": host.top}.get(edge, host.middle)
