"""Answers of the worked jobs with stages: each number computed a second time.

A function takes the text of its job and gives the values stated, as `worked_answers` says.
"""

from typing import Any

from by_hand import i_section, simple_span, stepped, strips
from commands import FOOT, INCH, KLF, KN, KSI, MM, MPA
from worked_run import Values, answer, both, check, down


def _last(result: Any, name: str, stage: int = -1) -> Any:
    return next(c for c in result["stages"][stage]["combinations"] if c["name"] == name)


def _without_stages(text: str) -> str:
    """All parts, all loads at once."""
    blocks = [b for b in text.split("\n\n") if not b.startswith("[[stage]]")]
    lines = "\n\n".join(blocks).splitlines()
    return "\n".join(line for line in lines if not line.startswith(("stage = ", "until = ", "after = ")))


def plated_under_load(text: str) -> Values:
    E, L, a, b = 29000 * KSI, 25 * FOOT, 4 * FOOT, 21 * FOOT
    beam = i_section(15.9 * INCH, 5.5 * INCH, 0.44 * INCH, 0.275 * INCH, E)
    bare, (_, z, plated) = strips(*beam)[2], strips(*beam, (E, 7 * INCH, -16.4 * INCH, -15.9 * INCH))
    EI = stepped((a, b, plated), other=bare)
    half = L / 2
    old = simple_span(L, stepped(other=bare), [], 0.9 * KLF, (), half)
    new, live = (simple_span(L, EI, [a, b], w * KLF, (), half) for w in (1.25, 1.0))
    M_old, M_new = (w * KLF * L**2 / 8 for w in (0.9, 1.25))
    bottom = M_old * 7.95 * INCH / (bare / E) + M_new * (z + 15.9 * INCH) / (plated / E)
    top = M_old * 7.95 * INCH / (bare / E) - M_new * z / (plated / E)
    plate = M_new * (z + 16.4 * INCH) / (plated / E)
    result, at_once = answer("plated-under-load", text)["by_name"], answer("plated-under-load", _without_stages(text))
    total, first = result["total"], check(result["live"], "live load")
    stress = {s["part"]: s for s in total["stress"]}
    full = check(total, "total load")
    return [
        (both(first["found"], live) / INCH, "0.577 in"),
        (both(first["allowed"], L / 360) / INCH, "0.833 in"),
        (both(check(total, "since the plate")["found"], new) / INCH, "0.721 in"),
        (both(full["found"], old + new) / INCH, "1.46 in"),
        (both(full["allowed"], L / 240) / INCH, "1.25 in"),
        (both(stress["beam"]["max"]["value"], bottom) / KSI, "30.6 ksi"),
        (both(-stress["beam"]["min"]["value"], top) / KSI, "40.7 ksi"),
        (both(stress["plate"]["max"]["value"], plate) / KSI, "13.4 ksi"),
        (both(down(at_once["by_name"]["total"]), new / 1.25 * 2.15) / INCH, "1.24 in"),
    ]


def flitch_in_two_stages(text: str) -> Values:
    L, a, b = 4.8, 0.15, 4.65
    wood, steel = 11e9 * 0.15 * 0.225**3 / 12, 210e9 * 0.01 * 0.2**3 / 12

    def sag(w: float, slow: float) -> float:
        EI = stepped((a, b, wood / slow + steel), other=wood / slow)
        return simple_span(L, EI, [a, b], w, (), L / 2)

    shares = [steel / (wood / slow + steel) for slow in (1.6, 1.0)]
    result = answer("flitch-in-two-stages", text)
    final = check(result["by_name"]["all"], "final")
    first, last = _last(result, "all", 0), _last(result, "all")
    plate = [next(p["share"] for p in c["carried"] if p["part"] == "plate") for c in (first, last)]
    quick = next(p["share"] for p in last["instantaneous"]["carried"] if p["part"] == "plate")
    return [
        (both(down(first), sag(4.2e3, 1.6)) / MM, "12.21 mm"),
        (both(final["found"], sag(4.2e3, 1.6) + sag(2.8e3, 1.0)) / MM, "18.74 mm"),
        (both(final["allowed"], L / 250) / MM, "19.20 mm"),
        (final["used"] * 100, "97.6 %"),
        (both(last["own"]["deflection"], sag(2.8e3, 1.0)) / MM, "6.53 mm"),
        (both(plate[0], shares[0]) * 100, "58.9 %"),
        (both(plate[1], 0.6 * shares[0] + 0.4 * shares[1]) * 100, "54.2 %"),
        (both(quick, shares[1]) * 100, "47.2 %"),
        (both(down(last["instantaneous"]), sag(7e3, 1.0)) / MM, "16.32 mm"),
    ]


def jacked_and_plated(text: str) -> Values:
    L, lift = 4.0, 0.004
    beam = (11e9, 0.16, -0.24, 0.0)
    bare, (_, z, both_EI) = strips(beam)[2], strips(beam, (210e9, 0.12, -0.25, -0.24))
    found = 5 * 4e3 * L**4 / (384 * bare)
    P = 48 * bare * lift / L**3
    sinks, live = P * L**3 / (48 * both_EI), 5 * 5e3 * L**4 / (384 * both_EI)
    M = P * L / 4 + 5e3 * L**2 / 8
    result = answer("jacked-and-plated", text)
    jacked, last = _last(result, "all", 1), _last(result, "all")
    gone = last["released"][0]
    final = check(result["by_name"]["all"], "final")
    plate = next(s for s in last["stress"] if s["part"] == "plate")["max"]["value"]
    assert next(s for s in jacked["supports"] if s["name"] == "jack")["vertical"] == gone["vertical"]
    return [
        (both(down(_last(result, "all", 0)), found) / MM, "6.58 mm"),
        (both(gone["vertical"], P) / KN, "6.08 kN"),
        (both(gone["deflection_before"], found - lift) / MM, "2.58 mm"),
        (both(gone["deflection_after"] - gone["deflection_before"], sinks) / MM, "1.80 mm"),
        (both(final["found"], found - lift + sinks + live) / MM, "8.09 mm"),
        (both(final["allowed"], L / 300) / MM, "13.33 mm"),
        (both(plate, 210e9 * M * (z + 0.25) / both_EI) / MPA, "62.6 MPa"),
    ]
