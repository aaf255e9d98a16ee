"""Kinds of load, each a frozen description in SI units.

Transverse loads act downwards when positive, ``direction`` "up" reverses them and "across" turns them to +y.
On an inclined member they act square to it unless `per` says "plan" or "slope": then vertically, per plan
length or per length along the member.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field


@dataclass(frozen=True)
class SelfWeight:
    """Weight of the parts from area and density; `parts` names exactly those, None all that are there."""

    case: str = "load"
    factor: float = 1.0
    parts: tuple[str, ...] | None = None


@dataclass(frozen=True)
class Distributed:
    """A load along the member, straight between stations (x [m], force per length [N/m]), nothing outside.

    The same x twice is a step. `pattern`: each span it covers may be loaded or not.
    """

    stations: tuple[tuple[float, float], ...]
    case: str = "load"
    direction: str = "down"
    per: str | None = None
    pattern: bool = False


@dataclass(frozen=True)
class Point:
    """A force [N] at x [m]."""

    at: float
    value: float
    case: str = "load"
    direction: str = "down"
    per: str | None = None
    pattern: bool = False


@dataclass(frozen=True)
class Couple:
    """A couple [N m] at x [m], positive turning clockwise in the elevation."""

    at: float
    value: float
    case: str = "load"


@dataclass(frozen=True)
class Axial:
    """A force along the member [N], positive towards +x, at x [m] and at a level of the section."""

    at: float
    value: float
    case: str = "load"
    level: str | float = "centroid"


@dataclass(frozen=True)
class Temperature:
    """A temperature rise [K]: straight between the section's top and bottom, or by part."""

    start: float
    end: float
    top: float = 0.0
    bottom: float = 0.0
    parts: Mapping[str, float] | None = field(default=None)
    case: str = "load"


@dataclass(frozen=True)
class Shrinkage:
    """A free shortening of one part (strain, positive shortens), with its own creep where given."""

    part: str
    strain: float
    start: float
    end: float
    creep: float | None = None
    case: str = "load"


@dataclass(frozen=True)
class Prestress:
    """A tension [N], or a strain, put into one part as it is fixed, before the rest shortens."""

    part: str
    force: float | None = None
    strain: float | None = None
    case: str = "load"


Load = SelfWeight | Distributed | Point | Couple | Axial | Temperature | Shrinkage | Prestress
