"""The worked study and a run of it, shared by the tests of the whole job."""

from __future__ import annotations

import json
import shutil
from dataclasses import dataclass
from pathlib import Path
from typing import Any

WORKED = Path(__file__).parents[1] / "studies" / "worked" / "battery-strap"


@dataclass(frozen=True)
class Ran:
    code: int
    folder: Path

    @property
    def results(self) -> dict[str, Any]:
        return json.loads((self.folder / "results.json").read_text(encoding="utf-8"))


def copied(folder: Path) -> Path:
    shutil.copytree(WORKED, folder)
    return folder
