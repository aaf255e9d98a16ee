"""Members whose parts slip, and how their law and response are had on a grid of their own."""

from __future__ import annotations

from typing import Any

import numpy as np
from common import pin, roller, uniform

from fishbelly.member.actions import Frame, actions, atoms
from fishbelly.member.description import Joined, Material, Member, Part, Placing, Shape
from fishbelly.member.forces import Forces
from fishbelly.member.laws import Law, constant
from fishbelly.member.moduli import moduli
from fishbelly.member.nodes import layout
from fishbelly.member.panels import Panels
from fishbelly.member.response import Response, free_of, respond
from fishbelly.member.sampling import build_profile
from fishbelly.member.slip_grid import fastener_springs, fine_borders
from fishbelly.member.slip_law import LayerStrains, SlipLaw
from fishbelly.member.slip_layers import joint_stiffness, layers_of

SLAB = Material("slab", 12e9, G=5e9, expansion=10e-6, creep=2.0)
JOIST = Material("joist", 8e9, G=0.5e9, expansion=5e-6, creep=0.6)


def piece(
    name: str, material: str, width: float | Law, depth: float | Law, start: float, end: float, **more: Any
) -> Part:
    """A rectangle; dimensions in m or laws."""
    laws = {k: v if isinstance(v, Law) else constant(v) for k, v in {"width": width, "depth": depth}.items()}
    return Part(name, material, Shape("rectangle", laws), start, end, **more)


def over(host: str, k: float, **more: Any) -> dict[str, Any]:
    """Placed over another and joined with a stiffness per length [N/m2], or apart."""
    joined = Joined(per_length=k) if k else Joined(apart=True)
    return {"place": Placing("over", host, **more), "joined": joined}


def composite(length: float, k: float, **more: Any) -> Member:
    """A slab 300 x 50 on a joist 50 x 150: EI 150 kN m2 apart, 600 kN m2 rigid."""
    parts = (
        piece("joist", "joist", 0.05, 0.15, 0.0, length),
        piece("slab", "slab", 0.3, 0.05, 0.0, length, **over("joist", k)),
    )
    given = {
        "supports": (pin("A", 0.0), roller("B", length)),
        "loads": (uniform(1000.0, length),),
        "shear": False,
    } | more
    return Member(length, given.pop("parts", parts), (SLAB, JOIST), **given)


class Run:
    """A member with its slip law, on a grid fine enough for it, and its response to everything together."""

    def __init__(self, member: Member, discrete: bool = False, k: np.ndarray | None = None) -> None:
        self.member = member
        self.layers = layers_of(member)
        self.k = joint_stiffness(self.layers) if k is None else k
        which = np.full(len(self.layers.joints), discrete)
        coarse = Frame.of(build_profile(member), moduli(member))
        more = fine_borders(coarse, coarse.short, self.k, which)
        profile = build_profile(member, more)
        self.frame = Frame.of(profile, profile.short)
        smeared, springs = fastener_springs(self.frame, self.layers, self.k, which)
        self.law = SlipLaw.of(self.frame, profile.short, smeared, 2, member.shear, springs)

    @property
    def panels(self) -> Panels:
        return self.frame.profile.panels

    def respond(self) -> tuple[Response, LayerStrains]:
        each = atoms(self.member)
        loads = [actions(self.frame, a) for a in each]
        free = free_of(self.frame, loads, self.frame.short)
        r = respond(self.frame, layout(self.frame), self.law, each, loads, free, 2).combined(np.ones(len(each)))
        return r, self.law.strains(Forces(r.N, r.V, r.M))

    def value(self, field: np.ndarray, x: float, side: str = "right") -> np.ndarray:
        """A field (..., K, n) at one place."""
        k = self.panels.find(np.array([x]), side)
        basis = self.panels.rule.basis(self.panels.local(k, np.array([x])))[0]
        return field[..., int(k[0]), :] @ basis
