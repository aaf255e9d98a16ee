"""Commands that stand in modules of their own, imported when they are called, so that the others start fast."""

from __future__ import annotations

import click

LATER = {
    "catalog": ("fishbelly.cli.catalog_command", "Find materials, sections and deflection limits by any word."),
    "start": ("fishbelly.cli.start_command", "List the worked jobs, or print one to edit."),
}
"""By name: the module, whose `command` it is, and the line for --help."""

_SHORT = 60
"""Characters of a command's line in --help."""


class LazyGroup(click.Group):
    """A group of commands that imports those of `LATER` when they are called."""

    def list_commands(self, ctx: click.Context) -> list[str]:
        """Return the names of all commands, sorted."""
        return sorted({*self.commands, *LATER})

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        """Return a command, imported where need be; None where there is none of that name."""
        if cmd_name in LATER and cmd_name not in self.commands:
            from importlib import import_module

            command: click.Command = import_module(LATER[cmd_name][0]).command
            command.name = cmd_name
            return command
        return super().get_command(ctx, cmd_name)

    def format_commands(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """Write the commands of --help without importing any."""
        rows = []
        for name in self.list_commands(ctx):
            known = self.commands.get(name)
            if known is None or not known.hidden:
                rows.append((name, LATER[name][1] if known is None else known.get_short_help_str(_SHORT)))
        with formatter.section("Commands"):
            formatter.write_dl(rows)
