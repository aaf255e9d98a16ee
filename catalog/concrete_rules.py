"""Stiffness of concrete by rules of the Americas: ACI 318-19 and AASHTO LRFD, from memory.

Strengths are those of cylinders. The rules are written in psi; they are taken so, and turned into SI exactly.
"""

from __future__ import annotations

import math
from itertools import pairwise

_PSI = 0.45359237 * 9.80665 / 0.0254**2
_KSI = 1e3 * _PSI
_POUND_PER_CUBIC_FOOT = 0.45359237 / 0.3048**3

_TIME = ((3.0, 1.0), (6.0, 1.2), (12.0, 1.4), (60.0, 2.0))
"""Duration of the load [months] and time factor ξ: ACI 318-19, Table 24.2.4.1.3."""

_RATIOS = ((2.4, 10), (2.9, 9), (3.6, 8), (4.6, 7), (6.0, 6))
"""Least strength [ksi] and modular ratio: AASHTO LRFD, C6.10.1.1.1b."""

PERMANENT = 3.0
"""Factor on n for permanent loads on the composite section: AASHTO LRFD, 6.10.1.1.1b."""


def aci_modulus(strength: float, density: float | None = None) -> float:
    """Modulus of elasticity E_c of concrete: ACI 318-19, 19.2.2.1.

    Parameters
    ----------
    strength : float
        Specified compressive strength f'c [Pa].
    density : float, optional
        Of the concrete [kg/m3], 90 to 160 lb/ft3: E_c = w^1.5 33 sqrt(f'c). Left out: normal weight,
        E_c = 57 000 sqrt(f'c); psi and lb/ft3.

    Returns
    -------
    float
        E_c [Pa].

    Raises
    ------
    ValueError
        When strength is not above zero, or density outside the rule.

    Examples
    --------
    >>> round(aci_modulus(4000 * 6894.757293168361) / 6894757.293168361)
    3605
    """
    root = math.sqrt(_psi(strength))
    if density is None:
        return 57e3 * root * _PSI
    weight = density / _POUND_PER_CUBIC_FOOT
    if not 90.0 - 1e-9 <= weight <= 160.0 + 1e-9:
        raise ValueError(f"expected a density of 90 to 160 lb/ft3, got {weight:.4g} lb/ft3")
    return weight**1.5 * 33.0 * root * _PSI


def aci_rupture(strength: float, lightweight: float = 1.0) -> float:
    """Modulus of rupture f_r = 7.5 λ sqrt(f'c) [psi]: ACI 318-19, 19.2.3.1.

    Parameters
    ----------
    strength : float
        Specified compressive strength f'c [Pa].
    lightweight : float
        λ: 1 for normal weight, down to 0.75 (19.2.4).

    Returns
    -------
    float
        Tensile stress in bending at which it cracks [Pa].

    Raises
    ------
    ValueError
        When strength is not above zero, or λ outside 0.75 to 1.
    """
    if not 0.75 <= lightweight <= 1.0:
        raise ValueError(f"expected a factor of lightweight concrete from 0.75 to 1, got {lightweight}")
    return 7.5 * lightweight * math.sqrt(_psi(strength)) * _PSI


def aci_long_term(months: float, compression_steel: float = 0.0) -> float:
    """Factor λ_Δ of the additional deflection under sustained load: ACI 318-19, 24.2.4.1.1 and 24.2.4.1.3.

    Parameters
    ----------
    months : float
        How long the load lasts: at least 3. Straight between the durations of the table (common practice), the
        factor of 5 years from there on.
    compression_steel : float
        Ratio ρ' of the steel in compression, A_s' / (b d), at midspan, of cantilevers at the support.

    Returns
    -------
    float
        λ_Δ = ξ / (1 + 50 ρ').

    Raises
    ------
    ValueError
        When the load lasts less than three months, or the ratio is below zero.
    """
    if not months >= _TIME[0][0]:
        raise ValueError(f"expected a load of 3 months or more, got {months:g} months")
    if not compression_steel >= 0.0:
        raise ValueError(f"expected a ratio of steel of 0 or more, got {compression_steel:g}")
    factor = _TIME[-1][1]
    for (start, low), (end, high) in pairwise(_TIME):
        if months <= end:
            factor = low + (high - low) * (months - start) / (end - start)
            break
    return factor / (1.0 + 50.0 * compression_steel)


def aashto_modular_ratio(strength: float) -> int:
    """Short-term modular ratio n of steel to normal-weight concrete: AASHTO LRFD, C6.10.1.1.1b.

    Parameters
    ----------
    strength : float
        Specified compressive strength f'c [Pa], 2.4 ksi at least. For permanent loads n is multiplied by `PERMANENT`.

    Raises
    ------
    ValueError
        When the strength is less.
    """
    found = [n for least, n in _RATIOS if strength >= least * _KSI * (1.0 - 1e-9)]
    if not found:
        raise ValueError(f"expected a strength of at least 2.4 ksi, got {strength / _KSI:.4g} ksi")
    return found[-1]


def _psi(strength: float) -> float:
    if not strength > 0.0:
        raise ValueError(f"expected a strength above 0, got {strength:g} Pa")
    return strength / _PSI
