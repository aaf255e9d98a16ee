"""Creep factor of a concrete by age, humidity and size."""

import math

import pytest
from commands import deflect

from fishbelly.catalog.concrete_time import creep_coefficient
from fishbelly.cli.main import run

JOB = """
length = "6 m"
shear = false
[material.concrete]
like = "C30/37"
creep = { rule = "EN 1992-1-1", f_ck = "30 MPa", humidity = 0.5, size = "200 mm", loaded_at = 28 }
[[part]]
name = "beam"
shape = "rectangle"
width = "300 mm"
depth = "500 mm"
material = "concrete"
[[support]]
at = "0 m"
kind = "pin"
[[support]]
at = "6 m"
kind = "roller"
[[load]]
kind = "uniform"
value = "1 kN/m"
[[combination]]
name = "at once"
factors = { load = 1 }
[[combination]]
name = "for good"
factors = { load = 1 }
sustained = { load = 1 }
"""


@pytest.mark.parametrize(("more", "age"), [("", math.inf), (", age = 365", 365.0)])
def test_by_rule(more: str, age: float) -> None:
    """phi(inf, 28) = 2.37 for C30/37 at 50 % and h0 = 200 mm, as the catalogue's own example has it."""
    found = deflect(JOB.replace("loaded_at = 28", "loaded_at = 28" + more))["by_name"]
    ratio = found["for good"]["deflection"]["down"]["value"] / found["at once"]["deflection"]["down"]["value"]
    assert ratio == pytest.approx(1.0 + creep_coefficient(age, 28.0, 30e6, 0.5, 0.2), rel=1e-12)


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("humidity = 0.5", "humidity = 50"),
        ("loaded_at = 28", "loaded = 28"),
        ('"200 mm"', "200"),
        ("EN 1992-1-1", "mine"),
    ],
)
def test_ill_ones_are_refused(old: str, new: str, tmp_path, capsys) -> None:
    path = tmp_path / "job.toml"
    path.write_text(JOB.replace(old, new), encoding="utf-8")
    assert run(["deflect", str(path)]) == 2
    said = capsys.readouterr().err
    assert "material.concrete" in said or "concrete" in said
    assert "creep" in said and "Traceback" not in said
