"""Materials of a job: its own, and those of the catalogue that its parts name."""

from __future__ import annotations

from fishbelly.catalog.materials import CatalogMaterial, UnknownMaterial
from fishbelly.cli.faults import as_written
from fishbelly.cli.job_creep import RULE
from fishbelly.cli.job_models import MaterialTable
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_tables import read_table
from fishbelly.cli.job_types import Path
from fishbelly.member.description import Material, Strength

_SAME = ("E", "G", "poisson", "density", "expansion", "creep", "cracking", "yield_strength")


def read_materials(report: Report) -> tuple[list[Material], dict[str, str]]:
    """Read the materials of a job.

    Parameters
    ----------
    report : Report
        The job; takes the faults.

    Returns
    -------
    materials : list of Material
        Those of ``[material.NAME]`` that can be read, then those of the catalogue that parts name.
    names : dict of str to str
        Every name that a part may use, to its proper spelling; names of materials that cannot be read too.
    """
    own = report.data.get("material", {})
    if not isinstance(own, dict):
        report.about(("material",), "materials are tables with their name, [material.NAME]")
        own = {}
    materials = [m for name in own if (m := own_material(name, report)) is not None]
    names = {name: name for name in own}
    for i, part in enumerate(report.data.get("part", [])):
        name = part.get("material") if isinstance(part, dict) else None
        if not isinstance(name, str) or name in names or not name.strip():
            continue
        try:
            entry = report.catalogue.find_material(name)
        except UnknownMaterial as error:
            _unknown(("part", i, "material"), name, [*own], error.nearest, report)
            continue
        names[name] = entry.name
        report.named_at.setdefault(entry.name, ("part", i, "material"))
        if all(m.name != entry.name for m in materials):
            materials.append(_from_catalogue(entry, report))
    return materials, names


def _unknown(path: Path, name: str, own: list[str], near: list[str], report: Report) -> None:
    """Note a name that is neither in the job nor in the catalogue."""
    from fishbelly.cli.faults import nearest

    mine = nearest(name, own)
    shown = [mine] if mine else near
    hint = f"nearest {'is' if len(shown) == 1 else 'are'} " + ", ".join(f'"{n}"' for n in shown) if shown else ""
    report.add(path, "a material of the job or the catalogue", as_written(name), hint)


def _from_catalogue(entry: CatalogMaterial | Material, report: Report) -> Material:
    if isinstance(entry, Material):
        return entry
    report.published[entry.name] = entry
    return Material(entry.name, **{key: getattr(entry, key) for key in _SAME}, cracks=_asks_for_cracks(report))


def _asks_for_cracks(report: Report) -> bool:
    """Whether a job has a key that speaks of cracks: then concrete of the catalogue cracks too, not only in a note."""
    return any(key in report.data for key in ("tension_stiffening", "cracks"))


def own_material(name: str, report: Report, model: type[MaterialTable] = MaterialTable) -> Material | None:
    """Read one ``[material.NAME]``; None where it cannot be had.

    Parameters
    ----------
    name : str
        Its name.
    report : Report
        The file; takes the faults.
    model : type
        What its table has to be.
    """
    path: Path = ("material", name)
    raw = report.data["material"][name]
    if not isinstance(raw, dict):
        report.add(path, "a table [material.NAME]", as_written(raw))
        return None
    table = read_table(model, raw, path, report)
    if table is None:
        return None
    values: dict[str, float | None] = dict.fromkeys(_SAME)
    base: Material | None = None
    if table.like is not None:
        try:
            entry = report.catalogue.find_material(table.like)
        except UnknownMaterial as error:
            hint = "nearest are " + ", ".join(f'"{n}"' for n in error.nearest) if error.nearest else ""
            report.add((*path, "like"), "a material of the catalogue", as_written(table.like), hint)
            return None
        values = {key: getattr(entry, key) for key in _SAME}
        if isinstance(entry, Material):
            base = entry
        else:
            report.published[name] = entry
    if table.G is not None and table.poisson is not None:
        report.add((*path, "poisson"), "either `G` or `poisson`", "both")
        return None
    if table.G is not None or table.poisson is not None:
        values["G"] = values["poisson"] = None
    elif table.E is not None and values.get("poisson") is not None:
        # G follows an E of one's own, as Poisson's ratio has it
        values["G"] = None
    written = {key: getattr(table, "yield_" if key == "yield_strength" else key) for key in _SAME}
    values |= {key: value for key, value in written.items() if value is not None}
    if values["E"] is None:
        report.add((*path, "E"), "a modulus, or `like` with a name of the catalogue", "")
        return None
    E = values.pop("E")
    assert E is not None
    band = None if table.band is None else (table.band[0], table.band[1])
    if band is None and base is not None and table.E is None:
        band = base.band
    if band is not None and not band[0] <= E <= band[1]:
        report.warnings.append(f'material "{name}": its E lies outside its band')
    if isinstance(raw.get("creep"), dict):
        report.warnings.append(f'material "{name}": creep factor {table.creep:.3g} by {RULE}, Annex B')
    cracks = table.cracking is not None or _asks_for_cracks(report)
    strength = None if table.strength is None else Strength(**table.strength)
    if strength is None and base is not None:
        strength = base.strength
    return Material(name, E, band=band, strength=strength, no_tension=table.no_tension, cracks=cracks, **values)
