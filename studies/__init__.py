"""The whole job: `read_study`, `calibrate`, `sample`, `margins`, `report`; imported only when asked for."""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from pullback.studies.calibration import calibrate as calibrate
    from pullback.studies.calibration import sample as sample
    from pullback.studies.read import read_study as read_study
    from pullback.studies.reporting import draw as report
    from pullback.studies.statement import margins as margins

__all__ = ["calibrate", "margins", "read_study", "report", "sample"]

_FROM = {
    "read_study": "read",
    "calibrate": "calibration",
    "sample": "calibration",
    "margins": "statement",
    "report": "reporting",
}


def __getattr__(name: str) -> Any:
    if name in _FROM:
        module = import_module(f"pullback.studies.{_FROM[name]}")
        return getattr(module, "draw" if name == "report" else name)
    raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
