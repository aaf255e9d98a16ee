"""Torsion and warping constants of rolled and hollow sections by the formulas that section tables print.

They are approximations. The torsion constant of open sections adds to the strips b t^3/3 a bulge for the root, by the
diameter of the circle that fits into it, and takes off what free ends lose:

- I: section tables to EN 10365, whose formula sums both bulges;
- channel, tee, angle: I. A. El Darwish and B. G. Johnston, Torsion of structural shapes, Journal of the Structural
  Division, ASCE, 91 (ST1), 1965, as used by tables to EN 10365, EN 10056-1 and EN 10055;
- tube: twice the second moment of area, exact;
- box: EN 10210-2:2006 and EN 10219-2:2006, Annex A.

All from memory; tests hold them against printed values and against the torsion of the outline itself.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass

Dimensions = Mapping[str, float]


@dataclass(frozen=True)
class TableTorsion:
    """Constants of one section as tables have them.

    Parameters
    ----------
    I_t : float
        Torsion constant of St Venant [m4].
    I_w : float or None
        Warping constant about the shear centre [m6], of I sections t b^3 (h - t)^2 / 24, which is I_z (h - t)^2 / 4
        with the flanges alone in I_z; of tubes none; None where this module knows no formula.
    formula : str
        Whose formulas these are.
    """

    I_t: float
    I_w: float | None
    formula: str


def table_torsion(kind: str, dimensions: Dimensions) -> TableTorsion | None:
    """Torsion and warping constant of a rolled or hollow section.

    Parameters
    ----------
    kind : str
        Outline, one of `FORMULAS`.
    dimensions : mapping of str to float
        Dimensions of the outline [m], as `fishbelly.sections.outlines` has them.

    Returns
    -------
    TableTorsion or None
        None where the formulas do not hold: other outlines, flanges that differ, boxes of uneven wall.

    Examples
    --------
    >>> ipe = dict(depth=0.3, top_width=0.15, bottom_width=0.15, top_flange=0.0107, bottom_flange=0.0107)
    >>> found = table_torsion("I", ipe | {"web": 0.0071, "radius": 0.015})
    >>> round(found.I_t * 1e8, 1), round(found.I_w * 1e9, 1)
    (20.1, 125.9)
    """
    formula = FORMULAS.get(kind)
    return None if formula is None else formula(dimensions)


def _i_section(d: Dimensions) -> TableTorsion | None:
    b, t, w, r, h = d["top_width"], d["top_flange"], d["web"], d.get("radius", 0.0), d["depth"]
    if not (_same(b, d["bottom_width"]) and _same(t, d["bottom_flange"])):
        return None
    circle = ((r + 0.5 * w) ** 2 + (r + t) ** 2 - r * r) / (2.0 * r + t)
    strips = 2.0 / 3.0 * (b - 0.63 * t) * t**3 + (h - 2.0 * t) * w**3 / 3.0
    bulges = 2.0 * (w / t) * (0.145 + 0.1 * r / t) * circle**4
    return TableTorsion(strips + bulges, t * b**3 * (h - t) ** 2 / 24.0, "I sections, tables to EN 10365")


def _channel(d: Dimensions) -> TableTorsion | None:
    b, t, w, r, h = d["width"], d["flange"], d["web"], d.get("radius", 0.0), d["depth"]
    if d.get("slope", 0.0):
        return None
    alpha = -0.0908 + 0.2621 * w / t + 0.1231 * r / t - 0.0752 * w * r / t**2 - 0.0945 * (w / t) ** 2
    circle = 2.0 * (3.0 * r + w + t - math.sqrt(2.0 * (2.0 * r + w) * (2.0 * r + t)))
    torsion = 2.0 / 3.0 * b * t**3 + (h - 2.0 * t) * w**3 / 3.0 + 2.0 * alpha * circle**4 - 0.42 * t**4
    return TableTorsion(torsion, None, "channels, El Darwish and Johnston 1965")


def _tee(d: Dimensions) -> TableTorsion | None:
    b, t, w, r, h = d["width"], d["flange"], d["web"], d.get("radius", 0.0), d["depth"]
    if d.get("slope", 0.0):
        return None
    alpha = -0.042 + 0.2204 * w / t + 0.1355 * r / t - 0.0865 * w * r / t**2 - 0.0725 * (w / t) ** 2
    circle = ((t + r) ** 2 + (r + 0.25 * w) * w) / (2.0 * r + t)
    torsion = b * t**3 / 3.0 + (h - t) * w**3 / 3.0 + alpha * circle**4 - 0.21 * t**4 - 0.105 * w**4
    return TableTorsion(torsion, None, "tees, El Darwish and Johnston 1965")


def _angle(d: Dimensions) -> TableTorsion | None:
    b, t, r, h = d["width"], d["web"], d.get("radius", 0.0), d["depth"]
    if not _same(t, d["flange"]):
        return None
    circle = 2.0 * (3.0 * r + 2.0 * t - math.sqrt(2.0) * (2.0 * r + t))
    bulge = (0.0768 + 0.0479 * r / t) * circle**4
    return TableTorsion(
        b * t**3 / 3.0 + (h - t) * t**3 / 3.0 + bulge - 0.21 * t**4, None, "angles, El Darwish and Johnston 1965"
    )


def _tube(d: Dimensions) -> TableTorsion:
    outer, inner = d["diameter"], d["diameter"] - 2.0 * d["wall"]
    return TableTorsion(math.pi / 32.0 * (outer**4 - inner**4), 0.0, "tubes, exact: twice the second moment")


def _box(d: Dimensions) -> TableTorsion | None:
    t, b, h = d["web"], d["width"], d["depth"]
    radius, inner = d.get("radius", 0.0), d.get("inner_radius", 0.0)
    if not _same(t, d["flange"]):
        return None
    mean = 0.5 * (radius + inner)
    rounding = (4.0 - math.pi) * mean
    line = 2.0 * ((b - t) + (h - t)) - 2.0 * rounding
    area = (b - t) * (h - t) - rounding * mean
    share = 2.0 * area * t / line
    return TableTorsion(t**3 * line / 3.0 + 2.0 * share * area, None, "EN 10210-2 and EN 10219-2, Annex A")


def _same(a: float, b: float) -> bool:
    return abs(a - b) <= 1e-9 * max(abs(a), abs(b))


FORMULAS: dict[str, Callable[[Dimensions], TableTorsion | None]] = {
    "I": _i_section,
    "channel": _channel,
    "tee": _tee,
    "angle": _angle,
    "tube": _tube,
    "box": _box,
}
"""Formula of each outline."""
