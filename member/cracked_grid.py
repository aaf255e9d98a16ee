"""The grid for cracked members: panels split where a crack begins, places found as roots, not sampled."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.analysis import Analysis
from fishbelly.member.panels import POINTS, Panels
from fishbelly.member.profile import Profile, group_places

Array = NDArray[np.float64]

CLOSE = 1e-9
"""Share of the member's length; a place nearer to a border than this lies on it."""


def split(analysis: Analysis, places: Iterable[float]) -> Analysis:
    """Return the analysis on a grid with further borders; what was sampled already is kept.

    Parameters
    ----------
    analysis : Analysis
        A sampled member.
    places : iterable of float
        Further borders [m]; those on a border, or in a panel that runs out to a point, change nothing.
    """
    old = analysis.profile.panels
    close = CLOSE * analysis.member.length
    borders = np.concatenate((old.a, old.b[-1:]))
    pointed = np.abs(old.anchor) == 2
    wanted: list[float] = []
    for x in sorted(places):
        near = bool(np.abs(borders - x).min() <= close) or (bool(wanted) and x - wanted[-1] <= close)
        if not near and 0.0 < x < analysis.member.length and not pointed[old.find(np.array([x]))[0]]:
            wanted.append(float(x))
    if not wanted:
        return analysis
    panels, parent = _split_panels(old, np.array(wanted))
    profiles = [_resampled(p, panels, parent) for p in (*analysis.earlier, analysis.profile)]
    # moduli stay the same objects, so that what is kept by their identity stays known
    made = replace(
        analysis,
        profile=profiles[-1],
        earlier=tuple(profiles[:-1]),
        _responses={},
        _histories={},
        _combined={},
    )
    # the analysis line stays where it is, wherever the finer grid looks: what is kept about it stays right
    was = analysis.frame
    made.__dict__["frame"] = Frame.of(made.profile, was.short, was.line, was.view)
    return made


def _split_panels(old: Panels, places: Array) -> tuple[Panels, NDArray[np.intp]]:
    """Panels with further borders, and the old panel each of them lies in."""
    inside = old.find(places)
    a, b, anchor, parent = [], [], [], []
    for k in range(old.count):
        ends = np.concatenate(([old.a[k]], places[inside == k], [old.b[k]]))
        last = ends.size - 2
        for i in range(last + 1):
            a.append(ends[i])
            b.append(ends[i + 1])
            side = int(old.anchor[k])
            anchor.append(side if (side < 0 and i == 0) or (side > 0 and i == last) else 0)
            parent.append(k)
    return Panels(np.array(a), np.array(b), np.array(anchor, dtype=np.int_)), np.array(parent, dtype=np.intp)


def _resampled(profile: Profile, panels: Panels, parent: NDArray[np.intp]) -> Profile:
    """The profile on split panels: those in which nothing varies keep their sample."""
    row = profile.row[parent].copy()
    whole = np.bincount(parent, minlength=profile.panels.count)[parent] == 1
    level = np.ptp(profile.row[parent], axis=1) == 0
    which = np.flatnonzero(~whole & ~level)
    groups, rows = list(profile.groups), profile.rows
    if which.size:
        middles = 0.5 * (panels.a + panels.b)[which]
        groups += group_places(profile.geometry, panels.x[which], middles, rows)
        row[which] = rows + np.arange(which.size * POINTS).reshape(which.size, POINTS)
        rows += which.size * POINTS
    made = Profile(profile.geometry, panels, row, tuple(groups), rows, profile.short)
    if "shear_along" in profile.__dict__:
        # found from the geometry alone, whatever the grid
        made.__dict__["shear_along"] = profile.shear_along
    return made


def roots(panels: Panels, field: Array) -> list[float]:
    """Places where a field (K, n) passes zero within panels or on their borders [m]; jumps at borders are none.

    Where a border lies on the root to `CLOSE`, the tangent at the panel's end says where it is. A field that is
    infinite somewhere in a panel has no root there.
    """
    rule, close = panels.rule, CLOSE * float(panels.b[-1])
    found: list[float] = []
    usable = np.asarray(np.isfinite(field).all(axis=1))
    safe = np.where(usable[:, None], field, 1.0)
    left, right = panels.ends(safe)
    values = np.concatenate((left[:, None], safe, right[:, None]), axis=1)
    slopes = safe @ rule.differentiate.T / panels.stretch
    for side, end, place in ((left, rule.left, panels.a), (right, rule.right, panels.b)):
        slope = slopes @ end
        with np.errstate(divide="ignore", invalid="ignore"):
            step = np.where(slope != 0.0, side / slope, np.inf)
        at = np.abs(step) <= close
        found += (place - step)[at & usable].tolist()
    places = np.concatenate(([-1.0], rule.points, [1.0]))
    for k, j in np.argwhere(values[:, :-1] * values[:, 1:] < 0.0):
        found.append(float(panels.place(np.array(k), np.array(_root(panels, safe[k], places[j], places[j + 1])))))
    return _apart(found, 3.0 * close)


def _root(panels: Panels, values: Array, low: float, high: float) -> float:
    """Where the interpolant of a panel passes zero between two local coordinates of different sign."""
    start = float(panels.rule.basis(np.array([low]))[0] @ values)
    for _ in range(3):
        # sections in 32, three times over, then the chord
        s = np.linspace(low, high, 33)
        v = panels.rule.basis(s) @ values
        step = int(np.argmax(v * np.sign(start) <= 0.0)) or 32
        low, high, ends = float(s[step - 1]), float(s[step]), (float(v[step - 1]), float(v[step]))
    gap = ends[0] - ends[1]
    return low + (high - low) * (ends[0] / gap if gap else 0.5)


def _apart(places: list[float], close: float) -> list[float]:
    """Places in order, those closer than `close` taken for one."""
    found: list[float] = []
    for x in sorted(places):
        if not found or x - found[-1] > close:
            found.append(x)
    return found
