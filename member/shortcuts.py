"""What common shortcuts would have given: one line, once."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

import numpy as np

from fishbelly.member.analysis import Analysis, ModuliKey
from fishbelly.member.forces import Forces
from fishbelly.member.nodes import layout
from fishbelly.member.note import Note
from fishbelly.member.response import respond
from fishbelly.member.section_law import ElasticLaw

POINTED = 1e-9
"""A member whose softest section is below this share of the mean runs out to a point: no shortcut to speak of."""


def shortcuts(analysis: Analysis, combinations: Sequence[dict[str, Any]]) -> Iterator[Any]:
    """Deflection down of the first combination with the softest, the stiffest and the mean section throughout."""
    stiffness = analysis.profile.stiffness(analysis.moduli(ModuliKey()))
    row, panels = analysis.profile.row, analysis.profile.panels
    EI = stiffness.EI_y[row]
    ends = np.concatenate([e.ravel() for e in panels.ends(EI)])
    softest, stiffest = min(float(EI.min()), float(ends.min())), max(float(EI.max()), float(ends.max()))
    exact = combinations[0]["deflection"]["down"]
    if exact is None or stiffest < softest * (1.0 + 1e-9):
        return
    length = float((panels.stretch @ panels.rule.weights).sum())
    mean = float(((EI * panels.stretch) @ panels.rule.weights).sum()) / length
    found = []
    for name, value in (("softest", softest), ("mean", mean), ("stiffest", stiffest)):
        if value < POINTED * mean:
            continue
        w = _prismatic(analysis, value)
        if w is not None:
            found.append((name, w))
    if found:
        parts = ", ".join(f"{{{name}}} with the {name} EI throughout" for name, _ in found)
        yield Note(
            f"common shortcuts, bending alone, {combinations[0]['name']}: {parts}; found here {{exact}}",
            {**{n: (w, "deflection") for n, w in found}, "exact": (exact["value"], "deflection")},
        )


def _prismatic(analysis: Analysis, EI: float) -> float | None:
    """Largest deflection down with one EI throughout; None where it cannot be had."""
    shape = analysis.profile.row.shape
    full = np.full(shape, EI)
    straight = np.zeros((2, *shape))
    bend = np.stack((1.0 / full, 1.0 / full, 0.0 * full))
    law = ElasticLaw(analysis.profile.panels, np.full(shape, EI * 1e3), straight, bend, np.zeros((3, *shape)))
    shares = analysis.shares(analysis.member.combinations[0])
    free = [Forces.none(shape)] * len(analysis.atoms)
    view = analysis.views[-1]
    r = respond(
        analysis.frame, layout(analysis.frame, view.gone, view.hinges), law, analysis.atoms, analysis.loads, free, 1
    )
    total = r.combined(np.asarray(sum(s.factors for s in shares)))
    w = float(total.deflection[0].max())
    return w if np.isfinite(w) and w > 0.0 else None
