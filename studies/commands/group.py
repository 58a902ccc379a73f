"""The command group: one command a file, imported only when called, so that help is quick."""

from __future__ import annotations

from collections.abc import Sequence
from importlib import import_module

import click

COMMANDS = {
    "new": "write a worked study into a new folder",
    "check": "read and screen a study; say what its data can determine",
    "run": "calibrate a study, state the margins, write results and report",
    "report": "draw the report again from a results folder",
}
LATER = {
    "status": "how far a running study is",
    "compare": "candidate laws side by side",
    "plan": "which further measurement narrows the margin most",
    "batch": "every study below a folder",
}


class Lazy(click.Group):
    """A group that imports a command when it is asked for."""

    def list_commands(self, ctx: click.Context) -> list[str]:
        """Commands in the order of the work."""
        return list(COMMANDS)

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        """The command of that name; those of later versions are refused by name."""
        if cmd_name in LATER:
            known = ", ".join(COMMANDS)
            raise click.UsageError(f"{cmd_name} is not yet there ({LATER[cmd_name]}); this version has {known}")
        if cmd_name not in COMMANDS:
            return None
        command: click.Command = import_module(f"pullback.studies.commands.{cmd_name}").command
        return command

    def format_commands(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """The list of commands, without importing any."""
        with formatter.section("Commands"):
            formatter.write_dl(list(COMMANDS.items()))


@click.group(cls=Lazy, context_settings={"help_option_names": ["-h", "--help"]})
@click.version_option(package_name="pullback")
def group() -> None:
    """From pull tests of stretched rubber parts to the load that such a part carries, and how sure that is.

    STUDY is a folder with a study.toml, or that file itself.

    Exit: 0 done or stated, 2 bad input, 3 statement withheld, 4 (run --strict) stated and a demand is not met.
    """


def entry(arguments: Sequence[str]) -> int:
    """Run with `arguments`; returns the exit code. Bad input is told in one line a fault, never as a traceback."""
    from pullback.studies.faults import BadInput

    try:
        code = group.main(list(arguments), prog_name="pullback", standalone_mode=False)
    except BadInput as bad:
        for fault in bad.faults:
            click.echo(f"pullback: {fault}", err=True)
        return 2
    except click.exceptions.Exit as end:
        return end.exit_code
    except click.ClickException as bad:
        click.echo(f"pullback: {bad.format_message()}", err=True)
        return 2
    except OSError as bad:
        place = f"{bad.filename}: " if bad.filename else ""
        click.echo(f"pullback: {place}{bad.strerror or bad}; expected a place that can be read and written", err=True)
        return 2
    except (click.Abort, KeyboardInterrupt):
        click.echo("pullback: stopped; nothing was written and earlier results are untouched", err=True)
        return 130
    return int(code or 0)
