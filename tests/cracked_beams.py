"""Reinforced beams that crack, their closed forms, and units of the printed examples."""

from __future__ import annotations

import math
from typing import Any

from common import part, pin, roller, simple, uniform

from fishbelly.member.description import Combination, Material, Member, Part, Placing
from fishbelly.member.laws import Law, constant

INCH = 0.0254
LBF = 0.45359237 * 9.80665
PSI = LBF / INCH**2
KSI = 1000.0 * PSI
FOOT_LB = 12.0 * INCH * LBF

CONCRETE = Material("concrete", 31e9, poisson=0.2, density=2500.0, creep=2.0, expansion=10e-6, cracking=2.6e6)
BARS = Material("bars", 200e9, poisson=0.3, density=7850.0, creep=0.0, expansion=10e-6)
STRONG = Material("concrete", 31e9, poisson=0.2, density=2500.0, creep=2.0, expansion=10e-6, cracking=1e12)
THIN = 1e-6
"""Depth of a strip that stands for bars where their own second moment shall be nothing [m]."""


def at_level(z: float | Law, y: float = 0.0) -> Placing:
    """A place by its middle."""
    level = z if isinstance(z, Law) else constant(z)
    return Placing("position", position=(constant(y), level), anchor="middle")


def row_of_bars(name: str, count: int, diameter: float, z: float | Law, end: float, y: float = 0.0) -> Part:
    """A row of round bars at a level, 60 mm apart."""
    return part(name, "bars", end, material="bars", place=at_level(z, y), count=count, diameter=diameter, spacing=0.06)


def strip_of_bars(name: str, area: float, z: float, end: float, width: float = 0.2) -> Part:
    """Bars as a strip so thin that only area and level count; the modulus of `THIN_BARS` makes up for it."""
    return part(name, "rectangle", end, material="bars", place=at_level(z), width=width, depth=THIN)


def thin_material(bars: Material, area: float, width: float = 0.2) -> Material:
    """The material with which a thin strip carries what bars of an area do."""
    return Material("bars", bars.E * area / (width * THIN), poisson=0.3, creep=0.0, density=0.0, expansion=10e-6)


def thin_beam(
    length: float,
    size: tuple[float, float],
    area: float,
    depth: float,
    concrete: Material = CONCRETE,
    bars: Material = BARS,
    **more: Any,
) -> Member:
    """A beam whose bars are a thin strip `depth` below the top: its sections have closed forms."""
    parts = (
        part("beam", "rectangle", length, material="concrete", width=size[0], depth=size[1]),
        strip_of_bars("bottom", area, -depth, length),
    )
    return Member(length, parts, (concrete, thin_material(bars, area)), **{"shear": False, **more})


def reinforced(
    length: float, *, concrete: Material = CONCRETE, depth: float | Law = 0.42, top: bool = True, **more: Any
) -> Member:
    """A beam 300 mm by 420 mm with four 20 mm bars 370 mm below its top and two of 16 mm 50 mm below."""
    parts = [
        part("beam", "rectangle", length, material="concrete", width=0.3, depth=depth),
        row_of_bars("bottom", 4, 0.02, -0.37, length),
    ]
    if top:
        parts.append(row_of_bars("top", 2, 0.016, -0.05, length))
    return Member(length, tuple(parts), (concrete, BARS), **more)


def simply(length: float, q: float, **more: Any) -> Member:
    """The same on two supports under a uniform load."""
    return reinforced(length, supports=simple(length), loads=(uniform(q, length),), **more)


def two_spans(span: float, q: float, **more: Any) -> Member:
    """The same over three supports."""
    held = (pin("A", 0.0), roller("B", span), roller("C", 2.0 * span))
    return reinforced(2.0 * span, supports=held, loads=(uniform(q, 2.0 * span),), **more)


def everything(member: Member) -> Combination:
    """Its first combination."""
    return member.combinations[0]


def rectangle_stiffness(b: float, h: float, n_area: float, d: float, E: float) -> tuple[float, float]:
    """EI uncracked (n A added where the strip displaces nothing) and cracked of a thin strip in a rectangle."""
    area, first = b * h + n_area, b * h * h / 2.0 + n_area * d
    c = first / area
    uncracked = b * h**3 / 12.0 + b * h * (h / 2.0 - c) ** 2 + n_area * (d - c) ** 2
    x = (-n_area + math.sqrt(n_area**2 + 2.0 * b * n_area * d)) / b
    return E * uncracked, E * (b * x**3 / 3.0 + n_area * (d - x) ** 2)
