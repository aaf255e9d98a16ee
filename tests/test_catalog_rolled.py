import pytest

from fishbelly.catalog.designations import normal_form
from fishbelly.catalog.rolled import (
    SERIES,
    UnknownDesignation,
    find_rolled,
    rolled_designations,
    rolled_sections,
)
from fishbelly.catalog.tables import data_files

KEYS = {
    "I": {"depth", "width", "web", "flange", "radius"},
    "channel": {"depth", "width", "web", "flange", "radius", "toe_radius", "slope", "flange_at"},
    "angle": {"depth", "width", "thickness", "radius", "toe_radius"},
    "tee": {
        *("depth", "width", "web", "flange", "radius", "toe_radius", "web_toe_radius"),
        *("slope", "flange_at", "web_at"),
    },
    "tube": {"diameter", "wall"},
    "box": {"width", "depth", "wall", "radius", "inner_radius"},
    "rectangle": {"width", "depth"},
}


@pytest.mark.parametrize(
    ("written", "standard"),
    [
        ("IPE300", "IPE 300"),
        ("ipe 300", "IPE 300"),
        ("IPE-300", "IPE 300"),
        ("HE 200 B", "HEB 200"),
        ("he200a", "HEA 200"),
        ("HEA 200", "HEA 200"),
        ("IPE 300 A", "IPE A 300"),
        ("U 200", "UPN 200"),
        ("L 100×100×10", "L 100x100x10"),
        ("L 100 x 10", "L 100x100x10"),
        ("l150x75x10", "L 150x75x10"),
        ("CHS 168,3x6,3", "CHS 168.3x6.3"),
        ("chs 168.3 x 8.0", "CHS 168.3x8"),
        ("SHS 100x100x5", "SHS 100x5"),
        ("RHS 100x100x5", "SHS 100x5"),
        ("SHS 100x5 hot", "SHS 100x5"),
        ("SHS100x5COLD", "SHS 100x5 cold"),
        ("RHS 200*100*8", "RHS 200x100x8"),
        ("305x165x40 UB", "UB 305x165x40"),
        ("w16X31", "W16x31"),
        ("HSS 6x4x1/4", "HSS6x4x1/4"),
        ("HSS10.75x0.5", "HSS10.750x0.500"),
        ("L 3-1/2x3-1/2x3/8", "L3-1/2x3-1/2x3/8"),
        ("pipe 4 std", "Pipe 4 STD"),
        ("2 x 10", "2x10"),
    ],
)
def test_many_spellings_find_one_section(written: str, standard: str) -> None:
    assert find_rolled(written).designation == standard


def test_dimensions_are_in_metres_to_the_last_bit() -> None:
    assert find_rolled("IPE 300").dimensions == {
        "depth": 0.3,
        "width": 0.15,
        "web": 0.0071,
        "flange": 0.0107,
        "radius": 0.015,
    }
    assert find_rolled("2x10").dimensions == {"width": 0.0381, "depth": 0.23495}


@pytest.mark.parametrize(
    ("designation", "slope", "flange_at"),
    [("UPN 300", 0.08, 0.05), ("UPN 320", 0.05, 0.057), ("UPE 300", 0, 0.05)],
)
def test_slope_and_place_of_the_flange_thickness(designation: str, slope: float, flange_at: float) -> None:
    found = find_rolled(designation).dimensions
    assert (found["slope"], found["flange_at"]) == (slope, flange_at)


@pytest.mark.parametrize(
    ("designation", "outer", "inner"),
    [
        ("SHS 100x6.3", 1.5, 1),
        ("SHS 100x6 cold", 2, 1),
        ("SHS 100x6.3 cold", 2.5, 1.5),
        ("SHS 100x10 cold", 2.5, 1.5),
        ("SHS 200x12 cold", 3, 2),
    ],
)
def test_corner_radii_of_hollow_sections(designation: str, outer: float, inner: float) -> None:
    found = find_rolled(designation).dimensions
    assert found["radius"] == pytest.approx(outer * found["wall"], rel=1e-9)
    assert found["inner_radius"] == pytest.approx(inner * found["wall"], rel=1e-9)


def test_every_row_is_complete_and_can_be_found() -> None:
    for section in rolled_sections():
        found = find_rolled(section.designation)
        assert found == section
        assert set(found.dimensions) == KEYS[found.kind], section.designation
        assert all(value >= 0 for value in found.dimensions.values()), section.designation
        assert "memory" in found.source, section.designation


def test_designations_do_not_collide() -> None:
    names = [normal_form(name) for name in rolled_designations()]
    assert len(set(names)) == len(names) > 1500


def test_every_file_belongs_to_a_series() -> None:
    assert set(data_files("sections_")) == {file for files in SERIES.values() for file in files}


def test_a_result_is_nobody_elses() -> None:
    find_rolled("IPE 300").dimensions["depth"] = 1.0
    assert find_rolled("IPE 300").dimensions["depth"] == 0.3


def test_unknown_designation_names_the_nearest() -> None:
    with pytest.raises(
        UnknownDesignation, match=r'no section "IPE 310" in the catalogue; nearest: .*IPE 300'
    ) as caught:
        find_rolled("IPE 310")
    assert caught.value.designation == "IPE 310"
    assert "IPE 300" in caught.value.nearest
    assert isinstance(caught.value, LookupError)


def test_a_beginning_is_answered_with_what_begins_so() -> None:
    with pytest.raises(UnknownDesignation) as caught:
        find_rolled("W16")
    assert all(name.startswith("W16") for name in caught.value.nearest)


def test_nothing_like_it() -> None:
    with pytest.raises(UnknownDesignation, match=r'^no section "§§" in the catalogue$') as caught:
        find_rolled("§§")
    assert caught.value.nearest == []
