"""Long-term deflection by ACI 318's multiplier, beside the result: immediate, and times lambda for what lasts."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.catalog.concrete_rules import aci_long_term
from fishbelly.member.analysis import Analysis, ModuliKey
from fishbelly.member.cracked_code import OneValue, one_value, one_value_response
from fishbelly.member.cracking import cracking_parts
from fishbelly.member.description import Combination
from fishbelly.member.extremes import largest, values_at
from fishbelly.member.profile import Group, group_places
from fishbelly.sections.clipping import moved
from fishbelly.sections.no_tension import FreePlanes, solve_section

Array = NDArray[np.float64]
Data = dict[str, Any]

MONTHS = 60.0
"""Loads that last are taken to last five years and more."""


def multiplied(analysis: Analysis, combination: Combination, rule: str, band: str = "nominal") -> Data | None:
    """Largest deflection by the multiplier of ACI 318 (24.2.4.1.1): immediate + lambda times that of what lasts.

    Both immediate deflections are those of the one effective stiffness of each span under the whole combination, on
    short-term moduli. The ratio of steel in compression is that of the section at the middle of the span with the
    largest deflection, of cantilevers at the support (24.2.4.1.2).

    Parameters
    ----------
    analysis : Analysis
        The member, of one stage.
    combination : Combination
        Its loads, with shares that last.
    rule : {"ACI 318-14", "ACI 318-19"}
        The rule of effective stiffness.
    band : str
        Which end of the materials' bands of E.

    Returns
    -------
    dict or None
        ``lambda``, ``compression_steel`` (rho' = A_s' / (b d)), ``immediate``, ``sustained`` and ``value`` [m] with the
        place ``at``; None where no span has bars that are stretched.
    """
    at_once = replace(combination, sustained={})
    one = one_value(analysis, at_once, rule, band)
    shares = {case: f * combination.sustained.get(case, 0.0) for case, f in combination.factors.items()}
    lasting = one_value_response(analysis, replace(at_once, factors=shares), rule, one, band)
    panels = analysis.profile.panels
    found = _steel(analysis, one, largest(panels, np.abs(one.response.deflection[0])).at)
    if found is None:
        return None
    factor = aci_long_term(MONTHS, found)
    whole = one.response.deflection[0] + factor * lasting.deflection[0]
    both = [(s, largest(panels, s * whole)) for s in (1.0, -1.0)]
    sign, top = max(both, key=lambda pair: pair[1].value)

    def there(field: Array) -> float:
        side = "left" if top.at >= analysis.member.length else "right"
        return float(values_at(panels, field, np.array([top.at]), side)[0])

    return {
        "lambda": factor,
        "compression_steel": found,
        "immediate": there(one.response.deflection[0]),
        "sustained": there(lasting.deflection[0]),
        "value": sign * top.value,
        "at": top.at,
    }


def _steel(analysis: Analysis, one: OneValue, at: float) -> float | None:
    """Ratio of the steel in compression of the span in which a place lies; None where no bars are stretched."""
    span = next((v.span for v in one.spans if v.span.start <= at <= v.span.end), None)
    if span is None:
        return None
    place = span.root if span.overhang else 0.5 * (span.start + span.end)
    panels = analysis.profile.panels
    side = "left" if place >= analysis.member.length or (span.overhang and span.label == "left") else "right"
    M = one.response.M[0] + one.response.N * analysis.frame.centre[0]
    moment = float(values_at(panels, M, np.array([place]), side)[0])
    g = group_places(analysis.profile.geometry, np.array([[place]]), np.array([place]), 0, side)[0]
    return _ratio(analysis, g, 1.0 if moment >= 0.0 else -1.0)


def _ratio(analysis: Analysis, g: Group, sign: float) -> float | None:
    """A_s' / (b d) of a cracked section under moment alone; `sign` is that of the moment."""
    brittle = cracking_parts(analysis.member)
    moduli = analysis.moduli(ModuliKey())
    which = np.array([i in brittle for i in g.placed.index])
    level = float(g.stiffness(moduli).z_c[0])
    E, load = g.modulus(moduli.E), np.array([[0.0], [sign], [0.0]])
    state = solve_section(moved(g.composition, 0.0, -level), E, which, FreePlanes.none(which.size, 1), load)
    if not state.carried[0]:
        return None
    m = g.moments
    strain = state.plane[0, 0] - state.plane[1, 0] * (m.z[:, 0] - level)
    pull, push = ((strain > 0.0) & ~which, (strain < 0.0) & ~which)
    main = int(np.argmax(np.where(which, m.area[:, 0] * E[:, 0], 0.0)))
    box = g.composition.boxes[main]
    if not pull.any():
        return None
    bars = float((m.area[pull, 0] * m.z[pull, 0]).sum() / m.area[pull, 0].sum())
    face = float(box.top[0] if sign > 0.0 else box.bottom[0])
    return float(m.area[push, 0].sum()) / (float(box.right[0] - box.left[0]) * abs(face - bars))
