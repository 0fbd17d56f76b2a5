"""The detail of a three-point plate: seen from above in its own frame, dimensioned from two edges of its blank."""

from __future__ import annotations

import numpy as np

from rigdesign.report.lists import DrillRow
from rigdesign.report.sheets.detail_levers import centre_symbol
from rigdesign.report.sheets.dimensions import distance, running_row
from rigdesign.report.sheets.paper import BODY, HATCH, MEDIUM, OUTLINE, SMALL, THIN, Box, Paper
from rigdesign.report.sheets.part_facts import PartFacts
from rigdesign.report.sheets.sizes import Sizes, round_scale, scale_words
from rigdesign.report.sheets.texts import text_width
from rigdesign.report.sheets.views import View

EDGE_ROOM = 62.0
"""Width kept for the edge view and the table of holes at the right [mm]."""


def draw_plate(paper: Paper, room: Box, part: PartFacts, sizes: Sizes) -> None:
    """Draw a plate's detail into a room of the sheet."""
    outline = part.body.outline
    low = outline.min(axis=0)
    wide, high = outline.max(axis=0) - low
    side = room.less(20.0, 10.0, EDGE_ROOM, 16.0)
    ratio = round_scale(1000.0 * max(wide / side.width, high / side.height))
    mm = 1000.0 / ratio
    view = View(ratio, side.left + (side.width - wide * mm) / 2, side.low + (side.height - high * mm) / 2, 0.0, 0.0)
    paper.shape(view.points(outline - low), OUTLINE, order=3.0)
    for hole in part.holes:
        at, radius = view.at(hole.along, hole.across), max(hole.diameter / 2 * mm, 0.35)
        paper.circle(*at, radius, MEDIUM, order=4.0)
        paper.line((at[0] - radius - 1.2, at[1]), (at[0] + radius + 1.2, at[1]), weight=HATCH, order=4.5)
        paper.line((at[0], at[1] - radius - 1.2), (at[0], at[1] + radius + 1.2), weight=HATCH, order=4.5)
    _dimensions(paper, view, room, part, (float(wide), float(high)), sizes)
    _names(paper, view, part)
    _edge_view(
        paper, Box(room.right - EDGE_ROOM + 4, room.low, EDGE_ROOM - 4, room.height), part, view, float(high), sizes
    )
    paper.text(room.left, room.high - 1.5, f"seen with u to the right, v up, {scale_words(ratio)}", SMALL)


def _dimensions(paper: Paper, view: View, room: Box, part: PartFacts, size: tuple[float, float], sizes: Sizes) -> None:
    """Running dimensions from the left edge above the plate, and from the lower edge at its left."""
    wide, high = size
    top = view.y(high)
    features = [(view.x(0.0), "0", top)]
    # holes above one another have one dimension, drawn from the lowest
    lowest: dict[str, DrillRow] = {}
    for hole in sorted(part.holes, key=lambda hole: -hole.across):
        lowest[sizes.length(hole.along)] = hole
    features += [(view.x(hole.along), words, view.y(hole.across) + 2.0) for words, hole in lowest.items()]
    features.append((view.x(wide), sizes.length(wide), top))
    running_row(paper, features, top + 4.0, 1.0, (room.left, room.right - EDGE_ROOM + 4))
    column = view.x(0.0) - 6.0
    _column(paper, view, column, room, part, high, sizes)
    left, low = view.x(0.0), view.y(0.0)
    paper.fill((left, low), (left - 1.3, low - 2.2), (left + 1.3, low - 2.2))
    paper.fill((left, low), (left - 2.2, low - 1.3), (left - 2.2, low + 1.3))
    paper.text(left, low - 4.4, "datum: left and lower edge", BODY, bold=True, ha="left")


def _column(paper: Paper, view: View, line: float, room: Box, part: PartFacts, high: float, sizes: Sizes) -> None:
    from rigdesign.report.figures_sheet import spread

    farthest: dict[str, DrillRow] = {}
    for hole in sorted(part.holes, key=lambda hole: hole.along):
        farthest[sizes.length(hole.across)] = hole
    rows = sorted([(0.0, 0.0), (high, 0.0), *((hole.across, hole.along) for hole in farthest.values())])
    apart = spread([view.y(v) for v, _ in rows], 2.9, room.low + 2.0, room.high - 12.0)
    paper.line((line, view.y(0.0)), (line, view.y(high)), weight=HATCH)
    for k, ((v, u), at) in enumerate(zip(rows, apart, strict=True)):
        y = view.y(v)
        paper.line((view.x(u) - (2.0 if u else 0.8), y), (line - 0.8, y), weight=HATCH)
        if abs(at - y) > 0.3:
            paper.line((line - 0.8, y), (line - 2.2, at), weight=HATCH)
        paper.text(line - 2.8, at, sizes.length(v), BODY, ha="right")
        if k:
            paper.arrow((line, y), np.pi / 2, 1.8)
        else:
            paper.circle(line, y, 0.9, THIN)


def _names(paper: Paper, view: View, part: PartFacts) -> None:
    """Names of the holes beside them, and the centre of mass."""
    corners = view.points(part.body.outline - part.body.outline.min(axis=0))
    closed = np.concatenate([corners, corners[:1]])
    paper.keep_off(closed)
    pivot = next(hole for hole in part.holes if hole.hole == "pivot")
    centre = view.at(pivot.along + part.mass.u, pivot.across + part.mass.v)
    for hole in part.holes:
        at = view.at(hole.along, hole.across)
        paper.board.take(*at, hole.diameter * view.mm + 2.4, hole.diameter * view.mm + 2.4)
    centre_symbol(paper, *centre, 1.4)
    paper.board.take(*centre, 2.8, 2.8)
    for hole in part.holes:
        at = view.at(hole.along, hole.across)
        wide = text_width(hole.hole, BODY)
        start = hole.diameter / 2 * view.mm + 1.4
        paper.text(*paper.board.place(*at, wide, 2.6, start), hole.hole, BODY, ha="center")


def _edge_view(paper: Paper, room: Box, part: PartFacts, view: View, high: float, sizes: Sizes) -> None:
    """The plate's edge seen from its right, and its holes as a small table."""
    thick = part.body.section.depth
    x, y = room.left + 10.0, view.y(0.0)
    wide = max(thick * view.mm, 0.6)
    corners = ((x, y), (x + wide, y), (x + wide, y + high * view.mm), (x, y + high * view.mm))
    paper.shape(corners, MEDIUM, order=3.0)
    distance(paper, (x, y), (x + wide, y), sizes.length(thick), -3.6)
    top = room.high - 20.0
    left = x + wide + 10.0
    for k, hole in enumerate(part.holes):
        paper.text(left, top - 7.6 * k, hole.hole, BODY, bold=True)
        paper.text(left + 3.0, top - 7.6 * k - 3.4, sizes.hole(hole.diameter), BODY)
