"""Counts the rows of published values that were run, and says at the end which were not, and why."""

import json
import re
from collections import Counter, defaultdict
from pathlib import Path

import pytest

HERE = Path(__file__).parent


def plain(name: str) -> str:
    """A row's id as a test's name can have it."""
    return re.sub(r"\W", "_", name)


def row_of(nodeid: str) -> str | None:
    """Plain id of the row that a test of this folder runs: what stands in its brackets, or its name."""
    module, _, test = nodeid.partition("::")
    if not Path(module).name.startswith("test_group_") or not test:
        return None
    inside = re.search(r"\[(.*)\]$", test)
    return plain(inside.group(1) if inside else test.removeprefix("test_"))


def reasons() -> dict[str, str]:
    """Why a row is not run, by id."""
    listed = json.loads((HERE / "not_run.json").read_text(encoding="utf-8"))
    return {row: entry["reason"] for entry in listed for row in entry["rows"]}


def all_rows() -> list[str]:
    """Ids of all rows: of the groups that have a file, and those listed as not run."""
    ids = [row["id"] for file in sorted(HERE.glob("group_?.json")) for row in json.loads(file.read_text("utf-8"))]
    return list(dict.fromkeys([*ids, *reasons()]))


def pytest_terminal_summary(terminalreporter: pytest.TerminalReporter) -> None:
    """Print rows run, rows in all, and those not run with the reason."""
    passed = {row_of(r.nodeid) for r in terminalreporter.stats.get("passed", ()) if r.when == "call"}
    failed = {row_of(r.nodeid) for r in terminalreporter.stats.get("failed", ())}
    if not (passed | failed) - {None}:
        return
    rows, why = all_rows(), reasons()
    run = [row for row in rows if plain(row) in passed | failed]
    missing: dict[str, list[str]] = defaultdict(list)
    for row in rows:
        if row not in run:
            missing[why.get(row, "not selected in this run")].append(row)
    write = terminalreporter.write_line
    terminalreporter.section("published values")
    total, done = Counter(row[0] for row in rows), Counter(row[0] for row in run)
    write("rows run: " + ", ".join(f"{group} {done[group]} of {total[group]}" for group in sorted(total)))
    wrong = [row for row in run if plain(row) in failed]
    write(f"in all {len(run)} of {len(rows)} run" + (f", {len(wrong)} failed: {', '.join(wrong)}" if wrong else ""))
    for reason, ids in missing.items():
        write(f"not run, {reason} ({len(ids)}): {', '.join(ids)}")
