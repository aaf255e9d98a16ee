"""Results of `fishbelly deflect` as a table for people: the answer first, then what it rests on."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from typing import Any

from fishbelly.cli import deflect_grids as grids
from fishbelly.cli.cautions import LINE
from fishbelly.cli.cracked_grids import cracked_lines, cracked_stages
from fishbelly.cli.format_quantity import format_number, format_position, format_value, unit_label
from fishbelly.cli.grid import Grid
from fishbelly.cli.joint_grids import fastening, joint_flows, joints
from fishbelly.cli.slip_grids import slip_lines
from fishbelly.cli.stage_grids import stage_tables, staged, story
from fishbelly.cli.station_choice import chosen
from fishbelly.cli.text_table import clean, fits, paragraph, render, shown_width
from fishbelly.cli.without_grids import deflect_beside

Row = Mapping[str, Any]

AXES = (
    "Deflection down positive; M sagging positive (tension at the bottom), about the E-weighted centroid; "
    "EI_y for bending in the vertical plane, about the horizontal axis y–y; x from the left end."
)
_DISPENSABLE = ("M_datum", "rotation", "slope")
"""Columns that go, in this order, where the stations would not fit into a line."""
_SAME = 1e-6
"""Deflections that differ by less than this share are the same."""


def deflect_table(data: Row, style: str, listed: bool = False) -> str:
    """Write deflections, checks, reactions, moments, stresses and stations of every combination.

    Parameters
    ----------
    data : mapping
        Results of `fishbelly deflect`, SI units; its notes are sentences.
    style : {"metric", "us"}
        Units to show.
    listed : bool
        Whether the places were asked for one by one, so that all stations are shown; else a selection.

    Returns
    -------
    str
        Lines of at most 80 columns.
    """
    lines = paragraph(data["title"]) if data.get("title") else []
    when = f", at the end of stage {data['stage']}" if data.get("stage") else ""
    lines += [*paragraph(f"Deflection of a member of length {_at(data['length'], style)}{when}"), ""]
    lines += [*paragraph(AXES), ""]
    if len(data["combinations"]) > 1:
        lines += [*_headed(grids.summary(data), style), ""]
    for k, combination in enumerate(data["combinations"]):
        lines += _combination(combination, data["length"], style, listed, data["combinations"][:k])
    lines += _stages(data, style)
    for grid in deflect_beside(data):
        lines += [*_headed(grid, style), ""]
    if data.get("notes"):
        lines.append("Notes")
        for note in data["notes"]:
            lines += paragraph(str(note), "  - ")
        lines.append("")
    return "\n".join([*lines, LINE]) + "\n"


def _combination(c: Row, length: float, style: str, listed: bool, earlier: Sequence[Row]) -> list[str]:
    explained = not earlier
    noise = grids.noise_of(c, length)
    purpose = " (for strength)" if c.get("for") == "strength" else ""
    heading = paragraph(f"Combination {c['name']}{purpose}")
    lines = [*heading, "-" * max(map(shown_width, heading)), ""]
    lines += [*_answer(c, noise, style), ""]
    tables = [
        *(_without(grid, "source") for grid in grids.checks(c)),
        grids.supports(c, noise),
        None,
        grids.spans(c, noise),
        grids.ends(c, noise),
        _without(grids.stress(c, noise), "shear at x"),
        joints(c, noise),
        *(grid for grid in (fastening(c, noise),) if grid is not None),
        joint_flows(c, noise),
    ]
    for grid in tables:
        if grid is None:
            lines += [*_extremes(c, noise, style), ""]
        elif grid.count:
            lines += [*_headed(grid if explained else replace(grid, note=""), style), ""]
            if grid.title.startswith("Limits of deflection"):
                lines += _sources(c, earlier)
    lines += slip_lines(c, noise, style, explained)
    lines += cracked_lines(c, noise, style, explained)
    if c.get("cross_check") is not None:
        lines += [*_second_method(c["cross_check"], noise, style), ""]
    return [*lines, *_stations(c, noise, style, listed), ""]


def _stages(data: Row, style: str) -> list[str]:
    """Tell what happened stage by stage, then to every combination."""
    if not staged(data):
        return []
    lines = ["Stage by stage", "--------------", ""]
    for number, stage in enumerate(data["stages"], 1):
        lines += paragraph(story(stage, number), "  ", "    ")
    lines.append("")
    several = len(data["combinations"]) > 1
    for k, c in enumerate(data["combinations"]):
        if several:
            lines += [*paragraph(f"Combination {c['name']}, stage by stage"), ""]
        made = stage_tables(data, c["name"], grids.noise_of(c, data["length"]).deflection)
        for grid in (*made, *(g for g in (cracked_stages(data, c["name"]),) if g.count)):
            lines += [*_headed(replace(grid, note="") if k else grid, style), ""]
    return lines


def _sources(c: Row, earlier: Sequence[Row]) -> list[str]:
    """Say where published limits stand, with what is to be known about them, at their first check."""
    said = {check["limit"] for other in earlier for check in other["checks"]}
    new = [check for check in c["checks"] if check.get("source") and check["limit"] not in said]
    lines = [line for k in new for line in paragraph(f"{k['limit']}: {k['source']}", "    ", "      ")]
    return ["  Published limits:", *lines, ""] if lines else []


def _headed(grid: Grid, style: str) -> list[str]:
    heading = f"{grid.title} ({grid.note})" if grid.note else grid.title
    return [*paragraph(heading), *render(grid, style)]


def _at(x: float, style: str) -> str:
    return format_position(x, style)  # type: ignore[arg-type]


def _value(value: float, what: str, style: str, noise: float, scale: float | None = None) -> str:
    if abs(value) <= noise:
        return f"0 {unit_label(what, style)}".rstrip()  # type: ignore[arg-type]
    return format_value(value, what, style, scale=scale)  # type: ignore[arg-type]


def _answer(c: Row, noise: grids.Noise, style: str) -> list[str]:
    """Write the largest deflections, each with its band in one line, and what the checks come to."""
    found = c["deflection"]
    scale = max((abs(e["value"]) for e in found.values() if e is not None), default=0.0)
    lines = ["Largest deflection"]
    for name, entry in found.items():
        if entry is None or abs(entry["value"]) <= noise.deflection:
            if name == "down":
                lines.append("  down    none")
            continue
        said = f"{_value(entry['value'], 'deflection', style, noise.deflection)} at x = {_at(entry['at'], style)}"
        if name == "down":
            said += _ratio(c, entry) + _shear_share(entry, noise, style)
        lines += paragraph(said, f"  {name:<8}")
        if entry.get("band") is not None:
            lines += paragraph(_band(entry, scale, style), " " * 10)
    if c["checks"]:
        lines += paragraph(_checked(c["checks"]), "  checks  ")
    return lines


def _ratio(c: Row, entry: Row) -> str:
    """Say which share of its span the largest deflection is, where it is measured from that span's supports."""
    for span in c["spans"]:
        if span["from"] <= entry["at"] <= span["to"] and span["ratio"] is not None:
            if abs(abs(span["deflection"]) - entry["value"]) <= _SAME * entry["value"]:
                label = span.get("span")
                named = f"the {label} overhang" if isinstance(label, str) else f"span {label}"
                return f", L/{grids.ratio_words(span['ratio'])} of {named}"
    return ""


def _shear_share(entry: Row, noise: grids.Noise, style: str) -> str:
    part = entry.get("shear_part")
    if part is None:
        return ""
    if abs(part) <= noise.deflection:
        return "; shear share 0"
    said = format_value(part, "deflection", style, 3)  # type: ignore[arg-type]
    return f"; shear share {said} ({100.0 * part / entry['value']:.1f}%)"


def _band(entry: Row, scale: float, style: str) -> str:
    values = (entry["band"]["low"], entry["value"], entry["band"]["high"])
    numbers = [format_number(v, "deflection", style, scale=scale) for v in values]  # type: ignore[arg-type]
    return f"with low / nominal / high stiffness: {' / '.join(numbers)} {unit_label('deflection', style)}"  # type: ignore[arg-type]


def _checked(checks: Sequence[Row]) -> str:
    missed = [clean(str(c["limit"])) for c in checks if not c["ok"]]
    near = sum("judgement" in grids.verdict(c) for c in checks)
    said = "all met" if not missed else f"NOT OK: {', '.join(missed[:4])}"
    if len(missed) > 4:
        said += f" and {len(missed) - 4} more"
    if not missed and len(checks) == 1:
        said = "met"
    if near:
        said += f"; used between 90 and 110%, a call for judgement: {near}"
    return said


def _extremes(c: Row, noise: grids.Noise, style: str) -> list[str]:
    """Write the largest moments and shears with their places."""
    lines = ["Moment and shear"]
    for name, group, key, what, floor in (
        ("M sagging", "moment", "sagging", "moment", noise.moment),
        ("M hogging", "moment", "hogging", "moment", noise.moment),
        ("V largest", "shear", "max", "force", noise.force),
        ("V smallest", "shear", "min", "force", noise.force),
    ):
        entry = c[group][key]
        scale = max((abs(e["value"]) for e in c[group].values() if e is not None), default=0.0)
        if entry is None or (group == "moment" and abs(entry["value"]) <= floor):
            lines.append(f"  {name:<11} none")
            continue
        value = _value(entry["value"], what, style, floor, scale)
        place = "" if abs(entry["value"]) <= floor else f" at x = {_at(entry['at'], style)}"
        lines.append(f"  {name:<11} {value:>14}{place}")
    return lines


def _second_method(check: Row, noise: grids.Noise, style: str) -> list[str]:
    said = f"Second method ({check['method']})"
    if check.get("value") is not None:
        said += f": {_value(check['value'], 'deflection', style, noise.deflection)}"
    if check.get("at") is not None:
        said += f" at x = {_at(check['at'], style)}"
    if check.get("difference") is not None:
        said += f", difference {_small(check['difference'])} of it"
    if check.get("equilibrium") is not None:
        said += f"; reactions against loads: residual {_small(check['equilibrium'])}"
    return paragraph(said + ".")


def _small(share: float) -> str:
    return "0" if share == 0.0 else f"{share:.1e}"


def _stations(c: Row, noise: grids.Noise, style: str, listed: bool) -> list[str]:
    rows = c["stations"]
    if not rows:
        return []
    grid = grids.stations(c, noise)
    envelope = grids.envelope(c, noise)
    kept = list(range(len(rows))) if listed else chosen(rows, _first(c), _second(c))
    grid = _without(grid.picked(kept), *_doubles(c, noise))
    for name in () if listed else _DISPENSABLE:
        if not fits(grid, style):
            grid = _without(grid, name)
    notes = (
        [] if len(kept) == len(rows) else [f"{len(kept)} of {len(rows)}: all with --json or -o FILE, others with --at"]
    )
    if envelope is not None:
        notes.insert(0, "with all pattern loads on")
    lines = _headed(replace(grid, note="; ".join(notes)), style)
    if envelope is not None:
        lines += ["", *_headed(envelope.picked(kept), style)]
    return lines


def _first(c: Row) -> list[float]:
    """Places that a reader looks for first: names, supports, extremes."""
    named = [s["x"] for s in c["stations"] if s.get("name")]
    held = [s["at"] for s in c["supports"]]
    tops = [e for group in ("deflection", "moment", "shear") for e in c[group].values() if e is not None]
    return [*named, *(e["at"] for e in tops), *held]


def _second(c: Row) -> list[float]:
    return [s["at"] for s in c["spans"]]


def _doubles(c: Row, noise: grids.Noise) -> list[str]:
    """Name M_datum and rotation where they say what M and slope say."""
    doubles = []
    for name, other, floor in (("M_datum", "M", noise.moment), ("rotation", "slope", noise.slope)):
        pairs = [(s[name], s[other]) for s in c["stations"] if s[name] is not None and s[other] is not None]
        if all(abs(a - b) <= floor + _SAME * abs(b) for a, b in pairs):
            doubles.append(name)
    return doubles


def _without(grid: Grid, *titles: str) -> Grid:
    return replace(grid, columns=tuple(column for column in grid.columns if column.title not in titles))
