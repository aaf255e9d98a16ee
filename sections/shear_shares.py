"""How parts that stand rigidly in one section share its shear force: by the shear stress on every level.

On a level the shear angle is taken as one value, so that each part takes the flow as G times its width. Source:
D. J. Jourawski's shear formula, as in S. Timoshenko, Strength of Materials I, 3rd ed., van Nostrand, 1955, art. 66.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.chebyshev import rule
from fishbelly.sections.composition import Levels
from fishbelly.sections.stiffness import SectionStiffness

Array = NDArray[np.float64]


def shear_shares(levels: Levels, E: Array, G: Array, stiffness: SectionStiffness) -> Array:
    """Share of every part in a shear force along z.

    Parameters
    ----------
    levels : Levels
        Level cuts of the composition.
    E, G : ndarray, shape (P, S)
        Moduli of the parts [Pa].
    stiffness : SectionStiffness
        The section's bending stiffness.

    Returns
    -------
    ndarray, shape (P, S)
        Shares; their sum is 1 where the parts touch one another, less where levels are empty.
    """
    w, r = levels.widths, rule(levels.z.shape[-1])
    ea = np.einsum("ps,pskn->skn", E, w.width)
    ey = np.einsum("ps,pskn->skn", E, w.first)
    stiff = G[:, :, None, None] * w.width
    ga = stiff.sum(axis=0)
    k_y, k_z = stiffness.curvatures(np.ones(ea.shape[0]), np.zeros(ea.shape[0]))
    change = k_y[:, None, None] * (levels.z - stiffness.z_c[:, None, None]) * ea
    change = change + k_z[:, None, None] * (ey - stiffness.y_c[:, None, None] * ea)
    density = change * levels.stretch
    whole = density @ r.weights
    # flow through a level from the stresses below it; tension at the bottom grows with a positive shear force
    flow = -((np.cumsum(whole, axis=1) - whole)[..., None] + density @ r.integrate.T)
    angle = np.where(ga > 0.0, flow, 0.0) / np.where(ga > 0.0, ga, 1.0)
    return np.asarray((stiff * angle * levels.stretch @ r.weights).sum(axis=2))
