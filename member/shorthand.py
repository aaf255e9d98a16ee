"""Short names for what a member is most often made of, for use from Python; SI units throughout."""

from __future__ import annotations

import math

from fishbelly.member.description import Placing, Shape, Support
from fishbelly.member.laws import Law, constant
from fishbelly.member.loads import Distributed


def rectangle(width: Law | float, depth: Law | float) -> Shape:
    """Rectangle, width and depth [m], each a number or a law along x."""
    return Shape("rectangle", {"width": _law(width), "depth": _law(depth)})


def _law(value: Law | float) -> Law:
    return value if isinstance(value, Law) else constant(float(value))


def pin(at: float, name: str | None = None) -> Support:
    """Pin: holds down, up, sideways and along [m]."""
    return Support(name or f"pin at {at:g} m", at, down=math.inf, along=math.inf, across=math.inf)


def roller(at: float, name: str | None = None) -> Support:
    """Roller: holds down, up and sideways [m]."""
    return Support(name or f"roller at {at:g} m", at, down=math.inf, across=math.inf)


def fixed(at: float, name: str | None = None) -> Support:
    """Fixed end: holds everything [m]."""
    everything = dict.fromkeys(("down", "along", "across", "rotation", "rotation_across"), math.inf)
    return Support(name or f"fixed at {at:g} m", at, **everything)  # type: ignore[arg-type]


def uniform(value: float, start: float, end: float, case: str = "load", direction: str = "down") -> Distributed:
    """Uniform load [N/m] from start to end [m]."""
    return Distributed(((start, value), (end, value)), case, direction)


def under(host: str) -> Placing:
    """Under another part, middle under middle."""
    return Placing("under", host)


def over(host: str) -> Placing:
    """Over another part, middle over middle."""
    return Placing("over", host)
