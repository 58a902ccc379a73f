"""`pullback check`."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import click

if TYPE_CHECKING:
    from pullback.studies.study import Study


@click.command("check")
@click.argument("study", type=click.Path(path_type=Path), required=False)
@click.option("--units", is_flag=True, help="Print the spellings of units that are read.")
def command(study: Path | None, units: bool) -> int:
    """Read STUDY, screen its data, and say what they can and cannot determine; fits nothing."""
    if units:
        _print_units()
        if study is None:
            return 0
    if study is None:
        raise click.UsageError("check: read no STUDY; expected a folder with a study.toml, or that file")
    from pullback.studies.read import read_study

    read = read_study(study)
    _print_study(read)
    _print_determined(read)
    return 0


def _print_units() -> None:
    from pullback.studies.units import spellings

    for dimension, known in spellings().items():
        click.echo(f"{dimension}: " + ", ".join(f"{spelling} ({factor:g})" for spelling, factor in known))


def _print_study(study: Study) -> None:
    from pullback.studies.screen.findings import screen

    pull = study.pulls[0]
    marks = 0 if pull.marks is None else pull.marks.position.size
    sections = 0 if pull.sections is None else pull.sections.area.size
    coupons = 0 if study.strength is None else study.strength.coupons.broke.size
    click.echo(f"{study.title}")
    click.echo(
        f"read: piece {pull.piece}, driven by {pull.driven_by}, {len(pull.readings.step)} readings, {marks} mark "
        f"positions, {sections} sections, {'a' if pull.mass is not None else 'no'} mass, {coupons} coupons; "
        f"law {study.law.name}"
    )
    groups = {"look at": screen(study), "warning": study.warnings, "left out": study.excluded, "assumed": study.assumed}
    for label, lines in groups.items():
        for line in lines:
            click.echo(f"{label}: {line}")
    if study.not_recorded:
        click.echo(f"not recorded: {', '.join(study.not_recorded)}")


def _print_determined(study: Study) -> None:
    import numpy as np

    from pullback.inverse.identify import determined
    from pullback.studies.assemble import assemble

    model = assemble(study)
    for line in model.assumed:
        click.echo(f"assumed: {line}")
    with np.errstate(all="ignore"):
        found = determined(model.posterior, np.zeros(model.posterior.layout.dim))
    click.echo("what the readings would determine, at the middle of the priors, as share of prior variance removed:")
    for name, share in found.informed.items():
        left = "" if share > 0.5 else "   left mostly to its prior"
        click.echo(f"  {name:<24} {share:6.3f}{left}")
    if found.field_coefficients:
        click.echo(f"  section along the part: {found.field_coefficients} shapes of its field")
    for d in found.weakest:
        if d.informed < 0.5 and len(d.parts) > 1:
            parts = ", ".join(f"{w:+.2f} {name}" for name, w in d.parts)
            click.echo(f"  not separated: {parts} (together {d.informed:.2f})")
