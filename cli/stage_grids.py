"""What happened stage by stage, as sentences and as tables in SI units."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import replace
from typing import Any

from fishbelly.cli.grid import PERCENT, TEXT, Column, Grid, column

Row = Mapping[str, Any]

_HEADS = 60
"""Columns of a table that names of stages may take as heads."""
_NOTHING = 1e-9
"""Forces below are noise [N]."""


def staged(data: Row) -> bool:
    """Whether the job has stages of its own."""
    return bool(data["stages"]) and "comes" in data["stages"][0]


def story(stage: Row, number: int) -> str:
    """Tell in a sentence or two what a stage brings.

    Parameters
    ----------
    stage : mapping
        A stage of the results of a job with stages.
    number : int
        Its number in order of time, from 1.

    Examples
    --------
    >>> nothing = {"parts": [], "supports": [], "hinges": []}
    >>> plate = {"parts": ["plate"], "supports": [], "hinges": []}
    >>> story({"name": "welded", "cases": ["live"], "comes": plate, "goes": nothing, "long_term": False,
    ...        "creep": {}, "ageing": 1.0}, 2)
    '2 welded: plate joins; then case live arrives.'
    """
    said = []
    if number == 1:
        if stage["comes"]["parts"]:
            names, held = stage["comes"]["parts"], _listed(stage["comes"]["supports"])
            said.append(f"{_listed(names)} {'stands' if len(names) == 1 else 'stand'} on {held or 'no support'}")
        said += [f"hinge {n} is open" for n in stage["comes"]["hinges"]]
    else:
        for kind, comes, goes in (
            ("parts", ("joins", "join"), ("goes", "go")),
            ("supports", ("is set", "are set"), ("is taken away", "are taken away")),
            ("hinges", ("opens", "open"), ("closes", "close")),
        ):
            for names, verbs in ((stage["goes"][kind], goes), (stage["comes"][kind], comes)):
                if names:
                    said.append(f"{_listed(names)} {verbs[len(names) > 1]}")
    if stage["creep"]:
        runs = _listed([f"{name} {phi:g}" for name, phi in stage["creep"].items()])
        ageing = f", ageing coefficient {stage['ageing']:g}" if stage["ageing"] != 1.0 else ""
        said.append(f"creep runs off under the stress locked in ({runs}{ageing})")
    return f"{number} {stage['name']}: {'; '.join([*said, _arrives(stage, number)])}."


def _arrives(stage: Row, number: int) -> str:
    """Say what arrives, and on which moduli."""
    cases = stage["cases"]
    if not cases:
        return "no load arrives"
    after = stage["creep"] or (number > 1 and _changed(stage))
    verb = f"case {cases[0]} arrives" if len(cases) == 1 else f"cases {_listed(cases)} arrive"
    lasting = ", for long: E divided by 1 + creep" if stage["long_term"] else ""
    return f"{'then ' if after else ''}{verb}{lasting}"


def _changed(stage: Row) -> bool:
    return any(stage[way][kind] for way in ("comes", "goes") for kind in stage[way])


def _listed(names: Sequence[str]) -> str:
    return " and ".join(filter(None, (", ".join(names[:-1]), *names[-1:])))


def stage_tables(data: Row, combination: str, noise: float, across: bool = True) -> list[Grid]:
    """Write what happened to one combination, a grid a question; grids without rows are left out.

    Parameters
    ----------
    data : mapping
        Results of a job with stages.
    combination : str
        Name of the combination.
    noise : float
        Deflection below which there is none [m].
    across : bool
        Whether shares and forces of supports have a column a stage, as people compare them; else, for files, a row
        a stage, and columns that do not depend on what the stages are.
    """
    rows = [
        dict(next(c for c in s["combinations"] if c["name"] == combination)) | {"stage": s["name"]}
        for s in data["stages"]
    ]
    made = [_deflections(rows, noise, across), _shares(rows, across), _stresses(rows, across), _forces(rows, across)]
    return [grid for grid in (*made, _released(rows, noise)) if grid.count]


def _largest(row: Row) -> Row | None:
    """Largest deflection by size, downwards positive."""
    down, up = row["deflection"]["down"], row["deflection"]["up"]
    if up is not None and (down is None or up["value"] > down["value"]):
        return {"value": -up["value"], "at": up["at"]}
    return down


def _deflections(rows: Sequence[Row], noise: float, across: bool) -> Grid:
    def quick(row: Row) -> Any:
        found = _largest(row["instantaneous"]) if "instantaneous" in row else None
        return None if found is None else found["value"]

    moved = [
        column(rows, "so far", "deflection", lambda r: (_largest(r) or {}).get("value", 0.0), noise=noise),
        column(rows, "adds", "deflection", lambda r: r["own"]["deflection"], noise=noise),
        column(rows, "no creep", "deflection", quick, optional=True, noise=noise),
    ]
    stiff = [column(rows, "EI_y", "bending stiffness")]
    if not across or any(abs(r["EI_y"] - r["EI_y_short"]) > 1e-9 * r["EI_y"] for r in rows):
        stiff.append(column(rows, "EI_y short", "bending stiffness", "EI_y_short"))
    crept = any("instantaneous" in r for r in rows)
    note = "largest deflection at the end of each stage, down positive, what the stage adds there"
    note += ", and what it were if nothing crept" if crept else ""
    note += "; EI there on the moduli its loads act on"
    note += ", and on short-term ones" if len(stiff) > 1 else ""
    return Grid(
        "Deflection by stage",
        (
            column(rows, "stage", TEXT),
            *_alike(moved),
            column(rows, "at x", "position", "at"),
            *_alike(stiff),
            column(rows, "gain", "factor"),
        ),
        note + "; gain: EI over that of the stage before, at the same place",
    )


def _alike(columns: Sequence[Column]) -> list[Column]:
    """Give columns of one kind the decimals that the largest of all needs."""
    top = max((abs(v) for c in columns for v in c.values if v is not None), default=0.0)
    return [replace(c, scale=top) for c in columns]


def _shares(rows: Sequence[Row], across: bool) -> Grid:
    """Write what each part carries of the bending moment: a column a stage, or a row a stage and part."""
    note = "where the deflection of the stage is largest"
    title = "Share of the bending moment by part"
    quick = any("instantaneous" in r for r in rows)
    if not across:
        flat = [p | {"stage": r["stage"], "at": r["at"]} | _quick(r, p["part"]) for r in rows for p in r["carried"]]
        columns = [
            column(flat, "stage", TEXT),
            column(flat, "part", TEXT),
            column(flat, "at x", "position", "at"),
            column(flat, "force", "force"),
            column(flat, "moment", "moment"),
            column(flat, "share", PERCENT),
        ]
        if quick:
            columns.append(column(flat, "share, no creep", PERCENT, "quick"))
        return Grid(title, tuple(columns), note)
    parts = [{"part": name} for name in dict.fromkeys(p["part"] for r in rows for p in r["carried"])]
    if len(parts) < 2:
        return Grid(title, ())
    heads, by_number = _heads(rows)
    note += by_number
    by_stage = [column(parts, head, PERCENT, _share(r, "share")) for head, r in zip(heads, rows, strict=True)]
    if quick:
        by_stage += [column(parts, "last, no creep", PERCENT, _share(rows[-1], "quick"))]
        note += "; last, no creep: what the last stage's would be if nothing crept"
    return Grid(title, (column(parts, "part", TEXT), *by_stage), note)


def _quick(row: Row, part: str) -> Row:
    if "instantaneous" not in row:
        return {}
    return {"quick": next((p["share"] for p in row["instantaneous"]["carried"] if p["part"] == part), None)}


def _heads(rows: Sequence[Row]) -> tuple[list[str], str]:
    """Heads of a column a stage: the names, or where these are long the numbers, with words that say so."""
    names = [str(r["stage"]) for r in rows]
    if sum(len(name) + 2 for name in names) <= _HEADS:
        return names, ""
    return [f"stage {k}" for k in range(1, len(names) + 1)], "; stages by their number"


def _share(row: Row, key: str) -> Callable[[Row], Any]:
    carried = row["carried"] if key == "share" else row["instantaneous"]["carried"]
    found = {p["part"]: p["share"] for p in carried}
    return lambda r: found.get(r["part"])


def _stresses(rows: Sequence[Row], across: bool) -> Grid:
    flat = []
    for r in rows:
        quick = {s["part"]: s for s in r["instantaneous"]["stress"]} if "instantaneous" in r else {}
        for s in r["stress"]:
            if s["max"] is not None or s["min"] is not None:
                flat.append({"stage": r["stage"], "part": s["part"], "s": s, "quick": quick.get(s["part"])})

    def peak(which: str, key: str, of: str = "s") -> Callable[[Row], Any]:
        return lambda row: ((row[of] or {}).get(which) or {}).get(key)

    top = max((abs(v) for f in flat for w in ("max", "min") if (v := peak(w, "value")(f)) is not None), default=0.0)
    noise = 1e-9 * top
    columns = [column(flat, "stage", TEXT), column(flat, "part", TEXT)]
    crept = any(f["quick"] for f in flat)
    for which in ("max", "min"):
        columns.append(column(flat, which, "stress", peak(which, "value"), noise=noise, own=True))
        if not (across and crept):
            columns.append(column(flat, "at x" if across else f"at x of {which}", "position", peak(which, "at")))
    if crept:
        columns += [
            column(flat, f"{which}, no creep", "stress", peak(which, "value", "quick"), noise=noise, own=True)
            for which in ("max", "min")
        ]
    return Grid("Stress by part at the end of each stage", tuple(columns), "tension positive; locked in and summed")


def _forces(rows: Sequence[Row], across: bool) -> Grid:
    """Write the forces of supports at the end of each stage, one that is not there left out."""
    title = "Supports at the end of each stage"
    if not across:
        flat = [s | {"stage": r["stage"]} for r in rows for s in r["supports"]]
        return Grid(
            title,
            (
                column(flat, "stage", TEXT),
                column(flat, "support", TEXT, "name"),
                column(flat, "x", "position", "at"),
                column(flat, "vertical", "force"),
                column(flat, "along", "force", optional=True),
                column(flat, "moment", "moment", optional=True),
            ),
            "forces on the member, vertical upwards, moments clockwise; 0 where not there",
        )
    first = rows[0]["supports"]
    columns = [column(first, "support", TEXT, "name"), column(first, "x", "position", "at")]
    noise = max((abs(s["vertical"]) for r in rows for s in r["supports"]), default=0.0)
    by_stage = []
    heads, by_number = _heads(rows)
    for head, r in zip(heads, rows, strict=True):
        forces = {s["name"]: s["vertical"] for s in r["supports"]}
        by_stage.append(column(first, head, "force", _named(forces), noise=max(1e-10 * noise, _NOTHING)))
    return Grid(
        title, (*columns, *_alike(by_stage)), f"vertical force on the member, upwards; 0 where not there{by_number}"
    )


def _named(values: Mapping[str, float]) -> Callable[[Row], Any]:
    return lambda row: values[row["name"]]


def _released(rows: Sequence[Row], noise: float) -> Grid:
    flat = [g | {"stage": r["stage"]} for r in rows for g in r["released"]]
    moved = [
        column(flat, "before", "deflection", "deflection_before", noise=noise),
        column(flat, "after", "deflection", "deflection_after", noise=noise),
    ]
    return Grid(
        "Supports taken away",
        (
            column(flat, "support", TEXT, "name"),
            column(flat, "stage", TEXT),
            column(flat, "x", "position", "at"),
            column(flat, "force", "force", "vertical"),
            column(flat, "moment", "moment", optional=True),
            *_alike(moved),
        ),
        "force on the member just before, upwards; deflection there just before and just after, down positive",
    )
