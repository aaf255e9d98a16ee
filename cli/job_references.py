"""Names that a job gives, and places where it uses them: read before and apart from the tables themselves."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from fishbelly.member.draft import Reference


def _tables(data: dict[str, Any], kind: str) -> Iterator[tuple[int, dict[str, Any]]]:
    many = data.get(kind, [])
    if isinstance(many, list):
        yield from ((i, table) for i, table in enumerate(many) if isinstance(table, dict))


def given_names(data: dict[str, Any], materials: dict[str, str]) -> dict[str, tuple[str, ...]]:
    """Return every name given, by kind; parts keep their numbers, one without a name has an empty one.

    Parameters
    ----------
    data : dict
        The job as TOML has it.
    materials : dict
        Names of materials that parts may use.
    """
    parts = [""] * len(data["part"]) if isinstance(data.get("part"), list) else []
    for i, table in _tables(data, "part"):
        parts[i] = table["name"] if isinstance(table.get("name"), str) else ""
    names = {"part": tuple(parts), "material": tuple(materials)}
    for kind in ("station", "combination", "stage"):
        names[kind] = tuple(t["name"] for _, t in _tables(data, kind) if isinstance(t.get("name"), str))
    if not data.get("combination"):
        names["combination"] = ("all",)
    cases = [table.get("case", "load") for _, table in _tables(data, "load")]
    cases += [table.get("case", "settlement") for _, table in _tables(data, "support") if "sinks" in table]
    names["case"] = tuple(dict.fromkeys(case for case in cases if isinstance(case, str)))
    return names


def references(data: dict[str, Any]) -> list[Reference]:
    """Return every place that names something, materials apart."""
    return [ref for kind in _PLACES for i, table in _tables(data, kind) for ref in _of_table(kind, i, table)]


_PLACES: dict[str, tuple[tuple[str, str], ...]] = {
    "part": (
        *((key, "part") for key in ("under", "over", "left_of", "right_of", "centred_on", "of")),
        ("stage", "stage"),
        ("until", "stage"),
    ),
    "support": (("stage", "stage"), ("until", "stage")),
    "hinge": (("stage", "stage"), ("until", "stage")),
    "stage": (("cases", "case"), ("moduli", "material"), ("creep", "material")),
    "notch": (("of", "part"),),
    "haunch": (("of", "part"),),
    "opening": (("of", "part"),),
    "load": (("part", "part"), ("parts", "part")),
    "combination": (("factors", "case"), ("sustained", "case")),
    "limit": (("at", "station"), ("combination", "combination"), ("after", "stage"), ("stage", "stage")),
}
"""Keys that name something, by table, with the kind of thing."""


def _of_table(kind: str, i: int, table: dict[str, Any]) -> Iterator[Reference]:
    for key, what in _PLACES[kind]:
        value = table.get(key)
        path = (kind, i, key)
        if isinstance(value, str) and value.strip():
            yield Reference(path, what, value)
        elif isinstance(value, list):
            yield from (Reference((*path, k), what, name) for k, name in enumerate(value) if isinstance(name, str))
        elif isinstance(value, dict):
            yield from (Reference((*path, name), what, name) for name in value)
