"""Inclined flanges against plane stress: what E b t cos³ is worth, and what beam theory leaves out.

Cantilevers under an end couple. Their energy is that of bending, M²/EI, and that of the shear which inclined flanges
leave to the web though V is nothing: -M tan(angle)/h in an I with one sloping flange. The package gives the first;
the second is added here with G times the web's area. What is found is written beside each case.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

import numpy as np
import pytest
from common import part
from numpy.typing import NDArray
from plates_in_plane import Layer, work_on_the_end

from fishbelly.member.description import Haunch, Material, Member, Placing, Support
from fishbelly.member.laws import straight
from fishbelly.member.loads import Couple, Point
from fishbelly.member.results import deflect

Array = NDArray[np.float64]
E, NU = 210e9, 0.3
STEEL = Material("steel", E, poisson=NU)
INF = math.inf
MESH = 4e-3
"""Halving the elements moves the ratios by up to 3e-3, the corners of the wall are singular."""
FIXED = Support("wall", 0.0, down=INF, rotation=INF, along=INF, across=INF)


@dataclass(frozen=True)
class Girder:
    """Web and two flanges, the top one level; the soffit at -`depth`, sloping by `slope` (d depth / dx below zero)."""

    length: float
    x: Array
    depth: Array
    slope: Array
    width: float
    flange: float
    web: float

    @property
    def low(self) -> Array:
        """Depth of the lower flange on a vertical cut [m]."""
        return self.flange * np.sqrt(1.0 + self.slope**2)

    def elastic(self, moment: float, force: float) -> float:
        """Work in plane stress of an end moment, and of a force downwards that enters the web [J]."""
        h, t, v = self.depth, self.flange, self.low
        layers = (
            Layer(-h, -h + v, self.width, 2),
            Layer(-h + v, 0.0 * h - t, self.web, 8),
            Layer(0.0 * h - t, 0.0 * h, self.width, 2),
        )
        _, z, EI, _ = self.section(np.ones(h.size))
        clear = h[-1] - t - v[-1]

        def stress(level: Array) -> tuple[Array, Array]:
            inside = (level < -t) & (level > -t - clear)
            return -moment * (level - z[-1]) * E / EI[-1], np.where(inside, -force / (self.web * clear), 0.0)

        return work_on_the_end(self.x, layers, E, NU, stress)

    def section(self, share: Array) -> tuple[Array, Array, Array, Array]:
        """EA, centroid, EI and force in the lower flange per moment, with a share of E in that flange."""
        h, t, v = self.depth, self.flange, self.low
        area = np.stack((self.width * v * share, self.web * (h - t - v), self.width * t + 0.0 * h))
        level = np.stack((v / 2 - h, (v - h - t) / 2, -t / 2 + 0.0 * h))
        own = np.stack((v, h - t - v, t + 0.0 * h)) ** 2 / 12
        z = (area * level).sum(axis=0) / area.sum(axis=0)
        EI = E * (area * (own + (level - z) ** 2)).sum(axis=0)
        return E * area.sum(axis=0), z, EI, -E * area[0] * (level[0] - z) / EI

    def web_shear(self, moment: float, force: float) -> float:
        """Work of the shear that is left for the web [J], by the trapezoidal rule on the mesh's places."""
        bending = moment - force * (self.length - self.x)
        flange = bending * self.section((1.0 + self.slope**2) ** -2.0)[3]
        shear = force - flange * self.slope
        area = self.web * (self.depth - self.flange - self.low)
        density = shear**2 / (E / (2 * (1 + NU)) * area)
        return float((0.5 * (density[1:] + density[:-1]) * np.diff(self.x)).sum())


def work(member: Member, moment: float, force: float, shear: bool = False) -> float:
    """Work of the couple and the force at the tip by the package [J]."""
    tip = member.length
    # a sagging moment turns the right end anticlockwise
    loads = (Couple(tip, -moment), Point(tip, force))
    end = deflect(replace(member, loads=loads, shear=shear, combinations=()))["combinations"][0]["ends"]["right"]
    return float(-moment * end["rotation"] + force * end["deflection"])


def ratios(girder: Girder, members: tuple[Member, Member], moment: float, force: float) -> tuple[float, ...]:
    """Bending by the package and shear of the web together, over the elastic work."""
    elastic, shear = girder.elastic(moment, force), girder.web_shear(moment, force)
    return tuple((work(m, moment, force) + shear) / elastic for m in members)


def tapered() -> tuple[Girder, Member, Member]:
    """An I-shape with one flange that slopes by 12.2 degrees: along its slope, and as a vertical cut shows it."""
    x = np.linspace(0.0, 6.0, 61)
    slope = (0.3 - 1.6) / 6.0
    girder = Girder(6.0, x, 1.6 + slope * x, np.full(x.size, slope), 0.3, 0.03, 0.012)
    flanges = {"top_width": 0.3, "bottom_width": 0.3, "top_flange": 0.03, "bottom_flange": 0.03}
    beam = part("girder", "I", 6.0, depth=straight([0.0, 6.0], [1.6, 0.3]), web=0.012, **flanges)
    deeper = replace(beam.shape, dimensions={**beam.shape.dimensions, "bottom_flange": float(girder.low[0])})
    along = Member(6.0, (beam,), (STEEL,), supports=(FIXED,))
    return girder, along, replace(along, parts=(replace(beam, shape=deeper),), inclined="cut")


def haunched() -> tuple[Girder, Member, Member]:
    """A plate under a web with a haunch of 15 degrees over 40 % of the length."""
    length, reach, extra, t = 5.0, 2.0, 2.0 * math.tan(math.radians(15.0)), 0.02
    x = np.concatenate((np.linspace(0.0, reach - 1e-9, 31), np.linspace(reach, length, 31)))
    on = x < reach
    slope = np.where(on, -extra / reach, 0.0)
    depth = 0.45 + np.where(on, extra * (1.0 - x / reach), 0.0)
    girder = Girder(length, x, t + depth + t * np.sqrt(1.0 + slope**2), slope, 0.25, t, 0.01)
    top = part("top", "rectangle", length, width=0.25, depth=t)
    web = part("web", "rectangle", length, width=0.01, depth=0.45, place=Placing("under", "top"))
    bottom = part("bottom", "rectangle", length, width=0.25, depth=t, place=Placing("under", "web"))
    haunches = (Haunch("web", 0.0, extra, (0.0, reach)),)
    along = Member(length, (top, web, bottom), (STEEL,), supports=(FIXED,), haunches=haunches)
    steep = straight([0.0, reach, reach, length], [t / math.cos(math.radians(15.0))] * 2 + [t, t])
    deeper = replace(bottom, shape=replace(bottom.shape, dimensions={**bottom.shape.dimensions, "depth": steep}))
    return girder, along, replace(along, parts=(top, web, deeper), inclined="cut")


CASES = {
    # 0.7 % below plane stress, a vertical cut 4.4 %; bending alone is 9.6 % below, since V is nothing
    "tapered, couple": (tapered, 1e5, 0.0, (0.9935, 0.9564)),
    # 0.5 % and 1.8 %: the haunch is deep where the couple bends least
    "haunched, couple": (haunched, 1e5, 0.0, (0.9952, 0.9822)),
    # 2.4 % and 5.8 %; 1.9 % and 5.0 %
    "tapered, force": (tapered, 0.0, 1e5, (0.9758, 0.9417)),
    "haunched, force": (haunched, 0.0, 1e5, (0.9809, 0.9502)),
}


@pytest.mark.parametrize("name", CASES)
def test_bending_and_the_shear_left_for_the_web_are_plane_stress(name: str) -> None:
    """What is missing is local: stress at the wall and at kinks, couples that enter a sloping flange along x."""
    make, moment, force, found = CASES[name]
    girder, *members = make()
    along, cut = ratios(girder, members, moment, force)
    assert (along, cut) == pytest.approx(found, abs=MESH)
    assert abs(along - 1.0) < 0.5 * abs(cut - 1.0)


def test_shear_deformation_by_the_whole_of_v_is_too_much_in_a_taper() -> None:
    """V/GA does not know what the sloping flange carries: the tip goes down 7 % further than in plane stress."""
    girder, along, _ = tapered()
    assert work(along, 0.0, 1e5, shear=True) / girder.elastic(0.0, 1e5) == pytest.approx(1.07, abs=0.005)
