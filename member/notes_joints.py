"""Notes of joints: parts that end too early, fasteners and welds that carry more than they can."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from fishbelly.member.analysis import Analysis
from fishbelly.member.joints import beside
from fishbelly.member.note import Note

Data = dict[str, Any]

ENDS = ("start", "end")
_MET = 1e-9
"""A strength passed by less than this share is met."""


def joints_short(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    """Tell of every part that ends inside the member where the section without it is over its strength."""
    length = analysis.member.length
    for name in _parts(combinations):
        for end in ENDS:
            rows = [
                (j[end], c["name"])
                for c in combinations
                for j in c["joints"]
                if j["part"] == name and 1e-9 * length < j[end]["x"] < (1.0 - 1e-9) * length
            ]
            over = [r for r in rows if r[0].get("used_without", 0.0) > 1.0 + _MET]
            if over:
                yield _short(name, *max(over, key=lambda r: r[0]["used_without"]), end == "start", length)


def _short(name: str, entry: Data, combination: str, start: bool, length: float) -> Note:
    values = {
        "at": (entry["x"], "position"),
        "moment": (entry["M"], "moment"),
        "force": (abs(entry["force"]), "force"),
    }
    if entry["cut_off"] is None:
        how = "strength is passed all the way to the end of the member"
    else:
        how = "it would have to run {further} further, to x = {cut_off}"
        further = entry["x"] - entry["cut_off"] if start else entry["cut_off"] - entry["x"]
        values |= {"further": (further, "length"), "cut_off": (entry["cut_off"], "position")}
        if (to := entry.get("run_to")) is not None and not 0.0 <= to <= length:
            how += ", and its fastening cannot bring its force in before the end of the member"
        elif to is not None:
            how += ", and on to {run_to} for its force to be brought in"
            values["run_to"] = (to, "position")
    return Note(
        f"{name} ends at x = {{at}}, where the moment {{moment}} in {combination} exceeds what the section without "
        f"it can carry ({100.0 * entry['used_without']:.0f} % of its strength): {{force}} has to be passed into it "
        f"there; {how}",
        values,
    )


def joints_full(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    """Tell of every joint whose fasteners, or whose weld, carry more along the part than they can."""
    for name in _parts(combinations):
        joined = analysis.member.part(name).joined
        if joined is None or (joined.capacity is None and joined.weld is None):
            continue
        rows = [(j["flow"], c) for c in combinations for j in c["joints"] if j["part"] == name]
        of = "value" if joined.pitch is None else "per_fastener"
        flow, data = max(rows, key=lambda r: abs(r[0]["max"][of]))
        combination, most, pitch = data["name"], flow["max"], flow.get("largest_pitch")
        for slip in data.get("slip") or ():
            # the fastener that carries most stands where the slip is largest, not the flow
            if slip["part"] == name and slip["per_fastener"] is not None:
                most = most | {"at": slip["per_fastener"]["max"]["at"]}
        where = {"at": (most["at"], "position")}
        if joined.capacity is not None and abs(most["per_fastener"]) > joined.capacity * (1.0 + _MET):
            yield Note(
                f"a fastener of {name} carries {{found}} at x = {{at}} in {combination}, more than its {{capacity}}"
                + (": the pitch may be {pitch} there at most" if pitch is not None else ""),
                where
                | {
                    "found": (abs(most["per_fastener"]), "force"),
                    "capacity": (joined.capacity, "force"),
                }
                | ({"pitch": (pitch, "length")} if pitch is not None else {}),
            )
        if joined.weld is not None and abs(most["value"]) > joined.weld * (1.0 + _MET):
            yield Note(
                f"the joint of {name} carries {{found}} at x = {{at}} in {combination}, more than its {{weld}}",
                where
                | {
                    "found": (abs(most["value"]), "shear flow"),
                    "weld": (joined.weld, "shear flow"),
                },
            )


def joints_beside(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    """Tell of every part fastened beside another what its capacity is not compared with: shear and couple."""
    for name in _parts(combinations):
        part = analysis.member.part(name)
        if part.joined is None or not beside(part) or (part.joined.capacity is None and part.joined.weld is None):
            continue
        rows = [(j[e], c["name"]) for c in combinations for j in c["joints"] if j["part"] == name for e in ENDS]
        # of ends alike but for round-off the left
        entry, combination = max(rows, key=lambda r: [float(f"{abs(r[0][k]):.9e}") for k in ("shear", "couple")])
        if entry["shear"] or entry["couple"]:
            yield Note(
                f"{name} stands beside {part.place.host}: in {combination} a shear of {{shear}} and a couple of "
                "{couple} have to enter it at x = {at}, which its `"
                f"{'capacity' if part.joined.weld is None else 'weld'}` is not compared with; what its ends need is "
                "not stated",
                {
                    "shear": (abs(entry["shear"]), "force"),
                    "couple": (abs(entry["couple"]), "moment"),
                    "at": (entry["x"], "position"),
                },
            )


def _parts(combinations: Sequence[Data]) -> list[str]:
    return list(dict.fromkeys(j["part"] for c in combinations for j in c["joints"]))
