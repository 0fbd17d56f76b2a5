"""One page of the drawings: lines, shapes and texts in millimetres of the paper, and what of it is taken.

Lines, shapes and texts are kept until the page is saved: a page of a thousand of them is then a handful of objects.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, Literal

import numpy as np
from matplotlib.axes import Axes
from matplotlib.collections import LineCollection, PathCollection, PolyCollection
from matplotlib.figure import Figure
from matplotlib.path import Path
from matplotlib.transforms import Affine2D
from numpy.typing import ArrayLike

from rigdesign.report.figures_sheet import A3, MM_PER_POINT, paper
from rigdesign.report.sheets.texts import Across, Texts, Up, Words, broken, placed
from rigdesign.report.surface.labels import Board
from rigdesign.target.curve import Floats

OUTLINE, MEDIUM, THIN, HATCH = 0.7, 0.5, 0.35, 0.18
"""Widths of lines [mm]: edges, edges of small things, dimensions and centre lines, hatches."""
BODY, SMALL, HEAD, TITLE = 7.0, 6.0, 8.5, 11.0
"""Sizes of texts [pt]; none is smaller than SMALL."""
LINE = 1.45
"""Distance of two lines of a paragraph over the size of their font."""

Dash = Literal["solid", "dashed", "chain", "phantom"]
_DASHES: dict[Dash, tuple[float, ...]] = {
    "solid": (),
    "dashed": (4.4, 2.2),
    "chain": (13.0, 2.5, 1.5, 2.5),
    "phantom": (13.0, 2.0, 1.5, 2.0, 1.5, 2.0),
}
"""Lengths of strokes and gaps on the paper [points]: the same for lines of all widths."""
_CIRCLE = Path.unit_circle()

Point = tuple[float, float]


@dataclass(frozen=True)
class Box:
    """A rectangle of the paper [mm]."""

    left: float
    low: float
    width: float
    height: float

    @property
    def right(self) -> float:
        """Right edge [mm]."""
        return self.left + self.width

    @property
    def high(self) -> float:
        """Upper edge [mm]."""
        return self.low + self.height

    @property
    def middle(self) -> Point:
        """Centre [mm]."""
        return self.left + self.width / 2, self.low + self.height / 2

    def less(self, left: float, low: float, right: float, high: float) -> Box:
        """Return the rectangle with so much taken off each side [mm]."""
        return Box(self.left + left, self.low + low, self.width - left - right, self.height - low - high)


class Paper:
    """A page of this size [mm] that is drawn on."""

    def __init__(self, size: tuple[float, float] = A3) -> None:
        """Begin an empty page."""
        width, height = size
        self.size = size
        self.figure = Figure(figsize=(width / 25.4, height / 25.4), facecolor="white")
        self.axes: Axes = paper(self.figure)
        self.board = Board(0.0, 0.0, width, height)
        self._taken: list[tuple[float, float, float, float]] = []
        self._kept_off: list[Floats] = []
        self._lines: dict[tuple[float, Dash, float], list[Any]] = {}
        self._shapes: dict[tuple[float, float, str, str], list[Path]] = {}
        self._fills: list[Any] = []
        self.texts: list[Words] = []

    def line(self, *points: Point, weight: float = THIN, dash: Dash = "solid", order: float = 2.0) -> None:
        """Draw a line through points; `order` says what lies over what, the greater on top."""
        self._lines.setdefault((weight, dash, order), []).append(np.asarray(points, dtype=float))

    def path(self, points: ArrayLike, weight: float = THIN, dash: Dash = "solid", order: float = 2.0) -> None:
        """Draw a line through points (n, 2)."""
        self._lines.setdefault((weight, dash, order), []).append(np.asarray(points, dtype=float))

    def box(self, box: Box, weight: float = THIN, order: float = 2.0) -> None:
        """Draw the edges of a rectangle."""
        corners = ((box.left, box.low), (box.right, box.low), (box.right, box.high), (box.left, box.high))
        self.line(*corners, corners[0], weight=weight, order=order)

    def shape(
        self, points: ArrayLike, weight: float = OUTLINE, fill: str = "white", hatch: str = "", order: float = 3.0
    ) -> None:
        """Draw a closed shape through points (n, 2), filled, and hatched where asked."""
        corners = np.asarray(points, dtype=float)
        path = Path(np.concatenate([corners, corners[:1]]), closed=True)
        if hatch:
            self._shapes.setdefault((order, 0.0, fill, hatch), []).append(path)
            order, fill = order + 1e-6, "none"
        self._shapes.setdefault((order, weight, fill, ""), []).append(path)

    def circle(self, x: float, y: float, radius: float, weight: float = THIN, fill: str = "white",
               order: float = 4.0, squeeze: float = 1.0) -> None:  # fmt: skip
        """Draw a circle, or with `squeeze` below 1 one that is seen aslant: narrower along x."""
        place = Affine2D().scale(radius * squeeze, radius).translate(x, y)
        self._shapes.setdefault((order, weight, fill, ""), []).append(_CIRCLE.transformed(place))

    def fill(self, *points: Point) -> None:
        """Draw a small black shape: an arrow's head."""
        self._fills.append(np.asarray(points, dtype=float))

    def arrow(self, head: Point, turn: float, length: float = 2.2) -> None:
        """Draw the head of an arrow that points along `turn` [rad]."""
        along = np.array([np.cos(turn), np.sin(turn)])
        left = np.array([-along[1], along[0]])
        tip = np.asarray(head)
        back = tip - length * along
        self.fill(head, tuple(back + 0.17 * length * left), tuple(back - 0.17 * length * left))

    def text(
        self, x: float, y: float, words: str, size: float = BODY, ha: Across = "left", va: Up = "center",
        upright: bool = False, bold: bool = False,
    ) -> None:  # fmt: skip
        """Write a line of text whose edge or centre is at x, y [mm]; later labels keep off it."""
        if not words:
            return
        text = placed(x, y, words, size, ha, va, upright, bold)
        self.texts.append(text)
        left, low, right, high = text.box
        self.take((left + right) / 2, (low + high) / 2, right - left, high - low)

    def take(self, x: float, y: float, width: float, height: float) -> None:
        """No later label touches a box of this centre and size [mm]."""
        self._taken.append((x, y, width, height))
        self.board.take(x, y, width, height)

    def keep_off(self, points: ArrayLike) -> None:
        """Later labels keep off a line through these points (n, 2) [mm] where they can."""
        line = np.asarray(points, dtype=float)
        self._kept_off.append(line)
        self.board.draw_line(line[:, 0], line[:, 1])

    def confine(self, box: Box) -> None:
        """Later labels are placed inside this part of the page, clear of what is written already."""
        self.board = Board(box.left, box.low, box.right, box.high)
        for taken in self._taken:
            self.board.take(*taken)
        for points in self._kept_off:
            self.board.draw_line(points[:, 0], points[:, 1])

    def paragraph(self, box: Box, words: str, size: float = SMALL, bold: bool = False) -> float:
        """Write words from the top of a box, broken to its width; return the height used [mm]."""
        step = size * MM_PER_POINT * LINE
        lines = broken(words, box.width, size, bold)
        for k, line in enumerate(lines):
            self.text(box.left, box.high - (k + 0.5) * step, line, size, bold=bold)
        return len(lines) * step

    def finished(self) -> Figure:
        """Return the page's figure with all that was drawn."""
        for (weight, dash, order), lines in self._lines.items():
            style: Any = "solid" if dash == "solid" else (0, tuple(p * MM_PER_POINT / weight for p in _DASHES[dash]))
            ends: Any = {"capstyle": "projecting" if dash == "solid" else "butt", "joinstyle": "miter"}
            self._add(LineCollection(lines, colors="black", linestyles=[style], **ends), order, weight)
        for (order, weight, fill, hatch), paths in self._shapes.items():
            style = {"facecolors": fill, "edgecolors": "black", "joinstyle": "miter", "hatch": hatch or None}
            self._add(PathCollection(paths, **style), order, weight)
        if self._fills:
            self._add(PolyCollection(self._fills, facecolors="black", edgecolors="none"), 6.0, 0.0)
        if self.texts:
            self.axes.add_artist(Texts(self.texts))
        self._lines, self._shapes, self._fills = {}, {}, []
        return self.figure

    def _add(self, collection: Any, order: float, weight: float) -> None:
        collection.set_linewidth(weight / MM_PER_POINT)
        collection.set_zorder(order)
        self.axes.add_collection(collection, autolim=False)
