"""Shear force that each part carries, by equilibrium of the part wherever that tells.

A part that stands on another by a level joint: the flow in the joint has no lever about it, so its shear is the rate
of its moment about the joint. Parts that fasteners join side by side share V as their EI. Parts of one body beside
each other, or one inside another, share what is left as the shear stress on level cuts does.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.carried import PartForce, part_force, rate
from fishbelly.member.clusters import clusters
from fishbelly.member.part_forces import Loading
from fishbelly.member.profile import Profile
from fishbelly.sections.shear_shares import shear_shares

Array = NDArray[np.float64]

STACKED = ("under", "over")
"""Relations in which a part stands on its host by a level joint."""


def part_shears(loading: Sequence[Loading], forces: Mapping[int, PartForce]) -> dict[int, Array]:
    """Shear force of every part that is there, in the vertical plane.

    Parameters
    ----------
    loading : sequence of Loading
        Shares and steps of a combination.
    forces : mapping of int to PartForce
        What every part carries, by its number.

    Returns
    -------
    dict of int to ndarray, shape (J + 1, K, n)
        Shear force by part [N]; where no axial load is spread along x their sum is the member's V.
    """
    profile = loading[0].end.profile
    member = profile.member
    number = {p.name: i for i, p in enumerate(member.parts)}
    cluster = clusters(member)
    total = np.asarray(sum(share.response.V[0] for share in loading))
    left = _cluster_shears(loading, forces, cluster, total)
    # the part of each one's ancestry in its own cluster that stands on a level joint; None: the cluster itself
    heads: dict[int, int | None] = {}
    for i in forces:
        part = member.parts[i]
        host = number.get(part.place.host)
        if host is None or cluster[host] != cluster[i] or host not in forces:
            heads[i] = None
        else:
            heads[i] = i if part.place.relation in STACKED else heads[host]
    bodies: dict[tuple[int, int | None], list[int]] = {}
    for i, head in heads.items():
        bodies.setdefault((cluster[i], head), []).append(i)
    shear: dict[tuple[int, int | None], Array] = {(c, None): v for c, v in left.items()}
    nothing = np.zeros(total.shape)
    for _, head in sorted((b for b in bodies if b[1] is not None), key=lambda b: -(b[1] or 0)):
        assert head is not None
        under = number[member.parts[head].place.host]
        mine = (cluster[head], head)
        carried = _above(head, heads, number, profile)
        whole = _stacked_shear(profile, forces, carried, head, float(loading[0].end.line[0]))
        shear[mine] = shear.get(mine, nothing) + whole
        below = (cluster[under], heads[under])
        shear[below] = shear.get(below, nothing) - whole
    found: dict[int, Array] = {}
    for body, parts in bodies.items():
        found |= _shared(profile, parts, shear[body])
    return found


def _above(head: int, heads: Mapping[int, int | None], number: Mapping[str, int], profile: Profile) -> list[int]:
    """Parts that the level joint of a part carries: those of its body, and of the bodies that stand on it."""
    carried = {head}
    for i, own in heads.items():
        if own is None:
            continue
        at: int | None = own
        while at is not None and at != head:
            at = heads[number[profile.member.parts[at].place.host]]
        if at == head:
            carried.add(i)
    return sorted(carried)


def _stacked_shear(
    profile: Profile, forces: Mapping[int, PartForce], parts: list[int], head: int, line: float
) -> Array:
    """Rate of the moment of parts about the level joint of one of them."""
    panels = profile.panels
    level = np.zeros(profile.rows)
    under = profile.member.parts[head].place.relation == "under"
    for g in profile.groups:
        if head in g.placed.index:
            box = g.composition.boxes[g.placed.index.index(head)]
            level[g.rows] = box.top if under else box.bottom
    arm = level[profile.row]
    moment = np.asarray(sum(forces[i].about_line[0] for i in parts))
    flow = np.asarray(sum(forces[i].flow for i in parts))
    shear = rate(panels, moment) + flow * (arm - line)
    there = np.zeros(panels.count, dtype=bool)
    there[forces[head].first : forces[head].stop] = True
    return np.where(there[:, None], shear, 0.0)


def _cluster_shears(
    loading: Sequence[Loading], forces: Mapping[int, PartForce], cluster: tuple[int, ...], total: Array
) -> dict[int, Array]:
    """Shear force of every cluster: V as EI of the clusters, and what creep moves between them besides."""
    there = sorted({cluster[i] for i in forces})
    if len(there) == 1:
        return {there[0]: total}
    found = {c: np.zeros(total.shape) for c in there}
    for share in loading:
        rates, stiff = {}, {}
        for c in there:
            rates[c], stiff[c] = _own(share, [i for i in forces if cluster[i] == c])
        whole = sum(stiff.values())
        rest = share.response.V[0] - sum(rates.values())
        for c in there:
            found[c] = found[c] + rates[c] + stiff[c] / np.where(whole > 0.0, whole, np.inf) * rest
    return found


def _own(share: Loading, parts: list[int]) -> tuple[Array, Array]:
    """Rate of the couple of a cluster about its own centroid, and its own EI, in one share of a combination."""
    end = share.end
    panels = end.profile.panels
    EA, ES, EI = np.zeros((3, *panels.x.shape))
    moment, force = np.zeros((2, *share.response.N.shape))
    for i in parts:
        A, S, _, I, *_ = end.profile.part_moments(i, end.line)
        E = end.profile.part_modulus(i, share.moduli.E)
        EA, ES, EI = EA + E * A, ES + E * S, EI + E * I
        carried = part_force([share], i)
        if carried is not None:
            moment, force = moment + carried.about_line[0], force + carried.N
    centre = ES / np.where(EA > 0.0, EA, 1.0)
    return rate(panels, moment) + rate(panels, force) * centre, EI - ES * centre


def _shared(profile: Profile, parts: list[int], shear: Array) -> dict[int, Array]:
    """Shear force of the parts of one body, as level cuts with short-term moduli share it."""
    if len(parts) == 1:
        return {parts[0]: shear}
    share = np.zeros((len(parts), profile.rows))
    for g in profile.groups:
        mine = [(k, g.placed.index.index(i)) for k, i in enumerate(parts) if i in g.placed.index]
        if len(mine) == 1:
            share[mine[0][0], g.rows] = 1.0
        elif mine:
            E, G = g.modulus(profile.short.E), g.modulus(profile.short.G)
            stiffness = g.stiffness(profile.short)
            every = shear_shares(g.composition.levels, E, G if np.all(G.max(axis=1) > 0.0) else E, stiffness)
            some = every[[k for _, k in mine]]
            whole = some.sum(axis=0)
            share[np.ix_(np.array([k for k, _ in mine]), g.rows)] = some / np.where(whole != 0.0, whole, 1.0)
    return {i: shear * share[k][profile.row] for k, i in enumerate(parts)}
