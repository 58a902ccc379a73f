"""The study file as TOML: parsed, and the line of each key found again for the faults."""

from __future__ import annotations

import re
import tomllib
from typing import Any

from pullback.studies.faults import BadInput, Fault

Path = tuple[str | int, ...]
_HEADER = re.compile(r"\s*(\[\[?)\s*([^\[\]#]+?)\s*\]\]?\s*(?:#.*)?$")
_KEY = re.compile(r"""\s*((?:[\w-]+|"[^"]*"|'[^']*')(?:\s*\.\s*(?:[\w-]+|"[^"]*"|'[^']*'))*)\s*=""")
_PLACE = re.compile(r"\s*\(at (?:line (\d+), column \d+|end of document)\)")


def parse(text: str, name: str) -> dict[str, Any]:
    """The tables of a TOML text; raises BadInput with the line where it is not TOML."""
    try:
        return tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        place = _PLACE.search(str(error))
        reason = _PLACE.sub("", str(error)).rstrip(".")
        line = int(place[1]) if place and place[1] else text.rstrip().count("\n") + 1
        what = text.splitlines()[line - 1].strip() if line <= len(text.splitlines()) else ""
        expected = f"TOML ({reason[:1].lower()}{reason[1:]})"
        remedy = 'Text stands in quotation marks: key = "text".' if "Invalid value" in reason else ""
        raise BadInput(Fault(file=name, line=line, read=f"`{what}`", expected=expected, remedy=remedy)) from None
    except (RecursionError, ValueError):
        raise BadInput(
            Fault(file=name, expected="TOML that is not nested too deeply, with numbers of usual length")
        ) from None


class Lines:
    """Where each key stands: `of(path)` gives the line of the longest part of a path that is written out."""

    def __init__(self, text: str) -> None:
        self._line: dict[Path, int] = {}
        count: dict[Path, int] = {}
        here: Path = ()
        for number, line in enumerate(text.splitlines(), 1):
            if header := _HEADER.match(line):
                here = _words(header[2])
                if header[1] == "[[":
                    count[here] = count.get(here, -1) + 1
                here = _indexed(here, count)
                self._line.setdefault(here, number)
            elif key := _KEY.match(line):
                self._line.setdefault(here + _words(key[1]), number)

    def of(self, path: Path) -> int | None:
        """1-based line, or None where no part of the path is found."""
        for end in range(len(path), 0, -1):
            for known, line in self._line.items():
                if known[:end] == path[:end]:
                    return line
        return None


def spelled(path: Path) -> str:
    """A path as a fault names it: `pull[1].gauges.mark_reading`, entries counted from one."""
    text = ""
    for part in path:
        text += f"[{part + 1}]" if isinstance(part, int) else f".{part}" if text else part
    return text


def _words(dotted: str) -> Path:
    return tuple(w.strip().strip("\"'") for w in re.findall(r"""[^."']+|"[^"]*"|'[^']*'""", dotted) if w.strip())


def _indexed(path: Path, count: dict[Path, int]) -> Path:
    """A header's path with the index of the array entry that it lies in."""
    for end in range(len(path), 0, -1):
        if path[:end] in count:
            return (*path[:end], count[path[:end]], *path[end:])
    return path
