"""Commands run in this process on a job text, and what tests of whole jobs share."""

import contextlib
import io
import json
import tempfile
from pathlib import Path
from typing import Any

import pytest

from fishbelly.cli.main import run

MM, KN, MPA = 1e-3, 1e3, 1e6
INCH, FOOT = 0.0254, 0.3048
LBF = 0.45359237 * 9.80665
KSI = 1000 * LBF / INCH**2
KLF = 1000 * LBF / FOOT

SIMPLE_BEAM = """
length = "6 m"
shear = false
[material.steel]
E = "210 GPa"
[[part]]
name = "beam"
material = "steel"
shape = "rectangle"
width = "100 mm"
depth = "200 mm"
[[support]]
at = "0 m"
kind = "pin"
[[support]]
at = "6 m"
kind = "roller"
[[load]]
kind = "uniform"
value = "10 kN/m"
"""
"""A uniformly loaded steel beam on two supports, bending alone, without a limit."""


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


def scenario(name: str) -> str:
    """Text of a scenario's job."""
    return Path(__file__).with_name("scenarios").joinpath(f"{name}.toml").read_text(encoding="utf-8")


def changed(text: str, *pairs: tuple[str, str]) -> str:
    """The text with every old replaced by its new; each must be there."""
    for old, new in pairs:
        assert old in text, old
        text = text.replace(old, new)
    return text


def down(combination: Any) -> float:
    """Largest deflection down [m] of a combination."""
    return float(combination["deflection"]["down"]["value"])


def check_agrees(found: float, second: float) -> None:
    """A second, independent computation."""
    assert found == pytest.approx(second, rel=1e-8)


def check_prints(value: float, printed: str) -> None:
    """Half of the last digit of a printed figure."""
    digits = printed.partition(".")[2]
    assert abs(value - float(printed)) <= 0.5 * 10 ** -len(digits) * (1 + 1e-9), (value, printed)
