"""Rows of the table along the member: values at stations, and their envelope over pattern loads."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.apex import Apexes
from fishbelly.member.breakpoints import breakpoints
from fishbelly.member.extremes import values_at
from fishbelly.member.panels import Panels
from fishbelly.member.pieces import Pieces
from fishbelly.member.places import default_places, force_jumps, two_sided

Array = NDArray[np.float64]
Data = dict[str, Any]


def station_rows(analysis: Analysis, p: Pieces, apexes: Apexes, wanted: list[float] | None) -> list[Data]:
    """Values at stations: default ones or those wanted, named ones always; two rows where a value jumps.

    Parameters
    ----------
    analysis : Analysis
        The member.
    p : Pieces
        Fields of the combination.
    apexes : Apexes
        Where the slope is infinite.
    wanted : list of float or None
        Places [m], or None for the default ones.

    Returns
    -------
    list of dict
        In SI units; `break` tells whether something begins or ends there.
    """
    member, panels = analysis.member, analysis.profile.panels
    named = {s.at: s.name for s in member.stations}
    base = default_places(member) if wanted is None else np.array([*wanted, *(s.at for s in member.stations)])
    x, sides = two_sided(np.unique(base), [*force_jumps(member), *_jumps(analysis, p)], member.length)
    columns = _columns(analysis, p, x, sides)
    tiny = 1e-9 * member.length
    breaks = breakpoints(member)
    rows = []
    for k, place in enumerate(x):
        border = panels.border(float(place))
        infinite = border in (apexes.right_of if sides[k] == "right" else apexes.left_of)
        infinite &= abs(float(place) - _border_at(panels, border)) < tiny
        row: Data = {
            "x": float(place),
            "name": next((n for at, n in named.items() if abs(at - place) < tiny), None),
        }
        row["break"] = bool(np.abs(breaks - place).min() < tiny)
        row |= {key: float(v[k]) + 0.0 for key, v in columns.items()}
        if infinite:
            row["slope"] = row["rotation"] = None
        rows.append(row)
    return rows


def _border_at(panels: Panels, border: int) -> float:
    return float(panels.a[border] if border < panels.count else panels.b[-1])


def _columns(analysis: Analysis, p: Pieces, x: Array, sides: Sequence[str]) -> dict[str, Array]:
    panels = analysis.profile.panels
    fields = {
        "M": p.M.sum(axis=0),
        "M_datum": p.M_datum.sum(axis=0),
        "V": p.V.sum(axis=0),
        "N": p.N.sum(axis=0),
        "slope": (p.rotation[0] + p.shear[0]).sum(axis=0),
        "rotation": p.rotation[0].sum(axis=0),
        "deflection": p.deflection[0].sum(axis=0),
        "across": p.deflection[1].sum(axis=0),
    }
    stack = np.stack(list(fields.values()))
    left, right = (values_at(panels, stack, x, side) for side in ("left", "right"))
    chosen = np.where(np.array(sides) == "left", left, right)
    # what is 1e-14 of the largest of its kind is round-off where nothing should be
    chosen = np.where(np.abs(chosen) <= 1e-14 * np.abs(stack).max(axis=(1, 2))[:, None], 0.0, chosen)
    return dict(zip(fields, chosen, strict=True))


def _jumps(analysis: Analysis, p: Pieces) -> list[float]:
    """Borders at which any listed value jumps [m]."""
    panels = analysis.profile.panels
    found: set[int] = set()
    fields = (p.M, p.M_datum, p.V, p.N, p.rotation[0] + p.shear[0], p.rotation[0], p.deflection[0])
    for field in fields:
        total = field.sum(axis=0)
        left, right = panels.ends(total)
        size = np.abs(total).max()
        found.update(np.flatnonzero(np.abs(left[1:] - right[:-1]) > 1e-9 * size) + 1)
    return [float(panels.a[k]) for k in sorted(found)]


def envelope_rows(analysis: Analysis, p: Pieces, stations: Sequence[Data]) -> Data:
    """Smallest and largest value at every station and support over all arrangements of pattern loads."""
    x = np.array([s["x"] for s in stations])
    sides = ["left" if k + 1 < x.size and x[k + 1] == x[k] else "right" for k in range(x.size)]
    sides[-1] = "left"
    panels = analysis.profile.panels
    stack = {
        "M": p.M,
        "V": p.V,
        "N": p.N,
        "deflection": p.deflection[0],
        "across": p.deflection[1],
        "rotation": p.rotation[0],
    }
    columns = {}
    for name, field in stack.items():
        left, right = (values_at(panels, field, x, side) for side in ("left", "right"))
        v = np.where(np.array(sides) == "left", left, right)
        columns[name] = (v[0] + np.minimum(v[1:], 0.0).sum(axis=0), v[0] + np.maximum(v[1:], 0.0).sum(axis=0))
    rows = [
        {
            "x": float(x[k]),
            **{n: {"min": float(lo[k]), "max": float(hi[k])} for n, (lo, hi) in columns.items()},
        }
        for k in range(x.size)
    ]
    order = sorted(range(len(analysis.member.supports)), key=lambda k: analysis.member.supports[k].at)
    supports = []
    for k in order:
        row: Data = {"name": analysis.member.supports[k].name, "at": analysis.member.supports[k].at}
        for name, column, sign in (
            ("vertical", 0, -1.0),
            ("along", 1, 1.0),
            ("moment", 2, 1.0),
            ("across", 3, 1.0),
        ):
            v = sign * p.reactions[:, k, column]
            row[name] = {
                "min": float(v[0] + np.minimum(v[1:], 0.0).sum()),
                "max": float(v[0] + np.maximum(v[1:], 0.0).sum()),
            }
        supports.append(row)
    return {"stations": rows, "supports": supports}
