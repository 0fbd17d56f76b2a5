"""From the file's [specimen] and [[load]] to Specimen and Load: what concerns several keys, and the tables."""

from __future__ import annotations

from dataclasses import replace
from typing import TypeVar

import numpy as np

from rigdesign.brief.context import Context, between, extent, frozen, table_stations
from rigdesign.brief.layout import (
    ForcesEntry,
    InertiaEntry,
    InternalEntry,
    LoadEntry,
    PointEntry,
    ShapeEntry,
    SpecimenTable,
    TableEntry,
)
from rigdesign.brief.messages import PLAN_RIG
from rigdesign.brief.model import (
    Floats,
    InertiaLoad,
    InternalLoad,
    Load,
    PointLoads,
    ShapeLoad,
    Specimen,
    TableLoad,
    Weight,
)
from rigdesign.brief.tables import CsvTable
from rigdesign.display import show
from rigdesign.errors import TableError

T = TypeVar("T")

_NOTHING = frozen(np.empty(0))
# keys that belong to one shape only: the shape, and whether it needs the key
_SHAPE_KEYS = {"start": "linear", "end": "linear", "greatest": "triangular", "exponent": "power", "chord": "schrenk"}


def specimen(table: SpecimenTable, context: Context) -> Specimen:
    """Return the specimen; raise InputError where its keys contradict each other."""
    if table.support == "cantilever":
        _only(table, context, needs=("root", "tip"), bars=("ends", "supports"))
        left, right = _given(table.root), _given(table.tip)
        if not left < right:
            limit = f"more than {show(left, 'length', unit='m')}, the root"
            raise context.error("the tip must lie outboard of the root", "specimen", "tip", limit=limit)
    else:
        _only(table, context, needs=("ends", "supports"), bars=("root", "tip"))
        left, right = map(float, _given(table.ends))
        if not left < right:
            raise context.error("the two ends must be in order of x", "specimen", "ends")
    bare = Specimen(table.support, left, right, (), None, 1 if table.gravity == "with" else -1)
    return replace(bare, supports=_supports(table, bare, context), weight=_weight(table, bare, context))


def _supports(table: SpecimenTable, bare: Specimen, context: Context) -> tuple[float, ...]:
    """Return the stations of two supports, in order, none for a cantilever."""
    if table.support == "cantilever":
        return ()
    path = ("specimen", "supports")
    first, second = (context.station(float(x), bare, *path, what="a support") for x in _given(table.supports))
    if not first < second:
        raise context.error("the two supports must be in order of x", *path)
    return first, second


def _given(value: T | None) -> T:
    """Return a value that `_only` found to be there."""
    assert value is not None
    return value


def _only(table: SpecimenTable, context: Context, *, needs: tuple[str, ...], bars: tuple[str, ...]) -> None:
    """Raise BriefError unless the keys that this kind of support needs, and none that it bars, are given."""
    for key in bars:
        if getattr(table, key) is not None:
            raise context.error(f'"{key}" does not go with support = "{table.support}"', "specimen", key,
                                remedy=f"give {' and '.join(needs)} instead")  # fmt: skip
    for key in needs:
        if getattr(table, key) is None:
            raise context.error(f'support = "{table.support}" needs the key "{key}"', "specimen")


def _weight(table: SpecimenTable, bare: Specimen, context: Context) -> Weight | None:
    """Return the specimen's mass along the span, None where the brief gives none."""
    if table.weight is None and table.point_masses is None:
        return None
    x, mass, point_x, point_mass = _NOTHING, _NOTHING, _NOTHING, _NOTHING
    if table.weight is not None:
        kinds = {"x": "length", "mass": "mass per length"}
        rows = context.table(table.weight, ("specimen", "weight"), kinds, repeats="jump")
        x, mass = _running(rows, "mass", bare), rows["mass"]
        _not_negative(rows, "mass")
    if table.point_masses is not None:
        kinds = {"x": "length", "mass": "mass"}
        rows = context.table(table.point_masses, ("specimen", "point_masses"), kinds)
        point_x, point_mass = table_stations(rows, bare), rows["mass"]
        _not_negative(rows, "mass")
        _not_all_zero(rows, "mass")
    return Weight(x, mass, point_x, point_mass)


def _running(rows: CsvTable, column: str, piece: Specimen) -> Floats:
    """Return the stations of a column that runs straight between its rows; raise TableError where it has no extent."""
    x = table_stations(rows, piece)
    if not x[0] < x[-1]:
        raise TableError("the table needs rows at two different x", where=rows.name)
    _not_all_zero(rows, column)
    return x


def _not_negative(rows: CsvTable, column: str) -> None:
    negative = np.flatnonzero(rows[column] < 0)
    if negative.size:
        row = int(negative[0])
        raise TableError(
            f"the {column} is negative", where=rows.where(row), value=rows.cell(column, row), limit="0 or more"
        )


def _not_all_zero(rows: CsvTable, *columns: str) -> None:
    if not any(rows[column].any() for column in columns):
        raise TableError(
            f"the {' and '.join(columns)} of every row is zero", where=rows.name, remedy="delete the table or fill it"
        )


def load(entry: LoadEntry, number: int, piece: Specimen, context: Context) -> Load:
    """Return load `number` (from 0) of the brief; raise InputError where its keys or its table cannot be used."""
    where = context.places.where("load", number)
    match entry:
        case ShapeEntry():
            return _shape(entry, number, piece, context)
        case TableEntry():
            rows = context.table(
                entry.table, ("load", number, "table"), {"x": "length", "load": "running load"}, repeats="jump"
            )
            return TableLoad(_running(rows, "load", piece), rows["load"], entry.times, f"{where}, {entry.table}")
        case InternalEntry():
            return _internal(entry, number, piece, context)
        case ForcesEntry():
            rows = context.table(entry.forces, ("load", number, "forces"), {"x": "length", "force": "force"})
            _not_all_zero(rows, "force")
            return PointLoads(table_stations(rows, piece), rows["force"], entry.times, f"{where}, {entry.forces}")
        case PointEntry():
            if entry.point == 0:
                raise context.error("a point load of zero loads nothing", "load", number, "point")
            x = context.station(entry.at, piece, "load", number, "at", what="the point load")
            return PointLoads(frozen(np.array([x])), frozen(np.array([entry.point])), entry.times, where)
        case InertiaEntry():
            if piece.weight is None:
                raise context.error("an inertia load needs the specimen's weight", "load", number, "inertia",
                                    remedy="give weight or point_masses in [specimen]")  # fmt: skip
            return InertiaLoad(entry.inertia, entry.times, where)
    raise AssertionError(f"unknown kind of load: {type(entry).__name__}")


def _shape(entry: ShapeEntry, number: int, piece: Specimen, context: Context) -> ShapeLoad:
    """Return a running load of a named shape."""
    _shape_keys(entry, number, context)
    start_x, end_x = stretch(entry.from_, entry.to, piece, context, "load", number)
    chord_x, chord = _NOTHING, _NOTHING
    if entry.chord is not None:
        rows = context.table(entry.chord, ("load", number, "chord"), {"x": "length", "chord": "length"}, repeats="jump")
        _not_negative(rows, "chord")
        chord_x, chord = _running(rows, "chord", piece), rows["chord"]
        if chord_x[0] > start_x or chord_x[-1] < end_x:
            raise TableError("the chord must be known all along the load", where=rows.name,
                             value=between(float(chord_x[0]), float(chord_x[-1])),
                             limit=f"at least {between(start_x, end_x)}",
                             remedy='add rows, or set "from" and "to" of the load')  # fmt: skip
    return ShapeLoad(
        entry.shape, start_x, end_x, entry.total, entry.start, entry.end,
        1.0 if entry.exponent is None else entry.exponent, entry.greatest or "root", chord_x, chord, entry.times,
        context.places.where("load", number),
    )  # fmt: skip


def _shape_keys(entry: ShapeEntry, number: int, context: Context) -> None:
    """Raise BriefError unless a shape comes with the keys that it needs and no others."""
    for key, shape in _SHAPE_KEYS.items():
        given = getattr(entry, key) is not None
        if given and entry.shape != shape:
            raise context.error(
                f'"{key}" belongs to shape = "{shape}", and this one is "{entry.shape}"', "load", number, key
            )
        if not given and entry.shape == shape and key != "greatest":
            raise context.error(f'shape = "{shape}" needs the key "{key}"', "load", number, value="")
    if entry.shape == "linear":
        if entry.total is not None:
            raise context.error('a linear load is given by "start" and "end" alone', "load", number, "total",
                                remedy='delete "total"')  # fmt: skip
        if entry.start == entry.end == 0:
            raise context.error("a linear load from zero to zero loads nothing", "load", number, value="")
    elif entry.total is None:
        raise context.error(f'shape = "{entry.shape}" needs the key "total"', "load", number, value="")
    elif entry.total == 0:
        raise context.error("a total of zero loads nothing", "load", number, "total")


def stretch(
    start: float | None, end: float | None, piece: Specimen, context: Context, *table: str | int
) -> tuple[float, float]:
    """Return the two ends [m] of a stretch given by "from" and "to", by default the whole specimen."""
    start_x = piece.left if start is None else context.station(start, piece, *table, "from", what='"from"')
    end_x = piece.right if end is None else context.station(end, piece, *table, "to", what='"to"')
    if not start_x < end_x:
        key = "from" if end is None else "to"
        raise context.error('"from" must lie inboard of "to"', *table, key, limit=f"the specimen runs {extent(piece)}")
    return start_x, end_x


def _internal(entry: InternalEntry, number: int, piece: Specimen, context: Context) -> InternalLoad:
    """Return a table of shear and moment in the signs of the conventions, stations in the specimen's x.

    Stations counted from the tip are turned round and the rows with them, so that a jump, whose outboard row is met
    first on the way from the tip, ends up with its inboard row first.  Shear and moment keep their signs: V and M of a
    cantilever are those of the load outboard of the station, from whichever end it is counted.
    """
    if piece.supports:
        raise context.error("a table of shear and moment needs a cantilever", "load", number, "internal",
                            remedy='give the running load as a "table" instead')  # fmt: skip
    rows = context.table(
        entry.internal, ("load", number, "internal"), {"x": "length", "shear": "force", "moment": "moment"},
        repeats="jump", optional={"torsion": "moment"},
    )  # fmt: skip
    _no_torsion(rows)
    _not_all_zero(rows, "shear", "moment")
    shear, moment = (rows[name] * (-1.0 if name in entry.reverse else 1.0) + 0.0 for name in ("shear", "moment"))
    x = table_stations(rows, piece, piece.right - rows["x"] if entry.stations_from == "tip" else None)
    if entry.stations_from == "tip":
        x, shear, moment = x[::-1], shear[::-1], moment[::-1]
    if not x[0] < x[-1]:
        raise TableError("the table needs rows at two different x", where=rows.name)
    return InternalLoad(
        frozen(x), frozen(shear), frozen(moment), rows.digit("shear"), rows.digit("moment"),
        entry.times, f"{context.places.where('load', number)}, {entry.internal}",
    )  # fmt: skip


def _no_torsion(rows: CsvTable) -> None:
    """Raise TableError if there is torsion, which pads on one line cannot bring."""
    if "torsion" in rows.columns and rows["torsion"].any():
        row = int(np.flatnonzero(rows["torsion"])[0])
        what = f"pads on one line bring no torsion; torsion {PLAN_RIG}"
        remedy = "delete the column if the test may leave the torsion out"
        raise TableError(what, where=rows.where(row), value=rows.cell("torsion", row), remedy=remedy)
