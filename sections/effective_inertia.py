"""Cracked reinforced concrete by the formulas of codes: depth in compression, effective second moment, stiffening.

Sources: EN 1992-1-1:2004, 7.4.3; ACI 318-14, 24.2.3.5 (D. E. Branson 1965); ACI 318-19, 24.2.3.5 (P. H. Bischoff
2005); PCA Notes on ACI 318, tables of gross and cracked moment of inertia. Clause numbers from memory.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]

EN, ACI_14, ACI_19 = "EN 1992-1-1", "ACI 318-14", "ACI 318-19"
RULES = (EN, ACI_14, ACI_19)
"""Names by which a job asks for a rule of tension stiffening."""

CRACKING_SHARE = {EN: 1.0, ACI_14: 1.0, ACI_19: 2.0 / 3.0}
"""Share of the cracking moment that a rule reckons with (ACI 318-19, 24.2.3.5: 2/3, for restraint)."""

BETA = {"short": 1.0, "sustained": 0.5}
"""EN 1992-1-1, 7.4.3(3), (7.19): a single short-term load, sustained loads or many repetitions."""


def compression_depth(
    width: float, depth: float, n_area: float, top_area: float = 0.0, top_depth: float = 0.0
) -> float:
    """Depth in compression of a cracked rectangular section under pure bending.

    Parameters
    ----------
    width, depth : float
        Width of the section and depth of the tension bars, any unit of length.
    n_area : float
        Area of the tension bars times n = E_s / E_c.
    top_area : float
        Area of the compression bars times (n - 1).
    top_depth : float
        Their depth.

    Returns
    -------
    float
        kd = (sqrt(2 d B (1 + r d'/d) + (1 + r)^2) - (1 + r)) / B with B = b / (n A_s), r = (n - 1) A_s' / (n A_s)
        (PCA Notes on ACI 318, Table 10-2).

    Examples
    --------
    >>> round(compression_depth(14.0, 17.0, 8 * 1.76), 4)
    4.9277
    """
    B, r = width / n_area, top_area / n_area
    return float((np.sqrt(2.0 * depth * B * (1.0 + r * top_depth / depth) + (1.0 + r) ** 2) - (1.0 + r)) / B)


def cracked_inertia(width: float, depth: float, n_area: float, top_area: float = 0.0, top_depth: float = 0.0) -> float:
    """Second moment of the cracked rectangular section, parameters as in `compression_depth`.

    I_cr = b (kd)^3 / 3 + n A_s (d - kd)^2 + (n - 1) A_s' (kd - d')^2 (PCA Notes on ACI 318, Table 10-2).
    """
    kd = compression_depth(width, depth, n_area, top_area, top_depth)
    return width * kd**3 / 3.0 + n_area * (depth - kd) ** 2 + top_area * (kd - top_depth) ** 2


def branson(I_gross: ArrayLike, I_cracked: ArrayLike, ratio: ArrayLike) -> Array:
    """Effective second moment (M_cr/M_a)^3 I_g + (1 - (M_cr/M_a)^3) I_cr, at most I_g.

    Parameters
    ----------
    I_gross, I_cracked : array_like
        Second moments of the gross and of the cracked section.
    ratio : array_like
        M_cr / M_a, zero or more.

    Notes
    -----
    ACI 318-14, 24.2.3.5, equation (24.2.3.5a).
    """
    cube = np.minimum(np.asarray(ratio, dtype=float), 1.0) ** 3
    I_g, I_cr = np.asarray(I_gross, dtype=float), np.asarray(I_cracked, dtype=float)
    return np.asarray(np.minimum(cube * I_g + (1.0 - cube) * I_cr, I_g))


def bischoff(I_gross: ArrayLike, I_cracked: ArrayLike, ratio: ArrayLike) -> Array:
    """Effective second moment I_cr / (1 - (1 - I_cr/I_g) (M_cr/M_a)^2), I_g where M_a does not pass M_cr.

    Parameters
    ----------
    I_gross, I_cracked : array_like
        Second moments of the gross and of the cracked section.
    ratio : array_like
        M_cr / M_a, zero or more; ACI 318-19 takes 2/3 of the cracking moment here.

    Notes
    -----
    ACI 318-19, 24.2.3.5, Table 24.2.3.5.
    """
    square = np.minimum(np.asarray(ratio, dtype=float), 1.0) ** 2
    I_g, I_cr = np.asarray(I_gross, dtype=float), np.asarray(I_cracked, dtype=float)
    return np.asarray(np.minimum(I_cr / (1.0 - (1.0 - I_cr / I_g) * square), I_g))


def effective_inertia(rule: str, I_gross: ArrayLike, I_cracked: ArrayLike, ratio: ArrayLike) -> Array:
    """Effective second moment by the rule's name; `ratio` is M_cr / M_a with the whole cracking moment.

    Raises
    ------
    KeyError
        When the rule has no effective second moment.
    """
    form = {ACI_14: branson, ACI_19: bischoff}[rule]
    return form(I_gross, I_cracked, np.asarray(ratio, dtype=float) * CRACKING_SHARE[rule])


def distribution(ratio: ArrayLike, beta: float) -> Array:
    """Share of the cracked state, zeta = 1 - beta (sigma_sr / sigma_s)^2, between 0 and 1.

    Parameters
    ----------
    ratio : array_like
        sigma_sr / sigma_s, for bending M_cr / M, for tension N_cr / N.
    beta : float
        1 for a single short-term load, 0.5 for sustained or repeated ones.

    Notes
    -----
    EN 1992-1-1:2004, 7.4.3(3), (7.19). At the very load that cracks it zeta is 1 - beta.

    Examples
    --------
    >>> float(distribution(0.5, 0.5)), float(distribution(0.5, 1.0))
    (0.875, 0.75)
    """
    return np.asarray(np.clip(1.0 - beta * np.asarray(ratio, dtype=float) ** 2, 0.0, 1.0))


@dataclass(frozen=True)
class Stiffening:
    """A rule of tension stiffening as a share of the cracked state at one section.

    Parameters
    ----------
    rule : str
        One of `RULES`.
    sustained : bool
        Whether loads last or repeat; only EN 1992-1-1 asks.
    """

    rule: str
    sustained: bool = False

    @property
    def level(self) -> float:
        """Tension over the stress at which the section cracks, from which on it counts as cracked."""
        return CRACKING_SHARE[self.rule]

    @property
    def beta(self) -> float:
        """Factor of (M_cr / M)^2 for the rules that have the form of EN 1992-1-1."""
        if self.rule == EN:
            return BETA["sustained" if self.sustained else "short"]
        return self.level**2

    @property
    def starts_at(self) -> float:
        """Tension over the stress at which it cracks, from which on zeta is above 0 in a section already cracked."""
        return self.level if self.rule == ACI_14 else float(np.sqrt(self.beta))

    def zeta(self, ratio: ArrayLike, growth: ArrayLike) -> Array:
        """Share of the cracked state.

        Parameters
        ----------
        ratio : array_like
            M_cr / M, the whole cracking moment.
        growth : array_like
            Curvature of the cracked over that of the uncracked section under the same forces, 1 or more; asked for
            by Branson's form alone, where 1 / I_e = (1 - zeta) / I_g + zeta / I_cr.
        """
        if self.rule != ACI_14:
            return distribution(ratio, self.beta)
        q = np.maximum(np.asarray(growth, dtype=float), 1.0)
        cube = np.minimum(np.asarray(ratio, dtype=float) * self.level, 1.0) ** 3
        # (1/I_e - 1/I_g) / (1/I_cr - 1/I_g) with I_e / I_cr = 1 + (q - 1) cube; the limit for q = 1 is 1 - cube
        return np.asarray((1.0 - cube) / (1.0 + (q - 1.0) * cube))
