"""The words under a cross-section: its centroid and stiffness, materials with n, parts with their sizes."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from typing import Any

from fishbelly.cli.figures.letters import lines_of, one_line, shortened
from fishbelly.cli.figures.looks import number_of, part_look
from fishbelly.cli.figures.paper import LINE, MEDIUM, in_millimetres, own_panel, pens, text_width
from fishbelly.cli.figures.section_dimensions import size_words
from fishbelly.cli.figures.section_shapes import part_shapes
from fishbelly.cli.figures.ticks import value
from fishbelly.cli.format_quantity import unit_label
from fishbelly.member.description import Member

_ROW = LINE + 0.5
_SWATCH = 5.0
_BEFORE = 10.2
"""Room for the number and the fill of a part [mm]."""
_GAP = 1.5


def _facts(data: Mapping[str, Any], style: str) -> str:
    def offset(v: float, positive: str, negative: str) -> str:
        v = 0.0 if abs(v) < 5e-6 else v
        return f"{value(abs(v), 'length', style, 4)} {positive if v >= 0.0 else negative}" if v else ""

    places = [offset(data["z_c"], "above", "below"), offset(data["y_c"], "right of", "left of")]
    words = [
        f"E-weighted centroid {places[0] + ' the datum line' if places[0] else 'on the datum line'}"
        + (f" and {places[1]} y = 0" if places[1] else "")
    ]
    words += [
        f"EA {value(data['EA'], 'axial stiffness', style, 4)}",
        f"EI_y {value(data['EI_y'], 'bending stiffness', style, 4)} about the horizontal axis y–y",
        f"EI_z {value(data['EI_z'], 'bending stiffness', style, 4)}",
    ]
    words += _principal(data.get("principal") or {}, style)
    unit = "inches" if style == "us" else unit_label("length", style)  # type: ignore[arg-type]
    to = data["transformed"]
    if len(to["n"]) > 1:
        words.append(f"n = E / E of {one_line(to['to'])}")
    return "; ".join([*words, f"dimensions in {unit}"])


def _principal(axes: Mapping[str, Any], style: str) -> list[str]:
    """Say how the principal axes lie and what they are worth; nothing where all axes are alike."""
    big, small, angle = (axes.get(k) for k in ("EI_1", "EI_2", "angle"))
    if big is None or small is None or angle is None or big - small <= 1e-9 * big:
        return []
    # upright is upright, whichever way it was turned
    turn = abs(angle) if abs(abs(angle) - 0.5 * math.pi) < 1e-6 else angle
    turned = value(turn, "angle", style, 3) if abs(turn) > 1e-6 else "0 deg"
    return [
        f"principal axis 1 turned {turned} from y, EI_1 {value(big, 'bending stiffness', style, 4)}",
        f"EI_2 {value(small, 'bending stiffness', style, 4)}",
    ]


def _materials(member: Member, data: Mapping[str, Any], style: str) -> list[str]:
    """Words of the materials at the section."""
    n = data["transformed"]["n"]
    return [
        f"{one_line(name)}: E = {value(member.material(name).E, 'modulus', style, 4)}, n = {n[name]:.4g}" for name in n
    ]


def _parts(member: Member, shapes: Sequence[tuple[int, Any]], style: str) -> list[str]:
    found = []
    for index, shape in shapes:
        part = member.parts[index]
        left, bottom, right, top = shape.bounds
        size = f"{size_words(right - left, style)} × {size_words(top - bottom, style)}"
        over = " over both" if part.pair else ""
        found.append(f"{one_line(part.name)}, {one_line(part.material or '')}, {size}{over}")
    return found


def _columns(texts: Sequence[str], width: float, more: float) -> int:
    if len(texts) < 3:
        return 1
    widest = max(text_width(t) for t in texts) + more
    return max(1 if len(texts) < 9 else 2, min(4, int(width // widest)))


def height(job: Any, data: Mapping[str, Any], width: float) -> float:
    """Height that the words take in a width [mm]."""
    shapes = part_shapes(job.member, data["x"], data["side"], data.get("stage"))
    materials, parts = _materials(job.member, data, job.style), _parts(job.member, shapes, job.style)
    facts = lines_of(_facts(data, job.style), width, 5)
    rows = sum(
        -(-len(texts) // _columns(texts, width, more)) for texts, more in ((materials, 3.0), (parts, _BEFORE + 1.0))
    )
    return len(facts) * LINE + rows * _ROW + 2.0 * _GAP


def materials_height(job: Any, data: Mapping[str, Any], width: float) -> float:
    """Height that the key of the materials alone takes in a width [mm]."""
    texts = _materials(job.member, data, job.style)
    return -(-len(texts) // _columns(texts, width, 3.0)) * _ROW


def plot_materials(job: Any, data: Mapping[str, Any], ax: Any) -> Any:
    """Write the key of the materials alone, in axes as for `plot`."""
    with pens():
        width, tall = in_millimetres(ax)
        _table(ax, _materials(job.member, data, job.style), tall, width, job.member)
    return ax


def plot(job: Any, data: Mapping[str, Any], ax: Any = None) -> Any:
    """Write the words that belong to a cross-section, in axes in mm of paper; arguments as of `cross_section.plot`."""
    with pens():
        if ax is None:
            ax = own_panel(height(job, data, 149.0), left=6.0, foot=2.0)
        width, tall = in_millimetres(ax)
        y = tall
        for line in lines_of(_facts(data, job.style), width, 5):
            ax.text(0.0, y - 0.5 * LINE, line, ha="left", va="center")
            y -= LINE
        y = _table(ax, _materials(job.member, data, job.style), y - _GAP, width, job.member)
        shapes = part_shapes(job.member, data["x"], data["side"], data.get("stage"))
        _table(ax, _parts(job.member, shapes, job.style), y - _GAP, width, job.member, [index for index, _ in shapes])
    return ax


def _table(ax: Any, texts: Sequence[str], top: float, width: float, member: Member, parts: Sequence[int] = ()) -> float:
    """Write texts in columns, with number and fill of parts before them; returns where the next begins."""
    from matplotlib.patches import Rectangle

    indent = _BEFORE if parts else 0.0
    count = _columns(texts, width, indent + (1.0 if parts else 3.0))
    rows, wide = -(-len(texts) // count), width / count
    for k, text in enumerate(texts):
        x, y = k // rows * wide, top - (k % rows + 0.5) * _ROW
        if parts:
            ax.text(x + 3.4, y, number_of(member, parts[k]), ha="right", va="center")
            swatch = (x + 4.2, y - 0.42 * LINE)
            ax.add_patch(
                Rectangle(swatch, _SWATCH, 0.84 * LINE, edgecolor="black", lw=MEDIUM, **part_look(parts[k]).drawn)
            )
        ax.text(x + indent, y, shortened(text, wide - indent - 1.0), ha="left", va="center")
    return top - rows * _ROW
