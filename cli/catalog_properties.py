"""Area, second moments and section moduli of sections of the catalogue, computed from their dimensions."""

from __future__ import annotations

from collections.abc import Mapping

from fishbelly.catalog.search import Entry
from fishbelly.cli.outline_rules import RADII, SHARED

STEEL = 7850.0
"""Density of steel that masses are given for [kg/m3]; EN 1991-1-1, Table A.4, has 77 to 78.5 kN/m3."""

Property = tuple[str, float, str]
"""Symbol, value in SI units, quantity as `format_quantity` knows it."""

MEANINGS = {
    "A": "area",
    "I_y": "about the level axis through the centroid",
    "I_z": "about the upright axis",
    "I_yz": "product of inertia",
    "W_y": "elastic section modulus, I_y over the farther edge",
    "W_z": "elastic section modulus, I_z over the farther edge",
    "mass": "per length, of steel at 7850 kg/m3",
    "y_c": "centroid from the left edge",
    "z_c": "centroid from the bottom edge",
}
"""What each property is."""

_UNSYMMETRIC = 1e-6
"""Share of the size by which a centroid has to be off the middle, to be shown."""


def properties(entry: Entry) -> tuple[Property, ...]:
    """Compute the properties of a section from the outline that a job would have of it.

    Parameters
    ----------
    entry : Entry
        Anything of the catalogue.

    Returns
    -------
    tuple of (str, float, str)
        As `MEANINGS` lists them, in SI units; the centroid only where it is off the middle, ``I_yz`` only where it
        is not zero, the mass not of sawn lumber. Empty for what is no section, or has no area.
    """
    if entry.group != "rolled section" or not entry.outline:
        return ()
    import numpy as np

    from fishbelly.sections.area_moments import area_moments
    from fishbelly.sections.outlines import OUTLINES

    dimensions = _full(entry.outline, {label: value for label, value, _ in entry.values})
    outline = OUTLINES[entry.outline]({key: np.array([value]) for key, value in dimensions.items()})
    own = area_moments(outline).at(0)
    left, bottom, right, top = (float(edge[0]) for edge in outline.bounds())
    area, y, z = float(own.area), float(own.y), float(own.z)
    if not area > 0.0:
        return ()
    level, upright = float(own.zz), float(own.yy)
    found: list[Property] = [("A", area, "area"), ("I_y", level, "second moment"), ("I_z", upright, "second moment")]
    if abs(float(own.yz)) > _UNSYMMETRIC * (level + upright):
        found.append(("I_yz", float(own.yz), "second moment"))
    found.append(("W_y", level / max(top - z, z - bottom), "section modulus"))
    found.append(("W_z", upright / max(right - y, y - left), "section modulus"))
    if entry.outline != "rectangle":
        found.append(("mass", area * STEEL, "mass per length"))
    for symbol, middle, low, high in (("y_c", y, left, right), ("z_c", z, bottom, top)):
        if abs(middle - 0.5 * (low + high)) > _UNSYMMETRIC * (high - low):
            found.append((symbol, middle - low, "length"))
    return tuple(found)


def data_of_section(entry: Entry) -> dict[str, object]:
    """Return the properties of a section as data in SI units, under "computed"; nothing for anything else."""
    found = properties(entry)
    if not found:
        return {}
    values = {symbol: value for symbol, value, _ in found}
    density = {"steel_density": STEEL} if "mass" in values else {}
    return {"computed": {"from": "the dimensions", **values, **density}}


def _full(kind: str, dimensions: Mapping[str, float]) -> dict[str, float]:
    """Give every dimension that an outline has, by the rules of a job."""
    full = dict.fromkeys(RADII.get(kind, ()), 0.0) | dict(dimensions)
    for own, shared in SHARED.get(kind, {}).items():
        if own not in full:
            full[own] = full[shared]
    if kind == "box" and "inner_radius" not in full:
        full["inner_radius"] = max(0.0, full["radius"] - max(full["web"], full["flange"])) if full["radius"] else 0.0
    return full
