"""A results folder, written whole or not at all."""

from __future__ import annotations

import csv
import json
import shutil
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from pathlib import Path

from pullback.studies.results.document import results
from pullback.studies.results.posterior import write_posterior
from pullback.studies.results.schema import validate
from pullback.studies.results.tables import tables
from pullback.studies.statement import Statement

UNFINISHED = ".unfinished"


def write_results(s: Statement, folder: Path, warnings: Sequence[str], seconds: float) -> None:
    """Write results.json, posterior.nc and tables/ into `folder`.

    Raises what `validate` raises where the document does not keep to its schema.
    """
    document = results(s, warnings, seconds)
    validate(document)
    text = json.dumps(document, indent=1, allow_nan=False)
    (folder / "tables").mkdir(parents=True, exist_ok=True)
    for name, table in tables(s):
        table.to_csv(folder / "tables" / f"{name}.csv", index=False, float_format="%.8g", quoting=csv.QUOTE_MINIMAL)
    write_posterior(s, folder / "posterior.nc")
    (folder / "results.json").write_text(text, encoding="utf-8")


@contextmanager
def in_place(out: Path, sha256: str, version: str) -> Iterator[Path]:
    """A folder to work in below `out`, whose content takes the place of earlier results at the end, and only then.

    Results of another study or version are moved beside `out`, never overwritten.
    """
    work = out / UNFINISHED
    shutil.rmtree(work, ignore_errors=True)
    work.mkdir(parents=True)
    try:
        yield work
        _set_aside(out, sha256, version)
        for new in sorted(work.iterdir()):
            old = out / new.name
            if old.is_dir():
                shutil.rmtree(old)
            new.replace(old)
    finally:
        shutil.rmtree(work, ignore_errors=True)
        if out.is_dir() and not any(out.iterdir()):
            out.rmdir()


def _set_aside(out: Path, sha256: str, version: str) -> None:
    """Move results that are not of this study and version to `<out>-<hash>`."""
    known = out / "results.json"
    if not known.is_file():
        return
    try:
        document = json.loads(known.read_text(encoding="utf-8"))
        old, made_by = document["study"]["sha256"], document["pullback"]
    except (ValueError, KeyError, TypeError):
        old, made_by = "unreadable", ""
    if (old, made_by) == (sha256, version):
        return
    aside = out.with_name(f"{out.name}-{old[:12]}")
    count = 1
    while aside.exists():
        count += 1
        aside = out.with_name(f"{out.name}-{old[:12]}-{count}")
    aside.mkdir()
    for item in out.iterdir():
        if item.name != UNFINISHED:
            item.replace(aside / item.name)
