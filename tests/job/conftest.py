"""The worked study, run once a session through the command line's entry, sampled and quick."""

from __future__ import annotations

import pytest
from job_worked import Ran, copied

from pullback.studies.commands.group import entry


@pytest.fixture(scope="session")
def sampled(tmp_path_factory: pytest.TempPathFactory) -> Ran:
    study = copied(tmp_path_factory.mktemp("sampled") / "strap")
    return Ran(entry(["run", str(study)]), study / "results")


@pytest.fixture(scope="session")
def quick(tmp_path_factory: pytest.TempPathFactory) -> Ran:
    study = copied(tmp_path_factory.mktemp("quick") / "strap")
    return Ran(entry(["run", str(study), "--quick"]), study / "results")
