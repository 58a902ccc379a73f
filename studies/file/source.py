"""study.toml read into its sections, each fault with its line."""

from __future__ import annotations

import re
from dataclasses import replace

from pullback.studies.faults import BadInput, Fault
from pullback.studies.file.base import validated
from pullback.studies.file.root import StudyFile
from pullback.studies.file.toml import Lines, Path, parse


class Source:
    """A study file: `sections` as read, and the means to place later faults by key."""

    def __init__(self, text: str, name: str) -> None:
        self.name = name
        self._lines = Lines(text)
        data = parse(text, name)
        try:
            self.sections = validated(StudyFile, data)
        except BadInput as bad:
            raise BadInput([self.placed(f) for f in bad.faults]) from None

    def placed(self, fault: Fault) -> Fault:
        """The fault with this file's name and the line of its key, where it has no place of its own."""
        if fault.file:
            return fault
        return replace(fault, file=self.name, line=fault.line or self._lines.of(_path(fault.key)))


def _path(key: str) -> Path:
    """A key as faults spell it, `pull[1].gauges`, as the path in the file."""
    return tuple(int(p[1:-1]) - 1 if p.startswith("[") else p for p in re.findall(r"\[\d+\]|[^.\[]+", key))
