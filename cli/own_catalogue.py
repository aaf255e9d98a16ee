"""The catalogue as one job sees it: what is built in, and sections and materials of the user's own files."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from fishbelly.catalog.designations import normal_form
from fishbelly.catalog.materials import CatalogMaterial, UnknownMaterial, find_material, material_names
from fishbelly.catalog.rolled import RolledSection, UnknownDesignation, find_rolled, rolled_designations
from fishbelly.catalog.tables import folded, nearest_names
from fishbelly.member.description import Material


@dataclass(frozen=True, eq=False)
class Catalogue:
    """The built-in catalogue and what a user's files add.

    Attributes
    ----------
    sections : mapping of str to RolledSection
        Own sections by the normal form of their designation.
    materials : mapping of str to Material
        Own materials by their folded name.
    sources : mapping of str to str
        Source and note of own materials, by name; may lack some.
    """

    sections: Mapping[str, RolledSection] = field(default_factory=dict)
    materials: Mapping[str, Material] = field(default_factory=dict)
    sources: Mapping[str, str] = field(default_factory=dict)

    def find_section(self, designation: str) -> RolledSection:
        """Return a section, own or built in; UnknownDesignation, with the nearest, where there is none."""
        own = self.sections.get(normal_form(designation))
        if own is not None:
            return own
        try:
            return find_rolled(designation)
        except UnknownDesignation:
            if not self.sections:
                raise
        known = (*(s.designation for s in self.sections.values()), *rolled_designations())
        raise UnknownDesignation(designation, nearest_names(designation, known, fold=normal_form))

    def find_material(self, name: str) -> CatalogMaterial | Material:
        """Return a material, own or built in; UnknownMaterial, with the nearest, where there is none."""
        own = self.materials.get(folded(name))
        if own is not None:
            return own
        try:
            return find_material(name)
        except UnknownMaterial:
            if not self.materials:
                raise
        known = (*(m.name for m in self.materials.values()), *material_names())
        raise UnknownMaterial(name, nearest_names(name, known))
