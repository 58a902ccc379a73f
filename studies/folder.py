"""The study's folder: its files read once, within bounds, never from outside of it, and hashed."""

from __future__ import annotations

import hashlib
from pathlib import Path

from pullback.studies.faults import BadInput, Fault, nearest, shown

MIB = 1024 * 1024
LARGEST_STUDY = 1 * MIB
LARGEST_TABLE = 64 * MIB


class Folder:
    """Reads files by their path relative to `root`; `hashes` holds the SHA-256 of each that was read."""

    def __init__(self, root: Path) -> None:
        self.root = root
        self.hashes: dict[str, str] = {}

    def text(self, name: str, largest: int = LARGEST_TABLE) -> str:
        """The file's text, in UTF-8 with or without a byte-order mark; raises BadInput where it cannot be had."""
        data = self._bytes(name, largest)
        self.hashes[name] = hashlib.sha256(data).hexdigest()
        return decoded(data, name)

    def combined_hash(self) -> str:
        """SHA-256 over the names and hashes of all files read, in the order of names."""
        lines = "".join(f"{name}\0{digest}\n" for name, digest in sorted(self.hashes.items()))
        return hashlib.sha256(lines.encode()).hexdigest()

    def _bytes(self, name: str, largest: int) -> bytes:
        try:
            path = self._inside(name)
            if not path.is_file():
                raise BadInput(self._absent(name, path))
            size = path.stat().st_size
            if size > largest:
                expected = f"a file of at most {largest // MIB} MiB"
                raise BadInput(Fault(file=name, read=f"{size / MIB:.1f} MiB", expected=expected))
            return path.read_bytes()
        except OSError as error:
            reason = error.strerror or type(error).__name__
            raise BadInput(Fault(file=name, read=reason.lower(), expected="a file that can be read")) from None

    def _inside(self, name: str) -> Path:
        """The path, made sure to stay below the root, links followed."""
        outside = Fault(
            read=shown(name),
            expected="the path of a file below the study's folder",
            remedy="Copy the file into the folder and give its path relative to it.",
        )
        if not name.strip() or any(ord(c) < 32 for c in name) or Path(name).is_absolute():
            raise BadInput(outside)
        path = (self.root / name).resolve()
        if not path.is_relative_to(self.root.resolve()):
            raise BadInput(outside)
        return path

    def _absent(self, name: str, path: Path) -> Fault:
        if path.is_dir():
            return Fault(file=name, read="a folder", expected="a file")
        siblings = [p.name for p in path.parent.iterdir() if p.is_file()] if path.parent.is_dir() else []
        near = nearest(path.name, siblings)
        remedy = f'Did you mean "{near}"?' if near else ""
        return Fault(file=name, read="no such file", expected="a file in the study's folder", remedy=remedy)


def decoded(data: bytes, name: str) -> str:
    """The text of a file's bytes; raises BadInput where it is empty, not UTF-8, or no text."""
    advice = "Save it as UTF-8."
    if not data.strip():
        raise BadInput(Fault(file=name, read="an empty file", expected="a file with content"))
    if data[:2] in (b"\xff\xfe", b"\xfe\xff"):
        raise BadInput(Fault(file=name, read="text in UTF-16", expected="text in UTF-8", remedy=advice))
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        read = f"the byte 0x{data[error.start]:02x}, which is not UTF-8"
        raise BadInput(Fault(file=name, line=line, read=read, expected="text in UTF-8", remedy=advice)) from None
    if "\0" in text:
        line = text.count("\n", 0, text.index("\0")) + 1
        raise BadInput(Fault(file=name, line=line, read="a zero byte", expected="text in UTF-8", remedy=advice))
    if not text.strip():
        raise BadInput(Fault(file=name, read="an empty file", expected="a file with content"))
    return text
