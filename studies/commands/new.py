"""`pullback new`."""

from __future__ import annotations

from pathlib import Path

import click


@click.command("new")
@click.argument("folder", type=click.Path(path_type=Path), required=False)
@click.option("--from", "example", help="Worked study to copy.")
@click.option("--list", "show", is_flag=True, help="Name the worked studies.")
def command(folder: Path | None, example: str | None, show: bool) -> int:
    """Write a worked study into FOLDER, to run or to change."""
    from pullback.studies.worked.copy import copy_to, names

    if show:
        for name in names():
            click.echo(name)
        return 0
    if folder is None:
        raise click.UsageError("new: read no FOLDER; expected the name of a folder to make")
    if example is None:
        raise click.UsageError(f"new: an empty study to fill in is not yet there; give --from {' or '.join(names())}")
    click.echo(f"written: {copy_to(folder, example)}; next: pullback check {folder}, then pullback run {folder}")
    return 0
