"""From the file's [[load]] to Load: what concerns several keys of a load at once, and its table."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.context import (
    Context,
    between,
    extent,
    frozen,
    not_all_zero,
    not_negative,
    running,
    table_stations,
)
from rigdesign.brief.layout import (
    CoupleEntry,
    ForcesEntry,
    InertiaEntry,
    InternalEntry,
    LoadEntry,
    PointEntry,
    PressureEntry,
    ShapeEntry,
    TableEntry,
    TorqueEntry,
)
from rigdesign.brief.messages import PLAN_RIG
from rigdesign.brief.model import (
    InertiaLoad,
    InternalLoad,
    Line,
    Load,
    PointLoads,
    ShapeLoad,
    Specimen,
    TableLoad,
)
from rigdesign.brief.surface.loads import check_load_line, couple, plan_forces, plan_point, pressure, torque
from rigdesign.brief.tables import CsvTable
from rigdesign.errors import TableError

_NOTHING = frozen(np.empty(0))
# keys that belong to one shape only, which also needs them, save "greatest"
_SHAPE_KEYS = {"start": "linear", "end": "linear", "greatest": "triangular", "exponent": "power", "chord": "schrenk"}


def load(entry: LoadEntry, number: int, piece: Specimen, context: Context) -> Load:
    """Return load `number` (from 0) of the brief; raise InputError where its keys or its table cannot be used."""
    where = context.places.where("load", number)
    match entry:
        case ShapeEntry():
            return _shape(entry, number, piece, context)
        case TableEntry():
            return _table(entry, number, piece, context)
        case InternalEntry():
            return _internal(entry, number, piece, context)
        case ForcesEntry():
            return _forces(entry, number, piece, context)
        case PointEntry():
            return _point(entry, number, piece, context)
        case InertiaEntry():
            if piece.weight is None:
                what, remedy = (
                    "an inertia load needs the specimen's weight",
                    "give weight or point_masses in [specimen]",
                )
                raise context.error(what, "load", number, "inertia", remedy=remedy)
            return InertiaLoad(entry.inertia, entry.times, where)
        case PressureEntry() | TorqueEntry() | CoupleEntry():
            return _plan_load(entry, number, piece, context)
    raise AssertionError(f"unknown kind of load: {type(entry).__name__}")


def _plan_load(
    entry: PressureEntry | TorqueEntry | CoupleEntry, number: int, piece: Specimen, context: Context
) -> Load:
    """Return a load of a kind that only plan rigs have."""
    match entry:
        case PressureEntry():
            return pressure(entry, number, context)
        case TorqueEntry():
            return torque(entry, number, piece, context)
        case CoupleEntry():
            return couple(entry, number, piece, context)


def _table(entry: TableEntry, number: int, piece: Specimen, context: Context) -> TableLoad:
    """Return a running load as a table."""
    kinds = {"x": "length", "load": "running load"}
    rows = context.table(entry.table, ("load", number, "table"), kinds, repeats="jump")
    x = running(rows, "load", piece)
    _check_line(entry.line, float(x[0]), float(x[-1]), piece, context, "load", number)
    where = f"{context.places.where('load', number)}, {entry.table}"
    return TableLoad(x, rows["load"], entry.times, where, entry.line)


def _check_line(
    line: Line | None, start: float, end: float, piece: Specimen, context: Context, *path: str | int
) -> None:
    """Raise BriefError where a running load of a surface, from start to end [m], leaves the outline."""
    if piece.is_surface:
        check_load_line(line, start, end, piece, context, *path)


def _forces(entry: ForcesEntry, number: int, piece: Specimen, context: Context) -> PointLoads:
    """Return a table of point loads."""
    if piece.is_surface:
        return plan_forces(entry, number, piece, context)
    rows = context.table(entry.forces, ("load", number, "forces"), {"x": "length", "force": "force"})
    not_all_zero(rows, "force")
    where = f"{context.places.where('load', number)}, {entry.forces}"
    return PointLoads(table_stations(rows, piece), rows["force"], entry.times, where)


def _point(entry: PointEntry, number: int, piece: Specimen, context: Context) -> PointLoads:
    """Return one point load."""
    if entry.point == 0:
        raise context.error("a point load of zero loads nothing", "load", number, "point")
    where, force = context.places.where("load", number), frozen(np.array([entry.point]))
    if piece.is_surface:
        x, y = plan_point(entry, number, piece, context)
        return PointLoads(frozen(np.array([x])), force, entry.times, where, frozen(np.array([y])))
    x = context.station(entry.at.x, piece, "load", number, "at", what="the point load")
    return PointLoads(frozen(np.array([x])), force, entry.times, where)


def _shape(entry: ShapeEntry, number: int, piece: Specimen, context: Context) -> ShapeLoad:
    """Return a running load of a named shape."""
    _shape_keys(entry, number, context)
    start_x, end_x = stretch(entry.from_, entry.to, piece, context, "load", number)
    _check_line(entry.line, start_x, end_x, piece, context, "load", number)
    chord_x, chord = _NOTHING, _NOTHING
    if entry.chord is not None:
        rows = context.table(entry.chord, ("load", number, "chord"), {"x": "length", "chord": "length"}, repeats="jump")
        not_negative(rows, "chord")
        chord_x, chord = running(rows, "chord", piece), rows["chord"]
        if chord_x[0] > start_x or chord_x[-1] < end_x:
            raise TableError(
                "the chord must be known all along the load",
                where=rows.name,
                value=between(float(chord_x[0]), float(chord_x[-1])),
                limit=f"at least {between(start_x, end_x)}",
                remedy='add rows, or set "from" and "to" of the load',
            )
    return ShapeLoad(
        shape=entry.shape,
        start_x=start_x,
        end_x=end_x,
        total=entry.total,
        start=entry.start,
        end=entry.end,
        exponent=1.0 if entry.exponent is None else entry.exponent,
        greatest=entry.greatest or "root",
        chord_x=chord_x,
        chord=chord,
        times=entry.times,
        where=context.places.where("load", number),
        line=entry.line,
    )


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
            raise context.error(
                'a linear load is given by "start" and "end" alone', "load", number, "total", remedy='delete "total"'
            )
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
    path = ("load", number, "internal")
    if piece.supports:
        remedy = 'give the running load as a "table" instead'
        raise context.error("a table of shear and moment needs a cantilever", *path, remedy=remedy)
    kinds = {"x": "length", "shear": "force", "moment": "moment"}
    rows = context.table(entry.internal, path, kinds, repeats="jump", optional={"torsion": "moment"})
    if not piece.is_surface:
        _no_torsion(rows)
    names = [name for name in ("shear", "moment", "torsion") if name in rows.columns]
    not_all_zero(rows, *(names if piece.is_surface else names[:2]))
    columns = {name: rows[name] * (-1.0 if name in entry.reverse else 1.0) + 0.0 for name in names}
    x = table_stations(rows, piece, piece.right - rows["x"] if entry.stations_from == "tip" else None)
    if entry.stations_from == "tip":
        x, columns = x[::-1], {name: values[::-1] for name, values in columns.items()}
    if not x[0] < x[-1]:
        raise TableError("the table needs rows at two different x", where=rows.name)
    has_torsion = piece.is_surface and "torsion" in columns
    return InternalLoad(
        x=frozen(x),
        shear=frozen(columns["shear"]),
        moment=frozen(columns["moment"]),
        shear_digit=rows.digit("shear"),
        moment_digit=rows.digit("moment"),
        times=entry.times,
        where=f"{context.places.where('load', number)}, {entry.internal}",
        torsion=frozen(columns["torsion"]) if has_torsion else _NOTHING,
        torsion_digit=rows.digit("torsion") if has_torsion else 0.0,
    )


def _no_torsion(rows: CsvTable) -> None:
    """Raise TableError if there is torsion, which pads on one line cannot bring."""
    if "torsion" in rows.columns and rows["torsion"].any():
        row = int(np.flatnonzero(rows["torsion"])[0])
        what = f"pads on one line bring no torsion; torsion {PLAN_RIG}"
        remedy = "give [specimen] outline, or delete the column if the test may leave the torsion out"
        raise TableError(what, where=rows.where(row), value=rows.cell("torsion", row), remedy=remedy)
