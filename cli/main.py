"""The command line: reads what was typed, calls, prints, and turns every error into words and a status.

Statuses: 0 done and every limit met; 1 done and a limit is not met; 2 the command line or the job is wrong; 3 the
numbers cannot be had. Everything heavy is imported inside the commands.
"""

from __future__ import annotations

import os
import sys
from collections.abc import Callable, Sequence
from typing import Any

import click

from fishbelly.cli.command_group import LazyGroup
from fishbelly.cli.fibre_option import add_fibres, asked_fibres, fibres
from fishbelly.cli.last_net import DONE, NOT_MET, WRONG, caught, discard_stdout
from fishbelly.cli.stage_option import STAGE, known_stage
from fishbelly.cli.typed_places import typed_place
from fishbelly.cli.without_option import WITHOUT, beside, known_parts

NOT_BUILT = {
    "steps": "the fewest prismatic pieces that stand for the member in a frame model",
    "constants": "fixed-end moments, stiffnesses and carry-over factors",
    "travel": "influence lines and envelopes of travelling loads",
    "buckle": "critical load factors",
    "vibrate": "natural frequencies",
    "proportion": "the value of a number of the job that just meets the limits",
    "schedule": "one job over a list of members",
    "compare": "several jobs side by side",
    "sheet": "the calculation sheet",
}
"""Commands that are not built yet; each is refused by its name."""

_HELP = """\
State the EI(x) of a member whose cross-section changes or mixes materials, and what it deflects.

A job is one TOML file: parts with shape, material and place, supports, loads, limits. Begin with
`fishbelly start`, which lists worked jobs, then

\b
    fishbelly start flitch-beam > my-beam.toml
    fishbelly deflect my-beam.toml
"""


class _Group(LazyGroup):
    """The group of commands: names those that are not built yet, suggests the nearest one otherwise."""

    def resolve_command(self, ctx: click.Context, args: list[str]) -> Any:
        name = args[0] if args else ""
        if ctx.resilient_parsing:  # completing, not running
            return super().resolve_command(ctx, args)
        if name in NOT_BUILT:
            raise click.UsageError(f'command "{name}" ({NOT_BUILT[name]}) is not built yet in this version')
        if name and self.get_command(ctx, name) is None and not name.startswith("-"):
            from fishbelly.cli.faults import suggest

            hint = suggest(name, [*self.list_commands(ctx), *NOT_BUILT])
            raise click.UsageError(f'unknown command "{name}"' + (f"; {hint}" if hint else ""))
        return super().resolve_command(ctx, args)


def _cautions(ctx: click.Context, _: click.Parameter, value: bool) -> None:
    if value and not ctx.resilient_parsing:
        from fishbelly.cli.cautions import FULL

        click.echo(FULL)
        ctx.exit()


def _version(ctx: click.Context, _: click.Parameter, value: bool) -> None:
    if value and not ctx.resilient_parsing:
        from fishbelly import __version__

        click.echo(f"fishbelly {__version__}")
        ctx.exit()


@click.group(cls=_Group, help=_HELP, context_settings={"help_option_names": ["-h", "--help"]})
@click.option(
    "--cautions",
    is_flag=True,
    is_eager=True,
    expose_value=False,
    callback=_cautions,
    help="What results do not cover.",
)
@click.option("--version", is_flag=True, is_eager=True, expose_value=False, callback=_version, help="Version.")
def cli() -> None:
    """Run ``fishbelly``."""


def _files(*_: Any) -> list[Any]:
    """Complete the name of a file."""
    from click.shell_completion import CompletionItem

    return [CompletionItem("", type="file")]


def _refused(option: str) -> Callable[[click.Context, click.Parameter, Any], None]:
    def refuse(ctx: click.Context, param: click.Parameter, value: Any) -> None:
        if value:
            raise click.UsageError(f'option "{option}" is not built yet in this version')

    return refuse


def _outputs(command: Callable[..., Any]) -> Callable[..., Any]:
    """Options that every command with results shares."""
    options = (
        click.option("--json", "as_json", is_flag=True, help="Print one JSON object in SI units instead of the table."),
        click.option(
            "-o",
            "--output",
            "outputs",
            multiple=True,
            metavar="FILE",
            shell_complete=_files,
            help="Also write FILE: .csv (the table along x), .json, .xlsx, .png, .svg or .pdf (repeatable).",
        ),
        click.option("--force", is_flag=True, help="Overwrite an existing file."),
    )
    for option in reversed(options):
        command = option(command)
    return command


@cli.command()
@click.argument("job", shell_complete=_files)
@click.option(
    "--at", "places", required=True, multiple=True, metavar="X", help='Place along the member, such as "1.2 m".'
)
@click.option(
    "--side",
    type=click.Choice(["left", "right"]),
    default="right",
    show_default=True,
    help="Side of a break.",
)
@click.option("--to", metavar="MATERIAL", help="Material to transform the section to [default: the first part's].")
@fibres
@STAGE
@WITHOUT
@_outputs
def section(
    job: str,
    places: tuple[str, ...],
    side: str,
    to: str | None,
    levels: tuple[str, ...],
    combination: str | None,
    stage: str | None,
    left_out: tuple[str, ...],
    as_json: bool,
    outputs: tuple[str, ...],
    force: bool,
) -> int:
    """Show the cross-section at one place: stiffness, transformed properties, stress coefficients.

    Example: fishbelly section my-beam.toml --at "1.2 m" --fibre "-120 mm"
    """
    if len(places) > 1:
        raise click.UsageError(f"--at: expected one place, got {len(places)}; `stiffness` takes several")
    read, at = _read(job, places, outputs, force)
    from fishbelly.member.section_results import section_at
    from fishbelly.member.without import section_without

    _known_material(to, read.member)
    known_stage(stage, read.member)
    known_parts(left_out, read.member)
    heights = asked_fibres(levels, combination, read.member)
    from fishbelly.cli.patience import patience

    with patience("cutting the section"):
        data = section_at(read.member, at[0], side, to, stage)
        add_fibres(data, read.member, heights, combination, stage, read.style)
        beside(data, left_out, lambda: section_without(data, read.member, left_out, stage))
    return _finish("section", data, read, as_json, outputs, force, listed=True)


@cli.command()
@click.argument("job", shell_complete=_files)
@click.option(
    "--at",
    "at",
    multiple=True,
    metavar="X",
    help='Place to list instead of the default ones, such as "1.2 m" (repeatable).',
)
@click.option("--equal", type=click.IntRange(1, 10_000), metavar="N", help="List N equal steps instead.")
@click.option("--breaks", is_flag=True, help="List the breaks alone.")
@click.option("--to", metavar="MATERIAL", help="Also give A, I, W and the axis, transformed to one material.")
@STAGE
@WITHOUT
@_outputs
def stiffness(
    job: str,
    at: tuple[str, ...],
    equal: int | None,
    breaks: bool,
    to: str | None,
    stage: str | None,
    left_out: tuple[str, ...],
    as_json: bool,
    outputs: tuple[str, ...],
    force: bool,
) -> int:
    """Show the EI(x) table: stiffness, centroid and mass along the member, every break shown.

    Where anything jumps there are two rows, left and right of the jump. For a frame model:
    fishbelly stiffness my-beam.toml --equal 12 --to steel -o frame.csv
    """
    if (bool(at) + breaks + (equal is not None)) > 1:
        raise click.UsageError("expected one of --at, --equal and --breaks, got more")
    read, places = _read(job, at, outputs, force)
    _known_material(to, read.member)
    known_stage(stage, read.member)
    known_parts(left_out, read.member)
    from fishbelly.member.places import places_along
    from fishbelly.member.section_results import stiffness as table
    from fishbelly.member.without import stiffness_without

    if equal is not None or breaks:
        places = places_along(read.member, equal)
    from fishbelly.cli.patience import patience

    with patience("sampling the member"):
        data = table(read.member, places or None, to, stage)
        beside(data, left_out, lambda: stiffness_without(data, read.member, left_out, stage))
    return _finish("stiffness", data, read, as_json, outputs, force, listed=bool(places))


def _known_material(to: str | None, member: Any) -> None:
    names = [m.name for m in member.materials]
    if to is not None and to not in names:
        from fishbelly.cli.faults import suggest

        hint = suggest(to, names)
        raise click.UsageError(f'--to: no part is of material "{to}"' + (f"; {hint}" if hint else ""))


@cli.command()
@click.argument("job", shell_complete=_files)
@click.option(
    "--at",
    "at",
    multiple=True,
    metavar="X",
    help='Place to list instead of the default ones, such as "1.2 m" (repeatable).',
)
@click.option("--second-order", is_flag=True, expose_value=False, hidden=True, callback=_refused("--second-order"))
@STAGE
@WITHOUT
@_outputs
def deflect(
    job: str,
    at: tuple[str, ...],
    stage: str | None,
    left_out: tuple[str, ...],
    as_json: bool,
    outputs: tuple[str, ...],
    force: bool,
) -> int:
    """Show reactions, moments, deflections, stresses and limits.

    Exit status 1 when a limit is not met. Example: fishbelly deflect my-beam.toml -o result.xlsx
    """
    read, places = _read(job, at, outputs, force)
    known_stage(stage, read.member)
    known_parts(left_out, read.member)
    from fishbelly.cli.format_quantity import format_value
    from fishbelly.cli.patience import patience
    from fishbelly.member.results import deflect as solve
    from fishbelly.member.without import deflect_without

    with patience("solving the member"):
        data = solve(read.member, places or None, stage)
        beside(data, left_out, lambda: deflect_without(data, read.member, left_out, places or None, stage))
    said = [note.say(lambda value, what: format_value(value, what, read.style)) for note in data["notes"]]
    data["notes"] = [*read.warnings, *said]
    status = _finish("deflect", data, read, as_json, outputs, force, listed=bool(places))
    met = all(check["ok"] for c in data["combinations"] for check in c["checks"])
    return status if met else NOT_MET


def _read(job: str, at: Sequence[str], outputs: Sequence[str], force: bool) -> tuple[Any, list[float]]:
    """Read the job and the places, and see that every file can be written, before anything is computed."""
    from fishbelly.cli.job_file import read_job

    if outputs:
        from fishbelly.cli.files import check_targets

        check_targets(outputs, force)
    read = read_job(job)
    return read, [typed_place(text, read.member.length, read.style) for text in at]


def _finish(
    command: str,
    data: dict[str, Any],
    job: Any,
    as_json: bool,
    outputs: Sequence[str],
    force: bool,
    listed: bool,
) -> int:
    """Print the table or the JSON object, say the notes, write the files."""
    if outputs:
        from fishbelly.cli import files
        from fishbelly.cli.patience import patience

        with patience(f"writing {', '.join(outputs)}"):
            files.write_all(outputs, command, data, job, force)
    if as_json:
        import json

        click.echo(json.dumps(data, allow_nan=False, ensure_ascii=False))
    else:
        from fishbelly.cli import tables

        show = {"section": tables.section_table, "stiffness": tables.stiffness_table}
        text = show[command](data, job.style) if command == "section" else _table(command, data, job.style, listed)
        click.echo(text.rstrip("\n"))
    if not (sys.stdout.isatty() and sys.stderr.isatty() and not as_json):
        for note in data.get("notes", ()):
            click.echo(f"note: {note}", err=True)
    return DONE


def _table(command: str, data: dict[str, Any], style: str, listed: bool) -> str:
    from fishbelly.cli import tables

    show = tables.stiffness_table if command == "stiffness" else tables.deflect_table
    return show(data, style, listed)


def main(arguments: Sequence[str] | None = None) -> None:
    """Run the command line and leave with its status."""
    import warnings

    # a number that runs out of range ends in words and status 3; nobody is to read of array divisions
    warnings.simplefilter("ignore", RuntimeWarning)
    sys.exit(run(arguments))


def run(arguments: Sequence[str] | None = None) -> int:
    """Run the command line; every error becomes words on stderr and a status.

    Parameters
    ----------
    arguments : sequence of str, optional
        Default what was typed.

    Returns
    -------
    int
        Exit status.
    """
    # the systems solved here are small: threads of the linear algebra only get in each other's way
    os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
    try:
        status = cli.main(
            args=None if arguments is None else list(arguments), prog_name="fishbelly", standalone_mode=False
        )
        sys.stdout.flush()
        return int(status or DONE)
    except click.exceptions.Exit as error:
        return int(error.exit_code)
    except click.ClickException as error:
        context = getattr(error, "ctx", None)
        if isinstance(error, getattr(click.exceptions, "NoArgsIsHelpError", ())):
            click.echo(error.format_message(), err=True)
            return WRONG
        if isinstance(error, click.MissingParameter) and error.param is not None and error.param.name == "job":
            from fishbelly.cli.start_command import how_to_begin

            click.echo(how_to_begin(str(context.info_name if context else "deflect")), err=True)
            return WRONG
        click.echo(f"fishbelly: {error.format_message()}", err=True)
        if context is not None:
            click.echo(f"see `{context.command_path} --help`", err=True)
        return WRONG
    except (click.Abort, KeyboardInterrupt):
        click.echo("fishbelly: stopped", err=True)
        return 130
    except BrokenPipeError:
        discard_stdout()
        return DONE
    except Exception as error:
        return caught(error)
