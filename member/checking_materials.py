"""Materials: are they possible, and do they have what loads and questions need."""

from __future__ import annotations

from collections.abc import Iterator

from fishbelly.member.checking_stages import long_term_needs
from fishbelly.member.description import Material, Part, Strength
from fishbelly.member.draft import Draft, Problem
from fishbelly.member.loads import SelfWeight, Shrinkage, Temperature

Need = tuple[Part, str, str]


def material_problems(draft: Draft) -> Iterator[Problem]:
    """Find values that cannot be, and properties that are needed and missing."""
    for material in draft.materials:
        yield from _values(material)
    for part, key, words in _needs(draft):
        material_of = draft.find_material(part.material)
        if material_of is not None and _lacks(material_of, key):
            yield Problem(("material", material_of.name, key), words, "")


def _lacks(material: Material, key: str) -> bool:
    return material.shear_modulus is None if key == "G" else getattr(material, key) is None


def _values(material: Material) -> Iterator[Problem]:
    path = ("material", material.name)
    for field, key in (("E", "E"), ("G", "G"), ("yield_strength", "yield"), ("cracking", "cracking")):
        value = getattr(material, field)
        if value is not None and value <= 0.0:
            yield Problem((*path, key), "a stress above 0 Pa", f"{value:g} Pa")
    for key in ("density", "creep"):
        value = getattr(material, key)
        if value is not None and value < 0.0:
            yield Problem((*path, key), "a number of 0 or more", f"{value:g}")
    if material.poisson is not None and not -1.0 < material.poisson <= 0.5:
        yield Problem((*path, "poisson"), "Poisson's ratio above -1 and at most 0.5", f"{material.poisson:g}")
    if material.band is not None and not 0.0 < material.band[0] <= material.band[1]:
        low, high = material.band
        yield Problem((*path, "band"), "a pair [low, high] of moduli above 0 Pa", f"{low:g} Pa, {high:g} Pa")
    for key in ("tension", "compression", "shear"):
        value = getattr(material.strength or Strength(), key)
        if value is not None and value <= 0.0:
            yield Problem((*path, "strength", key), "a stress above 0 Pa", f"{value:g} Pa")


def _needs(draft: Draft) -> Iterator[Need]:
    """Say which property the material of which part needs, and what for."""
    parts = [part for _, part in draft.adding()]
    if draft.shear:
        why = "a shear modulus or `poisson`, because shear deformation counts (shear = false leaves it out)"
        yield from ((part, "G", why) for part in parts)
    for load in draft.loads:
        if isinstance(load, SelfWeight):
            why = "a density, because self weight counts"
            yield from ((p, "density", why) for p in parts if load.parts is None or p.name in load.parts)
        elif isinstance(load, Temperature):
            yield from ((p, "expansion", _WARM) for p in parts if _warmed(load, p))
    yield from _creep(draft, parts)
    yield from long_term_needs(draft)


_WARM = "a coefficient of expansion, because its temperature changes"


def _warmed(load: Temperature, part: Part) -> bool:
    if load.end <= part.start or load.start >= part.end:
        return False
    if load.parts is not None:
        return bool(load.parts.get(part.name))
    return bool(load.top or load.bottom)


def _creep(draft: Draft, parts: list[Part]) -> Iterator[Need]:
    for combination in draft.combinations:
        if combination is None:
            continue
        sustained = {case for case, share in combination.sustained.items() if share > 0.0}
        if not sustained:
            continue
        why = f'a creep factor, because combination "{combination.name}" has a sustained share'
        loads = [load for load in draft.loads if load is not None and load.case in sustained]
        sinking = any(s is not None and s.sinks and s.case in sustained for s in draft.supports)
        for part in parts:
            own = [isinstance(x, Shrinkage) and x.part == part.name and x.creep is not None for x in loads]
            if sinking or not own or not all(own):
                yield part, "creep", why
