"""Speed of shear stiffness against the targets; run with `pytest tests/benchmarks --benchmark-only -s`."""

from __future__ import annotations

import time
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest
from common import INF, STEEL, fixed, part, uniform
from flexure_shapes import CONCRETE, Moduli, columns, make, plate
from flexure_shapes import STEEL as STEEL_MODULI
from test_flexure_reference import BOX_BOXES, I_BOXES, Box, drawn, on_grid
from timing import COMMAND, best_of, process

from fishbelly.member.description import Haunch, Member, Placing
from fishbelly.member.results import deflect
from fishbelly.sections.composition import Composition
from fishbelly.sections.flexure import flexure
from fishbelly.sections.flexure_stress import shear_fields

SIX = [*I_BOXES, (-0.6, 0.6, 0.3, 0.48), (-0.05, 0.05, -0.01, 0.0), (-0.1, 0.1, -0.03, -0.01)]
CASES: dict[str, tuple[list[Box], Moduli]] = {
    "I": (I_BOXES, (STEEL_MODULI,) * 3),
    "box": (BOX_BOXES, (STEEL_MODULI,) * 4),
    "slab on steel": (SIX[:4], (*(STEEL_MODULI,) * 3, CONCRETE)),
    "six parts": (SIX, (*(STEEL_MODULI,) * 3, CONCRETE, STEEL_MODULI, STEEL_MODULI)),
}


@pytest.mark.parametrize("name", CASES)
def test_shear_stiffness_beside_quadratic_elements(benchmark: object, name: str) -> None:
    """The same error by quadratic elements of scikit-fem on a grid graded to every corner."""
    boxes, moduli = CASES[name]
    section, (E, G) = Composition(drawn(boxes)), columns(moduli)
    settled = flexure(section, E, G, degree=14).F_zz[0]
    solve = lambda: flexure(section, E, G)  # noqa: E731
    error = abs(benchmark(solve).F_zz[0] / settled - 1.0)
    ours = best_of(solve, 20)
    flow = best_of(lambda: list(shear_fields(section, E, G)), 5)
    theirs, reached = np.inf, np.inf
    for cuts in (1, 2, 3):
        reached = abs(on_grid(boxes, moduli, cuts)[0] / settled - 1.0)
        theirs = best_of(lambda cuts=cuts: on_grid(boxes, moduli, cuts), 2)
        if reached <= error:
            break
    print(
        f"\n{name}: GA along both axes in {ours * 1e3:.1f} ms, error {error:.0e} (stresses {flow * 1e3:.1f} ms); "
        f"quadratic elements {theirs * 1e3:.0f} ms, error {reached:.0e}: {theirs / ours:.0f} times (target 10 ms)"
    )
    # the target is printed above; machines differ, and what is asserted is that the opponent is beaten by far
    assert theirs / ours > 10.0


def test_row_of_ten_bars(benchmark: object) -> None:
    row = make("bars", 0.0, -0.2, count=10, diameter=0.016, spacing=0.055)
    section, (E, G) = Composition((plate(0.6, 0.5), row)), columns((CONCRETE, STEEL_MODULI))
    benchmark(lambda: flexure(section, E, G))
    print(f"\nten bars in concrete: {best_of(lambda: flexure(section, E, G), 10) * 1e3:.0f} ms (target 30 ms)")


def plated_haunch() -> Member:
    """A rolled beam with a haunch at each end and a plate under its middle."""
    sizes = {"web": 0.0075, "top_width": 0.16, "bottom_width": 0.16, "top_flange": 0.0115, "bottom_flange": 0.0115}
    beam = part("beam", "I", 10.0, depth=0.33, radius=0.018, **sizes)
    under = part("plate", "rectangle", 6.5, start=3.5, width=0.14, depth=0.012, place=Placing("under", "beam"))
    haunches = (Haunch("beam", 0.0, 0.3, (0.0, 1.6)), Haunch("beam", 10.0, 0.3, (1.6, 0.0)))
    supports = (fixed("A", 0.0, along=INF), fixed("B", 10.0))
    return Member(10.0, (beam, under), (STEEL,), haunches=haunches, supports=supports, loads=(uniform(1e4, 10.0),))


def test_shear_along_a_plated_haunch(benchmark: object) -> None:
    member = plated_haunch()
    benchmark(lambda: deflect(member, [5.0]))
    with_shear, without = (best_of(lambda m=m: deflect(m, [5.0]), 5) for m in (member, replace(member, shear=False)))
    print(f"\nplated haunch: shear along it adds {(with_shear - without) * 1e3:.0f} ms to {without * 1e3:.0f} ms")
    assert with_shear - without < 0.2


JOB = """
length = "6 m"
[[part]]
name = "beam"
material = "S275"
size = "IPE 300"
[[part]]
name = "slab"
material = "C30/37"
shape = "rectangle"
width = "1.2 m"
depth = "140 mm"
over = "beam"
[[support]]
at = "0 m"
kind = "pin"
[[support]]
at = "6 m"
kind = "roller"
[[load]]
kind = "uniform"
value = "12 kN/m"
"""


def test_whole_process_with_shear(benchmark: object, tmp_path: Path) -> None:
    """Start to end of `deflect` with a section that needs elements, beside one that does not and the bare imports."""
    (tmp_path / "job.toml").write_text(JOB, encoding="utf-8")
    (tmp_path / "plain.toml").write_text("shear = false\n" + JOB, encoding="utf-8")
    started = time.perf_counter()
    ours, plain = (process([*COMMAND, "deflect", f], tmp_path) for f in ("job.toml", "plain.toml"))
    bare = process([COMMAND[0], "-c", "import numpy, shapely, click, pydantic, pint"], tmp_path)
    benchmark.pedantic(lambda: process([*COMMAND, "deflect", "job.toml"], tmp_path), rounds=1)
    print(
        f"\nwith shear {ours * 1e3:.0f} ms, without {plain * 1e3:.0f} ms, bare imports {bare * 1e3:.0f} ms: "
        f"{ours / bare:.2f} times (took {time.perf_counter() - started:.0f} s)"
    )
    # start-up is the business of `test_whole_process`; here is what elements add to it
    assert ours <= 1.4 * plain
