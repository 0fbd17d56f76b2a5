"""Numbers and part marks beside what they name: placed clear of one another, and of lines where that can be."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.hardware.model import Link
from rigdesign.levers.model import Piece
from rigdesign.report.sheets.marks import MarkKind, draw_mark, mark_size
from rigdesign.report.sheets.paper import HATCH, SMALL, Paper
from rigdesign.report.sheets.steel import depth_of, height_of, place_of, reach_along_x
from rigdesign.report.sheets.texts import text_width
from rigdesign.report.sheets.views import View


def name_mark(
    paper: Paper,
    kind: MarkKind,
    number: int,
    part: str,
    target: tuple[float, float],
    start: float,
    covered: float = 1.5,
) -> tuple[float, float]:
    """Place a number in its mark with the part mark beside it, and a thin line to its target where it stands off.

    `start` [mm] is how far from its target it begins, `covered` how much a covered line weighs against distance.
    Return the centre of it all.
    """
    wide, high = mark_size(kind, number)
    words = text_width(part, SMALL) + 0.8 if part else 0.0
    x, y = paper.board.place(*target, wide + words, high, start, covered)
    left = x - (wide + words) / 2
    middle = left + wide / 2
    away = np.hypot(middle - target[0], y - target[1])
    if away > high / 2 + 0.6:
        paper.line(target, (middle, y), weight=HATCH, order=4.8)
    draw_mark(paper, kind, number, middle, y)
    if part:
        low, high_edge, right = y - 1.15, y + 1.15, left + wide + words + 0.2
        behind = ((left + wide, low), (right, low), (right, high_edge), (left + wide, high_edge))
        paper.shape(behind, 0.0, order=4.9)
        paper.text(left + wide + 0.6, y - 0.05, part, SMALL)
    return x, y


def label_levers(paper: Paper, view: View, result: HardwareCheck, pieces: Iterable[Piece]) -> None:
    """Write number and part mark of levers and plates near their pivots in an elevation."""
    hardware = result.hardware
    pieces = tuple(pieces)
    keep_off_steel(paper, view, result, pieces, hardware.links)
    for piece in pieces:
        depth = depth_of(hardware, piece)
        # begun on the side away from the link above, where it is free
        at = piece.pivot.x, hardware.heights[piece.name]
        start = depth / 2 * view.mm + 1.0
        name_mark(paper, "lever", piece.number, hardware.marks[piece.name], view.at(*at), start)


def keep_off_steel(
    paper: Paper, view: View, result: HardwareCheck, pieces: Iterable[Piece], links: Iterable[Link]
) -> None:
    """Later labels keep off the edges of levers and off links in an elevation."""
    hardware = result.hardware
    for piece in pieces:
        x, half = reach_along_x(hardware, piece), depth_of(hardware, piece) / 2
        height = hardware.heights[piece.name]
        for edge in (height - half, height + half):
            paper.keep_off([view.at(x[0], edge), view.at(x[1], edge)])
    for link in links:
        upper = view.at(place_of(hardware, link.upper.to, link.upper.at)[0], height_of(hardware, link.upper.to))
        lower = view.at(place_of(hardware, link.lower.to, link.lower.at)[0], height_of(hardware, link.lower.to))
        paper.keep_off([upper, lower])
