"""Second method, parts that slip: layers, joints and their stiffness read once more from the description."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member
from fishbelly.member.geometry import Geometry

Array = NDArray[np.float64]

TOUCHES = 1e-9
"""A level within this share of the depth from a layer's face lies in it."""


@dataclass(frozen=True)
class Tied:
    """One joint that slips: parts, layers, extent [m], and places of its fasteners [m] where these stand by pitch."""

    part: int
    host: int
    upper: int
    lower: int
    start: float
    end: float
    places: tuple[float, ...]
    spacing: float


@dataclass(frozen=True, eq=False)
class Stack:
    """Layers of a member, and the joints between them.

    Parameters
    ----------
    member : Member
        The description.
    layer : ndarray of int, shape (P,)
        Layer of each part; -1 of one that cuts.
    joints : tuple of Tied
        Joint j fixes layer j + 1.
    """

    member: Member
    layer: NDArray[np.intp]
    joints: tuple[Tied, ...]

    @classmethod
    def of(cls, member: Member) -> Stack:
        """Follow every part to what it hangs on."""
        names = [p.name for p in member.parts]
        layer = np.full(len(names), -1, dtype=np.intp)
        joints: list[Tied] = []
        for k, part in enumerate(member.parts):
            if part.material is None:
                continue
            host = names.index(part.place.host) if part.place.host in names else -1
            below = int(layer[host]) if host >= 0 and layer[host] >= 0 else 0
            if part.joined is None or not part.joined.soft:
                layer[k] = below
                continue
            layer[k] = len(joints) + 1
            places, spacing = _spread(part.start, part.end, part.joined.pitch)
            joints.append(Tied(k, host, int(layer[k]), below, part.start, part.end, places, spacing))
        return cls(member, layer, tuple(joints))

    @property
    def count(self) -> int:
        """Number of layers."""
        return len(self.joints) + 1

    def parts(self, layer: int) -> list[int]:
        """Numbers of the parts of a layer."""
        return np.flatnonzero(self.layer == layer).tolist()

    def standing(self, layer: int, works: frozenset[int]) -> int:
        """Return the layer itself, or the next one towards the root of which a part works."""
        while layer and not works.intersection(self.parts(layer)):
            layer = self.joints[layer - 1].lower
        return layer

    def at_level(self, works: frozenset[int], x: float, z: float) -> int:
        """Layer in which a level lies at x: on the face of two the first, between two the nearer [m]."""
        side = "left" if x >= self.member.length * (1.0 - 1e-12) else "right"
        placed = Geometry(self.member, works).place(np.array([x]), side)
        found: dict[int, float] = {}
        low, high = np.inf, -np.inf
        for part, outline in zip(placed.index, placed.outlines, strict=True):
            box = outline.bounds()
            bottom, top = float(box[1][0]), float(box[3][0])
            low, high = min(low, bottom), max(high, top)
            layer = int(self.layer[part])
            found[layer] = min(found.get(layer, np.inf), max(0.0, bottom - z, z - top))
        nearest = min(found.values())
        return min(k for k, away in found.items() if away <= nearest + TOUCHES * (high - low))

    def creep(self, j: int, of_part: Mapping[int, float]) -> float:
        """Creep factor of a joint by those of its two parts, where it is not given (EN 1995-1-1:2004, 2.3.2.2)."""
        given = self.member.parts[self.joints[j].part].joined
        assert given is not None
        if given.creep is not None:
            return given.creep
        one, other = (of_part.get(k, 0.0) for k in (self.joints[j].part, self.joints[j].host))
        return float(2.0 * np.sqrt(one * other)) if one > 0.0 and other > 0.0 else one + other

    def material_creep(self, own: Mapping[str, float]) -> dict[int, float]:
        """Creep factor of every part's material, or that of its own."""
        parts = enumerate(self.member.parts)
        return {
            k: own.get(p.name, self.member.material(p.material).creep or 0.0)
            for k, p in parts
            if p.material is not None
        }

    def stiffness(self, band: str) -> Array:
        """Short-term stiffness of every joint per length [N/m2], both copies of a pair counted, shape (J,)."""
        found = np.zeros(len(self.joints))
        for j, tied in enumerate(self.joints):
            part = self.member.parts[tied.part]
            joined = part.joined
            if joined is None or joined.apart:
                continue
            base = joined.stiffness if joined.per_length is None else joined.per_length
            if band != "nominal" and joined.band is not None:
                base = joined.band[band == "high"]
            share = 1.0 if joined.per_length is not None else joined.rows / (joined.pitch or 1.0)
            found[j] = (base or 0.0) * share * (1 + part.pair)
        return found


def _spread(start: float, end: float, pitch: float | None) -> tuple[tuple[float, ...], float]:
    """Places of fasteners, half a space from either end, and the pitch as given [m]."""
    if pitch is None:
        return (), 0.0
    n = max(1, round((end - start) / pitch))
    return tuple(start + (end - start) * (2 * i + 1) / (2 * n) for i in range(n)), pitch
