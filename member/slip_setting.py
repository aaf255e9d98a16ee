"""The law of parts that slip for one stage of a member, and the grid that it needs."""

from __future__ import annotations

from collections.abc import Callable, Collection, Mapping
from typing import TYPE_CHECKING, cast

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.actions import Frame
from fishbelly.member.description import Member
from fishbelly.member.moduli import Moduli
from fishbelly.member.stage_view import StageView, stage_views

if TYPE_CHECKING:
    from fishbelly.member.section_law import ElasticLaw
    from fishbelly.member.slip_layers import Layers
    from fishbelly.member.slip_tie import Tie

Array = NDArray[np.float64]


def tied(
    frame: Frame,
    view: StageView,
    band: str,
    lasting: bool,
    own: Mapping[str, float],
    planes: int,
    shear: bool,
    absent: Collection[str],
) -> tuple[Tie, Callable[[Moduli, str], ElasticLaw]]:
    """Layers and joints of a stage, and their law for a set of moduli.

    Parameters
    ----------
    frame, view : Frame, StageView
        The grid in the stage.
    band : str
        Which end of the band of every stiffness.
    lasting : bool
        Whether loads of the stage act on long-term values.
    own : mapping of str to float
        Creep factors of single parts that replace the material's.
    planes, shear : int, bool
        Planes that bend, and whether shear deformation counts.
    absent : collection of str
        Supports that hold nothing.
    """
    from fishbelly.member.slip_entry import see_nothing_opens
    from fishbelly.member.slip_grid import fastener_springs
    from fishbelly.member.slip_law import SlipLaw
    from fishbelly.member.slip_layers import joint_stiffness, layers_of
    from fishbelly.member.slip_tie import Tie, stage_joint_creep

    layers = layers_of(frame.profile.member)
    see_nothing_opens(layers.member, view)
    now = joint_stiffness(layers, band, lasting, dict(own))
    stage = view.stage
    creep = np.zeros(len(layers.joints)) if stage is None else stage_joint_creep(layers, stage.creep)
    chi = 1.0 if stage is None else stage.ageing
    short = joint_stiffness(layers, band, False, dict(own))
    stiffness = {"now": now, "short": short, "aged": short / (1.0 + chi * creep)}
    single = one_by_one(frame, layers)

    def law(moduli: Moduli, what: str) -> ElasticLaw:
        smeared, springs = fastener_springs(frame, layers, stiffness[what], single)
        # the two laws are used alike: strains under forces, shear flexibility
        return cast("ElasticLaw", SlipLaw.of(frame, moduli, smeared, planes, shear, springs, absent))

    return Tie(layers, stiffness, creep, fastener_springs(frame, layers, short, single)[1]), law


def one_by_one(frame: Frame, layers: Layers) -> NDArray[np.bool_]:
    """Whether the fasteners of each joint are taken one by one in a stage, as their pitch matters, shape (J,)."""
    from fishbelly.member.slip_grid import pitch_matters
    from fishbelly.member.slip_law import SlipLaw
    from fishbelly.member.slip_layers import joint_stiffness

    short = joint_stiffness(layers)
    return pitch_matters(SlipLaw.of(frame, frame.short, short, 1, False), short)


def joint_borders(member: Member, more: tuple[float, ...]) -> tuple[float, ...]:
    """Further borders of the grid so that what joints carry is resolved in every stage [m]."""
    from fishbelly.member.sampling import build_profiles
    from fishbelly.member.slip_grid import fine_borders, pitch_matters
    from fishbelly.member.slip_law import SlipLaw
    from fishbelly.member.slip_layers import joint_stiffness, layers_of

    layers = layers_of(member)
    stiffness = np.maximum(joint_stiffness(layers), joint_stiffness(layers, "high"))
    found: list[float] = []
    for profile, view in zip(build_profiles(member, more), stage_views(member), strict=True):
        frame = Frame.of(profile, profile.short, view=None if view.stage is None else view)
        single = pitch_matters(SlipLaw.of(frame, profile.short, stiffness, 1, False), stiffness)
        found += fine_borders(frame, profile.short, stiffness, single)
    return tuple(found)
