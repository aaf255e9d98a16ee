"""Flanges of outlines that run inclined to the member's axis: their own outlines, and what they carry.

A plate of thickness t, square to itself, inclined by alpha, carries E b t cos³(alpha) along the member. On the
section square to the axis it stands t / cos(alpha) deep, so that its modulus there counts cos⁴(alpha) times.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.sections.area_moments import AreaMoments, area_moments
from fishbelly.sections.composition import Composition
from fishbelly.sections.outlines import Dimensions, Outline, both_flanges, rounded
from fishbelly.sections.overlap import relation

Array = NDArray[np.float64]

_FIELDS = ("area", "y", "z", "zz", "yy", "yz")


@dataclass(frozen=True, eq=False)
class Flange:
    """A flange or plate that runs inclined, at S stations.

    Parameters
    ----------
    part : int
        Part of the composition to which it belongs.
    face : {"top", "bottom"}
        Which flange, before the part is turned; a plate has "top" alone.
    outline : Outline
        What of the part it is, cuts not taken off; one loop for each copy of a pair.
    rise : ndarray, shape (S,)
        Tangent of its angle to the axis: how fast its middle line moves along its normal.
    normal : tuple of float
        Direction (y, z) of that normal.
    """

    part: int
    face: str
    outline: Outline
    rise: Array
    normal: tuple[float, float]

    @property
    def share(self) -> Array:
        """Share of E that works along the axis on a section square to it: cos⁴ of the angle, shape (S,)."""
        return np.asarray(1.0 / (1.0 + self.rise**2) ** 2)

    @property
    def along(self) -> Array:
        """Stress along the plate over E times the strain along the axis: cos² of the angle, shape (S,)."""
        return np.asarray(1.0 / (1.0 + self.rise**2))


def flange_outlines(kind: str, d: Dimensions) -> dict[str, Outline]:
    """Outlines of the flanges of a named outline, in its own frame.

    Fillets count with the web, and the rounded corners of a box too; where flange and web meet is flange.

    Parameters
    ----------
    kind : str
        Name of the outline; those without flanges that can be told apart give none, a rectangle is all "top".
    d : mapping of str to ndarray, shape (S,)
        Its dimensions [m]; thicknesses of flanges as they stand on the section.

    Returns
    -------
    dict of str to Outline
        By face.
    """
    if kind == "rectangle":
        return {"top": _strip(0.5 * d["width"], -0.5 * d["depth"], 0.5 * d["depth"])}
    if kind == "tee":
        return {"top": _tee_flange(d)}
    if kind not in ("I", "box", "channel"):
        return {}
    h = 0.5 * d["depth"]
    if kind == "I":
        low, high = -h + d["bottom_flange"], h - d["top_flange"]
        return {"top": _strip(0.5 * d["top_width"], high, h), "bottom": _strip(0.5 * d["bottom_width"], -h, low)}
    if kind == "box":
        half = 0.5 * d["width"] - d["radius"]
        top, bottom = both_flanges(d)
        return {"top": _strip(half, h - top, h), "bottom": _strip(half, -h, -h + bottom)}
    return _channel_flanges(d)


def _strip(half: Array, low: Array, high: Array) -> Outline:
    return rounded([(-half, low), (half, low), (half, high), (-half, high)], [0.0] * 4)


def _tee_flange(d: Dimensions) -> Outline:
    b, top = 0.5 * d["width"], 0.5 * d["depth"]
    zero = np.zeros_like(b)
    slope, toe = d.get("slope", zero), d.get("toe_radius", zero)
    flange_at, web_at = d.get("flange_at", zero), d.get("web_at", zero)
    y = (0.5 * d["web"] + slope * (web_at - d["flange"]) - slope**2 * flange_at) / (1.0 - slope**2)
    root, tip = top - d["flange"] - slope * (flange_at - y), top - d["flange"] - slope * (flange_at - b)
    return rounded([(-y, root), (y, root), (b, tip), (b, top), (-b, top), (-b, tip)], [0.0, 0.0, toe, 0.0, 0.0, toe])


def _channel_flanges(d: Dimensions) -> dict[str, Outline]:
    h, b, w = 0.5 * d["depth"], d["width"], d["web"]
    zero, r = np.zeros_like(b), d["toe_radius"]
    upper, lower = both_flanges(d)
    toe, root = -d["slope"] * (b - d["flange_at"]), d["slope"] * (d["flange_at"] - w)
    t, s = upper + toe, upper + root
    top = rounded([(zero, h - s), (w, h - s), (b, h - t), (b, h), (zero, h)], [0.0, 0.0, r, 0.0, 0.0])
    t, s = lower + toe, lower + root
    low = rounded([(zero, -h), (b, -h), (b, -h + t), (w, -h + s), (zero, -h + s)], [0.0, 0.0, r, 0.0, 0.0])
    return {"top": top, "bottom": low}


def flange_moments(section: Composition, flanges: Sequence[Flange]) -> tuple[AreaMoments, ...]:
    """Moments of what works of each flange: what later parts displace and what is cut is taken off.

    Parameters
    ----------
    section : Composition
        The cross-section at S stations.
    flanges : sequence of Flange
        Flanges of its parts.

    Returns
    -------
    tuple of AreaMoments
        Fields of shape (S,).
    """
    return tuple(_net(section, f) for f in flanges)


def _net(section: Composition, flange: Flange) -> AreaMoments:
    part, outline = flange.part, flange.outline
    later = [o for o in section.outlines[part + 1 :] if relation(outline, o) != "apart"]
    cuts = tuple((o, (0,), m) for o, targets, m in section.cuts if part in targets and relation(outline, o) != "apart")
    alone = Composition((outline, *later), cuts)
    if not later and not cuts and not alone.overlaps_itself:
        return area_moments(outline)
    return alone.moments.at(0)


def working_moments(section: Composition, flanges: Sequence[Flange], nets: Sequence[AreaMoments]) -> AreaMoments:
    """Moments of the parts as they work along the axis: inclined flanges with the share of E that works there.

    Parameters
    ----------
    section : Composition
        The cross-section at S stations.
    flanges : sequence of Flange
        Its inclined flanges; none: the moments as a cut square to the axis shows them.
    nets : sequence of AreaMoments
        What is left of each, from `flange_moments`.

    Returns
    -------
    AreaMoments
        Fields of shape (P, S).
    """
    if not flanges:
        return section.moments
    rows = [[section.moments.at(i)] for i in range(len(section.outlines))]
    for flange, net in zip(flanges, nets, strict=True):
        rows[flange.part].append(net.times(flange.share - 1.0))
    return _stacked([_stacked(r).total() if len(r) > 1 else r[0] for r in rows])


def _stacked(rows: Sequence[AreaMoments]) -> AreaMoments:
    return AreaMoments(*(np.stack([getattr(m, f) for m in rows]) for f in _FIELDS))
