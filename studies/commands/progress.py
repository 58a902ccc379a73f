"""Progress on the terminal, with time left; silent where nobody looks."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager

from rich.console import Console
from rich.progress import BarColumn, Progress, TaskID, TextColumn, TimeElapsedColumn, TimeRemainingColumn


@contextmanager
def bars() -> Iterator[Callable[[str, float], None]]:
    """A callback (stage, share done) that draws one bar a stage on standard error."""
    console = Console(stderr=True)
    columns = (TextColumn("{task.description:>12}"), BarColumn(), TimeElapsedColumn(), TimeRemainingColumn())
    with Progress(*columns, console=console, transient=True, disable=not console.is_terminal) as shown:
        tasks: dict[str, TaskID] = {}

        def tell(stage: str, share: float) -> None:
            if stage not in tasks:
                for other in tasks.values():
                    shown.update(other, completed=1.0)
                tasks[stage] = shown.add_task(stage, total=1.0)
            shown.update(tasks[stage], completed=share)

        yield tell
