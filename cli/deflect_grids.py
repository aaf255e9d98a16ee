"""Results of `fishbelly deflect` as tables in SI units: one grid a question."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from fishbelly.cli.format_quantity import NOTHING
from fishbelly.cli.grid import NOISE, PERCENT, TEXT, Column, Grid, column
from fishbelly.cli.station_choice import names, sides

Row = Mapping[str, Any]

JUDGEMENT = (0.9, 1.1)
"""Utilisations that call for judgement: stiffness of real materials varies by more than is left over."""
_STILL = 1e-13
"""Deflections below this share of the length are noise."""
_NO_FORCE = 1e-9
"""Forces below are noise [N]."""
_NO_STRESS = 1e-3
"""Stresses below are noise [Pa]."""


@dataclass(frozen=True)
class Noise:
    """Sizes below which values of one combination are noise, in SI base units."""

    force: float
    moment: float
    deflection: float
    slope: float
    stress: float


def noise_of(combination: Row, length: float) -> Noise:
    """Find what is noise beside the largest values of a combination.

    Parameters
    ----------
    combination : mapping
        One combination of the results.
    length : float
        Length of the member [m].
    """
    stations = combination["stations"]
    forces = [abs(s[k]) for s in stations for k in ("V", "N")]
    forces += [abs(s[k]) for s in combination["supports"] for k in ("vertical", "along", "across")]
    forces += [abs(e["value"]) for e in combination["shear"].values() if e is not None]
    moments = [abs(e["value"]) for e in combination["moment"].values() if e is not None]
    moments += [abs(s["moment"]) for s in combination["supports"]]
    moved = [abs(e["value"]) for e in combination["deflection"].values() if e is not None]
    stress = [abs(s[k]["value"]) for s in combination["stress"] for k in ("max", "min") if s[k] is not None]
    force = max(max(forces, default=0.0), max(moments, default=0.0) / length)
    deflection = max(NOISE * max(moved, default=0.0), _STILL * length)
    return Noise(
        max(NOISE * force, _NO_FORCE),
        max(NOISE * force, _NO_FORCE) * length,
        deflection,
        deflection / length,
        max(NOISE * max(stress, default=0.0), _NO_STRESS),
    )


def verdict(check: Row) -> str:
    """Say whether a check is met, and whether it is so near that it calls for judgement."""
    said = "OK" if check["ok"] else "NOT OK"
    used = check["used"]
    near = used is not None and JUDGEMENT[0] <= used <= JUDGEMENT[1]
    return f"{said}, judgement" if near else said


def governing(combination: Row) -> Row | None:
    """Find the check that uses most of what is allowed; None where there is none."""
    checks = combination["checks"]
    return max(checks, key=lambda c: c["used"]) if checks else None


def overall(combination: Row) -> str:
    """Say what the checks of a combination come to."""
    checks = combination["checks"]
    if not checks:
        return "no checks"
    missed = sum(not c["ok"] for c in checks)
    near = any("judgement" in verdict(c) for c in checks)
    return ("OK" if not missed else f"{missed} NOT OK") + (", judgement" if near else "")


def summary(data: Row) -> Grid:
    """Write one row a combination: the largest deflection, and the check that governs."""
    rows = data["combinations"]

    def down(row: Row, key: str) -> Any:
        return None if row["deflection"]["down"] is None else row["deflection"]["down"][key]

    def worst(row: Row, key: str) -> Any:
        check = governing(row)
        return None if check is None else check[key]

    return Grid(
        "Combinations",
        (
            column(rows, "combination", TEXT, _titled),
            column(rows, "down", "deflection", lambda r: down(r, "value"), noise=_STILL * data["length"]),
            column(rows, "at x", "position", lambda r: down(r, "at")),
            column(rows, "worst span", TEXT, _worst_ratio),
            column(rows, "governs", TEXT, lambda r: worst(r, "limit") or ""),
            column(rows, "used", PERCENT, lambda r: worst(r, "used")),
            column(rows, "checks", TEXT, overall),
        ),
    )


def _titled(row: Row) -> str:
    return f"{row['name']} (strength)" if row.get("for") == "strength" else str(row["name"])


def _worst_ratio(row: Row) -> str:
    ratios = [(s["ratio"], s) for s in row["spans"] if s["ratio"] is not None]
    return "" if not ratios else f"L/{ratio_words(min(r for r, _ in ratios))}"


def ratio_words(ratio: float) -> str:
    """Write the number that a span is divided by: whole, of four figures above 10 000, of three below 100."""
    if ratio >= 1e6 or ratio < 0.1:
        return f"{ratio:.1e}".replace("e+0", "e").replace("e-0", "e-").replace("e+", "e")
    if ratio >= 1e4:
        return f"{float(f'{ratio:.4g}'):.0f}"
    return f"{ratio:.0f}" if ratio >= 100.0 else f"{ratio:.3g}"


def span_words(label: Any) -> str:
    """Write a span's number, or which overhang it is."""
    return "" if label is None else (f"overhang {label}" if isinstance(label, str) else str(label))


def checks(combination: Row) -> list[Grid]:
    """Write checks, those of deflection, slope and strength apart, since their units differ."""
    kinds = (
        ("Limits of deflection", "deflection", lambda k: k == "deflection"),
        ("Limits of slope (rotation of the section)", "slope", lambda k: k == "slope"),
        ("Strength", "stress", lambda k: k not in ("deflection", "slope")),
    )
    grids = []
    for title, what, fits in kinds:
        rows = [c for c in combination["checks"] if fits(c.get("kind", "deflection"))]
        if rows:
            grids.append(_checks(title, what, rows))
    return grids


def _checks(title: str, what: str, rows: Sequence[Row]) -> Grid:
    strength = what == "stress"
    top = max(max(abs(c["allowed"]), abs(c["found"])) for c in rows)
    first = [column(rows, "part" if strength else "limit", TEXT, "part" if strength else "limit")]
    if strength:
        first.append(column(rows, "in", TEXT, "kind"))
    else:
        first.append(column(rows, "span", TEXT, lambda c: span_words(c["span"]), optional=True))
    values = [
        column(rows, name, what, get, optional=optional, noise=NOISE * top, own=True)
        for name, get, optional in (
            ("allowed", "allowed", False),
            ("found", "found", False),
            ("band low", lambda c: c.get("band", {}).get("low"), True),
            ("band high", lambda c: c.get("band", {}).get("high"), True),
        )
    ]
    return Grid(
        title,
        (
            *first,
            column(rows, "at x", "position", "at"),
            *values,
            column(rows, "used", PERCENT, "used"),
            column(rows, "verdict", TEXT, verdict),
            column(rows, "source", TEXT, optional=True),
        ),
    )


def supports(combination: Row, noise: Noise) -> Grid:
    """Write the forces that supports bring onto the member."""
    rows = combination["supports"]
    ranges = {s["name"]: s for s in combination.get("envelope", {}).get("supports", ())}

    def bound(row: Row, key: str) -> Any:
        found = ranges.get(row["name"])
        return None if found is None else found["vertical"][key]

    force = [
        column(rows, "vertical", "force", noise=noise.force),
        column(rows, "vert. least", "force", lambda r: bound(r, "min"), optional=True, noise=noise.force),
        column(rows, "vert. most", "force", lambda r: bound(r, "max"), optional=True, noise=noise.force),
        column(rows, "along", "force", optional=True, noise=noise.force),
        column(rows, "across", "force", optional=True, noise=noise.force),
    ]
    moment = [
        column(rows, "moment", "moment", optional=True, noise=noise.moment),
        column(rows, "moment sideways", "moment", "moment_across", optional=True, noise=noise.moment),
    ]
    return Grid(
        "Supports",
        (
            column(rows, "support", TEXT, "name"),
            column(rows, "x", "position", "at"),
            *_alike(force),
            *_alike(moment),
            column(rows, "", TEXT, lambda r: "lifted" if r.get("lifted") else "", optional=True),
        ),
        "forces on the member, vertical upwards, moments clockwise"
        + ("; with all pattern loads on, least and most over their arrangements" if ranges else ""),
    )


def _alike(columns: Sequence[Column]) -> list[Column]:
    """Give columns of one kind the decimals that the largest of all needs."""
    top = max((abs(v) for c in columns for v in c.values if v is not None), default=0.0)
    return [Column(c.title, c.what, c.values, c.optional, c.noise, c.own, top) for c in columns]


def spans(combination: Row, noise: Noise) -> Grid:
    """Write the largest deflection of every span, from the line between its supports."""
    rows = combination["spans"]

    def ratio(span: Row) -> str:
        still = span["ratio"] is None or abs(span["deflection"]) <= noise.deflection
        return NOTHING if still else f"L/{ratio_words(span['ratio'])}"

    return Grid(
        "Spans",
        (
            column(rows, "span", TEXT, lambda s: span_words(s.get("span"))),
            column(rows, "from", "position"),
            column(rows, "to", "position"),
            column(rows, "deflection", "deflection", noise=noise.deflection),
            column(rows, "at x", "position", "at"),
            column(rows, "ratio", TEXT, ratio),
        ),
        "from the line between the supports; an overhang from its support, L its own length",
    )


def ends(combination: Row, noise: Noise) -> Grid:
    """Write deflection, slope and rotation of the two ends."""
    rows = [{"end": name} | dict(entry) for name, entry in combination["ends"].items()]
    top = max((abs(s["slope"]) for s in combination["stations"] if s["slope"] is not None), default=0.0)
    moved = [abs(e["value"]) for e in combination["deflection"].values() if e is not None]
    return Grid(
        "Ends",
        (
            column(rows, "end", TEXT),
            column(rows, "deflection", "deflection", noise=noise.deflection, scale=max(moved, default=0.0)),
            column(rows, "slope", "slope", noise=noise.slope, scale=top),
            column(rows, "rotation", "slope", noise=noise.slope, scale=top),
        ),
        "clockwise positive; slope is the axis's, rotation the section's own",
    )


def stress(combination: Row, noise: Noise) -> Grid:
    """Write the largest and smallest stress of every part, with place and level."""
    rows = combination["stress"]

    def peak(which: str, key: str) -> Any:
        return lambda row: None if row[which] is None else row[which][key]

    values = [
        column(rows, which, "stress", peak(which, "value"), noise=noise.stress, own=True) for which in ("max", "min")
    ]
    levels = [column(rows, "z", "length", peak(which, "z")) for which in ("max", "min")]
    sheared = column(rows, "shear", "stress", lambda r: (r.get("shear") or {}).get("value"), optional=True)
    (high, low), (above, below) = _alike(values), _alike(levels)
    return Grid(
        "Stress",
        (
            column(rows, "part", TEXT),
            high,
            column(rows, "at x", "position", peak("max", "at")),
            above,
            low,
            column(rows, "at x", "position", peak("min", "at")),
            below,
            Column(sheared.title, sheared.what, sheared.values, True, noise.stress, True),
            column(rows, "shear at x", "position", lambda r: (r.get("shear") or {}).get("at"), optional=True),
        ),
        "tension positive; z is the level above the datum line; shear by level cuts, without sign",
    )


def stations(combination: Row, noise: Noise) -> Grid:
    """Write what stands at the stations.

    Parameters
    ----------
    combination : mapping
        One combination of the results.
    noise : Noise
        What is noise in it.
    """
    rows = combination["stations"]
    force = [
        column(rows, "V", "force", noise=noise.force),
        column(rows, "N", "force", optional=True, noise=noise.force),
    ]
    moment = [
        column(rows, "M", "moment", noise=noise.moment),
        column(rows, "M_datum", "moment", noise=noise.moment),
    ]
    turned = [
        column(rows, "slope", "slope", noise=noise.slope),
        column(rows, "rotation", "slope", noise=noise.slope),
    ]
    moved = [
        column(rows, "deflection", "deflection", noise=noise.deflection),
        column(rows, "across", "deflection", optional=True, noise=noise.deflection),
    ]
    return Grid(
        "Stations",
        (
            column(rows, "x", "position"),
            *_alike(moment),
            *_alike(force),
            *_alike(turned),
            *_alike(moved),
            Column("side", TEXT, tuple(sides(rows)), optional=True),
            Column("name", TEXT, tuple(names(rows, combination["supports"])), optional=True),
        ),
    )


def envelope(combination: Row, noise: Noise) -> Grid | None:
    """Write the smallest and largest values over all arrangements of pattern loads; None without them."""
    found = combination.get("envelope")
    if not found:
        return None
    rows = found["stations"]
    columns = [column(rows, "x", "position")]
    for key, what, floor in (
        ("M", "moment", noise.moment),
        ("V", "force", noise.force),
        ("deflection", "deflection", noise.deflection),
    ):
        pair = [column(rows, f"{key} {edge}", what, _bound(key, edge), noise=floor) for edge in ("min", "max")]
        columns += _alike(pair)
    return Grid("Envelope", tuple(columns), "least and most over all arrangements of pattern loads")


def _bound(key: str, edge: str) -> Callable[[Row], Any]:
    return lambda row: row[key][edge]
