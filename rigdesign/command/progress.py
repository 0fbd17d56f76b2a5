"""Progress of long work: a bar on the terminal, and only when it takes longer than two seconds."""

from __future__ import annotations

import sys
import time
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from rich.progress import Progress, TaskID

PATIENCE = 2.0
"""Work shorter than this shows no bar [s]."""


class _Bar:
    """Starts a bar at the first report after `PATIENCE` seconds; the clock decides on showing it, on nothing else."""

    def __init__(self) -> None:
        self._start = time.monotonic()
        self._bar: Progress | None = None
        self._task: TaskID | None = None

    def __call__(self, part: float, words: str) -> None:
        if self._bar is None:
            if time.monotonic() - self._start < PATIENCE:
                return
            self._begin()
        assert self._bar is not None
        assert self._task is not None
        self._bar.update(self._task, completed=min(max(part, 0.0), 1.0), description=words)

    def _begin(self) -> None:
        from rich.console import Console
        from rich.progress import BarColumn, Progress, TextColumn, TimeElapsedColumn

        columns = (
            BarColumn(),
            TextColumn("{task.percentage:3.0f} %"),
            TimeElapsedColumn(),
            TextColumn("{task.description}"),
        )
        self._bar = Progress(*columns, console=Console(stderr=True), transient=True)
        self._task = self._bar.add_task("", total=1.0)
        self._bar.start()

    def stop(self) -> None:
        """Take the bar away."""
        if self._bar is not None:
            self._bar.stop()


@contextmanager
def progress() -> Iterator[Callable[[float, str], None] | None]:
    """Give a callback that draws on the standard error, or None where that is not a terminal."""
    if not sys.stderr.isatty():
        yield None
        return
    bar = _Bar()
    try:
        yield bar
    finally:
        bar.stop()
