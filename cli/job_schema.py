"""JSON Schema of a job, assembled from the models that read it."""

from __future__ import annotations

from typing import Any

from pydantic.fields import FieldInfo

from fishbelly.cli.job_laws import LawOf
from fishbelly.cli.job_tables import keys_of
from fishbelly.cli.job_types import Quantity, Reader
from fishbelly.cli.key_words import JobTableKind, job_tables, key_words
from fishbelly.cli.quantities import Kind

Schema = dict[str, Any]

DIALECT = "https://json-schema.org/draft/2020-12/schema"
LAW = "length, constant or along x"
_LAW_SCHEMA = LawOf(Kind.LENGTH).schema


def job_schema() -> Schema:
    """Return the JSON Schema (draft 2020-12) of a job, as TOML or JSON parses it.

    Every key that this version reads is in it and no other; what keys ask of each other, such as `size` or `shape`,
    is in it where one table shows it. A job that is valid may still have faults that only reading it can tell.
    """
    tables = list(job_tables())
    definitions = {_name(t): _table(t) for t in tables if t.table}
    definitions[LAW] = _described(_LAW_SCHEMA, "a length, constant or a law along x")
    top = _table(tables[0])
    for table in dict.fromkeys(t.table for t in tables if t.table):
        top["properties"][table] = _place([t for t in tables if t.table == table])
    top["required"] = [*top["required"], "part"]
    return {
        "$schema": DIALECT,
        "title": "Job of fishbelly",
        "description": "A member as its drawing has it. A quantity is a text with its unit; a bare number is a count, "
        "a ratio, a factor or a strain.",
        **top,
        "$defs": definitions,
    }


def _name(t: JobTableKind) -> str:
    return f"{t.table}: {t.kind}" if t.kind else t.table


def _reference(name: str) -> Schema:
    return {"$ref": "#/$defs/" + name.replace("~", "~0").replace("/", "~1").replace(" ", "%20")}


def _place(kinds: list[JobTableKind]) -> Schema:
    """Return what stands under the name of a table at the top level."""
    table, several = kinds[0].table, len(kinds) > 1
    item = {"oneOf": [_reference(_name(t)) for t in kinds]} if several else _reference(_name(kinds[0]))
    if table == "catalog":
        return {"description": "[catalog]"} | item
    if table == "material":
        return {"type": "object", "additionalProperties": item, "description": "[material.NAME]"}
    return {"type": "array", "items": item, "description": f"[[{table}]]"} | (
        {"minItems": 1} if table == "part" else {}
    )


def _table(t: JobTableKind) -> Schema:
    """Return the schema of one table."""
    own = t.model.model_json_schema()
    keys = keys_of(t.model)
    fields = dict(zip(keys, t.model.model_fields.values(), strict=True))
    properties = {key: _key(t, key, fields[key], own["properties"][key]) for key in keys}
    if t.table == "load":
        properties["kind"] = _described({"const": t.kind}, key_words("load", "kind"))
    result: Schema = {
        "type": "object",
        "properties": properties,
        "required": list(own.get("required", [])),
        "additionalProperties": False,
    }
    if t.table == "limit":  # a published limit has a name of its own
        result["required"].remove("name")
        result["anyOf"] = [{"required": ["name"]}, {"required": ["like"]}]
    return result


def _key(t: JobTableKind, key: str, field: FieldInfo, written: Schema) -> Schema:
    reader = next((m for m in field.metadata if isinstance(m, Reader)), None)
    schema = {k: v for k, v in written.items() if k not in ("title", "default")}
    words = key_words(t.table, key, t.kind)
    if schema.get("anyOf") == _LAW_SCHEMA["anyOf"]:
        schema = _reference(LAW)
    elif schema.get("items", {}).get("anyOf") == _LAW_SCHEMA["anyOf"]:
        schema["items"] = _reference(LAW)
    elif "description" in schema:
        words = f"{words} ({schema['description']})"
    if len(schema.get("enum", ())) == 1:
        schema["const"] = schema.pop("enum")[0]
    default = _default(field, reader)
    return _described(schema, words) | ({} if default is None else {"default": default})


def _default(field: FieldInfo, reader: Reader | None) -> Any:
    """Return a default as a job would write it, None where there is none to write."""
    value = field.default
    if field.is_required() or value is None or value in ("", (), {}):
        return None
    if isinstance(reader, Quantity):
        return f"{value:g} {reader.kind.unit}"
    return value


def _described(schema: Schema, words: str) -> Schema:
    return {"description": words} | {k: v for k, v in schema.items() if k != "description"}
