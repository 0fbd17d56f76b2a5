"""How far a long calculation is, told to a callback `progress(part, words)`, part in 0..1."""

from __future__ import annotations

from collections.abc import Callable

Progress = Callable[[float, str], None]


def share(progress: Progress | None, start: float, end: float) -> Progress | None:
    """Return a callback that fills the part of the whole work from start to end."""
    if progress is None:
        return None
    return lambda part, words: progress(start + part * (end - start), words)


def named(progress: Progress, name: str) -> Progress:
    """Return a callback that says a name before the words."""
    return lambda part, words: progress(part, f"{name}: {words}")
