import pytest

from fishbelly.catalog.k_def import UnknownProduct, k_def, k_def_by_class, k_def_products
from fishbelly.catalog.limits import UnknownLimit, find_limit, limit_names, limits
from fishbelly.catalog.materials import (
    CatalogMaterial,
    UnknownMaterial,
    find_material,
    material_names,
    materials,
)


def test_structural_steel() -> None:
    """EN 1993-1-1:2005 3.2.6."""
    steel = find_material("s275")
    assert (steel.E, steel.G, steel.poisson) == (210e9, 81e9, 0.3)
    assert (steel.density, steel.expansion, steel.creep, steel.yield_strength) == (7850, 12e-6, 0, 275e6)


def test_softwood() -> None:
    """EN 338:2016 Table 1; creep is not the catalogue's to choose."""
    timber = find_material("C24")
    assert (timber.E, timber.G, timber.E_05, timber.density) == (11e9, 0.69e9, 7.4e9, 420)
    assert timber.creep is None
    assert timber.k_def == {"1": 0.6, "2": 0.8, "3": 2.0}
    assert "service class" in timber.note


def test_concrete() -> None:
    """EN 1992-1-1:2004 Table 3.1."""
    concrete = find_material("C30/37")
    assert (concrete.E, concrete.cracking, concrete.poisson, concrete.creep) == (33e9, 2.9e6, 0.2, None)


@pytest.mark.parametrize(
    ("name", "E"),
    [
        ("GL 28H", 12.6e9),
        ("6061-t6", 68.9e9),
        ("en aw-6061-T6", 70e9),
        ("c30 / 37", 33e9),
        ("df-l no.2", None),
    ],
)
def test_case_and_spaces_do_not_matter(name: str, E: float | None) -> None:
    found = find_material(name)
    assert found.E == (E or pytest.approx(1.6e6 * 6894.757293168361, rel=1e-12))


def test_us_units_become_si() -> None:
    """29 000 ksi, 490 lb/ft3, 6.5e-6 per °F, 36 ksi."""
    steel = find_material("A36")
    assert steel.E == pytest.approx(199.948e9, rel=5e-7)
    assert steel.density == pytest.approx(7849.05, rel=1e-6)
    assert steel.expansion == pytest.approx(11.7e-6, rel=1e-12)
    assert steel.yield_strength == pytest.approx(248.2113e6, rel=1e-6)


@pytest.mark.parametrize("material", materials(), ids=lambda material: material.name)
def test_every_row_is_sound(material: CatalogMaterial) -> None:
    assert find_material(material.name) == material
    assert 5e9 < material.E < 250e9
    assert material.kind
    assert material.source
    if material.poisson is not None:
        assert 0.1 < material.poisson < 0.5
        if material.G is not None:
            # printed side by side, each rounded
            assert material.G == pytest.approx(material.E / 2 / (1 + material.poisson), rel=0.01)
    assert material.poisson is not None or material.G is not None, "shear deformation needs one of them"
    assert material.density is None or 300 < material.density < 9000
    assert material.E_05 is None or 0.3 < material.E_05 / material.E < 0.9
    assert material.band is None or material.band[0] < material.E < material.band[1]
    time_dependent = any(word in material.kind for word in ("timber", "lumber", "concrete", "plastic"))
    assert material.creep == (None if time_dependent else 0)
    assert (material.cracking is not None) == ("concrete" in material.kind)


def test_names_do_not_collide() -> None:
    names = ["".join(name.split()).casefold() for name in material_names()]
    assert len(set(names)) == len(names) > 140


def test_unknown_material_names_the_nearest() -> None:
    with pytest.raises(UnknownMaterial, match=r'no material "C25" in the catalogue; nearest: C25/30') as caught:
        find_material("C25")
    assert caught.value.name == "C25"
    assert caught.value.nearest[0] == "C25/30"


@pytest.mark.parametrize(
    ("product", "expected"),
    [
        ("solid timber", {"1": 0.6, "2": 0.8, "3": 2.0}),
        ("Glued laminated timber", {"1": 0.6, "2": 0.8, "3": 2.0}),
        ("LVL", {"1": 0.6, "2": 0.8, "3": 2.0}),
        ("LVL-C flatwise", {"1": 0.8, "2": 1.0, "3": 2.5}),
        ("plywood EN 636-1", {"1": 0.8}),
        ("plywood EN 636-3", {"1": 0.8, "2": 1.0, "3": 2.5}),
        ("OSB/2", {"1": 2.25}),
        ("particleboard P5", {"1": 2.25, "2": 3.0}),
        ("MDF.LA", {"1": 2.25}),
    ],
)
def test_k_def(product: str, expected: dict[str, float]) -> None:
    """EN 1995-1-1:2004 Table 3.2, from memory; LVL-C from the LVL Handbook Europe, Table 4.3."""
    assert k_def_by_class(product) == expected
    for label, value in expected.items():
        assert k_def(product, int(label)) == value


def test_k_def_grows_with_the_service_class() -> None:
    for product in k_def_products():
        values = list(k_def_by_class(product).values())
        assert values == sorted(values)


def test_k_def_of_a_service_class_not_allowed() -> None:
    with pytest.raises(UnknownProduct, match=r'no k_def for "OSB/2" in service class 3, only in 1'):
        k_def("OSB/2", 3)


def test_k_def_of_an_unknown_product() -> None:
    with pytest.raises(UnknownProduct, match=r'no k_def for "OSB" in the catalogue; nearest: OSB/2') as caught:
        k_def("OSB", 1)
    assert caught.value.product == "OSB"


IBC = [
    ("IBC floor live", 360),
    ("IBC floor total", 240),
    ("IBC roof plaster ceiling live", 360),
    ("IBC roof plaster ceiling total", 240),
    ("IBC roof other ceiling live", 240),
    ("IBC roof other ceiling total", 180),
    ("IBC roof no ceiling live", 180),
    ("IBC roof no ceiling total", 120),
    ("IBC farm building", 180),
    ("IBC greenhouse", 120),
    ("IBC formed metal roofing total", 60),
    ("IBC secondary member of formed metal roofing live", 150),
    ("IBC secondary member of formed metal siding wind", 90),
]


@pytest.mark.parametrize(("name", "ratio"), IBC)
def test_limits_of_the_ibc(name: str, ratio: float) -> None:
    """Table 1604.3."""
    assert find_limit(name).span_over == ratio
    assert "1604.3" in find_limit(name).source


@pytest.mark.parametrize(
    ("name", "span", "cantilever"),
    [
        ("EN 1995 instantaneous lenient", 300, 150),
        ("EN 1995 instantaneous strict", 500, 250),
        ("EN 1995 net final lenient", 250, 125),
        ("EN 1995 net final strict", 350, 175),
        ("EN 1995 final lenient", 150, 75),
        ("EN 1995 final strict", 300, 150),
        ("EN 1992 appearance", 250, None),
        ("EN 1992 after construction", 500, None),
        ("UK steel cantilever", None, 180),
    ],
)
def test_european_limits(name: str, span: float | None, cantilever: float | None) -> None:
    """EN 1995-1-1:2004 Table 7.2; EN 1992-1-1:2004 7.4.1; UK annex to EN 1993-1-1."""
    limit = find_limit(name.upper())
    assert (limit.span_over, limit.cantilever_over) == (span, cantilever)


def test_every_limit_is_complete() -> None:
    names = limit_names()
    assert len(set(names)) == len(names)
    for limit in limits():
        assert limit.span_over or limit.cantilever_over or limit.absolute
        assert limit.code
        assert limit.clause
        assert limit.loads


def test_unknown_limit_names_the_nearest() -> None:
    with pytest.raises(UnknownLimit, match=r'no limit "IBC floor" in the catalogue; nearest: IBC floor live') as caught:
        find_limit("IBC floor")
    assert caught.value.name == "IBC floor"
