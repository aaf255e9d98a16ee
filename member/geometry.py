"""The outlines that stand at given places along the member: laws evaluated, parts placed, cuts made.

All stations of one call must lie where the same parts, notches and openings are present (between two
breaks); `present` says which.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member, Opening, Part
from fishbelly.member.inclined import Rises, drawn_flanges, may_incline, normal, rises, steepened
from fishbelly.member.openings import grown, half_length, notch_depth, notch_span, opening_depth
from fishbelly.member.standing import Stand, offset
from fishbelly.sections.flanges import Flange
from fishbelly.sections.outlines import OUTLINES, Outline, polygon, rectangle
from fishbelly.sections.placing import Bounds

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
    flanges : tuple of Flange
        Flanges and plates that count along their slope; their `part` is an index into `outlines`.
    """

    x: Array
    index: tuple[int, ...]
    outlines: tuple[Outline, ...]
    cuts: tuple[Cut, ...]
    run_in: Array
    flanges: tuple[Flange, ...] = ()


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
        """Indices of the parts, notches and openings that are there at x; ~i for a notch that cuts no mass there.

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
                    notches.append(~i if n.rule else i)
                elif self.is_there(*notch_span(n, p.start, p.end, True), x, side):
                    notches.append(~i)
        openings = tuple(
            i
            for i, o in enumerate(m.openings)
            if names.intersection(o.of) and self.is_there(o.at - half_length(o), o.at + half_length(o), x, side)
        )
        return parts, tuple(notches), openings, standing

    @cached_property
    def may_incline(self) -> bool:
        """Whether flanges or plates may have to count along their slope."""
        return may_incline(self.member)

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
        _, outlines, flanges = self._stand(standing, x, side)
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
        shown = tuple(c for c in cuts if c.targets)
        inclined = tuple(replace(f, part=k) for k, i in enumerate(adding) for f in flanges.get(i, ()))
        return PlacedParts(x, adding, tuple(outlines[i] for i in adding), shown, run_in, inclined)

    def _run_in(self, part: Part, x: Array) -> Array:
        left, right = part.run_in
        factor = np.ones(x.size)
        if left:
            factor = np.minimum(factor, (x - part.start) / left)
        if right:
            factor = np.minimum(factor, (part.end - x) / right)
        return np.clip(factor, 0.0, 1.0)

    def _stand(
        self, parts: tuple[int, ...], x: Array, side: str
    ) -> tuple[dict[str, Stand], dict[int, Outline], dict[int, list[Flange]]]:
        stands: dict[str, Stand] = {}
        outlines: dict[int, Outline] = {}
        flanges: dict[int, list[Flange]] = {}
        inclined = rises(self.member, parts, x, side) if self.may_incline else {}
        for i in parts:
            part = self.member.parts[i]
            below = grown(self.member, part.name, "bottom", x, side)
            above = grown(self.member, part.name, "top", x, side)
            steep = inclined.get(i, {})
            drawn = _drawn(part, x, side, 0.0, steep)
            dy, dz, shift = offset(part, Bounds.of(drawn), stands, lambda law: law(x, side))
            placed = drawn.moved(dy, dz)
            box = Bounds.of(placed)
            if np.any(below) or np.any(above):
                grown_outline = _drawn(part, x, side, below + above, steep)
                dz = box.top + above - Bounds.of(grown_outline).top
                placed = grown_outline.moved(dy, dz)
            host = stands.get(part.place.host)
            about = host.box.middle_y if part.pair and host is not None else np.zeros(x.size)
            if part.pair:
                placed = placed.joined(placed.mirrored(about))
                right = np.maximum(box.right, 2.0 * about - box.left)
                box = Bounds(2.0 * about - right, box.bottom, right, box.top)
            stands[part.name] = Stand(box, shift - below, shift, shift + above)
            outlines[i] = placed.moved(0.0, shift)
            if steep:
                flanges[i] = _flanges(part, _values(part, x, side, below + above, steep), steep, (dy, dz, shift), about)
        return stands, outlines, flanges

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


def _values(part: Part, x: Array, side: str, extra: Array | float, steep: Rises) -> dict[str, Array]:
    """Dimensions of a part, `extra` deeper, its inclined flanges as deep as they stand on the section."""
    values = {name: law(x, side) for name, law in part.shape.dimensions.items()}
    if np.any(extra):
        values["depth"] = values["depth"] + extra
    return steepened(part, values, steep) if steep else values


def _drawn(part: Part, x: Array, side: str, extra: Array | float, steep: Rises) -> Outline:
    """Outline of a part in its own frame, `extra` deeper, mirrored and turned."""
    shape = part.shape
    if shape.kind == "polygon":
        outline = polygon(shape.points, shape.holes, x.size)
    else:
        outline = OUTLINES[shape.kind](_values(part, x, side, extra, steep))
    if part.mirror:
        outline = outline.mirrored()
    return outline.turned(part.turn)


def _flanges(
    part: Part, values: dict[str, Array], steep: Rises, moved: tuple[Array, Array, Array], about: Array
) -> list[Flange]:
    """Inclined flanges of a part where they stand; `moved` is how far it is shifted right, up and carried."""
    found = []
    for face, outline in drawn_flanges(part, values, steep).items():
        stands = outline.moved(moved[0], moved[1])
        if part.pair:
            stands = stands.joined(stands.mirrored(about))
        n_y, n_z = normal(part)
        found.append(Flange(0, face, stands.moved(0.0, moved[2]), steep[face], (0.0 if part.pair else n_y, n_z)))
    return found
