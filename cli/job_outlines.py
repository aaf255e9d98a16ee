"""Outlines of parts: dimensions as a job or the catalogue gives them, to the full set an outline has."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np

from fishbelly.cli.job_laws import Columns, Steps, finish, minus
from fishbelly.cli.job_part_models import DIMENSIONS, PartTable
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_types import Path, ValueFault
from fishbelly.cli.outline_rules import RADII, SHARED
from fishbelly.member.description import Shape
from fishbelly.member.laws import Law, constant

Laws = dict[str, Law]


def written_shape(table: PartTable, kind: str, end: float, path: Path, report: Report) -> Shape | None:
    """Return the shape of a part that has its dimensions in the job.

    Parameters
    ----------
    table : PartTable
        The part, read with the model of its shape.
    kind : str
        The shape.
    end : float
        Where the part ends [m].
    path : tuple
        Where the part stands in the job.
    report : Report
        Takes the faults.

    Returns
    -------
    Shape or None
        None where it cannot be had.
    """
    if kind == "polygon":
        points, holes = getattr(table, "points"), getattr(table, "holes") or ()  # noqa: B009
        return Shape(kind, {}, points, holes) if _sound_polygon(points, holes, path, report) else None
    laws: Laws = {}
    faults = len(report.faults)
    for key in DIMENSIONS:
        value = getattr(table, key, None)
        if isinstance(value, Law | Steps | Columns):
            law = finished(value, end, (*path, key), report)
            if law is not None:
                laws[key] = law
        elif isinstance(value, int | float):
            laws[key] = constant(float(value))
    if len(report.faults) > faults:
        return None
    return full_shape(kind, laws, path, report)


def finished(value: Any, end: float | None, path: Path, report: Report) -> Law | None:
    """Return the law itself, or note why it cannot be had."""
    try:
        law = finish(value, report.folder, end, report.length)
    except ValueFault as fault:
        report.ills(path, fault)
        return None
    if isinstance(value, Columns):
        _warn_of_ends(value, law, end, path, report)
    return law


def _warn_of_ends(value: Columns, law: Law, end: float | None, path: Path, report: Report) -> None:
    """Say where a survey does not reach the ends of what it describes: its last values go on."""
    first, last = float(law.knots[0]), float(law.knots[-1])
    stretch = report.data[str(path[0])][path[1]] if len(path) > 1 else {}
    if end is not None and last < end * (1.0 - 1e-9):
        report.warnings.append(f"{value.file} ends at x = {last:.6g} m: its last value is used up to {end:.6g} m")
    if "from" not in stretch and first > 1e-9 * last:
        report.warnings.append(f"{value.file} begins at x = {first:.6g} m: its first value is used from 0")


def rolled_shape(kind: str, dimensions: Mapping[str, float], path: Path, report: Report) -> Shape | None:
    """Return the shape of a part from the catalogue's dimensions [m]."""
    return full_shape(kind, {key: constant(value) for key, value in dimensions.items()}, path, report)


def full_shape(kind: str, laws: Laws, path: Path, report: Report) -> Shape | None:
    """Give every dimension that the outline has; those left out by their rule."""
    laws = dict(laws)
    missing = []
    for own, shared in SHARED.get(kind, {}).items():
        if own not in laws and shared in laws:
            laws[own] = laws[shared]
        elif own not in laws:
            missing.append((own, shared))
    for shared in dict.fromkeys(shared for _, shared in missing):
        if any((*path, key) in report.meant for key in (shared, *(own for own, s in missing if s == shared))):
            continue  # its misspelling has been noted
        owns = [f"`{own}`" for own, s in missing if s == shared]
        report.add((*path, shared), f"a length, or {' and '.join(owns)} instead", "")
    if missing:
        return None
    for shared in set(SHARED.get(kind, {}).values()):
        laws.pop(shared, None)
    for key in RADII.get(kind, ()):
        laws.setdefault(key, constant(0.0))
    if kind == "box" and "inner_radius" not in laws:
        inner = _inner_radius(laws)
        if inner is None:
            why = "a radius, because radius, web or flange changes along x"
            report.add((*path, "inner_radius"), why, "")
            return None
        laws["inner_radius"] = inner
    if kind == "bars":
        return _bars(laws, path, report)
    return Shape(kind, laws)


def _inner_radius(laws: Laws) -> Law | None:
    """Outer radius less the thicker wall, where that is one number."""
    radius, walls = laws["radius"], (laws["web"], laws["flange"])
    if radius.is_constant and radius.value == 0.0:
        return constant(0.0)
    if not (radius.is_constant and all(wall.is_constant for wall in walls)):
        return None
    return constant(max(0.0, radius.value - max(wall.value for wall in walls)))


def _bars(laws: Laws, path: Path, report: Report) -> Shape | None:
    """Spacing of the middles, from the width out to out where that is given."""
    count = round(laws["count"].value)
    width = laws.pop("width", None)
    if width is not None and "spacing" in laws:
        report.add((*path, "width"), "only one of `spacing` and `width`", "also `spacing`")
        return None
    if count == 1:
        laws["spacing"] = constant(0.0)
    elif width is not None:
        laws["spacing"] = minus(width, laws["diameter"], 1.0 / (count - 1))
    elif "spacing" not in laws:
        report.add((*path, "spacing"), "a spacing of the bars, or their `width` out to out", "")
        return None
    return Shape("bars", laws)


def _sound_polygon(points: Any, holes: Any, path: Path, report: Report) -> bool:
    """Whether the loops cross neither themselves nor each other."""
    from shapely import Polygon, is_valid_reason

    faults = len(report.faults)
    outer = Polygon(points)
    if not outer.is_valid or outer.area == 0.0:
        text = _reason(is_valid_reason(outer))
        report.add((*path, "points"), "an outline that does not cross or touch itself", text)
        return False
    for k, hole in enumerate(holes):
        loop = Polygon(hole)
        if not loop.is_valid or loop.area == 0.0:
            text = _reason(is_valid_reason(loop))
            report.add((*path, "holes", k), "a hole that does not cross or touch itself", text)
        elif not outer.contains_properly(loop):
            report.add((*path, "holes", k), "a hole inside the outline", "one that reaches its edge or beyond")
        elif any(loop.intersects(Polygon(other)) for other in holes[:k]):
            report.add((*path, "holes", k), "holes apart from each other", "one that meets another")
    return len(report.faults) == faults


def _reason(text: str) -> str:
    """Say where a loop crosses itself."""
    _, _, place = text.partition("[")
    if not place:
        return "points that enclose no area"
    y, z = (float(np.format_float_positional(float(v), precision=6)) for v in place.rstrip("]").split())
    return f"one that does so at y = {y:g} m, z = {z:g} m"
