"""Notes the member raises by itself: short sentences with the place and the number. They change no result."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.analysis import Analysis, ModuliKey
from fishbelly.member.breakpoints import breakpoints
from fishbelly.member.cracked_notes import cracked_notes
from fishbelly.member.inclination import steepest_faces
from fishbelly.member.note import Note
from fishbelly.member.notes_effective import effective_widths
from fishbelly.member.notes_joints import joints_beside, joints_full, joints_short
from fishbelly.member.notes_shear import shear_of_sections
from fishbelly.member.notes_slip import joints_slip
from fishbelly.member.notes_stages import creep_in_one_step, idle_parts, one_stage
from fishbelly.member.notes_twist import twisting
from fishbelly.member.shortcuts import shortcuts
from fishbelly.member.slip_layers import has_soft_joints
from fishbelly.member.spans import spans
from fishbelly.sections.composition import Composition
from fishbelly.sections.overlap import relation
from fishbelly.sections.touching import touching_groups

Array = NDArray[np.float64]
Data = dict[str, Any]


def notes(analysis: Analysis, combinations: Sequence[Data]) -> list[Note]:
    """All notes of a solved member, in the order of `NOTES`."""
    found: list[Note] = []
    for make in NOTES:
        for note in make(analysis, combinations):
            if note not in found:
                found.append(note)
    return found


def _cases(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    member = analysis.member
    if member.combinations[0].implied and len(member.cases) > 1:
        yield Note(f"no combination given: cases {', '.join(member.cases)} are taken together, each with factor 1")
    used = {case for c in member.combinations for case, f in c.factors.items() if f}
    unused = [c for c in member.cases if c not in used]
    if unused:
        yield Note(f"no combination uses case {', '.join(unused)}")


def _overlaps(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    parts = analysis.member.parts
    for group in analysis.profile.groups:
        for i, j in group.composition.relations:
            if j >= len(group.composition.outlines):
                continue
            a, b = (parts[group.placed.index[k]] for k in (i, j))
            if group.composition.relations[i, j] == "inside" or _overlap_area(group.composition, i, j):
                yield Note(f"{b.name} displaces {a.name} where they overlap")


def _copies(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    for group in analysis.profile.groups:
        for i, index in enumerate(group.placed.index):
            part = analysis.member.parts[index]
            if part.pair and Composition((group.composition.outlines[i],)).overlaps_itself:
                yield Note(f"the two copies of {part.name} overlap; what they share counts once")


def _camber(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    member = analysis.member
    if isinstance(member.camber, float) and any(v.net for v in member.limits):
        if any(s.overhang for s in spans(member)):
            yield Note("camber is a parabola over each span; overhangs are taken to have none")


def _overlap_area(section: Any, i: int, j: int) -> bool:
    """Whether two outlines share area at some station, or only come close."""
    pair = Composition((section.outlines[i], section.outlines[j]))
    lost = pair.gross.area[0] - pair.moments.area[0]
    return bool(np.any(lost > 1e-9 * pair.gross.area[0]))


def _apart(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    """Parts that touch without a joint, or do not touch, act together: EI with nothing joined beside it."""
    if has_soft_joints(analysis.member):
        return
    worst: tuple[float, float, float, tuple[str, ...], bool] | None = None
    short = analysis.moduli(ModuliKey())
    for group in analysis.profile.groups:
        section = group.composition
        if len(section.outlines) < 2:
            continue
        names = tuple(analysis.member.parts[i].name for i in group.placed.index)
        together = group.stiffness(short).EI_y
        own = (group.modulus(short.E) * group.moments.zz).sum(axis=0)
        k = int(np.argmax(together / np.where(own > 0.0, own, np.inf)))
        joined = len(touching_groups(section.outlines, k)) == 1
        if worst is None or together[k] / own[k] > worst[1] / worst[2]:
            worst = (_break_near(analysis, float(group.placed.x[k])), float(together[k]), float(own[k]), names, joined)
    if worst is not None and worst[1] > worst[2] * (1.0 + 1e-9):
        at, together_k, own_k, names, joined = worst
        how = (
            "are taken to act together, rigidly joined" if joined else "do not all touch, yet are taken to act together"
        )
        yield Note(
            f"{_listed(names)} {how}: EI {{EI}} at x = {{at}}, {{own}} with nothing joined",
            {
                "EI": (together_k, "bending stiffness"),
                "own": (own_k, "bending stiffness"),
                "at": (at, "position"),
            },
        )


def _break_near(analysis: Analysis, x: float) -> float:
    """The break of the geometry that a sampled place stands for, where one is within a hundredth of the length."""
    breaks = breakpoints(analysis.member)
    nearest = float(breaks[int(np.argmin(np.abs(breaks - x)))])
    return nearest if abs(nearest - x) < 0.01 * analysis.member.length else x


def _listed(names: Sequence[str]) -> str:
    shown = list(names) if len(names) <= 4 else [*names[:3], f"{len(names) - 3} more parts"]
    return ", ".join(shown[:-1]) + " and " + shown[-1]


def _moduli_apart(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    if has_soft_joints(analysis.member):
        return
    used = {p.material for p in analysis.member.parts if p.material}
    stiff = sorted((analysis.member.material(n).E, n) for n in used)
    if stiff and stiff[-1][0] > 25.0 * stiff[0][0]:
        ratio = stiff[-1][0] / stiff[0][0]
        yield Note(
            f"E of {stiff[-1][1]} is {ratio:.0f} times that of {stiff[0][1]}: full composite action wants stiff joints"
        )


def _lasting(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    member = analysis.member
    if analysis.creeps:
        return
    if any(s.long_term for s in member.stages):
        return
    crept = {name for s in member.stages for name, phi in s.creep.items() if phi}
    why = "no combination has a sustained share" + (", no stage lets it creep" if member.stages else "")
    for name in dict.fromkeys(p.material for p in member.parts if p.material):
        material = member.material(name)
        if material.creep and name not in crept:
            yield Note(f"{name} creeps, and is used with its short-term modulus alone ({why})")


def _stressed(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    """Fibres over yield, and concrete in tension above its cracking stress."""
    member = analysis.member
    for c in combinations:
        for s in c["stress"]:
            material = member.material(member.part(s["part"]).material or "")
            peaks = [p for p in (s["max"], s["min"]) if p is not None]
            if material.yield_strength is not None and peaks:
                p = max(peaks, key=lambda p: abs(p["value"]))
                if abs(p["value"]) > material.yield_strength:
                    yield Note(
                        f"{s['part']}: stress {{found}} at x = {{at}} is over yield {{limit}} in {c['name']}: "
                        "the elastic result no longer holds there",
                        {
                            "found": (p["value"], "stress"),
                            "at": (p["at"], "position"),
                            "limit": (material.yield_strength, "stress"),
                        },
                    )
            top = s["max"]
            if (
                "cracked" not in c
                and material.cracking is not None
                and top is not None
                and top["value"] > material.cracking
            ):
                yield Note(
                    f"{s['part']}: tension {{found}} at x = {{at}} is above the cracking stress {{limit}} "
                    f"in {c['name']}, and is counted as uncracked",
                    {
                        "found": (top["value"], "stress"),
                        "at": (top["at"], "position"),
                        "limit": (material.cracking, "stress"),
                    },
                )


def _inclined(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    groups = analysis.profile.groups
    along = {analysis.member.parts[g.placed.index[f.part]].name for g in groups for f in g.placed.flanges}
    for name, at, angle, counts in steepest_faces(analysis):
        if counts:
            over = 1.0 / np.cos(angle) ** 4 - 1.0
            if over > 5e-4:
                if name in along:
                    how = "counts along its slope, its thickness square to it; there a vertical cut would overstate"
                else:
                    how = "counts as a vertical cut shows it, which overstates"
                yield Note(
                    f"{name} is inclined by {{angle}} at x = {{at}} and {how} what it carries by {100 * over:.1f} %",
                    {"angle": (angle, "angle"), "at": (at, "position")},
                )
        if angle > np.radians(12.5):
            yield Note(
                f"{name} tapers by {{angle}} at x = {{at}}: beam theory is an estimate above about 10 to 15 degrees",
                {"angle": (angle, "angle"), "at": (at, "position")},
            )
    if along:
        yield Note(
            "the force of an inclined flange carries part of the shear force: shear stresses in webs are those of the "
            "rest; shear stiffness is that of the section as a vertical cut shows it"
        )


def _deep(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    member = analysis.member
    depth = 0.0
    for group in analysis.profile.groups:
        low, high = group.composition.extent
        depth = max(depth, float(np.nanmax(np.nanmax(high, axis=0) - np.nanmin(low, axis=0))))
    shortest = min((s.length * (2.0 if s.overhang else 1.0) for s in spans(member)), default=member.length)
    if depth > 0.1 * shortest:
        shear = "shear deformation is included" if member.shear else "shear deformation is left out"
        yield Note(
            f"depth {{depth}} is over a tenth of the shortest span {{span}}: beam theory is an estimate there; {shear}",
            {"depth": (depth, "length"), "span": (shortest, "length")},
        )


def _thrust(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    holding = [s for s in analysis.member.supports if s.along > 0.0]
    if len(holding) < 2:
        return
    for c in combinations:
        top = max((s for s in c["supports"]), key=lambda s: abs(s["along"]))
        if abs(top["along"]) > 0.0:
            yield Note(
                f"held along at {len(holding)} places: thrust is included, {{force}} at {top['name']} in {c['name']}",
                {"force": (abs(top["along"]), "force")},
            )


def _cantilevers(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    if not any(s.overhang for s in spans(analysis.member)):
        return
    for limit in analysis.member.limits:
        if limit.span_over is None:
            continue
        if limit.spans is not None and not any(isinstance(s, str) for s in limit.spans):
            continue
        if limit.cantilever_over is not None:
            yield Note(f"limit {limit.name}: an overhang may sag its own length over {limit.cantilever_over:g}")
        else:
            yield Note(f"limit {limit.name}: an overhang counts with twice its length, 2L/{limit.span_over:g}")


def _openings(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    member, geometry = analysis.member, analysis.profile.geometry
    cutting = False
    for opening in member.openings:
        side = "left" if opening.at >= member.length else "right"
        placed = geometry.place(np.array([opening.at]), side)
        mine = [c for c in placed.cuts if c.opening and abs(c.opening.at - opening.at) < geometry.tolerance]
        meets = any(relation(placed.outlines[t], c.outline) != "apart" for c in mine for t in c.targets)
        cutting |= meets
        if not meets:
            yield Note(
                "the opening at x = {at} cuts nothing: it lies beside the parts", {"at": (opening.at, "position")}
            )
    if cutting:
        yield Note(
            "over an opening the pieces above and below act together in bending and share the shear angle; "
            "bending of the pieces over the opening's length is not included"
        )


def _large(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    for c in combinations:
        slopes = [abs(s["slope"]) for s in c["stations"] if s["slope"] is not None]
        if slopes and max(slopes) > 0.1:
            yield Note(
                f"slope {{slope}} in {c['name']} is large for small-deflection theory (above about 0.1)",
                {"slope": (max(slopes), "slope")},
            )


def _lifted(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    for c in combinations:
        for name in c.get("lifted", ()):
            yield Note(f"{name} lifts off in {c['name']}; it ends no span there")


def _verdict(analysis: Analysis, combinations: Sequence[Data]) -> Iterator[Note]:
    checked = [c["cross_check"] for c in combinations if c["cross_check"] is not None]
    if checked:
        difference = _tiny(max(c["difference"] for c in checked))
        residual = _tiny(max(c["equilibrium"] for c in checked))
        yield Note(
            f"second method: largest difference {difference} of the largest deflection; "
            f"reactions against loads: residual {residual} of the loads"
        )


def _tiny(value: float) -> str:
    return f"{value:.1e}" if value > 1e-15 else "below 1e-15"


NOTES: tuple[Callable[[Analysis, Sequence[Data]], Iterator[Note]], ...] = (
    _cases,
    idle_parts,
    _overlaps,
    _copies,
    _apart,
    _moduli_apart,
    _lasting,
    creep_in_one_step,
    _stressed,
    cracked_notes,
    joints_short,
    joints_full,
    joints_beside,
    joints_slip,
    effective_widths,
    shear_of_sections,
    _inclined,
    _deep,
    _thrust,
    _cantilevers,
    _camber,
    _openings,
    twisting,
    _large,
    _lifted,
    shortcuts,
    one_stage,
    _verdict,
)
"""What may be said, in order; a new note is one function and one line here."""
