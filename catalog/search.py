"""Find anything in the catalogue by any word, with values, units and source."""

import re
from collections.abc import Callable, Iterable
from dataclasses import dataclass

from fishbelly.catalog.designations import normal_form, series_of
from fishbelly.catalog.fasteners import Fastener, fasteners, slip_modulus
from fishbelly.catalog.k_def import SERVICE_CLASSES
from fishbelly.catalog.limits import PublishedLimit, limits
from fishbelly.catalog.materials import CatalogMaterial, find_material, materials
from fishbelly.catalog.rolled import SERIES, RolledSection, rolled_sections
from fishbelly.catalog.tables import nearest_names, read_table

Value = tuple[str, float, str]
"""Label, number, SI unit (empty for a ratio)."""


@dataclass(frozen=True)
class Entry:
    """One thing found.

    Attributes
    ----------
    group : str
        ``"material"``, ``"rolled section"``, ``"limit"``, ``"creep of timber"`` or ``"fastener"``.
    name : str
        Under which a job or the lookup functions know it.
    kind : str
        Closer description: the sort of material or section, the loads of a limit.
    values : tuple of (str, float, str)
        Label, number, SI unit.
    source : str
        Where it is published.
    note : str
        What to know before use; may be empty.
    outline : str
        Of a section: `RolledSection.kind`; else empty.
    """

    group: str
    name: str
    kind: str
    values: tuple[Value, ...]
    source: str
    note: str
    outline: str = ""


_MATERIAL_UNITS = {
    "E": "Pa",
    "G": "Pa",
    "poisson": "",
    "density": "kg/m3",
    "expansion": "1/K",
    "creep": "",
    "E_05": "Pa",
    "cracking": "Pa",
    "yield": "Pa",
}
"""Units by label; labels are keys of a job where it has one for it."""
_FIELDS = {"yield": "yield_strength"}
"""Attributes of `CatalogMaterial` that differ from the label."""


_SECTION_KINDS = {
    "I": "I-section",
    "tube": "tube, circular hollow section",
    "box": "box, square or rectangular hollow section",
    "rectangle": "rectangle, sawn lumber",
}


def material_entry(material: CatalogMaterial) -> Entry:
    """Entry of a material; values that its source does not give are left out."""
    values = [
        (label, float(value), unit)
        for label, unit in _MATERIAL_UNITS.items()
        if (value := getattr(material, _FIELDS.get(label, label))) is not None
    ]
    if material.band is not None:
        values += [("E lowest", material.band[0], "Pa"), ("E highest", material.band[1], "Pa")]
    if material.k_def is not None:
        values += [(f"k_def, service class {label}", k, "") for label, k in material.k_def.items()]
    return Entry("material", material.name, material.kind, tuple(values), material.source, material.note)


def section_entry(section: RolledSection) -> Entry:
    """Entry of a rolled section: its dimensions."""
    values = tuple((label, value, "" if label == "slope" else "m") for label, value in section.dimensions.items())
    kind = _SECTION_KINDS.get(section.kind, section.kind)
    return Entry("rolled section", section.designation, kind, values, section.source, "", section.kind)


def limit_entry(limit: PublishedLimit) -> Entry:
    """Entry of a published limit."""
    fields = (
        ("span over", limit.span_over, ""),
        ("absolute", limit.absolute, "m"),
        ("cantilever over", limit.cantilever_over, ""),
    )
    values = tuple((label, value, unit) for label, value, unit in fields if value is not None)
    kind = limit.loads + (", sideways" if limit.of == "across" else "")
    return Entry("limit", limit.name, kind, values, limit.source, limit.note)


def k_def_entries() -> list[Entry]:
    """Entries of the table of k_def, one a product."""
    return [
        Entry(
            "creep of timber",
            row["product"],
            row["standard"],
            tuple((f"k_def, service class {label}", float(row[label]), "") for label in SERVICE_CLASSES if row[label]),
            row["source"],
            row["note"],
        )
        for row in read_table("k_def.csv")
    ]


_SLIP_RULES = (
    "ρ_m of two timbers is the root of the product; twice as much to steel or concrete, by the timber's density "
    "alone (7.1(2), (3)); K_u = 2/3 K_ser"
)


def fastener_entry(fastener: Fastener) -> Entry:
    """Entry of a kind of fastener: its slip modulus at a usual size in a few timbers, as examples of its formula."""
    values: list[Value] = []
    if fastener.constant is not None:
        values.append(("stiffness", fastener.constant, "N/m"))
    elif fastener.size is not None:
        values.append(("size", fastener.size, "m"))
        for timber in ("C24", "GL28h"):
            density = find_material(timber).density or 0.0
            values.append((f"K_ser, {timber}", slip_modulus(fastener.name, fastener.size, density), "N/m"))
        density = find_material("C24").density or 0.0
        steel = slip_modulus(fastener.name, fastener.size, density, to_steel_or_concrete=True)
        values.append(("C24 to steel", steel, "N/m"))
    formula = fastener.formula if fastener.constant is not None else f"K_ser = {fastener.formula} (N/mm, kg/m3, mm)"
    rules = "" if fastener.constant is not None else _SLIP_RULES
    said = "; ".join(text for text in (fastener.words, formula, fastener.note, rules) if text)
    return Entry("fastener", fastener.name, fastener.kind, tuple(values), fastener.source, said)


_GROUPS: tuple[Callable[[], Iterable[Entry]], ...] = (
    lambda: map(material_entry, materials()),
    lambda: map(section_entry, rolled_sections()),
    lambda: map(limit_entry, limits()),
    k_def_entries,
    lambda: map(fastener_entry, fasteners()),
)


def everything() -> list[Entry]:
    """All entries: materials, rolled sections, limits, creep of timber, fasteners."""
    return [entry for group in _GROUPS for entry in group()]


_GROUP_WORDS = {
    "material": ("material", "materials"),
    "rolled section": ("rolled section", "rolled sections", "section", "sections", "size", "sizes"),
    "limit": ("limit", "limits", "deflection limits"),
    "creep of timber": ("creep of timber", "k_def", "kdef", "deformation factor"),
    "fastener": ("fastener", "fasteners", "slip modulus", "slip moduli", "k_ser", "kser"),
}
"""Words that ask for the whole of a group."""


def _squeezed(text: str) -> str:
    return "".join(text.split()).casefold().replace("×", "x")


def is_named(entry: Entry, word: str) -> bool:
    """Whether a word is the entry's name: in any case, with any spacing; of a section in any usual spelling."""
    if _squeezed(entry.name) == _squeezed(word):
        return True
    return entry.group == "rolled section" and normal_form(entry.name) == normal_form(word)


def _rank(entry: Entry, wanted: str) -> int:
    """0 for the name itself, 1 for its beginning, 2 inside it, 3 elsewhere."""
    name = _squeezed(entry.name)
    if is_named(entry, wanted):
        return 0
    if name.startswith(wanted):
        return 1
    if wanted in name:
        return 2
    return 3


def search(word: str, entries: Iterable[Entry] | None = None) -> list[Entry]:
    """Everything in which all the given words occur, in any case.

    Names, groups, kinds, sources and notes are looked at. What has the words as its name comes first, then
    names that begin with them, then names in which they occur, then the rest, each in catalogue order.

    Parameters
    ----------
    word : str
        One word or several; empty finds everything.
    entries : iterable of Entry, optional
        What to search in; default `everything`.

    Returns
    -------
    list of Entry
        Empty when nothing is found.

    Examples
    --------
    >>> [entry.name for entry in search("ipe 300")][:2]
    ['IPE 300', 'IPE A 300']
    """
    known = everything() if entries is None else list(entries)
    asked = " ".join(word.casefold().split())
    for group, words in _GROUP_WORDS.items():
        if asked in words:
            return [entry for entry in known if entry.group == group]
    in_name = _begins(_squeezed(word))
    parts = [_begins(part) for part in asked.replace("×", "x").split()]
    only_names = _is_designation(word)
    found = []
    for entry in known:
        text = (entry.name if only_names else " ".join(_texts(entry))).casefold()
        if all(p.search(text) for p in parts) or in_name.search(_squeezed(entry.name)) or is_named(entry, word):
            found.append(entry)
    return sorted(found, key=lambda entry: _rank(entry, _squeezed(word)))


def _texts(entry: Entry) -> tuple[str, ...]:
    return (entry.group, *_GROUP_WORDS[entry.group], entry.name, entry.kind, entry.source, entry.note)


def _begins(word: str) -> re.Pattern[str]:
    """Pattern of a word where a word or a number begins."""
    before = r"(?<!\d)(?<!\d\.)" if word[:1].isdigit() else r"(?<![^\W\d_])"
    return re.compile(before + re.escape(word))


def _is_designation(word: str) -> bool:
    """Whether a text is a section's designation by its look: letters of a series, then numbers."""
    form = normal_form(word)
    series = series_of(form)
    return series != "" and series in SERIES and any(c.isdigit() for c in form)


def nearest(word: str, entries: Iterable[Entry] | None = None, count: int = 6) -> list[str]:
    """Names, and words for kinds of things, that look most like a word that finds nothing, the best first.

    Parameters
    ----------
    word : str
        What was asked for.
    entries : iterable of Entry, optional
        What there is; default `everything`.
    count : int
        How many at most.
    """
    known = list(everything() if entries is None else entries)
    sections = tuple(entry.name for entry in known if entry.group == "rolled section")
    near = nearest_names(word, sections, count, normal_form) if any(c.isdigit() for c in word) else []
    if near and series_of(normal_form(near[0])) == series_of(normal_form(word)):
        return near
    kinds = {w.strip("(),") for entry in known for w in (*entry.kind.split(), *entry.group.split())}
    words = tuple(dict.fromkeys((*(entry.name for entry in known), *sorted(kinds))))
    return nearest_names(word, words, count)
