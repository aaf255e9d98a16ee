"""The same job in millimetres and kilonewtons or in inches and kips, through the text of the job file."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

from hypothesis import given
from hypothesis import strategies as st
from members import GRID, check_same, table

from fishbelly.cli.job_file import read_job

INCH, KIP, FOOT = 0.0254, 4.4482216152605, 0.3048
"""Metres to an inch and a foot, kilonewtons to a kip: exact by definition (NIST SP 811, 2008, B.8)."""

whole = st.integers(1, 40)


def metric(width: int, deep: int, thin: int, span: int, load: int, force: int, step: int) -> str:
    mm = lambda k: f'"{k * 25.4!r} mm"'
    return f"""
length = "{span * 0.3048!r} m"
[material.own]
E = "{29000 * 6.894757293168361!r} MPa"
poisson = 0.3
density = "7850 kg/m3"
[[part]]
name = "beam"
material = "own"
shape = "rectangle"
width = {mm(width)}
depth = [["0 m", {mm(deep)}], ["{span * 0.3048!r} m", {mm(thin)}]]
[[part]]
name = "plate"
material = "own"
shape = "rectangle"
width = {mm(width)}
depth = {mm(1)}
under = "beam"
from = "{step * span * 0.3048 / 16!r} m"
[[support]]
name = "A"
kind = "fixed"
at = "0 m"
[[support]]
name = "B"
kind = "roller"
at = "{span * 0.3048!r} m"
[[load]]
kind = "uniform"
value = "{load * KIP / FOOT!r} kN/m"
[[load]]
kind = "point"
value = "{force * KIP!r} kN"
at = "{span * 0.3048 / 4!r} m"
[[load]]
kind = "self weight"
"""


def us(width: int, deep: int, thin: int, span: int, load: int, force: int, step: int) -> str:
    return f"""
length = "{span} ft"
units = "us"
[material.own]
E = "29000 ksi"
poisson = 0.3
density = "7850 kg/m3"
[[part]]
name = "beam"
material = "own"
shape = "rectangle"
width = "{width} in"
depth = [["0 ft", "{deep} in"], ["{span} ft", "{thin} in"]]
[[part]]
name = "plate"
material = "own"
shape = "rectangle"
width = "{width} in"
depth = "1 in"
under = "beam"
from = "{step * span / 16!r} ft"
[[support]]
name = "A"
kind = "fixed"
at = "0 ft"
[[support]]
name = "B"
kind = "roller"
at = "{span} ft"
[[load]]
kind = "uniform"
value = "{load} kip/ft"
[[load]]
kind = "point"
value = "{force} kip"
at = "{span / 4!r} ft"
[[load]]
kind = "self weight"
"""


@given(whole, whole, whole, whole, st.integers(1, 20), st.integers(1, 20), st.integers(1, 15))
def test_millimetres_or_inches(width: int, deep: int, thin: int, span: int, load: int, force: int, step: int) -> None:
    numbers = (width, deep, thin, span, load, force, step)
    one, other = (read_job("-", text(*numbers)).member for text in (metric, us))
    places = tuple(x / GRID[-1] * one.length for x in GRID)
    # decimal fractions of a unit are rounded once on the way: cubes of depths carry three of them
    check_same(table(one, places), table(other, places), 1e-12)
