"""Keep a solver's stray words out of the program's output."""

from __future__ import annotations

import os
import sys
from collections.abc import Iterator
from contextlib import contextmanager


@contextmanager
def quiet() -> Iterator[None]:
    """Send what compiled code writes to standard output nowhere.

    HiGHS as scipy ships it prints a line of its own now and then, whatever it is told about output; the answer of the
    command must not be mixed with it.
    """
    try:
        sys.stdout.flush()
        kept = os.dup(1)
    except (OSError, ValueError, AttributeError):
        yield  # no standard output to keep clean
        return
    nowhere = os.open(os.devnull, os.O_WRONLY)
    try:
        os.dup2(nowhere, 1)
        yield
    finally:
        os.dup2(kept, 1)
        os.close(kept)
        os.close(nowhere)
