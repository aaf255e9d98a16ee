"""Parts of a job: shape, extent, placing."""

from __future__ import annotations

from typing import Any

from fishbelly.catalog.rolled import UnknownDesignation
from fishbelly.cli.faults import as_written, nearest
from fishbelly.cli.job_models import JobTable
from fishbelly.cli.job_outlines import finished, rolled_shape, written_shape
from fishbelly.cli.job_part_models import DIMENSIONS, RELATIONS, SHAPES, PartTable, part_model
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_tables import either, read_table
from fishbelly.cli.job_types import Path
from fishbelly.member.description import Part, Placing, Shape
from fishbelly.member.laws import Law, constant


def snapped(x: float, length: float) -> float:
    """Return x, set to an end of the member where it differs from it by rounding only [m]."""
    for end in (0.0, length):
        if abs(x - end) <= 1e-9 * length:
            return end
    return x


def read_part(
    i: int, top: JobTable | None, materials: dict[str, str], sizes: dict[str, str], report: Report
) -> Part | None:
    """Read one part.

    Parameters
    ----------
    i : int
        Its number in the job.
    top : JobTable or None
        The top level, None where that cannot be read: then the part is checked as far as can be.
    materials : dict
        Names of the materials in use, to their proper spelling.
    sizes : dict
        Takes the designation of a part with `size`, by name.
    report : Report
        Takes the faults.

    Returns
    -------
    Part or None
        None where it cannot be had.
    """
    path: Path = ("part", i)
    kind, table = _table(report.data["part"][i], path, report)
    if table is None:
        return None
    faults = len(report.faults)
    cuts = _cuts(i, table, path, report)
    if top is None:
        return None
    start = snapped(0.0 if table.from_ is None else table.from_, top.length)
    end = snapped(top.length if table.to is None else table.to, top.length)
    place = _placing(i, table, top, end, path, report)
    shape = _shape(kind, table, end, path, sizes, report)
    run_in = _run_in(table, path, report)
    if len(report.faults) > faults or shape is None or place is None or cuts is None:
        return None
    if table.pair and _in_one_place(place):
        report.add((*path, "pair"), "two copies that stand apart", "both in one place")
        return None
    return Part(
        name=table.name,
        material=None if table.material is None else materials.get(table.material, table.material),
        shape=shape,
        start=start,
        end=end,
        place=place,
        run_in=run_in,
        cuts=cuts,
        pair=table.pair,
        turn=table.turn,
        mirror=table.mirror,
        stage=table.stage,
        until=table.until,
        joined=table.joined,
        effective=table.effective,
    )


def _run_in(table: PartTable, path: Path, report: Report) -> tuple[float, float]:
    """Lengths at the two ends; one given is for both."""
    given = table.run_in or (0.0,)
    if len(given) > 2:
        found = as_written(report.value((*path, "run_in")))
        report.add((*path, "run_in"), "a length, or a pair [start, end]", found)
    return given[0], given[-1]


def _table(raw: Any, path: Path, report: Report) -> tuple[str | None, PartTable | None]:
    """Read the table with the model of its shape; the shape is None for a part with `size`."""
    if not isinstance(raw, dict):
        return None, read_table(PartTable, raw, path, report)
    if "size" in raw and "shape" in raw:
        report.add((*path, "size"), "either `size` or `shape`", "both")
    elif "size" in raw:
        return None, read_table(part_model(None), raw, path, report)
    elif "shape" not in raw:
        report.add((*path, "shape"), "a shape with its dimensions, or a `size` of the catalogue", "")
    elif isinstance(raw["shape"], str) and raw["shape"] in SHAPES:
        kind = raw["shape"]
        return kind, read_table(part_model(kind), raw, path, report)
    else:
        near = nearest(raw["shape"], SHAPES) if isinstance(raw["shape"], str) else None
        known = ", ".join(SHAPES)
        hint = f'did you mean "{near}"?' if near else f"known are {known}"
        report.add((*path, "shape"), "the name of an outline", as_written(raw["shape"]), hint)
    rest = {k: v for k, v in raw.items() if k not in DIMENSIONS and k not in ("size", "shape")}
    read_table(PartTable, rest, path, report)
    return None, None


def cut_names(report: Report) -> tuple[list[str], list[str]]:
    """Names of the parts that add material, and of those that take it away."""
    adding: list[str] = []
    cutting: list[str] = []
    for raw in report.data.get("part", []):
        if isinstance(raw, dict) and isinstance(raw.get("name"), str):
            (cutting if raw.get("cut") is True else adding).append(raw["name"])
    return adding, cutting


def _cuts(i: int, table: PartTable, path: Path, report: Report) -> tuple[str, ...] | None:
    if not table.cut:
        if table.of is not None:
            report.about((*path, "of"), "`of` belongs to a part with cut = true")
        return ()
    if table.material is not None:
        report.about((*path, "material"), "a part with cut = true has no material")
    if table.of is not None:
        return table.of
    adding, _ = cut_names(report)
    if len(adding) == 1:
        return (adding[0],)
    report.add((*path, "of"), "the part or parts that are cut, as there is not just one other part", "")
    return None


def _shape(
    kind: str | None, table: PartTable, end: float, path: Path, sizes: dict[str, str], report: Report
) -> Shape | None:
    if kind is not None:
        return written_shape(table, kind, end, path, report)
    designation = str(getattr(table, "size"))  # noqa: B009
    try:
        section = report.catalogue.find_section(designation)
    except UnknownDesignation as error:
        hint = "nearest are " + ", ".join(f'"{n}"' for n in error.nearest) if error.nearest else ""
        report.add((*path, "size"), "a designation of the catalogue", as_written(designation), hint)
        return None
    sizes[table.name] = section.designation
    return rolled_shape(section.kind, section.dimensions, path, report)


def _placing(i: int, table: PartTable, top: JobTable, end: float, path: Path, report: Report) -> Placing | None:
    faults = len(report.faults)
    relation = either(table, (*RELATIONS, "position"), path, report, at_least=0)
    if len(report.faults) > faults:
        return None
    host = "" if relation in (None, "position") else str(getattr(table, str(relation)))
    for key, allowed in (
        ("anchor", relation == "position"),
        ("flush", bool(host)),
        ("gap", bool(host) and relation != "centred_on"),
    ):
        if getattr(table, key) is not None and not allowed:
            needs = "`position`" if key == "anchor" else "a part that it is placed against"
            if key == "gap":
                needs = "`under`, `over`, `left_of` or `right_of`"
            report.about((*path, key), f"`{key}` needs {needs}")
    if i == 0 and relation == "position" and top.datum is not None:
        report.about(("datum",), "datum and the first part's `position` both say where it is", "leave one out")
    gap = _law(table.gap, end, (*path, "gap"), report)
    shift = tuple(_law(v, end, (*path, "shift", k), report) for k, v in enumerate(table.shift or (None, None)))
    position = None
    if table.position is not None:
        position = tuple(_law(v, end, (*path, "position", k), report) for k, v in enumerate(table.position))
    if len(report.faults) > faults:
        return None
    anchor = table.anchor or ("middle" if relation == "position" else "top")
    if relation is None:
        anchor = top.datum or "top"
    return Placing(
        relation=relation or "datum",
        host=host,
        position=None if position is None else (position[0], position[1]),
        anchor=anchor,
        flush=table.flush or "middle",
        gap=gap,
        shift=(shift[0], shift[1]),
    )


def _in_one_place(place: Placing) -> bool:
    """Whether a part stands with its middle on the line about which its pair is mirrored."""
    if place.relation == "position" and place.position is not None:
        centred = "left" not in place.anchor and "right" not in place.anchor
        on_line = place.position[0].is_constant and place.position[0].value == 0.0
    else:
        centred = place.relation in ("under", "over", "centred_on") and place.flush in (
            "middle",
            "top",
            "bottom",
        )
        on_line = True
    return centred and on_line and place.shift[0].is_constant and place.shift[0].value == 0.0


def _law(value: Any, end: float, path: Path, report: Report) -> Law:
    """Return a law, nothing where none is given or it cannot be had (then a fault is noted)."""
    law = None if value is None else finished(value, end, path, report)
    return constant(0.0) if law is None else law
