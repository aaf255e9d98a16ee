"""Published deflection limits by name, with code and clause."""

from dataclasses import dataclass

from fishbelly.catalog.tables import UnknownName, folded, nearest_names, read_table


@dataclass(frozen=True)
class PublishedLimit:
    """One deflection limit as a code prints it.

    Attributes
    ----------
    name : str
        Name in the catalogue, ``"EN 1992 appearance"``.
    span_over : float or None
        n of L/n.
    absolute : float or None
        Cap [m], alone or together with L/n (the smaller governs).
    cantilever_over : float or None
        n of own length / n where the code prints one for cantilevers, else None.
    of : str
        Which deflection: ``"down"``, or ``"across"`` of limits on sideways deflection.
    net : bool
        Whether the precamber is deducted.
    loads : str
        Under which loads or combination.
    code, clause : str
        Where it stands.
    note : str
        What to know before use; may be empty.
    """

    name: str
    span_over: float | None
    absolute: float | None
    cantilever_over: float | None
    of: str
    net: bool
    loads: str
    code: str
    clause: str
    note: str

    @property
    def source(self) -> str:
        """Code and clause in one line."""
        return f"{self.code}, {self.clause}"


class UnknownLimit(UnknownName):
    """No limit of that name is in the catalogue; `name` is what was asked for, `nearest` what looks most like it."""

    what = "limit"


def _limit(row: dict[str, str]) -> PublishedLimit:
    def number(header: str) -> float | None:
        return float(row[header]) if row[header] else None

    return PublishedLimit(
        name=row["name"],
        span_over=number("span_over"),
        absolute=number("absolute [m]"),
        cantilever_over=number("cantilever_over"),
        of=row["of"] or "down",
        net=row["net"] == "yes",
        loads=row["loads"],
        code=row["code"],
        clause=row["clause"],
        note=row["note"],
    )


def limits() -> list[PublishedLimit]:
    """All limits of the catalogue, code by code."""
    return [_limit(row) for row in read_table("limits.csv")]


def limit_names() -> tuple[str, ...]:
    """All names, in the order of `limits`."""
    return tuple(row["name"] for row in read_table("limits.csv"))


def find_limit(name: str) -> PublishedLimit:
    """Limit by its name, tolerant of case and spaces.

    Parameters
    ----------
    name : str
        ``"IBC floor live"``, ``"EN 1992 appearance"`` …

    Raises
    ------
    UnknownLimit
        When there is none; names the nearest.

    Examples
    --------
    >>> find_limit("ibc floor live").span_over
    360.0
    """
    wanted = folded(name)
    for row in read_table("limits.csv"):
        if folded(row["name"]) == wanted:
            return _limit(row)
    raise UnknownLimit(name, nearest_names(name, limit_names()))
