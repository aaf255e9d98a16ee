"""Worked jobs that ship with the package: job files whose first comment line says what they show.

A data file belongs to the job that names it, and stands beside it.
"""

from __future__ import annotations

from dataclasses import dataclass
from importlib.resources import files


@dataclass(frozen=True)
class WorkedJob:
    """A worked job: its name, what it shows in one line, its text, and the files it reads, by name and text."""

    name: str
    shows: str
    text: str
    data: tuple[tuple[str, str], ...] = ()


def worked_jobs() -> tuple[WorkedJob, ...]:
    """Return all worked jobs by name."""
    entries = {e.name: e for e in files("fishbelly.catalog.jobs").iterdir()}
    tables = {name: e.read_text(encoding="utf-8") for name, e in sorted(entries.items()) if name.endswith(".csv")}
    found = []
    for file, entry in sorted(entries.items()):
        if file.endswith(".toml"):
            text = entry.read_text(encoding="utf-8")
            shows = text.splitlines()[0].lstrip("# ").strip()
            data = tuple((name, table) for name, table in tables.items() if f'"{name}"' in text)
            found.append(WorkedJob(file.removesuffix(".toml"), shows, text, data))
    return tuple(found)


def all_keys_text() -> str:
    """Return the job in which every key that a job may have stands once, without its comments."""
    return files("fishbelly.catalog").joinpath("all_keys.toml").read_text(encoding="utf-8")


def reference_text() -> str:
    """Return the reference of commands and keys."""
    return files("fishbelly.catalog").joinpath("reference.md").read_text(encoding="utf-8")
