"""What every part of the reading needs to know, and checks that several parts share."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np

from rigdesign.brief.locate import Places
from rigdesign.brief.messages import is_plan
from rigdesign.brief.model import Floats, Specimen
from rigdesign.brief.sources import Texts
from rigdesign.brief.tables import CsvTable, Repeats, read_table
from rigdesign.display import show
from rigdesign.errors import BriefError, TableError
from rigdesign.units import in_words

END_TOLERANCE = 1e-9
"""Of the span: a station that lies off an end by no more than this is on it (rounding of converted units)."""

PRINTED_TOLERANCE = 5e-4
"""Of the span: a table's row may lie off an end by the rounding of its printed x, but never by more than this, which
moves no moment by more than the narrowest band."""


@dataclass(frozen=True)
class Context:
    """The file's content as TOML gives it, the places of its keys, and the texts of its tables."""

    raw: dict[str, Any]
    places: Places
    texts: Texts

    def error(
        self, what: str, *path: str | int, limit: str = "", remedy: str = "", value: str | None = None
    ) -> BriefError:
        """Return a BriefError at a key, with the value that stands there unless another is given."""
        if value is None:
            value = self._written(path)
        return BriefError(what, where=self.places.where(*path), value=value, limit=limit, remedy=remedy)

    def _written(self, path: tuple[str | int, ...]) -> str:
        found: Any = self.raw
        for part in path:
            if isinstance(found, dict) and part not in found:
                return ""
            found = found[part]
        return "" if isinstance(found, dict) else in_words(found)

    def table(
        self,
        name: str,
        path: tuple[str | int, ...],
        kinds: dict[str, str],
        *,
        repeats: Repeats = "none",
        optional: dict[str, str] | None = None,
        blank: frozenset[str] = frozenset(),
    ) -> CsvTable:
        """Read the table that the key at `path` names."""
        text = self.texts.table(name, self.places.where(*path))
        plan = is_plan(self.raw)
        return read_table(text, name, kinds, repeats=repeats, optional=optional, plan=plan, blank=blank)

    def station(self, x: float, specimen: Specimen, *path: str | int, what: str = "the station") -> float:
        """Return a station that lies on the specimen, moved onto its end if only rounding parts them."""
        slack = END_TOLERANCE * (specimen.right - specimen.left)
        if not specimen.left - slack <= x <= specimen.right + slack:
            raise self.error(f"{what} lies off the specimen", *path, limit=extent(specimen))
        return min(max(x, specimen.left), specimen.right)


def extent(specimen: Specimen) -> str:
    """Return the specimen's extent for a message."""
    return between(specimen.left, specimen.right)


def between(start: float, end: float) -> str:
    """Return two stations for a message: "0.200 m to 3.400 m"."""
    return f"{show(start, 'length', unit='m')} to {show(end, 'length', unit='m')}"


def table_stations(table: CsvTable, specimen: Specimen, x: Floats | None = None) -> Floats:
    """Return the stations of a table (n,) [m], all on the specimen; raise TableError naming the first row that is not.

    `x` gives the stations where they are not the column x itself.  A row that lies off an end by no more than the
    rounding of its printed x stands on that end: 188.98 in for 4.8 m.
    """
    x = table["x"] if x is None else x
    span = specimen.right - specimen.left
    beyond = np.maximum(specimen.left - x, x - specimen.right)
    slack = END_TOLERANCE * span
    if (beyond > slack).any():  # only then are the cells looked at: a table may have a million rows
        slack = max(slack, min(0.5 * (1 + END_TOLERANCE) * table.digit("x"), PRINTED_TOLERANCE * span))
    off = np.flatnonzero(beyond > slack)
    if off.size:
        row = int(off[0])
        station, distance = show(float(x[row]), "length", unit="m"), show(float(beyond[row]), "length")
        raise TableError(
            "the row lies off the specimen",
            where=table.where(row),
            value=f"{table.cell('x', row)} ({station} from x = 0, {distance} off the end)",
            limit=extent(specimen),
            remedy="check the unit in the heading and the origin of x",
        )
    return frozen(np.clip(x, specimen.left, specimen.right))


def running(rows: CsvTable, column: str, piece: Specimen) -> Floats:
    """Return the stations of a column that runs straight between its rows; raise TableError where it has no extent."""
    x = table_stations(rows, piece)
    if not x[0] < x[-1]:
        raise TableError("the table needs rows at two different x", where=rows.name)
    not_all_zero(rows, column)
    return x


def not_negative(rows: CsvTable, column: str) -> None:
    """Raise TableError at the first row where the column is negative."""
    negative = np.flatnonzero(rows[column] < 0)
    if negative.size:
        row = int(negative[0])
        raise TableError(
            f"the {column} is negative", where=rows.where(row), value=rows.cell(column, row), limit="0 or more"
        )


def not_all_zero(rows: CsvTable, *columns: str) -> None:
    """Raise TableError if the columns hold nothing but zeros."""
    if not any(rows[column].any() for column in columns):
        raise TableError(
            f"the {' and '.join(columns)} of every row is zero", where=rows.name, remedy="delete the table or fill it"
        )


def frozen(values: Floats) -> Floats:
    """Return the array, now read-only."""
    values.setflags(write=False)
    return values
