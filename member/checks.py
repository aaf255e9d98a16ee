"""Limits and strengths against what was found: one entry a limit, for the span or place that governs."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from itertools import product

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis
from fishbelly.member.description import Combination, Limit, Strength
from fishbelly.member.extremes import Extreme, largest, values_at
from fishbelly.member.faults import CannotCompute
from fishbelly.member.laws import Law
from fishbelly.member.panels import Panels
from fishbelly.member.spans import Span, spans
from fishbelly.member.stresses import PartStress

Array = NDArray[np.float64]

MOST_PATTERNS = 12
"""A resultant of deflections is looked for over at most 2**12 arrangements of loads."""


@dataclass(frozen=True)
class Check:
    """A limit or strength in one combination.

    `allowed` and `found` in m, rad or Pa; `span` numbers it, or names an overhang; `at` is the place [m];
    `source` says where a published limit stands.
    """

    limit: str
    span: int | str | None
    allowed: float
    found: float
    at: float
    kind: str
    part: str | None = None
    z: float | None = None
    source: str = ""

    @property
    def used(self) -> float:
        """Found over allowed."""
        return self.found / self.allowed

    @property
    def ok(self) -> bool:
        """Whether it is met."""
        return self.found <= self.allowed * (1.0 + 1e-12)


@dataclass(frozen=True, eq=False)
class Fields:
    """Deflection (2, J + 1, K, n) and rotation of a combination: everything but patterns, then each pattern.

    `spans`: the spans and overhangs in this combination.
    """

    deflection: Array
    rotation: Array
    spans: tuple[Span, ...]


def relative(analysis: Analysis, field: Array, span: Span) -> Array:
    """Deflection measured from the line between a span's supports, or from an overhang's support.

    Parameters
    ----------
    analysis : Analysis
        The member.
    field : ndarray, shape (..., K, n)
        Deflection [m].
    span : Span
        Where.
    """
    panels = analysis.profile.panels
    tiny = np.array([span.start]), np.array([span.end])
    start, end = values_at(panels, field, tiny[0], "right"), values_at(panels, field, tiny[1], "left")
    if span.overhang:
        root = end if span.label == "left" else start
        return np.asarray(field - root[..., None])
    share = (panels.x - span.start) / span.length
    return np.asarray(field - start[..., None] - (end - start)[..., None] * share)


def camber(analysis: Analysis, span: Span | None) -> Array:
    """Camber at the grid points [m], upwards: a parabola over each span, or the ordinates given."""
    member, x = analysis.member, analysis.profile.panels.x
    if member.camber is None:
        return np.zeros(x.shape)
    if isinstance(member.camber, Law):
        return member.camber(x)
    result = np.zeros(x.shape)
    for s in spans(member) if span is None else (span,):
        if not s.overhang:
            t = (x - s.start) / s.length
            result += np.where((t > 0.0) & (t < 1.0), 4.0 * t * (1.0 - t) * member.camber, 0.0)
    return result


def applies(limit: Limit, combination: Combination) -> bool:
    """Whether a limit looks at a combination."""
    if limit.combination is not None:
        return limit.combination == combination.name
    return combination.purpose == "deflection"


def check_limit(analysis: Analysis, limit: Limit, fields: Fields) -> Check | None:
    """Worst place of one limit in one combination; None where it has no span to look at."""
    panels = analysis.profile.panels
    if limit.at is not None:
        return _at_station(analysis, limit, fields)
    start = 0 if limit.start is None else panels.border(limit.start)
    end = panels.count if limit.end is None else panels.border(limit.end)
    worst: Check | None = None
    for span in fields.spans:
        if limit.spans is not None and not span.answers(limit.spans):
            continue
        if not span.overhang and _for_overhangs(limit):
            continue
        first, stop = max(start, panels.border(span.start)), min(end, panels.border(span.end))
        if first >= stop:
            continue
        found = _over_span(analysis, limit, fields, span, first, stop)
        if worst is None or found.used > worst.used:
            worst = found
    return worst if worst is None else replace(worst, source=limit.source)


def _for_overhangs(limit: Limit) -> bool:
    """Whether a limit speaks of overhangs only."""
    return limit.span_over is None and limit.absolute is None and limit.slope is None


def _over_span(analysis: Analysis, limit: Limit, fields: Fields, span: Span, first: int, stop: int) -> Check:
    panels = analysis.profile.panels
    if limit.slope is not None:
        plane = 1 if limit.of == "across" else 0
        found = _largest_size(panels, fields.rotation[plane], first, stop)
        return Check(limit.name, span.label, limit.slope, found.value, found.at, "slope")
    down = relative(analysis, fields.deflection[0], span)
    if limit.net:
        down = down.copy()
        down[0] -= camber(analysis, span)
    across = relative(analysis, fields.deflection[1], span)
    found = _of(panels, limit.of, down, across, first, stop)
    return Check(limit.name, span.label, allowed(limit, span), found.value, found.at, "deflection")


def _of(panels: Panels, of: str, down: Array, across: Array, first: int, stop: int) -> Extreme:
    if of == "down":
        return largest(panels, down, first, stop)
    if of == "up":
        return largest(panels, -down, first, stop)
    if of == "across":
        return _largest_size(panels, across, first, stop)
    return _resultant(panels, down, across, first, stop)


def _largest_size(panels: Panels, field: Array, first: int, stop: int) -> Extreme:
    both = [largest(panels, s * field, first, stop) for s in (1.0, -1.0)]
    return max(both, key=lambda e: e.value)


def _resultant(panels: Panels, down: Array, across: Array, first: int, stop: int) -> Extreme:
    pieces = down.shape[0] - 1
    if pieces > MOST_PATTERNS:
        raise CannotCompute(f"a limit of the resultant with {pieces} pattern loads: more than {MOST_PATTERNS}")
    best: Extreme | None = None
    for on in product((0.0, 1.0), repeat=pieces):
        weights = np.array([1.0, *on])
        w, v = np.tensordot(weights, down, 1), np.tensordot(weights, across, 1)
        found = largest(panels, w * w + v * v, first, stop)
        if best is None or found.value > best.value:
            best = Extreme(found.value, found.at, np.array(on, dtype=bool))
    assert best is not None
    return Extreme(float(np.sqrt(max(best.value, 0.0))), best.at, best.on)


def allowed(limit: Limit, span: Span) -> float:
    """Allowed deflection of a span [m]: a cantilever's length counts twice unless `cantilever_over` is given."""
    if limit.absolute is not None:
        return limit.absolute
    most = math.inf if limit.cap is None else limit.cap
    if span.overhang and limit.cantilever_over is not None:
        return min(span.length / limit.cantilever_over, most)
    assert limit.span_over is not None
    return min((2.0 if span.overhang else 1.0) * span.length / limit.span_over, most)


def _at_station(analysis: Analysis, limit: Limit, fields: Fields) -> Check:
    panels = analysis.profile.panels
    x = next(s.at for s in analysis.member.stations if s.name == limit.at)
    side = "left" if x >= analysis.member.length * (1.0 - 1e-12) else "right"
    place = np.array([x])
    if limit.slope is not None:
        plane = 1 if limit.of == "across" else 0
        sides = [values_at(panels, fields.rotation[plane], place, s)[:, 0] for s in ("left", "right")]
        found = max(_worst_size(v) for v in sides)
        return Check(limit.name, None, limit.slope, found, x, "slope")
    down, across = (values_at(panels, fields.deflection[p], place, side)[:, 0] for p in (0, 1))
    if limit.net:
        down = down.copy()
        down[0] -= float(values_at(panels, camber(analysis, None), place, side)[0])
    if limit.of == "down":
        found = _worst(down)
    elif limit.of == "up":
        found = _worst(-down)
    elif limit.of == "across":
        found = _worst_size(across)
    else:
        found = _worst_resultant(down, across)
    assert limit.absolute is not None
    return Check(limit.name, None, limit.absolute, found, x, "deflection", source=limit.source)


def _worst(values: Array) -> float:
    return float(values[0] + np.maximum(values[1:], 0.0).sum())


def _worst_size(values: Array) -> float:
    return max(_worst(values), _worst(-values))


def _worst_resultant(down: Array, across: Array) -> float:
    if down.size - 1 > MOST_PATTERNS:
        raise CannotCompute(f"a limit of the resultant with more than {MOST_PATTERNS} pattern loads")
    arrangements = [np.array([1.0, *on]) for on in product((0.0, 1.0), repeat=down.size - 1)]
    return float(max(np.hypot(w @ down, w @ across) for w in arrangements))


def check_strengths(analysis: Analysis, stresses: Sequence[PartStress]) -> list[Check]:
    """Strength of every part that has one: the fibre and the kind of stress that uses most of it."""
    found = []
    for stress in stresses:
        part = analysis.member.part(stress.part)
        strength = analysis.member.material(part.material or "").strength
        if strength is None:
            continue
        entries = _entries(stress, strength)
        if entries:
            found.append(max(entries, key=lambda c: c.used))
    return found


def _entries(stress: PartStress, strength: Strength) -> list[Check]:
    entries = []
    name = f"strength of {stress.part}"
    if strength.tension is not None and stress.highest is not None:
        p = stress.highest
        entries.append(Check(name, None, strength.tension, max(p.value, 0.0), p.at, "tension", stress.part, p.z))
    if strength.compression is not None and stress.lowest is not None:
        p = stress.lowest
        entries.append(
            Check(name, None, strength.compression, max(-p.value, 0.0), p.at, "compression", stress.part, p.z)
        )
    if strength.shear is not None and stress.shear is not None:
        s = stress.shear
        entries.append(Check(name, None, strength.shear, s.value, s.at, "shear", stress.part, s.z))
    return entries
