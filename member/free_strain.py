"""Free strain of parts as one plane per part: temperature, shrinkage, prestress.

The plane is e_f = e - k_z' c, kept as strain on the datum line and two slopes: e_f(y, z) = e + a z + b y.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.loads import Load, Prestress, Shrinkage, Temperature
from fishbelly.member.moduli import Moduli
from fishbelly.member.profile import Group, Profile

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class FreePlane:
    """Free strain of the parts of one group at its places, each field of shape (P, S).

    `e`: strain on the datum line; `a`, `b`: change with z and with y [1/m].
    """

    e: Array
    a: Array
    b: Array


def free_plane(profile: Profile, load: Load, group: Group, x: Array, short: Moduli) -> FreePlane | None:
    """Free strain that a load gives the parts of a group.

    Parameters
    ----------
    profile : Profile
        The sampled member.
    load : Load
        Any load.
    group : Group
        Places with the same parts present.
    x : ndarray, shape (S,)
        The places [m].
    short : Moduli
        Short-term moduli, with which a prestressing force becomes a strain.

    Returns
    -------
    FreePlane or None
        None where the load gives no free strain here.
    """
    member = profile.member
    parts = [member.parts[i] for i in group.placed.index]
    names = [p.name for p in parts]
    shape = (len(parts), x.size)
    e, a = np.zeros(shape), np.zeros(shape)
    if isinstance(load, Temperature):
        inside = (x > load.start) & (x < load.end)
        expansion = np.array([member.material(p.material or "").expansion or 0.0 for p in parts])[:, None]
        if load.parts is not None:
            rise = np.array([load.parts.get(n, 0.0) for n in names])[:, None]
            e = expansion * rise * inside
        else:
            bottom, top = group.composition.extent
            low, high = np.nanmin(bottom, axis=0), np.nanmax(top, axis=0)
            gradient = (load.top - load.bottom) / (high - low)
            e = expansion * (load.bottom - gradient * low) * inside
            a = expansion * gradient * inside
    elif isinstance(load, Shrinkage) and load.part in names:
        e[names.index(load.part)] = -load.strain * ((x > load.start) & (x < load.end))
    elif isinstance(load, Prestress) and load.part in names:
        k = names.index(load.part)
        if load.strain is not None:
            e[k] = -load.strain
        elif load.force is not None:
            # the strain it is fixed with; over a run-in the force it passes on grows with the modulus that works
            stiff = short.E[group.placed.index[k]] * group.moments.area[k]
            e[k] = -load.force / np.where(stiff > 0.0, stiff, np.inf)
    if not (np.any(e) or np.any(a)):
        return None
    return FreePlane(e, a, np.zeros(shape))


def resultants(plane: FreePlane, group: Group, E: Array) -> tuple[Array, Array, Array]:
    """Forces that would hold the free strain back: ∫E e_f (1, -z, -y) dA about the datum, each shape (S,).

    Added to the forces N, M_y, M_z they give the strains of the section.
    """
    m = group.moments
    mean = plane.e + plane.a * m.z + plane.b * m.y
    force = E * m.area * mean
    moment_y = -(force * m.z + E * (plane.a * m.zz + plane.b * m.yz))
    moment_z = -(force * m.y + E * (plane.a * m.yz + plane.b * m.yy))
    return force.sum(axis=0), moment_y.sum(axis=0), moment_z.sum(axis=0)
