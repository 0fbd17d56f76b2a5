"""A table of holes as built, in the layout of holes.csv, and the rig with them.

Only u_m and v_m enter the statics.  x_m and y_m are taken into the rig and compared; a rig whose table leaves holes
out keeps them as they were.
"""

from __future__ import annotations

import csv
import io
import math
from dataclasses import dataclass, replace
from pathlib import Path

from rigdesign.errors import TableError
from rigdesign.levers.model import Hole, Piece, Rig
from rigdesign.words import LARGEST_NUMBER

NEEDED = ("lever", "hole", "u_m", "v_m")
OPTIONAL = ("joins", "x_m", "y_m")
SAME = 1e-9  # m: differences that come from writing a number into a table


@dataclass(frozen=True)
class HoleRow:
    """One row: the lever's number, the hole's name, u, v [m], and where given x, y [m] and what it joins."""

    lever: int
    hole: str
    u: float
    v: float
    x: float | None
    y: float | None
    joins: str | None
    where: str


@dataclass(frozen=True)
class HolesTable:
    """The rows of a table of holes, and the file's name for messages."""

    name: str
    rows: tuple[HoleRow, ...]


def read_holes(path: Path) -> HolesTable:
    """Read a table of holes.

    Raises
    ------
    TableError
        Where the file cannot be read, is not a table of holes, or a row of it cannot be used.
    """
    try:
        text = path.read_bytes().decode("utf-8-sig")
    except FileNotFoundError as error:
        raise TableError("the table of holes is not there", where=str(path)) from error
    except UnicodeDecodeError as error:
        raise TableError(
            "the table of holes is not text in UTF-8", where=str(path), remedy="save as CSV UTF-8"
        ) from error
    except OSError as error:
        raise TableError(f"the table of holes cannot be read: {error.strerror}", where=str(path)) from error
    return holes_from_text(text, str(path))


def holes_from_text(text: str, name: str) -> HolesTable:
    """Return the table of holes in a text with commas between its columns; `name` is the file's, for messages.

    Examples
    --------
    >>> holes_from_text("lever,hole,u_m,v_m\\n2,A,-0.301,0\\n", "built.csv").rows[0].u
    -0.301
    """
    reader = csv.reader(io.StringIO(text, newline=""))
    try:
        lines = [
            (reader.line_num, [cell.strip() for cell in row]) for row in reader if any(cell.strip() for cell in row)
        ]
    except csv.Error as error:
        raise TableError(f"the table of holes cannot be read: {error}", where=name) from error
    if not lines:
        raise TableError("the table of holes is empty", where=name)
    head = lines[0][1]
    _require_heads(head, name)
    if len(lines) == 1:
        raise TableError("the table of holes has no rows", where=name)
    rows: list[HoleRow] = []
    seen: dict[tuple[int, str], str] = {}
    for number, cells in lines[1:]:
        where = f"{name}, line {number}"
        if len(cells) != len(head):
            limit = f"{len(head)}, as in the heading"
            raise TableError("a row has the wrong number of cells", where=where, value=str(len(cells)), limit=limit)
        row = _row(dict(zip(head, cells, strict=True)), where)
        first = seen.setdefault((row.lever, row.hole), where)
        if first != where:
            raise TableError("a hole is given twice", where=where, value=f"lever {row.lever} hole {row.hole}")
        rows.append(row)
    return HolesTable(name, tuple(rows))


def _require_heads(head: list[str], name: str) -> None:
    missing = [column for column in NEEDED if column not in head]
    unknown = [column for column in head if column not in NEEDED + OPTIONAL]
    limit = ", ".join((*NEEDED, *OPTIONAL))
    remedy = "start from the rig's own holes.csv"
    if len(head) == 1 and ";" in head[0]:
        remedy = "save the table with commas between the columns and a full stop as decimal sign"
    if missing:
        value = ", ".join(missing)
        raise TableError("the table of holes lacks a column", where=f"{name}, line 1", value=value, remedy=remedy)
    if unknown:
        raise TableError(
            "the table of holes has a column that is not known",
            where=f"{name}, line 1",
            value=unknown[0] or "an empty heading",
            limit=limit,
            remedy=remedy,
        )
    if len(set(head)) != len(head):
        raise TableError("the table of holes has a column twice", where=f"{name}, line 1")


def _row(cells: dict[str, str], where: str) -> HoleRow:
    if not cells["lever"].isdecimal():
        raise TableError("a lever is named by its number", where=where, value=cells["lever"] or "an empty cell")
    return HoleRow(
        lever=int(cells["lever"]),
        hole=cells["hole"],
        u=_number(cells["u_m"], f"{where}, u_m"),
        v=_number(cells["v_m"], f"{where}, v_m"),
        x=_number(cells["x_m"], f"{where}, x_m") if cells.get("x_m") else None,
        y=_number(cells["y_m"], f"{where}, y_m") if cells.get("y_m") else None,
        joins=cells.get("joins") or None,
        where=where,
    )


def _number(text: str, where: str) -> float:
    try:
        value = float(text)
    except ValueError:
        value = math.nan
    if not math.isfinite(value):
        limit = "a number in m, with a full stop as decimal sign"
        raise TableError("a cell is not a number", where=where, value=text or "an empty cell", limit=limit)
    if abs(value) > LARGEST_NUMBER:
        limit = f"up to {LARGEST_NUMBER:g} m"
        raise TableError("the number is too large", where=where, value=text, limit=limit)
    return value


def with_holes(rig: Rig, table: HolesTable) -> Rig:
    """Return the rig with the table's holes in place of its own; pads, jack and target stay.

    Raises
    ------
    TableError
        Where the table names a lever or hole that the rig does not have, or another joint than the rig's.
    """
    by_hole = {(row.lever, row.hole): row for row in table.rows}
    known = {(piece.number, hole.name) for tree in rig.trees for piece in tree.pieces for hole in piece.holes}
    numbers = sorted({number for number, _ in known})
    for row in table.rows:
        if row.lever not in numbers:
            limit = f"1 to {numbers[-1]}" if numbers else "none, the rig has no levers"
            raise TableError("the rig has no such lever", where=row.where, value=f"lever {row.lever}", limit=limit)
        if (row.lever, row.hole) not in known:
            limit = ", ".join(name for number, name in sorted(known) if number == row.lever)
            raise TableError(
                "the lever has no such hole", where=row.where, value=row.hole or "an empty cell", limit=limit
            )
    trees = []
    for tree in rig.trees:
        pieces = [
            replace(piece, holes=tuple(_changed(piece, hole, by_hole) for hole in piece.holes)) for piece in tree.pieces
        ]
        trees.append(replace(tree, pieces=tuple(pieces)))
    return replace(rig, trees=tuple(trees))


def _changed(piece: Piece, hole: Hole, by_hole: dict[tuple[int, str], HoleRow]) -> Hole:
    row = by_hole.get((piece.number, hole.name))
    if row is None:
        return hole
    if row.joins is not None and row.joins != hole.joins:
        raise TableError(
            "the hole joins something else in the rig",
            where=row.where,
            value=row.joins,
            limit=hole.joins,
            remedy="another tree is another rig: design it from a brief with a grouping",
        )
    return replace(
        hole,
        u=_unless_same(row.u, hole.u),
        v=_unless_same(row.v, hole.v),
        x=hole.x if row.x is None else _unless_same(row.x, hole.x),
        y=hole.y if row.y is None else _unless_same(row.y, hole.y),
    )


def _unless_same(new: float, old: float) -> float:
    return old if abs(new - old) <= SAME else new
