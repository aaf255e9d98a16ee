"""Sections that the tests of flexure and torsion share, at one station."""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.composition import Composition
from fishbelly.sections.flexure import Flexure, flexure
from fishbelly.sections.outlines import OUTLINES, Outline, polygon

Array = NDArray[np.float64]
Moduli = tuple[tuple[float, float], ...]

ONE: Moduli = ((1.0, 1.0),)
STEEL = (210e9, 81e9)
CONCRETE = (33e9, 13.75e9)
TIMBER = (11e9, 0.69e9)


def make(kind: str, y: float = 0.0, z: float = 0.0, **dimensions: float) -> Outline:
    return OUTLINES[kind]({k: np.array([float(v)]) for k, v in dimensions.items()}).moved(y, z)


def plate(b: float, h: float, y: float = 0.0, z: float = 0.0) -> Outline:
    return make("rectangle", y, z, width=b, depth=h)


def disc(d: float, y: float = 0.0, z: float = 0.0) -> Outline:
    return make("circle", y, z, diameter=d)


def beam(radius: float = 0.0) -> Outline:
    flanges = {"top_width": 0.15, "top_flange": 0.01, "bottom_width": 0.12, "bottom_flange": 0.014}
    return make("I", depth=0.3, web=0.007, radius=radius, **flanges)


def ell() -> Outline:
    return make("angle", depth=0.1, width=0.08, web=0.01, flange=0.012, radius=0.0, toe_radius=0.0)


def zed() -> Outline:
    corners = ((0, 0), (0.1, 0), (0.1, 0.01), (0.01, 0.01), (0.01, 0.2), (-0.09, 0.2), (-0.09, 0.19), (0, 0.19))
    return polygon(corners, (), 1)


def channel() -> Outline:
    inner = {"radius": 0.0115, "toe_radius": 0.006, "slope": 0.08, "flange_at": 0.0375}
    return make("channel", depth=0.2, width=0.075, web=0.0085, flange=0.0115, **inner)


def many_sided(a: float, b: float, sides: int) -> Outline:
    """Polygon on an ellipse of semi-axes a along z and b along y, with the ellipse's area."""
    angles = 2.0 * math.pi * np.arange(sides) / sides
    swell = math.sqrt(2.0 * math.pi / sides / math.sin(2.0 * math.pi / sides))
    return polygon(tuple(zip(swell * b * np.cos(angles), swell * a * np.sin(angles), strict=True)), (), 1)


SECTIONS: dict[str, tuple[tuple[Outline, ...], Moduli]] = {
    "rectangle": ((plate(0.1, 0.2),), ONE),
    "I": ((beam(),), ONE),
    "I with fillets": ((beam(0.012),), ONE),
    "angle": ((ell(),), ONE),
    "Z": ((zed(),), ONE),
    "channel": ((channel(),), ONE),
    "slab on steel": ((beam(), plate(1.5, 0.18, 0.0, 0.24)), (STEEL, CONCRETE)),
    "flitch": ((plate(0.1, 0.3, -0.056), plate(0.012, 0.2), plate(0.1, 0.3, 0.056)), (TIMBER, STEEL, TIMBER)),
    "bars": (
        (plate(0.3, 0.5), make("bars", 0.0, -0.2, count=4, diameter=0.016, spacing=0.07)),
        (CONCRETE, STEEL),
    ),
    "tube": ((make("tube", diameter=0.2, wall=0.03),), ONE),
    "box": ((make("box", width=0.2, depth=0.3, web=0.008, flange=0.012, radius=0, inner_radius=0),), ONE),
}


def columns(moduli: Moduli) -> tuple[Array, Array]:
    """E and G of the parts, each shape (P, 1)."""
    return np.array([[e] for e, _ in moduli]), np.array([[g] for _, g in moduli])


def solve(outlines: tuple[Outline, ...], moduli: Moduli = ONE, **more: object) -> Flexure:
    cuts = more.pop("cuts", ())
    return flexure(Composition(outlines, cuts), *columns(moduli), **more)  # type: ignore[arg-type]


def tensor(f: Flexure) -> Array:
    """Flexibility for forces along (y, z)."""
    return np.array([[f.F_yy[0], f.F_yz[0]], [f.F_yz[0], f.F_zz[0]]])
