"""Outlines: do their dimensions make sense everywhere along the part."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.breakpoints import distinct
from fishbelly.member.description import Part, Shape
from fishbelly.member.draft import Draft, Path, Problem, one_of
from fishbelly.member.laws import Law
from fishbelly.sections.outlines import OUTLINES, Outline, polygon

Array = NDArray[np.float64]
Values = Mapping[str, Array]

DIMENSIONS: dict[str, tuple[str, ...]] = {
    "rectangle": ("width", "depth"),
    "circle": ("diameter",),
    "tube": ("diameter", "wall"),
    "box": ("width", "depth", "web", "flange", "radius", "inner_radius"),
    "I": ("depth", "web", "top_width", "top_flange", "bottom_width", "bottom_flange", "radius"),
    "tee": ("depth", "width", "web", "flange", "radius"),
    "channel": ("depth", "width", "web", "flange", "radius", "toe_radius", "slope", "flange_at"),
    "angle": ("depth", "width", "web", "flange", "radius", "toe_radius"),
    "trapezoid": ("top_width", "bottom_width", "depth"),
    "regular polygon": ("sides", "across_flats", "wall"),
    "polygon": (),
    "bars": ("count", "diameter", "spacing"),
}
"""Dimensions that each outline has to have."""

_MAY_BE_ZERO = {"radius", "inner_radius", "toe_radius", "slope", "flange_at", "spacing"}
_OVERALL = {"width", "depth", "diameter", "across_flats", "top_width", "bottom_width"}
Rule = tuple[str, Callable[[Values], Array], str, bool]


def _narrow(d: Values) -> Array:
    return np.minimum(d["top_width"], d["bottom_width"])


def _clear(d: Values) -> Array:
    return d["depth"] - d["top_flange"] - d["bottom_flange"]


RULES: dict[str, tuple[Rule, ...]] = {
    "tube": (("wall", lambda d: d["diameter"] - 2.0 * d["wall"], "a wall of less than half the diameter", True),),
    "box": (
        ("web", lambda d: d["width"] - 2.0 * d["web"], "a wall of less than half the width", True),
        ("flange", lambda d: d["depth"] - 2.0 * d["flange"], "a wall of less than half the depth", True),
        (
            "radius",
            lambda d: np.minimum(d["width"], d["depth"]) - 2.0 * d["radius"],
            "a radius of at most half the width and the depth",
            False,
        ),
        (
            "inner_radius",
            lambda d: np.minimum(d["width"] - 2.0 * d["web"], d["depth"] - 2.0 * d["flange"]) - 2.0 * d["inner_radius"],
            "a radius of at most half the clear width and depth",
            False,
        ),
    ),
    "I": (
        ("web", lambda d: _narrow(d) - d["web"], "a web no thicker than the flanges are wide", False),
        ("top_flange", _clear, "flanges that together are no thicker than the depth", False),
        (
            "radius",
            lambda d: _narrow(d) - d["web"] - 2.0 * d["radius"],
            "a radius that fits beside the web",
            False,
        ),
        ("radius", lambda d: _clear(d) - 2.0 * d["radius"], "a radius that fits between the flanges", False),
    ),
    "tee": (
        ("web", lambda d: d["width"] - d["web"], "a web no thicker than the flange is wide", False),
        ("flange", lambda d: d["depth"] - d["flange"], "a flange no thicker than the depth", False),
        (
            "radius",
            lambda d: d["width"] - d["web"] - 2.0 * d["radius"],
            "a radius that fits beside the web",
            False,
        ),
        (
            "radius",
            lambda d: d["depth"] - d["flange"] - d["radius"],
            "a radius that fits under the flange",
            False,
        ),
    ),
    "channel": (
        ("web", lambda d: d["width"] - d["web"], "a web thinner than the channel is wide", True),
        ("flange", lambda d: d["depth"] - 2.0 * d["flange"], "flanges of less than half the depth", True),
        ("radius", lambda d: d["width"] - d["web"] - d["radius"], "a radius that fits beside the web", False),
        (
            "radius",
            lambda d: d["depth"] - 2.0 * (d["flange"] + d["radius"]),
            "a radius that fits between the flanges",
            False,
        ),
        (
            "toe_radius",
            lambda d: d["flange"] - d["toe_radius"],
            "a radius of at most the flange's thickness",
            False,
        ),
    ),
    "angle": (
        ("web", lambda d: d["width"] - d["web"], "a leg thinner than the angle is wide", True),
        ("flange", lambda d: d["depth"] - d["flange"], "a leg thinner than the angle is deep", True),
        ("radius", lambda d: d["width"] - d["web"] - d["radius"], "a radius that fits on the leg", False),
        ("radius", lambda d: d["depth"] - d["flange"] - d["radius"], "a radius that fits on the leg", False),
        (
            "toe_radius",
            lambda d: np.minimum(d["web"], d["flange"]) - d["toe_radius"],
            "a radius of at most the leg's thickness",
            False,
        ),
    ),
    "trapezoid": (
        ("top_width", lambda d: d["top_width"] + d["bottom_width"], "one of the two widths above 0 m", True),
    ),
    "regular polygon": (
        (
            "wall",
            lambda d: d["across_flats"] - 2.0 * d["wall"],
            "a wall of less than half of across_flats",
            True,
        ),
    ),
    "bars": (
        (
            "spacing",
            lambda d: np.where(d["count"] > 1.0, d["spacing"] - d["diameter"], 0.0),
            "a spacing of at least the diameter",
            False,
        ),
    ),
}
"""What must be above zero (True: strictly) of the dimensions, whose key it is, and in words."""


def shape_problems(draft: Draft) -> Iterator[Problem]:
    """Find dimensions that cannot be, anywhere along each part."""
    for i, part in enumerate(draft.parts):
        if part is not None and part.start < part.end:
            yield from _part(part, ("part", i))


def _part(part: Part, path: Path) -> Iterator[Problem]:
    shape = part.shape
    if shape.kind not in DIMENSIONS:
        yield from one_of(shape.kind, tuple(DIMENSIONS), (*path, "shape"))
        return
    if shape.kind == "polygon":
        yield from _polygon(shape, path)
        return
    missing = [key for key in DIMENSIONS[shape.kind] if key not in shape.dimensions]
    yield from (Problem((*path, key), f"a dimension of the {shape.kind}", "") for key in missing)
    if missing:
        return
    sound = True
    for key, law in shape.dimensions.items():
        for problem in _dimension(part, key, law, (*path, key)):
            sound = False
            yield problem
    if sound:
        yield from _rules(part, path)


def _dimension(part: Part, key: str, law: Law, path: Path) -> Iterator[Problem]:
    if key in ("sides", "count"):
        least = 3 if key == "sides" else 1
        if not law.is_constant or law.value < least or law.value != round(law.value):
            yield Problem(path, f"a whole number of at least {least}", f"{law.value:g}")
        return
    lowest, _ = law.extremes(part.start, part.end)
    may_be_zero = (
        key in _MAY_BE_ZERO
        or part.shape.kind == "trapezoid"
        or (key == "wall" and part.shape.kind == "regular polygon")
    )
    if lowest > 0.0 or (lowest == 0.0 and may_be_zero):
        return
    if lowest == 0.0 and key in _OVERALL and not law.is_constant:
        inset = 1e-9 * (part.end - part.start)
        if law.extremes(part.start + inset, part.end - inset)[0] > 0.0:
            return  # a taper that runs to a point
    bound = "of 0 m or more" if may_be_zero else "above 0 m"
    yield Problem(path, f"a length {bound} all along the part", f"{lowest:.6g} m")


def _rules(part: Part, path: Path) -> Iterator[Problem]:
    if part.shape.kind not in RULES:
        return
    values, x = samples(part.shape.dimensions, part.start, part.end)
    size = max(float(np.max(np.abs(v))) for k, v in values.items() if k not in ("sides", "count", "slope"))
    for key, left, words, strict in RULES[part.shape.kind]:
        spare = left(values)
        worst = int(np.argmin(spare))
        if spare[worst] < -1e-9 * size or (strict and spare[worst] <= 0.0):
            if x[worst] in (part.start, part.end) and strict and spare[worst] == 0.0 and key == "top_width":
                continue  # a trapezoid that tapers to a point
            value = values[key][worst]
            if value == 0.0 and key in _MAY_BE_ZERO:
                continue  # no radius, no fault of the radius
            along = (
                "" if all(law.is_constant for law in part.shape.dimensions.values()) else f" at x = {x[worst]:.6g} m"
            )
            yield Problem((*path, key), words, f"{value:.6g} m{along}")


def _polygon(shape: Shape, path: Path) -> Iterator[Problem]:
    for key, loops in (("points", (shape.points,)), ("holes", shape.holes)):
        for loop in loops:
            corners = np.array(loop, dtype=float).reshape(-1, 2)
            y, z = corners[:, 0], corners[:, 1]
            if len(corners) < 3:
                yield Problem((*path, key), "at least three points", f"{len(corners)}")
            elif abs(np.sum(y * np.roll(z, -1) - np.roll(y, -1) * z)) <= 1e-12 * np.ptp(corners, axis=0).sum() ** 2:
                yield Problem((*path, key), "points that enclose an area", "points on one line")


def samples(laws: Mapping[str, Law], start: float, end: float) -> tuple[dict[str, Array], Array]:
    """Return values of laws at the ends and inside of every piece between two places, and where these are.

    Both one-sided values at a step are among them.
    """
    knots = np.concatenate([[start, end], *(law.knots for law in laws.values())])
    knots = distinct(knots[(knots >= start) & (knots <= end)])
    inner = (knots[:-1, None] + np.diff(knots)[:, None] * np.array([0.25, 0.5, 0.75])).ravel()
    right = np.concatenate((knots[:-1], inner))
    values = {k: np.concatenate((law(right), law(knots[1:], "left"))) for k, law in laws.items()}
    return values, np.concatenate((right, knots[1:]))


def outline_sizes(
    part: Part, start: float, end: float, extra: Mapping[str, Law]
) -> tuple[Array, Array, dict[str, Array], Array]:
    """Width and depth of a part's bounding box between two places, other laws there, and the places."""
    dimensions = dict(part.shape.dimensions)
    values, x = samples({**{f"extra {k}": v for k, v in extra.items()}, **dimensions}, start, end)
    shape = {k: values[k] for k in dimensions}
    if part.shape.kind == "polygon":
        outline: Outline = polygon(part.shape.points, part.shape.holes, x.size)
    else:
        with np.errstate(divide="ignore", invalid="ignore"):
            outline = OUTLINES[part.shape.kind](shape)
    left, bottom, right, top = outline.turned(part.turn).bounds()
    others = {k: values[f"extra {k}"] for k in extra}
    return right - left, top - bottom, others, x
