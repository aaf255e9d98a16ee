"""Pieces of a JSON Schema of results, each with what it means in words."""

from __future__ import annotations

from typing import Any

Schema = dict[str, Any]


def number(words: str, unit: str = "", **more: Any) -> Schema:
    """Return the schema of a number, its unit in brackets behind the words; `more`: further keywords."""
    return {"type": "number", "description": f"{words} [{unit}]" if unit else words} | more


def text(words: str) -> Schema:
    """Return the schema of a text."""
    return {"type": "string", "description": words}


def maybe(schema: Schema) -> Schema:
    """Return the same, or null: what does not exist."""
    return schema | {"type": [schema["type"], "null"]}


def record(words: str, properties: dict[str, Schema], optional: dict[str, Schema] | None = None) -> Schema:
    """Return the schema of an object with keys that are always there, and keys that may be."""
    return {
        "type": "object",
        "description": words,
        "properties": properties | (optional or {}),
        "required": list(properties),
        "additionalProperties": False,
    }


def array(words: str, item: Schema) -> Schema:
    """Return the schema of a list of one thing."""
    return {"type": "array", "description": words, "items": item}
