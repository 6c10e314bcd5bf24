"""The `faying` command. What a command needs is imported when it runs, not when help is shown."""

from __future__ import annotations

from importlib import import_module
from keyword import iskeyword

import click

# a mistake on the command line is bad input like any other
click.UsageError.exit_code = 1

COMMANDS = {
    "life": "Estimate the life of every row and sheet of a case and write the report.",
    "demo": "Run a shipped, invented case.",
    "try": "Open a local page where a splice answers as it is changed.",
    "compare": "Put hole conditions of one case, or several cases, beside each other.",
    "sweep": "Show life over one or two inputs, or find the value that gives a wanted life.",
    "scatter": "Show what drives the life and which row cracks first when inputs scatter.",
    "hole": "Solve one hole: peak stress, range factor and contact.",
    "new": "Write a commented starter case.",
    "fit": "Fit an S-N family to test results with run-outs.",
    "count": "Count a recorded history's rainflow cycles.",
    "spectrum": "Show a shipped or own spectrum: its flights, phases and cycles.",
    "evidence": "Compute every published check now, beside the printed value.",
    "sources": "Print materials, fasteners, curves, spectra and methods with where they come from.",
}
"""Each in a module of its name in `reports.commands`, as a function of its name (`try_` for a word that Python keeps);
here with its line of help."""


class LazyGroup(click.Group):
    """A group whose commands are imported one at a time."""

    def list_commands(self, ctx: click.Context) -> list[str]:
        """Return the names in the order of use."""
        return list(COMMANDS)

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        """Return a command by name."""
        if cmd_name not in COMMANDS:
            return None
        name = f"{cmd_name}_" if iskeyword(cmd_name) else cmd_name
        command = getattr(import_module(f"reports.commands.{name}"), name)
        assert isinstance(command, click.Command)
        return command

    def format_commands(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """List the commands without importing them."""
        with formatter.section("Commands"):
            formatter.write_dl(list(COMMANDS.items()))

    def resolve_command(
        self, ctx: click.Context, args: list[str]
    ) -> tuple[str | None, click.Command | None, list[str]]:
        """Find a command, or say which one may have been meant."""
        if args and args[0] not in COMMANDS and not args[0].startswith("-"):
            from spectra.faults import did_you_mean

            ctx.fail(f'There is no command "{args[0]}". {did_you_mean(args[0], COMMANDS)}')
        return super().resolve_command(ctx, args)


@click.group(cls=LazyGroup, context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(package_name="faying")
def main() -> None:
    """Fatigue life of every fastener row and sheet of a sheet-metal splice.

    Start with `faying demo`, or `faying new mine.toml` and then `faying life mine.toml`.
    """
