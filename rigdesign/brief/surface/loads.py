"""From the file's [[load]] to loads in plan: pressure maps, running torques, couples, and where the others act."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.context import Context, frozen, not_all_zero, running
from rigdesign.brief.layout import CoupleEntry, ForcesEntry, PointEntry, PressureEntry, TorqueEntry
from rigdesign.brief.model import (
    CoupleLoad,
    Floats,
    Line,
    PointLoads,
    PressureLoad,
    Specimen,
    TorqueLoad,
    Weight,
)
from rigdesign.brief.surface.places import row_places, two_at_one_place
from rigdesign.brief.surface.within import (
    LINE_TOLERANCE,
    check_line,
    check_place,
    distances_off,
    outline_of,
    span,
)
from rigdesign.brief.tables import CsvTable
from rigdesign.display import show
from rigdesign.errors import TableError

MOST_POINTS = 200_000
"""No pressure map, and no loaded surface, has more points than this."""

FLAT = 1e-9
"""Of their extent: points that spread less to the sides of a line lie on it."""


def pressure(entry: PressureEntry, number: int, context: Context) -> PressureLoad:
    """Return a pressure map; raise TableError where its points are too few, too many, in one line, or one twice."""
    kinds = {"x": "length", "y": "length", "pressure": "pressure"}
    rows = context.table(entry.pressure, ("load", number, "pressure"), kinds, repeats="any")
    x, y = rows["x"], rows["y"]
    check_once(rows, x, y)
    check_spread(rows, "the pressure map", "add points beside it; a load along a line is a running load")
    not_all_zero(rows, "pressure")
    where = f"{context.places.where('load', number)}, {entry.pressure}"
    return PressureLoad(x, y, rows["pressure"], entry.times, where)


def check_spread(rows: CsvTable, what: str, remedy: str) -> None:
    """Raise TableError where the points x, y of a table are too few, too many, or all in one line."""
    x, y = rows["x"], rows["y"]
    if not 3 <= x.size <= MOST_POINTS:
        number = f"{what} has {x.size} point{'' if x.size == 1 else 's'}"
        raise TableError(number, where=rows.name, limit=f"3 to {MOST_POINTS}")
    centred = np.column_stack([x - x.mean(), y - y.mean()])
    spread = np.linalg.svd(centred, compute_uv=False)
    if spread[1] <= FLAT * spread[0]:
        raise TableError(f"all points of {what} lie on one line", where=rows.name, remedy=remedy)


def check_once(rows: CsvTable, x: Floats, y: Floats) -> None:
    """Raise TableError where two rows of a table stand at one place."""
    order = np.lexsort((y, x))
    twice = np.flatnonzero((np.diff(x[order]) == 0) & (np.diff(y[order]) == 0))
    if twice.size:
        pairs = [sorted((int(order[k]), int(order[k + 1]))) for k in twice]
        one, other = min(pairs, key=lambda pair: pair[1])
        raise two_at_one_place(rows, one, other)


def torque(entry: TorqueEntry, number: int, piece: Specimen, context: Context) -> TorqueLoad:
    """Return a running torque; raise TableError where its table cannot be used."""
    kinds = {"x": "length", "torque": "running torque"}
    rows = context.table(entry.torque, ("load", number, "torque"), kinds, repeats="jump")
    x = running(rows, "torque", piece)
    return TorqueLoad(x, rows["torque"], entry.times, f"{context.places.where('load', number)}, {entry.torque}")


def couple(entry: CoupleEntry, number: int, piece: Specimen, context: Context) -> CoupleLoad:
    """Return a point couple; raise BriefError where it is zero or stands off the specimen."""
    if entry.couple == 0:
        raise context.error("a couple of zero loads nothing", "load", number, "couple")
    x = context.station(entry.at, piece, "load", number, "at", what="the couple")
    return CoupleLoad(x, entry.couple, entry.times, context.places.where("load", number))


def plan_point(entry: PointEntry, number: int, piece: Specimen, context: Context) -> tuple[float, float]:
    """Return the place x, y [m] of a point load, on the reference axis where only x is given."""
    path = ("load", number, "at")
    x = context.station(entry.at.x, piece, *path, what="the point load")
    if entry.at.y is not None:
        check_place(x, entry.at.y, piece, context, *path, what="the point load")
        return x, entry.at.y
    y = float(piece.reference_axis.at(np.array([x]))[0])
    what = "the point load acts on the reference axis, and there it"
    check_place(x, y, piece, context, *path, what=what, remedy="give x and y")
    return x, y


def plan_forces(entry: ForcesEntry, number: int, piece: Specimen, context: Context) -> PointLoads:
    """Return point loads of a table, by x, then y; raise TableError where a row lies off the outline."""
    kinds = {"x": "length", "force": "force"}
    path = ("load", number, "forces")
    rows = context.table(entry.forces, path, kinds, repeats="any", optional={"y": "length"})
    not_all_zero(rows, "force")
    x, y = row_places(rows, piece)
    if "y" in rows.columns:
        check_once(rows, rows["x"], rows["y"])
    order = np.lexsort((y, x))
    where = f"{context.places.where('load', number)}, {entry.forces}"
    return PointLoads(frozen(x[order]), frozen(rows["force"][order]), entry.times, where, frozen(y[order]))


def check_load_line(
    line: Line | None, start: float, end: float, piece: Specimen, context: Context, *load: str | int
) -> None:
    """Raise BriefError unless a running load from start to end [m] acts on the outline all along."""
    if line is None:
        path, what = load, "the reference axis, along which the load acts,"
        remedy = 'say by "line" where it acts'
    else:
        path, what = (*load, "line"), "the line of the load"
        remedy = "move its points, or correct the outline"
    axis = line or piece.reference_axis
    along = "all along the load"
    check_line(axis, start, end, piece, context, *path, what=what, along=along, remedy=remedy)


def check_weight_line(line: Line | None, weight: Weight, piece: Specimen, context: Context) -> None:
    """Raise BriefError unless the weight, point masses included, acts on the outline all along."""
    given = "weight" if weight.x.size else "point_masses"
    if line is None:
        path, what = ("specimen", given), "the reference axis, along which the weight acts,"
        remedy = 'say by "weight_line" where it acts'
    else:
        path, what = ("specimen", "weight_line"), "the line of the weight"
        remedy = "move its points, or correct the outline"
    axis = line or piece.reference_axis
    if weight.x.size:
        start, end = float(weight.x[0]), float(weight.x[-1])
        along = "all along the weight"
        check_line(axis, start, end, piece, context, *path, what=what, along=along, remedy=remedy)
    if weight.point_x.size:
        _check_masses(weight.point_x, axis, piece, context, *path, remedy=remedy)


def _check_masses(x: Floats, axis: Line, piece: Specimen, context: Context, *path: str | int, remedy: str) -> None:
    """Raise BriefError unless point masses at x (n,) [m] stand on the line of the weight, and there on the outline."""
    slack = LINE_TOLERANCE * span(piece)
    beyond = np.flatnonzero((x < axis.x[0] - slack) | (x > axis.x[-1] + slack))
    if beyond.size:
        value = show(float(x[beyond[0]]), "length", unit="m")
        what = "a point mass stands beyond the line of the weight"
        raise context.error(what, *path, value=value, remedy="lengthen the line")
    y = axis.at(x)
    off = np.flatnonzero(distances_off(outline_of(piece), x, y) > slack)
    if off.size:
        row = int(off[0])
        check_place(float(x[row]), float(y[row]), piece, context, *path, what="a point mass", remedy=remedy)
