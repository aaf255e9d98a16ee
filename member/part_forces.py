"""Stress of a part as a plane over its area, the force and couples it carries, the flow into it.

Everything that tells of a part's stress comes from here: what each step of the member's life has left in it is one
plane, and the planes add. The shear flow into a part is q = dF/dx, right for tapers, thrust, stages and free strain.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.analysis import Analysis, Combined
from fishbelly.member.forces import Forces
from fishbelly.member.history_forces import resultant
from fishbelly.member.moduli import Moduli
from fishbelly.member.response import Response
from fishbelly.member.staging import Step

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Loading:
    """One share of a combination in one step of the member's life, piece by piece.

    Parameters
    ----------
    response : Response
        Its response, with an axis of pieces: everything but pattern loads, then each pattern load.
    moduli : Moduli
        Moduli it acts on.
    factors : ndarray, shape (J + 1, A)
        Factors of the atoms in each piece.
    step : Step
        The step.
    end : Frame
        The grid in the stage at whose end results are asked for.
    planes : mapping of int to ndarray, shape (J + 1, 3, K, n), optional
        Stress of the parts as `stress_planes` has it, where a law that does not add has found it.
    forces : mapping of int to Forces, optional
        Forces of parts of which only a piece works, fields (J + 1, K, n).
    """

    response: Response
    moduli: Moduli
    factors: Array
    step: Step
    end: Frame
    planes: Mapping[int, Array] | None = None
    forces: Mapping[int, Forces] | None = None

    @property
    def parts(self) -> tuple[int, ...]:
        """Numbers of the parts that are there in the stage asked for."""
        return tuple(sorted({i for g in self.end.profile.groups for i in g.placed.index}))


def loadings(analysis: Analysis, combined: Combined) -> tuple[Loading, ...]:
    """Responses of a combination by share and step; pieces are everything but the patterns, then each pattern."""
    patterned = np.zeros(len(analysis.atoms), dtype=bool)
    for mask in combined.patterns:
        patterned |= mask
    masks = [~patterned, *combined.patterns]
    last = len(analysis.views) - 1 if combined.upto is None else combined.upto
    found = []
    for share in combined.shares:
        factors = np.array([np.where(m, share.factors, 0.0) for m in masks])
        for step in analysis.history(share.key, combined.lifted):
            if step.stage <= last:
                stacked = _pieces(step.response, factors)
                found.append(Loading(stacked, step.moduli, factors, step, analysis.frames[last]))
    return tuple(found) or (_nothing(analysis, combined, masks, last),)


def _nothing(analysis: Analysis, combined: Combined, masks: Sequence[NDArray[np.bool_]], last: int) -> Loading:
    """What stands for a stage up to which nothing has happened."""
    factors = np.zeros((len(masks), len(analysis.atoms)))
    step = analysis.history(combined.shares[0].key, combined.lifted)[0]
    return Loading(_pieces(step.response, factors), step.moduli, factors, step, analysis.frames[last])


def _pieces(response: Response, factors: Array) -> Response:
    pieces = [response.combined(f) for f in factors]
    single = ("N", "axial", "reactions")
    return Response(
        *(
            np.stack([getattr(p, f) for p in pieces], axis=0 if f in single else 1)
            for f in Response.__dataclass_fields__
        )
    )


def stress_planes(loading: Sequence[Loading], index: int) -> Array | None:
    """Stress of a part as a plane about the analysis line.

    Parameters
    ----------
    loading : sequence of Loading
        Shares and steps of a combination.
    index : int
        Number of the part.

    Returns
    -------
    ndarray, shape (J + 1, 3, K, n), or None
        Stress = v[0] + v[1] c0 + v[2] c1 with c0 = z - line[0], c1 = -y - line[1] [Pa, Pa/m], zero at places where
        the part is not; None where it is nowhere in the stage asked for.
    """
    if index not in loading[0].parts:
        return None
    total: Array | None = None
    for share in loading:
        stress = share_plane(share, index)
        if stress is not None:
            total = stress if total is None else total + stress
    if total is None:
        shape = loading[0].response.N.shape
        total = np.zeros((shape[0], 3, *shape[1:]))
    return total


def resultants(loading: Sequence[Loading], index: int) -> Forces | None:
    """Force and couples of a part about the analysis line, fields (J + 1, K, n); None where it is nowhere.

    Parameters as in `stress_planes`.
    """
    given = [s.forces[index] for s in loading if s.forces is not None and index in s.forces]
    if given:
        return given[0]
    planes = stress_planes(loading, index)
    if planes is None:
        return None
    end = loading[0].end
    return resultant(np.swapaxes(planes, 0, 1), end.profile.part_moments(index, end.line))


def share_plane(share: Loading, index: int) -> Array | None:
    """Stress plane of a part from one share in one step, as `stress_planes` has it; None where it is not there."""
    if share.planes is not None:
        return share.planes.get(index)
    if index not in share.step.parts:
        return None
    r = share.response
    axial = r.axial
    if share.step.layered is not None:
        axial = np.einsum("ja,akn->jkn", share.factors, share.step.axial(index))
    strain = np.stack((axial, -r.curvature[0], -r.curvature[1]), axis=1)
    free = share.step.free.get(index)
    if free is not None:
        strain = strain - np.einsum("ja,cakn->jckn", share.factors, free)
    return np.asarray(share.step.frame.profile.part_modulus(index, share.moduli.E) * strain)
