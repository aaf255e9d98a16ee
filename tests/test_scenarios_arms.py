"""Arms and shafts: a tapered sign arm, a pump shaft, a gantry arm of two metals.

Each figure against an independent computation (`by_hand`: strips and the unit-load integral), which must agree to
1e-8, and against the printed one, which must hold to half of its last digit.
"""

from typing import Any

import numpy as np
import pytest
from by_hand import integral, stepped, strips
from commands import INCH, KN, KSI, LBF, MM, changed, check_agrees, check_prints, deflect, down, scenario, section


def arm(load: str, inertia: Any = None, breaks: list[float] | None = None) -> float:
    """Tip deflection [in] of the sign arm: ``self``, or the force [lbf] at 15 ft."""
    L, a, t, E = 216.0, 180.0, 0.239, 29e6

    def d(x: Any) -> Any:
        return 10 - 5 * x / L

    def ring(d: Any, n: int) -> Any:
        return d**n - (d - 2 * t) ** n

    I = inertia or (lambda x: np.pi / 64 * ring(d(x), 4))
    if load == "self":

        def M(x: Any) -> Any:
            # weight per inch: gamma pi t (d - t); d = d(x) + s d', s from the section to the tip
            g, s = 490 / 1728 * np.pi * t, L - x
            return g * ((d(x) - t) * s**2 / 2 - 5 / L * s**3 / 3)

    else:

        def M(x: Any) -> Any:
            return np.where(x < a, float(load) * (a - x), 0.0)

    return integral(lambda x: M(x) * (L - x) / (E * I(x)), [0, a, L, *(breaks or [])])


def test_s4() -> None:
    text = scenario("s4_sign_arm")
    result = deflect(text)["by_name"]
    for name, load, printed in (("self", "self", "0.202"), ("sign", "260", "0.402"), ("ice", "90", "0.139")):
        check_agrees(down(result[name]) / INCH, arm(load))
        check_prints(down(result[name]) / INCH, printed)
        assert result[name]["deflection"]["down"]["at"] == pytest.approx(216 * INCH)
    wind = result["wind"]["deflection"]["across"]["value"] / INCH
    check_agrees(wind, arm("900"))
    check_prints(wind, "1.39")
    weight = result["self"]["supports"][0]["vertical"] / LBF
    check_agrees(weight, 490 / 1728 * np.pi * 0.239 * (7.5 - 0.239) * 216)
    check_prints(weight, "334")
    limits = {c["limit"]: c["allowed"] / INCH for c in result["wind"]["checks"] + result["all down"]["checks"]}
    assert limits == pytest.approx({"wind": 2.40, "dead": 1.80}, rel=1e-12)
    for x, diameter, printed in (("0 ft", 10.0, "87.3"), ("18 ft", 5.0, "10.15")):
        I = section(text, x)["EI_y"] / (29000 * KSI) / INCH**4
        check_agrees(I, np.pi / 64 * (diameter**4 - (diameter - 0.478) ** 4))
        check_prints(I, printed)


def test_s4_shortcuts() -> None:
    """Prismatic shortcuts and mid-point steps, on the wind."""
    exact = arm("900")
    text = scenario("s4_sign_arm")
    law = 'diameter = [["0 ft", "10 in"], ["18 ft", "5 in"]]'

    def wind(new: str) -> float:
        return float(deflect(changed(text, (law, new)))["by_name"]["wind"]["deflection"]["across"]["value"] / INCH)

    def ring(d: float) -> float:
        return float(np.pi / 64 * (d**4 - (d - 0.478) ** 4))

    check_prints(100 * (wind('diameter = "7.5 in"') / exact - 1), "57")
    mean = (ring(10) + ring(5)) / 2
    scaled = wind('diameter = "7.5 in"') * ring(7.5) / mean
    check_agrees(scaled, arm("900", lambda x: mean + 0 * x))
    check_prints(100 * (scaled / exact - 1), "16")
    for n, printed in ((4, "2.9"), (6, "1.3"), (10, "0.46")):
        steps = [(18 * (i + 1) / n, 10 - 5 * (i + 0.5) / n) for i in range(n)]
        found = wind("diameter = { steps = [" + ", ".join(f'["{x!r} ft", "{d!r} in"]' for x, d in steps) + "] }")
        pieces = [(12 * (x - 18 / n), 12 * x, ring(d)) for x, d in steps]
        check_agrees(found, arm("900", stepped(*pieces), [p[1] for p in pieces]))
        check_prints(100 * (found / exact - 1), printed)


SHAFT = ((0.0, 60.0, 45.0), (60.0, 200.0, 55.0), (200.0, 260.0, 50.0), (260.0, 330.0, 42.0), (330.0, 420.0, 34.0))


def shaft(force: float, at: float, couple: bool = False, diameters: Any = SHAFT) -> float:
    """Deflection [mm] or rotation at a place under a force at 395, by unit force or couple; A at 30, B at 230."""

    def moment(P: float, a: float, C: float = 0.0) -> Any:
        """P down and couple C (clockwise) at a; sagging positive."""
        RB = (P * (a - 30) + C) / 200
        RA = P - RB

        def M(x: Any) -> Any:
            reach = np.maximum(x - 30, 0) * RA + np.maximum(x - 230, 0) * RB - P * np.maximum(x - a, 0)
            return reach + C * (x > a)

        return M

    M = moment(force, 395.0)
    m = moment(0.0, at, 1.0) if couple else moment(1.0, at)
    EI = stepped(*((a, b, 200e3 * np.pi / 64 * d**4) for a, b, d in diameters))
    breaks = [30.0, 230.0, 395.0, at, 420.0, 0.0, *(b for _, b, _ in diameters)]
    return integral(lambda x: M(x) * m(x) / EI(x), breaks)


def test_s5() -> None:
    result = deflect(scenario("s5_pump_shaft"))["by_name"]
    printed = {"duty": ("0.021", "0.082", "0.176", "0.080"), "off duty": ("0.043", None, None, "0.162")}
    for name, force in (("duty", 1215.0), ("off duty", 2465.0)):
        checks = {c["limit"]: c for c in result[name]["checks"]}
        assert all(c["ok"] for c in checks.values())
        found = [checks[n]["found"] / MM for n in ("seal face", "bearing A", "bearing B", "wear ring")]
        second = [shaft(force, 300), shaft(force, 30, True), shaft(force, 230, True), shaft(force, 395)]
        second = [second[0], second[1] / MM, second[2] / MM, second[3]]
        for value, check, text in zip(found, second, printed[name], strict=True):
            check_agrees(value, abs(check))
            if text:
                check_prints(value, text)
    A, B = result["duty"]["supports"]
    assert (A["name"], B["name"]) == ("bearing A", "bearing B")
    check_agrees(A["vertical"], -1215 * 165 / 200)
    check_prints(A["vertical"], "-1002")
    check_prints(B["vertical"], "2217")
    check_prints(result["off duty"]["supports"][0]["vertical"] / A["vertical"], "2.029")


def test_s5_shortcuts() -> None:
    text = scenario("s5_pump_shaft")
    law = next(line for line in text.splitlines() if line.startswith("diameter"))
    for d, printed in ((34, "0.307"), (45, "0.100")):
        result = deflect(changed(text, (law, f'diameter = "{d} mm"')))["by_name"]["duty"]
        found = next(s["deflection"] for s in result["stations"] if s["name"] == "impeller") / MM
        check_agrees(found, shaft(1215, 395, diameters=((0.0, 420.0, float(d)),)))
        check_prints(found, printed)


BOX = ((70e9, 0.08, -0.005, 0.0), (70e9, 0.01, -0.115, -0.005), (70e9, 0.08, -0.12, -0.115))
FLAT = (210e9, 0.08, -0.13, -0.12)
G0 = 9.80665


def gantry(flat: float, load: str) -> float:
    """Tip deflection [m] with the flat running to a place [m]."""
    EI_box, (_, z, EI) = strips(*BOX)[2], strips(*BOX, FLAT)
    stiffness = stepped((0.0, flat, EI), other=EI_box)
    w_box, w_flat = 2700 * 1900e-6 * G0, 7850 * 800e-6 * G0
    EA_flat = FLAT[0] * FLAT[1] * 0.01

    def curvature(x: Any) -> Any:
        s = 3.0 - x
        if load == "tip":
            return 1200 * s / stiffness(x)
        if load == "self":
            return (w_box * s**2 / 2 + w_flat * np.maximum(flat - x, 0) ** 2 / 2) / stiffness(x)
        # free strains: the flat's shortfall against the box, about the common centroid, bows it down
        bow = EA_flat * (z - (-0.125)) * (23e-6 - 12e-6) * 35 / EI
        return np.where(x < flat, bow, 0.0)

    return integral(lambda x: curvature(x) * (3.0 - x), [0.0, min(flat, 3.0), 3.0])


def test_s9_deflections() -> None:
    text = scenario("s9_gantry_arm")
    result = deflect(text)["by_name"]
    for load, printed in (("tip", "21.0"), ("self", "1.1"), ("warmth", "11.3")):
        check_agrees(down(result[load]), gantry(1.6, load))
        check_prints(down(result[load]) / MM, printed)
    assert not result["tip"]["checks"][0]["ok"]
    ratio = section(text, "1 m")["EI_y"] / section(text, "2 m")["EI_y"]
    check_agrees(ratio, strips(*BOX, FLAT)[2] / strips(*BOX)[2])
    check_prints(ratio, "2.20")
    check_prints(section(text, "2 m")["EA"] / 70e9 * 1e6, "1900")
    check_prints(section(text, "2 m")["EI_y"] / 70e9 * 1e8, "375.6")


def test_s9_lengths_of_flat() -> None:
    """Printed bare 41.1 mm: the unrounded value is 41.08 from I = 375.58 cm4, as here without the plate."""
    text = scenario("s9_gantry_arm")
    for end, printed in ((1835, "20.0"), (3000, "18.7")):
        tip = down(deflect(changed(text, ("1600 mm", f"{end} mm")))["by_name"]["tip"])
        check_agrees(tip, gantry(end * MM, "tip"))
        check_prints(tip / MM, printed)
    head, _, rest = text.partition('[[part]]\nname = "flat"')
    bare = changed(head + rest[rest.index("[[support]]") :], (', flat = "35 K"', ""))
    tip = down(deflect(bare)["by_name"]["tip"])
    check_agrees(tip, 1200 * 27 / (3 * strips(*BOX)[2]))
    check_prints(tip / MM, "41.1")


def test_s9_forces_in_the_flat() -> None:
    text = scenario("s9_gantry_arm")
    EA, z, EI = strips(*BOX, FLAT)
    EA_flat = 210e9 * 800e-6
    # temperature: the same all along, so the flat's force is its mean stress times its area
    peaks = deflect(text)["by_name"]["warmth"]["stress"][1]
    force = (peaks["max"]["value"] + peaks["min"]["value"]) / 2 * 800e-6
    lack = 11e-6 * 35
    bow = EA_flat * (z + 0.125) * lack / EI
    second = EA_flat * lack * (1 - EA_flat / EA) - EA_flat * (z + 0.125) * bow
    check_agrees(force, second)
    check_prints(force / KN, "13.1")
    # tip load and self-weight just inside the flat's end
    flat = section(text, "1600 mm", "--side", "left")["parts"][1]
    mean = (flat["stress_per_moment"]["top"] + flat["stress_per_moment"]["bottom"]) / 2 * flat["area"]
    check_agrees(mean, -EA_flat * (-0.125 - z) / EI)
    M = deflect(text, "1600 mm")["by_name"]["tip and self"]["stations"][0]["M"]
    check_prints(abs(mean * M) / KN, "14.4")
    # shear flow at the root is the change of that force along x, the weights counted too
    root = deflect(text)["by_name"]["tip and self"]["supports"][0]["vertical"]
    check_agrees(root, 1200 + G0 * (2700 * 1900e-6 * 3 + 7850 * 800e-6 * 1.6))
    check_prints(abs(mean) * root / KN, "12.1")
