"""Every rolled section of the catalogue as a job takes it, against a geometry of the tests' own."""

from __future__ import annotations

import pytest
from catalog_outlines import moments, outline

from fishbelly.catalog.rolled import rolled_sections
from fishbelly.catalog.search import everything
from fishbelly.cli.catalog_properties import properties

ENTRIES = {e.name: e for e in everything() if e.group == "rolled section"}
BY_CHORDS = 2e-4
"""The tests' own outlines are polygons: chords of small fillets are off by so much at most."""


@pytest.mark.parametrize("kind", sorted({s.kind for s in rolled_sections()}))
def test_area_and_second_moments_of_every_size(kind: str) -> None:
    tried = 0
    for section in rolled_sections():
        if section.kind != kind:
            continue
        found = {name: value for name, value, _ in properties(ENTRIES[section.designation])}
        own = moments(outline(section))
        for name, value in (("A", own["A"]), ("I_y", own["Iy"]), ("I_z", own["Iz"])):
            assert found[name] == pytest.approx(value, rel=BY_CHORDS), (section.designation, name)
        tried += 1
    assert tried > 0
