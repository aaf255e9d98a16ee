"""Materials of published standards: stiffness, density, expansion.

Creep is given only where it is nothing (metals). Of timber it depends on the service class, of concrete on
age, humidity and thickness: there it is None, and a job with long-term loads must state it.
"""

from dataclasses import dataclass
from functools import cache

from fishbelly.catalog.k_def import k_def_by_class
from fishbelly.catalog.tables import UnknownName, data_files, folded, nearest_names, numbers, read_table


@dataclass(frozen=True)
class CatalogMaterial:
    """A material as a standard publishes it, in SI units.

    Attributes
    ----------
    name : str
        As the standard writes it.
    E : float
        Modulus of elasticity [Pa]: mean value, short term; of timber along the grain.
    G : float or None
        Shear modulus [Pa], where the source gives one.
    poisson : float or None
        Poisson's ratio, where the source gives one.
    density : float or None
        Mean density [kg/m3].
    expansion : float or None
        Coefficient of thermal expansion [1/K].
    creep : float or None
        Creep coefficient; 0 for metals at room temperature, None where it depends on what the catalogue
        cannot know.
    E_05 : float or None
        5 % fractile of E [Pa] (of US lumber: E_min).
    cracking : float or None
        Mean tensile strength of concrete f_ctm [Pa].
    yield_strength : float or None
        Yield or 0.2 % proof strength, nominal [Pa].
    k_def : dict of str to float, or None
        Deformation factor by service class ``"1"``, ``"2"``, ``"3"``, of timber products.
    source : str
        Standard, edition, table.
    note : str
        What to know before use; may be empty.
    band : tuple of float, or None
        Lowest and highest E [Pa] that the source gives, where it gives a range.
    kind : str
        In the words of the trade, ``"solid timber, softwood"``.
    """

    name: str
    E: float
    G: float | None
    poisson: float | None
    density: float | None
    expansion: float | None
    creep: float | None
    E_05: float | None
    cracking: float | None
    yield_strength: float | None
    k_def: dict[str, float] | None
    source: str
    note: str
    band: tuple[float, float] | None = None
    kind: str = ""


class UnknownMaterial(UnknownName):
    """No material of that name is in the catalogue; `name` is what was asked for, `nearest` what looks most like it."""

    what = "material"


def _material(row: dict[str, str]) -> CatalogMaterial:
    value = numbers(row)
    product = row["k_def product"]
    return CatalogMaterial(
        name=row["name"],
        E=value["E"],
        G=value.get("G"),
        poisson=value.get("poisson"),
        density=value.get("density"),
        expansion=value.get("expansion"),
        creep=value.get("creep"),
        E_05=value.get("E_05"),
        cracking=value.get("cracking"),
        yield_strength=value.get("yield"),
        k_def=k_def_by_class(product) if product else None,
        source=row["source"],
        note=row["note"],
        band=(value["E_low"], value["E_high"]) if "E_low" in value else None,
        kind=row["kind"],
    )


@cache
def _rows_by_folded_name(file: str) -> dict[str, dict[str, str]]:
    return {folded(row["name"]): row for row in read_table(file)}


def find_material(name: str) -> CatalogMaterial:
    """Material by its name, tolerant of case and spaces only.

    Parameters
    ----------
    name : str
        ``"C24"``, ``"GL28h"``, ``"S275"``, ``"C30/37"``, ``"6061-T6"`` …

    Returns
    -------
    CatalogMaterial
        In SI units.

    Raises
    ------
    UnknownMaterial
        When there is none; names the nearest.

    Examples
    --------
    >>> find_material("gl 28h").E
    12600000000.0
    """
    wanted = folded(name)
    for file in data_files("materials_"):
        row = _rows_by_folded_name(file).get(wanted)
        if row is not None:
            return _material(row)
    raise UnknownMaterial(name, nearest_names(name, material_names()))


@cache
def material_names() -> tuple[str, ...]:
    """All names of the catalogue, file by file."""
    return tuple(row["name"] for file in data_files("materials_") for row in read_table(file))


def materials() -> list[CatalogMaterial]:
    """All materials of the catalogue, in the order of `material_names`."""
    return [_material(row) for file in data_files("materials_") for row in read_table(file)]
