"""Pattern loads where bearings may lift off: every arrangement has its own bearings, so each is solved by itself.

Responses of such a member do not add; the envelope is taken over whole results instead of over loads.
"""

from __future__ import annotations

from collections.abc import Sequence
from itertools import product
from typing import Any

import numpy as np

from fishbelly.member.analysis import Analysis, Combined, Share
from fishbelly.member.bearings import bearing
from fishbelly.member.faults import CannotCompute
from fishbelly.member.joints import merged_joints

Data = dict[str, Any]

MOST = 8
"""Pattern loads (one a span and case) of which every arrangement is solved, at most 2**8."""


def bearings_change(analysis: Analysis, combined: Combined) -> bool:
    """Whether a combination has loads that may be on or off, on bearings that may lift off."""
    return bool(combined.patterns) and any(s.only_up for s in analysis.member.supports)


def arrangements(analysis: Analysis, combined: Combined) -> list[Combined]:
    """Every arrangement of the pattern loads as a combination of its own, all of them on first.

    Raises
    ------
    CannotCompute
        When there are more than 2**8.
    """
    if len(combined.patterns) > MOST:
        raise CannotCompute(
            f"pattern loads with bearings that cannot pull: {len(combined.patterns)} loads may be on or off in "
            f"{combined.combination.name}, expected at most {MOST}"
        )
    found = []
    for on in product((True, False), repeat=len(combined.patterns)):
        off = np.zeros(len(analysis.atoms), dtype=bool)
        for mask, there in zip(combined.patterns, on, strict=True):
            if not there:
                off |= mask
        shares = tuple(Share(s.key, np.where(off, 0.0, s.factors)) for s in combined.shares)
        lifted = bearing(analysis, shares)
        total = analysis.superposed(shares, lifted, upto=combined.upto)
        found.append(Combined(combined.combination, shares, lifted, (), total, combined.upto))
    return found


def merged(results: Sequence[Data]) -> Data:
    """Put results of arrangements together: the first one's values, everyone's extremes, checks and envelope."""
    data = dict(results[0])
    data["deflection"] = {
        "down": _most([r["deflection"]["down"] for r in results]),
        "up": _most([r["deflection"]["up"] for r in results]),
        "across": _most([r["deflection"]["across"] for r in results], size=True),
    }
    for name, keys in (("moment", ("sagging", "hogging")), ("shear", ("max", "min"))):
        data[name] = {k: _most([r[name][k] for r in results], sign=s) for k, s in zip(keys, (1.0, -1.0), strict=True)}
    data["spans"] = _spans(results)
    data["checks"] = [
        max((c for r in results for c in r["checks"] if c["limit"] == limit), key=lambda c: c["used"])
        for limit in dict.fromkeys(c["limit"] for r in results for c in r["checks"])
    ]
    data["stress"] = [_stress([r["stress"][k] for r in results]) for k in range(len(data["stress"]))]
    data["joints"] = merged_joints([r["joints"] for r in results])
    data["envelope"] = {
        "stations": _envelope([r["stations"] for r in results], ("x",), _STATION),
        "supports": _envelope([r["supports"] for r in results], ("name", "at"), _SUPPORT),
    }
    lifted = sorted({name for r in results for name in r.get("lifted", ())})
    return data | ({"lifted": lifted} if lifted else {})


_STATION = ("M", "V", "N", "deflection", "across", "rotation")
_SUPPORT = ("vertical", "along", "moment", "across")


def _most(entries: Sequence[Data | None], sign: float = 1.0, size: bool = False) -> Data | None:
    known = [e for e in entries if e is not None]
    return max(known, key=lambda e: abs(e["value"]) if size else sign * e["value"]) if known else None


def _spans(results: Sequence[Data]) -> list[Data]:
    """Largest deflection of every span, those that a lifted bearing merges beside the ones it ends."""
    found: dict[tuple[float, float], Data] = {}
    for span in (s for r in results for s in r["spans"]):
        key = span["from"], span["to"]
        if key not in found or abs(span["deflection"]) > abs(found[key]["deflection"]):
            found[key] = span
    return [found[key] for key in sorted(found)]


def _stress(entries: Sequence[Data]) -> Data:
    data = dict(entries[0])
    data["max"] = _most([e["max"] for e in entries])
    data["min"] = _most([e["min"] for e in entries], sign=-1.0)
    if "shear" in data:
        data["shear"] = _most([e["shear"] for e in entries])
    return data


def _envelope(tables: Sequence[Sequence[Data]], heads: Sequence[str], keys: Sequence[str]) -> list[Data]:
    """Smallest and largest value of every row of the first table.

    A place has two rows where something jumps; in an arrangement where it does not, its one row stands for both.
    """
    place = heads[-1]
    found = [[row for row in table] for table in tables]
    by_place = [{x: [r for r in rows if r[place] == x] for x in {r[place] for r in rows}} for rows in found]
    rows, seen = [], dict[float, int]()
    for first in tables[0]:
        k = seen[first[place]] = seen.get(first[place], -1) + 1
        same = [table[first[place]][min(k, len(table[first[place]]) - 1)] for table in by_place]
        row = {h: first[h] for h in heads}
        for key in keys:
            values = [r[key] for r in same if r[key] is not None]
            row[key] = {"min": min(values), "max": max(values)} if values else {"min": None, "max": None}
        rows.append(row)
    return rows
