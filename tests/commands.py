"""Commands run in this process on a job text: their JSON results."""

import contextlib
import io
import json
import tempfile
from pathlib import Path
from typing import Any

from fishbelly.cli.main import run


def command(name: str, text: str, *options: str) -> Any:
    """JSON result of ``fishbelly NAME JOB --json OPTIONS``; the job must be sound (status 0 or 1)."""
    out, err = io.StringIO(), io.StringIO()
    with tempfile.TemporaryDirectory() as folder:
        job = Path(folder) / "job.toml"
        job.write_text(text, encoding="utf-8")
        with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
            status = run([name, str(job), "--json", *options])
    assert status in (0, 1), err.getvalue()
    return json.loads(out.getvalue())


def deflect(text: str, *at: str) -> Any:
    """Result of ``deflect``, its combinations also by name under ``by_name``."""
    result = command("deflect", text, *(word for x in at for word in ("--at", x)))
    result["by_name"] = {c["name"]: c for c in result["combinations"]}
    return result


def section(text: str, at: str, *options: str) -> Any:
    """Result of ``section`` at a place."""
    return command("section", text, "--at", at, *options)
