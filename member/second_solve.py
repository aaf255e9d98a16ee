"""Second method, solution: the system of one frame set up, solved, refined, and read back."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.faults import Mechanism
from fishbelly.member.second_statics import Affine, Parameters, System

Array = NDArray[np.float64]


def solve_parameters(
    system: System,
    over: Array,
    by_left: Array,
    by_right: Array,
    by_loads: Array,
    bend: float,
    refine: bool = True,
) -> Parameters:
    """Find the parameters at all nodes.

    Parameters
    ----------
    system : System
        Unknowns.
    over : ndarray, shape (segments, 5)
        What the loads leave over where the two halves of a segment meet.
    by_left, by_right : ndarray, shape (segments, 5, 5)
        Movements of the right end against the left end (row) by unit forces at each end (column).
    by_loads : ndarray, shape (segments, 5)
        The same by the loads and free strain.
    bend : float
        A typical 1/EI, to scale with [1/(N m2)].
    refine : bool
        Refine the solution on residuals of higher precision.

    Raises
    ------
    Mechanism
        When something can move freely.
    """
    rows: list[tuple[list[int], Array, float]] = []
    cut = system.frame.cut
    last = len(cut.stretches) - 1
    for k in range(last + 1):
        left, right = system.right_of(k), system.left_of(k + 1)
        _equilibrium(system, rows, k, left, right, over[k])
        if not ((k == 0 and cut.free_left) or (k == last and cut.free_right)):
            move = by_left[k] @ left.coefficients, by_right[k] @ right.coefficients
            known = by_left[k] @ left.constant + by_right[k] @ right.constant + by_loads[k]
            _compatibility(system, rows, k, left.columns + right.columns, np.hstack(move), known)
    _held(system, rows)
    matrix, b = np.zeros((system.count, system.count)), np.zeros(system.count)
    for i, (columns, row, value) in enumerate(rows):
        np.add.at(matrix[i], columns, row)
        b[i] = value
    length = float(np.mean(cut.end - cut.start))
    x, correction = _solved(matrix, b, _units(system, length, bend), refine)
    return _read(system, x, correction)


def _held(system: System, rows: list[tuple[list[int], Array, float]]) -> None:
    """What supports hold stays where they have come to rest, or presses their springs."""
    f = system.frame
    for k, hold in enumerate(f.holds):
        columns = [system.move[hold.node, c] for c in f.active]
        row = hold.movement[f.active]
        if hold.rigid:
            # springs beside a rigid support take no part: the rigid one keeps the place
            rows.append((columns, row, float(system.sinks[k, 0])))
        else:
            full = np.append(row * hold.spring, 1.0)
            rows.append(([*columns, system.hold[k]], full, float(system.sinks[k, 1])))


def _equilibrium(
    system: System, rows: list[tuple[list[int], Array, float]], k: int, left: Affine, right: Affine, over: Array
) -> None:
    """Forces of both halves agree at the split."""
    cut = system.frame.cut
    s = cut.stretches[k]
    place = cut.intervals.a[s.split] if s.split < cut.intervals.a.size else cut.intervals.b[-1]
    a, b = _carried(place - cut.start[k]), _carried(place - cut.end[k])
    coefficients = np.hstack((a @ left.coefficients, -b @ right.coefficients))
    known = a @ left.constant - b @ right.constant + over
    for c in system.frame.active:
        rows.append((left.columns + right.columns, coefficients[c], -float(known[c])))


def _carried(distance: float) -> Array:
    """Carry the forces (N, V, V across, M, M across) over an unloaded distance [m]."""
    t = np.eye(5)
    t[3, 1] = t[4, 2] = distance
    return t


def _compatibility(
    system: System,
    rows: list[tuple[list[int], Array, float]],
    k: int,
    force_columns: list[int],
    by_force: Array,
    known: Array,
) -> None:
    """The right end moves as the left end, turned with it, and strained."""
    f = system.frame
    length = float(f.cut.end[k] - f.cut.start[k])
    for c in f.active:
        columns, row = [system.move[k + 1, c], system.move[k, c]], [1.0, -1.0]
        if c in (1, 2):
            columns.append(system.move[k, c + 2])
            row.append(-length)
        if k in system.kink and c in (0, 1, 3):
            columns.append(system.kink[k])
            row.append({0: f.hinges[k], 1: -length, 3: -1.0}[c])
        rows.append((columns + force_columns, np.concatenate((row, -by_force[c])), float(known[c])))


def _units(system: System, length: float, bend: float) -> Array:
    """A typical size of each unknown, by dimension."""
    unit = np.ones(system.count)
    for (_, c), k in system.move.items():
        unit[k] = bend * length ** (3 if c < 3 else 2)
    for k in system.kink.values():
        unit[k] = bend * length**2
    for (_, c), k in system.force.items():
        unit[k] = 1.0 if c < 3 else length
    for k, hold in zip(system.hold, system.frame.holds, strict=True):
        unit[k] = 1.0 if hold.way in (0, 1, 3) else length
    return unit


def _solved(matrix: Array, b: Array, unit: Array, refine: bool) -> tuple[Array, float]:
    """Solve, refine on residuals of higher precision, and say how far the first refinement moved."""
    scaled = matrix * unit
    size = np.abs(scaled).max(axis=1)
    if np.any(size == 0.0):
        raise Mechanism("the member can move without straining")
    scaled, b = scaled / size[:, None], b / size
    try:
        x = np.linalg.solve(scaled, b)
        first = 0.0
        if refine and np.any(b):
            wide, target = scaled.astype(np.longdouble), b.astype(np.longdouble)
            for turn in range(2 if b.size < 500 else 1):
                step = np.linalg.solve(scaled, (target - wide @ x.astype(np.longdouble)).astype(float))
                x = x + step
                if turn == 0:
                    first = float(np.abs(step).max() / np.abs(x).max())
    except np.linalg.LinAlgError:
        raise Mechanism("the member can move without straining") from None
    if not np.all(np.isfinite(x)) or np.abs(x).max(initial=0.0) > 1e14 * max(np.abs(b).max(initial=0.0), 1e-300):
        raise Mechanism("the member can move without straining")
    return x * unit, first


def _read(system: System, x: Array, correction: float) -> Parameters:
    f = system.frame
    count = len(f.cut.stretches)

    def value(a: Affine) -> Array:
        return np.asarray(a.constant + a.coefficients @ x[a.columns])

    left = np.array([value(system.right_of(k)) for k in range(count)])
    right = np.array([value(system.left_of(k + 1)) for k in range(count)])
    before = np.zeros((count + 1, 5))
    for j in range(count + 1):
        for c in f.active:
            before[j, c] = x[system.move[j, c]] if (j, c) in system.move else np.nan
    after = before.copy()
    for j, k in system.kink.items():
        after[j, 0] -= f.hinges[j] * x[k]
        after[j, 3] += x[k]
    forces = x[system.hold]
    _nothing_pushes(system, forces)
    return Parameters(left, right, before, after, forces, correction)


def _nothing_pushes(system: System, forces: Array) -> None:
    """See that no force comes on what is held for reference only."""
    size = max(float(np.abs(forces).max(initial=0.0)), float(np.abs(system.jumps[:3]).max(initial=0.0)))
    for hold, force in zip(system.frame.holds, forces, strict=True):
        if hold.only_reference and abs(force) > 1e-7 * size:
            what = "along the member" if hold.way == 1 else "sideways"
            raise Mechanism(f"the member can move {what}, and a load pushes it")
