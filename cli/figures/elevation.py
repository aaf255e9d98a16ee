"""The elevation: parts, holes, supports, loads, breaks and dimensions, to a scale that is stated."""

from __future__ import annotations

import itertools
from collections.abc import Collection
from dataclasses import dataclass
from typing import Any

import numpy as np

from fishbelly.cli.figures import loads as loads_
from fishbelly.cli.figures import parts as parts_
from fishbelly.cli.figures import supports as supports_
from fishbelly.cli.figures.letters import lines_of
from fishbelly.cli.figures.loads import LoadPlan
from fishbelly.cli.figures.paper import (
    GREY,
    LEFT,
    LINE,
    MEDIUM,
    RIGHT,
    THIN,
    WIDTH,
    bare,
    own_panel,
    pens,
    size_of,
    text_width,
)
from fishbelly.cli.figures.scene import MARGIN, Scene, scale_words, scene
from fishbelly.cli.figures.side_view import SideView, side_view
from fishbelly.cli.figures.supports import Names, names_band
from fishbelly.cli.figures.ticks import place
from fishbelly.member.description import Member, Station
from fishbelly.member.spans import spans

BODY = 19.0
"""Height that the member's depth is drawn with, at most [mm]."""
_DIMENSION = 5.2
_MOST_WORDS = 3
_MOST_BREAKS = 13


@dataclass(frozen=True, eq=False)
class Layout:
    """Heights of the bands of an elevation, from the bottom [mm]."""

    words: tuple[str, ...]
    dimension: float
    chain: float
    breaks: float
    tags: float
    stations: Names
    names: Names
    symbols: float
    loads: LoadPlan
    body: float = BODY

    @property
    def below(self) -> float:
        """Everything under the member."""
        bands = (
            self.dimension,
            self.chain,
            self.breaks,
            self.tags,
            self.stations.height,
            self.names.height,
            self.symbols,
        )
        return LINE * len(self.words) + sum(bands)

    @property
    def above(self) -> float:
        """Everything over the member."""
        return self.loads.height + 2.0

    @property
    def height(self) -> float:
        """Everything."""
        return self.below + self.body + self.above


def layout(
    view: SideView,
    style: str,
    cases: Collection[str] | None = None,
    with_loads: bool = True,
    width: float | None = None,
) -> Layout:
    """Choose the bands of an elevation; `width` is that of the axes [mm]."""
    member = view.member
    across = (WIDTH - LEFT - RIGHT) if width is None else width
    planned = loads_.plan(member, style, across - 2.0 * MARGIN, cases if with_loads else ())
    looked = scene(None, view, style, across, 0.0, BODY)
    tags = parts_.tags(looked)
    named = _named(member)
    stations = names_band(looked, [(s.at, s.name, "") for s in named])
    names = names_band(looked, supports_.names(looked))
    said = [loads_.words_of(planned)]
    for band, there, what in ((stations, named, "named stations"), (names, member.supports, "supports")):
        if there and not band.places:
            said.append(f"{len(there)} {what}, too many to be named here")
    words = lines_of("; ".join(filter(None, said)), across, _MOST_WORDS)
    rows = 1 + max((t.row for t in tags if not t.inside), default=-1)
    return Layout(
        words=tuple(words),
        dimension=_DIMENSION,
        chain=_DIMENSION if len(spans(member)) > 1 else 0.0,
        breaks=_DIMENSION if _break_texts(looked) else 0.0,
        tags=rows * parts_.TAGS,
        stations=stations,
        names=names,
        symbols=supports_.HEIGHT if member.supports else 1.0,
        loads=planned,
        body=float(np.ptp(looked.up(np.array(view.levels)))),
    )


def plot(job: Any, cases: Collection[str] | None = None, with_loads: bool = True, ax: Any = None) -> Any:
    """Draw the elevation of a job.

    Parameters
    ----------
    job : Job
        The job: its member and its style of units.
    cases : collection of str, optional
        Load cases of which the loads are drawn; default all.
    with_loads : bool
        Whether loads are drawn at all.
    ax : Axes, optional
        Where to draw; default axes of a new figure.

    Returns
    -------
    Axes
        Horizontal axis in m along the member, vertical axis in mm of paper.
    """
    with pens():
        view = side_view(job.member)
        bands = layout(view, job.style, cases, with_loads, None if ax is None else size_of(ax)[0])
        if ax is None:
            ax = own_panel(bands.height, foot=2.0)
        bare(ax)
        width, height = size_of(ax)
        room = max(height - bands.below - bands.above, 4.0)
        drawn = scene(ax, view, job.style, width, bands.below, room)
        ax.set_xlim(drawn.left, drawn.right)
        ax.set_ylim(0.0, height)
        parts_.draw(drawn)
        _caption(drawn, height, with_loads and bool(bands.loads.blocks or bands.loads.points))
        loads_.draw(drawn, bands.loads, drawn.top + 1.2)
        _below(drawn, bands)
    return ax


def _caption(drawn: Scene, height: float, loaded: bool) -> None:
    words = f"Elevation, {scale_words(drawn.factor)}"
    if drawn.view.member.rises:
        words += f", member level though it rises {np.degrees(drawn.view.member.rises):.3g}°"
    if loaded:
        words += "; loads before factors"
    drawn.ax.text(drawn.left, height + 0.8, words, ha="left", va="bottom", clip_on=False)


def _below(drawn: Scene, bands: Layout) -> None:
    """Draw what stands under the member, from the bottom upwards."""
    y = 0.0
    for line in reversed(bands.words):
        drawn.ax.text(drawn.left, y + 0.5 * LINE, line, ha="left", va="center")
        y += LINE
    _length(drawn, y + 1.2)
    y += bands.dimension
    if bands.chain:
        _chain(drawn, y + 1.2)
        y += bands.chain
    if bands.breaks:
        _links(drawn, drawn.view.breaks.tolist(), _break_texts(drawn), y + 1.2)
        y += bands.breaks
    y += bands.tags
    parts_.draw_tags(drawn, parts_.tags(drawn), y)
    y += bands.stations.height
    _stations(drawn, bands.stations, y)
    y += bands.names.height
    supports_.write_names(drawn, bands.names, y)
    supports_.draw(drawn)


def _dimension(drawn: Scene, start: float, end: float, height: float, text: str) -> None:
    """Draw a dimension line between two places [m] with its text over it."""
    drawn.ax.plot([start, end], [height, height], color="black", lw=THIN, zorder=3)
    for x in (start, end):
        at = drawn.mm(x)
        drawn.ax.plot(drawn.x(np.array([at - 0.7, at + 0.7])), [height - 0.7, height + 0.7], color="black", lw=MEDIUM)
    if text:
        drawn.write(drawn.mm(0.5 * (start + end)), height + 0.4 + 0.5 * LINE, text)


def _length(drawn: Scene, height: float) -> None:
    """Draw the length."""
    _dimension(drawn, 0.0, drawn.length, height, place(drawn.length, drawn.length, drawn.style))


def _chain(drawn: Scene, height: float) -> None:
    """Draw spans and overhangs, with their lengths where every one has room."""
    pieces = spans(drawn.view.member)
    texts = [place(p.length, drawn.length, drawn.style) for p in pieces]
    if any(text_width(t) > drawn.mm(p.end) - drawn.mm(p.start) - 0.6 for t, p in zip(texts, pieces, strict=True)):
        texts = [t.split(" ")[0] for t in texts] if drawn.style != "us" else texts
    _links(drawn, [0.0, *(p.end for p in pieces)], texts, height)


def _links(drawn: Scene, ends: list[float], texts: list[str], height: float) -> None:
    """Draw a chain of dimensions between places [m], each with its text where that has room."""
    for start, end, text in zip(ends[:-1], ends[1:], texts, strict=True):
        fits = text_width(text) <= drawn.mm(end) - drawn.mm(start) - 0.6
        _dimension(drawn, start, end, height, text if fits else "")


def _break_texts(drawn: Scene) -> list[str]:
    """Lengths between the places where the cross-section breaks; none where half of them have no room."""
    breaks = drawn.view.breaks.tolist()
    if not 2 < len(breaks) <= _MOST_BREAKS:
        return []
    lengths = [b - a for a, b in itertools.pairwise(breaks)]
    texts = [place(v, drawn.length, drawn.style) for v in lengths]
    if drawn.style != "us":
        texts = [t.split(" ")[0] for t in texts]
    room = [drawn.mm(b) - drawn.mm(a) - 0.6 for a, b in itertools.pairwise(breaks)]
    return texts if 2 * sum(text_width(t) > r for t, r in zip(texts, room, strict=True)) < len(texts) else []


def _named(member: Member) -> list[Station]:
    """Stations by place; those left out that say no more than the name of a support at the same place."""
    tiny = 1e-9 * member.length

    def said(station: Station) -> bool:
        here = [s.name for s in member.supports if abs(s.at - station.at) <= tiny]
        return any(name in station.name or station.name in name for name in here)

    return sorted((s for s in member.stations if not said(s)), key=lambda s: s.at)


def _stations(drawn: Scene, names: Names, height: float) -> None:
    """Mark named stations by an upright line down to their names."""
    for s in drawn.view.member.stations:
        top = drawn.edges(s.at)[1] + 1.0
        drawn.ax.plot([s.at, s.at], [height - 0.2, top], color=GREY, lw=MEDIUM, ls=(0, (6, 1.5, 1, 1.5)), zorder=6)
    supports_.write_names(drawn, names, height, style="italic")
