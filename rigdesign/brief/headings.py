"""The first line of a table: which columns it may have, and what their units are.

Depends on: units, errors.
"""

from __future__ import annotations

import difflib
import re
from dataclasses import dataclass
from fractions import Fraction

from rigdesign.brief.messages import PLAN_RIG
from rigdesign.errors import InputError, TableError
from rigdesign.units import NUMBER, column_fraction, split_heading

PLAIN = re.compile(rf"\s*{NUMBER}\s*")
"""A plain number, as a cell holds it."""

_PLAN_COLUMNS = ("y", "turn", "pressure", "torque")
NOTE = "note"
"""The column for remarks, which is not read."""

NAME = "name"
"""The kind of a column that holds names: text without a unit."""


@dataclass(frozen=True)
class Known:
    """The columns that a table must and may have, with their kinds, and whether the brief is one of a plan rig.

    `blank` names those whose cells may be empty.
    """

    kinds: dict[str, str]
    optional: dict[str, str]
    plan: bool
    blank: frozenset[str] = frozenset()

    @property
    def every(self) -> dict[str, str]:
        """All of them by name."""
        return {**self.kinds, **self.optional}

    @property
    def wanted(self) -> str:
        """Those that must be there, for a message."""
        return ", ".join(
            column if kind == NAME else f"{column} [unit of {kind}]" for column, kind in self.kinds.items()
        )


@dataclass(frozen=True)
class Heading:
    """The first line of a table: the columns' names in the file's order, units, and exact factors of those read."""

    names: tuple[str, ...]
    units: dict[str, str]
    factors: dict[str, Fraction]


def read_heading(cells: list[str], where: str, known: Known) -> Heading:
    """Return the heading; raise TableError where a column is unknown, missing, twice there or without its unit."""
    wanted = known.wanted
    if len(cells) == 1 and re.search(r"[;\t]", cells[0]):
        raise TableError("columns are separated by commas", where=where, value=shortened(cells[0]), limit=wanted)
    names: list[str] = []
    factors: dict[str, Fraction] = {}
    units: dict[str, str] = {}
    for text in cells:
        name, unit = split_heading(text)
        units[name] = unit or ""
        if name != NOTE and name not in known.every:
            raise _unknown_column(name, text, where, known)
        if name in names:
            raise TableError("two columns have one name", where=where, value=f'"{name}"')
        names.append(name)
        if name != NOTE and known.every[name] != NAME:
            try:
                factors[name] = column_fraction(text, known.every[name])
            except InputError as error:
                raise TableError(
                    error.what,
                    where=f"{where}, column {name}",
                    value=error.value,
                    limit=error.limit,
                    remedy=error.remedy,
                ) from None
    missing = [column for column in known.kinds if column not in names]
    if missing:
        raise TableError(f'the column "{missing[0]}" is missing', where=where, limit=wanted)
    return Heading(tuple(names), units, factors)


def _unknown_column(name: str, text: str, where: str, known: Known) -> TableError:
    """Return the error for a column that this table does not have."""
    if PLAIN.fullmatch(text):
        what = "the first line is a heading with units, and this is a number"
        return TableError(what, where=where, value=text.strip(), limit=known.wanted)
    if name in _PLAN_COLUMNS and not known.plan:
        remedy = "delete the column, or give [specimen] outline"
        return TableError(f'the column "{name}" {PLAN_RIG}', where=where, remedy=remedy)
    near = difflib.get_close_matches(name.lower(), known.every, n=1)
    remedy = f'did you mean "{near[0]}"? ' if near else ""
    return TableError(
        "this table has no such column",
        where=where,
        value=f'"{text.strip()}"',
        limit=known.wanted,
        remedy=remedy + 'a column for remarks is headed "note"',
    )


def shortened(text: str) -> str:
    """Return what a cell or line holds, not too long for a message."""
    return text if len(text) <= 60 else text[:57] + "..."
