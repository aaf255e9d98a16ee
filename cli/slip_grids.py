"""Joints that slip as tables and sentences: slip, force per fastener, both bounds, the gamma-method beside them."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import replace
from typing import Any

from fishbelly.cli.deflect_grids import Noise, span_words
from fishbelly.cli.format_quantity import format_number, format_value
from fishbelly.cli.grid import TEXT, Grid, column
from fishbelly.cli.text_table import paragraph, render

Row = Mapping[str, Any]

_PER_LENGTH = {"metric": "N/mm/mm", "us": "kip/in/in"}
"""Units of the stiffness of a joint per length: numbers are those of a stress."""
_GAMMA = "Gamma-method (EN 1995-1-1, Annex B)"


def slip_joints(combination: Row, noise: Noise) -> Grid:
    """Write slip and forces of every joint that slips.

    Parameters
    ----------
    combination : mapping
        One combination of the results.
    noise : Noise
        What is noise in it.
    """
    rows = list(combination.get("slip", ()))

    def end(name: str) -> Callable[[Row], Any]:
        return lambda row: row["ends"][name]["slip"]

    def most(key: str, what: str) -> Callable[[Row], Any]:
        return lambda row: None if row[key] is None else row[key]["max"][what]

    return Grid(
        "Joints that slip",
        (
            column(rows, "part", TEXT),
            column(rows, "to", TEXT),
            column(rows, "slip left", "deflection", end("left"), noise=noise.deflection, own=True),
            column(rows, "slip right", "deflection", end("right"), noise=noise.deflection, own=True),
            column(rows, "flow", "shear flow", most("flow", "value"), noise=noise.force, own=True),
            column(rows, "at x", "position", most("flow", "at")),
            column(
                rows, "fastener", "force", most("per_fastener", "value"), optional=True, noise=noise.force, own=True
            ),
            column(rows, "at x", "position", most("per_fastener", "at"), optional=True),
            column(rows, "creep", TEXT, _creep, optional=True),
        ),
        "slip of the part against what it is joined to, towards +x; flow and fastener: the largest force that the "
        "joint puts into the part",
    )


def _creep(row: Row) -> str:
    """Write the creep factors of the joint that were used."""
    said = [] if row["creep"] is None else [f"{row['creep']:.4g}"]
    said += [f"{v:.4g} with shrinkage" for v in row["creep_of_shrinkage"]]
    return "; ".join(said + [f"{v['creep']:.4g} in {v['stage']}" for v in row["creep_in_stages"]])


def slip_bounds(combination: Row, noise: Noise) -> Grid:
    """Write the deflection as joined between those with nothing joined that slips, and with all of it rigid."""
    bounds = combination.get("bounds")
    if bounds is None:
        return Grid("Both bounds", ())
    found = combination["deflection"][bounds["of"]]
    named = (("not joined", bounds["apart"]), ("as joined", found), ("rigid", bounds["rigid"]))
    rows = [{"joints": name} | (dict(entry) if entry else {"value": None, "at": None}) for name, entry in named]
    return Grid(
        "Both bounds",
        (
            column(rows, "joints", TEXT),
            column(rows, f"deflection {bounds['of']}", "deflection", "value", noise=noise.deflection),
            column(rows, "at x", "position", "at"),
        ),
        "largest deflection with the joints that slip away, as given, and rigid",
    )


def slip_gamma(combination: Row, noise: Noise) -> Grid:
    """Write what the gamma-method gives for every span, or which of its conditions does not hold."""
    rows = list(combination.get("gamma", ()))

    def gammas(row: Row) -> str:
        return ", ".join(f"{g:.4g}" for g in row.get("gamma", ()))

    return Grid(
        "Gamma-method",
        (
            column(rows, "span", TEXT, lambda r: span_words(r["span"])),
            column(rows, "n", TEXT, lambda r: str(r.get("n", "")), optional=True),
            column(rows, "l", "length", "length", optional=True),
            column(rows, "gamma", TEXT, gammas, optional=True),
            column(rows, "EI_ef", "bending stiffness", "EI", optional=True),
            column(rows, "deflection", "deflection", noise=noise.deflection, optional=True),
            column(rows, "does not hold", TEXT, "reason", optional=True),
        ),
        "EN 1995-1-1, Annex B, on short-term moduli: beside the result, never in it",
    )


def slip_lines(combination: Row, noise: Noise, style: str, explained: bool) -> list[str]:
    """Write everything about joints that slip.

    Parameters
    ----------
    combination : mapping
        One combination of the results.
    noise : Noise
        What is noise in it.
    style : {"metric", "us"}
        Units to show.
    explained : bool
        Whether heads say what stands below them.

    Returns
    -------
    list of str
        Nothing where nothing slips.
    """
    if not combination.get("slip"):
        return []
    lines: list[str] = []
    for grid in (slip_joints(combination, noise), slip_bounds(combination, noise)):
        columns = tuple(c for c in grid.columns if c.title != "creep")
        shown = replace(grid, columns=columns, note=grid.note if explained else "")
        lines += [*paragraph(f"{shown.title} ({shown.note})" if shown.note else shown.title), *render(shown, style)]
        if grid.title == "Joints that slip":
            lines += [line for joint in combination["slip"] for line in _stiffness(joint, style)]
        lines.append("")
    for row in combination["gamma"]:
        lines += paragraph(_by_gamma(row, style))
    return [*lines, ""]


def _stiffness(joint: Row, style: str) -> list[str]:
    value = format_number(joint["stiffness"], "stress", style)  # type: ignore[arg-type]
    said = "not joined" if joint["stiffness"] == 0.0 else f"stiffness {value} {_PER_LENGTH[style]}"
    single = "; fasteners taken one by one" if joint["single"] else ""
    creep = f", creep {_creep(joint)}" if _creep(joint) else ""
    return paragraph(f"{joint['part']} on {joint['to']}: {said}{creep}{single}", "  ", "    ")


def _by_gamma(row: Row, style: str) -> str:
    where = f"{_GAMMA}, span {span_words(row['span'])}"
    if not row["holds"]:
        return f"{where}: does not apply: {row['reason']}."
    gammas = ", ".join(f"{g:.4g}" for g in row["gamma"])
    stiffness = format_value(row["EI"], "bending stiffness", style)  # type: ignore[arg-type]
    length = format_value(row["length"], "length", style)  # type: ignore[arg-type]
    said = f"{where}: EI_ef {stiffness}, n = {row['n']}, l = {length}, gamma {gammas}"
    if row["deflection"] is None:
        return f"{said}."
    return f"{said}; deflection by it {format_value(row['deflection'], 'deflection', style)}."  # type: ignore[arg-type]
