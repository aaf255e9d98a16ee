"""The section law of a member whose parts slip on each other: exact partial interaction, tied along x.

Layers share the curvature and the shear angle; each has an axial strain of its own, counted at the analysis line, so
that the slip of a joint changes by the difference of two strains however the layers taper. What a joint carries at
one place depends on all others: forces go in and strains come out for the whole member at once.

Source: N. M. Newmark, C. P. Siess, I. M. Viest (1951) for two layers; U. A. Girhammar, V. K. A. Gopu, J. Struct. Eng.
ASCE 119 (1993) 1265-1282, first order (both from memory); any number of layers by the same equations.
"""

from __future__ import annotations

from collections.abc import Collection
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.faults import CannotCompute
from fishbelly.member.forces import Forces
from fishbelly.member.moduli import Moduli
from fishbelly.member.panels import Panels
from fishbelly.member.section_law import Strains
from fishbelly.member.slip_chain import Borders, Chain
from fishbelly.member.slip_entry import Entries, entries
from fishbelly.member.slip_forces import LayeredForces
from fishbelly.member.slip_layers import Layers, layers_of
from fishbelly.member.slip_panels import Inside, Transfer
from fishbelly.member.slip_sections import LayerSections, layer_sections, strain_differences

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class LayerStrains(Strains):
    """Strains of a member made of layers, and what its joints do.

    `axial` is what works with N: the strain of the layer through which a force along x passes.

    Parameters
    ----------
    layer_axial : ndarray, shape (L, ..., K, n)
        Strain of each layer on the analysis line; strain = layer_axial - sum of curvature * c. Zero where the
        layer is not there.
    layer_force : ndarray, shape (L, ..., K, n)
        Axial force of each layer, tension positive [N].
    joint_force : ndarray, shape (J, ..., K, n)
        Axial force of all that lies beyond each joint [N].
    flow : ndarray, shape (J, ..., K, n)
        Force per length that each joint passes on, d(joint_force)/dx where no load along x enters [N/m]; single
        fasteners left out.
    slip : ndarray, shape (J, ..., K, n)
        Movement along x of the part against its host [m].
    fasteners : ndarray, shape (J, ..., K + 1)
        Force of single fasteners at the borders, of all rows together, as `flow` [N].
    """

    layer_axial: Array
    layer_force: Array
    joint_force: Array
    flow: Array
    slip: Array
    fasteners: Array


@dataclass(frozen=True, eq=False)
class SlipLaw:
    """Flexibility of a member made of layers, for one set of moduli and joint stiffnesses.

    Parameters
    ----------
    panels : Panels
        The grid.
    layers : Layers
        Layers and joints.
    sections : LayerSections
        Layers at the grid points.
    bend : ndarray, shape (3, K, n)
        Curvature by moment of all layers on their own: of plane 0, of plane 1, and by the other's [1/(N m2)].
    entry : Entries
        Where forces along x enter.
    active : ndarray of bool, shape (J, K)
        Panels in which both layers of a joint stand.
    k : ndarray, shape (J, K, n)
        Stiffness of the joints [N/m2].
    transfer, chain : Transfer, Chain
        The panels, and the member put together of them.
    """

    panels: Panels
    layers: Layers
    sections: LayerSections
    bend: Array
    entry: Entries
    active: NDArray[np.bool_]
    k: Array
    transfer: Transfer
    chain: Chain

    local = False
    """Strains at one place follow from forces everywhere."""

    @classmethod
    def of(
        cls,
        frame: Frame,
        moduli: Moduli,
        stiffness: Array,
        planes: int,
        shear: bool,
        springs: Array | None = None,
        lifted: Collection[str] = (),
    ) -> SlipLaw:
        """Make the law for a set of moduli.

        Parameters
        ----------
        frame : Frame
            The grid, with the borders that `slip_grid.fine_borders` asks for.
        moduli : Moduli
            Set of moduli.
        stiffness : ndarray, shape (J,) or (J, K, n)
            Slip stiffness of each joint per length [N/m2]; 0 where parts are apart or no fastener stands.
        planes, shear : int, bool
            1: only the vertical plane's shear counts, where `shear` says so.
        springs : ndarray, shape (K + 1, J), optional
            Fasteners taken one by one [N/m].
        lifted : collection of str
            Supports that hold nothing.

        Raises
        ------
        CannotCompute
            When the member runs out to a point, or nothing passes a force along x on.
        """
        panels = frame.profile.panels
        layers = layers_of(frame.profile.member)
        sections = layer_sections(frame, layers, moduli, planes, shear)
        _see_carried(panels, sections)
        active = np.array([sections.there[j.layer] & sections.there[j.on] for j in layers.joints])
        spread = stiffness if stiffness.ndim == 3 else stiffness[:, None, None]
        k = spread * active[..., None] * np.ones(panels.x.shape)
        entry = entries(frame, layers, lifted)
        transfer = Transfer.of(panels, strain_differences(layers, sections, active), np.moveaxis(k, 0, -1))
        borders = Borders(
            np.concatenate((panels.a, panels.b[-1:])),
            tuple(np.flatnonzero(active[:, p]) for p in range(panels.count)),
            entry.held,
            entry.cut,
            np.zeros((panels.count + 1, len(layers.joints))) if springs is None else springs,
        )
        return cls(panels, layers, sections, sections.bend, entry, active, k, transfer, Chain.of(transfer, borders))

    @property
    def carrier(self) -> int:
        """Layer in which N is counted: the first that is there."""
        return int(self.sections.there[:, 0].argmax())

    @property
    def slide(self) -> Array:
        """Shear angle by shear force, as `ElasticLaw` has it, shape (3, K, n) [1/N]."""
        return self.sections.slide

    def without_shear(self) -> SlipLaw:
        """Return the same law, rigid in shear."""
        return replace(self, sections=replace(self.sections, slide=np.zeros_like(self.sections.slide)))

    def strains(self, forces: Forces) -> LayerStrains:
        """Return strains under forces on the whole member; fields may have further axes in front of (K, n).

        Parameters
        ----------
        forces : Forces
            Forces about the analysis line; `LayeredForces` where free strain is held back, layer by layer.

        Raises
        ------
        Mechanism
            When a layer that nothing holds along x is pushed.
        """
        shape = forces.N.shape
        N, V, M = (v.reshape(*v.shape[: v.ndim - len(shape)], -1, *shape[-2:]) for v in (forces.N, forces.V, forces.M))
        L, J = self.layers.count, len(self.layers.joints)
        held, own = np.zeros((L, *N.shape)), np.zeros((J, *N.shape))
        if isinstance(forces, LayeredForces):
            held = np.broadcast_to(forces.layers, (L, *shape)).reshape(L, *N.shape)
            own = own if forces.slips is None else forces.slips.reshape(J, *N.shape)
        passing = N - held.sum(axis=0)
        free = held.copy()
        free[self.carrier] += passing
        e0, _ = self._plane(free, M)
        inside = self._joints(passing, own, e0)
        force, slip = (np.transpose(v, (2, 3, 0, 1)) for v in (inside.force, inside.slip))
        force = force * self.active[:, None, :, None]
        layered = free + self._into_layers(force)
        axial, curvature = self._plane(layered, M)
        own_way, other_way, mixed = self.sections.slide
        shear = np.stack((V[0] * own_way + V[1] * mixed, V[1] * other_way + V[0] * mixed))
        working = axial[self.carrier] + self._offset(slip)
        there = self.active[:, None, :, None]
        return LayerStrains(
            working.reshape(shape),
            curvature.reshape(2, *shape),
            shear.reshape(2, *shape),
            axial.reshape(L, *shape),
            (layered - held).reshape(L, *shape),
            force.reshape(J, *shape),
            (self.k[:, None] * (slip - own)).reshape(J, *shape),
            (slip * there).reshape(J, *shape),
            self._spring_forces(slip, own).reshape(J, *shape[:-2], -1),
        )

    def _plane(self, layered: Array, M: Array) -> tuple[Array, Array]:
        """Axial strain of each layer (L, R, K, n) and curvature (2, R, K, n) under the layers' axial forces."""
        s = self.sections
        first = M[0] + (s.c[0][:, None] * layered).sum(axis=0)
        second = M[1] + (s.c[1][:, None] * layered).sum(axis=0)
        k0 = self.bend[0] * first + self.bend[2] * second
        k1 = self.bend[2] * first + self.bend[1] * second
        own = layered * s.softness[:, None] + k0 * s.c[0][:, None] + k1 * s.c[1][:, None]
        return own * (s.EA > 0.0)[:, None], np.stack((k0, k1))

    def _into_layers(self, force: Array) -> Array:
        """Axial force of the layers by the force beyond each joint, shape (L, R, K, n)."""
        result = np.zeros((self.layers.count, *force.shape[1:]))
        for j, joint in enumerate(self.layers.joints):
            result[joint.layer] += force[j]
            result[joint.on] -= force[j]
        return result

    def _joints(self, passing: Array, own: Array, e0: Array) -> Inside:
        """Force and slip of the joints everywhere, under N (R, K, n), own slips and strains of the layers."""
        rule, beyond = self.panels.rule, self.layers.beyond
        difference = np.stack([e0[j.layer] - e0[j.on] for j in self.layers.joints]) * self.active[:, None, :, None]
        g = np.transpose(difference, (2, 3, 0, 1))
        left, right = passing @ rule.left, passing @ rule.right
        steps = np.zeros((passing.shape[0], self.panels.count + 1))
        steps[:, :-1] += left
        steps[:, 1:] -= right
        jumps = beyond[:, self.entry.layer].T[:, :, None] * steps.T[:, None, :]
        jumps = jumps + np.moveaxis(self._spring_forces(np.zeros_like(own), own), 2, 0)
        where = beyond[:, self.entry.layer].T[:, :, None]
        before, after = where[1:] * right.T[:, None, :], where[:-1] * left.T[:, None, :]
        enters = beyond[:, self.entry.spread].T
        drift = np.transpose(passing - left[..., None], (1, 2, 0))[:, :, None, :] * enters[:, None, :, None]
        slack = np.transpose(self.k[:, None] * own, (2, 3, 0, 1))
        put = drift - np.einsum("knm,kmjr->knjr", self.transfer.ahead, slack)
        put_end = (right - left).T[:, None, :] * enters[:, :, None]
        put_end = put_end - np.einsum("kn,knjr->kjr", self.transfer.whole, slack)
        none = np.zeros(put_end.shape)
        alone = self.transfer.inside(none, none, put, g)
        G, s = self.transfer.ends(alone, none, none, g, put_end)
        G_left, s_right = self.chain.ends(G, s, jumps, before, after)
        return self.transfer.inside(G_left, s_right, put, g)

    def _spring_forces(self, slip: Array, own: Array) -> Array:
        """Force of single fasteners at the borders, shape (J, R, K + 1): their stiffness times what they slip."""
        rule = self.panels.rule
        moved = slip - own
        at = np.concatenate((moved @ rule.left, (moved[:, :, -1:] @ rule.right)), axis=2)
        return at * self.chain.borders.springs.T[:, None, :]

    def _offset(self, slip: Array) -> Array:
        """Mean strain by which the layer that a force enters moves more than the one that N is counted in."""
        path = self.layers.beyond[:, self.entry.layer]
        rule, h = self.panels.rule, self.panels.b - self.panels.a
        moved = slip * self.active[:, None, :, None]
        start = np.einsum("jk,jrk->rk", path[:, :-1], moved @ rule.left)
        end = np.einsum("jk,jrk->rk", path[:, 1:], moved @ rule.right)
        return ((end - start) / h)[..., None]


def _see_carried(panels: Panels, sections: LayerSections) -> None:
    """See that the member ends in no point, and that one layer passes a force along x on from end to end."""
    if panels.apexes:
        raise CannotCompute("a member with joints that slip runs out to a point; it has to end before")
    carrier = sections.there.argmax(axis=0)
    if np.any(carrier != carrier[0]):
        place = panels.a[int(np.flatnonzero(carrier != carrier[0])[0])]
        raise CannotCompute(f"nothing passes a force along x on from one layer to the next at x = {place:.6g} m")
