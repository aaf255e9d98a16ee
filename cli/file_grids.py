"""Results as the tables that go into files: every column, every station, all combinations in one table."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import replace
from typing import Any

from fishbelly.cli import deflect_grids as grids
from fishbelly.cli.fibre_grids import fibre_grids
from fishbelly.cli.grid import TEXT, Column, Grid, column
from fishbelly.cli.section_grids import section_parts, section_stresses
from fishbelly.cli.stage_grids import stage_tables, staged

Row = Mapping[str, Any]

OF_STATIONS = (
    "M is about the E-weighted centroid, M_datum about the datum line z = 0: M_datum = M where there is no axial "
    "force; slope is that of the deflected line, rotation that of the section, apart by the shear deformation"
)
"""What the heads of the stations mean, for files."""


def joined(title: str, pairs: Sequence[tuple[str, Grid]]) -> Grid:
    """Put the grids of several combinations below each other, with the combination as the first column.

    Parameters
    ----------
    title : str
        Heading of the whole.
    pairs : sequence of tuple of str and Grid
        Name of each combination and its grid; all grids have the same columns.
    """
    names = tuple(name for name, grid in pairs for _ in range(grid.count))
    columns = [Column("combination", TEXT, names)]
    for same in zip(*(grid.columns for _, grid in pairs), strict=True):
        settled = [c.values if c.is_text else c.settled() for c in same]
        columns.append(replace(same[0], values=tuple(v for values in settled for v in values), noise=0.0, scale=0.0))
    notes = {grid.note for _, grid in pairs}
    return Grid(title, tuple(columns), notes.pop() if len(notes) == 1 else "")


def per_combination(data: Row, title: str, make: Callable[[Row, grids.Noise], Grid]) -> Grid:
    """Make one grid of what every combination has."""
    pairs = [(c["name"], make(c, grids.noise_of(c, data["length"]))) for c in data["combinations"]]
    return joined(title, pairs)


def answers(data: Row) -> Grid:
    """Write one row a combination: largest deflections, moments and shears with their places, and checks.

    What no combination has is left out, so that the sheet stays narrow.
    """
    rows = data["combinations"]

    def entry(group: str, name: str, key: str) -> Callable[[Row], Any]:
        return lambda row: None if row[group][name] is None else row[group][name].get(key)

    def band(edge: str) -> Callable[[Row], Any]:
        return lambda row: ((row["deflection"]["down"] or {}).get("band") or {}).get(edge)

    columns = [
        column(rows, "combination", TEXT, "name"),
        column(rows, "for", TEXT),
        column(rows, "down", "deflection", entry("deflection", "down", "value")),
        column(rows, "down at x", "position", entry("deflection", "down", "at")),
        column(rows, "shear part", "deflection", entry("deflection", "down", "shear_part")),
        column(rows, "down, band low", "deflection", band("low"), optional=True),
        column(rows, "down, band high", "deflection", band("high"), optional=True),
    ]
    for title, what, group, name in (
        ("up", "deflection", "deflection", "up"),
        ("across", "deflection", "deflection", "across"),
        ("M sagging", "moment", "moment", "sagging"),
        ("M hogging", "moment", "moment", "hogging"),
        ("V max", "force", "shear", "max"),
        ("V min", "force", "shear", "min"),
    ):
        value = column(rows, title, what, entry(group, name, "value"))
        if all(v is None for v in value.values):
            continue
        columns.append(value)
        columns.append(column(rows, f"{title} at x", "position", entry(group, name, "at")))
    columns += grids.summary(data).columns[3:]
    return Grid("Answer", tuple(columns))


def checks(data: Row) -> list[Grid]:
    """Write the checks of all combinations, one grid for each kind."""
    kinds: dict[str, list[tuple[str, Grid]]] = {}
    for c in data["combinations"]:
        for grid in grids.checks(c):
            kinds.setdefault(grid.title, []).append((c["name"], grid))
    return [joined(title.partition(" (")[0], pairs) for title, pairs in kinds.items()]


def stations(data: Row) -> Grid:
    """Write the stations of all combinations, with the envelope of pattern loads where there is one."""

    def make(c: Row, noise: grids.Noise) -> Grid:
        grid, envelope = grids.stations(c, noise), grids.envelope(c, noise)
        extra = envelope.columns[1:] if envelope is not None else _no_envelope(grid.count, patterned)
        return replace(grid, columns=(*grid.columns, *extra))

    patterned = next((c for c in data["combinations"] if c.get("envelope")), None)
    return replace(per_combination(data, "Stations", make), note=OF_STATIONS)


def stress(data: Row) -> Grid:
    """Write the largest and smallest stresses of all combinations, every head once."""
    grid = per_combination(data, "Stress", grids.stress)
    columns, which = [], ""
    for one in grid.columns:
        which = one.title if one.title in ("max", "min") else which
        columns.append(replace(one, title=f"{one.title} of {which}") if one.title in ("at x", "z") else one)
    return replace(grid, columns=tuple(columns))


_STAGE_TITLES = {
    "Deflection by stage": "Stage deflection",
    "Share of the bending moment by part": "Stage moment by part",
    "Stress by part at the end of each stage": "Stage stress",
    "Supports at the end of each stage": "Stage supports",
    "Supports taken away": "Supports taken away",
}
"""Short titles of the tables of stages, which name worksheets."""


def stages(data: Row) -> list[Grid]:
    """Write what happened stage by stage to all combinations, one grid a question; none for a job without stages."""
    if not staged(data):
        return []
    kinds: dict[str, list[tuple[str, Grid]]] = {}
    for c in data["combinations"]:
        noise = grids.noise_of(c, data["length"]).deflection
        for grid in stage_tables(data, c["name"], noise, across=False):
            kinds.setdefault(grid.title, []).append((c["name"], grid))
    return [joined(_STAGE_TITLES[title], pairs) for title, pairs in kinds.items()]


def _no_envelope(count: int, patterned: Row | None) -> tuple[Column, ...]:
    if patterned is None:
        return ()
    shape = grids.envelope(patterned, grids.noise_of(patterned, 1.0))
    assert shape is not None
    return tuple(replace(c, values=(None,) * count) for c in shape.columns[1:])


def section_details(data: Row) -> list[Grid]:
    """Write the parts of a cross-section and their stresses, at levels too where that was asked."""
    return [section_parts(data), section_stresses(data), *fibre_grids(data)]
