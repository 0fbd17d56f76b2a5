"""Details: one a part mark of levers and plates, several on a sheet, each dimensioned from its datum."""

from __future__ import annotations

from collections.abc import Iterator

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.display import counted
from rigdesign.report.sheets.detail_levers import draw_lever
from rigdesign.report.sheets.detail_plates import draw_plate
from rigdesign.report.sheets.frame import FIELD
from rigdesign.report.sheets.paper import BODY, MEDIUM, SMALL, TITLE, Box, Paper
from rigdesign.report.sheets.part_facts import PartFacts, detailed_parts
from rigdesign.report.sheets.sizes import Sizes
from rigdesign.report.sheets.texts import shortened, text_width

MOST = {"lever": 6, "plate": 4}
"""Details on one sheet."""


def detail_sheets(result: HardwareCheck, sizes: Sizes) -> Iterator[tuple[Paper, str, str]]:
    """Yield the sheets of details, each with its name and scale: levers, then plates."""
    parts = detailed_parts(result)
    for kind in ("lever", "plate"):
        own = [part for part in parts if part.row.kind == kind]
        for first in range(0, len(own), MOST[kind]):
            page = own[first : first + MOST[kind]]
            marks = page[0].row.mark if len(page) == 1 else f"{page[0].row.mark} to {page[-1].row.mark}"
            name = f"Detail of {kind} {marks}" if len(page) == 1 else f"Details of {kind}s {marks}"
            yield _sheet(page, _grid(kind, len(page)), sizes), name, "as shown"


def _grid(kind: str, number: int) -> tuple[int, int]:
    """Columns and rows of the cells for so many details: few plates are drawn larger."""
    if kind == "lever":
        return 2, 3
    return (1, 1) if number == 1 else (2, 1) if number == 2 else (2, 2)


def _sheet(parts: list[PartFacts], grid: tuple[int, int], sizes: Sizes) -> Paper:
    paper = Paper()
    columns, rows = grid
    wide, high = FIELD.width / columns, FIELD.height / rows
    for k, part in enumerate(parts):
        row, column = divmod(k, columns)
        box = Box(FIELD.left + column * wide, FIELD.high - (row + 1) * high, wide, high)
        paper.box(box, MEDIUM)
        used = _header(paper, box, part, sizes)
        room = box.less(5.0, 3.0, 4.0, used)
        (draw_lever if part.row.kind == "lever" else draw_plate)(paper, room, part, sizes)
    return paper


def _header(paper: Paper, box: Box, part: PartFacts, sizes: Sizes) -> float:
    """Mark, number and steel of a detail in three lines; return their height [mm]."""
    row, left, top = part.row, box.left + 4.0, box.high
    paper.text(left, top - 5.0, row.mark, TITLE + 1, bold=True)
    at = left + text_width(row.mark, TITLE + 1, True) + 4.0
    words = f"{row.quantity} off: {part.members}"
    paper.text(at, top - 5.0, shortened(words, box.right - at - 4.0, BODY + 1), BODY + 1)
    one = part.mass.mass - sum(part.body.counterweights.values())
    mass = f"{sizes.mass(one)} each"
    if row.quantity > 1:
        mass += f", {sizes.mass(row.quantity * one)} in all"
    steel = f"{row.section}, {row.material}, {_length(part, sizes)}; {mass}"
    paper.text(left, top - 10.2, shortened(steel, box.width - 8.0, BODY), BODY)
    notes = _notes(part, sizes)
    paper.text(left, top - 14.2, shortened(notes, box.width - 8.0, SMALL), SMALL)
    return 16.5


def _length(part: PartFacts, sizes: Sizes) -> str:
    assert part.row.length is not None
    if part.row.kind == "plate":
        across = part.body.outline[:, 1]
        size = f"{sizes.length(part.row.length)} × {sizes.length(float(across.max() - across.min()))}"
        return f"blank {size}, thickness {sizes.length(part.body.section.depth)}"
    return f"length {sizes.length(part.row.length)}"


def _notes(part: PartFacts, sizes: Sizes) -> str:
    """Where the centre of mass is, spacers, counterweights, and the mirrored mark."""
    holes = {hole.hole: hole for hole in part.holes}
    along = holes["pivot"].along + part.mass.u
    words = [f"centre of mass {sizes.length(along)} from the datum"]
    if part.row.kind == "plate":
        across = holes["pivot"].across + part.mass.v
        words = [f"centre of mass at {sizes.length(along)}, {sizes.length(across)} from the datum"]
    if part.body.spacers:
        places = ", ".join(sizes.length(holes["pivot"].along + u) for u in part.body.spacers)
        bolt = f"bolt M{1e3 * part.body.spacer.bolt:.0f} through {sizes.plain_hole(part.body.spacer.bore)}"
        words.append(f"{counted(len(part.body.spacers), 'spacer')} {part.spacer} at {places}, {bolt}")
    for side in part.sides:
        words.append(
            f"{side.mark}: {side.section}, {side.quantity} in all, welded on both webs all round, then drilled"
        )
    for hole, mass in part.body.counterweights.items():
        words.append(f"counterweight {sizes.mass(mass)} at {hole}, in the centre of mass")
    if part.mirror:
        words.insert(0, f"MIRROR IMAGE of {part.mirror}: drill from the datum end")
    return "; ".join(words)
