"""Every error in words and a status; the last net for what nobody expected."""

from __future__ import annotations

import os
import sys

import click

DONE, NOT_MET, WRONG, CANNOT = 0, 1, 2, 3
"""Exit statuses: done and every limit met; a limit not met; job or command line wrong; numbers not to be had."""


def discard_stdout() -> None:
    """Send what is still buffered for standard output to nowhere, so that leaving does not fail on it again."""
    os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())


def caught(error: Exception) -> int:
    """Turn what the rooms raise into words; whatever is left falls into the last net."""
    from fishbelly.cli.faults import JobFaults
    from fishbelly.cli.files import FileFault
    from fishbelly.member.faults import CannotCompute

    if isinstance(error, JobFaults):
        click.echo(str(error), err=True)
        return WRONG
    if isinstance(error, FileFault):
        click.echo(f"fishbelly: {error}", err=True)
        return WRONG
    if isinstance(error, CannotCompute):
        click.echo(f"fishbelly: {error}", err=True)
        return CANNOT
    if isinstance(error, OSError) and error.filename is None:
        click.echo(f"fishbelly: cannot write the result: {error.strerror}", err=True)
        discard_stdout()
        return WRONG
    if os.environ.get("FISHBELLY_TRACE"):
        import traceback

        traceback.print_exc()
    click.echo(
        f"fishbelly: stopped on something it did not expect ({type(error).__name__}: {error}).\n"
        "Nothing was written. Please report this with the job file and the command; setting\n"
        "FISHBELLY_TRACE=1 shows where it happened.",
        err=True,
    )
    return CANNOT
