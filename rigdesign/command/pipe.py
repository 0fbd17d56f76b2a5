"""Output whose reader may leave, as in ``rigdesign design brief.toml | head``."""

from __future__ import annotations

import os
import sys
from collections.abc import Iterator
from contextlib import contextmanager


@contextmanager
def reader_may_leave() -> Iterator[None]:
    """Print inside this: if the reader has gone, the rest is printed to nobody and the work goes on."""
    try:
        yield
        sys.stdout.flush()
    except BrokenPipeError:
        say_no_more()


def say_no_more() -> None:
    """Send the rest to nobody: on the level of the file, so that Python's last flush goes there too."""
    nobody = os.open(os.devnull, os.O_WRONLY)
    os.dup2(nobody, sys.stdout.fileno())
    os.close(nobody)
