"""Run a worked job, and compare what the tool gives with a second computation."""

import contextlib
import io
import json
import tempfile
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from scipy.optimize import minimize_scalar

from fishbelly.catalog.worked_jobs import worked_jobs
from fishbelly.cli.main import run

JOBS = {job.name: job for job in worked_jobs()}
Values = list[tuple[float, str]]
SAME = 1e-8
"""Relative; the tool against the second computation (quadrature and search of the latter included)."""


def answer(name: str, text: str | None = None) -> Any:
    """Result of ``deflect`` on a worked job, or on its text as changed, with its data files beside it."""
    out, err = io.StringIO(), io.StringIO()
    with tempfile.TemporaryDirectory() as folder:
        for file, content in JOBS[name].data:
            Path(folder, file).write_text(content, encoding="utf-8")
        job = Path(folder, "job.toml")
        job.write_text(JOBS[name].text if text is None else text, encoding="utf-8")
        with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
            status = run(["deflect", str(job), "--json"])
    assert status in (0, 1), err.getvalue()
    result = json.loads(out.getvalue())
    result["by_name"] = {c["name"]: c for c in result["combinations"]}
    return result


def check(combination: Any, limit: str) -> Any:
    return next(c for c in combination["checks"] if c["limit"] == limit)


def down(combination: Any) -> float:
    return float(combination["deflection"]["down"]["value"])


def both(found: float, second: float) -> float:
    """The tool's value, which the second computation must repeat."""
    assert found == pytest.approx(second, rel=SAME)
    return found


def peak(f: Callable[[float], float], a: float, b: float) -> float:
    """Largest value of a smooth function between two places."""
    best = minimize_scalar(lambda x: -f(x), bounds=(a, b), method="bounded", options={"xatol": 1e-7})
    return -float(best.fun)
