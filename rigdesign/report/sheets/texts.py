"""Texts of a page, drawn all at once: where each stands, how wide it is, and its box on the paper.

Widths are summed from the font's own advances, so that places are found before anything is rendered.  One artist hands
all texts of a page to the renderer: a text object each would take most of the time that the drawings take.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Any, Literal

from matplotlib.artist import Artist, allow_rasterization
from matplotlib.font_manager import FontProperties, findfont
from matplotlib.ft2font import FT2Font, LoadFlags

from rigdesign.report.figures_sheet import MM_PER_POINT

Across = Literal["left", "center", "right"]
Up = Literal["top", "center", "bottom"]

UNDER, OVER, MIDDLE = 0.24, 0.78, 0.365
"""How far letters reach below and above their line, and where the middle of capitals is, over the font's size."""


@dataclass(frozen=True)
class Words:
    """A line of text: where it begins x, y [mm], its size [pt], whether it is bold, and upright (turned left)."""

    x: float
    y: float
    words: str
    size: float
    bold: bool
    upright: bool

    @property
    def box(self) -> tuple[float, float, float, float]:
        """Left, low, right and high edge on the paper [mm]."""
        em = self.size * MM_PER_POINT
        wide, under, over = text_width(self.words, self.size, self.bold), UNDER * em, OVER * em
        if self.upright:
            return self.x - over, self.y, self.x + under, self.y + wide
        return self.x, self.y - under, self.x + wide, self.y + over


def placed(x: float, y: float, words: str, size: float, ha: Across, va: Up, upright: bool, bold: bool) -> Words:
    """Return a text whose edges or middle are at x, y [mm]; in the middle of its height are its capitals."""
    em = size * MM_PER_POINT
    along = {"left": 0.0, "center": 0.5, "right": 1.0}
    wide = text_width(words, size, bold)
    if upright:
        start = y - {"bottom": 0.0, "center": 0.5, "top": 1.0}[va] * wide
        across = x + {"left": OVER, "center": MIDDLE, "right": -UNDER}[ha] * em
        return Words(across, start, words, size, bold, True)
    line = y + {"bottom": UNDER, "center": -MIDDLE, "top": -OVER}[va] * em
    return Words(x - along[ha] * wide, line, words, size, bold, False)


class Texts(Artist):
    """All texts of a page as one artist."""

    def __init__(self, texts: Sequence[Words]) -> None:
        """Take the texts; they lie over all else."""
        super().__init__()
        self.texts = tuple(texts)
        self.set_zorder(7.0)

    @allow_rasterization  # type: ignore[untyped-decorator]
    def draw(self, renderer: Any) -> None:
        """Hand every text to the renderer."""
        figure = self.get_figure(root=True)
        assert figure is not None
        scale = figure.dpi / 25.4
        high = figure.get_size_inches()[1] * figure.dpi if renderer.flipy() else 0.0
        pen = renderer.new_gc()
        pen.set_foreground("black")
        for text in self.texts:
            x, y = text.x * scale, text.y * scale
            prop = _properties(text.size, text.bold)
            renderer.draw_text(pen, x, high - y if high else y, text.words, prop, 90.0 if text.upright else 0.0)
        pen.restore()


@lru_cache(maxsize=32)
def _properties(size: float, bold: bool) -> FontProperties:
    return FontProperties(family="DejaVu Sans", weight="bold" if bold else "normal", size=size)


@lru_cache(maxsize=2)
def _font(bold: bool) -> FT2Font:
    return FT2Font(findfont(_properties(10.0, bold)))


@lru_cache(maxsize=4096)
def _advance(sign: str, bold: bool) -> float:
    """How far a sign goes along its line, over the size of the font."""
    font = _font(bold)
    font.set_size(100.0, 72.0)
    # a sign that the font lacks is drawn as its glyph 0, an empty box
    glyph = font.load_glyph(font.get_char_index(ord(sign)), flags=LoadFlags.NO_HINTING)
    return float(glyph.linearHoriAdvance) / 65536.0 / 100.0


@lru_cache(maxsize=4096)
def text_width(words: str, size: float, bold: bool = False) -> float:
    """Return the width of a line of text [mm] at a size [pt]."""
    return sum(_advance(sign, bold) for sign in words) * size * MM_PER_POINT


def text_height(size: float) -> float:
    """Return the height that a line of text takes [mm] at a size [pt], with what goes below the line."""
    return (UNDER + OVER) * size * MM_PER_POINT


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
