"""Jobs that are hard to draw: thin, long, crowded, wordy."""

from __future__ import annotations

from pathlib import Path

FOLDER = Path(__file__).parent / "ugly_jobs"
"""Where they stand."""

JOBS = {p.stem.replace("_", " "): p.read_text(encoding="utf-8") for p in sorted(FOLDER.glob("*.toml"))}
"""Job files by name."""
