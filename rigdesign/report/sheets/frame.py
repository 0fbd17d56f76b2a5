"""The frame of every sheet: border with zones, title block, key, cautions, and the words across a rig that fails."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from matplotlib.patches import PathPatch
from matplotlib.textpath import TextPath
from matplotlib.transforms import Affine2D

from rigdesign.report.sheets.marks import MarkKind, draw_mark
from rigdesign.report.sheets.paper import BODY, HEAD, MEDIUM, OUTLINE, SMALL, THIN, TITLE, Box, Paper
from rigdesign.report.sheets.sizes import Sizes
from rigdesign.report.sheets.texts import broken, shortened, text_width

FRAME = Box(20.0, 10.0, 390.0, 277.0)
"""The border of an A3 sheet [mm]: a margin to file it by on the left."""
STRIP = 5.0
"""Width of the strip around the border that holds the zones' marks [mm]."""
BLOCK = Box(230.0, 10.0, 180.0, 44.0)
"""The title block [mm]."""
FIELD = Box(20.0, 54.0, 390.0, 233.0)
"""Where the sheet's own drawing goes: what the border holds above title block, key and cautions [mm]."""
_COLUMNS, _ROWS = "12345678", "ABCDEF"
_ZONE = 50.0

NOT_ACCEPTED = "NOT ACCEPTED – do not build"
CAUTIONS = (
    "Every part, weld and fitting must be checked, and the whole rig released, by a licensed engineer under the codes "
    "that hold where it is built.",
    "Loads, strength and clearances were calculated for the sizes drawn: no part may be exchanged for another.",
    "Use this sheet with all others of its revision. Do not scale off the drawing.",
    "Nobody stands beneath or beside a loaded rig.",
)

DETAIL_NOTES = (
    "Datum of a lever: the end of its steel beyond hole A, at the left. All its holes are at mid depth.",
    "Drill twin profiles clamped together; stamp the mark at the datum end. Bolts of spacers tight: without them the "
    "profiles buckle sideways.",
    "Phantom lines: fittings of links, which are not part of the detail.",
    "Pins and spacers: see their schedules. Outlines of flats and plates at 1:1: the DXF file of the mark.",
    "Quartered disc: centre of mass.",
)
_WITH_KEY = ("General arrangement", "Tier")


@dataclass(frozen=True)
class Sheet:
    """What the frame says of a sheet: its name, place among all, its scale, and the rig's facts."""

    name: str
    scale: str
    number: int
    total: int


@dataclass(frozen=True)
class Facts:
    """What all sheets of one rig say in their title blocks."""

    title: str
    revision: str
    material: str
    accepted: bool
    sizes: Sizes


def draw_frame(paper: Paper, sheet: Sheet, facts: Facts) -> None:
    """Draw all that is around a sheet's own drawing: border, title block, key or notes, cautions."""
    _border(paper)
    _block(paper, sheet, facts)
    notes = Box(FRAME.left, FRAME.low, BLOCK.left - FRAME.left, BLOCK.height)
    is_detail = sheet.name.startswith("Detail")
    wide = 92.0 if is_detail else 66.0 if sheet.name.startswith(_WITH_KEY) else 0.0
    if is_detail:
        _numbered(paper, Box(notes.left, notes.low, wide, notes.height), "notes on details", DETAIL_NOTES)
    elif wide:
        _key(paper, Box(notes.left, notes.low, wide, notes.height))
    _numbered(paper, Box(notes.left + wide, notes.low, notes.width - wide, notes.height), "cautions", CAUTIONS)
    if not facts.accepted:
        _across(paper)


def _border(paper: Paper) -> None:
    outer = FRAME.less(-STRIP, -STRIP, -STRIP, -STRIP)
    paper.box(FRAME, OUTLINE)
    paper.box(outer, THIN)
    width, height = paper.size
    for middle, names, first in ((width / 2, _COLUMNS, FRAME.left), (height / 2, _ROWS, FRAME.low)):
        edges = [middle + _ZONE * (k - len(names) / 2) for k in range(len(names) + 1)]
        last = FRAME.right if names is _COLUMNS else FRAME.high
        edges[0], edges[-1] = first, last
        for k, name in enumerate(names):
            place = (edges[k] + edges[k + 1]) / 2
            for near, far in _sides(names is _COLUMNS):
                at = (near + far) / 2
                if names is _COLUMNS:
                    paper.text(place, at, name, BODY, ha="center")
                    if k:
                        paper.line((edges[k], near), (edges[k], far))
                else:
                    paper.text(at, place, _ROWS[-1 - k], BODY, ha="center")
                    if k:
                        paper.line((near, edges[k]), (far, edges[k]))
                if k == len(names) // 2:
                    _centring(paper, middle, near, far, names is _COLUMNS)


def _sides(columns: bool) -> tuple[tuple[float, float], ...]:
    """Inner and outer edge of the zones' strip on both sides."""
    low, high = (FRAME.low, FRAME.high) if columns else (FRAME.left, FRAME.right)
    return (low, low - STRIP), (high, high + STRIP)


def _centring(paper: Paper, middle: float, near: float, far: float, columns: bool) -> None:
    ends = ((middle, near), (middle, far)) if columns else ((near, middle), (far, middle))
    paper.line(*ends, weight=OUTLINE)


def _block(paper: Paper, sheet: Sheet, facts: Facts) -> None:
    """The title block: 44 mm high, signatures on the left, names on the right."""
    left, low = BLOCK.left, BLOCK.low
    paper.box(BLOCK, OUTLINE)
    split = left + 62.0
    paper.line((split, low), (split, BLOCK.high), weight=MEDIUM)
    for y in (low + 11.0, low + 22.0):
        paper.line((split, y), (BLOCK.right, y), weight=THIN)
    _names(paper, Box(split, low + 22.0, BLOCK.right - split, 22.0), sheet, facts)
    _cells(paper, Box(split, low, BLOCK.right - split, 22.0), sheet, facts)
    _signatures(paper, Box(left, low, 62.0, 22.0))
    _tolerances(paper, Box(left, low + 22.0, 62.0, 22.0), facts)


def _names(paper: Paper, box: Box, sheet: Sheet, facts: Facts) -> None:
    room = box.width - 4.0
    paper.text(box.left + 2, box.high - 2.6, "whiffletree for", SMALL)
    lines, size = _title_lines(facts.title, room)
    for k, line in enumerate(lines):
        paper.text(box.left + 2, box.high - 7.6 - 3.6 * (k - (len(lines) - 1) / 2), line, size, bold=True)
    paper.text(box.left + 2, box.high - 17.0, shortened(sheet.name, room, HEAD + 1, True), HEAD + 1, bold=True)


def _title_lines(title: str, room: float) -> tuple[list[str], float]:
    """Return the title in the largest letters in which it fits on one line, or else on two."""
    for size in (TITLE, TITLE - 1.5, HEAD):
        if text_width(title, size, True) <= room:
            return [title], size
    lines = broken(title, room, HEAD, True)
    if len(lines) > 2:
        lines = [lines[0], shortened(" ".join(lines[1:]), room, HEAD, True)]
    return lines, HEAD


def _cells(paper: Paper, box: Box, sheet: Sheet, facts: Facts) -> None:
    """Scale, sheet, revision and projection above; units and verdict beneath."""
    edges = [box.left + part for part in (0.0, 34.0, 62.0, 88.0, box.width)]
    top, middle = box.high, box.low + 11.0
    for edge in edges[1:-1]:
        paper.line((edge, middle), (edge, top))
    entries = (
        ("scale", sheet.scale),
        ("sheet", f"{sheet.number} of {sheet.total}"),
        ("revision", facts.revision),
    )
    for k, (head, words) in enumerate(entries):
        _cell(paper, edges[k], edges[k + 1], top, head, words)
    _projection(paper, (edges[3] + edges[4]) / 2, (top + middle) / 2)
    paper.line((edges[2] - 8.0, box.low), (edges[2] - 8.0, middle))
    unit = "mm" if facts.sizes.system == "SI" else "inches"
    _cell(paper, edges[0], edges[2] - 8.0, middle, "units", f"dimensions in {unit}")
    verdict = "accepted by the check" if facts.accepted else NOT_ACCEPTED
    _cell(paper, edges[2] - 8.0, edges[4], middle, "verdict of the check", verdict, bold=not facts.accepted)


def _cell(paper: Paper, left: float, right: float, top: float, head: str, words: str, bold: bool = False) -> None:
    paper.text(left + 1.5, top - 2.4, head, SMALL)
    paper.text(left + 1.5, top - 7.2, shortened(words, right - left - 3.0, HEAD, bold), HEAD, bold=bold)


def _projection(paper: Paper, x: float, y: float) -> None:
    """First-angle projection: a cone seen from the side, and on its right as seen from its left."""
    left, right, small, large = x - 10.5, x - 2.0, 1.9, 3.6
    paper.shape(((left, y - small), (right, y - large), (right, y + large), (left, y + small)), MEDIUM, order=2.5)
    paper.line((left - 1.5, y), (right + 1.5, y), dash="chain", order=4.0)
    centre = x + 6.5
    paper.circle(centre, y, large, MEDIUM)
    paper.circle(centre, y, small, MEDIUM, order=4.1)
    paper.line((centre - large - 1.2, y), (centre + large + 1.2, y), dash="chain", order=5.0)
    paper.line((centre, y - large - 1.2), (centre, y + large + 1.2), dash="chain", order=5.0)


def _signatures(paper: Paper, box: Box) -> None:
    """Cells that people sign by hand."""
    edges = box.left + 26.0, box.left + 46.0
    for edge in edges:
        paper.line((edge, box.low), (edge, box.high))
    rows = ("", "drawn", "checked", "licensed engineer")
    step = box.height / len(rows)
    for k, head in enumerate(rows):
        y = box.high - k * step
        paper.line((box.left, y), (box.right, y))
        paper.text(box.left + 1.5, y - step / 2, head, SMALL)
    paper.text(edges[0] + 1.5, box.high - step / 2, "name, sign", SMALL)
    paper.text(edges[1] + 1.5, box.high - step / 2, "date", SMALL)


def _tolerances(paper: Paper, box: Box, facts: Facts) -> None:
    room = box.less(1.5, 0.5, 1.5, 1.0)
    used = paper.paragraph(room, "tolerances unless stated [" + facts.sizes.unit + "]:")
    for words in facts.sizes.tolerances:
        used += paper.paragraph(room.less(0, 0, 0, used), words)
    paper.paragraph(room.less(0, 0, 0, used + 0.8), f"material unless stated: {facts.material}; break sharp edges")


def _key(paper: Paper, box: Box) -> None:
    paper.box(box, MEDIUM)
    paper.text(box.left + 2.0, box.high - 3.0, "key", BODY, bold=True)
    rows: tuple[tuple[MarkKind, str], ...] = (
        ("pad", "pad, by its number"),
        ("lever", "lever or plate, by its number"),
        ("link", "link, by its number"),
        ("jack", "jack, by its number"),
    )
    for k, (kind, words) in enumerate(rows):
        y = box.high - 9.0 - 6.6 * k
        draw_mark(paper, kind, 1, box.left + 5.5, y)
        paper.text(box.left + 11.0, y, words, BODY)
    paper.text(box.left + 2.0, box.low + 4.4, "L3, P1, K2, …: part marks, see the parts list", SMALL)


def _numbered(paper: Paper, box: Box, heading: str, paragraphs: tuple[str, ...]) -> None:
    """A box of numbered paragraphs."""
    paper.box(box, MEDIUM)
    paper.text(box.left + 2.0, box.high - 3.0, heading, BODY, bold=True)
    room = box.less(6.0, 0.0, 2.0, 6.0)
    used = 0.0
    for k, words in enumerate(paragraphs):
        paper.text(box.left + 2.0, room.high - used - 1.55, f"{k + 1}", SMALL)
        used += paper.paragraph(room.less(0, 0, 0, used), words) + 0.7


def _across(paper: Paper) -> None:
    """Write across the field, in letters too large to be missed, that the rig is not accepted."""
    shape = TextPath((0, 0), NOT_ACCEPTED, size=30.0)
    extents = shape.get_extents()
    turn = np.arctan2(FIELD.height, FIELD.width)
    size = 0.88 * np.hypot(FIELD.width, FIELD.height) / extents.width
    middle_x, middle_y = FIELD.middle
    place = (
        Affine2D()
        .translate(-(extents.x0 + extents.x1) / 2, -(extents.y0 + extents.y1) / 2)
        .scale(size)
        .rotate(turn)
        .translate(middle_x, middle_y)
    )
    style: Any = {"facecolor": "none", "edgecolor": "black", "linewidth": 1.1, "zorder": 9.0}
    paper.axes.add_patch(PathPatch(place.transform_path(shape), **style))
