"""What each part gives at every point of the grid: geometry sampled once, stiffness for any set of moduli.

Panels in which nothing varies are sampled at one place; the others at Chebyshev points, halved until what
the deflection needs is resolved to round-off. Places with the same parts present are evaluated together.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field, replace
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.breakpoints import part_laws
from fishbelly.member.description import Member
from fishbelly.member.faults import NoStiffness
from fishbelly.member.geometry import Geometry, PlacedParts
from fishbelly.member.moduli import Moduli
from fishbelly.member.openings import half_length, notch_span
from fishbelly.member.panels import Panels
from fishbelly.member.shear_along import ShearAlong
from fishbelly.sections.area_moments import AreaMoments
from fishbelly.sections.composition import Composition
from fishbelly.sections.flanges import flange_moments, working_moments
from fishbelly.sections.shear_stress import ShearStress, shear_stress
from fishbelly.sections.stiffness import SectionStiffness, section_stiffness

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Group:
    """Sampled places at which the same parts are present: `rows` of the profile, S of them."""

    rows: NDArray[np.intp]
    placed: PlacedParts
    composition: Composition
    over_opening: bool
    _sheared: dict[tuple[int, bool], tuple[Moduli, ShearStress]] = field(default_factory=dict, repr=False)
    _stiff: dict[int, tuple[Moduli, SectionStiffness]] = field(default_factory=dict, repr=False)

    def modulus(self, values: Array) -> Array:
        """Moduli of the parts of this group at its stations, run-in counted, shape (P, S)."""
        return np.asarray(values[list(self.placed.index)][:, None] * self.placed.run_in)

    @cached_property
    def moments(self) -> AreaMoments:
        """Moments of what works of each part along the member, inclined flanges by their share, shape (P, S)."""
        return working_moments(self.composition, self.placed.flanges, self.flange_moments)

    @cached_property
    def flange_moments(self) -> tuple[AreaMoments, ...]:
        """Moments of what is left of each inclined flange as it is cut, fields of shape (S,)."""
        return flange_moments(self.composition, self.placed.flanges)

    def stiffness(self, moduli: Moduli) -> SectionStiffness:
        """Section stiffness for a set of moduli, fields of shape (S,); computed once."""
        if id(moduli) not in self._stiff:
            # the moduli are kept beside the result, so that their identity stays theirs
            self._stiff[id(moduli)] = (moduli, section_stiffness(self.moments, self.modulus(moduli.E)))
        return self._stiff[id(moduli)][1]

    def shear_stress(self, moduli: Moduli, across: bool = False) -> ShearStress:
        """Largest shear stresses for V = 1 N along z, or along y, for a set of moduli; computed once."""
        key = (id(moduli), across)
        if key not in self._sheared:
            self._sheared[key] = (moduli, self._shear_stress(moduli, across))
        return self._sheared[key][1]

    def _shear_stress(self, moduli: Moduli, across: bool) -> ShearStress:
        stiffness = self.stiffness(moduli)
        if self.placed.flanges:
            # shear is that of the section as it is cut: the bending that goes with it weighs every part in full
            stiffness = section_stiffness(self.composition.moments, self.modulus(moduli.E))
        section = self.composition
        if across:
            section = self._turned
            s = stiffness
            stiffness = SectionStiffness(s.EA, -s.z_c, s.y_c, s.EI_z, s.EI_y, -s.EI_yz)
        E, G = self.modulus(moduli.E), self.modulus(moduli.G)
        if not np.all(moduli.G[list(self.placed.index)] > 0.0):
            # without a shear modulus only shear stresses are wanted, and stiffness shares them by E
            G = E
        return shear_stress(section.levels, E, G, stiffness, self.over_opening)

    @cached_property
    def _turned(self) -> Composition:
        return self.composition.turned()


@dataclass(frozen=True, eq=False)
class Profile:
    """The member sampled along x.

    Parameters
    ----------
    geometry : Geometry
        Places parts.
    panels : Panels
        The grid.
    row : ndarray of int, shape (K, n)
        Which sampled place speaks for each grid point.
    groups : tuple of Group
        Sampled places by the parts present.
    rows : int
        How many places were sampled.
    short : Moduli
        Short-term moduli, with which it was sampled.
    """

    geometry: Geometry
    panels: Panels
    row: NDArray[np.intp]
    groups: tuple[Group, ...]
    rows: int
    short: Moduli
    _cache: dict[tuple[str, int], object] = field(default_factory=dict, repr=False)

    @property
    def member(self) -> Member:
        """The member."""
        return self.geometry.member

    def stiffness(self, moduli: Moduli) -> SectionStiffness:
        """Section stiffness at every sampled place, fields of shape (R,)."""

        def build() -> SectionStiffness:
            columns = np.full((6, self.rows), np.nan)
            for g in self.groups:
                s = g.stiffness(moduli)
                columns[:, g.rows] = (s.EA, s.y_c, s.z_c, s.EI_y, s.EI_z, s.EI_yz)
            return SectionStiffness(*columns)

        stiffness: SectionStiffness = self.once("stiffness", moduli, build)
        return stiffness

    def part_moments(self, part: int, line: Array) -> Array:
        """Moments of what works of a part about the analysis line, shape (6, K, n): A, S0, S1, I00, I01, I11.

        Products of c0 = z - line[0] and c1 = -y - line[1]; nothing where the part is not there.
        """
        columns = np.zeros((6, self.rows))
        for g in self.groups:
            if part in g.placed.index:
                m = g.moments.at(g.placed.index.index(part))
                c0, c1 = m.z - line[0], -m.y - line[1]
                A = m.area
                columns[:, g.rows] = (A, A * c0, A * c1, m.zz + A * c0 * c0, A * c0 * c1 - m.yz, m.yy + A * c1 * c1)
        return columns[:, self.row]

    def part_modulus(self, part: int, values: Array) -> Array:
        """Modulus of a part at the grid points, run-in counted, shape (K, n); zero where it is not there [Pa]."""
        column = np.zeros(self.rows)
        for g in self.groups:
            if part in g.placed.index:
                column[g.rows] = g.modulus(values)[g.placed.index.index(part)]
        return column[self.row]

    @cached_property
    def shear_along(self) -> ShearAlong:
        """Shear stiffness by the section's strain energy, along the member."""
        return ShearAlong(self.geometry)

    def shear_flexibility(self, moduli: Moduli) -> Array:
        """Shear angle by shear force along z, along y, and along y by one along z [1/N], shape (3, R)."""

        def build() -> Array:
            columns = np.full((3, self.rows), np.nan)
            for g in self.groups:
                x = g.placed.x
                whole = (g.modulus(moduli.G) * g.composition.moments.area).sum(axis=0)
                columns[:, g.rows] = self.shear_along.coefficients(x, x, moduli.E, moduli.G) / whole
            return columns

        columns: Array = self.once("shear", moduli, build)
        return columns

    def mass(self, density: Array, parts: frozenset[str] = frozenset()) -> tuple[Array, Array, Array]:
        """Mass per length [kg/m] and its centroid y, z [m] at every sampled place, each shape (R,).

        `parts` are counted even where they do not work yet, as wet concrete is.
        """
        columns = np.zeros((3, self.rows))
        for g in self._weighing(parts):
            total = g.composition.mass_moments.times(density[list(g.placed.index)][:, None]).total()
            columns[:, g.rows] = (total.area, total.y, total.z)
        return columns[0], columns[1], columns[2]

    def _weighing(self, parts: frozenset[str]) -> tuple[Group, ...]:
        """Groups of the profile, with parts that do not work yet but are weighed already."""
        works = self.geometry.works
        named = {i for i, p in enumerate(self.member.parts) if p.name in parts}
        if works is None or named <= works:
            return self.groups
        geometry = Geometry(self.member, works | named)
        found: list[Group] = []
        for g in self.groups:
            places = g.placed.x
            found += [replace(w, rows=g.rows[w.rows]) for w in group_places(geometry, places[:, None], places, 0)]
        return tuple(found)

    def once(self, what: str, moduli: Moduli, build: Callable[[], Any]) -> Any:
        """Return what has been built for a set of moduli under a name, or build it."""
        key = (what, id(moduli))
        if key not in self._cache:
            self._cache[key] = build()
            self._cache[("kept " + what, id(moduli))] = moduli
        return self._cache[key]


def varies(member: Member, a: Array, b: Array) -> NDArray[np.bool_]:
    """Whether anything of the cross-section varies within panels a to b, each shape (K,)."""
    middle = 0.5 * (a + b)
    result = np.zeros(a.size, dtype=bool)
    for part in member.parts:
        inside = (middle > part.start) & (middle < part.end)
        for law in part_laws(part):
            if not law.is_constant:
                piece = np.searchsorted(law.knots, middle)
                result |= inside & np.any(law.coefficients[piece, 1:] != 0.0, axis=1)
        left, right = part.run_in
        result |= inside & ((middle < part.start + left) | (middle > part.end - right))
    for haunch in member.haunches:
        result |= (middle > haunch.at - haunch.reach[0]) & (middle < haunch.at + haunch.reach[1])
    for notch in member.notches:
        part = member.part(notch.of)
        start, end = notch_span(notch, part.start, part.end, True)
        if not notch.depth.is_constant:
            result |= (middle > start) & (middle < end)
    for opening in member.openings:
        if opening.diameter is not None or opening.radius:
            result |= np.abs(middle - opening.at) < half_length(opening)
    return result


def group_places(geometry: Geometry, x: Array, middles: Array, first_row: int, side: str = "right") -> list[Group]:
    """Evaluate places, those with the same parts present together.

    Parameters
    ----------
    geometry : Geometry
        Places parts.
    x : ndarray, shape (K, n)
        Places, a row for each panel [m].
    middles : ndarray, shape (K,)
        A place inside each panel, which tells what is present [m].
    first_row : int
        Number of the first place.
    side : {"right", "left"}
        Which side speaks where a place is a break.
    """
    by_presence: dict[tuple[tuple[int, ...], ...], list[int]] = {}
    for k, middle in enumerate(middles):
        by_presence.setdefault(geometry.present(float(middle), side), []).append(k)
    groups = []
    for there, panels in by_presence.items():
        if not any(not geometry.member.parts[i].cuts for i in there[0]):
            raise NoStiffness(float(middles[panels[0]]), "no part is there")
        places = x[panels]
        rows = first_row + np.add.outer(np.array(panels) * x.shape[1], np.arange(x.shape[1]))
        placed = geometry.place(places.ravel(), side, there)
        cuts = tuple((c.outline, c.targets, c.mass) for c in placed.cuts)
        groups.append(Group(rows.ravel(), placed, Composition(placed.outlines, cuts), bool(there[2])))
    return groups
