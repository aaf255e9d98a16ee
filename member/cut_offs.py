"""Where a part could end: the section without it just meets its strength there.

Stress of the section without the part is that of the member's forces on it, in each share with its own moduli: forces
are not redistributed, and what free strain and locked-in history leave in the parts is not counted. Where the part is
not, the section is as it stands.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.description import Strength
from fishbelly.member.moduli import Moduli
from fishbelly.member.panels import POINTS, Panels
from fishbelly.member.part_forces import Loading
from fishbelly.member.profile import Group, Profile
from fishbelly.sections.area_moments import AreaMoments
from fishbelly.sections.composition import Composition
from fishbelly.sections.fibres import fibres
from fishbelly.sections.flanges import flange_moments, working_moments
from fishbelly.sections.stiffness import SectionStiffness, section_stiffness

Array = NDArray[np.float64]

_MET = 1e-9
"""A strength passed by less than this share is met."""
_HALVINGS = 60
_ROUGH = slice(0, None, POINTS // 2)
"""Points of a panel, its first, middle and last, at which fibres are judged before the full search."""
_CLOSE = 0.1
"""Fibres whose use stays farther from the largest, as a share of the largest anywhere, are left out."""


@dataclass(frozen=True)
class CutOff:
    """Theoretical cut-offs of a part.

    Parameters
    ----------
    start, end : float or None
        Places beyond which, to the left and to the right, the section without the part meets its strength [m]; None
        where the part is not needed for strength, or where all the way to the member's end it is.
    used : tuple of float
        Stress over strength of the section without the part just inside its two ends, the largest of all fibres.
    """

    start: float | None
    end: float | None
    used: tuple[float, float]


def cut_offs(analysis: Analysis, loading: Sequence[Loading], parts: Sequence[int]) -> dict[int, CutOff]:
    """Theoretical cut-offs of parts.

    Parameters
    ----------
    analysis : Analysis
        The member.
    loading : sequence of Loading
        Shares and steps of a combination.
    parts : sequence of int
        Numbers of the parts.

    Returns
    -------
    dict of int to CutOff
        A part is not in it where no other has a strength, or where nothing would be left without it.
    """
    member = analysis.member
    strengths = {
        i: s
        for i, p in enumerate(member.parts)
        if p.material is not None and (s := member.material(p.material).strength) is not None
        if s.tension is not None or s.compression is not None
    }
    found = {}
    for index in parts:
        others = {i: s for i, s in strengths.items() if i != index and i in loading[0].parts}
        if others and (use := _Use.of(loading, index, others, analysis.planes == 1)) is not None:
            panels, part = analysis.profile.panels, member.parts[index]
            found[index] = _walked(use, panels.border(part.start), panels.border(part.end))
    return found


@dataclass(frozen=True, eq=False)
class _Use:
    """Stress over strength of the section without a part: fields (F, J + 1, K, n) of fibres and signs."""

    panels: Panels
    fields: Array

    @classmethod
    def of(cls, loading: Sequence[Loading], index: int, others: dict[int, Strength], planar: bool) -> _Use | None:
        """Evaluate it; None where nothing would be left of the section somewhere."""
        profile = loading[0].end.profile
        left = _left(profile, index)
        if any(not g.index for g in left.groups):
            return None
        points = {i: left.points(i, planar) for i in others}
        rough = _fields(_stress(loading, profile, left, points, _ROUGH), others)
        if rough is None:
            return None
        # fibres that come nowhere near the largest use are left out of the full search
        kept = {i: _near(points[i], rough, i) for i in others}
        fields = _fields(_stress(loading, profile, left, kept, slice(None)), others)
        assert fields is not None
        return cls(profile.panels, np.concatenate([f for each in fields.values() for f in each]))

    def at(self, panel: int, s: Array) -> Array:
        """Largest use at local coordinates of a panel, over fibres and arrangements."""
        values = self.fields[:, :, panel] @ self.panels.rule.basis(s).T
        return np.asarray((values[:, 0] + np.maximum(values[:, 1:], 0.0).sum(axis=1)).max(axis=0))


@dataclass(frozen=True, eq=False)
class _Rest:
    """What is left of a group of places without a part."""

    rows: NDArray[np.intp]
    index: tuple[int, ...]
    composition: Composition
    group: Group
    stays: tuple[int, ...]

    @cached_property
    def moments(self) -> AreaMoments:
        """Moments of what works of the parts that stay."""
        if len(self.stays) == len(self.group.placed.index):
            return self.group.moments
        place = {k: n for n, k in enumerate(self.stays)}
        flanges = [replace(f, part=place[f.part]) for f in self.group.placed.flanges if f.part in place]
        return working_moments(self.composition, flanges, flange_moments(self.composition, flanges))

    def stiffness(self, E: Array) -> SectionStiffness:
        """Stiffness with moduli of all parts of the member, shape (P,)."""
        return section_stiffness(self.moments, self.group.modulus(E)[list(self.stays)])


def _without(group: Group, index: int) -> _Rest:
    placed, section = group.placed, group.composition
    stays = tuple(k for k, i in enumerate(placed.index) if i != index)
    if len(stays) == len(placed.index):
        return _Rest(group.rows, placed.index, section, group, stays)
    place = {k: n for n, k in enumerate(stays)}
    cuts = tuple((o, tuple(place[t] for t in targets if t in place), m) for o, targets, m in section.cuts)
    rest = Composition(tuple(section.outlines[k] for k in stays), tuple(c for c in cuts if c[1]))
    return _Rest(group.rows, tuple(placed.index[k] for k in stays), rest, group, stays)


@dataclass(frozen=True, eq=False)
class _Left:
    """Sections of a profile without a part, and fibres of the parts that stay; found once."""

    profile: Profile
    groups: tuple[_Rest, ...]
    found: dict[tuple[int, bool], tuple[Array, Array]] = field(default_factory=dict)
    stiff: dict[Moduli, Array] = field(default_factory=dict)

    def stiffness(self, moduli: Moduli) -> Array:
        """EA, y_c, z_c, EI_y, EI_z, EI_yz at the sampled places, shape (6, R)."""
        if moduli not in self.stiff:
            columns = np.full((6, self.profile.rows), np.nan)
            for g in self.groups:
                s = g.stiffness(moduli.E)
                columns[:, g.rows] = (s.EA, s.y_c, s.z_c, s.EI_y, s.EI_z, s.EI_yz)
            self.stiff[moduli] = columns
        return self.stiff[moduli]

    def points(self, index: int, planar: bool) -> tuple[Array, Array]:
        """Fibres of a part, shape (C, K, n); NaN where there is none."""
        if (index, planar) not in self.found:
            self.found[index, planar] = _points(self.profile, self.groups, index, planar)
        return self.found[index, planar]


def _left(profile: Profile, index: int) -> _Left:
    def build() -> _Left:
        return _Left(profile, tuple(_without(g, index) for g in profile.groups))

    left: _Left = profile.once(f"without {index}", profile.short, build)
    return left


def _fields(stress: dict[int, Array] | None, others: dict[int, Strength]) -> dict[int, list[Array]] | None:
    """Stress over strength by part: fields (C, J + 1, K, n) for tension and compression."""
    if stress is None:
        return None
    return {
        i: [
            sign * values / allowed
            for sign, allowed in ((1.0, others[i].tension), (-1.0, others[i].compression))
            if allowed is not None
        ]
        for i, values in stress.items()
    }


def _near(points: tuple[Array, Array], rough: dict[int, list[Array]], index: int) -> tuple[Array, Array]:
    """Fibres of a part whose use comes near the largest of all fibres somewhere."""
    every = {i: [f[:, 0] + np.maximum(f[:, 1:], 0.0).sum(axis=1) for f in fs] for i, fs in rough.items()}
    flat = [f.max(axis=0) for fs in every.values() for f in fs]
    top = np.max(flat, axis=0)
    size = max(float(np.abs(top).max()), 1e-300)
    keep = np.zeros(points[0].shape[0], dtype=bool)
    for f in every[index]:
        keep |= np.any(f >= top - _CLOSE * size, axis=(1, 2))
    return points[0][keep], points[1][keep]


def _stress(
    loading: Sequence[Loading],
    profile: Profile,
    left: _Left,
    points: dict[int, tuple[Array, Array]],
    which: slice,
) -> dict[int, Array] | None:
    """Stress of parts at fibres (C, J + 1, K, n), nothing where they are not, at some points of each panel."""
    row, line = profile.row[:, which], loading[0].end.line
    total: dict[int, Array] = {}
    for share in loading:
        columns = left.stiffness(share.moduli)
        if not np.all(columns[0] > 0.0):
            return None
        section = SectionStiffness(*columns[:, row])
        N, M = share.response.N[..., which], share.response.M[..., which]
        # plane 1 counts -M_z; the analysis line has c0 = z, c1 = -y
        e0, k_y, k_z = section.strains(N, M[0] - N * line[0], -(M[1] - N * line[1]))
        for i, (y, z) in points.items():
            e = e0 - k_y * z[:, None, :, which] - k_z * y[:, None, :, which]
            total[i] = total.get(i, 0.0) + profile.part_modulus(i, share.moduli.E)[:, which] * e
    return {i: np.nan_to_num(values, copy=False) for i, values in total.items()}


def _points(profile: Profile, groups: Sequence[_Rest], index: int, planar: bool) -> tuple[Array, Array]:
    """Fibres of a part in the section without the other, shape (C, K, n); NaN where there is none."""
    found = [(g.rows, fibres(g.composition, g.index.index(index), planar)) for g in groups if index in g.index]
    count = max((p[0].shape[0] for _, p in found), default=0)
    y, z = np.full((2, count, profile.rows), np.nan)
    for rows, (py, pz) in found:
        y[: py.shape[0], rows], z[: pz.shape[0], rows] = py, pz
    return (np.zeros_like(y) if planar else y)[:, profile.row], z[:, profile.row]


def _walked(use: _Use, first: int, stop: int) -> CutOff:
    """From each end of the part outwards while strength is passed there, else inwards until it is."""
    s = np.concatenate(([-1.0], use.panels.rule.points, [1.0]))
    every = np.stack([use.at(k, s) for k in range(use.panels.count)])
    over = (every > 1.0 + _MET).ravel()
    width = s.size
    left, right = first * width, stop * width - 1
    used = (float(every.ravel()[left]), float(every.ravel()[right]))
    start = _edge(use, s, over, left, range(left - 1, -1, -1) if over[left] else range(left + 1, right + 1))
    end = _edge(use, s, over, right, range(right + 1, over.size) if over[right] else range(right - 1, left - 1, -1))
    return CutOff(start, end, used)


def _edge(use: _Use, s: Array, over: NDArray[np.bool_], origin: int, way: range) -> float | None:
    """First place on a way at which strength begins or ceases to be passed."""
    before = origin
    for k in way:
        if over[k] != over[origin]:
            return _root(use, s, min(before, k), bool(over[min(before, k)]))
        before = k
    return None


def _root(use: _Use, s: Array, low: int, over: bool) -> float:
    """Place between two neighbouring samples at which use passes 1."""
    panel, j = divmod(low, s.size)
    if j == s.size - 1:
        return float(use.panels.b[panel])
    a, b = float(s[j]), float(s[j + 1])
    for _ in range(_HALVINGS):
        middle = 0.5 * (a + b)
        if bool(use.at(panel, np.array([middle]))[0] > 1.0 + _MET) == over:
            a = middle
        else:
            b = middle
    return float(use.panels.place(np.array(panel), np.array(0.5 * (a + b))))
