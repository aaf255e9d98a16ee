"""Which quantities of a combination are drawn: none that is round-off, those sideways where they govern."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np

from fishbelly.cli.figures.curves import Curves
from fishbelly.cli.figures.governing import bends_sideways

_ROUND_OFF = 1e-9
"""Share of its natural scale below which a quantity is zero."""
_NAMES: Mapping[str, str] = {"moment": "M", "shear": "V", "slope": "slope", "deflection": "deflection"}


def quantities(curves: Curves, combination: Mapping[str, Any]) -> tuple[list[str], str]:
    """Choose the lines of a combination, from the top of the page downwards.

    Parameters
    ----------
    curves : Curves
        The solved member.
    combination : mapping
        One of the combinations of `fishbelly deflect`.

    Returns
    -------
    list of str, str
        Quantities as for `response_lines.plot`, at least one; and a sentence that says which are zero, or nothing.
    """
    drawn = [q for q in _NAMES if combination.get("envelope") or not _zero(curves, combination, q)]
    empty = [_NAMES[q] for q in _NAMES if q not in drawn]
    sideways = bends_sideways(combination)
    aside = []
    if sideways and _most(curves, combination, "moment across") > _most(curves, combination, "moment"):
        aside.append("moment across")
    if sideways and "deflection" not in drawn:
        aside.append("across")
    chosen = [q for q in drawn if q != "deflection"] + aside + [q for q in drawn if q == "deflection"]
    if not empty:
        return chosen, ""
    listed = " and ".join(filter(None, (", ".join(empty[:-1]), empty[-1])))
    verb = "is" if len(empty) == 1 else "are"
    where = " in the upright plane" if sideways else ""
    return chosen or ["deflection"], f"Not drawn: {listed}, which {verb} zero throughout{where}"


def _most(curves: Curves, combination: Mapping[str, Any], quantity: str) -> float:
    values = np.abs(curves.along(combination, quantity)[1])
    return float(np.nanmax(values)) if np.isfinite(values).any() else 0.0


def _zero(curves: Curves, combination: Mapping[str, Any], quantity: str) -> bool:
    """Whether a quantity is round-off beside the forces and the movements of both planes."""
    length = curves.member.length
    if quantity in ("slope", "deflection"):
        scale = max(_most(curves, combination, q) for q in ("deflection", "across"))
        scale = scale / length if quantity == "slope" else scale
    else:
        if not any(_known(combination[quantity].values())):
            return True
        forces = [abs(s[k]) for s in combination["supports"] for k in ("vertical", "across")]
        scale = max(forces, default=0.0) * (length if quantity == "moment" else 1.0)
        if quantity == "moment":
            scale = max(scale, _most(curves, combination, "moment across"))
    return _most(curves, combination, quantity) <= _ROUND_OFF * scale


def _known(extremes: Any) -> list[bool]:
    return [e is not None and e["value"] != 0.0 for e in extremes]
