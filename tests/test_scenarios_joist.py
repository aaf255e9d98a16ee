"""A timber joist cut by services.

Each figure against an independent computation (`by_hand`: strips and the unit-load integral), which must agree to
1e-8, and against the printed one, which must hold to half of its last digit.
"""

from typing import Any

import numpy as np
import pytest
from by_hand import integral, moment_simple, shear_simple, simple_span, skew_strips
from commands import MM, MPA, changed, check_agrees, check_prints, deflect, down, scenario, section

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
    text = scenario("s7_joist")
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
    text = scenario("s7_joist") if cut else intact()
    if cut:
        rip = ('to = "2800 mm"', f'to = "2800 mm"\nreach = "{25 * reach} mm"')
        text = changed(text, ('reach = "0 mm"', f'reach = "{35 * reach} mm"'), rip)
    text = text if shear else changed(text, ("shear = true", "shear = false"))
    result = deflect(text, "2.1 m")["by_name"]["Q"]
    worst = result["deflection"]["down"]
    check_agrees(worst["value"], joist(worst["at"], 1600.0, shear, cut, reach))
    for aside in (-1e-3, 1e-3):
        assert joist(worst["at"] + aside, 1600.0, shear, cut, reach) < worst["value"]
    middle = result["stations"][0]["deflection"]
    check_agrees(middle, joist(2.1, 1600.0, shear, cut, reach))
    check_prints((worst["value"] if printed else middle) / MM, printed or "13.1")
    assert result["checks"][0]["ok"] is (not shear and not cut)


def test_s7_totals() -> None:
    """190 mm of depth over the whole span against the joist as cut, bending alone, total load."""
    bending = changed(scenario("s7_joist"), ("shear = true", "shear = false"))
    as_cut = down(deflect(bending)["by_name"]["total"])
    thin = changed(intact(), ('depth = "225 mm"', 'depth = "190 mm"'), ("shear = true", "shear = false"))
    rough = down(deflect(thin)["by_name"]["total"])
    check_agrees(rough, 5 * 1900 * 4.2**4 / (384 * 9.5e9 * 0.063 * 0.19**3 / 12))
    check_prints(as_cut / MM, "15.0")
    check_prints(rough / MM, "22.5")
    check_prints(100 * (rough / as_cut - 1), "50")


def test_s7_stresses() -> None:
    def stress(depth: float, x: float) -> float:
        return 1900 * x * (4.2 - x) / 2 / (0.063 * depth**2 / 6) / MPA

    text = scenario("s7_joist")
    worst = deflect(text)["by_name"]["total"]["stress"][0]["max"]
    assert worst["at"] == pytest.approx(2.3)
    check_agrees(worst["value"] / MPA, stress(0.2, 2.3))
    check_prints(worst["value"] / MPA, "9.9")
    whole = deflect(intact())["by_name"]["total"]["stress"][0]["max"]["value"] / MPA
    check_agrees(whole, stress(0.225, 2.1))
    check_prints(whole, "7.9")
    coefficient = section(text, "0.95 m")["parts"][0]["stress_per_moment"]["bottom"]
    at_notch = coefficient * 1900 * 0.95 * 3.25 / 2 / MPA
    check_agrees(at_notch, stress(0.19, 0.95))
    check_prints(at_notch, "7.7")


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


def sistered(at: float, joined: bool) -> float:
    """Mid-span region deflection with a sister, middles level: rigidly joined, or only sharing the deflection."""
    b, h = 0.063, 0.225

    def EI(x: Any) -> Any:
        result = np.empty_like(x)
        for i, p in enumerate(x):
            bottom = -h + (0.025 if 2.3 < p < 2.8 else 0.0)
            top = -0.035 if any(a < p < c for a, c in TOP) else 0.0
            own = [(9.5e9, b, bottom, top, 0.0)]
            if abs(p - 1.3) < 0.0325:
                gap = np.sqrt(0.0325**2 - (p - 1.3) ** 2)
                own = [(9.5e9, b, -h, -h / 2 - gap, 0.0), (9.5e9, b, -h / 2 + gap, 0.0, 0.0)]
            other = [(11e9, 0.045, -h / 2 - 0.1, -h / 2 + 0.1, 0.054)] if 0.3 < p < 3.9 else []
            if joined:
                result[i] = skew_strips(*own, *other)
            else:
                result[i] = skew_strips(*own) + (skew_strips(*other) if other else 0.0)
        return result

    edges = [x for pair in TOP for x in pair] + [0.3, 3.9, 2.3, 2.8, 1.3 - 0.0325, 1.3 + 0.0325]
    return simple_span(4.2, EI, edges, 1600.0, (), at)


def test_s7_sistered() -> None:
    """Rigidly joined 7.649 mm; the printed 7.7 is two timbers that share the deflection alone, 7.656 mm."""
    text = changed(scenario("s7_joist"), ("shear = true", "shear = false"))
    head, mark, rest = text.partition("[[notch]]")
    worst = deflect(head + SISTER + mark + rest)["by_name"]["Q"]["deflection"]["down"]
    check_agrees(worst["value"], sistered(worst["at"], joined=True))
    check_prints(sistered(2.14, joined=False) / MM, "7.7")
    assert worst["value"] < sistered(2.14, joined=False) < 1.0015 * worst["value"]
