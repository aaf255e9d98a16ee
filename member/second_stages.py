"""Second method, stages: a member's life once more, each part's stress followed at the Gauss points.

In every stage first what has gone is released, then the stress locked in creeps, then the loads of the stage arrive.
Nothing is shared with the first method but the description, its stages and moduli, and 1/GA, which is handed in.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fishbelly.member.description import Member
from fishbelly.member.loads import Prestress, SelfWeight, Shrinkage, Temperature
from fishbelly.member.moduli import moduli
from fishbelly.member.second_grid import RULE
from fishbelly.member.second_loads import Ground, LoadShare, Pushes, free_strain, pushes
from fishbelly.member.second_method import ROUND_OFF, SecondResult
from fishbelly.member.second_record import Planes, Record, carried, line_moments, lost
from fishbelly.member.second_sections import Sampled, Sections, Slide, flexibility, sample_stages, sections_on
from fishbelly.member.second_shares import ModuliOf, StagedShare, split
from fishbelly.member.second_statics import WAYS, Hold, frame, sinks
from fishbelly.member.second_step import (
    Solved,
    coupled,
    deflections_at,
    error_of,
    reactions_of,
    shape_of,
    solve_law,
    with_shear,
)
from fishbelly.member.stage_view import StageView, stage_views

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class StagedGround(Ground):
    """What stands in one stage; `earlier` are the stages before it."""

    earlier: tuple[StageView, ...] = ()

    def weighed(self, load: SelfWeight) -> tuple[Sections, frozenset[str]]:
        """Sections in which a self weight finds its parts: those it names, or those no earlier stage has weighed."""
        numbers = {p.name: k for k, p in enumerate(self.member.parts)}
        works = self.works if self.works is not None else frozenset(numbers.values())
        if load.parts is not None:
            named = frozenset(load.parts)
        else:
            named = frozenset(p for p, k in numbers.items() if k in works) - self._weighed_before
        every = works | {numbers[p] for p in named}
        return (self.sections if every == works else sections_on(self.member, every, self.intervals)), named

    @cached_property
    def _weighed_before(self) -> frozenset[str]:
        found: set[str] = set()
        for view in self.earlier:
            for load in self.member.loads:
                if isinstance(load, SelfWeight) and load.case in view.cases:
                    found |= set(load.parts or (self.member.parts[k].name for k in view.parts))
        return frozenset(found)


def staged_method(
    member: Member,
    x: ArrayLike,
    shares: Sequence[StagedShare],
    lifted: frozenset[str] = frozenset(),
    upto: int | None = None,
) -> SecondResult:
    """Deflections and reactions of a member with stages at the end of one of them.

    Parameters
    ----------
    member : Member
        The checked description.
    x : array_like, shape (X,)
        Places at which deflections are wanted [m].
    shares : sequence of StagedShare
        Loads; what they do is added.
    lifted : frozenset of str
        Names of bearings that have lifted off.
    upto : int, optional
        Number of the stage; default the last.

    Returns
    -------
    SecondResult

    Raises
    ------
    NoStiffness
        Where nothing stands in a stage.
    Mechanism
        When the member can move freely in a stage in which something happens.
    """
    places = np.atleast_1d(np.asarray(x, dtype=float))
    shares = split(member, shares)
    site = Site.of(member, shares, lifted)
    total, everywhere = np.zeros((2, places.size)), np.zeros((2, *site.grounds[0].intervals.x.shape))
    reactions, error = np.zeros((len(member.supports), 5)), 0.0
    for share in shares:
        life = Life(site, share, Record.empty(site.grounds[0]))
        for solved in life.steps(upto):
            shape = shape_of(solved)
            total += deflections_at(solved, shape, places)
            everywhere += shape.deflection
            stage = site.grounds.index(solved.ground)
            error += error_of(solved, site.sampled[stage], float(np.abs(shape.deflection).max()))
        reactions += life.record.reactions
    largest = max(float(np.abs(everywhere).max()), float(np.abs(total).max(initial=0.0)))
    error = ROUND_OFF + error / largest if largest > 0.0 else 0.0
    return SecondResult(total, reactions, error, largest, None)


@dataclass(frozen=True, eq=False)
class Site:
    """What all shares have in common: stages, what stands in each, and the supports' levels.

    `homes`: by support, what stood there when it came.
    """

    member: Member
    views: tuple[StageView, ...]
    sampled: tuple[Sampled, ...]
    grounds: tuple[Ground, ...]
    homes: Mapping[str, Ground]
    lifted: frozenset[str]

    @classmethod
    def of(cls, member: Member, shares: Sequence[StagedShare], lifted: frozenset[str]) -> Site:
        """Resolve the sections of every stage, for all moduli that will be needed, about one line."""
        views = stage_views(member)
        sets: list[list[Array]] = []
        slides: list[list[Slide | None]] = []
        short = [moduli(member, stage=v.stage).E for v in views]
        for view in views:
            wanted = [(s, which) for s in shares for which in _needed(s, view)]
            every = [short[view.index], *(_moduli(member, s, view, which) for s, which in wanted)]
            sets.append(list({E.tobytes(): E for E in every}.values()))
            slides.append([s.slide(which) for s, which in wanted if s.slide is not None])
        sampled = sample_stages(member, [v.parts for v in views], sets, slides)
        last = Ground.of(member, sampled[-1].intervals, sampled[-1].sections, short[-1])
        grounds = []
        for view, found, E in zip(views, sampled, short, strict=True):
            c = flexibility(found.sections, E).c - last.line[:, None, None]
            given = member, found.intervals, found.sections, E, last.line, c, view.parts
            grounds.append(StagedGround(*given, earlier=views[: view.index]))
        homes = {
            s.name: next(g for g, v in zip(grounds, views, strict=True) if s.name not in v.gone)
            for s in member.supports
        }
        return cls(member, views, sampled, tuple(grounds), homes, lifted)


def _needed(share: StagedShare, view: StageView) -> Iterator[ModuliOf]:
    """Moduli on which something of a share may happen in a stage."""
    yield _lasting(share, view)
    stage = view.stage
    if stage is not None and stage.creep and not share.long_term:
        yield from (ModuliOf(view.index, False, share.own, how) for how in ("", "aged", "softened"))


def _moduli(member: Member, share: StagedShare, view: StageView, which: ModuliOf) -> Array:
    """E of every part [Pa], shape (P,)."""
    aged: dict[str, float] = {}
    if which.aged and view.stage is not None:
        chi = view.stage.ageing if which.aged == "aged" else 1.0
        aged = {name: 1.0 + chi * phi for name, phi in view.stage.creep.items()}
    return moduli(member, share.band, which.long_term, dict(which.own), view.stage, aged).E


def _arriving(share: StagedShare, view: StageView) -> LoadShare:
    """Loads of a share that arrive in a stage, their moduli left open."""
    factors = {case: f for case, f in share.factors.items() if f and case in view.cases}
    return LoadShare(factors, np.zeros(0), only=share.only)


def _lasting(share: StagedShare, view: StageView) -> ModuliOf:
    """Moduli on which what happens in a stage acts: long-term ones in a long-term stage or for a sustained share."""
    return ModuliOf(view.index, share.long_term or (view.stage is not None and view.stage.long_term), share.own)


@dataclass(eq=False)
class Life:
    """One share of the loads on its way through the stages."""

    site: Site
    share: StagedShare
    record: Record

    def steps(self, upto: int | None = None) -> Iterator[Solved]:
        """Everything that happens, one after the other, taken into the record."""
        for view in self.site.views[: None if upto is None else upto + 1]:
            if view.index:
                yield from self._release(view)
                yield from self._creep(view)
            yield from self._arrive(view)

    def _ground(self, view: StageView) -> Ground:
        return self.site.grounds[view.index]

    def _slide(self, which: ModuliOf) -> Slide | None:
        return None if self.share.slide is None else self.share.slide(which)

    def _solve(
        self,
        view: StageView,
        which: ModuliOf,
        loads: Pushes,
        settling: LoadShare | None = None,
        opened: Mapping[float, float] | None = None,
    ) -> tuple[Solved, Array]:
        """Solve for loads on the parts, supports, hinges and moduli of a stage; and E."""
        site, ground = self.site, self._ground(view)
        E = _moduli(site.member, self.share, view, which)
        law = flexibility(ground.sections, E)
        planes = 2 if coupled(ground, law, loads) else 1
        f = frame(ground, site.lifted | view.gone, planes, view.hinges, site.homes)
        down = np.zeros((len(f.holds), 2)) if settling is None else sinks(ground, f, settling)
        turned = {f.borders.index(ground.border(x)): m for x, m in (opened or {}).items()}
        return solve_law(ground, f, loads, with_shear(ground, law, self._slide(which), planes), down, True, turned), E

    def _release(self, view: StageView) -> Iterator[Solved]:
        """What parts, supports and hinges that have gone, or opened, no longer carry acts on what remains."""
        before = self.site.views[view.index - 1]
        old, new = self._ground(before), self._ground(view)
        loads = Pushes.none(new.intervals.x.shape)
        for part in list(self.record.stress) if before.parts != view.parts else ():
            dropped = lost(old, new, part, self.record.stress[part])
            if dropped is not None:
                loads.free[...] += dropped
            if part not in view.parts:
                self.record.forget(part)
        gone = [k for k, s in enumerate(self.site.member.supports) if s.name in view.gone - before.gone]
        for k in gone:
            self._push_back(loads, k)
        opened = {x: m for x in view.hinges if x not in before.hinges and (m := self._moment_at(new, x))}
        if self.share.slide is not None:
            loads = replace(loads, angle=self._bared(view))
        if not (
            np.any(loads.free) or np.any(loads.jumps) or opened or (loads.angle is not None and np.any(loads.angle))
        ):
            return
        which = _lasting(self.share, view)
        solved, E = self._solve(view, which, loads, opened=opened)
        self.record.reactions[gone] = 0.0
        self.record.reactions += reactions_of(solved)
        self.record.take(solved, E, {}, not which.long_term, view.parts)
        yield solved

    def _push_back(self, loads: Pushes, k: int) -> None:
        """Turn the force of support k round, where it held."""
        support = self.site.member.supports[k]
        home = self.site.homes[support.name]
        border, level = home.border(support.at), home.level(support.level, support.at)
        for way in range(len(WAYS)):
            loads.jumps[:, border] -= self.record.reactions[k, way] * Hold(0, way, level).jump

    def _moment_at(self, ground: Ground, x: float) -> float:
        """Moment that a hinge at x takes away when it opens: what there was about the centroid, turned round."""
        k = ground.border(x)
        if not 0 < k < ground.intervals.a.size:
            return 0.0
        about = self.record.M[0, k] + self.record.N[k] * ground.centroid[0, k]
        return -float(RULE.at_end(about, -1))

    def _creep(self, view: StageView) -> Iterator[Solved]:
        """Creep under the stress locked in, held back by the age-adjusted moduli."""
        stage = view.stage
        if stage is None or not stage.creep or not self.record.creeping:
            return
        member, ground = self.site.member, self._ground(view)
        short, aged, softened = (ModuliOf(view.index, False, self.share.own, how) for how in ("", "aged", "softened"))
        E, held = (_moduli(member, self.share, view, w) for w in (short, aged))
        loads, free = Pushes.none(ground.intervals.x.shape), {}
        for part, stress in self.record.creeping.items():
            phi = stage.creep.get(member.parts[part].material or "", 0.0)
            if phi and part in view.parts:
                free[part] = phi * stress / E[part]
                loads.free[...] += carried(held[part] * free[part], line_moments(ground, part))
        if self.share.slide is not None:
            loads = replace(loads, angle=self._slid(ground, self.share.slide(softened), self.share.slide(short)))
        if not (np.any(loads.free) or (loads.angle is not None and np.any(loads.angle))):
            return
        solved, E = self._solve(view, aged, loads)
        self.record.reactions += reactions_of(solved)
        self.record.take(solved, E, free, True, view.parts)
        yield solved

    def _slid(self, ground: Ground, softened: Slide, short: Slide) -> Array:
        """Shear angle that creeps, V (1/GA softened - 1/GA), shape (2, K, n)."""
        return self._angle(ground, softened, short, self.record.sliding)

    def _angle(self, ground: Ground, softer: Slide, stiffer: Slide, V: Array) -> Array:
        """Shear angle V (1/GA softer - 1/GA stiffer), shape (2, K, n)."""
        i = ground.intervals
        law = flexibility(ground.sections, ground.short)
        both = bool(np.any(V[1])) or coupled(ground, law, Pushes.none(i.x.shape))
        more = [
            np.asarray(softer(i.x.ravel(), p) - stiffer(i.x.ravel(), p)).reshape(i.x.shape)
            for p in range(3 if both else 1)
        ]
        if not both:
            return np.stack((more[0] * V[0], np.zeros_like(V[0])))
        return np.stack((more[0] * V[0] + more[2] * V[1], more[1] * V[1] + more[2] * V[0]))

    def _bared(self, view: StageView) -> Array:
        """Shear angle that V gains as some of the parts on which it arrived go, or are cut, shape (2, K, n)."""
        assert self.share.slide is not None
        ground, member = self._ground(view), self.site.member
        cuts = frozenset(k for k in view.parts if member.parts[k].cuts)
        total = np.zeros((2, *ground.intervals.x.shape))
        for parts in list(self.record.borne):
            left = (parts & view.parts) | cuts
            if left != parts:
                V = self.record.borne.pop(parts)
                was, rest = (
                    self.share.slide(ModuliOf(view.index, self.share.long_term, self.share.own, parts=which))
                    for which in (parts, left)
                )
                total += self._angle(ground, rest, was, V)
                self.record.borne[left] = self.record.borne.get(left, 0.0) + V
        return total

    def _arrive(self, view: StageView) -> Iterator[Solved]:
        """Loads and settlements of the stage."""
        member, ground = self.site.member, self._ground(view)
        which = _lasting(self.share, view)
        mine = replace(_arriving(self.share, view), E=_moduli(member, self.share, view, which))
        sinking = [s for s in member.supports if s.sinks and s.name not in view.gone and mine.factor(s)]
        if not sinking and not any(mine.factor(load) for load in member.loads):
            return
        solved, E = self._solve(view, which, pushes(ground, mine), settling=mine)
        self.record.reactions += reactions_of(solved, mine)
        self.record.take(solved, E, self._free(ground, mine), not which.long_term, view.parts)
        yield solved

    def _free(self, ground: Ground, share: LoadShare) -> Planes:
        """Free strain of the parts by the loads of a share, as planes about the line."""
        found: Planes = {}
        up = ground.sections.about[1] - ground.line[0]
        for load in ground.member.loads:
            factor = share.factor(load)
            if not factor or not isinstance(load, Temperature | Shrinkage | Prestress):
                continue
            for k in sorted(ground.works or ()):
                if ground.member.parts[k].material is not None:
                    e, a = (factor * v for v in free_strain(ground, load, k))
                    found[k] = found.get(k, 0.0) + np.stack((e - a * up, a, np.zeros_like(a)))
        return found
