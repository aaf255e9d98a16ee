"""The cross-section at one place, and the stiffness along the member, as data in SI units."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.breakpoints import breakpoints
from fishbelly.member.description import Member
from fishbelly.member.effective_width import counting_width
from fishbelly.member.faults import NoStiffness
from fishbelly.member.inclined_results import along_at_levels, inclined_at, inclined_there
from fishbelly.member.moduli import Moduli
from fishbelly.member.places import default_places, two_sided
from fishbelly.member.profile import Group, group_places
from fishbelly.member.section_plastic import plastic_bending
from fishbelly.member.section_shear import NO_SHEAR, shear_and_torsion, shear_notes
from fishbelly.member.section_table import rolled_table
from fishbelly.member.shear_along import ShearAlong
from fishbelly.member.slip_layers import slip_left_out
from fishbelly.member.stage_section import StageSection, in_stage
from fishbelly.sections.stiffness import SectionStiffness, principal_axes
from fishbelly.sections.touching import touching_groups

Array = NDArray[np.float64]
Data = dict[str, Any]

COLUMNS = ("EA", "EI_y", "EI_z", "EI_yz", "GA_z", "z_c", "y_c", "mass", "z_top", "z_bottom")


def section_at(member: Member, x: float, side: str = "right", to: str | None = None, stage: str | None = None) -> Data:
    """Everything `fishbelly section` tells about the cross-section at x.

    Parameters
    ----------
    member : Member
        The description.
    x : float
        Place [m].
    side : {"right", "left"}
        Which side of a break.
    to : str, optional
        Material to which the section is transformed; default that of the first part there.
    stage : str, optional
        Stage whose parts and moduli count, long-term ones in a stage that is `long_term`; default the last.

    Returns
    -------
    dict
        As the contract of results has it, SI units; moments and axes about the E-weighted centroid.

    Raises
    ------
    KeyError
        When there is no such stage.
    NoStiffness
        When nothing is left of the section there.
    """
    there = in_stage(member, stage)
    if x >= member.length * (1.0 - 1e-12):
        side = "left"
    elif x <= member.length * 1e-12:
        side = "right"
    group = group_places(there.geometry, np.array([[x]]), np.array([x]), 0, side)[0]
    short = there.moduli
    with np.errstate(all="ignore"):
        s = group.stiffness(short)
        if not s.EA[0] > 0.0:
            raise NoStiffness(x, "nothing is left of the section there")
    data: Data = {
        "title": member.title,
        "units": "SI: m, N, Pa, rad, kg",
        "x": x,
        "side": side,
        "stage": there.view.name,
    }
    data["break"] = bool(np.abs(breakpoints(member) - x).min() < 1e-9 * member.length)
    data |= {k: _number(getattr(s, k)[0]) for k in ("EA", "EI_y", "EI_z", "EI_yz")}
    data |= shear_and_torsion(member, group, short) if _has_shear(member, group) else NO_SHEAR
    data |= {"y_c": _number(s.y_c[0]), "z_c": _number(s.z_c[0]), "mass": _mass(member, group)}
    big, small, angle = principal_axes(s)
    data["principal"] = {"EI_1": _number(big[0]), "EI_2": _number(small[0]), "angle": _number(angle[0])}
    data["parts"] = _parts(member, group, s, short, side)
    data["transformed"] = _transformed(there, group, s, to)
    data |= {"plastic": plastic_bending(member, group), "table": rolled_table(member, group)}
    said = [*_apart(member, group), *shear_notes(data), *slip_left_out(member)]
    return data | {"notes": said} if said else data


def _apart(member: Member, group: Group) -> list[str]:
    """Say that parts act together though they do not touch."""
    outlines = group.composition.outlines
    if len(outlines) < 2 or len(touching_groups(outlines, 0)) == 1:
        return []
    names = [member.parts[i].name for i in group.placed.index]
    return [f"{', '.join(names[:-1])} and {names[-1]} do not all touch, yet are taken to act together"]


def _number(value: float) -> float | None:
    return float(value) + 0.0 if np.isfinite(value) else None


def _has_shear(member: Member, group: Group) -> bool:
    parts = [member.parts[i] for i in group.placed.index]
    return all(member.material(p.material or "").shear_modulus is not None for p in parts)


def _densities(member: Member) -> Array | None:
    materials = [member.material(p.material) if p.material else None for p in member.parts]
    if any(m is not None and m.density is None for m in materials):
        return None
    return np.array([m.density if m is not None else 0.0 for m in materials], dtype=float)


def _mass(member: Member, group: Group) -> float | None:
    density = _densities(member)
    if density is None:
        return None
    total = group.composition.mass_moments.times(density[list(group.placed.index)][:, None]).total()
    return _number(total.area[0])


def _parts(member: Member, group: Group, s: SectionStiffness, short: Moduli, side: str) -> list[Data]:
    """Area, modulus, levels and stress coefficients of every part there."""
    m = group.composition.moments
    E = group.modulus(short.E)
    low, high = group.composition.extent
    rows = []
    for k, i in enumerate(group.placed.index):
        part = member.parts[i]
        bottom, top = float(low[k, 0]), float(high[k, 0])
        along = along_at_levels(group, k, (top, bottom))
        per_moment = [
            _number(-E[k, 0] * a * (z - s.z_c[0]) / s.EI_y[0]) for z, a in zip((top, bottom), along, strict=True)
        ]
        rows.append(
            {
                "name": part.name,
                "material": part.material,
                "area": float(m.area[k, 0]),
                "E": float(E[k, 0]),
                "y": _number(m.y[k, 0]),
                "z": _number(m.z[k, 0]),
                "I_y": float(m.zz[k, 0]),
                "I_z": float(m.yy[k, 0]),
                "z_top": _number(top),
                "z_bottom": _number(bottom),
                "stress_per_moment": {"top": per_moment[0], "bottom": per_moment[1]},
                "W": {
                    "top": _section_modulus(E[k, 0], top - s.z_c[0], s),
                    "bottom": _section_modulus(E[k, 0], bottom - s.z_c[0], s),
                },
                "stress_per_force": _number(E[k, 0] / s.EA[0]),
            }
        )
        leaning = {r["flange"]: r["angle"] for r in inclined_there(member, group, 0) if r["part"] == part.name}
        if leaning:
            rows[-1]["inclined"] = leaning
        rows[-1] |= counting_width(member, part, float(group.placed.x[0]), side)
    return rows


def _section_modulus(E: float, arm: float, s: SectionStiffness) -> float | None:
    """M over stress at a fibre of a part, without sign [m3]; None at the axis, and where the part does not work."""
    if not E * abs(arm) > 1e-9 * E * np.sqrt(s.EI_y[0] / s.EA[0]):
        return None
    return _number(s.EI_y[0] / (E * abs(arm)))


def _transformed(there: StageSection, group: Group, s: SectionStiffness, to: str | None) -> Data:
    member = there.member
    name = to or member.parts[group.placed.index[0]].material or ""
    E = there.modulus(name)
    low, high = group.composition.extent
    top, bottom = float(np.nanmax(high)), float(np.nanmin(low))
    I_y = s.EI_y[0] / E
    ratios = {}
    for i in group.placed.index:
        other = member.parts[i].material or ""
        ratios[other] = there.modulus(other) / E
    return {
        "to": name,
        "E": E,
        "A": _number(s.EA[0] / E),
        "I_y": _number(I_y),
        "I_z": _number(s.EI_z[0] / E),
        "W_top": _number(I_y / (top - s.z_c[0])),
        "W_bottom": _number(I_y / (s.z_c[0] - bottom)),
        "n": ratios,
        "top": top,
        "bottom": bottom,
    }


def stiffness(
    member: Member, at: Iterable[float] | None = None, to: str | None = None, stage: str | None = None
) -> Data:
    """Stiffness along the member, as `fishbelly stiffness` lists it.

    Parameters
    ----------
    member : Member
        The description.
    at : iterable of float, optional
        Places to list instead of an even 101 and every break [m].
    to : str, optional
        Material to which the section is also transformed, as frame models want it.
    stage : str, optional
        Stage whose parts and moduli count, long-term ones in a stage that is `long_term`; default the last.

    Returns
    -------
    dict
        Stations with values in SI units; two where anything jumps, the left one first. With `to` each has
        `transformed`: A, I_y, I_z, W_top and W_bottom of that material alone.
    """
    places = default_places(member) if at is None else np.unique(np.fromiter(at, dtype=float))
    every, sides = two_sided(places, places, member.length)
    there = in_stage(member, stage)
    table = profile_at(member, every, sides, stage)
    keep = np.ones(every.size, dtype=bool)
    for k in range(every.size - 1):
        if every[k] == every[k + 1] and not _jumps(table[:, k], table[:, k + 1], table):
            keep[k] = False
    breaks = breakpoints(member)
    rows: list[Data] = [
        {"x": float(every[k])}
        | {name: _number(v) for name, v in zip(COLUMNS, table[:, k], strict=True)}
        | {"break": bool(np.abs(breaks - every[k]).min() < 1e-9 * member.length)}
        for k in np.flatnonzero(keep)
    ]
    leaning = inclined_at(member, every, sides, there.geometry.works)
    for row, kept in zip(rows, np.flatnonzero(keep), strict=True):
        if leaning[kept]:
            row["inclined"] = leaning[kept]
    data: Data = {"title": member.title, "units": "SI: m, N, Pa, rad, kg", "stage": there.view.name}
    if to is not None:
        E = there.modulus(to)
        data["transformed"] = {"to": to, "E": E}
        for row in rows:
            row["transformed"] = _referred(row, E)
    data |= {"stations": rows}
    said = slip_left_out(member)
    return data | {"notes": said} if said else data


def _referred(row: Data, E: float) -> Data:
    """Area, second moments and section moduli of a section of one material that is as stiff."""
    if row["EI_y"] is None:
        return dict.fromkeys(("A", "I_y", "I_z", "W_top", "W_bottom"))
    I_y, z = row["EI_y"] / E, row["z_c"]
    with np.errstate(all="ignore"):
        above, below = np.float64(I_y) / (row["z_top"] - z), np.float64(I_y) / (z - row["z_bottom"])
    return {
        "A": row["EA"] / E,
        "I_y": I_y,
        "I_z": row["EI_z"] / E,
        "W_top": _number(above),
        "W_bottom": _number(below),
    }


def _jumps(left: Array, right: Array, table: Array) -> bool:
    """Whether any column jumps by more than round-off of its kind: what vanishes is measured by its companions."""
    size = dict(zip(COLUMNS, np.abs(np.where(np.isfinite(table), table, 0.0)).max(axis=1), strict=True))
    bending = max(size["EI_y"], size["EI_z"])
    depth = float(np.nanmax(table[COLUMNS.index("z_top")] - table[COLUMNS.index("z_bottom")], initial=0.0))
    kinds = {"EI_y": bending, "EI_z": bending, "EI_yz": bending} | dict.fromkeys(
        ("z_c", "y_c", "z_top", "z_bottom"), depth
    )
    scale = np.array([kinds.get(name, size[name]) for name in COLUMNS])
    gap = np.abs(left - right)
    return bool(
        np.any(np.where(np.isfinite(gap), gap, 0.0) > 1e-6 * scale) or np.any(np.isnan(left) != np.isnan(right))
    )


def profile_at(member: Member, x: Array, sides: list[str], stage: str | None = None) -> Array:
    """Columns of `COLUMNS` at places in a stage, each seen from one side, shape (10, X); NaN where there is none."""
    there = in_stage(member, stage)
    geometry, short, density = there.geometry, there.moduli, _densities(member)
    table = np.full((len(COLUMNS), x.size), np.nan)
    shear = ShearAlong(geometry)
    for side in ("left", "right"):
        which = np.flatnonzero(np.array(sides) == side)
        if not which.size:
            continue
        for g in group_places(geometry, x[which][:, None], x[which], 0, side):
            with np.errstate(all="ignore"):
                s = g.stiffness(short)
                ga = np.full(g.rows.size, np.nan)
                if _has_shear(member, g):
                    inside = x[which[g.rows]] + (-1.0 if side == "left" else 1.0) * 1e-9 * member.length
                    whole = (g.modulus(short.G) * g.composition.moments.area).sum(axis=0)
                    ga = whole / shear.coefficients(x[which[g.rows]], inside, short.E, short.G)[0]
                mass = np.full(g.rows.size, np.nan)
                if density is not None:
                    mass = g.composition.mass_moments.times(density[list(g.placed.index)][:, None]).total().area
                low, high = g.composition.extent
                edges = (np.nanmax(high, axis=0), np.nanmin(low, axis=0))
                table[:, which[g.rows]] = (s.EA, s.EI_y, s.EI_z, s.EI_yz, ga, s.z_c, s.y_c, mass, *edges)
    return table
