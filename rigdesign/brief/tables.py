"""Tables that a brief names: CSV with a heading whose every column carries its unit, "x [in]".

Columns may stand in any order; a column "note" is for remarks and not read.  Cells are plain numbers with a decimal
point, separated by commas.  Rows are in order of x.  A table of a million rows is read by a quick path; only where
that stumbles are the rows gone through one by one, to say which of them is wrong.
"""

from __future__ import annotations

import csv
import io
import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Literal

import numpy as np

from rigdesign.brief.headings import PLAIN, Heading, Known, read_heading, shortened
from rigdesign.brief.model import Floats
from rigdesign.errors import TableError
from rigdesign.units import scaled
from rigdesign.words import LARGEST_NUMBER

Repeats = Literal["jump", "none", "any"]


@dataclass(frozen=True)
class CsvTable:
    """A table as read: its file name, text and heading, and the columns by name in SI, (n,) each.

    Columns of names are not among them; `names` reads them.
    """

    name: str
    text: str
    heading: Heading
    columns: dict[str, Floats]

    def __getitem__(self, column: str) -> Floats:
        """The values of a column in SI, (n,)."""
        return self.columns[column]

    @cached_property
    def _printed(self) -> tuple[list[list[str]], list[int]]:
        """The rows as printed and their lines; read again only where a message or a rounding needs them."""
        rows, lines = _rows(self.text, self.name)
        return rows[1:], lines[1:]

    def where(self, row: int) -> str:
        """The place of a row for a message."""
        return f"{self.name}, line {self.line(row)}"

    def line(self, row: int) -> int:
        """The line of a row."""
        return self._printed[1][row]

    def cell(self, column: str, row: int) -> str:
        """A cell for a message, "x = 12.5 in"."""
        printed = self._printed[0][row][self.heading.names.index(column)].strip()
        return f"{column} = {printed} {self.heading.units[column]}"

    def names(self, column: str) -> list[str]:
        """The cells of a column of names."""
        place = self.heading.names.index(column)
        return [row[place].strip() for row in self._printed[0]]

    def digit(self, column: str) -> float:
        """The smallest decimal place that any cell of the column shows, in SI: the rounding unit of the column."""
        place = self.heading.names.index(column)
        return min(_place(row[place]) for row in self._printed[0]) * float(self.heading.factors[column])


def read_table(
    text: str,
    name: str,
    kinds: dict[str, str],
    *,
    repeats: Repeats,
    optional: dict[str, str] | None = None,
    plan: bool = False,
    blank: frozenset[str] = frozenset(),
) -> CsvTable:
    """Read a table.

    Parameters
    ----------
    text, name
        The text of the file, and its name for messages.
    kinds
        The kind of quantity of each column that must be there; "x" among them.
    repeats
        Rows are in order of x, and two rows at one x are a jump, or an error; or rows are in any order.
    optional
        Columns that may be there, with their kinds.
    plan
        Whether the brief is one of a plan rig; otherwise columns that only these have are answered as such.
    blank
        Columns whose cells may be empty, which reads as NaN.

    Raises
    ------
    TableError
        With the line, the column, the value and what to do.
    """
    columns_known = Known(kinds, optional or {}, plan, blank)
    values, heading = _quickly(text, name, columns_known) or _row_by_row(text, name, columns_known)
    columns = {}
    for column, factor in heading.factors.items():
        columns[column] = scaled(values[heading.names.index(column)], factor)
        columns[column].setflags(write=False)
    table = CsvTable(name, text, heading, columns)
    _check_size(table)
    if repeats != "any":
        check_order(table, repeats)
    return table


def _quickly(text: str, name: str, known: Known) -> tuple[Sequence[Floats], Heading] | None:
    """Return the columns as printed, and the heading; None where the table is not a plain block of finite numbers."""
    first, _, body = text.partition("\n")
    if '"' in text or "_" in body or not first.strip() or not body.strip():
        return None
    heading = read_heading(first.strip("\r").split(","), f"{name}, line 1", known)
    try:
        values = np.loadtxt(io.StringIO(body), delimiter=",", comments=None, ndmin=2)
    except ValueError:
        return None
    if values.shape[1] != len(heading.names) or not np.isfinite(values).all():
        return None
    return list(np.ascontiguousarray(values.T)), heading


def _row_by_row(text: str, name: str, known: Known) -> tuple[Sequence[Floats], Heading]:
    """Return the columns as printed, and the heading; raise TableError naming the first row that cannot be used."""
    rows, lines = _rows(text, name)
    heading = read_heading(rows[0], f"{name}, line {lines[0]}", known)
    width, body, lines = len(heading.names), rows[1:], lines[1:]
    if not body:
        raise TableError("the table has a heading and no rows", where=name, remedy="add at least one row")
    for cells, line in zip(body, lines, strict=True):
        if len(cells) != width:
            what = f"the row has {_cells(len(cells))} and the heading {width}"
            raise TableError(what, where=f"{name}, line {line}", value=shortened(",".join(cells)))
    columns = []
    for column, printed in zip(heading.names, zip(*body, strict=True), strict=True):
        is_text = column not in heading.factors
        may_be_empty = column in known.blank
        columns.append(np.zeros(len(body)) if is_text else _numbers(column, printed, name, lines, may_be_empty))
    return columns, heading


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


def _numbers(column: str, cells: tuple[str, ...], name: str, lines: list[int], may_be_empty: bool) -> Floats:
    """Return the cells as floats (n,), NaN where empty; raise TableError at the first that is no finite number."""
    for cell, line in zip(cells, lines, strict=True):
        if may_be_empty and not cell.strip():
            continue
        if not PLAIN.fullmatch(cell) or not math.isfinite(float(cell.replace("−", "-"))):
            where = f"{name}, line {line}, column {column}"
            if not cell.strip():
                raise TableError("the cell is empty", where=where, remedy="write the number, 0 if it is zero")
            raise TableError(
                "this is not a number",
                where=where,
                value=f'"{shortened(cell.strip())}"',
                limit="a finite number with a decimal point",
            )
    return np.fromiter(
        (float(cell.strip().replace("−", "-") or "nan") for cell in cells), dtype=float, count=len(cells)
    )


def _check_size(table: CsvTable) -> None:
    """Raise TableError at the first cell that is too large to be worked with."""
    for column, values in table.columns.items():
        if (large := np.flatnonzero(np.abs(values) > LARGEST_NUMBER)).size:
            row = int(large[0])
            limit = f"up to {LARGEST_NUMBER:g} in SI units"
            raise TableError(
                "the number is too large", where=table.where(row), value=table.cell(column, row), limit=limit
            )


def check_order(table: CsvTable, repeats: Repeats) -> None:
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
            raise TableError(
                "three rows stand at one x",
                where=table.where(row),
                value=table.cell("x", row),
                limit="two rows at one x, a jump, the inboard one first",
            )
    elif same.any():
        row = int(np.flatnonzero(same)[0]) + 1
        raise TableError(
            "two rows stand at one x",
            where=table.where(row),
            value=table.cell("x", row),
            remedy="write them as one row",
        )


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
