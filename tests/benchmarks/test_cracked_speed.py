"""Speed of cracked members against the targets; run with `pytest tests/benchmarks --benchmark-only -s`."""

from __future__ import annotations

from collections.abc import Callable

import pytest
from cracked_beams import everything, two_spans
from timing import best_of

from fishbelly.member.analysis import Analysis
from fishbelly.member.cracked_response import cracked_response

EN = "EN 1992-1-1"
TARGET = 0.150
"""A cracked beam over two spans is solved in this time [s]."""


@pytest.mark.parametrize("rule", [None, EN])
def test_two_cracked_spans(benchmark: Callable[[Callable[[], float]], float], rule: str | None) -> None:
    """Cracks and forces brought into agreement, from a sampled member on."""
    member = two_spans(6.5, 27e3)

    def solved() -> float:
        r = cracked_response(Analysis.of(member), everything(member), rule)
        assert r.convergence.status == "closed"
        return float(r.total.deflection[0].max())

    benchmark(solved)
    seconds = best_of(solved, 9)
    print(f"two cracked spans, {rule}: {1e3 * seconds:.0f} ms")
    assert seconds < TARGET
