"""Which stations of a member a table for people lists, and what there is at each of them."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import Any

Row = Mapping[str, Any]

EVEN = 100
"""Equal pieces that the default stations cut the member into; what lies elsewhere is a break."""
WANTED = 20
"""Rows of a table that even stations may fill up."""
MOST = 40
"""Rows of a table, however much there is to list."""
_TINY = 1e-9
_FILLS = (10, 5, 4, 2)


def sides(rows: Sequence[Row]) -> list[str]:
    """Say "left" and "right" where a place is listed twice, else nothing."""
    said = []
    for k, row in enumerate(rows):
        before = k > 0 and rows[k - 1]["x"] == row["x"]
        after = k + 1 < len(rows) and rows[k + 1]["x"] == row["x"]
        said.append("right" if before else ("left" if after else ""))
    return said


def names(rows: Sequence[Row], supports: Iterable[Row] = ()) -> list[str]:
    """Say at every station what it is called, and the supports there.

    Parameters
    ----------
    rows : sequence of mapping
        Stations with `x` and, where they have one, `name`.
    supports : iterable of mapping
        Supports with `name` and `at`.
    """
    held = list(supports)
    tiny = _TINY * (rows[-1]["x"] if rows else 1.0)
    said = []
    for row in rows:
        there = [row.get("name")] + [s["name"] for s in held if abs(s["at"] - row["x"]) <= tiny]
        said.append(", ".join(dict.fromkeys(n for n in there if n)))
    return said


def chosen(rows: Sequence[Row], first: Iterable[float], second: Iterable[float] = ()) -> list[int]:
    """Choose stations that people want to see.

    Parameters
    ----------
    rows : sequence of mapping
        Stations in order of `x`.
    first : iterable of float
        Places that are listed while there is room for `MOST`: the nearest station of each [m].
    second : iterable of float
        Places that are listed after these, likewise [m].

    Returns
    -------
    list of int
        Rows in order: ends, the places given, breaks, then even ones while the table stays within `WANTED`.
    """
    if len(rows) <= WANTED:
        return list(range(len(rows)))
    length = rows[-1]["x"]
    keep = {0, len(rows) - 1}
    for place in first:
        _add(keep, rows, place, MOST)
    for place in [*second, *breaks(rows)]:
        _add(keep, rows, place, MOST)
    for pieces in _FILLS:
        even = set(keep)
        for k in range(1, pieces):
            _add(even, rows, k * length / pieces, len(rows))
        if len(even) <= WANTED:
            return sorted(even)
    return sorted(keep)


def breaks(rows: Sequence[Row]) -> list[float]:
    """Find places that are listed twice, named, or off the even grid [m]."""
    length = rows[-1]["x"]
    found = []
    for row, side in zip(rows, sides(rows), strict=True):
        piece = row["x"] * EVEN / length
        if side or row.get("name") or row.get("break") or abs(piece - round(piece)) > _TINY * EVEN:
            found.append(row["x"])
    return list(dict.fromkeys(found))


def _add(keep: set[int], rows: Sequence[Row], place: float, most: int) -> None:
    """Add the station nearest to a place, both sides where there are two, while there is room."""
    x = min((row["x"] for row in rows), key=lambda x: abs(x - place))
    there = {k for k, row in enumerate(rows) if row["x"] == x}
    if len(keep | there) <= most:
        keep |= there


def without_repeats(rows: Sequence[Row], keys: Sequence[str], kept: Sequence[int]) -> list[int]:
    """Leave out rows between two others where nothing changes.

    Parameters
    ----------
    rows : sequence of mapping
        Stations.
    keys : sequence of str
        Values to compare.
    kept : sequence of int
        Rows to look at, in order.
    """

    def same(a: int, b: int) -> bool:
        return all(_alike(rows[a][key], rows[b][key]) for key in keys)

    return [
        k for i, k in enumerate(kept) if not (0 < i < len(kept) - 1 and same(kept[i - 1], k) and same(k, kept[i + 1]))
    ]


def _alike(a: float | None, b: float | None) -> bool:
    if a is None or b is None:
        return a is b
    return abs(a - b) <= 1e-9 * max(abs(a), abs(b))
