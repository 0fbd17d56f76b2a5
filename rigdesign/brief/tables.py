"""Tables that a brief names: CSV with a heading whose every column carries its unit, "x [in]".

Columns may stand in any order; a column "note" is for remarks and not read.  Cells are plain numbers with a decimal
point, separated by commas.  Rows are in order of x.  A table of a million rows is read by a quick path; only where
that stumbles are the rows gone through one by one, to say which of them is wrong.
"""

from __future__ import annotations

import csv
import difflib
import io
import math
import re
from dataclasses import dataclass
from fractions import Fraction
from itertools import repeat
from typing import Literal

import numpy as np

from rigdesign.brief.messages import PLAN_RIG
from rigdesign.brief.model import Floats
from rigdesign.errors import InputError, TableError
from rigdesign.units import NUMBER, column_fraction, scaled, split_heading

Repeats = Literal["jump", "none"]
_PLAIN = re.compile(rf"\s*{NUMBER}\s*")
_PLAN_COLUMNS = {"y": "length", "pressure": "pressure", "torque": "moment"}
NOTE = "note"


@dataclass(frozen=True)
class Column:
    """One column as read: values in SI (n,), the cells as printed, and what one in the heading's unit is in SI."""

    values: Floats
    cells: tuple[str, ...]
    factor: float
    unit: str

    @property
    def digit(self) -> float:
        """The smallest decimal place that any cell of the column shows, in SI: the rounding unit of the column."""
        return min(map(_place, self.cells)) * self.factor


@dataclass(frozen=True)
class CsvTable:
    """A table as read: its file name, columns by name, and the line of each row (n,)."""

    name: str
    columns: dict[str, Column]
    lines: tuple[int, ...]

    def __getitem__(self, column: str) -> Floats:
        """The values of a column in SI, (n,)."""
        return self.columns[column].values

    def where(self, row: int) -> str:
        """The place of a row for a message."""
        return f"{self.name}, line {self.lines[row]}"

    def cell(self, column: str, row: int) -> str:
        """A cell for a message, "x = 12.5 in"."""
        return f"{column} = {self.columns[column].cells[row].strip()} {self.columns[column].unit}"


def read_table(
    text: str, name: str, kinds: dict[str, str], *, repeats: Repeats, optional: dict[str, str] | None = None
) -> CsvTable:
    """Read a table.

    Parameters
    ----------
    text, name
        The text of the file, and its name for messages.
    kinds
        The kind of quantity of each column that must be there; "x" among them, by which the rows are in order.
    repeats
        Whether two rows at one x are a jump, or an error.
    optional
        Columns that may be there, with their kinds.

    Raises
    ------
    TableError
        With the line, the column, the value and what to do.
    """
    rows, lines = _rows(text, name)
    names, factors, units = _heading(rows[0], f"{name}, line {lines[0]}", kinds, optional or {})
    body, lines = rows[1:], lines[1:]
    if not body:
        raise TableError("the table has a heading and no rows", where=name, remedy="add at least one row")
    if set(map(len, body)) != {len(names)}:
        row = next(row for row, cells in enumerate(body) if len(cells) != len(names))
        raise TableError(f"the row has {_cells(len(body[row]))} and the heading {len(names)}",
                         where=f"{name}, line {lines[row]}", value=_short(",".join(body[row])))  # fmt: skip
    columns = {}
    for column, cells in zip(names, zip(*body, strict=True), strict=True):
        if column != NOTE:
            values = scaled(_numbers(column, cells, name, lines), factors[column])
            values.setflags(write=False)
            columns[column] = Column(values, cells, float(factors[column]), units[column])
    table = CsvTable(name, columns, tuple(lines))
    _check_order(table, repeats)
    return table


def _rows(text: str, name: str) -> tuple[list[list[str]], list[int]]:
    """Return the rows that are not blank, and the line on which each ends."""
    reader = csv.reader(io.StringIO(text, newline=""), strict=True)
    rows, lines = [], []
    try:
        for row in reader:
            if row and (len(row) > 1 or row[0].strip()):
                rows.append(row)
                lines.append(reader.line_num)
    except csv.Error as problem:
        raise TableError(
            f"the line cannot be read as CSV ({problem})", where=f"{name}, line {reader.line_num}"
        ) from None
    if not rows:
        raise TableError("the table is empty", where=name, remedy="add a heading and rows")
    return rows, lines


def _heading(
    heading: list[str], where: str, kinds: dict[str, str], optional: dict[str, str]
) -> tuple[list[str], dict[str, Fraction], dict[str, str]]:
    """Return the names of the columns in the file's order, and the exact factor and unit of each that is read."""
    known = {**kinds, **optional}
    wanted = ", ".join(f"{column} [unit of {kind}]" for column, kind in kinds.items())
    if len(heading) == 1 and re.search(r"[;\t]", heading[0]):
        raise TableError("columns are separated by commas", where=where, value=_short(heading[0]), limit=wanted)
    names: list[str] = []
    factors: dict[str, Fraction] = {}
    units: dict[str, str] = {}
    for text in heading:
        name, unit = split_heading(text)
        units[name] = unit or ""
        if name != NOTE and name not in known:
            raise _unknown_column(name, text, where, wanted, known)
        if name in names:
            raise TableError("two columns have one name", where=where, value=f'"{name}"')
        names.append(name)
        if name != NOTE:
            try:
                factors[name] = column_fraction(text, known[name])
            except InputError as error:
                raise TableError(error.what, where=f"{where}, column {name}", value=error.value, limit=error.limit,
                                 remedy=error.remedy) from None  # fmt: skip
    missing = [column for column in kinds if column not in names]
    if missing:
        raise TableError(f'the column "{missing[0]}" is missing', where=where, limit=wanted)
    return names, factors, units


def _unknown_column(name: str, text: str, where: str, wanted: str, known: dict[str, str]) -> TableError:
    """Return the error for a column that this table does not have."""
    if _PLAIN.fullmatch(text):
        what = "the first line is a heading with units, and this is a number"
        return TableError(what, where=where, value=text.strip(), limit=wanted)
    if name in _PLAN_COLUMNS:
        return TableError(f'the column "{name}" {PLAN_RIG}', where=where, remedy="delete the column")
    near = difflib.get_close_matches(name.lower(), known, n=1)
    remedy = f'did you mean "{near[0]}"? ' if near else ""
    return TableError("this table has no such column", where=where, value=f'"{text.strip()}"', limit=wanted,
                      remedy=remedy + 'a column for remarks is headed "note"')  # fmt: skip


def _numbers(column: str, cells: tuple[str, ...], name: str, lines: list[int]) -> Floats:
    """Return the cells as floats (n,); raise TableError at the first that is not a finite number."""
    try:
        values = np.fromiter(map(float, cells), dtype=float, count=len(cells))
        # float() also takes "1_000", "nan" and "infinity"
        if np.isfinite(values).all() and not any(map(str.__contains__, cells, repeat("_"))):
            return values
    except ValueError:
        pass
    for cell, line in zip(cells, lines, strict=True):
        if not _PLAIN.fullmatch(cell) or not math.isfinite(float(cell.replace("−", "-"))):
            where = f"{name}, line {line}, column {column}"
            if not cell.strip():
                raise TableError("the cell is empty", where=where, remedy="write the number, 0 if it is zero")
            raise TableError("this is not a number", where=where, value=f'"{_short(cell.strip())}"',
                             limit="a finite number with a decimal point")  # fmt: skip
    return np.fromiter((float(cell.replace("−", "-")) for cell in cells), dtype=float, count=len(cells))


def _check_order(table: CsvTable, repeats: Repeats) -> None:
    """Raise TableError unless x rises from row to row, save for two rows at one x where these are a jump."""
    step = np.diff(table["x"])
    if (falling := np.flatnonzero(step < 0)).size:
        row = int(falling[0]) + 1
        value = f"{table.cell('x', row)} after {table.cell('x', row - 1)}"
        raise TableError("the rows are not in order of x", where=table.where(row), value=value, remedy="sort the table")
    same = step == 0
    if repeats == "jump":
        thrice = np.flatnonzero(same[1:] & same[:-1])
        if thrice.size:
            row = int(thrice[0]) + 2
            raise TableError("three rows stand at one x", where=table.where(row), value=table.cell("x", row),
                             limit="two rows at one x, a jump, the inboard one first")  # fmt: skip
    elif same.any():
        row = int(np.flatnonzero(same)[0]) + 1
        raise TableError("two rows stand at one x", where=table.where(row), value=table.cell("x", row),
                         remedy="write them as one row")  # fmt: skip


def _place(cell: str) -> float:
    """Return the value of the last decimal place that a printed number shows: 0.01 for "12.50", 100 for "1.2e3"."""
    text = cell.strip()
    exponent = 0
    if "e" in text or "E" in text:
        text, _, power = text.lower().partition("e")
        exponent = int(power.replace("−", "-"))
    point = text.find(".")
    return 10.0 ** (exponent - (len(text) - point - 1 if point >= 0 else 0))


def _cells(count: int) -> str:
    return "1 cell" if count == 1 else f"{count} cells"


def _short(text: str) -> str:
    return text if len(text) <= 60 else text[:57] + "..."
