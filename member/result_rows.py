"""Rows of the results as data: checks and stresses."""

from __future__ import annotations

from typing import Any

from fishbelly.member.checks import Check
from fishbelly.member.stresses import PartStress

Data = dict[str, Any]


def check_row(c: Check) -> Data:
    """Return one check."""
    data: Data = {
        "limit": c.limit,
        "span": c.span,
        "allowed": c.allowed,
        "found": c.found,
        "used": c.used,
        "ok": c.ok,
        "at": c.at,
        "kind": c.kind,
    }
    if c.part is not None:
        data |= {"part": c.part, "z": c.z}
    if c.source:
        data["source"] = c.source
    return data


def stress_row(s: PartStress) -> Data:
    """Return the extreme stresses of one part."""
    data: Data = {"part": s.part}
    for name, peak in (("max", s.highest), ("min", s.lowest)):
        data[name] = None if peak is None else {"value": peak.value, "at": peak.at, "z": peak.z}
    if s.shear is not None:
        data["shear"] = {"value": s.shear.value, "at": s.shear.at, "z": s.shear.z}
    return data
