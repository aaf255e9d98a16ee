"""Note on shear stress where the section varies along the member."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

import numpy as np

from fishbelly.member.analysis import Analysis
from fishbelly.member.note import Note
from fishbelly.member.profile import varies

Data = dict[str, Any]


def shear_of_sections(analysis: Analysis, _: Sequence[Data]) -> Iterator[Note]:
    """Say that shear stress that is checked is that of the section at hand, where parts change along the member."""
    member, panels = analysis.member, analysis.profile.panels
    middle = 0.5 * (panels.a + panels.b)
    changing = varies(member, panels.a, panels.b)
    names = [
        p.name
        for p in member.parts
        if p.material is not None
        and (strength := member.material(p.material).strength) is not None
        and strength.shear is not None
        and np.any(changing & (middle > p.start) & (middle < p.end))
    ]
    if names:
        yield Note(
            f"shear stress of {', '.join(names)} is V Q / (I b) of the section at each place: what sloping faces add "
            "or take is not in it; the stress at a fibre of a cross-section counts it"
        )
