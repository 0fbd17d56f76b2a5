"""The sheet that every figure is drawn on: paper size, titles, footer, colours, and files with the same bytes.

Figures are made without pyplot, so that nothing global is touched.  Colours are those of Okabe and Ito (Color
Universal Design, 2008; values from memory), told apart by line style, weight and hatching as well, so that a
black-and-white print loses nothing.
"""

from __future__ import annotations

import io
import warnings
from collections.abc import Callable
from functools import wraps
from typing import Any, ParamSpec, TypeVar

from matplotlib import rc_context
from matplotlib.axes import Axes
from matplotlib.figure import Figure

P = ParamSpec("P")
R = TypeVar("R")

BLUE, VERMILION, GREEN, INK, GREY, PALE = "#0072B2", "#D55E00", "#009E73", "#111111", "#777777", "#DDDDDD"
SMALLEST_FONT = 6.0
"""No text on a sheet is smaller than this [pt]."""
MM_PER_POINT = 25.4 / 72.0
A4, A3 = (297.0, 210.0), (420.0, 297.0)
"""Landscape paper sizes [mm]."""

CAUTION = (
    "Calculated for rigid levers and links without weight or friction; strength, clearances and deflections are not "
    "checked here. Before anything is built or loaded, have it reviewed by a licensed engineer under the codes that "
    "hold where you are."
)

_STYLE: Any = {
    "svg.hashsalt": "rigdesign",
    "svg.fonttype": "path",
    "font.family": ["DejaVu Sans"],
    "font.size": 8.0,
    "axes.unicode_minus": True,
    "path.simplify": False,
}


def styled(function: Callable[P, R]) -> Callable[P, R]:
    """Run a function that draws or saves under the sheets' own settings, whatever the user's are."""

    @wraps(function)
    def inside(*args: P.args, **kwargs: P.kwargs) -> R:
        with rc_context(_STYLE):
            return function(*args, **kwargs)

    return inside


def new_sheet(size: tuple[float, float], title: str, subtitle: str) -> Figure:
    """Return a figure of this size [mm] with a title, a line beneath it, and the caution as its footer."""
    width, height = size
    figure = Figure(figsize=(width / 25.4, height / 25.4), facecolor="white")
    figure.text(10 / width, 1 - 9 / height, title, size=12, weight="bold", va="center")
    figure.text(10 / width, 1 - 15.5 / height, subtitle, size=8.5, va="center", color=INK)
    figure.text(10 / width, 5.5 / height, CAUTION, size=SMALLEST_FONT, va="center", color=GREY)
    return figure


def panel(figure: Figure, left: float, bottom: float, width: float, height: float, **settings: Any) -> Axes:
    """Return axes at this place of the sheet [mm], with a light grid and no box above and right."""
    page_width, page_height = (25.4 * side for side in figure.get_size_inches())
    place = (left / page_width, bottom / page_height, width / page_width, height / page_height)
    axes: Axes = figure.add_axes(place, **settings)
    axes.tick_params(labelsize=7.5, length=2.5)
    axes.grid(True, color="#E6E6E6", linewidth=0.5)
    axes.set_axisbelow(True)
    for side in ("top", "right"):
        axes.spines[side].set_visible(False)
    return axes


def paper(figure: Figure) -> Axes:
    """Return axes over the whole sheet in millimetres, without ticks: what is drawn there has its true size."""
    width, height = (25.4 * side for side in figure.get_size_inches())
    axes: Axes = figure.add_axes((0.0, 0.0, 1.0, 1.0))
    axes.set_xlim(0.0, width)
    axes.set_ylim(0.0, height)
    axes.axis("off")
    return axes


def text_width(text: str, size: float) -> float:
    """Return an upper estimate of the width of a line of text [mm] at a font size [pt] (DejaVu Sans digits)."""
    narrow = sum(text.count(sign) for sign in ".,| ")
    return (0.66 * (len(text) - narrow) + 0.36 * narrow) * size * MM_PER_POINT


def spread(wanted: list[float], gap: float, low: float, high: float) -> list[float]:
    """Return places near the wanted ones (sorted) that are at least `gap` apart, between low and high if they fit.

    Crowded neighbours share the least total movement: runs that touch are merged and centred on their mean.

    >>> spread([0.0, 1.0, 5.0], 2.0, -9.0, 9.0)
    [-0.5, 1.5, 5.0]
    """
    runs: list[list[float]] = []  # each: sum of (wanted − offset in run), number of members
    for place in wanted:
        runs.append([place, 1.0])
        while len(runs) > 1:
            (sum_a, n_a), (sum_b, n_b) = runs[-2], runs[-1]
            start_a, start_b = _start(sum_a, n_a, gap, low, high), _start(sum_b, n_b, gap, low, high)
            if start_a + n_a * gap <= start_b:
                break
            runs[-2:] = [[sum_a + sum_b - n_b * n_a * gap, n_a + n_b]]
    places: list[float] = []
    for total, number in runs:
        first = _start(total, number, gap, low, high)
        places += [first + k * gap for k in range(int(number))]
    return places


def _start(total: float, number: float, gap: float, low: float, high: float) -> float:
    return max(low, min(total / number, high - (number - 1) * gap))


def svg(figure: Figure) -> bytes:
    """Return the figure as SVG; the same figure gives the same bytes (no date, fixed names, text as outlines)."""
    return _saved(figure, "svg", {"Date": None, "Creator": "rigdesign"})


def png(figure: Figure) -> bytes:
    """Return the figure as PNG at 150 dots per inch; the same figure gives the same bytes."""
    return _saved(figure, "png", {"Software": "rigdesign"})


@styled
def _saved(figure: Figure, form: str, metadata: dict[str, Any]) -> bytes:
    buffer = io.BytesIO()
    with warnings.catch_warnings():
        # a title in a script that the fonts lack shows boxes, as everywhere; that is no message for the terminal
        warnings.filterwarnings("ignore", message=r"Glyph \d+ .* missing from font")
        figure.savefig(buffer, format=form, metadata=metadata, dpi=150)
    return buffer.getvalue()
