"""Layers of a member whose parts slip on each other, and the joints between them.

A layer is a set of parts that hang together rigidly. Every part with a soft joint begins a layer of its own, and the
part it is placed against lies in another: the joints make a tree whose root holds the parts without a host.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.description import Member, Part
from fishbelly.member.faults import CannotCompute

Array = NDArray[np.float64]


@dataclass(frozen=True)
class SlipJoint:
    """One joint that slips.

    Parameters
    ----------
    part, host : int
        Numbers of the part that is fixed and of the part it is placed against.
    layer, on : int
        Layers of the two.
    start, end : float
        Extent of the part along x [m].
    fasteners : int
        Fasteners at one place along x: rows, of both copies where the part is a pair.
    pitch : float or None
        Distance between these places [m].
    """

    part: int
    host: int
    layer: int
    on: int
    start: float
    end: float
    fasteners: int
    pitch: float | None

    def places(self) -> Array:
        """Places of the fasteners along x [m]: as many as fit at the pitch, half a space from either end."""
        if self.pitch is None:
            return np.zeros(0)
        length = self.end - self.start
        count = max(1, round(length / self.pitch))
        return self.start + (np.arange(count) + 0.5) * length / count


@dataclass(frozen=True, eq=False)
class Layers:
    """Layers and joints of a member.

    Parameters
    ----------
    member : Member
        The description.
    parts : tuple of tuple of int
        Numbers of the parts of each of the L layers; the first is the root. Parts that cut belong to none.
    joints : tuple of SlipJoint
        The J = L - 1 joints; joint j fixes layer j + 1.
    """

    member: Member
    parts: tuple[tuple[int, ...], ...]
    joints: tuple[SlipJoint, ...]

    @property
    def count(self) -> int:
        """Number of layers."""
        return len(self.parts)

    @property
    def beyond(self) -> Array:
        """Whether a layer lies beyond a joint, seen from the root: 1 or 0, shape (J, L)."""
        result = np.zeros((len(self.joints), self.count))
        for layer in range(1, self.count):
            at = layer
            while at:
                result[at - 1, layer] = 1.0
                at = self.joints[at - 1].on
        return result

    def of(self, part: int) -> int:
        """Layer of a part; -1 for one that cuts."""
        return next((k for k, some in enumerate(self.parts) if part in some), -1)


def has_soft_joints(member: Member) -> bool:
    """Whether any part slips on its host."""
    return any(_soft(p) for p in member.parts)


def slip_left_out(member: Member) -> list[str]:
    """Say, where a section is looked at by itself, that its parts act together there though they slip on each other."""
    names = [p.name for p in member.parts if _soft(p)]
    if not names:
        return []
    which = "the joint of" if len(names) == 1 else "the joints of"
    return [
        f"{which} {', '.join(names)} {'slips' if len(names) == 1 else 'slip'}: this is the section with rigid joints; "
        "how stiff the member is with slip depends on its length and supports, see `deflect`"
    ]


def _soft(part: Part) -> bool:
    return part.material is not None and part.joined is not None and part.joined.soft


def layers_of(member: Member) -> Layers:
    """Sort the parts of a member into layers.

    Raises
    ------
    CannotCompute
        When a part with a soft joint is placed against no other.
    """
    number = {p.name: k for k, p in enumerate(member.parts)}
    layer: dict[int, int] = {}
    groups: list[list[int]] = [[]]
    joints: list[SlipJoint] = []
    for k, part in enumerate(member.parts):
        if part.material is None:
            continue
        host = number.get(part.place.host, -1)
        if _soft(part):
            if host < 0:
                raise CannotCompute(f'the joint of part "{part.name}" slips on nothing: it is placed against no part')
            on = layer.get(host, 0)
            layer[k] = len(groups)
            groups.append([k])
            joints.append(_joint(part, k, host, layer[k], on))
        else:
            layer[k] = layer.get(host, 0)
            groups[layer[k]].append(k)
    return Layers(member, tuple(tuple(g) for g in groups), tuple(joints))


def _joint(part: Part, number: int, host: int, layer: int, on: int) -> SlipJoint:
    assert part.joined is not None
    fasteners = part.joined.rows * (2 if part.pair else 1)
    return SlipJoint(number, host, layer, on, part.start, part.end, fasteners, part.joined.pitch)


def joint_creep(member: Member, joint: SlipJoint, own: dict[str, float] | None = None) -> float:
    """Creep factor of a joint's stiffness: as given, else from the materials of the two parts.

    Twice the factor of two parts that creep alike, 2 √(φ₁ φ₂) of two unlike, φ where only one creeps.

    Parameters
    ----------
    member : Member
        The description.
    joint : SlipJoint
        The joint.
    own : dict of str to float, optional
        Creep factors of single parts that replace their material's.

    Returns
    -------
    float

    Notes
    -----
    EN 1995-1-1:2004, 2.3.2.2(3) and (4) for timber on timber and on wood-based material; φ alone for timber on steel
    or concrete counted as not creeping.
    """
    part, host = member.parts[joint.part], member.parts[joint.host]
    assert part.joined is not None
    if part.joined.creep is not None:
        return part.joined.creep
    first, second = (
        (own or {}).get(p.name, (member.material(p.material).creep or 0.0) if p.material else 0.0) for p in (part, host)
    )
    if first > 0.0 and second > 0.0:
        return float(2.0 * np.sqrt(first * second))
    return first + second


def joint_stiffness(
    layers: Layers, band: str = "nominal", long_term: bool = False, own: dict[str, float] | None = None
) -> Array:
    """Slip stiffness of every joint per length [N/m2], shape (J,); both copies of a pair together, 0 where apart.

    Parameters
    ----------
    layers : Layers
        Layers and joints.
    band : {"nominal", "low", "high"}
        Which end of each joint's `band`; joints without one keep their stiffness.
    long_term : bool
        Divide by 1 + creep of the joint (EN 1995-1-1:2004, 2.3.2.2(1), equation (2.9)).
    own : dict of str to float, optional
        Creep factors of single parts that replace their material's.
    """
    found = []
    for joint in layers.joints:
        part = layers.member.parts[joint.part]
        assert part.joined is not None
        stiffness = part.joined.flow_stiffness or 0.0
        if band != "nominal" and part.joined.band is not None and stiffness:
            given = part.joined.per_length if part.joined.per_length is not None else part.joined.stiffness
            stiffness *= part.joined.band[0 if band == "low" else 1] / (given or 1.0)
        if long_term:
            stiffness /= 1.0 + joint_creep(layers.member, joint, own)
        found.append(stiffness * (2.0 if part.pair else 1.0))
    return np.array(found)
