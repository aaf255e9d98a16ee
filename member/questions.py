"""Stages of a member's life and the questions asked of it: frozen, in SI units."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field


@dataclass(frozen=True)
class Stage:
    """A stretch of the member's life, in order of time.

    Parameters
    ----------
    name : str
        Unique name; parts, supports, hinges and limits name it.
    cases : tuple of str
        Load cases that arrive in it.
    long_term : bool
        Loads that arrive in it act on moduli divided by 1 + creep.
    moduli : mapping of str to float
        E of a material in this stage [Pa]; G and its band follow in proportion.
    factors : mapping of str to float
        Factor of E of a material in this stage, in place of `moduli`.
    creep : mapping of str to float
        Creep factor that runs off during the stage under the stress locked in, by material.
    ageing : float
        Ageing coefficient chi of the age-adjusted modulus E / (1 + chi phi).
    """

    name: str
    cases: tuple[str, ...] = ()
    long_term: bool = False
    moduli: Mapping[str, float] = field(default_factory=dict)
    factors: Mapping[str, float] = field(default_factory=dict)
    creep: Mapping[str, float] = field(default_factory=dict)
    ageing: float = 1.0


@dataclass(frozen=True)
class Station:
    """A place whose results are wanted by name [m]."""

    name: str
    at: float


@dataclass(frozen=True)
class Combination:
    """Load cases with factors; `sustained` is the share of each factor that acts on long-term moduli.

    `implied`: no combination was given, and this one takes every case with factor 1.
    """

    name: str
    factors: Mapping[str, float]
    sustained: Mapping[str, float] = field(default_factory=dict)
    purpose: str = "deflection"
    implied: bool = False


@dataclass(frozen=True)
class Limit:
    """What a deflection may be.

    Parameters
    ----------
    name : str
        Name in the checks.
    span_over : float, optional
        Allowed is the span over this number.
    absolute : float, optional
        Allowed deflection [m].
    slope : float, optional
        Allowed rotation [rad].
    at : str, optional
        A named station, instead of the spans.
    of : {"down", "up", "across", "resultant"}
        Which deflection.
    net : bool
        The camber is subtracted.
    combination : str, optional
        Only this combination; default every one for deflection.
    start, end : float, optional
        Only places between these [m].
    spans : tuple of (int or str), optional
        Only these spans, numbered from 1; overhangs are "left" and "right".
    cantilever_over : float, optional
        For an overhang: allowed is its own length over this number.
    cap : float, optional
        Beside `span_over` or `cantilever_over`: never more than this is allowed [m].
    source : str
        Where the limit is published, and what to know about it; empty for one's own.
    after : str, optional
        Only what happens from the start of this stage on.
    stage : str, optional
        At the end of this stage; default the last.
    """

    name: str
    span_over: float | None = None
    absolute: float | None = None
    slope: float | None = None
    at: str | None = None
    of: str = "down"
    net: bool = False
    combination: str | None = None
    start: float | None = None
    end: float | None = None
    spans: tuple[int | str, ...] | None = None
    cantilever_over: float | None = None
    cap: float | None = None
    source: str = ""
    after: str | None = None
    stage: str | None = None
