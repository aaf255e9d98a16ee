"""A member's life, step by step: what is released, what creeps, what arrives, each on its stage's parts and moduli.

Every step is one linear solution. What history leaves behind is one plane of stress in each part: a part that
joins later carries nothing of it; when a part goes, is cut or is displaced, or a support goes, what it carried
acts on what remains. Creep under the stress locked in is free strain phi sigma / E, held back by the age-adjusted
modulus E / (1 + chi phi) (H. Trost 1967; Z. P. Bazant, ACI Journal 69, 1972; EN 1992-1-1:2004, 5.7(4), Annex KK).
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Actions, Atom, Frame
from fishbelly.member.faults import Mechanism
from fishbelly.member.forces import Forces
from fishbelly.member.history_forces import resultant, sheared
from fishbelly.member.moduli import Moduli
from fishbelly.member.response import Response, responded
from fishbelly.member.section_law import ElasticLaw, Strains
from fishbelly.member.shear_sets import shear_of_parts
from fishbelly.member.spreading import nothing, spread, spread_planes
from fishbelly.member.stage_view import StageView

if TYPE_CHECKING:
    from fishbelly.member.nodes import Layout
    from fishbelly.member.slip_tie import Layered, LockedIn, Tie

Array = NDArray[np.float64]
Planes = dict[int, Array]
"""Stress, or free strain, of each part as a plane v0 + v1 c0 + v2 c1 about the analysis line: shape (3, A, K, n)."""

_SAME = 1e-12
"""A change of a part's area below this share of it is none."""


@dataclass(frozen=True, eq=False)
class Step:
    """One thing that happens at once.

    Parameters
    ----------
    stage : int
        Number of the stage.
    what : {"release", "creep", "loads"}
        What happens.
    response : Response
        What it does, with an axis of atoms.
    moduli : Moduli
        Moduli it acts on.
    frame : Frame
        The grid with the parts of the stage.
    free : dict
        Free strain of parts in it, as planes.
    creeps : bool
        Whether its stress creeps in later stages: it does not where it acted on long-term moduli.
    layered : Layered, optional
        Strains of the layers and what their joints do, where parts slip on each other.
    """

    stage: int
    what: str
    response: Response
    moduli: Moduli
    frame: Frame
    free: Planes
    creeps: bool
    layered: Layered | None = None

    @property
    def parts(self) -> tuple[int, ...]:
        """Numbers of the parts that are there."""
        return tuple(sorted({i for g in self.frame.profile.groups for i in g.placed.index}))

    def axial(self, part: int) -> Array:
        """Strain of a part on the analysis line, shape (A, K, n)."""
        return self.response.axial if self.layered is None else self.layered.axial(part)

    def stress(self, part: int) -> Array:
        """Stress that it leaves in a part that is there, as a plane for each atom, shape (3, A, K, n) [Pa]."""
        r = self.response
        strain = np.stack((self.axial(part), -r.curvature[0], -r.curvature[1]))
        if part in self.free:
            strain = strain - self.free[part]
        return self.frame.profile.part_modulus(part, self.moduli.E) * strain


@dataclass(frozen=True, eq=False)
class Setting:
    """What a step needs to know of its stage.

    Parameters
    ----------
    view, frame, layout : StageView, Frame, Layout
        The stage, its grid, supports at work.
    moduli : Moduli
        Moduli on which loads of the stage act.
    short : Moduli
        The stage's moduli for loads that do not last.
    lasting : bool
        Whether `moduli` are long-term.
    law : callable
        Section law for a set of moduli and what the joints have: "now", "short" or "aged" stiffness.
    aged, softened : Moduli, optional
        Moduli divided by 1 + chi phi and by 1 + phi of the creep that runs off.
    tie : Tie, optional
        Layers and joints, where parts slip on each other.
    homes : mapping of str to Frame
        Stage in which each support first holds, whose levels it has.
    """

    view: StageView
    frame: Frame
    layout: Layout
    moduli: Moduli
    short: Moduli
    lasting: bool
    law: Callable[[Moduli, str], ElasticLaw]
    aged: Moduli | None = None
    softened: Moduli | None = None
    tie: Tie | None = None
    homes: Mapping[str, Frame] = field(default_factory=dict)

    def held(self, each: Sequence[tuple[int, Forces]], shape: tuple[int, ...]) -> Forces:
        """Forces given part by part, as the law takes them; fields of `shape` after the plane."""
        if self.tie is not None:
            return self.tie.held(each, self.view.parts, shape)
        total = Forces.none(shape)
        for _, forces in each:
            total = total.plus(forces)
        return total


@dataclass(eq=False)
class _Record:
    """What has happened so far: total response, stress by part, and the shares of both that still creep."""

    response: Response
    stress: Planes = field(default_factory=dict)
    creeping: Planes = field(default_factory=dict)
    creeping_shear: Array | None = None
    shear_on: dict[frozenset[int], Array] = field(default_factory=dict)
    creeping_slip: LockedIn | None = None

    def added(self, steps: list[Step]) -> list[Step]:
        """Take steps in, and return them."""
        for step in steps:
            self.add(step)
        return steps

    def sheared_off(self, s: Setting, held: Forces, slide: Array) -> Forces:
        """Add the shear angle that what has been carried gains as parts go or are cut: V by the parts it arrived on."""
        member, now = s.frame.profile.member, s.view.parts
        cuts = frozenset(i for i in now if member.parts[i].cuts)
        for parts in list(self.shear_on):
            left = (parts & now) | cuts
            if left == parts:
                continue
            V = self.shear_on.pop(parts)
            was, rest = (shear_of_parts(s.frame.profile, which, s.short) for which in (parts, left))
            held = held.plus(sheared(slide, rest - was, V))
            self.shear_on[left] = self.shear_on.get(left, 0.0) + V
        return held

    def add(self, step: Step) -> None:
        """Take a step in."""
        view = step.frame.view
        if view is not None:
            self.shear_on[view.parts] = self.shear_on.get(view.parts, 0.0) + step.response.V
        self.response = self.response + step.response
        stress = {part: step.stress(part) for part in step.parts}
        _accumulate(self.stress, stress)
        if step.creeps:
            _accumulate(self.creeping, stress)
            V = step.response.V
            self.creeping_shear = V if self.creeping_shear is None else self.creeping_shear + V
            if step.layered is not None:
                before = self.creeping_slip
                self.creeping_slip = step.layered.locked if before is None else before.plus(step.layered)


def _accumulate(total: Planes, more: Mapping[int, Array]) -> None:
    for part, planes in more.items():
        total[part] = total[part] + planes if part in total else planes


def life(
    settings: Sequence[Setting],
    atoms: Sequence[Atom],
    loads: Sequence[Actions],
    free: Callable[[Setting, Sequence[int]], list[Forces]],
    free_planes: Callable[[Setting, Sequence[int]], Planes],
    planes: int,
) -> tuple[Step, ...]:
    """Go through the stages of a member, every atom with factor 1 by itself.

    Parameters
    ----------
    settings : sequence of Setting
        The stages in order of time.
    atoms, loads : sequence
        Loads that act together, and what they put on the grid of the stage in which they arrive.
    free : callable
        Forces that hold the free strain of some atoms back, for a setting and the numbers of the atoms.
    free_planes : callable
        Free strain of each part by the same atoms, as planes.
    planes : int
        1: the vertical plane alone.

    Returns
    -------
    tuple of Step

    Raises
    ------
    Mechanism
        When the member can move freely in a stage; the stage is named.
    """
    member = settings[0].frame.profile.member
    count, shape = len(atoms), settings[0].frame.profile.panels.x.shape
    record = _Record(nothing(count, shape, len(member.supports)))
    steps: list[Step] = []
    before: Setting | None = None
    for s in settings:
        law = s.law(s.moduli, "now")
        arriving = [k for k, a in enumerate(atoms) if a.case in s.view.cases]
        try:
            earlier = [k for st in settings[: s.view.index] for k, a in enumerate(atoms) if a.case in st.view.cases]
            if before is not None and earlier:
                steps += record.added(_released(before, s, record, law, earlier, planes))
                steps += record.added(_crept(s, record, earlier, planes))
            if arriving:
                steps.append(_arrived(s, law, atoms, loads, arriving, count, free, free_planes, planes))
                if len(settings) > 1:
                    record.add(steps[-1])
        except Mechanism as error:
            if s.view.stage is None:
                raise
            raise Mechanism(f"{error.reason}, in stage {s.view.name}") from None
        before = s
    return tuple(steps) or (_empty_step(settings[-1], record.response),)


def _empty_step(s: Setting, response: Response) -> Step:
    return Step(s.view.index, "loads", response, s.moduli, s.frame, {}, False)


def _arrived(
    s: Setting,
    law: ElasticLaw,
    atoms: Sequence[Atom],
    loads: Sequence[Actions],
    which: list[int],
    count: int,
    free: Callable[[Setting, Sequence[int]], list[Forces]],
    free_planes: Callable[[Setting, Sequence[int]], Planes],
    planes: int,
) -> Step:
    """Loads of the stage on its parts and moduli."""
    mine = [atoms[k] for k in which]
    found, strains = responded(s.frame, s.layout, law, mine, [loads[k] for k in which], free(s, which), planes)
    strained = {part: spread_planes(v, which, count) for part, v in free_planes(s, which).items()}
    every, layered = spread(found, which, count), _layered(s, strains, which, count)
    return Step(s.view.index, "loads", every, s.moduli, s.frame, strained, not s.lasting, layered)


def _layered(s: Setting, strains: Strains, which: Sequence[int], count: int) -> Layered | None:
    return None if s.tie is None else s.tie.layered(strains, which, count)


def _released(
    before: Setting, s: Setting, record: _Record, law: ElasticLaw, which: list[int], planes: int
) -> list[Step]:
    """What parts and supports that go, or are cut or displaced, have carried acts on what remains."""
    count, shape = record.response.N.shape[0], record.response.N.shape
    each = _carried(before, s, record) if before.view.parts != s.view.parts else []
    gone = s.view.gone - before.view.gone
    held = s.held(each, shape)
    if np.any(law.slide):
        held = record.sheared_off(s, held, law.slide)
    pushes = [reversed_reactions(s, record.response.reactions[k], gone, _opened(before, s, record, k)) for k in which]
    if not gone and not held.any and not any(np.any(a.opened) for a in pushes):
        return []
    free = _of_atoms(held, which)
    found, strains = responded(s.frame, s.layout, law, [Atom("")] * len(which), pushes, free, planes)
    every = spread(found, which, count)
    numbers = _numbers(s.frame, gone)
    every.reactions[:, numbers] -= record.response.reactions[:, numbers]
    layered = _layered(s, strains, which, count)
    return [Step(s.view.index, "release", every, s.moduli, s.frame, {}, not s.lasting, layered)]


def _carried(before: Setting, s: Setting, record: _Record) -> list[tuple[int, Forces]]:
    """Forces of the stress in what a stage takes away, part by part; parts that go are struck off the record."""
    line, found = s.frame.line, []
    for part in list(record.stress):
        old = before.frame.profile.part_moments(part, line)
        new = s.frame.profile.part_moments(part, line)
        if np.any(np.abs(old - new) > _SAME * np.abs(old).max(axis=(1, 2), keepdims=True)):
            found.append((part, resultant(record.stress[part], old - new)))
        if part not in s.view.parts:
            record.stress.pop(part)
            record.creeping.pop(part, None)
    return found


def _of_atoms(held: Forces, which: Sequence[int]) -> list[Forces]:
    """Forces with an axis of atoms as one set for each of some atoms."""
    return [held.atom(k) for k in which]


def _numbers(frame: Frame, names: frozenset[str]) -> list[int]:
    return [k for k, s in enumerate(frame.profile.member.supports) if s.name in names]


def _opened(before: Setting, s: Setting, record: _Record, k: int) -> Array:
    """Moment of one atom at borders with a hinge that opens, about the centroid there, shape (K + 1,)."""
    panels = s.frame.profile.panels
    found = np.zeros(panels.count + 1)
    for x in s.view.hinges:
        border = panels.border(x)
        if x not in before.view.hinges and 0 < border < panels.count:
            M, N = (v @ panels.rule.left for v in (record.response.M[0, k, border], record.response.N[k, border]))
            found[border] = float(M + N * s.frame.centroid(x)[0])
    return found


def reversed_reactions(s: Setting, reactions: Array, gone: frozenset[str], opened: Array | None = None) -> Actions:
    """Forces of supports that go, turned round, as loads on the member; reactions of one atom, shape (supports, 5)."""
    frame = s.frame
    panels = frame.profile.panels
    shape = panels.x.shape
    borders = shape[0] + 1
    a = Actions(
        np.zeros((2, *shape)),
        np.zeros(shape),
        np.zeros((2, *shape)),
        np.zeros((2, borders)),
        np.zeros(borders),
        np.zeros((2, borders)),
        opened=opened,
    )
    supports = frame.profile.member.supports
    for k in _numbers(frame, gone):
        down, along, couple, across, aside = reactions[k]
        border = panels.border(supports[k].at)
        a.P[:, border] -= (down, across)
        a.F[border] -= along
        home = s.homes.get(supports[k].name, frame)
        a.C[:, border] -= np.array((couple, aside)) + along * home.level(supports[k].level, supports[k].at)
    return a


def _crept(s: Setting, record: _Record, which: list[int], planes: int) -> list[Step]:
    """Creep that runs off in a stage under the stress locked in."""
    stage = s.view.stage
    if stage is None or not any(stage.creep.values()) or s.aged is None or s.softened is None:
        return []
    profile, member = s.frame.profile, s.frame.profile.member
    count, shape = record.response.N.shape[0], record.response.N.shape
    free: Planes = {}
    each: list[tuple[int, Forces]] = []
    for part, stress in record.creeping.items():
        phi = stage.creep.get(member.parts[part].material or "", 0.0)
        if phi and part in s.view.parts:
            E = profile.part_modulus(part, s.short.E)
            free[part] = phi * stress / np.where(E > 0.0, E, np.inf)
            aged = profile.part_modulus(part, s.aged.E)
            each.append((part, resultant(aged * free[part], profile.part_moments(part, s.frame.line))))
    law = s.law(s.aged, "aged")
    held = s.held(each, shape)
    if record.creeping_shear is not None and np.any(law.slide):
        soft, now = s.law(s.softened, "short").slide, s.law(s.short, "short").slide
        held = held.plus(sheared(law.slide, soft - now, record.creeping_shear))
    if s.tie is not None and record.creeping_slip is not None:
        held = s.tie.crept(held, record.creeping_slip)
    if not held.any:
        return []
    none = [reversed_reactions(s, record.response.reactions[k], frozenset()) for k in which]
    found, strains = responded(s.frame, s.layout, law, [Atom("")] * len(which), none, _of_atoms(held, which), planes)
    layered = _layered(s, strains, which, count)
    return [Step(s.view.index, "creep", spread(found, which, count), s.aged, s.frame, free, True, layered)]


def summed(steps: Sequence[Step], upto: int | None = None) -> Response:
    """Response at the end of a stage, the last where none is given."""
    some = [s.response for s in steps if upto is None or s.stage <= upto]
    if not some:
        return steps[0].response * 0.0
    total = some[0]
    for r in some[1:]:
        total = total + r
    return total
