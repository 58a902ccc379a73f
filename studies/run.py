"""The whole job: study in, results folder out."""

from __future__ import annotations

import time
from dataclasses import dataclass
from pathlib import Path

import numpy as np

import pullback
from pullback.studies.calibration import Progress, _silent, approximate, calibrate, sample
from pullback.studies.read import read_study
from pullback.studies.results.write import in_place, write_results
from pullback.studies.screen.findings import screen
from pullback.studies.statement import Statement, margins


@dataclass(frozen=True)
class Finished:
    """A run that came to its end: the statement and where its results are."""

    statement: Statement
    folder: Path
    warnings: list[str]

    @property
    def exit_code(self) -> int:
        """0 stated, 3 withheld."""
        return 0 if self.statement.stated else 3


def run_study(path: Path, out: Path | None = None, quick: bool = False, progress: Progress = _silent) -> Finished:
    """Read, calibrate, sample, state and report the study at `path`; results in `out` or in `results` beside it.

    Raises BadInput for a study that cannot be read, RuntimeError for one that cannot be fitted. Earlier results stay
    untouched until the new ones are whole.
    """
    from pullback.studies.reporting import draw

    began = time.monotonic()
    study = read_study(path)
    warnings = screen(study)
    # Points far out in a trajectory overflow on their way to being refused; they are counted, not warned about.
    with np.errstate(all="ignore"):
        calibration = calibrate(study, progress)
        drawn = approximate(calibration) if quick else sample(calibration, progress)
        statement = margins(calibration, drawn, progress)
        folder = out if out is not None else study.folder / "results"
        with in_place(folder, study.sha256, pullback.__version__) as work:
            progress("results", 0.0)
            write_results(statement, work, warnings, time.monotonic() - began)
            progress("report", 0.0)
            draw(work)
    return Finished(statement, folder, warnings)
