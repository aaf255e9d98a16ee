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


ALL_KEYS = "all-keys"
"""Name of the job in which every key stands once; it is no worked job."""


def worked_jobs() -> tuple[WorkedJob, ...]:
    """Return all worked jobs by name."""
    return tuple(job for job in _jobs() if job.name != ALL_KEYS)


def all_keys_job() -> WorkedJob:
    """Return the job in which every key that a job may have stands once, not yet commented."""
    return next(job for job in _jobs() if job.name == ALL_KEYS)


def reference_text() -> str:
    """Return the reference of commands and keys."""
    return files("fishbelly.catalog").joinpath("reference.md").read_text(encoding="utf-8")


def _jobs() -> list[WorkedJob]:
    entries = {e.name: e for e in files("fishbelly.catalog.jobs").iterdir()}
    tables = {name: e.read_text(encoding="utf-8") for name, e in sorted(entries.items()) if name.endswith(".csv")}
    found = []
    for file, entry in sorted(entries.items()):
        if file.endswith(".toml"):
            text = entry.read_text(encoding="utf-8")
            shows = text.splitlines()[0].lstrip("# ").strip()
            data = tuple((name, table) for name, table in tables.items() if f'"{name}"' in text)
            found.append(WorkedJob(file.removesuffix(".toml"), shows, text, data))
    return found
