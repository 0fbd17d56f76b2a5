"""How a table of the brief's file is laid out: its base class, and keys that may or must be there."""

from __future__ import annotations

from typing import Any

from pydantic import BaseModel, ConfigDict, Field


class Table(BaseModel):
    """Base of every table: unknown keys are errors."""

    model_config = ConfigDict(extra="forbid", frozen=True, arbitrary_types_allowed=True)


def key(description: str, default: Any = None, **more: Any) -> Any:
    """A key that may be left out; a default is written as in a brief and read like any other value."""
    return Field(default, description=description, validate_default=default is not None, **more)


def needed(description: str, **more: Any) -> Any:
    """A key that must be there."""
    return Field(description=description, **more)


def keys_of(table: type[Table]) -> list[str]:
    """Return the keys of a table as they are written in the file."""
    return [info.alias or name for name, info in table.model_fields.items()]
