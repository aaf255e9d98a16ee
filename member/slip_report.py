"""What results tell of joints that slip: slip and forces of fasteners, both bounds, the gamma-method beside them."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, Combined
from fishbelly.member.description import Combination, Member
from fishbelly.member.extremes import Extreme, largest
from fishbelly.member.faults import CannotCompute
from fishbelly.member.fixings import Joined
from fishbelly.member.gamma_method import GammaSpan, gamma_spans
from fishbelly.member.loads import Prestress, Shrinkage, Temperature
from fishbelly.member.part_forces import Loading, loadings
from fishbelly.member.slip_law import SlipLaw
from fishbelly.member.slip_layers import Layers, SlipJoint, joint_creep, joint_stiffness, layers_of
from fishbelly.member.slip_setting import one_by_one
from fishbelly.member.slip_tie import stage_joint_creep

Array = NDArray[np.float64]
Data = dict[str, Any]
Tell = Callable[[Analysis, Combined], Data]

_TIE = 1e-9
"""Values of either sign that differ by less than this share are the same: the one on the left is given."""


def add_slip(analysis: Analysis, upto: int | None, combinations: Sequence[Data], tell: Tell) -> None:
    """Add ``slip``, ``bounds`` and ``gamma`` to every combination of a member whose parts slip.

    Parameters
    ----------
    analysis : Analysis
        The member.
    upto : int or None
        Number of the stage at whose end the results are; None for the last.
    combinations : sequence of dict
        Results; changed in place. Forces per fastener under ``joints`` become those of single fasteners where these
        are taken one by one.
    tell : callable
        Largest deflections of a combination, as the results have them.
    """
    report = _Report(analysis, layers_of(analysis.member), tell)
    by_name = {c.name: c for c in analysis.member.combinations}
    for data in combinations:
        if "cracked" in data:
            continue
        combination = by_name[data["name"]]
        combined = analysis.combine(combination, upto=upto)
        data["slip"] = report.joints(combined)
        data["bounds"] = report.bounds(combination, upto, data["deflection"])
        data["gamma"] = report.gamma(combined, data["deflection"])
        _single_fasteners(data)


def _single_fasteners(data: Data) -> None:
    """Put the forces of single fasteners into the joints of parts."""
    of_part = {s["part"]: s for s in data["slip"]}
    for joint in data.get("joints", ()):
        found = of_part.get(joint["part"])
        if found is None or not found["single"]:
            continue
        joint["start"]["per_fastener"] = found["single"][0]["force"]
        joint["end"]["per_fastener"] = found["single"][-1]["force"]
        joint["flow"]["max"]["per_fastener"] = found["per_fastener"]["max"]["value"]
        if "largest_pitch" in joint["flow"]:
            # another pitch is another stiffness: no proportion gives it
            joint["flow"]["largest_pitch"] = None


@dataclass(frozen=True, eq=False)
class _Report:
    """A member whose parts slip, with the same member rigidly joined and not joined at all beside it."""

    analysis: Analysis
    layers: Layers
    tell: Tell

    @cached_property
    def limits(self) -> dict[str, Analysis]:
        """The same member with nothing joined that slips, and with all of that rigid."""
        member = self.analysis.member
        return {"apart": Analysis.of(_joined(member, apart=True)), "rigid": Analysis.of(_joined(member, apart=False))}

    @cached_property
    def single(self) -> NDArray[np.bool_]:
        """Joints whose fasteners are taken one by one in any stage."""
        return np.any([one_by_one(frame, self.layers) for frame in self.analysis.frames], axis=0)

    @cached_property
    def gammas(self) -> tuple[GammaSpan, ...]:
        """The gamma-method on short-term moduli."""
        frame = self.analysis.frame
        return gamma_spans(SlipLaw.of(frame, frame.short, joint_stiffness(self.layers), 1, False))

    def bounds(self, combination: Combination, upto: int | None, deflection: Data) -> Data:
        """Deflection with the joints away and with them rigid, of the kind that is largest; None where none is had."""
        known = {way: abs(e["value"]) for way, e in deflection.items() if e is not None}
        way = max(known, key=lambda w: known[w]) if known else "down"
        found: Data = {"of": way}
        for name, analysis in self.limits.items():
            try:
                entry = self.tell(analysis, analysis.combine(combination, upto=upto))[way]
            except CannotCompute:
                entry = None
            found[name] = None if entry is None else {"value": entry["value"], "at": entry["at"]}
        return found

    def joints(self, combined: Combined) -> list[Data]:
        """Slip, flow and force per fastener of every joint that is there."""
        analysis = self.analysis
        loading = loadings(analysis, combined)
        there = set(loading[0].parts)
        long_term = any(v.stage is not None and v.stage.long_term for v in analysis.views)
        lasting = long_term or any(s.key.long_term for s in combined.shares)
        own = {s.key.own for s in combined.shares if s.key.own and np.any(s.factors)} if lasting else set()
        found = []
        for j, joint in enumerate(self.layers.joints):
            if joint.part in there and joint.host in there:
                data = _joint(analysis, loading, joint, j, bool(self.single[j]))
                data["stiffness"] = float(joint_stiffness(self.layers)[j])
                data["creep"] = joint_creep(analysis.member, joint) if lasting else None
                data["creep_of_shrinkage"] = [joint_creep(analysis.member, joint, dict(v)) for v in sorted(own)]
                data["creep_in_stages"] = self._stage_creep(j)
                found.append(data)
        return found

    def _stage_creep(self, j: int) -> list[Data]:
        """Creep factor of a joint that runs off in each stage in which any does."""
        given = [(v.stage.name, v.stage.creep) for v in self.analysis.views if v.stage is not None]
        return [
            {"stage": name, "creep": float(stage_joint_creep(self.layers, creep)[j])}
            for name, creep in given
            if any(creep.values())
        ]

    def gamma(self, combined: Combined, deflection: Data) -> list[Data]:
        """The gamma-method on every span, or the condition of it that does not hold."""
        member = self.analysis.member
        reason = "the method knows no stages" if member.stages else ""
        rows = []
        for span in self.gammas:
            row: Data = {"from": span.span.start, "to": span.span.end, "span": span.span.label}
            said = reason or span.reason
            row |= {"holds": not said, "reason": said or None, "deflection": None}
            if span.result is not None and not said:
                r = span.result
                row |= {"n": r.n, "length": r.length, "EI": r.EI, "gamma": list(r.gamma), "a": list(r.a)}
                row |= {"EI_rigid": span.rigid, "EI_apart": span.apart}
                row["deflection"] = self._by_gamma(combined, span, r.EI, deflection)
            rows.append(row)
        return rows

    def _by_gamma(self, combined: Combined, span: GammaSpan, EI: float, deflection: Data) -> float | None:
        """Largest deflection of one span by its effective stiffness, shear as found; None where it says nothing."""
        combination, member = combined.combination, self.analysis.member
        used = {case for case, f in combination.factors.items() if f}
        strained = any(isinstance(v, Temperature | Shrinkage | Prestress) and v.case in used for v in member.loads)
        down = deflection["down"]
        if len(self.gammas) != 1 or strained or any(combination.sustained.values()) or down is None:
            return None
        rigid = self.limits["rigid"]
        bent = self.tell(rigid, rigid.combine(combination))["down"]
        if bent is None:
            return None
        return float((bent["value"] - bent["shear_part"]) * span.rigid / EI + down["shear_part"])


def _joined(member: Member, apart: bool) -> Member:
    """The same member with its soft joints taken away, or rigid."""

    def other(joined: Joined) -> Joined:
        rigid = replace(joined, apart=False, stiffness=None, per_length=None, creep=None, band=None)
        return Joined(apart=True) if apart else rigid

    parts = tuple(
        replace(p, joined=other(p.joined)) if p.joined is not None and p.joined.soft else p for p in member.parts
    )
    return replace(member, parts=parts)


def _joint(analysis: Analysis, loading: Sequence[Loading], joint: SlipJoint, j: int, single: bool) -> Data:
    panels, parts = analysis.profile.panels, analysis.member.parts
    first, stop = panels.border(joint.start), panels.border(joint.end)
    slip, flow = (_summed(loading, name, j) for name in ("slip", "flow"))

    def most(field: Array) -> Data:
        found = _most(analysis, field, first, stop)
        return {"max": {"value": found.value, "at": found.at}}

    data: Data = {"part": parts[joint.part].name, "to": parts[joint.host].name, "ends": {}}
    for name, x, values in (
        ("left", joint.start, slip[:, first] @ panels.rule.left),
        ("right", joint.end, slip[:, stop - 1] @ panels.rule.right),
    ):
        data["ends"][name] = {"x": x, "slip": _worst(values)}
    data |= {"slip": most(slip), "flow": most(flow), "per_fastener": None, "single": []}
    if single:
        forces = _summed(loading, "fasteners", j) / joint.fasteners
        borders = [panels.border(float(x)) for x in joint.places()]
        data["single"] = [
            {"x": float(x), "force": _worst(forces[:, b])} for x, b in zip(joint.places(), borders, strict=True)
        ]
        top = max(data["single"], key=lambda v: abs(v["force"]))
        data["per_fastener"] = {"max": {"value": top["force"], "at": top["x"]}}
    elif joint.pitch is not None:
        data["per_fastener"] = most(flow * joint.pitch / joint.fasteners)
    return data


def _summed(loading: Sequence[Loading], name: str, j: int) -> Array:
    """A field of one joint over all that has happened, by pieces: shape (J + 1, ...)."""
    total: Array | None = None
    for share in loading:
        if share.step.layered is not None:
            field = np.tensordot(share.factors, getattr(share.step.layered, name)[j], axes=1)
            total = field if total is None else total + field
    assert total is not None
    return total


def _worst(values: Array) -> float:
    """Largest by size over all arrangements of pieces, with its sign, shape (J + 1,)."""
    high = values[0] + np.maximum(values[1:], 0.0).sum()
    low = values[0] + np.minimum(values[1:], 0.0).sum()
    return float(high if high >= -low else low) + 0.0


def _most(analysis: Analysis, field: Array, first: int, stop: int) -> Extreme:
    """Largest value by size with its sign; of equal ones of either sign the leftmost."""
    panels = analysis.profile.panels
    up, down = largest(panels, field, first, stop), largest(panels, -field, first, stop)
    tie = abs(up.value - down.value) <= _TIE * max(abs(up.value), abs(down.value))
    if (down.value > up.value and not tie) or (tie and down.at < up.at):
        return Extreme(-down.value + 0.0, down.at, down.on)
    return Extreme(up.value + 0.0, up.at, up.on)
