"""Whether lines and places lie on the outline, and how far off they are."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.brief.context import END_TOLERANCE, PRINTED_TOLERANCE, Context, between, frozen
from rigdesign.brief.model import Floats, Line, Outline, Specimen
from rigdesign.brief.tables import CsvTable
from rigdesign.display import show
from rigdesign.errors import TableError

LINE_TOLERANCE = 1e-6
"""Of the span: what the brief writes in plan may lie this far off the outline, by rounding."""

_PIECES = 64
"""A stretch of a line that lies off the outline is looked at in so many places for the one farthest off."""


@dataclass(frozen=True)
class Stray:
    """The place of a line that is farthest off the outline: x, y and its distance, all [m]."""

    x: float
    y: float
    distance: float


def span(piece: Specimen) -> float:
    """Return the specimen's span [m]."""
    return piece.right - piece.left


def outline_of(piece: Specimen) -> Outline:
    """Return the outline of a surface."""
    assert piece.outline is not None
    return piece.outline


def distances_off(outline: Outline, x: Floats, y: Floats) -> Floats:
    """Return how far places (n,) lie off the outline (n,) [m]: 0 on it and on its edge."""
    import shapely

    polygon = outline.polygon
    shapely.prepare(polygon)
    result = np.zeros(x.shape)
    off = np.flatnonzero(~shapely.intersects_xy(polygon, x, y))
    result[off] = shapely.distance(polygon, shapely.points(x[off], y[off]))
    return result


def stretch_of(line: Line, start: float, end: float) -> tuple[Floats, Floats]:
    """Return the points x, y of the part of a line between two stations [m]."""
    x = np.concatenate([[start], line.x[(line.x > start) & (line.x < end)], [end]])
    return x, line.at(x)


def stray(outline: Outline, x: Floats, y: Floats, slack: float) -> Stray | None:
    """Return where the line through points x, y (n,) is farthest off the outline; None if nowhere beyond the slack."""
    import shapely

    rest = shapely.LineString(np.column_stack([x, y])).difference(outline.polygon)
    if rest.is_empty:
        return None
    places = shapely.get_coordinates(shapely.segmentize(rest, max(rest.length / _PIECES, slack)))
    far = shapely.distance(outline.polygon, shapely.points(places))
    worst = int(np.argmax(far))
    if not far[worst] > slack:
        return None
    return Stray(float(places[worst, 0]), float(places[worst, 1]), float(far[worst]))


def check_line(
    line: Line,
    start: float,
    end: float,
    piece: Specimen,
    context: Context,
    *path: str | int,
    what: str,
    along: str,
    remedy: str,
    whole: bool = False,
) -> None:
    """Raise BriefError unless a line covers the stretch from start to end [m] and lies on the outline all along it.

    `what` names the line and `along` the stretch, as in "the reference axis", "from end to end of the specimen".
    `whole` says that nothing of the line may lie off the outline, beyond the stretch neither.
    """
    slack = LINE_TOLERANCE * span(piece)
    if line.x[0] > start + slack or line.x[-1] < end - slack:
        raise context.error(
            f"{what} must run {along}",
            *path,
            value=between(float(line.x[0]), float(line.x[-1])),
            limit=f"at least {between(start, end)}",
            remedy="add points",
        )
    x, y = (line.x, line.y) if whole else stretch_of(line, start, end)
    found = stray(outline_of(piece), x, y, slack)
    if found is not None:
        value = f"at {place(found.x, found.y)} it is {show(found.distance, 'length')} off"
        raise context.error(f"{what} leaves the outline", *path, value=value, remedy=remedy)


def check_place(
    x: float, y: float, piece: Specimen, context: Context, *path: str | int, what: str, remedy: str = ""
) -> None:
    """Raise BriefError unless a place written in the brief lies on the outline."""
    far = float(distances_off(outline_of(piece), np.array([x]), np.array([y]))[0])
    if far > LINE_TOLERANCE * span(piece):
        value = f"{place(x, y)} ({show(far, 'length')} off)"
        raise context.error(f"{what} lies off the outline", *path, value=value, remedy=remedy)


def place(x: float, y: float) -> str:
    """Return a place in plan for a message: "x = 1.100 m, y = −0.050 m"."""
    return f"x = {show(x, 'length', unit='m')}, y = {show(y, 'length', unit='m')}"


def rows_on_outline(rows: CsvTable, piece: Specimen) -> tuple[Floats, Floats]:
    """Return the places x, y (n,) [m] of a table's rows; raise TableError naming the first that lies off the outline.

    A row may lie off the outline by the rounding of what is printed, as along the span; one beyond an end of the
    specimen then stands on that end.
    """
    x, y = rows["x"], rows["y"]
    far = distances_off(outline_of(piece), x, y)
    slack = END_TOLERANCE * span(piece)
    if (far > slack).any():  # only then are the cells looked at
        rounding = 0.5 * (1 + END_TOLERANCE) * float(np.hypot(rows.digit("x"), rows.digit("y")))
        slack = max(slack, min(rounding, PRINTED_TOLERANCE * span(piece)))
    off = np.flatnonzero(far > slack)
    if off.size:
        row = int(off[0])
        raise TableError(
            "the row lies off the outline",
            where=rows.where(row),
            value=f"{rows.cell('x', row)}, {rows.cell('y', row)} ({show(float(far[row]), 'length')} off)",
            remedy="check the units in the heading and the origin of x and y",
        )
    return frozen(np.clip(x, piece.left, piece.right)), y
