"""From the file's [specimen] to the outline and the reference axis of a surface."""

from __future__ import annotations

from dataclasses import replace
from typing import Literal

import numpy as np

from rigdesign.brief.context import PRINTED_TOLERANCE, Context, frozen
from rigdesign.brief.layout import SpecimenTable
from rigdesign.brief.model import Line, Outline, Specimen
from rigdesign.brief.surface.rings import ring
from rigdesign.brief.surface.within import LINE_TOLERANCE, check_line, check_place, span
from rigdesign.brief.tables import CsvTable
from rigdesign.display import show
from rigdesign.errors import TableError


def surface(table: SpecimenTable, piece: Specimen, context: Context) -> Specimen:
    """Return the specimen with its outline, reference axis and cut.

    Raises
    ------
    TableError
        If the outline cannot be used, or does not reach from end to end of the specimen.
    BriefError
        If the reference axis turns back, leaves the outline, or does not run from end to end.
    """
    assert table.outline is not None
    rows = context.table(table.outline, ("specimen", "outline"), {"x": "length", "y": "length"}, repeats="any")
    corners = ring(rows, 0, rows["x"].size, "the outline")
    piece = replace(piece, outline=_to_ends(corners, rows, piece), cut=table.cut or "square to x")
    if table.axis is None:
        return piece
    check_line(
        table.axis,
        piece.left,
        piece.right,
        piece,
        context,
        "specimen",
        "axis",
        what="the reference axis",
        along="from end to end of the specimen",
        remedy="move its points, or correct the outline",
        whole=True,
    )
    return replace(piece, axis=_line_to_ends(table.axis, piece))


def check_supports(piece: Specimen, context: Context) -> None:
    """Raise BriefError where a support, which bears on the reference axis, stands off the outline."""
    for x in piece.supports:
        y = float(piece.reference_axis.at(np.array([x]))[0])
        what = "a support bears on the reference axis, and there it"
        check_place(
            x, y, piece, context, "specimen", "supports", what=what, remedy="give an axis that lies on the outline"
        )


def _to_ends(corners: Outline, rows: CsvTable, piece: Specimen) -> Outline:
    """Return the outline with the corners that stand on an end but for rounding moved onto it.

    Raises TableError where it does not reach an end of the specimen, or goes beyond it.
    """
    slack = LINE_TOLERANCE * span(piece)
    ends = np.array([piece.left, piece.right])
    reached = np.array([corners.x.min(), corners.x.max()])
    if np.abs(reached - ends).max() > slack:  # only then are the cells looked at
        slack = max(slack, min(0.5 * rows.digit("x"), PRINTED_TOLERANCE * span(piece)))
    for end, found, side in zip(ends, reached, ("left", "right"), strict=True):
        if abs(found - end) > slack:
            row = int(np.flatnonzero(rows["x"] == found)[0])
            raise _end_error(rows, row, float(found), float(end), _side(side), piece)
    x = corners.x.copy()
    x[np.abs(x - piece.left) <= slack] = piece.left
    x[np.abs(x - piece.right) <= slack] = piece.right
    return replace(corners, x=frozen(x))


def _side(side: str) -> Literal["left", "right"]:
    return "left" if side == "left" else "right"


def _end_error(
    rows: CsvTable, row: int, found: float, end: float, side: Literal["left", "right"], piece: Specimen
) -> TableError:
    """Return the error for an outline that does not reach an end of the specimen, or goes beyond it."""
    names = {"left": "root", "right": "tip"}
    called = names[side] if piece.support == "cantilever" else f"{side} end"
    is_short = found > end if side == "left" else found < end
    what = f"the outline does not reach the {called}" if is_short else f"the outline goes beyond the {called}"
    distance = show(abs(found - end), "length")
    return TableError(
        what,
        where=rows.where(row),
        value=f"{rows.cell('x', row)} ({distance} {'short' if is_short else 'beyond'})",
        limit=f"{show(end, 'length', unit='m')}, the {called} in [specimen]",
        remedy=f"correct the outline or the {called}",
    )


def _line_to_ends(line: Line, piece: Specimen) -> Line:
    """Return a line whose ends stand on the ends of the specimen where only rounding parts them."""
    slack = LINE_TOLERANCE * span(piece)
    x = line.x.copy()
    if abs(x[0] - piece.left) <= slack:
        x[0] = piece.left
    if abs(x[-1] - piece.right) <= slack:
        x[-1] = piece.right
    return Line(frozen(x), line.y)
