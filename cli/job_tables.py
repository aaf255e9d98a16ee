"""Tables of a job held against their models: keys unknown, not built or missing, values not readable."""

from __future__ import annotations

from typing import Any, TypeVar

from pydantic import BaseModel, ValidationError

from fishbelly.cli.faults import as_written, join_words, nearest, suggest
from fishbelly.cli.job_models import NOT_BUILT, JobTable, Table
from fishbelly.cli.job_part_models import DIMENSIONS, SHAPES, part_model
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_types import Path, Reader, ValueFault

Model = TypeVar("Model", bound=BaseModel)


_OTHER_WORDS = {
    "part": {
        **dict.fromkeys(("below", "beneath", "underneath"), ("under",)),
        **dict.fromkeys(("above", "on", "on_top_of"), ("over",)),
        **dict.fromkeys(("beside", "next_to"), ("left_of", "right_of")),
    }
}
"""Keys that people write by table, and what the job has for them."""


def keys_of(model: type[BaseModel]) -> list[str]:
    """Keys of a table as the job writes them."""
    return [field.alias or name for name, field in model.model_fields.items()]


def read_table(model: type[Model], table: Any, path: Path, report: Report) -> Model | None:
    """Read a table.

    Parameters
    ----------
    model : type
        What the table has to be.
    table : object
        What the job has there.
    path : tuple
        Where it stands.
    report : Report
        Takes the faults.

    Returns
    -------
    Model or None
        None where a value that is needed cannot be read; unknown keys alone do not prevent it.
    """
    if not isinstance(table, dict):
        report.add(path, "a table with keys", as_written(table))
        return None
    try:
        return model.model_validate(table)
    except ValidationError as error:
        errors = error.errors(include_url=False)
    unknown = [str(e["loc"][0]) for e in errors if e["type"] == "extra_forbidden"]
    meant = {_unknown_key(model, key, path, report) for key in unknown}
    report.meant.update((*path, key) for key in meant if key is not None)
    others = [e for e in errors if e["type"] != "extra_forbidden"]
    for e in others:
        key = str(e["loc"][0])
        if e["type"] == "missing":
            if key not in meant:
                report.add((*path, key), _words(model, key), "")
        else:
            cause = e.get("ctx", {}).get("error")
            assert isinstance(cause, ValueFault), e
            report.ills((*path, key), cause)
    if others:
        return None
    return model.model_validate({key: value for key, value in table.items() if key not in unknown})


def _words(model: type[BaseModel], key: str) -> str:
    """What is expected under a key."""
    for name, field in model.model_fields.items():
        if key in (name, field.alias):
            return next((m.words for m in field.metadata if isinstance(m, Reader)), "a value")
    return "a value"


def _unknown_key(model: type[BaseModel], key: str, path: Path, report: Report) -> str | None:
    """Note an unknown key; return the known one that was probably meant."""
    kind = str(path[0]) if path else ""
    if key in NOT_BUILT.get(kind, ()):
        text = f'key "{key}": not built yet in this version'
        report.place(report.line((*path, key)), report.where((*path, key)), text, "", (*path, key))
        return None
    known = keys_of(model)
    other = _OTHER_WORDS.get(kind, {}).get(key.casefold())
    of_the_top = bool(path) and key in (*keys_of(JobTable), *NOT_BUILT[""])
    meant = other[0] if other else (None if of_the_top else nearest(key, known))
    # the line is the key's, the place in words is the table's
    line, where = report.line((*path, key)), report.where((*path, key))
    hint = suggest(key, known) if meant and not other else ""
    text = f'unknown key "{key}"'
    if meant is None and of_the_top:
        hint = "it belongs at the top of the file, before the first table"
    elif other:
        hint = f"did you mean {join_words(other)}?"
    elif kind == "part" and key in DIMENSIONS:
        text, hint = _strange_dimension(model, key)
    elif not hint:
        hint = suggest(key, known)
    report.place(line, where, text, hint, (*path, key))
    return meant


def _strange_dimension(model: type[BaseModel], key: str) -> tuple[str, str]:
    """Word the fault of a dimension that belongs to other outlines."""
    shape = next((s for s in SHAPES if part_model(s) is model), None)
    if shape is None:
        return f'unknown key "{key}"', "a part with `size` has its dimensions from the catalogue"
    own = [k for k in keys_of(model) if k in DIMENSIONS]
    return f'unknown key "{key}" for shape = "{shape}"', f"its dimensions are {', '.join(own)}"


def list_of_tables(kind: str, report: Report) -> list[Any]:
    """Return the tables ``[[kind]]`` of a job, none where it has something else there."""
    tables = report.data.get(kind, [])
    if isinstance(tables, dict):
        report.about((kind,), f"[{kind}] with single brackets", f"write [[{kind}]]: there may be several")
        return []
    if not isinstance(tables, list):
        report.add((kind,), f"tables [[{kind}]]", as_written(tables))
        return []
    return tables


def either(table: Table, keys: tuple[str, ...], path: Path, report: Report, at_least: int = 1) -> str | None:
    """Return which one of several keys is given; several at once, or too few, are a fault."""
    given = [key for key in keys if getattr(table, key) is not None]
    words = " or ".join(f"`{key}`" for key in keys)
    if len(given) > 1:
        report.add((*path, given[1]), f"only one of {', '.join(f'`{k}`' for k in keys)}", f"also `{given[0]}`")
    elif len(given) < at_least:
        report.add(path, words, "")
    return given[0] if len(given) == 1 else None
