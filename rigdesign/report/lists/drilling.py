"""The drill list: every hole of every lever's and plate's mark, in running dimensions from one datum end."""

from __future__ import annotations

from typing import TYPE_CHECKING

from rigdesign.hardware.model import Body, Hardware
from rigdesign.levers.model import Hole, Piece
from rigdesign.report.lists.members import by_mark, ends_by_place, pieces_by_name
from rigdesign.report.lists.model import DrillRow

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck

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
    pieces, ends = pieces_by_name(hardware), ends_by_place(hardware.links)
    rows = []
    for mark, members in by_mark(hardware, pieces).items():
        piece, body = pieces[members[0]], hardware.bodies[members[0]]
        for hole in sorted(piece.holes, key=lambda hole: (hole.u, hole.v)):
            end = ends[f"{piece.name} {hole.name}"]
            along, across = from_datum(piece, body, hole)
            rows.append(DrillRow(mark, hole.name, along, across, end.hole, end.pin, _NOTES[body.build]))
    return tuple(rows)


def from_datum(piece: Piece, body: Body, hole: Hole) -> tuple[float, float]:
    """Return a hole's place from the datum [m]: along and across, as `DrillRow` says."""
    if piece.kind == "plate":
        u, v = body.outline.min(axis=0)
        return hole.u - float(u), hole.v - float(v)
    return hole.u - piece.ends[0].u + body.overhang, 0.0
