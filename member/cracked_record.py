"""What a cracking member's life has left behind: strains, free strain and stress by part, on any finer grid.

Strains and stresses are those of state I and of state II side by side. A part that joins later is born with the
strains that are there as its free strain; what every set of moduli has added is kept apart, because it creeps and is
released by itself, as in the linear road (`staging`).
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import ModuliKey
from fishbelly.member.extremes import values_at
from fishbelly.member.moduli import Moduli
from fishbelly.member.panels import Panels
from fishbelly.member.response import Response
from fishbelly.member.stage_view import StageView

Array = NDArray[np.float64]
Planes = Mapping[int, Array]
"""Stress or free strain of parts as planes v0 + v1 c0 + v2 c1 about the analysis line, by number: (3, K, n)."""
Both = tuple[Planes, Planes]
"""The same in state I and in state II."""
NOTHING: Both = ({}, {})


@dataclass(frozen=True, eq=False)
class Kept:
    """What loads on one set of moduli have added so far.

    Parameters
    ----------
    reactions : ndarray, shape (supports, 5)
        Forces of the supports.
    stress, creeping : (Planes, Planes)
        Stress of the parts, and how much of it still creeps.
    shear_on : mapping
        Shear forces by the parts on which they arrived, (2, K, n).
    creeping_shear : ndarray, shape (2, K, n), optional
        Shear forces whose angles still creep.
    """

    reactions: Array
    stress: Both = NOTHING
    creeping: Both = NOTHING
    shear_on: Mapping[frozenset[int], Array] = field(default_factory=dict)
    creeping_shear: Array | None = None

    def without(self, parts: frozenset[int]) -> Kept:
        """Return what is left when only some parts are still there."""
        stress, creeping = ((_only(b[0], parts), _only(b[1], parts)) for b in (self.stress, self.creeping))
        return replace(self, stress=stress, creeping=creeping)

    def on(self, at: Callable[[Array], Array]) -> Kept:
        """Return the same on another grid."""
        shear = None if self.creeping_shear is None else at(self.creeping_shear)
        on = {parts: at(v) for parts, v in self.shear_on.items()}
        return Kept(self.reactions, _moved(self.stress, at), _moved(self.creeping, at), on, shear)


@dataclass(frozen=True, eq=False)
class Record:
    """All so far, in the grid of `panels`.

    Parameters
    ----------
    panels : Panels
        The grid.
    view : StageView
        The stage it has come to.
    response : Response
        Response, without an axis of atoms.
    strains : tuple of ndarray, shape (3, K, n)
        Strain as a plane in state I and in state II; where state II is unknown that of state I.
    moduli : Moduli
        Moduli of what happened last.
    free : (Planes, Planes)
        Free strain of the parts on those.
    kept : mapping
        What loads on every set of moduli have added.
    lasting : bool
        Whether a share of the loads lasts.
    """

    panels: Panels
    view: StageView
    response: Response
    strains: tuple[Array, Array]
    moduli: Moduli
    free: Both
    kept: Mapping[ModuliKey, Kept]
    lasting: bool

    def on(self, panels: Panels) -> Record:
        """Return the same on a grid whose panels lie inside the ones here."""
        if panels is self.panels:
            return self

        def at(field: Array) -> Array:
            return on_grid(self.panels, panels, field)

        strains = (at(self.strains[0]), at(self.strains[1]))
        kept = {key: k.on(at) for key, k in self.kept.items()}
        moved = response_on(self.panels, panels, self.response)
        return replace(self, panels=panels, response=moved, strains=strains, free=_moved(self.free, at), kept=kept)


def on_grid(old: Panels, new: Panels, values: Array) -> Array:
    """Values (..., K, n) at the points of a grid whose panels lie inside those of the old one."""
    if old is new:
        return values
    found = values_at(old, values, new.x.ravel())
    return np.asarray(found.reshape(*values.shape[:-2], *new.x.shape))


def response_on(old: Panels, new: Panels, r: Response) -> Response:
    """Response at the points of a grid whose panels lie inside those of the old one."""
    fields = {name: getattr(r, name) for name in Response.__dataclass_fields__}
    reactions = fields.pop("reactions")
    return Response(**{name: on_grid(old, new, v) for name, v in fields.items()}, reactions=reactions)


def added(total: Both, more: Both) -> Both:
    """Sum of planes, part by part."""
    return _sum(total[0], more[0]), _sum(total[1], more[1])


def _sum(own: Planes, more: Planes) -> Planes:
    result = dict(own)
    for part, v in more.items():
        result[part] = result[part] + v if part in result else v
    return result


def _only(planes: Planes, parts: frozenset[int]) -> Planes:
    return {part: v for part, v in planes.items() if part in parts}


def _moved(both: Both, at: Callable[[Array], Array]) -> Both:
    first, second = ({part: at(v) for part, v in planes.items()} for planes in both)
    return first, second
