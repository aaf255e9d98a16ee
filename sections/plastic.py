"""Plastic moment of a section about its level axis, and the modulus of a section of one material.

Every part carries one stress of its own, the same in tension below the plastic neutral axis and in compression above
it; that axis is kept level and lies where the two halves balance. The forces come from level cuts, so that cuts,
overlaps and round edges count as they are. Theory: J. F. Baker, M. R. Horne and J. Heyman, The Steel Skeleton,
volume 2, Cambridge, 1956, chapter 1, from memory.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.chebyshev import Rule, rule
from fishbelly.sections.composition import Composition, Levels

Array = NDArray[np.float64]

_EDGE = 1e-13
"""Share of the total force that a slab has to carry to be one where the neutral axis can lie."""


@dataclass(frozen=True, eq=False)
class Plastic:
    """Plastic bending about the level axis at S stations, every field of shape (S,).

    Parameters
    ----------
    moment : ndarray
        Plastic moment without axial force [N m]; with stresses of 1 the plastic modulus [m3]. The same in sagging
        and in hogging.
    z : ndarray
        Level of the plastic neutral axis [m]; the middle of the gap where any level in it would do.
    force : ndarray
        Force of the part of the section on either side of it [N]; with stresses of 1 half the area [m2].
    """

    moment: Array
    z: Array
    force: Array


def plastic(section: Composition, stress: Array) -> Plastic:
    """Plastic moment for a level neutral axis.

    Parameters
    ----------
    section : Composition
        Parts and cuts at S stations.
    stress : ndarray, shape (P, S)
        Stress that each part yields at [Pa], zero or more; ones for the plastic modulus.

    Returns
    -------
    Plastic
        NaN where nothing carries.

    Notes
    -----
    With b(z) the width times the stress at level z: the integral of b above the axis equals that below, and
    M = integral of b |z - z0|. A section that is not symmetric about an upright line also has a moment about that
    line; it is left out.
    """
    levels, r = section.levels, rule(section.levels.z.shape[-1])
    # force per unit of s in each slab, s from -1 to 1
    b = np.einsum("ps,pskn->skn", stress, levels.widths.width) * levels.stretch
    reference = 0.5 * (levels.edges[:, :1] + levels.edges[:, -1:])
    arm = levels.z - reference[..., None]
    force, first = b @ r.weights, (b * arm) @ r.weights
    total = force.sum(axis=1)
    low = np.array([_level(b[s], force[s], total[s], levels, s, r, upward=True) for s in range(total.size)])
    high = np.array([_level(b[s], force[s], total[s], levels, s, r, upward=False) for s in range(total.size)])
    z = 0.5 * (low[:, 0] + high[:, 0])
    # below the upward root: whole slabs, and the share of the one it lies in
    below_force, below_first = np.zeros(total.size), np.zeros(total.size)
    for s in np.flatnonzero(total > 0.0):
        k, at = int(low[s, 1]), r.basis(low[s, 2:3])[0]
        below_force[s] = force[s, :k].sum() + at @ (r.integrate @ b[s, k])
        below_first[s] = first[s, :k].sum() + at @ (r.integrate @ (b[s, k] * arm[s, k]))
    lever = low[:, 0] - reference[:, 0]
    moment = first.sum(axis=1) - 2.0 * below_first - lever * (total - 2.0 * below_force)
    nothing = ~(total > 0.0)
    moment[nothing], z[nothing] = np.nan, np.nan
    return Plastic(moment, z, 0.5 * total)


def _level(b: Array, force: Array, total: float, levels: Levels, s: int, r: Rule, upward: bool) -> Array:
    """Level with half the force below it, its slab and its place s in there: the lowest such, or the highest."""
    if not total > 0.0:
        return np.array([np.nan, 0.0, 0.0])
    reached = np.cumsum(force)
    before = reached - force
    half, tiny = 0.5 * total, _EDGE * total
    carrying = force > tiny
    inside = carrying & ((reached >= half - tiny) if upward else (before <= half + tiny))
    k = int(np.flatnonzero(inside)[0 if upward else -1])
    at = _root(r, r.integrate @ b[k], half - before[k], force[k])
    bottom, top = levels.edges[s, k], levels.edges[s, k + 1]
    # straight slabs have constant stretch; in curved ones a level is the sine of its place (see Composition.levels)
    even = bool(np.ptp(levels.stretch[s, k]) <= 1e-12 * abs(levels.stretch[s, k, 0]))
    shape = at if even else np.sin(0.5 * np.pi * at)
    return np.array([0.5 * (bottom + top) + 0.5 * (top - bottom) * shape, k, at])


def _root(r: Rule, cumulated: Array, wanted: float, whole: float) -> float:
    """Place in a slab, -1 to 1, up to which it carries the wanted force; halved until round-off."""
    if wanted <= 0.0:
        return -1.0
    if wanted >= whole:
        return 1.0
    low, high = -1.0, 1.0
    for _ in range(60):
        middle = 0.5 * (low + high)
        if float(r.basis(np.array([middle]))[0] @ cumulated) < wanted:
            low = middle
        else:
            high = middle
    return 0.5 * (low + high)
