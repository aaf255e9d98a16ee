"""Faults of one job while it is read: each finds its line, and the words for its place."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass, field
from pathlib import Path as FilePath
from typing import Any

from fishbelly.catalog.materials import CatalogMaterial
from fishbelly.cli.faults import Fault, as_written, suggest
from fishbelly.cli.format_quantity import format_position
from fishbelly.cli.job_types import Path, ValueFault
from fishbelly.cli.own_catalogue import Catalogue
from fishbelly.cli.toml_lines import Lines
from fishbelly.member.checking_parts import FLUSH
from fishbelly.member.draft import Problem

_ALSO = {
    "top_flange": ("flange",),
    "bottom_flange": ("flange",),
    "top_width": ("width",),
    "bottom_width": ("width",),
    "web": ("wall", "thickness"),
    "flange": ("wall", "thickness"),
    "spacing": ("width",),
    "from": ("stations",),
    "to": ("stations", "from"),
    "vertical": ("holds", "kind"),
    "force": ("strain",),
}
"""Keys under which a value may have been written instead."""

_ITEMS = {"of": "item", "parts": "item", "span": "item", "holds": "item", "points": "point", "holes": "hole"}
_BARE = re.compile(r"[-+.\de]+(inf)?( \S+)?")
_METRES = re.compile(r"""("[^"]*")|(?<![\w.])(-?\d+(?:\.\d+)?(?:e[-+]?\d+)?) m(?![\w/])""")
"""Something in quotes, or a number of metres."""
_SIXTEENTH = 0.0254 / 16.0


def _feet(match: re.Match[str]) -> str:
    """Write a number of metres, as exact as it was written, in inches below a foot, else in feet and inches."""
    if match[1]:
        return match[1]
    x = float(match[2])
    near = round(x / _SIXTEENTH) * _SIXTEENTH
    x = near if f"{near:.6g}" == f"{x:.6g}" else x
    if x == 0.0:
        return "0 ft"
    return f"{x / 0.0254:.5g} in" if abs(x) < 0.3048 - 1e-9 else format_position(x, "us")


@dataclass
class Report:
    """Faults gathered while a job is read.

    Parameters
    ----------
    name : str
        The job's name in messages.
    data : dict
        The job as TOML has it.
    lines : Lines
        Where its keys stand.
    folder : Path
        Folder of the job, for files beside it.
    length : float or None
        Length of the member [m], once it is known.
    named_at : dict of str to tuple
        Where the job first names a material of the catalogue.
    published : dict of str to CatalogMaterial
        Materials of the job that come from the catalogue, or start from it.
    catalogue : Catalogue
        The catalogue, with sections and materials of the job's own files.
    meant : set of tuple
        Paths of keys that were probably meant by unknown ones: they are not also reported missing.
    """

    name: str
    data: dict[str, Any]
    lines: Lines
    folder: FilePath
    length: float | None = None
    faults: list[Fault] = field(default_factory=list)
    warnings: list[str] = field(default_factory=list)
    named_at: dict[str, Path] = field(default_factory=dict)
    published: dict[str, CatalogMaterial] = field(default_factory=dict)
    catalogue: Catalogue = field(default_factory=Catalogue)
    meant: set[Path] = field(default_factory=set)
    _paths: set[Path] = field(default_factory=set)

    def add(self, path: Path, expected: str, found: str, hint: str = "") -> None:
        """Note a fault at a path of the job; `found` is shown as it is."""
        self._paths.add(path)
        where, key = self.where(path), self.key(path)
        self.faults.append(Fault(self.name, self.line(path), where, key, expected, found, hint))

    def line(self, path: Path) -> int | None:
        """Line of a path; of a material of the catalogue, the line that names it."""
        if len(path) > 1 and path[0] == "material" and path[1] in self.named_at:
            path = self.named_at[str(path[1])]
        return self.lines.line(path)

    def place(self, line: int | None, where: str, text: str, hint: str, path: Path) -> None:
        """Note a fault whose place in words is not that of its path."""
        self._paths.add(path)
        self.faults.append(Fault(self.name, line, where, "", "", text, hint))

    def about(self, path: Path, text: str, hint: str = "") -> None:
        """Note a fault that a single text says."""
        self.add(path, "", text, hint)

    def ills(self, path: Path, fault: ValueFault) -> None:
        """Note the faults of one value."""
        for ill in fault.ills:
            if ill.file:
                self._paths.add(path)
                place = ", ".join(p for p in (self.where(path), self.key(path)) if p) if not ill.line else ""
                key = ill.key or ("" if not ill.path else str(ill.path[-1]))
                self.faults.append(Fault(ill.file, ill.line, place, key, ill.expected, ill.found, ill.hint))
            else:
                self.add((*path, *ill.path), self._in_style(ill.expected), ill.found, ill.hint)

    def faulty(self, path: Path) -> bool:
        """Whether a fault stands at a path or below it."""
        return any(p[: len(path)] == path for p in self._paths)

    def problems(self, problems: Iterable[Problem]) -> None:
        """Note what a check of the description found, unless its place is faulty already."""
        for problem in problems:
            path = self._as_written(problem.path)
            if path in self._paths or (len(path) > 2 and self.faulty(path)):
                continue
            if path in self.meant or any((*path, key) in self.meant for key in (*FLUSH, "position")):
                continue  # the fault is that of an unknown key
            if path == ("support",):
                self.place(None, "", f"no [[support]]: {problem.found}", "", path)
                continue
            hint = ""
            if problem.among:
                word = problem.found.strip('"')
                hint = suggest(word, tuple(dict.fromkeys(name for name in problem.among if name)))
            elif path[0] == "material" and not problem.found and path[1] in self.published:
                hint = self._way_out(str(path[1]), str(path[-1]))
            self.add(path, self._in_style(problem.expected), self._found(path, problem.found), hint)

    def _way_out(self, name: str, key: str) -> str:
        """Say how a property that the catalogue does not give is had."""
        entry = self.published[name]
        known = ""
        if key == "creep" and entry.k_def:
            values = ", ".join(f"{value:g} in service class {label}" for label, value in entry.k_def.items())
            known = f"k_def of {entry.name} is {values}"
        elif key == "creep":
            known = "the catalogue cannot know it"
        if name in self.data.get("material", {}):
            return known
        write = f'write [material.NAME] with like = "{entry.name}" and {key}'
        return f"{known}: {write}" if known else write

    def value(self, path: Path) -> Any:
        """Return what the job has at a path, None where there is nothing."""
        at: Any = self.data
        for step in path:
            try:
                at = at[step]
            except (KeyError, IndexError, TypeError):
                return None
        return at

    def _as_written(self, path: Path) -> Path:
        if len(path) < 3 or self.value(path) is not None:
            return path
        for other in _ALSO.get(str(path[-1]), ()):
            if self.value((*path[:-1], other)) is not None:
                return (*path[:-1], other)
        return path

    def _found(self, path: Path, found: str) -> str:
        value = self.value(path)
        if isinstance(value, str) and _BARE.fullmatch(found):
            return as_written(value)
        return self._in_style(found)

    def _in_style(self, text: str) -> str:
        """Write metres, outside quotes, as a job in US units has lengths."""
        return _METRES.sub(_feet, text) if self.value(("units",)) == "us" else text

    def where(self, path: Path) -> str:
        """Words for the table that a path leads through: ``part "arm"``, ``load 2``."""
        if len(path) < 2 or (path[0] not in self.data and path[0] != "material"):
            return ""
        kind, which = str(path[0]), path[1]
        if not isinstance(which, int):
            return f'{kind} "{which}"' if kind == "material" else ""
        table = self.value(path[:2])
        name = table.get("name") if isinstance(table, dict) else None
        if isinstance(name, str) and name and kind != "load":
            return f'{kind} "{name}"'
        word = table.get("kind") if kind == "load" and isinstance(table, dict) else None
        return f"{kind} {which + 1} ({word})" if isinstance(word, str) else f"{kind} {which + 1}"

    def key(self, path: Path) -> str:
        """Words for the key that a path leads to: ``depth, station 3``."""
        steps = path[2:] if self.where(path) else path
        text = ".".join(str(step) for step in steps if isinstance(step, str))
        numbers = [step for step in steps if isinstance(step, int)]
        if numbers and text:
            item = _ITEMS.get(str(next(s for s in steps if isinstance(s, str))), "")
            if not item:
                several = isinstance(self.value(path[: path.index(numbers[0])]), list)
                pairs = several and isinstance(self.value(path[: path.index(numbers[0]) + 1]), list)
                item = "station" if pairs else "item"
            text += f", {item} {numbers[0] + 1}"
        return text
