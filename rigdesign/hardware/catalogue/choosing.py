"""Choose from a list in rising order."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from typing import TypeVar

Item = TypeVar("Item")


def smallest(items: Iterable[Item], fits: Callable[[Item], bool]) -> Item | None:
    """Return the first of `items`, which stand in rising order, that fits; None where none does.

    >>> smallest((8, 10, 12, 16), lambda pin: pin >= 11)
    12
    >>> smallest((8, 10, 12, 16), lambda pin: pin >= 20) is None
    True
    """
    return next((item for item in items if fits(item)), None)
