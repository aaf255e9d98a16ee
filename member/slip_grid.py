"""Borders that the grid needs where parts slip: boundary layers at the ends of joints, and single fasteners.

Near an end of a joint, a step of the section or a force, what the joint carries fades as exp(-omega d) with the
distance d. Panels grow from 4 / omega at every border inwards, each as long as its distance from it, so that every
rate of fading that a member of several layers has is resolved.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.moduli import Moduli
from fishbelly.member.slip_law import SlipLaw
from fishbelly.member.slip_layers import Layers

Array = NDArray[np.float64]

RATE = 4.0
"""Rate of fading times length of a panel that 17 points resolve to 1e-13 (from the Chebyshev series of exp)."""
PITCH_MATTERS = 0.35
"""Rate of fading times pitch above which single fasteners are more than 1 % softer than the smeared joint: a row of
springs at a distance p fades at omega' with cosh(omega' p) = 1 + (omega p)² / 2, k' = k (1 - (omega p)² / 12 ...)."""


def fading(law: SlipLaw) -> Array:
    """Largest rate omega at which a force in the joints fades, panel by panel [1/m], shape (K,).

    omega² = sum of k times strain difference by unit force: an upper bound where several joints lie over each other.
    """
    product = np.einsum("jkn,knjj->kn", law.k, law.transfer.C)
    return np.asarray(np.sqrt(product.max(axis=-1)))


def joint_fading(law: SlipLaw, stiffness: Array) -> Array:
    """Largest rate omega of each joint by itself, for stiffnesses (J,) per length [1/m], shape (J,)."""
    own = np.einsum("knjj->jkn", law.transfer.C).max(axis=(1, 2))
    return np.asarray(np.sqrt(own * stiffness))


def pitch_matters(law: SlipLaw, stiffness: Array) -> NDArray[np.bool_]:
    """Whether the fasteners of each joint stand so far apart that they have to be taken one by one, shape (J,)."""
    pitch = np.array([j.pitch or 0.0 for j in law.layers.joints])
    return np.asarray(joint_fading(law, stiffness) * pitch > PITCH_MATTERS)


def slip_borders(law: SlipLaw, rate: Array | None = None) -> tuple[float, ...]:
    """Further borders of the grid [m] so that what joints carry is resolved.

    Parameters
    ----------
    law : SlipLaw
        The law on the grid as the member asks for it, with the stiffest joints to be reckoned with.
    rate : ndarray, shape (K,), optional
        Rate of fading in each panel [1/m]; default that of the law.
    """
    omega = fading(law) if rate is None else rate
    found: list[float] = []
    for a, b, w in zip(law.panels.a, law.panels.b, omega, strict=True):
        found += _cuts(float(a), float(b), float(w))
    return tuple(found)


def _cuts(a: float, b: float, omega: float) -> list[float]:
    """Places that divide a panel: evenly while that takes few, else growing from both ends."""
    h = b - a
    even = int(np.ceil(omega * h / RATE))
    if even <= 1:
        return []
    if even <= 8:
        return [a + h * k / even for k in range(1, even)]
    steps = []
    d = RATE / omega
    while d < 0.5 * h:
        steps.append(d)
        d *= 2.0
    return [*(a + d for d in steps), *(b - d for d in steps[::-1])]


def fastener_borders(layers: Layers, which: NDArray[np.bool_]) -> tuple[float, ...]:
    """Places of the fasteners of some joints, as further borders of the grid [m]."""
    return tuple(x for joint, wanted in zip(layers.joints, which, strict=True) if wanted for x in joint.places())


def fastener_springs(frame: Frame, layers: Layers, stiffness: Array, which: NDArray[np.bool_]) -> tuple[Array, Array]:
    """Replace the smeared stiffness of some joints by single fasteners.

    Parameters
    ----------
    frame : Frame
        The grid, whose borders hold the fasteners (`fastener_borders`).
    layers : Layers
        Layers and joints.
    stiffness : ndarray, shape (J,)
        Stiffness of every joint per length [N/m2].
    which : ndarray of bool, shape (J,)
        Joints whose fasteners are taken one by one.

    Returns
    -------
    smeared : ndarray, shape (J,)
        What is left per length [N/m2].
    springs : ndarray, shape (K + 1, J)
        Stiffness at the borders, of all rows together [N/m].
    """
    panels = frame.profile.panels
    springs = np.zeros((panels.count + 1, len(layers.joints)))
    for j, joint in enumerate(layers.joints):
        if which[j] and joint.pitch is not None:
            for x in joint.places():
                springs[panels.border(float(x)), j] += stiffness[j] * joint.pitch
    return np.where(which, 0.0, stiffness), springs


def fine_borders(
    frame: Frame, moduli: Moduli, stiffness: Array, discrete: NDArray[np.bool_] | None = None
) -> tuple[float, ...]:
    """Find all further borders that a frame needs.

    Parameters
    ----------
    frame : Frame
        The grid as the member asks for it.
    moduli : Moduli
        Set of moduli; the softest parts ask for most.
    stiffness : ndarray, shape (J,)
        Stiffness of every joint per length [N/m2], the largest to be reckoned with.
    discrete : ndarray of bool, shape (J,), optional
        Joints whose fasteners are taken one by one.

    Returns
    -------
    tuple of float
        Places [m], for `build_profile(member, more)`.
    """
    law = SlipLaw.of(frame, moduli, stiffness, 1, False)
    which = np.zeros(len(stiffness), dtype=bool) if discrete is None else discrete
    return (*slip_borders(law), *fastener_borders(law.layers, which))
