"""What was read, with which versions, by which method: enough to make the results again."""

from __future__ import annotations

import re

from pullback.studies.reporting import words
from pullback.studies.reporting.load import ResultsFolder
from pullback.studies.reporting.tables.base import Table

METHOD = {"sampled": "posterior sampled", "laplace": "quick approximation (Laplace), never stated"}
SCATTER = {"weibull": "Weibull, weakest link over the volume", "lognormal": "log-normal, most stressed section"}


def files(folder: ResultsFolder) -> Table:
    """One row a file read."""
    rows = sorted(folder.results["study"]["files"].items())
    return Table("Files read", ("File", "SHA-256"), rows, (0, 1), empty="The results name no file.")


def method(folder: ResultsFolder) -> Table:
    """How the results were made."""
    study = folder.results["study"]
    rows = [
        ("Study, SHA-256", study["sha256"]),
        ("Method", METHOD[study["method"]]),
        ("Law", words.law(study["law"])),
        ("Random seed", str(study["seed"])),
        ("Made", made(study["created"])),
        *[(f"Version of {name}", version) for name, version in folder.results["versions"].items()],
    ]
    for key in ("criterion", "scatter"):
        if key in study:
            rows.insert(3, (f"Strength, {key}", SCATTER.get(study[key], study[key])))
    return Table("Method and versions", ("What", "Value"), rows, (0, 1))


def identification(folder: ResultsFolder) -> list[tuple[str, str]]:
    """Name and text of everything that identifies the study, its record and each piece's."""
    results, study = folder.results, folder.results["study"]
    found = [("Law", words.law(study["law"])), ("Applies to", study["applies_to"])]
    found += [("Computed", made(study["created"]))]
    found += [(_label(key), text) for key, text in results["record"].items()]
    for name, piece in results["pieces"].items():
        found += [(f"Piece {name}, {_label(key).lower()}", text) for key, text in piece.get("record", {}).items()]
    return [*found, ("Method", METHOD[study["method"]]), ("Study hash", study["sha256"][:16])]


def made(created: str) -> str:
    """An ISO time as date and time of day; a mere date as it is."""
    found = re.fullmatch(r"(\d{4}-\d\d-\d\d)T(\d\d:\d\d)(?::\d\d)?(?:\+00:00|Z)", created)
    return f"{found[1]}, {found[2]} UTC" if found else created


def _label(key: str) -> str:
    spaced = key.replace("_", " ").strip()
    return spaced[:1].upper() + spaced[1:] or words.DASH
