"""Largest shear stress of each part by level cuts: D. J. Jourawski's shear formula, as shear checks use it.

On every level the shear flow q follows from the stresses above it and the shear strain is taken as one value
across the level, q / sum(G width); the stress of a part is G times that. The shear flow that flanges carry sideways
is not in it. Shear stiffness is found otherwise, from the strain energy of the whole section (`flexure`).
Source: S. Timoshenko, Strength of Materials I, 3rd ed., van Nostrand, 1955, art. 66.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.chebyshev import rule
from fishbelly.sections.composition import Levels
from fishbelly.sections.level_cuts import Widths
from fishbelly.sections.stiffness import SectionStiffness

Array = NDArray[np.float64]

_FIELDS = ("width", "first", "second", "left", "right")


@dataclass(frozen=True, eq=False)
class ShearStress:
    """Largest shear stress of each part for shear along z, V = 1 N.

    Parameters
    ----------
    peak : ndarray, shape (P, S)
        Largest shear stress, without sign [1/m2].
    level : ndarray, shape (P, S)
        Where it is [m].
    """

    peak: Array
    level: Array


def shear_stress(
    levels: Levels, E: Array, G: Array, stiffness: SectionStiffness, share_angle: bool = False
) -> ShearStress:
    """Largest shear stresses of a section for shear along z.

    Parameters
    ----------
    levels : Levels
        Level cuts of the composition.
    E, G : ndarray, shape (P, S)
        Moduli of the parts [Pa].
    stiffness : SectionStiffness
        The section's bending stiffness.
    share_angle : bool
        Pieces apart from each other share the shear angle (over an opening): each takes V as the shear stiffness
        of its own level cuts. Otherwise they share the curvature and each takes V as its own EI.

    Returns
    -------
    ShearStress
    """
    w = levels.widths
    weight = levels.stretch
    centre = stiffness.z_c[:, None, None]
    shape = weight.shape
    ea = np.einsum("ps,pskn->skn", E, w.width)
    ey = np.einsum("ps,pskn->skn", E, w.first)
    ga = np.einsum("ps,pskn->skn", G, w.width)
    gaps = _gaps(ga, levels)
    if np.any(gaps):
        return _piecewise(levels, E, G, gaps, share_angle)
    # change of curvature along x for a unit shear force
    k_y, k_z = stiffness.curvatures(np.ones(shape[0]), np.zeros(shape[0]))
    change = k_y[:, None, None] * (levels.z - centre) * ea
    change = change + k_z[:, None, None] * (ey - stiffness.y_c[:, None, None] * ea)
    flow = _from_bottom(change * weight)
    return _largest(levels, G, flow, ga)


def _from_bottom(density: Array) -> Array:
    """Integral from the lowest event up to each level, shape (S, K, n)."""
    r = rule(density.shape[-1])
    whole = density @ r.weights
    start = np.cumsum(whole, axis=1) - whole
    return np.asarray(start[..., None] + density @ r.integrate.T)


def _largest(levels: Levels, G: Array, flow: Array, ga: Array) -> ShearStress:
    steepest, at = _steepest(flow, ga, levels)
    met = levels.widths.width.max(axis=3) > 0.0
    per_slab = np.where(met, steepest, -1.0)
    slab = per_slab.argmax(axis=2)
    peak = np.maximum(np.take_along_axis(per_slab, slab[..., None], axis=2)[..., 0], 0.0) * G
    level = np.take_along_axis(np.broadcast_to(at, per_slab.shape), slab[..., None], axis=2)[..., 0]
    return ShearStress(peak, level)


_FINE = 81
"""Places in a slab at which the shear angle is looked at; a parabola through the three largest finds the peak."""


def _steepest(flow: Array, ga: Array, levels: Levels) -> tuple[Array, Array]:
    """Largest shear angle in every slab, its ends counted, and its level, shape (S, K)."""
    n = flow.shape[-1]
    s = np.linspace(-1.0, 1.0, _FINE)
    basis = rule(n).basis(s)
    q, b = np.abs(flow @ basis.T), ga @ basis.T
    # where the section runs out to a point neither flow nor width has digits left
    wide = b > 1e-9 * ga.max(axis=(1, 2), keepdims=True)
    angle = np.where(wide, q, 0.0) / np.where(wide, b, 1.0)
    k = angle.argmax(axis=-1)
    inner = np.clip(k, 1, _FINE - 2)[..., None] + np.array([-1, 0, 1])
    left, middle, right = np.moveaxis(np.take_along_axis(angle, inner, axis=-1), -1, 0)
    bend = 2.0 * middle - left - right
    turns = (bend > 0.0) & (k > 0) & (k < _FINE - 1)
    safe = np.where(turns, bend, 1.0)
    top = np.where(turns, middle + (right - left) ** 2 / (8.0 * safe), angle.max(axis=-1))
    step = np.where(turns, (right - left) / (2.0 * safe), 0.0)
    place = s[k] + step * (s[1] - s[0])
    z = np.einsum("skn,skn->sk", levels.z, rule(n).basis(place.ravel()).reshape(*place.shape, n))
    return top, z


def _gaps(ga: Array, levels: Levels) -> NDArray[np.bool_]:
    """Slabs in which nothing stands though something does below and above, shape (S, K)."""
    empty = ga.max(axis=2) <= 0.0
    height = np.diff(levels.edges, axis=1)
    solid = ~empty
    below, above = np.cumsum(solid, axis=1) > 0, np.cumsum(solid[:, ::-1], axis=1)[:, ::-1] > 0
    size = levels.edges[:, -1:] - levels.edges[:, :1]
    return np.asarray(empty & below & above & (height > 1e-12 * size))


def _piecewise(levels: Levels, E: Array, G: Array, gaps: NDArray[np.bool_], share_angle: bool) -> ShearStress:
    """Sections in pieces one above the other; stations with the same gaps are taken together."""
    peak, level = np.zeros(G.shape), np.zeros(G.shape)
    patterns, which = np.unique(gaps, axis=0, return_inverse=True)
    for k, pattern in enumerate(patterns):
        rows = np.flatnonzero(np.ravel(which) == k)
        group = np.cumsum(pattern)
        slabs = [np.flatnonzero((group == g) & ~pattern) for g in np.unique(group)]
        pieces = [_piece(levels, E[:, rows], G[:, rows], rows, mine) for mine in slabs if mine.size]
        ei, soft, peaks, places = (np.stack(v) for v in zip(*pieces, strict=True))
        share = soft if share_angle else ei
        each = peaks * (share / share.sum(axis=0))[:, None]
        highest = each.argmax(axis=0)
        peak[:, rows] = each.max(axis=0)
        level[:, rows] = np.take_along_axis(places, highest[None], axis=0)[0]
    return ShearStress(peak, level)


def _piece(
    levels: Levels, E: Array, G: Array, rows: NDArray[np.intp], slabs: NDArray[np.intp]
) -> tuple[Array, Array, Array, Array]:
    """EI, shear stiffness, peaks and their levels of one piece at some stations, bending about its own centroid.

    The stiffness is that of its level cuts, exact for rectangles; a piece without EI has none.
    """
    weights = rule(levels.z.shape[-1]).weights
    at = np.ix_(rows, slabs)
    z, stretch = levels.z[at], levels.stretch[at]
    widths = Widths(*(getattr(levels.widths, f)[:, at[0], at[1]] for f in _FIELDS))
    ea = np.einsum("ps,pskn->skn", E, widths.width)
    ga = np.einsum("ps,pskn->skn", G, widths.width)
    axial = (ea * stretch @ weights).sum(axis=1)
    safe = np.where(axial > 0.0, axial, 1.0)
    arm = z - ((ea * z * stretch @ weights).sum(axis=1) / safe)[:, None, None]
    ei = (ea * arm**2 * stretch @ weights).sum(axis=1)
    flow = _from_bottom(ea * arm * stretch / np.where(ei > 0.0, ei, 1.0)[:, None, None])
    angle = np.where(ga > 0.0, flow, 0.0) / np.where(ga > 0.0, ga, 1.0)
    flexibility = (angle * flow * stretch @ weights).sum(axis=1)
    soft = np.where(ei > 0.0, 1.0 / np.where(ei > 0.0, flexibility, 1.0), 0.0)
    found = _largest(Levels(np.empty(0), z, stretch, widths), G, flow, ga)
    return ei, soft, found.peak, found.level
