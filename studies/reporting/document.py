"""Draws `report.html` from a results folder."""

from __future__ import annotations

import os
import re
import tempfile
from importlib.resources import files
from pathlib import Path

from jinja2 import Environment, PackageLoader, StrictUndefined
from markupsafe import Markup

from pullback.studies.reporting import words
from pullback.studies.reporting.figures.style import look
from pullback.studies.reporting.first_page import first_page
from pullback.studies.reporting.load import ResultsFolder, load
from pullback.studies.reporting.pages import fill


def draw(folder: Path) -> Path:
    """Write `folder/report.html` anew from results.json, posterior.nc and tables/, whole or not at all.

    Raises:
        BadInput: where the folder holds no results that can be read.
    """
    page = render(load(folder))
    return _put(folder / "report.html", page)


def render(folder: ResultsFolder) -> str:
    """The whole page as one HTML text: styles and figures inside, no script, nothing fetched."""
    with look():
        filled = fill(folder)
    return (
        _environment()
        .get_template("report.html")
        .render(
            first=first_page(folder),
            pages=filled,
            quick=words.QUICK if folder.quick else "",
            style=Markup(_style() + _running(folder)),
            study=folder.results["study"],
            version=folder.results["pullback"],
        )
    )


def _environment() -> Environment:
    loader = PackageLoader("pullback.studies.reporting", "")
    return Environment(loader=loader, autoescape=True, undefined=StrictUndefined, trim_blocks=True, lstrip_blocks=True)


def _style() -> str:
    return files("pullback.studies.reporting").joinpath("report.css").read_text(encoding="utf-8")


def _running(folder: ResultsFolder) -> str:
    """The printed page's running head and foot: they differ from study to study, so they are made here."""
    study = folder.results["study"]
    boxes = {
        "top-left": _css_string(study["title"][:70]),
        "top-right": _css_string(words.QUICK if folder.quick else study["created"][:10]),
        "bottom-left": _css_string(f"study {study['sha256'][:16]}"),
        "bottom-right": '"page " counter(page) " of " counter(pages)',
    }
    return "@page{" + "".join(f"@{place}{{content:{text}}}" for place, text in boxes.items()) + "}\n"


def _css_string(text: str) -> str:
    """A quoted CSS string of any text: everything but letters, digits and plain marks is written as its code point."""
    return '"' + re.sub(r"[^\w .,:;()%/-]", lambda c: f"\\{ord(c[0]):x} ", text) + '"'


def _put(path: Path, text: str) -> Path:
    handle, name = tempfile.mkstemp(dir=path.parent, prefix=".report-", suffix=".html")
    try:
        with os.fdopen(handle, "w", encoding="utf-8") as file:
            file.write(text)
        mode = 0o666 & ~_umask()
        Path(name).chmod(mode)
        Path(name).replace(path)
    except BaseException:
        Path(name).unlink(missing_ok=True)
        raise
    return path


def _umask() -> int:
    found = os.umask(0)
    os.umask(found)
    return found
