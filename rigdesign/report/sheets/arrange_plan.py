"""General arrangement in plan: levers, plates and pads at their true widths, stations along x and y."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

import numpy as np

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.levers.model import Piece
from rigdesign.report.sheets import specimen_views
from rigdesign.report.sheets.dimensions import running_row
from rigdesign.report.sheets.frame import FIELD
from rigdesign.report.sheets.labels import name_mark
from rigdesign.report.sheets.paper import BODY, HEAD, THIN, Box, Paper
from rigdesign.report.sheets.plan_views import draw_plan
from rigdesign.report.sheets.sizes import Sizes, scale_words
from rigdesign.report.sheets.steel import bars, footprints
from rigdesign.report.sheets.tables import GAP, Table, draw_whole
from rigdesign.report.sheets.views import View, fitted, seen_words

STATIONS = 17.0
"""Room for the row of stations above the plan [mm]."""
MARKS = 13.0
"""Room around the plan in which marks can stand [mm]."""


def plan_sheet(result: HardwareCheck, sizes: Sizes, tables: Sequence[Table]) -> tuple[Paper, str, str, list[Table]]:
    """Return the sheet, its name, its scale, and those of the tables that found no place beneath the plan."""
    paper = Paper()
    x, y = plan_bounds(result)
    room = FIELD.less(16.0, 6.0, 12.0, 16.0 + STATIONS)
    view = _view(room.less(0.0, MARKS, 0.0, MARKS), x, y)
    specimen_views.draw_plan(paper, view, result.check.rig.plan.target.brief)
    draw_plan(paper, view, result, result.hardware.pieces, list(range(len(result.hardware.pads))))
    _stations(paper, view, result, sizes, view.y(y[1]) + MARKS)
    low = view.y(y[0]) - MARKS
    paper.confine(Box(FIELD.left + 2.0, low - 2.0, FIELD.width - 4.0, FIELD.high - low - 12.0))
    _marks(paper, view, result)
    _, seen = seen_words(result)
    paper.text(FIELD.left + 5, FIELD.high - 6, f"plan, {seen}, {scale_words(view.ratio)}", HEAD, bold=True)
    words = "what lies beneath other steel is dashed; pads by their footprints; specimen in phantom lines"
    paper.text(FIELD.left + 5, FIELD.high - 11.5, words, BODY)
    directions(paper, FIELD.right - 22.0, FIELD.high - 20.0)
    rest = _tables(paper, tables, low - 4.0)
    return paper, "General arrangement, plan", scale_words(view.ratio), rest


def plan_bounds(result: HardwareCheck) -> tuple[tuple[float, float], tuple[float, float]]:
    """Return the stretches of x and y [m] that the rig and its specimen take in plan."""
    brief, hardware = result.check.rig.plan.target.brief, result.hardware
    shapes = [bar for piece in hardware.pieces for bar in bars(hardware, piece)] + footprints(result)
    outline = brief.specimen.outline
    if outline is not None:
        shapes.append(np.column_stack([outline.x, outline.y]))
    else:
        shapes.append(np.array([[brief.specimen.left, 0.0], [brief.specimen.right, 0.0]]))
    points = np.concatenate(shapes)
    low, high = points.min(axis=0), points.max(axis=0)
    return (float(low[0]), float(high[0])), (float(low[1]), float(high[1]))


def _view(room: Box, x: tuple[float, float], y: tuple[float, float]) -> View:
    """The view at the top of the room, as high as it needs to be."""
    view = fitted(room, x, y)
    high = (y[1] - y[0]) * view.mm
    return View(view.ratio, view.left, room.high - high, view.x0, view.y0)


def _stations(paper: Paper, view: View, result: HardwareCheck, sizes: Sizes, line: float) -> None:
    """Stations of pads above the plan; equal ones once."""
    rig = result.check.rig
    places = sorted({round(float(x), 5) for x in rig.pad_x})
    tops = {x: max(float(y) for px, y in zip(rig.pad_x, rig.pad_y, strict=True) if abs(px - x) < 2e-5) for x in places}
    half = (rig.plan.target.brief.pads.width or 0.0) / 2
    features = [(view.x(x), sizes.length(x), view.y(tops[x] + half)) for x in places]
    running_row(paper, features, line, 1.0, (FIELD.left + 14, FIELD.right - 6), datum=False)
    paper.text(max(FIELD.left + 2, view.x(places[0]) - 16.0), line, f"x [{sizes.unit}]", BODY)


def _marks(paper: Paper, view: View, result: HardwareCheck) -> None:
    """Numbers of pads beside them, then numbers and marks of levers and plates beside their pivots."""
    hardware, rig = result.hardware, result.check.rig
    keep_off_bars(paper, view, result, hardware.pieces)
    for corners in footprints(result):
        points = view.points(np.concatenate([corners, corners[:1]]))
        paper.keep_off(points)
    for pad in hardware.pads:
        at = view.at(float(rig.pad_x[pad.pad - 1]), float(rig.pad_y[pad.pad - 1]))
        name_mark(paper, "pad", pad.pad, "", at, 2.0, 3.0)
    for tree in rig.trees:
        name_mark(paper, "jack", tree.jack.number, "", view.at(tree.jack.x, tree.jack.y), 3.0, 3.0)
    for piece in hardware.pieces:
        at = view.at(piece.pivot.x, piece.pivot.y)
        name_mark(paper, "lever", piece.number, hardware.marks[piece.name], at, 2.5, 3.0)


def keep_off_bars(paper: Paper, view: View, result: HardwareCheck, pieces: Iterable[Piece]) -> None:
    """Later labels keep off the outlines of levers and plates in plan."""
    for piece in pieces:
        for bar in bars(result.hardware, piece):
            points = view.points(np.concatenate([bar, bar[:1]]))
            paper.keep_off(points)


def directions(paper: Paper, x: float, y: float) -> None:
    """Draw arrows of x and y."""
    paper.line((x, y), (x + 9.0, y), weight=THIN)
    paper.arrow((x + 10.0, y), 0.0)
    paper.line((x, y), (x, y + 9.0), weight=THIN)
    paper.arrow((x, y + 10.0), np.pi / 2)
    paper.text(x + 11.0, y, "x", BODY)
    paper.text(x + 1.5, y + 10.0, "y", BODY)


def _tables(paper: Paper, tables: Sequence[Table], top: float) -> list[Table]:
    """Draw tables that fit beneath the plan whole; return the others."""
    rest: list[Table] = []
    for table in tables:
        room = Box(FIELD.left + 6.0, FIELD.low + 4.0, FIELD.width - 12.0, top - FIELD.low - 4.0)
        used = draw_whole(paper, room, table) if room.height > 15.0 and not rest else 0.0
        if used:
            top -= used + GAP
        elif table.rows:
            rest.append(table)
    return rest
