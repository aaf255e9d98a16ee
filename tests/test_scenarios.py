"""Working scenarios end to end: each figure against an independent computation and against the printed one.

The second computations (`by_hand`: strips and the unit-load integral) must agree to 1e-8, the printed figure to half
of its last digit.
"""

from pathlib import Path
from typing import Any

import numpy as np
import pytest
from by_hand import (
    i_section,
    integral,
    moment_simple,
    shear_simple,
    stepped,
    strips,
)
from commands import deflect, section

MM, KN, MPA = 1e-3, 1e3, 1e6
INCH, FOOT = 0.0254, 0.3048
LBF = 0.45359237 * 9.80665
KSI = 1000 * LBF / INCH**2
KLF = 1000 * LBF / FOOT


def job(name: str) -> str:
    return Path(__file__).with_name("scenarios").joinpath(f"{name}.toml").read_text(encoding="utf-8")


def changed(text: str, *pairs: tuple[str, str]) -> str:
    for old, new in pairs:
        assert old in text, old
        text = text.replace(old, new)
    return text


def down(combination: Any) -> float:
    return float(combination["deflection"]["down"]["value"])


def agrees(found: float, second: float) -> None:
    assert found == pytest.approx(second, rel=1e-8)


def prints(value: float, printed: str) -> None:
    """Half of the last digit of a printed figure."""
    digits = printed.partition(".")[2]
    assert abs(value - float(printed)) <= 0.5 * 10 ** -len(digits) * (1 + 1e-9), (value, printed)


def simple_span(L: float, EI: Any, breaks: list[float], w: float, points: tuple[Any, ...], at: float) -> float:
    M, m = moment_simple(L, w, points), moment_simple(L, 0.0, [(1.0, at)])
    return integral(lambda x: M(x) * m(x) / EI(x), [0.0, L, at, *breaks, *(a for _, a in points)])


# --- S1: flitch beam ---------------------------------------------------------------------------------------


def flitch(w: float, plate: tuple[float, float] = (10, 200), E: float = 11e9, creep: float = 0.0) -> float:
    timber = E / (1 + creep) * 0.150 * 0.225**3 / 12
    steel = 210e9 * plate[0] * MM * (plate[1] * MM) ** 3 / 12
    EI = stepped((0.15, 4.65, timber + steel), other=timber)
    return simple_span(4.8, EI, [0.15, 4.65], w, (), 2.4)


def test_s1_section() -> None:
    both = section(job("s1_flitch_beam"), "2.4 m")["EI_y"]
    timber = section(job("s1_flitch_beam"), "0.1 m")["EI_y"]
    agrees(timber, 11e9 * 0.150 * 0.225**3 / 12)
    agrees(both - timber, 210e9 * 0.010 * 0.200**3 / 12)
    prints(timber / 1e6, "1.566")
    prints((both - timber) / 1e6, "1.400")
    prints(100 * (1 - timber / both), "47")
    prints(100 * (both - timber) / (both - timber + timber / 1.6), "59")


def test_s1_deflections() -> None:
    result = deflect(job("s1_flitch_beam"))["by_name"]
    Q, G, final = (down(result[n]) for n in ("Q", "G", "final"))
    agrees(Q, flitch(4 * KN))
    agrees(G, flitch(3 * KN))
    agrees(final, flitch(3 * KN + 0.3 * 4 * KN, creep=0.6) + flitch(0.7 * 4 * KN))
    prints(Q / MM, "9.32")
    prints(G / MM, "6.99")
    prints(final / MM, "18.7")
    (live,), (last,) = result["Q"]["checks"], result["final"]["checks"]
    assert live["ok"] and last["ok"]
    prints(live["allowed"] / MM, "13.3")
    prints(last["allowed"] / MM, "19.2")
    # printed 97 %: that is 18.7 of 19.2; unrounded it is 97.6 %
    assert last["used"] == pytest.approx(0.9759, abs=5e-5)


def test_s1_band() -> None:
    total = deflect(job("s1_flitch_beam"))["by_name"]["at once"]["deflection"]["down"]
    low, high = total["band"]["low"], total["band"]["high"]
    for found, E, printed in ((low, 7.4e9, "19.7"), (total["value"], 11e9, "16.3"), (high, 13.5e9, "14.6")):
        agrees(found, flitch(7 * KN, E=E))
        prints(found / MM, printed)


def test_s1_thicker_plate() -> None:
    thicker = changed(
        job("s1_flitch_beam"),
        ('width = "10 mm"', 'width = "12 mm"'),
        ('depth = "200 mm"', 'depth = "210 mm"'),
        ('["42.5 mm", "0 mm"]', '["43.5 mm", "0 mm"]'),
    )
    final = down(deflect(thicker)["by_name"]["final"])
    agrees(final, flitch(4.2 * KN, (12, 210), creep=0.6) + flitch(2.8 * KN, (12, 210)))
    prints(final / MM, "15.5")


# --- S2: runway beam ---------------------------------------------------------------------------------------

BEAM = i_section(0.4, 0.18, 0.0135, 0.0086, 210e9)
WHEELS = ((52 * KN, 2.55), (52 * KN, 4.95))


def runway(plates: tuple[tuple[float, ...], ...], length: float, w: float = 0.0, at: float = 3.75) -> float:
    a, b = 3.75 - length / 2, 3.75 + length / 2
    EI = stepped((a, b, strips(*BEAM, *plates)[2]), other=strips(*BEAM)[2])
    return simple_span(7.5, EI, [a, b], w, WHEELS, at)


BOTH_PLATES = ((210e9, 0.16, 0.0, 0.012), (210e9, 0.16, -0.412, -0.4))


def test_s2_top_and_bottom() -> None:
    text = job("s2_runway_beam")
    result = deflect(text)["by_name"]
    wheels, more = down(result["wheels"]), down(result["with beam and rail"])
    agrees(wheels, runway(BOTH_PLATES, 2.405))
    agrees(more, runway(BOTH_PLATES, 2.405, 0.9 * KN))
    prints(wheels / MM, "12.50")
    prints(more / MM, "13.09")
    assert result["wheels"]["deflection"]["down"]["at"] == pytest.approx(3.75, abs=1e-6)
    agrees(section(text, "1 m")["EI_y"], strips(*BEAM)[2])
    prints(section(text, "1 m")["EI_y"] / 210e9 * 1e8, "21876")
    prints(section(text, "1 m")["EA"] / 210e9 * 1e6, "8068")
    # 12.5003 mm at 2405 mm: "about 2405" is a shade short
    assert not result["wheels"]["checks"][0]["ok"]
    longer = changed(text, ("2547.5 mm", "2545 mm"), ("4952.5 mm", "4955 mm"))
    assert deflect(longer)["by_name"]["wheels"]["checks"][0]["ok"]


def test_s2_bare() -> None:
    head, _, rest = job("s2_runway_beam").partition('[[part]]\nname = "top plate"')
    bare = down(deflect(head + rest[rest.index("[[support]]") :])["by_name"]["wheels"])
    agrees(bare, runway((), 1.0))
    prints(bare / MM, "17.2")


def one_plate(width: str, depth: str, length: float) -> str:
    head, _, rest = job("s2_runway_beam").partition('[[part]]\nname = "top plate"')
    text = head + rest[rest.index('[[part]]\nname = "bottom plate"') :]
    start, end = f"{3750 - length / 2} mm", f"{3750 + length / 2} mm"
    return changed(text, ("160 mm", width), ("12 mm", depth), ("2547.5 mm", start), ("4952.5 mm", end))


def test_s2_bottom_plate_alone() -> None:
    """(a) fails full length; (b) passes from about 3160 mm; both largest at mid-span, as the plate is centred."""
    full = down(deflect(one_plate("160 mm", "15 mm", 7500))["by_name"]["wheels"])
    agrees(full, runway(((210e9, 0.16, -0.415, -0.4),), 7.5))
    prints(full / MM, "12.58")
    thick = ((210e9, 0.2, -0.42, -0.4),)
    for length, passes in ((3150, False), (3170, True)):
        result = deflect(one_plate("200 mm", "20 mm", length))["by_name"]["wheels"]
        agrees(down(result), runway(thick, length * MM))
        assert result["checks"][0]["ok"] is passes


# --- S4: sign arm ------------------------------------------------------------------------------------------


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
    text = job("s4_sign_arm")
    result = deflect(text)["by_name"]
    for name, load, printed in (("self", "self", "0.202"), ("sign", "260", "0.402"), ("ice", "90", "0.139")):
        agrees(down(result[name]) / INCH, arm(load))
        prints(down(result[name]) / INCH, printed)
        assert result[name]["deflection"]["down"]["at"] == pytest.approx(216 * INCH)
    wind = result["wind"]["deflection"]["across"]["value"] / INCH
    agrees(wind, arm("900"))
    prints(wind, "1.39")
    weight = result["self"]["supports"][0]["vertical"] / LBF
    agrees(weight, 490 / 1728 * np.pi * 0.239 * (7.5 - 0.239) * 216)
    prints(weight, "334")
    limits = {c["limit"]: c["allowed"] / INCH for c in result["wind"]["checks"] + result["all down"]["checks"]}
    assert limits == pytest.approx({"wind": 2.40, "dead": 1.80}, rel=1e-12)
    for x, diameter, printed in (("0 ft", 10.0, "87.3"), ("18 ft", 5.0, "10.15")):
        I = section(text, x)["EI_y"] / (29000 * KSI) / INCH**4
        agrees(I, np.pi / 64 * (diameter**4 - (diameter - 0.478) ** 4))
        prints(I, printed)


def test_s4_shortcuts() -> None:
    """Prismatic shortcuts and mid-point steps, on the wind."""
    exact = arm("900")
    text = job("s4_sign_arm")
    law = 'diameter = [["0 ft", "10 in"], ["18 ft", "5 in"]]'

    def wind(new: str) -> float:
        return float(deflect(changed(text, (law, new)))["by_name"]["wind"]["deflection"]["across"]["value"] / INCH)

    def ring(d: float) -> float:
        return float(np.pi / 64 * (d**4 - (d - 0.478) ** 4))

    prints(100 * (wind('diameter = "7.5 in"') / exact - 1), "57")
    mean = (ring(10) + ring(5)) / 2
    scaled = wind('diameter = "7.5 in"') * ring(7.5) / mean
    agrees(scaled, arm("900", lambda x: mean + 0 * x))
    prints(100 * (scaled / exact - 1), "16")
    for n, printed in ((4, "2.9"), (6, "1.3"), (10, "0.46")):
        steps = [(18 * (i + 1) / n, 10 - 5 * (i + 0.5) / n) for i in range(n)]
        found = wind("diameter = { steps = [" + ", ".join(f'["{x!r} ft", "{d!r} in"]' for x, d in steps) + "] }")
        pieces = [(12 * (x - 18 / n), 12 * x, ring(d)) for x, d in steps]
        agrees(found, arm("900", stepped(*pieces), [p[1] for p in pieces]))
        prints(100 * (found / exact - 1), printed)


# --- S5: pump shaft ----------------------------------------------------------------------------------------

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
    result = deflect(job("s5_pump_shaft"))["by_name"]
    printed = {"duty": ("0.021", "0.082", "0.176", "0.080"), "off duty": ("0.043", None, None, "0.162")}
    for name, force in (("duty", 1215.0), ("off duty", 2465.0)):
        checks = {c["limit"]: c for c in result[name]["checks"]}
        assert all(c["ok"] for c in checks.values())
        found = [checks[n]["found"] / MM for n in ("seal face", "bearing A", "bearing B", "wear ring")]
        second = [shaft(force, 300), shaft(force, 30, True), shaft(force, 230, True), shaft(force, 395)]
        second = [second[0], second[1] / MM, second[2] / MM, second[3]]
        for value, check, text in zip(found, second, printed[name], strict=True):
            agrees(value, abs(check))
            if text:
                prints(value, text)
    A, B = result["duty"]["supports"]
    assert (A["name"], B["name"]) == ("bearing A", "bearing B")
    agrees(A["vertical"], -1215 * 165 / 200)
    prints(A["vertical"], "-1002")
    prints(B["vertical"], "2217")
    prints(result["off duty"]["supports"][0]["vertical"] / A["vertical"], "2.029")


def test_s5_shortcuts() -> None:
    text = job("s5_pump_shaft")
    law = next(line for line in text.splitlines() if line.startswith("diameter"))
    for d, printed in ((34, "0.307"), (45, "0.100")):
        result = deflect(changed(text, (law, f'diameter = "{d} mm"')), "395 mm")["by_name"]["duty"]
        found = result["stations"][0]["deflection"] / MM
        agrees(found, shaft(1215, 395, diameters=((0.0, 420.0, float(d)),)))
        prints(found, printed)


# --- S7: joist ---------------------------------------------------------------------------------------------

TOP = ((0.57, 0.63), (0.92, 0.98), (3.37, 3.43))
Cut = dict[str, Any]


def joist(at: float, w: float, shear: bool = True, cut: bool = True, reach: float = 0.0) -> float:
    E, G, b, h, hole = 9.5e9, 9.5e9 / 16, 0.063, 0.225, 0.0325
    zones = [(a - reach * 0.035, c + reach * 0.035, 0.035) for a, c in TOP]
    zones.append((2.3 - reach * 0.025, 2.8 + reach * 0.025, 0.025))

    def compliance(x: Any) -> tuple[Any, Any]:
        d, gap = np.full_like(x, h), np.zeros_like(x)
        if cut:
            for a, c, depth in zones:
                d = np.where((x > a) & (x < c), h - depth, d)
            gap = 2 * np.sqrt(np.maximum(0.0, hole**2 - (x - 1.3) ** 2))
        return 1 / (E * b * (d**3 - gap**3) / 12), 1 / (5 / 6 * G * b * (d - gap))

    M, m = moment_simple(4.2, w), moment_simple(4.2, 0.0, [(1.0, at)])
    V, v = shear_simple(4.2, w), shear_simple(4.2, 0.0, [(1.0, at)])

    def density(x: Any) -> Any:
        f, g = compliance(x)
        return M(x) * m(x) * f + (V(x) * v(x) * g if shear else 0.0)

    breaks = [0.0, 4.2, 1.3 - hole, 1.3 + hole, at]
    return integral(density, breaks + [x for a, c, _ in zones for x in (a, c)])


def intact() -> str:
    text = job("s7_joist")
    return text[: text.index("[[notch]]")] + text[text.index("[[support]]") :]


@pytest.mark.parametrize(
    ("shear", "cut", "reach", "printed"),
    [
        (False, False, 0, "11.4"),
        (True, False, 0, "11.9"),
        (False, True, 0, "12.6"),
        # 13.14 mm at mid-span, as printed; the largest, 13.16 mm, stands at x = 2.172 m
        (True, True, 0, None),
        (True, True, 1, "13.5"),
        (True, True, 3, "14.1"),
    ],
)
def test_s7_deflection(shear: bool, cut: bool, reach: int, printed: str | None) -> None:
    """Influence zones reach beyond notches and rip; the hole stays as it is."""
    text = job("s7_joist") if cut else intact()
    if cut:
        rip = ('to = "2800 mm"', f'to = "2800 mm"\nreach = "{25 * reach} mm"')
        text = changed(text, ('reach = "0 mm"', f'reach = "{35 * reach} mm"'), rip)
    text = text if shear else changed(text, ("shear = true", "shear = false"))
    result = deflect(text, "2.1 m")["by_name"]["Q"]
    worst = result["deflection"]["down"]
    agrees(worst["value"], joist(worst["at"], 1600.0, shear, cut, reach))
    for aside in (-1e-3, 1e-3):
        assert joist(worst["at"] + aside, 1600.0, shear, cut, reach) < worst["value"]
    middle = result["stations"][0]["deflection"]
    agrees(middle, joist(2.1, 1600.0, shear, cut, reach))
    prints((worst["value"] if printed else middle) / MM, printed or "13.1")
    assert result["checks"][0]["ok"] is (not shear and not cut)


def test_s7_totals() -> None:
    """190 mm of depth over the whole span against the joist as cut, bending alone, total load."""
    bending = changed(job("s7_joist"), ("shear = true", "shear = false"))
    as_cut = down(deflect(bending)["by_name"]["total"])
    thin = changed(intact(), ('depth = "225 mm"', 'depth = "190 mm"'), ("shear = true", "shear = false"))
    rough = down(deflect(thin)["by_name"]["total"])
    agrees(rough, 5 * 1900 * 4.2**4 / (384 * 9.5e9 * 0.063 * 0.19**3 / 12))
    prints(as_cut / MM, "15.0")
    prints(rough / MM, "22.5")
    prints(100 * (rough / as_cut - 1), "50")


def test_s7_stresses() -> None:
    def stress(depth: float, x: float) -> float:
        return 1900 * x * (4.2 - x) / 2 / (0.063 * depth**2 / 6) / MPA

    text = job("s7_joist")
    worst = deflect(text)["by_name"]["total"]["stress"][0]["max"]
    assert worst["at"] == pytest.approx(2.3)
    agrees(worst["value"] / MPA, stress(0.2, 2.3))
    prints(worst["value"] / MPA, "9.9")
    whole = deflect(intact())["by_name"]["total"]["stress"][0]["max"]["value"] / MPA
    agrees(whole, stress(0.225, 2.1))
    prints(whole, "7.9")
    coefficient = section(text, "0.95 m")["parts"][0]["stress_per_moment"]["bottom"]
    at_notch = coefficient * 1900 * 0.95 * 3.25 / 2 / MPA
    agrees(at_notch, stress(0.19, 0.95))
    prints(at_notch, "7.7")


SISTER = """
[material.sister]
E = "11000 MPa"

[[part]]
name = "sister"
material = "sister"
shape = "rectangle"
width = "45 mm"
depth = "200 mm"
right_of = "joist"
from = "300 mm"
to = "3900 mm"
"""


def sistered(at: float) -> float:
    """Rigidly joined, its middle level with the joist's: one section of strips, about its own centroid."""
    b, h = 0.063, 0.225

    def EI(x: Any) -> Any:
        result = np.empty_like(x)
        for i, p in enumerate(x):
            bottom = -h + (0.025 if 2.3 < p < 2.8 else 0.0)
            top = -0.035 if any(a < p < c for a, c in TOP) else 0.0
            parts = [(9.5e9, b, bottom, top)]
            if abs(p - 1.3) < 0.0325:
                gap = np.sqrt(0.0325**2 - (p - 1.3) ** 2)
                parts = [(9.5e9, b, -h, -h / 2 - gap), (9.5e9, b, -h / 2 + gap, 0.0)]
            if 0.3 < p < 3.9:
                parts.append((11e9, 0.045, -h / 2 - 0.1, -h / 2 + 0.1))
            result[i] = strips(*parts)[2]
        return result

    edges = [x for pair in TOP for x in pair] + [0.3, 3.9, 2.3, 2.8, 1.3 - 0.0325, 1.3 + 0.0325]
    return simple_span(4.2, EI, edges, 1600.0, (), at)


def test_s7_sistered() -> None:
    text = changed(job("s7_joist"), ("shear = true", "shear = false"))
    head, mark, rest = text.partition("[[notch]]")
    worst = deflect(head + SISTER + mark + rest)["by_name"]["Q"]["deflection"]["down"]
    agrees(worst["value"], sistered(worst["at"]))
    prints(worst["value"] / MM, "7.7")


# --- S9: gantry arm ----------------------------------------------------------------------------------------

BOX = ((70e9, 0.08, -0.005, 0.0), (70e9, 0.01, -0.115, -0.005), (70e9, 0.08, -0.12, -0.115))
FLAT = (210e9, 0.08, -0.13, -0.12)
G0 = 9.80665


def gantry(flat: float, load: str) -> float:
    """Tip deflection [m] with the flat running to a place [m]."""
    EI_box, (EA, z, EI) = strips(*BOX)[2], strips(*BOX, FLAT)
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
    text = job("s9_gantry_arm")
    result = deflect(text)["by_name"]
    for load, printed in (("tip", "21.0"), ("self", "1.1"), ("warmth", "11.3")):
        agrees(down(result[load]), gantry(1.6, load))
        prints(down(result[load]) / MM, printed)
    assert not result["tip"]["checks"][0]["ok"]
    ratio = section(text, "1 m")["EI_y"] / section(text, "2 m")["EI_y"]
    agrees(ratio, strips(*BOX, FLAT)[2] / strips(*BOX)[2])
    prints(ratio, "2.20")
    prints(section(text, "2 m")["EA"] / 70e9 * 1e6, "1900")
    prints(section(text, "2 m")["EI_y"] / 70e9 * 1e8, "375.6")


def test_s9_lengths_of_flat() -> None:
    """Printed bare 41.1 mm: the unrounded value is 41.08 from I = 375.58 cm4, as here without the plate."""
    text = job("s9_gantry_arm")
    for end, printed in ((1835, "20.0"), (3000, "18.7")):
        tip = down(deflect(changed(text, ("1600 mm", f"{end} mm")))["by_name"]["tip"])
        agrees(tip, gantry(end * MM, "tip"))
        prints(tip / MM, printed)
    head, _, rest = text.partition('[[part]]\nname = "flat"')
    bare = changed(head + rest[rest.index("[[support]]") :], (', flat = "35 K"', ""))
    tip = down(deflect(bare)["by_name"]["tip"])
    agrees(tip, 1200 * 27 / (3 * strips(*BOX)[2]))
    prints(tip / MM, "41.1")


def test_s9_forces_in_the_flat() -> None:
    text = job("s9_gantry_arm")
    EA, z, EI = strips(*BOX, FLAT)
    EA_flat = 210e9 * 800e-6
    # temperature: the same all along, so the flat's force is its mean stress times its area
    peaks = deflect(text)["by_name"]["warmth"]["stress"][1]
    force = (peaks["max"]["value"] + peaks["min"]["value"]) / 2 * 800e-6
    lack = 11e-6 * 35
    bow = EA_flat * (z + 0.125) * lack / EI
    second = EA_flat * lack * (1 - EA_flat / EA) - EA_flat * (z + 0.125) * bow
    agrees(force, second)
    prints(force / KN, "13.1")
    # tip load and self-weight just inside the flat's end
    flat = section(text, "1600 mm", "--side", "left")["parts"][1]
    mean = (flat["stress_per_moment"]["top"] + flat["stress_per_moment"]["bottom"]) / 2 * flat["area"]
    agrees(mean, -EA_flat * (-0.125 - z) / EI)
    M = deflect(text, "1600 mm")["by_name"]["tip and self"]["stations"][0]["M"]
    prints(abs(mean * M) / KN, "14.4")
    # shear flow at the root is the change of that force along x
    prints(abs(mean) * 1200 / KN, "10.1")


# --- S11: beam plated under load ---------------------------------------------------------------------------

OFFICE = i_section(15.9, 5.5, 0.44, 0.275, 29000.0)
PLATE = (29000.0, 7.0, -16.4, -15.9)


def office(w: float, plated: bool) -> float:
    """Mid-span deflection [in] under w [klf]."""
    bare, new = strips(*OFFICE)[2], strips(*OFFICE, PLATE)[2]
    EI = stepped((48.0, 252.0, new if plated else bare), other=bare)
    return simple_span(300.0, EI, [48.0, 252.0], w / 12, (), 150.0)


def test_s11_deflections() -> None:
    before, after = deflect(job("s11_before_welding")), deflect(job("s11_after_welding"))
    old, new, live = (down(c) / INCH for c in (before["by_name"]["all"], after["by_name"]["new"], after["by_name"]["live"]))
    for value, w, plated, printed in (
        (old, 0.9, False, "0.743"),
        (new, 1.25, True, "0.721"),
        (live, 1.0, True, "0.577"),
    ):
        agrees(value, office(w, plated))
        prints(value, printed)
    prints(old + new, "1.46")
    assert after["by_name"]["live"]["checks"][0]["ok"]
    prints(after["by_name"]["live"]["checks"][0]["allowed"] / INCH, "0.833")
    prints(new * 2.15 / 1.25, "1.24")
    there, away = section(job("s11_after_welding"), "150 in"), section(job("s11_after_welding"), "1 ft")
    prints(there["EI_y"] / (29000 * KSI) / INCH**4, "536")
    prints(away["EI_y"] / (29000 * KSI) / INCH**4, "367")
    prints(away["EA"] / (29000 * KSI) / INCH**2, "8.97")
    prints(there["z_c"] / INCH + 15.9, "5.65")


def test_s11_stresses() -> None:
    text = job("s11_after_welding")
    (_, z, EI), (_, z0, EI0) = strips(*OFFICE, PLATE), strips(*OFFICE)
    M_old, M_new = 0.9 * 25**2 / 8 * 12, 1.25 * 25**2 / 8 * 12
    old = deflect(job("s11_before_welding"))["by_name"]["all"]["stress"][0]
    agrees(old["max"]["value"] / KSI, 29000 * M_old * (z0 + 15.9) / EI0)
    prints(old["max"]["value"] / KSI, "18.3")
    beam, plate = section(text, "150 in")["parts"]
    per_moment = M_new * 1000 * LBF * INCH / KSI
    bottom, top = (beam["stress_per_moment"][side] * per_moment for side in ("bottom", "top"))
    agrees(bottom, 29000 * M_new * (z + 15.9) / EI)
    agrees(top, -29000 * M_new * (0 - z) / EI)
    prints(bottom, "12.3")
    prints(bottom + old["max"]["value"] / KSI, "30.6")
    prints(plate["stress_per_moment"]["bottom"] * per_moment, "13.4")
    prints(-(top + old["min"]["value"] / KSI), "40.7")


def test_s11_at_the_cut_off() -> None:
    text = job("s11_after_welding")
    (_, z, EI), EI0 = strips(*OFFICE, PLATE), strips(*OFFICE)[2]
    bare = section(text, "4 ft", "--side", "left")["parts"][0]["stress_per_moment"]["bottom"]
    M, V = 2.15 * 4 * 21 / 2 * 12, 1.25 * (12.5 - 4)
    unit = 1000 * LBF * INCH / KSI
    agrees(bare * M * unit, 29000 * M * 7.95 / EI0)
    prints(bare * M * unit, "23.5")
    plate = section(text, "4 ft", "--side", "right")["parts"][1]
    mean = (plate["stress_per_moment"]["top"] + plate["stress_per_moment"]["bottom"]) / 2 * unit * 3.5
    agrees(mean, 29000 * 3.5 * (z + 16.15) / EI)
    prints(mean * 1.25 * 4 * 21 / 2 * 12, "24.25")
    prints(mean * V, "0.41")
    station = deflect(text, "4 ft")["by_name"]["new"]["stations"][0]
    agrees(station["V"] / (1000 * LBF), V)
