"""Answers of the worked jobs whose way of holding or loading is the question: each number computed a second time.

A function takes the text of its job and gives the values stated, as `worked_answers` says.
"""

from math import cos, radians, sin
from typing import Any

import numpy as np
import pytest
from by_hand import Along, i_section, integral, moment_simple, shear_simple, simple_span, stepped, strips
from commands import KN, MM, changed
from worked_run import SAME, Values, answer, both, check, down, peak


def runway_beam(text: str) -> Values:
    L, wheels = 6.0, ((36e3, 2.0), (36e3, 4.0))
    beam = i_section(0.32, 0.16, 0.012, 0.008, 210e9)
    bare = strips(*beam)[2]
    plated = strips(*beam, (210e9, 0.14, 0.0, 0.01), (210e9, 0.14, -0.33, -0.32))[2]
    EI = stepped((1.5, 4.5, plated), other=bare)
    area, plates = 2 * 0.16 * 0.012 + 0.296 * 0.008, 2 * 0.14 * 0.01
    g = 7850 * 9.80665
    even, more = g * area + 300, g * plates

    def M(x: Any) -> Any:
        patch = np.where(x < 1.5, 1.5 * x, np.where(x > 4.5, 1.5 * (L - x), 1.5 * x - (x - 1.5) ** 2 / 2))
        return even * x * (L - x) / 2 + more * patch

    m = moment_simple(L, 0.0, [(1.0, 3.0)])
    rolling = simple_span(L, EI, [1.5, 4.5], 0.0, wheels, 3.0)
    permanent = integral(lambda x: M(x) * m(x) / EI(x), [0, 1.5, 3.0, 4.5, L])
    naked = text[: text.index('[[part]]\nname = "top plate"')] + text[text.index("[[support]]") :]
    result, without = answer("runway-beam", text)["by_name"], answer("runway-beam", naked)["by_name"]
    alone, full = check(result["wheels"], "wheels"), check(result["all"], "all load")
    return [
        (both(alone["found"], rolling) / MM, "7.85 mm"),
        (both(alone["allowed"], L / 600) / MM, "10.00 mm"),
        (both(full["found"], rolling + permanent) / MM, "8.30 mm"),
        (both(full["allowed"], L / 500) / MM, "12.00 mm"),
        (both(down(without["wheels"]), simple_span(L, stepped(other=bare), [], 0.0, wheels, 3.0)) / MM, "12.12 mm"),
    ]


def continuous_beam(text: str) -> Values:
    a, b, L, sinks = 5.0, 6.0, 11.0, 0.005
    beam = i_section(0.26, 0.14, 0.011, 0.007, 210e9)
    plated = strips(*beam, (210e9, 0.12, 0.0, 0.01), (210e9, 0.12, -0.27, -0.26))[2]
    EI = stepped((4.0, 6.4, plated), other=strips(*beam)[2])
    breaks = [0.0, 4.0, a, 6.4, L]

    def over(x: Any) -> Any:
        """Moment for one of a kNm over the middle support."""
        return np.where(x <= a, x / a, (L - x) / b)

    def free(x: Any, left: float, right: float) -> Any:
        """Moment of two simple spans."""
        return np.where(x <= a, left * x * (a - x) / 2, right * (x - a) * (L - x) / 2)

    soft = integral(lambda x: over(x) ** 2 / EI(x), breaks)

    def middle(left: float, right: float, settles: float = 0.0) -> float:
        """Moment over the middle support: the two spans' ends turn alike."""
        return (settles * (1 / a + 1 / b) - integral(lambda x: free(x, left, right) * over(x) / EI(x), breaks)) / soft

    def sag(at: float, left: float, right: float, settles: float = 0.0) -> float:
        """Deflection in the right span from the line between its supports."""
        X = middle(left, right, settles)
        m = lambda x: np.where(x < a, 0.0, np.where(x < at, (x - a) * (L - at), (at - a) * (L - x)) / b)  # noqa: E731
        return integral(lambda x: (free(x, left, right) + X * over(x)) * m(x) / EI(x), [*breaks, at])

    result = answer("continuous-beam", text)["by_name"]
    imposed, full = check(result["imposed"], "imposed load"), check(result["all"], "all load")
    hogging = [-result[n]["moment"]["hogging"]["value"] for n in ("without settlement", "all")]
    wall = result["without settlement"]["envelope"]["supports"][0]["vertical"]["max"]
    only_left = 14e3 * a / 2 + middle(14e3, 6e3) / a
    return [
        (both(imposed["found"], peak(lambda at: sag(at, 0.0, 8e3), 7, 9)) / MM, "7.22 mm"),
        (both(imposed["allowed"], b / 500) / MM, "12.00 mm"),
        (both(full["found"], peak(lambda at: sag(at, 6e3, 14e3, sinks), 7, 9)) / MM, "12.19 mm"),
        (both(full["allowed"], b / 360) / MM, "16.67 mm"),
        (both(hogging[0], -middle(14e3, 14e3)) / KN, "63.8 kNm"),
        (both(hogging[1], -middle(14e3, 14e3, sinks)) / KN, "56.2 kNm"),
        (both(wall, only_left) / KN, "26.8 kN"),
    ]


def gantry_arm(text: str) -> Values:
    L, a, P, g = 2.8, 1.4, 450.0, 9.80665
    box = ((70e9, 0.07, -0.004, 0.0), (70e9, 0.008, -0.106, -0.004), (70e9, 0.07, -0.11, -0.106))
    flat = (210e9, 0.07, -0.118, -0.11)
    EA, z, EI = strips(*box, flat)
    bare = strips(*box)[2]
    w, more = g * 2700 * strips(*box)[0] / 70e9, g * 7850 * 0.07 * 0.008
    weight = integral(
        lambda x: (
            (w * (L - x) ** 2 + np.where(x < a, more * (a - x) ** 2, 0.0)) / 2 * (L - x) / np.where(x < a, EI, bare)
        ),
        [0, a, L],
    )
    lift = integral(lambda x: P * (L - x) ** 2 / np.where(x < a, EI, bare), [0, a, L])
    # strain wanted by the two materials, as moments about the common centroid
    box_EA, flat_EA = strips(*box)[0], 210e9 * 0.07 * 0.008
    bow = 25 * (23e-6 * box_EA * (-0.055 - z) + 12e-6 * flat_EA * (-0.114 - z)) / EI
    assert EA == pytest.approx(box_EA + flat_EA, rel=SAME)
    start, end = text.index('[[part]]\nname = "flat"'), text.index("[[support]]")
    alone = changed(text[:start] + text[end:], (', flat = "25 K"', ""))
    result, naked = answer("gantry-arm", text)["by_name"], answer("gantry-arm", alone)["by_name"]
    limit = check(result["lift"], "lift")
    return [
        (both(limit["found"], lift) / MM, "10.94 mm"),
        (both(limit["allowed"], L / 150) / MM, "18.67 mm"),
        (both(down(result["weight"]), weight) / MM, "1.01 mm"),
        (both(down(result["warm"]), bow * a * (L - a / 2)) / MM, "7.33 mm"),
        (both(down(naked["lift"]), P * L**3 / (3 * bare)) / MM, "20.62 mm"),
    ]


def inclined_rafter(text: str) -> Values:
    L, s, turn = 4.4, 0.6, radians(35)
    h = 0.16
    plain, wide = 0.063, 0.107
    EI = stepped((0.9, 3.5, 11e9 * wide * h**3 / 12), other=11e9 * plain * h**3 / 12)
    GA = stepped((0.9, 3.5, 5 / 6 * 690e6 * wide * h), other=5 / 6 * 690e6 * plain * h)
    tiles, snow, wind = 750 * s, 1000 * s * cos(turn), 350 * s * 0.6

    def sag(w: float) -> float:
        V, v = shear_simple(L, w), shear_simple(L, 0.0, [(1.0, L / 2)])
        slide = integral(lambda x: V(x) * v(x) / GA(x), [0, 0.9, L / 2, 3.5, L])
        return simple_span(L, EI, [0.9, 3.5], w, (), L / 2) + slide

    result = answer("inclined-rafter", text)["by_name"]
    some, full = check(result["snow and wind"], "snow and wind"), check(result["all"], "all load")
    square = (tiles + snow) * cos(turn) + wind
    plate = result["all"]["supports"][0]
    return [
        (both(some["found"], sag(snow * cos(turn) + wind)) / MM, "7.03 mm"),
        (both(some["allowed"], L / 300) / MM, "14.67 mm"),
        (both(full["found"], sag(square)) / MM, "11.93 mm"),
        (both(full["allowed"], L / 200) / MM, "22.00 mm"),
        (both(plate["vertical"], square * L / 2) / KN, "1.97 kN"),
        (both(plate["along"], (tiles + snow) * sin(turn) * L) / KN, "2.38 kN"),
    ]


def propped_cantilever(text: str) -> Values:
    L, a, k = 5.0, 4.0, 2.5e6

    def depth(x: Any) -> Any:
        return 0.48 - 0.04 * x

    def moved(M: Along, V: Along, at: float) -> float:
        """Deflection of the cantilever at a place under moments M and shears V, both as a downward load has them."""
        arm = lambda x: np.clip(at - x, 0.0, None)  # noqa: E731
        bend = integral(lambda x: M(x) * arm(x) / (11.5e9 * 0.16 * depth(x) ** 3 / 12), [0, a, at, L])
        slide = integral(lambda x: V(x) * (x < at) / (5 / 6 * 0.65e9 * 0.16 * depth(x)), [0, a, at, L])
        return bend + slide

    def line(w: float, P: float, at: float) -> float:
        return moved(lambda x: w * (L - x) ** 2 / 2 + P * (L - x), lambda x: w * (L - x) + P, at)

    def prop(at: float) -> float:
        return moved(lambda x: np.clip(a - x, 0.0, None), lambda x: (x < a) * 1.0, at)

    R = line(5e3, 2e3, a) / (prop(a) + 1 / k)
    result = answer("propped-cantilever", text)["by_name"]
    pressed, uplift = result["pressed down"], result["uplift"]
    assert uplift["supports"][1]["lifted"] and not pressed["supports"][1]["lifted"]
    tip, risen = check(pressed, "tip down"), check(uplift, "tip up")
    return [
        (both(pressed["supports"][1]["vertical"], R) / KN, "13.05 kN"),
        (both(tip["found"], line(5e3, 2e3, L) - R * prop(L)) / MM, "7.60 mm"),
        (tip["allowed"] / MM, "16.00 mm"),
        (both(risen["found"], line(2.2e3, 0.0, L)) / MM, "14.46 mm"),
        (risen["allowed"] / MM, "20.00 mm"),
    ]


def cambered_girder(text: str) -> Values:
    L, E = 18.0, 210e9

    def girder(bottom: float) -> float:
        web = (E, 0.01, -0.9 + bottom, -0.018)
        return strips((E, 0.28, -0.018, 0.0), web, (E, 0.3, -0.9, -0.9 + bottom))[2]

    EI = stepped((4.5, 13.5, girder(0.03)), other=girder(0.015))

    def sag(w: float, at: float) -> float:
        return simple_span(L, EI, [4.5, 13.5], w, (), at)

    net = max(sag(21.5e3, at) - 4 * 0.028 * at * (L - at) / L**2 for at in np.linspace(0.0, L, 181)[1:-1])
    result = answer("cambered-girder", text)["by_name"]
    imposed, full = check(result["imposed"], "imposed load"), check(result["all"], "all load, net of camber")
    return [
        (both(down(result["permanent"]), sag(12e3, 9.0)) / MM, "26.52 mm"),
        (both(down(result["all"]), sag(21.5e3, 9.0)) / MM, "47.52 mm"),
        (both(full["found"], net) / MM, "19.52 mm"),
        (both(full["allowed"], L / 400) / MM, "45.00 mm"),
        (both(imposed["found"], sag(9.5e3, 9.0)) / MM, "21.00 mm"),
        (both(imposed["allowed"], L / 500) / MM, "36.00 mm"),
    ]
