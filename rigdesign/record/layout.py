"""One table of keys for both ways: how a frozen object is written as an object of JSON, and read from it again.

Each row is a published key, the attribute that it holds, and what kind of value that is.  Because the same table
writes and reads, the two cannot disagree.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any, Literal

import numpy as np

from rigdesign.record.fields import Fields
from rigdesign.record.objects import number_object

Kind = Literal["text", "number", "whole", "numbers", "corners", "amounts"] | tuple[str, ...]
"""text, number (maybe infinite), whole number, list of numbers (a tuple), corners (n, 2), numbers by name, or one of
several texts."""


@dataclass(frozen=True)
class Layout:
    """The keys of one kind of object, in their order: (key, attribute, kind)."""

    rows: tuple[tuple[str, str, Kind], ...]

    def written(self, value: object) -> dict[str, Any]:
        """Return the object for JSON."""
        return {key: _written(getattr(value, attribute), kind) for key, attribute, kind in self.rows}

    def read(self, fields: Fields) -> dict[str, Any]:
        """Return the values by attribute.

        Raises
        ------
        InputError
            Where a key is missing or its value is of another kind; the message says where.
        """
        return {attribute: _read(fields, key, kind) for key, attribute, kind in self.rows}


def _written(value: Any, kind: Kind) -> Any:
    if kind == "number":
        return number_object(value)
    if kind == "numbers":
        return [number_object(item) for item in value]
    if kind == "corners":
        return [[float(u), float(v)] for u, v in value]
    if kind == "amounts":
        return {name: number_object(item) for name, item in value.items()}
    return value


_READERS: dict[str, Callable[[Fields, str], Any]] = {
    "text": Fields.text,
    "number": Fields.size,
    "whole": Fields.whole,
    "numbers": lambda fields, key: tuple(fields.sizes(key)),
    "corners": lambda fields, key: np.array(fields.pairs(key)).reshape(-1, 2),
    "amounts": lambda fields, key: fields.amounts(key),
}


def _read(fields: Fields, key: str, kind: Kind) -> Any:
    return fields.one_of(key, kind) if isinstance(kind, tuple) else _READERS[kind](fields, key)
