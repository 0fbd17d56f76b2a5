"""From the file's [pads] to where pads may sit on a surface: candidates, rows and keep-out areas."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.brief.context import Context, frozen, table_stations
from rigdesign.brief.headings import NAME
from rigdesign.brief.layout import PadsTable
from rigdesign.brief.model import Floats, Line, Outline, Specimen
from rigdesign.brief.surface.crossings import crossings
from rigdesign.brief.surface.rings import ring
from rigdesign.brief.surface.within import (
    LINE_TOLERANCE,
    check_line,
    check_place,
    distances_off,
    outline_of,
    rows_on_outline,
    span,
)
from rigdesign.brief.tables import CsvTable, check_order
from rigdesign.errors import InputError, TableError
from rigdesign.words import MOST_PADS

SAME_PLACE = 1e-9
"""Of the span: candidates nearer to each other are one."""

MOST_AREAS = 1000
"""No brief has more keep-out areas than this."""

_NOTHING = frozen(np.empty(0))


@dataclass(frozen=True)
class Candidates:
    """Places of fixed pads or hard points by x, then y: x, y [m] (n,); turns [rad] (n,), or (0,) where not given."""

    x: Floats
    y: Floats
    turns: Floats


NO_CANDIDATES = Candidates(_NOTHING, _NOTHING, _NOTHING)
"""Those of free places."""


def candidates(table: PadsTable, piece: Specimen, context: Context) -> Candidates:
    """Return the places of fixed pads or hard points on a surface, none where places are free.

    Raises InputError where they are given twice or not at all, or one lies off the outline.
    """
    if _asked(table, context) == "spars":
        return _from_crossings(table, piece, context)
    if table.table is not None:
        return _from_table(table, piece, context)
    if table.stations is None:
        return NO_CANDIDATES
    x = frozen(np.array([context.station(float(x), piece, "pads", "stations") for x in table.stations]))
    if np.any(np.diff(x) <= 0):
        raise context.error("the stations must be in order of x, each once", "pads", "stations")
    y = frozen(piece.reference_axis.at(x))
    for place_x, place_y in zip(x, y, strict=True):
        what = f"the place on the reference axis at {place_x:.3f} m"
        remedy = "give the places by spars and ribs, or by a table with x and y"
        check_place(float(place_x), float(place_y), piece, context, "pads", "stations", what=what, remedy=remedy)
    return Candidates(x, y, _NOTHING)


def _asked(table: PadsTable, context: Context) -> str:
    """Return the one key by which places are given, "" for free ones; raise BriefError where that is not clear."""
    given = [key for key in ("stations", "table", "spars", "ribs") if getattr(table, key) is not None]
    if table.places == "free":
        if given:
            remedy = 'write places = "fixed" or "hard points", or delete it'
            raise context.error(f'places = "free" goes without "{given[0]}"', "pads", given[0], remedy=remedy)
        return ""
    if table.rows is not None:
        what = f'"rows" are for free places, and these are "{table.places}"'
        raise context.error(what, "pads", "rows", value="", remedy='delete "rows", or write places = "free"')
    if given == ["spars", "ribs"]:
        return "spars"
    if given in (["spars"], ["ribs"]):
        other = "ribs" if given == ["spars"] else "spars"
        raise context.error(f'"{given[0]}" goes with "{other}"', "pads", given[0], value="", remedy=f'give "{other}"')
    if len(given) != 1:
        what = f'places = "{table.places}" needs the places once'
        limit = '"spars" with "ribs", "table", or "stations"'
        raise context.error(what, "pads", "places", limit=limit, value=", ".join(given))
    return given[0]


def _from_crossings(table: PadsTable, piece: Specimen, context: Context) -> Candidates:
    """Return the crossings of spars and ribs."""
    assert table.spars is not None
    assert table.ribs is not None

    def error(found: InputError, key: str) -> InputError:
        return context.error(found.what, "pads", key, value=found.value, limit=found.limit, remedy=found.remedy)

    if isinstance(table.ribs, np.ndarray):
        for x in table.ribs:
            context.station(float(x), piece, "pads", "ribs", what=f"the rib at {x:.3f} m")
    found = crossings(table.spars, table.ribs, span(piece), error)
    for row, (x, y) in enumerate(zip(found.x, found.y, strict=True)):
        remedy = "shorten the spar or the rib, or correct the outline"
        check_place(float(x), float(y), piece, context, "pads", "spars", what=found.called(row), remedy=remedy)
    return Candidates(frozen(np.clip(found.x, piece.left, piece.right)), found.y, _NOTHING)


def _from_table(table: PadsTable, piece: Specimen, context: Context) -> Candidates:
    """Return the places of a table x, y, with their turns; without y they stand on the reference axis."""
    assert table.table is not None
    optional = {"y": "length", "turn": "angle"}
    rows = context.table(table.table, ("pads", "table"), {"x": "length"}, repeats="any", optional=optional)
    if rows["x"].size > MOST_PADS:
        what, limit = f"{rows['x'].size} places are more than can be designed for", f"up to {MOST_PADS}"
        raise context.error(what, "pads", "table", limit=limit, remedy="name fewer")
    if "turn" in rows.columns and table.turn is not None:
        what = f'the directions are given twice, by "turn" and by a column of {rows.name}'
        raise context.error(what, "pads", "turn", remedy='delete "turn" or the column')
    x, y = row_places(rows, piece)
    _check_distinct(rows, x, y, piece)
    order = np.lexsort((y, x))
    turns = rows["turn"][order] if "turn" in rows.columns else _NOTHING
    return Candidates(frozen(x[order]), frozen(y[order]), frozen(turns))


def row_places(rows: CsvTable, piece: Specimen) -> tuple[Floats, Floats]:
    """Return the places x, y (n,) [m] of a table's rows, in any order; without y in order of x on the reference axis.

    Raises TableError naming the first row that lies off the outline.
    """
    if "y" in rows.columns:
        return rows_on_outline(rows, piece)
    check_order(rows, "none")
    x = table_stations(rows, piece)
    y = frozen(piece.reference_axis.at(x))
    off = np.flatnonzero(distances_off(outline_of(piece), x, y) > LINE_TOLERANCE * span(piece))
    if off.size:
        row = int(off[0])
        what = "the row stands on the reference axis, which lies off the outline there"
        raise TableError(what, where=rows.where(row), value=rows.cell("x", row), remedy="add a column y")
    return x, y


def _check_distinct(rows: CsvTable, x: Floats, y: Floats, piece: Specimen) -> None:
    """Raise TableError where two rows are one place."""
    near = np.hypot(x[:, None] - x, y[:, None] - y) <= SAME_PLACE * span(piece)
    pairs = np.argwhere(np.triu(near, 1))
    if pairs.size:
        one, other = (int(row) for row in pairs[0])
        raise two_at_one_place(rows, one, other)


def two_at_one_place(rows: CsvTable, one: int, other: int) -> TableError:
    """Return the error for two rows at one place."""
    earlier = rows.where(one).removeprefix(f"{rows.name}, ")
    value = f"{rows.cell('x', other)}, {rows.cell('y', other)}, as on {earlier}"
    what = "two rows stand at one place"
    return TableError(what, where=rows.where(other), value=value, remedy="write them as one row")


def pad_rows(table: PadsTable, piece: Specimen, context: Context) -> tuple[Line, ...]:
    """Return the lines on which free pads may sit; raise BriefError where one leaves the outline."""
    for number, line in enumerate(table.rows or (), start=1):
        what = f"row {number}"
        ends = float(line.x[0]), float(line.x[-1])
        remedy = "shorten it, or correct the outline"
        check_line(line, *ends, piece, context, "pads", "rows", what=what, along="on the outline", remedy=remedy)
    return table.rows or ()


def keep_out_areas(table: PadsTable, context: Context) -> tuple[Outline, ...]:
    """Return the areas where no pad may sit; they may overlap each other and the outline's edge.

    Raises TableError where an area is no ring, or its rows do not stand together.
    """
    if table.keep_out_areas is None:
        return ()
    kinds = {"area": NAME, "x": "length", "y": "length"}
    rows = context.table(table.keep_out_areas, ("pads", "keep_out_areas"), kinds, repeats="any")
    names = rows.names("area")
    starts = [row for row in range(len(names)) if row == 0 or names[row] != names[row - 1]]
    _check_names(rows, names, starts)
    ends = [*starts[1:], len(names)]
    return tuple(
        ring(rows, start, end, f'the keep-out area "{names[start]}"') for start, end in zip(starts, ends, strict=True)
    )


def _check_names(rows: CsvTable, names: list[str], starts: list[int]) -> None:
    """Raise TableError where an area has no name, is taken up again after another, or there are too many."""
    seen: set[str] = set()
    for row in starts:
        where = f"{rows.where(row)}, column area"
        if not names[row]:
            raise TableError("the cell is empty", where=where, remedy="write the number or name of the area")
        if names[row] in seen:
            what = "the rows of an area do not stand together"
            raise TableError(what, where=where, value=f'"{names[row]}" again', remedy="sort the rows by area")
        seen.add(names[row])
    if len(starts) > MOST_AREAS:
        raise TableError(f"there are {len(starts)} keep-out areas", where=rows.name, limit=f"up to {MOST_AREAS}")
