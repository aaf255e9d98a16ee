"""Shear flexibility of some of the parts of a member along its grid: what remains when others go."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.geometry import Geometry
from fishbelly.member.moduli import Moduli
from fishbelly.member.profile import Profile, group_places
from fishbelly.member.section_law import SLIDE_SIGNS
from fishbelly.member.shear_along import ShearAlong

Array = NDArray[np.float64]


def shear_of_parts(profile: Profile, parts: frozenset[int], moduli: Moduli) -> Array:
    """Shear angle by shear force of some parts, as `ElasticLaw.slide` has it, at the grid points.

    Parameters
    ----------
    profile : Profile
        The grid.
    parts : frozenset of int
        The parts, those that cut counted.
    moduli : Moduli
        Set of moduli.

    Returns
    -------
    ndarray, shape (3, K, n)
    """
    member, x = profile.member, profile.panels.x
    geometry = Geometry(member, parts)
    flat = x.ravel()
    whole = np.empty(flat.size)
    for g in group_places(geometry, x, 0.5 * (profile.panels.a + profile.panels.b), 0):
        whole[g.rows] = (g.modulus(moduli.G) * g.composition.moments.area).sum(axis=0)
    found = ShearAlong(geometry).coefficients(flat, flat, moduli.E, moduli.G) / whole
    return np.asarray(SLIDE_SIGNS[:, :, None] * found.reshape(3, *x.shape))
