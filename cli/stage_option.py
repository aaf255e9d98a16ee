"""The option `--stage`: the member as it is in one stage of its life."""

from __future__ import annotations

from typing import Any

import click

STAGE = click.option("--stage", metavar="NAME", help="Stage of construction, at its end [default: the last].")


def known_stage(name: str | None, member: Any) -> None:
    """See that a member has a stage of this name; raises `click.UsageError`, with the nearest name, where not."""
    known = [s.name for s in member.stages]
    if name is None or name in (known or ["all"]):
        return
    if not known:
        raise click.UsageError(f'--stage: the job has no stages, got "{name}"')
    from fishbelly.cli.faults import suggest

    hint = suggest(name, known)
    raise click.UsageError(f'--stage: the job has no stage "{name}"' + (f"; {hint}" if hint else ""))
