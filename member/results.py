"""Results of a member as data: what programs read and tables show, in SI units."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, Combined
from fishbelly.member.apex import Apexes, judge
from fishbelly.member.arrangements import arrangements, bearings_change, merged
from fishbelly.member.checks import Check, relative
from fishbelly.member.cracking import may_crack
from fishbelly.member.cross_check import cross_check
from fishbelly.member.description import Member
from fishbelly.member.extremes import Extreme, largest, values_at
from fishbelly.member.faults import CannotCompute
from fishbelly.member.joints import joints
from fishbelly.member.limits_met import Since, checks_of, spans_at
from fishbelly.member.moduli import has_band
from fishbelly.member.notes import notes
from fishbelly.member.panels import Panels
from fishbelly.member.part_forces import Loading, loadings
from fishbelly.member.pieces import Pieces, pieces
from fishbelly.member.places import default_places
from fishbelly.member.response import Response
from fishbelly.member.result_rows import check_row, stress_row
from fishbelly.member.slip_layers import has_soft_joints
from fishbelly.member.stage_results import Ends, linear_ends, stage_rows
from fishbelly.member.stage_view import stage_number
from fishbelly.member.station_results import envelope_rows, station_rows
from fishbelly.member.stresses import PartStress, part_stresses

if TYPE_CHECKING:
    from fishbelly.member.cracked_results import CrackedCase

Array = NDArray[np.float64]
Data = dict[str, Any]

NEGLIGIBLE = 1e-9
"""A largest value below this share of the largest of its kind does not exist."""


def deflect(member: Member, at: Iterable[float] | None = None, stage: str | None = None) -> Data:
    """Everything `fishbelly deflect` tells.

    Parameters
    ----------
    member : Member
        The description.
    at : iterable of float, optional
        Places to list instead of the default ones [m].
    stage : str, optional
        Stage at whose end the results are; default the last.

    Returns
    -------
    dict
        As the contract of results has it, SI units; ``stage`` where one was asked for.

    Raises
    ------
    KeyError
        When there is no such stage.
    CannotCompute
        When the numbers cannot be had.
    """
    wanted = None if at is None else [float(x) for x in at]
    number = stage_number(member, stage)
    upto = number if stage is not None and number < len(member.stages) - 1 else None
    analysis = Analysis.of(member, wanted or ())
    _in_range(analysis)
    cases = _cases(analysis)
    combinations = [
        _cracked(case.at(number), wanted) if case else _combination(analysis, analysis.combine(c, upto=upto), wanted)
        for c, case in zip(member.combinations, cases, strict=True)
    ]
    if has_soft_joints(member):
        from fishbelly.member.slip_report import add_slip

        add_slip(analysis, upto, combinations, _largest)
    stages = stage_rows(analysis, combinations, _stage_ends(analysis, cases), _quick(analysis, cases))
    data: Data = {"title": member.title, "units": "SI: m, N, Pa, rad, kg", "length": member.length}
    if stage is not None:
        data["stage"] = stage
    return data | {
        "notes": notes(analysis, combinations),
        "combinations": combinations,
        "stages": stages[: number + 1],
    }


def _stage_ends(analysis: Analysis, cases: Sequence[CrackedCase | None]) -> Ends:
    """Ends of stages, with cracks where there are any."""
    linear = linear_ends(analysis, _deflection_and_stress)
    if not any(cases):
        return linear
    from fishbelly.member.cracked_stages import cracked_ends

    return cracked_ends(cases, linear, _cracked_deflection_and_stress)


def _quick(analysis: Analysis, cases: Sequence[CrackedCase | None]) -> Ends:
    """Ends of stages if nothing crept."""
    quick = analysis.instantaneous
    staged = analysis.creeps and bool(analysis.member.stages)
    return _stage_ends(quick, _cases(quick) if staged and any(cases) else [None] * len(cases))


def _largest(analysis: Analysis, combined: Combined) -> Data:
    """Largest deflections of a combination."""
    return deflections(analysis, combined, pieces(analysis, loadings(analysis, combined)))


def _in_range(analysis: Analysis) -> None:
    """See that the numbers of the job can be computed with at all."""
    for combination in analysis.member.combinations:
        total = analysis.combine(combination).total
        with np.errstate(all="ignore"):
            if not np.all(np.isfinite([np.square(np.abs(f).max(initial=0.0)) for f in (total.M, total.deflection)])):
                raise CannotCompute(f"the numbers of combination {combination.name} pass what a computer can hold")


def _combination(analysis: Analysis, combined: Combined, wanted: list[float] | None) -> Data:
    if bearings_change(analysis, combined):
        cases = arrangements(analysis, combined)
        at = wanted if wanted is not None else [float(x) for x in default_places(analysis.member)]
        data = merged([_one(analysis, c, at, check=k == 0) for k, c in enumerate(cases)])
    else:
        data = _one(analysis, combined, wanted)
    if has_band(analysis.member):
        _add_band(analysis, combined, data)
    return data


def _deflection_and_stress(analysis: Analysis, combined: Combined, loading: Sequence[Loading], p: Pieces) -> Data:
    """What every stage tells of a combination."""
    return {
        "deflection": deflections(analysis, combined, p),
        "stress": [stress_row(s) for s in part_stresses(analysis, loading)],
    }


def _cases(analysis: Analysis) -> tuple[CrackedCase | None, ...]:
    """Combinations that crack the member; what knows of cracks is loaded for members that have any."""
    if not may_crack(analysis.member):
        return (None,) * len(analysis.member.combinations)
    from fishbelly.member.cracked_results import cracked_cases

    return cracked_cases(analysis)


def _cracked_deflection_and_stress(case: CrackedCase) -> Data:
    """What every stage tells of a combination that cracks the member."""
    from fishbelly.member.cracked_data import stretches
    from fishbelly.member.cracked_results import cracked_stresses

    return {
        "deflection": deflections(case.analysis, case.chosen, case.fields, case.bent),
        "stress": [stress_row(s) for s in cracked_stresses(case)],
        "cracked": stretches(case),
    }


def _one(analysis: Analysis, combined: Combined, wanted: list[float] | None, check: bool = True) -> Data:
    """Results of one combination or arrangement; `check` asks the second method too."""
    loading = loadings(analysis, combined)
    p = pieces(analysis, loading)
    told = deflections(analysis, combined, p)
    data = _told(analysis, combined, p, told, part_stresses(analysis, loading), wanted)
    data["joints"] = joints(analysis, combined, loading, p, cut=check)
    data["cross_check"] = cross_check(analysis, combined, told) if check else None
    if combined.patterns:
        data["envelope"] = envelope_rows(analysis, p, data["stations"])
    return data


def _cracked(case: CrackedCase, wanted: list[float] | None) -> Data:
    """Results of one combination that cracks the member, at the end of a stage."""
    from fishbelly.member.cracked_check import cracked_check
    from fishbelly.member.cracked_data import cracked_data
    from fishbelly.member.cracked_loading import cracked_loading
    from fishbelly.member.cracked_results import cracked_stresses, in_band

    p = case.fields
    told = deflections(case.analysis, case.chosen, p, case.bent)
    data = _told(case.analysis, case.chosen, p, told, cracked_stresses(case), wanted, case.since)
    data["joints"] = joints(case.analysis, case.chosen, cracked_loading(case.along), p, cut=False)
    if has_band(case.analysis.member):
        bands = {}
        for band in ("low", "high"):
            other = in_band(case, band)
            p = other.fields
            checks = checks_of(other.analysis, other.chosen, p, cracked_stresses(other), other.since)
            found = {c.limit: c.found for c in checks}
            bands[band] = (deflections(other.analysis, other.chosen, p, other.bent), found)
        _put_band(data, bands)
    return data | {"cross_check": cracked_check(case.along), "cracked": cracked_data(case)}


def _told(
    analysis: Analysis,
    combined: Combined,
    p: Pieces,
    deflection: Data,
    stresses: Sequence[PartStress],
    wanted: list[float] | None,
    since_stage: Since | None = None,
) -> Data:
    """What is told of every combination."""
    apexes = judge(analysis.profile.panels, combined.total)
    checks = checks_of(analysis, combined, p, stresses, since_stage)
    data: Data = {
        "name": combined.combination.name,
        "for": combined.combination.purpose,
        "deflection": deflection,
        "moment": _moments(analysis, p),
        "shear": _shears(analysis, p),
        "supports": _supports(analysis, combined, p),
        "ends": _ends(analysis, p, apexes),
        "spans": _spans(analysis, combined, p),
        "checks": [check_row(c) for c in checks],
        "stress": [stress_row(s) for s in stresses],
        "joints": [],
        "cross_check": None,
        "stations": station_rows(analysis, p, apexes, wanted),
    }
    if combined.lifted:
        data["lifted"] = sorted(combined.lifted)
    return data


def deflections(analysis: Analysis, combined: Combined, p: Pieces, bent: Response | None = None) -> Data:
    """Largest deflections down, up and across; `bent` is the response without shear, where it is known already."""
    panels = analysis.profile.panels
    down, up = largest(panels, p.deflection[0]), largest(panels, -p.deflection[0])
    aside = [largest(panels, s * p.deflection[1]) for s in (1.0, -1.0)]
    across = max(aside, key=lambda e: e.value)
    sign = 1.0 if across is aside[0] else -1.0
    size = max(abs(down.value), abs(up.value), abs(across.value), analysis.round_off(combined.total) / NEGLIGIBLE)
    return {
        "down": _shear_part(analysis, combined, down, bent) if down.value > NEGLIGIBLE * size else None,
        "up": {"value": up.value, "at": up.at} if up.value > NEGLIGIBLE * size else None,
        "across": {"value": sign * across.value, "at": across.at} if across.value > NEGLIGIBLE * size else None,
    }


def _shear_part(analysis: Analysis, combined: Combined, e: Extreme, bent: Response | None = None) -> Data:
    """Largest deflection down with the part that shear deformation has in it."""
    if not analysis.member.shear:
        return {"value": e.value, "at": e.at, "shear_part": 0.0}
    off = np.zeros(len(analysis.atoms), dtype=bool)
    for mask, on in zip(combined.patterns, e.on, strict=True):
        if not on:
            off |= mask
    if bent is None:
        bent = analysis.superposed(combined.shares, combined.lifted, shear=False, off=off, upto=combined.upto)
    side = "left" if e.at >= analysis.member.length else "right"
    alone = values_at(analysis.profile.panels, bent.deflection[0], np.array([e.at]), side)
    return {"value": e.value, "at": e.at, "shear_part": e.value - float(alone[0])}


def _both(panels: Panels, field: Array) -> tuple[Extreme, Extreme, float]:
    high, low = largest(panels, field), largest(panels, -field)
    return high, low, max(abs(high.value), abs(low.value))


def _moments(analysis: Analysis, p: Pieces) -> Data:
    high, low, size = _both(analysis.profile.panels, p.M)
    return {
        "sagging": {"value": high.value, "at": high.at} if high.value > NEGLIGIBLE * size else None,
        "hogging": {"value": -low.value, "at": low.at} if low.value > NEGLIGIBLE * size else None,
    }


def _shears(analysis: Analysis, p: Pieces) -> Data:
    high, low, size = _both(analysis.profile.panels, p.V)
    largest_v, smallest_v = (0.0 if abs(v) <= 1e-12 * size else v for v in (high.value, -low.value))
    return {"max": {"value": largest_v, "at": high.at}, "min": {"value": smallest_v, "at": low.at}}


def _supports(analysis: Analysis, combined: Combined, p: Pieces) -> list[Data]:
    reactions = p.reactions.sum(axis=0)
    order = sorted(range(len(analysis.member.supports)), key=lambda k: analysis.member.supports[k].at)
    rows = []
    for k in order:
        s = analysis.member.supports[k]
        down, along, couple, across, aside = (float(v) + 0.0 for v in reactions[k])
        rows.append(
            {
                "name": s.name,
                "at": s.at,
                "vertical": -down + 0.0,
                "along": along,
                "moment": couple,
                "across": across,
                "moment_across": aside,
                "lifted": s.name in combined.lifted,
            }
        )
    return rows


def _ends(analysis: Analysis, p: Pieces, apexes: Apexes) -> Data:
    panels = analysis.profile.panels
    result = {}
    for name, x, side, none in (
        ("left", 0.0, "right", 0 in apexes.right_of),
        ("right", analysis.member.length, "left", panels.count in apexes.left_of),
    ):
        at = np.array([x])
        w, rotation, angle = (
            float(values_at(panels, f[0].sum(axis=0), at, side)[0]) for f in (p.deflection, p.rotation, p.shear)
        )
        turned = None if none else rotation
        result[name] = {
            "deflection": w,
            "slope": None if none else rotation + angle,
            "rotation": turned,
        }
    return result


def _spans(analysis: Analysis, combined: Combined, p: Pieces) -> list[Data]:
    panels = analysis.profile.panels
    rows = []
    nothing = 1e-12 * float(np.abs(p.deflection[0].sum(axis=0)).max()) + analysis.round_off(combined.total)
    for span in spans_at(analysis, combined):
        field = relative(analysis, p.deflection[0], span)
        first, stop = panels.border(span.start), panels.border(span.end)
        both = [(s, largest(panels, s * field, first, stop)) for s in (1.0, -1.0)]
        sign, found = max(both, key=lambda b: b[1].value)
        value = sign * found.value if found.value > nothing else 0.0
        rows.append(
            {
                "from": span.start,
                "to": span.end,
                "span": span.label,
                "deflection": value + 0.0,
                "at": found.at,
                "ratio": span.length / abs(value) if value else None,
            }
        )
    return rows


def _add_band(analysis: Analysis, combined: Combined, data: Data) -> None:
    """Add what the low and the high end of every material's band of E give, all low or all high together."""
    bands = {}
    for band in ("low", "high"):
        other = analysis.combine(combined.combination, band, combined.upto)
        cases = arrangements(analysis, other) if bearings_change(analysis, other) else [other]
        found = [_deflections_andchecks_of(analysis, c) for c in cases]
        entries = {k: _widest([d[k] for d, _ in found]) for k in data["deflection"]}
        checks: dict[str, float] = {}
        for c in (c for _, each in found for c in each):
            checks[c.limit] = max(c.found, checks.get(c.limit, -np.inf))
        bands[band] = (entries, checks)
    _put_band(data, bands)


def _put_band(data: Data, bands: dict[str, tuple[Data, dict[str, float]]]) -> None:
    """Put values at both ends of the bands beside deflections and checks."""
    for name, entry in data["deflection"].items():
        if entry is not None:
            entry["band"] = {b: (v[0][name] or {}).get("value") for b, v in bands.items()}
    for entry in data["checks"]:
        entry["band"] = {b: v[1].get(entry["limit"]) for b, v in bands.items()}


def _widest(entries: Sequence[Data | None]) -> Data | None:
    known = [e for e in entries if e is not None]
    return max(known, key=lambda e: abs(e["value"])) if known else None


def _deflections_andchecks_of(analysis: Analysis, combined: Combined) -> tuple[Data, list[Check]]:
    loading = loadings(analysis, combined)
    p = pieces(analysis, loading)
    asked = any(m.strength is not None for m in analysis.member.materials)
    stresses = part_stresses(analysis, loading) if asked else ()
    return deflections(analysis, combined, p), checks_of(analysis, combined, p, stresses)
