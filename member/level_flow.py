"""Shear flow through a level of the section: what the stresses above it gain along the member.

With F the axial force of all that lies above a fixed level, equilibrium of the strip between two sections gives the
flow through the level, -dF/dx: right where the section varies, where stages and free strain have left stress, and under
thrust. In a member that does not vary it is V Q / I. At a sloping face it is the stress there times the face's slope.
Source: equilibrium as in S. Timoshenko, Strength of Materials I, 3rd ed., van Nostrand, 1955, art. 26 and 66; what the
slope of a face adds: A. C. Vierck's and others' taper terms come out of the same derivative.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fishbelly.member.carried import rate
from fishbelly.member.geometry import Geometry
from fishbelly.member.inclined_stress import any_inclined, shear_in_webs
from fishbelly.member.panels import Panels
from fishbelly.member.part_forces import Loading, share_plane
from fishbelly.member.profile import Group, group_places, varies
from fishbelly.sections.area_moments import AreaMoments
from fishbelly.sections.chebyshev import rule
from fishbelly.sections.composition import Composition
from fishbelly.sections.flanges import Flange, flange_moments, working_moments
from fishbelly.sections.level_cuts import Widths, widths
from fishbelly.sections.level_pieces import has_gaps, piece_flow
from fishbelly.sections.outlines import Outline, rectangle

Array = NDArray[np.float64]

_REACH = 0.04
"""Length of the stretch beside x over which the outlines are followed, of a panel's 2."""
_POINTS = 8
"""Places in that stretch."""
_SAME = 1e-9
"""Levels closer than this share of the section's depth are one."""
