"""The gamma-method of EN 1995-1-1:2004, Annex B, for mechanically jointed beams: beside the exact slip, never in it.

Each outer part counts with gamma of its EA, as if its slip followed a sine over the length l: exact for a sinusoidal
moment on a simple beam of one section, an estimate elsewhere. What it took is given with it: the number n of parts,
the length l, and where its conditions do not hold, which of them.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from fishbelly.member.slip_law import SlipLaw
from fishbelly.member.spans import Span, spans

MOST_PARTS = 3
"""Annex B has two parts or three, the second of which is in the middle."""
CONTINUOUS, CANTILEVER = 0.8, 2.0
"""Share of a continuous beam's span, and of a cantilever's length, that counts as l (B.1.2(1))."""
SAME = 1e-9
"""Relative difference below which a section is the same all along a span."""


@dataclass(frozen=True)
class Gamma:
    """Effective stiffness of parts joined by fasteners that slip.

    Parameters
    ----------
    EI : float
        Effective bending stiffness [N m2], equation (B.1).
    gamma : tuple of float
        Share of each part's EA that counts, equations (B.4) and (B.5).
    a : tuple of float
        Level of each part's centroid above the axis of bending [m], equation (B.6).
    flow : tuple of float
        Force per length in the joint of each part by unit shear force [1/m], equation (B.10); 0 for the middle part.
    length : float
        Length l that it took [m].
    """

    EI: float
    gamma: tuple[float, ...]
    a: tuple[float, ...]
    flow: tuple[float, ...]
    length: float

    @property
    def n(self) -> int:
        """Number of parts."""
        return len(self.gamma)


def gamma_method(
    EA: Sequence[float],
    EI: Sequence[float],
    levels: Sequence[float],
    k: Sequence[float],
    length: float,
    middle: int = 0,
) -> Gamma:
    """Effective stiffness of one section.

    Parameters
    ----------
    EA, EI : sequence of float
        Axial and own bending stiffness of each part [N], [N m2]; two or three.
    levels : sequence of float
        Level of each part's centroid, upwards from any line [m].
    k : sequence of float
        Slip stiffness per length, K / s, of the joint of each part with the middle one [N/m2]; that of the middle
        part itself is not looked at.
    length : float
        Length l over which the moment follows a sine [m].
    middle : int
        Which part the others are joined to; its gamma is 1.

    Returns
    -------
    Gamma

    Raises
    ------
    ValueError
        For one part, or more than three.

    Notes
    -----
    EN 1995-1-1:2004, Annex B, equations (B.1) to (B.6) and (B.10), the distances from the axis counted by
    levels. Of two parts it does not matter which is called the middle.
    """
    if not 2 <= len(EA) <= MOST_PARTS:
        raise ValueError(f"expected two or three parts, got {len(EA)}")
    axial, own, z, joint = (np.asarray(v, dtype=float) for v in (EA, EI, levels, k))
    stiff = joint * length**2
    gamma = stiff / (stiff + np.pi**2 * axial)
    gamma[middle] = 1.0
    weight = gamma * axial
    a = z - float(weight @ z) / float(weight.sum())
    effective = float(own.sum() + weight @ a**2)
    flow = weight * np.abs(a) / effective
    flow[middle] = 0.0
    return Gamma(effective, tuple(gamma.tolist()), tuple(a.tolist()), tuple(flow.tolist()), length)


@dataclass(frozen=True)
class GammaSpan:
    """The gamma-method on one span or overhang.

    Parameters
    ----------
    span : Span
        Which.
    result : Gamma or None
        None where a condition does not hold.
    reason : str
        Which condition, and where; empty where all hold.
    rigid, apart : float
        EI of the span's section with the parts rigidly joined, and not joined at all [N m2].
    """

    span: Span
    result: Gamma | None
    reason: str
    rigid: float
    apart: float


def gamma_spans(law: SlipLaw) -> tuple[GammaSpan, ...]:
    """The gamma-method on every span of a member, where its conditions hold.

    These are: a span that turns freely over its supports, or an overhang; no hinge in it; two parts, or three of which
    the outer ones are joined to the middle one; each over the whole span with one section and one joint stiffness;
    bending in the vertical plane alone. The shape of the moment is not looked at: the code has it sinusoidal or
    parabolic.

    Parameters
    ----------
    law : SlipLaw
        Law of the member with its joints smeared.

    Returns
    -------
    tuple of GammaSpan
        From left to right.
    """
    every = spans(law.layers.member)
    several = len([s for s in every if not s.overhang]) > 1
    return tuple(_on_span(law, s, several) for s in every)


def _on_span(law: SlipLaw, span: Span, several: bool) -> GammaSpan:
    middle = 0.5 * (law.panels.a + law.panels.b)
    inside = np.flatnonzero((middle > span.start) & (middle < span.end))
    s = law.sections
    here = np.s_[:, inside[0], 0]
    EA, EI, level = s.EA[here], s.EI[0][here], s.c[0][here]
    there = np.flatnonzero(EA > 0.0)
    axis = float(EA @ level / EA.sum())
    apart = float(EI.sum())
    rigid = apart + float(EA @ (level - axis) ** 2)
    reason = _reason(law, inside, there, span)
    if reason:
        return GammaSpan(span, None, reason, rigid, apart)
    length = span.length * (CANTILEVER if span.overhang else CONTINUOUS if several else 1.0)
    host = _middle(law, there)
    joint = np.zeros(len(EA))
    for j, slipping in enumerate(law.layers.joints):
        outer = slipping.on if slipping.layer == host else slipping.layer
        joint[outer] = law.k[j, inside[0], 0]
    axial, own, levels, joints = (v[there].tolist() for v in (EA, EI, level, joint))
    result = gamma_method(axial, own, levels, joints, length, int(np.searchsorted(there, host)))
    return GammaSpan(span, result, "", rigid, apart)


def _middle(law: SlipLaw, there: np.ndarray) -> int:
    """Layer that takes part in every joint of those that are there; -1 where none does."""
    pairs = [{j.layer, j.on} for j in law.layers.joints if j.layer in there and j.on in there]
    common = set.intersection(*pairs) if pairs else set()
    return min(common) if common else -1


def _reason(law: SlipLaw, inside: np.ndarray, there: np.ndarray, span: Span) -> str:
    """First condition of the method that does not hold on a span."""
    s, place = law.sections, f"between {span.start:.6g} m and {span.end:.6g} m"
    member, tiny = law.layers.member, 1e-9 * law.layers.member.length
    ends = (span.start - tiny, span.end + tiny)
    turning = [v.at for v in member.supports if v.rotation > 0.0 and ends[0] < v.at < ends[1]]
    if turning and not span.overhang:
        return f"a support holds the rotation at {turning[0]:.6g} m"
    if any(ends[0] < h.at < ends[1] for h in member.hinges):
        return f"there is a hinge {place}"
    if there.size < 2:
        return f"there is one part alone {place}"
    if there.size > MOST_PARTS:
        return f"there are {there.size} parts that slip on each other {place}: the method has three at most"
    if _middle(law, there) < 0:
        return f"no part is joined to both others {place}"
    for values, what in ((s.EA, "section"), (s.EI[0], "section"), (s.c[0], "section"), (law.k, "joint")):
        mine = values[:, inside]
        if np.any(np.ptp(mine, axis=(1, 2)) > SAME * np.abs(mine).max()):
            return f"the {what} changes {place}"
    if np.any(np.abs(s.EI[2][:, inside]).sum(axis=0) > SAME * s.EI[0][:, inside].sum(axis=0)):
        return f"the section is skew {place}"
    if law.chain.borders.springs[inside[0] : inside[-1] + 2].any():
        return f"fasteners are taken one by one {place}"
    return ""
