"""Plane stress of a member made of plates that stand in layers, by quadratic finite elements (scikit-fem).

A reference for beam theory: nothing of the package is used here. Levels are given at the places of the mesh; a layer
is a plate of a width across the plane, webs thin and flanges wide.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Layer:
    """A plate from level `low` to level `high` [m], each shape (X,), `width` across the plane, `count` elements."""

    low: Array
    high: Array
    width: float
    count: int


def work_on_the_end(
    x: Array, layers: Sequence[Layer], E: float, poisson: float, stress: Callable[[Array], tuple[Array, Array]]
) -> float:
    """Work of stresses on the right end of a member whose left end keeps plane.

    Parameters
    ----------
    x : ndarray, shape (X,)
        Places of the mesh [m].
    layers : sequence of Layer
        From the bottom upwards.
    E, poisson : float
        Of all plates [Pa].
    stress : callable
        Stress along x, tension positive, and upwards at levels of the right end [Pa].

    Returns
    -------
    float
        Sum of force times movement [J], twice the energy stored.
    """
    from skfem import (
        Basis,
        BilinearForm,
        ElementQuad0,
        ElementQuad2,
        ElementVector,
        FacetBasis,
        LinearForm,
        MeshQuad,
        condense,
        solve,
    )
    from skfem.helpers import ddot, sym_grad, trace

    rows = [layers[0].low]
    for layer in layers:
        rows += [layer.low + k / layer.count * (layer.high - layer.low) for k in range(1, layer.count + 1)]
    z = np.array(rows)
    number = np.arange(z.size).reshape(z.shape)
    corners = [number[:-1, :-1], number[:-1, 1:], number[1:, 1:], number[1:, :-1]]
    mesh = MeshQuad(np.stack((np.broadcast_to(x, z.shape).ravel(), z.ravel())), np.stack([c.ravel() for c in corners]))
    width = np.repeat([layer.width for layer in layers for _ in range(layer.count)], x.size - 1)
    element = ElementVector(ElementQuad2())
    inside = Basis(mesh, element, intorder=4)
    end = mesh.facets_satisfying(lambda p: np.abs(p[0] - x[-1]) < 1e-9)
    at_end = FacetBasis(mesh, element, facets=end, intorder=4)

    @BilinearForm
    def stiffness(u, v, w):  # type: ignore[no-untyped-def]
        a, b = sym_grad(u), sym_grad(v)
        return w["width"] * E / (1 - poisson**2) * ((1 - poisson) * ddot(a, b) + poisson * trace(a) * trace(b))

    @LinearForm
    def pull(v, w):  # type: ignore[no-untyped-def]
        along, up = stress(w.x[1])
        return w["width"] * (along * v[0] + up * v[1])

    flat = ElementQuad0()
    matrix = stiffness.assemble(inside, width=Basis(mesh, flat, intorder=4).interpolate(width))
    load = pull.assemble(at_end, width=FacetBasis(mesh, flat, facets=end, intorder=4).interpolate(width))
    held = inside.get_dofs(mesh.facets_satisfying(lambda p: np.abs(p[0] - x[0]) < 1e-9))
    upright = held.all(["u^2"])
    middle = upright[np.argmin(np.abs(inside.doflocs[1, upright] - 0.5 * (z[0, 0] + z[-1, 0])))]
    moved = solve(*condense(matrix, load, D=np.concatenate((held.all(["u^1"]), [middle]))))
    return float(load @ moved)
