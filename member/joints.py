"""Joints between parts: what enters each part at its ends, the flow along it, and what its fasteners get of it."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, Combined
from fishbelly.member.carried import PartForce, part_force
from fishbelly.member.clusters import BESIDE
from fishbelly.member.contacts import contacts
from fishbelly.member.cut_offs import CutOff, cut_offs
from fishbelly.member.description import Combination, Member, Part
from fishbelly.member.extremes import largest
from fishbelly.member.panels import Panels
from fishbelly.member.part_forces import Loading
from fishbelly.member.part_shears import part_shears
from fishbelly.member.pieces import Pieces

Array = NDArray[np.float64]
Data = dict[str, Any]

_WHOLE = 1e-9
"""A number of fasteners that is over a whole one by less than this is that one."""
_NOISE = 1e-9
"""A value below this share of the largest of its kind is none; flows also against the largest force over the length."""
_ROUND_OFF = 1e-12
"""What round-off makes of nothing, of the forces that balance each other there."""
_SAME = 1e-9
"""Flows of either sign that differ by less than this share are the same: the one on the left is given."""


def joints(
    analysis: Analysis, combined: Combined, loading: Sequence[Loading], p: Pieces, cut: bool = True
) -> list[Data]:
    """Joint of every part with what it is placed against or touches, under one combination.

    Parameters
    ----------
    analysis : Analysis
        The member.
    combined : Combined
        The combination; theoretical cut-offs are found in those in which strength is checked.
    loading : sequence of Loading
        Its shares and steps.
    p : Pieces
        Its fields.
    cut : bool
        Whether theoretical cut-offs are looked for: not where sections crack.

    Returns
    -------
    list of dict
        As the contract of results has it, in the member's order of parts. Values are just inside the ends of the
        part; for a `pair` they are those of both copies together. With pattern loads every value by itself is that of
        the arrangement which makes it largest by size.
    """
    if len(analysis.member.parts) < 2:
        return []
    parts = {i: f for i in loading[0].parts if (f := part_force(loading, i)) is not None}
    profile = loading[0].end.profile
    fixed = {i: to for i, to in contacts(profile).items() if i in parts and to in parts}
    if not fixed:
        return []
    shears = part_shears(loading, parts)
    strong = cut and strength_counts(analysis.member, combined.combination)
    tiny, length = 1e-9 * analysis.member.length, analysis.member.length
    stopping = [i for i in fixed if (p_ := analysis.member.parts[i]).start > tiny or p_.end < length - tiny]
    ends = cut_offs(analysis, loading, stopping) if strong and stopping else {}
    noise = _noise(p, list(parts.values()), analysis.member.length)
    return [
        _joint(analysis, p, i, to, parts[i], _through(analysis.member, i, parts), shears[i], ends.get(i), noise)
        for i, to in sorted(fixed.items())
    ]


def _through(member: Member, index: int, parts: Mapping[int, PartForce]) -> PartForce:
    """What goes through the joint of a part: force and flow of it and of all that stands on it."""
    on = {member.parts[index].name: parts[index]}
    for i, part in enumerate(member.parts):
        if part.place.host in on and i in parts:
            on[part.name] = parts[i]
    N, flow = (np.asarray(sum(fs[1:], fs[0])) for fs in ([f.N for f in on.values()], [f.flow for f in on.values()]))
    return replace(parts[index], N=N, flow=flow)


def _noise(p: Pieces, parts: Sequence[PartForce], length: float) -> dict[str, float]:
    """Size below which each value of a joint is what round-off leaves of nothing."""
    N, M, V = (float(np.abs(f).max(initial=0.0)) for f in (np.stack([f.N for f in parts]), p.M, p.V))
    # forces that balance each other leave round-off of their own in the shear force and the moment
    small = _ROUND_OFF * (N + M / length)
    shear, moment = _NOISE * V + small, _NOISE * M + small * length
    return {"M": moment, "V": shear, "force": _NOISE * N, "shear": shear, "couple": small, "flow": _NOISE * N / length}


def strength_counts(member: Member, combination: Combination) -> bool:
    """Whether strengths are looked at in a combination: in those for strength where there are any, else in all."""
    return combination.purpose == "strength" or not any(c.purpose == "strength" for c in member.combinations)


def _joint(
    analysis: Analysis,
    p: Pieces,
    index: int,
    to: int,
    force: PartForce,
    through: PartForce,
    shear: Array,
    cut: CutOff | None,
    noise: Mapping[str, float],
) -> Data:
    member, panels = analysis.member, analysis.profile.panels
    part = member.parts[index]
    joined = part.joined
    data: Data = {"part": part.name, "to": member.parts[to].name}
    for name, x in (("start", part.start), ("end", part.end)):
        k = force.first if name == "start" else force.stop - 1
        fields = {"M": p.M, "V": p.V, "force": force.N, "shear": shear, "couple": force.M[0], "flow": force.flow}

        def just_inside(key: str, field: Array, k: int = k, name: str = name) -> float:
            own = _NOISE * float(np.abs(field[:, force.first : force.stop]).max(initial=0.0))
            return _settled(worst(inside(panels, field, k, name)), max(own, noise[key]))

        entry: Data = {"x": x} | {key: just_inside(key, field) for key, field in fields.items()}
        entry["per_fastener"] = _per_fastener(part, just_inside("flow", through.flow))
        passed = just_inside("force", through.N)
        data[name] = entry | _fastening(part, passed) | _cut_off(part, through, panels, cut, name, passed)
    data["flow"] = {"max": _largest_flow(panels, through, part, noise["flow"])}
    if joined is not None and joined.capacity is not None:
        most = abs(data["flow"]["max"]["value"])
        data["flow"]["largest_pitch"] = joined.capacity * side_by_side(part) / most if most > 0.0 else None
    return data


def inside(panels: Panels, field: Array, panel: int, end: str) -> Array:
    """Values of a field (J + 1, K, n) just inside an end of a panel, shape (J + 1,)."""
    values = field[:, panel]
    if end == "start":
        # next to a root the interpolant's end is no place to look at
        return np.asarray(values[:, 0] if panels.anchor[panel] < 0 else values @ panels.rule.left)
    return np.asarray(values[:, -1] if panels.anchor[panel] > 0 else values @ panels.rule.right)


def worst(values: Array) -> float:
    """Largest by size over all arrangements of pieces, with its sign, shape (J + 1,)."""
    high = values[0] + np.maximum(values[1:], 0.0).sum()
    low = values[0] + np.minimum(values[1:], 0.0).sum()
    return float(high if high >= -low else low) + 0.0


def _settled(value: float, noise: float) -> float:
    """Return a value, and nothing where round-off made it: symmetry, and a force that does not vary, give none."""
    return value if abs(value) > noise else 0.0


def _largest_flow(panels: Panels, force: PartForce, part: Part, noise: float) -> Data:
    both = [(s, largest(panels, s * force.flow, force.first, force.stop)) for s in (1.0, -1.0)]
    # of equal ones the left
    sign, found = max(both, key=lambda b: b[1].value)
    if abs(both[0][1].value - both[1][1].value) <= _SAME * found.value:
        sign, found = min(both, key=lambda b: b[1].at)
    value = _settled(sign * found.value, noise) + 0.0
    return {"value": value, "at": found.at} | (
        {} if part.joined is None else {"per_fastener": _per_fastener(part, value)}
    )


def side_by_side(part: Part) -> int:
    """Fasteners at one place along a joint: its rows, of both copies where the part is a pair."""
    assert part.joined is not None
    return part.joined.rows * (2 if part.pair else 1)


def beside(part: Part) -> bool:
    """Whether a part stands beside another: fasteners then pass shear and couple too, not force along x alone."""
    return part.place.relation in BESIDE


def _per_fastener(part: Part, flow: float) -> float | None:
    if part.joined is None or part.joined.pitch is None:
        return None
    return flow * part.joined.pitch / side_by_side(part)


def _fastening(part: Part, force: float) -> Data:
    """Fasteners needed to bring a force in, and the length they, or the weld, take for it at the given pitch."""
    joined = part.joined
    if joined is None or beside(part) or (joined.capacity is None and joined.weld is None):
        return {}
    data: Data = {}
    if joined.capacity is not None:
        data["needed"] = math.ceil(abs(force) / joined.capacity - _WHOLE)
    data["zone"] = anchorage(part, force)
    return data


def anchorage(part: Part, force: float) -> float:
    """Length of joint that brings a force in: whole rows of fasteners at their pitch, or weld [m]."""
    joined = part.joined
    assert joined is not None
    if joined.weld is not None:
        return abs(force) / joined.weld
    assert joined.capacity is not None and joined.pitch is not None
    return math.ceil(abs(force) / (joined.capacity * side_by_side(part)) - _WHOLE) * joined.pitch


def _cut_off(part: Part, force: PartForce, panels: Panels, cut: CutOff | None, end: str, passed: float) -> Data:
    """Theoretical cut-off of one end, and where the part then has to run to."""
    joined = part.joined
    if cut is None:
        return {}
    x = cut.start if end == "start" else cut.end
    data: Data = {"cut_off": x, "used_without": cut.used[0 if end == "start" else 1]}
    if joined is not None and not beside(part) and (joined.capacity is not None or joined.weld is not None):
        data["run_to"] = None
        if x is not None:
            carried = _force_at(force, panels, x, passed)
            length = anchorage(part, carried)
            data["run_to"] = x - length if end == "start" else x + length
    return data


def _force_at(force: PartForce, panels: Panels, x: float, otherwise: float) -> float:
    """Force of the part at its theoretical cut-off; at its end where the cut-off lies beyond it."""
    k = int(panels.find(np.array([x]))[0])
    if not force.first <= k < force.stop:
        return otherwise
    basis = panels.rule.basis(panels.local(np.array([k]), np.array([x])))[0]
    return worst(force.N[:, k] @ basis)


def merged_joints(results: Sequence[Sequence[Data]]) -> list[Data]:
    """Put joints of several arrangements together: every value that of the one which makes it largest by size.

    Parameters
    ----------
    results : sequence of list
        Joints of each arrangement, all of the same parts.
    """
    merged: list[Data] = []
    for same in zip(*results, strict=True):
        data = dict(same[0])
        for end in ("start", "end"):
            data[end] = {key: _most(end, key, [j[end] for j in same]) for key in same[0][end]}
        data["flow"] = max((j["flow"] for j in same), key=lambda flow: abs(flow["max"]["value"]))
        merged.append(data)
    return merged


def _most(end: str, key: str, entries: Sequence[Data]) -> Any:
    known = [e[key] for e in entries if e.get(key) is not None]
    if not known:
        return None
    if key in ("cut_off", "run_to"):
        return min(known) if end == "start" else max(known)
    return max(known, key=abs)
