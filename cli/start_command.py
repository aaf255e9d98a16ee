"""The command ``fishbelly start``: worked jobs, the job with every key, schemas and the reference."""

from __future__ import annotations

import json
import textwrap
from collections.abc import Sequence
from pathlib import Path
from typing import Any

import click
from click.shell_completion import CompletionItem

from fishbelly.catalog.worked_jobs import WorkedJob, worked_jobs

SCHEMAS = ("job", "results", "catalog", "section", "stiffness", "deflect")
"""What ``--schema`` may ask for: a job, the results of any command, the results of one."""

SITUATIONS: dict[str, tuple[str, ...]] = {
    "Made stronger": ("plated-beam", "plated-w-shape", "runway-beam", "inclined-rafter"),
    "Of two materials": ("flitch-beam", "gantry-arm", "footbridge", "concrete-beam"),
    "Stage by stage": ("plated-under-load", "flitch-in-two-stages", "jacked-and-plated"),
    "Cracked concrete": ("cracked-beam", "bonded-plate"),
    "Cut, drilled or worn": ("notched-joist", "beam-with-openings", "corroded-lintel"),
    "Tapered, stepped or haunched": ("tapered-arm", "pump-shaft", "haunched-rafter", "cambered-girder"),
    "Held or bent in uncommon ways": ("continuous-beam", "propped-cantilever", "z-purlin"),
}
"""Worked jobs by what they show."""

_HELP = """\
List the worked jobs, or print one to edit.

Each states what it has to give under "Expected". A job that reads a data file wants --into, which writes all. Examples:

\b
    fishbelly start flitch-beam > my-beam.toml
    fishbelly start corroded-lintel --into lintel
    fishbelly start --all-keys
    fishbelly start --schema results > results.schema.json
"""


def _names(_: click.Context, __: click.Parameter, incomplete: str) -> list[CompletionItem]:
    """Complete the name of a worked job."""
    return [CompletionItem(job.name, help=job.shows) for job in worked_jobs() if job.name.startswith(incomplete)]


@click.command(help=_HELP)
@click.argument("name", required=False, shell_complete=_names)
@click.option("--into", metavar="FOLDER", help="Write the job and the files it reads into FOLDER.")
@click.option("--force", is_flag=True, help="Overwrite existing files.")
@click.option("--all-keys", "every", is_flag=True, help="Print a job that has every key, each with a comment.")
@click.option(
    "--schema",
    is_flag=False,
    flag_value="job",
    type=click.Choice(SCHEMAS),
    help="Print the JSON Schema of a job, or of results.",
)
@click.option("--reference", is_flag=True, help="Print the reference of commands and keys.")
def command(name: str | None, into: str | None, force: bool, every: bool, schema: str | None, reference: bool) -> None:
    """Run ``fishbelly start``."""
    asked = {"a name": name, "--all-keys": every, "--schema": schema, "--reference": reference}
    given = [words for words, value in asked.items() if value]
    if len(given) > 1:
        raise click.UsageError(f"expected one of {', '.join(given[:-1])} and {given[-1]}, got both")
    if into is not None and not (name or every):
        raise click.UsageError("--into goes with the name of a worked job or with --all-keys")
    if schema:
        click.echo(json.dumps(_schema(schema), indent=2, ensure_ascii=False))
    elif reference:
        from fishbelly.catalog.worked_jobs import reference_text

        click.echo(reference_text(), nl=False)
    elif name or every:
        job = _every_key() if every else _find(name or "")
        if into is None:
            _print(job)
        else:
            _write(job, into, force)
    else:
        _list()


def how_to_begin(command: str) -> str:
    """Say what a job is, and how to begin, to one who typed a command without a job."""
    place = ' --at "1.2 m"' if command == "section" else ""
    return f"""\
fishbelly {command}: which job? A job is one TOML file that describes a member as its drawing
does: parts with shape, material, place and extent, then supports, loads and limits.

    fishbelly start                             lists worked jobs by what they show
    fishbelly start flitch-beam > beam.toml     begins with one of them
    fishbelly {command} beam.toml{place}

`-` in place of the file reads standard input. Every key: `fishbelly start --all-keys`;
options: `fishbelly {command} --help`."""


def _schema(what: str) -> dict[str, Any]:
    if what == "job":
        from fishbelly.cli.job_schema import job_schema

        return job_schema()
    from fishbelly.cli.result_schema import result_schema

    return result_schema(None if what == "results" else what)


def _every_key() -> WorkedJob:
    from fishbelly.cli.all_keys import all_keys

    return all_keys()


def _find(name: str) -> WorkedJob:
    jobs = {job.name: job for job in worked_jobs()}
    if name not in jobs:
        from fishbelly.cli.faults import suggest

        hint = suggest(name, list(jobs))
        raise click.UsageError(f'no worked job "{name}"; {hint or "`fishbelly start` lists them"}')
    return jobs[name]


def _list() -> None:
    jobs = {job.name: job for job in worked_jobs()}
    width = max(map(len, jobs))
    click.echo("Worked jobs; `fishbelly start NAME` prints one to edit.")
    for situation, names in SITUATIONS.items():
        click.echo(f"\n{situation}")
        for name in names:
            head = f"  {name:<{width}}  "
            shows = textwrap.fill(jobs[name].shows, 80, initial_indent=head, subsequent_indent=" " * len(head))
            click.echo(shows)
    click.echo("\nMore: --all-keys, a job with every key; --schema; --reference.")


def _print(job: WorkedJob) -> None:
    click.echo(job.text, nl=False)
    if job.data:
        names = ", ".join(file for file, _ in job.data)
        asked = "--all-keys" if job.name == "all-keys" else job.name
        click.echo(f"note: this job reads {names}; `fishbelly start {asked} --into FOLDER` writes all", err=True)


def _write(job: WorkedJob, into: str, force: bool) -> None:
    """Write a job and its data files, all or none where one exists."""
    from fishbelly.cli.files import FileFault

    folder = Path(into)
    files: Sequence[tuple[str, str]] = ((f"{job.name}.toml", job.text), *job.data)
    try:
        there = [str(folder / file) for file, _ in files if (folder / file).exists() or (folder / file).is_symlink()]
        if there and not force:
            verb = "exists" if len(there) == 1 else "exist"
            listed = ", ".join(f'"{file}"' for file in there)
            raise FileFault(f"{listed} {verb}; --force overwrites, nothing was written")
        folder.mkdir(parents=True, exist_ok=True)
        for file, text in files:
            with (folder / file).open("w" if force else "x", encoding="utf-8", newline="\n") as stream:
                stream.write(text)
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or error
        raise FileFault(f'cannot write into "{into}": {reason}') from error
    click.echo(f"wrote {', '.join(str(folder / file) for file, _ in files)}", err=True)
