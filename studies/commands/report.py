"""`pullback report`."""

from __future__ import annotations

from pathlib import Path

import click


@click.command("report")
@click.argument("folder", type=click.Path(path_type=Path))
def command(folder: Path) -> int:
    """Draw the report again from the results in FOLDER, without computing anything anew."""
    from pullback.studies.reporting import draw

    click.echo(f"report: {draw(folder)}")
    return 0
