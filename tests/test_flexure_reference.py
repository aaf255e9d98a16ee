"""Shear flexibility against quadratic finite elements on a graded grid, by another library."""

from __future__ import annotations

from itertools import pairwise

import numpy as np
import pytest
import skfem
from common import check_close
from flexure_shapes import CONCRETE, ONE, STEEL, Moduli, plate, solve

from fishbelly.sections.outlines import Outline

Box = tuple[float, float, float, float]

REFERENCE = 1e-5
"""Relative; what re-entrant corners, to which the grid is graded, and h⁶ cost the reference."""


def graded(breaks: list[float], cuts: int) -> np.ndarray:
    """Grid lines that crowd towards every break, halving nine times, each interval cut in equal parts."""
    lines = [breaks[0]]
    for a, b in pairwise(breaks):
        half = 0.5 * 0.5 ** np.arange(9, -1.0, -1.0)
        lines += [*(a + (b - a) * half), *(b - (b - a) * half[-2::-1]), b]
    steps = np.arange(cuts) / cuts
    return np.array([*(x + (y - x) * s for x, y in pairwise(lines) for s in steps), lines[-1]])


def reference(boxes: list[Box], moduli: Moduli) -> tuple[float, float]:
    """F_zz and F_yy of boxes (left, right, bottom, top) that do not overlap; y and z axes principal.

    Quadratic elements miss the energy by h⁴: two grids are extrapolated.
    """
    coarse, fine = (on_grid(boxes, moduli, cuts) for cuts in (1, 2))
    return (16 * fine[0] - coarse[0]) / 15, (16 * fine[1] - coarse[1]) / 15


def on_grid(boxes: list[Box], moduli: Moduli, cuts: int) -> tuple[float, float]:
    ys, zs = (graded(sorted({b[i] for b in boxes} | {b[i + 1] for b in boxes}), cuts) for i in (0, 2))
    mesh = skfem.MeshQuad.init_tensor(ys, zs)
    y, z = mesh.p[:, mesh.t].mean(axis=1)
    part = np.full(y.size, -1)
    for k, (left, right, bottom, top) in enumerate(boxes):
        part[(y > left) & (y < right) & (z > bottom) & (z < top)] = k
    kept = np.flatnonzero(part >= 0)
    mesh = mesh.restrict(kept)
    e, g = (np.array([m[i] for m in moduli])[part[kept]][:, None] for i in (0, 1))
    basis = skfem.Basis(mesh, skfem.ElementQuad2())
    y, z = np.asarray(basis.global_coordinates())
    weight = e * basis.dx
    y_c, z_c = (weight * y).sum() / weight.sum(), (weight * z).sum() / weight.sum()
    stiffness = skfem.BilinearForm(lambda u, v, w: w.g * (u.grad[0] * v.grad[0] + u.grad[1] * v.grad[1]))
    field = np.broadcast_to(g, weight.shape)
    matrix = skfem.asm(stiffness, basis, g=field)
    found = []
    for arm in (z - z_c, y - y_c):
        ei = (weight * arm**2).sum()
        load = skfem.asm(skfem.LinearForm(lambda v, w: w.f * v), basis, f=e * arm / ei)
        found.append(float(load @ skfem.solve(*skfem.condense(matrix, load, D=np.array([0])))))
    return found[0], found[1]


def drawn(boxes: list[Box]) -> tuple[Outline, ...]:
    return tuple(plate(r - a, t - b, 0.5 * (a + r), 0.5 * (b + t)) for a, r, b, t in boxes)


I_BOXES = [(-0.06, 0.06, 0.0, 0.014), (-0.0035, 0.0035, 0.014, 0.29), (-0.075, 0.075, 0.29, 0.3)]
BOX_BOXES = [(-0.1, -0.09, 0.0, 0.3), (0.09, 0.1, 0.0, 0.3), (-0.09, 0.09, 0.0, 0.012), (-0.09, 0.09, 0.288, 0.3)]


@pytest.mark.parametrize(
    "boxes, moduli",
    [
        (I_BOXES, ONE * 3),
        ([*I_BOXES, (-0.6, 0.6, 0.3, 0.48)], (STEEL, STEEL, STEEL, CONCRETE)),
        ([(-0.1, 0.1, 0.0, 0.02), (-0.05, 0.05, 0.02, 0.2)], ((20.0, 20.0), (1.0, 1.0))),
        (BOX_BOXES, ONE * 4),
    ],
    ids=["I", "slab on steel", "timber on a plate, 20 times as stiff", "box"],
)
def test_against_quadratic_elements(boxes: list[Box], moduli: Moduli) -> None:
    f_zz, f_yy = reference(boxes, moduli)
    f = solve(drawn(boxes), moduli)
    check_close(f.F_zz[0], f_zz, REFERENCE)
    check_close(f.F_yy[0], f_yy, REFERENCE)
