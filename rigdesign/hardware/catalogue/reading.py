"""Read the tables that ship with the package: CSV with the unit in each heading and a source in each row."""

from __future__ import annotations

import csv
from functools import cache
from importlib import resources


@cache
def rows(table: str) -> tuple[dict[str, str], ...]:
    """Return the rows of a table that ships, such as "flats", as texts by heading.

    Raises
    ------
    FileNotFoundError
        Where no table of that name ships.
    """
    text = resources.files("rigdesign.hardware.catalogue").joinpath(f"{table}.csv").read_text(encoding="utf-8")
    return tuple(csv.DictReader(text.splitlines()))
