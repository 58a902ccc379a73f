"""Synthetic results folders: invented numbers, labelled so in report_folder."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from report_folder import build
from report_numbers import Numbers
from report_results import results


@pytest.fixture(scope="session")
def found() -> dict[str, Any]:
    """What results.json of the synthetic folder holds."""
    return results(Numbers())


@pytest.fixture(scope="session")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A complete synthetic results folder, not to be changed by a test."""
    return build(tmp_path_factory.mktemp("results"))
