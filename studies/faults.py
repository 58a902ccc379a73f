"""Faults of a study as its user sees them: where, what was read, what was expected, what to do."""

from __future__ import annotations

import difflib
from collections.abc import Iterable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass, replace

_SHOWN = 60
_LISTED = 12


@dataclass(frozen=True)
class Fault:
    """One thing that is wrong.

    `file` is relative to the study's folder, `line` is 1-based, `key` the path inside the file (or a column), `read`
    what stands there, `expected` what should, `remedy` one sentence on what to do.
    """

    expected: str
    read: str = ""
    remedy: str = ""
    file: str = ""
    line: int | None = None
    key: str = ""

    def __str__(self) -> str:
        line = f"line {self.line}" if self.line else ""
        where = ", ".join(part for part in (self.file, line, cut(self.key)) if part)
        read = f"read {self.read}; " if self.read else ""
        text = f"{where}: {read}expected {self.expected}" if where else f"{read}expected {self.expected}"
        return f"{text}. {self.remedy}" if self.remedy else f"{text}."

    def at(self, file: str = "", line: int | None = None, key: str = "") -> Fault:
        """The same fault with its place filled in where it has none yet."""
        return replace(self, file=self.file or file, line=self.line or line, key=self.key or key)


class BadInput(ValueError):  # noqa: N818 - what the user is told, no fault of the program
    """What was given cannot be read; `faults` says why. Its text is one line per fault, never empty.

    A ValueError, so that pydantic gathers it with the other faults of a file.
    """

    def __init__(self, faults: Fault | Iterable[Fault]) -> None:
        self.faults: tuple[Fault, ...] = (faults,) if isinstance(faults, Fault) else tuple(faults)
        super().__init__("\n".join(str(f) for f in self.faults))


class Faults(list[Fault]):
    """Faults gathered on the way, to be raised together."""

    @contextmanager
    def gathered(self) -> Iterator[None]:
        """Keeps the faults of a BadInput raised inside, and goes on after the block."""
        try:
            yield
        except BadInput as bad:
            self.extend(bad.faults)

    def settle(self) -> None:
        """Raise BadInput where any fault was gathered."""
        if self:
            raise BadInput(self)


def shown(value: object) -> str:
    """A value as it is quoted in a fault: strings in quotation marks, long ones cut."""
    if isinstance(value, bool):
        text = "true" if value else "false"
    elif isinstance(value, str):
        text = '"' + value.replace("\n", " ") + '"'
    elif isinstance(value, dict):
        text = "a table { " + ", ".join(map(str, value)) + " }"
    else:
        text = str(value)
    return cut(text)


def cut(text: str) -> str:
    """A text short enough for a fault."""
    return text if len(text) <= _SHOWN else text[:_SHOWN] + "…"


def nearest(word: str, known: Iterable[str]) -> str | None:
    """The known word that is spelt most nearly like `word`, or None where none is near."""
    by_lower = {k.lower(): k for k in known}
    match = difflib.get_close_matches(word.lower(), list(by_lower), n=1, cutoff=0.6)
    return by_lower[match[0]] if match else None


def listed(words: Iterable[str]) -> str:
    """Words as a list for a sentence: a, b, c; a long list is cut."""
    words = list(words)
    return ", ".join(words[:_LISTED]) + (f" and {len(words) - _LISTED} more" if len(words) > _LISTED else "")


def unknown(word: str, known: Iterable[str], kind: str = "key") -> Fault:
    """A word that is not one of the known ones; names the nearest."""
    known = list(known)
    near = nearest(word, known)
    remedy = f'Did you mean "{near}"?' if near else ""
    return Fault(read=f"the {kind} {shown(word)}", expected=f"one of {listed(known)}", remedy=remedy)


def not_yet(word: str, remedy: str = "Take it out.") -> Fault:
    """A word that is reserved for a later version."""
    return Fault(
        read=shown(word), expected=f"what this version reads: {word} is reserved, and not yet read", remedy=remedy
    )
