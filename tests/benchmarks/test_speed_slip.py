"""Speed of parts that slip against its target; run with `pytest tests/benchmarks --benchmark-only -s`.

Both sides are timed one after the other in one run, the best of several.
"""

from __future__ import annotations

import math
import time
from collections.abc import Callable

import numpy as np
from common import pin, roller, uniform
from slip_members import JOIST, SLAB, piece

from fishbelly.member.analysis import Analysis
from fishbelly.member.description import Joined, Member, Placing
from fishbelly.member.extremes import values_at
from fishbelly.member.results import deflect

SPANS = (0.0, 4.0, 9.0, 13.0)
DEPTHS, WIDTHS, E = (0.15, 0.05, 0.06, 0.04), (0.05, 0.3, 0.1, 0.2), (8e9, 12e9, 8e9, 12e9)
K = (2e7, 5e6, 1e7)
Q, AT = 2e3, 6.5
TARGET, ERROR = 60e-3, 1e-8


def stack() -> Member:
    """Four layers on each other over three spans."""
    names, kinds = ("one", "two", "three", "four"), ("joist", "slab", "joist", "slab")
    parts = [piece("one", "joist", WIDTHS[0], DEPTHS[0], 0.0, SPANS[-1])]
    for i in (1, 2, 3):
        place, joint = Placing("over", names[i - 1]), Joined(per_length=K[i - 1])
        parts.append(piece(names[i], kinds[i], WIDTHS[i], DEPTHS[i], 0.0, SPANS[-1], place=place, joined=joint))
    supports = (pin("A", 0.0), *(roller(f"B{x:g}", x) for x in SPANS[1:]))
    loads = (uniform(Q, SPANS[-1]),)
    return Member(SPANS[-1], tuple(parts), (SLAB, JOIST), supports=supports, loads=loads, shear=False)


def by_boundary_values(tolerance: float) -> tuple[float, float]:
    """Deflection at a place by scipy's solver, one system of ten for every span, and its time [s]."""
    from scipy.integrate import solve_bvp

    depth, width, modulus, k = (np.array(v) for v in (DEPTHS, WIDTHS, E, K))
    EA, EI = modulus * width * depth, float((modulus * width * depth**3).sum() / 12)
    top = np.concatenate(([0.0], np.cumsum(depth[1:])))
    level = top - depth / 2
    a, h = np.array(SPANS[:-1]), np.diff(SPANS)
    # w, rotation, M, V, three slips, three forces beyond the joints
    scale = np.array([1e-3, 1e-3, 1e3, 1e3, *[1e-4] * 3, *[1e4] * 3])

    def right(s: np.ndarray, y: np.ndarray) -> np.ndarray:
        full = y.reshape(3, 10, -1) * scale[:, None]
        w, turn, M, V = (full[:, i] for i in range(4))
        slip, force = full[:, 4:7], full[:, 7:]
        none = np.zeros((3, 1, w.shape[-1]))
        N = np.concatenate((none, force), axis=1) - np.concatenate((force, none), axis=1)
        curved = (M + np.einsum("l,slx->sx", level, N)) / EI
        strain = N / EA[:, None] + level[:, None] * curved[:, None]
        found = (turn, -curved, V, np.full_like(w, -Q))
        d = np.concatenate((np.stack(found, axis=1), np.diff(strain, axis=1), k[:, None] * slip), axis=1)
        return (d / scale[:, None] * h[:, None, None]).reshape(30, -1)

    def ends(ya: np.ndarray, yb: np.ndarray) -> np.ndarray:
        ya, yb = ya.reshape(3, 10), yb.reshape(3, 10)
        outer = [v for y in (ya[0], yb[-1]) for v in (y[0], y[2], *y[7:])]
        inner = [v for i in (0, 1) for v in (yb[i][0], ya[i + 1][0], *(yb[i] - ya[i + 1])[[1, 2, *range(4, 10)]])]
        return np.array([*outer, *inner])

    start = time.perf_counter()
    mesh = np.linspace(0.0, 1.0, 9)
    found = solve_bvp(right, ends, mesh, np.zeros((30, 9)), tol=tolerance, max_nodes=4_000)
    spent = time.perf_counter() - start
    return float(found.sol((AT - a[1]) / h[1]).reshape(3, 10)[1, 0] * scale[0]), spent


def best_of(call: Callable[[], object], count: int) -> float:
    times = []
    for _ in range(count):
        start = time.perf_counter()
        call()
        times.append(time.perf_counter() - start)
    return min(times)


def test_four_layers_over_three_spans(benchmark: Callable[[Callable[[], Analysis]], Analysis]) -> None:
    member = stack()

    def solve() -> Analysis:
        analysis = Analysis.of(member)
        analysis.combine(member.combinations[0])
        return analysis

    analysis = benchmark(solve)
    ours = best_of(solve, 10)
    total = analysis.combine(member.combinations[0]).total
    found = float(values_at(analysis.profile.panels, total.deflection[0], np.array([AT]))[0])
    theirs, apart = math.inf, math.inf
    for tolerance in 10.0 ** -np.arange(3.0, 9.0):
        apart = abs(by_boundary_values(tolerance)[0] / found - 1.0)
        if apart <= ERROR:
            theirs = min(by_boundary_values(tolerance)[1] for _ in range(3))
            break
    whole = best_of(lambda: deflect(member, [AT]), 3)
    print(
        f"\nslip, 4 layers over 3 spans: {ours * 1e3:.1f} ms here (apart by {apart:.1e}, target "
        f"{TARGET * 1e3:.0f} ms at {ERROR:.0e}); {theirs * 1e3:.0f} ms by boundary values at that error: "
        f"{theirs / ours:.1f} times; all results with bounds and second method {whole * 1e3:.0f} ms"
    )
    # two ways that share nothing come so near to each other: neither is further from the truth
    assert apart <= ERROR
    assert ours <= TARGET
