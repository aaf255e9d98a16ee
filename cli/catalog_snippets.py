"""Entries of the catalogue as lines of TOML to paste into a job."""

from __future__ import annotations

from fishbelly.catalog.search import Entry

_NAMES = (
    ("reinforcing", "bars"),
    ("prestressing", "tendon"),
    ("steel", "steel"),
    ("concrete", "concrete"),
    ("timber", "timber"),
    ("lumber", "timber"),
    ("alumin", "aluminium"),
    ("iron", "iron"),
)
"""Names for a material in a job, by a word of its kind."""
_MATERIALS = (("AISC", "A992"), ("Lumber", "DF-L No.2"))
"""Usual materials of sections, by a word of their source; else S275."""


def snippet(entry: Entry) -> str:
    """Write lines of a job that use an entry.

    Parameters
    ----------
    entry : Entry
        A material, a rolled section, a limit, a row of k_def or a fastener.

    Returns
    -------
    str
        TOML, without a line end after the last line.

    Examples
    --------
    >>> from fishbelly.catalog.search import search
    >>> print(snippet(search("IPE 300")[0]))
    [[part]]
    name = "beam"
    size = "IPE 300"
    material = "S275"     # or another
    """
    if entry.group == "rolled section":
        material = next((name for word, name in _MATERIALS if word in entry.source), "S275")
        return f'[[part]]\nname = "beam"\nsize = "{entry.name}"\nmaterial = "{material}"     # or another'
    if entry.group == "limit":
        sideways = "; it is of the deflection across" if entry.kind.endswith("sideways") else ""
        return (
            f'[[limit]]\nlike = "{entry.name}"\n'
            f'# combination = "NAME"     # the one for: {entry.kind.removesuffix(", sideways")}{sideways}'
        )
    if entry.group == "fastener":
        return _joint(entry)
    if entry.group == "creep of timber":
        return f'[material.timber]\nlike = "NAME"     # a material of {entry.name}\n{_creep(entry)}'
    name = next((name for word, name in _NAMES if word in entry.kind), "mine")
    lines = [f"[material.{name}]", f'like = "{entry.name}"     # or, straight in a part: material = "{entry.name}"']
    labels = [label for label, _, _ in entry.values]
    if any(label.startswith("k_def") for label in labels):
        lines.append(_creep(entry))
    elif "creep" not in labels:
        lines.append("# creep = …     # needed where loads are sustained; the catalogue cannot know it")
    return "\n".join(lines)


def _joint(entry: Entry) -> str:
    """Write the joint of a part by a fastener, at the size and in the timber of the entry's first value."""
    values = {label: value for label, value, _ in entry.values}
    stiffness = values.get("stiffness", values.get("K_ser, C24", 0.0))
    one = entry.name if "size" not in values else f"{entry.name}, {1e3 * values['size']:g} mm in C24"
    return (
        f'[[part]]\nname = "NAME"     # one {one}\n'
        f'joined = {{ stiffness = "{stiffness / 1e6:.4g} kN/mm", pitch = "150 mm", rows = 1 }}'
    )


def _creep(entry: Entry) -> str:
    """Write k_def of the first service class, the others beside it."""
    values = [(label.rpartition(" ")[2], value) for label, value, _ in entry.values if label.startswith("k_def")]
    (first, creep), *others = values
    rest = "".join(f"; {value:g} in class {label}" for label, value in others)
    return f"creep = {creep:g}     # k_def in service class {first}{rest}"
