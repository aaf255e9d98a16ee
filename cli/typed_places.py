"""Places along a member as they are typed for `--at`."""

from __future__ import annotations

from typing import Any

import click


def typed_place(text: str, length: float, style: Any) -> float:
    """Read a place on a member of a length [m]; raises `click.UsageError` where it is none, or lies beside it."""
    from fishbelly.cli.format_quantity import format_position
    from fishbelly.cli.quantities import Kind, QuantityError, parse_quantity

    try:
        x = parse_quantity(text, Kind.LENGTH)
    except QuantityError as error:
        raise click.UsageError(f"--at: {error}") from None
    if not -1e-9 * length <= x <= length * (1.0 + 1e-9):
        limit = format_position(length, style)
        raise click.UsageError(f'--at: expected a place on the member, 0 to {limit}, got "{text}"')
    return min(max(x, 0.0), length)
