"""Stress in every part at its extreme fibres along the member, and the force a part carries."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.extremes import largest
from fishbelly.member.inclined_stress import along_plates, any_inclined, shear_in_webs
from fishbelly.member.part_forces import Loading, stress_planes
from fishbelly.member.profile import Group, Profile
from fishbelly.sections.fibres import arc_data, fibres

Array = NDArray[np.float64]


@dataclass(frozen=True)
class StressPeak:
    """A largest or smallest stress [Pa], where along the member [m] and at which height [m]."""

    value: float
    at: float
    z: float
    y: float


@dataclass(frozen=True)
class ShearPeak:
    """A largest shear stress without sign [Pa], where along the member [m] and at which height [m]."""

    value: float
    at: float
    z: float | None


@dataclass(frozen=True)
class PartStress:
    """Stress of one part over the member; None where the part has no stress of that sign to speak of.

    `highest`: largest stress, tension positive; `lowest`: smallest; `shear`: largest shear stress by level
    cuts, without sign; its level is None where both planes have shear. It is V Q / (I b) of the section at each
    place, V less what inclined flanges carry, step by step with the section on which V arrived: what sloping faces of
    other parts add or take, and what creep and releases move, is in `fibre_stress` alone.
    """

    part: str
    highest: StressPeak | None
    lowest: StressPeak | None
    shear: ShearPeak | None = None


def part_stresses(analysis: Analysis, loading: Sequence[Loading]) -> tuple[PartStress, ...]:
    """Extreme stresses of every part that adds material.

    Parameters
    ----------
    analysis : Analysis
        The member.
    loading : sequence of Loading
        Shares of a combination.

    Returns
    -------
    tuple of PartStress
        In the member's order of parts.
    """
    member = analysis.member
    found = []
    asked = any(m.strength is not None and m.strength.shear is not None for m in member.materials)
    with_shear = member.shear or asked
    for index, part in enumerate(member.parts):
        if part.cuts or part.material is None:
            continue
        stress, y, z = _fields(analysis, loading, index)
        if stress is None:
            found.append(PartStress(part.name, None, None))
            continue
        high = _peak(analysis, stress, y, z, 1.0)
        low = _peak(analysis, stress, y, z, -1.0)
        shear = _shear_peak(analysis, loading, index) if with_shear else None
        found.append(PartStress(part.name, high, low, shear))
    return tuple(found)


def _fields(analysis: Analysis, loading: Sequence[Loading], index: int) -> tuple[Array | None, Array, Array]:
    """Stress of a part at its candidate fibres: (J+1, C, K, n), NaN where it is not; and y, z (C, K, n)."""
    planes = stress_planes(loading, index)
    if planes is None:
        return None, np.empty(0), np.empty(0)
    profile = loading[0].end.profile
    groups = [g for g in profile.groups if index in g.placed.index]
    planar = analysis.planes == 1
    points = {id(g): fibres(g.composition, g.placed.index.index(index), planar) for g in groups}
    count = max(p[0].shape[0] for p in points.values())
    y, z = np.full((count, profile.rows), np.nan), np.full((count, profile.rows), np.nan)
    for g in groups:
        py, pz = points[id(g)]
        y[: py.shape[0], g.rows], z[: pz.shape[0], g.rows] = py, pz
    fy, fz = y[:, profile.row], z[:, profile.row]
    if not planar:
        ty, tz = _tangent_points(profile, planes, index, groups)
        fy, fz = np.concatenate((fy, ty)), np.concatenate((fz, tz))
    stress = _stress_at(analysis, planes, fy, fz)
    along = along_plates(profile, index, fy, fz)
    return stress if along is None else stress * along, fy, fz


def _tangent_points(profile: Profile, planes: Array, index: int, groups: list[Group]) -> tuple[Array, Array]:
    """Points of a part's arcs where the stress plane of the whole combination is steepest, (2 E, K, n)."""
    data = [arc_data(g.composition, g.placed.index.index(index)) for g in groups]
    count = max(d.shape[1] for d in data)
    arcs = np.full((5, count, profile.rows), np.nan)
    for g, d in zip(groups, data, strict=True):
        arcs[:, : d.shape[1], g.rows] = d
    y_c, z_c, r, start, turn = arcs[:, :, profile.row]
    up, right = planes[:, 1].sum(axis=0), -planes[:, 2].sum(axis=0)
    y, z = [], []
    for sign in (1.0, -1.0):
        angle = np.arctan2(sign * up, sign * right)
        passed = np.mod(angle - start, 2.0 * np.pi)
        # beyond the arc its nearer end: a direction that falls on the end itself must not jump to the other
        nearest = np.where(passed - turn < 2.0 * np.pi - passed, start + turn, start)
        angle = np.where(passed <= turn, angle, nearest)
        y.append(y_c + r * np.cos(angle))
        z.append(z_c + r * np.sin(angle))
    return np.concatenate(y), np.concatenate(z)


def _stress_at(analysis: Analysis, planes: Array, fy: Array, fz: Array) -> Array:
    """Stress of a part at fibres (C, K, n), for every piece: shape (J+1, C, K, n)."""
    line = analysis.frame.line
    total = planes[:, :1] + planes[:, 1:2] * (fz - line[0])
    if analysis.planes > 1:
        total = total + planes[:, 2:] * (-fy - line[1])
    return np.asarray(total)


def _peak(analysis: Analysis, stress: Array, y: Array, z: Array, sign: float) -> StressPeak | None:
    """Largest of sign times stress over fibres and places."""
    panels = analysis.profile.panels
    there = ~np.isnan(stress[0, :, :, 0])
    best: StressPeak | None = None
    rough = np.where(np.isnan(stress), -np.inf, sign * stress)
    tops = rough[0].max(axis=-1) + np.where(np.isfinite(rough[1:]), np.maximum(rough[1:], 0.0), 0.0).max(axis=-1).sum(
        axis=0
    )
    span = np.nanmax(np.abs(stress)) if np.any(there) else 0.0
    for c in range(stress.shape[1]):
        if not there[c].any() or tops[c].max() < tops.max() - 0.05 * span - 1e-300:
            continue
        field = np.where(np.isnan(stress[:, c]), 0.0, sign * stress[:, c])
        for first, stop in _runs(there[c]):
            found = largest(panels, field, first, stop)
            if best is None or found.value > sign * best.value * (1.0 + 1e-13 * np.sign(sign * best.value)):
                k = int(np.clip(panels.find(np.array([found.at]))[0], first, stop - 1))
                basis = panels.rule.basis(panels.local(np.array([k]), np.array([found.at])))[0]
                best = StressPeak(sign * found.value, found.at, float(basis @ z[c, k]), float(basis @ y[c, k]))
    return best


def _runs(there: NDArray[np.bool_]) -> list[tuple[int, int]]:
    edges = np.flatnonzero(np.diff(np.concatenate(([0], there.astype(int), [0]))))
    return [(int(a), int(b)) for a, b in zip(edges[::2], edges[1::2], strict=True)]


def _shear_peak(analysis: Analysis, loading: Sequence[Loading], index: int) -> ShearPeak | None:
    """Largest shear stress of a part by level cuts; with shear in both planes, their largest ones as vectors.

    With pattern loads in both planes the largest of each plane, wherever it is, are put together: never too low.
    """
    panels = analysis.profile.panels
    fields = [_shear_field(analysis, loading, index, p) for p in range(analysis.planes)]
    tops = [max((largest(panels, s * field) for s in (1.0, -1.0)), key=lambda e: e.value) for field in fields]
    top = max(tops, key=lambda e: e.value)
    if len(fields) == 1 or min(e.value for e in tops) <= 1e-12 * top.value:
        return ShearPeak(top.value, top.at, _shear_level(analysis, loading, index, top.at) if top is tops[0] else None)
    if fields[0].shape[0] > 1:
        return ShearPeak(float(np.hypot(tops[0].value, tops[1].value)), top.at, None)
    both = largest(panels, fields[0] ** 2 + fields[1] ** 2)
    return ShearPeak(float(np.sqrt(max(both.value, 0.0))), both.at, None)


def _shear_level(analysis: Analysis, loading: Sequence[Loading], index: int, at: float) -> float:
    """Level of the largest shear stress of a part in the vertical plane, at the sampled place nearest to x [m]."""
    profile = loading[0].end.profile
    level = np.full(profile.rows, np.nan)
    for g in profile.groups:
        if index in g.placed.index:
            level[g.rows] = g.shear_stress(profile.short).level[g.placed.index.index(index)]
    places, levels = profile.panels.x.ravel(), level[profile.row].ravel()
    known = np.flatnonzero(~np.isnan(levels))
    return float(levels[known[int(np.argmin(np.abs(places[known] - at)))]])


def _shear_field(analysis: Analysis, loading: Sequence[Loading], index: int, plane: int) -> Array:
    """Largest shear stress of a part on any level of the section, by shear in one plane, shape (J+1, K, n).

    What inclined flanges carry of the shear force is left out.
    """
    total = np.zeros(loading[0].response.V[0].shape)
    for share in loading:
        profile = share.step.frame.profile
        peak = np.zeros(profile.rows)
        for g in (g for g in profile.groups if index in g.placed.index):
            peak[g.rows] = g.shear_stress(share.moduli, plane == 1).peak[g.placed.index.index(index)]
        V = shear_in_webs(share, plane, share.step.frame.line) if any_inclined(profile) else share.response.V[plane]
        total = total + V * peak[profile.row]
    return total
