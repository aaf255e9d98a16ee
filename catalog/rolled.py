"""Rolled and hollow sections: dimensions by designation.

The catalogue holds dimensions with their radii and slopes, never section properties to compute with:
these follow from the outline. The printed area and second moments stand in the data beside each row
that has them; a test computes both anew and compares.
"""

from dataclasses import dataclass
from functools import cache

from fishbelly.catalog.designations import normal_form, series_of
from fishbelly.catalog.tables import data_files, nearest_names, numbers, read_table

PRINTED = ("A", "Iy", "Iz")
"""Columns of printed properties; they serve as a check only."""

SERIES: dict[str, tuple[str, ...]] = {
    "IPE": ("sections_ipe.csv",),
    "IPEA": ("sections_ipea.csv",),
    "IPEO": ("sections_ipeo.csv",),
    "HEAA": ("sections_heaa.csv",),
    "HEA": ("sections_hea.csv",),
    "HEB": ("sections_heb.csv",),
    "HEM": ("sections_hem.csv",),
    "UB": ("sections_ub.csv",),
    "UC": ("sections_uc.csv",),
    "UPN": ("sections_upn.csv",),
    "UPE": ("sections_upe.csv",),
    "PFC": ("sections_pfc.csv",),
    "L": ("sections_l_equal.csv", "sections_l_unequal.csv", "sections_us_l.csv"),
    "T": ("sections_t.csv",),
    "SHS": ("sections_shs_hot.csv", "sections_shs_cold.csv"),
    "RHS": ("sections_rhs_hot.csv", "sections_rhs_cold.csv"),
    "CHS": ("sections_chs.csv",),
    "W": ("sections_us_w.csv",),
    "C": ("sections_us_c.csv",),
    "HSS": ("sections_us_hss.csv", "sections_us_pipe.csv"),
    "PIPE": ("sections_us_pipe.csv",),
    "": ("sections_us_lumber.csv",),
}
"""Files in which the sections of a series stand, by the letters of the designation."""


@dataclass(frozen=True)
class RolledSection:
    """A section as the mill delivers it.

    Attributes
    ----------
    designation : str
        As the standard writes it, ``"IPE 300"``.
    kind : str
        ``"I"``, ``"channel"``, ``"angle"``, ``"tee"``, ``"tube"``, ``"box"`` or ``"rectangle"``.
    dimensions : dict of str to float
        [m]; ``slope`` is a ratio. By kind:

        - I: depth, width, web, flange, radius (at the root);
        - channel: depth, width, web, flange, radius, toe_radius, slope (of the inner faces of the flanges, 0
          for parallel ones), flange_at (distance from the back of the web where the flange thickness holds);
        - angle: depth (the vertical leg), width, thickness, radius (at the root), toe_radius (both toes);
        - tee: depth, width, web, flange, radius, toe_radius (of the flange), web_toe_radius, slope (of
          the inner face of the flange and of each face of the web), flange_at (distance from the middle of
          the web), web_at (distance from the outer face of the flange);
        - tube: diameter, wall;
        - box: width, depth, wall, radius (outside), inner_radius;
        - rectangle: width, depth.
    source : str
        Standard, edition and how the row was confirmed.
    """

    designation: str
    kind: str
    dimensions: dict[str, float]
    source: str


class UnknownDesignation(LookupError):
    """No section of that designation is in the catalogue.

    Attributes
    ----------
    designation : str
        What was asked for.
    nearest : list of str
        Designations that look most like it, the best first; may be empty.
    """

    def __init__(self, designation: str, nearest: list[str]) -> None:
        self.designation = designation
        self.nearest = nearest
        hint = f"; nearest: {', '.join(nearest)}" if nearest else ""
        super().__init__(f'no section "{designation}" in the catalogue{hint}')


@cache
def _rows_by_normal_form(file: str) -> dict[str, dict[str, str]]:
    return {normal_form(row["designation"]): row for row in read_table(file)}


def _section(row: dict[str, str]) -> RolledSection:
    dimensions = {name: value for name, value in numbers(row).items() if name not in PRINTED}
    return RolledSection(row["designation"], row["kind"], dimensions, row["source"])


def find_rolled(designation: str) -> RolledSection:
    """Dimensions of a rolled section.

    Parameters
    ----------
    designation : str
        Tolerant of case, spaces, the multiplication sign and decimal commas: ``"ipe300"``,
        ``"HE 200 B"``, ``"CHS 168,3×6,3"``.

    Returns
    -------
    RolledSection
        Dimensions in metres.

    Raises
    ------
    UnknownDesignation
        When there is no such row; names the nearest.

    Examples
    --------
    >>> find_rolled("ipe300").dimensions["flange"]
    0.0107
    """
    wanted = normal_form(designation)
    for file in SERIES.get(series_of(wanted), ()):
        row = _rows_by_normal_form(file).get(wanted)
        if row is not None:
            return _section(row)
    raise UnknownDesignation(designation, nearest_names(designation, rolled_designations(), fold=normal_form))


@cache
def rolled_designations() -> tuple[str, ...]:
    """All designations of the catalogue, file by file, as the standards write them."""
    return tuple(row["designation"] for file in data_files("sections_") for row in read_table(file))


def rolled_sections() -> list[RolledSection]:
    """All sections of the catalogue, in the order of `rolled_designations`."""
    return [_section(row) for file in data_files("sections_") for row in read_table(file)]
