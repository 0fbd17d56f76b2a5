"""A table of corners becomes an outline: one ring without holes that does not cross itself."""

from __future__ import annotations

import re

import numpy as np

from rigdesign.brief.context import frozen
from rigdesign.brief.model import Floats, Outline
from rigdesign.brief.surface.within import place
from rigdesign.brief.tables import CsvTable
from rigdesign.display import show
from rigdesign.errors import TableError

MOST_CORNERS = 1000
"""No outline has more corners than this."""

CLOSE = 1e-9
"""Of the size of a ring: corners nearer to each other are one, and a ring narrower than this has no area."""

FARTHEST = 1e6
"""Of the size of a ring: farther from x = 0, y = 0 the digits of numbers no longer tell forces and moments apart."""

_AT = re.compile(r"\[(\S+) (\S+)\]")


def ring(table: CsvTable, first: int, last: int, name: str) -> Outline:
    """Return the ring of the rows from `first` up to `last` of a table, counter-clockwise.

    Parameters
    ----------
    table
        A table with the columns x and y [m].
    first, last
        The ring's first row, and the one behind its last; the last may repeat the first.
    name
        How messages call it: "the outline".

    Raises
    ------
    TableError
        If there are too few or too many corners, one is there twice, or the ring has no area, crosses itself or stands
        too far from the origin.
    """
    x, y = table["x"][first:last], table["y"][first:last]
    if x.size > 1 and x[0] == x[-1] and y[0] == y[-1]:
        x, y = x[:-1], y[:-1]
    _check_count(table, first, x.size, name)
    size = float(np.hypot(np.ptp(x), np.ptp(y)))
    _check_distance(table, first, x, y, size, name)
    _check_repeats(table, first, x, y, size, name)
    if _width(x, y) <= CLOSE * size:
        what = f"{name} has no area: all its corners lie on one line"
        raise TableError(what, where=_from(table, first, last), remedy="check the columns x and y")
    _check_crossing(table, first, x, y, size, name)
    turned = np.sum(x * np.roll(y, -1) - np.roll(x, -1) * y) < 0
    x, y = (values[::-1] if turned else values for values in (x, y))
    return Outline(frozen(x.copy()), frozen(y.copy()), name)


def _from(table: CsvTable, first: int, last: int) -> str:
    """Return the place of a ring: its table, or its first line where the table holds several."""
    return table.name if (first, last) == (0, table["x"].size) else table.where(first)


def _check_count(table: CsvTable, first: int, count: int, name: str) -> None:
    if count < 3:
        corners = "1 corner" if count == 1 else f"{count} corners"
        raise TableError(f"{name} has {corners}", where=table.where(first), limit="3 or more")
    if count > MOST_CORNERS:
        remedy = "leave out corners that hardly turn"
        raise TableError(
            f"{name} has {count} corners", where=table.where(first), limit=f"up to {MOST_CORNERS}", remedy=remedy
        )


def _check_distance(table: CsvTable, first: int, x: Floats, y: Floats, size: float, name: str) -> None:
    """Raise TableError where the ring stands so far from the origin that moments about it would lose their digits."""
    away = np.hypot(x, y)
    row = int(np.argmax(away))
    if size == 0.0 or away[row] <= FARTHEST * size:
        return
    raise TableError(
        f"{name} stands too far from x = 0, y = 0 for its size",
        where=table.where(first + row),
        value=f"{table.cell('x', first + row)}, {table.cell('y', first + row)}",
        limit=f"up to {show(FARTHEST * size, 'length', unit='m')}, a million times its size",
        remedy="count x and y from a place near the specimen",
    )


def _check_repeats(table: CsvTable, first: int, x: Floats, y: Floats, size: float, name: str) -> None:
    """Raise TableError where two corners are one: several rings, or a hole, written into one table."""
    near = np.hypot(x[:, None] - x, y[:, None] - y) <= CLOSE * size
    pairs = np.argwhere(np.triu(near, 1))
    if not pairs.size:
        return
    one, other = (int(row) for row in pairs[0])
    where = table.where(first + other)
    value = f"{table.cell('x', first + other)}, {table.cell('y', first + other)}"
    earlier = table.where(first + one).removeprefix(f"{table.name}, ")
    if other == one + 1:
        what = f"two corners of {name} in a row are one"
        raise TableError(what, where=where, value=value, remedy="delete one of the two rows")
    raise TableError(
        f"a corner of {name} is there twice, first on {earlier}",
        where=where,
        value=value,
        limit="one ring without holes, each corner once",
        remedy="keep pads off a hole by keep_out_areas",
    )


def _width(x: Floats, y: Floats) -> float:
    """Return the least spread of corners (n,) across any line [m], but for a factor of the order of 1."""
    centred = np.column_stack([x - x.mean(), y - y.mean()])
    return float(np.linalg.svd(centred, compute_uv=False)[-1])


def _check_crossing(table: CsvTable, first: int, x: Floats, y: Floats, size: float, name: str) -> None:
    """Raise TableError where the ring crosses or touches itself, with the place and the lines of the two sides."""
    import shapely

    polygon = shapely.Polygon(np.column_stack([x, y]))
    if polygon.is_valid:
        return
    found = _AT.search(shapely.is_valid_reason(polygon))
    assert found is not None, "shapely names the place of whatever makes a ring invalid"
    at_x, at_y = (float(number) for number in found.groups())
    sides = np.flatnonzero(_from_sides(x, y, at_x, at_y) <= 1e-6 * size).tolist()
    ends = [f"lines {_line(table, first + k)} and {_line(table, first + (k + 1) % x.size)}" for k in sides]
    meeting = f" (the sides between {ends[0]} and between {ends[-1]})" if len(ends) > 1 else ""
    raise TableError(
        f"{name} crosses or touches itself",
        where=_from(table, first, first + x.size),
        value=f"at {place(at_x, at_y)}{meeting}",
        remedy="write its corners in order, all the way round",
    )


def _line(table: CsvTable, row: int) -> str:
    return table.where(row).rsplit(" ", 1)[-1]


def _from_sides(x: Floats, y: Floats, at_x: float, at_y: float) -> Floats:
    """Return the distance of a place from each side of a ring (n,) [m]."""
    d_x, d_y = np.roll(x, -1) - x, np.roll(y, -1) - y
    along = np.clip(((at_x - x) * d_x + (at_y - y) * d_y) / (d_x**2 + d_y**2), 0.0, 1.0)
    return np.asarray(np.hypot(x + along * d_x - at_x, y + along * d_y - at_y))
