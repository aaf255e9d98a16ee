"""The catalogue as text for people: what there is, lists of what was found, one entry in full."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Sequence

from fishbelly.catalog.search import Entry, Value
from fishbelly.cli.catalog_properties import MEANINGS, properties
from fishbelly.cli.catalog_snippets import snippet
from fishbelly.cli.format_quantity import NOTHING, unit_label, unit_size
from fishbelly.cli.text_table import paragraph, shown_width

MOST = 40
"""Rows of a list that are shown."""
MOST_LIMITS = 60
"""Limits take one line each, and are shown together."""
_EXPLAINED = 12
"""Up to so many limits are shown with the loads that they are for."""

_BRIEF = ("A", "I_y", "W_y")
"""Computed properties that a list of sections shows."""
_WIDTH = 80
"""Columns of a terminal; computed properties that do not fit are left to the section in full."""
_OF_BRIEF = "A, I_y and W_y (elastic) are computed from the dimensions."
_OF_LIMITS = (
    "L is the span, of a cantilever twice its own length; l is the own length of a cantilever. Of several the "
    "smaller governs."
)
_STRESSES = ("cracking", "yield")
_WHAT = {"N/m": "stiffness", "Pa": "modulus", "kg/m3": "density", "1/K": "expansion", "m": "length", "": "factor"}
_MAIN = {
    "material": ("E", "G", "poisson", "density"),
    "rolled section": ("depth", "width", "diameter", "wall", "thickness", "web", "flange", "radius"),
}
_GROUPS = {
    "material": "Materials",
    "rolled section": "Sections",
    "limit": "Deflection limits",
    "creep of timber": "Creep of timber, k_def (EN 1995-1-1)",
    "fastener": "Fasteners, slip modulus (EN 1995-1-1, EN 1994-1-1)",
}
_ASK = {
    "material": "fishbelly catalog C24, fishbelly catalog stainless",
    "rolled section": "fishbelly catalog IPE 300, fishbelly catalog UB 457",
    "limit": "fishbelly catalog limits, fishbelly catalog IBC floor",
    "creep of timber": "fishbelly catalog k_def",
    "fastener": "fishbelly catalog bolt, fishbelly catalog fasteners",
}


def what_of(label: str, unit: str) -> str:
    """Name the quantity of a value, as `format_quantity` knows it."""
    return "stress" if label in _STRESSES else _WHAT[unit]


def shown(value: Value, style: str, digits: int = 6) -> str:
    """Write a value with up to so many significant figures in the unit of a style, without the unit."""
    label, number, unit = value
    size = unit_size(what_of(label, unit), style)  # type: ignore[arg-type]
    scaled = number / size
    if unit == "1/K":
        return f"{scaled * 1e6:.{digits}g}e-6"
    rounded = float(f"{scaled:.{digits}g}")
    return f"{rounded:.6g}"


def _unit(value: Value, style: str) -> str:
    return unit_label(what_of(value[0], value[2]), style)  # type: ignore[arg-type]


def overview(entries: Sequence[Entry]) -> str:
    """Write what there is: groups with counts and how to ask."""
    lines = []
    for group, title in _GROUPS.items():
        own = [entry for entry in entries if entry.group == group]
        lines.append(f"{title}: {len(own)}")
        if group != "creep of timber":
            kinds = counts(own)
            lines += paragraph(", ".join(f"{kind} {count}" for kind, count in kinds.items()), "  ")
        lines += [*paragraph(_ASK[group], "  ask: "), ""]
    lines += paragraph(
        "Any word finds: a name, a kind, a standard, a clause. A single hit is shown in full, with lines to paste "
        "into a job; --snippet prints those alone. Sections and materials of your own: see fishbelly catalog --help."
    )
    return "\n".join(lines)


def counts(entries: Iterable[Entry]) -> dict[str, int]:
    """Count entries of one group by kind: sections by series, limits by code."""
    return dict(Counter(_sort(entry) for entry in entries))


def _sort(entry: Entry) -> str:
    if entry.group == "limit":
        return entry.source.rpartition(", ")[0]
    if entry.group == "rolled section":
        letters = entry.name[: next((k for k, c in enumerate(entry.name) if c.isdigit()), None)].strip()
        return letters or "sawn lumber"
    return entry.kind.replace(",", "")


def detail(entry: Entry, style: str) -> str:
    """Write one entry in full, with lines to paste into a job."""
    lines = [entry.name, *paragraph(f"{entry.group}: {entry.kind}" if entry.kind else entry.group, "  ")]
    k_def = [v for v in entry.values if v[0].startswith("k_def")]
    rest = [v for v in entry.values if v not in k_def]
    width = max((len(v[0]) for v in rest), default=0)
    width = max(width, len("source"), len("k_def") if k_def else 0) + 2
    for value in rest:
        lines.append(f"  {value[0]:<{width}}{_limit_value(entry, value, style)}".rstrip())
    if k_def:
        said = ", ".join(f"{v[1]:g} in service class {v[0].rpartition(' ')[2]}" for v in k_def)
        lines += paragraph(said, f"  {'k_def':<{width}}")
    lines += paragraph(entry.source, f"  {'source':<{width}}")
    if entry.note:
        lines += paragraph(entry.note, f"  {'note':<{width}}")
    lines += _computed(entry, style)
    pasted = [f"    {line}" for line in snippet(entry).splitlines()]
    return "\n".join([*lines, "", "In a job:", "", *pasted])


def _computed(entry: Entry, style: str) -> list[str]:
    """Write what follows from the dimensions of a section, with what each is."""
    found = properties(entry)
    if not found:
        return []
    cells = [(symbol, _property(value, what, style), MEANINGS[symbol]) for symbol, value, what in found]
    widths = [max(len(cell[k]) for cell in cells) + 2 for k in range(2)]
    rows = [f"    {symbol:<{widths[0]}}{text:<{widths[1]}}{said}" for symbol, text, said in cells]
    return ["", "  Computed from the dimensions", *rows]


def _property(value: float, what: str, style: str) -> str:
    """Write a computed value with four figures and its unit."""
    return f"{_four(value / unit_size(what, style))} {unit_label(what, style)}"  # type: ignore[arg-type]


def _four(number: float) -> str:
    """Write four significant figures, digits before the point never rounded away."""
    return f"{number:.0f}" if abs(number) >= 1e3 else f"{number:.4g}"


def _limit_value(entry: Entry, value: Value, style: str) -> str:
    text = f"{shown(value, style, 4 if value[2] == 'N/m' else 6)} {_unit(value, style)}".rstrip()
    if entry.group != "limit":
        return text
    return {"span over": f"L/{text}", "cantilever over": f"own length/{text}"}.get(value[0], text)


def listing(entries: Sequence[Entry], style: str, asked: str, everything: bool = False) -> str:
    """Write what was found, group by group; long lists are cut unless `everything` is wanted.

    Parameters
    ----------
    entries : sequence of Entry
        What was found.
    style : {"metric", "us"}
        Units.
    asked : str
        The words asked for.
    everything : bool
        Whether nothing is cut.
    """
    lines: list[str] = []
    sources: dict[str, int] = {}
    for group, title in _GROUPS.items():
        own = [entry for entry in entries if entry.group == group]
        most = len(own) if everything else (MOST_LIMITS if group == "limit" else MOST)
        if not own:
            continue
        lines.append(f"{title}: {len(own)} for “{asked}”" if asked else f"{title}: {len(own)}")
        lines += _limits(own[:most], style) if group == "limit" else _by_kind(own[:most], style, sources)
        if len(own) > most:
            lines += paragraph(f"… and {len(own) - most} more: {_narrower(own, asked)}, or see --all", "  ")
        if group == "rolled section":
            lines += ["", *paragraph(_OF_BRIEF, "  ")]
        lines.append("")
    if sources:
        lines.append("Sources")
        for source, number in sources.items():
            lines += paragraph(source, f"  [{number}] ")
        lines.append("")
    return "\n".join([*lines, "One of them in full, with lines for a job: fishbelly catalog NAME"])


def _narrower(entries: Sequence[Entry], asked: str) -> str:
    """Say which words narrow a list."""
    kinds = [kind for kind in counts(entries) if kind.casefold() != asked.casefold()]
    if len(kinds) > 1:
        return f"narrow it with another word, such as {', '.join(kinds[:3])}"
    return f"narrow it with more of the name, such as {entries[len(entries) // 2].name}"


def _by_kind(entries: Sequence[Entry], style: str, sources: dict[str, int]) -> list[str]:
    lines = []
    for kind in dict.fromkeys(entry.kind for entry in entries):
        lines += [f"  {kind}", *_rows([entry for entry in entries if entry.kind == kind], style, sources), ""]
    return lines[:-1]


def _rows(entries: Sequence[Entry], style: str, sources: dict[str, int]) -> list[str]:
    labels = _MAIN.get(entries[0].group) or tuple(dict.fromkeys(v[0] for e in entries for v in e.values))
    known = {label: unit for e in entries for label, _, unit in e.values}
    labels = tuple(label for label in labels if label in known)
    heads = [label.replace("k_def, service class", "class") for label in labels]
    units = [_unit((label, 0.0, known[label]), style) for label in labels]
    rows = [["", *heads], ["", *units]]
    for entry in entries:
        values = {value[0]: shown(value, style, 5 if value[2] == "m" else 4) for value in entry.values}
        rows.append([entry.name, *(values.get(label, NOTHING) for label in labels)])
    ends = ["", "", *(f"[{sources.setdefault(_short(e.source), len(sources) + 1)}]" for e in entries)]
    for column in _brief(entries, style):
        wider = [[*row, cell] for row, cell in zip(rows, column, strict=True)]
        if max(map(len, _aligned(wider, ends))) <= _WIDTH:
            rows = wider
    return _aligned(rows, ends)


def _aligned(rows: Sequence[Sequence[str]], ends: Sequence[str]) -> list[str]:
    """Set rows in columns, each with its end; rows without a word are left out."""
    whole = [[*row, end] for row, end in zip(rows, ends, strict=True)]
    whole = [row for row in whole if any(row)]
    widths = [max(shown_width(row[k]) for row in whole) for k in range(len(whole[0]))]
    return ["    " + _row(row, widths) for row in whole]


def _brief(entries: Sequence[Entry], style: str) -> list[list[str]]:
    """Columns of computed properties of a list of sections: head, unit, values."""
    computed = [{symbol: (value, what) for symbol, value, what in properties(entry)} for entry in entries]
    columns = []
    for symbol in _BRIEF:
        what = next((own[symbol][1] for own in computed if symbol in own), None)
        if what is not None:
            size = unit_size(what, style)  # type: ignore[arg-type]
            cells = [_four(own[symbol][0] / size) if symbol in own else NOTHING for own in computed]
            columns.append([symbol, unit_label(what, style), *cells])  # type: ignore[arg-type]
    return columns


def _short(source: str) -> str:
    """Give where a thing is published without how its row was confirmed, but with "from memory"."""
    short = source.partition(";")[0]
    return f"{short}, from memory" if "from memory" in source and "from memory" not in short else short


def _row(cells: Sequence[str], widths: Sequence[int]) -> str:
    first = cells[0] + " " * (widths[0] - shown_width(cells[0]))
    rest = [" " * (w - shown_width(c)) + c for c, w in zip(cells[1:], widths[1:], strict=True)]
    return "  ".join([first, *rest]).rstrip()


def _limits(entries: Sequence[Entry], style: str) -> list[str]:
    """Write limits code by code: name, what is allowed, clause."""
    lines = []
    allowed = {entry.name: _allowed(entry, style) for entry in entries}
    width = max(len(name) + len(text) for name, text in allowed.items()) + 2
    for code in dict.fromkeys(_sort(entry) for entry in entries):
        lines.append(f"  {code}")
        for entry in (entry for entry in entries if _sort(entry) == code):
            clause = entry.source.rpartition(", ")[2]
            lines.append(f"    {entry.name}{allowed[entry.name]:>{width - len(entry.name)}}  {clause}")
            if len(entries) <= _EXPLAINED:
                lines += paragraph(entry.kind, "      ")
    return [*lines, *paragraph(_OF_LIMITS, "  ")]


def _allowed(entry: Entry, style: str) -> str:
    values = {label: value for label, value, _ in entry.values}
    said = []
    if "span over" in values:
        said.append(f"L/{values['span over']:.4g}")
    if "cantilever over" in values:
        said.append(f"l/{values['cantilever over']:.4g}")
    if "absolute" in values:
        value = ("absolute", values["absolute"], "m")
        said.append(f"{shown(value, style)} {_unit(value, style)}")
    return ", ".join(said)
