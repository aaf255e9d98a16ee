"""Members, shapes, supports and tolerances that several test files use, and reference integrals of 30 digits."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from typing import Any

import mpmath as mp

from fishbelly.member.description import Combination, Material, Member, Part, Placing, Shape, Support
from fishbelly.member.laws import Law, constant
from fishbelly.member.loads import Distributed
from fishbelly.member.results import deflect

mp.mp.dps = 30

INF = math.inf

TAPER = 1e-12
"""Relative; promised for tapers to 1:4 against 30 digits."""
PROMISED = 1e-10
"""Relative; promised for every deflection, slope and reaction."""
CLOSED = 1e-12
"""Relative; a closed form in double precision against a section that needs no quadrature."""
ROUND_OFF = 1e-9
"""Of the largest value of its kind; for identities between two runs on different grids. The grid resolves a
section to 1e-13 and the support equations of stiff and soft stretches lose up to four digits on top."""

STEEL = Material("steel", 210e9, G=81e9, density=7850.0, expansion=12e-6)
TIMBER = Material("timber", 11e9, G=0.69e9, density=420.0, creep=0.6, expansion=5e-6)
CONCRETE = Material("concrete", 33e9, poisson=0.2, density=2500.0, creep=2.0, expansion=10e-6)


def part(
    name: str,
    kind: str,
    end: float,
    *,
    start: float = 0.0,
    material: str | None = "steel",
    place: Placing | None = None,
    **dimensions: float | Law,
) -> Part:
    """A part of a named outline; dimensions in m or laws, what an outline may leave out filled in with zero."""
    rest: dict[str, float] = {
        "I": {"radius": 0.0},
        "tee": {"radius": 0.0},
        "channel": {"radius": 0.0, "toe_radius": 0.0, "slope": 0.0, "flange_at": 0.0},
        "angle": {"radius": 0.0, "toe_radius": 0.0},
        "box": {"radius": 0.0, "inner_radius": 0.0},
        "regular polygon": {"wall": 0.0},
    }.get(kind, {})
    values = {k: v if isinstance(v, Law) else constant(float(v)) for k, v in {**rest, **dimensions}.items()}
    return Part(name, material, Shape(kind, values), start, end, place or Placing())


def pin(name: str, at: float, **more: Any) -> Support:
    """Hold down, across and along."""
    return Support(name, at, **{"down": INF, "across": INF, "along": INF} | more)


def roller(name: str, at: float, **more: Any) -> Support:
    """Hold down and across."""
    return Support(name, at, **{"down": INF, "across": INF} | more)


def fixed(name: str, at: float, **more: Any) -> Support:
    """Hold everything; along only where asked for."""
    held = {"down": INF, "rotation": INF, "across": INF, "rotation_across": INF}
    return Support(name, at, **held | more)


def simple(length: float) -> tuple[Support, ...]:
    """A pin at the left end and a roller at the right."""
    return pin("A", 0.0), roller("B", length)


def cantilever() -> tuple[Support, ...]:
    """Fixed at the left end."""
    return (fixed("A", 0.0, along=INF),)


def uniform(q: float, end: float, start: float = 0.0, **more: Any) -> Distributed:
    """A uniform load [N/m]."""
    return Distributed(((start, q), (end, q)), **more)


def run(member: Member, *at: float, combination: int = 0) -> dict[str, Any]:
    """One combination of the results of a member."""
    return deflect(member, at=at or None)["combinations"][combination]


def station(result: dict[str, Any], x: float, side: str = "right") -> dict[str, Any]:
    """The station at x, on the wanted side of a jump."""
    found = [s for s in result["stations"] if abs(s["x"] - x) < 1e-9]
    assert found, f"no station at {x}"
    return found[-1] if side == "right" else found[0]


def reaction(result: dict[str, Any], name: str, way: str = "vertical") -> float:
    """Force of a support on the member."""
    return next(s[way] for s in result["supports"] if s["name"] == name)


def case(name: str, **factors: float) -> Combination:
    """A combination of load cases by name."""
    return Combination(name, factors)


def check_close(found: float, expected: Any, tolerance: float, size: Any = None) -> None:
    """Assert that a number agrees, relative to itself or to a size of its kind."""
    scale = abs(float(size if size is not None else expected))
    gap = abs(float(mp.mpf(found) - mp.mpf(expected)))
    assert gap <= tolerance * scale, f"{found!r} instead of {float(expected)!r}: {gap / scale:.2e} > {tolerance:.0e}"


Field = Callable[[Any], Any]


def integral(f: Field, places: Sequence[Any]) -> Any:
    """Integral over stretches on each of which f is smooth, to 30 digits."""
    return mp.quad(f, sorted({mp.mpf(p) for p in places}))


def work(one: Field, other: Field, stiffness: Field, places: Sequence[Any]) -> Any:
    """Integral of one * other / stiffness: work of a force field on the strains of another."""
    return integral(lambda x: one(x) * other(x) / stiffness(x), places)


def simple_moment(q: float, length: float) -> Field:
    """Bending moment of a simple beam under a uniform load."""
    return lambda x: mp.mpf(q) * x * (length - x) / 2


def unit_moment(at: float, length: float) -> Field:
    """Bending moment of a simple beam under a unit force."""
    a, length = mp.mpf(at), mp.mpf(length)
    return lambda x: x * (length - a) / length if x <= a else a * (length - x) / length


def unit_shear(at: float, length: float) -> Field:
    """Shear force of a simple beam under a unit force."""
    a, length = mp.mpf(at), mp.mpf(length)
    return lambda x: (length - a) / length if x <= a else -a / length


def line(x0: float, v0: float, x1: float, v1: float) -> Field:
    """A straight line through two points, outside them too."""
    x0, v0, x1, v1 = (mp.mpf(v) for v in (x0, v0, x1, v1))
    return lambda x: v0 + (v1 - v0) * (x - x0) / (x1 - x0)
