"""The report in headless Chromium: its width on a telephone, and what its print on A4 and Letter keeps together."""

from __future__ import annotations

import re
import shutil
import subprocess
from pathlib import Path

import pytest
from report_folder import build

from pullback.studies.reporting import draw

_NAMES = ("chromium", "chromium-browser", "google-chrome")
CHROMIUM = next(filter(None, map(shutil.which, _NAMES)), None)
needs_chromium = pytest.mark.skipif(CHROMIUM is None, reason="no Chromium on this machine (apt-get install chromium)")
needs_poppler = pytest.mark.skipif(
    shutil.which("pdftotext") is None, reason="no pdftotext on this machine (apt-get install poppler-utils)"
)
FLAGS = (
    *("--headless", "--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-sync"),
    *("--disable-background-networking", "--disable-component-update", "--allow-file-access-from-files"),
)
# Labels of a figure's first and last row, and the beginning of the caption that must be on the same sheet.
TOGETHER = (
    ("position x (mm)", "density (1)", "Above: positions read"),
    ("section A₀ (mm²)", "A₀ / outline − 1 (%)", "Unstretched section with its"),
    ("force (N)", "force read − fitted (N)", "Force at the pulled end"),
    ("share failed (%)", "load (N), next part", "Share of parts that have failed"),
    ("nominal stress P (MPa)", "J (1)", "At each step"),
    ("margin, hold-down (1)", "strength modulus (1)", "Draws of 8 chains"),
)
# Pushes figures down their sheet, so that each would be cut if nothing held it together.
SHIFTS = "@media print{.evidence::before{content:'';display:block;height:110mm}}"


@pytest.fixture(scope="module")
def page(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return draw(build(tmp_path_factory.mktemp("results")))


def chromium(tmp_path: Path, *arguments: str) -> str:
    command = [str(CHROMIUM), *FLAGS, f"--user-data-dir={tmp_path / 'profile'}", *arguments]
    return subprocess.run(command, capture_output=True, text=True, timeout=120, check=True).stdout


@needs_chromium
@pytest.mark.parametrize("width", [390, 1000])
def test_nothing_but_its_own_boxes_scrolls_sideways(page: Path, tmp_path: Path, width: int) -> None:
    svgs = "[...d.querySelectorAll('svg')]"
    counts = f"{svgs}.length,{svgs}.filter(s=>s.getBoundingClientRect().height<40).length"
    measure = f"const d=f.contentDocument;document.title=[d.documentElement.scrollWidth,{counts}].join(' ')"
    look = f"border:0;width:{width}px;height:900px"
    frame = f'<iframe id="f" src="{page.as_uri()}" style="{look}" onload="{measure}"></iframe>'
    wrapper = tmp_path / "wrapper.html"
    wrapper.write_text(f"<!DOCTYPE html><title>unmeasured</title>{frame}", encoding="utf-8")
    found = re.search(r"<title>(.*?)</title>", chromium(tmp_path, "--dump-dom", wrapper.as_uri()))
    assert found and found[1] != "unmeasured"
    scroll, drawings, invisible = map(int, found[1].split())
    assert scroll <= width
    assert drawings >= 20 and invisible == 0


@needs_chromium
@needs_poppler
@pytest.mark.parametrize("size", ["A4", "Letter"])
@pytest.mark.parametrize("shifts", ["", SHIFTS], ids=["as it is", "pushed down"])
def test_a_printed_figure_stays_with_its_caption_and_pages_are_numbered(
    page: Path, tmp_path: Path, size: str, shifts: str
) -> None:
    sized = tmp_path / "sized.html"
    sized.write_text(
        page.read_text(encoding="utf-8").replace("</style>", f"@page{{size:{size}}}{shifts}</style>"), encoding="utf-8"
    )
    chromium(tmp_path, f"--print-to-pdf={tmp_path / 'report.pdf'}", "--no-pdf-header-footer", sized.as_uri())
    text = subprocess.run(
        ["pdftotext", "-layout", tmp_path / "report.pdf", "-"], capture_output=True, text=True, check=True
    ).stdout
    sheets = text.rstrip("\f").split("\f")
    for number, sheet in enumerate(sheets, start=1):
        assert f"page {number} of {len(sheets)}" in sheet and "study 3f3f3f3f3f3f3f3f" in sheet
    flat = [re.sub(r"\s+", " ", sheet) for sheet in sheets]
    if not shifts:
        assert all(part in flat[0] for part in ("Required and guaranteed", "Not covered", "Cautions", "checked, date"))
    for first, last, caption in TOGETHER:
        assert any(first in sheet and last in sheet and caption in sheet for sheet in flat), f"cut: '{caption}'"
