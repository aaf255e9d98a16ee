"""Group C: tapered, stepped, haunched and uniform-strength members, run through ``fishbelly deflect`` on a job text.

Every row is one test named by its id; sources stand in the rows of ``group_C.json``, those marked "from memory" there
are so. Bending alone, E = 12 Pa, so that a section 1 m by 1 m has EI = 1 N·m². The free end is at x = 0.
"""

import math
from typing import Any

import pytest
from by_hand import integral
from commands import FOOT, LBF, deflect
from printed import half_a_digit, rows

ROWS = rows("C")
TIP = '[[load]]\nkind = "point"\nvalue = "1 N"\nat = "0 m"\n'


def rectangle(width: str, depth: str) -> str:
    return f'[[part]]\nname = "member"\nmaterial = "unit"\nshape = "rectangle"\nwidth = {width}\ndepth = {depth}\n'


def cantilever(parts: str, load: str = TIP) -> str:
    return (
        f'length = "1 m"\nshear = false\n[material.unit]\nE = "12 Pa"\n{parts}'
        f'[[support]]\nat = "1 m"\nkind = "fixed"\n{load}'
    )


def simple(parts: str) -> str:
    """Simple span of 1 m under a central load."""
    held = '[[support]]\nat = "0 m"\nkind = "pin"\n[[support]]\nat = "1 m"\nkind = "roller"\n'
    load = TIP.replace('"0 m"', '"0.5 m"')
    return f'length = "1 m"\nshear = false\n[material.unit]\nE = "12 Pa"\n{parts}{held}{load}'


def straight(*stations: tuple[float, float]) -> str:
    return "[" + ", ".join(f'["{x!r} m", "{value!r} m"]' for x, value in stations) + "]"


def steps(*stations: tuple[float, float]) -> str:
    return f"{{ steps = {straight(*stations)} }}"


def down(text: str) -> float:
    return float(deflect(text)["combinations"][0]["deflection"]["down"]["value"])


def check(row: dict[str, Any], found: dict[str, float], closed: dict[str, float]) -> None:
    """Print to half a digit, the row's computation to 2e-7, the closed form to 1e-9."""
    assert set(found) == set(row["value"]) == set(closed)
    for key, value in found.items():
        half_a_digit(value, row["value"][key], row, key)
        assert value == pytest.approx(row["computed"][key], rel=2e-7), key
        assert value == pytest.approx(closed[key], rel=1e-9), key


def test_C1() -> None:
    """A rectangle twice as deep at the fixed end."""
    found = down(cantilever(rectangle('"1 m"', straight((0.0, 1.0), (1.0, 2.0)))))
    check(ROWS["C1"], {"value": found}, {"value": math.log(2) - 5 / 8})


def test_C3() -> None:
    found = down(cantilever(rectangle(steps((0.5, 1.0), (1.0, 2.0)), '"1 m"')))
    check(ROWS["C3"], {"value": found}, {"value": 3 / 16})


def test_C5() -> None:
    text = simple(rectangle(steps((0.25, 1.0), (0.75, 2.0), (1.0, 1.0)), '"1 m"'))
    found = {"mid": down(text), "slope": deflect(text)["combinations"][0]["ends"]["left"]["slope"]}
    check(ROWS["C5"], found, {"mid": 3 / 256, "slope": 5 / 128})


def test_C7() -> None:
    """Width from nothing at the tip; P l^3 / (b E h^3) = 1/12 here."""
    found = down(cantilever(rectangle(straight((0.0, 0.0), (1.0, 1.0)), '"1 m"')))
    check(ROWS["C7"], {"coef": 12 * found}, {"coef": 6.0})


def test_C8() -> None:
    """Depth as the root of the distance from the tip, no law of the job's: 10 000 stations straight between.

    They crowd at the tip, x = t^3. Under a load at its point a wedge would not carry, so the first two have
    one depth, over a length of 1e-12. Chords of a root lie inside it: 1e-8 of stiffness is lost, and the closed form
    holds to that.
    """
    n = 10_000
    places = [(i / n) ** 3 for i in range(n + 1)]
    depth = straight(*((x, math.sqrt(max(x, places[1]))) for x in places))
    found = 12 * down(cantilever(rectangle('"1 m"', depth)))
    half_a_digit(found, ROWS["C8"]["value"]["coef"], ROWS["C8"], "coef")
    assert found == pytest.approx(ROWS["C8"]["computed"]["coef"], rel=2e-8)


def test_C10() -> None:
    """Width as the square of the distance from the tip, uniform load 1 in all."""
    load = '[[load]]\nkind = "uniform"\nvalue = "1 N/m"\n'
    width = '{ law = "parabola", stations = [["0 m", "0 m"], ["1 m", "1 m"]], flat_at = "0 m" }'
    found = down(cantilever(rectangle(width, '"1 m"'), load))
    check(ROWS["C10"], {"coef": 12 * found}, {"coef": 3.0})


def test_C12() -> None:
    found = down(simple(rectangle(straight((0.0, 0.0), (0.5, 1.0), (1.0, 0.0)), '"1 m"')))
    check(ROWS["C12"], {"value": found}, {"value": 1 / 32})


def taper(n: int, ratio: float) -> str:
    """Section whose I is (1 + K x)^n, from 1 to `ratio`.

    n = 1: a rectangle of varying width. n = 2: two thin strips of constant area at a varying distance d, I = A d²/2;
    their own inertia, (t/d)²/3 of it with t = 1e-6 d, is below 1e-12.
    """
    if n == 1:
        return rectangle(straight((0.0, 1.0), (1.0, ratio)), '"1 m"')
    t, far = 1e-6, math.sqrt(ratio)
    strip = f'material = "unit"\nshape = "rectangle"\nwidth = "{1 / 6 / t!r} m"\ndepth = "{t!r} m"\n'
    gap = straight((0.0, 1 - t), (1.0, far - t))
    return f'[[part]]\nname = "upper"\n{strip}[[part]]\nname = "lower"\n{strip}under = "upper"\ngap = {gap}\n'


def multipliers(n: int, ratio: float) -> dict[str, float]:
    """3 ∫ x²/(1 + K x)^n dx and 2 ∫ x/(1 + K x)^n dx over 0 to 1."""
    k = ratio ** (1 / n) - 1
    log = math.log(1 + k)
    if n == 1:
        return {"y_A": 3 * (1 / (2 * k) - 1 / k**2 + log / k**3), "theta_A": 2 * (1 / k - log / k**2)}
    return {
        "y_A": 3 * (1 + k - 2 * log - 1 / (1 + k)) / k**3,
        "theta_A": 2 * (log + 1 / (1 + k) - 1) / k**2,
    }


C13 = [row for key, row in ROWS.items() if key.startswith("C13")]


@pytest.mark.parametrize("row", C13, ids=[row["id"] for row in C13])
def test_C13(row: dict[str, Any]) -> None:
    n, ratio = int(row["inputs"]["n"]), float(row["inputs"]["IB_IA"])
    result = deflect(cantilever(taper(n, ratio)))["combinations"][0]
    found = {"y_A": 3 * result["deflection"]["down"]["value"], "theta_A": -2 * result["ends"]["left"]["slope"]}
    closed = multipliers(n, ratio)
    for key, value in found.items():
        assert value == pytest.approx(closed[key], rel=1e-9), key
    asked = row["value"].keys()
    check(row, {key: found[key] for key in asked}, {key: closed[key] for key in asked})


def test_C14() -> None:
    """A solid circle whose diameter varies straight: I as its fourth power."""
    d = (64 / math.pi / 12) ** 0.25
    law = straight((0.0, d), (1.0, d * 0.25**0.25))
    parts = f'[[part]]\nname = "rod"\nmaterial = "unit"\nshape = "circle"\ndiameter = {law}\n'
    found = 3 * down(cantilever(parts))
    check(ROWS["C14"], {"m": found}, {"m": 0.25**-0.75})


def test_C15() -> None:
    """Fixed both ends, parabolic haunches as deep again as the beam over a fifth of the span at each end."""
    haunch = '[[haunch]]\nof = "member"\nat = "{} m"\ndepth = "1 m"\nreach = "0.2 m"\nlaw = "parabola"\n'
    held = "".join(f'[[support]]\nat = "{x} m"\nkind = "fixed"\n' for x in (0, 1))
    load = '[[load]]\nkind = "uniform"\nvalue = "1 N/m"\n'
    text = (
        'length = "1 m"\nshear = false\n[material.unit]\nE = "12 Pa"\n'
        + rectangle('"1 m"', '"1 m"')
        + haunch.format(0)
        + haunch.format(1)
        + held
        + load
    )

    def flexibility(x: Any) -> Any:
        return (1 + (1 - x.clip(max=0.2) / 0.2) ** 2) ** -3

    def half(f: Any) -> float:
        return integral(f, [0.0, 0.2, 0.5])

    fixed_end = half(lambda x: x * (1 - x) / 2 * flexibility(x)) / half(flexibility)
    second = half(lambda x: (x - 0.5) * (x * (1 - x) / 2 - fixed_end) * flexibility(x))
    check(ROWS["C15"], {"defl": down(text)}, {"defl": second})


def test_C17() -> None:
    """Where the moment reaches 215.6 kip-ft: reactions 35.2 and 30.8 kip, 1.2 kip/ft, 8 kip at 4 ft.

    The two printed equations fix the left load; the right one follows from equilibrium with the length that makes it
    whole, 40 ft: 10 kip at 24 ft.
    """
    steel = '[material.steel]\nE = "29000 ksi"\n[[part]]\nname = "beam"\nmaterial = "steel"\nshape = "rectangle"\n'
    text = (
        f'length = "40 ft"\nshear = false\n{steel}width = "6 in"\ndepth = "30 in"\n'
        '[[support]]\nat = "0 ft"\nkind = "pin"\n[[support]]\nat = "40 ft"\nkind = "roller"\n'
        '[[load]]\nkind = "uniform"\nvalue = "1.2 kip/ft"\n'
        '[[load]]\nkind = "point"\nvalue = "8 kip"\nat = "4 ft"\n'
        '[[load]]\nkind = "point"\nvalue = "10 kip"\nat = "24 ft"\n'
    )
    kip = 1000 * LBF

    def moment(x: float) -> float:
        result = deflect(text, f"{x!r} ft")["combinations"][0]
        assert [s["vertical"] / kip for s in result["supports"]] == pytest.approx([35.2, 30.8], rel=1e-9)
        return float(result["stations"][0]["M"]) / (kip * FOOT)

    def reaches(low: float, high: float) -> float:
        f_low, f_high = moment(low) - 215.6, moment(high) - 215.6
        for _ in range(20):
            middle = low - f_low * (high - low) / (f_high - f_low)
            f = moment(middle) - 215.6
            if abs(f) < 1e-10 * 215.6:
                return middle
            low, f_low, high, f_high = high, f_high, middle, f
        raise AssertionError("no crossing found")

    y2 = ((35.2 - 8) - math.sqrt((35.2 - 8) ** 2 - 2 * 1.2 * (215.6 - 32))) / 1.2
    yG = (30.8 - math.sqrt(30.8**2 - 2 * 1.2 * 215.6)) / 1.2
    found = {"y2": reaches(7.0, 9.0), "yG": 40 - reaches(30.0, 33.0)}
    check(ROWS["C17"], found, {"y2": y2, "yG": yG})
