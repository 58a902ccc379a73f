"""`pullback run`."""

from __future__ import annotations

import os
from pathlib import Path
from typing import TYPE_CHECKING

import click

from pullback.studies.commands.progress import bars

if TYPE_CHECKING:
    from pullback.studies.run import Finished


@click.command("run")
@click.argument("study", type=click.Path(path_type=Path))
@click.option("--out", type=click.Path(path_type=Path), help="Results folder; else `results` in the study's folder.")
@click.option("--quick", is_flag=True, help="Laplace approximation in place of sampling; never stated.")
@click.option("--strict", is_flag=True, help="Exit 4 where stated and a demand is not met.")
@click.option("--resume", is_flag=True, help="Go on from a checkpoint (not yet).")
def command(study: Path, out: Path | None, quick: bool, strict: bool, resume: bool) -> int:
    """Calibrate STUDY, state its margins, and write results and report."""
    if resume:
        raise click.UsageError("--resume is not yet there: a run starts anew; leave it out")
    if out is not None and out.exists() and not out.is_dir():
        raise click.UsageError(f"--out {out}: read a file, expected a folder or a new name; give another")
    # Small matrices: threads inside the linear algebra cost more than they bring.
    for name in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"):
        os.environ.setdefault(name, "1")
    import numpy as np

    from pullback.studies.run import run_study

    try:
        with bars() as progress:
            done = run_study(study, out, quick, progress)
    except (RuntimeError, ArithmeticError, np.linalg.LinAlgError) as failed:
        why = f"{study}: the readings cannot be fitted ({failed})"
        raise click.ClickException(f"{why}; look at `pullback check`, the readings' units and the priors") from failed
    _tell(done)
    if strict and done.statement.stated and done.statement.met == "not met":
        return 4
    return done.exit_code


def _tell(done: Finished) -> None:
    from pullback.studies.reporting import words
    from pullback.studies.results.sentence import sentence

    s = done.statement
    for warning in done.warnings:
        click.echo(f"look at: {warning}")
    click.echo(("stated: " if s.stated else "withheld: ") + sentence(s))
    for rule in s.rules:
        if not rule.passed:
            click.echo(f"  {rule.rule}: {rule.text}; {rule.remedy}")
    for m in s.margins:
        for g in m.guaranteed:
            at = f"{100 * g.reliability:g} % of parts, {100 * g.confidence:g} % confidence"
            if g.value is None or g.margin is None:
                click.echo(f"  {m.demand}: {at}: not shown ({g.reason})")
            else:
                met = g.met if s.stated else "not shown"
                load, need = words.floor_load(g.value, m.required), words.given(m.required)
                click.echo(f"  {m.demand}: {at}: {load} N of {need} N, {words.floor_percent(g.margin)}, {met}")
    click.echo(f"report: {done.folder / 'report.html'}")
