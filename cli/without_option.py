"""The option `--without`: what the member is without some of its parts, beside what it is with them."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

import click

WITHOUT = click.option(
    "--without",
    "left_out",
    multiple=True,
    metavar="PART",
    help="Also show what is without this part, beside what is with it (repeatable).",
)


def known_parts(names: Sequence[str], member: Any) -> None:
    """See that a member has parts of these names; raises `click.UsageError`, with the nearest name, where not."""
    known = [p.name for p in member.parts]
    for name in names:
        if name not in known:
            from fishbelly.cli.faults import suggest

            hint = suggest(name, known)
            raise click.UsageError(f'--without: the job has no part "{name}"' + (f"; {hint}" if hint else ""))


def beside(data: dict[str, Any], names: Sequence[str], make: Callable[[], dict[str, Any]]) -> None:
    """Add to the data what is without some parts, where that was asked; raises `click.UsageError` if that cannot be."""
    if not names:
        return
    from fishbelly.member.without import CannotLeaveOut

    try:
        data["without"] = make()
    except CannotLeaveOut as error:
        raise click.UsageError(f"--without: {error}") from None
