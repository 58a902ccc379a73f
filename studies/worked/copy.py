"""Worked studies that ship with the package, copied out to be run or changed."""

from __future__ import annotations

import shutil
from difflib import get_close_matches
from pathlib import Path

from pullback.studies.faults import BadInput, Fault

_HERE = Path(__file__).parent


def names() -> list[str]:
    """Names of the worked studies."""
    return sorted(f.parent.name for f in _HERE.glob("*/study.toml"))


def copy_to(folder: Path, name: str) -> Path:
    """Copy the study `name` into the new folder `folder`.

    Raises BadInput for a name that is not known, and for a folder that is there already and holds anything.
    """
    if name not in names():
        near = get_close_matches(name, names(), 1)
        remedy = f"Did you mean {near[0]}?" if near else "pullback new --list names them."
        raise BadInput(Fault(f"one of {', '.join(names())}", read=repr(name), remedy=remedy, key="--from"))
    if folder.exists() and (not folder.is_dir() or any(folder.iterdir())):
        read = f"{folder}, which is there already"
        raise BadInput(Fault("a new or empty folder", read=read, remedy="Give another name."))
    folder.mkdir(parents=True, exist_ok=True)
    for source in sorted((_HERE / name).iterdir()):
        # What the truth was stays behind: it belongs to the tests.
        if source.suffix in (".toml", ".csv"):
            shutil.copyfile(source, folder / source.name)
    return folder
