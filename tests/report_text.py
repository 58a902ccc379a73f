"""Takes a drawn report apart for the tests."""

from __future__ import annotations

import html
import re


def text_of(page: str) -> str:
    """What a reader sees: no tags, no styles."""
    bare = re.sub(r"<style>.*?</style>|<[^>]+>", " ", page, flags=re.S)
    return re.sub(r"\s+", " ", html.unescape(bare))


def figure(page: str, name: str) -> str:
    match = re.search(rf'<figure [^>]*id="figure-{name}">.*?</figure>', page, flags=re.S)
    assert match, f"no figure {name}"
    return match[0]
