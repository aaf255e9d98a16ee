"""Files that add sections and materials to the catalogue: csv or xlsx, or toml for materials.

A csv with a column ``designation`` holds sections: ``designation``, ``kind`` (an outline such as ``I`` or ``box``)
and that outline's dimensions, each with its unit in the header, ``depth [mm]``. A csv with a column ``name`` holds
materials: ``name`` and the keys of ``[material.NAME]``, with units where they have one. Both may have ``source`` and
``note``; a column whose header begins with ``#`` is passed over. A toml has tables ``[material.NAME]`` as a job has.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field, replace
from decimal import Decimal, InvalidOperation
from pathlib import Path as FilePath
from typing import Annotated, Any

from fishbelly.catalog.designations import normal_form
from fishbelly.catalog.materials import UnknownMaterial, find_material
from fishbelly.catalog.rolled import RolledSection, UnknownDesignation, find_rolled
from fishbelly.catalog.tables import folded
from fishbelly.cli.faults import Fault, JobFaults, as_written, suggest
from fishbelly.cli.job_materials import own_material
from fishbelly.cli.job_models import MaterialTable
from fishbelly.cli.job_outlines import written_shape
from fishbelly.cli.job_part_models import DIMENSIONS, SHAPES, part_model
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_tables import keys_of, read_table
from fishbelly.cli.job_types import Path, Text, ValueFault, ill
from fishbelly.cli.own_catalogue import Catalogue
from fishbelly.cli.quantities import Kind, QuantityError, split_header
from fishbelly.cli.survey_file import Row, read_rows
from fishbelly.cli.toml_lines import Lines, load_toml
from fishbelly.cli.units import unit_factor
from fishbelly.member.checking_shapes import shape_problems
from fishbelly.member.description import Material, Part, Shape
from fishbelly.member.draft import Draft
from fishbelly.member.laws import Law

KINDS = tuple(shape for shape in SHAPES if shape not in ("polygon", "bars"))
"""Outlines that a section of one's own may have."""

_BARE = ("sides", "slope", "poisson", "creep")
_UNITS = {
    **dict.fromkeys(DIMENSIONS, Kind.LENGTH),
    "E": Kind.MODULUS,
    "G": Kind.MODULUS,
    "density": Kind.DENSITY,
    "expansion": Kind.EXPANSION,
    "strength": Kind.STRESS,
    "yield": Kind.STRESS,
    "cracking": Kind.STRESS,
}
_SECTION_WORDS = ("designation", "kind", "source", "note")
_MATERIAL_WORDS = ("name", "like", "source", "note")
_SECTION_COLUMNS = (*_SECTION_WORDS, *sorted(DIMENSIONS - {"points", "holes", "count", "spacing"}))
_POWER = re.compile(r"(1e[-+]?\d+)\s*[·*]?\s*(.*)")


class OwnMaterialTable(MaterialTable):
    """``[material.NAME]`` of a catalogue file: with its source."""

    source: Annotated[str, Text(may_be_empty=True)] = ""
    note: Annotated[str, Text(may_be_empty=True)] = ""


@dataclass
class _Found:
    """What one file holds: things with their lines, and faults."""

    file: str
    sections: list[tuple[RolledSection, int | None]] = field(default_factory=list)
    materials: list[tuple[Material, int | None, str]] = field(default_factory=list)
    faults: list[Fault] = field(default_factory=list)


def read_files(paths: Mapping[str, Path], report: Report) -> Catalogue:
    """Read a job's catalogue files.

    Parameters
    ----------
    paths : mapping of str to tuple
        The files as the job names them, and where it does.
    report : Report
        The job, with its folder; takes the faults, each with the file's name and line.
    """
    found = []
    for name, path in paths.items():
        try:
            found.append(_read(name, report.folder / name))
        except ValueFault as fault:
            report.ills(path, ValueFault(*(replace(i, path=()) for i in fault.ills)))
    return _merged(found, report.faults)


def read_alone(names: Iterable[str]) -> Catalogue:
    """Read catalogue files without a job; raises `JobFaults` with everything wrong with them."""
    found, faults = [], []
    for name in names:
        try:
            found.append(_read(name, FilePath(name)))
        except ValueFault as fault:
            faults += [Fault(name, None, "", "", i.expected, i.found, i.hint) for i in fault.ills]
    catalogue = _merged(found, faults)
    if faults:
        raise JobFaults(faults)
    return catalogue


def _read(name: str, path: FilePath) -> _Found:
    if path.suffix.lower() == ".toml":
        return _materials_toml(name, path)
    rows, comma = read_rows(path)
    if not rows:
        raise ill("a file with columns", name, "it is empty")
    titles = [split_header(cell)[0] for cell in rows[0][1]]
    if "designation" in titles:
        return _sections_csv(_Csv(name, rows, comma, _SECTION_COLUMNS))
    if "name" in titles:
        columns = (*_MATERIAL_WORDS, *(k for k in keys_of(MaterialTable) if k not in ("like", "band")))
        return _materials_csv(_Csv(name, rows, comma, columns))
    wanted = 'a column "designation" (sections) or "name" (materials)'
    return _Found(name, faults=[Fault(name, rows[0][0], "", "", wanted, ", ".join(map(as_written, titles)))])


class _Csv:
    """A csv file with its header understood: rows as tables of quantities, as a job would write them."""

    def __init__(self, file: str, rows: list[Row], comma: bool, known: tuple[str, ...]) -> None:
        self.file, self.comma, self.rows = file, comma, rows[1:]
        self.faults: list[Fault] = []
        self.columns: list[tuple[int, str, str]] = []
        line, header = rows[0]
        self.width = len(header)
        for k, cell in enumerate(header):
            title, unit = split_header(cell)
            if title and not title.startswith("#"):
                self._column(line, k, cell, title, unit, known)

    def _column(self, line: int, k: int, cell: str, title: str, unit: str, known: tuple[str, ...]) -> None:
        shown = " ".join(cell.split())
        if title not in known:
            text = f"unknown column {as_written(shown)}"
            hint = suggest(title, known) or 'a column that begins with "#" is passed over'
            self.faults.append(Fault(self.file, line, "", "", "", text, hint))
            return
        if any(title == other for _, other, _ in self.columns):
            self.faults.append(Fault(self.file, line, "", title, "each column once", "it again"))
            return
        if title in _UNITS and title not in _BARE:
            power = _POWER.fullmatch(unit)
            try:
                unit_factor(power[2] if power else unit, _UNITS[title])
            except QuantityError as error:
                found = error.found or f"{as_written(shown)} without one"
                self.faults.append(Fault(self.file, line, "header", title, error.expected, found, error.hint))
                return
        self.columns.append((k, title, unit))

    def table(self, line: int, cells: list[str]) -> dict[str, Any]:
        """Return one row with a job's keys; empty cells are left out."""
        if len(cells) > self.width and any(cell.strip() for cell in cells[self.width :]):
            expected = f"{self.width} columns as the header has"
            hint = "a text with the separator in it stands in quotes"
            self.faults.append(Fault(self.file, line, "", "", expected, str(len(cells)), hint))
        row: dict[str, Any] = {}
        for k, title, unit in self.columns:
            text = cells[k].strip() if k < len(cells) else ""
            if text:
                row[title] = self._value(title, text, unit)
        return row

    def _value(self, title: str, text: str, unit: str) -> Any:
        if title not in _UNITS and title not in _BARE:
            return text
        number = text.replace(",", ".") if self.comma else text
        try:
            value = Decimal(number)
        except InvalidOperation:
            return f"{text} {unit}".strip()
        if title in _BARE:
            return int(value) if title == "sides" and value == int(value) else float(value)
        power = _POWER.fullmatch(unit)
        return f"{value * Decimal(power[1])} {power[2]}" if power else f"{number} {unit}"


def _sections_csv(file: _Csv) -> _Found:
    tables = [(line, file.table(line, cells)) for line, cells in file.rows]
    raws = [{("name" if k == "designation" else k): v for k, v in table.items()} for _, table in tables]
    lines = Lines({("section", i): line for i, (line, _) in enumerate(tables)})
    report = Report(file.file, {"section": raws}, lines, FilePath())
    found = _Found(file.file, faults=file.faults)
    if file.faults:
        return found
    parts: list[Part | None] = []
    for i, (line, _) in enumerate(tables):
        section, shape = _section(i, raws[i], report)
        parts.append(None if shape is None else Part(raws[i]["name"], None, shape, 0.0, 1.0))
        if section is not None:
            found.sections.append((section, line))
    problems = shape_problems(Draft(1.0, parts))
    report.problems(replace(problem, path=("section", *problem.path[1:])) for problem in problems)
    found.faults += report.faults
    return found


def _section(i: int, raw: dict[str, Any], report: Report) -> tuple[RolledSection | None, Shape | None]:
    path: Path = ("section", i)
    kind = raw.get("kind")
    if "name" not in raw:
        report.add((*path, "designation"), "a designation", "")
    if kind not in KINDS:
        hint = suggest(kind, KINDS) if kind else ""
        listed = f"one of {', '.join(KINDS)}"
        report.add((*path, "kind"), listed, as_written(kind) if kind else "", hint)
    if "name" not in raw or kind not in KINDS:
        return None, None
    dimensions = {key: value for key, value in raw.items() if key in DIMENSIONS}
    faults = len(report.faults)
    model = part_model(kind)
    own = [key for key in keys_of(model) if key in DIMENSIONS]
    for key in dimensions:
        if key not in own:
            text = f"an empty cell, as the dimensions of kind {kind} are {', '.join(own)}"
            report.add((*path, key), text, as_written(dimensions[key]))
    if len(report.faults) > faults:
        return None, None
    table = read_table(model, {"name": raw["name"], "shape": kind} | dimensions, path, report)
    shape = None if table is None else written_shape(table, kind, 1.0, path, report)
    if table is None or shape is None or len(report.faults) > faults:
        return None, None
    numbers = {key: _number(getattr(table, key)) for key in dimensions}
    source = "; ".join(raw[key] for key in ("source", "note") if key in raw)
    return RolledSection(raw["name"], kind, numbers, source or report.name), shape


def _number(value: Law | float) -> float:
    return value.value if isinstance(value, Law) else float(value)


def _materials_csv(file: _Csv) -> _Found:
    found = _Found(file.file, faults=file.faults)
    raws: dict[str, dict[str, Any]] = {}
    lines: dict[Path, int] = {}
    for line, cells in file.rows:
        raw = file.table(line, cells)
        name = raw.pop("name", None)
        if name is None or name in raws:
            wrong = "" if name is None else f"{as_written(name)} again, as on line {lines['material', name]}"
            found.faults.append(Fault(file.file, line, "", "name", "a name of its own", wrong))
            continue
        raws[name] = raw
        lines["material", name] = line
    if not found.faults:
        _materials(Report(file.file, {"material": raws}, Lines(lines), FilePath()), found)
    return found


def _materials_toml(name: str, path: FilePath) -> _Found:
    found = _Found(name)
    try:
        content = path.read_bytes()
    except OSError:
        near = suggest(path.name, sorted(p.name for p in path.parent.glob("*.toml")))
        raise ill("a file beside the job", name, near) from None
    try:
        data, lines = load_toml(content, name)
    except JobFaults as error:
        found.faults += error.faults
        return found
    report = Report(name, data, lines, path.parent)
    for key in data:
        if key != "material":
            report.place(report.line((key,)), "", f'unknown table "{key}"', "known is [material.NAME]", (key,))
    if not isinstance(data.get("material", {}), dict):
        report.about(("material",), "materials are tables with their name, [material.NAME]")
        found.faults += report.faults
        return found
    _materials(report, found)
    return found


def _materials(report: Report, found: _Found) -> None:
    for name, raw in report.data.get("material", {}).items():
        material = own_material(name, report, OwnMaterialTable)
        if material is not None:
            source = "; ".join(str(raw[key]) for key in ("source", "note") if raw.get(key))
            found.materials.append((material, report.line(("material", name)), source))
    found.faults += report.faults


def _merged(found: Iterable[_Found], faults: list[Fault]) -> Catalogue:
    """Put files together; a name that the catalogue or another file has is a fault that names both."""
    sections: dict[str, RolledSection] = {}
    materials: dict[str, Material] = {}
    sources: dict[str, str] = {}
    places: dict[tuple[str, str], str] = {}
    for file in found:
        faults += file.faults
        for section, line in file.sections:
            form = normal_form(section.designation)
            have = _built_in_section(section.designation) or places.get(("section", form))
            faults += _taken(file.file, line, "section", section.designation, have)
            places["section", form] = f'{file.file}, line {line}, as "{section.designation}"'
            sections[form] = section
        for material, line, source in file.materials:
            form = folded(material.name)
            have = _built_in_material(material.name) or places.get(("material", form))
            faults += _taken(file.file, line, "material", material.name, have)
            places["material", form] = f'{file.file}, line {line}, as "{material.name}"'
            materials[form] = material
            sources[material.name] = source or file.file
    return Catalogue(sections, materials, sources)


def _taken(file: str, line: int | None, what: str, name: str, have: str | None) -> list[Fault]:
    if have is None:
        return []
    found = f"{as_written(name)}, which stands in {have} already"
    return [Fault(file, line, f"{what} {as_written(name)}", "", "a name of its own", found)]


def _built_in_section(designation: str) -> str | None:
    try:
        return f'the built-in catalogue as "{find_rolled(designation).designation}"'
    except UnknownDesignation:
        return None


def _built_in_material(name: str) -> str | None:
    try:
        return f'the built-in catalogue as "{find_material(name).name}"'
    except UnknownMaterial:
        return None
