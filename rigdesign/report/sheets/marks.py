"""Marks that hold a number, their shape saying of what: circle pad, square lever or plate, diamond link, hexagon jack.

The shapes of pads, levers and jacks are those of the other figures.
"""

from __future__ import annotations

from typing import Literal

import numpy as np

from rigdesign.report.figures_parts import MARK
from rigdesign.report.sheets.paper import SMALL, THIN, Paper
from rigdesign.report.sheets.texts import text_width

MarkKind = Literal["pad", "lever", "link", "jack"]
_CORNERS: dict[str, tuple[int, float, float]] = {
    "lever": (4, 45.0, 0.68),
    "link": (4, 0.0, 0.78),
    "jack": (6, 0.0, 0.72),
}
"""Number of corners, turn of the first [degrees], and its distance from the centre over the mark's size."""


def mark_size(kind: MarkKind, number: int) -> tuple[float, float]:
    """Return width and height of a mark [mm]."""
    more = max(0.0, text_width(str(number), SMALL) - 2.7)
    size = MARK * {"pad": 1.0, "lever": 0.97, "link": 1.56, "jack": 1.44}[kind]
    return size + more, size


def draw_mark(paper: Paper, kind: MarkKind, number: int, x: float, y: float) -> None:
    """Draw a number in the mark of its kind, its centre at x, y [mm]."""
    wide, high = mark_size(kind, number)
    more = wide - high
    if kind == "pad":
        turn = np.linspace(0.0, 2 * np.pi, 33)
        corners = np.column_stack([np.cos(turn), np.sin(turn)]) * MARK / 2
    else:
        count, first, far = _CORNERS[kind]
        turn = np.radians(first) + 2 * np.pi * np.arange(count) / count
        corners = np.column_stack([np.cos(turn), np.sin(turn)]) * MARK * far
    corners[:, 0] += np.sign(np.round(corners[:, 0], 9)) * more / 2
    paper.shape(corners + np.array([x, y]), THIN, order=5.0)
    paper.text(x, y - 0.05, str(number), SMALL, ha="center")
