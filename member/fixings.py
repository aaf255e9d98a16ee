"""How a part is fixed to what it is placed against, and how much of its width counts: frozen, in SI units."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class Joined:
    """The joint between a part and the one it is placed against; a part without one is joined rigidly.

    Parameters
    ----------
    apart : bool
        Only the deflection is shared.
    stiffness : float, optional
        Slip modulus of one fastener [N/m].
    per_length : float, optional
        Slip stiffness of the joint per length, in place of `stiffness` [N/m2].
    pitch : float, optional
        Distance between fasteners of a row along the member [m].
    rows : int
        Rows of fasteners side by side.
    creep : float, optional
        Creep factor of the stiffness; default from the creep of the two parts.
    band : tuple of float, optional
        Lowest and highest stiffness, of the kind given.
    capacity : float, optional
        What one fastener can carry [N], as typed.
    weld : float, optional
        What the joint can carry per length [N/m], as typed.
    """

    apart: bool = False
    stiffness: float | None = None
    per_length: float | None = None
    pitch: float | None = None
    rows: int = 1
    creep: float | None = None
    band: tuple[float, float] | None = None
    capacity: float | None = None
    weld: float | None = None

    @property
    def soft(self) -> bool:
        """Whether the joint slips: it has a stiffness, or none at all."""
        return self.apart or self.stiffness is not None or self.per_length is not None

    @property
    def flow_stiffness(self) -> float | None:
        """Slip stiffness per length [N/m2]; 0 where parts are apart, None where slip is neglected."""
        if self.apart:
            return 0.0
        if self.per_length is not None:
            return self.per_length
        if self.stiffness is None or self.pitch is None:
            return None
        return self.stiffness * self.rows / self.pitch


@dataclass(frozen=True)
class EffectiveWidth:
    """Shear lag of a wide part by a published rule: only part of its width counts in stiffness and stress.

    Parameters
    ----------
    rule : str
        Name of the rule, one of `fishbelly.member.effective_rules.RULES`.
    web_spacing : float, optional
        Distance to the next web, middle to middle [m]; on both sides where there is no `edge`.
    edge : float, optional
        Distance from the middle of the web to a free edge [m]; on both sides where there is no `web_spacing`. With
        neither the part's own width gives both.
    """

    rule: str
    web_spacing: float | None = None
    edge: float | None = None
