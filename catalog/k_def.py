"""Deformation factor k_def of timber and wood-based products by service class."""

from functools import cache

from fishbelly.catalog.tables import nearest_names, read_table

SERVICE_CLASSES = ("1", "2", "3")
"""Labels of the service classes of EN 1995-1-1:2004 2.3.1.3."""


class UnknownProduct(LookupError):
    """No k_def is published for that product, or not for that service class.

    Attributes
    ----------
    product : str
        What was asked for.
    nearest : list of str
        Products that look most like it; empty when the product is known and the service class is not.
    """

    def __init__(self, product: str, message: str, nearest: list[str]) -> None:
        self.product = product
        self.nearest = nearest
        super().__init__(message)


@cache
def _rows() -> dict[str, dict[str, str]]:
    return {row["product"].casefold(): row for row in read_table("k_def.csv")}


def k_def_products() -> tuple[str, ...]:
    """Names of the products of the table, in its order."""
    return tuple(row["product"] for row in read_table("k_def.csv"))


def k_def_by_class(product: str) -> dict[str, float]:
    """Every k_def that is published for a product.

    Parameters
    ----------
    product : str
        ``"solid timber"``, ``"glued laminated timber"``, ``"LVL"``, ``"OSB/3"`` …; any case.

    Returns
    -------
    dict of str to float
        By service class ``"1"``, ``"2"``, ``"3"``; a class in which the product is not allowed is left out.

    Raises
    ------
    UnknownProduct
        When the table has no such product.
    """
    row = _rows().get(product.strip().casefold())
    if row is None:
        nearest = nearest_names(product, k_def_products())
        hint = f"; nearest: {', '.join(nearest)}" if nearest else ""
        raise UnknownProduct(product, f'no k_def for "{product}" in the catalogue{hint}', nearest)
    return {label: float(row[label]) for label in SERVICE_CLASSES if row[label]}


def k_def(product: str, service_class: int) -> float:
    """Deformation factor: final deflection under permanent load is 1 + k_def times the instantaneous one.

    EN 1995-1-1:2004, Table 3.2, from memory.

    Parameters
    ----------
    product : str
        See `k_def_by_class`.
    service_class : int
        1 (heated rooms), 2 (under a roof) or 3 (in the open).

    Returns
    -------
    float
        k_def, without dimension.

    Raises
    ------
    UnknownProduct
        When the table has no such product, or none for it in that service class.

    Examples
    --------
    >>> k_def("glued laminated timber", 2)
    0.8
    """
    values = k_def_by_class(product)
    if str(service_class) not in values:
        message = f'no k_def for "{product}" in service class {service_class}, only in {", ".join(values)}'
        raise UnknownProduct(product, message, [])
    return values[str(service_class)]
