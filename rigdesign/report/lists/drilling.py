"""The drill list: every hole of every lever's and plate's mark, in running dimensions from one datum end."""

from __future__ import annotations

from typing import TYPE_CHECKING

from rigdesign.hardware.model import Body, Hardware
from rigdesign.levers.model import Piece
from rigdesign.report.lists.members import by_mark, pieces_by_name
from rigdesign.report.lists.model import DrillRow

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck

OLD_PIVOT = "old pivot"
"""What a pivot of an earlier drilling is called."""

SPACER = "spacer"
"""What a hole for the bolt of a spacer is called."""

_NOTES = {
    "twin flats": "through both flats together",
    "twin channels": "through both webs together",
    "hollow section": "through both webs and their side plates",
    "plate": "through the plate",
}


def drill_rows(result: HardwareCheck) -> tuple[DrillRow, ...]:
    """Return a row a hole of each mark of levers and plates, marks in their order, holes from the datum end on."""
    return drill_rows_of(result.hardware)


def drill_rows_of(hardware: Hardware) -> tuple[DrillRow, ...]:
    """Like `drill_rows`, from the hardware alone."""
    pieces = pieces_by_name(hardware)
    rows: list[DrillRow] = []
    for members in by_mark(hardware, pieces).values():
        rows += piece_drill_rows(hardware, pieces[members[0]], hardware.bodies[members[0]])
    return tuple(rows)


def piece_drill_rows(hardware: Hardware, piece: Piece, body: Body) -> list[DrillRow]:
    """Return the holes of one piece: those of its pins, and those of its spacers' bolts."""
    mark, note = hardware.marks[piece.name], _NOTES[body.build]
    rows = []
    for hole in piece.holes:
        end = hardware.end_at(piece.name, hole.name)
        along, across = from_datum(piece, body, hole.u, hole.v)
        rows.append(DrillRow(mark, hole.name, along, across, end.hole, end.pin, note))
    for u in body.spacers:
        along, across = from_datum(piece, body, u, 0.0)
        spacer = body.spacer
        rows.append(DrillRow(mark, SPACER, along, across, spacer.bore, spacer.bolt, "for the bolt of a spacer"))
    pivot = hardware.end_at(piece.name, "pivot")
    for u, v in body.old_pivots:
        along, across = from_datum(piece, body, float(u), float(v))
        rows.append(DrillRow(mark, OLD_PIVOT, along, across, pivot.hole, pivot.pin, "drilled already; no pin here"))
    return sorted(rows, key=lambda row: (row.along, row.across))


def from_datum(piece: Piece, body: Body, u: float, v: float) -> tuple[float, float]:
    """Return a place of a piece's frame from the datum [m]: along and across, as `DrillRow` says."""
    if piece.kind == "plate":
        least_u, least_v = body.outline.min(axis=0)
        return u - float(least_u), v - float(least_v)
    return u - piece.ends[0].u + body.overhang, 0.0
