"""What a member does whose concrete cracks or whose parts carry no tension: all loads of a combination as one.

Where it cracks is found as roots along x, and the grid is given borders there, so that no panel has a kink. In a
statically indeterminate member forces, cracks and stiffness depend on one another and are brought into agreement.
With stages that is done stage by stage: what an earlier one has cracked stays cracked, and within a stage what its
last event cracks counts as cracked in all of them.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.cracked_found import CrackedResponse
from fishbelly.member.cracked_grid import CLOSE
from fishbelly.member.cracked_law import LawState
from fishbelly.member.cracked_phases import Phases, Solved
from fishbelly.member.cracked_places import Stretches, joined
from fishbelly.member.cracked_search import Run, carried_over
from fishbelly.member.cracking import may_crack, no_tension_parts
from fishbelly.member.description import Combination
from fishbelly.member.faults import CannotCompute
from fishbelly.member.forces import Forces
from fishbelly.member.response import Response
from fishbelly.member.slip_layers import has_soft_joints

Array = NDArray[np.float64]
Mask = NDArray[np.bool_]


def cracks_followed(analysis: Analysis) -> bool:
    """Whether cracks of a member are followed: where they cannot be, only if that has been asked for."""
    member = analysis.member
    if not may_crack(member):
        return False
    hinged = any(v.hinges != analysis.views[0].hinges for v in analysis.views)
    patterned = any(a.span is not None for a in analysis.atoms)
    asked = bool(no_tension_parts(member)) or member.tension_stiffening is not None
    return asked or not (hinged or patterned or has_soft_joints(member))


def cracked_response(
    analysis: Analysis,
    combination: Combination,
    rule: str | None = None,
    held: Stretches = (),
    band: str = "nominal",
    everywhere: bool = False,
) -> CrackedResponse:
    """Response of a combination with cracks, at the end of the last stage.

    Parameters
    ----------
    analysis : Analysis
        The member.
    combination : Combination
        Its loads.
    rule : str, optional
        Rule of tension stiffening, section by section along x; none leaves cracked sections as they are.
    held : tuple of (float, float), optional
        Stretches that other loads have cracked already [m].
    band : {"nominal", "low", "high"}
        Which end of the materials' bands of E.
    everywhere : bool
        Every place counts as cracked, without tension stiffening.

    Returns
    -------
    CrackedResponse

    Raises
    ------
    NoStiffness
        Where a section cannot carry its forces, with the place, the moment, what it can carry, and the stage.
    CannotCompute
        When equilibrium does not close, or where a bearing that cannot pull, a pattern load, a joint that slips or a
        hinge that comes or goes would have to be followed through cracking.
    """
    found: CrackedResponse | None = None
    for _ in analysis.views:
        found = cracked_stage(analysis, combination, found, rule, held, band, everywhere)
    assert found is not None
    return found


def cracked_stage(
    analysis: Analysis,
    combination: Combination,
    before: CrackedResponse | None,
    rule: str | None = None,
    held: Stretches = (),
    band: str = "nominal",
    everywhere: bool = False,
) -> CrackedResponse:
    """One stage more of a combination with cracks; parameters and errors as in `cracked_response`.

    Parameters
    ----------
    before : CrackedResponse or None
        The end of the stage before; None for the first.
    """
    _built(analysis, combination)
    stage = 0 if before is None else before.stage + 1
    base = analysis if before is None else before.analysis
    combined = base.combine(combination, band, stage if stage < len(analysis.views) - 1 else None)
    whole = ((0.0, analysis.member.length),)
    kept = () if before is None else before.stretches
    held = whole if everywhere else joined([*kept, *held], CLOSE * analysis.member.length)
    run = Run(base, combined, None if everywhere else rule, held, everywhere, stage, before)
    return run.go()


def bending_alone(r: CrackedResponse) -> Response:
    """Response of the same cracks, rigid in shear."""
    if not r.phases:
        return r.analysis.superposed(r.combined.shares, r.combined.lifted, shear=False, upto=r.combined.upto)
    return _bent(r)[-1].closed.response


def _bent(r: CrackedResponse) -> tuple[Solved, ...]:
    """What happens in a stage with the same cracks, rigid in shear; computed once."""
    if not r._bent:
        inherited = None if r.before is None else _bent(r.before)[-1].after
        phases = Phases(r.analysis, r.combined.shares, r.combined.lifted, r.rule, False, r.stage, inherited)
        starts: list[tuple[Forces, LawState | None]] = [(carried_over(r.analysis, s), s.closed.state) for s in r.phases]
        r._bent.append(phases.solve(r.phases[-1].law.mask, starts))
    return r._bent[0]


def _built(analysis: Analysis, combination: Combination) -> None:
    """See that nothing is asked for that has to be followed through cracking and is not."""
    if has_soft_joints(analysis.member):
        raise CannotCompute("joints that slip together with parts that crack are not built: leave out one of the two")
    if any(v.hinges != analysis.views[0].hinges for v in analysis.views):
        raise CannotCompute("hinges that come or go together with parts that crack are not built: leave out one")
    for atom in analysis.atoms:
        if atom.span is not None and combination.factors.get(atom.case, 0.0):
            raise CannotCompute("pattern loads together with parts that crack are not built: give every arrangement")
