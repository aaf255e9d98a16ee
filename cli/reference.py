"""The reference of commands and keys, written from the code; ``python -m fishbelly.cli.reference`` writes the file.

The committed ``catalog/reference.md`` has to equal what this module makes.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from inspect import cleandoc
from pathlib import Path
from typing import Any

import click

from fishbelly.cli.job_models import NOT_BUILT as KEYS_NOT_BUILT
from fishbelly.cli.job_part_models import PartTable
from fishbelly.cli.job_tables import keys_of
from fishbelly.cli.job_types import Reader
from fishbelly.cli.key_words import LAW, JobTableKind, job_tables, key_words
from fishbelly.cli.quantities import Kind
from fishbelly.cli.result_schema import RESULTS, result_schema

_HEAD = """\
# Reference

Commands, keys of a job, kinds of quantity, results. This file is written from the code
(`python -m fishbelly.cli.reference`); `fishbelly start --reference` prints it. The job with every key is printed by
`fishbelly start --all-keys`, the same as JSON Schema by `fishbelly start --schema` and `--schema results`.
"""

_STATUS = """\
Exit status: 0 done and every limit met; 1 done, and a limit is not met; 2 the command line or the job is wrong;
3 the numbers cannot be had. Messages go to stderr.
"""

_LAWS = """\
## Laws along x

A dimension, `position`, `gap` and `shift` are constant or change along the member, x from its left end:

```toml
depth = "450 mm"
depth = [["0 m", "900 mm"], ["1.8 m", "450 mm"]]                       # straight between; the same x twice is a step
diameter = { steps = [["60 mm", "45 mm"], ["200 mm", "55 mm"]] }        # up to each x; the last reaches the part's end
depth = { law = "straight", stations = [["0 m", "900 mm"], ["1.8 m", "450 mm"]] }
depth = { law = "parabola", stations = [["0 m", "900 mm"], ["1.8 m", "450 mm"]], flat_at = "1.8 m" }
depth = { file = "survey.csv", x = "station", value = "depth left" }    # columns with their unit in the header
```

Outside its stations a law is constant. A parabola needs `flat_at`, the x of a station where it has no slope, in each
piece that is not level.
"""

_SIGNS = """\
## Axes and signs

x runs along the member from its left end; in the cross-section y runs to the right and z upwards, seen from the far
end. Loads act downwards when positive, deflection is positive downwards. M is positive sagging and about the
E-weighted centroid, N and stress are positive in tension, slope and rotation clockwise. EI_y is the stiffness for
bending in the vertical plane, about the horizontal axis y-y.
"""

_TABLES = {
    "": "Top level",
    "catalog": "`[catalog]`",
    "material": "`[material.NAME]`",
}


def reference() -> str:
    """Return the reference as Markdown."""
    parts = [_HEAD, *_commands(), *_job(), _LAWS, _quantities(), _SIGNS, *_results()]
    return "\n".join(part.rstrip() + "\n" for part in parts)


def _commands() -> Iterator[str]:
    from fishbelly.cli.main import NOT_BUILT, cli

    yield "## Commands\n"
    yield _STATUS
    context = click.Context(cli, info_name="fishbelly")
    yield _options(cli, "`fishbelly`")
    for name in cli.list_commands(context):
        command = cli.get_command(context, name)
        assert command is not None
        text = cleandoc(command.help or "").replace("\b\n", "").strip()
        yield f"### `fishbelly {name}`\n"
        yield _prose(text)
        yield _options(command, f"`fishbelly {name}`")
    if NOT_BUILT:
        yield f"Not built yet: {', '.join(f'`{name}`' for name in NOT_BUILT)}.\n"


def _prose(text: str) -> str:
    """Set indented lines of a help text as code."""
    blocks = []
    for block in text.split("\n\n"):
        lines = block.splitlines()
        indented = all(line.startswith("    ") for line in lines)
        blocks.append("\n".join(["```", *(line[4:] for line in lines), "```"]) if indented else block)
    return "\n\n".join(blocks) + "\n"


def _options(command: click.Command, title: str) -> str:
    rows = []
    for param in command.params:
        if isinstance(param, click.Argument):
            rows.append((f"`{param.metavar or (param.name or '').upper()}`", _needed(param.required)))
        elif isinstance(param, click.Option) and not param.hidden:
            value = "" if param.is_flag else f" {_value(param)}"
            rows.append((f"`{', '.join(param.opts)}{value}`", (param.help or "") + _needed(param.required, " ")))
    return _grid((title, "meaning"), rows)


def _value(option: click.Option) -> str:
    if isinstance(option.type, click.Choice):
        return "/".join(str(c) for c in option.type.choices)
    return option.metavar or (option.name or "").upper()


def _needed(required: bool, before: str = "") -> str:
    return f"{before}(needed)" if required else ""


def _job() -> Iterator[str]:
    """Write the keys of every table; what all parts and all loads share comes first."""
    yield "## Keys of a job\n"
    yield "Keys in **bold** are needed. Unknown keys are faults.\n"
    done: set[str] = set()
    for t in job_tables():
        shared = _shared(t)
        if t.table in ("part", "load") and t.table not in done:
            yield f"### `[[{t.table}]]`\n"
            yield _keys(t, shared, _telling(t))
        done.add(t.table)
        if t.kind:
            own = [key for key in keys_of(t.model) if key not in (*shared, _word(t))]
            title = "size" if t.kind == "size" else f'{_word(t)} = "{t.kind}"'
            yield f"#### `{title}`\n"
            yield _keys(t, own)
        else:
            yield f"### {_TABLES.get(t.table, f'`[[{t.table}]]`')}\n"
            yield _keys(t, keys_of(t.model))
    later = sorted(
        f"`{table}.{key}`" if table else f"`{key}`" for table, keys in KEYS_NOT_BUILT.items() for key in keys
    )
    if later:
        yield f"Not built yet, and refused by name: {', '.join(later)}.\n"


def _word(t: JobTableKind) -> str:
    return "shape" if t.table == "part" else "kind"


def _shared(t: JobTableKind) -> list[str]:
    """Keys that a table of this kind shares with all others of its table."""
    if t.table == "part":
        return keys_of(PartTable)
    return ["case"] if t.table == "load" else []


def _telling(t: JobTableKind) -> tuple[str, str, str]:
    """Row of the key that tells what a part or load is."""
    choices = [f'"{x.kind}"' for x in job_tables() if x.table == t.table and x.kind != "size"]
    key = _word(t)
    shown = f"**`{key}`**" if t.table == "load" else f"`{key}` or `size`"
    return shown, ", ".join(choices), key_words(t.table, key)


def _keys(t: JobTableKind, keys: Iterable[str], *more: tuple[str, str, str]) -> str:
    fields = dict(zip(keys_of(t.model), t.model.model_fields.values(), strict=True))
    rows = list(more)
    for key in keys:
        if key not in fields:
            continue
        field = fields[key]
        reader = next((m for m in field.metadata if isinstance(m, Reader)), None)
        shown = f"**`{key}`**" if field.is_required() else f"`{key}`"
        value = "" if reader is None else reader.words
        words = key_words(t.table, key, t.kind)
        if "law along x" in value:
            words = words.replace(f", {LAW}", "")
        rows.append((shown, value, words))
    return _grid(("key", "value", "meaning"), rows)


def _quantities() -> str:
    rows = [(kind.words, f'`"{kind.example}"`') for kind in Kind]
    return "## Quantities\n\nA text with its unit; fractions and feet with inches too.\n\n" + _grid(
        ("kind", "example"), rows
    )


def _results() -> Iterator[str]:
    yield "## Results\n"
    yield "What `--json` prints, in SI base units. `[]` is a list; *or null* is what does not exist.\n"
    for command in RESULTS:
        yield f"### Results of `{command}`\n"
        yield _grid(("key", "meaning"), list(_paths(result_schema(command), "")))


def _paths(schema: dict[str, Any], path: str) -> Iterator[tuple[str, str]]:
    if path:
        null = " (or null)" if isinstance(schema.get("type"), list) and "null" in schema["type"] else ""
        inner = _plain(schema)
        yield f"`{path}`", f"{schema.get('description', '')}{inner}{null}"
        if inner:
            return
    if "items" in schema:
        yield from list(_paths(schema["items"], f"{path}[]"))[1:]
    for key, value in schema.get("properties", {}).items():
        yield from _paths(value, f"{path}.{key}" if path else key)


def _plain(schema: dict[str, Any]) -> str:
    """Name what an object has inside, where its names say all."""
    names = list(schema.get("properties", {}))
    return f", {{{', '.join(names)}}}" if names in (["min", "max"], ["low", "high"]) else ""


def _grid(head: tuple[str, ...], rows: Sequence[tuple[str, ...]]) -> str:
    if not rows:
        return ""
    lines = [head, ("---",) * len(head), *rows]
    return "\n".join("| " + " | ".join(cell.replace("|", "\\|") for cell in line) + " |" for line in lines) + "\n"


if __name__ == "__main__":
    from fishbelly import catalog

    Path(next(iter(catalog.__path__)), "reference.md").write_text(reference(), encoding="utf-8")
