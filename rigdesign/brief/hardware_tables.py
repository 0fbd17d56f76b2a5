"""The tables that [hardware] names: profiles, jacks and load cells to choose from, and the loaded surface.

What is decided here, where a row could be read in two ways:

- A flat stands upright: its depth is the longer side, its width the thickness.  A hollow section has one thickness,
  its web; a channel has two.  A plate's depth is its thickness.  Cells that a kind does not need stay empty, or say
  the same once more.
- A kind that the stock does not hold comes from the catalogue that ships, but never that of a build asked for.
"""

from __future__ import annotations

import difflib
import math
from typing import Literal, get_args

from rigdesign.brief.context import Context
from rigdesign.brief.messages import is_plan
from rigdesign.brief.model_hardware import Build, MachineRow, StockRow, Surface
from rigdesign.brief.surface.loads import check_once, check_spread
from rigdesign.brief.tables import CsvTable, check_order
from rigdesign.display import show
from rigdesign.errors import TableError

Kind = Literal["flat", "channel", "hollow", "plate"]
KINDS: tuple[Kind, ...] = get_args(Kind)

CALLED: dict[Kind, str] = {"flat": "flat", "channel": "channel", "hollow": "hollow section", "plate": "plate"}
"""What messages call each kind."""

KIND_OF: dict[Build, Kind] = {"twin flats": "flat", "twin channels": "channel", "hollow section": "hollow"}
"""The kind of profile that each build needs."""

MOST_ROWS = 1000
"""No stock, and no list of jacks or load cells, is longer than this; every row is tried for every member."""

LONGEST_NAME = 40

LONGEST_BAR = 100.0
"""No bar is longer [m]: longer ones are a slip of unit, and none can be carried."""

_FORMULA_SIGNS = ("=", "+", "-", "−", "@")
_STOCK = {"section": "name", "kind": "name", "depth": "length", "width": "length"}
_MACHINE = {"force": "force", "length": "length", "mass": "mass", "pin": "length"}


def stock(name: str, builds: tuple[Build, ...], kerf: float, context: Context) -> tuple[StockRow, ...]:
    """Return the profiles of a stock table; raise TableError at the first row that cannot be used.

    BriefError where it holds no profile of a kind that the builds need.
    """
    path = ("hardware", "stock")
    optional = {"web": "length", "flange": "length", "bar": "length"}
    blank = frozenset({"depth", "width", *optional})
    rows = context.table(name, path, _STOCK, repeats="any", optional=optional, blank=blank)
    names, kinds = _names(rows, "section"), rows.names("kind")
    profiles = tuple(_profile(rows, row, names[row], _kind(rows, row, kinds[row])) for row in range(len(names)))
    for row, profile in enumerate(profiles):
        if profile.bar is not None and not kerf < profile.bar:
            limit = f"more than the kerf, {show(kerf, 'length')}"
            raise _row_error(rows, row, "bar", "the bar is too short", limit=limit)
        if profile.bar is not None and profile.bar > LONGEST_BAR:
            limit = f"up to {show(LONGEST_BAR, 'length')}"
            raise _row_error(rows, row, "bar", "the bar is too long", limit=limit)
    held = {profile.kind for profile in profiles}
    for build in builds:
        if KIND_OF[build] not in held:
            what = f'the stock holds no {CALLED[KIND_OF[build]]}, and the build is "{build}"'
            other = [each for each in KIND_OF if KIND_OF[each] in held]
            remedy = "add one" + (f', or write build = "{other[0]}"' if other else "")
            raise context.error(what, *path, remedy=remedy)
    return profiles


def _kind(rows: CsvTable, row: int, written: str) -> Kind:
    """Return the kind of profile of a row."""
    if written in KINDS:
        return written
    near = difflib.get_close_matches(written.lower(), KINDS, n=1)
    remedy = f'did you mean "{near[0]}"?' if near else ""
    what = "this is no kind of profile" if written else "the cell is empty"
    raise TableError(
        what,
        where=f"{rows.where(row)}, column kind",
        value=f'"{written}"' if written else "",
        limit=", ".join(KINDS),
        remedy=remedy,
    )


def _profile(rows: CsvTable, row: int, name: str, kind: Kind) -> StockRow:
    """Return one row of the stock with every size filled in."""
    depth, bar = _positive(rows, row, "depth"), _size(rows, row, "bar")
    width, web, flange = (_size(rows, row, column) for column in ("width", "web", "flange"))
    if kind == "plate":
        _agree(rows, row, depth, "a plate has one thickness, its depth", width=width, web=web, flange=flange)
        return StockRow(name, kind, depth, depth, depth, depth, bar, rows.where(row))
    if width is None:
        raise _empty(rows, row, "width", f"write the width of the {CALLED[kind]}")
    if kind == "flat":
        if width > depth:
            what, limit = "a flat stands upright, and its width is its thickness", f"up to its depth, {_mm(depth)}"
            raise _row_error(rows, row, "width", what, limit=limit, remedy="write the longer side as depth")
        _agree(rows, row, width, "a flat has one thickness, its width", web=web, flange=flange)
        return StockRow(name, kind, depth, width, width, width, bar, rows.where(row))
    if web is None:
        raise _empty(rows, row, "web", f"write the thickness of the {CALLED[kind]}'s web")
    if kind == "hollow":
        _agree(rows, row, web, "a hollow section has one thickness, its web", flange=flange)
        flange = web
    if flange is None:
        raise _empty(rows, row, "flange", "write the thickness of its flanges")
    _check_walls(rows, row, kind, depth, width, web, flange)
    return StockRow(name, kind, depth, width, web, flange, bar, rows.where(row))


def _check_walls(rows: CsvTable, row: int, kind: Kind, depth: float, width: float, web: float, flange: float) -> None:
    """Raise TableError where the walls of a channel or hollow section leave nothing between them."""
    if not web < width / 2:
        limit = f"less than half its width, {_mm(width / 2)}"
        remedy = "check the columns and the unit in the heading"
        raise _row_error(rows, row, "web", f"the web is too thick for the {CALLED[kind]}", limit=limit, remedy=remedy)
    if not flange < depth / 2:
        limit = f"less than half its depth, {_mm(depth / 2)}"
        column = "flange" if kind == "channel" else "web"
        remedy = "check the columns and the unit in the heading"
        what = f"the {column} is too thick for the {CALLED[kind]}"
        raise _row_error(rows, row, column, what, limit=limit, remedy=remedy)


def _agree(rows: CsvTable, row: int, thickness: float, what: str, **sizes: float | None) -> None:
    """Raise TableError where a size that only repeats the thickness differs from it."""
    for column, size in sizes.items():
        if size is not None and not math.isclose(size, thickness, rel_tol=1e-9):
            raise _row_error(rows, row, column, what, limit=_mm(thickness), remedy=f"leave {column} empty")


def _size(rows: CsvTable, row: int, column: str) -> float | None:
    """Return a size above zero [m], None where the table does not give it."""
    if column not in rows.columns or math.isnan(rows[column][row]):
        return None
    return _positive(rows, row, column)


def _positive(rows: CsvTable, row: int, column: str) -> float:
    """Return a size above zero."""
    value = float(rows[column][row])
    if math.isnan(value):
        raise _empty(rows, row, column, "write it in the unit of the heading")
    if not value > 0:
        raise _row_error(
            rows, row, column, f"the {column} is {'negative' if value < 0 else 'zero'}", limit="more than 0"
        )
    return value


def jacks(name: str, context: Context) -> tuple[MachineRow, ...]:
    """Return the jacks of a table; raise TableError at the first row that cannot be used."""
    return _machines(name, "jack", {**_MACHINE, "stroke": "length"}, context)


def cells(name: str, context: Context) -> tuple[MachineRow, ...]:
    """Return the load cells of a table, without stroke; raise TableError at the first row that cannot be used."""
    return _machines(name, "cell", _MACHINE, context)


def _machines(name: str, column: str, kinds: dict[str, str], context: Context) -> tuple[MachineRow, ...]:
    """Return the rows of a table of jacks or load cells, whose names stand in `column`."""
    path = ("hardware", f"{column}s")
    rows = context.table(name, path, {column: "name", **kinds}, repeats="any", blank=frozenset(kinds))
    names = _names(rows, column)
    machines = []
    for row, each in enumerate(names):
        size = {key: _positive(rows, row, key) for key in kinds}
        machines.append(
            MachineRow(each, size["force"], size["length"], size.get("stroke", 0.0), size["mass"], size["pin"])
        )
    return tuple(machines)


def loaded_surface(name: str, context: Context) -> Surface:
    """Return the heights of the loaded surface; raise TableError where the table cannot be used.

    Without y its rows are in order of x; with y they are points in any order, three or more and not on one line.
    """
    kinds = {"x": "length", "z": "length"}
    optional = {"y": "length"} if is_plan(context.raw) else None
    rows = context.table(name, ("hardware", "surface"), kinds, repeats="any", optional=optional)
    if "y" not in rows.columns:
        check_order(rows, "none")
        return Surface(rows["x"], rows["z"])
    check_once(rows, rows["x"], rows["y"])
    remedy = "add points beside it, or leave out y where z only varies along x"
    check_spread(rows, "the surface", remedy)
    return Surface(rows["x"], rows["z"], rows["y"])


def _names(rows: CsvTable, column: str) -> list[str]:
    """Return the names in a column; raise TableError where one is empty, twice there, or could act as a formula."""
    names = rows.names(column)
    if len(names) > MOST_ROWS:
        raise TableError(f"the table has {len(names)} rows", where=rows.name, limit=f"up to {MOST_ROWS}")
    seen: dict[str, int] = {}
    for row, name in enumerate(names):
        what, limit, remedy = _fault_of_name(name)
        if not what and name in seen:
            what, remedy = (
                f"two rows have one name, here and on line {rows.line(seen[name])}",
                "give each row its own name",
            )
        if what:
            where = f"{rows.where(row)}, column {column}"
            raise TableError(what, where=where, value=f'"{name}"' if name else "", limit=limit, remedy=remedy)
        seen[name] = row
    return names


def _fault_of_name(name: str) -> tuple[str, str, str]:
    """Return what is wrong with a name by itself, the limit and what to do; empty texts for a good one."""
    if not name:
        return "the cell is empty", "", "write a name"
    if name.startswith(_FORMULA_SIGNS):
        signs = " ".join(_FORMULA_SIGNS)
        return f"a name begins with none of {signs}, which start a formula in a spreadsheet", "", "begin with a letter"
    if not name.isprintable() or len(name) > LONGEST_NAME:
        is_long = name.isprintable()
        what = "the name is too long" if is_long else "a name is one line of plain text"
        return what, f"up to {LONGEST_NAME} characters, without line ends", ""
    return "", "", ""


def _row_error(rows: CsvTable, row: int, column: str, what: str, *, limit: str = "", remedy: str = "") -> TableError:
    """Return a TableError at one cell, with what is printed there."""
    where, value = f"{rows.where(row)}, column {column}", rows.cell(column, row)
    return TableError(what, where=where, value=value, limit=limit, remedy=remedy)


def _empty(rows: CsvTable, row: int, column: str, remedy: str) -> TableError:
    """Return the TableError for a cell that this row needs, and that is empty or whose column is not there."""
    if column not in rows.columns:
        return TableError(f'the column "{column}" is missing', where=rows.where(row), remedy=remedy)
    return TableError("the cell is empty", where=f"{rows.where(row)}, column {column}", remedy=remedy)


def _mm(value: float) -> str:
    return show(value, "length", unit="mm")
