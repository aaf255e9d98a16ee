"""The options `--fibre` and `--combination`: stress at levels of a cross-section under a combination."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import asdict
from typing import Any

import click


def fibres(command: Callable[..., Any]) -> Callable[..., Any]:
    """Give a command both options."""
    level = click.option(
        "--fibre",
        "levels",
        multiple=True,
        metavar="Z",
        help='Also show the stress at this level, such as "-120 mm" (repeatable).',
    )
    name = click.option("--combination", metavar="NAME", help="Combination that --fibre looks at [default: the first].")
    return level(name(command))


def asked_fibres(levels: Sequence[str], combination: str | None, member: Any) -> list[float]:
    """Read the levels [m]; raises `click.UsageError`, with the nearest name, where they or the combination are none."""
    from fishbelly.cli.faults import suggest
    from fishbelly.cli.quantities import Kind, QuantityError, parse_quantity

    if combination is not None:
        if not levels:
            raise click.UsageError("--combination: expected a level with it, --fibre Z")
        known = [c.name for c in member.combinations]
        if combination not in known:
            hint = suggest(combination, known)
            raise click.UsageError(
                f'--combination: the job has no combination "{combination}"' + (f"; {hint}" if hint else "")
            )
    try:
        return [parse_quantity(text, Kind.LENGTH) for text in levels]
    except QuantityError as error:
        raise click.UsageError(f"--fibre: {error}") from None


def add_fibres(
    data: dict[str, Any], member: Any, levels: Sequence[float], combination: str | None, stage: str | None, style: Any
) -> None:
    """Add the stress at levels to the data of a section, where it was asked.

    Raises `click.UsageError` where a level meets nothing of the section.
    """
    if not levels:
        return
    from fishbelly.cli.format_quantity import format_value
    from fishbelly.member.analysis import Analysis
    from fishbelly.member.fibre_stress import LevelOutside, fibre_stresses

    try:
        found = fibre_stresses(Analysis.of(member), data["x"], levels, combination, data["side"], stage)
    except LevelOutside as error:
        got, low, high = (format_value(v, "length", style) for v in (error.z, error.low, error.high))
        if error.low <= error.z <= error.high:
            raise click.UsageError(f"--fibre: no part is met at z = {got}, where the section has a gap") from None
        raise click.UsageError(f"--fibre: expected a level of the section, {low} to {high}, got {got}") from None
    name = combination or member.combinations[0].name
    data["fibres"] = [{"combination": name} | asdict(f) for f in found]
