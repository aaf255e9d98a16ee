"""Second method for parts that slip: displacements of all layers along the member, stage after stage.

The first method looks for the forces that joints carry; here the displacement of every layer along x, the deflection
and the rotation are the unknowns, one system of first order from end to end, supports and hinges its conditions.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fishbelly.member.description import Member
from fishbelly.member.loads import Axial, Point, Prestress, Shrinkage, Temperature
from fishbelly.member.second_loads import Ground, LoadShare, Pushes, free_strain, pushes
from fishbelly.member.second_method import SecondResult
from fishbelly.member.second_record import Planes, carried, line_moments, lost
from fishbelly.member.second_sections import flexibility
from fishbelly.member.second_shares import ModuliOf, StagedShare, split
from fishbelly.member.second_slip_grid import refined_site
from fishbelly.member.second_slip_layers import Stack
from fishbelly.member.second_slip_record import SlipRecord
from fishbelly.member.second_slip_step import Acting, Moved, Problem, not_resolved, sheet
from fishbelly.member.second_slip_ties import grips_of
from fishbelly.member.second_stages import Site, _arriving, _lasting, _moduli
from fishbelly.member.second_statics import frame
from fishbelly.member.second_step import coupled
from fishbelly.member.stage_view import StageView

Array = NDArray[np.float64]

ROUND_OFF = 1e-12
"""Of the largest deflection: stiff joints, and props that leave little of it, cost some digits."""


def slip_method(
    member: Member,
    x: ArrayLike,
    shares: Sequence[StagedShare],
    single: Sequence[NDArray[np.bool_]],
    lifted: frozenset[str] = frozenset(),
    upto: int | None = None,
) -> SecondResult:
    """Deflections and reactions of a member whose parts slip, at the end of a stage.

    Parameters
    ----------
    member : Member
        The checked description.
    x : array_like, shape (X,)
        Places at which deflections are wanted [m].
    shares : sequence of StagedShare
        Loads; what they do is added.
    single : sequence of ndarray of bool, shape (J,)
        Joints whose fasteners are taken one by one, in each stage; a choice of the model, handed in.
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
        When the member can move freely.
    """
    places = np.atleast_1d(np.asarray(x, dtype=float))
    shares = split(member, shares)
    stack = Stack.of(member)
    stiffest = np.max([stack.stiffness(b) for b in ("nominal", "low", "high")], axis=0)
    site = refined_site(Site.of(member, shares, lifted), stack, stiffest, list(single))
    total, everywhere = np.zeros((2, places.size)), np.zeros((2, *site.grounds[0].intervals.x.shape))
    found, error = np.zeros((len(member.supports), 5)), 0.0
    for share in shares:
        life = SlipLife(site, stack, share, single)
        for ground, moved in life.steps(upto):
            total += moved.deflections(ground, places)
            everywhere += moved.everywhere(ground)
            error += moved.error
        found += life.record.reactions
    largest = max(float(np.abs(everywhere).max()), float(np.abs(total).max(initial=0.0)))
    error = ROUND_OFF + error / largest if largest > 0.0 else 0.0
    return SecondResult(total, found, error, largest, None)


@dataclass(eq=False)
class SlipLife:
    """One share of the loads on its way through the stages, layer by layer."""

    site: Site
    stack: Stack
    share: StagedShare
    single: Sequence[NDArray[np.bool_]]

    def __post_init__(self) -> None:
        self.record = SlipRecord.empty(self.site.grounds[0], self.stack)

    def steps(self, upto: int | None = None) -> Iterator[tuple[Ground, Moved]]:
        """Everything that happens, one after the other, taken into the record."""
        for view in self.site.views[: None if upto is None else upto + 1]:
            happens = [self._release, self._creep] if view.index else []
            for happen in (*happens, self._arrive):
                moved = happen(view)
                if moved is not None:
                    yield self.site.grounds[view.index], moved

    def _acting(self, view: StageView) -> Acting:
        """Return nothing at all, to be added to."""
        ground, L, J = self.site.grounds[view.index], self.stack.count, len(self.stack.joints)
        K, n = ground.intervals.x.shape
        none = Pushes.none((K, n))
        zeros = np.zeros
        return Acting(none, zeros((L, K, n)), zeros((L, K + 1)), zeros((L, K, n)), zeros((J, K, n)), zeros((J, K + 1)))

    def _layer_at(self, view: StageView) -> list[int]:
        """Layer that a force along x enters, border by border."""
        ground, member = self.site.grounds[view.index], self.site.member
        found = [0] * (ground.intervals.a.size + 1)
        levels = [(h, ground.level("centroid", h)) for h in view.hinges]
        for s in member.supports:
            if s.along > 0.0:
                levels.append((s.at, self.site.homes[s.name].level(s.level, s.at)))
        for load in member.loads:
            if isinstance(load, Axial) and load.value and load.case in view.cases:
                levels.insert(0, (load.at, ground.level(load.level, load.at)))
            elif isinstance(load, Point) and load.per and member.rises and load.case in view.cases:
                levels.append((load.at, ground.level("centroid", load.at)))
        for x, level in reversed(levels):
            found[ground.border(x)] = self.stack.at_level(view.parts, x, float(level[0] + ground.line[0]))
        return found

    def _joints(self, view: StageView, which: ModuliOf) -> tuple[Array, Array]:
        """Stiffness of the joints (J, K) per length, and of single fasteners at the borders (J, K + 1)."""
        stack, ground, stage = self.stack, self.site.grounds[view.index], view.stage
        each = stack.stiffness(self.share.band)
        k, springs = (np.zeros((len(stack.joints), ground.intervals.a.size + more)) for more in (0, 1))
        middle = 0.5 * (ground.intervals.a + ground.intervals.b)
        for j, t in enumerate(stack.joints):
            if which.long_term:
                each[j] /= 1.0 + stack.creep(j, stack.material_creep(dict(which.own)))
            elif which.aged == "aged" and stage is not None:
                each[j] /= 1.0 + stage.ageing * self._phi(view)[j]
            if not (t.part in view.parts and t.host in view.parts):
                continue
            if self.single[view.index][j]:
                for x in t.places:
                    springs[j, ground.border(x)] += each[j] * t.spacing
            else:
                k[j] = np.where((middle > t.start) & (middle < t.end), each[j], 0.0)
        return k, springs

    def _phi(self, view: StageView) -> Array:
        """Creep factor of every joint that runs off in a stage."""
        stage, parts = view.stage, self.site.member.parts
        if stage is None or not any(stage.creep.values()):
            return np.zeros(len(self.stack.joints))
        of_part = {i: stage.creep.get(p.material or "", 0.0) for i, p in enumerate(parts)}
        return np.array([self.stack.creep(j, of_part) for j in range(len(self.stack.joints))])

    def _solve(
        self, view: StageView, which: ModuliOf, acting: Acting, settling: LoadShare | None = None
    ) -> tuple[Moved, Array]:
        """Solve on the parts, joints, supports and moduli of a stage; and E."""
        site, ground = self.site, self.site.grounds[view.index]
        E = _moduli(site.member, self.share, view, which)
        law = flexibility(ground.sections, E)
        together = replace(acting.pushes, free=np.concatenate((acting.free.sum(axis=0)[None], acting.pushes.free[1:])))
        planes = 2 if coupled(ground, law, together) else 1
        slide = np.zeros((3, *ground.intervals.x.shape))
        if self.share.slide is not None:
            given = self.share.slide(which)
            for p in range(planes + planes // 2):
                slide[p] = np.asarray(given(ground.intervals.x.ravel(), p)).reshape(slide[p].shape)
        f = frame(ground, site.lifted | view.gone, planes, view.hinges, site.homes)
        sunk = [0.0 if settling is None or not s.sinks else settling.factor(s) * s.sinks for s in site.member.supports]
        grips = grips_of(ground, self.stack, f, sunk, self._layer_at(view))
        made = sheet(ground, self.stack, E, slide, *self._joints(view, which), planes)
        problem = Problem(ground, self.stack, made, grips, planes)
        moved = problem.solve(acting)
        more = not_resolved(problem, moved, site.sampled[view.index].tail)
        return replace(moved, error=moved.error + more), E

    def _release(self, view: StageView) -> Moved | None:
        """What parts and supports that have gone no longer carry acts on what remains."""
        before = self.site.views[view.index - 1]
        old, new = self.site.grounds[before.index], self.site.grounds[view.index]
        acting, changed = self._acting(view), False
        for part in list(self.record.stress) if before.parts != view.parts else ():
            dropped = lost(old, new, part, self.record.stress[part])
            if dropped is not None:
                at = self.stack.standing(int(self.stack.layer[part]), view.parts)
                acting.free[at] += dropped[0]
                acting.pushes.free[1:] += dropped[1:]
                changed = True
            if part not in view.parts:
                self.record.forget(part)
        supports = self.site.member.supports
        gone = [i for i, s in enumerate(supports) if s.name in view.gone - before.gone]
        for i in gone:
            changed |= self._push_back(acting, view, i)
        if not changed:
            return None
        which = _lasting(self.share, view)
        moved, E = self._solve(view, which, acting)
        self.record.reactions[gone] = 0.0
        self.record.take(self.site.grounds[view.index], moved, E, {}, not which.long_term)
        return moved

    def _push_back(self, acting: Acting, view: StageView, i: int) -> bool:
        """Turn the force of a support round, where it held."""
        support = self.site.member.supports[i]
        ground, home = self.site.grounds[view.index], self.site.homes[support.name]
        border, level = ground.border(support.at), home.level(support.level, support.at)
        down, along, couple, across, aside = -self.record.reactions[i]
        acting.pushes.jumps[1:, border] += (-down, -across, couple, aside)
        if along:
            acting.pushes.jumps[3:, border] += along * level
            acting.along[self.stack.at_level(view.parts, support.at, float(level[0] + ground.line[0])), border] += along
        return bool(np.any(self.record.reactions[i]))

    def _creep(self, view: StageView) -> Moved | None:
        """Creep under what is locked in: of the parts, of the shear angle, of the joints."""
        stage, record = view.stage, self.record
        if stage is None or not any(stage.creep.values()) or not record.creeping:
            return None
        member, ground = self.site.member, self.site.grounds[view.index]
        short, aged, softened = (ModuliOf(view.index, False, self.share.own, how) for how in ("", "aged", "softened"))
        E, held = (_moduli(member, self.share, view, w) for w in (short, aged))
        acting, free = self._acting(view), {}
        for part, stress in record.creeping.items():
            phi = stage.creep.get(member.parts[part].material or "", 0.0)
            if phi and part in view.parts:
                free[part] = phi * stress / E[part]
                forces = carried(held[part] * free[part], line_moments(ground, part))
                acting.free[self.stack.layer[part]] += forces[0]
                acting.pushes.free[1:] += forces[1:]
        k, springs = self._joints(view, short)
        phi_joint = self._phi(view)
        acting.own[...] = (phi_joint[:, None] / np.where(k > 0.0, k, np.inf))[..., None] * record.flow
        acting.single[...] = phi_joint[:, None] / np.where(springs > 0.0, springs, np.inf) * record.fasteners
        if self.share.slide is not None:
            angle = self._slid(ground, softened, short)
            acting = replace(acting, pushes=replace(acting.pushes, angle=angle))
        moved, E = self._solve(view, aged, acting)
        record.take(ground, moved, E, free, True)
        return moved

    def _slid(self, ground: Ground, softened: ModuliOf, short: ModuliOf) -> Array:
        """Shear angle that creeps, V (1/GA softened - 1/GA), shape (2, K, n)."""
        assert self.share.slide is not None
        x, V = ground.intervals.x, self.record.sliding
        planes = 3 if np.any(V[1]) else 1
        soft, now = self.share.slide(softened), self.share.slide(short)
        more = [np.asarray(soft(x.ravel(), p) - now(x.ravel(), p)).reshape(x.shape) for p in range(planes)]
        if planes == 1:
            return np.stack((more[0] * V[0], np.zeros_like(V[0])))
        return np.stack((more[0] * V[0] + more[2] * V[1], more[1] * V[1] + more[2] * V[0]))

    def _arrive(self, view: StageView) -> Moved | None:
        """Loads and settlements of the stage."""
        member, ground = self.site.member, self.site.grounds[view.index]
        which = _lasting(self.share, view)
        mine = replace(_arriving(self.share, view), E=_moduli(member, self.share, view, which))
        sinking = [s for s in member.supports if s.sinks and s.name not in view.gone and mine.factor(s)]
        if not sinking and not any(mine.factor(load) for load in member.loads):
            return None
        put = pushes(ground, mine)
        acting = replace(self._acting(view), pushes=replace(put, free=np.zeros_like(put.free)))
        free = self._free(ground, mine)
        for part, strain in free.items():
            forces = carried(mine.E[part] * strain, line_moments(ground, part))
            acting.free[self.stack.layer[part]] += forces[0]
            acting.pushes.free[1:] += forces[1:]
        for border, layer in enumerate(self._layer_at(view)):
            acting.along[layer, border] -= put.jumps[0, border]
        if np.any(put.n):
            self._along_length(ground, view, put, acting)
        moved, E = self._solve(view, which, acting, mine)
        self.record.take(ground, moved, E, free, not which.long_term)
        return moved

    def _along_length(self, ground: Ground, view: StageView, put: Pushes, acting: Acting) -> None:
        """Let loads along x per length enter the layer in which the centroid lies."""
        i, half = ground.intervals, ground.intervals.x.shape[1] // 2
        for k, x in enumerate(0.5 * (i.a + i.b)):
            z = float(ground.centroid[0, k, half] + ground.line[0])
            acting.n[self.stack.at_level(view.parts, float(x), z), k] += put.n[k]

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
                    e, lean = free_strain(ground, load, k)
                    found[k] = found.get(k, 0.0) + factor * np.stack((e - lean * up, lean, np.zeros_like(e)))
        return found
