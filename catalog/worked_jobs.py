"""Worked jobs that ship with the package: job files whose first comment line says what they show."""

from __future__ import annotations

from dataclasses import dataclass
from importlib.resources import files


@dataclass(frozen=True)
class WorkedJob:
    """A worked job: its name, what it shows in one line, and its text."""

    name: str
    shows: str
    text: str


def worked_jobs() -> tuple[WorkedJob, ...]:
    """Return all worked jobs by name."""
    found = []
    for entry in sorted(files("fishbelly.catalog.jobs").iterdir(), key=lambda e: e.name):
        if entry.name.endswith(".toml"):
            text = entry.read_text(encoding="utf-8")
            shows = text.splitlines()[0].lstrip("# ").strip()
            found.append(WorkedJob(entry.name.removesuffix(".toml"), shows, text))
    return tuple(found)
