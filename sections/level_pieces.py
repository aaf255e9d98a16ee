"""Shear flow through a level of a section that stands in pieces one above the other.

Each piece bends about its own centroid and takes V as its own EI, over an opening as the shear stiffness of its own
level cuts: the rule of `shear_stress`, whose largest stresses are those of this flow.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.chebyshev import rule
from fishbelly.sections.composition import Levels
from fishbelly.sections.shear_stress import _from_bottom, _gaps

Array = NDArray[np.float64]


def has_gaps(levels: Levels, station: int = 0) -> bool:
    """Whether there are levels on which nothing stands though something does below and above, at one station."""
    return bool(np.any(_gaps(levels.widths.width.sum(axis=0), levels)[station]))


def piece_flow(levels: Levels, E: Array, G: Array, z: float, share_angle: bool = False) -> float:
    """Shear flow through a level for a shear force of 1 N on the first station of a section in pieces.

    Parameters
    ----------
    levels : Levels
        Level cuts of the section.
    E, G : ndarray, shape (P, S)
        Moduli of the parts [Pa].
    z : float
        The level [m].
    share_angle : bool
        Whether pieces share V as their shear stiffness instead of their EI.

    Returns
    -------
    float
        Flow per shear force [1/m], positive as V; 0 where no piece stands.
    """
    pieces = _pieces(levels)
    at, total = 0.0, 0.0
    for slabs in pieces:
        flow, share = _flow_of(levels, E, G, slabs, share_angle)
        total += share
        low, high = levels.edges[0, slabs[0]], levels.edges[0, slabs[-1] + 1]
        if low <= z <= high:
            at = share * _at(levels, flow, slabs, z)
    return at / total if total > 0.0 else 0.0


def _pieces(levels: Levels) -> list[NDArray[np.intp]]:
    gaps = _gaps(levels.widths.width.sum(axis=0), levels)[0]
    number = np.cumsum(gaps)
    solid = ~gaps & (np.diff(levels.edges[0]) > 0.0)
    found = [np.flatnonzero((number == g) & solid) for g in np.unique(number)]
    return [slabs for slabs in found if slabs.size]


def _flow_of(levels: Levels, E: Array, G: Array, slabs: NDArray[np.intp], share_angle: bool) -> tuple[Array, float]:
    """Flow of one piece for a shear force of its own of 1 N at its level cuts, shape (K, n); what it takes V as."""
    weights = rule(levels.z.shape[-1]).weights
    z, stretch = levels.z[0, slabs], levels.stretch[0, slabs]
    width = levels.widths.width[:, 0, slabs]
    ea, ga = np.einsum("p,pkn->kn", E[:, 0], width), np.einsum("p,pkn->kn", G[:, 0], width)
    axial = float((ea * stretch @ weights).sum())
    if not axial > 0.0:
        return np.zeros(z.shape), 0.0
    # about the piece's own centroid
    arm = z - float((ea * z * stretch @ weights).sum()) / axial
    stiff = float((ea * arm**2 * stretch @ weights).sum())
    flow = -_from_bottom((ea * arm * stretch / stiff)[None])[0]
    if not share_angle:
        return flow, stiff
    angle = np.where(ga > 0.0, flow, 0.0) / np.where(ga > 0.0, ga, 1.0)
    return flow, 1.0 / float((angle * flow * stretch @ weights).sum())


def _at(levels: Levels, flow: Array, slabs: NDArray[np.intp], z: float) -> float:
    """Flow of a piece at a level, from its values at the level cuts of the slab that holds it."""
    tops = levels.edges[0, slabs + 1]
    k = int(np.clip(np.searchsorted(tops, z), 0, slabs.size - 1))
    low, high = levels.edges[0, slabs[k]], tops[k]
    points = rule(flow.shape[-1]).points
    half = 0.5 * (high - low)
    u = np.clip((z - 0.5 * (high + low)) / half, -1.0, 1.0)
    even = np.abs(levels.z[0, slabs[k]] - (0.5 * (high + low) + half * points)).max() < 1e-6 * half
    s = u if even else 2.0 / np.pi * np.arcsin(u)
    return float(rule(flow.shape[-1]).basis(np.array([s]))[0] @ flow[k])
