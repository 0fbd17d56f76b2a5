"""One page of the drawings: lines, shapes and texts in millimetres of the paper, and what of it is taken.

Lines are kept by weight until the page is saved: a page of a thousand lines is then a handful of objects.  Widths of
texts are summed from the font's own advances, so that places are found before anything is rendered.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Any, Literal

import numpy as np
from matplotlib.axes import Axes
from matplotlib.collections import LineCollection, PolyCollection
from matplotlib.figure import Figure
from matplotlib.font_manager import FontProperties, findfont
from matplotlib.ft2font import FT2Font, LoadFlags
from matplotlib.patches import Circle, Ellipse, Polygon
from numpy.typing import ArrayLike

from rigdesign.report.figures_sheet import A3, MM_PER_POINT, paper
from rigdesign.report.surface.labels import Board

OUTLINE, MEDIUM, THIN, HATCH = 0.7, 0.5, 0.35, 0.18
"""Widths of lines [mm]: edges, edges of small things, dimensions and centre lines, hatches."""
BODY, SMALL, HEAD, TITLE = 7.0, 6.0, 8.5, 11.0
"""Sizes of texts [pt]; none is smaller than SMALL."""
LINE = 1.45
"""Distance of two lines of a paragraph over the size of their font."""

Dash = Literal["solid", "dashed", "chain", "phantom"]
_DASHES: dict[Dash, Any] = {
    "solid": "solid",
    "dashed": (0, (9.0, 4.5)),
    "chain": (0, (26.0, 5.0, 3.0, 5.0)),
    "phantom": (0, (26.0, 4.0, 3.0, 4.0, 3.0, 4.0)),
}
"""Of lines; lengths in widths of a line of 0.18 mm: long enough to be told apart on the paper."""
_DASH_WIDTH = 0.18

Across = Literal["left", "center", "right"]
Up = Literal["top", "center", "bottom", "baseline"]
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
        self._lines: dict[tuple[float, Dash, float], list[Any]] = {}
        self._fills: list[Any] = []

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
        style: Any = {"facecolor": fill, "linewidth": weight / MM_PER_POINT, "zorder": order, "joinstyle": "miter"}
        if hatch:
            self.axes.add_patch(Polygon(corners, edgecolor="black", hatch=hatch, **{**style, "linewidth": 0.0}))
            style["facecolor"] = "none"
        self.axes.add_patch(Polygon(corners, edgecolor="black", **style))

    def circle(self, x: float, y: float, radius: float, weight: float = THIN, fill: str = "white",
               order: float = 4.0, squeeze: float = 1.0) -> None:  # fmt: skip
        """Draw a circle, or with `squeeze` below 1 one that is seen aslant: narrower along x."""
        style: Any = {"facecolor": fill, "edgecolor": "black", "linewidth": weight / MM_PER_POINT, "zorder": order}
        if squeeze < 1.0:
            self.axes.add_patch(Ellipse((x, y), 2 * radius * squeeze, 2 * radius, **style))
        else:
            self.axes.add_patch(Circle((x, y), radius, **style))

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
        upright: bool = False, bold: bool = False, order: float = 7.0,
    ) -> None:  # fmt: skip
        """Write a line of text whose edge or centre is at x, y [mm]; later labels keep off it."""
        if not words:
            return
        style: Any = {"rotation": 90 if upright else 0, "zorder": order, "rotation_mode": "default"}
        weight = "bold" if bold else "normal"
        self.axes.text(x, y, plain(words), size=size, ha=ha, va=va, weight=weight, color="black", **style)
        wide, high = text_width(words, size, bold), text_height(size)
        across, up = (high, wide) if upright else (wide, high)
        middle_x = x + {"left": across / 2, "center": 0.0, "right": -across / 2}[ha]
        middle_y = y + {"bottom": up / 2, "center": 0.0, "top": -up / 2, "baseline": 0.3 * up}[va]
        self.board.take(middle_x, middle_y, across, up)

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
            width = weight / MM_PER_POINT
            style: Any = _DASHES[dash]
            if dash != "solid":
                style = (0, tuple(part * _DASH_WIDTH / weight * 0.9 for part in style[1]))
            end: Any = "butt" if dash != "solid" else "projecting"
            self.axes.add_collection(
                LineCollection(lines, colors="black", linewidths=width, linestyles=[style], zorder=order,
                               capstyle=end, joinstyle="miter"),
                autolim=False,
            )  # fmt: skip
        if self._fills:
            self.axes.add_collection(
                PolyCollection(self._fills, facecolors="black", edgecolors="none", zorder=6.0), autolim=False
            )
        self._lines, self._fills = {}, []
        return self.figure


@lru_cache(maxsize=2)
def _font(bold: bool) -> FT2Font:
    return FT2Font(findfont(FontProperties(family="DejaVu Sans", weight="bold" if bold else "normal")))


@lru_cache(maxsize=4096)
def _advance(sign: str, bold: bool) -> float:
    """How far a sign goes along its line, over the size of the font."""
    font = _font(bold)
    font.set_size(100.0, 72.0)
    return float(font.load_char(ord(sign), flags=LoadFlags.NO_HINTING).linearHoriAdvance) / 65536.0 / 100.0


def text_width(words: str, size: float, bold: bool = False) -> float:
    """Return the width of a line of text [mm] at a size [pt]."""
    return sum(_advance(sign, bold) for sign in words) * size * MM_PER_POINT


def text_height(size: float) -> float:
    """Return the height that a line of text takes [mm] at a size [pt], with what goes below the line."""
    return 1.02 * size * MM_PER_POINT


def plain(words: str) -> str:
    """Return the words such that no sign in them is taken for a formula."""
    return words.replace("$", r"\$")


def broken(words: str, width: float, size: float, bold: bool = False) -> list[str]:
    """Break words into lines that are at most `width` [mm] wide; a longer single word is cut.

    >>> broken("weigh every part before it is hung", 24.0, 7.0)
    ['weigh every part', 'before it is hung']
    """
    lines: list[str] = []
    line = ""
    for word in words.split():
        longer = f"{line} {word}" if line else word
        if text_width(longer, size, bold) <= width:
            line = longer
            continue
        if line:
            lines.append(line)
        line = shortened(word, width, size, bold)
    return [*lines, line] if line else lines


def shortened(words: str, width: float, size: float, bold: bool = False) -> str:
    """Return the words, or as many of their signs as fit into `width` [mm] with three dots after them."""
    if text_width(words, size, bold) <= width:
        return words
    kept = words
    while kept and text_width(kept + "…", size, bold) > width:
        kept = kept[:-1]
    return kept.rstrip() + "…"


def spans(points: Sequence[Point]) -> tuple[float, float, float, float]:
    """Return the least x, least y, greatest x and greatest y of points."""
    places = np.asarray(points, dtype=float)
    low, high = places.min(axis=0), places.max(axis=0)
    return float(low[0]), float(low[1]), float(high[0]), float(high[1])
