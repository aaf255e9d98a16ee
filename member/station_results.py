"""Rows of the table along the member: values at stations, and their envelope over pattern loads."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.apex import Apexes
from fishbelly.member.breakpoints import breakpoints, distinct
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
    x, sides = two_sided(distinct(base), [*force_jumps(member), *_jumps(analysis, p)], member.length)
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
    # what is round-off against the largest of its kind, in either plane, is where nothing should be
    nothing = round_off(analysis, p)
    floor = np.array([nothing[name] for name in fields])[:, None]
    chosen = np.where(np.abs(chosen) <= floor, 0.0, chosen)
    return dict(zip(fields, chosen, strict=True))


def round_off(analysis: Analysis, p: Pieces) -> dict[str, float]:
    """Values of each column of the stations that are nothing but round-off.

    Forces are measured by the largest force or reaction, moments by those times the length too; rotations and
    deflections by the largest of either plane.
    """
    length = analysis.member.length
    force = max(float(np.abs(f).max()) for f in (p.V, p.N, p.reactions[:, :, [0, 1, 3]])) if p.reactions.size else 0.0
    moment = max(
        float(np.abs(p.M).max()), float(np.abs(p.reactions[:, :, [2, 4]]).max(initial=0.0)), 1e-3 * force * length
    )
    moved = float(np.abs(p.deflection).max())
    turned = max(float(np.abs(p.rotation + p.shear).max()), moved / length)
    sizes = {"M": moment, "M_datum": moment, "V": force, "N": force, "slope": turned, "rotation": turned}
    sizes |= {"deflection": moved, "across": moved}
    return {name: 1e-13 * size for name, size in sizes.items()}


def _jumps(analysis: Analysis, p: Pieces) -> list[float]:
    """Borders at which any listed value jumps [m]."""
    panels = analysis.profile.panels
    nothing = round_off(analysis, p)
    found: set[int] = set()
    fields = {
        "M": p.M,
        "M_datum": p.M_datum,
        "V": p.V,
        "N": p.N,
        "slope": p.rotation[0] + p.shear[0],
        "rotation": p.rotation[0],
        "deflection": p.deflection[0],
    }
    for name, field in fields.items():
        left, right = panels.ends(field.sum(axis=0))
        found.update(np.flatnonzero(np.abs(left[1:] - right[:-1]) > 1e4 * nothing[name]) + 1)
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
