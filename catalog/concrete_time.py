"""Creep and shrinkage of concrete with time: EN 1992-1-1:2004, 3.1.4 and Annex B, from memory.

Ages are in days, the one exception from SI units: the rule is written in days and nobody counts otherwise.
"""

import math
from dataclasses import dataclass
from itertools import pairwise

_CEMENT_POWER = {"S": -1.0, "N": 0.0, "R": 1.0}
_DRYING = {"S": (3.0, 0.13), "N": (4.0, 0.12), "R": (6.0, 0.11)}
_SIZE_FACTOR = ((0.1, 1.0), (0.2, 0.85), (0.3, 0.75), (0.5, 0.70))


@dataclass(frozen=True)
class Shrinkage:
    """Shrinkage strains, shortening positive.

    Attributes
    ----------
    drying : float
        Drying shrinkage ε_cd.
    autogenous : float
        Autogenous shrinkage ε_ca.
    """

    drying: float
    autogenous: float

    @property
    def total(self) -> float:
        """ε_cs = ε_cd + ε_ca (3.8)."""
        return self.drying + self.autogenous


def notional_size(area: float, perimeter: float) -> float:
    """h_0 = 2 A_c / u [m], Annex B (B.6).

    Parameters
    ----------
    area : float
        Area of the concrete section [m2].
    perimeter : float
        Length of its edge that is open to drying [m].

    Raises
    ------
    ValueError
        When one of them is not above zero.
    """
    if not (area > 0 and perimeter > 0):
        raise ValueError(f"expected an area and a perimeter above 0, got {area} m2 and {perimeter} m")
    return 2 * area / perimeter


def creep_coefficient(
    age: float, loaded_at: float, f_ck: float, humidity: float, size: float, cement: str = "N"
) -> float:
    """Creep coefficient φ(t, t_0), related to the tangent modulus 1.05 E_cm; Annex B.1, (B.1) to (B.9).

    Holds for normal-weight concrete under stress up to 0.45 f_ck(t_0), mean temperature 10 to 30 °C; the
    mean coefficient of variation of such predictions is about 20 % (3.1.4, note).

    Parameters
    ----------
    age : float
        Age of the concrete t [days]; ``math.inf`` for the final value.
    loaded_at : float
        Age at loading t_0 [days], above 0 and not above `age`.
    f_ck : float
        Characteristic cylinder strength [Pa], 1e6 to 90e6.
    humidity : float
        Relative humidity of the surroundings, a ratio above 0 and up to 1.
    size : float
        Notional size h_0 [m], see `notional_size`.
    cement : {"S", "N", "R"}
        Class of the cement.

    Returns
    -------
    float
        φ(t, t_0), without dimension.

    Raises
    ------
    ValueError
        When an argument is outside its range.

    Examples
    --------
    >>> round(creep_coefficient(math.inf, 28, 30e6, 0.5, 0.2), 2)
    2.37
    """
    _check(age, loaded_at, f_ck, humidity, size, cement)
    f_cm = f_ck / 1e6 + 8
    h_0, percent = size * 1e3, humidity * 100
    alpha_1, alpha_2, alpha_3 = (min(1.0, (35 / f_cm) ** power) for power in (0.7, 0.2, 0.5))
    phi_rh = (1 + alpha_1 * (1 - percent / 100) / (0.1 * h_0 ** (1 / 3))) * alpha_2
    adjusted = max(0.5, loaded_at * (9 / (2 + loaded_at**1.2) + 1) ** _CEMENT_POWER[cement])
    phi_0 = phi_rh * 16.8 / math.sqrt(f_cm) / (0.1 + adjusted**0.2)
    if math.isinf(age):
        return phi_0
    beta_h = min(1500 * alpha_3, 1.5 * (1 + (0.012 * percent) ** 18) * h_0 + 250 * alpha_3)
    under_load = age - loaded_at
    return phi_0 * (under_load / (beta_h + under_load)) ** 0.3


def shrinkage(
    age: float, drying_from: float, f_ck: float, humidity: float, size: float, cement: str = "N"
) -> Shrinkage:
    """Drying and autogenous shrinkage strain; 3.1.4 (6), (3.8) to (3.13), Annex B.2.

    Parameters
    ----------
    age : float
        Age of the concrete t [days]; ``math.inf`` for the final value.
    drying_from : float
        Age at the end of curing t_s [days], above 0 and not above `age`.
    f_ck : float
        Characteristic cylinder strength [Pa], 1e6 to 90e6.
    humidity : float
        Relative humidity of the surroundings, a ratio above 0 and up to 1.
    size : float
        Notional size h_0 [m]. Table 3.3 begins at 0.1 m; its first value holds below, too.
    cement : {"S", "N", "R"}
        Class of the cement.

    Returns
    -------
    Shrinkage
        Strains, shortening positive.

    Raises
    ------
    ValueError
        When an argument is outside its range.
    """
    _check(age, drying_from, f_ck, humidity, size, cement)
    strength = f_ck / 1e6
    drying, autogenous = 1.0, 1.0
    if math.isfinite(age):
        passed = age - drying_from
        drying = passed / (passed + 0.04 * math.sqrt((size * 1e3) ** 3))
        autogenous = 1 - math.exp(-0.2 * math.sqrt(age))
    return Shrinkage(
        drying=drying * _size_factor(size) * basic_drying_shrinkage(f_ck, humidity, cement),
        autogenous=autogenous * max(0.0, 2.5 * (strength - 10)) * 1e-6,
    )


def total_shrinkage(
    age: float, drying_from: float, f_ck: float, humidity: float, size: float, cement: str = "N"
) -> float:
    """Total shrinkage strain ε_cs, shortening positive; arguments and errors as of `shrinkage`."""
    return shrinkage(age, drying_from, f_ck, humidity, size, cement).total


def basic_drying_shrinkage(f_ck: float, humidity: float, cement: str = "N") -> float:
    """Nominal drying shrinkage ε_cd,0, Annex B.2 (B.11), (B.12); Table 3.2 has its values for class N.

    Parameters
    ----------
    f_ck : float
        Characteristic cylinder strength [Pa].
    humidity : float
        Relative humidity, a ratio up to 1.
    cement : {"S", "N", "R"}
        Class of the cement.

    Returns
    -------
    float
        Strain, shortening positive.

    Examples
    --------
    >>> round(1000 * basic_drying_shrinkage(20e6, 0.6), 2)
    0.49
    """
    first, second = _DRYING[cement]
    f_cm = f_ck / 1e6 + 8
    beta_rh = 1.55 * (1 - humidity**3)
    return 0.85 * (220 + 110 * first) * math.exp(-second * f_cm / 10) * 1e-6 * beta_rh


def _size_factor(size: float) -> float:
    """k_h of Table 3.3, straight between its values."""
    if size <= _SIZE_FACTOR[0][0]:
        return _SIZE_FACTOR[0][1]
    for (low, at_low), (high, at_high) in pairwise(_SIZE_FACTOR):
        if size <= high:
            return at_low + (at_high - at_low) * (size - low) / (high - low)
    return _SIZE_FACTOR[-1][1]


def _check(age: float, start: float, f_ck: float, humidity: float, size: float, cement: str) -> None:
    if not 0 < start <= age:
        raise ValueError(f"expected ages 0 < start <= age in days, got {start} and {age}")
    if not 1e6 <= f_ck <= 90e6:
        raise ValueError(f"expected a strength f_ck from 1e6 to 90e6 Pa, got {f_ck}")
    if not 0 < humidity <= 1:
        raise ValueError(f"expected a relative humidity as a ratio above 0 and up to 1, got {humidity}")
    if not size > 0:
        raise ValueError(f"expected a notional size above 0 m, got {size}")
    if cement not in _CEMENT_POWER:
        raise ValueError(f'expected cement class "S", "N" or "R", got "{cement}"')
