"""Which combination, and which cross-section of it, a figure shows."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from fishbelly.cli.figures.stress_depth import Bar
from fishbelly.member.analysis import Analysis
from fishbelly.member.stress_depth import stress_over_depth

_VISIBLE = 2e-3
"""Share of the largest deflection that can be seen in a figure."""
_STRENGTH = ("tension", "compression", "shear")


def governing_combination(combinations: Sequence[Mapping[str, Any]]) -> int:
    """Number of the combination whose checks are used most; without checks, that with the largest deflection."""
    used = [max((c["used"] for c in combination["checks"]), default=-1.0) for combination in combinations]
    if max(used) >= 0.0:
        return used.index(max(used))
    sizes = [_largest(c) for c in combinations]
    return sizes.index(max(sizes))


def _largest(combination: Mapping[str, Any]) -> float:
    return max((abs(e["value"]) for e in combination["deflection"].values() if e is not None), default=0.0)


def bends_sideways(combination: Mapping[str, Any]) -> bool:
    """Whether the deflection across is worth drawing beside the others."""
    across = combination["deflection"]["across"]
    return across is not None and abs(across["value"]) > _VISIBLE * _largest(combination)


def governing_place(combination: Mapping[str, Any]) -> tuple[float, str]:
    """Place of the strength that is used most [m] and why it was chosen; without one, that of the largest moment."""
    strong = [c for c in combination["checks"] if c.get("kind") in _STRENGTH and c.get("at") is not None]
    if strong:
        worst = max(strong, key=lambda c: c["used"])
        return float(worst["at"]), str(worst["limit"])
    peaks = [s[end] for s in combination["stress"] for end in ("max", "min") if s[end] is not None]
    if bends_sideways(combination) and peaks:
        return float(max(peaks, key=lambda p: abs(p["value"]))["at"]), "largest stress"
    moments = [m for m in combination["moment"].values() if m is not None]
    if not moments:
        return float(combination["shear"]["max"]["at"]), "largest shear"
    return float(max(moments, key=lambda m: abs(m["value"]))["at"]), "largest moment"


def stress_bars(
    analysis: Analysis, combination: Mapping[str, Any], x: float, stage: str | None = None
) -> tuple[str, list[Bar]]:
    """Stress over the depth at x, from the side of a break on which it is larger; no bars where it is round-off."""
    peaks = [abs(s[end]["value"]) for s in combination["stress"] for end in ("max", "min") if s[end] is not None]
    found = {}
    for side in ("right", "left"):
        lines = stress_over_depth(analysis, str(combination["name"]), x, side, stage)
        found[side] = [
            Bar(v.part, (float(v.z[0]), float(v.z[1])), (float(v.stress[0]), float(v.stress[1]))) for v in lines
        ]
    size = {side: max((abs(v) for b in bars for v in b.stress), default=0.0) for side, bars in found.items()}
    side = "left" if size["left"] > size["right"] * (1.0 + 1e-9) else "right"
    return side, found[side] if size[side] > 1e-9 * max(peaks, default=0.0) else []
