"""Bending stiffness EI(x) of a member whose cross-section changes or mixes materials; what it deflects."""

from __future__ import annotations

from typing import Any

__version__ = "0.1.0"

_FROM = {
    "fishbelly.member.description": (
        "Combination",
        "Haunch",
        "Hinge",
        "Limit",
        "Material",
        "Member",
        "Notch",
        "Opening",
        "Part",
        "Placing",
        "Shape",
        "Station",
        "Strength",
        "Support",
    ),
    "fishbelly.member.laws": ("Law", "constant", "parabola", "steps", "straight"),
    "fishbelly.member.loads": (
        "Axial",
        "Couple",
        "Distributed",
        "Point",
        "Prestress",
        "SelfWeight",
        "Shrinkage",
        "Temperature",
    ),
    "fishbelly.member.shorthand": ("fixed", "over", "pin", "rectangle", "roller", "under", "uniform"),
    "fishbelly.member.solved": ("envelope", "solve"),
    "fishbelly.member.results": ("deflect",),
    "fishbelly.member.section_results": ("section_at", "stiffness"),
}
"""Public names by the module that holds them; a module is imported when one of its names is first asked for."""

__all__ = ["__version__", *sorted(name for names in _FROM.values() for name in names)]


def __getattr__(name: str) -> Any:
    """Import a public name when it is first asked for, so that the command line starts fast."""
    from importlib import import_module

    for module, names in _FROM.items():
        if name in names:
            return getattr(import_module(module), name)
    raise AttributeError(f"module {__name__!r} has no attribute {name!r}")


def __dir__() -> list[str]:
    return __all__
