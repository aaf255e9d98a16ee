"""The command ``fishbelly catalog``: materials, rolled sections, published limits, with their sources."""

from __future__ import annotations

import json
import re
from collections.abc import Sequence
from typing import Any

import click

from fishbelly.catalog.search import Entry, everything, is_named, nearest, search

_UNITS = "SI: m, N, Pa, rad, kg, K"
_HELP = """\
Find materials, sections and deflection limits by any word.

Without a word: what there is. Examples:

\b
    fishbelly catalog IPE 300
    fishbelly catalog glulam --units us
    fishbelly catalog limits
    fishbelly catalog IBC floor live --snippet >> my-beam.toml

Sections and materials of your own stand in files beside the job, which names them:

\b
    [catalog]
    files = ["my-sections.csv", "my-materials.toml"]

Sections, csv or xlsx: a column "designation", a column "kind" (rectangle, circle, tube, box, I, tee, channel, angle,
trapezoid, regular polygon) and the dimensions of that outline, each with its unit in the header:

\b
    designation,kind,depth [mm],width [mm],web [mm],flange [mm],source
    Girder 7,I,612,228,11.5,18,drawing 7 of 1931

Materials, csv or xlsx: a column "name" and keys as in [material.NAME] of a job, again with units: like, E, G, poisson,
density, expansion, creep, yield, cracking, strength.

\b
    name,E [GPa],poisson,density [kg/m3],expansion [1e-6/K],creep,source
    old iron,95,0.25,7150,11,0,tests 2019

Materials, toml: tables [material.NAME] as in a job. All may have "source" and "note". Decimal commas are
understood where columns are parted by semicolons. A name that the catalogue has already is refused.
"""


@click.command(help=_HELP)
@click.argument("words", nargs=-1, metavar="[WORD]...")
@click.option("--units", type=click.Choice(["metric", "us"]), default="metric", show_default=True, help="Units shown.")
@click.option("--snippet", is_flag=True, help="Print only the lines to paste into a job.")
@click.option("--all", "whole", is_flag=True, help="Do not cut long lists.")
@click.option("--with", "own", multiple=True, metavar="FILE", help="Read a file of your own, too (repeatable).")
@click.option("--json", "as_json", is_flag=True, help="Print one JSON object in SI units instead of the table.")
@click.option(
    "-o",
    "--output",
    "outputs",
    multiple=True,
    metavar="FILE",
    help="Also write FILE: .csv, .json or .xlsx (repeatable).",
)
@click.option("--force", is_flag=True, help="Overwrite an existing file.")
def command(
    words: tuple[str, ...],
    units: str,
    snippet: bool,
    whole: bool,
    own: tuple[str, ...],
    as_json: bool,
    outputs: tuple[str, ...],
    force: bool,
) -> int:
    """Run ``fishbelly catalog``; returns the status."""
    if outputs:
        from fishbelly.cli.files import check_targets

        check_targets(outputs, force)
    asked = " ".join(" ".join(words).split())
    entries = [*_own_entries(own), *everything()]
    found = search(asked, entries) if asked else entries
    if not found:
        near = ", ".join(f'"{name}"' for name in nearest(asked, entries))
        raise click.UsageError(f'nothing in the catalogue for "{asked}"' + (f"; nearest: {near}" if near else ""))
    if outputs:
        _write(found, units, outputs, force)
    if as_json:
        click.echo(json.dumps(data_of(found, asked), allow_nan=False, ensure_ascii=False))
    else:
        click.echo(_text(found, asked, units, snippet, whole))
    return 0


def _text(found: Sequence[Entry], asked: str, style: str, snippet: bool, whole: bool) -> str:
    from fishbelly.cli import catalog_tables as tables
    from fishbelly.cli.catalog_snippets import snippet as pasted

    named = [entry for entry in found if asked and is_named(entry, asked)]
    single = named if len(named) == 1 else list(found)
    if snippet:
        if not asked or (len(single) > tables.MOST and not whole):
            raise click.UsageError(f"--snippet needs words that find fewer than {len(single)}")
        return "\n\n".join(pasted(entry) for entry in single)
    if not asked:
        return tables.listing(found, style, "", whole) if whole else tables.overview(found)
    if len(single) > 1:
        return tables.listing(found, style, asked, whole)
    others = [entry.name for entry in found if entry is not single[0]]
    text = tables.detail(single[0], style)
    if not others:
        return text
    from fishbelly.cli.text_table import paragraph

    more = "" if len(others) <= 8 else f" and {len(others) - 8} more"
    return "\n".join([text, "", *paragraph(f"Also found: {', '.join(others[:8])}{more}")])


def data_of(found: Sequence[Entry], asked: str) -> dict[str, Any]:
    """Return what was found as data, SI base units.

    Parameters
    ----------
    found : sequence of Entry
        What was found.
    asked : str
        The words asked for.
    """
    from fishbelly.cli.catalog_properties import data_of_section
    from fishbelly.cli.catalog_snippets import snippet

    entries = [
        {
            "group": entry.group,
            "name": entry.name,
            "kind": entry.kind,
            "values": {_key(label): value for label, value, _ in entry.values},
            **data_of_section(entry),
            "source": entry.source,
            "note": entry.note,
            "snippet": snippet(entry),
        }
        for entry in found
    ]
    return {"units": _UNITS, "asked": asked, "count": len(entries), "entries": entries}


def _key(label: str) -> str:
    """Spell a label as a key of JSON: ``k_def_1`` for a service class."""
    return re.sub(r"\W+", "_", label.replace("service class ", ""))


def _own_entries(files: Sequence[str]) -> list[Entry]:
    """Entries of the user's own files."""
    if not files:
        return []
    from fishbelly.catalog.search import section_entry
    from fishbelly.cli.catalogue_files import read_alone

    catalogue = read_alone(files)
    entries = [section_entry(section) for section in catalogue.sections.values()]
    units = {"E": "Pa", "G": "Pa", "density": "kg/m3", "expansion": "1/K", "cracking": "Pa", "yield": "Pa"}
    for material in catalogue.materials.values():
        values = [
            (key, float(value), units.get(key, ""))
            for key in ("E", "G", "poisson", "density", "expansion", "creep", "cracking", "yield")
            if (value := getattr(material, "yield_strength" if key == "yield" else key)) is not None
        ]
        source = catalogue.sources[material.name]
        entries.append(Entry("material", material.name, "of your own", tuple(values), source, ""))
    return entries


def _write(found: Sequence[Entry], style: str, outputs: Sequence[str], force: bool) -> None:
    """Write files: a row a value."""
    from pathlib import Path

    from fishbelly.cli import files
    from fishbelly.cli.catalog_properties import MEANINGS, properties
    from fishbelly.cli.catalog_tables import what_of
    from fishbelly.cli.grid import TEXT, Column, Grid, unit_of

    rows = []
    for entry in found:
        rows += [(entry, label, number, what_of(label, unit)) for label, number, unit in entry.values]
        rows += [
            (entry, f"{symbol}, computed from the dimensions: {MEANINGS[symbol]}", number, what)
            for symbol, number, what in properties(entry)
        ]
    grid = Grid(
        "Catalogue",
        (
            Column("group", TEXT, tuple(e.group for e, *_ in rows)),
            Column("name", TEXT, tuple(e.name for e, *_ in rows)),
            Column("kind", TEXT, tuple(e.kind for e, *_ in rows)),
            Column("quantity", TEXT, tuple(label for _, label, *_ in rows)),
            Column("value", "factor", tuple(n / unit_of(w, style)[1] for _, _, n, w in rows), own=True),
            Column("unit", TEXT, tuple(unit_of(w, style)[0] for *_, w in rows)),
            Column("source", TEXT, tuple(e.source for e, *_ in rows)),
            Column("note", TEXT, tuple(e.note for e, *_ in rows)),
        ),
    )
    for path in outputs:
        suffix = Path(path).suffix.lower()
        if suffix == ".json":
            content = (json.dumps(data_of(found, ""), allow_nan=False, ensure_ascii=False) + "\n").encode()
        elif suffix == ".csv":
            from fishbelly.cli.files_csv import grid_csv

            content = grid_csv(grid, style)
        else:
            from fishbelly.cli.files_xlsx import grid_xlsx

            content = grid_xlsx(grid, style)
        files.write_bytes(path, content, force)
