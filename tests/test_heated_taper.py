"""Uniform heating of a member that is free to grow: nothing deflects, and two round-offs need not agree."""

from commands import deflect

JOB = """
length = "6 m"
[[part]]
name = "beam"
shape = "I"
depth = [["0 m", "600 mm"], ["6 m", "300 mm"]]
width = "150 mm"
flange = "10 mm"
web = "7 mm"
material = "S275"
[[support]]
at = "0 m"
kind = "pin"
[[support]]
at = "6 m"
kind = "roller"
[[load]]
kind = "temperature"
top = "30 K"
bottom = "30 K"
"""


def test_heated_taper_stays_straight() -> None:
    found = deflect(JOB)["by_name"]["all"]
    assert found["deflection"]["down"] is None and found["deflection"]["up"] is None
    assert all(abs(s["max"]["value"]) < 1.0 for s in found["stress"] if s["max"])
