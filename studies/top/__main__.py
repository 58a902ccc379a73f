"""The command line's entry."""

from __future__ import annotations

import sys


def main() -> None:
    """Run `pullback` with the process's arguments."""
    from pullback.studies.commands.group import entry

    sys.exit(entry(sys.argv[1:]))


if __name__ == "__main__":
    main()
