"""Choose the grid: halve panels until the section's stiffness is resolved, refine towards an apex."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.breakpoints import breakpoints, merged
from fishbelly.member.description import Member
from fishbelly.member.faults import CannotCompute, NoStiffness
from fishbelly.member.geometry import Geometry
from fishbelly.member.loads import Temperature
from fishbelly.member.moduli import Moduli, moduli
from fishbelly.member.openings import opening_round_ends
from fishbelly.member.panels import POINTS, Panels
from fishbelly.member.profile import Group, Profile, group_places, varies
from fishbelly.member.stage_view import StageView, stage_views
from fishbelly.member.topology import crossing_places
from fishbelly.sections.chebyshev import rule, tail

Array = NDArray[np.float64]

RESOLVED = 1e-13
"""Last Chebyshev coefficients against the largest value: stiffness is resolved."""
MOST_ROUNDS = 44
MOST_PANELS = 20_000
APEX = 1e-6
"""Where stiffness extrapolated to a panel's end falls below this share of its largest, it may be an apex."""


@dataclass(frozen=True, eq=False)
class _Batch:
    """Panels waiting to be sampled: ends, anchors, whether they vary and how often they were halved."""

    a: Array
    b: Array
    anchor: NDArray[np.int_]
    varying: NDArray[np.bool_]
    halved: NDArray[np.int_]

    def at(self, index: NDArray[np.generic]) -> _Batch:
        return _Batch(*(v[index] for v in (self.a, self.b, self.anchor, self.varying, self.halved)))


def build_profile(member: Member, more: tuple[float, ...] = ()) -> Profile:
    """Sample a member in its last stage; see `build_profiles`."""
    return build_profiles(member, more)[-1]


def build_profiles(member: Member, more: tuple[float, ...] = ()) -> tuple[Profile, ...]:
    """Sample a member in every stage, on one grid, so that its deflection is resolved to round-off.

    Parameters
    ----------
    member : Member
        The description.
    more : tuple of float
        Further places that shall be borders of panels [m].

    Returns
    -------
    tuple of Profile
        One for each stage, with the same panels; one alone where the member has no stages.

    Raises
    ------
    NoStiffness
        When a stretch has no part.
    CannotCompute
        When the section cannot be resolved.
    """
    stages = [_Stage.of(member, view) for view in stage_views(member)]
    batch = _start(member, [s.geometry for s in stages], breakpoints(member, more))
    kept: list[_Batch] = []
    panels = 0
    most = MOST_PANELS + batch.a.size
    for _ in range(MOST_ROUNDS):
        if not batch.a.size:
            break
        done, worst = _sample(stages, batch)
        kept.append(batch.at(done))
        for s in stages:
            s.keep(done)
        panels += int(done.sum())
        batch = _halved(batch, done, worst)
        if panels + batch.a.size > most:
            break
    if batch.a.size:
        raise CannotCompute(f"the section between {batch.a[0]:.6g} m and {batch.b[0]:.6g} m cannot be resolved")
    return _assembled(kept, stages)


@dataclass(eq=False)
class _Stage:
    """What has been sampled of one stage: `row` of the batch at hand, `kept` rows of panels that are done."""

    geometry: Geometry
    short: Moduli
    name: str
    groups: list[Group]
    kept: list[NDArray[np.intp]]
    row: NDArray[np.intp]
    rows: int = 0

    @classmethod
    def of(cls, member: Member, view: StageView) -> _Stage:
        works = None if view.stage is None else view.parts
        short = moduli(member, stage=view.stage)
        return cls(Geometry(member, works), short, view.name, [], [], np.zeros((0, POINTS), dtype=np.intp))

    def keep(self, done: NDArray[np.bool_]) -> None:
        self.kept.append(self.row[done])


def _sample(stages: list[_Stage], batch: _Batch) -> tuple[NDArray[np.bool_], dict[str, Array]]:
    """Sample the panels of a batch in every stage: which are resolved in all of them, which end in an apex."""
    grid = Panels(batch.a, batch.b, batch.anchor)
    done = np.ones(batch.a.size, dtype=bool)
    apex = np.zeros(int(batch.varying.sum()))
    for stage in stages:
        stage.row = np.zeros((batch.a.size, POINTS), dtype=np.intp)
        for varying in (False, True):
            which = np.flatnonzero(batch.varying == varying)
            if not which.size:
                continue
            x = grid.x[which] if varying else grid.x[which][:, POINTS // 2 : POINTS // 2 + 1]
            with _named(stage.name, len(stages)):
                new = group_places(stage.geometry, x, 0.5 * (batch.a + batch.b)[which], stage.rows)
                _stands(new, stage.short)
            stage.row[which] = stage.rows + np.arange(which.size)[:, None] * x.shape[1] + np.arange(x.shape[1])
            if varying:
                found = _tails(stage.geometry, new, stage.short, stage.rows, which.size, batch.at(which))
                done[which] &= found["done"].astype(bool)
                apex = np.where(apex != 0.0, apex, found["apex"])
            stage.groups += new
            stage.rows += x.size
    return done, {"apex": apex}


@contextmanager
def _named(stage: str, stages: int) -> Iterator[None]:
    """Name the stage in which nothing stands somewhere."""
    try:
        yield
    except NoStiffness as error:
        raise NoStiffness(error.at, f"{error.reason} in stage {stage}") if stages > 1 else error from None


def _start(member: Member, geometries: list[Geometry], breaks: Array) -> _Batch:
    batch = _first(member, breaks)
    if batch.varying.any():
        moving = batch.at(batch.varying)
        grid = Panels(moving.a, moving.b, moving.anchor)
        extra = [x for geometry in geometries for x in crossing_places(geometry, grid)]
        if extra:
            batch = _first(member, merged([*breaks.tolist(), *extra], member.length))
    return batch


def _first(member: Member, breaks: Array) -> _Batch:
    """One panel between any two breaks, anchored where the outline of an opening begins like a root."""
    a, b = breaks[:-1], breaks[1:]
    varying = varies(member, a, b)
    anchor = np.zeros(a.size, dtype=np.int_)
    close = 1e-9 * member.length
    for place in (x for o in member.openings for x in opening_round_ends(o)):
        anchor[varying & (np.abs(a - place) < close)] = -1
        anchor[varying & (np.abs(b - place) < close)] = 1
    return _Batch(a, b, anchor, varying, np.zeros(a.size, dtype=np.int_))


def _stands(new: list[Group], short: Moduli) -> None:
    """See that something is left of the section everywhere."""
    for g in new:
        gone = np.flatnonzero(~(g.stiffness(short).EA > 0.0))
        if gone.size:
            raise NoStiffness(float(g.placed.x[gone[0]]), "nothing is left of the section there")


def _tails(
    geometry: Geometry, new: list[Group], short: Moduli, first: int, count: int, batch: _Batch
) -> dict[str, Array]:
    """What is resolved, and which panels end in an apex (-2 at a, +2 at b).

    Far from the datum coordinates have fewer digits, and no more is asked of the section.
    """
    v = _sampled(geometry.member, new, short, first, count)
    if not np.all(np.isfinite(v)):
        first_bad = int(np.flatnonzero(~np.isfinite(v).all(axis=(0, 2)))[0])
        raise CannotCompute(f"no stiffness between x = {batch.a[first_bad]:.6g} m and {batch.b[first_bad]:.6g} m")
    far = np.hypot(v[3], v[4]).max(axis=-1) / np.maximum(v[8].min(axis=-1), 1e-300)
    unresolved = tail(v[:8], POINTS) - _noise(v[:8], batch) - 100.0 * np.finfo(float).eps * far
    inverse = unresolved[:3].max(axis=0)
    largest = np.maximum(v[8].max(axis=-1), 1e-300)
    levels = [3, 4, 6, 7]
    offset = unresolved[levels] * np.abs(v[levels]).max(axis=-1) / largest
    crossed = unresolved[5] * np.abs(v[5]).max(axis=-1)
    done = np.maximum.reduce([inverse, *offset, crossed]) < RESOLVED
    done |= width_of(batch) < 1e-12
    EI = 1.0 / v[1]
    r = rule(POINTS)
    lowest = APEX * EI.max(axis=-1)
    apex = np.where(EI @ r.left < lowest, -2, np.where(EI @ r.right < lowest, 2, 0))
    for k in np.flatnonzero((apex != 0) & (batch.anchor == 0) & ~done):
        if not _vanishes(geometry, short, batch.a[k], batch.b[k], int(apex[k])):
            apex[k] = 0
    at_zero = (batch.anchor < 0) & (batch.a == 0.0)
    done |= (batch.anchor != 0) & (batch.halved >= np.where(at_zero, 34, 14))
    return {"done": done.astype(float), "apex": apex.astype(float)}


def _sampled(member: Member, new: list[Group], short: Moduli, first: int, count: int) -> Array:
    """What has to be resolved at the points of panels, shape (9, panels, n); size of the section last."""
    columns = np.zeros((9, count * POINTS))
    warm = _warmed(member)
    for g in new:
        s, at = g.stiffness(short), g.rows - first
        size = np.sqrt(np.maximum(s.EI_y, s.EI_z) / s.EA)
        cross = s.EI_yz / np.sqrt(s.EI_y * s.EI_z)
        columns[:6, at] = (1.0 / s.EA, 1.0 / s.EI_y, 1.0 / s.EI_z, s.z_c, s.y_c, cross)
        if warm:
            low, high = g.composition.extent
            columns[6:8, at] = (np.nanmin(low, axis=0), np.nanmax(high, axis=0))
        columns[8, at] = size
    return columns.reshape(9, count, POINTS)


def _warmed(member: Member) -> bool:
    """Whether the loads ask for the section's top and bottom: a temperature gradient."""
    return any(isinstance(v, Temperature) and v.parts is None and v.top != v.bottom for v in member.loads)


def _vanishes(geometry: Geometry, short: Moduli, a: float, b: float, apex: int) -> bool:
    """Whether the section at a panel's end is nothing, and not only thin."""
    end, side = (a, "right") if apex < 0 else (b, "left")
    with np.errstate(all="ignore"):
        there, inside = (
            float(group_places(geometry, np.array([[x]]), np.array([0.5 * (a + b)]), 0, side)[0].stiffness(short).EA[0])
            for x in (end, 0.5 * (a + b))
        )
    return not there > 1e-13 * inside


def width_of(batch: _Batch) -> Array:
    """Width of panels against their distance from the left end."""
    return np.asarray((batch.b - batch.a) / np.maximum(np.abs(batch.b), np.abs(batch.a)))


def _noise(v: Array, batch: _Batch) -> Array:
    """Share of values that round-off in x alone makes uncertain: steep ones cannot be resolved any further."""
    grid = Panels(batch.a, batch.b, batch.anchor)
    steep = np.abs(v @ rule(POINTS).differentiate.T / grid.stretch).max(axis=-1)
    size = np.abs(v).max(axis=-1)
    return np.asarray(8.0 * np.finfo(float).eps * np.abs(batch.b) * steep / np.where(size > 0.0, size, 1.0))


def _halved(batch: _Batch, done: NDArray[np.bool_], worst: dict[str, Array]) -> _Batch:
    """Split panels that are not resolved; those that turn out to end in an apex are anchored there first."""
    left = np.flatnonzero(~done)
    if not left.size:
        return batch.at(left)
    apex_of = np.zeros(batch.a.size)
    apex_of[np.flatnonzero(batch.varying)] = worst["apex"]
    rest = batch.at(left)
    grid = Panels(rest.a, rest.b, rest.anchor)
    middle = grid.place(np.arange(left.size), np.zeros(left.size))
    apex = apex_of[left].astype(np.int_)
    anchor = np.where(rest.anchor != 0, rest.anchor, apex)
    return _Batch(
        np.concatenate((rest.a, middle)),
        np.concatenate((middle, rest.b)),
        np.concatenate((np.where(anchor < 0, anchor, 0), np.where(anchor > 0, anchor, 0))),
        np.concatenate((rest.varying, rest.varying)),
        np.concatenate((rest.halved + 1, rest.halved + 1)),
    )


def _assembled(kept: list[_Batch], stages: list[_Stage]) -> tuple[Profile, ...]:
    a, b = (np.concatenate([getattr(k, f) for k in kept]) for f in ("a", "b"))
    anchor = np.concatenate([k.anchor for k in kept])
    order = np.argsort(a, kind="stable")
    a, b = a[order], b[order]
    b[:-1] = a[1:]
    panels = Panels(a, b, anchor[order])
    return tuple(
        Profile(s.geometry, panels, np.concatenate(s.kept).astype(np.intp)[order], tuple(s.groups), s.rows, s.short)
        for s in stages
    )
