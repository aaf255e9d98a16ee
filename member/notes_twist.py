"""Notes on loads that pass the shear centre at a distance, and on pieces that do not hang together in shear."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

import numpy as np

from fishbelly.member.analysis import Analysis, ModuliKey
from fishbelly.member.geometry import Geometry
from fishbelly.member.loads import Distributed, Point
from fishbelly.member.note import Note
from fishbelly.member.profile import Group, group_places
from fishbelly.member.section_shear import section_flexure

Data = dict[str, Any]

_ASIDE = 1e-3
"""A shear centre within this share of the section's size from the plane of the loads is in it."""


def twisting(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    """Say by how much vertical loads, which act in the plane y = 0, pass the shear centre."""
    member = analysis.member
    if any(m.shear_modulus is None for m in member.materials):
        return
    worst: dict[str, tuple[float, float, float]] = {}
    for load in member.loads:
        if not isinstance(load, Distributed | Point) or load.direction == "across":
            continue
        kind = "point" if isinstance(load, Point) else "along"
        x, size = _heaviest(load)
        e = _eccentricity(analysis, x)
        if e is not None and abs(size * e) > abs(worst.get(kind, (0.0, 0.0, 0.0))[0]):
            worst[kind] = (size * e, e, x)
    for kind, (torque, e, x) in worst.items():
        what = "moment" if kind == "point" else "moment per length"
        yield Note(
            "loads in the plane y = 0 pass the shear centre {e} aside at x = {at}: a torque of {torque}; "
            "the twist it causes is not in the deflection, nor its stresses in the checks",
            {"e": (abs(e), "length"), "at": (x, "position"), "torque": (abs(torque), what)},
        )


def _heaviest(load: Distributed | Point) -> tuple[float, float]:
    """Place [m] and size of a load where it is largest."""
    if isinstance(load, Point):
        return load.at, load.value
    return max(load.stations, key=lambda s: abs(s[1]))


def _eccentricity(analysis: Analysis, x: float) -> float | None:
    """Distance of the plane y = 0 from the shear centre at x [m]; None where it is none to speak of."""
    member = analysis.member
    side = "left" if x >= member.length * (1.0 - 1e-12) else "right"
    works = analysis.profile.geometry.works
    group = group_places(Geometry(member, works), np.array([[x]]), np.array([x]), 0, side)[0]
    short = analysis.moduli(ModuliKey())
    s = group.stiffness(short)
    if not s.EA[0] > 0.0 or _symmetric(group, analysis) or not np.all(group.modulus(short.G) > 0.0):
        return None
    size = float(np.sqrt((s.EI_y[0] + s.EI_z[0]) / s.EA[0]))
    e = -float(section_flexure(member, group, short).y_s[0])
    return e if abs(e) > _ASIDE * size else None


def _symmetric(group: Group, analysis: Analysis) -> bool:
    """Whether nothing says that the section differs to the left and right of y = 0."""
    s = group.stiffness(analysis.moduli(ModuliKey()))
    size = float(np.sqrt((s.EI_y[0] + s.EI_z[0]) / s.EA[0]))
    mixed = abs(float(s.EI_yz[0])) > 1e-9 * float(np.sqrt(s.EI_y[0] * s.EI_z[0]))
    return abs(float(s.y_c[0])) < 1e-9 * size and not mixed
