"""Every rolled section with printed A, Iy, Iz: computed anew from its dimensions and compared.

Tolerance: half of the last printed digit, and beside it a share of the value where a series needs one, with
its reason below.
"""

import pytest
from catalog_outlines import half_of_last_digit, moments, outline

from fishbelly.catalog.rolled import PRINTED, find_rolled
from fishbelly.catalog.tables import data_files, read_table, split_header

SHARE = {
    "default": (0, 0, 0),
    # printed Iz of the smallest UPE 0.34 % above the outline
    "sections_upe.csv": (0, 0, 1.5e-3),
    # tables older than exact outlines: Iz up to 0.6 % off (UPN 100, 220, 400), A of UPN 280 0.23 %
    "sections_upn.csv": (1.5e-3, 8e-4, 5.6e-3),
    # one or two units in the third digit (L 45x45x4.5, L 150x75x10)
    "sections_l_equal.csv": (0, 5e-4, 5e-4),
    "sections_l_unequal.csv": (0, 5e-4, 2.2e-3),
    # EN 10055 prints: A as the outline, second moments up to 1 % off
    "sections_t.csv": (5e-4, 2e-3, 8e-3),
    # depth and flange width are printed to three digits
    "sections_us_w.csv": (2.5e-3, 9e-3, 1.25e-2),
    # radii of the American Standard profile; width to three digits
    "sections_us_c.csv": (3e-3, 3e-3, 1.05e-2),
    # taken with square corners; each row's source says what that makes
    "sections_us_l.csv": (1.1e-2, 1.6e-2, 1.6e-2),
    # design wall to three digits
    "sections_us_hss.csv": (0, 2.5e-3, 2.5e-3),
    "sections_us_pipe.csv": (4e-3, 0, 0),
}
UNIT = {"cm2": 1e-4, "cm4": 1e-8, "in2": 0.0254**2, "in4": 0.0254**4}


def printed_rows() -> list[tuple[str, str, dict[str, tuple[str, str]]]]:
    """File, designation, and name to (text, unit) of what is printed."""
    found = []
    for file in data_files("sections_"):
        for row in read_table(file):
            named = {split_header(header): text for header, text in row.items() if text}
            printed = {name: (text, unit) for (name, unit), text in named.items() if name in PRINTED}
            if printed:
                found.append((file, row["designation"], printed))
    return found


ROWS = printed_rows()


def test_most_series_have_printed_values() -> None:
    files = {file for file, _, _ in ROWS}
    assert set(data_files("sections_")) - files == {"sections_us_lumber.csv"}
    assert len(ROWS) > 550


@pytest.mark.parametrize(("file", "designation", "printed"), ROWS, ids=[row[1] for row in ROWS])
def test_printed(file: str, designation: str, printed: dict[str, tuple[str, str]]) -> None:
    found = moments(outline(find_rolled(designation)))
    for share, (name, (text, unit)) in zip(SHARE.get(file, SHARE["default"]), printed.items(), strict=True):
        value = float(text)
        tolerance = half_of_last_digit(text) + share * value
        assert abs(found[name] / UNIT[unit] - value) <= tolerance, name


@pytest.mark.parametrize("name", ["depth", "width", "web", "flange", "radius"])
def test_a_wrong_dimension_would_be_found(name: str) -> None:
    section = find_rolled("IPE 300")
    section.dimensions[name] *= 1.05
    found = moments(outline(section))
    off = [abs(found["A"] * 1e4 - 53.8) > 0.05, abs(found["Iy"] * 1e8 - 8356) > 0.5]
    assert any(off)
