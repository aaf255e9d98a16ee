"""How a part is joined to what it is placed against: the key `joined` of a part."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from fishbelly.cli.faults import as_written, suggest
from fishbelly.cli.job_types import Count, Factor, Ill, Many, Quantity, Reader, ValueFault, gather
from fishbelly.cli.quantities import Kind
from fishbelly.member.fixings import Joined

_SLIPS = ("stiffness", "per_length")

_READERS: dict[str, Reader] = {
    "pitch": Quantity(Kind.LENGTH, "above zero"),
    "rows": Count(1),
    "stiffness": Quantity(Kind.STIFFNESS, "above zero"),
    "per_length": Quantity(Kind.JOINT_STIFFNESS, "above zero"),
    "creep": Factor("a creep factor", at_least=0.0),
    "band": Many(Reader(), "a pair [low, high] of stiffnesses", count=2),
    "capacity": Quantity(Kind.FORCE, "above zero"),
    "weld": Quantity(Kind.FORCE_PER_LENGTH, "above zero"),
}
"""Readers of the keys of `joined`; those of `band` are of the stiffness that is given."""

_WORDS = {
    "pitch": "distance between fasteners of a row along the member",
    "rows": "rows of fasteners side by side; default 1",
    "stiffness": "slip modulus of one fastener",
    "per_length": "slip stiffness of the joint per length",
    "creep": "creep factor of the stiffness; default from the creep of the two parts",
    "band": "lowest and highest stiffness, of the kind given",
    "capacity": "force that one fastener can carry: gives the number needed at the ends and the largest pitch",
    "weld": "force per length that the joint can carry: gives the length needed at the ends",
}


class JoinedReader(Reader):
    """``"apart"``, or a table of fasteners, stiffness or weld."""

    words = '"apart", or a table such as { pitch = "150 mm", rows = 2 }'
    schema = {
        "anyOf": [
            {"const": "apart"},
            {
                "type": "object",
                "properties": {
                    key: ({"type": "array", "items": {"type": "string"}, "minItems": 2, "maxItems": 2}
                          if key == "band" else {k: v for k, v in reader.schema.items() if k != "description"})
                    | {"description": _WORDS[key]}
                    for key, reader in _READERS.items()
                },
                "additionalProperties": False,
                "minProperties": 1,
            },
        ]
    }  # fmt: skip

    def read(self, value: Any) -> Joined:
        """Read the joint; every key that is wrong is told."""
        if value == "apart":
            return Joined(apart=True)
        if not isinstance(value, dict) or not value:
            raise ValueFault(Ill((), self.words, as_written(value)))
        return _read(value)


def _read(table: Mapping[str, Any]) -> Joined:
    ills: list[Ill] = []
    values: dict[str, Any] = {}
    for key, given in table.items():
        reader = _READERS.get(key)
        if reader is None:
            ills.append(Ill((key,), "", f'unknown key "{key}"', suggest(key, tuple(_READERS))))
            continue
        try:
            values[key] = _band(table, given) if key == "band" else reader.read(given)
        except ValueFault as fault:
            ills += [i.below(key) for i in fault.ills]
    ills += [ill for ill in _clashes(table) if not any(ill.path == other.path for other in ills)]
    if ills:
        raise ValueFault(*ills)
    return Joined(**values)


def _band(table: Mapping[str, Any], given: Any) -> tuple[float, float]:
    kind = Kind.STIFFNESS if "stiffness" in table else Kind.JOINT_STIFFNESS
    if not isinstance(given, list) or len(given) != 2:
        raise ValueFault(Ill((), _READERS["band"].words, as_written(given)))
    low, high = gather(given, Quantity(kind, "above zero").read)
    if low > high:
        raise ValueFault(Ill((), "a pair [low, high] with the lower one first", as_written(given)))
    return low, high


def _clashes(table: Mapping[str, Any]) -> Iterator[Ill]:
    """Find keys that need another, or exclude it."""
    slips = [key for key in _SLIPS if key in table]
    if len(slips) > 1:
        yield Ill(("per_length",), "only one of `stiffness` and `per_length`", "also `stiffness`")
    if "weld" in table and "pitch" in table:
        yield Ill(("weld",), "either fasteners with a `pitch` or a `weld`", "both")
    for key in ("stiffness", "rows", "capacity"):
        if key in table and "pitch" not in table:
            yield Ill((key,), "", f"`{key}` needs the `pitch` of the fasteners")
    for key in ("creep", "band"):
        if key in table and not slips:
            yield Ill((key,), "", f"`{key}` is that of a `stiffness` or a `per_length`, and there is none")
