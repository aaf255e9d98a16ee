"""Beams: a flitch beam, a crane runway beam, an office beam plated under load.

Each figure against an independent computation (`by_hand`: strips and the unit-load integral), which must agree to
1e-8, and against the printed one, which must hold to half of its last digit.
"""

import pytest
from by_hand import i_section, simple_span, stepped, strips
from commands import INCH, KN, KSI, LBF, MM, changed, check_agrees, check_prints, deflect, down, scenario, section


def flitch(w: float, plate: tuple[float, float] = (10, 200), E: float = 11e9, creep: float = 0.0) -> float:
    timber = E / (1 + creep) * 0.150 * 0.225**3 / 12
    steel = 210e9 * plate[0] * MM * (plate[1] * MM) ** 3 / 12
    EI = stepped((0.15, 4.65, timber + steel), other=timber)
    return simple_span(4.8, EI, [0.15, 4.65], w, (), 2.4)


def test_s1_section() -> None:
    both = section(scenario("s1_flitch_beam"), "2.4 m")["EI_y"]
    timber = section(scenario("s1_flitch_beam"), "0.1 m")["EI_y"]
    check_agrees(timber, 11e9 * 0.150 * 0.225**3 / 12)
    check_agrees(both - timber, 210e9 * 0.010 * 0.200**3 / 12)
    check_prints(timber / 1e6, "1.566")
    check_prints((both - timber) / 1e6, "1.400")
    check_prints(100 * (1 - timber / both), "47")
    check_prints(100 * (both - timber) / (both - timber + timber / 1.6), "59")


def test_s1_deflections() -> None:
    result = deflect(scenario("s1_flitch_beam"))["by_name"]
    Q, G, final = (down(result[n]) for n in ("Q", "G", "final"))
    check_agrees(Q, flitch(4 * KN))
    check_agrees(G, flitch(3 * KN))
    check_agrees(final, flitch(3 * KN + 0.3 * 4 * KN, creep=0.6) + flitch(0.7 * 4 * KN))
    check_prints(Q / MM, "9.32")
    check_prints(G / MM, "6.99")
    check_prints(final / MM, "18.7")
    (live,), (last,) = result["Q"]["checks"], result["final"]["checks"]
    assert live["ok"] and last["ok"]
    check_prints(live["allowed"] / MM, "13.3")
    check_prints(last["allowed"] / MM, "19.2")
    # printed 97 %: that is 18.7 of 19.2; unrounded it is 97.6 %
    assert last["used"] == pytest.approx(0.9759, abs=5e-5)


def test_s1_band() -> None:
    total = deflect(scenario("s1_flitch_beam"))["by_name"]["at once"]["deflection"]["down"]
    low, high = total["band"]["low"], total["band"]["high"]
    for found, E, printed in ((low, 7.4e9, "19.7"), (total["value"], 11e9, "16.3"), (high, 13.5e9, "14.6")):
        check_agrees(found, flitch(7 * KN, E=E))
        check_prints(found / MM, printed)


def test_s1_thicker_plate() -> None:
    thicker = changed(
        scenario("s1_flitch_beam"),
        ('width = "10 mm"', 'width = "12 mm"'),
        ('depth = "200 mm"', 'depth = "210 mm"'),
        ('["42.5 mm", "0 mm"]', '["43.5 mm", "0 mm"]'),
    )
    final = down(deflect(thicker)["by_name"]["final"])
    check_agrees(final, flitch(4.2 * KN, (12, 210), creep=0.6) + flitch(2.8 * KN, (12, 210)))
    check_prints(final / MM, "15.5")


BEAM = i_section(0.4, 0.18, 0.0135, 0.0086, 210e9)
WHEELS = ((52 * KN, 2.55), (52 * KN, 4.95))


def runway(plates: tuple[tuple[float, ...], ...], length: float, w: float = 0.0, at: float = 3.75) -> float:
    a, b = 3.75 - length / 2, 3.75 + length / 2
    EI = stepped((a, b, strips(*BEAM, *plates)[2]), other=strips(*BEAM)[2])
    return simple_span(7.5, EI, [a, b], w, WHEELS, at)


BOTH_PLATES = ((210e9, 0.16, 0.0, 0.012), (210e9, 0.16, -0.412, -0.4))


def test_s2_top_and_bottom() -> None:
    text = scenario("s2_runway_beam")
    result = deflect(text)["by_name"]
    wheels, more = down(result["wheels"]), down(result["with beam and rail"])
    check_agrees(wheels, runway(BOTH_PLATES, 2.405))
    check_agrees(more, runway(BOTH_PLATES, 2.405, 0.9 * KN))
    check_prints(wheels / MM, "12.50")
    check_prints(more / MM, "13.09")
    assert result["wheels"]["deflection"]["down"]["at"] == pytest.approx(3.75, abs=1e-6)
    check_agrees(section(text, "1 m")["EI_y"], strips(*BEAM)[2])
    check_prints(section(text, "1 m")["EI_y"] / 210e9 * 1e8, "21876")
    check_prints(section(text, "1 m")["EA"] / 210e9 * 1e6, "8068")
    # 12.5003 mm at 2405 mm: "about 2405" is a shade short
    assert not result["wheels"]["checks"][0]["ok"]
    longer = changed(text, ("2547.5 mm", "2545 mm"), ("4952.5 mm", "4955 mm"))
    assert deflect(longer)["by_name"]["wheels"]["checks"][0]["ok"]


def test_s2_bare() -> None:
    head, _, rest = scenario("s2_runway_beam").partition('[[part]]\nname = "top plate"')
    bare = down(deflect(head + rest[rest.index("[[support]]") :])["by_name"]["wheels"])
    check_agrees(bare, runway((), 1.0))
    check_prints(bare / MM, "17.2")


def one_plate(width: str, depth: str, length: float) -> str:
    head, _, rest = scenario("s2_runway_beam").partition('[[part]]\nname = "top plate"')
    text = head + rest[rest.index('[[part]]\nname = "bottom plate"') :]
    start, end = f"{3750 - length / 2} mm", f"{3750 + length / 2} mm"
    return changed(text, ("160 mm", width), ("12 mm", depth), ("2547.5 mm", start), ("4952.5 mm", end))


def test_s2_bottom_plate_alone() -> None:
    """(a) fails full length; (b) passes from about 3160 mm; both largest at mid-span, as the plate is centred."""
    full = down(deflect(one_plate("160 mm", "15 mm", 7500))["by_name"]["wheels"])
    check_agrees(full, runway(((210e9, 0.16, -0.415, -0.4),), 7.5))
    check_prints(full / MM, "12.58")
    thick = ((210e9, 0.2, -0.42, -0.4),)
    for length, passes in ((3150, False), (3170, True)):
        result = deflect(one_plate("200 mm", "20 mm", length))["by_name"]["wheels"]
        check_agrees(down(result), runway(thick, length * MM))
        assert result["checks"][0]["ok"] is passes


OFFICE = i_section(15.9, 5.5, 0.44, 0.275, 29000.0)
PLATE = (29000.0, 7.0, -16.4, -15.9)


def office(w: float, plated: bool) -> float:
    """Mid-span deflection [in] under w [klf]."""
    bare, new = strips(*OFFICE)[2], strips(*OFFICE, PLATE)[2]
    EI = stepped((48.0, 252.0, new if plated else bare), other=bare)
    return simple_span(300.0, EI, [48.0, 252.0], w / 12, (), 150.0)


def test_s11_deflections() -> None:
    before, after = deflect(scenario("s11_before_welding")), deflect(scenario("s11_after_welding"))
    old, new, live = (
        down(c) / INCH for c in (before["by_name"]["all"], after["by_name"]["new"], after["by_name"]["live"])
    )
    for value, w, plated, printed in (
        (old, 0.9, False, "0.743"),
        (new, 1.25, True, "0.721"),
        (live, 1.0, True, "0.577"),
    ):
        check_agrees(value, office(w, plated))
        check_prints(value, printed)
    check_prints(old + new, "1.46")
    assert after["by_name"]["live"]["checks"][0]["ok"]
    check_prints(after["by_name"]["live"]["checks"][0]["allowed"] / INCH, "0.833")
    check_prints(new * 2.15 / 1.25, "1.24")
    there, away = section(scenario("s11_after_welding"), "150 in"), section(scenario("s11_after_welding"), "1 ft")
    check_prints(there["EI_y"] / (29000 * KSI) / INCH**4, "536")
    check_prints(away["EI_y"] / (29000 * KSI) / INCH**4, "367")
    check_prints(away["EA"] / (29000 * KSI) / INCH**2, "8.97")
    check_prints(there["z_c"] / INCH + 15.9, "5.65")


def test_s11_stresses() -> None:
    text = scenario("s11_after_welding")
    (_, z, EI), (_, z0, EI0) = strips(*OFFICE, PLATE), strips(*OFFICE)
    M_old, M_new = 0.9 * 25**2 / 8 * 12, 1.25 * 25**2 / 8 * 12
    old = deflect(scenario("s11_before_welding"))["by_name"]["all"]["stress"][0]
    check_agrees(old["max"]["value"] / KSI, 29000 * M_old * (z0 + 15.9) / EI0)
    check_prints(old["max"]["value"] / KSI, "18.3")
    beam, plate = section(text, "150 in")["parts"]
    per_moment = M_new * 1000 * LBF * INCH / KSI
    bottom, top = (beam["stress_per_moment"][side] * per_moment for side in ("bottom", "top"))
    check_agrees(bottom, 29000 * M_new * (z + 15.9) / EI)
    check_agrees(top, -29000 * M_new * (0 - z) / EI)
    check_prints(bottom, "12.3")
    check_prints(bottom + old["max"]["value"] / KSI, "30.6")
    check_prints(plate["stress_per_moment"]["bottom"] * per_moment, "13.4")
    check_prints(-(top + old["min"]["value"] / KSI), "40.7")


def test_s11_at_the_cut_off() -> None:
    text = scenario("s11_after_welding")
    (_, z, EI), EI0 = strips(*OFFICE, PLATE), strips(*OFFICE)[2]
    bare = section(text, "4 ft", "--side", "left")["parts"][0]["stress_per_moment"]["bottom"]
    M, V = 2.15 * 4 * 21 / 2 * 12, 1.25 * (12.5 - 4)
    unit = 1000 * LBF * INCH / KSI
    check_agrees(bare * M * unit, 29000 * M * 7.95 / EI0)
    check_prints(bare * M * unit, "23.5")
    plate = section(text, "4 ft", "--side", "right")["parts"][1]
    mean = (plate["stress_per_moment"]["top"] + plate["stress_per_moment"]["bottom"]) / 2 * unit * 3.5
    check_agrees(mean, 29000 * 3.5 * (z + 16.15) / EI)
    check_prints(mean * 1.25 * 4 * 21 / 2 * 12, "24.25")
    check_prints(mean * V, "0.41")
    station = deflect(text, "4 ft")["by_name"]["new"]["stations"][0]
    check_agrees(station["V"] / (1000 * LBF), V)
