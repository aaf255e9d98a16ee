"""What joints that slip do under given forces: strains of the layers, slip at ends, force per fastener along x."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.extremes import Extreme, largest
from fishbelly.member.forces import Forces
from fishbelly.member.moduli import Moduli
from fishbelly.member.response import Response
from fishbelly.member.section_law import ElasticLaw
from fishbelly.member.slip_forces import LayeredForces
from fishbelly.member.slip_law import LayerStrains, SlipLaw
from fishbelly.member.slip_layers import layers_of

Array = NDArray[np.float64]


def layer_strains(law: SlipLaw, response: Response, held: LayeredForces | None = None) -> LayerStrains:
    """Strains of every layer under a response, axes in front of (K, n) kept.

    Parameters
    ----------
    law : SlipLaw
        The law with which the response was found.
    response : Response
        The response.
    held : LayeredForces, optional
        Forces that hold its free strain back, with the response's axes.
    """
    forces = Forces(response.N, response.V, response.M)
    return law.strains(forces if held is None else held.plus(forces))


def part_strain(law: SlipLaw, strains: LayerStrains, part: int) -> Array:
    """Strain plane of a part about the analysis line, shape (3, ..., K, n): strain = v0 + v1 c0 + v2 c1.

    In place of (axial, -curvature) of the whole member, which has one axial strain where parts do not slip.
    """
    axial = strains.layer_axial[law.layers.of(part)]
    return np.stack((axial, -strains.curvature[0], -strains.curvature[1]))


def bounds(frame: Frame, moduli: Moduli, planes: int, shear: bool) -> tuple[SlipLaw, ElasticLaw]:
    """Laws of the same member with its soft joints taken away, and with them rigid."""
    rigid = ElasticLaw.of(frame, moduli, planes, shear)
    loose = SlipLaw.of(frame, moduli, np.zeros(len(layers_of(frame.profile.member).joints)), planes, shear)
    return loose, rigid


@dataclass(frozen=True, eq=False)
class JointSlip:
    """One joint along the member.

    Parameters
    ----------
    part, to : str
        Names of the part and of what it is fixed to.
    start, end : float
        Ends of the joint [m].
    slip : tuple of float
        Slip just inside its ends: movement along x of the part against the other [m].
    flow : ndarray, shape (K, n)
        Force per length that the joint puts into the part, along x [N/m].
    per_fastener : ndarray, shape (K, n), or None
        The same for one fastener [N]; None without a pitch.
    single : tuple of (float, float)
        Place [m] and force [N] of every fastener, where these are taken one by one.
    most_flow, most_force, most_slip : Extreme or None
        Largest by size of each, with its sign.
    """

    part: str
    to: str
    start: float
    end: float
    slip: tuple[float, float]
    flow: Array
    per_fastener: Array | None
    single: tuple[tuple[float, float], ...]
    most_flow: Extreme
    most_force: Extreme | None
    most_slip: Extreme


def joint_slips(law: SlipLaw, strains: LayerStrains) -> tuple[JointSlip, ...]:
    """Slip and forces of every joint.

    Parameters
    ----------
    law : SlipLaw
        The law.
    strains : LayerStrains
        Its strains under one set of forces, fields of shape (K, n) behind the joint.

    Returns
    -------
    tuple of JointSlip
        In the order of the joints. Fasteners of a `pair` count on both sides: a force is that of one of them.
    """
    return tuple(_joint_slip(law, strains, j) for j in range(len(law.layers.joints)))


def _joint_slip(law: SlipLaw, strains: LayerStrains, j: int) -> JointSlip:
    joint, panels = law.layers.joints[j], law.panels
    parts = law.layers.member.parts
    first, stop = panels.border(joint.start), panels.border(joint.end)
    slip, flow = strains.slip[j], strains.flow[j]
    ends = float(slip[first] @ panels.rule.left), float(slip[stop - 1] @ panels.rule.right)
    springs = law.chain.borders.springs[:, j]
    places = np.flatnonzero(springs)
    single = tuple((float(law.chain.borders.at[b]), float(strains.fasteners[j, b]) / joint.fasteners) for b in places)
    per_fastener = None
    most_force = None
    if single:
        at, force = max(single, key=lambda v: abs(v[1]))
        most_force = Extreme(force, at, np.zeros(0, dtype=bool))
    elif joint.pitch is not None:
        per_fastener = flow * joint.pitch / joint.fasteners
        most_force = _most(law, per_fastener, first, stop)
    most_flow, most_slip = _most(law, flow, first, stop), _most(law, slip, first, stop)
    names = parts[joint.part].name, parts[joint.host].name
    return JointSlip(*names, joint.start, joint.end, ends, flow, per_fastener, single, most_flow, most_force, most_slip)


def _most(law: SlipLaw, field: Array, first: int, stop: int) -> Extreme:
    """Largest value by size with its sign; of equal ones of either sign the leftmost."""
    up, down = largest(law.panels, field, first, stop), largest(law.panels, -field, first, stop)
    tie = abs(up.value - down.value) <= 1e-9 * max(abs(up.value), abs(down.value))
    if (down.value > up.value and not tie) or (tie and down.at < up.at):
        return Extreme(-down.value, down.at, down.on)
    return up
