"""The member as its drawing shows it: frozen, in SI units, checked once.

Nothing here computes. Lengths in m, forces in N, stresses in Pa, angles in rad, masses in kg, temperatures
in K; x from the member's left end, y to the right and z upwards in the cross-section seen from the far end.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from types import MappingProxyType

from fishbelly.member.fixings import EffectiveWidth, Joined
from fishbelly.member.laws import Law, constant
from fishbelly.member.loads import Load
from fishbelly.member.questions import Combination, Limit, Stage, Station

__all__ = [
    "Combination",
    "EffectiveWidth",
    "Haunch",
    "Hinge",
    "Joined",
    "Limit",
    "Material",
    "Member",
    "Notch",
    "Opening",
    "Part",
    "Placing",
    "Shape",
    "Stage",
    "Station",
    "Strength",
    "Support",
]


@dataclass(frozen=True)
class Strength:
    """Allowable stresses [Pa], each positive; None where there is none."""

    tension: float | None = None
    compression: float | None = None
    shear: float | None = None


@dataclass(frozen=True)
class Material:
    """What a part is made of.

    Parameters
    ----------
    name : str
        Name used by parts.
    E : float
        Modulus of elasticity along the member, short-term mean [Pa].
    G, poisson : float, optional
        Shear modulus [Pa], or Poisson's ratio from which G = E / (2 (1 + poisson)).
    density : float, optional
        Mass per volume [kg/m3].
    expansion : float, optional
        Coefficient of thermal expansion [1/K].
    creep : float, optional
        Creep factor by which a sustained load's strain grows, or k_def of timber.
    band : tuple of float, optional
        Lowest and highest E to be reckoned with [Pa].
    strength : Strength, optional
        Allowable stresses.
    yield_strength : float, optional
        Stress above which an elastic result no longer holds [Pa].
    cracking : float, optional
        Tensile stress at which it cracks [Pa].
    no_tension : bool
        It carries no tension at all.
    cracks : bool
        Where `cracking` is passed it cracks; otherwise it counts as uncracked and a note says so.
    """

    name: str
    E: float
    G: float | None = None
    poisson: float | None = None
    density: float | None = None
    expansion: float | None = None
    creep: float | None = None
    band: tuple[float, float] | None = None
    strength: Strength | None = None
    yield_strength: float | None = None
    cracking: float | None = None
    no_tension: bool = False
    cracks: bool = True

    @property
    def shear_modulus(self) -> float | None:
        """G [Pa] as given, or from Poisson's ratio, or None."""
        if self.G is not None:
            return self.G
        return None if self.poisson is None else self.E / (2.0 * (1.0 + self.poisson))


@dataclass(frozen=True, eq=False)
class Shape:
    """A named outline and its dimensions along x.

    Parameters
    ----------
    kind : str
        One of the outlines of `fishbelly.sections.outlines.OUTLINES`, such as ``"rectangle"`` or ``"I"``.
    dimensions : mapping of str to Law
        Dimensions by name [m]; counts and slopes are laws without unit.
    points, holes : tuple
        Corner points (y, z) [m] of a polygon and of its holes.
    """

    kind: str
    dimensions: Mapping[str, Law] = field(default_factory=dict)
    points: tuple[tuple[float, float], ...] = ()
    holes: tuple[tuple[tuple[float, float], ...], ...] = ()

    def __post_init__(self) -> None:
        laws = {k: v if isinstance(v, Law) else constant(float(v)) for k, v in self.dimensions.items()}
        object.__setattr__(self, "dimensions", MappingProxyType(laws))


@dataclass(frozen=True, eq=False)
class Placing:
    """Where a part stands in the cross-section.

    Parameters
    ----------
    relation : {"datum", "position", "under", "over", "left_of", "right_of", "centred_on"}
        ``"datum"``: on the datum line by the edge `anchor` ("top", "middle" or "bottom").
    host : str
        Name of the part it is placed against, for the last five.
    position : tuple of Law
        (y, z) of the anchor [m], for ``"position"``.
    anchor : str
        Point of the bounding box that `position` fixes, such as ``"middle"`` (default) or ``"top left"``; for
        ``"datum"`` the edge on the datum line, default ``"top"``.
    flush : str
        Which edges are aligned with the host's.
    gap : Law
        Clear gap to the host [m].
    shift : tuple of Law
        Extra offset (y, z) [m].
    """

    relation: str = "datum"
    host: str = ""
    position: tuple[Law, Law] | None = None
    anchor: str = ""
    flush: str = "middle"
    gap: Law = field(default_factory=lambda: constant(0.0))
    shift: tuple[Law, Law] = field(default_factory=lambda: (constant(0.0), constant(0.0)))


@dataclass(frozen=True, eq=False)
class Part:
    """One piece of the member.

    Parameters
    ----------
    name : str
        Unique name.
    material : str or None
        Name of its material; None for a part that takes material away.
    shape : Shape
        Outline and dimensions.
    start, end : float
        Extent along x [m].
    place : Placing
        Where it stands.
    run_in : tuple of float
        Lengths at its two ends over which E and G grow linearly from nothing to full [m].
    cuts : tuple of str
        Names of the parts from which it takes material away; empty for a part that adds.
    pair : bool
        A second copy, mirrored about the vertical centre line of the host.
    turn : float
        Rotation, anticlockwise [rad].
    mirror : bool
        Flip left-right before turning.
    stage, until : str, optional
        First stage in which it works (default the first), and the stage at whose start it goes.
    joined : Joined, optional
        How it is fixed to its host; default rigidly.
    effective : EffectiveWidth, optional
        Rule by which only part of its width counts.
    """

    name: str
    material: str | None
    shape: Shape
    start: float
    end: float
    place: Placing = Placing()
    run_in: tuple[float, float] = (0.0, 0.0)
    cuts: tuple[str, ...] = ()
    pair: bool = False
    turn: float = 0.0
    mirror: bool = False
    stage: str | None = None
    until: str | None = None
    joined: Joined | None = None
    effective: EffectiveWidth | None = None


@dataclass(frozen=True, eq=False)
class Notch:
    """A cut through a part's whole width from one side [m]; `reach` cuts stiffness, not mass.

    One that a `rule` makes, such as that of an effective width, cuts no mass anywhere.
    """

    of: str
    depth: Law
    start: float
    end: float
    side: str = "bottom"
    reach: float = 0.0
    rule: str = ""


@dataclass(frozen=True)
class Haunch:
    """A part grown deeper: `depth` more at `at`, fading over `reach` to the left and right [m]."""

    of: str
    at: float
    depth: float
    reach: tuple[float, float]
    law: str = "straight"
    side: str = "bottom"


@dataclass(frozen=True)
class Opening:
    """A hole from side to side, as seen in the elevation [m].

    A circle has `diameter`; a rectangle `length`, `depth` and the `radius` of its corners. `level` is the
    z of its middle, or None for the middle of the first part it cuts. `of`: names of the parts cut.
    """

    at: float
    of: tuple[str, ...]
    diameter: float | None = None
    length: float = 0.0
    depth: float = 0.0
    radius: float = 0.0
    level: float | None = None


@dataclass(frozen=True)
class Support:
    """What holds the member at one place.

    Parameters
    ----------
    name : str
        Name in results.
    at : float
        Place along x [m].
    down, rotation, along, across : float
        Stiffness with which it holds: 0 not at all, ``inf`` rigidly, else [N/m] ([N m/rad] for rotation).
        `down` holds up too.
    rotation_across : float
        Stiffness against rotation sideways [N m/rad].
    level : str or float
        Where it holds along: "centroid", "top", "bottom", "datum" or a z [m].
    sinks : float
        Settlement, downwards [m]; below zero it is jacked.
    case : str
        Load case of the settlement.
    only_up : bool
        A bearing that pushes up only and cannot pull.
    stage, until : str, optional
        First stage in which it holds, and the stage at whose start it goes.
    slip_free : bool
        A support that holds rotation leaves the slip of layers free all the same.
    """

    name: str
    at: float
    down: float = 0.0
    rotation: float = 0.0
    along: float = 0.0
    across: float = 0.0
    rotation_across: float = 0.0
    level: str | float = "centroid"
    sinks: float = 0.0
    case: str = "settlement"
    only_up: bool = False
    stage: str | None = None
    until: str | None = None
    slip_free: bool = False


@dataclass(frozen=True)
class Hinge:
    """A moment hinge in the member at x [m], about the section's centroid, in the vertical plane."""

    at: float
    name: str = ""
    stage: str | None = None
    until: str | None = None


@dataclass(frozen=True, eq=False)
class Member:
    """A whole member: parts, cuts, supports, loads and questions.

    Parameters
    ----------
    length : float
        Length [m].
    parts, materials : tuple
        What it is made of, in the order in which later parts displace earlier ones.
    notches, haunches, openings : tuple
        Cuts and growths.
    supports, hinges : tuple
        What holds it and where it is released.
    loads : tuple of Load
        Loads, each of a case.
    combinations, limits, stations : tuple
        Questions; without combinations one named "all" takes every case with factor 1.
    rises : float
        Inclination, left end to right, upwards [rad].
    shear : bool
        Whether shear deformation counts.
    camber : float or Law, optional
        Height of a parabola over each span, or ordinates along x, upwards [m].
    title, note : str
        Free text.
    stages : tuple of Stage
        In order of time; none: everything at once.
    inclined : {"along", "cut"}
        How flanges and plates that follow a sloping outline count.
    tension_stiffening : str, optional
        Rule for concrete between cracks.
    cracks : {"history", "by combination"}
        Whether a place stays cracked once any combination for deflection has cracked it.
    left_out : frozenset of str
        Parts that never work and weigh nothing, though others keep their place against them; only with stages.
    """

    length: float
    parts: tuple[Part, ...]
    materials: tuple[Material, ...]
    notches: tuple[Notch, ...] = ()
    haunches: tuple[Haunch, ...] = ()
    openings: tuple[Opening, ...] = ()
    supports: tuple[Support, ...] = ()
    hinges: tuple[Hinge, ...] = ()
    loads: tuple[Load, ...] = ()
    combinations: tuple[Combination, ...] = ()
    limits: tuple[Limit, ...] = ()
    stations: tuple[Station, ...] = ()
    rises: float = 0.0
    shear: bool = True
    camber: float | Law | None = None
    title: str = ""
    note: str = ""
    stages: tuple[Stage, ...] = ()
    inclined: str = "along"
    tension_stiffening: str | None = None
    cracks: str = "history"
    left_out: frozenset[str] = frozenset()

    def __post_init__(self) -> None:
        from fishbelly.member.checking import check

        check(self)
        if any(p.effective is not None for p in self.parts) and not any(n.rule for n in self.notches):
            from fishbelly.member.effective_width import effective_notches

            object.__setattr__(self, "notches", self.notches + effective_notches(self))
        if not self.combinations:
            factors = MappingProxyType(dict.fromkeys(self.cases, 1.0))
            everything = Combination("all", factors, implied=True)
            object.__setattr__(self, "combinations", (everything,))

    @property
    def cases(self) -> tuple[str, ...]:
        """Names of the load cases in the order in which they appear."""
        names = [load.case for load in self.loads]
        names += [s.case for s in self.supports if s.sinks]
        return tuple(dict.fromkeys(names))

    def part(self, name: str) -> Part:
        """Return the part of that name."""
        return next(p for p in self.parts if p.name == name)

    def material(self, name: str) -> Material:
        """Return the material of that name."""
        return next(m for m in self.materials if m.name == name)
