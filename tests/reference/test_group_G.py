"""Group G: transformed sections, principal axes and torsion, run through ``fishbelly section`` on a job text.

Every row is one test named by its id; sources stand in the rows of ``group_G.json``, those marked "from memory"
there are so. What no command prints, Cowper's coefficients and the largest stress of a twist, is asked of the package:
see ``test_group_G_shear.py``.
"""

import math
from typing import Any

import pytest
from commands import INCH, MM, MPA, section
from printed import half_a_digit, rows

ROWS = rows("G")
HELD = '[[support]]\nat = "0 m"\nkind = "pin"\n[[support]]\nat = "1 m"\nkind = "roller"\n'


def job(parts: str, materials: dict[str, str], top: str = "") -> str:
    listed = "".join(f"[material.{name}]\nE = {E!r}\n" for name, E in materials.items()).replace("'", '"')
    return f'length = "1 m"\nshear = false\n{top}{listed}{parts}{HELD}'


def part(name: str, material: str, width: str, depth: str, more: str = "") -> str:
    return (
        f'[[part]]\nname = "{name}"\nmaterial = "{material}"\nshape = "rectangle"\n'
        f'width = "{width}"\ndepth = "{depth}"\n{more}\n'
    )


def check(row: dict[str, Any], found: dict[str, float], closed: dict[str, float] | None = None) -> None:
    """Print to half a digit or the row's stated difference; the row's computation to 2e-7; closed forms to 1e-9."""
    for key, value in found.items():
        half_a_digit(value, row["value"][key], row, key)
        assert value == pytest.approx(row["computed"][key], rel=2e-7), key
    for key, value in (closed or {}).items():
        assert found[key] == pytest.approx(value, rel=1e-9), key


def test_G1() -> None:
    """M = 2 kNm, wood above steel; 28.6 is the stress in steel at the wood's top level, 1.71 the wood's own."""
    parts = part("wood", "wood", "150 mm", "150 mm") + part("plate", "steel", "150 mm", "20 mm", 'under = "wood"')
    found = section(job(parts, {"wood": "12 GPa", "steel": "200 GPa"}), "0.5 m", "--to", "steel")
    wood, plate = found["parts"]
    M = 2000 / MPA
    sigma = -wood["stress_per_moment"]["top"] * M
    ybar = (22500 * 0.06 * 95 + 3000 * 10) / (22500 * 0.06 + 3000)
    check(
        ROWS["G1"],
        {
            "ybar": (found["z_c"] + 0.17) / MM,
            "I": found["transformed"]["I_y"] / MM**4,
            "sig_top_steel_equiv": sigma / 0.06,
            "sig_bottom": plate["stress_per_moment"]["bottom"] * M,
            "sig_wood_top": sigma,
        },
        {"ybar": ybar},
    )


def test_G3() -> None:
    """Brass sides, steel core: transformed to brass, and stresses under 40 kip-in."""
    parts = part("core", "steel", "0.75 in", "3 in") + part(
        "side", "brass", "0.4 in", "3 in", 'right_of = "core"\npair = true'
    )
    found = section(job(parts, {"steel": "29000 ksi", "brass": "15000 ksi"}), "0.5 m", "--to", "brass")
    core, side = found["parts"]
    M = 40 / INCH**3
    stress = {name: p["stress_per_moment"]["bottom"] * INCH**3 * 40 for name, p in (("sb", side), ("ss", core))}
    assert side["stress_per_moment"]["top"] * M < 0
    width = found["transformed"]["A"] / INCH**2 / 3
    check(ROWS["G3"], {"w": width} | stress, {"w": 0.8 + 0.75 * 29 / 15, "sb": 40 * 1.5 / (2.25 * 27 / 12)})


def girder(slab: bool) -> tuple[dict[str, Any], float]:
    """Section of the bridge girder; the own inertia [in4] of plate and slab that are rectangles here.

    The rolled section is an I 35.84 in deep, its flange 0.94 in, with width and web that give its printed A and I.
    """
    d, t, A, I = 35.84, 0.94, 44.16, 9012.0
    inner = d - 2 * t
    # A = 2 b t + w inner; 12 I = b (d^3 - inner^3) + w inner^3
    b = (12 * I - A * inner**2) / (d**3 - inner**3 - 2 * t * inner**2)
    w = (A - 2 * b * t) / inner
    parts = (
        f'[[part]]\nname = "beam"\nmaterial = "steel"\nshape = "I"\ndepth = "{d} in"\nwidth = "{b!r} in"\n'
        f'flange = "{t} in"\nweb = "{w!r} in"\n'
    )
    parts += part("plate", "steel", "10 in", "1.5 in", 'under = "beam"')
    own = 15 * 1.5**2 / 12
    materials = {"steel": "29000 ksi"}
    if slab:
        parts += part("slab", "concrete", "78 in", "6.5 in", 'over = "beam"')
        materials["concrete"] = "2900 ksi"
        own += 50.7 * 6.5**2 / 12
    return section(job(parts, materials, 'datum = "middle"\n'), "0.5 m", "--to", "steel"), own


def test_G6_steel_only() -> None:
    found, own = girder(slab=False)
    A, z = found["transformed"]["A"] / INCH**2, found["z_c"] / INCH
    check(ROWS["G6-steel only"], {"A": A, "ybar": z, "Ay": A * z}, {"A": 59.16, "Ay": -15 * 18.67})
    # the row's 12915 leaves out the plate's own inertia
    assert found["transformed"]["I_y"] / INCH**4 - own == pytest.approx(12915, abs=0.5)


def test_G6_n_10() -> None:
    """Slab 78 in by 6.5 in on the flange: 50.70 in² at 21.17 in when n = 10."""
    row = ROWS["G6-n=10"]
    found, own = girder(slab=True)
    A, z = found["transformed"]["A"] / INCH**2, found["z_c"] / INCH
    check(row, {"A": A, "Ay": A * z}, {"A": 109.86, "Ay": 50.7 * 21.17 - 15 * 18.67})
    about_middle = found["transformed"]["I_y"] / INCH**4 + A * z**2
    half_a_digit(about_middle - 9012 - own, row["value"]["Ay2"], row, "Ay2")
    assert about_middle - 9012 - own == pytest.approx(row["computed"]["Ay2"], rel=2e-7)
    # Io: 9012, and the slab's 178.5 printed as 179; the plate's 2.8 is left out of the print
    half_a_digit(9012 + own - 15 * 1.5**2 / 12, row["value"]["Io"], row, "Io")
    assert found["transformed"]["I_y"] / INCH**4 == pytest.approx(31414, abs=3.0)


def test_G7() -> None:
    """The upper flange's force per unit moment is Q / I: shear flow under 500 N, and a nail's share of it."""
    row = ROWS["G7"]
    parts = part("upper", "wood", "100 mm", "20 mm") + part("web", "wood", "20 mm", "100 mm", 'under = "upper"')
    parts += part("lower", "wood", "100 mm", "20 mm", 'under = "web"')
    found = section(job(parts, {"wood": "10 GPa"}), "0.5 m")
    upper = found["parts"][0]
    mean = -(upper["stress_per_moment"]["top"] + upper["stress_per_moment"]["bottom"]) / 2 * upper["area"]
    I = found["transformed"]["I_y"]
    check(
        row,
        {"Q": mean * I / MM**3, "I": I / MM**4, "q": mean * 500, "F": mean * 500 * 0.025},
        {"Q": 120e3, "I": 16.2e6, "q": 500 * 120e-6 / 16.2e-6, "F": 12.5 * 120e-6 / 16.2e-6},
    )


def test_G9() -> None:
    """260 by 310 less 160 by 260: an I with flanges 25 and a web 100."""
    beam = (
        '[[part]]\nname = "beam"\nmaterial = "wood"\nshape = "I"\ndepth = "310 mm"\nwidth = "260 mm"\n'
        'flange = "25 mm"\nweb = "100 mm"\n'
    )
    found = section(job(beam, {"wood": "10 GPa"}), "0.5 m")["transformed"]["I_y"] / MM**4
    # printed 411e6, three digits: the value is 411.125e6
    half_a_digit(found, 411e6, ROWS["G9"], "value", digits=3)
    assert found == pytest.approx(260 * 310**3 / 12 - 160 * 260**3 / 12, rel=1e-9)
    assert found == pytest.approx(ROWS["G9"]["computed"]["value"], rel=2e-7)


def test_G17() -> None:
    """Plastic over elastic modulus; the thin tube with a wall of a hundredth of a per cent of its diameter."""
    row = ROWS["G17"]
    outlines = {
        "rect": 'shape = "rectangle"\nwidth = "70 mm"\ndepth = "120 mm"',
        "circ": 'shape = "circle"\ndiameter = "90 mm"',
        "tube": 'shape = "tube"\ndiameter = "1000 mm"\nwall = "0.1 mm"',
        "diamond": 'shape = "polygon"\npoints = [["0 mm", "-60 mm"], ["50 mm", "0 mm"], ["0 mm", "60 mm"], '
        '["-50 mm", "0 mm"]]',
    }
    closed = {"rect": 1.5, "circ": 16 / (3 * math.pi), "tube": 4 / math.pi, "diamond": 2.0}
    for name, outline in outlines.items():
        found = section(job(f'[[part]]\nname = "bar"\nmaterial = "m"\n{outline}\n', {"m": "1 GPa"}), "0.5 m")
        ratio = found["plastic"]["W_pl"] / found["transformed"]["W_top"]
        half_a_digit(ratio, row["value"][name], row, name, digits=4)
        # the wall of the tube is 1e-4 of its diameter thick
        assert ratio == pytest.approx(closed[name], rel=2e-4 if name == "tube" else 1e-9)
        assert found["plastic"]["M_pl"] is None


def test_G19() -> None:
    """Z of three rectangles; y to the right, so that the upper flange on the left makes EI_yz negative."""
    row = ROWS["G19"]
    parts = part("web", "m", "600 mm", "100 mm", 'position = ["0 mm", "0 mm"]')
    parts += part("left", "m", "100 mm", "300 mm", 'position = ["-250 mm", "200 mm"]')
    parts += part("right", "m", "100 mm", "300 mm", 'position = ["250 mm", "-200 mm"]')
    found = section(job(parts, {"m": "1 GPa"}), "0.5 m")
    mm4 = 1e9 * MM**4
    centre, radius = 4.25e9, (1.35e9**2 + 3e9**2) ** 0.5
    values = {
        "Ix": found["EI_y"] / mm4,
        "Iy": found["EI_z"] / mm4,
        "Ixy": found["EI_yz"] / mm4,
        "Imax": found["principal"]["EI_1"] / mm4,
        "Imin": found["principal"]["EI_2"] / mm4,
    }
    exact = {"Ix": 2.9e9, "Iy": 5.6e9, "Ixy": -3e9, "Imax": centre + radius, "Imin": centre - radius}
    check(row, values, exact)
    # theta -32.9 deg in the row's title: from its x axis (our y) to the axis of Imax or Imin
    angle = abs(found["principal"]["angle"]) * 180 / 3.141592653589793
    assert min(angle, 90 - angle) == pytest.approx(32.9, abs=0.05)


def test_G20() -> None:
    """Cross battens 45 by 45 of C14 at 400: EI per metre; k is the fourth root of the row's two printed stiffnesses."""
    row = ROWS["G20"]
    batten = '[[part]]\nname = "batten"\nmaterial = "C14"\nshape = "rectangle"\nwidth = "45 mm"\ndepth = "45 mm"\n'
    found = section(job(batten, {}), "0.5 m")["EI_y"] * 1000 / 400
    half_a_digit(found, row["value"]["EI"], row, "EI")
    assert found == pytest.approx(row["computed"]["EI"], rel=2e-7)
    k = (3.11e3 / 1.79e6) ** 0.25
    half_a_digit(k, row["value"]["k"], row, "k")
    assert k == pytest.approx(row["computed"]["k"], rel=2e-7)
