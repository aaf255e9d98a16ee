"""The job that has every key once, each with a comment that says what it means."""

from __future__ import annotations

import re
import textwrap
import tomllib
from dataclasses import replace
from typing import Any

from fishbelly.catalog.worked_jobs import WorkedJob, all_keys_job
from fishbelly.cli.key_words import key_words

WIDTH, COLUMN, LONGEST = 110, 42, 60
"""Characters of a line, where comments begin, and the longest line that takes its comment beside it."""

_KEY = re.compile(r"([A-Za-z_]+) = ")
_HEADER = re.compile(r"\[+([a-z]+)(?:\.[^\]]+)?\]+")


def all_keys() -> WorkedJob:
    """Return the job with every key, commented, and the files that it reads."""
    job = all_keys_job()
    seen: set[tuple[str, str, str]] = set()
    blocks = re.split(r"(?m)^(?=\[)", job.text)
    return replace(job, text="".join(_commented(block, seen) for block in blocks))


def _commented(block: str, seen: set[tuple[str, str, str]]) -> str:
    """Comment the keys of one table, each meaning where it first stands."""
    table, kind = place_of(block)
    lines = []
    for line in block.splitlines():
        match = _KEY.match(line)
        words = "" if match is None else key_words(table, match[1], kind)
        if match is None or (table, match[1], words) in seen:
            lines.append(line)
            continue
        seen.add((table, match[1], words))
        lines += _beside(line, words)
    return "\n".join(lines) + "\n"


def place_of(block: str) -> tuple[str, str]:
    """Say which table a block of a job is, and its kind: the shape of a part, the kind of a load."""
    header = _HEADER.match(block)
    if header is None:
        return "", ""
    values: dict[str, Any] = tomllib.loads(block.split("\n", 1)[1])
    if header[1] == "part":
        return "part", str(values.get("shape", "size"))
    return header[1], str(values["kind"]) if header[1] == "load" else ""


def _beside(line: str, words: str) -> list[str]:
    """Put words beside a line, going on below, or above it where it is long."""
    if len(line) > LONGEST:
        return [f"# {text}" for text in textwrap.wrap(words, WIDTH - 2)] + [line]
    start = max(COLUMN, len(line) + 2)
    first, *rest = textwrap.wrap(words, WIDTH - start - 2)
    return [f"{line:<{start}}# {first}", *(f"{'':<{start}}# {text}" for text in rest)]
