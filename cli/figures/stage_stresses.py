"""Largest and smallest stress of every part at the end of each stage, as bars below each other."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from fishbelly.cli.figures.letters import shortened
from fishbelly.cli.figures.looks import number_of, part_look
from fishbelly.cli.figures.paper import LINE, MEDIUM, THIN, in_millimetres, own_panel, pens, text_width
from fishbelly.cli.figures.ticks import pretty
from fishbelly.cli.format_quantity import format_number, unit_label

MOST = 24
"""Bars at most; of more parts those with the largest stress are drawn."""
_ROW = LINE + 0.9
_GAP = 1.2
_OWN_RANGE = 1e-2
"""A value shows no finer than one of this share of the largest would."""
_NAMES = 46.0
"""Room for part and stage left of the bars [mm]."""

Row = tuple[int, str, str, float, float]
"""Number of the part, its name, the stage, smallest and largest stress [Pa]."""


def rows_of(job: Any, stages: Sequence[Mapping[str, Any]], combination: str) -> list[Row]:
    """Stresses of a combination by part, then by stage; at most `MOST` of them.

    Parameters
    ----------
    job : Job
        The job.
    stages : sequence of mapping
        Stages of the results of `fishbelly deflect`.
    combination : str
        Name of the combination.
    """
    number = {p.name: k for k, p in enumerate(job.member.parts)}
    found: dict[str, list[Row]] = {}
    for stage in stages:
        told = next(c for c in stage["combinations"] if c["name"] == combination)
        for s in told["stress"]:
            # a part may be in tension, or pressed, throughout
            ends = [0.0 if s[e] is None else s[e]["value"] for e in ("min", "max")]
            if s["max"] is not None or s["min"] is not None:
                row = (number[s["part"]], s["part"], stage["name"], ends[0], ends[1])
                found.setdefault(s["part"], []).append(row)
    sizes = {name: max(max(abs(r[3]), abs(r[4])) for r in rows) for name, rows in found.items()}
    kept: list[str] = []
    for name in sorted(sizes, key=lambda n: -sizes[n]):
        if sum(len(found[n]) for n in [*kept, name]) <= MOST or not kept:
            kept.append(name)
    return [r for name in found if name in kept for r in found[name]]


def height(rows: Sequence[Row]) -> float:
    """Height that the bars take [mm]."""
    return len(rows) * _ROW + max(len({r[0] for r in rows}) - 1, 0) * _GAP + 1.0


def plot(job: Any, rows: Sequence[Row], ax: Any = None) -> Any:
    """Draw the bars.

    Parameters
    ----------
    job : Job
        The job.
    rows : sequence of tuple
        What `rows_of` gives.
    ax : Axes, optional
        Where to draw; default axes of a new figure.

    Returns
    -------
    Axes
        In mm of paper.
    """
    with pens():
        if ax is None:
            ax = own_panel(height(rows), foot=2.0)
        width, tall = in_millimetres(ax)
        scale = max(max(abs(r[3]), abs(r[4])) for r in rows) or 1.0
        low, high = min(0.0, *(r[3] for r in rows)), max(0.0, *(r[4] for r in rows))
        beside = 1.5 + max(text_width(_number(v, job.style, scale)) for r in rows for v in r[3:])
        left, right = _NAMES + beside, width - beside
        per = (right - left) / (high - low or 1.0)
        nought = left - low * per
        unit = pretty(unit_label("stress", job.style))
        words = f"Stress at the end of each stage [{unit}], smallest and largest of each part, tension positive"
        ax.text(0.0, tall + 0.8, words, ha="left", va="bottom", clip_on=False)
        ax.plot([nought, nought], [0.0, tall], color="black", lw=THIN, zorder=4)
        y, before = tall - 0.5, None
        for row in rows:
            first = row[0] != before
            y -= (_GAP if first and before is not None else 0.0) + _ROW
            before = row[0]
            _bar(ax, job, row, first, y + 0.5 * _ROW, (nought, per, scale))
    return ax


def _bar(ax: Any, job: Any, row: Row, first: bool, y: float, axis: tuple[float, float, float]) -> None:
    """Draw one bar with its names on the left and its values at its ends."""
    from matplotlib.patches import Rectangle

    index, part, stage, low, high = row
    nought, per, scale = axis
    half = 0.5 * _NAMES
    if first:
        name = shortened(f"{number_of(job.member, index)} {part}", half - 2.0)
        ax.text(0.0, y, name, ha="left", va="center")
    ax.text(half, y, shortened(stage, half - 1.0), ha="left", va="center")
    a, b = nought + min(low, 0.0) * per, nought + max(high, 0.0) * per
    if low > 0.0:
        a = nought + low * per
    if high < 0.0:
        b = nought + high * per
    look = part_look(index).drawn
    ax.add_patch(Rectangle((a, y - 0.4 * LINE), b - a, 0.8 * LINE, edgecolor="black", lw=MEDIUM, zorder=3, **look))
    for value, at, side in ((low, a, "right"), (high, b, "left")):
        if abs(value) > 1e-9 * scale:
            text = _number(value, job.style, scale)
            # beside the bar; on the other side of zero where there is no room between
            off = abs(at - nought) < text_width(text) + 1.6
            if side == "right":
                x = min(at, nought) - 0.6 if at > nought and off else at - 0.6
            else:
                x = max(at, nought) + 0.6 if at < nought and off else at + 0.6
            ax.text(x, y, text, ha=side, va="center", zorder=5)


def _number(value: float, style: str, scale: float) -> str:
    shown = max(abs(value), _OWN_RANGE * scale)
    return format_number(value, "stress", style, 3, shown).replace("-", "−")  # type: ignore[arg-type]
