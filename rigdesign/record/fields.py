"""Reading objects of JSON with messages that say where: every value is asked for by key and kind."""

from __future__ import annotations

import json
import math
from dataclasses import dataclass
from typing import Any, NoReturn

from rigdesign.errors import InputError
from rigdesign.record.objects import INFINITE

LARGEST_FLOAT = 1e100
"""No number of a rig is larger: the square of such a one is still a number."""


@dataclass(frozen=True)
class Fields:
    """An object of JSON and the path to it, such as "trees[0].levers[2]" (counted from 0, as programs do)."""

    values: dict[str, Any]
    path: str

    def _get(self, key: str) -> Any:
        if key not in self.values:
            raise InputError("this is not a whole rig: something is missing", where=self._at(key))
        return self.values[key]

    def _at(self, key: str) -> str:
        return f"{self.path}.{key}" if self.path else key

    def _wrong(self, key: str, limit: str) -> NoReturn:
        raise InputError(
            "this is not a rig: a value is of the wrong kind",
            where=self._at(key),
            value=_shown(self.values[key]),
            limit=limit,
        )

    def text(self, key: str) -> str:
        """A text."""
        value = self._get(key)
        return value if isinstance(value, str) else self._wrong(key, "a text")

    def one_of(self, key: str, accepted: tuple[str, ...]) -> str:
        """One of several texts."""
        value = self.text(key)
        return value if value in accepted else self._wrong(key, ", ".join(accepted))

    def flag(self, key: str) -> bool:
        """True or false."""
        value = self._get(key)
        return value if isinstance(value, bool) else self._wrong(key, "true or false")

    def whole(self, key: str) -> int:
        """A whole number."""
        value = self._get(key)
        return value if isinstance(value, int) and not isinstance(value, bool) else self._wrong(key, "a whole number")

    def number(self, key: str) -> float:
        """A finite number, not beyond all reason."""
        value = self._get(key)
        return float(value) if _is_finite(value) else self._wrong(key, f"a finite number up to {LARGEST_FLOAT:g}")

    def size(self, key: str) -> float:
        """A finite number, or infinite."""
        return math.inf if self._get(key) == INFINITE else self.number(key)

    def sizes(self, key: str) -> list[float]:
        """A list of numbers, each finite or infinite."""
        value = self._get(key)
        if not isinstance(value, list) or not all(item == INFINITE or _is_finite(item) for item in value):
            self._wrong(key, "a list of numbers")
        return [math.inf if item == INFINITE else float(item) for item in value]

    def pairs(self, key: str) -> list[list[float]]:
        """A list of pairs of finite numbers."""
        value = self._get(key)
        if not isinstance(value, list) or not all(_is_pair(item) for item in value):
            self._wrong(key, "a list of pairs of numbers")
        return [[float(u), float(v)] for u, v in value]

    def amounts(self, key: str) -> dict[str, float]:
        """An object of finite numbers."""
        inner = self.object(key)
        return {name: inner.number(name) for name in inner.values}

    def of_each(self, key: str) -> dict[str, Fields]:
        """An object of objects, by name."""
        inner = self.object(key)
        return {name: inner.object(name) for name in inner.values}

    def refuse(self, key: str, what: str, limit: str = "", remedy: str = "") -> NoReturn:
        """Raise, because a value of the right kind cannot be meant."""
        raise InputError(what, where=self._at(key), value=_shown(self.values.get(key)), limit=limit, remedy=remedy)

    def numbers(self, *keys: str) -> list[float]:
        """Finite numbers under several keys."""
        return [self.number(key) for key in keys]

    def object(self, key: str) -> Fields:
        """An object."""
        value = self._get(key)
        return Fields(value, self._at(key)) if isinstance(value, dict) else self._wrong(key, "an object")

    def objects(self, key: str) -> list[Fields]:
        """A list of objects."""
        value = self._get(key)
        if not isinstance(value, list) or not all(isinstance(item, dict) for item in value):
            self._wrong(key, "a list of objects")
        return [Fields(item, f"{self._at(key)}[{i}]") for i, item in enumerate(value)]

    def texts(self, key: str) -> dict[str, str]:
        """An object of texts."""
        values = self.object(key).values
        return values if all(isinstance(item, str) for item in values.values()) else self._wrong(key, "texts by name")


def _shown(value: Any) -> str:
    text = json.dumps(value, ensure_ascii=False)
    return text if len(text) <= 60 else text[:57] + "…"


def _is_finite(value: object) -> bool:
    # compared, not converted: a whole number can be too large for a float
    is_number = isinstance(value, (int, float)) and not isinstance(value, bool)
    return is_number and -LARGEST_FLOAT <= value <= LARGEST_FLOAT  # type: ignore[operator]


def _is_pair(value: object) -> bool:
    return isinstance(value, list) and len(value) == 2 and all(_is_finite(item) for item in value)


def read_object(text: str) -> Fields:
    """Return the outermost object of a JSON text.

    Raises
    ------
    InputError
        Where the text is not JSON, holds no object, or a key twice.
    """
    try:
        value = json.loads(text, object_pairs_hook=_once)
    except json.JSONDecodeError as error:
        raise InputError(f"this is not a rig: it is not JSON ({error.msg})", where=f"line {error.lineno}") from error
    except ValueError as error:  # json reads no whole number of more than 4300 digits and says so in its own way
        if isinstance(error, InputError):
            raise
        raise InputError("this is not a rig: it holds a whole number of thousands of digits") from error
    except RecursionError as error:
        raise InputError("this is not a rig: it is nested too deep") from error
    if not isinstance(value, dict):
        raise InputError("this is not a rig: it is JSON, but not an object")
    return Fields(value, "")


def _once(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    """Objects as they are; a key that comes twice is an error rather than a choice in silence."""
    result = dict(pairs)
    if len(result) != len(pairs):
        keys = [key for key, _ in pairs]
        raise InputError("a key comes twice", value=next(key for key in keys if keys.count(key) > 1))
    return result
