"""The key of the parts: number, hatch, name, material and extent."""

from __future__ import annotations

from typing import Any

from fishbelly.cli.figures.letters import one_line, shortened
from fishbelly.cli.figures.looks import number_of, part_look
from fishbelly.cli.figures.paper import LEFT, LINE, MEDIUM, RIGHT, WIDTH, in_millimetres, own_panel, pens, text_width
from fishbelly.cli.figures.ticks import place
from fishbelly.member.description import Member, Part

_SWATCH = 5.0
_ROW = LINE + 0.5


def _words(member: Member, part: Part, style: str) -> str:
    text = f"{one_line(part.name)}, {one_line(part.material) if part.material else 'takes away'}"
    if part.pair:
        text += ", pair"
    if part.start > 0.0 or part.end < member.length:
        ends = [place(x, member.length, style) for x in (part.start, part.end)]
        first = ends[0].rpartition(" ")
        text += f", {first[0] if first[2] == ends[1].rpartition(' ')[2] else ends[0]} to {ends[1]}"
    return text


def columns(member: Member, style: str, width: float) -> int:
    """Choose into how many columns the key goes, by what most entries need; `width` in mm."""
    needed = max(text_width(_words(member, p, style)) for p in member.parts) + _SWATCH + 7.0
    count = len(member.parts)
    return 1 if count <= 2 else max(1 if count <= 8 else 2, min(4, int(width // needed)))


def height(member: Member, style: str, width: float = WIDTH - LEFT - RIGHT) -> float:
    """Height that the key takes [mm]."""
    count = columns(member, style, width)
    return -(-len(member.parts) // count) * _ROW


def plot(job: Any, ax: Any = None) -> Any:
    """Draw the key of the parts of a job.

    Parameters
    ----------
    job : Job
        The job.
    ax : Axes, optional
        Where to draw; default axes of a new figure.

    Returns
    -------
    Axes
        In mm of paper.
    """
    member = job.member
    with pens():
        if ax is None:
            ax = own_panel(height(member, job.style), foot=2.0)
        width, tall = in_millimetres(ax)
        count = columns(member, job.style, width)
        rows, wide = -(-len(member.parts) // count), width / count
        for k, part in enumerate(member.parts):
            x, y = k // rows * wide, tall - (k % rows + 0.5) * _ROW
            _entry(ax, member, k, x, y)
            text = shortened(_words(member, part, job.style), wide - _SWATCH - 7.0)
            ax.text(x + _SWATCH + 5.2, y, text, ha="left", va="center")
    return ax


def _entry(ax: Any, member: Member, k: int, x: float, y: float) -> None:
    from matplotlib.patches import Rectangle

    ax.text(x + 3.4, y, number_of(member, k), ha="right", va="center")
    drawn = {"facecolor": "white", "ls": "--"} if member.parts[k].cuts else part_look(k).drawn
    ax.add_patch(Rectangle((x + 4.2, y - 0.42 * LINE), _SWATCH, 0.84 * LINE, edgecolor="black", lw=MEDIUM, **drawn))
