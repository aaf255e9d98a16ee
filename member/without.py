"""A member without some of its parts, for what they are worth: described anew, and set beside the whole one."""

from __future__ import annotations

from collections.abc import Collection, Iterable, Iterator, Sequence
from dataclasses import replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Combination, Member, Part, Stage
from fishbelly.member.faults import CannotCompute
from fishbelly.member.geometry import Geometry
from fishbelly.member.loads import Load, Prestress, SelfWeight, Shrinkage, Temperature

Array = NDArray[np.float64]
Data = dict[str, Any]

STIFFNESSES = ("EA", "EI_y", "EI_z", "GA_z")
"""What of a section is set beside that without parts, and is told as a gain."""


class CannotLeaveOut(ValueError):
    """Parts that cannot be left out of a member, with the reason in words."""


def without(member: Member, names: Collection[str]) -> Member:
    """Describe a member without some of its parts.

    Cuts, notches, haunches and openings of those parts alone go with them, and loads that are theirs alone
    (temperature, shrinkage, prestress, weight by name). Everything else stays as it is: parts that lean on one of
    them keep their place, `left_out` then holds it though it does not work.

    Parameters
    ----------
    member : Member
        The description.
    names : collection of str
        Names of its parts.

    Returns
    -------
    Member

    Raises
    ------
    KeyError
        When there is no such part.
    CannotLeaveOut
        When nothing would be left, or parts of what is left slip on one of them.
    """
    unknown = [name for name in names if all(p.name != name for p in member.parts)]
    if unknown:
        raise KeyError(f"no part is called {', '.join(unknown)}")
    gone = frozenset(names) | {p.name for p in member.parts if p.cuts and set(p.cuts) <= set(names)}
    kept = _held(member, gone)
    _see_left(member, gone, kept, ", ".join(names))
    levels = Geometry(member).opening_levels if member.openings else ()
    openings = tuple(
        replace(o, of=tuple(n for n in o.of if n not in gone), level=level)
        for o, level in zip(member.openings, levels, strict=True)
        if set(o.of) - gone
    )
    loads = left_of_loads(member.loads, gone)
    cases = {load.case for load in loads} | {s.case for s in member.supports if s.sinks}
    stages = tuple(_stage(s, cases) for s in member.stages)
    if kept and not stages:
        # what does not work is a matter of stages
        stages = (Stage("all", tuple(sorted(cases))),)
    return replace(
        member,
        parts=tuple(_part(p, gone) for p in member.parts if p.name not in gone - kept),
        notches=tuple(n for n in member.notches if n.of not in gone),
        haunches=tuple(h for h in member.haunches if h.of not in gone - kept),
        openings=openings,
        loads=loads,
        combinations=tuple(of_cases(c, cases) for c in member.combinations),
        stages=stages,
        left_out=member.left_out | kept,
    )


def _held(member: Member, gone: Collection[str]) -> frozenset[str]:
    """Parts that go but hold the place of others that stay, by themselves or by one between them."""
    hosts = {p.name: p.place.host for p in member.parts}
    found: set[str] = set()
    for p in member.parts:
        name = hosts[p.name] if p.name not in gone else ""
        while name in hosts:
            if name in gone:
                found.add(name)
            name = hosts[name]
    return frozenset(found)


def _see_left(member: Member, gone: Collection[str], kept: Collection[str], listed: str) -> None:
    """See that something is left, and that nothing of it slips on what goes."""
    left = [p for p in member.parts if not p.cuts and p.name not in gone]
    if not left:
        raise CannotLeaveOut(f"nothing is left of the member without {listed}")
    soft = [p.name for p in left if p.place.host in kept and p.joined is not None and p.joined.soft]
    if soft and len(left) > 1:
        raise CannotLeaveOut(f"{', '.join(soft)} would have nothing to slip on without {listed}")


def _part(p: Part, gone: Collection[str]) -> Part:
    """Return a part as it stays: it cuts nothing that is gone, and has no joint with it; one that goes has none."""
    p = replace(p, cuts=tuple(c for c in p.cuts if c not in gone))
    if p.name in gone:
        return replace(p, joined=None, effective=None)
    return replace(p, joined=None) if p.place.host in gone else p


def left_of_loads(loads: Iterable[Load], gone: Collection[str]) -> tuple[Load, ...]:
    """Loads that are left where parts of some names are gone."""
    return tuple(left for load in loads for left in _load(load, set(gone)))


def _load(load: Load, gone: set[str]) -> Iterator[Load]:
    """A load without the parts that are gone, nothing where it was theirs alone."""
    if isinstance(load, Shrinkage | Prestress):
        if load.part not in gone:
            yield load
    elif isinstance(load, Temperature) and load.parts is not None:
        left = {k: v for k, v in load.parts.items() if k not in gone}
        if left:
            yield replace(load, parts=left)
    elif isinstance(load, SelfWeight) and load.parts is not None:
        names = tuple(n for n in load.parts if n not in gone)
        if names:
            yield replace(load, parts=names)
    else:
        yield load


def of_cases(c: Combination, cases: set[str]) -> Combination:
    """Return a combination of those of its cases that are left."""
    factors, sustained = ({k: v for k, v in m.items() if k in cases} for m in (c.factors, c.sustained))
    return replace(c, factors=factors, sustained=sustained)


def _stage(s: Stage, cases: set[str]) -> Stage:
    return replace(s, cases=tuple(c for c in s.cases if c in cases))


def section_without(data: Data, member: Member, names: Sequence[str], stage: str | None = None) -> Data:
    """Set the section without some parts beside the one at hand.

    Parameters
    ----------
    data : dict
        Results of `section_at`.
    member : Member
        The whole member.
    names : sequence of str
        Parts left out.
    stage : str, optional
        Stage that was asked for.

    Returns
    -------
    dict
        ``parts``, stiffnesses and centroid without them, and ``gain``: with them over without.
    """
    from fishbelly.member.section_results import section_at

    try:
        bare = section_at(without(member, names), data["x"], data["side"], None, stage)
    except CannotCompute as error:
        raise CannotCompute(f"without {', '.join(names)}: {error}") from None
    kept = {key: bare[key] for key in ("EA", "EI_y", "EI_z", "EI_yz", "GA_y", "GA_z", "y_c", "z_c", "mass")}
    return {"parts": list(names)} | kept | {"gain": _gains(data, bare)}


def stiffness_without(data: Data, member: Member, names: Sequence[str], stage: str | None = None) -> Data:
    """Set the stiffness without some parts beside that along the member, at the same stations.

    Parameters
    ----------
    data : dict
        Results of `section_results.stiffness`.
    member : Member
        The whole member.
    names : sequence of str
        Parts left out.
    stage : str, optional
        Stage that was asked for.
    """
    from fishbelly.member.section_results import COLUMNS, profile_at

    places = [row["x"] for row in data["stations"]]
    last = len(places) - 1
    sides = [
        "left" if (k < last and places[k + 1] == x) or x >= member.length else "right" for k, x in enumerate(places)
    ]
    try:
        table = profile_at(without(member, names), np.array(places), sides, stage)
    except CannotCompute as error:
        raise CannotCompute(f"without {', '.join(names)}: {error}") from None
    rows = []
    for k, row in enumerate(data["stations"]):
        bare = {n: _number(v) for n, v in zip(COLUMNS, table[:, k], strict=True) if n not in ("z_top", "z_bottom")}
        rows.append({"x": row["x"]} | bare | {"gain": _gains(row, bare)})
    return {"parts": list(names), "stations": rows}


def _gains(whole: Data, bare: Data) -> dict[str, float | None]:
    return {key: _ratio(whole[key], bare[key]) for key in STIFFNESSES}


def deflect_without(
    data: Data,
    member: Member,
    names: Sequence[str],
    at: Iterable[float] | None = None,
    stage: str | None = None,
) -> Data:
    """Set deflections and stresses without some parts beside those with them.

    Parameters
    ----------
    data : dict
        Results of `results.deflect`.
    member : Member
        The whole member.
    names : sequence of str
        Parts left out.
    at : iterable of float, optional
        Places that were asked for [m].
    stage : str, optional
        Stage that was asked for.

    Returns
    -------
    dict
        ``parts`` and, for each combination, deflection, moment, stress and checks without them, and ``gain``: the
        deflection, and the largest stress of each part that stays, without over with.

    Raises
    ------
    CannotLeaveOut
        As `without` does.
    CannotCompute
        When nothing stands without them.
    """
    from fishbelly.member.results import deflect

    try:
        bare = deflect(without(member, names), at, stage)
    except CannotCompute as error:
        raise CannotCompute(f"without {', '.join(names)}: {error}") from None
    rows = []
    for c, b in zip(data["combinations"], bare["combinations"], strict=True):
        kept = {key: b[key] for key in ("name", "deflection", "moment", "stress", "checks")}
        whole = {s["part"]: _largest_stress(s) for s in c["stress"]}
        gain = {
            "deflection": {
                way: _ratio(_value(b["deflection"][way]), _value(c["deflection"][way])) for way in c["deflection"]
            },
            "stress": {s["part"]: _ratio(_largest_stress(s), whole.get(s["part"])) for s in b["stress"]},
        }
        rows.append(kept | {"gain": gain})
    return {"parts": list(names), "combinations": rows}


def _value(entry: Data | None) -> float | None:
    return None if entry is None else float(entry["value"])


def _largest_stress(entry: Data) -> float | None:
    found = [abs(entry[k]["value"]) for k in ("max", "min") if entry[k] is not None]
    return max(found, default=None)


def _ratio(over: float | None, under: float | None) -> float | None:
    return None if over is None or not under else over / under


def _number(value: float) -> float | None:
    return float(value) + 0.0 if np.isfinite(value) else None
