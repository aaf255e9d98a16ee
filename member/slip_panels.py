"""Joints that slip inside one panel: Chebyshev collocation of flow and slip, what goes in to what comes out.

With G the axial force carried beyond a joint and s its slip (part against host, along x),

    dG/dx = k (s - s0) + dP/dx,    ds/dx = C G + g

where k is the stiffness of the joint, s0 a slip of its own, P an axial force put in on the way, C the strain
difference of the two layers by G and g that by all other forces. A panel takes G at its left end and s at its right
end and gives G at the right and s at the left: these are integral equations whose operator is one plus a positive
one for any k from nothing to rigid.

Source of the equations: N. M. Newmark, C. P. Siess, I. M. Viest, Tests and analysis of composite beams with
incomplete interaction, Proc. Soc. Exp. Stress Analysis 9 (1951) 75-92; collocation by integrals: L. Greengard, SIAM J.
Numer. Anal. 28 (1991) 1071-1080. Both from memory.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.panels import Panels

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Inside:
    """Fields in all panels under R sets of forces, shapes (K, n, J, R): force beyond each joint and its slip."""

    force: Array
    slip: Array


@dataclass(frozen=True, eq=False)
class Transfer:
    """What every panel makes of forces and slips at its ends.

    Parameters
    ----------
    C : ndarray, shape (K, n, J, J)
        Strain difference by unit force beyond the joints [1/N]; rows and columns of joints that are not there zero.
    k : ndarray, shape (K, n, J)
        Stiffness of the joints [N/m2].
    ahead, back : ndarray, shape (K, n, n)
        Integrals from the left end to each point, and from each point to the right end [m].
    whole : ndarray, shape (K, n)
        Integral over the panel [m].
    matrix, inverse : ndarray, shape (K, nJ, nJ)
        Collocated equations for s, and their inverse.
    GG, Gs, sG, ss : ndarray, shape (K, J, J)
        G at the right end by G at the left and by s at the right; s at the left by the same two.
    """

    C: Array
    k: Array
    ahead: Array
    back: Array
    whole: Array
    matrix: Array
    inverse: Array
    GG: Array
    Gs: Array
    sG: Array
    ss: Array

    @classmethod
    def of(cls, panels: Panels, C: Array, k: Array) -> Transfer:
        """Set up the panels."""
        K, n, J = k.shape
        stretch = panels.stretch[:, None, :]
        ahead = panels.rule.integrate * stretch
        back = (panels.rule.weights - panels.rule.integrate) * stretch
        whole = panels.rule.weights * panels.stretch
        # s + back C ahead k s = ...
        through = back[:, :, :, None, None] * C[:, None]
        flow = ahead[:, :, None, :] * np.moveaxis(k, 2, 1)[:, None]
        matrix = through.transpose(0, 1, 3, 2, 4).reshape(K, n * J, n * J) @ _by_joint(flow, J)
        matrix = matrix + np.eye(n * J)
        blank = np.zeros((K, J, J))
        inverse: Array = np.linalg.inv(matrix).astype(float)
        half = cls(C, k, ahead, back, whole, matrix, inverse, blank, blank, blank, blank)
        eye, none = np.broadcast_to(np.eye(J), (K, J, J)), np.zeros((K, n, J, J))
        GG, sG = half.ends(half.inside(eye, blank, none, none), eye, blank, none)
        Gs, ss = half.ends(half.inside(blank, eye, none, none), blank, eye, none)
        return cls(C, k, ahead, back, whole, matrix, inverse, GG, Gs, sG, ss)

    def inside(self, G: Array, s: Array, put: Array, g: Array) -> Inside:
        """Fields under forces at the left end and slips at the right end.

        Parameters
        ----------
        G, s : ndarray, shape (K, J, R)
            Force beyond each joint at the left end [N], slip at the right end [m].
        put : ndarray, shape (K, n, J, R)
            Force put in from the left end on, P - ∫ k s0 dx [N].
        g : ndarray, shape (K, n, J, R)
            Strain difference by all other forces.
        """
        K, n, J, R = put.shape
        known = self.C @ (G[:, None] + put) + g
        right = (s[:, None] - _along(self.back, known)).reshape(K, n * J, R)
        found = self.inverse @ right
        found = found + self.inverse @ (right - self.matrix @ found)
        slip = found.reshape(K, n, J, R)
        force = G[:, None] + put + _along(self.ahead, self.k[..., None] * slip)
        return Inside(force, slip)

    def ends(self, inside: Inside, G: Array, s: Array, g: Array, put: Array | float = 0.0) -> tuple[Array, Array]:
        """Force at the right end and slip at the left end, each shape (K, J, R); `put` by the right end."""
        right = G + put + np.einsum("kn,knjr->kjr", self.whole, self.k[..., None] * inside.slip)
        left = s - np.einsum("kn,knjr->kjr", self.whole, self.C @ inside.force + g)
        return right, left


def _along(matrix: Array, values: Array) -> Array:
    """Apply (K, n, n) along the points of values of shape (K, n, J, R)."""
    K, n, J, R = values.shape
    return (matrix @ values.reshape(K, n, J * R)).reshape(K, n, J, R)


def _by_joint(flow: Array, J: int) -> Array:
    """Spread (K, n, J, n) to (K, nJ, nJ), every joint by itself."""
    K, n, _, _ = flow.shape
    full = np.zeros((K, n, J, n, J))
    for j in range(J):
        full[:, :, j, :, j] = flow[:, :, j, :]
    return full.reshape(K, n * J, n * J)
