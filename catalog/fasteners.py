"""Slip moduli of fasteners: EN 1995-1-1:2004, Table 7.1, and the stud of EN 1994-1-1, A.3(4); from memory."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cache

from fishbelly.catalog.tables import UnknownName, folded, nearest_names, numbers, read_table

STEEL_OR_CONCRETE = 2.0
"""Factor on K_ser where timber is joined to steel or concrete: EN 1995-1-1:2004, 7.1(3)."""
ULTIMATE = 2.0 / 3.0
"""K_u over K_ser: EN 1995-1-1:2004, 2.2.2(2), (2.1)."""


@dataclass(frozen=True)
class Fastener:
    """A kind of fastener and how its slip modulus is found.

    Attributes
    ----------
    name : str
        ``"bolt"``, ``"nail"``, ``"split ring"`` …
    kind : str
        In the words of the trade.
    formula : str
        As the standard writes it, in N/mm, kg/m3 and mm.
    density_power, size_power, divisor : float
        K_ser = density^power size^power / divisor, in those units; nothing where it has a constant.
    constant : float or None
        Stiffness of one fastener where the standard gives one number [N/m].
    size : float or None
        A usual diameter, for examples [m].
    words : str
        What it is meant for.
    source, note : str
        Where it stands, and what to know before use.
    """

    name: str
    kind: str
    formula: str
    density_power: float
    size_power: float
    divisor: float
    constant: float | None
    size: float | None
    words: str
    source: str
    note: str


class UnknownFastener(UnknownName):
    """No fastener of that name is in the catalogue."""

    what = "fastener"


def _fastener(row: dict[str, str]) -> Fastener:
    value = numbers(row)
    return Fastener(
        name=row["fastener"],
        kind=row["kind"],
        formula=row["formula"],
        density_power=float(row["density power"] or 0.0),
        size_power=float(row["size power"] or 0.0),
        divisor=value.get("divisor", 1.0),
        constant=value.get("constant"),
        size=value.get("size"),
        words=row["words"],
        source=row["source"],
        note=row["note"],
    )


@cache
def fasteners() -> tuple[Fastener, ...]:
    """All fasteners of the catalogue."""
    return tuple(_fastener(row) for row in read_table("fasteners.csv"))


def find_fastener(name: str) -> Fastener:
    """Fastener by its name, in any case.

    Raises
    ------
    UnknownFastener
        When there is none; names the nearest.
    """
    for fastener in fasteners():
        if folded(fastener.name) == folded(name):
            return fastener
    raise UnknownFastener(name, nearest_names(name, tuple(f.name for f in fasteners())))


def slip_modulus(
    name: str, size: float, density: float, other_density: float | None = None, to_steel_or_concrete: bool = False
) -> float:
    """Slip modulus K_ser of one fastener and shear plane, for service loads.

    Parameters
    ----------
    name : str
        See `fasteners`.
    size : float
        Diameter of the fastener d, or of the connector d_c [m].
    density : float
        Mean density ρ_m of the timber [kg/m3].
    other_density : float, optional
        That of the second timber: then ρ_m is the root of the product of both (7.1(2)).
    to_steel_or_concrete : bool
        The timber is joined to steel or concrete: twice as much, by the timber's density alone (7.1(3)).

    Returns
    -------
    float
        K_ser [N/m].

    Raises
    ------
    UnknownFastener
        When there is none of that name.
    ValueError
        When size or density is not above zero, both a second timber and steel or concrete are named, or the
        fastener is one whose stiffness does not follow from a density.

    Examples
    --------
    >>> round(slip_modulus("bolt", 0.012, 420.0) / 1e3)
    4491
    """
    fastener = find_fastener(name)
    if fastener.constant is not None:
        raise ValueError(f"{fastener.name} is not a fastener of timber: {fastener.formula}")
    if to_steel_or_concrete and other_density is not None:
        raise ValueError("expected a second timber, or steel or concrete, got both")
    mean = density if other_density is None else math.sqrt(max(density * other_density, 0.0))
    if not (size > 0.0 and mean > 0.0):
        raise ValueError(f"expected a size and densities above 0, got {size} m and {mean} kg/m3")
    found = mean**fastener.density_power * (size * 1e3) ** fastener.size_power / fastener.divisor * 1e3
    return found * (STEEL_OR_CONCRETE if to_steel_or_concrete else 1.0)


def ultimate_slip_modulus(serviceability: float) -> float:
    """K_u = 2/3 K_ser, for ultimate limit states [N/m]: EN 1995-1-1:2004, 2.2.2(2), (2.1), from memory."""
    return ULTIMATE * serviceability
